"""The grammar of species and equations, by recursive descent over pieces that know their place.

    equation  = side arrow side
    arrow     = "->" | "-->" | "→" | "⟶" | "⇌" | "<=>" | " = "
    side      = term { " + " term }
    term      = [ coefficient ] species
    species   = ( declared-name | formula ) [ state ]

A declared name that fills a whole term wins over any other reading, so names may hold digits, commas, hyphens,
brackets and single blanks. A coefficient stands before a blank, or directly before a formula (``2H2O``).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from fractions import Fraction
from typing import NoReturn

from routeheat.chem.elements import elements
from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.reaction import Reaction, Term
from routeheat.chem.route import Declaration
from routeheat.chem.species import Species
from routeheat.errors import Fault, FormulaError
from routeheat.notation.guesses import Guesses
from routeheat.notation.names import ARROW, one_spaced, split_state, state_of_name
from routeheat.notation.quantity import read_number
from routeheat.notation.tokens import Piece, Trouble

MOST_TERMS = 60
"""Species on one side of an equation; more is refused."""
LONGEST_SPECIES = 250
"""Characters of a species with its state."""
LONGEST_EQUATION = 3500
"""Characters of an equation as it is written again."""
FORMULA_OR_NAME = "type a formula like C6H5NO2, or a declared name"
"""The repair of a formula that says nothing better."""
LONGEST_COEFFICIENT = 15
"""Characters of a decimal coefficient, or of either number of a fraction."""

_REVERSIBLE = ("<=>", "⇌")
_NO_ARROW = re.compile(r"<->|<-|=>|⇄|⇋|←|↔|⇒|=|-\s+>|—>|>")
_PLUS = re.compile(r"(?:^|\s)\+(?=\s|$)")
_FRACTIONS = {"½": Fraction(1, 2), "⅓": Fraction(1, 3), "⅔": Fraction(2, 3), "¼": Fraction(1, 4), "¾": Fraction(3, 4)}
_COEFFICIENT = re.compile(r"(?P<number>[0-9]+/[0-9]+|[0-9]+(?:\.[0-9]+)?)?(?P<half>[½⅓⅔¼¾])?(?P<blank>\s*)")
_DOUBLE = re.compile(r"(?P<whole>[0-9]+)\s+(?P<part>[0-9]+(?:/[0-9]+)?)\s|(?P<times>[0-9./]+)\s?[*·×]\s?(?=[A-Z\[(])")
_GLUED = re.compile(r"(?<=\))\s?\+\s?(?=[A-Z0-9½(\[])")


class SpeciesReader:
    """Reads species and equations with the names a sheet declares."""

    def __init__(self, declared: Mapping[str, Declaration], guesses: Guesses | None = None) -> None:
        self.declared = declared
        self.guesses = guesses or Guesses()
        self.notices: list[Fault] = []
        """How doubtful things were read; the caller takes them."""
        self.places: dict[Species, Piece] = {}
        """Where each species was read first; the caller empties it before an entry."""
        self._by_formula: dict[str, list[Declaration]] = {}
        for declaration in declared.values():
            if declaration.species.formula is not None:
                self._by_formula.setdefault(declaration.species.formula.text, []).append(declaration)
        self._formulas: dict[str, Formula] = {}
        self._noticed: set[str] = set()

    # equation ---------------------------------------------------------------------------------------------------

    def equation(self, piece: Piece) -> Reaction:
        """The reaction typed in ``piece``; raises :class:`Trouble` at the first thing that is wrong."""
        arrows = list(ARROW.finditer(piece.text))
        if not arrows:
            other = _NO_ARROW.search(piece.text)
            if other is not None:
                hint = "write ->, or = between blanks" if other[0] == "=" else "write ->"
                piece.refuse("this is not an arrow that is read here", hint, other.start(), other.end())
            piece.refuse("an arrow is missing", "like C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)")
        if len(arrows) > 1:
            second = arrows[1]
            piece.refuse("a second arrow", "one reaction a row", second.start(), second.end())
        arrow = arrows[0]
        left = self._side(piece.part(0, arrow.start()), "before")
        right = self._side(piece.part(arrow.end()), "behind")
        reaction = Reaction(left, right, arrow[0] in _REVERSIBLE)
        if len(reaction.text) > LONGEST_EQUATION:
            piece.refuse("this equation is too long when it is written out", "split it into two rows")
        return reaction

    def _side(self, piece: Piece, where: str) -> tuple[Term, ...]:
        if not piece.text.strip():
            piece.refuse(f"nothing stands {where} the arrow", "both sides of a reaction are typed")
        terms: list[Term] = []
        begin = 0
        for plus in [*_PLUS.finditer(piece.text), None]:
            part = piece.part(begin, plus.start() if plus else None).strip()
            if part.text in ("", "+"):
                at = plus.end() - 1 if plus else max(begin - 1, 0)
                piece.refuse("a species is missing beside this +", "a + stands between two species", at, at + 1)
            terms.append(self.term(part))
            if len(terms) > MOST_TERMS:
                part.refuse(f"more than {MOST_TERMS} species on one side", "split the reaction into two rows")
            begin = plus.end() if plus else begin
        return tuple(terms)

    def term(self, piece: Piece) -> Term:
        """A coefficient (1 when none is typed) and a species."""
        whole = self._declared(piece)
        if whole is not None:
            return Fraction(1), whole
        match = _COEFFICIENT.match(piece.text)
        assert match is not None  # every part of the rule may be empty
        if match["number"] is None and match["half"] is None:
            if re.match(r"\.[0-9]", piece.text):
                piece.refuse("a decimal needs a leading digit", f"write 0{piece.text[:30]}")
            return Fraction(1), self.species(piece)
        value = self._coefficient(piece, match)
        rest = piece.part(match.end())
        if not rest.text:
            piece.refuse("a species is missing behind the coefficient", "like 2 H2O(l)")
        self._single_coefficient(piece)
        name = self._declared(rest)
        if not match["blank"] and name is not None and (name.formula is None or name.formula.text != name.name):
            typed = piece.text[: match.end()]
            piece.refuse("a coefficient before a declared name needs a blank", f"write {typed} {rest.text}")
        if not match["blank"] and re.match(r"[A-Z(\[]", rest.text) is None:
            self._refuse_unknown(piece)
        return value, self.species(rest)

    def _single_coefficient(self, piece: Piece) -> None:
        double = _DOUBLE.match(piece.text)
        if double is None:
            return
        if double["times"]:
            hint = f"write {double['times']} {piece.text[double.end() :]}"
            piece.refuse("a coefficient is followed by a blank only", hint, 0, double.end())
        hint = "write one number"
        over, _, under = double["part"].partition("/")
        if under and int(under[:9]):
            hint = f"write {Fraction(int(double['whole'][:9])) + Fraction(int(over[:9]), int(under[:9]))}"
        piece.refuse("two coefficients before one species", hint, 0, double.end() - 1)

    def _coefficient(self, piece: Piece, match: re.Match[str]) -> Fraction:
        value = Fraction(0)
        number = match["number"]
        if number is not None:
            over, _, under = number.partition("/")
            if max(len(over), len(under)) > LONGEST_COEFFICIENT:
                piece.refuse(f"a coefficient of more than {LONGEST_COEFFICIENT} characters", "round it", 0, len(number))
            if under and int(under) == 0:
                piece.refuse("a coefficient divided by zero", "is the fraction right?", 0, len(number))
            value = Fraction(int(over), int(under)) if under else read_number(piece.part(0, len(number)))[0]
        if match["half"] is not None:
            if number is not None and ("/" in number or "." in number):
                piece.refuse("two fractions in one coefficient", "write one number", 0, match.end("half"))
            value += _FRACTIONS[match["half"]]
        if value == 0:
            piece.refuse("a coefficient of zero", "leave the species out", 0, match.end())
        return value

    # species ----------------------------------------------------------------------------------------------------

    def species(self, piece: Piece) -> Species:
        """One species with its state, declared or a formula; raises :class:`Trouble`."""
        found = self._declared(piece) or self._formula_species(piece)
        self.places.setdefault(found, piece)
        return found

    def is_declared_term(self, piece: Piece) -> bool:
        """True when the whole piece is a declared name, with or without a state."""
        return self._declared(piece) is not None

    def member(self, piece: Piece, taking_part: Iterable[Species]) -> Species:
        """One of the species that take part: a name without its state means the only one with that name."""
        found = self.species(piece)
        listed = tuple(taking_part)
        if found in listed or one_spaced(piece.text) != found.name:
            return found
        same = [species for species in dict.fromkeys(listed) if species.name == found.name]
        return same[0] if len(same) == 1 else found

    def as_declared(self, reaction: Reaction) -> Reaction:
        """The reaction with the declared name of every species whose formula one name was declared for."""

        def named(terms: tuple[Term, ...]) -> tuple[Term, ...]:
            return tuple((number, self._named(species)) for number, species in terms)

        return Reaction(named(reaction.reactants), named(reaction.products), reaction.reversible)

    def _named(self, species: Species) -> Species:
        if species.declared or species.formula is None:
            return species
        candidates = self._by_formula.get(species.formula.text, [])
        return _in_state(candidates[0].species, species.phase, species.form) if len(candidates) == 1 else species

    def _formula_species(self, piece: Piece) -> Species:
        if len(piece.text) > LONGEST_SPECIES:
            piece.refuse(f"a species of more than {LONGEST_SPECIES} characters", "declare a short name for it")
        body, phase, form = split_state(piece)
        formula = self._formula(body, piece)
        candidates = self._by_formula.get(formula.text, [])
        if len(candidates) > 1:
            names = " or ".join(declaration.species.name for declaration in candidates[:5])
            body.refuse(f"{formula.text} is the formula of {names}: isomers are never merged", "write the name")
        if candidates:
            species = candidates[0].species
            if species.name not in self._noticed:
                self._noticed.add(species.name)
                message = f"{formula.text} read as {species.name}, declared with this formula"
                self.notices.append(body.fault(message, notice=True))
            return _in_state(species, phase, form)
        return self._element_form(Species(formula.text, phase, form, formula), piece)

    def _declared(self, piece: Piece) -> Species | None:
        text = one_spaced(piece.text)
        declaration = self.declared.get(text)
        if declaration is not None:
            self.places.setdefault(declaration.species, piece)
            return declaration.species
        state = state_of_name(text)
        declaration = None if state is None else self.declared.get(state[0])
        if state is None or declaration is None:
            return None
        found = _in_state(declaration.species, state[1], state[2])
        self.places.setdefault(found, piece)
        return found

    def _formula(self, body: Piece, piece: Piece) -> Formula:
        known = self._formulas.get(body.text)
        if known is None:
            try:
                known = read_formula(body.text)
            except FormulaError as problem:
                self._refuse_formula(problem, body, piece)
            self._formulas[body.text] = known
        return known

    def _refuse_formula(self, problem: FormulaError, body: Piece, piece: Piece) -> NoReturn:
        glued = _GLUED.search(piece.text)
        if glued is not None:
            hint = f"write {piece.text[: glued.start()]} + {piece.text[glued.end() :]}"
            piece.refuse("species are separated by + between blanks", hint, glued.start(), glued.end())
        if re.search(r"\s(?:dH|ΔH|ΔrH|yield|source|T|note)\s", piece.text):
            piece.refuse("a key stands in the equation", "keys stand behind | or on their own indented lines")
        if body.text in ("e-", "e^-"):
            piece.refuse("electrons are no species here", "type a reaction between substances")
        unlike = re.search(r"[a-z]{3}|[,%/_]|^-", body.text) or any(c.isalpha() and not c.isascii() for c in body.text)
        if unlike and not problem.hint.startswith("write"):
            self._refuse_unknown(body)
        near = self.guesses.nearest(body.text, self.declared)
        hint = f"did you mean {near}?" if near else problem.hint or FORMULA_OR_NAME
        raise Trouble(body.fault(problem.message, hint, problem.start, max(problem.end, problem.start + 1))) from None

    def _refuse_unknown(self, piece: Piece) -> NoReturn:
        """Refuse a text that is neither a declared name nor like a formula."""
        shown = piece.text if len(piece.text) <= 40 else piece.text[:40] + "…"
        near = self.guesses.nearest(piece.text, self.declared)
        hint = f"did you mean {near}?" if near else "declare it under species, with its formula or ?"
        piece.refuse(f"{shown} is neither a declared name nor a formula", hint)

    def _element_form(self, species: Species, piece: Piece) -> Species:
        """A solid element without its form is read as its reference form, with a notice; phosphorus must say which."""
        formula = species.formula
        if species.phase not in ("s", "cr") or species.form or formula is None:
            return species
        if len(formula.counts) != 1 or formula.charge or formula.counts[0][0] not in elements():
            return species
        symbol = formula.counts[0][0]
        reference = elements()[symbol].reference_state
        name, _, state = reference.rstrip(")").partition("(")
        phase, _, form = state.partition(", ")
        if phase != "s" or reference == species.text:
            return species
        if symbol == "P":
            piece.refuse("which form of phosphorus?", "write P(s, white) or P(s, red)")
        if name == species.name:
            self.notices.append(piece.fault(f"{species.text} read as {reference}", notice=True))
            return Species(species.name, "s", form, formula)
        message = f"{species.text} is another species than {reference}, from which formation rows start"
        self.notices.append(piece.fault(message, f"write {reference} if that is meant", notice=True))
        return species


def _in_state(species: Species, phase: str, form: str) -> Species:
    """The declared species in the state typed in the equation; what is declared holds where nothing is typed."""
    if not phase or (phase, form) == (species.phase, species.form):
        return species
    return Species(species.name, phase, form, species.formula, True, species.molar_mass_typed)

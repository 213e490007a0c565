"""The grammar of species and equations, by recursive descent over pieces that know their place.

    equation  = side arrow side
    arrow     = "->" | "-->" | "→" | "⟶" | "⇌" | "<=>" | " = "
    side      = term { " + " term }
    term      = [ coefficient ] species
    species   = ( declared-name | formula ) [ state ]
    state     = "(" phase [ ", " form ] ")" | "(" form-of-an-element ")"

A declared name that fills a whole term wins over any other reading, so names may hold digits, commas, hyphens,
brackets and single spaces. A coefficient stands before a space, or directly before a formula (``2H2O``).
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from fractions import Fraction

from routeheat.chem.elements import elements
from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.reaction import Reaction, Term
from routeheat.chem.route import Declaration
from routeheat.chem.species import PHASES, Species
from routeheat.errors import Fault, FormulaError, nearest
from routeheat.notation.quantity import read_number
from routeheat.notation.tokens import Piece, Trouble

MOST_TERMS = 60
"""Species in one equation; more is refused."""
LONGEST_NAME = 120
"""Characters of a species with its state."""

_ARROW = re.compile(r"<=>|-->|->|→|⟶|⇌|(?<=\s)=(?=\s)")
_REVERSIBLE = ("<=>", "⇌")
_NO_ARROW = re.compile(r"<->|<-|=>|⇄|⇋|←|↔|⇒|=")
_PLUS = re.compile(r"\s\+\s")
_STATE = re.compile(r"\s?\(\s*(?P<phase>[a-z]+)\s*(?:,\s*(?P<form>[^()]*?)\s*)?\)$")
_HALVES = {"½": Fraction(1, 2), "⅓": Fraction(1, 3), "⅔": Fraction(2, 3), "¼": Fraction(1, 4), "¾": Fraction(3, 4)}
_COEFFICIENT = re.compile(r"(?P<number>[0-9]+/[0-9]+|[0-9]+(?:\.[0-9]+)?)?(?P<half>[½⅓⅔¼¾])?(?P<space>\s*)")
_ELEMENT_FORMS = {
    "graphite", "diamond", "rhombic", "monoclinic", "white", "red", "black", "grey", "gray",
}  # fmt: skip
"""Forms of elements that are typed without their phase: ``C(graphite)``."""


class SpeciesReader:
    """Reads species and equations with the names a sheet declares."""

    def __init__(self, declared: Mapping[str, Declaration]) -> None:
        self.declared = declared
        self.by_formula: dict[str, list[Declaration]] = {}
        for declaration in declared.values():
            if declaration.species.formula is not None:
                self.by_formula.setdefault(declaration.species.formula.text, []).append(declaration)
        self.notices: list[Fault] = []
        """How doubtful things were read; the caller takes them."""
        self._formulas: dict[str, Formula] = {}

    # equation ---------------------------------------------------------------------------------------------------

    def equation(self, piece: Piece) -> Reaction:
        """The reaction typed in ``piece``; raises :class:`Trouble` at the first thing that is wrong."""
        arrows = list(_ARROW.finditer(piece.text))
        if not arrows:
            other = _NO_ARROW.search(piece.text)
            if other is not None:
                piece.refuse("this is not an arrow that is read here", "write ->", other.start(), other.end())
            piece.refuse("an arrow is missing", "like A(l) + B(l) -> C(l)")
        if len(arrows) > 1:
            second = arrows[1]
            piece.refuse("a second arrow", "one reaction a row", second.start(), second.end())
        arrow = arrows[0]
        left = self._side(piece.part(0, arrow.start()), "before")
        right = self._side(piece.part(arrow.end()), "behind")
        return Reaction(left, right, arrow[0] in _REVERSIBLE)

    def _side(self, piece: Piece, where: str) -> tuple[Term, ...]:
        if not piece.text.strip():
            piece.refuse(f"nothing stands {where} the arrow")
        terms: list[Term] = []
        begin = 0
        for plus in [*_PLUS.finditer(piece.text), None]:
            part = piece.part(begin, plus.start() if plus else None).strip()
            if not part.text or part.text == "+":
                part.refuse("a species is missing beside +")
            terms.append(self.term(part))
            if len(terms) > MOST_TERMS:
                part.refuse(f"more than {MOST_TERMS} species on one side")
            begin = plus.end() if plus else begin
        return tuple(terms)

    def term(self, piece: Piece) -> Term:
        """A coefficient (1 when none is typed) and a species."""
        whole = self._declared(piece)
        if whole is not None:
            return Fraction(1), whole
        match = _COEFFICIENT.match(piece.text)
        assert match is not None
        if match["number"] is None and match["half"] is None:
            return Fraction(1), self.species(piece)
        value = self._coefficient(piece, match)
        rest = piece.part(match.end())
        if not rest.text:
            piece.refuse("a species is missing behind the coefficient")
        if not match["space"] and self._declared(rest) is not None:
            piece.refuse(
                "a coefficient before a declared name needs a space", f"{piece.text[: match.end()]} {rest.text}"
            )
        return value, self.species(rest)

    def _coefficient(self, piece: Piece, match: re.Match[str]) -> Fraction:
        value = Fraction(0)
        number = match["number"]
        if number is not None:
            if len(number) > 16:
                piece.refuse("a coefficient of more than 16 characters", "", 0, len(number))
            over, _, under = number.partition("/")
            if under and int(under) == 0:
                piece.refuse("a coefficient over zero", "", 0, len(number))
            value = Fraction(int(over), int(under)) if under else read_number(piece.part(0, len(number)))[0]
        if match["half"] is not None:
            if number is not None and ("/" in number or "." in number):
                piece.refuse("two fractions in one coefficient", "", 0, match.end("half"))
            value += _HALVES[match["half"]]
        if value == 0:
            piece.refuse("a coefficient of zero", "leave the species out", 0, match.end())
        return value

    # species ----------------------------------------------------------------------------------------------------

    def species(self, piece: Piece) -> Species:
        """One species with its state, declared or a formula; raises :class:`Trouble`."""
        if len(piece.text) > LONGEST_NAME:
            piece.refuse(f"a species of more than {LONGEST_NAME} characters", "declare a shorter name for it")
        found = self._declared(piece)
        if found is not None:
            return found
        body, phase, form = split_state(piece)
        formula = self._formula(body, phase)
        candidates = self.by_formula.get(formula.text, [])
        if len(candidates) > 1:
            names = " or ".join(declaration.species.name for declaration in candidates)
            body.refuse(f"{formula.text} is the formula of {names}: isomers are never merged", "write the name")
        if candidates:
            species = candidates[0].species
            self.notices.append(
                body.fault(f"{formula.text} read as {species.name}, declared with this formula", notice=True)
            )
            return _in_state(species, phase, form)
        return self._element_form(Species(formula.text, phase, form, formula), piece)

    def _declared(self, piece: Piece) -> Species | None:
        declaration = self.declared.get(piece.text)
        if declaration is not None:
            return declaration.species
        if not piece.text.endswith(")"):
            return None
        match = _STATE.search(piece.text)
        if match is None or match["phase"] not in PHASES:
            return None
        declaration = self.declared.get(piece.text[: match.start()])
        return None if declaration is None else _in_state(declaration.species, match["phase"], match["form"] or "")

    def _formula(self, piece: Piece, phase: str) -> Formula:
        known = self._formulas.get(piece.text)
        if known is None:
            try:
                known = read_formula(piece.text)
            except FormulaError as problem:
                near = nearest(piece.text, self.declared)
                hint = f"did you mean {near}?" if near else problem.hint
                if re.search(r"\s{2,}|\s(?:dH|yield|source|T)\s", piece.text):
                    hint = "keys stand behind | or on their own indented lines"
                elif "+" in piece.text[:-1] and not phase and not near:
                    hint = "species are separated by + between spaces"
                raise Trouble(piece.fault(problem.message, hint, problem.start, max(problem.end, problem.start + 1))) from None
            self._formulas[piece.text] = known
        return known

    def _element_form(self, species: Species, piece: Piece) -> Species:
        """``C(s)`` is read as the reference form, with a notice; phosphorus must say which."""
        formula = species.formula
        if species.phase != "s" or species.form or formula is None or len(formula.counts) != 1 or formula.charge:
            return species
        symbol, count = formula.counts[0]
        element = elements().get(symbol)
        if element is None or count != 1 or "(s, " not in element.reference_state:
            return species
        form = element.reference_state.partition("(s, ")[2].rstrip(")")
        if symbol == "P":
            piece.refuse("which form of phosphorus?", "write P(s, white) or P(s, red)")
        self.notices.append(piece.fault(f"{species.text} read as {symbol}(s, {form})", notice=True))
        return Species(species.name, "s", form, formula)


def split_state(piece: Piece) -> tuple[Piece, str, str]:
    """What stands before the state, the phase and the form; phase and form are empty when none is typed."""
    match = re.search(r"\s?\(\s*(?P<word>[A-Za-z]+)\s*(?:,\s*(?P<form>[^()]*?)\s*)?\)$", piece.text)
    if match is None or match.start() == 0:
        return piece, "", ""
    word, form = match["word"], match["form"] or ""
    body = piece.part(0, match.start())
    if word in PHASES:
        if len(form) > 40 or any(char in '"|#+' for char in form):
            piece.refuse("this form of a state cannot be read", "like (aq, 65 %)", match.start("form"), match.end("form"))
        return body, word, re.sub(r"\s+", " ", form)
    if word in _ELEMENT_FORMS and not form:
        return body, "s", "grey" if word == "gray" else word
    if word.islower() and not _is_element_group(word):
        hint = {"liq": "(l)", "gas": "(g)", "solid": "(s)", "vap": "(g)", "sol": "(sln)", "soln": "(sln)"}.get(word)
        near = hint or ", ".join(f"({symbol})" for symbol in PHASES)
        piece.refuse(f"({word}) is not a state symbol", f"write {near}", match.start(), match.end())
    return piece, "", ""


def _is_element_group(word: str) -> bool:
    return False if word.islower() else word in elements()


def _in_state(species: Species, phase: str, form: str) -> Species:
    """The declared species in the state typed in the equation; what is declared holds where nothing is typed."""
    if not phase or (phase == species.phase and form in ("", species.form)):
        return species
    return Species(species.name, phase, form, species.formula, True, species.molar_mass_typed)


def read_name(piece: Piece) -> str:
    """A name fit to be declared; raises :class:`Trouble` saying what it must not hold."""
    name = piece.text
    if not name:
        piece.refuse("a name is missing")
    if len(name) > 80:
        piece.refuse("a name of more than 80 characters")
    if re.match(r"[0-9/.½]+\s", name):
        piece.refuse("a name cannot start with a number and a space", "it would be read as a coefficient")
    for bad, word in ((" + ", "+ between spaces"), (", ", "a comma before a space"), ("  ", "two spaces")):
        if bad in name:
            piece.refuse(f"a name cannot hold {word}")
    if _ARROW.search(name) or "[" == name[0]:
        piece.refuse("a name cannot hold an arrow or start with [")
    for char in name:
        if not char.isprintable():
            piece.refuse(f"an invisible character U+{ord(char):04X} in a name", "delete it")
    return name

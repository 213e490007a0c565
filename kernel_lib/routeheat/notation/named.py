"""Rows that are typed as a name and species: a formation, a combustion, a phase change, a solution, a neutralisation.

    named = ("fusion" | "vaporisation" | "sublimation" | "formation") "of" species
          | "combustion of" species "to" species { ", " species }
          | "solution of" species ( "in" [ number ] water | "to" species { ", " species } )
          | "dilution of" species "to" species
          | "neutralisation of" species "with" species "to" species { ", " species }

``solution of HCl(g) in 10 H2O(l)`` makes HCl(aq, 10 H2O), ``in H2O(l)`` makes HCl(aq), which is infinite dilution: the
water is solvent and takes no part.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace
from itertools import islice

from routeheat.chem.balance import PHASE_CHANGES, combustion, formation, phase_change
from routeheat.chem.dissolving import dilution, neutralisation, solution
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.names import ARROW
from routeheat.notation.tokens import Piece, split_list

MOST_PRODUCTS = 12
"""Products of a named row; more is refused."""

Named = tuple[Reaction, str, Species]
"""The reaction, its kind and its species."""

_NAMED = re.compile(
    r"(formation|combustion|fusion|vapori[sz]ation|sublimation|melting|evaporation|boiling|solution|dissolution"
    r"|dilution|neutrali[sz]ation)\s+of\s+",
    re.IGNORECASE,
)
_WITHOUT_OF = re.compile(
    r"(formation|combustion|fusion|vapori[sz]ation|sublimation|dilution|neutrali[sz]ation)\s+(?!of\b)\S", re.IGNORECASE
)
_EQUATION_ONLY = re.compile(r"(hydration|crystalli[sz]ation|mixing)\s+of\s", re.IGNORECASE)
_SYNONYMS = {"vaporization": "vaporisation", "evaporation": "vaporisation", "boiling": "vaporisation",
             "melting": "fusion", "dissolution": "solution", "neutralization": "neutralisation"}  # fmt: skip
_WHICH_PRODUCTS = (
    "like combustion of C6H6(l) to CO2(g), H2O(l): with H2O(l) or H2O(g), HCl(aq) or HCl(g), SO2(g) or H2SO4(aq) "
    "the heat differs by tens of kJ/mol"
)
_IN_WHAT = "like solution of HCl(g) in 10 H2O(l), solution of NaCl(s) to Na^+(aq), Cl^-(aq)"
_TO_WHAT = "like dilution of HCl(aq, 10 H2O) to HCl(aq)"
_TO_WHICH_SALT = (
    "like neutralisation of HCl(aq) with NaOH(aq) to NaCl(aq), H2O(l): a salt in solution or (s), and H2O(l)"
)
_SOLVENT = re.compile(r"(?:(?P<number>[0-9]+(?:\.[0-9]+)?)\s+(?:mol\s+)?)?(?P<what>\S.*)")


def read_named(body: Piece, reader: SpeciesReader) -> Named | None:
    """The reaction, its kind and its species; ``None`` when ``body`` is no named row.

    Raises :class:`~routeheat.notation.tokens.Trouble`.
    """
    if ARROW.search(body.text):
        return None
    named = _NAMED.match(body.text)
    if named is None:
        _refuse_near_misses(body)
        return None
    kind = _SYNONYMS.get(named[1].lower(), named[1].lower())
    rest = body.part(named.end()).strip()
    if not rest.text:
        body.refuse(f"a species is missing behind {named[0].strip()}", f"like {kind} of H2O(l)")
    if kind in _OF_SEVERAL:
        return _OF_SEVERAL[kind](rest, reader)
    return _of_one(kind, rest, reader)


def _of_one(kind: str, rest: Piece, reader: SpeciesReader) -> Named:
    subject = reader.species(rest)
    try:
        if kind == "formation":
            if not subject.phase:
                rest.refuse("the phase is missing", _phases_of(subject))
            return reader.as_declared(formation(subject)), kind, subject
        reaction = phase_change(kind, subject)
        return reaction, kind, reaction.species[0]
    except ValueError as problem:
        change = PHASE_CHANGES.get(kind)
        wrong_phase = change is not None and subject.phase != change[0]
        hint = "delete this row" if "needs no row" in str(problem) else "like H2(g) + 1/2 O2(g) -> H2O(l)"
        rest.refuse(str(problem), f"write {kind} of {subject.name}({change[0]})" if change and wrong_phase else hint)


def _phases_of(species: Species) -> str:
    if species.formula is not None and species.formula.charge:
        return f"like {species.name}(aq)"
    return f"like {species.name}(l), {species.name}(g) or {species.name}(s)"


def _refuse_near_misses(body: Piece) -> None:
    """A name without ``of``, or a change that is typed as an equation."""
    without = _WITHOUT_OF.match(body.text)
    if without is not None:
        word = without[1]
        body.refuse(f"of is missing behind {word}", f"write {word} of {body.text[len(word) :].strip()}", 0, len(word))
    equation = _EQUATION_ONLY.match(body.text)
    if equation is not None:
        hint = "like NaCl(s) -> NaCl(aq)"
        body.refuse(f"a {equation[1].lower()} is typed as an equation", hint, 0, equation.end(1))


def _combustion(rest: Piece, reader: SpeciesReader) -> Named:
    burnt, listed = _split(rest, "to", reader, "the products of the combustion are missing", _WHICH_PRODUCTS)
    subject = _with_phase(burnt, reader)
    products = _products(listed, reader, "a combustion")
    try:
        reaction = combustion(subject, products)
    except ValueError as problem:
        hint = "name every product, once, that holds an element of the compound"
        rest.refuse(str(problem), _WHICH_PRODUCTS if str(problem).startswith("no product") else hint)
    return reader.as_declared(reaction), "combustion", subject


def _solution(rest: Piece, reader: SpeciesReader) -> Named:
    pair = next(_splits(rest, "to", reader), None)
    if pair is not None:
        subject = _with_phase(pair[0], reader)
        products = _products(pair[1], reader, "a solution")
    else:
        dissolved, solvent = _split(rest, "in", reader, "what forms is missing behind the solution", _IN_WHAT)
        subject = _with_phase(dissolved, reader)
        products = [replace(subject, phase="aq", form=_water(solvent, reader))]
    try:
        return solution(subject, products), "solution", subject
    except ValueError as problem:
        rest.refuse(str(problem), _IN_WHAT)


def _water(solvent: Piece, reader: SpeciesReader) -> str:
    """The form of a solution in that much water; empty for infinite dilution."""
    match = _SOLVENT.fullmatch(solvent.text)
    assert match is not None  # the piece is not empty
    what = solvent.part(match.start("what"))
    if what.text.lower() != "water":
        species = reader.species(what)
        if species.formula is None or species.formula.composition != {"H": 2, "O": 1} or species.formula.charge:
            hint = f"say what forms, like solution of X(s) to X(l, in {species.name[:20]})"
            what.refuse("only water is a solvent here", hint)
        if species.phase not in ("", "l"):
            what.refuse(f"water dissolves as (l), not as {species.state}", "write H2O(l)")
    return f"{match['number']} H2O" if match["number"] else ""


def _dilution(rest: Piece, reader: SpeciesReader) -> Named:
    before, after = _split(rest, "to", reader, "the diluted solution is missing", _TO_WHAT)
    start, end = _with_phase(before, reader), _with_phase(after, reader)
    try:
        return dilution(start, end), "dilution", start
    except ValueError as problem:
        rest.refuse(str(problem), _TO_WHAT)


def _neutralisation(rest: Piece, reader: SpeciesReader) -> Named:
    used, listed = _split(rest, "to", reader, "the products of the neutralisation are missing", _TO_WHICH_SALT)
    one, other = _split(used, "with", reader, "with is missing between the two", _TO_WHICH_SALT)
    first, second = _with_phase(one, reader), _with_phase(other, reader)
    products = _products(listed, reader, "a neutralisation")
    try:
        return neutralisation(first, second, products), "neutralisation", first
    except ValueError as problem:
        rest.refuse(str(problem), _TO_WHICH_SALT)


_OF_SEVERAL: dict[str, Callable[[Piece, SpeciesReader], Named]] = {
    "combustion": _combustion, "solution": _solution, "dilution": _dilution, "neutralisation": _neutralisation,
}  # fmt: skip


def _with_phase(piece: Piece, reader: SpeciesReader) -> Species:
    species = reader.species(piece)
    if not species.phase:
        piece.refuse(f"the phase of {species.name} is missing", _phases_of(species))
    return species


def _products(listed: Piece, reader: SpeciesReader, what: str) -> Sequence[Species]:
    """Species separated by commas, each with its phase."""
    found: list[tuple[Piece, Species]] = []
    for part in split_list(listed):
        if len(found) == MOST_PRODUCTS:
            part.refuse(f"more than {MOST_PRODUCTS} products of {what}", "leave out what does not form")
        if re.search(r"\s(?:\+|and)\s", part.text) and not reader.is_declared_term(part):
            part.refuse(f"the products of {what} are separated by commas", "like to CO2(g), H2O(l)")
        if not part.text:
            listed.refuse("a product is missing beside a comma", "like to CO2(g), H2O(l)")
        found.append((part, reader.species(part)))
    for piece, item in found:
        if not item.phase:
            piece.refuse(f"the phase of {item.name} is missing", _phases_of(item))
    return [item for _, item in found]


def _split(rest: Piece, word: str, reader: SpeciesReader, missing: str, hint: str) -> tuple[Piece, Piece]:
    """The two sides of ``word``; refuses a text without it, and one that has nothing on a side."""
    pair = next(_splits(rest, word, reader), None)
    if pair is None or not pair[0].text or not pair[1].text:
        rest.refuse(missing, hint)
    return pair


def _splits(rest: Piece, word: str, reader: SpeciesReader) -> Iterator[tuple[Piece, Piece]]:
    """Ways to split at a word between blanks: behind a declared name first, else at the first place."""
    places = islice(re.finditer(rf"\s{word}\s", rest.text), 20)
    pairs = [(rest.part(0, match.start()).strip(), rest.part(match.end()).strip()) for match in places]
    yield from (pair for pair in pairs if reader.is_declared_term(pair[0]))
    yield from pairs

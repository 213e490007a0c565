"""Rows that are typed as a name and a species: formation, combustion, fusion, vaporisation, sublimation."""

from __future__ import annotations

import re
from collections.abc import Iterator
from itertools import islice

from routeheat.chem.balance import PHASE_CHANGES, combustion, formation, phase_change
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.names import ARROW
from routeheat.notation.tokens import Piece, split_list

MOST_PRODUCTS = 12
"""Products of a combustion; more is refused."""

_NAMED = re.compile(
    r"(formation|combustion|fusion|vapori[sz]ation|sublimation|melting|evaporation|boiling)\s+of\s+", re.IGNORECASE
)
_WITHOUT_OF = re.compile(r"(formation|combustion|fusion|vapori[sz]ation|sublimation)\s+(?!of\b)\S", re.IGNORECASE)
_EQUATION_ONLY = re.compile(
    r"(dissolution|solution|dilution|neutrali[sz]ation|hydration|crystalli[sz]ation|mixing)\s+of\s", re.IGNORECASE
)
_SYNONYMS = {"vaporization": "vaporisation", "evaporation": "vaporisation", "boiling": "vaporisation",
             "melting": "fusion"}  # fmt: skip
_WHICH_PRODUCTS = (
    "like combustion of C6H6(l) to CO2(g), H2O(l): with H2O(l) or H2O(g), HCl(aq) or HCl(g), SO2(g) or H2SO4(aq) "
    "the heat differs by tens of kJ/mol"
)


def read_named(body: Piece, reader: SpeciesReader) -> tuple[Reaction, str, Species] | None:
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
    if kind == "combustion":
        return _combustion(rest, reader)
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
        if subject.formula is not None and subject.formula.charge:
            hint = "like Na(s) + H^+(aq) -> Na^+(aq) + 1/2 H2(g)"
        rest.refuse(str(problem), f"write {kind} of {subject.name}({change[0]})" if change and wrong_phase else hint)


def _phases_of(species: Species) -> str:
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


def _combustion(rest: Piece, reader: SpeciesReader) -> tuple[Reaction, str, Species]:
    split = next(_splits(rest, reader), None)
    if split is None:
        rest.refuse("the products of the combustion are missing", _WHICH_PRODUCTS)
    burnt, listed = split
    subject = reader.species(burnt)
    products: list[tuple[Piece, Species]] = []
    for part in split_list(listed):
        if len(products) == MOST_PRODUCTS:
            part.refuse(f"more than {MOST_PRODUCTS} products of a combustion", "leave out what does not form")
        if re.search(r"\s(?:\+|and)\s", part.text) and not reader.is_declared_term(part):
            part.refuse("the products of a combustion are separated by commas", "like to CO2(g), H2O(l)")
        if not part.text:
            listed.refuse("a product is missing beside a comma", "like to CO2(g), H2O(l)")
        products.append((part, reader.species(part)))
    for piece, item in ((burnt, subject), *products):
        if not item.phase:
            piece.refuse(f"the phase of {item.name} is missing", _phases_of(item))
    try:
        reaction = combustion(subject, [item for _, item in products])
    except ValueError as problem:
        rest.refuse(str(problem), "name every product, once, that holds an element of the compound")
    return reader.as_declared(reaction), "combustion", subject


def _splits(rest: Piece, reader: SpeciesReader) -> Iterator[tuple[Piece, Piece]]:
    """Ways to split at ``to`` between blanks: behind a declared name first, else at the first place."""
    places = islice(re.finditer(r"\sto\s", rest.text), 20)
    pairs = [(rest.part(0, match.start()).strip(), rest.part(match.end()).strip()) for match in places]
    yield from (pair for pair in pairs if reader.is_declared_term(pair[0]))
    yield from pairs

"""The species section: a name, a formula or ``?``, a state, and keys."""

from __future__ import annotations

import re
from itertools import islice
from typing import cast

from routeheat.chem.formula import read_formula
from routeheat.chem.measured import Measured
from routeheat.chem.route import Declaration
from routeheat.chem.species import Species
from routeheat.errors import FormulaError
from routeheat.notation.context import Context
from routeheat.notation.keys import find_key
from routeheat.notation.names import read_name, split_state
from routeheat.notation.rows import read_keys
from routeheat.notation.sections import Entry, Section, parts
from routeheat.notation.tokens import Piece, Trouble
from routeheat.units import GRAM_PER_MOL

_SMALL = {
    "H2O": "H2O", "HCl": "HCl", "H2": "H2", "O2": "O2", "N2": "N2", "CO": "CO", "CO2": "CO2", "NO": "NO", "NO2": "NO2",
    "NH3": "NH3", "HCN": "HCN", "HBr": "HBr", "HF": "HF", "SO2": "SO2", "H2S": "H2S", "NaCl": "NaCl",
}  # fmt: skip
"""Formulas that nobody should declare as the name of something else."""


def read_declarations(sections: list[Section], context: Context) -> dict[str, Declaration]:
    """Every declared species by name; faults and notices go to the context."""
    declared: dict[str, Declaration] = {}
    for section in sections:
        if section.word != "species":
            continue
        for entry in section.entries:
            try:
                declaration = _declaration(entry, context)
            except Trouble as trouble:
                context.faults.append(trouble.fault)
                continue
            name = declaration.species.name
            if name in declared:
                hint = f"first in line {declared[name].line}: keep one"
                context.faults.append(entry.head.fault(f"{name} is declared twice", hint, subject=name))
            else:
                declared[name] = declaration
    return declared


def _declaration(entry: Entry, context: Context) -> Declaration:
    first, *more = parts(entry)
    head, first_key = _split_keys(first)
    keyed = read_keys([*([first_key] if first_key else []), *more], context, "species")
    body, phase, form = split_state(head)
    name_piece, formula_piece = _split_name(body, head)
    formula = None
    if formula_piece.text not in ("", "?"):
        try:
            formula = read_formula(formula_piece.text, declared=True)
        except FormulaError as problem:
            end = max(problem.end, problem.start + 1)
            hint = problem.hint or "like C6H5NO2, or ? where it is not known"
            raise Trouble(formula_piece.fault(problem.message, hint, problem.start, end)) from None
    name = read_name(name_piece)
    if not formula_piece.text:
        message = f"no formula is typed for {name}: balances with it are not checked"
        hint = f"type its formula, or ? where it is not known: {name}  ?"
        context.faults.append(head.fault(message, hint, subject=name, notice=True))
    mass = cast("Measured | None", keyed.values.get("M"))
    if mass is not None and formula is not None:
        keyed.places["M"].refuse("the molar mass follows from the formula", "leave M out")
    if name in _SMALL and formula is not None and formula.hill != read_formula(_SMALL[name]).hill:
        message = f"{name} means {formula} everywhere in this sheet, not the formula {name}"
        context.faults.append(name_piece.fault(message, "another name is safer", subject=name, notice=True))
    species = Species(name, phase, form, formula, True, None if mass is None else mass.to(GRAM_PER_MOL))
    settings = keyed.settings("name", "cas")
    return Declaration(species, keyed.text("name"), keyed.text("cas"), settings, entry.head.line)


def _split_keys(piece: Piece) -> tuple[Piece, Piece | None]:
    """The name and formula of a declaration, and the key that follows them without a bar."""
    quoted = False
    # a name has few words, so a key comes early
    for match in islice(re.finditer(r'"|(?<=\s)[A-Za-z]+(?=\s)', piece.text), 30):
        if match[0] == '"':
            quoted = not quoted
        elif not quoted:
            key = find_key(match[0])
            if key is not None and "species" in key.where and _ends_declaration(piece.text[: match.start()]):
                return piece.part(0, match.start()).strip(), piece.part(match.start())
    return piece, None


def _ends_declaration(text: str) -> bool:
    """True when name and formula may be complete: two words or more, the last one ``?``, a formula or a state."""
    words = text.rsplit(None, 2)
    return len(words) > 1 and (words[-1] == "?" or words[-1].endswith(")") or _reads(words[-1]))


def _split_name(body: Piece, head: Piece) -> tuple[Piece, Piece]:
    """Name and formula: split at two blanks, else before the shortest end that reads as a formula."""
    text = body.text
    wide = text.rfind("  ")
    if wide >= 0:
        return body.part(0, wide).strip(), body.part(wide).strip()
    blanks = [match.start() for match in re.finditer(r"\s", text)]
    # a formula holds one blank at most, before a charge
    for blank in reversed(blanks[-2:]):
        candidate = text[blank + 1 :]
        if candidate == "?" or _reads(candidate):
            return body.part(0, blank).strip(), body.part(blank + 1).strip()
    if not blanks:
        if _reads(text) and len(text) > 1 and body != head:
            body.refuse("a name is missing before the formula", f"like WATER  {head.text}")
        return body, body.part(len(text))
    last = text[blanks[-1] + 1 :]
    if not last[:1].isupper() or "%" in last:
        body.refuse("no formula stands at the end of this line", f"type ? where it is not known: {text}  ?")
    return body.part(0, blanks[-1]).strip(), body.part(blanks[-1] + 1).strip()


def _reads(text: str) -> bool:
    try:
        read_formula(text, declared=True)
    except FormulaError:
        return False
    return True

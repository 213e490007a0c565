"""Rows and reactions made in code, through the same readers as a typed sheet."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from fractions import Fraction
from typing import Any, TypeVar

from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Declaration
from routeheat.chem.row import Heat, Row
from routeheat.errors import Fault, SheetFaults
from routeheat.notation.build import DEFAULT_K
from routeheat.notation.faults import render
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.rows import Context, read_row
from routeheat.notation.sections import Entry
from routeheat.notation.tokens import Piece, Trouble, plain_characters
from routeheat.units import KJ_PER_KG, KJ_PER_MOL, from_pint

_T = TypeVar("_T")


def read_reaction(text: str, *, species: Mapping[str, Declaration] | None = None) -> Reaction:
    """The reaction written in one line; ``species`` are a sheet's declared names (``sheet.species``).

    Raises :class:`~routeheat.errors.SheetFaults`. A reaction that does not balance is read: ask ``.balanced``.
    """
    reader = SpeciesReader(species or {})
    return _or_faults(text, lambda piece: reader.equation(piece))


def row(
    label: str,
    reaction: str,
    heat: Any = None,
    *,
    u: Any = None,
    k: float = 1,
    of: str | None = None,
    source: str = "",
    species: Mapping[str, Declaration] | None = None,
) -> Row:
    """A known row made in code.

    ``reaction`` is an equation, or ``formation of X``, ``combustion of X to …``, ``vaporisation of X``. ``heat`` is
    typed text (``"-45.94(18) kJ/mol"``), or a pint quantity in energy per amount or per mass; with a quantity, ``u`` is
    its uncertainty (a quantity of the same kind) with coverage factor ``k``, and ``of`` the species it is stated per.
    Exothermic is negative. Raises :class:`~routeheat.errors.SheetFaults`, :class:`~routeheat.errors.UnitError`.
    """
    text = f"[{label}] {reaction}" + (f" | dH {heat}" if isinstance(heat, str) else "")
    context = Context(SpeciesReader(species or {}), DEFAULT_K)
    piece = Piece(plain_characters(text), 1, 0)
    read = read_row(Entry(piece), context, "known")
    faults = [fault for fault in context.faults if fault.severity == "fault"]
    if faults or read is None:
        raise SheetFaults(faults, render(text, faults))
    made = replace(read[0], source=source, line=0)
    if heat is None or isinstance(heat, str):
        return made
    return replace(made, heat=_from_quantity(heat, u, k, of, made, context, text))


def _from_quantity(heat: Any, u: Any, k: float, of: str | None, made: Row, context: Context, text: str) -> Heat:
    per_mass = hasattr(heat, "check") and heat.check("[energy]/[mass]")
    unit, name = (KJ_PER_KG, "kJ/kg") if per_mass else (KJ_PER_MOL, "kJ/mol")
    value = from_pint(heat, unit, name)
    spread = None if u is None else Spread(abs(from_pint(u, unit, name)), Fraction(repr(float(k))), f"k = {k:g}")
    basis = None if of is None else _or_faults(of, context.reader.species)
    found = Heat(Measured(value, unit, spread), basis)
    try:
        found.factor(made.reaction)
    except ValueError as problem:
        fault = Fault(str(problem), 1, 1)
        raise SheetFaults([fault], render(text, [fault])) from None
    return found


def _or_faults(text: str, read: Callable[[Piece], _T]) -> _T:
    try:
        return read(Piece(plain_characters(text), 1, 0).strip())
    except Trouble as trouble:
        raise SheetFaults([trouble.fault], render(text, [trouble.fault])) from None

"""Rows and reactions made in code, through the same readers as a typed sheet."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from fractions import Fraction
from typing import Any, TypeVar

from routeheat.chem.measured import Measured, Spread, decimal_text
from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Declaration
from routeheat.chem.row import Heat, Row
from routeheat.errors import Fault, SheetFaults
from routeheat.notation.build import DEFAULT_K
from routeheat.notation.context import Context
from routeheat.notation.faults import render
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.pasted import as_typed, control_fault, plain_line
from routeheat.notation.routes import require_phases
from routeheat.notation.rows import read_row
from routeheat.notation.sections import LONGEST_LINE, Entry
from routeheat.notation.tokens import Piece, Trouble
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
    typed text (``"-45.94(18) kJ/mol"``, ``"dU -3225.63 kJ/mol"``, ``"Q -48.8 kJ for 3.12 g of X(s)"``), or a pint
    quantity in energy per amount or per mass; with a quantity, ``u`` is its uncertainty (a quantity of the same kind)
    with coverage factor ``k``, and ``of`` the species it is stated per. Exothermic is negative. Raises
    :class:`~routeheat.errors.SheetFaults`, :class:`~routeheat.errors.UnitError`.
    """
    text = f"[{label}] {reaction}"
    if isinstance(heat, str):
        text += f" | {heat}" if heat.split(" ")[0] in ("dU", "Q") else f" | dH {heat}"
    context = Context(SpeciesReader(species or {}), DEFAULT_K)
    read = read_row(Entry(_one_line(text)), context, "known")
    if read is not None:
        require_phases(read, context, "a known row")
    faults = [fault for fault in context.faults if fault.severity == "fault"]
    if faults or read is None:
        raise _refused(faults, text)
    made = replace(read.row, source=source, line=0)
    if heat is None or isinstance(heat, str):
        return made
    return replace(made, heat=_from_quantity(heat, u, k, of, made, context, text))


def _from_quantity(heat: Any, u: Any, k: float, of: str | None, made: Row, context: Context, text: str) -> Heat:
    per_mass = hasattr(heat, "check") and heat.check("[energy]/[mass]")
    unit, name = (KJ_PER_KG, "kJ/kg") if per_mass else (KJ_PER_MOL, "kJ/mol")
    value = from_pint(heat, unit, name)
    if per_mass and of is None:
        raise _refused([Fault("a heat per mass of what?", 1, 1, hint="name the species, like of='NB'")], text)
    if not 0 < k <= 10:
        raise _refused([Fault("a coverage factor is more than 0 and at most 10", 1, 1, hint="like k=2")], text)
    factor = Fraction(repr(float(k)))
    spread = None if u is None else Spread(abs(from_pint(u, unit, name)), factor, f"k = {decimal_text(factor)}")
    taking_part = made.reaction.species
    basis = None if of is None else _or_faults(of, lambda piece: context.reader.member(piece, taking_part))
    found = Heat(Measured(value, unit, spread), basis)
    try:
        found.factor(made.reaction)
    except ValueError as problem:
        raise _refused([Fault(str(problem), 1, 1)], text) from None
    return found


def _or_faults(text: str, read: Callable[[Piece], _T]) -> _T:
    try:
        return read(_one_line(text).strip())
    except Trouble as trouble:
        raise _refused([trouble.fault], text) from None


def _one_line(text: str) -> Piece:
    """The text as one readable line; raises :class:`~routeheat.errors.SheetFaults` when it cannot be one."""
    if len(text) > LONGEST_LINE:
        raise _refused([Fault(f"a text of more than {LONGEST_LINE:,} characters", 1, 1)], text)
    line = plain_line(text.replace("\n", " ").replace("\r", " "))
    if line.control is not None:
        fault = control_fault(text, 1, line.control)
        raise SheetFaults([fault], render(text, [fault]))
    return Piece(line.text, 1, 0)


def _refused(faults: list[Fault], text: str) -> SheetFaults:
    """The error with its faults in columns of the text as typed, which stands on one line."""
    typed = text.replace("\n", " ").replace("\r", " ")
    origin = plain_line(typed[:LONGEST_LINE]).origin
    moved = faults if origin is None else as_typed(faults, {1: origin})
    return SheetFaults(moved, render(typed, moved))

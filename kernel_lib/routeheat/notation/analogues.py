"""Heats taken from another row of the sheet: found once all rows are read."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from routeheat.chem.row import Row
from routeheat.notation.context import Context
from routeheat.notation.tokens import Piece


def with_analogue(row: Row, rows: Mapping[str, Row], context: Context) -> Row:
    """The row with the heat of the row that it is like; without a heat, and with a fault, when there is none to take.

    A heat is taken per mole of reaction as written, from a row whose own heat is a number that was typed for it.
    """
    if row.heat is None or not row.heat.analogue:
        return row
    place = context.analogues[row.label]
    source = rows.get(row.heat.analogue)
    if source is None:
        near = context.guesses.nearest(row.heat.analogue, rows)
        hint = f"did you mean {near}?" if near else "name a known row or a step of this sheet"
        return _without(row, f"no row of this sheet is called {row.heat.analogue}", hint, place, context)
    problem = _unfit(row, source)
    if problem:
        return _without(row, problem, "name a row with a measured heat, like dH -145 ± 8 kJ/mol", place, context)
    try:
        taken = source.datum
    except ValueError:  # the fault of that heat is already among the faults
        taken = None
    if taken is None:
        return replace(row, heat=None)
    return replace(row, heat=replace(row.heat, taken=taken))


def _unfit(row: Row, source: Row) -> str:
    if source.label == row.label:
        return "a row is not its own analogue"
    if source.heat is None:
        return f"{source.label} has no heat of its own to take"
    if source.heat.analogue:
        return f"{source.label} is itself only like {source.heat.analogue}"
    if source.heat.symbol:
        return f"the heat of {source.label} is the unknown {source.heat.symbol}"
    return ""


def _without(row: Row, message: str, hint: str, place: Piece, context: Context) -> Row:
    context.faults.append(place.fault(message, hint, subject=row.label))
    return replace(row, heat=None)

"""A heat at another temperature as a table and as JSON-safe content.

May import: :mod:`routeheat.present`.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from routeheat.present.numbers import coverage, number
from routeheat.present.table import Cell, Column, Reading, Table

if TYPE_CHECKING:
    from routeheat.hess.temperature import Corrected


def bound_words(bound: tuple[float, float] | None) -> str:
    """An interval of a correction in kJ/mol, in words."""
    if bound is None:
        return "an unknown amount"
    low, high = bound
    if math.isinf(high):
        return f"{number(low, 2)} kJ/mol or more"
    if math.isinf(low):
        return f"{number(high, 2)} kJ/mol or less"
    return f"something between {number(low, 2)} and {number(high, 2)} kJ/mol"


def table(item: Corrected) -> Table:
    """Species, then transitions, then the heats before and after."""
    lines: list[tuple[Cell, ...]] = []
    for part in item.parts:
        change: Cell = part.problem or part.warming
        lines.append((part.species.rich, part.coefficient, _kelvin(float(part.start), float(item.to)), change))
    for crossing in item.crossed:
        transition = crossing.transition
        lines.append(
            (
                f"{transition.low} → {transition.high}",
                crossing.coefficient,
                f"{number(float(transition.temperature), 2)} K",
                crossing.heat.reading,
            )
        )
    missing = Reading(None, None, item.k, words="no value")
    strong = len(lines)
    lines.append(("correction", None, "", missing if item.correction is None else item.correction.reading))
    if item.before is not None:
        lines.append(("heat before", None, "", item.before.reading))
    lines.append(
        (f"heat at {number(float(item.to), 2)} K", None, "", missing if item.heat is None else item.heat.reading)
    )
    columns = (
        Column("what", "species or transition"),
        Column("coefficient", "times", align="right"),
        Column("temperature", "temperature"),
        Column("change", "contribution", "kJ/mol", "right", 3),
    )
    title = f"{item.name} at {number(float(item.to), 2)} K: {item.reaction.text}"
    return Table(title, columns, tuple(lines), _notes(item), frozenset({strong, len(lines) - 1}))


def _kelvin(start: float, end: float) -> str:
    return f"{number(start, 2)} to {number(end, 2)} K"


def _notes(item: Corrected) -> tuple[str, ...]:
    notes = []
    if item.reason:
        notes.append(f"no value: {item.reason}")
    if item.bound is not None:
        notes.append(
            f"the correction would be {bound_words(item.bound)}, if every pure species without a heat "
            "capacity has between 0 and 40 J/(mol K) per atom"
        )
    notes += item.notes
    if item.heat is not None and item.heat.terms:
        notes.append(f"± is {coverage(item.k)}; exothermic is negative")
    return tuple(notes)


def to_dict(item: Corrected) -> dict[str, Any]:
    """JSON-safe content; an open end of the bound is ``None``."""

    def heat(of: Any) -> dict[str, Any] | None:
        if of is None:
            return None
        return {
            "value": None if of.unknowns else float(of.exact),
            "u": of.u,
            "complete": of.complete,
            "k": of.k,
            "text": of.text,
            "unit": "kJ/mol",
        }

    return {
        "name": item.name,
        "reaction": item.reaction.text,
        "temperature": {"value": float(item.to), "unit": "K"},
        "heat": heat(item.heat),
        "before": heat(item.before),
        "correction": heat(item.correction),
        "reason": item.reason,
        "parts": [
            {
                "species": part.species.text,
                "coefficient": str(part.coefficient),
                "start": float(part.start),
                "end": part.end.text,
                "warming": None if part.problem else part.warming,
                "problem": part.problem,
            }
            for part in item.parts
        ],
        "crossed": [crossing.text for crossing in item.crossed],
        "bound": None if item.bound is None else [None if math.isinf(end) else end for end in item.bound],
        "notes": list(_notes(item)),
    }

"""What to measure next, as tables, as a sentence and as JSON-safe content."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from routeheat.present.numbers import coverage, number, reading
from routeheat.present.table import Cell, Column, Reading, Table

if TYPE_CHECKING:
    from routeheat.process.next_measurement import Effect, NextMeasurement

_MEANING = (
    "attainable: the standard uncertainty to which the heat is known once it is measured, whatever was known "
    "before, per mole of reaction as written"
)
_CHANCE = (
    "chance: probability, as seen now, that the difference is at least twice its uncertainty after the measurement"
)


def three_digits(value: float) -> str:
    """A positive number with three significant digits, without an exponent: ``19.5``, ``0.123``, ``1250``."""
    if not value:
        return "0"
    return number(value, max(2 - math.floor(math.log10(value)), 0))


def helps(item: NextMeasurement, effect: Effect) -> bool:
    """True when a measurement leaves less uncertainty, or less that is not stated, than there is now."""
    return len(effect.unstated) < len(item.heat.not_stated) or effect.u_after < item.heat.u * (1 - 1e-9)


def sentence(item: NextMeasurement) -> str:
    """``Measuring C2 to u = 5 kJ/mol would shrink the difference from u = 19.5 to 16.1; no single measurement …``"""
    open_ones = item.heat.not_stated
    best = item.best
    unit = "" if item.unit == "kJ/mol" else f" {item.unit}"
    if open_ones:
        words = f"The uncertainty of {', '.join(open_ones)} is not stated, so the {item.short} has none"
        return words + (f"; measure {best.label} first." if best is not None else ".")
    now = three_digits(item.heat.u)
    if best is None:
        return f"No single measurement listed would shrink the {item.short} from u = {now}{unit}."
    return (
        f"Measuring {best.label} to u = {best.attainable:g} kJ/mol would shrink the {item.short} from u = {now} to "
        f"{three_digits(best.u_after)}{unit}; no single measurement brings it below {three_digits(item.least)}."
    )


def table(item: NextMeasurement) -> Table:
    """Measurements, the most helpful first."""
    columns = [
        Column("measure", "measure"),
        Column("equation", "equation"),
        Column("u_now", "u now", "kJ/mol", "right", 2),
        Column("attainable", "u attainable", "kJ/mol", "right", 2),
        Column("u_after", f"u of the {item.short} then", item.unit, "right", 2),
        Column("u_least", "at best", item.unit, "right", 2),
        Column("remark", "remark"),
    ]
    if item.decides:
        columns.insert(6, Column("chance", "chance of a clear difference", "%", "right", 0))
    return Table(
        f"What to measure next for the {item.name}",
        tuple(columns),
        tuple(_line(item, effect) for effect in item.effects),
        notes(item),
    )


def _line(item: NextMeasurement, effect: Effect) -> tuple[Cell, ...]:
    bound = bool(effect.unstated)

    def then(value: float) -> Cell:
        return f"at least {number(value, 2)}" if bound else value

    cells: list[Cell] = [
        effect.label, effect.equation, "not stated" if effect.u_now is None else effect.u_now, effect.attainable,
        then(effect.u_after), then(effect.u_least), effect.remark,
    ]  # fmt: skip
    if item.decides:
        cells.insert(6, None if effect.chance is None else 100 * effect.chance)
    return tuple(cells)


def notes(item: NextMeasurement) -> tuple[str, ...]:
    """The sentence, what the words mean, and what is left out."""
    found = [sentence(item), _MEANING]
    if item.decides:
        found.append(_CHANCE)
    if item.heat.not_stated:
        found.append(f"uncertainties are lower bounds: {', '.join(item.heat.not_stated)} not stated")
    if item.unlinked:
        found.append(
            f"no known row is linked to the formation of {', '.join(item.unlinked)}: measuring one of them "
            "alone changes nothing"
        )
    return (*found, *item.notes)


def contribution_table(item: NextMeasurement) -> Table:
    """Data in the heat with their share of its variance."""
    lines: list[tuple[Cell, ...]] = []
    for part in item.contributions:
        u: Cell = "not stated" if part.u is None else part.u
        lines.append(
            (
                part.datum.name,
                part.coefficient if part.coefficient.denominator <= 12 else float(part.coefficient),
                u,
                None if part.share is None else 100 * part.share,
                part.datum.source,
            )
        )
    heat = item.heat
    total = Reading(float(heat.exact), heat.u if heat.complete or heat.variance else None, item.k, not heat.complete)
    columns = (
        Column("datum", "datum"),
        Column("coefficient", "enters times", align="right", decimals=3),
        Column("u", "contributes u", item.unit, "right", 2),
        Column("share", "share of the variance", "%", "right", 1),
        Column("source", "source"),
    )
    found = (f"{item.name}: {reading(total)} {item.unit}", f"± is {coverage(item.k)}; u is a standard uncertainty")
    return Table(f"What the uncertainty of the {item.name} is made of", columns, tuple(lines), found)


def to_dict(item: NextMeasurement) -> dict[str, Any]:
    """JSON-safe content; exact numbers are texts."""
    return {
        "name": item.name,
        "unit": item.unit,
        "value": float(item.heat.exact),
        "u": item.heat.u,
        "complete": item.heat.complete,
        "sentence": sentence(item),
        "least": item.least,
        "effects": [
            {
                "label": effect.label,
                "equation": effect.equation,
                "u_now": effect.u_now,
                "attainable": effect.attainable,
                "u_after": effect.u_after,
                "u_least": effect.u_least,
                "chance": effect.chance,
                "unstated": list(effect.unstated),
                "remark": effect.remark,
            }
            for effect in item.effects
        ],
        "contributions": [
            {"datum": part.datum.name, "coefficient": str(part.coefficient), "u": part.u, "share": part.share}
            for part in item.contributions
        ],
        "notes": list(notes(item)),
    }

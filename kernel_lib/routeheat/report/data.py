"""Every number that a sheet states, with its kind and its source, as tables."""

from __future__ import annotations

from collections.abc import Iterator

from routeheat.chem.measured import Measured, decimal_text
from routeheat.chem.route import Route, Sheet
from routeheat.chem.row import Heat, Row
from routeheat.chem.step import Step
from routeheat.notation.keys import find_key
from routeheat.present.markup import Rich
from routeheat.present.numbers import MINUS
from routeheat.present.table import Cell, Column, Table

NOT_STATED = "not stated"
_FEEDS = {
    "conc": "concentration", "cp": "specific heat capacity", "T": "process temperature", "feed": "feed time",
    "Xac": "accumulation", "M": "molar mass",
}  # fmt: skip


def measured_text(item: Measured) -> str:
    """A typed quantity as printed: ``−285.830 ± 0.040 kJ/mol (k = 1)``."""
    return item.text.replace("degC", "°C").replace("-", MINUS, 1 if item.value < 0 else 0)


def heat_text(heat: Heat | None) -> str:
    """A typed heat as printed; ``not typed`` when there is none."""
    if heat is None:
        return "not typed"
    text = heat.typed.replace("degC", "°C")
    return text.replace("-", MINUS, 1) if heat.amount is not None and heat.amount.value < 0 else text


def data_tables(sheet: Sheet) -> tuple[Table, ...]:
    """Heats of known rows; data of the steps; data of the species. Empty tables are left out."""
    columns = (
        Column("datum", "datum"), Column("kind", "kind"), Column("equation", "equation"),
        Column("typed", "as typed"), Column("source", "source"),
    )  # fmt: skip
    steps = tuple(row for route in sheet.routes.values() for row in _route(route))
    found = (
        Table("Known heats", columns, tuple(row for item in sheet.known.values() for row in _known(item))),
        Table("Data of the steps", columns, steps, _used(sheet)),
        Table("Data of the species", (columns[0], columns[1], *columns[3:]), tuple(_species(sheet))),
    )
    return tuple(table for table in found if table.rows)


def _known(row: Row) -> Iterator[tuple[Cell, ...]]:
    kind = "reaction" if row.kind == "reaction" else row.kind
    mark = ", estimated" if row.estimated else ""
    source = row.source or NOT_STATED
    yield (row.label, f"heat of {kind}, known row{mark}", row.reaction.rich, heat_text(row.heat), source)
    yield from _settings(row.label, row.settings, row.reaction.rich, row.source)


def _route(route: Route) -> Iterator[tuple[Cell, ...]]:
    for step in route.steps:
        if step.label not in route.used:
            yield from _step(step)


def _step(step: Step) -> Iterator[tuple[Cell, ...]]:
    row = step.row
    source = row.source or NOT_STATED
    what = "side row" if step.side_of else "step"
    mark = ", estimated" if row.estimated else ""
    kind = f"heat of {what}, typed{mark}" if row.heat is not None else f"heat of {what}, not typed"
    yield (row.label, kind, row.reaction.rich, heat_text(row.heat), source)
    for name, value in (
        ("yield", step.yield_), ("process temperature", step.temperature), ("concentration", step.concentration),
        ("specific heat capacity", step.heat_capacity), ("amount of side row", step.amount),
    ):  # fmt: skip
        if value is not None:
            yield (row.label, name, "", measured_text(value), source)
    for species, equivalents in step.equivalents:
        yield (row.label, f"equivalents of {species}", "", decimal_text(equivalents), source)
    for recycle in step.recycles:
        yield (
            row.label,
            f"recycle of {recycle.species} from {recycle.source}",
            "",
            measured_text(recycle.part),
            source,
        )
    yield from _settings(row.label, row.settings, "", row.source)


def _settings(
    label: str, settings: tuple[tuple[str, object], ...], equation: Rich | str, source: str
) -> Iterator[tuple[Cell, ...]]:
    for name, value in settings:
        shown = measured_text(value) if isinstance(value, Measured) else "yes" if value is True else str(value)
        yield (label, _kind(name), equation if name == "shared" else "", shown, source or NOT_STATED)


def _kind(name: str) -> str:
    key = find_key(name)
    return _FEEDS.get(name, name if key is None else key.name)


def _species(sheet: Sheet) -> Iterator[tuple[Cell, ...]]:
    for item in sheet.species.values():
        if item.species.molar_mass_typed is not None:
            typed = f"{decimal_text(item.species.molar_mass_typed)} g/mol"
            yield (item.species.text, "molar mass", typed, NOT_STATED)
        for name, value in item.settings:
            shown = measured_text(value) if isinstance(value, Measured) else str(value)
            yield (item.species.text, _kind(name), shown, NOT_STATED)


def _used(sheet: Sheet) -> tuple[str, ...]:
    return tuple(
        f"route {route.name} uses {', '.join(route.used)} of another route: same label, same datum"
        for route in sheet.routes.values()
        if route.used
    )

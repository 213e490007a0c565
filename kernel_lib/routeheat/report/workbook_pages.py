"""What a whole sheet says, as tables for the pages of a workbook."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from routeheat.chem.route import Route, Sheet
from routeheat.chem.row import Row, Rows
from routeheat.errors import OutOfReach, RouteError
from routeheat.hess.combination import combine
from routeheat.hess.reach import Refusal
from routeheat.present.markup import plain
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process.cautions import FULL
from routeheat.process.compare import compare_routes
from routeheat.process.profile import Profile, profile

NOT_STATED = "not stated"


def pages(sheet: Sheet, per: Any = "mol") -> dict[str, tuple[Table, ...] | Rows]:
    """Tables by the name of their page, always the same six names in the same order; known heats are the rows.

    Raises :class:`~routeheat.errors.UnitError` when the basis ``per`` cannot be used.
    """
    profiles, refused = _profiles(sheet, per)
    routes = (*_comparisons(profiles, per), *refused)
    steps = tuple(item.table() for item in profiles)
    combinations = tuple(_combinations(sheet))
    return {
        "routes": routes or (_nothing("Routes", "no route is typed"),),
        "steps": steps or (_nothing("Steps", "no route can be run"),),
        "combinations": combinations or (_nothing("Combinations", "no target is typed"),),
        "known heats": sheet.known,
        "sources": (_sources(sheet), _heats(sheet)),
        "cautions": (_cautions(sheet, (*routes, *steps, *combinations)),),
    }


def _profiles(sheet: Sheet, per: Any) -> tuple[list[Profile], list[Table]]:
    """The profiles of the routes that can be run, and for the others a table that says why not."""
    profiles, refused = [], []
    for route in sheet.routes.values():
        try:
            profiles.append(profile(route, per=per))
        except RouteError as problem:
            refused.append(_nothing(f"Route {route.heading}", f"cannot be run: {problem}"))
    return profiles, refused


def _comparisons(profiles: list[Profile], per: Any) -> Iterator[Table]:
    """One comparison for every species that routes make."""
    by_product: dict[Any, list[Route]] = {}
    for item in profiles:
        by_product.setdefault(item.route.makes, []).append(item.route)
    for routes in by_product.values():
        yield from compare_routes(routes, per=per).tables()


def _combinations(sheet: Sheet) -> Iterator[Table]:
    for label, target in sheet.targets.items():
        try:
            yield from combine(target, sheet.known).tables()
        except OutOfReach as reason:
            yield Refusal(label, target.reaction, reason).table()


def _nothing(title: str, words: str) -> Table:
    return Table(title, (Column("remark", "remark"),), ((words,),))


def _heats(sheet: Sheet) -> Table:
    """Every typed heat per mole of reaction as written."""
    rows = tuple((row.label, row.reaction.rich, _as_written(row, sheet.k)) for row in _typed(sheet))
    columns = (
        Column("row", "row"),
        Column("reaction", "reaction"),
        Column("heat", "heat of the reaction as written", "kJ/mol", "right"),
    )
    return Table("Heats per mole of reaction as written", columns, rows)


def _typed(sheet: Sheet) -> list[Row]:
    """Known rows and steps with a heat, each once."""
    steps = [step.row for route in sheet.routes.values() for step in route.steps if step.label not in route.used]
    return [row for row in (*sheet.known.values(), *steps) if row.heat is not None]


def _as_written(row: Row, k: float) -> Cell:
    try:
        found = row.heat_sum(k)
    except ValueError as problem:
        return Reading(None, None, words=str(problem))
    return Reading(None, None, words="not entered") if found is None else found.reading


def _sources(sheet: Sheet) -> Table:
    """Every source with the rows that rest on it; heats without a source are named."""
    by_source: dict[str, list[str]] = {}
    for row in _typed(sheet):
        by_source.setdefault(row.source or NOT_STATED, []).append(row.label)
    rows = tuple((source, ", ".join(labels)) for source, labels in by_source.items())
    return Table("Sources of the heats", (Column("source", "source"), Column("rows", "rows")), rows)


def _cautions(sheet: Sheet, shown: Sequence[Table]) -> Table:
    """What a reader must know: the cautions of the method, how doubtful things were read, every note once."""
    rows = [("caution", text) for text in FULL]
    rows += [("the sheet", str(notice)) for notice in sheet.notices]
    notes: dict[str, list[str]] = {}
    for table in shown:
        for note in table.notes:
            notes.setdefault(note, []).append(plain(table.title))
    rows += [(_where(titles), note) for note, titles in notes.items()]
    return Table("Cautions and notes", (Column("where", "where"), Column("text", "text")), tuple(rows))


def _where(titles: list[str]) -> str:
    return titles[0] if len(titles) == 1 else f"{titles[0]}, and {len(titles) - 1} more"

"""The section on heat at scale: what the steps would do in the vessel, with everything that is not assessed named."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Any

from routeheat.chem.route import Route, Sheet
from routeheat.chem.step import Step
from routeheat.errors import RouteheatError
from routeheat.notation.keys import find_key
from routeheat.present.markup import join, plain
from routeheat.present.numbers import coverage
from routeheat.present.table import Column, Table
from routeheat.process.assessed import NotAssessed
from routeheat.process.at_scale import AtScale, RouteAtScale, StepAtScale, compare_at_scale
from routeheat.process.cautions import FULL, SHORT
from routeheat.process.criticality import ENDOTHERMIC
from routeheat.process.feed import FeedCheck
from routeheat.process.settings import Settings
from routeheat.process.vessel import VesselStep
from routeheat.report.document import (
    LONGEST_HEADING,
    Block,
    Bullets,
    Grid,
    Heading,
    Paragraph,
    figure_block,
    line,
    table_block,
)
from routeheat.report.matter import Matter, by_product
from routeheat.report.together import shared_notes, together

MOST_BESIDE = 4
"""Routes that stand beside each other in the table of routes; more stand below each other."""
_FED = ("accumulation", "MTSR", "criticality class", "TD24", "MTT", "evaporation", "gas evolved", "feed and cooling",
        "checklist")  # fmt: skip
_COOLING = ("feed", "U", "area", "jacket")
_STEP = Column("step", "step")


def at_scale(matter: Matter) -> Iterator[Block]:
    """Routes, dots, checklist, and each step in the vessel; nothing when no step has a key for it."""
    if not concerns_vessel(matter.sheet):
        return
    yield from (Paragraph(line(f"Not assessed: route {route.name}: {why}."), "caution")
                for route, why in matter.troubles)  # fmt: skip
    for number, group in enumerate(by_product(matter.profiles), 1):
        per = group[0].per
        routes = []
        for item in group:
            problem = _problem(item.route, per)
            if problem:
                yield Paragraph(line(f"Not assessed: route {item.route.name}: {problem}."), "caution")
            else:
                routes.append(item.route)
        if routes:
            yield from _group(compare_at_scale(routes, per=per), number)
    yield Heading("scale-cautions", line("What this section does not cover"))
    yield Bullets(tuple(map(line, FULL)))


def concerns_vessel(sheet: Sheet) -> bool:
    """True when some step has a key that the vessel reads."""
    return any(_concerns_vessel(step) for route in sheet.routes.values() for step in route.steps)


def _concerns_vessel(step: Step) -> bool:
    if step.concentration is not None or step.heat_capacity is not None:
        return True
    keys = (find_key(name) for name, _ in step.row.settings)
    return any(word in key.feeds for key in keys if key is not None for word in _FED)


def _problem(route: Route, per: Any) -> str:
    """Why a route cannot be compared at scale; empty when it can."""
    try:
        compare_at_scale([route], per=per)
    except RouteheatError as problem:
        return str(problem)
    return ""


def _group(found: AtScale, number: int) -> Iterator[Block]:
    makes = found.comparison.profiles[0].route.makes
    yield Heading(f"scale-{number}", line(join(["Routes to ", makes.rich]), LONGEST_HEADING))
    if not found.ranked:
        words = "No ranking: operations are open or heats are not entered, so that totals are incomplete."
        yield Paragraph(line(words), "caution")
    yield _routes(found, number)
    yield figure_block(f"scale-strip-{number}", found.strip())
    if found.ranked and found.comparison.differences:
        yield table_block(f"scale-differences-{number}", found.comparison.difference_table())
    yield table_block(f"scale-checklist-{number}", _checklists(found))
    seen: dict[str, VesselStep] = {}
    for index, item in enumerate(found.routes, 1):
        yield from _route(item, f"{number}-{index}", seen)


def _routes(found: AtScale, number: int) -> Block:
    """The table of routes, few of them beside each other; the checklist below it says which operations are open."""
    table = found.table()
    open_ones = {f"route {item.name}: {item.checklist.words}" for item in found.routes}
    table = replace(table, notes=tuple(note for note in table.notes if note not in open_ones))
    made = table_block(f"scale-routes-{number}", table)
    grid = _placed(made.grid)
    return replace(made, grid=grid.turned() if len(found.routes) <= MOST_BESIDE else grid)


def _placed(grid: Grid) -> Grid:
    """The grid with each column that only says in which step an extreme lies put behind its value."""
    places = [index for index, text in enumerate(grid.header) if plain(text) == "its step"]
    rows = tuple(
        tuple(
            join([cell, " (", row[index + 1], ")"]) if index + 1 in places and row[index + 1] else cell
            for index, cell in enumerate(row)
        )
        for row in grid.rows
    )
    return replace(grid, rows=rows).columns(index for index in range(len(grid.header)) if index not in places)


def _checklists(found: AtScale) -> Table:
    """One row an operation, one column a route."""
    lists = [item.checklist for item in found.routes]
    columns = (Column("operation", "operation"), *(Column(f"route_{n}", f"route {item.route}")
                                                   for n, item in enumerate(lists, 1)))  # fmt: skip
    rows = tuple((items[0].operation, *(item.words for item in items))
                 for items in zip(*(item.items for item in lists), strict=True))  # fmt: skip
    notes = shared_notes([(f"route {item.route}", item.table().notes) for item in lists])
    return Table("Operations of the routes: given, declared nil, or open", columns, rows, notes)


def _route(item: RouteAtScale, name: str, seen: dict[str, VesselStep]) -> Iterator[Block]:
    """One route; ``seen`` are the steps shown with an earlier one, which are not shown again."""
    heading = f"Route {item.profile.route.heading}"
    yield Heading(f"scale-route-{name}", line(heading, LONGEST_HEADING))
    if missing := _not_assessed(item.steps):
        yield Bullets(tuple(line(f"Not assessed: {words}") for words in missing))
    tables = [(step.label, step.criticality.table()) for step in item.steps]
    title = f"Route {item.name}: criticality when cooling fails"
    yield table_block(f"scale-classes-{name}", together(title, _STEP, tables))
    again = []
    for index, step in enumerate(item.steps, 1):
        if not _concerns_vessel(step.heat.step):
            continue
        if seen.get(step.label) == step.vessel:
            again.append(step.label)
            continue
        seen[step.label] = step.vessel
        # the notes of the step stand with its class, where they cannot be closed
        whole = step.vessel.table()
        columns = tuple(replace(column, align="left") for column in whole.columns)
        table = replace(whole, columns=columns, notes=(f"± is {coverage(step.vessel.k)}; exothermic is negative",))
        yield replace(table_block(f"scale-vessel-{name}-{index}", table, SHORT), folds=True)
        if isinstance(step.vessel.feed, FeedCheck):
            yield figure_block(f"scale-load-{name}-{index}", step.vessel.curve())
    if again:
        yield Paragraph(line(f"In the vessel as shown with an earlier route: {', '.join(again)}."))


def _not_assessed(steps: Sequence[StepAtScale]) -> tuple[str, ...]:
    """What cannot be said of which steps, and why; a missing input is never passed over."""
    found: dict[str, list[str]] = {}
    for step in steps:
        for words in _refusals(step):
            found.setdefault(words, []).append(step.label)
    return tuple(f"{', '.join(labels)}: {words}" for words, labels in found.items())


def _refusals(step: StepAtScale) -> Iterator[str]:
    refused = step.criticality.as_run.at_values
    if isinstance(refused, NotAssessed) and refused is not ENDOTHERMIC:
        yield refused.text
    typed = Settings(step.heat.step.row.settings)
    if any(key in typed for key in _COOLING) and isinstance(step.vessel.feed, NotAssessed):
        yield step.vessel.feed.text

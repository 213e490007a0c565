"""Sections with numbers: routes, comparison, profiles, single steps, combinations."""

from __future__ import annotations

from collections.abc import Iterator

from routeheat.chem.measured import Measured
from routeheat.chem.route import Route, Sheet
from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.hess.combination import Combination, alternatives
from routeheat.hess.ledger import sum_text
from routeheat.present.markup import as_rich, join
from routeheat.present.table import Cell, Column, Table
from routeheat.process.cautions import SHORT
from routeheat.process.compare import compare_routes
from routeheat.process.extents import net_equation
from routeheat.process.profile import Profile
from routeheat.process.profile_views import step_ladder
from routeheat.report.data import heat_text, measured_text
from routeheat.report.document import (
    LONGEST_HEADING,
    Block,
    Heading,
    Paragraph,
    figure_block,
    line,
    table_block,
)
from routeheat.report.matter import Matter

MOST_COLUMNS = 6
"""Routes in one figure; more go into a figure of their own."""
_OTHERS = 5


def routes(matter: Matter) -> Iterator[Block]:
    """Each route's equations with what is typed at them, its net equation, and the declared species."""
    profiles = {item.route.name: item for item in matter.profiles}
    troubles = {route.name: reason for route, reason in matter.troubles}
    for number, route in enumerate(matter.sheet.routes.values(), 1):
        yield _heading(f"route-{number}", f"Route {route.heading}")
        yield table_block(f"equations-{number}", _equations(route))
        if route.name in troubles:
            yield Paragraph(line(f"This route cannot be computed as typed: {troubles[route.name]}"), "caution")
        elif (net := _net(profiles[route.name])) is not None:
            yield net
    if matter.sheet.species:
        yield table_block("species", _species(matter.sheet))


def comparison(matter: Matter) -> Iterator[Block]:
    """The routes to each product side by side: tables and one diagram."""
    for number, item in enumerate(matter.comparisons, 1):
        for index, table in enumerate(item.tables(), 1):
            yield table_block(f"comparison-{number}-{index}", table)
        shown = [profile.route for profile in item.profiles]
        for start in range(0, len(shown), MOST_COLUMNS):
            part = compare_routes(shown[start : start + MOST_COLUMNS], per=item.profiles[0].per)
            yield figure_block(f"comparison-figure-{number}-{start // MOST_COLUMNS + 1}", part.ladder())


def profiles(matter: Matter) -> Iterator[Block]:
    """The heat profile of each route: diagram and table."""
    for number, item in enumerate(matter.profiles, 1):
        yield _heading(f"profile-{number}", f"Route {item.route.heading}")
        yield figure_block(f"profile-figure-{number}", item.ladder())
        yield table_block(f"profile-table-{number}", item.table())


def steps(matter: Matter) -> Iterator[Block]:
    """The levels of each step by itself, per mole of reaction as written."""
    for number, item in enumerate(matter.profiles, 1):
        ladder = step_ladder(item.route)
        for start in range(0, len(ladder.columns), MOST_COLUMNS):
            part = type(ladder)(
                ladder.title, ladder.columns[start : start + MOST_COLUMNS], ladder.axis, ladder.unit, ladder.k,
                notes=ladder.notes, alt=ladder.alt,
            )  # fmt: skip
            yield figure_block(f"steps-figure-{number}-{start // MOST_COLUMNS + 1}", part, SHORT)


def combinations(matter: Matter) -> Iterator[Block]:
    """Each target, and each step derived from known rows: rows used, ledger, diagram, other combinations."""
    for number, item in enumerate((*matter.combinations, *matter.derived), 1):
        if not isinstance(item, Combination):
            yield _heading(f"combination-{number}", f"Target {item.label}: out of reach")
            yield table_block(f"refusal-{number}", item.table(), caption=join([f"{item.label}: ", item.target.rich]))
            continue
        what = "Target" if number <= len(matter.combinations) else "Step"
        yield _heading(f"combination-{number}", f"{what} {item.name}: {item.heat.text} kJ/mol")
        equation = join([f"{item.name}: ", item.target.rich])
        yield table_block(f"rows-{number}", item.table(), SHORT, caption=equation)
        yield table_block(f"ledger-{number}", item.ledger, caption=join(["Ledger of ", equation]))
        yield figure_block(f"combination-figure-{number}", item.ladder(), SHORT)
        if others := alternatives(item, _OTHERS):
            yield table_block(f"others-{number}", _others(item, others), SHORT)


def _heading(name: str, text: str) -> Heading:
    return Heading(name, line(text, LONGEST_HEADING))


def _equations(route: Route) -> Table:
    columns = (
        Column("step", "step"), Column("equation", "equation"), Column("heat", "heat as typed"),
        Column("yield", "yield"), Column("conditions", "conditions"),
    )  # fmt: skip
    rows = tuple(_equation(step) for step in route.steps)
    notes = [f"makes {route.makes}"]
    if route.used:
        notes.append(f"{', '.join(route.used)}: defined in another route; same label, same datum")
    return Table(f"Route {route.heading}: equations", columns, rows, tuple(notes))


def _equation(step: Step) -> tuple[Cell, ...]:
    label = f"{step.label} (side row of {step.side_of})" if step.side_of else step.label
    yielded = "" if step.side_of else "not typed" if step.yield_ is None else measured_text(step.yield_)
    return (label, step.row.reaction.rich, heat_text(step.row.heat), yielded, "; ".join(_conditions(step)))


def _conditions(step: Step) -> Iterator[str]:
    for name, value in (
        ("T", step.temperature), ("conc", step.concentration), ("cp", step.heat_capacity), ("amount", step.amount),
    ):  # fmt: skip
        if value is not None:
            yield f"{name} {measured_text(value)}"
    if step.limiting is not None:
        yield f"limiting {step.limiting}"
    for species, equivalents in step.equivalents:
        yield f"{float(equivalents):g} equiv of {species}"
    for recycle in step.recycles:
        yield f"recycle {recycle.species} from {recycle.source}, {measured_text(recycle.part)}"
    if step.operation:
        yield step.operation
    if step.loss:
        yield f"loss counted as {step.loss}"
    for name, setting in step.row.settings:
        if setting is True:
            yield name
        else:
            yield f"{name} {measured_text(setting) if isinstance(setting, Measured) else setting}"


def _net(item: Profile) -> Paragraph | None:
    try:
        net = net_equation(item.found.links)
    except RouteError:
        return None
    return Paragraph(line(join(["Net equation at theoretical extents (yields of 1, no excess): ", net.rich])))


def _species(sheet: Sheet) -> Table:
    columns = (
        Column("species", "species"), Column("formula", "formula"), Column("name", "name"),
        Column("cas", "CAS Registry Number"), Column("molar_mass", "molar mass", "g/mol", "right", 2),
    )  # fmt: skip
    rows: list[tuple[Cell, ...]] = []
    for item in sheet.species.values():
        formula, mass = item.species.formula, item.species.molar_mass
        composition = as_rich("not known") if formula is None else formula.rich
        cell: Cell = "not known" if mass is None else float(mass)
        rows.append((item.species.text, composition, item.title, item.cas, cell))
    kept = [index for index in range(len(columns)) if any(row[index] for row in rows)]
    cells = tuple(tuple(row[index] for index in kept) for row in rows)
    return Table("Declared species", tuple(columns[index] for index in kept), cells)


def _others(first: Combination, others: tuple[Combination, ...]) -> Table:
    columns = (Column("rows", "combination"), Column("heat", "heat", "kJ/mol", "right"))
    rows = tuple((sum_text(item.terms), item.heat.reading) for item in (first, *others))
    count = f"all combinations follow from {len(first.parameters)} free parameter(s); the first line is the one shown"
    return Table(f"{first.name}: other combinations of the known rows", columns, rows, (count,))

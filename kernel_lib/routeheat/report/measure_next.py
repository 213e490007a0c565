"""The section on what to measure next: which single measurement would tell most of the heat that matters."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace

from routeheat.chem.route import Sheet
from routeheat.errors import RouteheatError
from routeheat.hess.combination import Combination
from routeheat.present.markup import Rich
from routeheat.process.cautions import SHORT
from routeheat.process.compare import Difference
from routeheat.process.next_measurement import NextMeasurement, next_measurement
from routeheat.process.profile import Profile
from routeheat.report.document import Block, Paragraph, line, table_block
from routeheat.report.matter import Matter

ATTAINABLE = 5.0
"""Standard uncertainty in kJ/mol to which a heat is taken to be measurable when it states none now; a choice."""
PART = 0.5
"""Part of its present standard uncertainty to which another heat is taken to be measurable; a choice."""
_LISTED = 12
_NO_CHANGE = "does not change it"
_ASSUMED = (
    "Assumed here: a measurement halves the standard uncertainty that a heat has now; where none is stated it reaches "
    f"{ATTAINABLE:g} kJ/mol."
)

Target = Difference | Profile | Combination


def next_heat(matter: Matter) -> Iterator[Block]:
    """For the difference of the first two routes, else the total of the only route, else the first target."""
    for target, unit in _targets(matter):
        try:
            found = _asked(target, unit, matter)
        except RouteheatError as problem:
            yield Paragraph(line(f"Not assessed: {problem}."), "caution")
            continue
        name = found.short if isinstance(target, Combination) else found.name
        yield Paragraph(line(f"For the {name}: {found.sentence}"))
        yield Paragraph(line(_ASSUMED))
        yield from _tables(found, _equations(matter.sheet))
        return


def _targets(matter: Matter) -> Iterator[tuple[Target, str]]:
    """What may be asked for, the most useful first; the next one is for when a target has no number."""
    if matter.comparisons:
        first = matter.comparisons[0]
        yield first.differences[0], first.unit
    elif matter.profiles:
        yield matter.profiles[0], matter.profiles[0].unit
    for item in matter.combinations:
        if isinstance(item, Combination):
            yield item, "kJ/mol"
            return


def _asked(target: Target, unit: str, matter: Matter) -> NextMeasurement:
    """The answer with each heat measured to a part of the uncertainty it has now."""
    routes = [item.route for item in matter.profiles]
    direct = ATTAINABLE
    if isinstance(target, Combination) and target.heat.complete and target.heat.u:
        direct = _part(target.heat.u)
    now = next_measurement(target, attainable=direct, known=matter.sheet.known, routes=routes, unit=unit)
    own = {item.label: _part(item.u_now) for item in now.effects if item.u_now and item.label != _itself(target)}
    return next_measurement(
        target, attainable=direct, known=matter.sheet.known, routes=routes, unit=unit, attainable_for=own
    )


def _part(u: float) -> float:
    """The assumed part of an uncertainty, with two significant digits as an uncertainty is stated."""
    return float(f"{PART * u:.2g}")


def _itself(target: Target) -> str:
    """Label under which a measurement of the target reaction is listed, which takes the common attainable value."""
    return f"{target.name} itself" if isinstance(target, Combination) else ""


def _equations(sheet: Sheet) -> dict[str, Rich]:
    """Equations with their subscripts by the label of a row or step."""
    steps = [step.row for route in sheet.routes.values() for step in route.steps]
    return {row.label: row.reaction.rich for row in (*sheet.known.values(), *steps)}


def _tables(found: NextMeasurement, equations: Mapping[str, Rich]) -> Iterator[Block]:
    telling = [item for item in found.effects if item.remark != _NO_CHANGE]
    shown = replace(found, effects=tuple(telling[:_LISTED]))
    table = shown.table()
    notes = [note for note in table.notes if note != shown.sentence]
    if len(telling) > _LISTED:
        notes.append(f"measurements that help less and are not listed: {len(telling) - _LISTED}")
    if others := len(found.effects) - len(telling):
        notes.append(f"measurements that would not change it: {others}")
    rows = tuple(
        (row[0], equations.get(item.label, row[1]), *row[2:])
        for item, row in zip(shown.effects, table.rows, strict=True)
    )
    yield table_block("next-measurements", replace(table, rows=rows, notes=tuple(notes)), SHORT)
    yield table_block("next-contributions", shown.contribution_table())

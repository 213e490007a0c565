"""The tables and the JSON of routes compared at scale."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from routeheat.present.numbers import coverage
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.cautions import SHORT, THRESHOLDS, WASTE
from routeheat.process.checklist import INCOMPLETE
from routeheat.process.feed import FeedCheck
from routeheat.process.limits import Limit
from routeheat.process.notes import merged
from routeheat.process.profile_views import heat_dict, sum_reading
from routeheat.process.vessel_views import value_cell

if TYPE_CHECKING:
    from routeheat.process.at_scale import AtScale, Extreme, RouteAtScale, StepAtScale


def table(found: AtScale) -> Table:
    """One row a route, in the order typed."""
    columns = (
        Column("route", "route"),
        Column("as_run", "worst class, as run"),
        Column("misfeed", "worst class, everything charged at once"),
        Column("rise", "largest ΔTad", "K", "right"),
        Column("rise_step", "its step"),
        Column("mtsr", "highest MTSR", "°C", "right"),
        Column("mtsr_step", "its step"),
        Column("margin", "least margin to TD24", "K", "right"),
        Column("margin_step", "its step"),
        Column("gas", "gas", "mol/mol", "right", 2),
        Column("heat", "total heat" if found.ranked else f"heat ({_total(found)})", found.comparison.unit, "right"),
        Column("pmi", "PMI", "kg/kg", "right", 2),
        Column("e_factor", "E factor", "kg/kg", "right", 2),
        Column("exceeded", "criteria exceeded"),
        Column("open", "open questions"),
    )
    makes = found.comparison.profiles[0].route.makes
    title = f"Routes to {makes} at scale, heat per {found.comparison.profiles[0].basis.words}"
    return Table(title, columns, tuple(_route_row(item) for item in found.routes), _notes(found))


def _total(found: AtScale) -> str:
    entered = all(item.profile.complete for item in found.routes)
    return f"{INCOMPLETE} total" if entered else f"{INCOMPLETE} total, sum of entered steps"


def _route_row(item: RouteAtScale) -> tuple[Cell, ...]:
    k = item.profile.k
    cells: list[Cell] = [item.profile.route.heading, item.worst(lambda c: c.as_run), item.worst(lambda c: c.misfeed)]
    for extreme in (item.largest_rise, item.highest_mtsr, item.least_margin):
        cells += [_extreme_cell(extreme, k), _where(extreme)]
    cells += [Reading(item.gas, None, k), sum_reading(item.profile.total)]
    cells += [_waste_cell(figure, k) for figure in (item.waste.whole.pmi, item.waste.whole.e_factor)]
    return (*cells, "; ".join(item.exceeded), "; ".join(item.open_questions) or "none")


def _extreme_cell(extreme: Extreme, k: float) -> Cell:
    words = "not known" if extreme.open else "no exothermic step"
    return Reading(None, None, k, words=words) if extreme.value is None else value_cell(extreme.value, k)


def _where(extreme: Extreme) -> str:
    parts = [", ".join(extreme.labels)] if extreme.labels else []
    return "; ".join([*parts, *([f"not known: {', '.join(extreme.open)}"] if extreme.open else [])])


def _waste_cell(figure: float | NotAssessed, k: float) -> Cell:
    return figure.text if isinstance(figure, NotAssessed) else Reading(figure, None, k)


def _notes(found: AtScale) -> tuple[str, ...]:
    notes = [f"route {item.name}: {item.checklist.words}" for item in found.routes if item.checklist.open]
    if not found.ranked:
        notes.append("no ranking while an operation is open or a heat is not entered")
    notes += merged(found.comparison.profiles, lambda item: item.yield_notes)[:-1]
    notes += ["no overall score: a route is judged by a person who sees every column",
              "a class names every class that is reachable, the worst step first; margin to TD24 counts from MTSR, or "
              "from ambient where that is higher"]  # fmt: skip
    boundaries = dict.fromkeys(item.waste.boundary.text for item in found.routes)
    notes += [f"route {item.name}: inputs counted: {item.waste.boundary.text}" for item in found.routes] \
        if len(boundaries) > 1 else [f"inputs counted: {next(iter(boundaries))}"]  # fmt: skip
    if len(boundaries) > 1:
        notes.append("PMI and E factor not compared: their boundaries differ")
    notes += dict.fromkeys(note for item in found.routes for step in item.steps for note in step.vessel.gas.notes
                           if note.startswith("gas counts"))  # fmt: skip
    return (*notes, WASTE, THRESHOLDS, f"± is {coverage(found.routes[0].profile.k)}; exothermic is negative", SHORT)


def step_table(found: AtScale) -> Table:
    """One row a step."""
    columns = (
        Column("route", "route"), Column("step", "step"), Column("as_run", "class as run"),
        Column("misfeed", "everything charged at once"), Column("rise", "ΔTad", "K", "right"),
        Column("process", "Tp", "°C", "right"), Column("mtsr", "MTSR", "°C", "right"),
        Column("mtt", "MTT", "°C", "right"), Column("td24", "TD24", "°C", "right"),
        Column("margin", "margin to TD24", "K", "right"), Column("gas", "gas", "mol/mol", "right", 2),
        Column("load", "load", "%", "right", 0), Column("open", "open questions"),
    )  # fmt: skip
    rows = tuple(_step_row(item, step) for item in found.routes for step in item.steps)
    makes = found.comparison.profiles[0].route.makes
    notes = ("margin to TD24 counts from MTSR, or from ambient where that is higher; gas per mole of the limiting "
             "reactant charged; load of the jacket while feeding",
             THRESHOLDS, f"± is {coverage(found.routes[0].profile.k)}", SHORT)  # fmt: skip
    return Table(f"Routes to {makes} at scale, step by step", columns, rows, notes)


def _step_row(item: RouteAtScale, step: StepAtScale) -> tuple[Cell, ...]:
    k, seen = step.vessel.k, step.vessel
    label = f"{step.label} (side of {seen.side_of})" if seen.side_of else step.label
    endothermic = seen.exothermic is False
    mtsr = "endothermic" if endothermic else _cell(seen.mtsr, k)
    return (
        item.name, label, step.criticality.words, step.criticality.misfeed.words, _cell(seen.rise, k),
        _cell(seen.process, k), mtsr, _cell(seen.mtt, k), _cell(seen.td24, k), _cell(step.margin, k),
        Reading(seen.gas.per_mol, None, k), Reading(100 * seen.feed.load, None, k)
        if isinstance(seen.feed, FeedCheck) else "not checked", "; ".join(step.open_questions) or "none",
    )  # fmt: skip


def _cell(item: Value | Limit | NotAssessed, k: float) -> Cell:
    if isinstance(item, NotAssessed):
        return "endothermic" if item.reason == "endothermic" else "not known"
    return value_cell(item.celsius if isinstance(item, Limit) else item, k)


def to_dict(found: AtScale) -> dict[str, Any]:
    """JSON-safe content; differences only where totals may be compared."""
    return {
        "unit": found.comparison.unit,
        "ranked": found.ranked,
        "routes": [_route_dict(item) for item in found.routes],
        "differences": [
            {"first": item.first, "second": item.second, "heat": heat_dict(item.heat), "verdict": item.verdict}
            for item in found.comparison.differences
        ] if found.ranked else [],
        "notes": list(_notes(found)),
    }  # fmt: skip


def _route_dict(item: RouteAtScale) -> dict[str, Any]:
    extremes = {"largest_rise": item.largest_rise, "highest_mtsr": item.highest_mtsr,
                "least_margin": item.least_margin}  # fmt: skip
    return {
        "name": item.name,
        "worst_as_run": item.worst(lambda c: c.as_run),
        "worst_misfeed": item.worst(lambda c: c.misfeed),
        **{name: {"value": None if e.value is None else e.value.to_dict(), "steps": list(e.labels),
                  "not_known": list(e.open)} for name, e in extremes.items()},
        "gas_mol_per_mol": item.gas,
        "heat": heat_dict(item.profile.total),
        "complete": item.complete,
        "checklist": item.checklist.to_dict(),
        "waste": item.waste.to_dict(),
        "exceeded": list(item.exceeded),
        "open_questions": list(item.open_questions),
        "steps": [{"label": step.label, "criticality": step.criticality.to_dict(), "vessel": step.vessel.to_dict(),
                   "margin": step.margin.to_dict(), "exceeded": list(step.exceeded),
                   "open_questions": list(step.open_questions)} for step in item.steps],
    }  # fmt: skip

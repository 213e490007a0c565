"""A comparison of routes as tables, as a ladder and as JSON-safe content."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from routeheat.present.ladder import Ladder
from routeheat.present.markup import Rich, join, plain
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process.notes import figure_notes, merged
from routeheat.process.profile_views import CUMULATIVE, caption, heat_dict, in_words, ladder_column, sum_reading
from routeheat.process.profile_views import to_dict as profile_dict

if TYPE_CHECKING:
    from routeheat.process.closure import Closure
    from routeheat.process.compare import Comparison, Difference
    from routeheat.process.profile import Profile

_RULE = "two heats count as different when they differ by at least twice the standard uncertainty of the difference"


def _title(comparison: Comparison) -> Rich:
    first = comparison.profiles[0]
    return join(["Routes to ", first.route.makes.rich, f": cumulative heat per {first.basis.words}"])


def table(comparison: Comparison) -> Table:
    """One row a route. A sum with steps not entered is not called a total."""
    unit = comparison.unit
    complete = all(item.complete for item in comparison.profiles)
    columns = (
        Column("route", "route"),
        Column("steps", "steps", align="right"),
        Column("heat", "total" if complete else "sum of entered steps", unit, "right"),
        Column("side_rows", "of it side rows", unit, "right"),
        Column("largest_exotherm", "largest exotherm"),
        Column("overall_yield", "yield, longest chain", "%", "right"),
        Column("not_entered", "not entered"),
    )
    rows = tuple(_route_row(item) for item in comparison.profiles)
    return Table(_title(comparison), columns, rows, _notes(comparison))


def _route_row(item: Profile) -> tuple[Cell, ...]:
    largest = item.largest_exotherm
    named = "" if largest is None or largest.heat is None else f"{largest.label}: {caption(largest.heat)}"
    return (
        item.route.heading,
        sum(not step.side for step in item.steps),
        sum_reading(item.total),
        sum_reading(item.side_total) if any(step.side for step in item.steps) else None,
        named,
        float(item.overall_yield * 100),
        ", ".join(item.not_entered),
    )


def _notes(comparison: Comparison) -> tuple[str, ...]:
    return merged(comparison.profiles, lambda item: item.notes)


def difference_table(comparison: Comparison) -> Table:
    """Second route minus first for every pair."""
    columns = (
        Column("routes", "routes"),
        Column("difference", "difference", comparison.unit, "right"),
        Column("verdict", "what can be said"),
    )
    rows = tuple(_difference_row(item) for item in comparison.differences)
    notes = [_RULE, "data that both routes use cancel in the difference and in its uncertainty"]
    notes += dict.fromkeys(note for item in comparison.differences for note in item.notes)
    return Table(join([_title(comparison), ", differences of totals"]), columns, rows, tuple(notes))


def _difference_row(item: Difference) -> tuple[Cell, ...]:
    heat = Reading(None, None, words="not entered") if item.heat is None else item.heat.reading
    return (f"{item.second} − {item.first}", heat, item.verdict)


def closure_table(comparison: Comparison) -> Table:
    """The closure of every pair."""
    columns = (
        Column("routes", "routes"),
        Column("difference", "net equations differ by"),
        Column("rows", "known rows"),
        Column("discrepancy", "discrepancy", "kJ/mol", "right"),
        Column("verdict", "what can be said"),
    )
    rows = tuple(_closure_row(item) for item in comparison.closures)
    notes = [
        "theoretical extents per mole of product: yields of 1, no excess, no recycle, no side rows; these heats "
        "share no axis with the cumulative heats",
        _RULE,
    ]
    notes += dict.fromkeys(
        f"{item.second} − {item.first}: {note}" for item in comparison.closures for note in item.notes
    )
    title = join(["Routes to ", comparison.profiles[0].route.makes.rich, ": do the data agree?"])
    return Table(title, columns, rows, tuple(notes))


def _closure_row(item: Closure) -> tuple[Cell, ...]:
    differ: Cell = ""  # without known rows the verdict says it
    if item.difference is not None and (item.rows or not item.difference.net):
        differ = item.difference.rich if item.difference.net else "nothing"
    heat = Reading(None, None, words="no check") if item.discrepancy is None else item.discrepancy.reading
    return (f"{item.second} − {item.first}", differ, ", ".join(item.rows), heat, item.words)


def ladder(comparison: Comparison, *, overlay: bool = False) -> Ladder:
    """One column a route, actual extents only."""
    first = comparison.profiles[0]
    columns = tuple(ladder_column(item) for item in comparison.profiles)
    notes = figure_notes(comparison.profiles)
    words = [in_words(item) for item in comparison.profiles]
    words += [f"{item.second} minus {item.first}: {item.verdict}." for item in comparison.differences]
    return Ladder(
        _title(comparison), columns, CUMULATIVE, first.basis.shown_unit, first.k, overlay, notes, " ".join(words)
    )


def to_dict(comparison: Comparison) -> dict[str, Any]:
    """JSON-safe content; exact numbers are texts."""
    return {
        "title": plain(_title(comparison)),
        "unit": comparison.unit,
        "profiles": [profile_dict(item) for item in comparison.profiles],
        "differences": [
            {
                "first": item.first,
                "second": item.second,
                "heat": heat_dict(item.heat),
                "verdict": item.verdict,
                "notes": list(item.notes),
            }
            for item in comparison.differences
        ],
        "closures": [
            {
                "first": item.first,
                "second": item.second,
                "difference": None if item.difference is None else item.difference.text,
                "rows": list(item.rows),
                "discrepancy": heat_dict(item.discrepancy),
                "verdict": item.verdict,
                "notes": list(item.notes),
            }
            for item in comparison.closures
        ],
    }

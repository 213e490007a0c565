"""Routes compared at scale: what is worst, what is not known, and no ranking while anything is open."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import pytest

from routeheat.chem.route import Route
from routeheat.present.markup import plain
from routeheat.process.at_scale import AtScale, compare_at_scale
from routeheat.process.cautions import NOTHING_EXCEEDED
from routeheat.process.checklist import OPERATIONS
from routeheat.process.sheet import read_sheet

SHEETS = Path(__file__).parents[2] / "published" / "sheets"


def routes(name: str) -> dict[str, Route]:
    return dict(read_sheet(SHEETS / f"{name}.txt").routes)


def closed(route: Route) -> Route:
    """The route with every operation declared nil on its first step."""
    first, *others = route.steps
    nil = ("nil", f"{', '.join(OPERATIONS)}: none needed")
    return replace(route, steps=(replace(first, row=replace(first.row, settings=(*first.row.settings, nil))), *others))


def cell(found: AtScale, name: str, key: str) -> object:
    shown = found.table()
    place = [column.key for column in shown.columns].index(key)
    return next(row[place] for item, row in zip(found.routes, shown.rows, strict=True) if item.name == name)


@pytest.fixture(scope="module")
def amine() -> AtScale:
    return compare_at_scale(routes("amine"))


def test_the_worst_class_is_a_set_with_its_step(amine: AtScale) -> None:
    assert cell(amine, "A", "as_run") == "class 2 (A1)"
    assert cell(amine, "B", "as_run") == "classes 3 (84 %), 1 (16 %) (B2)"
    assert cell(amine, "C", "as_run") == "class 5 (C1)"
    assert cell(amine, "A", "misfeed") == "class 5 (A1)"


def test_extremes_name_their_step_and_carry_their_uncertainty(amine: AtScale) -> None:
    rise = amine["A"].largest_rise
    assert rise.labels == ("A2",)
    assert rise.value is not None
    assert rise.value.value == pytest.approx(545 * 0.9 / 2.3)
    assert rise.value.u == pytest.approx(20 * 0.9 / 2.3, rel=1e-6)
    assert amine["A"].highest_mtsr.labels == ("A2",)
    margin = amine["A"].least_margin
    assert margin.labels == ("A1",)
    assert margin.value is not None
    assert margin.value.value == pytest.approx(95 - (20 + 0.3 * 135 * 1.6 / 1.75))


def test_the_margin_counts_from_ambient_where_that_is_higher(amine: AtScale) -> None:
    # C1 runs at 0 °C with a TD24 of 25 °C: below the ambient 30 °C whatever its MTSR
    margin = amine["C"].least_margin
    assert margin.labels == ("C1",)
    assert margin.value is not None
    assert margin.value.value == pytest.approx(-5.0)
    assert "C1: TD24 at or below ambient" in amine["C"].exceeded


def test_an_unknown_step_is_never_passed_over() -> None:
    found = compare_at_scale(routes("acetate"))
    assert cell(found, "C", "as_run") == "not classifiable: C1, C2"
    assert cell(found, "C", "rise_step") == "C1; not known: C2"
    assert cell(found, "C", "margin_step") == "not known: C1, C2"
    assert found["C"].exceeded == (f"{NOTHING_EXCEEDED}; not classifiable: C1, C2",)
    assert "C1: TD24 missing" in found["C"].open_questions


def test_nothing_exceeded_is_said_of_the_data_entered_only() -> None:
    found = compare_at_scale(routes("oxide"))
    assert found["A"].exceeded == (NOTHING_EXCEEDED,)
    assert "safe" not in found.text.replace("safety", "")


def test_limits_that_are_reached_are_named(amine: AtScale) -> None:
    assert amine["A"].exceeded == (
        "A1: everything charged at once reaches TD24",
        "A2: everything charged at once reaches TD24 and MTT",
    )
    assert "B2: MTSR may reach MTT" in amine["B"].exceeded


def test_an_open_operation_makes_the_total_incomplete_and_stops_ranking(amine: AtScale) -> None:
    assert not amine.ranked
    shown = amine.table()
    assert plain(next(column.header for column in shown.columns if column.key == "heat")) == "heat (incomplete total)"
    assert "operations open: quench" in amine["A"].open_questions[0]
    assert len(amine.tables()) == 2
    assert "releases more heat than" not in amine.text
    assert amine.to_dict()["differences"] == []


def test_one_open_route_stops_the_ranking_of_all() -> None:
    typed = routes("amine")
    assert not compare_at_scale([closed(typed["A"]), closed(typed["B"]), typed["C"]]).ranked


def test_with_every_operation_closed_totals_are_compared() -> None:
    found = compare_at_scale([closed(route) for route in routes("amine").values()])
    assert found.ranked
    assert "releases more heat than" in found.text
    assert plain(next(column.header for column in found.table().columns if column.key == "heat")) == "total heat"
    assert not any("incomplete" in note for note in found.table().notes)


def test_a_heat_that_is_not_entered_stops_the_ranking() -> None:
    typed = {name: closed(route) for name, route in routes("amine").items()}
    first, last = typed["A"].steps
    typed["A"] = replace(typed["A"], steps=(first, replace(last, row=replace(last.row, heat=None))))
    found = compare_at_scale(typed)
    assert not found.ranked
    assert "no heat: A2" in found["A"].open_questions


def test_waste_with_different_boundaries_is_not_compared() -> None:
    typed = routes("amine")
    first, last = typed["A"].steps
    stated = replace(first, row=replace(first.row, settings=(*first.row.settings, ("charges", "AR 1 kg"))))
    typed["A"] = replace(typed["A"], steps=(stated, last))
    notes = compare_at_scale(typed).table().notes
    assert "PMI and E factor not compared: their boundaries differ" in notes


def test_the_strip_has_a_row_for_every_step_of_every_route(amine: AtScale) -> None:
    shown = amine.strip()
    assert [[row.label for row in group.rows] for group in shown.groups] == [
        ["A1", "A2"], ["B1", "B2"], ["C1", "C2", "C3"],
    ]  # fmt: skip
    assert all(row.line for row in shown.rows)
    assert shown.k == 1.0


def test_no_column_is_a_score(amine: AtScale) -> None:
    assert {column.key for column in amine.table().columns}.isdisjoint({"score", "rank"})
    assert any(note.startswith("no overall score") for note in amine.table().notes)


def test_content_is_json_safe(amine: AtScale) -> None:
    content = json.loads(json.dumps(amine.to_dict()))
    assert [item["name"] for item in content["routes"]] == ["A", "B", "C"]


def test_side_rows_are_steps_of_the_table() -> None:
    found = compare_at_scale(routes("amide_vessel"))
    labels = [row[1] for row in found.step_table().rows]
    assert "X2q (side of X2)" in labels

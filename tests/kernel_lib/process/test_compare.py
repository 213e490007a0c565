from __future__ import annotations

import json
from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.chem.route import Route
from routeheat.errors import RouteError
from routeheat.process.compare import compare_routes


def test_shared_steps_cancel_in_the_difference(amide_routes: dict[str, Route]) -> None:
    found = compare_routes([amide_routes["2"], amide_routes["1"]]).difference("2", "1")
    assert found.heat is not None
    assert (round(found.heat.value, 1), round(found.heat.u, 1)) == (-1.7, 19.5)
    assert found.verdict == "not distinguishable"
    assert "F" not in found.heat.coefficients  # run equally often in both
    assert set(found.heat.coefficients) == {"X1", "X2", "X2q", "Y1", "C", "C2"}


def test_the_same_numbers_under_other_labels_are_independent(code: SimpleNamespace) -> None:
    other = code.amide_route("2", code.second, lambda label: f"{label}x")
    found = compare_routes([code.amide_route("1", code.first), other]).differences[0]
    assert found.heat is not None
    assert round(found.heat.u, 1) == 36.5


def test_a_route_and_its_copy_differ_by_exactly_nothing(amide_routes: dict[str, Route]) -> None:
    one = amide_routes["1"]
    found = compare_routes([one, replace(one, name="copy")])
    difference = found.differences[0]
    assert difference.heat is not None
    assert (difference.heat.exact, difference.heat.u) == (0, 0.0)
    assert difference.verdict == "no difference: both totals rest on the same data"
    assert found.closures[0].verdict == "no check: both sides rest on the same data"


def test_which_route_releases_more(amine_routes: dict[str, Route]) -> None:
    found = compare_routes(amine_routes)
    assert [(d.first, d.second) for d in found.differences] == [("A", "B"), ("A", "C"), ("B", "C")]
    assert found.difference("A", "B").verdict == (
        "A releases more heat than B by 537 ± 34 (k = 1) kJ/mol (yield uncertainty not included)"
    )
    assert found.difference("B", "C").verdict.startswith("C releases more heat than B by 175 ± 45 (k = 1) kJ/mol")


@pytest.mark.parametrize(
    ("heat", "verdict"),
    [
        ("-13.9 ± 1", "not distinguishable"),
        ("-14 ± 1", "B releases more heat than A by 4.0 ± 2.0 (k = 1) kJ/mol"),
    ],
)
def test_the_limit_is_twice_the_standard_uncertainty(code: SimpleNamespace, heat: str, verdict: str) -> None:
    # u of the difference: √(1² + 1.7320508…²), just below 2
    a = code.route("A", "P", code.step("S1", "A -> P", "-10 ± 1.73205", "100 ± 0 %"))
    b = code.route("B", "P", code.step("S2", "K -> P", heat, "100 ± 0 %"))
    assert compare_routes([a, b]).differences[0].verdict == verdict


def test_endothermic_routes_take_up_heat(code: SimpleNamespace) -> None:
    a = code.route("A", "P", code.step("S1", "A -> P", "10 ± 1", "100 ± 0 %"))
    b = code.route("B", "P", code.step("S2", "K -> P", "30 ± 1", "100 ± 0 %"))
    assert compare_routes([a, b]).differences[0].verdict == "B takes up more heat than A by 20.0 ± 1.4 (k = 1) kJ/mol"


def test_a_missing_heat_cannot_be_judged(code: SimpleNamespace) -> None:
    a = code.route("A", "P", code.step("S1", "A -> P", "-10 ± 1"))
    b = code.route("B", "P", code.step("S2", "A -> P"))
    found = compare_routes([a, b])
    assert found.differences[0].heat is None
    assert found.differences[0].verdict == "cannot be judged: not entered in B: S2"
    assert found.closures[0].verdict == "cannot be judged: not entered in B: S2"


def test_an_unstated_uncertainty_cannot_be_judged(code: SimpleNamespace) -> None:
    a = code.route("A", "P", code.step("S1", "A -> P", "-10 ± 1"))
    b = code.route("B", "P", code.step("S2", "A -> P", "-500"))
    found = compare_routes([a, b])
    assert found.differences[0].verdict == "cannot be judged: uncertainty of S2 not stated"
    assert found.closures[0].verdict == "cannot be judged: uncertainty of S2 not stated"


def test_routes_must_make_the_same_species(code: SimpleNamespace) -> None:
    a = code.route("A", "P(s)", code.step("S1", "A -> P(s)"))
    b = code.route("B", "P(l)", code.step("S2", "A -> P(l)"))
    with pytest.raises(RouteError, match=r"route A makes P\(s\), route B makes P\(l\)"):
        compare_routes([a, b])


def test_names_must_differ_and_exist(amide_routes: dict[str, Route]) -> None:
    with pytest.raises(RouteError, match="two routes are called 1"):
        compare_routes([amide_routes["1"], amide_routes["1"]])
    with pytest.raises(RouteError, match="no routes to compare"):
        compare_routes({})


def test_one_basis_for_all(amide_routes: dict[str, Route]) -> None:
    per_mole, per_kilogram = compare_routes(amide_routes), compare_routes(amide_routes, per="kg")
    assert (per_mole.unit, per_kilogram.unit) == ("kJ/mol", "kJ/kg")
    mass = amide_routes["1"].makes.molar_mass
    one, other = per_mole.differences[0].heat, per_kilogram.differences[0].heat
    assert mass is not None
    assert one is not None
    assert other is not None
    assert other.exact == one.exact * 1000 / mass


def test_tables_stand_side_by_side_without_ranking(amide_routes: dict[str, Route]) -> None:
    found = compare_routes(amide_routes)
    table = found.table()
    assert [row[0] for row in table.rows] == ["1", "2"]
    assert [row[1] for row in table.rows] == [5, 4]
    assert not [word for word in ("best", "better", "safe", "winner") if word in found.text.lower()]


def test_an_incomplete_route_takes_the_word_total_away(code: SimpleNamespace) -> None:
    a = code.route("A", "P", code.step("S1", "A -> P", "-10 ± 1"))
    b = code.route("B", "P", code.step("S2", "A -> P"))
    table = compare_routes([a, b]).table()
    assert table.columns[2].header == "sum of entered steps"
    assert table.rows[1][6] == "S2"


def test_ladder_has_a_column_a_route(amide_routes: dict[str, Route]) -> None:
    found = compare_routes(amide_routes)
    assert [column.title for column in found.ladder().columns] == ["1", "2"]
    assert (found.ladder().overlay, found.ladder(overlay=True).overlay) == (False, True)


def test_to_dict_is_json(amide_routes: dict[str, Route]) -> None:
    content = json.loads(json.dumps(compare_routes(amide_routes).to_dict()))
    assert content["differences"][0]["verdict"] == "not distinguishable"

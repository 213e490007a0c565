from __future__ import annotations

import json
from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from itertools import pairwise
from types import SimpleNamespace

import pytest

from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Route
from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.present.markup import plain
from routeheat.present.table import Reading
from routeheat.process.profile import profile
from routeheat.process.profile_views import step_ladder


@pytest.mark.parametrize(("name", "total", "u"), [("A", -743.0, 23.4), ("B", -205.6, 24.8), ("C", -380.3, 37.1)])
def test_totals_of_linear_routes(amine_routes: dict[str, Route], name: str, total: float, u: float) -> None:
    found = profile(amine_routes[name]).total
    assert (round(found.value, 1), round(found.u, 1)) == (total, u)


@pytest.mark.parametrize(("name", "total", "u", "per_kg"), [("1", -1011.6, 25.4, -2746), ("2", -1009.9, 26.2, -2741)])
def test_totals_of_convergent_routes(
    amide_routes: dict[str, Route], name: str, total: float, u: float, per_kg: float
) -> None:
    found = profile(amide_routes[name]).total
    assert (round(found.value, 1), round(found.u, 1)) == (total, u)
    assert round(profile(amide_routes[name], per="kg").total.value) == per_kg


def test_cumulative_heats_follow_working_order_with_side_rows(amide_routes: dict[str, Route]) -> None:
    found = profile(amide_routes["1"])
    assert [round(item.cumulative.value, 1) for item in found.steps] == [-76.5, -61.0, -97.9, -817.7, -985.0, -1011.6]
    assert round(found.side_total.value, 1) == -36.9


def test_a_linear_route_per_mole_charged(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "-80", "90 %"),
        code.step("S2", "B -> D", "-150", "80 %"),
        code.step("S3", "D -> P", "-45", "75 %"),
    )
    found = profile(made)
    assert [round(item.cumulative.value, 1) for item in found.steps] == [-148.1, -398.1, -458.1]
    assert found.overall_yield == Fraction(54, 100) == found.yield_on_first_reactant


def test_nitric_acid_without_recycle(code: SimpleNamespace) -> None:
    # OpenStax, Chemistry 2e (2019), sec. 5.3: printed answer −494 kJ per mole of HNO3
    made = code.route(
        "N",
        "HNO3(aq)",
        code.step("S1", "4 NH3(g) + 5 O2(g) -> 4 NO(g) + 6 H2O(g)", "-907"),
        code.step("S2", "2 NO(g) + O2(g) -> 2 NO2(g)", "-113"),
        code.step("S3", "3 NO2(g) + H2O(l) -> 2 HNO3(aq) + NO(g)", "-139"),
    )
    assert profile(made).total.exact == Fraction("-494.375")


def test_yields_along_the_longest_chain_and_on_the_first_reactant(amide_routes: dict[str, Route]) -> None:
    found = profile(amide_routes["1"])
    assert (found.chain, round(float(found.overall_yield), 4)) == (("X1", "X2", "C", "F"), 0.7547)
    assert found.yield_on_first_reactant == found.overall_yield / Fraction("1.05")
    assert round(float(profile(amide_routes["2"]).overall_yield), 4) == 0.7343


def test_the_longest_chain_need_not_be_the_first(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B"),
        code.step("S2", "K -> D"),
        code.step("S3", "D -> E"),
        code.step("S4", "B + E -> P", limiting="B"),
    )
    assert profile(made).chain == ("S2", "S3", "S4")


def test_a_batch_is_the_mole_total_times_its_moles(amide_routes: dict[str, Route]) -> None:
    route = amide_routes["1"]
    mass = route.makes.molar_mass
    assert mass is not None
    batch = profile(route, per="12 kg")
    assert batch.unit == "kJ"
    assert batch.total.exact == profile(route).total.exact * 12000 / mass
    assert batch.total.u == pytest.approx(profile(route).total.u * float(12000 / mass))
    assert [item.extent for item in batch.steps] == [item.extent for item in profile(route).steps]


def test_a_route_minus_itself_is_exactly_nothing(amide_routes: dict[str, Route]) -> None:
    difference = profile(amide_routes["1"]).total - profile(amide_routes["1"]).total
    assert (difference.exact, difference.u, difference.terms) == (0, 0.0, ())


def test_the_choice_of_loss_is_named_with_the_other_total(amide_routes: dict[str, Route]) -> None:
    found = profile(amide_routes["1"])
    assert found.total_if("reacted").exact == found.total.exact
    by_hand = sum(
        item.heat.exact * item.step.yield_value if not item.side else item.heat.exact
        for item in found.steps
        if item.heat is not None
    )
    assert found.total_if("unreacted").exact == by_hand
    assert "loss counted as reacted: heat per mole charged" in found.notes
    assert "with the loss of every step counted as unreacted, the total is −922 ± 23 (k = 1) kJ/mol" in found.notes


def test_a_crystallisation_counts_what_it_delivers_unless_typed(amide_routes: dict[str, Route]) -> None:
    route = amide_routes["1"]
    steps = tuple(replace(step, loss="") for step in route.steps)
    found = profile(replace(route, steps=steps))
    assert found["F"].heat is not None
    assert found["F"].heat.exact == -25  # 1/y charged, y of it delivered
    assert "loss counted as unreacted (heat of what the yield delivers) in F" in found.notes


def test_yields_without_uncertainty_are_named(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "-1 ± 1", "90 %"),
        code.step("S2", "B -> D", "-1 ± 1"),
        code.step("S3", "D -> P", "-1 ± 1", "90 ± 1 %"),
    )
    assert profile(made).yield_notes == ("no yield typed, counted as 100 %: S2", "yield uncertainty not included: S1")


def test_temperatures_that_differ_are_named(amine_routes: dict[str, Route]) -> None:
    note = "heats at different temperatures, not brought to one temperature: A1 20 °C; A2 60 °C"
    assert any(text.startswith(note) for text in profile(amine_routes["A"]).notes)
    assert not any("different temperatures" in text for text in profile(amine_routes["B"]).notes)


def _without_heat(route: Route, *labels: str) -> Route:
    return replace(
        route,
        steps=tuple(
            replace(step, row=replace(step.row, heat=None)) if step.label in labels else step for step in route.steps
        ),
    )


def test_a_sum_with_a_missing_heat_is_not_called_a_total(amide_routes: dict[str, Route]) -> None:
    found = profile(_without_heat(amide_routes["1"], "Y1"))
    assert found.not_entered == ("Y1",)
    assert "sum of entered steps; not entered: Y1" in found.notes
    assert found.table().rows[-1][0] == "sum of entered steps"
    assert "total" not in [row[0] for row in found.table().rows]
    assert found.table().rows[2][4] == Reading(None, None, words="not entered")
    gap = found.ladder().columns[0].arrows[3]
    assert (gap.label, gap.caption, gap.end) == ("Y1", "not entered", None)
    assert found.to_dict()["steps"][3]["heat"] is None


def test_nothing_entered_is_never_zero(code: SimpleNamespace) -> None:
    found = profile(code.route("R", "P", code.step("S1", "A -> P")))
    assert found.table().rows[-1][4] == Reading(None, None, words="nothing entered")
    assert found.to_dict()["total"] is None
    assert "0.0" not in found.ladder().alt


def test_largest_exotherm_is_on_the_basis_of_the_product(amide_routes: dict[str, Route]) -> None:
    largest = profile(amide_routes["1"]).largest_exotherm
    assert largest is not None
    assert largest.label == "Y1"


def test_an_endothermic_route_has_no_exotherm(code: SimpleNamespace) -> None:
    assert profile(code.route("R", "P", code.step("S1", "A -> P", "5"))).largest_exotherm is None


def test_side_rows_stand_below_a_subtotal(amide_routes: dict[str, Route]) -> None:
    table = profile(amide_routes["1"]).table()
    assert [row[0] for row in table.rows] == [
        "X1",
        "X2",
        "Y1",
        "C",
        "F",
        "steps without side rows",
        "X2q (side row of X2)",
        "total",
    ]
    assert table.strong == {5, 7}
    released = [row[6] for row in table.rows]
    assert released[0] == pytest.approx(76.52, abs=0.01)
    assert released[1] == pytest.approx(-15.53, abs=0.01)


def test_the_adiabatic_rise_has_a_column_where_known(amine_routes: dict[str, Route]) -> None:
    headers = [plain(column.header) for column in profile(amine_routes["A"]).table().columns]
    assert headers[-1] == "ΔTad"
    assert len(profile(amine_routes["B"]).table().columns) == len(headers) - 1


def test_ladder_heads_show_cumulative_levels_and_captions_own_heats(amide_routes: dict[str, Route]) -> None:
    ladder = profile(amide_routes["1"]).ladder()
    arrows = ladder.columns[0].arrows
    assert [arrow.role for arrow in arrows] == ["step", "step", "side", "step", "step", "step"]
    assert all(a.end == b.start for a, b in pairwise(arrows))
    assert (arrows[-1].caption, round(arrows[-1].end or 0, 1), round(arrows[-1].spread or 0, 1)) == (
        "−26.6 ± 5.3",
        -1011.6,
        25.4,
    )
    assert (ladder.unit, plain(ladder.axis)) == ("kJ mol⁻¹", "cumulative ΔrH")


def test_step_ladder_starts_at_the_reactants(amide_routes: dict[str, Route]) -> None:
    column = step_ladder(amide_routes["1"]).columns[0]
    arrow = column.arrows[0]
    assert (plain(column.start_label), plain(column.end_label)) == ("EST(l) + H2O(l)", "ACI(s) + CH4O(l)")
    assert (arrow.start, arrow.end, arrow.spread) == (0.0, -55.0, 3.0)


def test_a_single_step_without_heat_is_not_drawn(code: SimpleNamespace) -> None:
    ladder = step_ladder(code.step("S1", "A -> P"), k=2.0)
    assert (ladder.columns[0].arrows[0].end, ladder.columns[0].arrows[0].caption) == (None, "not entered")


def test_a_symbolic_heat_keeps_its_letter(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B", "-10"), code.step("S2", "B -> P", "-20"))
    heat = replace(made.steps[1].row.heat, amount=None, symbol="x")
    step = replace(made.steps[1], row=replace(made.steps[1].row, heat=heat))
    found = profile(replace(made, steps=(made.steps[0], step)))
    assert str(found.total.value) == "x - 10"
    assert found.ladder().columns[0].arrows[1].end is None
    assert found.to_dict()["total"]["value"] is None


def test_to_dict_is_json_with_exact_texts(amide_routes: dict[str, Route]) -> None:
    content = json.loads(json.dumps(profile(amide_routes["1"]).to_dict()))
    extent = profile(amide_routes["1"])["X1"].extent
    assert Fraction(content["steps"][0]["extent"]) == extent
    assert "/" in content["steps"][0]["extent"]


def test_text_and_notebook_show_the_same_table(amide_routes: dict[str, Route]) -> None:
    found = profile(amide_routes["1"])
    assert str(found) == found._repr_mimebundle_()["text/plain"] == found.text
    assert found.text.startswith("Route 1: cumulative heat per mole of product\n")


def _dropping(field: str, value: object) -> Callable[[Step], Step]:
    return lambda step: replace(step, **{field: value})  # type: ignore[arg-type]


def _every_datum(route: Route) -> list[tuple[str, Route]]:
    """The route once for each datum, without it."""
    found: list[tuple[str, Route]] = []
    drops: dict[str, tuple[Callable[[Step], bool], Callable[[Step], Step]]] = {
        "heat": (lambda s: s.row.heat is not None, lambda s: replace(s, row=replace(s.row, heat=None))),
        "yield": (lambda s: s.yield_ is not None, _dropping("yield_", None)),
        "equiv": (lambda s: bool(s.equivalents), _dropping("equivalents", ())),
        "limiting": (lambda s: s.limiting is not None, _dropping("limiting", None)),
        "amount": (lambda s: s.amount is not None, _dropping("amount", None)),
        "loss": (lambda s: bool(s.loss), _dropping("loss", "")),
    }
    for step in route.steps:
        for name, (has, drop) in drops.items():
            if has(step):
                steps = tuple(drop(s) if s.label == step.label else s for s in route.steps)
                found.append((f"{name} of {step.label}", replace(route, steps=steps)))
        steps = tuple(s for s in route.steps if s.label != step.label)
        found.append((f"step {step.label}", replace(route, steps=steps)))
    return found


@pytest.mark.parametrize("name", ["1", "2"])
def test_every_datum_counts(amide_routes: dict[str, Route], name: str) -> None:
    whole = profile(amide_routes[name]).total
    for what, route in _every_datum(amide_routes[name]):
        try:
            found = profile(route)
        except RouteError:
            continue
        if what.startswith("heat"):
            assert found.not_entered == (what.removeprefix("heat of "),)
        assert found.total.exact != whole.exact, what


def test_the_uncertainty_of_every_heat_counts(amide_routes: dict[str, Route]) -> None:
    route = amide_routes["1"]
    for step in route.steps:
        heat = step.row.heat
        assert heat is not None
        assert heat.amount is not None
        bare = replace(step, row=replace(step.row, heat=replace(heat, amount=replace(heat.amount, spread=None))))
        total: HeatSum = profile(
            replace(route, steps=tuple(bare if s.label == step.label else s for s in route.steps))
        ).total
        assert total.not_stated == (step.label,)
        assert "at least" in total.text

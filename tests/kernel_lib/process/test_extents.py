"""Extents per mole of product, and their exact derivatives."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from types import SimpleNamespace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.chem.step import Recycle, Step
from routeheat.process.extents import extents, net_equation, theoretical
from routeheat.units import read_unit


def test_a_linear_route(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "-80", "90 %"),
        code.step("S2", "B -> D", "-150", "80 %"),
        code.step("S3", "D -> P", "-45", "75 %"),
    )
    found = extents(made)
    assert [round(float(found[s.label]), 4) for s in made.steps] == [1.8519, 1.6667, 1.3333]
    assert found["S1"] == 1 / (Fraction("0.9") * Fraction("0.8") * Fraction("0.75"))


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("1", {"X1": 1.3913, "X2": 1.2939, "X2q": 0.3882, "Y1": 1.3135, "C": 1.1953, "F": 1.0638}),
        ("2", {"X1": 1.3618, "Y1": 1.4613, "C2": 1.2665, "F": 1.0638}),
    ],
)
def test_convergent_routes_with_excess(amide_routes: dict[str, Route], name: str, expected: dict[str, float]) -> None:
    found = extents(amide_routes[name])
    assert {label: round(float(value), 4) for label, value in found.values.items()} == expected


def nitric_acid(code: SimpleNamespace, part: str = "") -> Route:
    # OpenStax, Chemistry 2e (2019), sec. 5.3: the Ostwald process per mole of HNO3
    recycle = [("NO(g)", "S3", part)] if part else []
    return code.route(
        "N",
        "HNO3(aq)",
        code.step("S1", "4 NH3(g) + 5 O2(g) -> 4 NO(g) + 6 H2O(g)", "-907"),
        code.step("S2", "2 NO(g) + O2(g) -> 2 NO2(g)", "-113", recycle=recycle),
        code.step("S3", "3 NO2(g) + H2O(l) -> 2 HNO3(aq) + NO(g)", "-139"),
    )


def test_coefficients_of_intermediates(code: SimpleNamespace) -> None:
    assert extents(nitric_acid(code)).values == {"S1": Fraction(3, 8), "S2": Fraction(3, 4), "S3": Fraction(1, 2)}


def test_a_recycle_from_a_later_step_takes_load_off_the_first(code: SimpleNamespace) -> None:
    found = extents(nitric_acid(code, "100 %"))
    assert found.values == {"S1": Fraction(1, 4), "S2": Fraction(3, 4), "S3": Fraction(1, 2)}


def test_a_diamond_adds_up_both_branches(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "", "50 %"),
        code.step("S2", "B -> D"),
        code.step("S3", "2 B -> E"),
        code.step("S4", "D + E -> P", limiting="D"),
    )
    assert extents(made)["S1"] == 6


def test_a_product_used_twice(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "", "80 %"),
        code.step("S2", "B + K -> D", "", "50 %"),
        code.step("S3", "D + B -> P", limiting="D"),
    )
    assert extents(made)["S1"] == (2 + 1) / Fraction("0.8")


def test_equivalents_of_an_intermediate_scale_only_its_makers(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B"),
        code.step("S2", "K -> D"),
        code.step("S3", "B + D -> P", limiting="B", equiv={"D": "1.2"}),
    )
    assert extents(made).values == {"S1": 1, "S2": Fraction(6, 5), "S3": 1}


def test_equivalents_of_a_bought_reagent_scale_nothing(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P", equiv={"K": "3"}))
    assert extents(made).values == {"S1": 1}


def test_a_side_row_follows_the_limiting_reactant_of_its_parent(code: SimpleNamespace) -> None:
    made = code.route(
        "R", "P", code.step("S1", "2 A -> P", "", "50 %"), code.step("Q", "K -> N", side="S1", amount="0.25")
    )
    assert extents(made)["Q"] == 1  # 4 mol of A charged


@given(st.fractions(min_value=Fraction(1, 10), max_value=1), st.fractions(min_value=0, max_value=Fraction(9, 10)))
def test_a_recycle_to_itself_is_the_geometric_series(y: Fraction, r: Fraction) -> None:
    # unreacted A comes back: per mole charged, r·(1 − y) is charged again, and so on
    made = _loop(y, r)
    n = 400
    q = r * (1 - y)
    series = (1 - q**n) / (1 - q)
    feed = 1 / (y * series)
    assert abs(extents(made)["S1"] - feed) <= feed * q**n / (1 - q)
    assert extents(made)["S2"] == 1 / y


def _loop(y: Fraction, r: Fraction) -> Route:
    pure = read_unit("")
    a, b, p = (Species(name, declared=True) for name in "ABP")
    one = Fraction(1)
    first = Step(Row("S1", Reaction(((one, a),), ((one, b),))))
    second = Step(
        Row("S2", Reaction(((one, b),), ((one, p),))),
        yield_=Measured(y, pure),
        loss="unreacted",
        recycles=(Recycle(b, "S2", Measured(r, pure)),) if r * (1 - y) else (),
    )
    return Route("R", "", p, (first, second))


def _with(route: Route, label: str, change: Fraction, recycle: bool) -> Route:
    """The route with a yield or a recycled part moved by ``change``."""

    def moved(step: Step) -> Step:
        if step.label != label:
            return step
        if recycle:
            item = step.recycles[0]
            return replace(step, recycles=(replace(item, part=_plus(item.part, change)),))
        assert step.yield_ is not None
        return replace(step, yield_=_plus(step.yield_, change))

    return replace(route, steps=tuple(moved(step) for step in route.steps))


def _plus(value: Measured, change: Fraction) -> Measured:
    return Measured(value.value * value.unit.factor + change, read_unit(""))


@pytest.mark.parametrize("loss", ["reacted", "unreacted"])
def test_derivatives_agree_with_central_differences(code: SimpleNamespace, loss: str) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "-10", "90 %"),
        code.step("S2", "2 B + M -> D", "-20", "80 %", recycle=[("B", "S3", "60 %")]),
        code.step("S3", "D + K -> P + B", "-30", "70 %", loss=loss),
        code.step("Q", "K -> N", side="S2", amount="0.5"),
    )
    h = Fraction(1, 10**6)
    found = extents(made)
    assert [datum.name for datum, _ in found.sensitivities] == [
        "yield of S1",
        "yield of S2",
        "recycle of S2",
        "yield of S3",
    ]
    for datum, derivative in found.sensitivities:
        recycle = datum.what == "recycle"
        up, down = (extents(_with(made, datum.label, step, recycle)) for step in (h, -h))
        for label, exact in derivative.items():
            numeric = (up[label] - down[label]) / (2 * h)
            assert abs(exact - numeric) < Fraction(1, 10**8), (datum.name, label)
    assert any(value for _, derivative in found.sensitivities for value in derivative.values())


def test_theoretical_extents_know_no_losses(amide_routes: dict[str, Route]) -> None:
    links = extents(amide_routes["1"]).links
    assert theoretical(links) == {"X1": 1, "X2": 1, "Y1": 1, "C": 1, "F": 1}


def test_the_net_equation_has_no_intermediates(code: SimpleNamespace) -> None:
    # OpenStax, Chemistry 2e (2019), sec. 5.3: 3/2 NH3 + 21/8 O2 -> HNO3 + 1/2 NO + 7/4 H2O (its two phases apart)
    net = net_equation(extents(nitric_acid(code, "100 %")).links)
    assert {species.text: nu for species, nu in net.net.items()} == {
        "NH3(g)": Fraction(-3, 2),
        "O2(g)": Fraction(-21, 8),
        "H2O(g)": Fraction(9, 4),
        "H2O(l)": Fraction(-1, 2),
        "HNO3(aq)": 1,
        "NO(g)": Fraction(1, 2),
    }

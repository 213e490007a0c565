"""Routes with one net equation must have one heat; routes that differ by known rows must differ by their heat."""

from __future__ import annotations

from types import SimpleNamespace

import pytest

from routeheat.chem.route import Route
from routeheat.present.markup import plain
from routeheat.process.closure import Closure
from routeheat.process.compare import compare_routes


def closure(*routes: Route) -> Closure:
    return compare_routes(routes).closures[0]


@pytest.mark.parametrize(
    ("heat", "verdict"),
    [
        ("-31 ± 1", "closes within its uncertainty"),
        ("-40 ± 1", "does not close: −10.0 ± 1.4 (k = 1) kJ/mol is not zero within twice its standard uncertainty"),
    ],
)
def test_equal_net_equations(code: SimpleNamespace, heat: str, verdict: str) -> None:
    # yields and excess of the actual routes must not disturb the check
    a = code.route(
        "A",
        "P(l)",
        code.step("S1", "A(l) -> B(l)", "-10", "50 %"),
        code.step("S2", "B(l) + K(l) -> P(l)", "-20 ± 1", "70 %", equiv={"K(l)": "2"}),
    )
    a = code.route("A", "P(l)", code.step("S1", "A(l) -> B(l)", "-10 ± 0", "50 %"), a.steps[1])
    b = code.route("B", "P(l)", code.step("S3", "A(l) + K(l) -> P(l)", heat, "90 %"))
    found = closure(a, b)
    assert found.verdict == verdict
    assert found.rows == ()


def test_a_difference_of_known_rows_is_taken_off(code: SimpleNamespace) -> None:
    # heats of two ways to methyl acetate differ by the hydrolysis of the anhydride, −58.37 kJ/mol (arithmetic on
    # formation enthalpies); values of the routes are −8.23 and −66.60
    known = [code.row("K1", "C4H6O3(l) + H2O(l) -> 2 C2H4O2(l)", "-58.37 ± 0.5")]
    a = code.route(
        "A", "C3H6O2(l)", code.step("S1", "C2H4O2(l) + CH4O(l) -> C3H6O2(l) + H2O(l)", "-8.23 ± 1", "85 %"), known=known
    )
    b = code.route(
        "B",
        "C3H6O2(l)",
        code.step("S2", "C4H6O3(l) + CH4O(l) -> C3H6O2(l) + C2H4O2(l)", "-66.6 ± 1.5", "95 %"),
        known=known,
    )
    found = closure(a, b)
    assert (found.rows, found.verdict) == (("K1",), "closes within its uncertainty over K1")
    assert found.discrepancy is not None
    assert found.discrepancy.exact == 0
    assert found.discrepancy.coefficients == {"S1": -1, "S2": 1, "K1": -1}


def test_no_check_when_known_rows_do_not_reach(code: SimpleNamespace) -> None:
    a = code.route("A", "P(l)", code.step("S1", "A(l) -> P(l)", "-10 ± 1"))
    b = code.route("B", "P(l)", code.step("S2", "K(l) -> P(l)", "-10 ± 1"))
    found = closure(a, b)
    assert found.verdict == "no check: the net equations differ by K(l) → A(l)"
    assert found.discrepancy is None


def test_formulas_in_the_verdict_have_subscripts(code: SimpleNamespace) -> None:
    a = code.route("A", "C3H6O2(l)", code.step("S1", "C2H4O2(l) + CH4O(l) -> C3H6O2(l) + H2O(l)", "-8 ± 1"))
    b = code.route("B", "C3H6O2(l)", code.step("S2", "C4H6O3(l) + CH4O(l) -> C3H6O2(l) + C2H4O2(l)", "-66 ± 1"))
    found = closure(a, b)
    assert plain(found.words) == found.verdict
    assert "sub" in {run.style for run in found.words}


def test_a_heat_derived_from_the_same_rows_checks_nothing(code: SimpleNamespace) -> None:
    known = [code.row("K1", "A(l) -> P(l)", "-10 ± 1")]
    a = code.route("A", "P(l)", code.step("S1", "A(l) -> P(l)"), known=known)
    b = code.route("B", "P(l)", code.step("S2", "A(l) -> P(l)"), known=known)
    assert closure(a, b).verdict == "no check: both sides rest on the same data"


def test_a_label_with_two_meanings_is_not_used(code: SimpleNamespace) -> None:
    a = code.route(
        "A", "P(l)", code.step("S1", "A(l) -> P(l)", "-10 ± 1"), known=[code.row("K1", "K(l) -> A(l)", "-5 ± 1")]
    )
    b = code.route(
        "B", "P(l)", code.step("S2", "K(l) -> P(l)", "-15 ± 1"), known=[code.row("K1", "K(l) -> A(l)", "-50 ± 1")]
    )
    assert closure(a, b).verdict.startswith("no check")


def test_temperatures_are_named(code: SimpleNamespace) -> None:
    a = code.route("A", "P(l)", code.step("S1", "A(l) -> P(l)", "-10 ± 1", at="20 degC"))
    b = code.route("B", "P(l)", code.step("S2", "A(l) -> P(l)", "-10 ± 1", at="80 degC"))
    assert closure(a, b).notes == (
        "heats at different temperatures, not brought to one temperature: S1 20 °C; S2 80 °C",
    )

"""Values with uncertainty and refusals."""

from __future__ import annotations

from fractions import Fraction

import pytest

from routeheat.chem.measured import Measured, Spread
from routeheat.process.assessed import NotAssessed, Value, from_measured, propagate
from routeheat.units import CELSIUS, read_unit


def test_product_propagates_relative_uncertainties() -> None:
    found = propagate(lambda x, y: x * y, (Value(10.0, 0.3), Value(20.0, 0.8)))
    assert found.value == 200.0
    assert found.u == pytest.approx(200 * (0.03**2 + 0.04**2) ** 0.5, rel=1e-9)
    assert found.complete


def test_an_unstated_input_makes_a_lower_bound() -> None:
    found = propagate(lambda x, y: x + y, (Value(1.0, 0.5), Value(2.0)))
    assert (found.u, found.at_least) == (pytest.approx(0.5), True)


def test_nothing_stated_is_neither_zero_nor_a_guess() -> None:
    found = propagate(lambda x, y: x + y, (Value(1.0), Value(2.0)))
    assert (found.u, found.at_least, found.complete) == (None, False, False)


def test_exact_inputs_have_an_exact_result() -> None:
    assert propagate(lambda x: 2 * x, (Value(1.0, 0.0),)).u == 0.0


def test_uncertainty_of_a_temperature_is_a_difference() -> None:
    typed = Measured(Fraction("300"), read_unit("K"), Spread(Fraction(4), Fraction(2)))
    found = from_measured(typed, CELSIUS)
    assert (found.value, found.u) == (pytest.approx(26.85), 2.0)


@pytest.mark.parametrize(
    ("refusal", "text"),
    [
        (NotAssessed("not classifiable", ("TD24",)), "not classifiable: TD24 missing"),
        (NotAssessed("no TD24", ("TD24",), "autocatalytic"), "no TD24: TD24 missing; autocatalytic"),
        (NotAssessed("none", reason="endothermic"), "none: endothermic"),
    ],
)
def test_refusals_say_why(refusal: NotAssessed, text: str) -> None:
    assert str(refusal) == text
    assert refusal.to_dict()["not_assessed"] == text

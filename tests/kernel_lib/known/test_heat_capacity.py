"""Heat capacities: the forms agree with each other and with their definitions, and refuse what they do not cover."""

import math
import pickle

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.known.heat_capacity import (
    GAS_CONSTANT,
    ConstantCp,
    HeatCapacity,
    Nasa7,
    Nasa9,
    Nasa9Interval,
    OutOfRange,
    PolynomialCp,
    Shomate,
)

# one invented Cp(T) = 30 + 0.01 T written in each form
LINEAR = {
    "polynomial": PolynomialCp((30.0, 0.01), 200.0, 1000.0),
    "Shomate": Shomate(30.0, 10.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 200.0, 1000.0),
    "NASA-7": Nasa7((30.0 / GAS_CONSTANT, 0.01 / GAS_CONSTANT, 0.0, 0.0, 0.0, 0.0), 200.0, 1000.0),
    "NASA-9": Nasa9(
        (
            Nasa9Interval(200.0, 600.0, (0, 0, 30.0 / GAS_CONSTANT, 0.01 / GAS_CONSTANT, 0, 0, 0), 0.0),
            Nasa9Interval(600.0, 1000.0, (0, 0, 30.0 / GAS_CONSTANT, 0.01 / GAS_CONSTANT, 0, 0, 0), 0.0),
        )
    ),
}


@pytest.mark.parametrize("form", LINEAR.values(), ids=LINEAR)
def test_each_form_gives_the_same_heat_capacity(form: HeatCapacity) -> None:
    assert form.cp(500.0) == pytest.approx(35.0)


@pytest.mark.parametrize("form", LINEAR.values(), ids=LINEAR)
def test_each_form_integrates_to_the_same_enthalpy(form: HeatCapacity) -> None:
    # 30 (800 - 300) + 0.01 (800² - 300²)/2 = 17 750 J/mol
    assert form.enthalpy_difference(300.0, 800.0) == pytest.approx(17.75)


def test_constant_heat_capacity_integrates_to_a_rectangle() -> None:
    assert ConstantCp(75.3).enthalpy_difference(298.15, 308.15) == pytest.approx(0.753)


@given(t1=st.floats(200.0, 1000.0), t2=st.floats(200.0, 1000.0))
def test_the_enthalpy_difference_changes_sign_with_the_direction(t1: float, t2: float) -> None:
    form = LINEAR["NASA-9"]
    assert form.enthalpy_difference(t1, t2) == -form.enthalpy_difference(t2, t1)


@given(t=st.floats(310.0, 990.0))
def test_the_heat_capacity_is_the_slope_of_the_enthalpy(t: float) -> None:
    form = Nasa9((Nasa9Interval(300.0, 1000.0, (4e4, -800.0, 8.2, -0.0127, 1.75e-5, -1.2e-8, 3.4e-12), 2682.0),))
    slope = form.enthalpy_difference(t - 0.5, t + 0.5) * 1000
    assert slope == pytest.approx(form.cp(t), rel=1e-5)


@pytest.mark.parametrize("form", LINEAR.values(), ids=LINEAR)
def test_outside_the_range_there_is_no_number(form: HeatCapacity) -> None:
    with pytest.raises(OutOfRange) as caught:
        form.cp(1000.1)
    assert caught.value.reason == "1000.1 K lies outside the 200 to 1000 K of this heat capacity"


def test_an_enthalpy_that_ends_outside_the_range_is_refused() -> None:
    with pytest.raises(OutOfRange):
        LINEAR["polynomial"].enthalpy_difference(300.0, 150.0)


def test_the_refusal_pickles_with_its_temperatures() -> None:
    error = pickle.loads(pickle.dumps(OutOfRange(150.0, 200.0, 1000.0, "invented")))
    assert (error.temperature, error.low, error.high, error.source) == (150.0, 200.0, 1000.0, "invented")


def test_a_form_that_starts_at_300_reaches_down_to_298_with_a_warning() -> None:
    form = PolynomialCp((30.0,), 300.0, 1000.0)
    assert form.covers(298.15)
    assert form.warning(298.15) == "the heat capacity starts at 300.000 K: extrapolated by 1.85 K"
    assert form.warning(300.0) == ""


def test_no_other_extrapolation_is_allowed() -> None:
    assert not PolynomialCp((30.0,), 300.0, 1000.0).covers(298.0)
    assert not PolynomialCp((30.0,), 301.0, 1000.0).covers(298.15)


def test_a_shomate_enthalpy_starts_at_298_though_the_fit_starts_higher() -> None:
    # by definition H(298.15 K) is the zero of the form, so only its constant F - H counts there
    form = Shomate(30.0, 0.0, 0.0, 0.0, 0.0, -9.0, 0.0, 0.0, 500.0, 1000.0)
    assert form.enthalpy_difference(298.15, 500.0) == pytest.approx(6.0)
    with pytest.raises(OutOfRange):
        form.cp(298.15)


def test_a_nasa9_fit_from_300_starts_at_the_tabulated_formation_enthalpy() -> None:
    interval = Nasa9Interval(300.0, 1000.0, (0, 0, 4.0, 0, 0, 0, 0), 0.0)
    fit = Nasa9((interval,), formation_enthalpy=9.0)
    assert fit.enthalpy_difference(298.15, 400.0) == pytest.approx(4.0 * GAS_CONSTANT * 0.4 - 9.0)


def test_a_constant_without_a_range_covers_everything() -> None:
    assert ConstantCp(75.3).high == math.inf


def test_nasa9_intervals_that_leave_a_gap_are_refused() -> None:
    with pytest.raises(ValueError, match="do not adjoin"):
        Nasa9((Nasa9Interval(200.0, 500.0, (0,) * 7, 0.0), Nasa9Interval(600.0, 900.0, (0,) * 7, 0.0)))


@pytest.mark.parametrize("coefficients", [(1.0,) * 5, (1.0,) * 8])
def test_a_nasa7_range_with_a_wrong_number_of_coefficients_is_refused(coefficients: tuple[float, ...]) -> None:
    with pytest.raises(ValueError, match="6 or 7 coefficients"):
        Nasa7(coefficients, 300.0, 1000.0)

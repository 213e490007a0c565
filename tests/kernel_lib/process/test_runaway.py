"""Formulas of the adiabatic rise, TMRad, TD24 and boiling."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.process import runaway

energies = st.floats(4e4, 2.5e5)
temperatures = st.floats(260.0, 480.0)


@given(energies, temperatures, st.floats(1e-3, 1e3), st.floats(800.0, 4000.0))
def test_td24_has_a_tmrad_of_one_day(energy: float, at: float, rate: float, cp: float) -> None:
    found = runaway.td24(rate, at, cp, energy)
    if found is not None:
        there = runaway.arrhenius(rate, at, found, energy)
        assert runaway.tmrad(found, there, cp, energy) == pytest.approx(86400.0, rel=1e-6)
        assert runaway.tmrad_from_td24(found, found, energy) == pytest.approx(86400.0)


@given(energies, temperatures, st.floats(1.0, 50.0))
def test_tmrad_falls_as_temperature_rises(energy: float, at: float, step: float) -> None:
    one, two = (runaway.tmrad_from_td24(kelvin, 350.0, energy) for kelvin in (at, at + step))
    assert two < one


def test_tmrad_from_td24_is_that_from_the_rate() -> None:
    limit = runaway.td24(10.0, 453.15, 1800.0, 1e5)
    assert limit is not None
    rate = runaway.arrhenius(10.0, 453.15, 420.0, 1e5)
    assert runaway.tmrad_from_td24(420.0, limit, 1e5) == pytest.approx(runaway.tmrad(420.0, rate, 1800.0, 1e5))


@given(energies, st.floats(280.0, 420.0))
def test_integral_is_longer_and_follows_its_series(energy: float, at: float) -> None:
    ratio = runaway.tmrad_integral(at, 1.0, 2000.0, energy) / runaway.tmrad(at, 1.0, 2000.0, energy)
    small = runaway.R * at / energy
    assert ratio > 1 + 2 * small * 0.99
    # the first term left out bounds an asymptotic series; 9 leaves room for the end of the integral
    assert abs(ratio - (1 + 2 * small + 6 * small**2)) < 9 * 24 * small**3 + math.exp(-0.5 / small)


def test_integral_makes_td24_higher() -> None:
    plain = runaway.td24(10.0, 453.15, 1800.0, 1e5)
    exact = runaway.td24(10.0, 453.15, 1800.0, 1e5, integral=True)
    assert plain is not None
    assert exact is not None
    assert 0 < exact - plain < 2


def test_integral_is_refused_above_its_range() -> None:
    with pytest.raises(ValueError, match="E/2R"):
        runaway.tmrad_integral(400.0, 1.0, 2000.0, 2 * runaway.R * 400.0)


def test_td24_out_of_range_is_none() -> None:
    assert runaway.td24(1e-30, 300.0, 2000.0, 5e4) is None
    assert runaway.td24(1.0, 300.0, 2000.0, 1000.0) is None


def test_activation_energy_inverts_arrhenius() -> None:
    rate = runaway.arrhenius(5.0, 393.15, 413.15, 93_600.0)
    assert runaway.activation_energy(5.0, 393.15, rate, 413.15) == pytest.approx(93_600.0)


def test_molar_and_specific_rise_agree() -> None:
    assert runaway.adiabatic_rise(-100.0, 1.5, 2.0) == runaway.specific_adiabatic_rise(-150.0, 2.0) == 75.0


def test_mass_correction_raises_mtsr() -> None:
    assert runaway.mtsr(20.0, 100.0, 0.3, 1.25) == pytest.approx(57.5)


def test_boiling_point_at_its_own_pressure_and_below() -> None:
    assert runaway.boiling_point(101325.0, 373.15, 101325.0, 40_650.0) == pytest.approx(373.15)
    # water at 200 mbar boils at 60 °C (steam tables, from memory); constant heat of vaporisation costs a kelvin or two
    assert runaway.boiling_point(20_000.0, 373.15, 101325.0, 40_650.0) - 273.15 == pytest.approx(60.0, abs=2.0)


def test_pressure_limit_without_gas_is_the_boiling_point_at_that_pressure() -> None:
    found = runaway.pressure_limit(5e5, 373.15, 101325.0, 40_650.0)
    assert found == pytest.approx(runaway.boiling_point(5e5, 373.15, 101325.0, 40_650.0))


def test_gas_lowers_the_pressure_limit() -> None:
    without = runaway.pressure_limit(5e5, 373.15, 101325.0, 40_650.0)
    assert without is not None
    with_gas = runaway.pressure_limit(5e5, 373.15, 101325.0, 40_650.0, 100.0, 1.0)
    assert with_gas is not None
    assert with_gas < without


def test_endothermic_mixture_gains_no_speed() -> None:
    assert runaway.speed_equivalent_km_per_s(50.0) == 0.0

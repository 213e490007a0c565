"""TD24 and MTT from what is typed, or refused."""

from __future__ import annotations

from types import SimpleNamespace

import pytest

from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.limits import HeatRate, Limit, amount_charged, heat_rate, mtt, td24
from routeheat.process.settings import Settings

CP = Value(1.8)


@pytest.fixture
def keys(code: SimpleNamespace):  # type: ignore[no-untyped-def]
    """Settings from short texts; flags as True."""

    def made(**typed: object) -> Settings:
        return Settings((key, code.measured(item) if isinstance(item, str) else item) for key, item in typed.items())

    return made


def test_typed_td24_wins_over_a_rate(keys) -> None:  # type: ignore[no-untyped-def]
    found = td24(keys(TD24="95 ± 4 degC", qref="10 W/kg", Tref="180 degC", E="100 kJ/mol"), CP)
    assert isinstance(found, Limit)
    assert (found.celsius.value, found.celsius.u, found.origin) == (95.0, 4.0, "typed")


def test_td24_from_a_rate(keys) -> None:  # type: ignore[no-untyped-def]
    found = td24(keys(qref="10 W/kg", Tref="180 degC", E="100 kJ/mol"), CP)
    assert isinstance(found, Limit)
    assert found.celsius.value == pytest.approx(126.0, abs=0.2)
    assert not found.provisional
    assert "with the integral instead" in found.notes[0]


def test_td24_from_two_rates(keys) -> None:  # type: ignore[no-untyped-def]
    rates = keys(qref="5 W/kg", Tref="120 degC", qref2="20 W/kg", Tref2="140 degC")
    found = heat_rate(rates)
    assert isinstance(found, HeatRate)
    assert found.energy.value == pytest.approx(93.6, abs=0.05)
    assert isinstance(td24(rates, CP), Limit)


def test_onset_with_detection_limit_and_energy_is_provisional(keys) -> None:  # type: ignore[no-untyped-def]
    found = td24(keys(onset="180 degC", detection="10 W/kg", E="50 kJ/mol"), CP)
    assert isinstance(found, Limit)
    assert found.provisional
    assert "from memory" in found.origin


@pytest.mark.parametrize(("absent", "words"), [("detection", "detection missing"), ("E", "E missing")])
def test_onset_alone_is_no_td24(keys, absent: str, words: str) -> None:  # type: ignore[no-untyped-def]
    typed = {"onset": "180 degC", "detection": "10 W/kg", "E": "50 kJ/mol"}
    del typed[absent]
    found = td24(keys(**typed), CP)
    assert isinstance(found, NotAssessed)
    assert found.missing == ("TD24",)
    assert f"an onset is not a TD24: {words}" in found.text


@pytest.mark.parametrize("absent", ["qref", "Tref", "E"])
def test_rate_with_something_missing(keys, absent: str) -> None:  # type: ignore[no-untyped-def]
    typed = {"qref": "10 W/kg", "Tref": "180 degC", "E": "100 kJ/mol"}
    del typed[absent]
    found = td24(keys(**typed), CP)
    assert isinstance(found, NotAssessed)
    assert f"{absent} missing" in found.text


def test_autocatalytic_refuses_zero_order_but_keeps_a_measured_td24(keys) -> None:  # type: ignore[no-untyped-def]
    rate = {"qref": "10 W/kg", "Tref": "180 degC", "E": "100 kJ/mol", "autocatalytic": True}
    refused = td24(keys(**rate), CP)
    assert isinstance(refused, NotAssessed)
    assert "autocatalytic" in refused.text
    measured = td24(keys(TD24="95 degC", **rate), CP)
    assert isinstance(measured, Limit)
    assert "thermal history" in measured.notes[0]


def test_td24_from_a_rate_needs_cp(keys) -> None:  # type: ignore[no-untyped-def]
    found = td24(keys(qref="10 W/kg", Tref="180 degC", E="100 kJ/mol"), None)
    assert isinstance(found, NotAssessed)
    assert "cp of the mixture" in found.text


def test_uncertain_rate_makes_an_uncertain_td24(keys) -> None:  # type: ignore[no-untyped-def]
    found = td24(keys(qref="10 ± 2 W/kg", Tref="180 degC", E="100 ± 10 kJ/mol"), CP)
    assert isinstance(found, Limit)
    assert found.celsius.u is not None
    assert found.celsius.u > 3
    assert found.celsius.at_least


def test_units_never_change_td24(keys) -> None:  # type: ignore[no-untyped-def]
    one = td24(keys(qref="10 W/kg", Tref="180 degC", E="100 kJ/mol"), CP)
    two = td24(keys(qref="10000 W/t", Tref="453.15 K", E="100000 J/mol"), CP)
    assert one == two


def test_typed_mtt(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(MTT="110 degC", boiling="100 degC"), None, 0.0)
    assert isinstance(found, Limit)
    assert found.celsius.value == 110.0


def test_missing_mtt(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(), None, 0.0)
    assert isinstance(found, NotAssessed)
    assert found.missing == ("MTT",)


def test_boiling_point_at_the_operating_pressure(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(boiling="100 degC", pressure="200 mbar", latent="2257 kJ/kg", vapourM="18.015 g/mol"), None, 0.0)
    assert isinstance(found, Limit)
    assert found.celsius.value == pytest.approx(60.0, abs=2.0)


def test_boiling_point_at_another_pressure_needs_the_latent_heat(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(boiling="100 degC", pressure="200 mbar"), None, 0.0)
    assert isinstance(found, NotAssessed)
    assert "latent and vapourM" in found.text


def closed(**more: object) -> dict[str, object]:
    return {
        "boiling": "100 degC",
        "closed": True,
        "pmax": "6 bar",
        "latent": "2257 kJ/kg",
        "vapourM": "18.015 g/mol",
        **more,
    }


def test_closed_vessel_reaches_its_pressure_limit(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(**closed()), None, 0.0)
    assert isinstance(found, Limit)
    # saturated steam at 6 bar: 158.8 °C (steam tables, from memory); constant heat of vaporisation
    assert found.celsius.value == pytest.approx(158.8, abs=3.0)


def test_gas_in_a_closed_vessel_needs_headspace_and_batch(keys) -> None:  # type: ignore[no-untyped-def]
    found = mtt(keys(**closed()), None, 1.0)
    assert isinstance(found, NotAssessed)
    assert "headspace, size" in found.text
    with_gas = mtt(keys(**closed(headspace="1 m3")), 50.0, 1.0)
    without = mtt(keys(**closed()), None, 0.0)
    assert isinstance(with_gas, Limit)
    assert isinstance(without, Limit)
    assert with_gas.celsius.value < without.celsius.value


def test_closed_vessel_without_its_limit(keys) -> None:  # type: ignore[no-untyped-def]
    typed = closed()
    del typed["pmax"]
    found = mtt(keys(**typed), None, 0.0)
    assert isinstance(found, NotAssessed)
    assert "pmax" in found.text


def test_amount_from_size_or_mass(keys) -> None:  # type: ignore[no-untyped-def]
    assert amount_charged(keys(size="0.4 kmol"), None) == 400.0
    assert amount_charged(keys(mass="250 kg"), Value(1.6)) == 400.0
    assert amount_charged(keys(mass="250 kg"), None) is None

"""A step in the vessel: what is worked out, what is refused, and that units change nothing."""

from __future__ import annotations

import json
from dataclasses import replace
from itertools import combinations
from types import SimpleNamespace

import pytest
from hypothesis import given
from hypothesis import strategies as st

import routeheat as rh
from routeheat.chem.step import Step
from routeheat.errors import RouteError, UnitError
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.feed import Boiling, FeedCheck
from routeheat.process.levels import Thresholds
from routeheat.process.runaway import adiabatic_rise, specific_adiabatic_rise
from routeheat.process.vessel import vessel

FULL = {
    "feed": "1.5 h",
    "Xac": "0.30",
    "MTT": "130 degC",
    "TD24": "95 degC",
    "size": "400 mol",
    "U": "350 W/(m2 K)",
    "area": "1.4 m2",
    "jacket": "-10 degC",
}


def typed(code: SimpleNamespace, step: Step, **keys: object) -> Step:
    settings = {**dict(step.row.settings)}
    for key, item in keys.items():
        settings[key] = code.measured(item) if isinstance(item, str) and item[:1] in "0123456789-" else item
    return replace(step, row=replace(step.row, settings=tuple(settings.items())))


@pytest.fixture
def nitration(code: SimpleNamespace) -> Step:
    made = code.step("A1", "C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)", "-135 ± 8", conc="1.6", cp="1.75", at="20 degC")
    return typed(code, made, **FULL)


def test_heat_on_every_basis(nitration: Step) -> None:
    found = vessel(nitration)
    assert found.heat == Value(-135.0, 8.0)
    assert isinstance(found.specific_heat, Value)
    assert found.specific_heat.value == pytest.approx(-216.0)
    assert isinstance(found.rise, Value)
    assert found.rise.value == pytest.approx(123.43, abs=0.01)
    assert found.rise.at_least
    assert (found.mode, found.exothermic) == ("feed", True)


def test_heat_is_per_mole_of_limiting_reactant(code: SimpleNamespace) -> None:
    step = code.step("A", "2 H2(g) + O2(g) -> 2 H2O(l)", "-571.6", conc="1", cp="4", at="20 degC", limiting="H2(g)")
    assert vessel(step).heat.value == pytest.approx(-285.8)


def test_profile_and_vessel_agree_on_the_rise(amine_routes: dict) -> None:
    profile = rh.profile(amine_routes["A"])
    for item in profile.steps:
        found = vessel(item)
        assert item.adiabatic_rise is not None
        assert found.rise.value == pytest.approx(item.adiabatic_rise.value, rel=1e-12)
        assert found.rise.u == pytest.approx(item.adiabatic_rise.u, rel=1e-9)


def test_step_with_its_route_is_the_step_of_the_profile(amine_routes: dict) -> None:
    route = amine_routes["A"]
    assert vessel(route.steps[0], route=route) == vessel(rh.profile(route)["A1"])


def test_step_that_is_not_in_the_route(amine_routes: dict, nitration: Step) -> None:
    with pytest.raises(RouteError, match="no step of route"):
        vessel(replace(nitration, row=replace(nitration.row, label="Z")), route=amine_routes["A"])


def test_limiting_reactant_taken_is_said(nitration: Step) -> None:
    assert "limiting reactant not stated: C6H6(l) is taken" in vessel(nitration).notices


@pytest.mark.parametrize(
    ("key", "same"),
    [
        ("MTT", "403.15 K"),
        ("TD24", "368.15 K"),
        ("feed", "90 min"),
        ("Xac", "30 %"),
        ("size", "0.4 kmol"),
        ("U", "0.35 kW/(m2 K)"),
        ("area", "14000 cm2"),
        ("jacket", "263.15 K"),
    ],
)
def test_units_never_change_a_result(code: SimpleNamespace, nitration: Step, key: str, same: str) -> None:
    one, two = vessel(nitration).to_dict(), vessel(typed(code, nitration, **{key: same})).to_dict()
    assert one == two


def test_calories_never_change_a_result(code: SimpleNamespace) -> None:
    joule = code.step("A", "C6H6(l) -> C6H6(g)", "-41.84 ± 4.184", conc="1.5", cp="2.092", at="20 degC")
    calorie = replace(
        joule,
        row=replace(joule.row, heat=replace(joule.row.heat, amount=code.measured("-10 ± 1 kcal/mol"))),
        heat_capacity=code.measured("0.5 cal/(g K)"),
        temperature=code.measured("293.15 K"),
    )
    one, two = vessel(joule), vessel(calorie)
    assert one.rise.value == pytest.approx(30.0)
    assert one.to_dict() == two.to_dict()


def test_wrong_kind_of_quantity_is_refused(code: SimpleNamespace, nitration: Step) -> None:
    with pytest.raises(UnitError):
        vessel(typed(code, nitration, U="350 W/kg"))


NEEDED = ("heat", "concentration", "heat_capacity", "temperature")


@pytest.mark.parametrize("gone", [c for n in range(1, 5) for c in combinations(NEEDED, n)])
def test_every_subset_of_missing_inputs_is_refused_by_name(nitration: Step, gone: tuple[str, ...]) -> None:
    names = {"heat": "dH", "concentration": "conc", "heat_capacity": "cp", "temperature": "T"}
    step = replace(nitration, **{key: None for key in gone if key != "heat"})
    if "heat" in gone:
        step = replace(step, row=replace(step.row, heat=None))
    found = vessel(step)
    assert isinstance(found.mtsr, NotAssessed)
    assert isinstance(found.misfeed_mtsr, NotAssessed)
    assert set(found.mtsr.missing) == {names[key] for key in gone}
    assert "missing" in found.text


@pytest.mark.parametrize("key", ["size", "U", "area", "jacket"])
def test_feed_check_names_what_is_missing(nitration: Step, key: str) -> None:
    step = replace(
        nitration, row=replace(nitration.row, settings=tuple(item for item in nitration.row.settings if item[0] != key))
    )
    found = vessel(step).feed
    assert isinstance(found, NotAssessed)
    assert found.missing == (("size or mass",) if key == "size" else (key,))


def test_batch_has_no_feed_check(nitration: Step) -> None:
    settings = tuple(item for item in nitration.row.settings if item[0] not in ("feed", "Xac"))
    step = replace(nitration, row=replace(nitration.row, settings=(*settings, ("batch", True))))
    found = vessel(step)
    assert isinstance(found.feed, NotAssessed)
    assert "the mode is batch" in found.feed.text
    assert found.mtsr == found.misfeed_mtsr


def test_margin_comes_from_the_sheet_or_the_thresholds(code: SimpleNamespace, nitration: Step) -> None:
    sheet = vessel(typed(code, nitration, margin="0.6")).feed
    own = vessel(nitration, thresholds=Thresholds(margin=0.5)).feed
    assert isinstance(sheet, FeedCheck)
    assert isinstance(own, FeedCheck)
    assert (sheet.margin, own.margin) == (0.6, 0.5)


def test_sensible_heat_needs_all_three_keys(code: SimpleNamespace, nitration: Step) -> None:
    without = vessel(typed(code, nitration, feedT="5 degC", feedcp="2 kJ/(kg K)")).feed
    complete = vessel(typed(code, nitration, feedT="5 degC", feedcp="2 kJ/(kg K)", fedpart="20 %")).feed
    assert isinstance(without, FeedCheck)
    assert isinstance(complete, FeedCheck)
    assert not without.sensible
    assert complete.sensible_kw == pytest.approx(50 * 2 * 15 / 5400)


def test_jacket_that_does_not_cool(code: SimpleNamespace, nitration: Step) -> None:
    found = vessel(typed(code, nitration, jacket="25 degC")).feed
    assert isinstance(found, NotAssessed)
    assert "not colder" in found.text


def test_typed_rise_and_mtsr_are_used_and_said(code: SimpleNamespace, nitration: Step) -> None:
    found = vessel(typed(code, nitration, dTad="120 ± 6 K", MTSR="60 ± 3 degC"))
    assert found.rise == Value(120.0, 6.0)
    assert found.mtsr == Value(60.0, 3.0)
    assert isinstance(found.misfeed_mtsr, Value)
    assert found.misfeed_mtsr.value == 140.0
    assert any(note.startswith("MTSR as typed") for note in found.notices)


def test_typed_rise_gives_heat_per_kilogram_back(code: SimpleNamespace, nitration: Step) -> None:
    step = replace(typed(code, nitration, dTad="100 K"), concentration=None)
    assert vessel(step).specific_heat.value == pytest.approx(-175.0)


def test_concentration_follows_from_charges(code: SimpleNamespace, nitration: Step) -> None:
    step = replace(typed(code, nitration, charges="toluene 5 L/kg density 0.867 kg/L"), concentration=None)
    mass = (78.114 + 63.012 + 78.114 * 5 * 0.867) / 1000
    assert vessel(step).concentration.value == pytest.approx(1 / mass, rel=1e-4)
    assert "conc follows from the charges" in vessel(step).notices


def test_contradicting_concentration_is_said(code: SimpleNamespace, nitration: Step) -> None:
    found = vessel(typed(code, nitration, charges="nil"))
    assert any("the charges give 7.09" in note for note in found.notices)


def test_evaporation_between_boiling_point_and_mtsr(code: SimpleNamespace, nitration: Step) -> None:
    found = vessel(
        typed(code, nitration, MTT="40 degC", latent="400 kJ/kg", qref="10 W/kg", Tref="100 degC", E="100 kJ/mol")
    ).boiling
    assert isinstance(found, Boiling)
    assert found.evaporated_kg == pytest.approx(250 * 1.75 * (57.0286 - 40) / 400, rel=1e-4)
    assert found.vapour_kg_per_h is not None
    assert 0 < found.vapour_kg_per_h < 10 * 250 / 1000 / 400 * 3600


def test_closed_vessel_does_not_boil_off(code: SimpleNamespace, nitration: Step) -> None:
    found = vessel(typed(code, nitration, latent="400 kJ/kg", closed=True)).boiling
    assert isinstance(found, NotAssessed)


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ({"batch": True, "Xac": "1"}, "batch and feed are both typed"),
        ({"margin": "1.2"}, "margin"),
        ({"Xac": "1.5"}, "between 0 and 1"),
    ],
)
def test_faults_are_listed(code: SimpleNamespace, nitration: Step, keys: dict[str, object], words: str) -> None:
    found = vessel(typed(code, nitration, **keys))
    assert any(words in fault for fault in found.faults)
    assert "inconsistent input" in found.text


def test_derived_heat_is_provisional(code: SimpleNamespace) -> None:
    step = code.step("A", "C2H2(g) + 2 H2(g) -> C2H6(g)", "", conc="1", cp="2", at="20 degC")
    known = [code.row("K1", "C2H2(g) + H2(g) -> C2H4(g)", "-174"), code.row("K2", "C2H4(g) + H2(g) -> C2H6(g)", "-137")]
    found = vessel(step, route=code.route("A", "C2H6(g)", step, known=known))
    assert found.provisional == ("dH (derived, pure components)",)
    assert "provisional" in found.text


def test_side_row_is_no_part_of_the_reactors_duty(amide_routes: dict) -> None:
    found = vessel(rh.profile(amide_routes["1"])["X2q"])
    assert found.side_of == "X2"
    assert any("no part of that reactor's duty" in note for note in found.notices)


@given(st.floats(0.1, 5.0), st.floats(0.5, 4.0))
def test_rise_is_specific_heat_over_heat_capacity(concentration: float, cp: float) -> None:
    assert adiabatic_rise(-100.0, concentration, cp) == pytest.approx(specific_adiabatic_rise(-100 * concentration, cp))


def test_dict_is_json(nitration: Step) -> None:
    assert json.loads(json.dumps(vessel(nitration).to_dict()))["label"] == "A1"


def test_text_never_says_safe(nitration: Step) -> None:
    text = vessel(nitration).text.lower()
    assert "safe" not in text
    assert "no criterion exceeded on the data entered" in text
    assert "thresholds from memory, confirm against your own standard" in text
    assert "screening aid" in text

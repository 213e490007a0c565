"""Heats at other temperatures: way, transitions, ranges, what is missing, warnings."""

from __future__ import annotations

import json
import math
from fractions import Fraction

import pytest

import routeheat as rh
from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.species import Species
from routeheat.hess.temperature import Transition, at_temperature
from routeheat.hess.warming import temperature_warning
from routeheat.known.heat_capacity import ConstantCp, HeatCapacity, Nasa7, PolynomialCp, Shomate

WATER = "H2O(s) + H2O(l) + H2O(g) -> H2(g) + O2(g)"


def named(text: str) -> dict[str, Species]:
    return {species.text: species for species in rh.read_reaction(text).species}


def water() -> tuple[dict[Species, HeatCapacity], tuple[Transition, Transition]]:
    found = named(WATER)
    cp = {"H2O(s)": 37.0, "H2O(l)": 75.0, "H2O(g)": 34.0, "H2(g)": 29.0, "O2(g)": 30.0}
    melting = Datum("melting", value=Fraction(6), u=Fraction(1, 10))
    boiling = Datum("boiling", value=Fraction(40), u=Fraction(3, 10))
    return {found[text]: ConstantCp(value) for text, value in cp.items()}, (
        Transition(found["H2O(s)"], found["H2O(l)"], Fraction(273), HeatSum.of(melting)),
        Transition(found["H2O(l)"], found["H2O(g)"], Fraction(373), HeatSum.of(boiling)),
    )


def test_transitions_are_passed_one_after_another_with_sign_and_uncertainty() -> None:
    capacities, transitions = water()
    reaction = rh.read_reaction("2 H2O(s) -> 2 H2(g) + O2(g)")
    heat = HeatSum.of(Datum("R", value=Fraction(580), u=Fraction(1)))
    found = at_temperature(heat, 400, of=reaction, start=250, heat_capacities=capacities, transitions=transitions)
    ice, liquid, steam = 2 * 37 * 23, 2 * 75 * 100, 2 * 34 * 27
    elements = (2 * 29 + 30) * 150
    assert found.heat is not None
    assert found.heat.value == pytest.approx(580 + (elements - ice - liquid - steam) / 1000 - 2 * 6 - 2 * 40)
    assert found.heat.u == pytest.approx(math.hypot(1, 0.2, 0.6))
    assert [crossing.text.split(" adds ")[0] for crossing in found.crossed] == [
        "H2O(s) → H2O(l) at 273.00 K", "H2O(l) → H2O(g) at 373.00 K",
    ]  # fmt: skip
    assert found.reaction.text == "2 H2O(g) -> 2 H2(g) + O2(g)"


def test_there_and_back_is_where_it_was_with_the_same_data() -> None:
    capacities, transitions = water()
    start = HeatSum.of(Datum("R", value=Fraction(-286), u=Fraction(1)))
    up = at_temperature(
        start,
        400,
        of=rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"),
        heat_capacities=capacities,
        transitions=transitions,
    )
    assert up.heat is not None
    down = at_temperature(
        up.heat, 298.15, of=up.reaction, start=400, heat_capacities=capacities, transitions=transitions
    )
    assert down.heat == start
    assert down.reaction.net == rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)").net


@pytest.mark.parametrize(("end", "phase"), [(373, "l"), (Fraction("373.01"), "g")])
def test_a_phase_changes_above_its_transition_not_at_it(end: Fraction, phase: str) -> None:
    capacities, transitions = water()
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)")
    found = at_temperature(reaction, end, heat_capacities=capacities, transitions=transitions)
    assert found.parts[-1].end.phase == phase


def test_a_row_about_the_transition_keeps_both_phases() -> None:
    capacities, transitions = water()
    row = rh.row("V", "vaporisation of H2O(l)", "44 kJ/mol")
    found = at_temperature(row, 400, heat_capacities=capacities, transitions=transitions)
    assert found.heat is not None
    assert found.heat.value == pytest.approx(44 + (34 - 75) * (400 - 298.15) / 1000)


def test_the_same_temperature_needs_no_heat_capacity() -> None:
    row = rh.row("K", "formation of H2O(l)", "-285.830(20) kJ/mol")
    found = at_temperature(row, Fraction("298.15"), heat_capacities={}, transitions=())
    assert found.heat == row.heat_sum()
    assert found.notes == ()


def test_outside_the_range_there_is_no_value_but_a_reason() -> None:
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)")
    cp = {species: PolynomialCp((30.0,), 298.15, 1000) for species in reaction.species}
    found = at_temperature(HeatSum.zero(), 1200, of=reaction, heat_capacities=cp, transitions=())
    assert found.heat is None
    assert found.bound is None
    assert "H2O(g): 1200 K lies outside the 298.15 to 1000 K" in found.reason


def test_several_ranges_in_a_row_serve_one_species() -> None:
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)")
    low, high = PolynomialCp((30.0,), 200, 500), PolynomialCp((40.0,), 500, 1000)
    cp = {species: (high, low) if species.text == "H2O(g)" else ConstantCp(0) for species in reaction.species}
    found = at_temperature(reaction, 700, start=400, heat_capacities=cp, transitions=())
    assert found.correction is not None
    assert found.correction.value == pytest.approx(30 * 0.1 + 40 * 0.2)
    gap = {**cp, next(s for s in cp if s.text == "H2O(g)"): (low, PolynomialCp((40.0,), 600, 1000))}
    refused = at_temperature(reaction, 700, start=400, heat_capacities=gap, transitions=())
    assert "500 K" in refused.reason


def test_missing_heat_capacities_are_named_and_bounded() -> None:
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)")
    cp = {species: ConstantCp(30) for species in reaction.species if species.text != "H2O(g)"}
    found = at_temperature(HeatSum.zero(), 398.15, of=reaction, heat_capacities=cp, transitions=())
    assert found.heat is None
    assert found.reason == "no heat capacity of H2O(g)"
    assert found.bound == (pytest.approx(-4.5), pytest.approx(-4.5 + 40 * 3 * 0.1))
    assert "something between −4.50 and 7.50 kJ/mol" in found.text


def test_a_missing_reactant_bounds_the_other_way_on_the_way_down() -> None:
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)")
    cp = {species: ConstantCp(30) for species in reaction.species if species.text != "O2(g)"}
    found = at_temperature(HeatSum.zero(), 198.15, of=reaction, heat_capacities=cp, transitions=())
    assert found.bound == (pytest.approx(0), pytest.approx(4))


def test_nothing_bounds_a_dissolved_species_and_only_one_end_an_unknown_formula() -> None:
    dissolved = rh.read_reaction("HCl(g) -> HCl(aq)")
    assert at_temperature(dissolved, 350, heat_capacities={}, transitions=()).bound is None
    unknown = rh.read_sheet("species\n  A ?(l)\nknown\n  [K1] H2(g) -> A | dH 1 kJ/mol").known["K1"]
    cp = {species: ConstantCp(30) for species in unknown.reaction.species if species.text == "H2(g)"}
    low, high = at_temperature(unknown, 398.15, heat_capacities=cp, transitions=()).bound or (0, 0)
    assert (low, high) == (pytest.approx(-3), math.inf)


def test_the_correction_is_exact_unless_its_uncertainty_is_given() -> None:
    capacities, _ = water()
    row = rh.row("K", "formation of H2O(l)", "-285.830(20) kJ/mol")
    exact = at_temperature(row, 350, heat_capacities=capacities, transitions=())
    assert exact.heat is not None
    assert exact.heat.u == pytest.approx(0.020)
    assert any("counts as exact" in note for note in exact.notes)
    given = at_temperature(row, 350, heat_capacities=capacities, transitions=(), u=0.15)
    assert given.heat is not None
    assert given.heat.u == pytest.approx(math.hypot(0.020, 0.15))
    assert given.heat.exact == exact.heat.exact
    assert not any("counts as exact" in note for note in given.notes)


def test_a_step_starts_from_its_own_temperature() -> None:
    typed = "route A makes H2O(g)\n  [A1] H2(g) + 1/2 O2(g) -> H2O(g) | dH -240 kJ/mol"
    step = rh.read_sheet(f"{typed} | T 400 K").routes["A"].steps[0]
    cp = {species: ConstantCp(40 if species.text == "H2O(g)" else 0) for species in step.row.reaction.species}
    back = at_temperature(step, 300, heat_capacities=cp, transitions=())
    assert back.heat is not None
    assert back.heat.value == pytest.approx(-240 - 4)
    without = rh.read_sheet(typed).routes["A"].steps[0]
    refused = at_temperature(without, 300, heat_capacities=cp, transitions=())
    assert refused.heat is None
    assert refused.reason == "neither the heat nor the step says its temperature"


def test_a_combination_is_brought_row_by_row_and_what_cancels_needs_no_heat_capacity() -> None:
    typed = (
        "known\n  [K1] formation of H2O(l) | dH -286 kJ/mol\n  [K2] vaporisation of H2O(l) | dH {}\n"
        "target [T] H2(g) + 1/2 O2(g) -> H2O(g)"
    )
    sheet = rh.read_sheet(typed.format("41 kJ/mol at 373.15 K"))
    capacities, _ = water()
    found = at_temperature(
        rh.combine(sheet.targets["T"], sheet.known), 373.15, heat_capacities=capacities, transitions=()
    )
    assert found.heat is not None
    assert found.heat.value == pytest.approx(-286 + 41 + (75 - 29 - 15) * 0.075)
    at_25 = rh.read_sheet(typed.format("44 kJ/mol"))
    no_liquid = {species: cp for species, cp in capacities.items() if species.phase == "g"}
    cancelled = at_temperature(
        rh.combine(at_25.targets["T"], at_25.known), 373.15, heat_capacities=no_liquid, transitions=()
    )
    assert cancelled.heat is not None


def test_rows_of_one_sum_at_different_temperatures_are_a_warning_with_a_size() -> None:
    capacities, _ = water()
    liquid = rh.row("K1", "formation of H2O(l)", "-286 kJ/mol")
    boiling = rh.row("K2", "vaporisation of H2O(l)", "41 kJ/mol at 373.15 K")
    terms = [(liquid, Fraction(1)), (boiling, Fraction(2))]
    assert temperature_warning(terms[:1]) == ""
    warning = temperature_warning(terms, heat_capacities=capacities, transitions=())
    assert "K1 298.15 K; K2 373.15 K" in warning
    assert warning.endswith("bringing all to 298.15 K would change the sum by 6.15 kJ/mol")
    unknown = temperature_warning(terms, heat_capacities={}, transitions=())
    assert "between −18.00 and 18.00 kJ/mol (no heat capacity of H2O(l); no heat capacity of H2O(g))" in unknown


@pytest.mark.parametrize(
    "form",
    [
        PolynomialCp((30.0, 4e-3, -1e-6), 250, 1500),
        Shomate(19.50583, 19.88705, -8.598535, 1.369784, 0.527601, -4.935202, 212.39, 0.0, 500, 2000),
        Nasa7((3.298677, 0.0014082404, -3.963222e-06, 5.641515e-09, -2.444854e-12, -1020.8999), 300, 1000),
    ],
    ids=lambda form: type(form).__name__,
)
def test_the_slope_of_the_heat_is_the_heat_capacity(form: HeatCapacity) -> None:
    reaction = rh.read_reaction("H2(g) -> H2O(g)")
    cp = {species: form if species.text == "H2O(g)" else ConstantCp(0) for species in reaction.species}
    changes = [at_temperature(reaction, T, start=700, heat_capacities=cp).correction for T in (699, 701)]
    low, high = (change.value for change in changes if change is not None)
    assert (high - low) * 1000 / 2 == pytest.approx(form.cp(700), rel=1e-4)


def test_a_heat_alone_needs_its_reaction_and_results_show_themselves() -> None:
    with pytest.raises(TypeError, match="of="):
        at_temperature(HeatSum.zero(), 300)
    capacities, transitions = water()
    row = rh.row("K", "formation of H2O(l)", "-286 kJ/mol")
    found = at_temperature(row, 400, heat_capacities=capacities, transitions=transitions)
    assert "H2O(l) → H2O(g)" in found.text
    assert json.loads(json.dumps(found.to_dict()))["reaction"] == "H2(g) + 1/2 O2(g) -> H2O(g)"
    assert found.heat is not None
    assert found.heat.not_stated == ("K",)

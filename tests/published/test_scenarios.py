"""Four whole scenarios, every step: extents, heats, adiabatic rise, MTSR and class, as run and charged at once.

The values are invented (those of methyl acetate follow from formation enthalpies); the expected numbers come from an
independent calculation of the same equations. A class is the class at the typed values, ambient 30 °C.
"""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from pathlib import Path

import pytest

import routeheat as rh
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.step import Step
from routeheat.process.cautions import AMBIENT
from routeheat.process.criticality import criticality
from routeheat.process.energetic import azide_ratios, oxygen_balance, specific_energy
from routeheat.process.feed import FeedCheck
from routeheat.process.gas import gas_per_product
from routeheat.process.vessel import vessel
from routeheat.process.waste import Waste, waste
from routeheat.units import read_unit

SHEETS = Path(__file__).parent / "sheets"

# step: (extent, heat, cumulative, rise, MTSR, class, MTSR charged at once, class charged at once)
ACETATE = {
    "A": {"A1": (1.1765, -9.7, -9.7, 26.6, 82.6, 3, 82.6, 3)},
    "B": {"B1": (1.0526, -70.1, -70.1, 206.1, 91.2, 3, 256.1, 4)},
    "C": {"C1": (1.087, -28.4, -28.4, 104.3, 15.4, None, 109.3, None), "C2": (1.087, -142.0, -170.4)},
}
AMINE = {
    "A": {
        "A1": (1.2089, -163.2, -163.2, 123.4, 57.0, 2, 143.4, 5),
        "A2": (1.0638, -579.8, -743.0, 213.3, 70.7, 1, 273.3, 4),
    },
    "B": {
        "B1": (1.5635, -109.4, -109.4, 56.0, 10.6, 1, 61.0, 3),
        "B2": (1.2821, -96.2, -205.6, 25.0, 175.0, 3, 175.0, 3),
    },
    "C": {
        "C1": (1.4209, -85.3, -85.3, 24.0, 2.4, 5, 24.0, 5),
        "C2": (1.2788, -191.8, -277.1, 66.7, 91.7, 1, 151.7, 3),
        "C3": (1.087, -103.3, -380.3, 30.5, 74.6, 1, 100.5, 3),
    },
}
AMIDE = {
    "1": {
        "X1": (1.3913, -76.5, -76.5, 17.2, 43.4, 1, 57.2, 1),
        "X2": (1.2939, 15.5, -61.0, -8.2),
        "X2q": (0.3882, -36.9, -97.9),
        "Y1": (1.3135, -719.8, -817.7, 199.3, 65.0, 1, 254.3, 4),
        "C": (1.1953, -167.3, -985.0, 42.0, 14.2, 1, 52.0, 1),
        "F": (1.0638, -26.6, -1011.6, 6.2, 26.2, 1, 26.2, 1),
    },
    "2": {
        "X1": (1.3618, -74.9, -74.9, 17.2, 43.4, 1, 57.2, 1),
        "Y1": (1.4613, -800.8, -875.7, 199.3, 65.0, 1, 254.3, 4),
        "C2": (1.2665, -107.6, -983.3, 32.4, 33.1, 1, 57.4, 1),
        "F": (1.0638, -26.6, -1009.9, 6.2, 26.2, 1, 26.2, 1),
    },
}
OXIDE = {
    "A": {"A1": (1.1696, -263.2, -263.2, 16.9, 45.8, 1, 61.9, 1), "A2": (1.0526, -5.3, -268.4, 0.4, 90.4, 1, 90.4, 1)},
    "B": {"B1": (1.0526, -231.6, -231.6, 97.8, 54.8, 1, 142.8, 4)},
    "C": {
        "C1": (1.2321, -147.8, -147.8, 120.0, 107.0, 2, 215.0, 5),
        "C2": (1.0417, -224.0, -371.8, 153.6, 85.4, 1, 223.6, 4),
    },
}
# route: (total kJ/mol, its u at k = 1, total kJ/kg, overall yield of the longest chain, gas mol/mol product)
TOTALS = {
    "acetate": {
        "A": (-9.7, 1.2, -131.0, 0.85, 0.0),
        "B": (-70.1, 1.6, -946.0, 0.95, 0.0),
        "C": (-170.4, 2.0, -2300.0, 0.92, 1.087),
    },
    "amine": {
        "A": (-743.0, 23.4, -4788.0, 0.8272, 0.0),
        "B": (-205.6, 24.8, -1325.0, 0.6396, 1.563),
        "C": (-380.3, 37.1, -2451.0, 0.7038, 2.366),
    },
    "amide_vessel": {"1": (-1011.6, 25.4, -2746.0, 0.7547, 2.976), "2": (-1009.9, 26.2, -2741.0, 0.7343, 1.266)},
    "oxide": {
        "A": (-268.4, 18.3, -4622.0, 0.855, 0.0),
        "B": (-231.6, 15.8, -3987.0, 0.95, 0.0),
        "C": (-371.8, 24.2, -6402.0, 0.8928, 0.0),
    },
}
STEPS = {"acetate": ACETATE, "amine": AMINE, "amide_vessel": AMIDE, "oxide": OXIDE}
CASES = [(sheet, route, label) for sheet, routes in STEPS.items() for route, steps in routes.items() for label in steps]


def profile_of(sheet: str, route: str, per: str = "mol") -> rh.Profile:
    return rh.profile(rh.read_sheet(SHEETS / f"{sheet}.txt").routes[route], per=per)


def typed(step: Step, **keys: str) -> Step:
    """The step with more keys, each a number with a unit."""
    settings = dict(step.row.settings)
    for key, text in keys.items():
        number, *rest = text.split()
        spread = None
        if rest[:1] == ["±"]:
            spread, rest = Spread(Fraction(rest[1]), Fraction(1)), rest[2:]
        settings[key] = Measured(Fraction(number), read_unit(" ".join(rest)), spread)
    return replace(step, row=replace(step.row, settings=tuple(settings.items())))


@pytest.mark.parametrize(("sheet", "route", "label"), CASES)
def test_every_step(sheet: str, route: str, label: str) -> None:
    scale, heat, cumulative, *vessel_numbers = STEPS[sheet][route][label]
    item = profile_of(sheet, route)[label]
    assert item.heat is not None
    assert float(item.extent) == pytest.approx(scale, abs=5.1e-5)
    assert item.heat.value == pytest.approx(heat, abs=0.051)
    assert item.cumulative.value == pytest.approx(cumulative, abs=0.051)
    found = vessel(item)
    if not vessel_numbers:
        assert found.rise.missing == (("conc", "cp") if label in ("C2", "X2q") else ())
        return
    assert found.rise.value == pytest.approx(vessel_numbers[0], abs=0.051)
    if len(vessel_numbers) == 1:
        return
    _, mtsr, number, misfeed, at_once = vessel_numbers
    verdict = criticality(item)
    assert found.mtsr.value == pytest.approx(mtsr, abs=0.051)
    assert found.misfeed_mtsr.value == pytest.approx(misfeed, abs=0.051)
    for scenario, expected in ((verdict.as_run, number), (verdict.misfeed, at_once)):
        if expected is None:
            assert scenario.words == "not classifiable: TD24 missing"
            assert scenario.reachable == ()
        else:
            assert scenario.at_values == (expected,)


@pytest.mark.parametrize(("sheet", "route"), [(sheet, route) for sheet, routes in TOTALS.items() for route in routes])
def test_every_total(sheet: str, route: str) -> None:
    total, u, per_kg, overall, gas = TOTALS[sheet][route]
    profile = profile_of(sheet, route)
    assert profile.total.value == pytest.approx(total, abs=0.051)
    assert profile.total.u == pytest.approx(u, abs=0.051)
    assert float(profile.overall_yield) == pytest.approx(overall, abs=5.1e-5)
    assert profile_of(sheet, route, "kg").total.value == pytest.approx(per_kg, abs=1.0)
    assert gas_per_product(profile) == pytest.approx(gas, abs=1.1e-3)


def test_typed_gas_of_the_peroxide_route() -> None:
    profile = profile_of("oxide", "B")
    route = replace(profile.route, steps=(typed(profile.route.steps[0], gas="0.02 mol/mol"),))
    assert gas_per_product(rh.profile(route)) == pytest.approx(0.021, abs=5e-4)


def test_endothermic_step_has_no_class() -> None:
    verdict = criticality(profile_of("amide_vessel", "1")["X2"])
    expected = "none: endothermic: no MTSR class; gas and loss of heating are listed instead"
    assert verdict.words == expected
    assert verdict.misfeed.words == expected
    table = verdict.step.text
    assert "loss of heating" in table
    assert "gas evolved" in table
    assert verdict.step.gas.per_mol == 2
    assert verdict.step.sign_open


def test_decomposition_at_ambient_is_said() -> None:
    verdict = criticality(profile_of("amine", "C")["C1"])
    assert verdict.notices == (AMBIENT,)
    assert verdict.as_run.temperature == 30.0
    assert not verdict.stop


def test_class_probabilities_of_the_amination() -> None:
    """MTSR 175 (u 5), MTT 170 (u 3), TD24 190 (u 15): classes 5, 4, 3, 1 are reachable."""
    item = profile_of("amine", "B")["B2"]
    verdict = criticality(typed(item.step, MTT="170 ± 3 degC", TD24="190 ± 15 degC"))
    assert verdict.step.mtsr.u == pytest.approx(5.0)
    chances = verdict.as_run.probabilities
    assert chances is not None
    assert chances[1] == pytest.approx(0.17, abs=5e-3)
    assert chances[2] == pytest.approx(0.007, abs=5e-4)
    assert chances[3] == pytest.approx(0.65, abs=5e-3)
    assert chances[4] == pytest.approx(0.08, abs=5e-3)
    assert chances[5] == pytest.approx(0.09, abs=5e-3)
    assert [item.classes for item in verdict.as_run.reachable] == [(5,), (4,), (3,), (1,)]
    assert verdict.as_run.at_values == (3,)


def test_screening_of_the_amine_scenario() -> None:
    sheet = rh.read_sheet(SHEETS / "amine.txt")
    nitro, azide = (sheet.species[name].species.formula for name in ("NIT", "AZI"))
    assert nitro is not None
    assert azide is not None
    assert oxygen_balance(nitro).per_cent == pytest.approx(-142.6, abs=0.05)
    assert oxygen_balance(azide).per_cent == pytest.approx(-149.2, abs=0.05)
    assert azide_ratios(azide)[0] == pytest.approx(3.67, abs=5e-3)
    assert specific_energy(310, float(nitro.molar_mass)) == pytest.approx(1674, abs=1)
    assert specific_energy(220, float(azide.molar_mass)) == pytest.approx(1052, abs=1)


@pytest.mark.parametrize(
    ("hours", "load", "verdict"),
    [
        ("1.5 h", 68.0, "no criterion exceeded on the data entered"),
        ("1.0 h", 102.0, "insufficient: extend feed to at least 1.03 h"),
    ],
)
def test_pilot_of_the_nitration(hours: str, load: float, verdict: str) -> None:
    """400 mol, U 350, A 1.4, ΔT 30: 14.7 kW; shortest feed 1.02 h, with a margin of 0.8 1.28 h."""
    item = profile_of("amine", "A")["A1"]
    step = typed(item.step, feed=hours, size="400 mol", U="350 W/(m2 K)", area="1.4 m2", jacket="-10 degC")
    check = vessel(step).feed
    assert isinstance(check, FeedCheck)
    assert check.vessel.capacity_kw == pytest.approx(14.7)
    assert 100 * check.load == pytest.approx(load, abs=0.1)
    assert check.shortest_h == pytest.approx(1.02, abs=5e-3)
    assert check.shortest_with_margin_h == pytest.approx(1.28, abs=5e-3)
    assert check.verdict == verdict


def test_gas_of_the_rearrangement() -> None:
    item = profile_of("amine", "C")["C2"]
    gas = vessel(typed(item.step, size="400 mol", feed="2 h")).gas
    assert gas.volume_rate == pytest.approx(4.81, abs=5e-3)


def test_dosing_of_the_anhydride() -> None:
    item = profile_of("acetate", "B")["B1"]
    found = vessel(typed(item.step, size="1000 mol", U="300 W/(m2 K)", area="0.9 m2", jacket="30 degC"))
    check = found.feed
    assert isinstance(check, FeedCheck)
    assert check.heat_rate_kw == pytest.approx(6.17, abs=5e-3)
    assert check.specific_heat_rate == pytest.approx(43.9, abs=0.05)
    assert check.vessel.capacity_kw == pytest.approx(5.4)
    assert 100 * check.load == pytest.approx(114, abs=0.5)
    assert check.verdict == "insufficient: extend feed to at least 3.43 h"


def with_charges(route: str) -> Waste:
    profile = profile_of("acetate", route)
    text = "H2SO4 0.05 mol/mol" if route == "A" else "nil"
    steps = []
    for step in profile.route.steps:
        settings = (*step.row.settings, ("charges", text))
        steps.append(replace(step, row=replace(step.row, settings=settings)))
    return waste(replace(profile.route, steps=tuple(steps)), side_rows="out")


@pytest.mark.parametrize(("route", "economy", "pmi"), [("A", 80.4, 2.05), ("B", 55.2, 2.00), ("C", 67.0, 1.67)])
def test_waste_of_the_acetate_routes(route: str, economy: float, pmi: float) -> None:
    """Listed inputs; of route C without the base of the scrubber."""
    found = with_charges(route).whole
    assert found.atom_economy == pytest.approx(economy, abs=0.05)
    assert found.pmi == pytest.approx(pmi, abs=5e-3)
    assert found.e_factor == pytest.approx(pmi - 1, abs=5e-3)


def test_closure_of_the_acetate_routes() -> None:
    """ΔB − ΔA is the hydrolysis of the anhydride, −58.37 kJ/mol, whose row the sheet has."""
    comparison = rh.compare_routes(rh.read_sheet(SHEETS / "acetate.txt").routes)
    closure = comparison.closures[0]
    assert (closure.first, closure.second) == ("A", "B")
    assert closure.rows == ("K1",)
    assert closure.discrepancy is not None
    assert closure.discrepancy.value == pytest.approx(0.0, abs=1e-9)


def test_scrubber_stays_apart_from_the_reactor() -> None:
    profile = profile_of("acetate", "C")
    assert profile.side_total.value == pytest.approx(-142.0, abs=0.05)
    assert vessel(profile["C1"]).heat.value == pytest.approx(-26.11)
    assert any("no part of that reactor's duty" in note for note in vessel(profile["C2"]).notices)

"""Vessel, runaway, criticality and screening numbers, each with its source. "From memory" says that the source text
was not at hand: check it before relying on it."""

from __future__ import annotations

from fractions import Fraction

import pytest

from routeheat.chem.formula import read_formula
from routeheat.process import energetic, feed, runaway
from routeheat.process.accumulation import first_order, worst_first_order
from routeheat.process.assessed import NotAssessed
from routeheat.process.classes import classify
from routeheat.process.energetic import azide_ratios, oxygen_balance
from routeheat.process.groups import groups
from routeheat.process.levels import probability, severity

ZERO_C = 273.15


@pytest.mark.parametrize(
    ("heat", "rise", "methanol", "height", "speed"),
    [
        (-100.0, 50.0, 0.09, 10.0, 0.45),
        (-2000.0, 1000.0, 1.8, 204.0, 2.0),
    ],
)
def test_energy_equivalents(heat: float, rise: float, methanol: float, height: float, speed: float) -> None:
    """Stoessel, Thermal Safety of Chemical Processes (2008), ch. 2, table of energy equivalents (from memory)."""
    assert runaway.specific_adiabatic_rise(heat, 2.0) == pytest.approx(rise, abs=1.0)
    assert runaway.evaporated_part(heat, 1100.0) == pytest.approx(methanol, rel=0.02)
    assert runaway.height_equivalent_km(heat) == pytest.approx(height, rel=0.02)
    assert runaway.speed_equivalent_km_per_s(heat) == pytest.approx(speed, rel=0.02)


def test_adiabatic_rise_on_the_molar_basis() -> None:
    """Definition ΔTad = (−ΔH) n/(m cp), by hand."""
    assert runaway.adiabatic_rise(-130.0, 1.5, 1.7) == pytest.approx(114.7, abs=0.05)


def test_bulk_polymerisation_of_styrene() -> None:
    """Literature −69 to −71 kJ/mol (from memory); M 104.15 g/mol, cp 2.1 kJ/(kg K)."""
    heat = -71.0 / 0.10415
    assert heat == pytest.approx(-682, abs=0.5)
    assert runaway.specific_adiabatic_rise(heat, 2.1) == pytest.approx(325, abs=2)
    assert runaway.adiabatic_rise(-71.0, 1 / 0.10415, 2.1) == pytest.approx(325, abs=2)


@pytest.mark.parametrize(("process", "rise", "accumulated", "expected"), [(80, 115, 1.0, 195), (60, 120, 0.25, 90)])
def test_mtsr_batch_and_semi_batch(process: float, rise: float, accumulated: float, expected: float) -> None:
    """Gygax, Chem. Eng. Sci. 43 (1988) 1759 (from memory): MTSR = Tp + Xac ΔTad, by hand."""
    assert runaway.mtsr(process, rise, accumulated) == pytest.approx(expected, abs=0.1)


def test_accumulation_of_a_pseudo_first_order_feed() -> None:
    """Analytic: (1 − e^(−k tD))/(k tD) with k 0.5 per h, tD 4 h."""
    assert first_order(0.5, 4.0) == pytest.approx(0.4323, abs=5e-5)
    worst = worst_first_order(0.5, 4.0)
    assert (worst.time, worst.mass_ratio) == (1.0, 1.0)
    assert worst.fraction == pytest.approx(0.4323, abs=5e-5)


def test_tmrad_zero_order() -> None:
    """Townsend and Tou, Thermochim. Acta 37 (1980) 1 (formula standard): cp 2000, 100 °C, 1 W/kg, 100 kJ/mol."""
    assert runaway.tmrad(373.15, 1.0, 2000.0, 1e5) / 3600 == pytest.approx(6.43, abs=0.005)


def test_tmrad_by_the_integral_is_longer() -> None:
    """6.9 % longer at 100 °C and 100 kJ/mol: the asymptotic series 1 + 2ε + 6ε² + 24ε³ with ε = RT/E = 0.0310."""
    ratio = runaway.tmrad_integral(373.15, 1.0, 2000.0, 1e5) / runaway.tmrad(373.15, 1.0, 2000.0, 1e5)
    assert ratio == pytest.approx(1.069, abs=1e-3)


def test_td24_from_one_isothermal_rate() -> None:
    """TMRad = 24 h with an Arrhenius rate, solved with another root finder: 10 W/kg at 180 °C, 100 kJ/mol, cp 1800."""
    found = runaway.td24(10.0, 180 + ZERO_C, 1800.0, 1e5)
    assert found is not None
    assert found - ZERO_C == pytest.approx(126.0, abs=0.2)


def test_activation_energy_from_two_rates() -> None:
    """Arrhenius: 5 W/kg at 120 °C and 20 W/kg at 140 °C."""
    assert runaway.activation_energy(5.0, 393.15, 20.0, 413.15) / 1000 == pytest.approx(93.6, abs=0.05)


@pytest.mark.parametrize(
    ("process", "mtsr", "mtt", "td24", "expected"),
    [
        (50, 90, 110, 150, (1,)),
        (60, 85, 180, 150, (2,)),
        (80, 130, 110, 170, (3,)),
        (70, 190, 110, 160, (4,)),
        (60, 200, 250, 150, (5,)),
        (100, 105, 111, 135, (1,)),
        (20, 65, 65, 120, (3,)),
        (60, 90, None, 150, (3, 2, 1)),
    ],
)
def test_criticality_class(
    process: float, mtsr: float, mtt: float | None, td24: float, expected: tuple[int, ...]
) -> None:
    """Stoessel, Chem. Eng. Prog. 89(10) (1993) 68; book 2008/2020, ch. 3; GB/T 42300-2022 (rules from memory).

    The tie of MTSR and MTT at 65 °C goes to the worse class, and a missing MTT gives a set: our rules.
    """
    assert classify(process, mtsr, mtt, td24) == expected


def test_no_class_without_td24() -> None:
    """Our rule: never 1 or 2."""
    found = classify(60, 90, 110, None)
    assert isinstance(found, NotAssessed)
    assert found.text == "not classifiable: TD24 missing"


@pytest.mark.parametrize(
    ("rise", "gas", "word"),
    [
        (45, False, "low"),
        (45, True, "at least medium"),
        (180, False, "medium"),
        (250, False, "high"),
    ],
)
def test_severity_on_three_levels(rise: float, gas: bool, word: str) -> None:
    """Stoessel 2008, ch. 3: below 50 K without pressure low, 50 to 200 K medium, above high (from memory)."""
    assert severity(rise, gas=gas).word == word


@pytest.mark.parametrize(("hours", "word"), [(30, "low"), (10, "medium"), (3, "high")])
def test_probability_on_three_levels(hours: float, word: str) -> None:
    """Stoessel 2008, ch. 3; GB/T 42300-2022 (from memory): above 24 h low, 8 to 24 h medium, below high."""
    assert probability(hours).word == word


def test_dosing_controlled_heat_rate() -> None:
    """q = (−ΔH) dn/dt: 1000 mol in 2 h at −150 kJ/mol, 1500 kg."""
    rate = feed.dosing_heat_rate(1000.0, -150.0, 2.0)
    assert rate == pytest.approx(20.83, abs=0.02)
    assert rate * 1000 / 1500 == pytest.approx(13.9, abs=0.02)


def test_jacket_capacity() -> None:
    """Q = U A ΔT: 300 W/(m² K), 2.5 m², 30 K."""
    assert feed.jacket_capacity(300.0, 2.5, 30.0) == pytest.approx(22.5, abs=0.01)


def test_specific_cooling_against_scale() -> None:
    """Stoessel 2008, ch. 2, table: 30/1500, 9/450, 3/150, 0.9/45, 0.4/20 (areas from memory, arithmetic by hand)."""
    found = feed.cooling_against_scale(300.0, 1000.0, 50.0)
    assert [point.volume_m3 for point in found] == [0.0001, 0.001, 0.1, 1.0, 10.0]
    assert [point.per_kelvin for point in found] == pytest.approx([30.0, 9.0, 3.0, 0.9, 0.405], rel=0.01)
    assert [point.at_difference for point in found] == pytest.approx([1500, 450, 150, 45, 20], rel=0.013)


def test_thermal_time_constant() -> None:
    """τ = m cp/(U A): 1200 kg, 2 kJ/(kg K), 300 W/(m² K), 3 m²."""
    tau = feed.time_constant(1200.0, 2.0, 300.0, 3.0)
    assert tau == pytest.approx(2667, abs=1)
    assert feed.half_time(tau) == pytest.approx(1848, abs=1)


def test_gas_volume_flow() -> None:
    """Ideal gas: 150 mol/h at 20 °C and 101 325 Pa."""
    assert feed.gas_volume(150.0, 20.0, 101325.0) == pytest.approx(3.61, abs=0.01)


@pytest.mark.parametrize(
    ("formula", "published"),
    [
        ("C7H5N3O6", -74.0),
        ("C3H6N6O6", -21.6),
        ("H4N2O3", 20.0),
        ("C3H5N3O9", 3.5),
        ("CH3NO2", -39.3),
        ("C(NO2)4", 49.0),
    ],
)
def test_oxygen_balance(formula: str, published: float) -> None:
    """Meyer, Köhler, Homburg, Explosives, tables (from memory); the formula as in UN and GHS guidance."""
    assert oxygen_balance(read_formula(formula)).per_cent == pytest.approx(published, abs=0.1)


def test_waiver_by_oxygen_balance() -> None:
    """UN Manual of Tests and Criteria, appendix 6; GHS 2.1: below −200 (rule text read; 1-nitrohexadecane by hand)."""
    found = energetic.un_oxygen_balance(read_formula("C16H33NO2"))
    assert found == pytest.approx(-274, abs=1)
    assert found < energetic.WAIVER_BALANCE


@pytest.mark.parametrize(("formula", "ratio"), [("C7H7N3", 2.33), ("C7H7N3O2S", 3.0)])
def test_carbon_oxygen_nitrogen_rule_of_azides(formula: str, ratio: float) -> None:
    """Smith 1966; Bräse, Gil, Knepper, Zimmermann, Angew. Chem. Int. Ed. 44 (2005) 5188 (from memory)."""
    found = azide_ratios(read_formula(formula))
    assert found is not None
    assert found[0] == pytest.approx(ratio, abs=0.01)


def test_available_oxygen_of_a_peroxide() -> None:
    """GHS 2.15: 16 Σ n c/m; dibenzoyl peroxide at 75 %, M 242.23 g/mol."""
    assert energetic.available_oxygen(((1, 75.0, 242.23),)) == pytest.approx(4.95, abs=0.01)


def test_yoshida_correlation() -> None:
    """Yoshida et al., Kogyo Kayaku 48 (1987) 311 (from memory): 1200 J/g, onset 150 °C."""
    assert energetic.yoshida(1200.0, 150.0) == pytest.approx((-0.009, -0.032), abs=1e-3)


def test_cautious_slopes_are_three_quarters() -> None:
    """Coefficients 0.285 and 0.54 of the more cautious variant (from memory) are 0.75 times the originals."""
    for (cautious, _), (original, _) in zip(energetic.YOSHIDA_CAUTIOUS, energetic.YOSHIDA, strict=True):
        assert Fraction(str(cautious)) == Fraction(3, 4) * Fraction(str(original))


def test_mean_decomposition_energy_of_diazo_compounds() -> None:
    """Green et al., Org. Process Res. Dev. 24 (2020) 67, abstract: 102 kJ/mol released."""
    assert groups()["diazo"].released_mean == 102

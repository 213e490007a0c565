"""Heats at other temperatures against published values and against an independent program."""

from __future__ import annotations

from fractions import Fraction

import pytest

import routeheat as rh
from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.hess.temperature import Transition, at_temperature
from routeheat.known.heat_capacity import ConstantCp, HeatCapacity, Nasa7, Nasa9, Nasa9Interval, Shomate


def species_of(text: str) -> dict[str, Species]:
    return {species.text: species for species in rh.read_reaction(text).species}


def capacities(reaction: Reaction, values: dict[str, HeatCapacity]) -> dict[Species, HeatCapacity]:
    return {species: values[species.text] for species in reaction.species}


def test_steam_at_the_boiling_point_with_constant_heat_capacities() -> None:
    """Atkins, Physical Chemistry, ch. 2, example on Kirchhoff's law (from memory): -242.6 kJ/mol at 373 K."""
    row = rh.row("K1", "formation of H2O(g)", "-241.82 kJ/mol at 298 K")
    cp = {"H2O(g)": ConstantCp(33.58), "H2(g)": ConstantCp(28.84), "O2(g)": ConstantCp(29.37)}
    found = at_temperature(row, 373, heat_capacities=capacities(row.reaction, cp))
    assert found.heat is not None
    assert found.heat.value == pytest.approx(-242.6, abs=0.05)


def test_supercooled_water_freezes_at_minus_ten() -> None:
    """A standard exercise (Atkins; Castellan; from memory): -5.62 to -5.63 kJ/mol at 263.15 K.

    The row is about freezing itself: both phases keep their form although 263.15 K lies below the freezing point.
    """
    row = rh.row("F", "H2O(l) -> H2O(s)", "-6.008 kJ/mol at 273.15 K")
    water = species_of("H2O(l) -> H2O(s)")
    melting = Transition(water["H2O(s)"], water["H2O(l)"], Fraction("273.15"), HeatSum.of(Datum("melting")))
    cp = {"H2O(l)": ConstantCp(75.3), "H2O(s)": ConstantCp(37.6)}
    found = at_temperature(row, 263.15, heat_capacities=capacities(row.reaction, cp), transitions=[melting])
    assert found.heat is not None
    assert found.heat.value == pytest.approx(-5.63, abs=0.02)
    assert not found.crossed


@pytest.mark.parametrize(
    ("equation", "kelvin", "expected", "expected_298"),
    [
        ("N2(g) + 3 H2(g) -> 2 NH3(g)", 700, -105.36, -91.88),
        ("CO(g) + H2O(g) -> CO2(g) + H2(g)", 1000, -34.76, -41.15),
        ("H2(g) + 1/2 O2(g) -> H2O(g)", 1000, -247.85, -241.83),
    ],
)
def test_nasa_9(equation: str, kelvin: int, expected: float, expected_298: float) -> None:
    """An independent evaluation of the coefficients of McBride, Zehe, Gordon, NASA/TP-2002-211556, for CO, H2O, CO2,
    H2, O2, N2, NH3; JANAF agrees to 0.3 kJ/mol. The table of the package holds the same coefficients."""
    reaction = rh.read_reaction(equation)
    heat = HeatSum.of(Datum("R", value=Fraction(str(expected_298))))
    there = at_temperature(heat, kelvin, of=reaction)
    assert there.heat is not None
    assert there.heat.value == pytest.approx(expected, abs=0.02)
    back = at_temperature(there.heat, 298.15, of=reaction, start=kelvin, transitions=())
    assert back.heat is not None
    assert back.heat.value == pytest.approx(expected_298, abs=1e-8)


def test_steam_condenses_on_the_way_down() -> None:
    """CODATA Key Values (Cox, Wagman, Medvedev 1989): ΔfH(H2O(l), 298.15 K) = -285.830 kJ/mol; from steam at 1000 K."""
    reaction = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)")
    found = at_temperature(HeatSum.of(Datum("R", value=Fraction("-247.85"))), 298.15, of=reaction, start=1000)
    assert found.heat is not None
    assert found.reaction.text == "H2(g) + 1/2 O2(g) -> H2O(l)"
    assert [str(crossing.coefficient) for crossing in found.crossed] == ["-1"]
    assert found.heat.value == pytest.approx(-285.83, abs=0.4)
    assert found.heat.not_stated == ("R", "vaporisation of water")


def test_nasa_7_of_nitrogen() -> None:
    """GRI-Mech 3.0, N2 (coefficients from memory): 21.47 kJ/mol from 298.15 to 1000 K; JANAF 21.463."""
    form = Nasa7((3.298677, 0.0014082404, -3.963222e-06, 5.641515e-09, -2.444854e-12, -1020.8999), 300.0, 1000.0)
    assert form.enthalpy_difference(298.15, 1000) == pytest.approx(21.47, abs=0.02)


def test_shomate_of_nitrogen() -> None:
    """NIST Chemistry WebBook / Chase 1998 (coefficients from memory), 500 to 2000 K: 21.46 kJ/mol, Cp 32.69."""
    form = Shomate(19.50583, 19.88705, -8.598535, 1.369784, 0.527601, -4.935202, 212.39, 0.0, 500, 2000)
    assert form.enthalpy_difference(298.15, 1000) == pytest.approx(21.46, abs=0.05)
    assert form.cp(1000) == pytest.approx(32.69, abs=0.05)


def test_a_fit_that_starts_at_300_k_serves_from_298_with_a_warning() -> None:
    """McBride, Zehe, Gordon 2002: the fit of C2H6 starts at 300.000 K; 1.85 K below is a warning, not a refusal."""
    reaction = rh.read_reaction("C2H4(g) + H2(g) -> C2H6(g)")
    found = at_temperature(reaction, 500)
    assert found.correction is not None
    assert found.correction.value < 0
    ethane = Nasa9((Nasa9Interval(300.0, 1000.0, (0, 0, 6.0, 0, 0, 0, 0), 0.0),), formation_enthalpy=None)
    flat = {species: ethane if species.text == "C2H6(g)" else ConstantCp(30) for species in reaction.species}
    warned = at_temperature(reaction, 500, heat_capacities=flat)
    assert "C2H6(g): the heat capacity starts at 300.000 K: extrapolated by 1.85 K" in warned.notes


GRI = {  # GRI-Mech 3.0, thermodynamic data, 200 to 1000 K
    "CH4(g)": (5.14987613, -0.0136709788, 4.91800599e-05, -4.84743026e-08, 1.66693956e-11, -10246.6476),
    "H2O(g)": (4.19864056, -0.0020364341, 6.52040211e-06, -5.48797062e-09, 1.77197817e-12, -30293.7267),
    "CO2(g)": (2.35677352, 0.00898459677, -7.12356269e-06, 2.45919022e-09, -1.43699548e-13, -48371.9697),
    "H2(g)": (2.34433112, 0.00798052075, -1.9478151e-05, 2.01572094e-08, -7.37611761e-12, -917.935173),
    "O2(g)": (3.78245636, -0.00299673416, 9.84730201e-06, -9.68129509e-09, 3.24372837e-12, -1063.94356),
    "N2(g)": (3.298677, 0.0014082404, -3.963222e-06, 5.641515e-09, -2.444854e-12, -1020.8999),
    "CO(g)": (3.57953347, -0.00061035368, 1.01681433e-06, 9.07005884e-10, -9.04424499e-13, -14344.086),
    "NH3(g)": (4.2860274, -0.004660523, 2.1718513e-05, -2.2808887e-08, 8.2638046e-12, -6741.7285),
}


@pytest.mark.parametrize(
    ("equation", "expected"),
    [
        ("CH4(g) + 2 H2O(g) -> CO2(g) + 4 H2(g)", (164.7411, 174.5621, 185.4494, 190.2281)),
        ("CH4(g) + 2 O2(g) -> CO2(g) + 2 H2O(g)", (-802.5574, -800.7913, -800.3021, -801.2201)),
        ("CO(g) + H2O(g) -> CO2(g) + H2(g)", (-41.1538, -39.8184, -36.8246, -34.7626)),
        ("N2(g) + 3 H2(g) -> 2 NH3(g)", (-91.7979, -99.7865, -107.226, -110.0679)),
    ],
)
def test_reactions_against_an_independent_program(equation: str, expected: tuple[float, ...]) -> None:
    """ΔrH at 298.15, 500, 800 and 1000 K by Cantera 3.2.0 with its file gri30.yaml, from the same coefficients."""
    reaction = rh.read_reaction(equation)
    cp = {species: Nasa7(GRI[species.text], 200.0, 1000.0) for species in reaction.species}
    heat = HeatSum.of(Datum("R", value=Fraction(str(expected[0]))))
    for kelvin, value in zip((500, 800, 1000), expected[1:], strict=True):
        found = at_temperature(heat, kelvin, of=reaction, heat_capacities=cp)
        assert found.heat is not None
        assert found.heat.value == pytest.approx(value, abs=0.01)

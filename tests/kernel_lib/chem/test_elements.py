"""Every element has a sourced line, and the weights agree with two independent libraries."""

import dataclasses
import re
from fractions import Fraction

import periodictable
import pytest

from routeheat.chem.elements import HYDROGEN_ISOTOPES, elements, isotopes, weight_bounds, weight_of

# CIAAW 2024 revised these; periodictable 2.1 holds the values of 2021.
REVISED_2024 = {"Zr": "91.222", "Gd": "157.249", "Lu": "174.96669"}


def test_all_elements_in_order_of_atomic_number() -> None:
    assert [element.number for element in elements().values()] == list(range(1, 119))


def test_symbols_agree_with_periodictable() -> None:
    assert [periodictable.elements[n].symbol for n in range(1, 119)] == list(elements())


def test_every_element_has_a_source_that_fits_its_value() -> None:
    for element in elements().values():
        if element.symbol in REVISED_2024:
            assert element.source.startswith("CIAAW 2024")
        elif element.source.startswith("mass number of the longest-lived isotope"):
            assert element.weight.denominator == 1
        else:
            assert element.source == "IUPAC 2021 (Prohaska et al., Pure Appl. Chem. 94 (2022) 573)"


def test_elements_without_a_standard_weight() -> None:
    # Prohaska et al. 2022, table 1: no standard atomic weight (from memory).
    marked = {e.number for e in elements().values() if e.source.startswith("mass number")}
    assert marked == {43, 61, *range(84, 90), *range(93, 119)}


@pytest.mark.parametrize("symbol", [s for s, e in elements().items() if e.source.startswith("IUPAC 2021")])
def test_weights_agree_with_periodictable(symbol: str) -> None:
    assert float(elements()[symbol].weight) == pytest.approx(periodictable.elements.symbol(symbol).mass, abs=1e-9)


@pytest.mark.parametrize(("symbol", "weight"), REVISED_2024.items())
def test_weights_revised_in_2024(symbol: str, weight: str) -> None:
    assert elements()[symbol].weight == Fraction(weight)


def test_the_interval_elements() -> None:
    # Prohaska et al. 2022: the fourteen elements whose standard atomic weight is an interval.
    intervals = {s for s, e in elements().items() if e.weight_low is not None and e.weight_high is not None}
    assert intervals == {"H", "Li", "B", "C", "N", "O", "Mg", "Si", "S", "Cl", "Ar", "Br", "Tl", "Pb"}


# Rounded to five digits, the conventional weights of these two fall just below the published interval.
ROUNDED_OUT = {"O": "15.999", "Tl": "204.38"}


@pytest.mark.parametrize("symbol", [s for s, e in elements().items() if e.weight_low and s not in ROUNDED_OUT])
def test_intervals_contain_the_conventional_weight(symbol: str) -> None:
    element = elements()[symbol]
    assert element.weight_low is not None
    assert element.weight_high is not None
    assert element.weight_low < element.weight < element.weight_high


@pytest.mark.parametrize(("symbol", "weight"), ROUNDED_OUT.items())
def test_a_conventional_weight_rounded_out_of_its_interval_widens_the_bounds(symbol: str, weight: str) -> None:
    element = elements()[symbol]
    assert element.weight_low is not None
    assert round(element.weight_low, len(weight.partition(".")[2])) == Fraction(weight) < element.weight_low
    assert weight_bounds(symbol) == (Fraction(weight), element.weight_high)


def test_bounds_of_an_element_without_interval_are_its_weight() -> None:
    assert weight_bounds("Na") == (Fraction("22.98976928"),) * 2
    assert weight_bounds("[13C]") == (weight_of("[13C]"),) * 2


@pytest.mark.parametrize("symbol", list(isotopes()))
def test_isotope_masses_agree_with_periodictable(symbol: str) -> None:
    isotope = isotopes()[symbol]
    other = periodictable.elements.symbol(isotope.element)[isotope.mass_number]
    # Older evaluations rounded the masses of short-lived nuclides; 2e-6 still tells any two nuclides apart.
    assert float(isotope.mass) == pytest.approx(other.mass, abs=2e-6)
    assert symbol == f"[{isotope.mass_number}{isotope.element}]"
    assert isotope.source.startswith("AME2020")


def test_deuterium_and_tritium_are_tabulated() -> None:
    assert [isotopes()[name].mass_number for name in HYDROGEN_ISOTOPES.values()] == [2, 3]


def test_reference_states_name_their_own_element_and_a_phase() -> None:
    for element in elements().values():
        if element.reference_state:
            pattern = rf"{element.symbol}2?\((g|l|s|s, [a-z]+)\)"
            assert re.fullmatch(pattern, element.reference_state), element.reference_state


@pytest.mark.parametrize(
    "state", ["H2(g)", "C(s, graphite)", "Br2(l)", "I2(s)", "Hg(l)", "S(s, rhombic)", "P(s, white)", "Sn(s, white)"]
)
def test_reference_states_of_the_irregular_elements(state: str) -> None:
    assert state in {element.reference_state for element in elements().values()}


def test_only_mercury_and_bromine_are_liquid() -> None:
    assert {s for s, e in elements().items() if "(l)" in e.reference_state} == {"Hg", "Br"}


def test_metals() -> None:
    assert [s for s in ("Ca", "Sb", "O", "As", "Xe", "Pb") if elements()[s].is_metal] == ["Ca", "Sb", "Pb"]


def test_the_tables_cannot_be_changed() -> None:
    with pytest.raises(TypeError):
        elements()["H"] = elements()["He"]  # type: ignore[index]
    with pytest.raises(dataclasses.FrozenInstanceError):
        elements()["H"].weight = Fraction(1)  # type: ignore[misc]

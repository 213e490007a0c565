"""Oxygen balance, ratios, waivers and correlations."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.formula import read_formula
from routeheat.process import energetic
from routeheat.process.energetic import Balance


def balance(text: str) -> Balance:
    found = energetic.oxygen_balance(read_formula(text))
    assert isinstance(found, Balance)
    return found


def test_halogen_leaves_as_acid() -> None:
    found = balance("C2H3ClO2")
    assert found.per_cent == pytest.approx(-1600 * (4 + 1 - 2) / 94.497, rel=1e-3)
    assert "Cl as HCl" in found.products


def test_excess_halogen_takes_no_oxygen() -> None:
    assert balance("CCl4").per_cent == pytest.approx(-1600 * 2 / 153.8, rel=1e-2)
    assert "excess halogen as X2" in balance("CCl4").products


def test_sulfur_and_metal_products_are_stated() -> None:
    found = balance("KNO3")
    assert found.per_cent == pytest.approx(39.6, abs=0.1)  # published tables (from memory)
    assert "K as K2O" in found.products
    assert "S as SO2" in balance("C2H6OS").products


def test_unknown_oxide_is_refused() -> None:
    assert energetic.oxygen_balance(read_formula("HAuCl4")) == "the oxide of gold is not tabulated"


def test_isotopes_count_as_their_element() -> None:
    assert energetic.atoms(read_formula("[2H]2O")) == {"H": Fraction(2), "O": Fraction(1)}


@given(st.integers(1, 20), st.integers(0, 40), st.integers(0, 20))
def test_more_oxygen_never_lowers_the_balance(c: int, h: int, o: int) -> None:
    hydrogen = f"H{h}" if h else ""
    one = balance(f"C{c}{hydrogen}O{o + 1}")
    two = balance(f"C{c}{hydrogen}O{o + 2}")
    assert two.per_cent > one.per_cent


@pytest.mark.parametrize(
    ("value", "word"),
    [
        (-241, "low"),
        (-240, "medium"),
        (-121, "medium"),
        (-120, "high"),
        (0, "high"),
        (80, "high"),
        (81, "medium"),
        (160, "medium"),
        (161, "low"),
    ],
)
def test_bands_with_ties_to_the_worse_side(value: float, word: str) -> None:
    assert energetic.band(value) == word


@pytest.mark.parametrize(
    ("ratio", "words"),
    [
        (3.1, "20 g"),
        (3.0, "5 g"),
        (1.1, "5 g"),
        (1.0, "never isolate"),
        (0.5, "never isolate"),
    ],
)
def test_tiers_of_azides_with_ties_to_the_stricter_one(ratio: float, words: str) -> None:
    assert words in energetic.azide_limit(ratio)


def test_no_nitrogen_has_no_ratio() -> None:
    assert energetic.azide_ratios(read_formula("C6H6")) is None


def test_six_carbons_per_group() -> None:
    assert energetic.six_per_group(read_formula("C7H5N3O6"), 3) == pytest.approx(7 / 3)


@pytest.mark.parametrize(
    ("oxygen", "peroxide", "met"),
    [
        (1.0, 1.0, True),
        (1.1, 1.0, False),
        (0.5, 1.1, True),
        (0.6, 1.1, False),
        (0.5, 7.1, False),
        (0.5, 7.0, True),
    ],
)
def test_peroxide_waiver(oxygen: float, peroxide: float, met: bool) -> None:
    assert energetic.peroxide_waiver(oxygen, peroxide) is met


def test_mixture_of_peroxides_adds_up() -> None:
    assert energetic.available_oxygen(((1, 50.0, 200.0), (2, 10.0, 160.0))) == pytest.approx(4.0 + 2.0)


def test_unit_trap_of_yoshida() -> None:
    """J/g taken for cal/g would raise both figures by log 4.184 = 0.62."""
    wrong = energetic.yoshida(1200.0 * 4.184, 150.0)
    right = energetic.yoshida(1200.0, 150.0)
    assert wrong[0] - right[0] == pytest.approx(0.6216, abs=1e-4)


@given(st.floats(10.0, 10_000.0), st.floats(26.0, 600.0))
def test_cautious_slopes_are_never_less_cautious(energy: float, onset: float) -> None:
    plain, cautious = energetic.yoshida(energy, onset), energetic.yoshida(energy, onset, cautious=True)
    # below 26 °C above 25 the logarithm is negative; from 26 °C on it is not
    assert all(b >= a for a, b in zip(plain, cautious, strict=True))


@pytest.mark.parametrize(("energy", "onset"), [(0.0, 150.0), (100.0, 25.0)])
def test_yoshida_out_of_range(energy: float, onset: float) -> None:
    with pytest.raises(ValueError, match="above"):
        energetic.yoshida(energy, onset)

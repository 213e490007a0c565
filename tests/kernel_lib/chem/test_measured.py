"""Measured quantities: exact decimals, standard uncertainty, and the text they are written as."""

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.measured import Measured, Spread, decimal_text
from routeheat.units import CELSIUS, KELVIN, KJ_PER_MOL, PERCENT, PURE, read_unit


def test_a_spread_is_divided_by_its_coverage_factor() -> None:
    # standard uncertainty = expanded uncertainty / k (JCGM 100:2008, 6.2.1)
    assert Spread(Fraction(8), Fraction(1)).standard == 8
    assert Spread(Fraction(8), Fraction(2)).standard == 4
    assert Spread(Fraction(8), Fraction("1.96")).standard == Fraction(200, 49)


def test_not_stated_is_neither_zero_nor_a_guess() -> None:
    assert Measured(Fraction(1), KJ_PER_MOL).u is None
    assert Measured(Fraction(1), KJ_PER_MOL).u_to(KJ_PER_MOL) is None
    assert Measured(Fraction(1), KJ_PER_MOL, Spread(Fraction(0), Fraction(1))).u == 0


def test_values_and_uncertainties_convert_exactly() -> None:
    heat = Measured(Fraction("-10.5"), read_unit("kcal/mol"), Spread(Fraction("0.5"), Fraction(2)))
    assert heat.to(KJ_PER_MOL) == Fraction("-43.932")
    assert heat.u_to(KJ_PER_MOL) == Fraction("1.046")
    warm = Measured(Fraction(50), CELSIUS, Spread(Fraction(1), Fraction(1)))
    assert (warm.to(KELVIN), warm.u_to(KELVIN)) == (Fraction("323.15"), 1)
    assert Measured(Fraction(96), PERCENT).to(PURE) == Fraction(24, 25)


def test_text_keeps_the_decimals_as_typed() -> None:
    spread = Spread(Fraction("0.04"), Fraction(2), "k = 2")
    assert Measured(Fraction("-285.83"), KJ_PER_MOL, spread, 3).text == "-285.830 ± 0.04 kJ/mol (k = 2)"
    assert Measured(Fraction("0.3"), PURE, None, 2).text == "0.30"


@given(st.integers(-(10**12), 10**12), st.integers(0, 12), st.integers(0, 15))
def test_a_decimal_is_written_out_exactly(digits: int, decimals: int, at_least: int) -> None:
    value = Fraction(digits, 10**decimals)
    text = decimal_text(value, at_least)
    assert Fraction(text) == value
    assert len(text.partition(".")[2]) >= at_least


def test_a_fraction_that_is_no_decimal_is_refused() -> None:
    with pytest.raises(ValueError, match="1/3 is not a decimal"):
        decimal_text(Fraction(1, 3))

"""Heat sums: exact coefficients over data, uncertainty that cancels, and honesty about what is not stated."""

import itertools
import math
from fractions import Fraction

import pytest
import sympy
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.heat import Datum, HeatSum

A = Datum("A", value=Fraction(-100), u=Fraction(3))
B = Datum("B", value=Fraction(-50), u=Fraction(4))
BARE = Datum("C", value=Fraction(10))
X = Datum("D", symbol="x")
YIELD = Datum("A", "yield", Fraction(9, 10), Fraction(1, 100))


def total(*terms: tuple[int, Datum]) -> HeatSum:
    return HeatSum.total((Fraction(factor), HeatSum.of(datum)) for factor, datum in terms)


def test_value_and_uncertainty_of_independent_data() -> None:
    # u² = Σ (cᵢ uᵢ)² (JCGM 100:2008, eq. 10): 3-4-5
    both = total((1, A), (1, B))
    assert (both.value, both.u) == (-150.0, 5.0)
    assert both.coefficients == {"A": 1, "B": 1}
    assert both.complete
    assert both.text == "−150 ± 10 (k = 2)"


def test_a_sum_minus_itself_is_exactly_zero() -> None:
    both = total((2, A), (-3, B), (1, BARE), (1, X))
    nothing = both - both
    assert (nothing.exact, nothing.terms, nothing.u) == (0, (), 0.0)


def test_the_difference_of_two_sums_cancels_what_they_share() -> None:
    assert (total((1, A), (1, B)) - total((1, A))).u == 4.0


def test_covariance_comes_from_shared_data() -> None:
    assert total((2, A), (1, B)).covariance(total((3, A))) == 2 * 3 * 9
    assert total((1, A)).covariance(total((1, B))) == 0


def test_not_stated_makes_a_lower_bound() -> None:
    mixed = total((1, A), (1, BARE))
    assert mixed.not_stated == ("C",)
    assert not mixed.complete
    assert mixed.u == 3.0
    assert mixed.text == "−90.0 ± at least 6.0 (k = 2)"
    assert "not stated" in total((1, BARE)).text


def test_an_unknown_heat_keeps_its_letter() -> None:
    symbolic = total((2, X), (1, A))
    assert symbolic.unknowns == {"x": 2}
    assert sympy.simplify(symbolic.value - (2 * sympy.Symbol("x") - 100)) == 0
    with pytest.raises(TypeError, match="unknown x"):
        _ = symbolic.quantity
    assert symbolic.reading.value is None


def test_one_letter_in_two_rows_is_one_unknown() -> None:
    other = Datum("E", symbol="x")
    assert total((1, X), (-1, other)).unknowns == {}
    assert total((1, X), (1, other)).unknowns == {"x": 2}


def test_contributions_name_the_largest_uncertainty_first_and_the_unstated_before_all() -> None:
    shares = total((1, A), (1, B), (1, BARE)).contributions
    assert [item.datum.label for item in shares] == ["C", "B", "A"]
    assert [item.share for item in shares] == [None, 16 / 25, 9 / 25]
    assert shares[1].heat == -50


def test_a_yield_is_named_and_is_no_heat() -> None:
    with_yield = HeatSum(Fraction(-100), ((A, Fraction(1)), (YIELD, Fraction(20))))
    assert with_yield.coefficients == {"A": 1}
    assert [datum.name for datum, _ in with_yield.terms] == ["A", "yield of A"]
    assert with_yield.u == pytest.approx(math.hypot(3, 0.2))


def test_equal_labels_of_two_sheets_are_two_data() -> None:
    here, there = Datum("K1", of="A -> B", u=Fraction(1)), Datum("K1", of="C -> D", u=Fraction(1))
    assert len(total((1, here), (1, there)).terms) == 2


def test_the_quantity_is_in_kilojoules_per_mole() -> None:
    assert total((1, A)).quantity.to("J/mol").magnitude == pytest.approx(-100_000)


data = st.builds(
    Datum,
    st.sampled_from("ABCDE"),
    value=st.fractions(-500, 500, max_denominator=100),
    u=st.none() | st.fractions(0, 20, max_denominator=10),
)
parts = st.lists(st.tuples(st.fractions(-3, 3, max_denominator=6), data.map(HeatSum.of)), max_size=4)


@given(parts)
def test_the_order_of_rows_never_changes_a_result(found: list[tuple[Fraction, HeatSum]]) -> None:
    results = [HeatSum.total(order) for order in itertools.permutations(found)]
    assert len({(item.exact, frozenset(item.terms)) for item in results}) == 1


@given(parts, st.fractions(-4, 4, max_denominator=8))
def test_scaling_scales_value_and_uncertainty(found: list[tuple[Fraction, HeatSum]], factor: Fraction) -> None:
    whole = HeatSum.total(found)
    assert whole.scaled(factor).exact == factor * whole.exact
    assert whole.scaled(factor).variance == factor**2 * whole.variance


def test_a_sum_with_an_estimate_says_so() -> None:
    guess = Datum("G", value=Fraction(-10), u=Fraction(20), estimated=True)
    both = total((1, A), (1, guess))
    assert both.estimated == ("G",)
    assert both.reading.estimated
    assert str(both) == "−110 ± 40 (k = 2, estimated) kJ/mol"
    assert (both - HeatSum.of(guess)).estimated == ()
    assert total((1, A), (1, X), (1, guess)).text == "x − 110 ± 40 (k = 2, estimated)"

"""Exact elimination, against a dense solver written out here."""

from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.chem.exact import Span, presolve, primitive, solve

NUMBERS = st.sampled_from([Fraction(n, d) for n in (-3, -2, -1, 1, 2, 3) for d in (1, 2, 3)])
VECTORS = st.dictionaries(st.integers(0, 5), NUMBERS, max_size=4)
ROWS = st.lists(VECTORS, max_size=7).map(lambda rows: {f"K{i}": row for i, row in enumerate(rows)})


def dense_rank(vectors):
    """Rank by Gauss elimination on a full matrix of fractions."""
    keys = sorted({key for vector in vectors for key in vector})
    matrix = [[Fraction(vector.get(key, 0)) for key in keys] for vector in vectors]
    rank = 0
    for column in range(len(keys)):
        pivot = next((i for i in range(rank, len(matrix)) if matrix[i][column]), None)
        if pivot is None:
            continue
        matrix[rank], matrix[pivot] = matrix[pivot], matrix[rank]
        for i in range(rank + 1, len(matrix)):
            factor = matrix[i][column] / matrix[rank][column]
            matrix[i] = [a - factor * b for a, b in zip(matrix[i], matrix[rank], strict=True)]
        rank += 1
    return rank


def total(coefficients, rows):
    """``Σ c · row`` without zeros."""
    made = {}
    for label, c in coefficients.items():
        for key, value in rows[label].items():
            made[key] = made.get(key, 0) + c * value
    return {key: value for key, value in made.items() if value}


@settings(deadline=None)
@given(ROWS)
def test_rank_is_that_of_the_dense_matrix(rows):
    assert Span(rows).rank == dense_rank(list(rows.values()))


@settings(deadline=None)
@given(ROWS, VECTORS)
def test_a_vector_is_its_residual_plus_the_combination(rows, vector):
    residual, coefficients = Span(rows).reduce(vector)
    made = total(coefficients, rows)
    for key, value in residual.items():
        made[key] = made.get(key, 0) + value
    assert {key: value for key, value in made.items() if value} == vector


@settings(deadline=None)
@given(ROWS, VECTORS)
def test_a_residual_is_left_exactly_when_the_rank_grows(rows, vector):
    residual, _ = Span(rows).reduce(vector)
    assert bool(residual) == (dense_rank([*rows.values(), vector]) > dense_rank(list(rows.values())))


@settings(deadline=None)
@given(ROWS)
def test_cycles_are_integer_give_nothing_and_span_the_null_space(rows):
    cycles = Span(rows).cycles
    assert all(total(cycle, rows) == {} for cycle in cycles)
    assert all(isinstance(value, int) for cycle in cycles for value in cycle.values())
    assert dense_rank(cycles) == len(cycles) == len(rows) - dense_rank(list(rows.values()))


@settings(deadline=None)
@given(ROWS)
def test_rows_added_one_by_one_give_the_same_rank_and_true_cycles(rows):
    span = Span()
    cycles = [cycle for label, row in rows.items() if (cycle := span.add(label, row)) is not None]
    assert span.rank == Span(rows).rank
    assert all(total(cycle, rows) == {} for cycle in cycles)
    assert len(cycles) == len(rows) - span.rank


@settings(deadline=None)
@given(ROWS, VECTORS)
def test_presolve_never_changes_whether_a_target_is_reached(rows, vector):
    kept = {label: rows[label] for label in presolve(rows, vector)}
    assert bool(Span(kept).reduce(vector)[0]) == bool(Span(rows).reduce(vector)[0])


def test_presolve_drops_rows_with_lonely_keys_in_turn_and_rows_apart_from_the_target():
    rows = {"K1": {"a": -1, "b": 1}, "K2": {"b": -1, "c": 1}, "K3": {"c": 1, "d": 1}, "K4": {"x": 1}, "K5": {"x": 2}}
    assert presolve(rows, {"a": 1, "b": 1}) == ["K1"]


def test_primitive_clears_denominators_and_common_divisors():
    assert primitive({"a": Fraction(2, 3), "b": Fraction(-4), "c": Fraction(0)}) == ({"a": 1, "b": -6}, Fraction(3, 2))


def test_a_cycle_that_cannot_replace_anything_is_not_relevant():
    rows = {
        "K1": {"a": -1, "b": 1}, "K2": {"b": -1, "c": 1}, "K3": {"c": -1, "d": 1}, "K4": {"c": -2, "d": 2},
    }  # fmt: skip
    found = solve(rows, {"a": -1, "b": 1})
    assert found is not None
    assert found.coefficients == {"K1": 1}
    assert found.relevant == ("K1",)
    assert found.cycles == ()


def test_an_unreachable_target_has_no_solution():
    assert solve({"K1": {"a": -1, "b": 1}}, {"a": -1, "b": 2}) is None


def test_numbers_that_floats_cannot_hold_stay_exact():
    tiny = Fraction(1, 10**30)
    found = solve({"K1": {"a": 1 + tiny}, "K2": {"a": 1, "b": tiny}}, {"b": Fraction(1)})
    assert found is not None
    assert found.coefficients == {"K1": -1 / (tiny + tiny**2), "K2": 1 / tiny}

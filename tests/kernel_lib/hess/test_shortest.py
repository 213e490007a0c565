"""The shortest combination, against brute force over all subsets of rows."""

from fractions import Fraction
from itertools import combinations

from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.chem.exact import Span, solve
from routeheat.hess.shortest import alternatives, short_cycles, shortest

NUMBERS = st.sampled_from([Fraction(-2), Fraction(-1), Fraction(1), Fraction(2), Fraction(1, 2)])
VECTORS = st.dictionaries(st.integers(0, 4), NUMBERS, max_size=3)
ROWS = st.lists(VECTORS, min_size=1, max_size=6).map(lambda rows: {f"K{i}": row for i, row in enumerate(rows)})


def total(coefficients, rows):
    made = {}
    for label, c in coefficients.items():
        for key, value in rows[label].items():
            made[key] = made.get(key, 0) + c * value
    return {key: value for key, value in made.items() if value}


@st.composite
def networks(draw):
    """Rows with a target that some of them reach."""
    rows = draw(ROWS)
    weights = draw(st.dictionaries(st.sampled_from(sorted(rows)), NUMBERS, min_size=1, max_size=3))
    return rows, total(weights, rows)


def brute_force(rows, target):
    """All combinations of independent rows, by trying every subset, in order of preference."""
    labels = list(rows)
    found = []
    for size in range(len(rows) + 1):
        for subset in combinations(labels, size):
            span = Span({label: rows[label] for label in subset})
            residual, coefficients = span.reduce(target)
            if span.rank == size == len(coefficients) and not residual:
                found.append({label: coefficients[label] for label in subset})
    return sorted(found, key=lambda c: (len(c), sum(map(abs, c.values())), [labels.index(label) for label in c]))


@settings(deadline=None, max_examples=300)
@given(networks())
def test_combinations_come_in_the_order_of_brute_force(network):
    rows, target = network
    found = alternatives(rows, target, 1000)
    assert [item.coefficients for item in found] == brute_force(rows, target)
    assert all(item.proved for item in found)


@settings(deadline=None)
@given(networks(), st.integers(0, 25))
def test_with_a_small_budget_it_still_answers_and_never_claims_too_much(network, budget):
    rows, target = network
    found = shortest(rows, target, budget=budget)
    assert found is not None
    assert total(found.coefficients, rows) == target
    if found.proved:
        assert found.coefficients == brute_force(rows, target)[0]


@settings(deadline=None)
@given(networks())
def test_relevant_rows_are_those_of_some_combination(network):
    rows, target = network
    part = solve(rows, target)
    assert part is not None
    assert set(part.relevant) == {label for coefficients in brute_force(rows, target) for label in coefficients}


@settings(deadline=None)
@given(networks(), st.sampled_from([0, 5, 100_000]))
def test_short_cycles_give_nothing_and_span_the_same_space(network, budget):
    rows, target = network
    part = solve(rows, target)
    assert part is not None
    used = {label: rows[label] for label in part.relevant}
    found = short_cycles(used, part.cycles, budget=budget)
    assert len(found) == len(part.cycles)
    assert all(total(cycle, rows) == {} for cycle in found)
    assert Span(dict(enumerate(found))).rank == len(found)


def test_short_cycles_are_shorter_than_those_of_elimination_where_possible():
    # a ring of six with a chord from 0 to 3: the rings of four are shorter than the whole ring
    rows = {f"K{i}": {i: -1, (i + 1) % 6: 1} for i in range(6)} | {"chord": {0: -1, 3: 1}}
    ring = [{f"K{i}": 1 for i in range(6)}, {"K0": 1, "K1": 1, "K2": 1, "chord": -1}]
    assert sorted(len(cycle) for cycle in short_cycles(rows, ring)) == [4, 4]


def test_fewer_rows_come_before_smaller_coefficients():
    rows = {"one": {"a": Fraction(1, 9)}, "two": {"a": 1, "b": 1}, "three": {"b": 1}}
    found = shortest(rows, {"a": 1})
    assert found is not None
    assert found.coefficients == {"one": 9}


def test_smaller_coefficients_come_before_earlier_rows():
    found = shortest({"K1": {"a": 1}, "K2": {"a": 2}}, {"a": 2})
    assert found is not None
    assert found.coefficients == {"K2": 1}


def test_nothing_gives_the_empty_target():
    found = shortest({"K1": {"a": 1}, "K2": {"a": 2}}, {})
    assert found is not None
    assert (found.coefficients, found.proved) == ({}, True)


def test_an_unreachable_target_has_none():
    assert shortest({"K1": {"a": 1}}, {"b": 1}) is None
    assert alternatives({"K1": {"a": 1}}, {"b": 1}, 5) == ()


@settings(deadline=None)
@given(networks())
def test_out_of_budget_it_still_offers_another_way_where_there_is_one(network):
    rows, target = network
    expected = brute_force(rows, target)
    found = alternatives(rows, target, 2, budget=0)
    assert len(found) == min(len(expected), 2)
    assert all(item.coefficients in expected for item in found)

"""Criticality classes: a complete ordered partition, refusals, and probabilities that add up."""

from __future__ import annotations

import random
from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.process.assessed import NotAssessed
from routeheat.process.classes import (
    AMBIENT_C,
    Normal,
    class_of,
    class_probabilities,
    classify,
    decomposition_probability,
    inconsistency,
)

degrees = st.integers(-20, 300).map(float)
spreads = st.sampled_from([0.0, 0.5, 3.0, 15.0])


@pytest.mark.parametrize(
    ("order", "expected"),
    [
        ("T<M<D", 1),
        ("T<D<M", 2),
        ("T<D=M", 2),
        ("M<T<D", 3),
        ("T=M<D", 3),
        ("M<D<T", 4),
        ("M<D=T", 4),
        ("D<T<M", 5),
        ("D<M<T", 5),
        ("D=T<M", 5),
        ("D<T=M", 5),
        ("D=M<T", 5),
        ("D=M=T", 5),
    ],
)
def test_every_ordering_has_its_class(order: str, expected: int) -> None:
    """All thirteen weak orderings of three temperatures; ties go to the worse class."""
    place, value = 0.0, {}
    for group in order.split("<"):
        value.update(dict.fromkeys(group.split("="), place))
        place += 10
    assert class_of(value["T"], value["M"], value["D"]) == expected


@given(degrees, degrees, degrees, st.floats(0, 100))
def test_raising_mtsr_never_lowers_the_class(t: float, m: float, d: float, more: float) -> None:
    assert class_of(t + more, m, d) >= class_of(t, m, d)


@given(degrees, degrees, degrees, st.floats(0, 100))
def test_lowering_td24_never_lowers_the_class(t: float, m: float, d: float, less: float) -> None:
    assert class_of(t, m, d - less) >= class_of(t, m, d)


def test_every_subset_of_inputs() -> None:
    """A missing T, MTSR or TD24 is refused by name; a missing MTT alone gives classes that cannot be told apart."""
    names = ("T", "MTSR", "MTT", "TD24")
    values = {"T": 20.0, "MTSR": 60.0, "MTT": 100.0, "TD24": 150.0}
    for present in product((True, False), repeat=4):
        given_ = {name: values[name] if there else None for name, there in zip(names, present, strict=True)}
        found = classify(given_["T"], given_["MTSR"], given_["MTT"], given_["TD24"])
        missing = tuple(name for name in ("T", "MTSR", "TD24") if given_[name] is None)
        if missing:
            assert isinstance(found, NotAssessed)
            assert found.missing == missing
        elif given_["MTT"] is None:
            assert found == (3, 2, 1)
        else:
            assert found == (1,)


def test_missing_mtt_beyond_td24_is_four_or_five() -> None:
    assert classify(20, 160, None, 150) == (5, 4)


@given(degrees, degrees, degrees, degrees)
def test_missing_mtt_gives_every_class_some_mtt_gives(t: float, r: float, m: float, d: float) -> None:
    known, unknown = classify(t, r, m, d), classify(t, r, None, d)
    if not isinstance(known, NotAssessed):
        assert not isinstance(unknown, NotAssessed)
        assert set(known) <= set(unknown)


@pytest.mark.parametrize(
    ("process", "mtsr", "mtt", "words"), [(120, 130, 110, "T is above MTT"), (60, 50, 110, "MTSR is below T")]
)
def test_contradictions_are_refused(process: float, mtsr: float, mtt: float, words: str) -> None:
    found = classify(process, mtsr, mtt, 150)
    assert isinstance(found, NotAssessed)
    assert words in found.text


def test_tp_at_mtt_is_allowed() -> None:
    assert inconsistency(110, 130, 110) == ""


def test_ambient_is_the_least_scenario_temperature() -> None:
    assert classify(0, 2.4, 66, 25) == (5,)
    assert classify(0, 2.4, 66, 25, ambient_c=10) == (2,)


@given(degrees, degrees, degrees, spreads, spreads, spreads)
def test_probabilities_add_up_to_one(t: float, m: float, d: float, st_: float, sm: float, sd: float) -> None:
    found = class_probabilities(Normal(t, st_), Normal(m, sm), Normal(d, sd))
    assert sum(found.values()) == pytest.approx(1.0, abs=1e-6)
    assert min(found.values()) >= -1e-9


@given(degrees, degrees, degrees)
def test_without_uncertainty_one_class_is_certain(t: float, m: float, d: float) -> None:
    found = class_probabilities(Normal(t), Normal(m), Normal(d))
    assert found[class_of(max(t, AMBIENT_C), m, d)] == 1.0
    assert sum(found.values()) == 1.0


@given(degrees, degrees, degrees, spreads, spreads, spreads)
def test_classes_four_and_five_are_the_decomposition(
    t: float, m: float, d: float, st_: float, sm: float, sd: float
) -> None:
    found = class_probabilities(Normal(t, st_), Normal(m, sm), Normal(d, sd))
    assert found[4] + found[5] == pytest.approx(decomposition_probability(Normal(t, st_), Normal(d, sd)), abs=1e-6)


@given(degrees, degrees, degrees, st.floats(0, 60))
def test_a_higher_mtsr_never_makes_a_decomposition_less_likely(t: float, m: float, d: float, more: float) -> None:
    one, two = (class_probabilities(Normal(x, 5.0), Normal(m, 3.0), Normal(d, 15.0)) for x in (t, t + more))
    assert two[4] + two[5] >= one[4] + one[5] - 1e-9


def test_probabilities_against_counting() -> None:
    """A count over 40 000 draws: the integral must be inside four standard deviations of it."""
    draw = random.Random(20_240_101)
    means, spread = (38.0, 45.0, 50.0), (10.0, 8.0, 12.0)
    count = dict.fromkeys(range(1, 6), 0)
    number = 40_000
    for _ in range(number):
        t, m, d = (draw.gauss(mean, sd) for mean, sd in zip(means, spread, strict=True))
        count[class_of(max(t, AMBIENT_C), m, d)] += 1
    found = class_probabilities(*(Normal(mean, sd) for mean, sd in zip(means, spread, strict=True)))
    for number_of_class, chance in found.items():
        expected = (chance * (1 - chance) / number) ** 0.5
        assert abs(count[number_of_class] / number - chance) < 4 * expected


def test_same_inputs_same_digits() -> None:
    one, two = (class_probabilities(Normal(175, 5), Normal(170, 3), Normal(190, 15)) for _ in range(2))
    assert one == two

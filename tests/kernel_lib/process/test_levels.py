"""Severity and probability: edges, scales, own thresholds."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.process.levels import (
    PROBABILITY_3,
    PROBABILITY_6,
    SEVERITY_3,
    SEVERITY_4,
    Thresholds,
    probability,
    severity,
)


@pytest.mark.parametrize(
    ("rise", "word"), [(49.9, "negligible"), (50, "medium"), (200, "critical"), (400, "catastrophic")]
)
def test_four_levels_of_severity(rise: float, word: str) -> None:
    assert severity(rise, levels=4).word == word


@pytest.mark.parametrize(
    ("hours", "word"),
    [
        (101, "almost impossible"),
        (100, "improbable"),
        (50, "seldom"),
        (24, "occasional"),
        (8, "probable"),
        (1, "frequent"),
    ],
)
def test_six_levels_of_probability(hours: float, word: str) -> None:
    assert probability(hours, levels=6).word == word


def test_scale_is_named() -> None:
    assert severity(10).text == "low (severity, 3 levels)"
    assert probability(1, levels=6).text == "frequent (probability, 6 levels)"


@given(st.floats(0, 1000), st.floats(0, 1000))
def test_more_rise_is_never_less_severe(one: float, two: float) -> None:
    low, high = sorted((one, two))
    for levels, words in ((3, SEVERITY_3), (4, SEVERITY_4)):
        assert words.index(severity(low, levels=levels).word) <= words.index(severity(high, levels=levels).word)


@given(st.floats(0.01, 1000), st.floats(0.01, 1000))
def test_less_time_is_never_less_probable(one: float, two: float) -> None:
    low, high = sorted((one, two))
    for levels, words in ((3, PROBABILITY_3), (6, PROBABILITY_6)):
        assert words.index(probability(low, levels=levels).word) >= words.index(probability(high, levels=levels).word)


def test_thresholds_can_be_set() -> None:
    own = Thresholds(severity_3=(20.0, 100.0), probability_3=(48.0, 12.0))
    assert severity(30, thresholds=own).word == "medium"
    assert probability(30, thresholds=own).word == "medium"


@pytest.mark.parametrize(
    "wrong",
    [
        {"severity_3": (200.0, 50.0)},
        {"probability_3": (8.0, 24.0)},
        {"margin": 0.0},
        {"reachable": 1.0},
    ],
)
def test_thresholds_out_of_order_are_refused(wrong: dict[str, object]) -> None:
    with pytest.raises(ValueError, match=r"thresholds|lies in"):
        Thresholds(**wrong)  # type: ignore[arg-type]


def test_unknown_scales_are_refused() -> None:
    with pytest.raises(ValueError, match="3 or 4"):
        severity(10, levels=5)
    with pytest.raises(ValueError, match="3 or 6"):
        probability(10, levels=4)

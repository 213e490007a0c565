"""The load of a jacket against feed time, as a curve."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.process.assessed import NotAssessed
from routeheat.process.feed import FeedCheck, Vessel
from routeheat.process.vessel import VesselStep, vessel

VESSEL = Vessel(800.0, 500.0, -135.0, 300.0, 3.0, 20.0, -10.0)


@pytest.fixture
def step(code: SimpleNamespace) -> VesselStep:
    return vessel(code.step("A1", "C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)", "-135 ± 8", conc="1.6", cp="1.75",
                            at="20 degC"))  # fmt: skip


def with_feed(step: VesselStep, feed: FeedCheck | NotAssessed) -> VesselStep:
    return replace(step, feed=feed)


def test_points_are_the_load_of_the_vessel_in_per_cent(step: VesselStep) -> None:
    curve = with_feed(step, FeedCheck(VESSEL, 1.5, 0.8, False)).curve()
    for hours, load in curve.points:
        assert load == pytest.approx(100 * VESSEL.load(hours))
    assert curve.points[0][0] < 1.5 < curve.points[-1][0]


def test_capacity_and_margin_are_levels(step: VesselStep) -> None:
    curve = with_feed(step, FeedCheck(VESSEL, 1.5, 0.8, False)).curve()
    assert [(level.value, level.strong) for level in curve.levels] == [(100.0, True), (80.0, False)]


def test_spots_are_the_typed_and_the_shortest_feed_times(step: VesselStep) -> None:
    # n(−ΔH) 108 000 kJ over U A ΔT 27 kW is 4000 s
    curve = with_feed(step, FeedCheck(VESSEL, 1.5, 0.8, False)).curve()
    typed, full, margin = curve.spots
    assert (typed.x, typed.look) == (1.5, "disc")
    assert full.x == pytest.approx(4000 / 3600)
    assert margin.x == pytest.approx(5000 / 3600)
    assert "1.12\N{NO-BREAK SPACE}h" in full.words
    assert "1.39\N{NO-BREAK SPACE}h" in margin.words


def test_an_insufficient_jacket_says_how_long_to_feed(step: VesselStep) -> None:
    curve = with_feed(step, FeedCheck(VESSEL, 0.6, 0.8, False)).curve()
    assert curve.notes[0] == "Insufficient: extend feed to at least 1.12 h."


@pytest.mark.parametrize(
    ("stirring", "words", "count"),
    [
        (24.0, "No feed keeps within the margin: stirring alone exceeds it.", 2),
        (30.0, "No feed is slow enough: stirring alone takes the whole capacity.", 1),
    ],
)
def test_stirring_that_leaves_nothing_is_said(step: VesselStep, stirring: float, words: str, count: int) -> None:
    curve = with_feed(step, FeedCheck(replace(VESSEL, stirring_kw=stirring), 1.5, 0.8, False)).curve()
    assert words in curve.notes
    assert len(curve.spots) == count


def test_a_feed_that_takes_up_more_than_is_released_still_has_a_curve(step: VesselStep) -> None:
    cold = replace(VESSEL, fed_kg=3000.0, feed_cp=4.0, feed_c=0.0)
    curve = with_feed(step, FeedCheck(cold, 1.5, 0.8, False)).curve()
    assert all(load < 0 for _, load in curve.points)


def test_what_is_missing_is_said_and_nothing_is_drawn(step: VesselStep) -> None:
    curve = with_feed(step, NotAssessed("feed and cooling not checked", ("U", "area"))).curve()
    assert (curve.points, curve.spots, curve.levels) == ((), (), ())
    assert curve.missing == "feed and cooling not checked: U, area missing"
    assert curve.missing in curve.alt

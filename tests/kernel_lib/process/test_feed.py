"""Feed, cooling, boiling and gas."""

from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.process.feed import FeedCheck, Gas, Vessel, evaporated_mass, sensible_heat_rate, vapour_rate

PILOT = Vessel(400.0, 250.0, -135.0, 350.0, 1.4, 20.0, -10.0)


@given(st.floats(0.1, 50.0), st.floats(0.1, 50.0))
def test_longer_feed_never_loads_more(one: float, two: float) -> None:
    short, long = sorted((one, two))
    assert PILOT.load(long) <= PILOT.load(short)


@given(st.floats(0.2, 1.0))
def test_shortest_feed_loads_exactly_the_margin(margin: float) -> None:
    hours = PILOT.shortest(margin)
    assert hours is not None
    assert PILOT.load(hours) == pytest.approx(margin)


def test_cold_feed_and_stirring_enter_the_load() -> None:
    vessel = replace(PILOT, stirring_kw=1.0, fed_kg=50.0, feed_cp=2.0, feed_c=5.0)
    assert sensible_heat_rate(50.0, 2.0, 20.0, 5.0, 1.5) == pytest.approx(1500 / 5400)
    assert vessel.load(1.5) == pytest.approx((10.0 - 1500 / 5400 + 1.0) / 14.7)
    hours = vessel.shortest(0.8)
    assert hours is not None
    assert vessel.load(hours) == pytest.approx(0.8)


def test_stirring_that_takes_all_leaves_no_feed() -> None:
    check = FeedCheck(replace(PILOT, stirring_kw=20.0), 1.5, 0.8, False)
    assert check.shortest_h is None
    assert check.verdict == "insufficient: stirring alone takes the whole capacity"


def test_between_margin_and_capacity() -> None:
    check = FeedCheck(PILOT, 1.1, 0.8, False)
    assert 0.8 < check.load < 1
    assert check.verdict == "within the capacity, above the margin of 0.8: it needs 1.28 h"


def test_printed_shortest_feed_is_long_enough() -> None:
    check = FeedCheck(PILOT, 0.5, 0.8, False)
    printed = float(check.verdict.split()[-2])
    assert PILOT.load(printed) <= 1


def test_evaporation_starts_above_the_boiling_point() -> None:
    assert evaporated_mass(100.0, 2.0, -5.0, 400.0) == 0.0
    assert evaporated_mass(100.0, 2.0, 20.0, 400.0) == 10.0


def test_vapour_rate_by_hand() -> None:
    assert vapour_rate(10.0, 1000.0, 500.0) == pytest.approx(72.0)


def gas(**more: object) -> Gas:
    made = {
        "per_mol": 1.0,
        "origin": "from the equation",
        "celsius": 20.0,
        "pressure_pa": 101325.0,
        "limiting_mol": 400.0,
        "feed_h": 2.0,
        "accumulated": 0.05,
        **more,
    }
    return Gas(**made)  # type: ignore[arg-type]


def test_gas_rate_follows_the_feed() -> None:
    assert gas().per_hour == 200.0
    assert gas().volume_rate == pytest.approx(4.81, abs=5e-3)


def test_gas_of_a_batch_has_no_rate_and_says_so() -> None:
    found = gas(feed_h=None)
    assert (found.per_hour, found.volume_rate) == (None, None)
    assert "not limited by a feed" in found.notes[0]


def test_accumulation_takes_the_feed_out_of_control() -> None:
    assert "only while little accumulates" in gas(accumulated=0.4).notes[0]


def test_no_gas_in_the_equation_is_not_no_gas() -> None:
    (note,) = gas(per_mol=0.0, origin="from the equation").notes
    assert "side reactions are not assessed" in note


def test_a_typed_zero_needs_no_note() -> None:
    assert gas(per_mol=0.0, origin="typed").notes == ()

"""The load of a jacket against the feed time, with its capacity and the margin, as a curve."""

from __future__ import annotations

from typing import TYPE_CHECKING

from routeheat.present.curve import Curve, Level, Spot
from routeheat.present.markup import Rich, Run
from routeheat.present.numbers import number
from routeheat.process.assessed import NotAssessed
from routeheat.process.cautions import SHORT
from routeheat.process.feed import FeedCheck, rounded_up

if TYPE_CHECKING:
    from routeheat.process.vessel import VesselStep

_LOAD: Rich = (Run("load of the jacket"),)
_TIME: Rich = (Run("feed time"),)
_POINTS = 81
_NOTES = (
    "Load: heat rate while feeding over what the jacket removes, U A ΔT. It holds when the reaction keeps up with the "
    "feed (little accumulation).",
    "The uncertainty of the load is not computed.",
    SHORT,
)


def load_curve(step: VesselStep) -> Curve:
    """Load in per cent against feed time in h, the typed feed time and the shortest ones as points."""
    title = f"{step.label}: load of the jacket against feed time"
    check = step.feed
    if isinstance(check, NotAssessed):
        words = check.text
        return Curve(title, (), _TIME, "h", _LOAD, "%", (), (), words, _NOTES, f"{title}. {words}.")
    spots = _spots(check)
    words = "; ".join([*(spot.words for spot in spots), check.verdict])
    notes = (f"{check.verdict[0].upper()}{check.verdict[1:]}.", *_missing_times(check), *_NOTES)
    return Curve(title, _points(check), _TIME, "h", _LOAD, "%", _levels(check), spots, "", notes, f"{title}. {words}.")


def _levels(check: FeedCheck) -> tuple[Level, ...]:
    return (
        Level(100.0, f"capacity of the jacket, {number(check.vessel.capacity_kw, 2)}\N{NO-BREAK SPACE}kW"),
        Level(100 * check.margin, f"margin, {number(100 * check.margin, 0)}\N{NO-BREAK SPACE}% of it", strong=False),
    )


def _spots(check: FeedCheck) -> tuple[Spot, ...]:
    load = 100 * check.load
    words = f"feed as typed: {_hours(check.feed_h)}, {number(load, 0)}\N{NO-BREAK SPACE}%"
    spots = [Spot(check.feed_h, load, words)]
    for limit, hours, margin in (("at full capacity", check.shortest_h, 1.0),
                                 ("within the margin", check.shortest_with_margin_h, check.margin)):  # fmt: skip
        if hours:
            spots.append(Spot(hours, 100 * margin, f"shortest {limit}: {_hours(rounded_up(hours))}", "ring"))
    return tuple(spots)


def _hours(hours: float) -> str:
    return f"{number(hours, 2)}\N{NO-BREAK SPACE}h"


def _missing_times(check: FeedCheck) -> tuple[str, ...]:
    if check.shortest_h is None:
        return ("No feed is slow enough: stirring alone takes the whole capacity.",)
    if check.shortest_with_margin_h is None:
        return ("No feed keeps within the margin: stirring alone exceeds it.",)
    return ()


def _points(check: FeedCheck) -> tuple[tuple[float, float], ...]:
    """From the feed time that would need half more than the highest load of interest to beyond the longest of them."""
    vessel = check.vessel
    top = max(1.3 * check.load, 1.5)
    first = vessel.shortest(top) or check.feed_h / 8
    last = max(2 * check.feed_h, 1.4 * (check.shortest_h or 0.0), 1.4 * (check.shortest_with_margin_h or 0.0))
    ratio = last / first
    hours = [first * ratio ** (index / (_POINTS - 1)) for index in range(_POINTS)]
    return tuple((time, 100 * vessel.load(time)) for time in hours)

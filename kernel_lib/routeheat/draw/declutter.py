"""Where a piece of text finds a free place: deterministic, nearest first.

Marks and texts already placed are rectangles in a :class:`Space`. A text tries its candidate places in order of cost
(distance from what it names) and takes the first that is free; when it stands off, a leader line joins the two. The
caller grows the canvas when no candidate is free, so nothing ever overlaps.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import NamedTuple

_CELL = 64.0
_STEP = 6.0
_APART = 5.0
"""Gap (px) to the left and right of a text, so that neighbours do not read as one."""
_ABROAD = 26.0
"""Cost of a place between the arrows of another column, where a text could be misread."""
_LEADER_FROM = 11.0
"""Gap (px) between a text and its arrow from which on a leader joins them."""


class Rect(NamedTuple):
    """A rectangle by its corners; ``y`` grows downwards."""

    x0: float
    y0: float
    x1: float
    y1: float

    def overlaps(self, other: Rect) -> bool:
        """True when the two share an area."""
        return self.x0 < other.x1 and other.x0 < self.x1 and self.y0 < other.y1 and other.y0 < self.y1


class Segment(NamedTuple):
    """A leader from a mark (0) to its text (1)."""

    x0: float
    y0: float
    x1: float
    y1: float


class Spot(NamedTuple):
    """A free place for a text, with its leader where it stands off."""

    rect: Rect
    leader: Segment | None


@dataclass(slots=True)
class Space:
    """The occupied part of a plot."""

    bounds: Rect
    _cells: dict[int, list[tuple[Rect, bool]]] = field(default_factory=lambda: defaultdict(list))
    _leaders: list[Segment] = field(default_factory=list)

    def occupy(self, rect: Rect, *, thin: bool = False) -> None:
        """Reserve ``rect``; a ``thin`` mark (a level) may be crossed by leaders but not by text."""
        for cell in _cells(rect.x0, rect.x1):
            self._cells[cell].append((rect, thin))

    def take(self, spot: Spot) -> None:
        """Reserve a text and its leader."""
        rect = spot.rect
        self.occupy(Rect(rect.x0 - _APART, rect.y0 - 1, rect.x1 + _APART, rect.y1 + 1))
        if spot.leader:
            self._leaders.append(spot.leader)

    def free(self, spot: Spot) -> bool:
        """True when neither the text nor its leader meets anything."""
        rect = spot.rect
        bounds = self.bounds
        if rect.x0 < bounds.x0 or rect.x1 > bounds.x1 or rect.y0 < bounds.y0 or rect.y1 > bounds.y1:
            return False
        for cell in _cells(rect.x0, rect.x1):
            for other, _ in self._cells[cell]:
                if rect.x0 < other.x1 and other.x0 < rect.x1 and rect.y0 < other.y1 and other.y0 < rect.y1:
                    return False
        if any(crosses(leader, rect) for leader in self._leaders):
            return False
        return spot.leader is None or self._clear(spot.leader)

    def _clear(self, leader: Segment) -> bool:
        # a leader along a level would read as part of it
        flat = abs(leader.y1 - leader.y0) < 4
        for cell in _cells(min(leader.x0, leader.x1), max(leader.x0, leader.x1)):
            for other, thin in self._cells[cell]:
                if (flat or not thin) and crosses(leader, other):
                    return False
        return not any(_cross(leader, other) for other in self._leaders)


def crosses(segment: Segment, rect: Rect) -> bool:
    """True when a straight segment passes through a rectangle (clipping after Liang and Barsky, 1984)."""
    enter, leave = 0.0, 1.0
    for start, delta, low, high in (
        (segment.x0, segment.x1 - segment.x0, rect.x0, rect.x1),
        (segment.y0, segment.y1 - segment.y0, rect.y0, rect.y1),
    ):
        if delta == 0:
            if start <= low or start >= high:
                return False
            continue
        near, far = sorted(((low - start) / delta, (high - start) / delta))
        enter, leave = max(enter, near), min(leave, far)
    return enter < leave


def _cross(one: Segment, other: Segment) -> bool:
    def side(line: Segment, x: float, y: float) -> float:
        return (line.x1 - line.x0) * (y - line.y0) - (line.y1 - line.y0) * (x - line.x0)

    return (
        side(one, other.x0, other.y0) * side(one, other.x1, other.y1) < 0
        and side(other, one.x0, one.y0) * side(other, one.x1, one.y1) < 0
    )


def beside(
    space: Space, x: float, low: float, high: float, width: float, height: float, *, reach: float,
    within: tuple[float, float],
) -> Spot | None:  # fmt: skip
    """A free place beside a vertical mark at ``x`` that extends from ``low`` to ``high`` px (``low`` above).

    Right of its middle is best; then along the mark, left of it, above or below its ends, and farther off up to
    ``reach`` px with a leader; outside the two ``within`` only when there is nothing near. ``None`` when there is no
    free place within reach.
    """
    middle = (low + high) / 2
    places = [
        (8.0, 0.0), (18.0, 1.5), (-8.0 - width, 12.0), (-width / 2, 14.0), (-width * 0.8, 16.0), (28.0, 18.0),
        (44.0, 30.0), (-24.0 - width, 34.0), (66.0, 48.0), (-48.0 - width, 60.0),
    ]  # fmt: skip
    favourite = _spot(x, low, high, Rect(x + 8, middle - height / 2, x + 8 + width, middle + height / 2))
    if space.free(favourite):
        return favourite
    far = reach + height / 2
    top_most, low_most = space.bounds.y0 + height / 2, space.bounds.y1 - height / 2
    centres = tuple(_steps(middle, max(top_most, low - far), min(low_most, high + far)))
    candidates = []
    for shift, home in places:
        toll = home
        if x + shift < within[0] or x + shift + width > within[1]:
            toll += _ABROAD
        if toll > reach or x + shift < space.bounds.x0 or x + shift + width > space.bounds.x1:
            continue
        for centre in centres:
            top, bottom = centre - height / 2, centre + height / 2
            off = max(0.0, low - bottom, top - high)
            if shift < 0 < shift + width and top < high + 3 and bottom > low - 3:
                continue
            if off + toll <= reach:
                candidates.append((toll + off + 0.15 * abs(centre - middle), x + shift, top))
    return _first(space, ((left, top) for _, left, top in sorted(candidates)), x, low, high, width, height)


def along(
    space: Space, x0: float, x1: float, y: float, width: float, height: float, *, above: bool, at_end: bool,
    reach: float,
) -> Spot | None:  # fmt: skip
    """A free place over or under a level line from ``x0`` to ``x1`` at ``y``, by preference at its start or its end."""
    home = x1 - width if at_end else x0
    candidates = []
    for side in (True, False):
        furthest = min(reach, space.bounds.y1 - space.bounds.y0)
        for lift in range(int(furthest / 4) + 1):
            top = y - 3 - height - 4 * lift if side else y + 3 + 4 * lift
            for slide in range(-4, 5):
                left = home + slide * max(8.0, width / 4)
                if left + width < x0 or left > x1:
                    continue
                outside = max(0.0, x0 - left, left + width - x1)
                cost = 4.0 * lift + (0 if side == above else 10) + 0.2 * abs(left - home) + 0.05 * outside
                candidates.append((cost, left, top))
    foot = (x0 + x1) / 2
    return _first(space, ((left, top) for _, left, top in sorted(candidates)), foot, y, y, width, height, wide=x1 - x0)


def _first(
    space: Space, corners: Iterable[tuple[float, float]], x: float, low: float, high: float, width: float,
    height: float, *, wide: float = 0.0,
) -> Spot | None:  # fmt: skip
    for left, top in corners:
        spot = _spot(x, low, high, Rect(left, top, left + width, top + height), wide=wide)
        if space.free(spot):
            return spot
    return None


def _spot(x: float, low: float, high: float, rect: Rect, *, wide: float = 0.0) -> Spot:
    """The place ``rect`` for what stands at ``x ± wide/2`` from ``low`` to ``high``, with a leader when it is far."""
    target_y = min(max((rect.y0 + rect.y1) / 2, low), high)
    target_x = min(max((rect.x0 + rect.x1) / 2, x - wide / 2), x + wide / 2)
    gap_x = max(rect.x0 - target_x, target_x - rect.x1, 0.0)
    gap_y = max(rect.y0 - target_y, target_y - rect.y1, 0.0)
    if max(gap_x - 8.0, gap_y) <= _LEADER_FROM:
        return Spot(rect, None)
    if gap_x > gap_y:
        end_x = rect.x0 - 1 if rect.x0 > target_x else rect.x1 + 1
        end_y = (rect.y0 + rect.y1) / 2
        start = (target_x + (7.5 if end_x > target_x else -7.5), target_y)
    else:
        end_x = min(max(target_x, rect.x0 + 4), rect.x1 - 4)
        end_y = rect.y0 - 1 if rect.y0 > target_y else rect.y1 + 1
        start = (target_x, target_y + (4.5 if end_y > target_y else -4.5))
    return Spot(rect, Segment(start[0], start[1], end_x, end_y))


def _steps(middle: float, low: float, high: float) -> Iterable[float]:
    count = int(max(high - middle, middle - low) / _STEP) + 1
    for index in range(-count, count + 1):
        centre = middle + index * _STEP
        if low <= centre <= high:
            yield centre


def _cells(x0: float, x1: float) -> range:
    return range(int(x0 // _CELL), int(x1 // _CELL) + 1)

"""Labels of the dots of one row: over and under its line, as near to their dots as they fit, never over each other."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache

from routeheat.draw.chart import CAP
from routeheat.draw.declutter import Rect, Segment, Space, Spot

HALF = 8.0
"""Half-width and half-height in px of the place that a dot takes."""
_BARE = 11.0
"""Half-height in px of a row without labels."""
_GAP = 5.0
"""Distance in px of the nearest labels from the dots, so that a leader has a length."""
_FAR = 1e6
_STEPS = (
    0.0, 0.12, -0.12, 0.25, -0.25, 0.38, -0.38, 0.5, -0.5, 0.65, -0.65, 0.8, -0.8, 1.0, -1.0, 1.3, -1.3, 1.7, -1.7,
)  # fmt: skip
"""Shifts of a label from its dot in widths of the label."""
_BESIDE = 8.0
_NEAR = 10.0
"""Shift in px up to which a label needs no leader."""
_WORTH = 2
"""How many higher rows are tried even where a lower one holds all labels, since they may stand nearer."""
_LANES = ((1, 1), (2, 1), (2, 2), (3, 2), (3, 3), (5, 5))


@dataclass(frozen=True, slots=True)
class Tag:
    """A label to be placed: its dot's place along the row and its size."""

    x: float
    w: float
    h: float


@dataclass(frozen=True, slots=True)
class Placed:
    """The labels of a row, as rectangles around the row's line at height 0, with their leaders."""

    spots: tuple[Spot, ...]
    """In the order of the tags."""
    above: float
    """How far the highest label reaches over the line, px."""
    below: float


@lru_cache(maxsize=256)
def place(
    tags: tuple[Tag, ...], whiskers: tuple[tuple[float, float], ...], left: float, right: float, *, low: bool = False
) -> Placed:
    """Places for all tags between ``left`` and ``right`` px; ``whiskers`` are on the line, px.

    ``low`` prefers a low row to labels that stand nearer.
    """
    if not tags:
        return Placed((), _BARE, _BARE)
    found: list[tuple[float, tuple[Spot, ...]]] = []
    for index, (above, below) in enumerate(_LANES):
        choices = [_candidates(tags, each, left, right, above, below) for each in range(len(tags))]
        tries = (_fill(tags, order, whiskers, left, right, choices) for order in _orders(tags))
        found += [item for item in tries if item is not None]
        if found and index >= (0 if low else _WORTH):
            _, spots = min(found, key=lambda item: item[0])
            return Placed(
                spots, max(HALF, *(-spot.rect.y0 for spot in spots)), max(HALF, *(spot.rect.y1 for spot in spots))
            )
    return _stacked(tags, left, right)


def _stacked(tags: tuple[Tag, ...], left: float, right: float) -> Placed:
    """Labels under each other, each as near under its dot as it fits: for labels as wide as the plot."""
    spots, top = [], HALF + _GAP
    for tag in tags:
        x0 = max(min(tag.x - tag.w / 2, right - tag.w), left)
        spots.append(Spot(Rect(x0, top, x0 + tag.w, top + tag.h), None))
        top += tag.h + 2
    return Placed(tuple(spots), _BARE, top - 2)


def _orders(tags: tuple[Tag, ...]) -> Iterator[tuple[int, ...]]:
    rising = tuple(sorted(range(len(tags)), key=lambda index: (tags[index].x, index)))
    yield rising
    yield rising[::-1]
    yield (*rising[::2], *rising[1::2])
    yield (*rising[1::2], *rising[::2])


def _fill(
    tags: tuple[Tag, ...], order: tuple[int, ...], whiskers: tuple[tuple[float, float], ...], left: float,
    right: float, choices: list[list[tuple[float, Spot]]],
) -> tuple[float, tuple[Spot, ...]] | None:  # fmt: skip
    space = Space(Rect(left, -_FAR, right, _FAR))
    for tag in tags:
        space.occupy(Rect(tag.x - HALF, -HALF, tag.x + HALF, HALF))
    for low, high in whiskers:
        space.occupy(Rect(low - 1, -CAP, high + 1, CAP), thin=True)
    found: dict[int, Spot] = {}
    total = 0.0
    for index in order:
        best = next(((cost, spot) for cost, spot in choices[index] if space.free(spot)), None)
        if best is None:
            return None
        total += best[0]
        found[index] = best[1]
        space.take(best[1])
        for rect in _along(best[1].leader):
            space.occupy(rect, thin=True)
    return total, tuple(found[index] for index in range(len(tags)))


def _along(leader: Segment | None) -> Iterator[Rect]:
    """Small rectangles along a leader, so that no text touches it."""
    if leader is None:
        return
    for part in (0.2, 0.4, 0.6, 0.8, 1.0):
        x = leader.x0 + (leader.x1 - leader.x0) * part
        y = leader.y0 + (leader.y1 - leader.y0) * part
        yield Rect(x - 1.5, y - 3, x + 1.5, y + 3)


def _candidates(
    tags: tuple[Tag, ...], index: int, left: float, right: float, above: int, below: int
) -> list[tuple[float, Spot]]:
    tag = tags[index]
    lane = tag.h + 2
    starts = [tag.x - tag.w / 2 + step * tag.w for step in _STEPS]
    # just beside another dot, so that its leader has room
    starts += [start for other in tags for start in (other.x + _BESIDE, other.x - _BESIDE - tag.w)]
    places = []
    for side, count in ((-1, above), (1, below)):
        for level in range(count):
            top = -HALF - _GAP - tag.h - level * lane if side < 0 else HALF + _GAP + level * lane
            for start in starts:
                x0 = max(min(start, right - tag.w), left)
                shift = abs(x0 + tag.w / 2 - tag.x)
                cost = shift + 2.0 * max(0.0, shift - tag.w / 2) + 24.0 * level + (2.0 if side > 0 else 0.0)
                spot = _spot(tags, index, Rect(x0, top, x0 + tag.w, top + tag.h), level)
                places.append((cost + (6.0 if spot.leader else 0.0), spot))
    return sorted(places, key=lambda item: (item[0], item[1].rect))


def _spot(tags: tuple[Tag, ...], index: int, rect: Rect, level: int) -> Spot:
    """The place with a leader where it is not plain which dot it belongs to."""
    x = tags[index].x
    crowded = any(rect.x0 - 4 < other.x < rect.x1 + 4 for place, other in enumerate(tags) if place != index)
    if not level and abs((rect.x0 + rect.x1) / 2 - x) <= _NEAR and not crowded:
        return Spot(rect, None)
    foot = -HALF - 0.5 if rect.y1 < 0 else HALF + 0.5
    end = rect.y1 + 0.5 if rect.y1 < 0 else rect.y0 - 0.5
    inside = min(max(x, rect.x0 + 6), rect.x1 - 6)
    return Spot(rect, Segment(x, foot, inside, end))

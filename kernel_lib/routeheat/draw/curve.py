"""Lays out a curve with the levels it is held against and its marked points; both axes are linear.

Texts never overlap each other, the curve or the levels: where they find no place the plot grows higher, and where that
does not help they stand below it.
"""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import pairwise

from routeheat.draw.blocks import SIZES, Block, line_box, paragraph
from routeheat.draw.chart import Band, Chart, Point, Rule, Ruler
from routeheat.draw.declutter import Rect, Segment, Space, along
from routeheat.draw.declutter import Spot as Place
from routeheat.draw.frame import MARGIN, ticks
from routeheat.draw.geometry import TextBox
from routeheat.draw.metrics import LINE, shorten, text_width
from routeheat.present.curve import Curve, Spot
from routeheat.present.markup import as_rich, plain
from routeheat.present.text import visible, visible_rich, with_unit

NATURAL = 520.0
"""Width in px of a curve when nothing else is asked for."""
_LEAST = 240.0
_PLOT = 280.0
_GROWTH = (1.0, 1.25, 1.6)
_HEADROOM = 1.06
_REACH = 120.0
"""How far in px the words of a level may stand from it."""
_CLEAR = 8.0
"""Distance in px of a leader from the middle of its point."""
_LEADER = 16.0
"""Distance in px from which on a leader joins a text with its point."""


def lay_out_curve(curve: Curve, *, width: float | None = None, height: float | None = None) -> Chart:
    """Places of everything in the figure.

    ``width`` is the canvas in px, at least 240; the height follows, and is at least ``height``.
    Raises :class:`ValueError` when a number is not finite.
    """
    canvas = max(width or NATURAL, _LEAST)
    for tall in _GROWTH:
        for at_end in (True, False):
            chart = _attempt(curve, canvas, height or 0.0, _PLOT * tall, at_end)
            if chart is not None:
                return chart
    words = [curve.missing, *(level.words for level in curve.levels), *(spot.words for spot in curve.spots)]
    listed = tuple(f"{item}." for item in words if item)
    bare = replace(
        curve, levels=tuple(replace(item, words="") for item in curve.levels),
        spots=tuple(replace(item, words="") for item in curve.spots), missing="", notes=(*listed, *curve.notes),
    )  # fmt: skip
    chart = _attempt(bare, canvas, height or 0.0, _PLOT, True)
    assert chart is not None, "nothing is left to be placed"
    return replace(chart, bands=tuple(map(_named, chart.bands, curve.spots)))


def _named(band: Band, spot: Spot) -> Band:
    return replace(band, label=visible(spot.words), hover=(visible(spot.words),))


def _ranges(curve: Curve) -> tuple[float, float, float]:
    """First and last place along, and the highest value."""
    pairs = [*curve.points, *((spot.x, spot.y) for spot in curve.spots)]
    numbers = [number for pair in pairs for number in pair] + [level.value for level in curve.levels]
    if not all(map(math.isfinite, numbers)):
        raise ValueError("a number of the curve is not finite")
    last = max((x for x, _ in pairs), default=1.0)
    lowest = min((y for _, y in pairs), default=0.0)
    highest = max([*(y for _, y in pairs), *(level.value for level in curve.levels)], default=1.0)
    highest = max(highest, 0.0) * _HEADROOM or 1.0
    return last if last > 0 else 1.0, min(lowest, 0.0), highest


def _attempt(curve: Curve, canvas: float, height: float, plot: float, at_end: bool) -> Chart | None:
    """The figure at one height, or ``None``; ``at_end``: words of levels stand by preference at their right end."""
    title = paragraph(as_rich(curve.title), "title", canvas - 2 * MARGIN, lines=4, bold=True)
    notes = [paragraph(as_rich(note), "note", canvas - 2 * MARGIN, lines=6) for note in curve.notes]
    below = SIZES["tick"] * LINE + SIZES["axis"] * LINE + 22 + sum(block.h + 1 for block in notes)
    last, low, high = _ranges(curve)
    top = 10 + title.h + (14 if title.h else 4)
    bottom = max(top + plot, height - below)
    # an axis without numbers, since none are known
    known = bool(curve.points)
    upright_marks = ticks(low, high, bottom - top) if known else ()
    widest = max((text_width(text, SIZES["tick"]) for _, text in upright_marks), default=0.0)
    left = math.ceil(MARGIN - 6 + SIZES["axis"] * LINE + 6 + widest + 8)
    right = canvas - MARGIN - 6
    across = Ruler.between(0.0, last, left, right)
    upright = Ruler.between(low, high, bottom, top)
    across_marks = ticks(0.0, last, right - left) if known else ()

    rules = [Rule(((left, top), (left, bottom), (right, bottom)), 1.0)]
    rules += [Rule(((left - 5, upright.at(v)), (left, upright.at(v))), 1.0) for v, _ in upright_marks]
    rules += [Rule(((across.at(v), bottom), (across.at(v), bottom + 5)), 1.0) for v, _ in across_marks]
    texts = list(title.at(Rect(MARGIN, 10, 0, 0)))
    texts += _axes(curve, upright, across, upright_marks, across_marks, (left, top, right, bottom))

    line = tuple((across.at(x), upright.at(y)) for x, y in curve.points)
    if len(line) > 1:
        rules.append(Rule(line, 1.9, series=0))
    for level in curve.levels:
        y = upright.at(level.value)
        rules.append(Rule(((left, y), (right, y)), 1.2, dash=() if level.strong else (6.0, 4.0)))
    points = tuple(Point(across.at(spot.x), upright.at(spot.y), spot.look, 0, band=index)
                   for index, spot in enumerate(curve.spots))  # fmt: skip

    space = Space(Rect(left + 4, top - 2, right + 4, bottom - 3))
    _occupy(space, curve, line, points, upright, left, right)
    if not _place(space, curve, points, upright, (left, right), at_end, texts, rules):
        return None
    y = bottom + SIZES["tick"] * LINE + SIZES["axis"] * LINE + 18
    for block in notes:
        texts += block.at(Rect(MARGIN, y, 0, 0))
        y += block.h + 1
    bands = tuple(
        Band(visible(spot.words), "", point.y, point.y - 8, point.y + 8, (visible(spot.words),), None)
        for spot, point in zip(curve.spots, points, strict=True)
    )
    heading = visible(plain(curve.title))
    return Chart(canvas, max(y + 8, height), (left, top, right, bottom), across, upright, tuple(rules), points, bands,
                 tuple(texts), heading, visible(curve.alt) or heading)  # fmt: skip


def _axes(
    curve: Curve, upright: Ruler, across: Ruler, upright_marks: tuple[tuple[float, str], ...],
    across_marks: tuple[tuple[float, str], ...], plot: tuple[float, float, float, float],
) -> list[TextBox]:  # fmt: skip
    left, top, right, bottom = plot
    size, half = SIZES["axis"], SIZES["tick"] * LINE / 2
    texts = []
    for value, text in upright_marks:
        box = line_box(0, upright.at(value) - half, as_rich(text), "tick")
        texts.append(replace(box, x=left - 8 - box.w, anchor="end"))
    for value, text in across_marks:
        box = line_box(0, bottom + 9, as_rich(text), "tick")
        texts.append(replace(box, x=across.at(value) - box.w / 2, anchor="middle"))
    flat = line_box(0, 0, shorten(visible_rich(with_unit(curve.axis, curve.unit)), bottom - top, size), "axis")
    texts.append(replace(
        flat, x=MARGIN - 6, y=(top + bottom - flat.w) / 2, w=flat.h, h=flat.w, anchor="middle", rotated=True
    ))  # fmt: skip
    flat = line_box(0, bottom + 10 + 2 * half, shorten(visible_rich(with_unit(curve.along, curve.along_unit)),
                                                      right - left, size), "axis")  # fmt: skip
    texts.append(replace(flat, x=(left + right - flat.w) / 2, anchor="middle"))
    return texts


def _occupy(
    space: Space, curve: Curve, line: tuple[tuple[float, float], ...], points: tuple[Point, ...], upright: Ruler,
    left: float, right: float,
) -> None:  # fmt: skip
    """Reserve what texts must keep off."""
    for (x0, y0), (x1, y1) in pairwise(line):
        space.occupy(Rect(min(x0, x1) - 2, min(y0, y1) - 3, max(x0, x1) + 2, max(y0, y1) + 3), thin=True)
    for point in points:
        space.occupy(Rect(point.x - 7, point.y - 7, point.x + 7, point.y + 7))
    for level in curve.levels:
        y = upright.at(level.value)
        space.occupy(Rect(left, y - 1.5, right, y + 1.5), thin=True)


def _place(
    space: Space, curve: Curve, points: tuple[Point, ...], upright: Ruler, sides: tuple[float, float], at_end: bool,
    texts: list[TextBox], rules: list[Rule],
) -> bool:  # fmt: skip
    """Puts down the words of the levels, of the points, and of what is missing; False where one finds no place."""
    left, right = sides
    room = right - left - 16
    for level in (item for item in curve.levels if item.words):
        block = paragraph(as_rich(level.words), "level", 0.6 * room, lines=2)
        y = upright.at(level.value)
        spot = along(space, left, right, y, block.w, block.h, above=level.strong, at_end=at_end, reach=_REACH)
        if spot is not None:
            block = block.towards(spot.rect, right + 60 if at_end else left - 60)
        if not _put(space, block, spot, None, texts, rules):
            return False
    for index, (mark, point) in enumerate(zip(curve.spots, points, strict=True)):
        if not mark.words:
            continue
        block = paragraph(as_rich(mark.words), "level", min(240.0, 0.55 * room), lines=3)
        spot = _near(space, point.x, point.y, block.w, block.h)
        if spot is not None:
            block = block.towards(spot.rect, point.x)
        if not _put(space, block, spot, index, texts, rules):
            return False
    if curve.missing:
        block = paragraph(as_rich(curve.missing), "caption", room, lines=6, centred=True)
        middle, bounds = (left + right) / 2, space.bounds
        spot = along(space, middle - block.w / 2, middle + block.w / 2, (bounds.y0 + bounds.y1) / 2, block.w, block.h,
                     above=True, at_end=False, reach=bounds.y1 - bounds.y0)  # fmt: skip
        return _put(space, block, spot and Place(spot.rect, None), None, texts, rules)
    return True


def _near(space: Space, x: float, y: float, w: float, h: float) -> Place | None:
    """The nearest free place for a text beside a point, by preference at its right; ``None`` when there is none."""
    places = []
    for across in range(-30, 31):
        for up in range(-30, 31):
            left, top = x + across * 8 - (w if across < 0 else 0.0), y - h / 2 + up * 6
            gap_x, gap_y = max(left - x, x - left - w, 0.0), max(top - y, y - top - h, 0.0)
            places.append((gap_x + gap_y + 0.1 * abs(up) + (4.0 if across < 0 else 0.0), left, top))
    for _, left, top in sorted(places):
        rect = Rect(left, top, left + w, top + h)
        end = (min(max(x, rect.x0 - 1), rect.x1 + 1), min(max(y, rect.y0 + 2), rect.y1 - 2))
        far = math.hypot(end[0] - x, end[1] - y)
        leader = None
        if far > _LEADER:
            part = _CLEAR / far
            leader = Segment(x + (end[0] - x) * part, y + (end[1] - y) * part, *end)
        spot = Place(rect, leader)
        if space.free(spot):
            return spot
    return None


def _put(
    space: Space, block: Block, spot: Place | None, band: int | None, texts: list[TextBox], rules: list[Rule]
) -> bool:
    if spot is None:
        return False
    space.take(spot)
    texts += block.at(spot.rect, band)
    if spot.leader:
        leader = spot.leader
        rules.append(Rule(((leader.x0, leader.y0), (leader.x1, leader.y1)), 0.8, muted=True, dash=(1.5, 1.5)))
    return True

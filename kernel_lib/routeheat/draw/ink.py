"""A figure as strokes, shapes and words on paper: what every print painter puts down, in px from the upper left.

All text has one size. Words carry their exact place, so a painter only sets them; it says how wide its font makes
them.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from routeheat.draw.chart import RADIUS, Chart, Point, pieces, shade
from routeheat.draw.decks import Stack
from routeheat.draw.geometry import ArrowMark, Geometry, Line, TextBox
from routeheat.draw.looks import (
    BASELINE,
    DASHES,
    DOUBLE,
    HEAD_HALF,
    HEAD_LENGTH,
    HEADS,
    SERIES,
    SHIFTS,
    STATIC,
    WIDTHS,
    cycle,
)
from routeheat.draw.metrics import run_size

TEXT = 11.5
"""Size of every text in px: the smallest that a layout reserves room for."""

Place = tuple[float, float]
Measure = Callable[[str, float, bool, bool], float]
"""Width in px of a text at a size in px, bold, italic."""


@dataclass(frozen=True, slots=True)
class Stroke:
    """A line through points."""

    points: tuple[Place, ...]
    width: float
    colour: str
    dash: tuple[float, ...] = ()
    """Lengths of ink and gap in turn, px; empty for a solid line."""
    round: bool = False
    """True: round ends, which make dots of dashes without length."""


@dataclass(frozen=True, slots=True)
class Shape:
    """A closed outline, filled with its colour or open."""

    points: tuple[Place, ...]
    width: float
    colour: str
    filled: bool


@dataclass(frozen=True, slots=True)
class Dot:
    """A small circle, filled with its colour or open."""

    x: float
    y: float
    radius: float
    width: float
    colour: str
    filled: bool


@dataclass(frozen=True, slots=True)
class Word:
    """A piece of text of one style, its baseline starting at (x, y)."""

    x: float
    y: float
    text: str
    size: float
    colour: str
    bold: bool
    italic: bool
    upright: bool = False
    """True: reads from bottom to top."""


Mark = Stroke | Shape | Dot | Word


def marks(figure: Stack, measure: Measure) -> Iterator[Mark]:
    """Everything on the figure, in the order of painting; the paper itself is white."""
    for panel in figure.panels:
        if isinstance(panel.geometry, Chart):
            yield from _chart(panel.geometry, panel.y, measure)
        else:
            yield from _panel(panel.geometry, panel.y, measure)
    for box in figure.texts:
        yield from _words(box, 0.0, measure)


def _panel(geometry: Geometry, dy: float, measure: Measure) -> Iterator[Mark]:
    axis, zero = geometry.axis, geometry.scale.y_zero + dy
    yield Stroke(((axis.x, zero), (axis.x_right, zero)), 0.8, STATIC.muted, (1.0, 3.0))
    yield Stroke(((axis.x, axis.y_bottom + dy), (axis.x, axis.y_top + dy)), 1.0, STATIC.ink)
    for tick in axis.ticks:
        yield Stroke(((axis.x - 5, tick.y + dy), (axis.x, tick.y + dy)), 1.0, STATIC.ink)
    for line in geometry.carriers:
        colour = STATIC.ink if line.series is None else SERIES[cycle(line.series)]
        yield Stroke(((line.x0, line.y0 + dy), (line.x1, line.y1 + dy)), 0.9, colour)
    for line in geometry.leaders:
        yield Stroke(((line.x0, line.y0 + dy), (line.x1, line.y1 + dy)), 0.8, STATIC.muted, (1.5, 1.5))
    for arrow in geometry.arrows:
        yield from _arrow(arrow, dy, geometry.overlay)
    for key in geometry.keys:
        yield from _key(key, dy)
    for box in geometry.texts:
        yield from _words(box, dy, measure)


def _chart(chart: Chart, dy: float, measure: Measure) -> Iterator[Mark]:
    for rule in chart.rules:
        ink = STATIC.muted if rule.muted else shade(rule.series, STATIC.ink)
        yield Stroke(tuple((x, y + dy) for x, y in rule.points), rule.width, ink, rule.dash)
    for point in chart.points:
        yield from _dot(point, dy)
    for box in chart.texts:
        yield from _words(box, dy, measure)


def _dot(point: Point, dy: float) -> Iterator[Mark]:
    ink = shade(point.series, STATIC.ink)
    for piece in pieces(point):
        points = tuple((x, y + dy) for x, y in piece.points)
        if piece.closed:
            # open, so that a dot below another one shows
            yield Stroke((*points, *points[:2]), piece.width, ink)
        else:
            yield Stroke(points, piece.width, ink, piece.dash)
    radius = RADIUS.get(point.look)
    if radius:
        disc = point.look == "disc"
        yield Dot(point.x, point.y + dy, radius, 0.5 if disc else 1.6, ink, disc)


def _arrow(arrow: ArrowMark, dy: float, overlay: bool) -> Iterator[Mark]:
    colour = SERIES[cycle(arrow.series)]
    if arrow.entered:
        yield from _shaft(arrow, dy, overlay, colour)
    else:
        yield Stroke(((arrow.x, arrow.y0 + dy), (arrow.x, arrow.y1 + dy)), 2.2, colour, (0.01, 4.35), round=True)
    if arrow.whisker:
        x, (low, high) = arrow.whisker_x, arrow.whisker
        yield Stroke(((x, low + dy), (x, high + dy)), 1.1, colour, () if arrow.complete else (3.0, 2.0))
        for y in (low, high) if arrow.complete else ():
            yield Stroke(((x - 3.5, y + dy), (x + 3.5, y + dy)), 1.1, colour)


def _shaft(arrow: ArrowMark, dy: float, overlay: bool, colour: str) -> Iterator[Mark]:
    filled = arrow.whisker is not None
    if arrow.y0 == arrow.y1:
        yield Dot(arrow.x, arrow.y1 + dy, 3.0, 1.2, colour, filled)
        return
    length = abs(arrow.y1 - arrow.y0)
    thin = 0.78 if arrow.role == "side" else 1.25 if arrow.role == "direct" else 1.0
    head = min(HEAD_LENGTH * thin, max(length, 3.0))
    back = 1.0 if arrow.y1 < arrow.y0 else -1.0
    base = arrow.y1 + back * head + dy
    dash = _dash(arrow.series) if overlay else ()
    if length > head:
        for dx in (-DOUBLE, DOUBLE) if arrow.role == "direct" else (0.0,):
            yield Stroke(((arrow.x + dx, arrow.y0 + dy), (arrow.x + dx, base)), WIDTHS[arrow.role], colour, dash)
    outline = HEADS[cycle(arrow.series) if overlay else 0]
    yield Shape(
        tuple((arrow.x + across * HEAD_HALF * thin, arrow.y1 + back * part * head + dy) for across, part in outline),
        1.1, colour, filled,
    )  # fmt: skip


def _key(key: Line, dy: float) -> Iterator[Mark]:
    series = key.series or 0
    colour, y = SERIES[cycle(series)], key.y0 + dy
    yield Stroke(((key.x0, y), (key.x1 - HEAD_LENGTH, y)), 1.9, colour, _dash(series))
    outline = HEADS[cycle(series)]
    points = tuple((key.x1 - back * HEAD_LENGTH, y + across * HEAD_HALF) for across, back in outline)
    yield Shape(points, 0.8, colour, True)


def _dash(series: int) -> tuple[float, ...]:
    return tuple(map(float, DASHES[cycle(series)].split()))


def _words(box: TextBox, dy: float, measure: Measure) -> Iterator[Word]:
    """The runs of a line one behind another, anchored as the box says."""
    widths = [measure(run.text, run_size(run, TEXT), box.bold, run.style == "italic") for run in box.rich]
    room = box.h if box.rotated else box.w
    share = {"start": 0.0, "middle": 0.5, "end": 1.0}[box.anchor]
    along = (room - sum(widths)) * share
    # smaller letters than the box was made for stand in its middle
    drop = box.size * BASELINE - (box.size - TEXT) * 0.5
    colour = STATIC.muted if box.kind == "note" else STATIC.ink
    for run, width in zip(box.rich, widths, strict=True):
        shift = SHIFTS.get(run.style, 0.0) * TEXT
        place = (box.x + along, box.y + drop + shift + dy)
        if box.rotated:
            place = (box.x + drop + shift, box.y + box.h - along + dy)
        yield Word(*place, run.text, run_size(run, TEXT), colour, box.bold, run.style == "italic", box.rotated)
        along += width

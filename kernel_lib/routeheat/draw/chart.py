"""The records of a laid-out chart (rows of dots, a curve): everything a painter needs, in px from the upper left.

Reserved for figures whose horizontal place means something; an enthalpy diagram is a
:class:`~routeheat.draw.geometry.Geometry`.
"""

from __future__ import annotations

from dataclasses import dataclass

from routeheat.draw.geometry import TextBox
from routeheat.draw.looks import SERIES
from routeheat.present.strip import Look

RADIUS = {"ring": 4.6, "disc": 4.4}
"""Radius in px."""
CAP = 8.0
"""Half-length in px of the caps of a whisker; longer than any dot is high, so that a short whisker still shows."""
OUTLINES: dict[Look, tuple[tuple[float, float], ...]] = {
    "diamond": ((0.0, -8.5), (8.5, 0.0), (0.0, 8.5), (-8.5, 0.0)),
    "square": ((-5.0, -5.0), (5.0, -5.0), (5.0, 5.0), (-5.0, 5.0)),
    "triangle": ((0.0, -7.0), (6.5, 5.0), (-6.5, 5.0)),
    "post": ((0.0, -10.0), (0.0, 10.0)),
}
"""Outlines around the place of a dot; a ring and a disc are circles. Only a disc is filled."""
PLOTLY_SYMBOLS: dict[Look, str] = {
    "ring": "circle-open", "disc": "circle", "diamond": "diamond-open", "square": "square-open",
    "triangle": "triangle-up-open", "post": "line-ns-open",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Ruler:
    """The straight line between a quantity and the page: ``px = zero + value · per_unit``."""

    zero: float
    """Where the value 0 stands, px."""
    per_unit: float
    """Length of one unit in px; negative where the quantity grows upwards."""

    def at(self, value: float) -> float:
        """Place on the page of a value, px."""
        return self.zero + value * self.per_unit

    def value(self, px: float) -> float:
        """The value that stands at ``px``."""
        return (px - self.zero) / self.per_unit

    @classmethod
    def between(cls, low: float, high: float, start: float, end: float) -> Ruler:
        """The ruler on which ``low`` stands at ``start`` px and ``high`` at ``end`` px."""
        per_unit = (end - start) / (high - low)
        return cls(start - low * per_unit, per_unit)


@dataclass(frozen=True, slots=True)
class Rule:
    """A line through points: an axis with its ticks, a row's line, a level, a leader, a curve."""

    points: tuple[tuple[float, float], ...]
    width: float
    muted: bool = False
    series: int | None = None
    """Colour among those of the columns; ``None`` for the colour of the text."""
    dash: tuple[float, ...] = ()
    """Lengths of ink and gap in turn, px; empty for a solid line."""


@dataclass(frozen=True, slots=True)
class Point:
    """One dot as drawn."""

    x: float
    y: float
    look: Look
    series: int | None
    whisker: tuple[float, float] | None = None
    """Places (px) of the left and right end; ``None`` when not stated."""
    complete: bool = True
    """False: the whisker is a lower bound and drawn dashed with open ends."""
    band: int | None = None
    """Index of the band it belongs to."""
    hover: str = ""


@dataclass(frozen=True, slots=True)
class Band:
    """A row as one thing to point at, with what is shown on hover."""

    label: str
    group: str
    y: float
    """Height of its line."""
    top: float
    bottom: float
    hover: tuple[str, ...]
    line: int | None
    """Line of the sheet, counted from 1."""


@dataclass(frozen=True, slots=True)
class Chart:
    """A chart ready to be painted."""

    width: float
    height: float
    plot: tuple[float, float, float, float]
    """Left, top, right and lower edge of the plot."""
    across: Ruler
    """The horizontal axis."""
    upright: Ruler | None
    """The vertical axis; ``None`` where rows stand above each other."""
    rules: tuple[Rule, ...]
    points: tuple[Point, ...]
    bands: tuple[Band, ...]
    texts: tuple[TextBox, ...]
    """Texts of a band carry its index as :attr:`~routeheat.draw.geometry.TextBox.arrow`."""
    title: str
    alt: str


@dataclass(frozen=True, slots=True)
class Stem:
    """A piece of a dot or of its whisker: a line, or an outline that may be filled."""

    points: tuple[tuple[float, float], ...]
    width: float
    closed: bool = False
    dash: tuple[float, ...] = ()


def pieces(point: Point) -> tuple[Stem, ...]:
    """What is painted of a dot besides a ring or a disc: its whisker, then its outline."""
    found = []
    if point.whisker:
        low, high = point.whisker
        dash = () if point.complete else (4.0, 2.5)
        found.append(Stem(((low, point.y), (high, point.y)), 2.2, dash=dash))
        if point.complete:
            found += [Stem(((x, point.y - CAP), (x, point.y + CAP)), 1.3) for x in (low, high)]
    outline = OUTLINES.get(point.look)
    if outline:
        points = tuple((point.x + dx, point.y + dy) for dx, dy in outline)
        post = point.look == "post"
        found.append(Stem(points, 1.1 if post else 1.6, not post, (2.0, 2.0) if post else ()))
    return tuple(found)


def shade(series: int | None, ink: str) -> str:
    """The colour of a series of dots or lines."""
    return ink if series is None else SERIES[series]

"""The curve: the plain shape of one quantity against another, with levels it is held against and marked points.

Nothing here knows pixels.
"""

from __future__ import annotations

from dataclasses import dataclass

from routeheat.present.markup import Rich
from routeheat.present.strip import Look


@dataclass(frozen=True, slots=True)
class Level:
    """A horizontal line that the curve is held against."""

    value: float
    """In the unit of the upright axis."""
    words: str
    """What it is, as written along the line."""
    strong: bool = True
    """False: drawn dashed (a margin that one may choose otherwise)."""


@dataclass(frozen=True, slots=True)
class Spot:
    """A marked point."""

    x: float
    y: float
    words: str
    """What it is, as written beside it."""
    look: Look = "disc"


@dataclass(frozen=True, slots=True)
class Curve:
    """A whole figure."""

    title: Rich | str
    points: tuple[tuple[float, float], ...]
    """Pairs (along, upright), in order along; empty when nothing is known."""
    along: Rich
    """What the horizontal axis shows, without the unit."""
    along_unit: str
    axis: Rich
    """What the upright axis shows, without the unit; it starts at 0."""
    unit: str
    levels: tuple[Level, ...] = ()
    spots: tuple[Spot, ...] = ()
    missing: str = ""
    """Why there are no points, as written in their place."""
    notes: tuple[str, ...] = ()
    """Sentences below the figure."""
    alt: str = ""
    """The figure in words, for readers who cannot see it."""

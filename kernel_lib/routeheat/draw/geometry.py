"""The records of a laid-out diagram: everything a painter needs, in px from the upper left corner."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from routeheat.present.ladder import Role
from routeheat.present.markup import Rich

Kind = Literal["caption", "label", "title", "heading", "axis", "tick", "level", "equation", "note"]
Anchor = Literal["start", "middle", "end"]


@dataclass(frozen=True, slots=True)
class Scale:
    """The straight line between heat and page: ``y = y_zero − heat · px_per_unit``."""

    y_zero: float
    """Where heat 0 stands, px."""
    px_per_unit: float
    """Length of one unit of heat, px."""

    def y(self, heat: float) -> float:
        """Height on the page of a level, px from the upper edge."""
        return self.y_zero - heat * self.px_per_unit

    def heat(self, y: float) -> float:
        """The level that stands at ``y`` px."""
        return (self.y_zero - y) / self.px_per_unit


@dataclass(frozen=True, slots=True)
class Tick:
    """One mark of the axis."""

    y: float
    text: str


@dataclass(frozen=True, slots=True)
class Axis:
    """The vertical axis at the left of the plot, with its zero line across the plot."""

    x: float
    y_top: float
    y_bottom: float
    x_right: float
    """Right end of the plot and of the zero line."""
    ticks: tuple[Tick, ...]
    title: Rich
    """Quantity and unit."""


@dataclass(frozen=True, slots=True)
class ArrowMark:
    """One reaction as drawn."""

    x: float
    y0: float
    """Height of the starting level."""
    y1: float
    """Height of the end level, where the tip is; equal to ``y0`` when the heat is 0 or not entered."""
    whisker: tuple[float, float] | None
    """Heights (px) of the lower and the upper end of the whisker, lower level first; ``None`` when not stated."""
    whisker_x: float
    role: Role
    series: int
    """Index of the column, which chooses colour, dash and head."""
    entered: bool
    """False: a dotted gap mark is drawn from ``y0`` to ``y1``."""
    complete: bool
    """False: the whisker is a lower bound and drawn dashed with open ends."""
    label: str
    column: str
    equation: Rich
    hover: tuple[str, ...]
    """Lines shown on hover: equation, value, details."""
    line: int | None
    """Line of the sheet, counted from 1."""


@dataclass(frozen=True, slots=True)
class Line:
    """A thin straight line: a carrier, a leader, or the sample of a key."""

    x0: float
    y0: float
    x1: float
    y1: float
    series: int | None = None
    """Column whose colour it takes; ``None`` for the colour of the text."""


@dataclass(frozen=True, slots=True)
class TextBox:
    """One line of text with the box reserved for it."""

    x: float
    y: float
    """Upper left corner of the box."""
    w: float
    h: float
    rich: Rich
    anchor: Anchor
    kind: Kind
    size: float
    """Font size in px."""
    bold: bool = False
    rotated: bool = False
    """True: reads from bottom to top; ``w`` and ``h`` are those on the page."""
    full: str = ""
    """The whole text where ``rich`` is shortened, else empty."""
    arrow: int | None = None
    """Index of the arrow it belongs to."""


@dataclass(frozen=True, slots=True)
class Geometry:
    """A diagram ready to be painted."""

    width: float
    height: float
    scale: Scale
    axis: Axis
    arrows: tuple[ArrowMark, ...]
    carriers: tuple[Line, ...]
    leaders: tuple[Line, ...]
    keys: tuple[Line, ...]
    """Samples of the line of each column, beside their names, when columns are drawn over each other."""
    texts: tuple[TextBox, ...]
    overlay: bool
    """True: columns differ by colour, dash and head; False: by place and colour."""
    title: str
    alt: str

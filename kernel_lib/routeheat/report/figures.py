"""How large a diagram stands on a page of the report."""

from __future__ import annotations

from dataclasses import dataclass

from routeheat.draw.arrange import Drawing
from routeheat.draw.decks import Stack, natural_width, pages
from routeheat.draw.paper import POINTS_PER_MM, POINTS_PER_PX, print_layout

PAGE_WIDTH = 170.0
"""Width of the text on A4 with margins of 20 mm, in mm."""
TALLEST = 640.0
"""Height of a figure in points that fits on a page with its caption."""
_LEAST = 84.0


@dataclass(frozen=True, slots=True)
class Printed:
    """A diagram, or the part of it that stands on one page."""

    figure: Stack
    scale: float
    """Points per px of the figure."""

    @property
    def width(self) -> float:
        """Width in points."""
        return self.figure.width * self.scale

    @property
    def height(self) -> float:
        """Height in points."""
        return self.figure.height * self.scale


def printed(drawing: Drawing) -> tuple[Printed, ...]:
    """The diagram at the width it needs, from one printed column to the whole page, in parts that fit on a page.

    Only a single plot that is larger than a page is made smaller.
    """
    wished = natural_width(drawing) * POINTS_PER_PX / POINTS_PER_MM
    whole = print_layout(drawing, min(max(wished, _LEAST), PAGE_WIDTH), listing=False)
    scale = min(POINTS_PER_PX, PAGE_WIDTH * POINTS_PER_MM / whole.width)
    return tuple(Printed(part, min(scale, TALLEST / part.height)) for part in pages(whole, TALLEST / scale))

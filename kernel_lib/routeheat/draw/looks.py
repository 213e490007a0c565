"""Colours, dashes and arrow heads, told apart by every reader.

Colours follow the colour-blind-safe set of Okabe and Ito (2008) where it reads on white and on dark paper; its greens
and its yellow are left out, because green would look like a verdict. Each column also has its own dash and head.
"""

from __future__ import annotations

from dataclasses import dataclass

from routeheat.present.ladder import Role

SERIES = ("#0072b2", "#d55e00", "#b5588f", "#777777", "#a0740b", "#3a97d4")
"""Stroke colours of the columns in order; at least 3:1 against white and against #111."""
DASHES = ("", "8 3", "2.5 2.5", "10 3 2.5 3", "5 2 5 5", "14 4")
"""Dashes of columns drawn over each other, in the same order."""
PLOTLY_DASHES = ("solid", "8px,3px", "2.5px,2.5px", "10px,3px,2.5px,3px", "5px,2px,5px,5px", "14px,4px")
HEADS: tuple[tuple[tuple[float, float], ...], ...] = (
    ((0, 0), (-1, 1), (1, 1)),
    ((0, 0), (-1, 1), (0, 0.55), (1, 1)),
    ((0, 0), (-1, 0.5), (-0.35, 0.5), (-1, 1), (1, 1), (0.35, 0.5), (1, 0.5)),
    ((0, 0), (-1.15, 0.5), (-1.15, 1), (1.15, 1), (1.15, 0.5)),
    ((0, 0), (-1.05, 0.75), (0, 1.15), (1.05, 0.75)),
    ((0, 0), (-1.5, 0.6), (1.5, 0.6)),
)
"""Outlines of heads: (across, back from the tip), in half-widths and lengths."""
HEAD_LENGTH = 9.0
HEAD_HALF = 4.6
WIDTHS: dict[Role, float] = {"step": 1.9, "known": 1.9, "side": 1.0, "direct": 1.5}
"""Widths of shafts in px."""
DOUBLE = 2.6
"""Half the distance in px between the two lines of a direct arrow."""
BASELINE = 1.0
"""Distance in font sizes from the top of a line to its baseline."""
SHIFTS = {"sub": 0.22, "sup": -0.36}
"""Downward shifts of sub- and superscripts in font sizes."""


@dataclass(frozen=True, slots=True)
class Palette:
    """What a painter colours with."""

    ink: str
    """Text, axis and levels."""
    muted: str
    """Zero line, leaders and secondary text."""
    themed: bool
    """True: the page's theme variables override the colours; False: the colours are fixed."""
    paper: str | None = None
    """Background; ``None`` for transparent."""


INLINE = Palette("#1a1a1a", "#6b6b6b", True)
"""For a diagram inside a page: follows the page's theme, light or dark."""
STATIC = Palette("#1a1a1a", "#6b6b6b", False, "#ffffff")
"""For a file or an ``<img>``: fixed colours on white."""


def cycle(series: int) -> int:
    """Index into the looks above; a seventh column starts again."""
    return series % len(SERIES)

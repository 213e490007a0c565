"""Every plain shape that can be drawn, and which layout it takes."""

from __future__ import annotations

from routeheat.draw.chart import Chart
from routeheat.draw.curve import lay_out_curve
from routeheat.draw.geometry import Geometry
from routeheat.draw.layout import lay_out
from routeheat.draw.strip import lay_out_strip
from routeheat.present.curve import Curve
from routeheat.present.ladder import Ladder
from routeheat.present.strip import Strip

Drawing = Ladder | Strip | Curve


def arrange(drawing: Drawing, *, width: float | None = None, height: float | None = None) -> Geometry | Chart:
    """Places of everything in the figure, px; ``width`` and ``height`` grow when texts would overlap otherwise.

    Raises :class:`ValueError` when a number of the figure is not finite.
    """
    if isinstance(drawing, Strip):
        return lay_out_strip(drawing, width=width, height=height)
    if isinstance(drawing, Curve):
        return lay_out_curve(drawing, width=width, height=height)
    return lay_out(drawing, width=width, height=height)

"""Figures: enthalpy diagrams, strips of dots and curves, laid out once and painted by thin painters.

What lives here: :mod:`layout` with its parts (:mod:`slots`, :mod:`marks`, :mod:`blocks`, :mod:`frame`,
:mod:`declutter`, :mod:`metrics`) turns a :class:`~routeheat.present.ladder.Ladder` into a :mod:`geometry`;
:mod:`decks` stacks several of them into a figure of fixed width. The painters :mod:`svg`, :mod:`screen` and
:mod:`paper` (over :mod:`ink`, with the fonts in :mod:`glyphs`), with their colours in :mod:`looks`, show that
geometry and decide nothing about places. :mod:`strip` (with :mod:`around`) and :mod:`curve` turn a
:class:`~routeheat.present.strip.Strip` and a :class:`~routeheat.present.curve.Curve` into a :mod:`chart` for the same
painters; :mod:`arrange` chooses. Nothing here knows chemistry.
May import: :mod:`routeheat.present`, :mod:`routeheat.units`, :mod:`routeheat.errors`, and plotly and matplotlib inside
the functions that need them.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from routeheat.draw.arrange import Drawing
from routeheat.draw.drawable import Drawable, as_drawing, as_ladder, refuse
from routeheat.draw.paper import paper, paper_bytes
from routeheat.draw.picture import Picture
from routeheat.draw.screen import figure
from routeheat.draw.svg import static_svg

if TYPE_CHECKING:
    from plotly.graph_objects import Figure

__all__ = ["Drawable", "Drawing", "as_drawing", "as_ladder", "draw", "paper", "paper_bytes", "static_svg", "svg"]


def svg(
    result: Drawing | Drawable, *, width: float | None = None, height: float | None = None, **unknown: object
) -> Picture:
    """The diagram of ``result`` as SVG text that follows the theme of the page it stands in; a notebook shows it.

    ``width`` and ``height`` in px; either grows when texts would overlap otherwise.
    Raises :class:`~routeheat.errors.UnknownName` for any other keyword.
    """
    refuse(unknown, ("width", "height"))
    return Picture.of(as_drawing(result), width, height)


def draw(result: Drawing | Drawable, **unknown: object) -> Figure:
    """The diagram of ``result`` as a plotly figure to explore, zoom and restyle.

    Raises :class:`~routeheat.errors.UnknownName` for any keyword: the size follows from the result.
    """
    refuse(unknown, ())
    return figure(as_drawing(result))

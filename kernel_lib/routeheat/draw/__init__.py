"""Enthalpy diagrams: one geometry, thin painters over it.

What lives here: :mod:`layout` with its parts (:mod:`slots`, :mod:`marks`, :mod:`blocks`, :mod:`frame`,
:mod:`declutter`, :mod:`metrics`) turns a :class:`~routeheat.present.ladder.Ladder` into a :mod:`geometry`. The
painters :mod:`svg` and :mod:`screen`, with their colours in :mod:`looks`, show that geometry and decide nothing about
places. Nothing here knows chemistry.
May import: :mod:`routeheat.present`, :mod:`routeheat.units`, :mod:`routeheat.errors`, and plotly inside the function
that needs it.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

from routeheat.draw.picture import Picture
from routeheat.draw.screen import figure
from routeheat.draw.svg import static_svg
from routeheat.errors import UnknownName
from routeheat.present.ladder import Ladder

if TYPE_CHECKING:
    from plotly.graph_objects import Figure

__all__ = ["Drawable", "as_ladder", "draw", "static_svg", "svg"]


class Drawable(Protocol):
    """A result that can be drawn."""

    def ladder(self) -> Ladder:
        """The result as a diagram."""
        ...


def as_ladder(result: Ladder | Drawable) -> Ladder:
    """The diagram of ``result``; raises :class:`TypeError` when it has none."""
    if isinstance(result, Ladder):
        return result
    method = getattr(result, "ladder", None)
    if not callable(method):
        raise TypeError(f"{type(result).__name__} cannot be drawn: it has no ladder")
    ladder = method()
    if not isinstance(ladder, Ladder):
        raise TypeError(f"{type(result).__name__}.ladder() gave {type(ladder).__name__}, not a Ladder")
    return ladder


def svg(
    result: Ladder | Drawable, *, width: float | None = None, height: float | None = None, **unknown: object
) -> Picture:
    """The diagram of ``result`` as SVG text that follows the theme of the page it stands in; a notebook shows it.

    ``width`` and ``height`` in px; either grows when texts would overlap otherwise.
    Raises :class:`~routeheat.errors.UnknownName` for any other keyword.
    """
    _refuse(unknown, ("width", "height"))
    return Picture.of(as_ladder(result), width, height)


def draw(result: Ladder | Drawable, **unknown: object) -> Figure:
    """The diagram of ``result`` as a plotly figure to explore, zoom and restyle.

    Raises :class:`~routeheat.errors.UnknownName` for any keyword: the size follows from the result.
    """
    _refuse(unknown, ())
    return figure(as_ladder(result))


def _refuse(unknown: dict[str, object], known: tuple[str, ...]) -> None:
    for name in unknown:
        raise UnknownName("option", name, known)

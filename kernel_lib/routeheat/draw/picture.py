"""A diagram as SVG text that a notebook shows as a picture."""

from __future__ import annotations

from routeheat.draw.arrange import Drawing, arrange
from routeheat.draw.svg import paint, static_svg
from routeheat.present.html import figure_html
from routeheat.present.markup import plain


class Picture(str):
    """The SVG element itself (a ``str``), which a notebook shows as an ``<img>`` with fixed colours.

    An image with its bytes inside is the one form that trusted, untrusted and converted notebooks all show.
    """

    __slots__ = ("_drawing", "_height", "_width")

    _drawing: Drawing
    _width: float | None
    _height: float | None

    @classmethod
    def of(cls, drawing: Drawing, width: float | None = None, height: float | None = None) -> Picture:
        """The diagram painted for the page it stands in; ``width`` and ``height`` in px."""
        made = cls(paint(arrange(drawing, width=width, height=height)))
        made._drawing, made._width, made._height = drawing, width, height
        return made

    @property
    def alt(self) -> str:
        """The diagram in words."""
        return self._drawing.alt or plain(self._drawing.title)

    def __repr__(self) -> str:
        return self.alt

    def _repr_mimebundle_(self, include: object = None, exclude: object = None) -> dict[str, str]:  # noqa: ARG002
        """Words for a terminal, a picture for a notebook; deterministic."""
        static = static_svg(self._drawing, width=self._width, height=self._height)
        return {"text/plain": self.alt, "text/html": figure_html(static, self.alt)}

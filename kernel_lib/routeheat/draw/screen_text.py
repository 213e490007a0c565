"""Text and places as plotly takes them, harmless."""

from __future__ import annotations

from routeheat.present.markup import Rich
from routeheat.present.text import visible

FONT = "Arial, Helvetica, DejaVu Sans, sans-serif"
_TAGS = {"": ("", ""), "sub": ("<sub>", "</sub>"), "sup": ("<sup>", "</sup>"), "italic": ("<i>", "</i>")}
_ENTITIES = {ord("&"): "&amp;", ord("<"): "&lt;", ord(">"): "&gt;", ord("$"): "&#36;", ord("%"): "&#37;"}


def plotly_text(text: str) -> str:
    """``text`` harmless in plotly: no pseudo-HTML, no MathJax (``$``), no template (``%{``), no hidden characters."""
    return visible(text).translate(_ENTITIES)


def html(rich: Rich) -> str:
    """A rich text with the tags that plotly knows."""
    return "".join(_TAGS[run.style][0] + plotly_text(run.text) + _TAGS[run.style][1] for run in rich)


def px(value: float) -> float:
    """A place in px with two decimals."""
    return round(value, 2)

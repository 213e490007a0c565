"""Any figure in the characters of print, with its axes in the style asked for."""

from __future__ import annotations

from dataclasses import fields, is_dataclass, replace
from typing import Any

from routeheat.draw.arrange import Drawing
from routeheat.draw.glyphs import LACKING, LACKING_NOTE, shown
from routeheat.present.curve import Curve
from routeheat.present.markup import Rich, join


def printable_drawing(drawing: Drawing) -> Drawing:
    """The figure in characters the print fonts have, without what is only shown on hover.

    A note says so where some are lacking.
    """
    changed, lacking = _printable(drawing)
    made: Drawing = changed
    return replace(made, notes=(*made.notes, LACKING_NOTE)) if lacking else made


def unit_in_parentheses(drawing: Drawing) -> Drawing:
    """The figure with its axes written ``quantity (unit)`` instead of ``quantity / unit``."""
    changed = replace(drawing, axis=_styled(drawing.axis, drawing.unit), unit="")
    if isinstance(changed, Curve):
        return replace(changed, along=_styled(changed.along, changed.along_unit), along_unit="")
    return changed


def _styled(axis: Rich, unit: str) -> Rich:
    return join([axis, f" ({unit})"]) if unit else axis


def _printable(value: Any) -> tuple[Any, bool]:
    """Any record with :func:`shown` applied to every text in it, and whether a character was lacking."""
    if isinstance(value, str):
        text = shown(value)
        return text, LACKING in text and LACKING not in value
    if isinstance(value, tuple):
        parts = [_printable(part) for part in value]
        return tuple(part for part, _ in parts), any(lacking for _, lacking in parts)
    if not is_dataclass(value) or isinstance(value, type):
        return value, False
    found = {
        item.name: ((), False) if item.name == "details" else _printable(getattr(value, item.name))
        for item in fields(value)
    }
    return replace(value, **{name: part for name, (part, _) in found.items()}), any(bad for _, bad in found.values())

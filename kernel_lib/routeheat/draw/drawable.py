"""What can be drawn, and the refusal of options that do not exist."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Protocol

from routeheat.draw.arrange import Drawing
from routeheat.errors import UnknownName
from routeheat.present.curve import Curve
from routeheat.present.ladder import Ladder
from routeheat.present.strip import Strip


class _HasLadder(Protocol):
    def ladder(self) -> Ladder: ...


class _HasStrip(Protocol):
    def strip(self) -> Strip: ...


class _HasCurve(Protocol):
    def curve(self) -> Curve: ...


Drawable = _HasLadder | _HasStrip | _HasCurve
"""A result that can be drawn: it has a ``ladder()``, a ``strip()`` or a ``curve()``."""
_SHAPES: tuple[tuple[str, type[Ladder] | type[Strip] | type[Curve]], ...] = (
    ("ladder", Ladder), ("strip", Strip), ("curve", Curve),
)  # fmt: skip


def as_drawing(result: Drawing | Drawable) -> Drawing:
    """The figure of ``result``: itself, or the first of its ladder, strip and curve.

    Raises :class:`TypeError` when it has none.
    """
    if isinstance(result, Ladder | Strip | Curve):
        return result
    for name, shape in _SHAPES:
        method = getattr(result, name, None)
        if callable(method):
            found: object = method()
            if not isinstance(found, Ladder | Strip | Curve) or not isinstance(found, shape):
                raise TypeError(f"{type(result).__name__}.{name}() gave {type(found).__name__}, not a {shape.__name__}")
            return found
    raise TypeError(f"{type(result).__name__} cannot be drawn: it has no ladder, strip or curve")


def as_ladder(result: object) -> Ladder:
    """The enthalpy diagram of ``result``; raises :class:`TypeError` when it has none."""
    if isinstance(result, Ladder):
        return result
    method = getattr(result, "ladder", None)
    if not callable(method):
        raise TypeError(f"{type(result).__name__} cannot be drawn: it has no ladder")
    ladder = method()
    if not isinstance(ladder, Ladder):
        raise TypeError(f"{type(result).__name__}.ladder() gave {type(ladder).__name__}, not a Ladder")
    return ladder


def refuse(unknown: Iterable[str], known: tuple[str, ...]) -> None:
    """Raises :class:`~routeheat.errors.UnknownName` for the first unknown option, if there is one."""
    for name in unknown:
        raise UnknownName("option", name, known)

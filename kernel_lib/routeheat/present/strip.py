"""The strip: the plain shape of rows of dots on one axis.

Each row has its own line along the shared axis; what stands on it differs by form, not only by colour. What is not
known has no dot: it stands in words at the right. Nothing here knows pixels.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from routeheat.present.markup import Rich

Look = Literal["ring", "disc", "diamond", "square", "triangle", "post"]
"""Form of a dot. A ``post`` is a thin upright line that bears no label of its own."""


@dataclass(frozen=True, slots=True)
class Dot:
    """One value on the axis."""

    label: Rich | str
    """Its short name, as written beside the dot ("MTSR"); a post is named in the key only."""
    value: float
    """In the unit of the axis."""
    caption: str
    """The value with its uncertainty, as written behind the name ("57.0 ± 4.5")."""
    spread: float | None
    """Half-length of the whisker, ``k·u``; ``None`` when the uncertainty is not stated."""
    look: Look
    reached: bool = True
    """True for a value that the thing described takes, False for a limit it is held against."""
    complete: bool = True
    """False when some contribution to the spread has no stated uncertainty: the whisker is a lower bound."""


@dataclass(frozen=True, slots=True)
class Row:
    """The dots of one thing."""

    label: str
    """Label of what the row stands for ("A1")."""
    dots: tuple[Dot, ...]
    words: tuple[str, ...] = ()
    """Sentences beside the row: the verdict, limits in words, what is not entered."""
    warning: str = ""
    """What must be seen before anything else; empty for nothing."""
    bar: tuple[float, float] | None = None
    """From where to where a thick line shows a rise; ``None`` for no line."""
    details: tuple[tuple[str, str], ...] = ()
    """Pairs (heading, text) for hover."""
    line: int | None = None
    """Line of the sheet where it is typed, counted from 1."""


@dataclass(frozen=True, slots=True)
class Group:
    """Rows under one heading: the steps of a route."""

    title: Rich | str
    rows: tuple[Row, ...]


@dataclass(frozen=True, slots=True)
class Strip:
    """A whole figure."""

    title: Rich | str
    groups: tuple[Group, ...]
    axis: Rich
    """What the axis shows, without the unit."""
    unit: str
    """Unit of the axis, e.g. ``°C``."""
    k: float
    """Coverage factor of the whiskers and captions; every figure says it."""
    key: tuple[tuple[Look, Rich | str], ...] = ()
    """What each form means, in words; only forms that are used are shown."""
    notes: tuple[str, ...] = ()
    """Sentences below the figure."""
    alt: str = ""
    """The figure in words, for readers who cannot see it."""

    @property
    def rows(self) -> tuple[Row, ...]:
        """The rows of all groups, from the top."""
        return tuple(row for group in self.groups for row in group.rows)

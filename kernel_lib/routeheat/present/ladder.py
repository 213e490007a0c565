"""The ladder: the plain shape of every enthalpy diagram.

Each reaction is one vertical arrow from its starting level to its end level; its length is its heat. Arrows of one
column stand side by side from left to right, joined by thin carrier lines. Several columns stand next to each other
or are drawn over each other on one axis. Nothing here knows pixels.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from routeheat.present.markup import Rich

Role = Literal["step", "side", "known", "direct"]


@dataclass(frozen=True, slots=True)
class Arrow:
    """One reaction drawn as one vertical arrow."""

    label: str
    """Label of the row it stands for ("A1")."""
    caption: Rich | str
    """The value with its uncertainty, as written beside the arrow ("−163 ± 19"); "not entered" when unknown."""
    start: float
    """Level where the arrow starts, in the unit of the ladder's axis."""
    end: float | None
    """Level where it ends; ``None`` when the heat is not entered (nothing is drawn but a labelled gap)."""
    spread: float | None
    """Half-length of the whisker at the head, ``k·u`` of the end level; ``None`` when the uncertainty is not stated."""
    role: Role = "step"
    """``side`` rows (quench, scrubber) are drawn thinner; ``direct`` is the target beside a combination."""
    equation: Rich | str = ""
    """The reaction as a chemist reads it; shown on hover and where there is room."""
    details: tuple[tuple[str, str], ...] = ()
    """Pairs (heading, text) for hover: basis, source, temperature, contributors to the uncertainty."""
    line: int | None = None
    """Line of the sheet where the row is typed, counted from 1."""
    complete: bool = True
    """False when some contribution to the spread has no stated uncertainty: the whisker is a lower bound."""


@dataclass(frozen=True, slots=True)
class Column:
    """One chain of arrows: a route, or one of the two ways of a combination."""

    title: Rich | str
    arrows: tuple[Arrow, ...]
    start_label: Rich | str = ""
    """What stands at the first level."""
    end_label: Rich | str = ""
    """What stands at the last level."""


@dataclass(frozen=True, slots=True)
class Ladder:
    """A whole diagram."""

    title: Rich | str
    columns: tuple[Column, ...]
    axis: Rich
    """What the axis shows, without the unit: italic H with its subscripts ("ΔrH", "cumulative ΔrH")."""
    unit: str
    """Unit of the axis, e.g. ``kJ mol⁻¹``; the axis reads ``axis / (unit)``."""
    k: float
    """Coverage factor of the whiskers and captions; every diagram says it."""
    overlay: bool = False
    """True: all columns start at the same place on the page; False: next to each other."""
    notes: tuple[str, ...] = ()
    """Sentences below the diagram: what is not entered, what a whisker is, cautions."""
    alt: str = ""
    """The diagram in words, for readers who cannot see it."""

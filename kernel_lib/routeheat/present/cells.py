"""What stands in a table: cells of several kinds, under columns.

A cell is one of

* ``str`` or :data:`~routeheat.present.markup.Rich` (text),
* ``int`` or :class:`fractions.Fraction` (exact; written as ``3/2``, never as a float),
* ``float`` (measured or derived; the column says to how many decimals it is shown),
* :class:`Reading` (a value with its uncertainty),
* ``None`` (nothing to say; shown empty).
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.present.markup import Rich


@dataclass(frozen=True, slots=True)
class Reading:
    """A value with its standard uncertainty, to be written with a stated coverage factor."""

    value: float | None
    """The value in the unit of its column; ``None`` when it is not known."""
    u: float | None
    """Standard uncertainty of the part that is stated; ``None`` when nothing is stated."""
    k: float = 2.0
    """Coverage factor with which the uncertainty is written: the printed ± is ``k·u``."""
    at_least: bool = False
    """True when some contribution has no stated uncertainty, so that ``u`` is a lower bound."""
    words: str = ""
    """Shown instead of a number when ``value`` is ``None`` ("not entered", "out of reach")."""
    estimated: bool = False
    """True when it rests on an estimate; every text of it says so."""


Cell = str | Rich | int | Fraction | float | Reading | None


@dataclass(frozen=True, slots=True)
class Column:
    """One column of a table."""

    key: str
    """Machine name, lower case with underscores; the header of the CSV file with its unit."""
    header: Rich | str
    """What a reader sees."""
    unit: str = ""
    """Unit as written in the header after a slash, e.g. ``kJ/mol``; empty for none."""
    align: Literal["left", "right"] = "left"
    decimals: int = 1
    """Decimals of ``float`` cells."""

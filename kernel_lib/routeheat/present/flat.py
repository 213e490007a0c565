"""A table as a plain rectangle of text and numbers, for files and data frames: the same cells in every format.

A column that holds uncertainties becomes three: the value, its standard uncertainty, and a remark in words. Exact
fractions are text, so that no reader turns ``1/3`` into 0.333; whole exact numbers stay whole numbers.
"""

from __future__ import annotations

import math
from collections import Counter
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.present.markup import plain
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.present.text import visible, with_unit

Plain = str | int | float | None
Role = Literal["cell", "value", "u", "remark"]
_LARGEST_WHOLE = 2**53
"""Whole numbers beyond it are written as text: spreadsheets keep numbers as double precision floats."""


@dataclass(frozen=True, slots=True)
class Head:
    """One column of the rectangle."""

    text: str
    """Header with its unit; no two columns share one."""
    role: Role
    """``value``, ``u`` and ``remark`` are the three parts of a column with uncertainties."""
    decimals: int
    """Decimals to which numbers are shown."""
    align: Literal["left", "right"]


@dataclass(frozen=True, slots=True)
class Flat:
    """A header row and rows of text, whole numbers, floats and ``None`` (nothing to say)."""

    heads: tuple[Head, ...]
    rows: tuple[tuple[Plain, ...], ...]


def flat(table: Table) -> Flat:
    """The rectangle of ``table``; titles and notes are left to the writer.

    Where a value or its uncertainty is unknown, the cell says so in words: an empty cell counts as zero in a
    spreadsheet.
    """
    split = [any(isinstance(row[index], Reading) for row in table.rows) for index in range(len(table.columns))]
    heads = [head for column, parts in zip(table.columns, split, strict=True) for head in _heads(column, parts)]
    rows = tuple(
        tuple(item for cell, parts in zip(row, split, strict=True) for item in _items(cell, parts))
        for row in table.rows
    )
    return Flat(tuple(_distinct(heads)), rows)


def _heads(column: Column, parts: bool) -> list[Head]:
    name = visible(plain(column.header)) or column.key
    text = visible(plain(with_unit(name, column.unit)))
    if not parts:
        return [Head(text, "cell", column.decimals, column.align)]
    u = visible(plain(with_unit(f"u({name})", column.unit)))
    return [
        Head(text, "value", column.decimals, "right"),
        Head(u, "u", column.decimals + 1, "right"),
        Head(f"{name}, remark", "remark", 0, "left"),
    ]


def _distinct(heads: list[Head]) -> list[Head]:
    seen: Counter[str] = Counter()
    found = []
    for head in heads:
        seen[head.text] += 1
        again = seen[head.text]
        text = head.text if again == 1 else f"{head.text} ({again})"
        found.append(Head(text, head.role, head.decimals, head.align))
    return found


def _items(cell: Cell, parts: bool) -> list[Plain]:
    if isinstance(cell, Reading):
        return _reading(cell)
    item = _item(cell)
    return [item, None, None] if parts else [item]


def _reading(cell: Reading) -> list[Plain]:
    if cell.value is None:
        words = visible(cell.words or "not entered")
        return [words, None, words]
    value = _item(cell.value)
    mark = ", estimated" if cell.estimated else ""
    if cell.u is None:
        return [value, "not stated", f"uncertainty not stated{mark}"]
    return [value, _item(cell.u), ("at least" if cell.at_least else "standard uncertainty") + mark]


def _item(cell: str | tuple[object, ...] | int | Fraction | float | None) -> Plain:
    if cell is None or isinstance(cell, str):
        return cell if cell is None else visible(cell)
    if isinstance(cell, float):
        return cell if math.isfinite(cell) else "not a number"
    if isinstance(cell, int | Fraction):
        number = Fraction(cell)
        return int(number) if number.denominator == 1 and abs(number) < _LARGEST_WHOLE else str(number)
    return visible(plain(cell))  # type: ignore[arg-type]

"""Tables as CSV: one header line with units, exact fractions as text, numbers as plain numbers.

A value with its uncertainty becomes two columns, the value and its standard uncertainty. A text cell that a
spreadsheet would run as a formula is written with a leading apostrophe.
"""

from __future__ import annotations

import csv
import io
from fractions import Fraction

from routeheat.present.markup import plain
from routeheat.present.table import Cell, Column, Reading, Table

_FORMULA_STARTS = ("=", "+", "-", "@", "\t", "\r")


def csv_text(table: Table) -> str:
    """The table as CSV text (RFC 4180, CRLF line ends); notes follow as lines of their own behind an empty line."""
    out = io.StringIO()
    writer = csv.writer(out)
    paired = [any(isinstance(row[index], Reading) for row in table.rows) for index in range(len(table.columns))]
    writer.writerow([name for column, pair in zip(table.columns, paired, strict=True) for name in _header(column, pair)])
    for row in table.rows:
        writer.writerow([text for cell, pair in zip(row, paired, strict=True) for text in _cells(cell, pair)])
    if table.notes:
        writer.writerow([])
        writer.writerows([[harmless(note)] for note in table.notes])
    return out.getvalue()


def harmless(text: str) -> str:
    """The text, with an apostrophe before it where a spreadsheet would take it for a formula."""
    return "'" + text if text.lstrip().startswith(_FORMULA_STARTS) or text.startswith(_FORMULA_STARTS) else text


def _header(column: Column, pair: bool) -> list[str]:
    unit = f" / ({column.unit})" if column.unit else ""
    name = harmless(plain(column.header))
    return [name + unit, f"u({name}){unit}", "uncertainty"] if pair else [name + unit]


def _cells(cell: Cell, pair: bool) -> list[str]:
    if isinstance(cell, Reading):
        if cell.value is None:
            return [harmless(cell.words or "not entered"), "", ""]
        stated = "not stated" if cell.u is None else "at least" if cell.at_least else "standard, k = 1"
        return [repr(cell.value), "" if cell.u is None else repr(cell.u), stated]
    text = _text(cell)
    return [text, "", ""] if pair else [text]


def _text(cell: Cell) -> str:
    if cell is None:
        return ""
    if isinstance(cell, bool | int | Fraction):
        return str(cell)
    if isinstance(cell, float):
        return repr(cell)
    return harmless(plain(cell))  # type: ignore[arg-type]

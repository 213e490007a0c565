"""Tables as CSV: one header line with units, exact fractions as text, numbers as plain numbers.

A value with its uncertainty becomes three columns: the value, its standard uncertainty, and a remark. A text cell that
a spreadsheet would run as a formula is written with a leading apostrophe.
"""

from __future__ import annotations

import csv
import io
import re

from routeheat.present.flat import Plain, flat
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.present.text import visible

_FORMULA_START = re.compile(
    r"\s*[=+\-@\N{FULLWIDTH EQUALS SIGN}\N{FULLWIDTH PLUS SIGN}\N{FULLWIDTH HYPHEN-MINUS}"
    r"\N{FULLWIDTH COMMERCIAL AT}]|[\t\r]"
)
_NUMBER = re.compile(r"[+-]?\d+(?:/\d+|\.\d+)?")


def first_table(item: Shown | Table) -> Table:
    """The table itself, or the first table of a result."""
    return item if isinstance(item, Table) else item.table()


def every_table(item: Shown | Table) -> tuple[Table, ...]:
    """The table itself, or all tables of a result."""
    return (item,) if isinstance(item, Table) else item.tables()


def csv_text(item: Shown | Table) -> str:
    """A table, or the first table of a result, as CSV text (RFC 4180, CRLF line ends).

    Notes follow as lines of their own behind an empty line. The other tables of a result are in ``.tables()``.
    Write it with ``newline=""`` and UTF-8.
    """
    table = first_table(item)
    content = flat(table)
    out = io.StringIO()
    writer = csv.writer(out)
    writer.writerow([harmless(head.text) for head in content.heads])
    writer.writerows([_text(cell) for cell in row] for row in content.rows)
    if table.notes:
        writer.writerow([])
        writer.writerows([harmless(visible(note))] for note in table.notes)
    return out.getvalue()


def harmless(text: str) -> str:
    """The text, with an apostrophe before it where a spreadsheet would take it for a formula; numbers stay as are."""
    return "'" + text if _FORMULA_START.match(text) and not _NUMBER.fullmatch(text) else text


def _text(cell: Plain) -> str:
    if cell is None:
        return ""
    return harmless(cell) if isinstance(cell, str) else repr(cell)

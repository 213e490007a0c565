"""Workbooks (XLSX) through XlsxWriter: numbers as numbers with units in the headers, texts never as formulas or links.

The same content gives the same bytes, whenever it is written.
"""

from __future__ import annotations

import io
import re
from collections.abc import Iterable, Mapping
from datetime import UTC, datetime
from decimal import Decimal
from pathlib import Path
from typing import Any

from routeheat.chem.route import Sheet
from routeheat.chem.row import Rows
from routeheat.present.flat import Flat, Head, Plain, flat
from routeheat.present.markup import plain
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.present.text import display_width, visible
from routeheat.report.files import write_whole
from routeheat.report.known_columns import KNOWN_COLUMNS, TEXT_COLUMNS, known_cells
from routeheat.report.tables import every_table, harmless
from routeheat.report.workbook_pages import pages

_WRITTEN = datetime(2000, 1, 1, tzinfo=UTC)
"""Creation date of every workbook, so that equal content gives equal bytes."""
_LONGEST_CELL = 32_000
"""Characters of a cell; the format ends at 32,767."""
_WIDEST = 48
_MOST_DECIMALS = 15


def write_workbook(item: Sheet | Shown | Table, path: str | Path, *, per: Any = "mol") -> Path:
    """Write a workbook and return its path.

    A :class:`~routeheat.chem.route.Sheet` gives the worksheets ``routes``, ``steps``, ``combinations``,
    ``known heats``, ``sources`` and ``cautions``, with profiles on the basis ``per``; a result gives one worksheet for
    each of its tables. A value with its uncertainty is three columns: value, standard uncertainty, remark.
    Raises ``OSError`` when the file cannot be written, :class:`~routeheat.errors.UnitError` for an unusable basis.
    """
    content: dict[str, tuple[Table, ...] | Rows]
    if isinstance(item, Sheet):
        content = pages(item, per)
    else:
        content = {f"{number} {plain(table.title)}": (table,) for number, table in enumerate(every_table(item), 1)}
    made = Path(path)
    write_whole(made, workbook_bytes(content))
    return made


def workbook_bytes(content: Mapping[str, tuple[Table, ...] | Rows]) -> bytes:
    """The bytes of a workbook with one worksheet for each name: its tables below one another, or known rows."""
    import xlsxwriter

    out = io.BytesIO()
    options = {"in_memory": True, "strings_to_formulas": False, "strings_to_urls": False, "strings_to_numbers": False}
    book = xlsxwriter.Workbook(out, options)
    book.set_properties({"created": _WRITTEN})
    formats = _Formats(book)
    taken: set[str] = set()
    for name, filling in content.items():
        page = book.add_worksheet(_sheet_name(name, taken))
        if isinstance(filling, Rows):
            _fill_known(page, filling, formats)
        else:
            _fill(page, filling, formats)
    book.close()
    return out.getvalue()


class _Formats:
    """The formats of one workbook, made when first used."""

    def __init__(self, book: Any) -> None:
        self._book = book
        self._made: dict[tuple[tuple[str, Any], ...], Any] = {}

    def __call__(self, **properties: Any) -> Any:
        key = tuple(sorted(properties.items()))
        if key not in self._made:
            self._made[key] = self._book.add_format(properties)
        return self._made[key]

    def text(self, text: str, **properties: Any) -> Any:
        """Format of a text cell; one that looks like a formula also stays text when somebody edits it."""
        quoted = {} if harmless(text) == text else {"quote_prefix": True}
        return self(**properties, **quoted)


def _fill(page: Any, tables: Iterable[Table], formats: _Formats) -> None:
    line = 0
    widths: dict[int, int] = {}
    for number, table in enumerate(tables):
        content = flat(table)
        if table.title:
            _write(page, line, 0, visible(plain(table.title)), formats, bold=True)
            line += 1
        for index, head in enumerate(content.heads):
            _write(
                page,
                line,
                index,
                head.text,
                formats,
                bold=True,
                bottom=1,
                text_wrap=True,
                align=head.align,
                valign="top",
            )
        if not number:
            page.freeze_panes(line + 1, 0)
        line += 1
        for place, row in enumerate(content.rows):
            strong = {"bold": True, "top": 1} if place in table.strong else {}
            for index, (cell, head) in enumerate(zip(row, content.heads, strict=True)):
                _write(page, line, index, cell, formats, **strong, **_shape(cell, head))
            line += 1
        for note in table.notes:
            _write(page, line, 0, visible(note), formats, italic=True)
            line += 1
        line += 1
        for index, width in _widths(content).items():
            widths[index] = max(width, widths.get(index, 0))
    for index, width in widths.items():
        page.set_column(index, index, width)


def _fill_known(page: Any, rows: Rows, formats: _Formats) -> None:
    """Known rows in the columns in which they can be read again; numbers show the decimals that were typed."""
    for index, name in enumerate(KNOWN_COLUMNS):
        _write(page, 0, index, name, formats, bold=True, bottom=1)
    page.freeze_panes(1, 0)
    for line, row in enumerate(rows.values(), 1):
        for index, cell in enumerate(known_cells(row)):
            if isinstance(cell, Decimal):
                number = float(cell)
                if Decimal(repr(number)) == cell:
                    decimals = max(0, -int(cell.as_tuple().exponent))
                    _write(page, line, index, number, formats, **_decimals(decimals))
                else:
                    # more digits than a spreadsheet keeps: as text nothing is lost
                    _write(page, line, index, format(cell, "f"), formats, align="right")
            else:
                _write(page, line, index, cell, formats)
    page.set_column(1, 1, _WIDEST)
    page.set_column(len(KNOWN_COLUMNS) - len(TEXT_COLUMNS), len(KNOWN_COLUMNS) - 1, _WIDEST / 2)


def _decimals(count: int) -> dict[str, Any]:
    count = min(max(count, 0), _MOST_DECIMALS)
    return {"num_format": "0." + "0" * count if count else "0"}


def _shape(cell: Plain, head: Head) -> dict[str, Any]:
    if isinstance(cell, float):
        return _decimals(head.decimals)
    if isinstance(cell, int):
        return _decimals(0)
    return {"text_wrap": True, "valign": "top", "align": head.align}


def _write(page: Any, line: int, index: int, cell: Plain, formats: _Formats, **properties: Any) -> None:
    if cell is None:
        return
    if isinstance(cell, str):
        if len(cell) > _LONGEST_CELL:
            cell = f"{cell[:_LONGEST_CELL]}… ({len(cell) - _LONGEST_CELL:,} more characters)"
        page.write_string(line, index, cell, formats.text(cell, **properties))
    else:
        page.write_number(line, index, cell, formats(**properties))


def _widths(content: Flat) -> dict[int, int]:
    widths = {}
    for index, head in enumerate(content.heads):
        texts = [cell for row in content.rows if isinstance(cell := row[index], str)]
        longest = max((display_width(text[:_WIDEST]) for text in texts), default=0)
        widths[index] = min(max(longest, min(display_width(head.text), 16), 10) + 2, _WIDEST)
    return widths


def _sheet_name(wanted: str, taken: set[str]) -> str:
    """A name that spreadsheets accept, at most 31 characters, and that no other worksheet has."""
    base = re.sub(r"[\[\]:*?/\\]", " ", visible(wanted)).strip("' ")[:31].strip("' ") or "table"
    if base.casefold() == "history":
        base = "table history"
    name, number = base, 1
    while name.casefold() in taken:
        number += 1
        tail = f" ({number})"
        name = base[: 31 - len(tail)] + tail
    taken.add(name.casefold())
    return name

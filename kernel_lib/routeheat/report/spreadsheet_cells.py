"""The cells of CSV and XLSX files as text, capped; numbers of a workbook as the decimals it shows."""

from __future__ import annotations

import csv
import io
import zipfile
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from routeheat.errors import RouteheatError
from routeheat.notation.sections import MOST_ROWS
from routeheat.report.files import read_whole

MOST_COLUMNS = 200
MOST_LINES = 4 * MOST_ROWS
LARGEST_UNPACKED = 300_000_000
"""Bytes of a workbook when unpacked."""


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a spreadsheet."""

    number: int
    """Counted from 1, as a spreadsheet shows it (for CSV: the line of the file where it starts)."""
    cells: tuple[str, ...]


def csv_lines(source: str | Path) -> list[Line]:
    """The lines of a CSV file or text that are not empty.

    They are separated by commas, semicolons or tabs, whichever the first line that has any holds most.

    Raises :class:`~routeheat.errors.RouteheatError`, ``OSError``.
    """
    text = source
    if isinstance(source, Path):
        try:
            text = read_whole(source).decode("utf-8-sig")
        except UnicodeDecodeError as problem:
            raise RouteheatError(f"{source} is no UTF-8 text (byte {problem.start}): save it as CSV UTF-8") from problem
    assert isinstance(text, str)
    head = next((line for line in text.splitlines() if any(char in line for char in ",;\t")), "")
    separator = max(",;\t", key=head.count)
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=separator)
    found: list[Line] = []
    start = 1
    try:
        for cells in reader:
            _check_size(len(found), len(cells))
            if any(cell.strip() for cell in cells):
                found.append(Line(start, tuple(cells)))
            start = reader.line_num + 1
    except csv.Error as problem:
        raise RouteheatError(f"line {start}: this is no CSV text ({problem})") from problem
    return found


def workbook_lines(path: Path, worksheet: str | None) -> dict[str, list[Line]]:
    """The lines of every page of a workbook, or of one, by the name of the page.

    Formulas give the value that was last calculated. Raises :class:`~routeheat.errors.RouteheatError`, ``OSError``,
    and ``ModuleNotFoundError`` when openpyxl is not installed.
    """
    try:
        import openpyxl
    except ModuleNotFoundError as problem:
        words = "reading a workbook needs openpyxl: pip install openpyxl"
        raise ModuleNotFoundError(words, name="openpyxl") from problem
    content = io.BytesIO(read_whole(path))
    try:
        with zipfile.ZipFile(content) as packed:
            size = sum(member.file_size for member in packed.infolist())
        if size > LARGEST_UNPACKED:
            raise RouteheatError(f"{path} is larger than {LARGEST_UNPACKED:,} bytes when unpacked")
        book = openpyxl.load_workbook(content, read_only=True, data_only=True)
        names = [page.title for page in book.worksheets]
        if worksheet is not None and worksheet not in names:
            raise RouteheatError(f"{path} has no worksheet {worksheet!r}; it has {', '.join(names)}")
        wanted = names if worksheet is None else [worksheet]
        found = {name: list(_page_lines(book[name])) for name in wanted}
        book.close()
    except (RouteheatError, OSError):
        raise
    except Exception as problem:  # openpyxl raises whatever its XML layer does
        raise RouteheatError(f"{path} is no workbook that can be read: {problem}") from problem
    return found


def _page_lines(page: Any) -> Iterator[Line]:
    # some writers store a wrong used range, and a read-only page believes it
    page.reset_dimensions()
    count = 0
    for number, cells in enumerate(page.iter_rows(), 1):
        texts = tuple(_text(cell) for cell in cells)
        if any(text.strip() for text in texts):
            count += 1
            _check_size(count, len(texts))
            yield Line(number, texts)


def _check_size(lines: int, columns: int) -> None:
    if lines > MOST_LINES:
        raise RouteheatError(f"more than {MOST_LINES:,} lines: is this the right file?")
    if columns > MOST_COLUMNS:
        raise RouteheatError(f"more than {MOST_COLUMNS} columns: is this the right file?")


def _text(cell: Any) -> str:
    value = cell.value
    if value is None:
        return ""
    if isinstance(value, bool):
        return str(value).upper()
    if isinstance(value, int | float):
        return _number(float(value), cell.number_format or "")
    return str(value)


def _number(value: float, shown_as: str) -> str:
    """The number to 15 digits, with at least the decimals that the cell shows."""
    text = format(value, ".15g")
    decimals = len(shown_as[2:]) if shown_as.startswith("0.") and not shown_as[2:].strip("0") else 0
    if decimals and "e" not in text and "n" not in text:
        whole, _, digits = text.partition(".")
        text = f"{whole}.{digits.ljust(decimals, '0')}"
    return text

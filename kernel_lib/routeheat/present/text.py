"""Tables as plain text, and the two helpers every renderer shares: harmless text and headers with units."""

from __future__ import annotations

import re
import textwrap
import unicodedata
from fractions import Fraction
from typing import TYPE_CHECKING

from routeheat.present.cells import Cell, Column, Reading
from routeheat.present.markup import Rich, Run, as_rich, plain
from routeheat.present.numbers import coverage, fraction, number, reading

if TYPE_CHECKING:
    from routeheat.present.table import Table

PAGE = 100
"""Characters at which titles and notes wrap."""
WIDEST_CELL = 60
"""Characters at which the text of a cell wraps onto a second line."""

# C0 and C1 controls, soft hyphen, Arabic letter mark, zero-width and bidirectional controls, line separators,
# interlinear and tag characters, lone surrogates and noncharacters: all can hide, reorder or break text
_HARMFUL = re.compile(
    "[\x00-\x1f\x7f-\x9f\xad\u061c\u180e\u200b\u200e\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb"
    "\ufffe\uffff\ud800-\udfff\U000e0000-\U000e007f]"
)
_RETURN = "\N{DOWNWARDS ARROW WITH CORNER LEFTWARDS}"


def _show(match: re.Match[str]) -> str:
    character = match.group()
    if character == "\t":
        return " "
    if character in "\n\r\u2028\u2029\x85":
        return _RETURN
    return f"⟨U+{ord(character):04X}⟩"


def visible(text: str) -> str:
    """``text`` with control, bidirectional and invisible characters written out as ``⟨U+202E⟩``.

    A line end becomes ``↵`` and a tab a space, so the result always stays on one line and reads in one direction.
    """
    return _HARMFUL.sub(_show, text)


def visible_rich(rich: Rich | str) -> Rich:
    """:func:`visible` applied to every run of a rich text."""
    return tuple(Run(visible(run.text), run.style) for run in as_rich(rich))


def with_unit(header: Rich | str, unit: str) -> Rich:
    """A quantity with its unit after a slash, ``ΔrH / (kJ mol⁻¹)``; a compound unit stands in parentheses."""
    runs = as_rich(header)
    if not unit:
        return runs
    simple = not re.search(r"[\s/·*⋅]", unit) or (unit.startswith("(") and unit.endswith(")"))
    return (*runs, Run(f" / {unit}" if simple else f" / ({unit})"))


def display_width(text: str) -> int:
    """Columns that ``text`` takes in a fixed-width font: wide characters two, combining ones none."""
    columns = 0
    for character in text:
        if unicodedata.category(character) in ("Mn", "Me", "Cf"):
            continue
        columns += 2 if unicodedata.east_asian_width(character) in "WF" else 1
    return columns


def cell_text(cell: Cell, column: Column, *, say_k: bool = True) -> str:
    """The characters of one cell; ``say_k=False`` where the header already names the coverage factor."""
    if cell is None:
        return ""
    if isinstance(cell, Reading):
        return visible(reading(cell, decimals=column.decimals, say_k=say_k))
    if isinstance(cell, int | Fraction):
        return fraction(cell)
    if isinstance(cell, float):
        return number(cell, column.decimals)
    return visible(plain(cell))


def shared_coverage(table: Table, index: int) -> float | None:
    """The one coverage factor of all uncertainties in a column, or ``None`` when there is none or several."""
    factors = {
        cell.k for row in table.rows if isinstance(cell := row[index], Reading) and cell.value is not None and cell.u
    }
    return factors.pop() if len(factors) == 1 else None


def column_header(table: Table, index: int) -> Rich:
    """Header of a column with its unit and, where its uncertainties share one, the coverage factor of its ±."""
    column = table.columns[index]
    header = with_unit(column.header, column.unit)
    k = shared_coverage(table, index)
    return header if k is None else (*header, Run(f", ± {coverage(k)}"))


def render_table(table: Table) -> str:
    """The table as aligned plain text: title, header, rule, rows, totals under a rule of their own, notes."""
    says_k = [shared_coverage(table, index) is None for index in range(len(table.columns))]
    header = [_wrap(visible(plain(column_header(table, i))), WIDEST_CELL) for i in range(len(table.columns))]
    body = [
        [
            _wrap(cell_text(cell, column, say_k=says_k[i]), WIDEST_CELL)
            for i, (cell, column) in enumerate(zip(row, table.columns, strict=True))
        ]
        for row in table.rows
    ]
    widths = [
        max((display_width(line) for row in (header, *body) for line in row[index]), default=0)
        for index in range(len(table.columns))
    ]
    rule = "  ".join("─" * width for width in widths)
    lines = _wrap(visible(plain(table.title)), PAGE) if table.title else []
    lines += [*_aligned(header, table.columns, widths), rule]
    ruled = True
    for index, row in enumerate(body):
        if index in table.strong and not ruled and index - 1 not in table.strong:
            lines.append(rule)
        lines += _aligned(row, table.columns, widths)
        ruled = False
    for note in table.notes:
        lines += _wrap(visible(note), PAGE)
    return "\n".join(lines)


def _aligned(cells: list[list[str]], columns: tuple[Column, ...], widths: list[int]) -> list[str]:
    lines = []
    for level in range(max((len(cell) for cell in cells), default=0)):
        parts = []
        for cell, column, width in zip(cells, columns, widths, strict=True):
            piece = cell[level] if level < len(cell) else ""
            pad = " " * (width - display_width(piece))
            parts.append(pad + piece if column.align == "right" else piece + pad)
        lines.append("  ".join(parts).rstrip())
    return lines


def _wrap(text: str, width: int) -> list[str]:
    """Lines of at most ``width`` columns; a word longer than a line is cut."""
    if display_width(text) <= width:
        return [text]
    # textwrap counts characters; half the width is safe for text that is wide throughout
    count = width if display_width(text) == len(text) else width // 2
    return textwrap.wrap(text, count, break_on_hyphens=False, drop_whitespace=True) or [""]

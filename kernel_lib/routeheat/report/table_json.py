"""Tables to and from JSON-safe content, without loss: styles of text, exact numbers, readings."""

from __future__ import annotations

from typing import Any, cast

from routeheat.errors import RouteheatError
from routeheat.present.markup import Rich, Run, Style
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.report.plain_json import exact

_STYLES = ("", "sub", "sup", "italic")


def table_content(table: Table) -> dict[str, Any]:
    """A table as JSON-safe content."""
    return {
        "title": _rich(table.title),
        "columns": [
            {"key": c.key, "header": _rich(c.header), "unit": c.unit, "align": c.align, "decimals": c.decimals}
            for c in table.columns
        ],
        "rows": [[_cell(cell) for cell in row] for row in table.rows],
        "notes": list(table.notes),
        "strong": sorted(table.strong),
    }


def _cell(cell: Cell) -> Any:
    if cell is None or isinstance(cell, str | float):
        return cell
    if isinstance(cell, Reading):
        return {"value": cell.value, "u": cell.u, "k": cell.k, "at_least": cell.at_least, "words": cell.words,
                "estimated": cell.estimated}  # fmt: skip
    return _rich(cell) if isinstance(cell, tuple) else {"exact": str(cell)}


def _rich(rich: Rich | str) -> Any:
    return rich if isinstance(rich, str) else [[run.text, run.style] for run in rich]


def read_table(content: Any) -> Table:
    """The table of such content; raises :class:`~routeheat.errors.RouteheatError` when it is none."""
    try:
        columns = tuple(
            Column(_str(c["key"]), _read_rich(c["header"]), _str(c["unit"]), c["align"], int(c["decimals"]))
            for c in content["columns"]
        )
        if any(column.align not in ("left", "right") for column in columns):
            raise ValueError("a column is aligned left or right")
        rows = tuple(tuple(_read_cell(cell) for cell in row) for row in content["rows"])
        notes = tuple(_str(note) for note in content["notes"])
        return Table(_read_rich(content["title"]), columns, rows, notes, frozenset(int(i) for i in content["strong"]))
    except (KeyError, TypeError, ValueError) as problem:
        raise RouteheatError(f"this is no table of the interchange form: {problem!r}") from problem


def _read_cell(cell: Any) -> Cell:
    if cell is None or isinstance(cell, str | float):
        return cell
    if isinstance(cell, list):
        return _read_rich(cell)
    if "exact" in cell:
        number = exact(cell["exact"])
        return number.numerator if number.denominator == 1 else number
    value, u = cell["value"], cell["u"]
    return Reading(
        None if value is None else float(value), None if u is None else float(u), float(cell["k"]),
        bool(cell["at_least"]), _str(cell["words"]), bool(cell.get("estimated", False)),
    )  # fmt: skip


def _read_rich(content: Any) -> Rich | str:
    if isinstance(content, str):
        return content
    runs = []
    for text, style in content:
        if style not in _STYLES:
            raise ValueError(f"unknown style {style!r}")
        runs.append(Run(_str(text), cast(Style, style)))
    return tuple(runs)


def _str(text: Any) -> str:
    if not isinstance(text, str):
        raise TypeError(f"a text is expected, not {text!r:.40}")
    return text

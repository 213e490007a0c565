"""Tables that are wide and short, turned: what were columns become rows, so that they fit beside the typed sheet."""

from __future__ import annotations

from routeheat.present.markup import as_rich, plain
from routeheat.present.table import Cell, Column, Table
from routeheat.present.text import cell_text, column_header, shared_coverage

_FEW = 4
"""Rows of a table that is worth turning."""
_MANY = 9
"""Columns that do not fit beside each other."""


def turned(table: Table) -> Table:
    """The table with one row for each column where it is wide and short, else as it is."""
    if not 0 < len(table.rows) <= _FEW or len(table.columns) <= _MANY or table.strong:
        return table
    heads = [Column(f"row_{number}", _shown(table, 0, row[0])) for number, row in enumerate(table.rows)]
    first = Column(table.columns[0].key, table.columns[0].header)
    rows: list[tuple[Cell, ...]] = []
    for index in range(1, len(table.columns)):
        cells = [_shown(table, index, row[index]) for row in table.rows]
        if any(cells):
            rows.append((as_rich(column_header(table, index)), *cells))
    return Table(table.title, (first, *heads), tuple(rows), table.notes)


def _shown(table: Table, index: int, cell: Cell) -> str:
    if isinstance(cell, tuple):
        return plain(cell)
    return cell_text(cell, table.columns[index], say_k=shared_coverage(table, index) is None)

"""The table: a plain shape that every tabular result takes before it is shown, printed or exported."""

from __future__ import annotations

from dataclasses import dataclass, field

from routeheat.present import html
from routeheat.present.cells import Cell, Column, Reading
from routeheat.present.markup import Rich, plain
from routeheat.present.text import render_table

__all__ = ["Cell", "Column", "Reading", "Table"]


@dataclass(frozen=True, slots=True, repr=False)
class Table:
    """Rows of cells under columns, with a title above and notes below."""

    title: Rich | str
    columns: tuple[Column, ...]
    rows: tuple[tuple[Cell, ...], ...]
    """Each row has one cell per column."""
    notes: tuple[str, ...] = ()
    """Sentences a reader must see with the table: what is not entered, which k is meant, cautions."""
    strong: frozenset[int] = field(default_factory=frozenset)
    """Indices of rows that are totals."""

    def __post_init__(self) -> None:
        for row in self.rows:
            if len(row) != len(self.columns):
                title = plain(self.title)
                raise ValueError(f"table {title!r}: a row of {len(row)} cells under {len(self.columns)} columns")

    def __repr__(self) -> str:
        return render_table(self)

    def _repr_mimebundle_(self, include: object = None, exclude: object = None) -> dict[str, str]:  # noqa: ARG002
        """Text and HTML for a notebook; deterministic, without scripts."""
        return {"text/plain": render_table(self), "text/html": html.render_table(self)}

"""The report as plain shapes, built once and rendered as HTML, DOCX and PDF.

Nothing here knows a file format. Texts are harmless when they leave :func:`grid` and :func:`line`: control and
bidirectional characters are written out, and what would burst a cell or a heading is shortened in its middle (the
typed sheet in the appendix keeps the whole).
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from routeheat.draw.arrange import Drawing
from routeheat.present.markup import Rich, Run, as_rich, join, plain
from routeheat.present.numbers import coverage
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.present.text import cell_text, column_header, shared_coverage, visible, visible_rich

LONGEST_CELL = 300
"""Characters from which on a cell, or the title of the report, is shortened."""
LONGEST_HEADING = 160
"""Characters from which on a caption or a heading is shortened."""


@dataclass(frozen=True, slots=True)
class Heading:
    """A heading below that of its section."""

    id: str
    text: Rich
    level: int = 3


@dataclass(frozen=True, slots=True)
class Paragraph:
    """Running text."""

    text: Rich
    kind: Literal["text", "note", "caution"] = "text"


@dataclass(frozen=True, slots=True)
class Bullets:
    """A list of sentences."""

    items: tuple[Rich, ...]


@dataclass(frozen=True, slots=True)
class Grid:
    """Header and cells of a table as they are written; the first column names the rows."""

    header: tuple[Rich, ...]
    rows: tuple[tuple[Rich, ...], ...]
    right: tuple[bool, ...]
    """Which columns are flush right."""
    strong: frozenset[int] = frozenset()
    """Indices of rows that are totals."""

    def columns(self, kept: Iterable[int]) -> Grid:
        """The grid with the columns of those indices."""
        indices = tuple(kept)
        rows = tuple(tuple(row[index] for index in indices) for row in self.rows)
        return Grid(
            tuple(self.header[index] for index in indices), rows, tuple(self.right[index] for index in indices),
            self.strong,
        )  # fmt: skip

    def turned(self) -> Grid:
        """The grid with rows and columns exchanged, everything flush left."""
        header, *rows = zip(self.header, *self.rows, strict=True)
        return Grid(header, tuple(rows), (False,) * len(header))


@dataclass(frozen=True, slots=True)
class TableBlock:
    """A numbered table with a caption above and notes below."""

    id: str
    caption: Rich
    grid: Grid
    notes: tuple[Rich, ...] = ()
    number: int = 0
    folds: bool = False
    """True: on a screen it is closed at first, with its caption to open it; on paper it is open."""


@dataclass(frozen=True, slots=True)
class FigureBlock:
    """A numbered diagram with a caption below."""

    id: str
    caption: Rich
    drawing: Drawing
    """Without title and notes, which the page gives."""
    notes: tuple[Rich, ...] = ()
    number: int = 0


@dataclass(frozen=True, slots=True)
class Code:
    """Typed text, line by line."""

    id: str
    caption: Rich
    lines: tuple[str, ...]


Block = Heading | Paragraph | Bullets | TableBlock | FigureBlock | Code


@dataclass(frozen=True, slots=True)
class Section:
    """A part of the report that can be left out by its name."""

    name: str
    heading: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True, slots=True)
class Document:
    """A whole report."""

    title: Rich
    date: Rich
    """Empty when no date is given."""
    caution: Rich
    """The short caution, which every report shows first."""
    sections: tuple[Section, ...]


def line(text: Rich | str, most: int = 0) -> Rich:
    """A harmless text; longer than ``most`` characters (if not 0) it is shortened in its middle."""
    rich = tuple(run for run in visible_rich(text) if run.text)
    length = sum(len(run.text) for run in rich)
    if not most or length <= most:
        return rich
    half = (most - 1) // 2
    letters = [Run(letter, run.style) for run in rich for letter in run.text]
    kept = [*letters[:half], Run("…"), *letters[length - half :]]
    merged: list[Run] = []
    for run in kept:
        if merged and merged[-1].style == run.style:
            merged[-1] = Run(merged[-1].text + run.text, run.style)
        else:
            merged.append(run)
    return tuple(merged)


def lines(text: str) -> tuple[str, ...]:
    """The lines of a typed text, each harmless."""
    return tuple(plain(visible_rich(part.expandtabs(4))) for part in text.rstrip("\n").split("\n"))


def grid(table: Table) -> Grid:
    """A table as written: headers with units and the k of their ±, cells as texts.

    Where columns have no unit, as in a ledger, the row says unit and k. Columns without any content are left out.
    """
    says_k = [shared_coverage(table, index) is None for index in range(len(table.columns))]
    header = tuple(_unbroken(line(_header(table, index), LONGEST_HEADING)) for index in range(len(table.columns)))
    rows = tuple(
        tuple(
            _unbroken(line(_written(cell, column, say_k=says_k[index]), LONGEST_CELL))
            for index, (cell, column) in enumerate(zip(_with_coverage(table, row), table.columns, strict=True))
        )
        for row in table.rows
    )
    whole = Grid(header, rows, tuple(column.align == "right" for column in table.columns), table.strong)
    filled = [index for index in range(len(header)) if not rows or not index or any(row[index] for row in rows)]
    return whole.columns(filled)


def _written(cell: Cell, column: Column, *, say_k: bool) -> Rich | str:
    return cell if isinstance(cell, tuple) else cell_text(cell, column, say_k=say_k)


def _header(table: Table, index: int) -> Rich:
    column = table.columns[index]
    return column_header(table, index) if column.unit else as_rich(column.header)


def _with_coverage(table: Table, row: tuple[Cell, ...]) -> tuple[Cell, ...]:
    """The row, its name with the coverage factor of those columns whose header does not say it."""
    first = row[0]
    factors = dict.fromkeys(
        k for index, cell in enumerate(row)
        if isinstance(cell, Reading) and cell.u and not table.columns[index].unit
        and (k := shared_coverage(table, index)) is not None
    )  # fmt: skip
    if not factors or not isinstance(first, str | tuple):
        return row
    return (join([first, *(f", ± {coverage(k)}" for k in factors)]), *row[1:])


def _unbroken(text: Rich) -> Rich:
    """A text in which no line ends between a slash and its unit, or within a coverage factor."""
    return tuple(
        Run(run.text.replace(" / ", " /\xa0").replace("± k = ", "±\xa0k = ").replace("k = ", "k\xa0=\xa0"), run.style)
        for run in text
    )


def table_block(name: str, table: Table, *extra: str, caption: Rich | str = "") -> TableBlock:
    """A table with its notes, and ``extra`` ones behind them; its title is the caption unless one is given."""
    notes = tuple(line(note) for note in (*table.notes, *extra))
    return TableBlock(name, line(caption or table.title, LONGEST_HEADING), grid(table), notes)


def figure_block(name: str, drawing: Drawing, *extra: str) -> FigureBlock:
    """A figure whose title is the caption and whose notes stand below it."""
    notes = tuple(line(note) for note in dict.fromkeys((*drawing.notes, *extra)))
    bare = replace(drawing, title="", notes=(), alt=visible(drawing.alt or plain(drawing.title)))
    return FigureBlock(name, line(drawing.title, LONGEST_HEADING), bare, notes)


def numbered(sections: Iterable[Section]) -> tuple[Section, ...]:
    """The sections with their tables and figures numbered through the report."""
    counts = {TableBlock: 0, FigureBlock: 0}

    def count(blocks: Iterable[Block]) -> Iterator[Block]:
        for block in blocks:
            if isinstance(block, TableBlock | FigureBlock):
                counts[type(block)] += 1
                yield replace(block, number=counts[type(block)])
            else:
                yield block

    return tuple(replace(section, blocks=tuple(count(section.blocks))) for section in sections)


def led(blocks: Sequence[Block]) -> Iterator[tuple[Block, bool]]:
    """Every block, and whether it is a paragraph that leads to the table or figure behind it."""
    for index, block in enumerate(blocks):
        following = blocks[index + 1 : index + 2]
        yield block, isinstance(block, Paragraph) and any(isinstance(x, TableBlock | FigureBlock) for x in following)


def blocks_of(document: Document) -> Iterator[Block]:
    """Every block of every section in order."""
    for section in document.sections:
        yield from section.blocks

"""Tables of one kind as one table, and notes of several things as one list that says nothing twice."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from routeheat.present.markup import Rich
from routeheat.present.table import Column, Table


def together(title: Rich | str, first: Column, tables: Sequence[tuple[str, Table]]) -> Table:
    """The rows of all tables below each other, in the column ``first`` the name of the thing they are about.

    All tables have the same columns.
    """
    rows = tuple((name, *row) for name, table in tables for row in table.rows)
    strong = []
    start = 0
    for _, table in tables:
        strong += [start + index for index in table.strong]
        start += len(table.rows)
    notes = shared_notes([(name, table.notes) for name, table in tables])
    return Table(title, (first, *tables[0][1].columns), rows, notes, frozenset(strong))


def shared_notes(notes: Sequence[tuple[str, Iterable[str]]]) -> tuple[str, ...]:
    """Every note once: with the names it belongs to, or bare and last when it belongs to all."""
    found: dict[str, list[str]] = {}
    for name, texts in notes:
        for text in dict.fromkeys(texts):
            found.setdefault(text, []).append(name)
    some = [f"{', '.join(names)}: {text}" for text, names in found.items() if len(names) < len(notes)]
    return (*some, *(text for text, names in found.items() if len(names) == len(notes)))

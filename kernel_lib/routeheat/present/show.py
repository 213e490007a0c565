"""How results show themselves: as text in a terminal, as tables in a notebook; the same bytes every time."""

from __future__ import annotations

from typing import Any

from routeheat.present import html
from routeheat.present.frame import frame
from routeheat.present.table import Table
from routeheat.present.text import render_table


class Shown:
    """Base of every result: it has tables, and renders itself through them."""

    __slots__ = ()

    def tables(self) -> tuple[Table, ...]:
        """The tables that the result is shown as, most important first."""
        return (self.table(),)

    def table(self) -> Table:
        """The table a reader looks at first."""
        raise TypeError(f"{type(self).__name__} has no table")

    def to_frame(self, index: int = 0) -> Any:
        """One of :meth:`tables`, by default the first, as a ``pandas.DataFrame``: see
        :func:`routeheat.present.frame.frame`. Raises ``ModuleNotFoundError`` when pandas is not installed."""
        return frame(self.tables()[index])

    @property
    def text(self) -> str:
        """The result in plain text."""
        return "\n\n".join(render_table(table) for table in self.tables())

    def __str__(self) -> str:
        return self.text

    def __repr__(self) -> str:
        return self.text

    def _repr_mimebundle_(self, include: object = None, exclude: object = None) -> dict[str, str]:  # noqa: ARG002
        """Text and HTML for a notebook; deterministic, without scripts."""
        return {
            "text/plain": self.text,
            "text/html": "\n".join(html.render_table(table) for table in self.tables()),
        }

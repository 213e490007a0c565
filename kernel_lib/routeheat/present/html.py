"""Tables and figures as HTML without scripts and without remote resources."""

from __future__ import annotations

import base64
import html
from functools import cache
from importlib.resources import files
from typing import TYPE_CHECKING

from routeheat.present.markup import Rich, as_rich
from routeheat.present.text import cell_text, column_header, shared_coverage, visible

if TYPE_CHECKING:
    from routeheat.present.table import Table

_TAGS = {"": ("", ""), "sub": ("<sub>", "</sub>"), "sup": ("<sup>", "</sup>"), "italic": ("<i>", "</i>")}


def escape(text: str) -> str:
    """``text`` safe in HTML and XML, in an element or a quoted attribute.

    Markup characters and both quotes become entities; control and bidirectional characters are written out.
    """
    return html.escape(visible(text), quote=True)


def rich_html(rich: Rich | str) -> str:
    """A rich text with ``<sub>``, ``<sup>`` and ``<i>``."""
    return "".join(_TAGS[run.style][0] + escape(run.text) + _TAGS[run.style][1] for run in as_rich(rich))


@cache
def stylesheet() -> str:
    """The rules every routeheat table and figure is shown with."""
    return files("routeheat.present").joinpath("style.css").read_text(encoding="utf-8")


def render_table(table: Table) -> str:
    """The table as one self-contained ``<div class="routeheat">``: style, caption, scoped headers, rows, notes."""
    says_k = [shared_coverage(table, index) is None for index in range(len(table.columns))]
    head = "".join(
        f'<th scope="col"{_align(column.align)}>{rich_html(column_header(table, index))}</th>'
        for index, column in enumerate(table.columns)
    )
    rows = []
    for number, row in enumerate(table.rows):
        cells = []
        for index, (cell, column) in enumerate(zip(row, table.columns, strict=True)):
            inner = rich_html(cell if isinstance(cell, tuple) else cell_text(cell, column, say_k=says_k[index]))
            tag, scope = ("th", ' scope="row"') if index == 0 else ("td", "")
            cells.append(f"<{tag}{scope}{_align(column.align)}>{inner}</{tag}>")
        kind = ' class="total"' if number in table.strong else ""
        rows.append(f"<tr{kind}>{''.join(cells)}</tr>")
    caption = f"<caption>{rich_html(table.title)}</caption>" if table.title else ""
    notes = "".join(f'<p class="note">{escape(note)}</p>' for note in table.notes)
    return (
        f'<div class="routeheat"><style>{stylesheet()}</style><table>{caption}'
        f"<thead><tr>{head}</tr></thead><tbody>{''.join(rows)}</tbody></table>{notes}</div>"
    )


def figure_html(svg: str, alt: str) -> str:
    """A standalone SVG as an ``<img>`` with its bytes inside: shows in every notebook viewer, runs nothing."""
    data = base64.b64encode(svg.encode("utf-8")).decode("ascii")
    return f'<img alt="{escape(alt)}" style="max-width:100%" src="data:image/svg+xml;base64,{data}">'


def _align(align: str) -> str:
    return ' class="number"' if align == "right" else ""

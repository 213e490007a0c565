"""The report as one HTML file: no script, nothing fetched, printable, readable on a phone."""

from __future__ import annotations

import base64
from functools import cache
from importlib.resources import files

from routeheat.draw.arrange import Drawing
from routeheat.draw.decks import natural_width, stack
from routeheat.draw.svg import paint_stack
from routeheat.present.html import escape, rich_html
from routeheat.present.markup import Rich, plain
from routeheat.report.columns import folded
from routeheat.report.document import (
    Block,
    Bullets,
    Code,
    Document,
    FigureBlock,
    Grid,
    Heading,
    Paragraph,
    Section,
    TableBlock,
)

_WIDE = 880.0
_NARROW = 356.0
"""Widths of figures in px: of a page on a screen or on paper, and of a phone."""
_LEAST = 440.0
_POLICY = "default-src 'none'; img-src data:; style-src 'unsafe-inline'"


@cache
def stylesheet() -> str:
    """The rules of the page."""
    return files("routeheat.report").joinpath("report.css").read_text(encoding="utf-8")


def render(document: Document) -> bytes:
    """The whole page as UTF-8."""
    title = escape(plain(document.title))
    date = f'<p class="date">{rich_html(document.date)}</p>' if document.date else ""
    entries = "".join(f'<li><a href="#{s.name}">{escape(s.heading)}</a></li>' for s in document.sections)
    contents = f'<nav aria-label="Contents"><ul>{entries}</ul></nav>' if entries else ""
    parts = [
        "<!DOCTYPE html>",
        '<html lang="en">',
        "<head>",
        '<meta charset="utf-8">',
        f'<meta http-equiv="Content-Security-Policy" content="{_POLICY}">',
        '<meta name="viewport" content="width=device-width, initial-scale=1">',
        f"<title>{title}</title>",
        f"<style>\n{stylesheet()}</style>",
        "</head>",
        "<body>",
        f'<header><h1>{rich_html(document.title)}</h1>{date}<p class="caution">{rich_html(document.caution)}</p>'
        f"{contents}</header>",
        "<main>",
        *map(_section, document.sections),
        "</main>",
        f"<footer><p>{rich_html(document.caution)}</p></footer>",
        "</body>",
        "</html>",
    ]
    return ("\n".join(parts) + "\n").encode("utf-8")


def _section(section: Section) -> str:
    blocks = "\n".join(map(_block, section.blocks))
    heading = f'<h2 id="{section.name}">{escape(section.heading)}</h2>'
    return f'<section aria-labelledby="{section.name}">\n{heading}\n{blocks}\n</section>'


def _block(block: Block) -> str:
    if isinstance(block, Heading):
        return f'<h{block.level} id="{block.id}">{rich_html(block.text)}</h{block.level}>'
    if isinstance(block, Paragraph):
        kind = "" if block.kind == "text" else f' class="{block.kind}"'
        return f"<p{kind}>{rich_html(block.text)}</p>"
    if isinstance(block, Bullets):
        return "<ul>" + "".join(f"<li>{rich_html(item)}</li>" for item in block.items) + "</ul>"
    if isinstance(block, TableBlock):
        return _table(block)
    if isinstance(block, FigureBlock):
        return _figure(block)
    return _code(block)


def _table(block: TableBlock) -> str:
    words = f"Table {block.number}. {rich_html(block.caption)}"
    parts = folded(block.grid)
    tables = []
    for number, grid in enumerate(parts, 1):
        which = "" if len(parts) == 1 else f", part {number} of {len(parts)}"
        label = escape(f"Table {block.number}{which}")
        tables.append(
            f'<div class="scroll" role="region" aria-label="{label}" tabindex="0">{_grid(grid, block.id)}</div>'
        )
    inside = "".join(tables) + _notes(block.notes)
    if block.folds:
        summary = f'<summary class="caption" id="{block.id}">{words}</summary>'
        return f'<details class="table">{summary}{inside}</details>'
    return f'<div class="table"><p class="caption" id="{block.id}">{words}</p>{inside}</div>'


def _grid(grid: Grid, caption: str) -> str:
    head = "".join(
        f'<th scope="col"{_align(right)}>{rich_html(cell)}</th>' if plain(cell).strip() else "<td></td>"
        for cell, right in zip(grid.header, grid.right, strict=True)
    )
    rows = []
    for number, row in enumerate(grid.rows):
        first, *others = row
        cells = "".join(
            f"<td{_align(right)}>{rich_html(cell)}</td>" for cell, right in zip(others, grid.right[1:], strict=True)
        )
        named = f'<th scope="row">{rich_html(first)}</th>' if plain(first).strip() else "<td></td>"
        kind = ' class="total"' if number in grid.strong else ""
        rows.append(f"<tr{kind}>{named}{cells}</tr>")
    body = "".join(rows)
    return f'<table aria-labelledby="{caption}"><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>'


def _figure(block: FigureBlock) -> str:
    wide = _data(block.drawing, min(max(natural_width(block.drawing), _LEAST), _WIDE))
    narrow = _data(block.drawing, _NARROW)
    return (
        f'<figure id="{block.id}"><picture><source media="screen and (max-width: 600px)" srcset="{narrow}">'
        f'<img alt="{escape(block.drawing.alt)}" src="{wide}"></picture>'
        f"<figcaption>Figure {block.number}. {rich_html(block.caption)}</figcaption>{_notes(block.notes)}</figure>"
    )


def _data(drawing: Drawing, width: float) -> str:
    svg = paint_stack(stack(drawing, width, listing=False))
    return "data:image/svg+xml;base64," + base64.b64encode(svg.encode("utf-8")).decode("ascii")


def _code(block: Code) -> str:
    text = "\n".join(map(escape, block.lines))
    return (
        f'<div class="code"><p class="caption" id="{block.id}">{rich_html(block.caption)}</p>'
        f'<pre tabindex="0" role="region" aria-labelledby="{block.id}">\n{text}</pre></div>'
    )


def _notes(notes: tuple[Rich, ...]) -> str:
    if not notes:
        return ""
    return '<ul class="notes">' + "".join(f"<li>{rich_html(note)}</li>" for note in notes) + "</ul>"


def _align(right: bool) -> str:
    return ' class="number"' if right else ""

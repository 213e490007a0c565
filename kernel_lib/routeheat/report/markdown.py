"""Tables as Markdown (GitHub's pipe tables): no text of a sheet becomes markup, a link or mathematics."""

from __future__ import annotations

import re

from routeheat.present.markup import Rich, as_rich
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.present.text import cell_text, column_header, shared_coverage, visible
from routeheat.report.tables import every_table

_TAGS = {"": ("", ""), "sub": ("<sub>", "</sub>"), "sup": ("<sup>", "</sup>"), "italic": ("<i>", "</i>")}
# As character references, which never act as markup: the backslash too, because notebooks read \\( as mathematics
_REFERENCES = str.maketrans({char: f"&#{ord(char)};" for char in "&<>\\$@|{}`*_[]~#!"})
_LINK = re.compile(r"(?<=[a-z]):(?=//)|(?<=www)\.|(?<=mailto):|(?<=xmpp):", re.IGNORECASE)
_BLOCK_START = re.compile(r"\s*([-+=]|\d+[.)])")


def markdown(item: Shown | Table) -> str:
    """A table, or every table of a result: title, pipe table, notes. Subscripts are ``<sub>``, as in HTML."""
    return "\n\n".join(_table(table) for table in every_table(item)) + "\n"


def markdown_text(text: str) -> str:
    """``text`` as Markdown shows it literally, on one line, anywhere in a line."""
    return _LINK.sub(lambda match: f"&#{ord(match.group())};", visible(text).translate(_REFERENCES))


def _table(table: Table) -> str:
    says_k = [shared_coverage(table, index) is None for index in range(len(table.columns))]
    lines = [_line([_rich(column_header(table, index)) for index in range(len(table.columns))])]
    lines.append(_line(["---:" if column.align == "right" else "---" for column in table.columns]))
    for number, row in enumerate(table.rows):
        cells = []
        for index, (cell, column) in enumerate(zip(row, table.columns, strict=True)):
            text = _rich(cell if isinstance(cell, tuple) else cell_text(cell, column, say_k=says_k[index]))
            cells.append(f"**{text}**" if number in table.strong and text.strip() else text)
        lines.append(_line(cells))
    blocks = [f"**{_rich(table.title)}**"] if table.title else []
    blocks.append("\n".join(lines))
    if table.notes:
        blocks.append("\n".join(f"- {_at_start(_rich(note))}" for note in table.notes))
    return "\n\n".join(blocks)


def _line(cells: list[str]) -> str:
    return f"| {' | '.join(cells)} |"


def _rich(rich: Rich | str) -> str:
    written = "".join(_TAGS[run.style][0] + markdown_text(run.text) + _TAGS[run.style][1] for run in as_rich(rich))
    return written.strip()


def _at_start(text: str) -> str:
    """The text where a block may start: a leading dash, plus or number starts no list."""
    found = _BLOCK_START.match(text)
    if found is None:
        return text
    place = found.end(1) - 1
    return f"{text[:place]}&#{ord(text[place])};{text[place + 1 :]}"

"""How wide the columns of a table are on paper, and where a table wider than the page is folded."""

from __future__ import annotations

from dataclasses import dataclass

from routeheat.draw.metrics import rich_width, text_width
from routeheat.present.markup import Rich, plain
from routeheat.report.document import Grid

PAGE = 482.0
"""Width of the text on an A4 page with margins of 20 mm, points."""
SIZE = 8.0
"""Font size of tables in points."""
PADDING = 9.0
"""Free space beside the text of a cell in points, both sides together."""
_LONGEST_WORD = 84.0
_LONGEST_NUMBER = 104.0
_WIDEST = 190.0


@dataclass(frozen=True, slots=True)
class Need:
    """What a column needs in points."""

    least: float
    wished: float


def needs(grid: Grid) -> list[Need]:
    """Least and wished-for width of every column."""
    bold = [True, *(number in grid.strong for number in range(len(grid.rows)))]
    return [
        _need([grid.header[index], *(row[index] for row in grid.rows)], bold, grid.right[index])
        for index in range(len(grid.header))
    ]


def _need(cells: list[Rich], bold: list[bool], right: bool) -> Need:
    widest = [rich_width(cell, SIZE, bold=strong) for cell, strong in zip(cells, bold, strict=True)]
    wished = min(max(widest), _WIDEST)
    least = min(max(_word(cell, bold=strong) for cell, strong in zip(cells, bold, strict=True)), _LONGEST_WORD)
    if right:
        # numbers stay on one line, and their header takes as many as it needs
        numbers = max(widest[1:], default=0.0)
        least = max(least, min(numbers, _LONGEST_NUMBER))
        wished = max(least, min(numbers, _WIDEST))
    return Need(least + PADDING, max(wished, least) + PADDING)


def _word(cell: Rich, *, bold: bool) -> float:
    """Width of the longest part that no line end may break; a non-breaking space is none."""
    return max((text_width(word, SIZE, bold=bold) for word in plain(cell)[:2000].split(" ")), default=0.0)


def folded(grid: Grid, room: float = PAGE) -> tuple[Grid, ...]:
    """The grid in as many parts as it needs to fit into ``room`` points; each repeats the first column."""
    widths = [need.least for need in needs(grid)]
    if sum(widths) <= room:
        return (grid,)
    groups: list[list[int]] = [[]]
    used = widths[0]
    for index in range(1, len(widths)):
        if groups[-1] and used + widths[index] > room:
            groups.append([])
            used = widths[0]
        groups[-1].append(index)
        used += widths[index]
    return tuple(grid.columns([0, *group]) for group in groups)


def widths(grid: Grid, room: float = PAGE) -> list[float]:
    """Widths of the columns in points: as wished where that fits into ``room``, else shared out above the least."""
    found = needs(grid)
    least, wished = sum(need.least for need in found), sum(need.wished for need in found)
    if wished <= room:
        return [need.wished for need in found]
    if least >= room:
        return [need.least * room / least for need in found]
    share = (room - least) / (wished - least)
    return [need.least + (need.wished - need.least) * share for need in found]

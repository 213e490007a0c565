"""Where the marks of a diagram stand: slots and arrows from left to right, levels and carriers."""

from __future__ import annotations

import math
from dataclasses import dataclass

from routeheat.draw.geometry import ArrowMark, Line, Scale
from routeheat.present.ladder import Arrow, Column, Ladder
from routeheat.present.markup import as_rich, plain
from routeheat.present.text import visible, visible_rich

STUB = 13.0
"""Half-length in px of the gap mark of a heat that is not entered."""
WHISKER_SHIFT = 9.0
"""Distance in px of the whisker from its arrow, so that the shaft never covers it."""
BAR = 7.0
"""How far in px a level line reaches over the shaft that touches it."""


@dataclass(frozen=True, slots=True)
class Row:
    """Horizontal places of one column: its left and right edge, and of each arrow its shaft and its slot's end."""

    left: float
    right: float
    shafts: tuple[float, ...]
    ends: tuple[float, ...]


def level_after(arrow: Arrow) -> float:
    """Where the chain stands behind an arrow; unchanged when its heat is not entered."""
    return arrow.start if arrow.end is None else arrow.end


def heat_range(ladder: Ladder) -> tuple[float, float]:
    """Lowest and highest level of arrows and whiskers, 0 included; never an empty range.

    Raises :class:`ValueError` when a level is not a finite number.
    """
    levels = [0.0]
    for column in ladder.columns:
        for arrow in column.arrows:
            end, spread = level_after(arrow), 0.0 if arrow.end is None else arrow.spread or 0.0
            levels += [arrow.start, end - spread, end + spread]
    if not all(map(math.isfinite, levels)):
        raise ValueError("a level of the diagram is not a finite number")
    low, high = min(levels), max(levels)
    return (low, high) if high > low else (low - 1.0, high + 1.0)


def arrow_mark(arrow: Arrow, column: Column, series: int, x: float, scale: Scale) -> ArrowMark:
    """One arrow on the page."""
    end = level_after(arrow)
    y0, y1 = scale.y(arrow.start), scale.y(end)
    whisker = None
    if arrow.end is None:
        y0, y1 = y0 - STUB, y0 + STUB
    elif arrow.spread is not None:
        whisker = (scale.y(end - arrow.spread), scale.y(end + arrow.spread))
    equation = visible_rich(arrow.equation)
    label = visible(arrow.label)
    first = ": ".join(part for part in (label, plain(equation)) if part)
    hover = (first, visible(plain(arrow.caption)), *(visible(f"{name}: {text}") for name, text in arrow.details))
    return ArrowMark(
        x=x, y0=y0, y1=y1, whisker=whisker, whisker_x=x + WHISKER_SHIFT, role=arrow.role, series=series,
        entered=arrow.end is not None, complete=arrow.complete, label=label,
        column=visible(plain(as_rich(column.title))), equation=equation,
        hover=tuple(line for line in hover if line), line=arrow.line,
    )  # fmt: skip


def carriers(ladder: Ladder, rows: list[Row], scale: Scale, *, overlay: bool) -> tuple[Line, ...]:
    """Thin level lines: before the first arrow of a column, from head to tail, and behind the last."""
    low, high = heat_range(ladder)
    same = (high - low) * 1e-9
    lines: list[Line] = []
    for series, (column, row) in enumerate(zip(ladder.columns, rows, strict=True)):
        colour = series if overlay else None

        def add(x0: float, x1: float, heat: float, colour: int | None = colour) -> None:
            lines.append(Line(x0, scale.y(heat), x1, scale.y(heat), colour))

        for index, arrow in enumerate(column.arrows):
            x, gap = row.shafts[index], arrow.end is None
            before = column.arrows[index - 1] if index else None
            if before is None:
                add(row.left + 2, x - BAR if gap else x + BAR, arrow.start)
            elif abs(level_after(before) - arrow.start) <= same:
                start = row.shafts[index - 1] + (BAR if before.end is None else -BAR)
                add(start, x - BAR if gap else x + BAR, arrow.start)
            else:
                add(row.shafts[index - 1] - BAR, row.shafts[index - 1] + 24, level_after(before))
                add(x - 16, x - BAR if gap else x + BAR, arrow.start)
        if column.arrows:
            last = column.arrows[-1]
            add(row.shafts[-1] + (BAR if last.end is None else -BAR), row.ends[-1] - 6, level_after(last))
    return tuple(lines) if overlay else _joined([*lines, *_shared_levels(ladder, rows, scale, same)])


def _joined(lines: list[Line]) -> tuple[Line, ...]:
    """Lines of one level that touch become one, so that none is drawn twice and looks thicker."""
    joined: list[Line] = []
    for line in sorted(lines, key=lambda each: (each.y0, each.x0, each.x1)):
        last = joined[-1] if joined else None
        if last and last.y0 == line.y0 and line.x0 <= last.x1:
            joined[-1] = Line(last.x0, last.y0, max(last.x1, line.x1), last.y1)
        else:
            joined.append(line)
    return tuple(joined)


def _shared_levels(ladder: Ladder, rows: list[Row], scale: Scale, same: float) -> list[Line]:
    """Levels that a chain shares with the direct reaction beside it, drawn through to it."""
    chains = []
    for column, row in zip(ladder.columns, rows, strict=True):
        steps = [(arrow, x) for arrow, x in zip(column.arrows, row.shafts, strict=True) if arrow.role != "direct"]
        if steps:
            chains.append((steps[0], steps[-1]))
    lines = []
    for column, row in zip(ladder.columns, rows, strict=True):
        for arrow, x in zip(column.arrows, row.shafts, strict=True):
            if arrow.role != "direct" or arrow.end is None:
                continue
            for (first, x_first), (last, x_last) in chains:
                if abs(first.start - arrow.start) <= same:
                    lines.append(Line(min(x_first, x), scale.y(arrow.start), max(x_first, x), scale.y(arrow.start)))
                if last.end is not None and abs(last.end - arrow.end) <= same:
                    lines.append(Line(min(x_last, x), scale.y(arrow.end), max(x_last, x), scale.y(arrow.end)))
    return lines

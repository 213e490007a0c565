"""A figure of a fixed width: plots above each other where they do not fit side by side, so that nothing is clipped.

Every plot of a figure has the same scale, so equal heats are equally long. A route that is wider than the figure goes
on in the next plot at the level where it stopped.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from math import ceil

from routeheat.draw.arrange import Drawing, arrange
from routeheat.draw.chart import Chart
from routeheat.draw.frame import MARGIN, footer_strip, title_strip
from routeheat.draw.geometry import Geometry, TextBox
from routeheat.draw.layout import Deck, lay_out_deck
from routeheat.draw.marks import heat_range
from routeheat.present.ladder import Arrow, Column, Ladder
from routeheat.present.markup import Rich, as_rich, join, plain
from routeheat.present.text import visible

_ALONE = 320.0
"""Height in px of a plot that stands alone."""
_SHARED = 225.0
"""Height in px of each of several plots."""
_REACH = 64.0
_ANYWHERE = 1e5
_MOST_LINES = 60
_GAP = 12.0

Piece = tuple[int, int, int]
"""A column by its index with the first and the last (excluded) of its arrows."""


@dataclass(frozen=True, slots=True)
class Panel:
    """One plot of a figure."""

    y: float
    """Distance of its upper edge from that of the figure, px."""
    geometry: Geometry | Chart


@dataclass(frozen=True, slots=True)
class Stack:
    """A figure of fixed width, ready to be painted."""

    width: float
    height: float
    panels: tuple[Panel, ...]
    texts: tuple[TextBox, ...]
    """Title, list of reactions and notes."""
    title: str
    alt: str


def stack(drawing: Drawing, width: float, *, listing: bool = True) -> Stack:
    """The diagram laid out in exactly ``width`` px; it grows in height instead.

    ``listing=False`` leaves out the list of reactions below the plots, for a page that has them in a table.
    Raises :class:`ValueError` when a level is not finite or the width is too small for a single arrow.
    """
    if not isinstance(drawing, Ladder):
        chart = arrange(drawing, width=width)
        return Stack(chart.width, chart.height, (Panel(0.0, chart),), (), chart.title, chart.alt)
    return _ladder_stack(drawing, width, listing)


def _ladder_stack(ladder: Ladder, width: float, listing: bool) -> Stack:
    plots = _plots(ladder, width)
    title = title_strip(ladder, width, lines=6)
    texts = list(title.texts)
    panels = []
    y = title.height - 8  # a plot begins with the gap that a title leaves below it
    for plot in plots:
        panels.append(Panel(y, plot))
        y += plot.height + _GAP
    footer = footer_strip(_listed(ladder, listing), width, left=MARGIN, lines=_MOST_LINES)
    texts += footer.moved(y)
    height = y + footer.height + (10 if footer.height else 0)
    heading = visible(plain(ladder.title))
    return Stack(width, height, tuple(panels), tuple(texts), heading, visible(ladder.alt) or heading)


def pages(figure: Stack, tallest: float) -> tuple[Stack, ...]:
    """The figure cut between its plots into parts of at most ``tallest`` px, as far as its plots allow.

    The texts above the first plot go with it, those below the last with that.
    """
    first = figure.panels[0].y if figure.panels else 0.0
    groups: list[list[Panel]] = [[]]
    for index, panel in enumerate(figure.panels):
        last = index == len(figure.panels) - 1
        end = figure.height if last else panel.y + panel.geometry.height
        start = groups[-1][0].y if groups[-1] else 0.0
        if groups[-1] and end - start > tallest:
            groups.append([])
        groups[-1].append(panel)
    parts = []
    for number, group in enumerate(groups):
        top = group[0].y if number else 0.0
        last = number == len(groups) - 1
        bottom = figure.height if last else group[-1].y + group[-1].geometry.height
        kept = tuple(
            replace(text, y=text.y - top) for text in figure.texts if (number == 0 if text.y < first else last)
        )
        shifted = tuple(replace(panel, y=panel.y - top) for panel in group)
        parts.append(replace(figure, height=bottom - top, panels=shifted, texts=kept))
    return tuple(parts)


def natural_width(drawing: Drawing) -> float:
    """The width in px at which the diagram has room for every text beside its mark."""
    return arrange(replace(drawing, title="", notes=())).width


def _plots(ladder: Ladder, width: float) -> list[Geometry]:
    levels = heat_range(ladder)
    for parts in _arrangements(ladder):
        plot = _ALONE if len(parts) == 1 else _SHARED
        for tall, reach in ((1.0, _REACH), (1.3, _REACH), (1.6, 1.5 * _REACH)):
            found = _tried(ladder, parts, width, Deck(levels, plot * tall, reach))
            if found is not None:
                return found
    for parts in _arrangements(ladder):
        for tall in (1.0, 1.5, 2.0, 3.0, 4.0):
            found = _tried(ladder, parts, width, Deck(levels, _SHARED * tall, _ANYWHERE, whole_names=False))
            if found is not None:
                return found
    raise ValueError(f"a figure of {width:.0f} px is too narrow for a single arrow with its texts")


def _tried(ladder: Ladder, parts: list[list[Piece]], width: float, deck: Deck) -> list[Geometry] | None:
    plots = []
    for pieces in parts:
        plot = lay_out_deck(_deck(ladder, pieces), width, deck)
        if plot is None:
            return None
        plots.append(_in_series(plot, pieces[0][0]))
    return plots


def _arrangements(ladder: Ladder) -> Iterator[list[list[Piece]]]:
    """Ways to spread the columns over plots: all side by side, fewer side by side, then columns in several pieces."""
    count = len(ladder.columns)
    longest = max((len(column.arrows) for column in ladder.columns), default=0)
    whole = [(index, 0, len(column.arrows)) for index, column in enumerate(ladder.columns)]
    if ladder.overlay:
        yield [whole]
    else:
        seen = set()
        for rows in range(1, count + 1):
            each = ceil(count / rows)
            if each not in seen:
                seen.add(each)
                yield [whole[start : start + each] for start in range(0, count, each)]
    for pieces in range(2, longest + 1):
        each = ceil(longest / pieces)
        if each == ceil(longest / (pieces - 1)):
            continue
        if ladder.overlay:
            yield [
                [(index, start, min(start + each, stop)) for index, _, stop in whole if start < stop]
                for start in range(0, longest, each)
            ]
        else:
            yield [
                [(index, start, min(start + each, stop))]
                for index, _, stop in whole
                for start in range(0, max(stop, 1), each)
            ]


def _deck(ladder: Ladder, pieces: list[Piece]) -> Ladder:
    """The part of the ladder that one plot shows."""
    columns = tuple(_part(ladder.columns[index], start, stop) for index, start, stop in pieces)
    return replace(ladder, title="", columns=columns, notes=(), alt="")


def _part(column: Column, start: int, stop: int) -> Column:
    whole = len(column.arrows)
    title: Rich = as_rich(column.title) if start == 0 else join([column.title, " (continued)"])
    return Column(
        title,
        column.arrows[start:stop],
        column.start_label if start == 0 else "",
        column.end_label if stop == whole else "",
    )


def _in_series(plot: Geometry, first: int) -> Geometry:
    """The plot with the series of its columns counted in the whole figure."""
    if first == 0 or plot.overlay:
        return plot
    return replace(plot, arrows=tuple(replace(arrow, series=arrow.series + first) for arrow in plot.arrows))


def _listed(ladder: Ladder, listing: bool) -> Ladder:
    """The ladder with each reaction once, or with none."""
    seen: set[tuple[str, str]] = set()

    def once(arrow: Arrow) -> Arrow:
        key = (arrow.label, plain(arrow.equation))
        if not listing or key in seen:
            return replace(arrow, equation="")
        seen.add(key)
        return arrow

    columns = tuple(replace(column, arrows=tuple(map(once, column.arrows))) for column in ladder.columns)
    return replace(ladder, columns=columns)

"""One geometry for every diagram: a ladder in, places in px out.

Height on the page is linear in heat; an arrow is as long as its heat and a whisker as long as ``k·u``. Texts never
overlap: a layout is tried at the size asked for, and where a text finds no free place the canvas grows.
"""

from __future__ import annotations

from dataclasses import dataclass
from statistics import median

from routeheat.draw.blocks import Block, arrow_block, paragraph
from routeheat.draw.declutter import Rect, Space, along, beside
from routeheat.draw.frame import MARGIN, Strip, axis_boxes, footer_strip, key_strip, plot_left, ticks, title_strip
from routeheat.draw.geometry import ArrowMark, Geometry, Line, Scale, TextBox
from routeheat.draw.marks import Row, arrow_mark, carriers, heat_range, level_after
from routeheat.draw.slots import NARROWEST, Plan, Slots
from routeheat.present.ladder import Arrow, Ladder
from routeheat.present.markup import as_rich, plain
from routeheat.present.text import visible

_PLOT_HEIGHT = 330.0
_LOWEST_PLOT = 220.0
_PAD = 36.0
"""Free space in px between the extreme levels and the plot's edges, for text."""


def lay_out(ladder: Ladder, *, width: float | None = None, height: float | None = None) -> Geometry:
    """Places of everything in the diagram.

    ``width`` and ``height`` are the canvas in px; by default as wide as the diagram needs, up to 960 px, and as high
    as the list of reactions below it makes it. Either grows when texts would overlap otherwise.
    Raises :class:`ValueError` when a level is not finite.
    """
    builder = _Builder(ladder, width, height)
    for plan in builder.slots.plans(width):
        geometry = builder.attempt(plan)
        if geometry is not None:
            return geometry
    raise RuntimeError("no layout without overlap was found")


@dataclass(frozen=True, slots=True)
class Deck:
    """What the plots of one figure share when they stand above each other: no plot has a title or notes of its own."""

    levels: tuple[float, float]
    """Lowest and highest level of the whole figure, so that equal heats are equally long in every plot."""
    plot: float
    """Height of each plot in px."""
    reach: float
    """How far a text may stand from what it names, px."""
    whole_names: bool = True
    """True: the names of columns must fit without being shortened."""


def lay_out_deck(ladder: Ladder, width: float, deck: Deck) -> Geometry | None:
    """One plot of exactly ``width`` px, or ``None`` where its texts do not fit into it."""
    builder = _Builder(ladder, width, None, deck)
    for plan in builder.slots.fixed(width, deck.reach):
        geometry = builder.attempt(plan)
        if geometry is not None:
            return geometry
    return None


class _Builder:
    """Tries plans for one ladder."""

    def __init__(self, ladder: Ladder, width: float | None, height: float | None, deck: Deck | None = None) -> None:
        self.ladder = ladder
        self.width = width
        self.height = height
        self.deck = deck
        self.overlay = ladder.overlay and len(ladder.columns) > 1
        self.low, self.high = heat_range(ladder) if deck is None else deck.levels
        lengths = [
            abs(level_after(arrow) - arrow.start) / (self.high - self.low) * (_PLOT_HEIGHT - 2 * _PAD)
            for column in ladder.columns for arrow in column.arrows if arrow.end is not None
        ]  # fmt: skip
        one_line = bool(lengths) and median(lengths) < 34
        self.blocks = [[arrow_block(arrow, one_line=one_line) for arrow in column.arrows] for column in ladder.columns]
        base = deck.plot if deck else max(_PLOT_HEIGHT, height or 0.0)
        # a higher plot may get finer ticks with longer texts
        self.left = max(plot_left(self._ticks(base * tall)) for tall in (0.5, 1.0, 1.25, 1.7, 2.2, 4.0, 16.0))
        self.slots = Slots(ladder, self.blocks, self.left)

    def attempt(self, plan: Plan) -> Geometry | None:
        """The diagram at one size, or ``None`` when some text finds no free place."""
        ladder = self.ladder
        content = self.slots.content(plan)
        width = max(self.width or max(NARROWEST, content), content)
        title = title_strip(ladder, width)
        below = footer_strip(ladder, width, left=MARGIN).height if self.height else 0.0
        rows = self.slots.rows(plan, (width - content) / 2)
        if self.overlay:
            keys = key_strip(ladder, self.left, width)
            headings: list[Block] = []
            naming = keys.height
        else:
            keys = None
            headings = [
                paragraph(as_rich(column.title), "heading", row.right - row.left - 12, lines=2, bold=True, centred=True)
                for column, row in zip(ladder.columns, rows, strict=True)
            ]
            naming = max((block.h for block in headings), default=0.0)
            naming += 8 if naming else 0
            if self.deck and self.deck.whole_names and any(text.full for block in headings for text in block.texts):
                return None
        top = title.height + naming
        around = top + below + 26
        plot = max(_LOWEST_PLOT, self.height - around) if self.height else _PLOT_HEIGHT
        plot = self.deck.plot if self.deck else plot
        bottom = top + plot * plan.tall
        scale = self._scale(top, bottom)
        right = width - MARGIN
        axis, texts = axis_boxes(ladder, self._ticks(bottom - top), scale, self.left, right, top, bottom)
        texts += title.texts
        if keys is not None:
            texts += keys.moved(title.height)
        for block, row in zip(headings, rows, strict=False):
            middle = (row.left + row.right) / 2
            texts += block.at(Rect(middle - block.w / 2, top - 6 - block.h, 0, 0))

        marks = [
            arrow_mark(arrow, column, series, x, scale)
            for series, (column, row) in enumerate(zip(ladder.columns, rows, strict=True))
            for arrow, x in zip(column.arrows, row.shafts, strict=True)
        ]
        lines = carriers(ladder, rows, scale, overlay=self.overlay)
        space = Space(Rect(self.left + 5, top + 1, right, bottom - 1))
        _occupy(space, marks, lines, Line(self.left, scale.y(0), right, scale.y(0)))
        leaders: list[Line] = []
        if not self._place_levels(space, rows, scale, plan.reach, texts, leaders):
            return None
        sides = [(self.left, right) if self.overlay or plan.apart else (row.left, row.right) for row in rows]
        if not self._place_captions(space, marks, sides, plan.reach, texts, leaders):
            return None
        footer = Strip(0.0, ()) if self.deck else footer_strip(ladder, width, left=MARGIN)
        texts += footer.moved(bottom + 14)
        return Geometry(
            width=width, height=bottom + 14 + footer.height + (0 if self.deck else 12), scale=scale, axis=axis,
            arrows=tuple(marks), carriers=lines, leaders=tuple(leaders),
            keys=tuple(Line(k.x0, k.y0 + title.height, k.x1, k.y1 + title.height, k.series) for k in keys.keys)
            if keys else (),
            texts=tuple(texts), overlay=self.overlay, title=visible(plain(ladder.title)), alt=visible(ladder.alt),
        )  # fmt: skip

    def _scale(self, top: float, bottom: float) -> Scale:
        per_unit = (bottom - top - 2 * _PAD) / (self.high - self.low)
        return Scale(top + _PAD + self.high * per_unit, per_unit)

    def _ticks(self, plot: float) -> tuple[tuple[float, str], ...]:
        # the axis runs on over the padding, so round levels that fall into it are marked as well
        spare = _PAD * 0.8 * (self.high - self.low) / (plot - 2 * _PAD)
        return ticks(self.low - spare, self.high + spare, plot)

    def _place_levels(
        self, space: Space, rows: list[Row], scale: Scale, reach: float, texts: list[TextBox], leaders: list[Line]
    ) -> bool:
        done: set[tuple[str, float, bool]] = set()
        for series, (column, row) in enumerate(zip(self.ladder.columns, rows, strict=True)):
            for at_end in (False, True):
                block = self.slots.names[series][at_end]
                if block is None:
                    continue
                arrow: Arrow = column.arrows[-1 if at_end else 0]
                heat = level_after(arrow) if at_end else arrow.start
                name = plain(as_rich(column.end_label if at_end else column.start_label))
                if self.overlay and (name, heat, at_end) in done:
                    continue
                done.add((name, heat, at_end))
                falls = level_after(arrow) <= arrow.start
                last = len(column.arrows) - 1
                x0 = row.shafts[last] - 6 if at_end else row.left + 2
                x1 = row.right - 6 if at_end else row.shafts[0] + 24
                spot = along(
                    space, x0, x1, scale.y(heat), block.w, block.h, above=falls != at_end, at_end=at_end, reach=reach
                )
                if spot is None:
                    return False
                space.take(spot)
                texts += block.at(spot.rect)
                if spot.leader:
                    leaders.append(Line(*spot.leader))
        return True

    def _place_captions(
        self, space: Space, marks: list[ArrowMark], sides: list[tuple[float, float]], reach: float,
        texts: list[TextBox], leaders: list[Line],
    ) -> bool:  # fmt: skip
        blocks = [block for column in self.blocks for block in column]
        for index, (mark, block) in enumerate(zip(marks, blocks, strict=True)):
            low, high = min(mark.y0, mark.y1), max(mark.y0, mark.y1)
            spot = beside(space, mark.x, low, high, block.w, block.h, reach=reach, within=sides[mark.series])
            if spot is None:
                return False
            space.take(spot)
            texts += block.towards(spot.rect, mark.x).at(spot.rect, index)
            if spot.leader:
                leaders.append(Line(*spot.leader))
        return True


def _occupy(space: Space, marks: list[ArrowMark], lines: tuple[Line, ...], zero: Line) -> None:
    """Reserve what texts must keep off."""
    for mark in marks:
        low, high = min(mark.y0, mark.y1), max(mark.y0, mark.y1)
        space.occupy(Rect(mark.x - 6, low - 3, mark.x + 6, high + 3))
        if mark.whisker:
            space.occupy(Rect(mark.whisker_x - 5, mark.whisker[1] - 2, mark.whisker_x + 5, mark.whisker[0] + 2))
    for line in (*lines, zero):
        # a text that began right behind a level line would seem to carry a minus sign
        space.occupy(Rect(line.x0 - 5, line.y0 - 2, line.x1 + 5, line.y0 + 2), thin=True)

"""Which sizes a layout is tried at, and where arrows stand from left to right at each of them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from routeheat.draw.blocks import Block, paragraph
from routeheat.draw.frame import MARGIN
from routeheat.draw.marks import Row
from routeheat.present.ladder import Column, Ladder
from routeheat.present.markup import Rich, as_rich, plain

_WIDEST = 960.0
"""Natural width in px, before growth."""
NARROWEST = 440.0
_TIGHT = 36.0
"""Narrowest slot of an arrow in px."""
_ROOM = 32.0
"""What a slot needs beside its text: arrow, whisker and gaps, px."""
_SUBS = (17.0, 32.0, 50.0, 72.0)
"""Distances in px, tried in turn, between arrows of the same place in columns drawn over each other."""
_LEAD = 30.0
"""Length in px of the level line before the first arrow."""
_REACH = 64.0
"""How far in px a text may stand from its arrow before the canvas grows."""
_ANYWHERE = 1e5
_ROUNDS = 30
_MANY = 14
"""Slots from which on the plot grows in height rather than in width."""


@dataclass(frozen=True, slots=True)
class Plan:
    """One size at which a layout is tried."""

    fill: float
    """0: slots as narrow as their arrows; 1: every text has its own slot."""
    stretch: float
    """Added to every slot, px."""
    tall: float
    """Factor on the height of the plot."""
    reach: float = _REACH
    """How far a text may stand from what it names, px."""
    sub: float = _SUBS[0]
    """Distance between arrows of the same place in columns drawn over each other, px."""
    apart: bool = False
    """True: every arrow and every level name has a strip of its own."""


class Slots:
    """The horizontal places of one ladder, whose arrows' texts are the ``blocks``, right of ``left`` px."""

    def __init__(self, ladder: Ladder, blocks: list[list[Block]], left: float) -> None:
        self.ladder = ladder
        self.blocks = blocks
        self.left = left
        self.overlay = ladder.overlay and len(ladder.columns) > 1
        self.names = [(_name(column, column.start_label), _name(column, column.end_label)) for column in ladder.columns]
        """Texts at the first and at the last level of each column, where there are any."""

    def plans(self, width: float | None) -> Iterator[Plan]:
        """Sizes from the wished-for to the roomiest."""
        wished = width or _WIDEST
        slots = max(1, self._count())
        full = self.content(Plan(1.0, 0.0, 1.0))
        least = self.content(Plan(0.0, 0.0, 1.0))
        if full <= wished:
            target = width or max(full, NARROWEST)
            stretch = min(max(0.0, target - full) / slots, 56.0)
            fills = [1.0]
        else:
            stretch = 0.0
            first = max(0.0, (wished - least) / (full - least)) if full > least else 1.0
            fills = [first + (1 - first) * part / 8 for part in range(9)]
        for fill in fills:
            if slots <= _MANY:
                yield Plan(fill, stretch, 1.0)
                yield Plan(fill, stretch, 1.25)
            else:
                yield Plan(fill, stretch, 1.25)
                yield Plan(fill, stretch, 1.7, reach=1.4 * _REACH)
                yield Plan(fill, stretch, 2.2, reach=2.0 * _REACH)
        for sub in _SUBS[1:] if self.overlay else ():
            for tall in (1.0, 1.25):
                yield Plan(1.0, stretch, tall, sub=sub)
        for extra in range(_ROUNDS):
            yield Plan(1.0, stretch, 1.0 + 0.5 * extra, reach=_ANYWHERE, apart=True)

    def fixed(self, width: float, reach: float) -> Iterator[Plan]:
        """Sizes of exactly ``width`` px and one height; none when the arrows alone are wider."""
        slots = max(1, self._count())
        full = self.content(Plan(1.0, 0.0, 1.0))
        least = self.content(Plan(0.0, 0.0, 1.0))
        if full <= width:
            yield Plan(1.0, min((width - full) / slots, 56.0), 1.0, reach)
        elif least <= width:
            yield Plan((width - least) / (full - least), 0.0, 1.0, reach)
        for sub in _SUBS[1:] if self.overlay else ():
            if self.content(Plan(1.0, 0.0, 1.0, sub=sub)) <= width:
                yield Plan(1.0, 0.0, 1.0, reach, sub)
        apart = Plan(1.0, 0.0, 1.0, reach, apart=True)
        if self.content(apart) <= width:
            yield apart

    def content(self, plan: Plan) -> float:
        """Width of the canvas that a plan needs."""
        rows = self.rows(plan, 0.0)
        return max((row.right for row in rows), default=self.left) + MARGIN

    def rows(self, plan: Plan, shift: float) -> list[Row]:
        """Places of the columns, all moved ``shift`` px to the right."""
        series = range(len(self.ladder.columns))
        start = self.left + 10 + shift
        if not self.overlay:
            rows = []
            for index in series:
                slots = [self._slot(plan, block.w, 1) for block in self.blocks[index]]
                row = _row(start, self._lead(plan, index), slots, self._trail(plan, index))
                rows.append(row)
                start = row.right + 22
            return rows
        count = len(series)
        depth = max((len(blocks) for blocks in self.blocks), default=0)
        slots = []
        for place in range(depth):
            widest = max(blocks[place].w for blocks in self.blocks if place < len(blocks))
            slots.append(self._slot(plan, widest, count))
        # of arrows that start together only the last has room at its right, so the others need some at their left
        first = max((blocks[0].w for blocks in self.blocks if blocks), default=0.0)
        lead = max(first + 16, *(self._lead(plan, index) for index in series))
        trail = max(self._trail(plan, index) for index in series)
        rows = []
        for index in series:
            # every column ends its slots at the same places and starts them a little farther right than the last
            shifts = [index * (slot / count if plan.apart else plan.sub) for slot in slots]
            row = _row(start, lead, slots, trail)
            shafts = tuple(x + dx for x, dx in zip(row.shafts, shifts, strict=True))
            arrows = len(self.blocks[index])
            rows.append(Row(row.left, row.right, shafts[:arrows], row.ends[:arrows]))
        return rows

    def _count(self) -> int:
        counts = [len(column.arrows) for column in self.ladder.columns]
        return max(counts, default=0) if self.overlay else sum(counts)

    def _slot(self, plan: Plan, widest: float, columns: int) -> float:
        if plan.apart:
            return columns * (widest + _ROOM) + plan.stretch
        tight = _TIGHT + (columns - 1) * plan.sub
        full = max(tight, (columns - 1) * plan.sub + widest + _ROOM)
        return tight + (full - tight) * plan.fill + plan.stretch

    def _lead(self, plan: Plan, series: int) -> float:
        label = self.names[series][0]
        return max(_LEAD, label.w + 12) if plan.apart and label else _LEAD

    def _trail(self, plan: Plan, series: int) -> float:
        label = self.names[series][1]
        return label.w + 12 if plan.apart and label else 4.0


def _name(column: Column, text: Rich | str) -> Block | None:
    if not column.arrows or not plain(text).strip():
        return None
    return paragraph(as_rich(text), "level", 190.0 if len(column.arrows) > 1 else 150.0, lines=2)


def _row(left: float, lead: float, slots: list[float], trail: float) -> Row:
    shafts: list[float] = []
    ends: list[float] = []
    x = left + lead
    for slot in slots:
        shafts.append(x)
        x += slot
        ends.append(x)
    return Row(left, (x if slots else x + 60) + trail, tuple(shafts), tuple(ends))

"""What stands around the plot: title, column names, axis, the list of reactions, the notes."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from routeheat.draw.blocks import SIZES, Block, line_box, paragraph
from routeheat.draw.declutter import Rect
from routeheat.draw.geometry import Axis, Line, Scale, TextBox, Tick
from routeheat.draw.metrics import LINE, shorten, text_width
from routeheat.present.ladder import Arrow, Ladder
from routeheat.present.markup import as_rich, plain
from routeheat.present.numbers import coverage, number
from routeheat.present.text import visible_rich, with_unit

MARGIN = 14.0
SAMPLE = 34.0
"""Length in px of the line sample in the key."""
_LIST_COLUMN = 235.0
"""Narrowest column of the list of reactions in px."""
_LIST_GAP = 24.0
_LONGEST_NOTE = 820.0
_TICK_GAP = 58.0
"""Distance in px between ticks that is aimed at."""


@dataclass(frozen=True, slots=True)
class Strip:
    """A horizontal strip of text above or below the plot, with its height in px."""

    height: float
    texts: tuple[TextBox, ...]
    keys: tuple[Line, ...] = ()

    def moved(self, dy: float) -> tuple[TextBox, ...]:
        """The texts shifted down by ``dy`` px."""
        return tuple(replace(text, y=text.y + dy) for text in self.texts)


def ticks(low: float, high: float, plot_height: float) -> tuple[tuple[float, str], ...]:
    """Round levels from ``low`` to ``high`` with their texts; steps are 1, 2 or 5 times a power of ten."""
    raw = (high - low) * _TICK_GAP / plot_height
    power = math.floor(math.log10(raw))
    step = next(factor for factor in (1, 2, 5, 10) if factor * 10.0**power >= raw * 0.999) * 10.0**power
    decimals = max(0, -math.floor(math.log10(step) + 1e-9))
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return tuple((index * step, number(index * step, decimals)) for index in range(first, last + 1))


def axis_boxes(
    ladder: Ladder, marks: tuple[tuple[float, str], ...], scale: Scale, left: float, right: float, top: float,
    bottom: float,
) -> tuple[Axis, list[TextBox]]:  # fmt: skip
    """The axis with its tick labels and its rotated title."""
    title = visible_rich(with_unit(ladder.axis, ladder.unit))
    size = SIZES["axis"]
    short = shorten(title, bottom - top, size)
    flat = line_box(0, 0, short, "axis", full=plain(title) if short != title else "")
    upright = replace(
        flat, x=MARGIN - 6, y=(top + bottom - flat.w) / 2, w=flat.h, h=flat.w, anchor="middle", rotated=True
    )
    boxes = [upright]
    for level, text in marks:
        box = line_box(0, scale.y(level) - SIZES["tick"] * LINE / 2, as_rich(text), "tick")
        boxes.append(replace(box, x=left - 8 - box.w, anchor="end"))
    axis = Axis(left, top, bottom, right, tuple(Tick(scale.y(level), text) for level, text in marks), title)
    return axis, boxes


def plot_left(marks: tuple[tuple[float, str], ...]) -> float:
    """Where the axis line stands so that its title and tick labels fit left of it."""
    widest = max((text_width(text, SIZES["tick"]) for _, text in marks), default=0.0)
    return math.ceil(MARGIN - 6 + SIZES["axis"] * LINE + 6 + widest + 8)


def title_strip(ladder: Ladder, width: float, *, lines: int = 2) -> Strip:
    """The title over at most ``lines`` lines."""
    block = paragraph(as_rich(ladder.title), "title", width - 2 * MARGIN, lines=lines, bold=True)
    return Strip(block.h + (16 if block.h else 8), block.at(Rect(MARGIN, 10, width, 0)))


def key_strip(ladder: Ladder, left: float, width: float) -> Strip:
    """Names of columns that are drawn over each other, each behind a sample of its line."""
    texts: list[TextBox] = []
    keys: list[Line] = []
    x, y = left + 8, 0.0
    row = SIZES["heading"] * LINE + 4
    for index, column in enumerate(ladder.columns):
        block = paragraph(as_rich(column.title), "heading", min(360.0, width - left - SAMPLE - 40), lines=1)
        need = SAMPLE + 8 + block.w
        if texts and x + need > width - MARGIN:
            x, y = left + 8, y + row
        keys.append(Line(x, y + block.h / 2, x + SAMPLE, y + block.h / 2, index))
        texts += block.at(Rect(x + SAMPLE + 8, y, 0, 0))
        x += need + 26
    return Strip(y + row + 4, tuple(texts), tuple(keys))


def footer_strip(ladder: Ladder, width: float, *, left: float, lines: int = 4) -> Strip:
    """The list of reactions in columns, then the notes, each over at most ``lines`` lines."""
    room = width - left - MARGIN
    # a reaction on one line reads better than a list a little shorter
    ways = _arrangements(ladder, left, room, lines - 1)
    texts, height = min(ways, key=lambda found: found[1] + 8 * _wrapped(found[0]))
    height += 8 if height else 0
    for note in (*ladder.notes, *key_sentences(ladder)):
        block = paragraph(as_rich(note), "note", min(room, _LONGEST_NOTE), lines=lines)
        texts += block.at(Rect(left, height, 0, 0))
        height += block.h + 1
    return Strip(height, tuple(texts))


def _arrangements(ladder: Ladder, left: float, room: float, lines: int) -> list[tuple[list[TextBox], float]]:
    """The list of reactions with its height: one column a route, then one to four columns in reading order."""
    groups = [group for column in ladder.columns if (group := _equations(column.arrows))]
    if not groups:
        return [([], 0.0)]
    found = [_listed(groups, left, room, lines)] if room / len(groups) >= _LIST_COLUMN else []
    flat = list(dict.fromkeys(arrow for group in groups for arrow in group))
    for count in range(1, 5):
        if count == 1 or room / count >= _LIST_COLUMN:
            size = math.ceil(len(flat) / count)
            parts = [flat[start : start + size] for start in range(0, len(flat), size)]
            found.append(_listed(parts, left, room, lines))
    return found


def _wrapped(texts: list[TextBox]) -> int:
    return sum(not text.bold for text in texts) - sum(text.bold for text in texts)


def _listed(groups: list[list[Arrow]], left: float, room: float, lines: int) -> tuple[list[TextBox], float]:
    texts: list[TextBox] = []
    height = 0.0
    each = (room + _LIST_GAP) / len(groups) - _LIST_GAP
    for index, group in enumerate(groups):
        y = 0.0
        indent = _indent(group)
        for arrow in group:
            entry = _entry(arrow, indent, each, lines)
            texts += entry.at(Rect(left + index * (each + _LIST_GAP), y, 0, 0))
            y += entry.h + 2
        height = max(height, y)
    return texts, height


def key_sentences(ladder: Ladder) -> tuple[str, ...]:
    """One line that explains the marks this diagram uses; it always names k where a whisker is drawn."""
    arrows = [arrow for column in ladder.columns for arrow in column.arrows]
    entered = [arrow for arrow in arrows if arrow.end is not None]
    said = []
    if any(arrow.spread is not None for arrow in entered):
        said.append(f"Whisker: uncertainty of the level reached; ±: of the arrow itself; both {coverage(ladder.k)}.")
    if any(arrow.spread is not None and not arrow.complete for arrow in entered):
        said.append("Whisker without caps: lower bound, some uncertainty not stated.")
    if any(arrow.spread is None for arrow in entered):
        said.append("Open head: uncertainty not stated.")
    if len(entered) < len(arrows):
        said.append("Dotted mark: heat not entered.")
    if any(arrow.role == "side" for arrow in entered):
        said.append("Thin arrow: side row.")
    if any(arrow.role == "direct" for arrow in entered):
        said.append("Double arrow: the reaction taken directly.")
    return (" ".join(said),) if said else ()


def _equations(arrows: tuple[Arrow, ...]) -> list[Arrow]:
    seen: dict[tuple[str, str], Arrow] = {}
    for arrow in arrows:
        if plain(arrow.equation).strip():
            seen.setdefault((arrow.label, plain(arrow.equation)), arrow)
    return list(seen.values())


def _indent(arrows: list[Arrow]) -> float:
    size = SIZES["equation"]
    return 8 + max(
        text_width(plain(shorten(visible_rich(arrow.label), 80, size, bold=True)), size, bold=True) for arrow in arrows
    )


def _entry(arrow: Arrow, indent: float, width: float, lines: int) -> Block:
    """One reaction of the list: its label, then the equation over at most ``lines`` lines."""
    label = shorten(visible_rich(arrow.label), 80, SIZES["equation"], bold=True)
    full = plain(visible_rich(arrow.label))
    head = line_box(0, 0, label, "equation", bold=True, full="" if plain(label) == full else full)
    body = paragraph(as_rich(arrow.equation), "equation", width - indent, lines=lines)
    aside = tuple(replace(text, x=text.x + indent) for text in body.texts)
    return Block(indent + body.w, max(head.h, body.h), (head, *aside))

"""Lays out a strip: rows of dots on one axis, grouped under headings, with the key and the notes below.

A place along the axis is linear in the value; labels never overlap: where they find no place near their dots the row
grows. Where the figure is wide the words of a row stand at its right, else over it.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass, replace

from routeheat.draw.around import HALF, Placed, Tag, place
from routeheat.draw.blocks import SIZES, Block, line_box, paragraph
from routeheat.draw.chart import Band, Chart, Point, Rule, Ruler
from routeheat.draw.declutter import Rect
from routeheat.draw.frame import MARGIN, ticks
from routeheat.draw.geometry import TextBox
from routeheat.draw.metrics import LINE, rich_width, shorten, text_width
from routeheat.present.markup import Rich, as_rich, join, plain
from routeheat.present.numbers import coverage
from routeheat.present.strip import Dot, Row, Strip
from routeheat.present.text import visible, visible_rich, with_unit

WIDE = 620.0
"""Width in px from which the words stand at the right of the rows."""
NATURAL = 800.0
"""Width in px of a strip when nothing else is asked for."""
_LEAST = 260.0
_LABEL = 96.0
"""Widest label of a row, px."""
_WORDS = 0.26
"""Part of the width that words at the right may take."""
_PAD = 16.0
"""Free space in px between the extreme values and the ends of the axis."""
_BETWEEN = 9.0
_CLOSE = 4.0
"""Free space in px between two rows, and where there are many."""
_LINES = 6
_MANY = 9
"""From so many rows on they are kept low, so that the figure fits a page."""


def lay_out_strip(strip: Strip, *, width: float | None = None, height: float | None = None) -> Chart:
    """Places of everything in the figure.

    ``width`` is the canvas in px, at least 260; the height follows, and is at least ``height``.
    Raises :class:`ValueError` when a value is not a finite number.
    """
    canvas = max(width or NATURAL, _LEAST)
    frame = _frame(strip, canvas)
    gap = _CLOSE if frame.low else _BETWEEN
    texts = list(paragraph(as_rich(strip.title), "title", canvas - 2 * MARGIN, lines=4, bold=True)
                 .at(Rect(MARGIN, 10, 0, 0)))  # fmt: skip
    top = y = texts[-1].y + texts[-1].h + 12 if texts else 10.0
    rules: list[Rule] = []
    points: list[Point] = []
    bands: list[Band] = []
    for group in strip.groups:
        heading = paragraph(as_rich(group.title), "heading", canvas - 2 * MARGIN, lines=3, bold=True)
        texts += heading.at(Rect(MARGIN, y, 0, 0))
        y += heading.h + (gap / 2 if heading.h else 0)
        for row in group.rows:
            made = _row(row, frame, len(bands), y)
            texts += made.texts
            rules += made.rules
            points += made.points
            bands.append(replace(made.band, group=visible(plain(as_rich(group.title)))))
            y = made.band.bottom + gap
        y += gap / 2
    axis_rules, axis_texts, y = _axis(strip, frame, y)
    texts += axis_texts
    plot = (frame.left, top, frame.right, axis_rules[0].points[0][1])
    key_points, key_texts, y = _key(strip, canvas, y)
    texts += key_texts
    for note in (*strip.notes, *key_sentences(strip)):
        block = paragraph(as_rich(note), "note", canvas - 2 * MARGIN, lines=_LINES)
        texts += block.at(Rect(MARGIN, y, 0, 0))
        y += block.h + 1
    return Chart(
        canvas, max(y + 8, height or 0.0), plot, frame.ruler, None, (*axis_rules, *rules), (*points, *key_points),
        tuple(bands), tuple(texts), visible(plain(strip.title)), visible(strip.alt) or visible(plain(strip.title)),
    )  # fmt: skip


def key_sentences(strip: Strip) -> tuple[str, ...]:
    """One line that explains whiskers and bars; it always names k where a whisker is drawn."""
    dots = [dot for row in strip.rows for dot in row.dots if dot.look != "post"]
    said = []
    if any(dot.spread is not None for dot in dots):
        said.append(f"Whisker and ±: uncertainty, {coverage(strip.k)}.")
    if any(dot.spread is not None and not dot.complete for dot in dots):
        said.append("Dashed whisker without caps: lower bound (≥), some uncertainty not stated.")
    if any(dot.spread is None for dot in dots):
        said.append("No whisker: uncertainty not stated.")
    return (" ".join(said),) if said else ()


@dataclass(frozen=True, slots=True)
class _Frame:
    """Where the columns of the figure stand, and the axis."""

    canvas: float
    left: float
    right: float
    ruler: Ruler
    marks: tuple[tuple[float, str], ...]
    words: float
    """Left edge of the words at the right; 0 where they stand over the rows."""
    low: bool
    """True: rows are kept low."""


@dataclass(frozen=True, slots=True)
class _Made:
    texts: tuple[TextBox, ...]
    rules: tuple[Rule, ...]
    points: tuple[Point, ...]
    band: Band


def _frame(strip: Strip, canvas: float) -> _Frame:
    low, high = _range(strip)
    beside = canvas >= WIDE
    widest = max((rich_width(_name(row), SIZES["label"], bold=True) for row in strip.rows), default=0.0)
    left = MARGIN + (math.ceil(widest) + 14 if beside else 6)
    words = canvas - MARGIN - _room(strip, canvas) if beside else 0.0
    right = words - 16 if beside else canvas - MARGIN - 6
    ruler = Ruler.between(low, high, left + _PAD, right - _PAD)
    marks = ticks(ruler.value(left + 2), ruler.value(right - 2), right - left)
    return _Frame(canvas, left, right, ruler, marks, words, len(strip.rows) >= _MANY)


def _room(strip: Strip, canvas: float) -> float:
    """Width of the words at the right: as the longest needs, within a part of the figure."""
    size = SIZES["caption"]
    needs = [text_width(visible(text), size, bold=text == row.warning)
             for row in strip.rows for text in (*row.words, row.warning)]  # fmt: skip
    return min(max([*needs, 60.0]) + 2, _WORDS * canvas)


def _range(strip: Strip) -> tuple[float, float]:
    values = [value for row in strip.rows for dot in row.dots
              for value in (dot.value - (dot.spread or 0.0), dot.value + (dot.spread or 0.0))]  # fmt: skip
    if not all(map(math.isfinite, values)):
        raise ValueError("a value of the strip is not a finite number")
    low, high = (min(values), max(values)) if values else (0.0, 100.0)
    return (low, high) if high > low else (low - 1.0, high + 1.0)


def _name(row: Row) -> Rich:
    return shorten(visible_rich(row.label), _LABEL, SIZES["label"], bold=True)


def _row(row: Row, frame: _Frame, index: int, top: float) -> _Made:
    tags, boxes = _tags(row, frame)
    whiskers = tuple((frame.ruler.at(dot.value - dot.spread), frame.ruler.at(dot.value + dot.spread))
                     for dot in row.dots if dot.spread is not None)  # fmt: skip
    placed = place(tags, whiskers, frame.left - 8, frame.right + 8, low=frame.low)
    name = _name(row)
    full = visible(row.label)
    head = line_box(0, 0, name, "label", bold=True, full="" if plain(name) == full else full)
    words = _words(row, frame, head.w)
    if frame.words:
        y = top + max(placed.above, words.h / 2, head.h / 2)
        bottom = y + max(placed.below, words.h / 2, head.h / 2)
        texts = [replace(head, x=MARGIN, y=y - head.h / 2), *words.at(Rect(frame.words, y - words.h / 2, 0, 0))]
    else:
        over = max(head.h, words.h) + 3
        y = top + over + placed.above
        bottom = y + placed.below
        texts = [replace(head, x=MARGIN, y=top), *words.at(Rect(MARGIN + head.w + 10, top, 0, 0))]
    texts += [replace(box, x=spot.rect.x0, y=y + spot.rect.y0) for box, spot in zip(boxes, placed.spots, strict=True)]
    return _Made(
        tuple(replace(box, arrow=index) for box in texts), _rules(row, frame, placed, y), _points(row, frame, index, y),
        Band(full, "", y, top, bottom, _hover(row), row.line),
    )  # fmt: skip


def _tags(row: Row, frame: _Frame) -> tuple[tuple[Tag, ...], list[TextBox]]:
    tags, boxes = [], []
    room = min(230.0, frame.right - frame.left)
    for dot in row.dots:
        if dot.look != "post":
            text = shorten(visible_rich(join([dot.label, dot.caption], " ")), room, SIZES["level"])
            box = line_box(0, 0, text, "level")
            boxes.append(box)
            tags.append(Tag(frame.ruler.at(dot.value), box.w, box.h))
    return tuple(tags), boxes


def _words(row: Row, frame: _Frame, label: float) -> Block:
    """The warning in bold, then the verdict and the limits in words."""
    room = frame.canvas - MARGIN - frame.words if frame.words else frame.canvas - 2 * MARGIN - label - 10
    parts = [(row.warning, True)] if row.warning else []
    parts += [(sentence, False) for sentence in (row.words if frame.words else ("; ".join(row.words),))]
    texts: list[TextBox] = []
    y = w = 0.0
    for sentence, bold in parts:
        block = paragraph(as_rich(sentence), "caption", room, lines=_LINES, bold=bold)
        texts += [replace(box, y=box.y + y) for box in block.texts]
        y, w = y + block.h, max(w, block.w)
    return Block(w, y, tuple(texts))


def _rules(row: Row, frame: _Frame, placed: Placed, y: float) -> tuple[Rule, ...]:
    rules = [Rule(((frame.left, y), (frame.right, y)), 0.6, muted=True)]
    rules += [Rule(((x, y - 3), (x, y + 3)), 0.6, muted=True) for x in map(frame.ruler.at, _values(frame.marks))]
    if row.bar:
        start, end = map(frame.ruler.at, row.bar)
        rules.append(Rule(((start, y), (end, y)), 3.0, series=0))
    rules += [Rule(((leader.x0, y + leader.y0), (leader.x1, y + leader.y1)), 0.8, muted=True, dash=(1.5, 1.5))
              for spot in placed.spots if (leader := spot.leader)]  # fmt: skip
    return tuple(rules)


def _points(row: Row, frame: _Frame, index: int, y: float) -> tuple[Point, ...]:
    return tuple(_point(dot, frame.ruler, index, y) for dot in row.dots)


def _point(dot: Dot, ruler: Ruler, index: int, y: float) -> Point:
    whisker = None
    if dot.spread is not None:
        whisker = (ruler.at(dot.value - dot.spread), ruler.at(dot.value + dot.spread))
    hover = visible(f"{plain(dot.label)} {dot.caption}".strip())
    return Point(ruler.at(dot.value), y, dot.look, 0 if dot.reached else None, whisker, dot.complete, index, hover)


def _hover(row: Row) -> tuple[str, ...]:
    lines = [row.label, row.warning, *row.words]
    lines += [f"{plain(dot.label)} {dot.caption}".strip() for dot in row.dots]
    lines += [f"{name}: {text}" for name, text in row.details]
    return tuple(visible(line) for line in lines if line)


def _values(marks: Iterable[tuple[float, str]]) -> list[float]:
    return [value for value, _ in marks]


def _axis(strip: Strip, frame: _Frame, y: float) -> tuple[list[Rule], list[TextBox], float]:
    """The axis below the rows with its ticks and its title, and where the figure goes on."""
    rules = [Rule(((frame.left, y), (frame.right, y)), 1.0)]
    texts: list[TextBox] = []
    for value, text in frame.marks:
        x = frame.ruler.at(value)
        rules.append(Rule(((x, y), (x, y + 5)), 1.0))
        box = line_box(0, y + 7, as_rich(text), "tick")
        texts.append(replace(box, x=x - box.w / 2, anchor="middle"))
    title = shorten(visible_rich(with_unit(strip.axis, strip.unit)), frame.right - frame.left, SIZES["axis"])
    box = line_box(0, y + 7 + SIZES["tick"] * LINE + 1, title, "axis")
    texts.append(replace(box, x=(frame.left + frame.right - box.w) / 2, anchor="middle"))
    return rules, texts, texts[-1].y + texts[-1].h + 8


def _key(strip: Strip, canvas: float, y: float) -> tuple[list[Point], list[TextBox], float]:
    """A sample of every form that is used, with its meaning, in reading order."""
    used = {dot.look for row in strip.rows for dot in row.dots}
    limits = {dot.look for row in strip.rows for dot in row.dots if not dot.reached}
    points: list[Point] = []
    texts: list[TextBox] = []
    x, line = MARGIN, SIZES["note"] * LINE + 5
    for look, meaning in strip.key:
        if look not in used:
            continue
        block = paragraph(as_rich(meaning), "note", canvas - 2 * MARGIN - 22, lines=2)
        if x > MARGIN and x + 22 + block.w > canvas - MARGIN:
            x, y = MARGIN, y + line
        points.append(Point(x + HALF, y + SIZES["note"] * LINE / 2, look, None if look in limits else 0))
        texts += block.at(Rect(x + 22, y, 0, 0))
        x += 22 + block.w + 20
        if len(block.texts) > 1:
            x, y = MARGIN, y + block.h + 5
    return points, texts, y + ((line if x > MARGIN else 0) + 4 if points else 0)

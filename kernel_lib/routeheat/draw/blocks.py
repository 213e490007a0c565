"""Blocks of text: the label and value of an arrow, the names at the first and last level."""

from __future__ import annotations

from dataclasses import dataclass, replace

from routeheat.draw.declutter import Rect
from routeheat.draw.geometry import Anchor, Kind, TextBox
from routeheat.draw.metrics import LINE, rich_width, shorten, wrap
from routeheat.present.ladder import Arrow
from routeheat.present.markup import Rich, plain
from routeheat.present.text import visible_rich

SIZES: dict[Kind, float] = {
    "title": 15.0,
    "heading": 13.0,
    "axis": 13.5,
    "tick": 12.0,
    "label": 12.5,
    "caption": 12.5,
    "level": 12.0,
    "equation": 12.0,
    "note": 11.5,
}
"""Font sizes in px."""
LABEL_WIDTH = 96.0
"""Widest label of an arrow in px; a longer one is shortened in its middle."""
CAPTION_WIDTH = 150.0
"""Widest line of a caption in px."""


@dataclass(frozen=True, slots=True)
class Block:
    """Lines of text that move as one; their boxes are relative to its upper left corner."""

    w: float
    h: float
    texts: tuple[TextBox, ...]

    def at(self, rect: Rect, arrow: int | None = None) -> tuple[TextBox, ...]:
        """The lines at their place on the page."""
        return tuple(replace(text, x=rect.x0 + text.x, y=rect.y0 + text.y, arrow=arrow) for text in self.texts)

    def towards(self, rect: Rect, x: float) -> Block:
        """The block with its lines flush on the side that faces ``x``, where its place is ``rect``."""
        if len({text.y for text in self.texts}) < len(self.texts):
            return self
        anchor: Anchor = "end" if rect.x1 <= x else "start" if rect.x0 >= x else "middle"
        share = {"start": 0.0, "middle": 0.5, "end": 1.0}[anchor]
        return replace(
            self, texts=tuple(replace(text, x=(self.w - text.w) * share, anchor=anchor) for text in self.texts)
        )


def line_box(x: float, y: float, rich: Rich, kind: Kind, *, full: str = "", bold: bool = False) -> TextBox:
    """One line of text with its upper left corner at (x, y)."""
    size = SIZES[kind]
    w = rich_width(rich, size, bold=bold)
    return TextBox(x, y, w, size * LINE, rich, "start", kind, size, bold=bold, full=full)


def paragraph(rich: Rich, kind: Kind, width: float, *, lines: int, bold: bool = False, centred: bool = False) -> Block:
    """A text wrapped to ``width`` px; where it had to be shortened its first line keeps the whole."""
    shown = visible_rich(rich)
    size = SIZES[kind]
    rows = wrap(shown, width, size, lines=lines, bold=bold)
    # wrapping may drop only spaces; anything else missing means that something was shortened
    whole = plain(shown)
    full = whole if "".join(map(plain, rows)).replace(" ", "") != whole.replace(" ", "") else ""
    boxes = [
        line_box(0, index * size * LINE, row, kind, full="" if index else full, bold=bold)
        for index, row in enumerate(rows)
    ]
    w = max((box.w for box in boxes), default=0.0)
    if centred:
        boxes = [replace(box, x=(w - box.w) / 2, anchor="middle") for box in boxes]
    return Block(w, len(boxes) * size * LINE, tuple(boxes))


def arrow_block(arrow: Arrow, *, one_line: bool) -> Block:
    """Label and caption of an arrow: over each other, or side by side where arrows are short."""
    label = visible_rich(arrow.label)
    short = shorten(label, LABEL_WIDTH, SIZES["label"], bold=True)
    head = line_box(0, 0, short, "label", bold=True, full=plain(label) if short != label else "")
    if not one_line:
        body = paragraph(visible_rich(arrow.caption), "caption", CAPTION_WIDTH, lines=2)
        below = tuple(replace(text, y=text.y + head.h) for text in body.texts)
        return Block(max(head.w, body.w), head.h + body.h, (head, *below))
    body = paragraph(visible_rich(arrow.caption), "caption", CAPTION_WIDTH, lines=1)
    shift = head.w + 5 if head.w else 0.0
    aside = tuple(replace(text, x=text.x + shift) for text in body.texts)
    return Block(shift + body.w, max(head.h, body.h), (replace(head, anchor="end"), *aside))

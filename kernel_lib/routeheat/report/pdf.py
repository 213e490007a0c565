"""The report as PDF: fonts embedded, figures as vectors with real text, headings in the outline, no browser."""

from __future__ import annotations

import io
from collections.abc import Iterator
from typing import Any

from routeheat.draw.glyphs import LACKING, LACKING_NOTE, font_file, shown, shown_rich
from routeheat.draw.glyphs import width as text_width
from routeheat.draw.ink import Dot, Mark, Shape, Stroke, Word, marks
from routeheat.draw.looks import SHIFTS
from routeheat.draw.metrics import SCRIPT
from routeheat.present.html import escape
from routeheat.present.markup import Rich, plain
from routeheat.report.columns import PADDING, PAGE, SIZE, folded, widths
from routeheat.report.document import (
    Block,
    Bullets,
    Code,
    Document,
    FigureBlock,
    Grid,
    Heading,
    Paragraph,
    TableBlock,
    led,
    line,
)
from routeheat.report.figures import Printed, printed

_MARGIN = 56.7
_LONGEST_PROPERTY = 250
_TOGETHER = 2
_CLOSING = {"sub": "</sub>", "sup": "</super>", "italic": "</i>"}
_FONTS = {
    "Report": {}, "Report-Bold": {"bold": True}, "Report-Italic": {"italic": True},
    "Report-BoldItalic": {"bold": True, "italic": True}, "Report-Mono": {"mono": True},
}  # fmt: skip
_INK, _MUTED = "#1a1a1a", "#4a4a4a"


def render(document: Document) -> bytes:
    """The whole file; equal documents give equal bytes."""
    from reportlab.platypus import BaseDocTemplate, Frame, PageTemplate

    _register()
    out = io.BytesIO()
    title = plain(line(document.title, _LONGEST_PROPERTY))
    made = BaseDocTemplate(
        out, pagesize=(595.276, 841.89), leftMargin=_MARGIN, rightMargin=_MARGIN, topMargin=_MARGIN,
        bottomMargin=_MARGIN, title=title, author="", subject="", creator="routeheat", lang="en", invariant=1,
        pageCompression=1,
    )  # fmt: skip
    frame = Frame(
        _MARGIN, _MARGIN, made.width, made.height, leftPadding=0, rightPadding=0, topPadding=0, bottomPadding=0
    )
    made.addPageTemplates([PageTemplate("page", [frame], onPage=_foot)])
    made.build(_Story(document).flowables)
    return out.getvalue()


def _register() -> None:
    from reportlab.pdfbase import pdfmetrics
    from reportlab.pdfbase.ttfonts import TTFont

    if "Report" in pdfmetrics.getRegisteredFontNames():
        return
    for name, style in _FONTS.items():
        pdfmetrics.registerFont(TTFont(name, str(font_file(**style))))
    pdfmetrics.registerFontFamily(
        "Report", normal="Report", bold="Report-Bold", italic="Report-Italic", boldItalic="Report-BoldItalic"
    )


def _foot(canvas: Any, _: Any) -> None:
    canvas.saveState()
    canvas.setFont("Report", 8)
    canvas.setFillColor(_MUTED)
    canvas.drawCentredString(595.276 / 2, _MARGIN - 24, str(canvas.getPageNumber()))
    canvas.restoreState()


def _markup(rich: Rich, size: float) -> str:
    """A rich text as the paragraph markup of the PDF library, every character of it escaped."""
    small = size * SCRIPT
    opening = {
        "sub": f'<sub rise="{size * SHIFTS["sub"]:.2f}" size="{small:.2f}">',
        "sup": f'<super rise="{-size * SHIFTS["sup"]:.2f}" size="{small:.2f}">',
        "italic": "<i>",
    }
    return "".join(
        opening.get(run.style, "") + escape(run.text) + _CLOSING.get(run.style, "") for run in shown_rich(rich)
    )


class _Story:
    """The flowables of one document."""

    def __init__(self, document: Document) -> None:
        self.styles = _styles()
        self.lacking = False
        self.flowables: list[Any] = [self._text(document.title, "title")]
        if document.date:
            self.flowables.append(self._text(document.date, "text"))
        self.flowables.append(self._text(document.caution, "note"))
        for section in document.sections:
            self.flowables.append(self._entry(line(section.heading), "h1", section.name, 0))
            for block, leads in led(section.blocks):
                made = list(self._block(block))
                if leads:
                    made[-1].keepWithNext = 1
                self.flowables += made
        if self.lacking:
            self.flowables.append(self._text(line(LACKING_NOTE), "note"))

    def _block(self, block: Block) -> Iterator[Any]:
        if isinstance(block, Heading):
            yield self._entry(block.text, "h2", block.id, 1)
        elif isinstance(block, Paragraph):
            yield self._text(block.text, "text" if block.kind == "text" else "note")
        elif isinstance(block, Bullets):
            for item in block.items:
                yield self._text(item, "bullet", bullet="•")
        elif isinstance(block, TableBlock):
            yield from self._table(block)
        elif isinstance(block, FigureBlock):
            yield from self._figure(block)
        else:
            yield from self._code(block)

    def _text(self, rich: Rich, style: str, *, bullet: str | None = None) -> Any:
        from reportlab.platypus import Paragraph as Flowing

        markup = _markup(rich, self.styles[style].fontSize)
        self.lacking = self.lacking or (LACKING in markup and LACKING not in plain(rich))
        return Flowing(markup, self.styles[style], bulletText=bullet)

    def _entry(self, rich: Rich, style: str, key: str, level: int) -> Any:
        """A heading with its place in the outline."""
        return _outlined(self._text(rich, style), key, shown(plain(rich)), level)

    def _table(self, block: TableBlock) -> Iterator[Any]:
        from reportlab.platypus import Spacer

        yield self._text((*line(f"Table {block.number}. "), *block.caption), "caption above")
        for number, grid in enumerate(folded(block.grid, PAGE)):
            if number:
                yield Spacer(1, 6)
            yield self._grid(grid)
        yield Spacer(1, 3)
        *notes, last = [self._text(note, "note") for note in block.notes] or [Spacer(1, 0)]
        for note in notes[-_TOGETHER:]:
            # the last notes go to a new page together, never one alone
            note.keepWithNext = 1
        yield from (*notes, last)
        yield Spacer(1, 8)

    def _grid(self, grid: Grid) -> Any:
        from reportlab.platypus import LongTable

        cells = []
        for number, row in enumerate((grid.header, *grid.rows)):
            kind = "strong" if number == 0 or number - 1 in grid.strong else "cell"
            cells.append(
                [
                    self._text(cell, f"{kind} right" if right else kind)
                    for cell, right in zip(row, grid.right, strict=True)
                ]
            )
        look: list[Any] = [
            ("VALIGN", (0, 0), (-1, -1), "TOP"), ("VALIGN", (0, 0), (-1, 0), "BOTTOM"),
            ("LINEABOVE", (0, 0), (-1, 0), 1.0, _INK), ("LINEBELOW", (0, 0), (-1, 0), 0.6, _INK),
            ("LINEBELOW", (0, -1), (-1, -1), 1.0, _INK), ("LEFTPADDING", (0, 0), (-1, -1), PADDING / 3),
            ("RIGHTPADDING", (0, 0), (-1, -1), PADDING * 2 / 3), ("TOPPADDING", (0, 0), (-1, -1), 1.5),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 2.5),
        ]  # fmt: skip
        look += [("LINEABOVE", (0, index + 1), (-1, index + 1), 0.6, _INK) for index in grid.strong if index]
        return LongTable(
            cells, colWidths=widths(grid, PAGE), repeatRows=1, style=look, hAlign="LEFT", splitByRow=1, spaceAfter=2
        )

    def _figure(self, block: FigureBlock) -> Iterator[Any]:
        from reportlab.platypus import Spacer

        caption = self._text((*line(f"Figure {block.number}. "), *block.caption), "caption below")
        *before, last = map(_drawing, printed(block.drawing))
        yield from before
        parts = [last, caption, *(self._text(note, "note") for note in block.notes)]
        # one chain with the heading before it, so that neither is left alone at the foot of a page
        for part in parts[:-1]:
            part.keepWithNext = 1
        yield from parts
        yield Spacer(1, 10)

    def _code(self, block: Code) -> Iterator[Any]:
        from reportlab.platypus import Preformatted, Spacer

        yield self._text(block.caption, "caption above")
        for text in block.lines:
            kept = shown(text, mono=True)
            self.lacking = self.lacking or (LACKING in kept and LACKING not in text)
            for part in _pieces(kept):
                blank = not part.strip()
                yield Spacer(1, self.styles["code"].leading) if blank else Preformatted(part, self.styles["code"])


def _pieces(text: str, most: int = 98) -> Iterator[str]:
    """A line of fixed-width text in pieces that fit on the page, broken at spaces where there are any."""
    while len(text) > most:
        cut = text.rfind(" ", most // 2, most) + 1 or most
        yield text[:cut]
        text = "    " + text[cut:]
    yield text


def _outlined(flowable: Any, key: str, title: str, level: int) -> Any:
    """The paragraph, made to enter its place into the outline when it is drawn."""
    draw = flowable.draw

    def drawn() -> None:
        flowable.canv.bookmarkHorizontal(key, 0, flowable.height)
        flowable.canv.addOutlineEntry(title, key, level, closed=level > 0)
        draw()

    flowable.draw = drawn
    return flowable


def _drawing(part: Printed) -> Any:
    """The figure as a flowable that paints it with the library's own lines and texts."""
    from reportlab.platypus import Flowable

    class Drawing(Flowable):
        """One figure."""

        def __init__(self) -> None:
            super().__init__()
            self.width, self.height = part.width, part.height

        def draw(self) -> None:
            """Paints on the page, with the origin at the figure's upper left corner."""
            self.canv.translate(0, self.height)
            self.canv.scale(part.scale, part.scale)
            for mark in marks(part.figure, text_width):
                _paint(self.canv, mark)

    return Drawing()


def _paint(canvas: Any, mark: Mark) -> None:
    if isinstance(mark, Word):
        _write(canvas, mark)
        return
    canvas.setStrokeColor(mark.colour)
    canvas.setLineWidth(mark.width)
    if isinstance(mark, Dot):
        canvas.setFillColor(mark.colour if mark.filled else "#ffffff")
        canvas.circle(mark.x, -mark.y, mark.radius, stroke=1, fill=1)
        return
    path = canvas.beginPath()
    first, *others = mark.points
    path.moveTo(first[0], -first[1])
    for x, y in others:
        path.lineTo(x, -y)
    if isinstance(mark, Shape):
        path.close()
        canvas.setFillColor(mark.colour if mark.filled else "#ffffff")
        canvas.setLineJoin(0)
        canvas.drawPath(path, stroke=1, fill=1)
    elif isinstance(mark, Stroke):
        canvas.setDash(list(mark.dash))
        canvas.setLineCap(1 if mark.round else 0)
        canvas.drawPath(path, stroke=1, fill=0)
        canvas.setDash([])
        canvas.setLineCap(0)


def _write(canvas: Any, word: Word) -> None:
    name = "Report-Bold" if word.bold else "Report-Italic" if word.italic else "Report"
    canvas.saveState()
    canvas.setFont(name, word.size)
    canvas.setFillColor(word.colour)
    canvas.translate(word.x, -word.y)
    if word.upright:
        canvas.rotate(90)
    canvas.drawString(0, 0, word.text)
    canvas.restoreState()


def _styles() -> dict[str, Any]:
    from reportlab.lib.enums import TA_RIGHT
    from reportlab.lib.styles import ParagraphStyle

    def style(name: str, size: float, font: str = "Report", **more: Any) -> Any:
        settings: dict[str, Any] = {
            "leading": size * 1.35, "textColor": _INK, "splitLongWords": 1, "allowWidows": 0, "allowOrphans": 0,
        }  # fmt: skip
        return ParagraphStyle(name, fontName=font, fontSize=size, **(settings | more))

    bold = "Report-Bold"
    return {
        "title": style("title", 17, bold, spaceAfter=8),
        "h1": style("h1", 13, bold, spaceBefore=16, spaceAfter=7, keepWithNext=1),
        "h2": style("h2", 10.5, bold, spaceBefore=10, spaceAfter=5, keepWithNext=1),
        "text": style("text", 9, spaceAfter=6),
        "bullet": style("bullet", 9, leftIndent=12, bulletIndent=2, bulletFontName="Report", bulletFontSize=9,
                        spaceAfter=3),
        "note": style("note", 7.5, textColor=_MUTED, spaceAfter=2),
        "caption above": style("caption above", 8.5, bold, spaceBefore=6, spaceAfter=4, keepWithNext=1),
        "caption below": style("caption below", 8.5, bold, spaceBefore=4, spaceAfter=4),
        "cell": style("cell", SIZE, leading=SIZE * 1.3),
        "cell right": style("cell right", SIZE, leading=SIZE * 1.3, alignment=TA_RIGHT),
        "strong": style("strong", SIZE, bold, leading=SIZE * 1.3),
        "strong right": style("strong right", SIZE, bold, leading=SIZE * 1.3, alignment=TA_RIGHT),
        "code": style("code", 7.5, "Report-Mono"),
    }  # fmt: skip

"""The report as DOCX: real headings, captions that number themselves, tables and pictures a chemist can edit."""

from __future__ import annotations

import datetime
import io
import zipfile
from typing import Any

from routeheat.draw.paper import rendered
from routeheat.present.markup import Rich, plain
from routeheat.report.columns import PAGE, folded, widths
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
from routeheat.report.figures import printed

FONT = "Arial"
_EPOCH = datetime.datetime(1980, 1, 1, tzinfo=datetime.UTC)
_LONGEST_PROPERTY = 250
_DPI = 300
_SHORT_TABLE = 14
_NOTE, _CODE, _CELL = "Note", "Typed sheet", "Table text"


def render(document: Document) -> bytes:
    """The whole file; equal documents give equal bytes."""
    out = io.BytesIO()
    _Writer(document).file.save(out)
    return _repacked(out.getvalue())


def _repacked(content: bytes) -> bytes:
    """The same package with fixed dates and without the template's preview picture."""
    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(content)) as old, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            info = zipfile.ZipInfo(name, _EPOCH.timetuple()[:6])
            info.compress_type = zipfile.ZIP_DEFLATED
            info.external_attr = 0o600 << 16
            new.writestr(info, old.read(name))
    return out.getvalue()


class _Writer:
    """Writes one document into a new file of python-docx."""

    def __init__(self, document: Document) -> None:
        import docx

        self.file = docx.Document()
        self._styles()
        self._page()
        self._properties(document)
        self._runs(self.file.add_paragraph(style="Title"), document.title)
        if document.date:
            self._runs(self.file.add_paragraph(), document.date)
        self._runs(self.file.add_paragraph(style=_NOTE), document.caution)
        for section in document.sections:
            self.file.add_heading(section.heading, level=1)
            for block, leads in led(section.blocks):
                self._block(block)
                if leads:
                    self.file.paragraphs[-1].paragraph_format.keep_with_next = True

    def _block(self, block: Block) -> None:
        if isinstance(block, Heading):
            self._runs(self.file.add_heading(level=block.level - 1), block.text)
        elif isinstance(block, Paragraph):
            self._runs(self.file.add_paragraph(style=None if block.kind == "text" else _NOTE), block.text)
        elif isinstance(block, Bullets):
            for item in block.items:
                self._runs(self.file.add_paragraph(style="List Bullet"), item)
        elif isinstance(block, TableBlock):
            self._table(block)
        elif isinstance(block, FigureBlock):
            self._figure(block)
        else:
            self._code(block)

    def _runs(self, paragraph: Any, rich: Rich, *, bold: bool = False) -> None:
        for piece in rich:
            run = paragraph.add_run(piece.text)
            if bold:
                run.bold = True
            if piece.style == "italic":
                run.italic = True
            elif piece.style == "sub":
                run.font.subscript = True
            elif piece.style == "sup":
                run.font.superscript = True

    def _caption(self, kind: str, number: int, text: Rich, *, above: bool) -> None:
        paragraph = self.file.add_paragraph(style="Caption")
        paragraph.paragraph_format.keep_with_next = above
        paragraph.add_run(f"{kind} ")
        _field(paragraph, f" SEQ {kind} \\* ARABIC ", str(number))
        self._runs(paragraph, (*line(". "), *text))

    def _table(self, block: TableBlock) -> None:
        from docx.shared import Pt

        self._caption("Table", block.number, block.caption, above=True)
        for number, grid in enumerate(folded(block.grid)):
            if number:
                self.file.add_paragraph(style=_NOTE)
            self._grid(grid)
        for index, note in enumerate(block.notes or ((),)):
            paragraph = self.file.add_paragraph(style=_NOTE)
            if not index:
                paragraph.paragraph_format.space_before = Pt(4)
            # the last note never goes to a new page alone
            paragraph.paragraph_format.keep_with_next = index == len(block.notes) - 2
            self._runs(paragraph, note)

    def _grid(self, grid: Grid) -> None:
        from docx.enum.table import WD_CELL_VERTICAL_ALIGNMENT, WD_TABLE_ALIGNMENT
        from docx.shared import Pt

        table = self.file.add_table(rows=1 + len(grid.rows), cols=len(grid.header))
        table.alignment = WD_TABLE_ALIGNMENT.LEFT
        table.autofit = False
        sizes = [Pt(width) for width in widths(grid, PAGE)]
        for column, size in zip(table.columns, sizes, strict=True):
            column.width = size
        for number, (row, cells) in enumerate(zip(table.rows, (grid.header, *grid.rows), strict=True)):
            strong = number == 0 or number - 1 in grid.strong
            # a short table stays on one page, a long one keeps its header with its first rows
            together = number < (len(grid.rows) if len(grid.rows) <= _SHORT_TABLE else 2)
            for cell, text, right, size in zip(row.cells, cells, grid.right, sizes, strict=True):
                cell.width = size
                if number == 0:
                    cell.vertical_alignment = WD_CELL_VERTICAL_ALIGNMENT.BOTTOM
                self._cell(cell.paragraphs[0], text, right=right, bold=strong, together=together)
            _row_properties(row, header=number == 0)
        _rules(table)

    def _cell(self, paragraph: Any, text: Rich, *, right: bool, bold: bool, together: bool) -> None:
        from docx.enum.text import WD_ALIGN_PARAGRAPH

        paragraph.style = self.file.styles[_CELL]
        if together:
            paragraph.paragraph_format.keep_with_next = True
        if right:
            paragraph.alignment = WD_ALIGN_PARAGRAPH.RIGHT
        self._runs(paragraph, text, bold=bold)

    def _figure(self, block: FigureBlock) -> None:
        from docx.shared import Pt

        parts = printed(block.drawing)
        for number, part in enumerate(parts, 1):
            picture = io.BytesIO(rendered(part.figure, "png", scale=part.scale, dpi=_DPI))
            paragraph = self.file.add_paragraph()
            paragraph.paragraph_format.keep_with_next = number == len(parts)
            shape = paragraph.add_run().add_picture(picture, width=Pt(part.width), height=Pt(part.height))
            properties = shape._inline.docPr
            which = "" if len(parts) == 1 else f", part {number} of {len(parts)}"
            properties.set("name", f"Figure {block.number}{which}")
            properties.set("descr", block.drawing.alt + which)
        self._caption("Figure", block.number, block.caption, above=bool(block.notes))
        for note in block.notes:
            self._runs(self.file.add_paragraph(style=_NOTE), note)

    def _code(self, block: Code) -> None:
        self._runs(self.file.add_paragraph(style="Caption"), block.caption)
        for text in block.lines:
            self.file.add_paragraph(text, style=_CODE)

    def _properties(self, document: Document) -> None:
        core = self.file.core_properties
        core.title = plain(line(document.title, _LONGEST_PROPERTY))
        core.author = ""
        core.last_modified_by = ""
        core.comments = ""
        core.language = "en-GB"
        core.revision = 1
        core.created = core.modified = _EPOCH

    def _page(self) -> None:
        from docx.enum.text import WD_ALIGN_PARAGRAPH
        from docx.shared import Mm

        section = self.file.sections[0]
        section.page_width, section.page_height = Mm(210), Mm(297)
        section.left_margin = section.right_margin = Mm(20)
        section.top_margin = section.bottom_margin = Mm(20)
        foot = section.footer.paragraphs[0]
        foot.alignment = WD_ALIGN_PARAGRAPH.CENTER
        _field(foot, " PAGE ", "1")

    def _styles(self) -> None:
        from docx.enum.style import WD_STYLE_TYPE
        from docx.shared import Pt, RGBColor

        styles = self.file.styles
        for name, size in (
            ("Normal", 10.0),
            ("Title", 18.0),
            ("Heading 1", 14.0),
            ("Heading 2", 11.5),
            ("Caption", 9.0),
        ):
            style = styles[name]
            _font(style, FONT)
            style.font.size = Pt(size)
            style.font.color.rgb = RGBColor(0x1A, 0x1A, 0x1A)
        styles["Normal"].paragraph_format.space_after = Pt(6)
        styles["Caption"].paragraph_format.space_before = Pt(8)
        styles["Caption"].paragraph_format.space_after = Pt(4)
        for name, size, font in ((_CELL, 8.0, FONT), (_NOTE, 8.0, FONT), (_CODE, 8.0, "Courier New")):
            style = styles.add_style(name, WD_STYLE_TYPE.PARAGRAPH)
            style.base_style = styles["Normal"]
            _font(style, font)
            style.font.size = Pt(size)
            style.paragraph_format.space_after = Pt({_NOTE: 2, _CELL: 2}.get(name, 0))
            style.paragraph_format.space_before = Pt(2 if name == _CELL else 0)


def _font(style: Any, name: str) -> None:
    """The font for every script, in place of the theme's."""
    from docx.oxml.ns import qn

    style.font.name = name
    fonts = style.element.get_or_add_rPr().get_or_add_rFonts()
    for theme in ("asciiTheme", "hAnsiTheme", "eastAsiaTheme", "cstheme"):
        fonts.attrib.pop(qn(f"w:{theme}"), None)
    fonts.set(qn("w:cs"), name)


def _element(tag: str, **attributes: str) -> Any:
    from docx.oxml import OxmlElement
    from docx.oxml.ns import qn

    element = OxmlElement(tag)
    for name, value in attributes.items():
        element.set(qn(f"w:{name}"), value)
    return element


def _field(paragraph: Any, instruction: str, shown: str) -> None:
    """A field that the word processor keeps up to date, with the text it has now."""
    paragraph.add_run()._r.append(_element("w:fldChar", fldCharType="begin"))
    code = _element("w:instrText")
    code.text = instruction
    code.set("{http://www.w3.org/XML/1998/namespace}space", "preserve")
    paragraph.add_run()._r.append(code)
    paragraph.add_run()._r.append(_element("w:fldChar", fldCharType="separate"))
    paragraph.add_run(shown)
    paragraph.add_run()._r.append(_element("w:fldChar", fldCharType="end"))


def _row_properties(row: Any, *, header: bool) -> None:
    """A row stays on one page; the header row is repeated on every page."""
    properties = row._tr.get_or_add_trPr()
    properties.append(_element("w:cantSplit"))
    if header:
        properties.append(_element("w:tblHeader"))


def _rules(table: Any) -> None:
    """A rule above, one below the header and one below the table."""
    from docx.oxml.ns import qn

    borders = _element("w:tblBorders")
    for edge in ("top", "bottom"):
        borders.append(_element(f"w:{edge}", val="single", sz="10", space="0", color="1A1A1A"))
    whole = table._tbl.tblPr
    # the schema fixes the order: borders stand before layout, margins and look
    later = {qn(f"w:{name}") for name in ("shd", "tblLayout", "tblCellMar", "tblLook")}
    place = next((index for index, child in enumerate(whole) if child.tag in later), len(whole))
    whole.insert(place, borders)
    for cell in table.rows[0].cells:
        edges = _element("w:tcBorders")
        edges.append(_element("w:bottom", val="single", sz="6", space="0", color="1A1A1A"))
        properties = cell._tc.get_or_add_tcPr()
        aligned = properties.find(qn("w:vAlign"))
        properties.insert(len(properties) if aligned is None else list(properties).index(aligned), edges)

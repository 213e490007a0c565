"""The report as DOCX, opened again by python-docx."""

from __future__ import annotations

import io
import re
import xml.etree.ElementTree as ElementTree
import zipfile
from typing import Any

import docx
import pytest
from docx.oxml.ns import qn
from docx.shared import Mm

from routeheat.chem.route import Sheet
from routeheat.report.sections import PARTS
from routeheat.report.write import report_bytes


@pytest.fixture(scope="module")
def content(amine: Sheet) -> bytes:
    return report_bytes(amine, "docx", title="Three ways", question="Which?", date="1 May")


@pytest.fixture(scope="module")
def file(content: bytes) -> Any:
    return docx.Document(io.BytesIO(content))


def styled(file: Any, style: str) -> list[str]:
    return [item.text for item in file.paragraphs if item.style.name == style]


def test_title_and_headings_are_real_styles(file: Any) -> None:
    assert styled(file, "Title") == ["Three ways"]
    wanted = [part.heading for part in PARTS if part.name not in ("combinations", "reconciled")]
    assert styled(file, "Heading 1") == wanted
    assert "Route A, nitration, hydrogenation" in styled(file, "Heading 2")


def test_captions_number_themselves(file: Any) -> None:
    captions = [item for item in file.paragraphs if item.style.name == "Caption"]
    numbered = [item.text for item in captions if re.match(r"(Table|Figure) \d+\. ", item.text)]
    assert [int(text.split()[1][:-1]) for text in numbered if text.startswith("Figure")] == list(range(1, 9))
    fields = [code.text for item in captions for code in item._p.iter(qn("w:instrText"))]
    assert len(fields) == len(numbered)
    assert {field.strip() for field in fields} == {"SEQ Table \\* ARABIC", "SEQ Figure \\* ARABIC"}


def test_tables_are_tables_with_repeated_headers_inside_the_margins(file: Any) -> None:
    section = file.sections[0]
    room = section.page_width - section.left_margin - section.right_margin
    assert len(file.tables) >= 10
    for table in file.tables:
        assert table.rows[0]._tr.trPr.find(qn("w:tblHeader")) is not None
        assert all(row._tr.trPr.find(qn("w:cantSplit")) is not None for row in table.rows)
        assert sum(column.width for column in table.columns) <= room + Mm(1)


def test_cells_hold_the_numbers_with_subscripts(file: Any) -> None:
    cells = [cell for table in file.tables for row in table.rows for cell in row.cells]
    assert any(cell.text == "−743 ± 23" for cell in cells)
    equation = next(cell for cell in cells if cell.text.startswith("AR(l) + HNO3(aq)"))
    assert [run.text for run in equation.paragraphs[0].runs if run.font.subscript] == ["3", "2"]


def test_pictures_fit_the_page_and_have_words(file: Any) -> None:
    section = file.sections[0]
    assert (section.page_width.mm, section.page_height.mm) == pytest.approx((210, 297), abs=0.02)
    room = section.page_width - section.left_margin - section.right_margin
    assert len(file.inline_shapes) == 8
    for shape in file.inline_shapes:
        assert Mm(80) <= shape.width <= room + Mm(0.2)
        assert shape.height <= section.page_height - section.top_margin - section.bottom_margin
        assert len(shape._inline.docPr.get("descr")) > 20


def test_pictures_keep_their_proportions(content: bytes, file: Any) -> None:
    from PIL import Image

    with zipfile.ZipFile(io.BytesIO(content)) as package:
        for shape in file.inline_shapes:
            part = file.part.related_parts[shape._inline.graphic.graphicData.pic.blipFill.blip.embed]
            picture = Image.open(io.BytesIO(package.read(part.partname.lstrip("/"))))
            assert picture.width / picture.height == pytest.approx(shape.width / shape.height, rel=0.01)
            assert picture.width / (shape.width / Mm(25.4)) == pytest.approx(300, rel=0.01)


def test_properties_are_fixed_and_name_nobody(file: Any) -> None:
    core = file.core_properties
    assert core.title == "Three ways"
    assert (core.author, core.last_modified_by, core.comments) == ("", "", "")
    assert core.created == core.modified
    assert core.created.year == 1980


def test_the_same_input_gives_the_same_bytes(content: bytes, amine: Sheet) -> None:
    assert report_bytes(amine, "docx", title="Three ways", question="Which?", date="1 May") == content
    with zipfile.ZipFile(io.BytesIO(content)) as package:
        assert {item.date_time for item in package.infolist()} == {(1980, 1, 1, 0, 0, 0)}


def test_every_part_is_well_formed_and_borders_stand_where_the_schema_wants_them(content: bytes) -> None:
    with zipfile.ZipFile(io.BytesIO(content)) as package:
        for name in package.namelist():
            if name.endswith((".xml", ".rels")):
                ElementTree.fromstring(package.read(name))
        body = ElementTree.fromstring(package.read("word/document.xml"))
    order = ["tblStyle", "tblW", "jc", "tblBorders", "tblLayout", "tblLook"]
    for properties in body.iter(qn("w:tblPr")):
        names = [child.tag.partition("}")[2] for child in properties]
        assert names == [name for name in order if name in names]


def test_the_typed_sheet_keeps_its_lines(file: Any) -> None:
    typed = styled(file, "Typed sheet")
    assert typed[0] == "uncertainty k = 1"
    assert '  AR   C8H9FO(l) | name "fluoro-methoxytoluene, invented"' in typed


def test_hostile_texts_come_out_as_harmless_text(hostile: Sheet, hostile_text: str) -> None:
    data = report_bytes(hostile, "docx", title=hostile_text, question=hostile_text, date=hostile_text,
                        text=hostile_text, leave_out=("profiles", "steps"))  # fmt: skip
    found = docx.Document(io.BytesIO(data))
    text = "\n".join(item.text for item in found.paragraphs)
    assert not {"\u202e", "\u2066", "\x1b", "\ufffe"} & set(text)
    links = [rel for rel in found.part.rels.values() if rel.is_external]
    assert not links
    if len(hostile_text) < 100 and hostile_text.isprintable():
        assert styled(found, "Title") == [hostile_text]

"""What is taken along: the bytes of a figure, a table or a report, and the answer to the page that asks."""

from __future__ import annotations

import csv
import io
import xml.etree.ElementTree as ET
import zipfile
from collections.abc import Callable
from typing import Any

import pytest

import routeheat as rh
from routeheat_widgets._export import file_name, take
from routeheat_widgets._model import read_model
from routeheat_widgets._payload import view_content, view_named


def taken(text: str, view: str, what: str, form: str, **keywords: Any) -> Any:
    model = read_model(text, 1)
    picture = view_content(model, view_named(view), {}, 600.0, None).picture
    return take(model, picture, {}, what, form, **keywords)


def ask(desk: Any, monkeypatch: pytest.MonkeyPatch, **message: Any) -> tuple[dict[str, Any], list[bytes] | None]:
    answers: list[tuple[dict[str, Any], list[bytes] | None]] = []
    monkeypatch.setattr(desk, "send", lambda content, buffers=None: answers.append((content, buffers)))
    desk._receive(desk, {"kind": "take", "client": "page", "serial": 4, **message}, [])
    return answers[0]


def test_a_figure_as_svg_is_drawn_for_print(sheet_text: str) -> None:
    found = taken(sheet_text, "routes", "figure", "svg", width="174 mm")
    root = ET.fromstring(found.data)
    assert float(root.attrib["width"].removesuffix("pt")) == pytest.approx(174 / 25.4 * 72, abs=0.5)
    assert found.name == "routes_to_ACD_s_174mm.svg"


def test_a_figure_as_pdf_has_one_page_of_its_width(sheet_text: str) -> None:
    pypdf = pytest.importorskip("pypdf")
    found = taken(sheet_text, "steps", "figure", "pdf")
    pages = pypdf.PdfReader(io.BytesIO(found.data)).pages
    assert len(pages) == 1
    assert float(pages[0].mediabox.width) == pytest.approx(84 / 25.4 * 72, abs=0.5)


def test_a_figure_as_png_has_the_pixels_of_print(sheet_text: str) -> None:
    data = taken(sheet_text, "heat", "figure", "png").data
    assert data[:8] == b"\x89PNG\r\n\x1a\n"
    assert int.from_bytes(data[16:20], "big") == pytest.approx(84 / 25.4 * 600, abs=2)


def test_a_table_as_csv_opens_in_a_spreadsheet_as_utf_8(sheet_text: str) -> None:
    found = taken(sheet_text, "known", "table", "csv")
    assert found.data.startswith(b"\xef\xbb\xbf")
    rows = list(csv.reader(io.StringIO(found.data.decode("utf-8-sig"), newline="")))
    assert rows[0][0] == "row"
    assert [row[0] for row in rows[1:5]] == ["K1", "K2", "K3", "K4"]
    assert found.name == "known_heats.csv"


def test_another_table_of_the_view_can_be_chosen(sheet_text: str) -> None:
    first, second = (taken(sheet_text, "routes", "table", "csv", index=n) for n in (0, 1))
    assert first.data != second.data
    assert second.name == "routes_to_ACD_s_2.csv"


def test_a_workbook_has_a_sheet_for_every_table(sheet_text: str) -> None:
    openpyxl = pytest.importorskip("openpyxl")
    book = openpyxl.load_workbook(io.BytesIO(taken(sheet_text, "typed", "table", "xlsx").data))
    assert len(book.sheetnames) == 5
    assert book.worksheets[1]["A2"].value is not None


def test_a_report_is_made_in_every_form(sheet_text: str) -> None:
    pypdf = pytest.importorskip("pypdf")
    page = taken(sheet_text, "routes", "report", "html")
    assert page.data.lstrip().lower().startswith(b"<!doctype html")
    assert page.name == "report_routes_to_ACD_s.html"
    document = zipfile.ZipFile(io.BytesIO(taken(sheet_text, "routes", "report", "docx").data))
    assert "word/document.xml" in document.namelist()
    assert len(pypdf.PdfReader(io.BytesIO(taken(sheet_text, "routes", "report", "pdf").data)).pages) > 1


def test_a_view_without_a_figure_says_so(sheet_text: str) -> None:
    with pytest.raises(rh.RouteheatError, match="no figure"):
        taken(sheet_text, "typed", "figure", "svg")


@pytest.mark.parametrize(("what", "form"), [("figure", "gif"), ("table", "pdf"), ("report", "svg"), ("sheet", "txt")])
def test_unknown_forms_are_refused(sheet_text: str, what: str, form: str) -> None:
    with pytest.raises(rh.UnknownName):
        taken(sheet_text, "routes", what, form)


def test_what_stands_in_for_a_broken_line_is_not_taken_along(sheet_text: str) -> None:
    model = read_model(sheet_text.replace("dH -550", "dH -5x50"), 2, read_model(sheet_text, 1))
    picture = view_content(model, view_named("routes"), {}, 600.0, None).picture
    for what, form in (("figure", "svg"), ("table", "csv"), ("report", "html")):
        with pytest.raises(rh.RouteheatError, match="broken"):
            take(model, picture, {}, what, form)


@pytest.mark.parametrize(
    ("words", "name"),
    [("route A", "route_A"), ("../../etc/passwd", "etc_passwd"), ("a\x00b\u202ec", "a_b_c"), ("...", "sheet"),
     ("Größe <b>1</b>", "Größe_b_1_b"), ("x" * 300, "x" * 60), ("CON: \\ / | ?", "CON")],
)  # fmt: skip
def test_names_of_files_are_harmless(words: str, name: str) -> None:
    assert file_name(words) == name


def test_the_asking_page_gets_the_bytes(
    make_desk: Callable[..., Any], sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    content, buffers = ask(make_desk(text=sheet_text), monkeypatch, what="figure", form="svg", width="84 mm")
    assert (content["client"], content["serial"], content["mime"]) == ("page", 4, "image/svg+xml")
    assert buffers is not None
    assert ET.fromstring(buffers[0]).tag.endswith("svg")


def test_the_asking_page_gets_the_reason(
    make_desk: Callable[..., Any], sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    desk = make_desk(text=sheet_text, view="typed")
    content, buffers = ask(desk, monkeypatch, what="figure", form="svg")
    assert "no figure" in content["error"]
    assert buffers is None
    assert desk.last_error is None


def test_a_failure_while_making_a_file_is_seen(
    make_desk: Callable[..., Any], sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    from routeheat_widgets import _core

    def broken(*_: object, **__: object) -> None:
        raise ZeroDivisionError("deliberate")

    desk = make_desk(text=sheet_text)
    monkeypatch.setattr(_core, "take", broken)
    content, _ = ask(desk, monkeypatch, what="report", form="html")
    assert content["error"] == "deliberate"
    assert isinstance(desk.last_error, ZeroDivisionError)
    assert "deliberate" in desk.payload["error"]


def test_the_payload_says_what_can_be_taken(sheet_text: str) -> None:
    model = read_model(sheet_text, 1)
    assert view_content(model, view_named("routes"), {}, 600.0, None).content["take"]["figures"] != []
    assert view_content(model, view_named("typed"), {}, 600.0, None).content["take"]["figures"] == []

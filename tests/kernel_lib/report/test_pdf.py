"""The report as PDF, opened again by two PDF readers."""

from __future__ import annotations

import io
from typing import Any

import numpy as np
import pypdf
import pypdfium2
import pytest

from routeheat.chem.route import Sheet
from routeheat.draw.glyphs import LACKING_NOTE
from routeheat.report.sections import PARTS
from routeheat.report.write import report_bytes


@pytest.fixture(scope="module")
def content(amine: Sheet) -> bytes:
    return report_bytes(amine, "pdf", title="Three ways", question="Which?", date="1 May")


@pytest.fixture(scope="module")
def reader(content: bytes) -> Any:
    return pypdf.PdfReader(io.BytesIO(content))


@pytest.fixture(scope="module")
def texts(reader: Any) -> list[str]:
    return [page.extract_text() for page in reader.pages]


def test_pages_are_a4_and_numbered(reader: Any, texts: list[str]) -> None:
    assert 16 <= len(reader.pages) <= 25
    for number, (page, text) in enumerate(zip(reader.pages, texts, strict=True), 1):
        assert (round(float(page.mediabox.width)), round(float(page.mediabox.height))) == (595, 842)
        assert str(number) in (text.splitlines()[0], text.splitlines()[-1])


def test_text_of_every_section_is_found(texts: list[str]) -> None:
    whole = "\n".join(texts)
    for part in PARTS:
        if part.name not in ("combinations", "reconciled"):
            assert part.heading in whole
    assert "Three ways" in texts[0]
    assert "−743 ± 23" in whole
    assert 'route A "nitration, hydrogenation" makes AMI(s)' in whole


def test_fonts_are_embedded(reader: Any) -> None:
    seen = set()
    for page in reader.pages:
        for font in page["/Resources"]["/Font"].values():
            found = font.get_object()
            if found["/Subtype"] == "/TrueType":
                assert "/FontFile2" in found["/FontDescriptor"]
                seen.add(found["/BaseFont"])
    assert any("DejaVuSans-Bold" in name for name in seen)
    used = "".join(str(page.get_contents().get_data()) for page in reader.pages)
    standard = [name for page in reader.pages for name, font in page["/Resources"]["/Font"].items()
                if font.get_object()["/Subtype"] == "/Type1"]  # fmt: skip
    for name in set(standard):
        # the library lists one of the standard fonts on every page; no text may be set in it
        assert not _sets_text(used, name)


def _sets_text(stream: str, font: str) -> bool:
    shown = [piece.partition(" ET")[0] for piece in stream.split(f"{font} ")[1:]]
    return any("Tj" in piece.split(" Tf", 1)[-1].split(" Tf")[0] for piece in shown)


def test_figures_are_vectors_with_real_text(reader: Any, texts: list[str]) -> None:
    for page in reader.pages:
        assert not list(page.images)
    page = next(text for text in texts if "Figure 1." in text)
    assert "−580 ± 21" in page
    assert "A, nitration" in page


def test_headings_stand_in_the_outline_and_never_alone_at_the_foot(reader: Any, texts: list[str]) -> None:
    titles = [item.title for item in reader.outline if not isinstance(item, list)]
    assert titles == [part.heading for part in PARTS if part.name not in ("combinations", "reconciled")]
    headings = {*titles, "Route A, nitration, hydrogenation", "Route B, bromination, amination"}
    for number, text in enumerate(texts, 1):
        lines = [line for line in text.splitlines() if line != str(number)]
        assert lines[-1] not in headings
        assert not lines[-1].startswith("Table")


def test_headers_of_long_tables_are_repeated(texts: list[str]) -> None:
    assert sum("as typed" in text and "datum" in text for text in texts) >= 2


def test_nothing_is_printed_into_the_margins(content: bytes) -> None:
    for page in pypdfium2.PdfDocument(content):
        grey = np.asarray(page.render(scale=1).to_pil().convert("L"))
        ink = grey < 200
        assert not ink[:, :50].any()
        assert not ink[:, -50:].any()
        assert not ink[:50].any()
        assert not ink[-25:].any()


def test_metadata_is_fixed(reader: Any) -> None:
    assert reader.metadata.title == "Three ways"
    assert reader.metadata.creation_date.year == 2000
    assert reader.trailer["/Root"]["/Lang"] == "en"


def test_the_same_input_gives_the_same_bytes(content: bytes, amine: Sheet) -> None:
    assert report_bytes(amine, "pdf", title="Three ways", question="Which?", date="1 May") == content


def test_hostile_texts_come_out_as_harmless_text(hostile: Sheet, hostile_text: str) -> None:
    data = report_bytes(hostile, "pdf", title=hostile_text, question=hostile_text, date=hostile_text,
                        text=hostile_text)  # fmt: skip
    found = pypdf.PdfReader(io.BytesIO(data))
    root = found.trailer["/Root"].get_object()
    assert "/OpenAction" not in root
    assert "/JavaScript" not in root.get("/Names", {})
    for page in found.pages:
        assert not page.get("/Annots")
    text = "\n".join(page.extract_text() for page in found.pages)
    if "script" in hostile_text:
        assert hostile_text in text
    if "\u4e2d" in hostile_text:
        assert LACKING_NOTE in text

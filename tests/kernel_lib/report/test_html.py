"""The report as HTML: valid, self-contained, accessible, harmless."""

from __future__ import annotations

import base64
import itertools
import re
import xml.etree.ElementTree as ElementTree
from typing import Any

import html5lib
import pytest

from routeheat.chem.route import Sheet
from routeheat.report.html import stylesheet
from routeheat.report.write import report_bytes

_VOID_OF_PRESENTATION = {"align", "bgcolor", "border", "cellpadding", "cellspacing", "valign", "width", "height"}


def parsed(data: bytes) -> Any:
    """The page read by the HTML standard's algorithm; any parse error raises."""
    return html5lib.HTMLParser(strict=True, namespaceHTMLElements=False).parse(data.decode("utf-8"))


@pytest.fixture(scope="module", params=["amine", "amide", "mixed", "whole"])
def page(request: pytest.FixtureRequest) -> Any:
    return parsed(report_bytes(request.getfixturevalue(request.param), "html", question="Which?", date="1 May"))


def test_the_page_is_valid_and_has_the_parts_of_a_page(page: Any) -> None:
    assert page.get("lang") == "en"
    assert page.find("head/title").text
    assert len(page.findall(".//h1")) == 1
    assert len(page.findall(".//main")) == 1
    ids = [item.get("id") for item in page.iter() if item.get("id")]
    assert len(set(ids)) == len(ids)
    assert all(re.fullmatch(r"[a-z][\w-]*", name) for name in ids)
    assert not [item.tag for item in page.iter() if set(item.keys()) & _VOID_OF_PRESENTATION]
    for item in page.iter():
        for reference in (item.get("aria-labelledby") or "").split():
            assert reference in ids


def test_headings_go_down_one_level_at_a_time(page: Any) -> None:
    levels = [int(item.tag[1]) for item in page.iter() if re.fullmatch(r"h[1-6]", str(item.tag))]
    assert levels[0] == 1
    assert all(after - before <= 1 for before, after in itertools.pairwise(levels))


def test_links_of_the_contents_lead_to_the_sections(page: Any) -> None:
    ids = {item.get("id") for item in page.iter()}
    links = [item.get("href") for item in page.iter("a")]
    assert len(links) == len(page.findall(".//section"))
    assert all(link.startswith("#") and link[1:] in ids for link in links)


def test_every_picture_has_words_and_every_table_headers(page: Any) -> None:
    pictures = page.findall(".//img")
    assert pictures
    assert all(len(item.get("alt")) > 20 for item in pictures)
    for table in page.findall(".//table"):
        assert table.get("aria-labelledby")
        assert all(item.get("scope") == "col" for item in table.findall("thead/tr/th"))
        assert all(item.get("scope") == "row" for item in table.findall("tbody/tr/th"))
        assert len({len(list(row)) for row in table.iter("tr")}) == 1


def test_nothing_runs_and_nothing_is_fetched(page: Any) -> None:
    for item in page.iter():
        assert item.tag not in ("script", "link", "iframe", "object", "embed", "form", "base")
        assert not [name for name in item.keys() if name.startswith("on")]  # noqa: SIM118
        for name in ("src", "srcset"):
            assert (item.get(name) or "data:").startswith("data:image/svg+xml;base64,") or item.get(name) is None
    assert "url(" not in stylesheet()
    assert "@import" not in stylesheet()


def test_pictures_are_well_formed_and_narrow_ones_fit_a_phone(page: Any) -> None:
    for source, narrow in [(item.get("src"), False) for item in page.iter("img")] + [
        (item.get("srcset"), True) for item in page.iter("source")
    ]:
        root = ElementTree.fromstring(base64.b64decode(source.partition(",")[2]))
        assert float(root.attrib["width"]) <= (356 if narrow else 880)


def test_the_same_input_gives_the_same_bytes(mixed: Sheet) -> None:
    assert report_bytes(mixed, "html") == report_bytes(mixed, "html")


def test_hostile_texts_come_out_as_harmless_text(hostile: Sheet, hostile_text: str) -> None:
    data = report_bytes(hostile, "html", title=hostile_text, question=hostile_text, date=hostile_text,
                        text=hostile_text)  # fmt: skip
    page = parsed(data)
    assert not list(page.iter("script"))
    assert not list(page.iter("i")) or "<i>" not in hostile_text
    if "<script>" in hostile_text:
        assert "<script>alert(1)</script>" in "".join(page.itertext())


@pytest.mark.parametrize(("ink", "paper"), [("#1a1a1a", "#ffffff"), ("#4a4a4a", "#ffffff"), ("#0b5394", "#ffffff"),
                                            ("#1a1a1a", "#f5f5f5")])  # fmt: skip
def test_text_has_enough_contrast(ink: str, paper: str) -> None:
    assert ink in stylesheet()
    assert paper in stylesheet()
    light, dark = sorted((_luminance(paper), _luminance(ink)), reverse=True)
    assert (light + 0.05) / (dark + 0.05) >= 4.5  # WCAG 2.1, 1.4.3


def test_no_other_colours_are_used() -> None:
    assert set(re.findall(r"#[0-9a-f]{3,6}\b", stylesheet())) == {"#1a1a1a", "#4a4a4a", "#0b5394", "#ffffff", "#f5f5f5"}


def _luminance(colour: str) -> float:
    channels = [int(colour[start : start + 2], 16) / 255 for start in (1, 3, 5)]
    linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in channels]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]

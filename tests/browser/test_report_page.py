"""The HTML report in a real browser: silent, self-contained, accessible, readable on a phone and on paper."""

from __future__ import annotations

import io
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pypdf
import pytest

import routeheat as rh
from routeheat.report.write import write_report

pytestmark = pytest.mark.browser
SHEETS = Path(__file__).parents[1] / "published" / "sheets"


@pytest.fixture(scope="module", params=["amine", "amide"])
def report(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Path:
    target = tmp_path_factory.mktemp("report") / f"{request.param}.html"
    return write_report(rh.read_sheet(SHEETS / f"{request.param}.txt"), target, question="<script>alert(1)</script>")


@pytest.fixture(params=[1280, 390])
def opened(request: pytest.FixtureRequest, browser: Any, report: Path) -> Iterator[tuple[Any, list[str]]]:
    page = browser.new_page(viewport={"width": request.param, "height": 844})
    said: list[str] = []
    page.on("console", lambda message: said.append(message.text))
    page.on("pageerror", lambda error: said.append(str(error)))
    page.on("request", lambda asked: None if asked.url.startswith("data:") else said.append(asked.url))
    page.goto(report.as_uri())
    said.remove(report.as_uri())
    yield page, said
    page.close()


def test_no_message_and_no_request(opened: tuple[Any, list[str]]) -> None:
    page, said = opened
    page.evaluate("window.scrollTo(0, document.body.scrollHeight)")
    page.wait_for_function("[...document.images].every(image => image.complete && image.naturalWidth > 0)")
    assert said == []


def test_the_page_is_no_wider_than_the_window(opened: tuple[Any, list[str]]) -> None:
    page, _ = opened
    assert page.evaluate("document.documentElement.scrollWidth <= window.innerWidth")


def test_text_of_figures_is_not_scaled_down_on_a_phone(opened: tuple[Any, list[str]]) -> None:
    page, _ = opened
    scale = page.evaluate("Math.min(...[...document.images].map(image => image.clientWidth / image.naturalWidth))")
    assert scale >= 0.98


def test_an_accessibility_checker_finds_nothing(opened: tuple[Any, list[str]]) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright")
    page, _ = opened
    # the page's own policy forbids scripts, so the checker runs in a copy without it
    content = page.content()
    page.set_content(content.replace('http-equiv="Content-Security-Policy"', 'name="policy"'))
    found = axe.Axe().run(page)
    assert found.violations_count == 0, found.generate_report()


def test_it_prints_on_a4_with_repeated_headers(opened: tuple[Any, list[str]]) -> None:
    page, _ = opened
    printed = pypdf.PdfReader(io.BytesIO(page.pdf(prefer_css_page_size=True)))
    assert round(float(printed.pages[0].mediabox.width)) in (594, 595, 596)
    texts = [item.extract_text() for item in printed.pages]
    assert sum("datum" in text and "as typed" in text for text in texts) >= 2
    assert "Contents" not in texts[0]


@pytest.mark.parametrize("report", ["amine"], indirect=True)
def test_what_is_folded_on_the_screen_is_printed(opened: tuple[Any, list[str]]) -> None:
    page, _ = opened
    assert not page.get_by_text("energy equivalent").first.is_visible()
    printed = pypdf.PdfReader(io.BytesIO(page.pdf(prefer_css_page_size=True)))
    assert sum(item.extract_text().count("energy equivalent") for item in printed.pages) == 7

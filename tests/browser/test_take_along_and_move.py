"""Files that arrive, values that are moved and written, rows that are searched: the desk in JupyterLab."""

from __future__ import annotations

import io
import xml.etree.ElementTree as ET
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

pytestmark = pytest.mark.browser

SHEET = """uncertainty k = 2

species
  SUB  C7H8O(l)
  ACD  C7H6O2(s)

known
  [K1] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol | source "table"
  [K2] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol | source "table"
  [K3] combustion of C2H2(g) to CO2(g), H2O(l) | dH -1299.4 ± 0.8 kJ/mol | source "old calorimeter"
  [K4] 2 C(s, graphite) + H2(g) -> C2H2(g) | dH 227.4 ± 1.5 kJ/mol

target [T] 2 C(s, graphite) + H2(g) -> C2H2(g)

route A "in one go" makes ACD
  [A1] SUB + O2(g) -> ACD + H2O(l)
       dH -550 ± 30 kJ/mol | yield 80 % | T 60 degC | feed 4 h  # 🧪 as run
       conc 0.9 mol/kg | cp 2.0 kJ/(kg K) | Xac 25 % | MTT 118 degC | TD24 140 degC
       U 350 W/(m2 K) | area 3.0 m2 | jacket 15 degC
"""
VALUE = "document.querySelector('.rhd-text').value"


@pytest.fixture
def show(sight: Any, request: pytest.FixtureRequest) -> Callable[[str], Any]:
    """Opens a desk at a view."""

    def open_(view: str) -> Any:
        name = f"{request.node.name}.ipynb"
        made = f"desk = rw.RouteDesk(text={SHEET!r}, view={view!r})"
        sight.lab.write(name, f"import routeheat_widgets as rw\n{made}\ndesk")
        sight.open(name)
        sight.run_all()
        sight.page.wait_for_selector(f".rhd-tabs [data-view='{view}'][aria-selected='true']")
        return sight

    return open_


def clean(sight: Any) -> None:
    assert sight.strangers == []
    assert sight.complaints == []


def downloaded(sight: Any, label: str) -> tuple[str, bytes]:
    with sight.page.expect_download(timeout=30_000) as coming:
        sight.page.click(f".rhd-take button[aria-label='{label}']")
    return coming.value.suggested_filename, Path(coming.value.path()).read_bytes()


def move(sight: Any, key: str, value: str) -> None:
    """Move a slider as a hand would: the browser's own events."""
    sight.page.locator(f".rhd-move [data-slide='{key}']").fill(value)


def test_a_figure_and_a_table_arrive(show: Callable[[str], Any]) -> None:
    sight = show("routes")
    name, data = downloaded(sight, "Take the figure as SVG")
    assert name == "route_A_84mm.svg"
    assert ET.fromstring(data).tag.endswith("svg")
    name, data = downloaded(sight, "Take the figure as PNG")
    assert data.startswith(b"\x89PNG")
    name, data = downloaded(sight, "Take the table as CSV")
    assert name == "route_A.csv"
    assert b"A1" in data
    assert not list(sight.lab.folder.glob("route_A*")), "the kernel saved a file"
    clean(sight)


def test_a_report_arrives_and_is_refused_while_a_line_is_broken(show: Callable[[str], Any]) -> None:
    pypdf = pytest.importorskip("pypdf")
    sight = show("typed")
    assert sight.page.locator("button[aria-label='Take the figure as SVG']").is_disabled()
    name, data = downloaded(sight, "Take the report as PDF")
    assert name == "report_routes_to_ACD_s.pdf"
    assert len(pypdf.PdfReader(io.BytesIO(data)).pages) >= 1
    sight.ask("desk.text = desk.text.replace('dH -550', 'dH -5x50')")
    sight.page.wait_for_function("document.querySelector('[aria-label=\"Take the report as PDF\"]').disabled")
    clean(sight)


def test_a_picture_is_copied_where_the_page_may(show: Callable[[str], Any]) -> None:
    sight = show("routes")
    sight.page.context.grant_permissions(["clipboard-read", "clipboard-write"])
    sight.page.click("button[aria-label='Copy the figure as PNG']")
    sight.page.wait_for_function("document.querySelector('.rhd-take').textContent.includes('copied as PNG')")
    sight.page.evaluate("Object.defineProperty(navigator, 'clipboard', {value: undefined})")
    sight.page.click("button[aria-label='Copy the figure as PNG']")
    sight.page.wait_for_function("document.querySelector('.rhd-take').textContent.includes('may not copy pictures')")
    clean(sight)


def test_a_slider_moves_the_strip_and_not_the_text(show: Callable[[str], Any]) -> None:
    sight = show("scale")
    page = sight.page
    before = page.inner_html(".rhd-figure")
    move(sight, "T", "75")
    page.wait_for_function("document.querySelector('.rhd-figure').textContent.includes('A1 moved')")
    assert page.inner_html(".rhd-figure") != before
    assert page.input_value("[data-key='T']") == "75"
    assert page.evaluate(VALUE) == SHEET
    assert sight.ask("print('T 60' in desk.text)") == "True"
    page.click("text=Back to what is typed")
    page.wait_for_function("!document.querySelector('.rhd-figure').textContent.includes('A1 moved')")
    page.wait_for_function("document.querySelector(\"[data-slide='T']\").value === '60'")
    clean(sight)


def test_moved_values_are_written_as_one_edit_that_undo_takes_back(show: Callable[[str], Any]) -> None:
    sight = show("scale")
    page = sight.page
    move(sight, "feed", "6")
    page.fill("[data-key='size']", "500")
    page.keyboard.press("Enter")
    page.wait_for_function("document.querySelector('.rhd-moves').textContent.includes('feed 6 h, size 500 mol')")
    page.click(".rhd-write")
    wanted = SHEET.replace("feed 4 h", "feed 6 h").replace("jacket 15 degC", "jacket 15 degC | size 500 mol")
    page.wait_for_function(f"(text) => {VALUE} === text", arg=wanted)
    page.wait_for_function("document.querySelector('.rhd-write').disabled")
    assert sight.ask("print(desk.sheet.routes['A'].step('A1').row.setting('size').text)") == "500 mol"
    assert page.evaluate("document.activeElement.classList.contains('rhd-text')")
    page.keyboard.press("Control+z")
    page.wait_for_function(f"(text) => {VALUE} === text", arg=SHEET)
    page.wait_for_function("!document.querySelector('.rhd-write').disabled")
    clean(sight)


def test_the_search_filters_rows_without_the_kernel(show: Callable[[str], Any]) -> None:
    sight = show("known")
    page = sight.page
    page.wait_for_function("document.querySelectorAll('.rhd-mark').length >= 4")
    stamp = sight.ask("print(desk.payload['stamp'])")
    page.fill(".rhd-search input", "calorimeter combustion")
    assert page.locator(".rhd-tables tbody tr:visible").count() == 1
    assert "K3" in page.locator(".rhd-tables tbody tr:visible").inner_text()
    assert "1 of 4 rows" in page.inner_text(".rhd-search")
    page.fill(".rhd-search input", "")
    assert page.locator(".rhd-tables tbody tr:visible").count() == 4
    assert sight.ask("print(desk.payload['stamp'])") == stamp
    clean(sight)

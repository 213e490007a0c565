"""Hostile texts as every name, title, source and note, into every file this layer writes."""

from __future__ import annotations

import csv
import io
import json
import re
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import openpyxl
import pytest
from nbconvert.filters import markdown2html

import routeheat as rh
from routeheat.present.markup import Run
from routeheat.present.table import Column, Reading, Table
from routeheat.report.archive import Archived, read_json, write_json
from routeheat.report.latex import latex
from routeheat.report.markdown import markdown
from routeheat.report.spreadsheet import read_known_heats, write_known_heats
from routeheat.report.tables import csv_text
from routeheat.report.workbook import write_workbook

HOSTILE = [
    "<script>alert(1)</script>",
    '=HYPERLINK("http://example.org","x")',
    "@SUM(1+1)*cmd|' /C calc'!A0",
    "$\\href{javascript:x}{y}$",
    "%{customdata}",
    "\u202egnp.exe\u2066",
    "x" * 10_000,
    "a\r\nb\tc\x00\x1b[31m",
    "']]><!--&quot;",
    "{{7*7}} ${7*7} `id`",
    "\ud800",
]
IDS = ["script", "hyperlink", "command", "href", "template", "direction", "long", "control", "markup", "braces", "half"]


def _table(text: str) -> Table:
    columns = (Column(text, text, text), Column("rich", (Run(text, "sub"),)), Column("heat", "heat", "kJ/mol"))
    rows = ((text, (Run(text, "sup"),), Reading(None, None, words=text)), (text, text, Reading(1.0, None)))
    return Table(text, columns, rows, (text,), frozenset([1]))


def _combination(source: str) -> rh.Combination:
    row = rh.row("K1", "formation of H2O(l)", "-285.830 ± 0.040 kJ/mol (k = 2)")
    # set directly: the reader of typed rows would refuse most of these texts
    return rh.combine(rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), [replace(row, source=source)])


@pytest.fixture(params=HOSTILE, ids=IDS)
def text(request: pytest.FixtureRequest) -> str:
    return str(request.param)


def _cells(path: Path) -> Iterator[object]:
    for page in openpyxl.load_workbook(path):
        for row in page.iter_rows():
            for cell in row:
                if cell.value is not None:
                    assert cell.hyperlink is None
                    assert cell.quotePrefix or not (isinstance(cell.value, str) and re.match(r"\s*[=+\-@]", cell.value))
                    yield cell.value


def test_csv(text: str) -> None:
    for row in csv.reader(io.StringIO(csv_text(_table(text)), newline="")):
        assert not [cell for cell in row if re.match(r"\s*[=+\-@]", cell)]
        assert not [cell for cell in row if re.search(r"[\x00-\x1f\u202e\u2066]", cell)]


def test_workbook(text: str, tmp_path: Path) -> None:
    assert list(_cells(write_workbook(_table(text), tmp_path / "x.xlsx")))


def test_markdown(text: str) -> None:
    page = markdown2html(markdown(_table(text)))
    tags = {tag.lower() for tag in re.findall(r"</?([a-zA-Z][a-zA-Z0-9]*)", page)}
    assert tags <= {"p", "strong", "table", "thead", "tbody", "tr", "th", "td", "sub", "sup", "ul", "li"}
    assert not re.search(r"[\x00-\x09\x0b-\x1f\u202e\u2066]", page)


def test_latex(text: str) -> None:
    source = latex(_table(text))
    commands = set(re.findall(r"\\([a-zA-Z]+)", source))
    assert not commands & {"href", "input", "write", "def", "cmd"}
    assert not re.search(r"(?<!\\)[$%#]", source)
    assert source.count("\\begin{") == source.count("\\end{") == 2


def test_frame(text: str) -> None:
    made = _combination(text).to_frame()
    assert not re.search(r"[\x00-\x1f\u202e\u2066]", str(made["source"][0]))


def test_json(text: str) -> None:
    found = _combination(text)
    written = write_json(found)
    written.encode("utf-8")
    assert not re.search(r"[\x00-\x09\x0b-\x1f\u202e\u2066]", written)
    again = read_json(written)
    assert isinstance(again, Archived)
    assert again.tables() == found.tables()


TYPED = [text for text in HOSTILE if '"' not in text and len(text) < 1000 and text.isprintable()]


@pytest.mark.parametrize("text", TYPED)
def test_a_whole_sheet(text: str, tmp_path: Path) -> None:
    sheet = rh.read_sheet(f"""
uncertainty k = 2
species
  NB C6H5NO2(l) name "{text}" | note "{text}"
known
  [K1] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol (k = 2) | source "{text}" | note "{text}"
route A "{text}" makes NB
  [A1] C6H6(l) + HNO3(l) -> NB + H2O(l)
       dH -145 ± 8 kJ/mol | yield 96 ± 2 % | source "{text}" | note "{text}"
""")
    assert text in list(_cells(write_workbook(sheet, tmp_path / "x.xlsx")))
    assert read_json(write_json(sheet)) == sheet
    for ending in ("csv", "xlsx"):
        path = write_known_heats(sheet.known, tmp_path / f"known.{ending}")
        assert read_known_heats(path) == sheet.known
    assert json.loads(write_json(rh.profile(sheet.routes["A"])))["result"]["route"] == "A"

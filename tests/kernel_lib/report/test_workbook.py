"""Workbooks, opened by another program's reader (openpyxl)."""

from __future__ import annotations

import io
import time
import zipfile
from fractions import Fraction
from pathlib import Path
from typing import Any

import openpyxl
import pytest

import routeheat as rh
from routeheat.present.table import Column, Reading, Table
from routeheat.report.workbook import workbook_bytes, write_workbook

SHEET = """
uncertainty k = 2

known
  [K1] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol | source "handbook, page 5"
  [K2] formation of CO2(g) | dH -393.51 kJ/mol

target [T] H2(g) + 1/2 O2(g) -> H2O(l)
target [U] CO(g) + 1/2 O2(g) -> CO2(g)

route A "over carbon dioxide" makes CO2(g)
  [A1] C(s, graphite) + O2(g) -> CO2(g)
       dH -394 ± 2 kJ/mol | yield 90 ± 1 % | source "=cmd|' /C calc'!A0"
route B makes CO2(g)
  [B1] CO(g) + 1/2 O2(g) -> CO2(g) | yield 95 ± 1 %
"""


@pytest.fixture
def book(tmp_path: Path) -> Any:
    return openpyxl.load_workbook(write_workbook(rh.read_sheet(SHEET), tmp_path / "heats.xlsx"))


def _rows(page: Any) -> list[tuple[Any, ...]]:
    return list(page.iter_rows(values_only=True))


def test_there_is_a_worksheet_for_each_thing(book: Any) -> None:
    assert book.sheetnames == ["routes", "steps", "combinations", "known heats", "sources", "cautions"]


def test_numbers_are_numbers_with_their_unit_in_the_header(book: Any) -> None:
    title, header, step, *_ = _rows(book["steps"])
    cells = dict(zip(header, step, strict=True))
    assert title[0].startswith("Route A, over carbon dioxide")
    assert cells["heat / (kJ/mol)"] == pytest.approx(-394 / 0.9)
    assert cells["ΔrH / (kJ/mol)"] == -394
    assert cells["u(ΔrH) / (kJ/mol)"] == 1


def test_what_is_not_entered_is_said_in_words(book: Any) -> None:
    cells = [cell for row in _rows(book["steps"]) for cell in row]
    assert "not entered" in cells
    assert 0 not in cells


def test_combinations_and_targets_out_of_reach(book: Any) -> None:
    cells = [row[0] for row in _rows(book["combinations"])]
    assert any(str(cell).startswith("Ledger of T") for cell in cells)
    assert "out of reach: no exact combination of the known rows" in cells


def test_known_heats_are_shown_with_the_decimals_that_were_typed(book: Any) -> None:
    page = book["known heats"]
    heat = page["C2"]
    assert (page["C1"].value, heat.value, heat.number_format) == ("heat", -285.83, "0.000")


def test_sources_name_their_rows_and_what_has_none(book: Any) -> None:
    rows = [row[:2] for row in _rows(book["sources"])]
    assert ("handbook, page 5", "K1") in rows
    assert ("not stated", "K2") in rows


def test_cautions_hold_the_notes_of_the_other_pages(book: Any) -> None:
    rows = [row[:2] for row in _rows(book["cautions"])]
    assert ("caution", "Values typed are not verified.") in rows
    assert any("B1" in str(text) and "not entered" in str(text) for _, text in rows)


def test_a_text_like_a_formula_stays_text_also_when_it_is_edited(book: Any, tmp_path: Path) -> None:
    cell = next(cell for row in book["sources"].iter_rows() for cell in row if str(cell.value).startswith("=cmd"))
    assert cell.value == "=cmd|' /C calc'!A0"
    assert cell.quotePrefix
    with zipfile.ZipFile(tmp_path / "heats.xlsx") as packed:
        parts = [packed.read(name) for name in packed.namelist()]
    assert not [part for part in parts if b"<f>" in part or b"<hyperlink" in part]


def test_equal_content_gives_equal_bytes_at_any_time(tmp_path: Path) -> None:
    sheet = rh.read_sheet(SHEET)
    first = write_workbook(sheet, tmp_path / "a.xlsx").read_bytes()
    time.sleep(2.1)  # zip archives store times in steps of two seconds
    assert write_workbook(sheet, tmp_path / "a.xlsx").read_bytes() == first


def test_a_result_gives_a_worksheet_for_each_of_its_tables(tmp_path: Path) -> None:
    sheet = rh.read_sheet(SHEET)
    found = rh.combine(sheet.targets["T"], sheet.known)
    pages = openpyxl.load_workbook(write_workbook(found, tmp_path / "t.xlsx")).worksheets
    assert len(pages) == len(found.tables()) == 2
    assert pages[1]["A1"].value == found.ledger.title


def test_names_of_worksheets_are_made_fit() -> None:
    names = ["a/b[c]:*?\\d", "x" * 40, "X" * 40, "History", "''", "\u202e"]
    book = openpyxl.load_workbook(io.BytesIO(workbook_bytes({name: (Table("", (), ()),) for name in names})))
    assert book.sheetnames == [
        "a b c     d", "x" * 31, "X" * 27 + " (2)", "table history", "table", "⟨U+202E⟩",
    ]  # fmt: skip


def test_fractions_are_text_and_long_texts_are_cut_with_a_word(tmp_path: Path) -> None:
    rows = ((Fraction(1, 3), Reading(1.5, None)), ("y" * 40_000, None))
    table = Table("", (Column("x", "x"), Column("h", "h")), rows)
    page = openpyxl.load_workbook(write_workbook(table, tmp_path / "x.xlsx")).worksheets[0]
    assert (page["A2"].value, page["B2"].value, page["C2"].value) == ("1/3", 1.5, "not stated")
    assert page["A3"].value == "y" * 32_000 + "… (8,000 more characters)"

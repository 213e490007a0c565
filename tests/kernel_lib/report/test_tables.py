"""CSV: read back by Python's own reader."""

from __future__ import annotations

import csv
import io
from fractions import Fraction

import pytest

from routeheat.present.table import Column, Reading, Table
from routeheat.report.tables import csv_text, harmless

TABLE = Table(
    "title",
    (Column("row", "row"), Column("c", "coefficient"), Column("heat", "heat", "kJ/mol")),
    (("K1, the first", Fraction(-1, 2), Reading(-5.25, 0.5)),),
    ("a note",),
)


def _read(text: str) -> list[list[str]]:
    return list(csv.reader(io.StringIO(text, newline="")))


def test_header_units_numbers_and_fractions() -> None:
    header, row, *_ = _read(csv_text(TABLE))
    assert header == ["row", "coefficient", "heat / (kJ/mol)", "u(heat) / (kJ/mol)", "heat, remark"]
    assert row == ["K1, the first", "-1/2", "-5.25", "0.5", "standard uncertainty"]


def test_notes_follow_behind_an_empty_line() -> None:
    assert _read(csv_text(TABLE))[2:] == [[], ["a note"]]


def test_lines_end_as_the_standard_says() -> None:
    assert csv_text(TABLE).count("\n") == csv_text(TABLE).count("\r\n") == 4


@pytest.mark.parametrize("text", ["=1+1", "+1+1", "-1+1", "@SUM(A1)", " =1", "\t=1", "\r=1", "＝1", "-2-3", "+x"])
def test_a_text_that_a_spreadsheet_would_run_is_written_with_an_apostrophe(text: str) -> None:
    assert harmless(text) == "'" + text


@pytest.mark.parametrize("text", ["-5.25", "+3", "-1/2", "H2O(l)", "'=1", "", "−5", "a=b"])
def test_other_texts_and_numbers_stay_as_they_are(text: str) -> None:
    assert harmless(text) == text


def test_headers_and_notes_are_made_harmless_too() -> None:
    header, _, note = _read(csv_text(Table("", (Column("x", "=1"),), (), ("@x",))))
    assert (header, note) == (["'=1"], ["'@x"])

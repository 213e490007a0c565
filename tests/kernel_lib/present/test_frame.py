"""Data frames."""

from __future__ import annotations

import math
import sys
from fractions import Fraction

import pytest

import routeheat as rh
from routeheat.present.frame import frame
from routeheat.present.table import Column, Reading, Table

TABLE = Table(
    "title",
    (Column("row", "row"), Column("c", "coefficient"), Column("heat", "heat", "kJ/mol")),
    (("K1", Fraction(3, 2), Reading(-5.25, 0.5)), ("K2", 2, Reading(None, None, words="not entered"))),
    ("a note",),
)


def test_numbers_are_numbers_and_fractions_are_text() -> None:
    made = frame(TABLE)
    assert list(made["coefficient"]) == ["3/2", "2"]
    assert made["heat / (kJ/mol)"].dtype == "float64"
    assert made["u(heat) / (kJ/mol)"][0] == 0.5


def test_an_unknown_number_is_nan_and_the_remark_says_why() -> None:
    made = frame(TABLE)
    assert math.isnan(made["heat / (kJ/mol)"][1])
    assert made["heat, remark"][1] == "not entered"


def test_title_and_notes_are_kept() -> None:
    assert frame(TABLE).attrs == {"title": "title", "notes": ["a note"]}


def test_a_result_gives_the_frame_of_any_of_its_tables() -> None:
    known = [rh.row("K1", "formation of H2O(l)", "-285.830 ± 0.040 kJ/mol (k = 2)")]
    found = rh.combine(rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), known)
    assert list(found.to_frame()["row"]) == ["K1", "target"]
    assert found.to_frame(1).attrs["title"] == found.tables()[1].title


def test_without_pandas_the_error_says_what_to_install(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "pandas", None)
    with pytest.raises(ModuleNotFoundError, match="pip install pandas"):
        frame(TABLE)

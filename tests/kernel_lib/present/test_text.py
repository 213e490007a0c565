from __future__ import annotations

from fractions import Fraction

import pytest

from routeheat.present.markup import Run, plain
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.present.text import cell_text, display_width, render_table, visible, with_unit

TEXT = Column("name", "name")
HEAT = Column("heat", (Run("Δ"), Run("r", "sub"), Run("H", "italic")), "kJ mol⁻¹", "right")


def test_a_whole_table() -> None:
    table = Table(
        "Heats",
        (TEXT, Column("n", "extent", align="right"), HEAT),
        (
            ("A1", Fraction(25, 24), Reading(-145.0, 4.0)),
            ("A2", 1, Reading(None, None, words="not entered")),
            ("A3", None, Reading(-62.25, None)),
            ("total", None, Reading(-207.25, 4.0, at_least=True)),
        ),
        notes=("not entered: A2",),
        strong=frozenset({3}),
    )
    assert render_table(table) == "\n".join(
        (
            "Heats",
            "name   extent  ΔrH / (kJ mol⁻¹), ± k = 2",
            "─────  ──────  ─────────────────────────",
            "A1      25/24               −145.0 ± 8.0",
            "A2          1                not entered",
            "A3                  −62.2 (u not stated)",
            "─────  ──────  ─────────────────────────",
            "total              −207.2 ± at least 8.0",
            "not entered: A2",
        )
    )


@pytest.mark.parametrize(
    ("cell", "shown"),
    [
        (None, ""),
        ((Run("H"), Run("2", "sub"), Run("O")), "H2O"),
        (Fraction(3, 2), "3/2"),
        (-2, "−2"),
        (-0.04, "0.0"),
        (1234.56, "1234.6"),
        (Reading(-163.2, 9.7, k=1), "−163.2 ± 9.7 (k = 1)"),
        (Reading(-163.2, None), "−163.2 (u not stated)"),
        (Reading(None, None, words="out of reach"), "out of reach"),
    ],
)
def test_cell_text(cell: Cell, shown: str) -> None:
    assert cell_text(cell, HEAT) == shown


def test_each_uncertainty_says_its_own_k_where_a_column_has_several() -> None:
    table = Table("", (TEXT, HEAT), (("a", Reading(1.0, 0.5, k=1)), ("b", Reading(2.0, 0.5, k=2))))
    text = render_table(table)
    assert "(k = 1)" in text
    assert "(k = 2)" in text
    assert "± k =" not in text


@pytest.mark.parametrize(
    ("typed", "shown"),
    [
        ("a\nb", "a↵b"),
        ("a\tb", "a b"),
        ("a\x00b", "a⟨U+0000⟩b"),
        ("\u202eabc", "⟨U+202E⟩abc"),
        ("\u2066a\u2069", "⟨U+2066⟩a⟨U+2069⟩"),
        ("a\u200bb", "a⟨U+200B⟩b"),
        ("\ud800", "⟨U+D800⟩"),
        ("Ω ± ⁻¹ 分", "Ω ± ⁻¹ 分"),
    ],
)
def test_visible(typed: str, shown: str) -> None:
    assert visible(typed) == shown


def test_a_cell_cannot_break_or_reorder_its_row() -> None:
    table = Table("", (TEXT, TEXT), (("a\nb", "\u202ec\x1b[31m"),))
    lines = render_table(table).splitlines()
    assert len(lines) == 3
    assert "\u202e" not in lines[2]
    assert "\x1b" not in lines[2]


def test_columns_stay_aligned_with_wide_and_combining_characters() -> None:
    table = Table("", (TEXT, TEXT), (("分子", "|"), ("e\u0301", "|"), ("abcd", "|")))
    lines = render_table(table).splitlines()[2:]
    assert {display_width(line.split("|")[0]) for line in lines} == {6}


def test_long_cells_titles_and_notes_wrap_and_lose_nothing() -> None:
    words = " ".join(f"word{i}" for i in range(60))
    table = Table(words, (TEXT,), ((words,), ("x" * 10_000,)), notes=(words,))
    text = render_table(table)
    assert max(map(len, text.splitlines())) <= 100
    assert text.count("word59") == 3
    assert text.count("x") >= 10_000


@pytest.mark.parametrize(
    ("unit", "shown"),
    [("", "q"), ("%", "q / %"), ("kJ mol⁻¹", "q / (kJ mol⁻¹)"), ("kJ/mol", "q / (kJ/mol)"), ("(g)", "q / (g)")],
)
def test_with_unit(unit: str, shown: str) -> None:
    assert plain(with_unit("q", unit)) == shown


def test_a_table_without_rows_shows_its_header() -> None:
    assert render_table(Table("Empty", (TEXT,), ())) == "Empty\nname\n────"


def test_a_title_with_subscripts_is_written_plain() -> None:
    table = Table((Run("CO"), Run("2", "sub")), (Column("a", "a"),), (("x",),))
    assert render_table(table).startswith("CO2\n")

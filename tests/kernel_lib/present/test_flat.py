"""The rectangle of a table: what every file format writes."""

from __future__ import annotations

from fractions import Fraction

from routeheat.present.flat import flat
from routeheat.present.markup import Run
from routeheat.present.table import Cell, Column, Reading, Table


def _column(*cells: Cell, unit: str = "", header: str = "x") -> Table:
    return Table("", (Column("x", header, unit),), tuple((cell,) for cell in cells))


def test_a_reading_becomes_value_uncertainty_and_remark() -> None:
    table = _column(Reading(-5.25, 0.5), Reading(1.0, 0.25, at_least=True), unit="kJ/mol", header="heat")
    content = flat(table)
    assert [head.text for head in content.heads] == ["heat / (kJ/mol)", "u(heat) / (kJ/mol)", "heat, remark"]
    assert content.rows == ((-5.25, 0.5, "standard uncertainty"), (1.0, 0.25, "at least"))


def test_what_is_unknown_stands_in_words_where_a_number_would() -> None:
    content = flat(_column(Reading(None, None, words="out of reach"), Reading(2.0, None), Reading(1.0, 0.1)))
    assert content.rows[0] == ("out of reach", None, "out of reach")
    assert content.rows[1] == (2.0, "not stated", "uncertainty not stated")


def test_an_estimate_says_so_in_the_remark() -> None:
    content = flat(_column(Reading(-5.0, 20.0, estimated=True), Reading(-5.0, None, estimated=True)))
    assert [row[2] for row in content.rows] == ["standard uncertainty, estimated", "uncertainty not stated, estimated"]


def test_fractions_are_text_and_whole_numbers_are_numbers() -> None:
    assert flat(_column(Fraction(-3, 2), Fraction(4), 7)).rows == (("-3/2",), (4,), (7,))


def test_a_whole_number_beyond_double_precision_is_text() -> None:
    assert flat(_column(2**53 + 1)).rows == ((str(2**53 + 1),),)


def test_a_float_that_is_no_number_is_said_in_words() -> None:
    assert flat(_column(float("nan"), float("inf"))).rows == (("not a number",), ("not a number",))


def test_rich_text_loses_its_styles_and_hidden_characters_are_shown() -> None:
    rich = (Run("H"), Run("2", "sub"), Run("O\u202e"))
    assert flat(_column(rich, "a\nb")).rows == (("H2O⟨U+202E⟩",), ("a↵b",))


def test_no_two_columns_share_a_header_and_an_empty_one_takes_its_key() -> None:
    columns = (Column("a", "heat"), Column("b", "heat"), Column("remark", ""))
    content = flat(Table("", columns, ()))
    assert [head.text for head in content.heads] == ["heat", "heat (2)", "remark"]

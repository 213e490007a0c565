"""Sections: margins, comments, misspelt words, targets, and pasted text."""

import textwrap

import pytest

from routeheat.chem.route import Sheet
from routeheat.notation.build import build_sheet
from routeheat.notation.faults import render

ROW = "[K1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -285.8 kJ/mol"
SHEET = f"""\
species
  X  C2H6(g)
known
  {ROW}
target [T] H2O(l) -> H2(g) + 1/2 O2(g)
route A makes H2O(g)
  [A1] H2O(l) -> H2O(g) | dH 44 kJ/mol
"""


def clean(text: str) -> Sheet:
    sheet, faults = build_sheet(text)
    assert [fault for fault in faults if fault.severity == "fault"] == []
    return sheet


@pytest.mark.parametrize("text", ["", "   \n\n", "# only\n  # comments", "#", "\ufeff", "species\n", "known", "\r\n"])
def test_nothing_is_an_empty_sheet(text: str) -> None:
    sheet, faults = build_sheet(text)
    assert faults == ()
    assert (dict(sheet.species), len(sheet.known), dict(sheet.routes)) == ({}, 0, {})


@pytest.mark.parametrize("indent", ["  ", "        ", "\t", "\N{NO-BREAK SPACE} "])
def test_the_common_indentation_is_ignored(indent: str) -> None:
    assert clean(textwrap.indent(SHEET, indent)) == clean(SHEET)


def test_a_sheet_without_any_indentation() -> None:
    assert clean("\n".join(line.strip() for line in SHEET.splitlines())) == clean(SHEET)


@pytest.mark.parametrize("end", ["\r\n", "\r"])
def test_line_ends(end: str) -> None:
    assert clean(SHEET.replace("\n", end)) == clean(SHEET)


def test_comments_stand_anywhere_but_in_quotes() -> None:
    commented = "# first\n" + "".join(f"{line}   # [K9] | dH\n    # alone\n" for line in SHEET.splitlines())
    assert clean(commented) == clean(SHEET)
    row = clean(f'known\n  {ROW} | source "a # b" # c "d"\n').known["K1"]
    assert row.source == "a # b"


@pytest.mark.parametrize(
    ("old", "new"),
    [
        (" ", "\N{THIN SPACE}"),
        (" ", "\N{NO-BREAK SPACE}"),
        (" ", "\N{NARROW NO-BREAK SPACE}"),
        (" |", "\t|"),
        ("-2", "\N{MINUS SIGN}2"),
        ("-2", "\N{EN DASH}2"),
        ("->", "→"),
        ("1/2", "½"),
        ("1/2", "1\N{FRACTION SLASH}2"),
        ("H2O", "H\N{SUBSCRIPT TWO}O"),
        ("H2O", "H\N{ZERO WIDTH SPACE}2O"),
        ("kJ/mol", "kJ\N{SOFT HYPHEN}/mol"),
        ("known", "\N{ZERO WIDTH NO-BREAK SPACE}known"),
        ("dH", "∆H"),
    ],
)
def test_pasted_text_reads_the_same(old: str, new: str) -> None:
    assert clean(SHEET.replace(old, new)) == clean(SHEET)


def test_smart_quotes_read_the_same() -> None:
    for quoted in ("“a b”", "„a b“", '"a b"'):
        assert clean(f"known\n  {ROW} | source {quoted}\n").known["K1"].source == "a b"


def test_columns_count_what_is_typed_also_behind_invisible_characters() -> None:
    text = "known\n  [K\u200b1] H\u200b\u200b2O(l) -> H2O(x)\n"
    _, (fault,) = build_sheet(text)
    assert text.splitlines()[1][fault.column - 1 : fault.column - 1 + fault.length] == "(x)"


@pytest.mark.parametrize("char", ["\u202e", "\u2066", "\u200f", "\x1b", "\x00", "\ud800"])
def test_control_characters_are_faults_and_the_rest_is_read(char: str) -> None:
    text = f"known\n  [K1] H2{char}O(l) -> H2O(g) | dH 44 kJ/mol\n"
    sheet, (fault,) = build_sheet(text)
    assert fault.message == f"an invisible control character U+{ord(char):04X}"
    assert fault.hint == "delete it: what is seen here may not be what is read"
    assert text.splitlines()[1][fault.column - 1] == char
    assert char not in render(text, [fault])
    assert list(sheet.known) == ["K1"]


@pytest.mark.parametrize("header", ["Known", "KNOWN", "known:", "known :", "known   # x"])
def test_section_words(header: str) -> None:
    assert list(clean(f"{header}\n  {ROW}\n").known) == ["K1"]


@pytest.mark.parametrize(
    ("text", "message", "hint"),
    [
        (f"species\n  X  C2H6(g)\nknwon\n  {ROW}\n", "unknown section knwon", "did you mean known?"),
        (f"knwon\n  {ROW}\n", "unknown section knwon", "did you mean known?"),
        (f"species\nX  C2H6(g)\nknwon\n{ROW}\n", "unknown section knwon", "did you mean known?"),
        (f"known\n  {ROW}\nspecie\n  X  C2H6(g)\n", "unknown section specie", "did you mean species?"),
        (f"known\n  {ROW}\nrout A makes H2O(l)\n", "unknown section rout", "did you mean route?"),
        (f"known\n  {ROW}\ntaget [T] H2(g) -> H2(l)\n", "unknown section taget", "did you mean target?"),
        (f"uncertanty k = 2\nknown\n  {ROW}\n", "unknown section uncertanty", "did you mean uncertainty?"),
        (
            f"species\n  X  C2H6(g)\n  known\n    {ROW}\n",
            "known starts a section, and stands at the left margin",
            "delete the blanks before it",
        ),
        (
            f"known\n  {ROW}\n  route A makes H2O(l)\n",
            "route starts a section, and stands at the left margin",
            "delete the blanks before it",
        ),
        ("hello\n", "this line stands before any section", "start with species, known, target or route"),
    ],
)
def test_misplaced_and_misspelt_section_words(text: str, message: str, hint: str) -> None:
    sheet, faults = build_sheet(text)
    assert [(fault.message, fault.hint) for fault in faults] == [(message, hint)]
    # what the section holds is read all the same
    assert "K1" in sheet.known or text == "hello\n"


def test_a_species_may_be_called_like_a_section() -> None:
    species = "species\n  known  C2H6(g)\n  route  C3H8(g)\n  targe  C4H10(g)\n"
    sheet = clean(f"{species}known\n  [K] known -> known(l) | dH 1 kJ\n")
    assert set(sheet.species) == {"known", "route", "targe"}
    assert list(sheet.known) == ["K"]


def test_sections_may_come_in_any_order_and_more_than_once() -> None:
    more = "known\n  [K2] X -> X(l) | dH 1 kJ\n"
    blocks = ["species\n  X  C2H6(g)\n", f"known\n  {ROW}\n", more, "uncertainty k = 1\n"]
    assert clean("".join(blocks[::-1])).known.keys() == {"K1", "K2"}
    assert clean("".join(blocks)).species == clean("".join(blocks[::-1])).species


@pytest.mark.parametrize(
    "text",
    [
        "target [T] H2(g) -> H2(l)",
        "target\n  [T] H2(g) -> H2(l)",
        "target [T] H2(g) -> H2(l) | note x",
        "target [T]\n  H2(g) -> H2(l)",
        "target[T] H2(g) -> H2(l)",
    ],
)
def test_targets(text: str) -> None:
    target = clean(text).targets["T"]
    assert (target.kind, target.heat) == ("target", None)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("target", "a target reaction is missing"),
        ("target [T]", "a reaction is missing behind the label"),
        ("target H2(g) -> H2(l)", "a row starts with a label in brackets"),
        ("target [T] H2(g) -> H2(l) | dH 3 kJ/mol", "dH belongs to a known row or a step, not to a target"),
        ("target [T] H2 -> H2(l)", "the phase of H2 is missing in a target"),
    ],
)
def test_wrong_targets(text: str, message: str) -> None:
    assert [fault.message for fault in build_sheet(text)[1]] == [message]

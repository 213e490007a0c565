"""Faults as they are shown: the caret stands under its place, whatever the line holds."""

import pytest

from routeheat.errors import Fault
from routeheat.notation.faults import render, split_lines


def test_line_number_text_caret_and_repair() -> None:
    fault = Fault("unknown key yeild", 2, 3, 5, "did you mean yield?")
    assert render("route A\n  yeild 9 %", [fault]) == (
        "line 2, column 3: unknown key yeild\n    2 |   yeild 9 %\n      |   ^^^^^\n  did you mean yield?"
    )


def test_a_notice_says_that_it_is_one() -> None:
    assert render("x", [Fault("kept", 1, 1, severity="notice")]).startswith("line 1, column 1: notice: kept\n")


@pytest.mark.parametrize(
    ("line", "place"),
    [
        ("\tab X", "X"),
        ("日本 X", "X"),
        ("e\u0301 X", "X"),
        ("a\u00a0b X", "X"),
        ("a\u200bb X", "X"),
        ("a\u2028b X", "X"),
    ],
)
def test_the_caret_stands_under_its_place(line: str, place: str) -> None:
    fault = Fault("here", 1, line.index(place) + 1, 1)
    _, shown, carets = render(line, [fault]).splitlines()
    before = shown[: shown.index(place)]
    wide = sum(2 if char in "日本" else 0 if char == "\u0301" else 1 for char in before)
    assert len(carets) - 1 == wide


def test_a_long_line_is_cut_around_the_place() -> None:
    line = "a" * 3000 + "X" + "b" * 3000
    _, shown, carets = render(line, [Fault("here", 1, 3001, 1)]).splitlines()
    assert len(shown) < 200
    assert shown[carets.index("^")] == "X"


def test_places_outside_the_text_are_shown_without_a_line() -> None:
    assert render("", [Fault("too long", 7, 1, hint="cut it")]) == "line 7, column 1: too long\n  cut it"


def test_many_faults_are_counted() -> None:
    shown = render("x", [Fault(f"fault {n}", 1, 1) for n in range(60)])
    assert "fault 49" in shown
    assert "fault 50" not in shown
    assert shown.endswith("… and 10 more")


def test_only_line_ends_separate_lines() -> None:
    assert split_lines("a\r\nb\rc\nd\u2028e\x0bf") == ["a", "b", "c", "d\u2028e\x0bf"]

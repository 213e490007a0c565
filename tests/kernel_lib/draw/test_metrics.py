from __future__ import annotations

import pytest

from routeheat.draw.metrics import SCRIPT, rich_width, shorten, text_width, wrap
from routeheat.present.markup import Run, plain


def test_widths_cover_the_advance_widths_of_the_font_metrics() -> None:
    # advance widths in 1/1000 em of Helvetica, from its published AFM file: A 667, m 833, W 944, space 278, zero 556
    for character, advance in {"A": 667, "m": 833, "W": 944, " ": 278, "0": 556}.items():
        assert text_width(character, 1000) >= advance


def test_combining_characters_take_no_room_and_unknown_ones_a_whole_em() -> None:
    assert text_width("e\u0301", 10) == text_width("e", 10)
    assert text_width("分", 10) >= 10


def test_subscripts_are_set_smaller() -> None:
    assert rich_width((Run("22", "sub"),), 10) == pytest.approx(SCRIPT * text_width("22", 10))


def test_shorten_leaves_what_fits() -> None:
    assert shorten((Run("ab"),), 100, 10) == (Run("ab"),)


def test_shorten_cuts_the_middle_and_fits() -> None:
    short = shorten((Run("beginning-" + "x" * 500 + "-end"),), 120, 10)
    assert plain(short).startswith("begin")
    assert plain(short).endswith("-end")
    assert rich_width(short, 10) <= 120


def test_wrap_breaks_at_spaces_and_keeps_every_word() -> None:
    rich = (Run("C"), Run("6", "sub"), Run("H"), Run("6", "sub"), Run(" + HNO3 → product + water"))
    lines = wrap(rich, 90, 12, lines=9)
    assert len(lines) > 1
    assert " ".join(map(plain, lines)) == plain(rich)
    assert all(rich_width(line, 12) <= 90 for line in lines)


def test_wrap_never_gives_more_or_wider_lines_than_allowed() -> None:
    lines = wrap((Run("word " * 2000),), 90, 12, lines=3)
    assert len(lines) == 3
    assert all(rich_width(line, 12) <= 90 for line in lines)

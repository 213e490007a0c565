"""The strip of a criticality: dots for what is known, words for what is not."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.chem.step import Step
from routeheat.present.markup import plain
from routeheat.present.strip import Dot, Row
from routeheat.process.cautions import STOP
from routeheat.process.criticality import criticality

TYPED = {"Xac": "0.30", "feed": "1.5 h", "MTT": "130 degC", "TD24": "95 degC"}


def made(code: SimpleNamespace, heat: str = "-135 ± 8", **keys: object) -> Step:
    step: Step = code.step("A1", "C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)", heat, conc="1.6", cp="1.75",
                           at="20 degC")  # fmt: skip
    settings = {**TYPED, **keys}
    read = tuple((key, code.measured(item) if isinstance(item, str) and item[:1] in "0123456789-" else item)
                 for key, item in settings.items() if item is not None)  # fmt: skip
    return replace(step, row=replace(step.row, settings=read))


def row(code: SimpleNamespace, heat: str = "-135 ± 8", **keys: object) -> Row:
    return criticality(made(code, heat, **keys)).strip().rows[0]


def dots(item: Row) -> dict[str, Dot]:
    return {plain(dot.label): dot for dot in item.dots}


def test_every_temperature_has_its_own_form(code: SimpleNamespace) -> None:
    assert {name: dot.look for name, dot in dots(row(code)).items()} == {
        "ambient": "post", "Tp": "ring", "MTSR": "disc", "all at once": "diamond", "MTT": "square", "TD24": "triangle",
    }  # fmt: skip


def test_dots_hold_the_values_and_whiskers_of_the_criticality(code: SimpleNamespace) -> None:
    found = criticality(made(code))
    shown = dots(found.strip().rows[0])
    for mark in found.marks():
        dot = shown[mark.label.replace("MTSR, all at once", "all at once")]
        assert dot.value == mark.value
        assert dot.spread == (None if mark.u is None else found.step.k * mark.u)


def test_a_bar_runs_from_the_process_temperature_to_mtsr(code: SimpleNamespace) -> None:
    item = row(code)
    assert item.bar == (dots(item)["Tp"].value, dots(item)["MTSR"].value)


def test_limits_that_are_not_entered_are_words(code: SimpleNamespace) -> None:
    item = row(code, TD24=None, MTT=None)
    assert {"MTT", "TD24"}.isdisjoint(dots(item))
    assert item.words == ("not classifiable", "MTT not entered", "TD24 not entered")


def test_an_estimated_limit_says_where_it_comes_from(code: SimpleNamespace) -> None:
    item = row(code, MTT=None, boiling="101 degC")
    assert dots(item)["MTT"].value == pytest.approx(101)
    assert "MTT: boiling point as typed" in item.words


def test_an_endothermic_step_has_no_mtsr(code: SimpleNamespace) -> None:
    item = row(code, "12 ± 8")
    assert {"MTSR", "all at once"}.isdisjoint(dots(item))
    assert item.bar is None
    assert item.words[0].startswith("endothermic")


def test_a_stop_is_a_warning_before_any_class(code: SimpleNamespace) -> None:
    assert row(code, TD24="15 degC").warning == STOP
    assert row(code).warning == ""


def test_captions_have_one_decimal_at_most_and_never_hide_an_uncertainty(code: SimpleNamespace) -> None:
    caption = dots(row(code, "-135 ± 0.01", MTT="130 degC"))["MTSR"].caption
    assert caption == "57.0 ± ≥ 0.1"
    assert dots(row(code))["TD24"].caption == "95"


def test_the_figure_in_words_names_every_value(code: SimpleNamespace) -> None:
    alt = criticality(made(code)).strip().alt
    for words in ("A1", "class 2", "Tp 20 °C", "TD24 95 °C", "MTT 130 °C"):
        assert words in alt


def test_ambient_is_in_the_key_with_its_temperature(code: SimpleNamespace) -> None:
    assert ("post", "ambient 30 °C") in criticality(made(code)).strip().key

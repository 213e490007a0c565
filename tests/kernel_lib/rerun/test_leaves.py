"""What counts as moved."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest

from routeheat.rerun.leaves import Measure, Tolerance, leaves, moved


def _heat(value: float, u: float | None) -> dict[str, Any]:
    return {"heat": {"value": value, "u": u, "k": 2.0, "text": "as printed"}}


def _moved(kept: Any, now: Any, **tolerance: float) -> list[str]:
    return [" / ".join(item.path) for item in moved(leaves(kept), leaves(now), Tolerance(**tolerance))]


def test_values_have_the_names_of_what_they_belong_to() -> None:
    content = {
        "profiles": [{"route": "A", "total": {"value": -1.5, "exact": "-3/2", "u": 0.5, "text": "x"}, "steps": [
            {"label": "A1", "extent": "5/4"}]}],
        "differences": [{"first": "A", "second": "B", "verdict": "no"}],
        "numbers": [1, 2.5],
        "notes": ["one 1.5", "two"],
    }  # fmt: skip
    assert leaves(content) == {
        ("profiles", "A", "route"): "A",
        ("profiles", "A", "total"): Measure(Fraction(-3, 2), 0.5),
        ("profiles", "A", "steps", "A1", "label"): "A1",
        ("profiles", "A", "steps", "A1", "extent"): Fraction(5, 4),
        ("differences", "A B", "first"): "A",
        ("differences", "A B", "second"): "B",
        ("differences", "A B", "verdict"): "no",
        ("numbers", "1"): Fraction(1),
        ("numbers", "2"): 2.5,
        ("notes", "one …"): "one 1.5",
        ("notes", "two"): "two",
    }


@pytest.mark.parametrize(
    ("now", "tolerance", "agrees"),
    [
        (-100.0, {}, True),
        (-100.0 - 1e-8, {}, True),
        (-100.0 - 1e-6, {}, False),
        (-101.0, {"absolute": 1.0}, True),
        (-101.5, {"absolute": 1.0}, False),
        (-101.0, {"relative": 0.01}, True),
        (-102.0, {"relative": 0.01}, False),
        (-102.0, {"of_uncertainty": 0.5}, True),
        (-102.5, {"of_uncertainty": 0.5}, False),
        (-102.5, {"of_uncertainty": 0.5, "absolute": 3.0}, True),
    ],
)
def test_a_value_may_move_within_any_tolerance(now: float, tolerance: dict[str, float], agrees: bool) -> None:
    assert (_moved(_heat(-100.0, 4.0), _heat(now, 4.0), **tolerance) == []) is agrees


@pytest.mark.parametrize(("kept", "now"), [(4.0, 5.0), (4.0, None), (None, 4.0), (4.0, 0.0)])
def test_an_uncertainty_that_changes_is_a_move(kept: float | None, now: float | None) -> None:
    assert _moved(_heat(-100.0, kept), _heat(-100.0, now)) == ["heat"]


def test_a_number_that_appears_or_disappears_is_a_move_however_wide_the_tolerance() -> None:
    nothing = {"heat": {"value": None, "u": None, "k": 2.0, "text": ""}}
    assert _moved(_heat(-1.0, None), nothing, absolute=1e9) == ["heat"]
    assert _moved({"heat": None}, _heat(-1.0, 1.0), absolute=1e9) == ["heat", "heat / k"]


def test_coefficients_and_counts_have_no_tolerance_but_the_relative_one() -> None:
    kept, now = {"c": "3/2", "n": 2}, {"c": "5/3", "n": 3}
    assert _moved(kept, now, absolute=100.0, of_uncertainty=100.0) == ["c", "n"]
    assert _moved(kept, now, relative=0.5) == []


def test_what_is_new_or_gone_is_named() -> None:
    found = moved(leaves({"a": "1"}), leaves({"b": "2"}), Tolerance())
    assert [(item.path, item.missing, item.change) for item in found] == [(("b",), "new", None), (("a",), "gone", None)]


@pytest.mark.parametrize(
    ("kept", "now", "tolerance", "agrees"),
    [
        ("A releases more", "B releases more", {}, False),
        ("by −16.2 ± 0.4 (k = 2)", "by −16.3 ± 0.4 (k = 2)", {}, True),  # one in the last place: rounding
        ("by −16.2 ± 0.4 (k = 2)", "by −16.6 ± 0.4 (k = 2)", {}, False),
        ("by −16.2 ± 0.4 (k = 2)", "by −16.6 ± 0.4 (k = 2)", {"absolute": 1.0}, True),
        ("by 537 ± 34 kJ/mol", "by 540 ± 34 kJ/mol", {"of_uncertainty": 0.5}, True),
        ("CO + 2 H2(g) -> X", "CO + 3 H2(g) -> X", {"absolute": 5.0}, False),
        ("A1 20 °C", "A1 25 °C", {"absolute": 5.0}, False),
        ("K1 is used", "K2 is used", {"absolute": 5.0}, False),
    ],
)
def test_sentences(kept: str, now: str, tolerance: dict[str, float], agrees: bool) -> None:
    assert (_moved({"x": kept}, {"x": now}, **tolerance) == []) is agrees


def test_a_sentence_more_does_not_move_the_others() -> None:
    assert _moved({"notes": ["a", "b"]}, {"notes": ["new", "a", "b"]}) == ["notes / new"]

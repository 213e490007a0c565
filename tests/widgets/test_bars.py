"""Bars beside numbers say what the numbers say."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ET

import pytest

from routeheat_widgets._bars import WIDTH, remaining_bar, residual_bar, share_bar


def bar(svg: str) -> dict[str, str]:
    found = re.search(r'<rect class="(rhd-within|rhd-beyond)" x="([^"]*)" y="4" width="([^"]*)"', svg)
    assert found is not None
    return {"kind": found[1], "x": found[2], "width": found[3]}


@pytest.mark.parametrize("svg", [residual_bar(-5.0), share_bar(0.4), remaining_bar(3.0, 1.0, 4.0)])
def test_a_bar_is_an_svg_element(svg: str) -> None:
    assert ET.fromstring(svg).tag == "svg"


def test_a_residual_stands_on_its_side_of_zero() -> None:
    assert float(bar(residual_bar(1.0))["x"]) == WIDTH / 2
    left = bar(residual_bar(-1.0))
    assert float(left["x"]) + float(left["width"]) == pytest.approx(WIDTH / 2, abs=0.11)


@pytest.mark.parametrize(("value", "kind"), [(2.9, "rhd-within"), (-3.1, "rhd-beyond")])
def test_a_residual_beyond_the_last_limit_is_striking(value: float, kind: str) -> None:
    assert bar(residual_bar(value))["kind"] == kind


def test_a_residual_far_out_ends_in_an_arrow_within_the_figure() -> None:
    svg = residual_bar(40.0)
    assert svg.count('<path class="rhd-beyond"') == 1
    assert float(bar(svg)["x"]) + float(bar(svg)["width"]) < WIDTH


def test_the_limits_are_drawn_on_both_sides() -> None:
    assert residual_bar(0.0).count("rhd-limit") == 4
    assert residual_bar(0.0, (2.0,)).count("rhd-limit") == 2


def test_what_is_not_known_has_no_bar() -> None:
    assert (residual_bar(None), share_bar(None), remaining_bar(1.0, 0.5, 0.0)) == ("", "", "")


def test_a_share_is_a_part_of_its_frame() -> None:
    assert float(bar(share_bar(0.5))["width"]) == (WIDTH - 2) / 2


def test_what_remains_is_a_part_of_what_is_now() -> None:
    assert float(bar(remaining_bar(3.0, 1.0, 4.0))["width"]) == pytest.approx(0.75 * (WIDTH - 2), abs=0.1)

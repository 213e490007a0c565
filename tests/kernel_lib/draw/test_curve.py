"""A curve: both axes linear, levels and points where they belong, no text over another one."""

from __future__ import annotations

import dataclasses
import xml.etree.ElementTree as ET

import pytest

from routeheat.draw import draw, paper_bytes, static_svg
from routeheat.draw.chart import Chart
from routeheat.draw.curve import lay_out_curve
from routeheat.present.curve import Curve, Level, Spot
from routeheat.present.markup import Run, plain

DUST = 1e-6
SVG = "{http://www.w3.org/2000/svg}"


def curve(typed: float = 1.5, load: float = 110.0, **changes: object) -> Curve:
    """A load that falls with the feed time, ``load`` per cent at ``typed`` hours."""
    total = load * typed
    points = tuple((time, total / time) for time in (typed * (0.7 + 0.05 * step) for step in range(40)))
    made = Curve(
        "A title", points, (Run("feed time"),), "h", (Run("load"),), "%",
        (Level(100.0, "capacity of the jacket"), Level(80.0, "margin, 80 % of it", strong=False)),
        (Spot(typed, load, f"feed as typed: {typed} h"), Spot(total / 100, 100.0, "shortest at full capacity", "ring"),
         Spot(total / 80, 80.0, "shortest within the margin", "ring")),
        notes=("A note.",), alt="In words.",
    )  # fmt: skip
    return dataclasses.replace(made, **changes)  # type: ignore[arg-type]


def overlaps(chart: Chart) -> list[tuple[str, str]]:
    boxes = chart.texts
    return [
        (plain(one.rich), plain(other.rich))
        for index, one in enumerate(boxes) for other in boxes[index + 1 :]
        if one.x + DUST < other.x + other.w and other.x + DUST < one.x + one.w
        and one.y + DUST < other.y + other.h and other.y + DUST < one.y + one.h
    ]  # fmt: skip


@pytest.mark.parametrize("width", [None, 280.0, 900.0])
def test_both_axes_are_linear_within_a_tenth_of_a_pixel(width: float | None) -> None:
    shown = curve()
    chart = lay_out_curve(shown, width=width)
    assert chart.upright is not None
    line = next(rule.points for rule in chart.rules if rule.series == 0)
    (x_0, y_0), (x_1, y_1) = shown.points[0], shown.points[-1]
    (px_0, py_0), (px_1, py_1) = line[0], line[-1]
    for (x, y), (px, py) in zip(shown.points, line, strict=True):
        assert abs(px_0 + (x - x_0) * (px_1 - px_0) / (x_1 - x_0) - px) < 0.1
        assert abs(py_0 + (y - y_0) * (py_1 - py_0) / (y_1 - y_0) - py) < 0.1
    for spot, point in zip(shown.spots, chart.points, strict=True):
        assert abs(chart.across.at(spot.x) - point.x) < 0.1
        assert abs(chart.upright.at(spot.y) - point.y) < 0.1


def test_the_upright_axis_starts_at_zero() -> None:
    chart = lay_out_curve(curve())
    assert chart.upright is not None
    assert abs(chart.upright.at(0.0) - chart.plot[3]) < 0.1
    assert "0" in [plain(box.rich) for box in chart.texts if box.kind == "tick"]


def test_levels_run_across_the_plot_and_are_labelled() -> None:
    chart = lay_out_curve(curve())
    assert chart.upright is not None
    left, _, right, _ = chart.plot
    flat = {rule.points[0][1]: rule.dash for rule in chart.rules if rule.points == (
        (left, rule.points[0][1]), (right, rule.points[0][1]))}  # fmt: skip
    assert flat == {chart.upright.at(100.0): (), chart.upright.at(80.0): (6.0, 4.0)}
    words = [plain(box.rich) for box in chart.texts]
    assert "capacity of the jacket" in words
    assert "margin, 80 % of it" in words


@pytest.mark.parametrize("load", [20.0, 74.0, 79.0, 81.0, 99.0, 101.0, 185.0, 900.0])
@pytest.mark.parametrize("width", [240.0, 300.0, None])
def test_no_text_overlaps_another(load: float, width: float | None) -> None:
    assert overlaps(lay_out_curve(curve(load=load), width=width)) == []


def test_without_points_there_are_words_and_no_numbers() -> None:
    chart = lay_out_curve(curve(points=(), levels=(), spots=(), missing="not checked: U, area missing"))
    assert [plain(box.rich) for box in chart.texts if box.kind == "tick"] == []
    assert "not checked: U, area missing" in [plain(box.rich) for box in chart.texts]
    assert chart.points == ()


def test_a_number_that_is_not_finite_is_refused() -> None:
    with pytest.raises(ValueError, match="finite"):
        lay_out_curve(curve(points=((1.0, float("inf")),)))


def test_the_same_curve_gives_the_same_bytes() -> None:
    assert static_svg(curve()) == static_svg(dataclasses.replace(curve()))
    assert draw(curve()).to_json() == draw(curve()).to_json()
    assert paper_bytes(curve(), "svg") == paper_bytes(curve(), "svg")


def test_hostile_texts_stay_texts(hostile_text: str) -> None:
    text = hostile_text
    shown = curve(title=text, along=(Run(text),), along_unit=text, axis=(Run(text, "sub"),), unit=text, notes=(text,),
                  levels=(Level(100.0, text),), spots=(Spot(1.5, 110.0, text),), alt=text)  # fmt: skip
    assert overlaps(lay_out_curve(shown)) == []
    tags = {element.tag for element in ET.fromstring(static_svg(shown)).iter()}
    assert tags <= {f"{SVG}{name}" for name in ("svg", "title", "desc", "rect", "path", "g", "circle", "text", "tspan")}
    assert "<script" not in draw(shown).to_json()
    assert paper_bytes(shown, "pdf")

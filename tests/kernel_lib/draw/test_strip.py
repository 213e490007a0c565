"""Rows of dots: places linear in the value, forms told apart without colour, nothing over anything else."""

from __future__ import annotations

import dataclasses
import random
import re
import xml.etree.ElementTree as ET

import pytest

from routeheat.draw import draw, paper_bytes, static_svg, svg
from routeheat.draw.chart import OUTLINES, Chart
from routeheat.draw.looks import SERIES
from routeheat.draw.paper import POINTS_PER_MM, POINTS_PER_PX, print_layout
from routeheat.draw.strip import lay_out_strip
from routeheat.present.markup import Run, plain
from routeheat.present.strip import Dot, Group, Look, Row, Strip

DUST = 1e-6
SVG = "{http://www.w3.org/2000/svg}"
KEY: tuple[tuple[Look, str], ...] = (
    ("ring", "start"), ("disc", "reached"), ("diamond", "at worst"), ("square", "first limit"),
    ("triangle", "second limit"), ("post", "around"),
)  # fmt: skip


def dot(label: str, value: float, look: Look, spread: float | None = None, *, complete: bool = True) -> Dot:
    caption = f"{value:.0f}" if spread is None else f"{value:.1f} ± {spread:.1f}"
    return Dot(label, value, caption, spread, look, look not in ("square", "triangle", "post"), complete)


def row(label: str, *values: float, spread: float | None = 4.0) -> Row:
    start, reached, worst, first, second = values
    dots = (
        dot("start", start, "ring"), dot("worst", worst, "diamond", spread), dot("MTSR", reached, "disc", spread),
        dot("MTT", first, "square"), dot("TD24", second, "triangle"), dot("ambient", 30, "post"),
    )  # fmt: skip
    return Row(label, dots, ("class 2",), bar=(start, reached), line=7)


def strip(*groups: Group) -> Strip:
    return Strip("A title", groups, (Run("T", "italic"),), "°C", 2.0, KEY, ("A note.",), "In words.")


def some(count: int, seed: int = 1) -> Strip:
    source = random.Random(seed)
    rows = []
    for index in range(count):
        start = source.uniform(-20, 90)
        reached = start + source.uniform(0, 60)
        rows.append(row(f"A{index + 1}", start, reached, reached + source.uniform(0, 120),
                        source.uniform(40, 180), source.uniform(60, 220)))  # fmt: skip
    half = count // 2 or 1
    return strip(Group("A, one way", tuple(rows[:half])), Group("B, another way", tuple(rows[half:])))


def collisions(chart: Chart) -> list[tuple[str, str]]:
    """Pairs of texts that overlap, and texts on a dot of the plot."""
    found = []
    boxes = chart.texts
    for index, one in enumerate(boxes):
        for other in boxes[index + 1 :]:
            if one.x + DUST < other.x + other.w and other.x + DUST < one.x + one.w \
                    and one.y + DUST < other.y + other.h and other.y + DUST < one.y + one.h:  # fmt: skip
                found.append((plain(one.rich), plain(other.rich)))
        for point in chart.points:
            if point.look != "post" and one.x < point.x + 4 and point.x - 4 < one.x + one.w \
                    and one.y < point.y + 4 and point.y - 4 < one.y + one.h:  # fmt: skip
                found.append((plain(one.rich), point.look))
    return found


@pytest.mark.parametrize("width", [None, 300.0, 500.0, 1100.0])
def test_places_are_linear_in_the_value_within_a_tenth_of_a_pixel(width: float | None) -> None:
    shown = some(6)
    chart = lay_out_strip(shown, width=width)
    dots = [item for part in shown.rows for item in part.dots]
    points = [point for point in chart.points if point.band is not None]
    (value_0, x_0), (value_1, x_1) = [(item.value, point.x) for item, point in zip(dots, points, strict=True)][:2]
    slope = (x_1 - x_0) / (value_1 - value_0)
    for item, point in zip(dots, points, strict=True):
        assert abs(x_0 + slope * (item.value - value_0) - point.x) < 0.1
        if item.spread is not None:
            assert point.whisker is not None
            assert abs(point.whisker[1] - point.whisker[0] - 2 * item.spread * slope) < 0.1
        else:
            assert point.whisker is None


def test_ticks_stand_on_the_same_line() -> None:
    chart = lay_out_strip(some(3))
    ticks = {plain(box.rich): box.x + box.w / 2 for box in chart.texts if box.kind == "tick"}
    for text, x in ticks.items():
        assert abs(chart.across.at(float(text.replace("−", "-"))) - x) < 0.1
    assert len(ticks) >= 3


@pytest.mark.parametrize("seed", range(12))
@pytest.mark.parametrize("width", [300.0, None])
def test_nothing_overlaps_and_nothing_leaves_the_canvas(seed: int, width: float | None) -> None:
    chart = lay_out_strip(some(10, seed), width=width)
    assert collisions(chart) == []
    for box in chart.texts:
        assert box.x >= 0
        assert box.x + box.w <= chart.width + 0.01
        assert box.y + box.h <= chart.height


def test_dots_at_one_place_still_show_apart() -> None:
    chart = lay_out_strip(strip(Group("", (row("A", 50, 50, 50, 50, 50),))))
    assert collisions(chart) == []
    names = [plain(box.rich).split()[0] for box in chart.texts if box.kind == "level"]
    assert sorted(names) == ["MTSR", "MTT", "TD24", "start", "worst"]
    assert len({str(OUTLINES.get(point.look, point.look)) for point in chart.points if point.band == 0}) == 6


def test_forms_differ_in_outline_not_only_in_colour() -> None:
    root = ET.fromstring(static_svg(strip(Group("", (row("A", 0, 40, 80, 120, 160),)))))
    band = next(group for group in root.iter(f"{SVG}g"))
    circles = [item.get("fill") for item in band.iter(f"{SVG}circle")]
    assert sorted(circles) == [SERIES[0], "none"]
    closed = {item.get("d", "").count("L") for item in band.iter(f"{SVG}path") if item.get("d", "").endswith("Z")}
    assert closed == {2, 3}


def test_a_whisker_that_is_a_lower_bound_has_no_caps() -> None:
    def caps(complete: bool) -> int:
        shown = strip(Group("", (Row("A", (dot("MTSR", 50, "disc", 9, complete=complete),)),)))
        return static_svg(shown).count("L", static_svg(shown).index("rh-band"))

    assert caps(True) == caps(False) + 2
    assert "lower bound" in static_svg(strip(Group("", (Row("A", (dot("MTSR", 50, "disc", 9, complete=False),)),))))


def test_k_is_said_where_there_is_a_whisker() -> None:
    words = [plain(box.rich) for box in lay_out_strip(some(2)).texts]
    assert any("k = 2" in line for line in words)


def test_what_is_missing_is_words_and_no_dot() -> None:
    part = Row("C1", (dot("start", 20, "ring"),), ("not classifiable", "TD24 not entered"))
    chart = lay_out_strip(strip(Group("", (part,))))
    assert [point.look for point in chart.points if point.band == 0] == ["ring"]
    assert "TD24 not entered" in [plain(box.rich) for box in chart.texts]
    assert "second limit" not in [plain(box.rich) for box in chart.texts]


def test_a_warning_stands_first_and_bold() -> None:
    part = Row("C1", (dot("start", 20, "ring"),), ("class 5",), warning="STOP: at the limit")
    boxes = [box for box in lay_out_strip(strip(Group("", (part,)))).texts if box.kind == "caption"]
    assert [(plain(box.rich), box.bold) for box in boxes] == [("STOP: at the limit", True), ("class 5", False)]


def test_rows_are_grouped_under_their_headings() -> None:
    chart = lay_out_strip(some(4))
    heights = {plain(box.rich): box.y for box in chart.texts if box.kind == "heading"}
    bands = [band.y for band in chart.bands]
    assert heights["A, one way"] < bands[0] < bands[1] < heights["B, another way"] < bands[2]
    assert [band.group for band in chart.bands] == ["A, one way"] * 2 + ["B, another way"] * 2


@pytest.mark.parametrize("seed", range(8))
def test_twelve_rows_fit_a_page_in_print(seed: int) -> None:
    figure = print_layout(some(12, seed), 174.0)
    scale = POINTS_PER_PX / POINTS_PER_MM
    assert figure.width * scale == pytest.approx(174.0, abs=0.1)
    assert figure.height * scale <= 240.0


def test_an_empty_strip_and_a_value_that_is_no_number() -> None:
    assert "A title" in static_svg(strip())
    with pytest.raises(ValueError, match="finite"):
        lay_out_strip(strip(Group("", (row("A", 0, float("nan"), 80, 120, 160),))))


def test_the_same_strip_gives_the_same_bytes() -> None:
    assert static_svg(some(5)) == static_svg(dataclasses.replace(some(5)))
    assert draw(some(5)).to_json() == draw(some(5)).to_json()
    for form in ("svg", "pdf", "png"):
        assert paper_bytes(some(2), form) == paper_bytes(some(2), form)


def test_bands_can_be_focused_and_know_their_line() -> None:
    root = ET.fromstring(str(svg(some(2))))
    bands = [group for group in root.iter(f"{SVG}g") if "rh-band" in (group.get("class") or "")]
    assert [(band.get("data-label"), band.get("data-line"), band.get("tabindex")) for band in bands] == [
        ("A1", "7", "0"), ("A2", "7", "0"),
    ]  # fmt: skip


def test_no_green_anywhere() -> None:
    for text in (static_svg(some(3)), str(svg(some(3)))):
        for red, green, blue in re.findall(r"#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})\b", text):
            assert int(green, 16) <= max(int(red, 16), int(blue, 16))
        assert "green" not in text


def test_hostile_texts_stay_texts(hostile_text: str) -> None:
    text = hostile_text
    dots = (Dot(text, 10, text, 3.0, "disc"), Dot((Run(text, "sub"),), 12, "", None, "ring"))
    part = Row(text, dots, (text, text), text, details=((text, text),))
    shown = Strip(text, (Group(text, (part,)),), (Run(text),), text, 2.0, (("disc", text),), (text,), text)
    chart = lay_out_strip(shown)
    assert collisions(chart) == []
    tags = {element.tag for element in ET.fromstring(static_svg(shown)).iter()}
    assert tags <= {f"{SVG}{name}" for name in ("svg", "title", "desc", "rect", "path", "g", "circle", "text", "tspan")}
    assert "<script" not in str(svg(shown))
    assert paper_bytes(shown, "svg")
    assert "<script" not in draw(shown).to_json()

from __future__ import annotations

import dataclasses
import re
import xml.etree.ElementTree as ET
from collections.abc import Callable

import pytest

from routeheat.draw.layout import lay_out
from routeheat.draw.looks import DASHES, HEADS, SERIES
from routeheat.draw.svg import paint, static_svg
from routeheat.present.ladder import Column, Ladder

SVG = "{http://www.w3.org/2000/svg}"


def parsed(text: str) -> ET.Element:
    return ET.fromstring(text)


def words(element: ET.Element) -> str:
    """What a reader sees of a ``<text>``: its runs without its tooltip."""
    return "".join([element.text or "", *((child.text or "") + (child.tail or "") for child in element
                                          if child.tag != f"{SVG}title")])  # fmt: skip


def part(group: ET.Element, name: str) -> ET.Element:
    return next(child for child in group if name in child.get("class", "").split())


def heights(path: ET.Element) -> list[float]:
    return [float(y) for y in re.findall(r"V(-?[\d.]+)|(?:M|L)-?[\d.]+ (-?[\d.]+)", path.get("d", "")) for y in y if y]


def test_the_root_has_size_role_title_and_description(one_step: Ladder) -> None:
    root = parsed(paint(lay_out(one_step)))
    assert root.tag == f"{SVG}svg"
    assert root.get("viewBox") == f"0 0 {root.get('width')} {root.get('height')}"
    assert root.get("role") == "img"
    assert root.findtext(f"{SVG}title") == "A title"
    assert root.findtext(f"{SVG}desc") == "In words."


def test_each_arrow_is_a_focusable_group_that_names_its_row(one_step: Ladder) -> None:
    group = next(parsed(paint(lay_out(one_step))).iter(f"{SVG}g"))
    assert group.attrib == {
        "class": "rh-arrow", "tabindex": "0", "data-label": "A1", "data-line": "1", "data-column": "Route A",
    }  # fmt: skip
    assert group.findtext(f"{SVG}title") == "A1: C6H6 + Y → Z\n-145 ± 8\nsource: invented"


def test_the_tip_stands_at_the_end_level_and_the_whisker_spans_its_spread(one_step: Ladder) -> None:
    geometry = lay_out(one_step)
    group = next(parsed(paint(geometry)).iter(f"{SVG}g"))
    head = [child for child in group if "rh-shaft" in child.get("class", "").split()][-1]
    assert max(heights(head)) == pytest.approx(geometry.scale.y(-145.0), abs=0.01)
    ends = heights(part(group, "rh-whisker"))
    assert max(ends) - min(ends) == pytest.approx(2 * 8 * geometry.scale.px_per_unit, abs=0.02)


def test_marks_tell_what_is_known(marks: Ladder) -> None:
    groups = {group.get("data-label"): group for group in parsed(paint(lay_out(marks))).iter(f"{SVG}g")}
    assert part(groups["A2"], "rh-gap") is not None
    assert all(child.get("fill") in (None, "none") for child in groups["A3"] if child.tag == f"{SVG}path")
    assert groups["A4"].find(f"{SVG}circle") is not None
    assert part(groups["A5"], "rh-whisker").get("stroke-dasharray")
    assert not part(groups["A1"], "rh-whisker").get("stroke-dasharray")
    step, side = (float(part(groups[label], "rh-shaft").get("stroke-width", "0")) for label in ("A1", "Q1"))
    assert side < step
    assert part(groups["T"], "rh-shaft").get("d", "").count("V") == 2


def test_a_very_small_heat_still_has_a_head(
    make_ladder: Callable[..., Ladder], make_chain: Callable[..., Column]
) -> None:
    root = parsed(paint(lay_out(make_ladder(make_chain("A", [-1000.0, -0.001])))))
    small = list(root.iter(f"{SVG}g"))[1]
    head = part(small, "rh-shaft").get("d", "")
    xs = [float(x) for x in re.findall(r"[ML](-?[\d.]+) ", head)]
    ys = heights(part(small, "rh-shaft"))
    assert max(xs) - min(xs) >= 8
    assert max(ys) - min(ys) >= 2.9


def test_subscripts_return_to_the_baseline(one_step: Ladder) -> None:
    text = next(t for t in parsed(paint(lay_out(one_step))).iter(f"{SVG}text")
                if t.get("class") == "rh-equation" and "→" in words(t))  # fmt: skip
    assert words(text) == "C6H6 + Y → Z"
    assert sum(float(span.get("dy", "0")) for span in text) == pytest.approx(0, abs=0.01)


@pytest.mark.parametrize("name", ["crowded", "overlaid", "marks"])
def test_the_same_ladder_gives_the_same_bytes(name: str, request: pytest.FixtureRequest) -> None:
    ladder: Ladder = request.getfixturevalue(name)
    assert paint(lay_out(ladder)) == paint(lay_out(dataclasses.replace(ladder)))


def test_there_are_no_ids_scripts_or_links(overlaid: Ladder) -> None:
    root = parsed(paint(lay_out(overlaid)))
    assert not [e for e in root.iter() if e.get("id") or e.tag in (f"{SVG}script", f"{SVG}a", f"{SVG}image")]


def test_hostile_names_appear_only_as_text(hostile: Ladder) -> None:
    tame = dataclasses.replace(
        hostile, title="t", unit="u", notes=(), alt="",
        columns=(Column("c", tuple(dataclasses.replace(a, label="l", caption="c", equation="e", details=())
                                   for a in hostile.columns[0].arrows)),),
    )  # fmt: skip
    root = parsed(paint(lay_out(hostile)))
    known = {element.tag for element in parsed(paint(lay_out(tame))).iter()} | {f"{SVG}tspan"}
    assert {element.tag for element in root.iter()} <= known
    everything = "".join(root.itertext()) + "".join(value for e in root.iter() for value in e.attrib.values())
    assert not re.search("[\u202a-\u202e\u2066-\u2069\x00-\x08\x0e-\x1f]", everything)


def test_a_static_diagram_uses_no_theme_variables(overlaid: Ladder) -> None:
    text = static_svg(overlaid)
    assert "var(" not in text
    assert "<style" not in text
    assert "var(--jp-ui-font-color1," in paint(lay_out(overlaid))


def test_columns_differ_by_dash_and_head_as_well_as_by_colour() -> None:
    assert len(set(SERIES)) == len(set(DASHES)) == len(set(HEADS)) == 6


def test_no_column_is_green() -> None:
    for colour in SERIES:
        red, green, blue = (int(colour[i : i + 2], 16) for i in (1, 3, 5))
        assert green <= max(red, blue)


@pytest.mark.parametrize("paper", ["#ffffff", "#111111"])
def test_columns_can_be_seen_on_light_and_dark_paper(paper: str) -> None:
    # contrast ratio and the 3:1 limit for graphics after WCAG 2.1, success criterion 1.4.11
    def luminance(colour: str) -> float:
        parts = [int(colour[i : i + 2], 16) / 255 for i in (1, 3, 5)]
        linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in parts]
        return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]

    for colour in SERIES:
        light, dark = sorted((luminance(colour), luminance(paper)), reverse=True)
        assert (light + 0.05) / (dark + 0.05) >= 3

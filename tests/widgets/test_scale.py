"""A step at scale: values moved without touching the text, and written into it where that is wanted."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any

import pytest

import routeheat as rh
import routeheat_widgets as rw
from routeheat.process.cautions import SHORT
from routeheat_widgets._model import read_model
from routeheat_widgets._moved import read_value, typed_value
from routeheat_widgets._payload import Shown, view_content, view_named
from routeheat_widgets._write_back import write_back

VESSEL = """yield 80 ± 4 % | T 60 ± 2 degC | feed 4 h   # as run | in the laboratory
       conc 0.9 mol/kg | cp 2.0 kJ/(kg K) | Xac 25 % | MTT 118 degC | TD24 140 ± 10 degC
       U 350 W/(m2 K) | area 3.0 m2 | jacket 15 degC | size 800 mol | source "calorimeter\""""


@pytest.fixture
def text(sheet_text: str) -> str:
    return sheet_text.replace('yield 80 ± 4 % | source "calorimeter"', VESSEL)


def shown(text: str, **options: str) -> Shown:
    return view_content(read_model(text, 1), view_named("scale"), {"step": "A / A1", **options}, 600.0, None)


def written(text: str, label: str, **values: str) -> str:
    step = next(s for r in rh.read_sheet(text).routes.values() for s in r.steps if s.label == label)
    new = {name: read_value(name, value, typed_value(step, name)) for name, value in values.items()}
    edit = write_back(text, label, new)
    assert edit is not None
    return text[: edit.start] + edit.text + text[edit.end :]


def control(content: dict[str, Any], key: str) -> dict[str, Any]:
    return next(item for item in content["controls"] if item["key"] == key)


def test_a_moved_value_changes_the_scenario_and_not_the_sheet(text: str) -> None:
    sheet = rh.read_sheet(text)
    result = rw.what_if(sheet, "A", "A1", T="70 degC")
    assert result.moved is not None
    assert result.moved.step.process.value == pytest.approx(70)  # type: ignore[union-attr]
    assert result.typed.step.process.value == pytest.approx(60)  # type: ignore[union-attr]
    assert sheet == rh.read_sheet(text)


def test_the_uncertainty_of_a_moved_value_stays(text: str) -> None:
    step = rw.moved(rh.read_sheet(text), "A1", T="70").routes["A"].step("A1")
    assert step.temperature is not None
    assert step.temperature.text == "70 ± 2 degC"


def test_the_strip_has_a_row_as_typed_and_a_row_moved(text: str) -> None:
    result = rw.what_if(rh.read_sheet(text), "A", "A1", Xac="40")
    assert [row.label for row in result.strip().rows] == ["A1 as typed", "A1 moved"]
    assert result.strip().rows[0].dots != result.strip().rows[1].dots
    assert [row.label for row in rw.what_if(rh.read_sheet(text), "A", "A1").strip().rows] == ["A1"]


def test_the_load_curve_does_not_call_a_moved_feed_typed(text: str) -> None:
    sheet = rh.read_sheet(text)
    assert "feed as typed: 4.00" in rw.what_if(sheet, "A", "A1", T="65").curve().alt
    moved = rw.what_if(sheet, "A", "A1", feed="2").curve()
    assert "feed as moved: 2.00" in moved.alt
    assert not any("typed" in spot.words for spot in moved.spots)


def test_the_cautions_stand_short_with_every_picture(text: str) -> None:
    said = re.sub(r"</text>\s*<text[^>]*>", " ", shown(text).content["svg"])
    assert SHORT in said


@pytest.mark.parametrize(
    ("name", "value"),
    [("T", "-300"), ("Xac", "140 %"), ("feed", "0"), ("size", "-1"), ("feed", "2 kg"), ("feed", "1e3"), ("feed", "x")],
)
def test_a_value_that_cannot_be_is_refused(text: str, name: str, value: str) -> None:
    with pytest.raises(rh.UnitError):
        rw.moved(rh.read_sheet(text), "A1", **{name: value})
    good = shown(text)
    model = read_model(text, 1)
    options = {"step": "A / A1", name: value}
    found = view_content(model, view_named("scale"), options, 600.0, None, good.content).content
    assert found["problem"]
    assert found["svg"] == good.content["svg"]
    assert found["write"] is None


def test_unknown_words_are_refused(text: str) -> None:
    sheet = rh.read_sheet(text)
    with pytest.raises(rh.UnknownName):
        rw.moved(sheet, "A1", TD24="100 degC")
    with pytest.raises(rh.UnknownName):
        rw.what_if(sheet, "Z", "A1")
    with pytest.raises(rh.RouteError):
        rw.what_if(sheet, "A", "Z1")


def test_a_value_that_is_not_typed_has_no_slider_and_no_number(text: str) -> None:
    found = view_content(read_model(text, 1), view_named("scale"), {"step": "B / B2"}, 600.0, None).content
    for key in ("feed", "T", "Xac", "size"):
        item = control(found, key)
        assert (item["value"], item["hint"], item["limits"]) == ("", "not typed", None)
    assert control(found, "Xac")["unit"] == "%"


def test_a_typed_value_lies_on_its_slider(text: str) -> None:
    found = shown(text).content
    for key in ("feed", "T", "Xac", "size"):
        low, high, step = control(found, key)["limits"]
        assert low < float(control(found, key)["value"]) < high
        assert step > 0


def test_the_mass_is_moved_where_the_mass_is_typed(text: str) -> None:
    found = shown(text.replace("size 800 mol", "mass 900 kg")).content
    assert [item["key"] for item in found["controls"] if item["moves"]] == ["feed", "T", "Xac", "mass"]


def test_moved_values_are_forgotten_with_the_step(make_desk: Callable[..., Any], text: str) -> None:
    desk = make_desk(text=text, view="scale")
    desk._receive(desk, {"kind": "option", "key": "step", "value": "A / A1"}, [])
    desk._receive(desk, {"kind": "option", "key": "feed", "value": "2"}, [])
    assert control(desk.payload, "feed")["value"] == "2"
    desk._receive(desk, {"kind": "option", "key": "step", "value": "B / B1"}, [])
    assert control(desk.payload, "feed")["value"] == ""
    assert desk.text == text


def test_moved_values_stay_with_their_step(make_desk: Callable[..., Any], text: str) -> None:
    desk = make_desk(text=text, view="scale")
    desk._receive(desk, {"kind": "option", "key": "T", "value": "80"}, [])
    desk.text = text.replace('route A "in one go"', 'route A0 makes OXI\n  use B1\n\nroute A "in one go"')
    assert desk.payload["controls"][0]["value"] == "A / A1"
    assert control(desk.payload, "T")["value"] == "80"
    desk.text = text.replace("[A1]", "[A9]")
    assert desk.payload["controls"][0]["value"] == "A / A9"
    assert control(desk.payload, "T")["value"] == "60"


def test_a_unit_stands_once_beside_its_number(text: str) -> None:
    assert control(shown(text, feed="2.50 h").content, "feed")["value"] == "2.50"
    assert control(shown(text, feed="150 min").content, "feed")["value"] == "150 min"


def test_back_to_what_is_typed(make_desk: Callable[..., Any], text: str) -> None:
    desk = make_desk(text=text, view="scale")
    before = desk.payload["svg"]
    desk._receive(desk, {"kind": "option", "key": "T", "value": "80"}, [])
    assert desk.payload["svg"] != before
    desk._receive(desk, {"kind": "option", "key": "moves", "value": ""}, [])
    assert desk.payload["svg"] == before


@pytest.mark.parametrize("values", [{"feed": "2.5"}, {"T": "70"}, {"Xac": "40"}, {"size": "500"},
                                    {"feed": "150 min", "T": "-5", "Xac": "0.3"}])  # fmt: skip
def test_what_is_written_reads_as_what_was_shown(text: str, values: dict[str, str]) -> None:
    again = rh.read_sheet(written(text, "A1", **values))
    assert again.routes == rw.moved(rh.read_sheet(text), "A1", **values).routes


def test_only_the_numbers_change(text: str) -> None:
    new = written(text, "A1", feed="2.5", T="70")
    assert new == text.replace("feed 4 h", "feed 2.5 h").replace("T 60 ± 2 degC", "T 70 ± 2 degC")


def test_a_key_that_is_not_typed_is_added_behind_the_last_one(text: str) -> None:
    new = written(text, "B2", feed="3", Xac="20 %")
    assert new == text.replace("± 15 kJ/mol | yield 92 %", "± 15 kJ/mol | yield 92 % | feed 3 h | Xac 20 %")


def test_a_key_is_added_before_the_comment_of_its_line(text: str) -> None:
    with_comment = text.replace("yield 92 %", "yield 92 %  # guessed")
    assert "yield 92 % | T 40 degC  # guessed" in written(with_comment, "B2", T="40")


def test_a_key_behind_a_long_line_starts_one_of_its_own(text: str) -> None:
    long = text.replace("yield 92 %", f'yield 92 % | note "{"x" * 70}"')
    new = written(long, "B2", T="40")
    assert f'{"x" * 70}"\n       T 40 degC\n' in new
    assert rh.read_sheet(new).routes == rw.moved(rh.read_sheet(long), "B2", T="40").routes


@pytest.mark.parametrize("typed", ["T 60.0(5) degC", "T 60 °C", "T 60 ± 2 degC (k = 1)", "T\u00a060\u200b degC",
                                   "T 6.0e1 degC"])  # fmt: skip
def test_values_typed_in_other_ways_are_written_too(text: str, typed: str) -> None:
    other = text.replace("T 60 ± 2 degC", typed)
    again = rh.read_sheet(written(other, "A1", T="70"))
    assert again.routes == rw.moved(rh.read_sheet(other), "A1", T="70").routes


def test_the_payload_names_the_edit_in_places_of_the_page(text: str) -> None:
    wide = text.replace("# as run", "# \N{GRINNING FACE} as run")
    edit = shown(wide, size="500").content["write"]
    units = wide.encode("utf-16-le")
    new = units[: 2 * edit["start"]].decode("utf-16-le") + edit["text"] + units[2 * edit["end"] :].decode("utf-16-le")
    assert new == wide.replace("size 800 mol", "size 500 mol")
    assert edit["words"] == "size 500 mol in [A1]"


def test_nothing_is_to_be_written_when_nothing_is_moved(text: str) -> None:
    assert shown(text).content["write"] is None
    assert shown(text, feed="4.0").content["write"] is None


def test_while_the_step_is_broken_nothing_is_written(text: str) -> None:
    before = read_model(text, 1)
    model = read_model(text.replace("dH -550", "dH -5x50"), 2, before)
    found = view_content(model, view_named("scale"), {"step": "A / A1", "feed": "2"}, 600.0, None).content
    assert found["svg"]
    assert found["write"] is None


@pytest.mark.parametrize("options", [{}, {"feed": "2", "T": "70"}, {"scale": "routes", "Xac": "60"}])
def test_the_code_makes_what_the_view_shows(
    text: str, options: dict[str, str], run_code: Callable[[str], tuple[dict[str, Any], list[Any]]]
) -> None:
    found = shown(text, **options)
    names, _ = run_code(found.content["code"])
    assert rh.svg(names["result"], width=600.0) == found.content["svg"]
    assert found.picture is not None
    assert names["result"].tables() == found.picture.tables


def test_the_comparison_uses_the_moved_values(text: str) -> None:
    assert shown(text, scale="routes").content["svg"] != shown(text, scale="routes", T="75").content["svg"]


def test_a_wide_table_of_few_routes_is_turned(text: str) -> None:
    assert "<td>A, in one go</td>" not in shown(text, scale="routes").content["tables"]
    assert '<th scope="col">A, in one go</th>' in shown(text, scale="routes").content["tables"]

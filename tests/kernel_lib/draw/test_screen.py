from __future__ import annotations

import re

import pytest

from routeheat.draw.layout import lay_out
from routeheat.draw.screen import figure, plotly_text
from routeheat.present.ladder import Ladder


@pytest.mark.parametrize("name", ["crowded", "overlaid", "marks"])
def test_the_same_ladder_gives_the_same_json(name: str, request: pytest.FixtureRequest) -> None:
    ladder: Ladder = request.getfixturevalue(name)
    text = figure(ladder).to_json()
    assert text == figure(ladder).to_json()
    assert '"uid"' not in text


def test_arrows_and_whiskers_are_in_units_of_heat(marks: Ladder) -> None:
    shown = figure(marks)
    first = next(trace for trace in shown.data if trace.name == "A1")
    assert first.y[0] == pytest.approx(0.0, abs=1e-9)
    assert first.y[-1] == pytest.approx(-100.0)
    bars = [trace for trace in shown.data if trace.error_y.array is not None]
    halves = sorted(half for trace in bars for half in trace.error_y.array)
    assert halves == pytest.approx([3.0, 5.0, 10.0, 12.0, 13.0])


def test_the_size_is_explicit_and_that_of_the_layout(crowded: Ladder) -> None:
    geometry, shown = lay_out(crowded), figure(crowded)
    assert (shown.layout.width, shown.layout.height) == (round(geometry.width), round(geometry.height))


def test_captions_stand_where_the_layout_put_them(marks: Ladder) -> None:
    geometry, shown = lay_out(marks), figure(marks)
    box = next(box for box in geometry.texts if box.kind == "caption")
    note = next(note for note in shown.layout.annotations if note.text == "−100 ± 10")
    assert note.x == pytest.approx(box.x, abs=0.01)
    assert geometry.scale.y(note.y) == pytest.approx(box.y + box.h / 2)


def test_hover_tells_equation_value_and_details(one_step: Ladder) -> None:
    trace = next(trace for trace in figure(one_step).data if trace.name == "A1")
    assert trace.hovertext == "A1: C6H6 + Y → Z<br>-145 ± 8<br>source: invented"
    assert trace.hoverinfo == "text"


def test_the_axis_title_has_italics_and_subscripts(one_step: Ladder) -> None:
    assert figure(one_step).layout.yaxis.title.text == "Δ<sub>r</sub><i>H</i> / (kJ mol⁻¹)"


def test_hostile_names_reach_plotly_only_escaped(hostile: Ladder) -> None:
    shown = figure(hostile)
    texts = [note.text for note in shown.layout.annotations]
    texts += [text for trace in shown.data for text in (trace.name, trace.hovertext) if text]
    texts.append(shown.layout.yaxis.title.text)
    for text in texts:
        bare = re.sub(r"</?(?:sub|sup|i|b)>|<br>", "", text)
        assert not re.search(r"[<>$%\u202a-\u202e\u2066-\u2069]|&(?!(?:amp|lt|gt|#36|#37);)", bare)


def test_plotly_text() -> None:
    assert plotly_text("<b>$x$ %{y} & z") == "&lt;b&gt;&#36;x&#36; &#37;{y} &amp; z"

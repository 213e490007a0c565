"""The code that a view shows makes the same thing when it is pasted in a cell."""

from __future__ import annotations

import ast
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

import routeheat as rh
from routeheat.present.html import render_table
from routeheat_widgets._model import read_model
from routeheat_widgets._payload import view_content, view_named
from routeheat_widgets._twin import sheet_literal, summary

CASES = [
    ("routes", {"show": "side by side", "per": "mol"}),
    ("routes", {"show": "one axis", "per": "kg"}),
    ("routes", {"show": "route B", "per": "batch", "batch": "12 kg"}),
    ("steps", {"route": "A"}),
    ("steps", {"route": "B"}),
    ("heat", {"target": "target T"}),
    ("heat", {"target": "target U"}),
    ("heat", {"target": "step A1"}),
    ("typed", {}),
]


def run(code: str, monkeypatch: pytest.MonkeyPatch) -> tuple[dict[str, Any], list[Any]]:
    """The names that ``code`` leaves, and what it displays."""
    import IPython.display

    displayed: list[Any] = []
    monkeypatch.setattr(IPython.display, "display", lambda *items: displayed.extend(items))
    names: dict[str, Any] = {}
    exec(compile(code, "cell", "exec"), names)
    return names, displayed


@pytest.mark.parametrize(("view", "options"), CASES)
def test_the_code_makes_what_the_view_shows(
    sheet_text: str, view: str, options: dict[str, str], monkeypatch: pytest.MonkeyPatch
) -> None:
    shown = view_content(read_model(sheet_text, 1), view_named(view), options, 600.0, None)
    names, displayed = run(shown.content["code"], monkeypatch)
    picture = shown.picture
    assert picture is not None
    tables = "".join(map(render_table, names["result"].tables()))
    for table in picture.tables[: len(names["result"].tables())]:
        assert render_table(table) in tables
    if picture.drawn is None:
        assert displayed == [names["result"]]
    else:
        assert rh.svg(names.get("diagram", names["result"]), width=600.0) == shown.content["svg"]
        assert displayed[-1] == rh.svg(picture.drawn)


def test_routes_to_another_product_are_left_out_of_the_code(sheet_text: str, monkeypatch: pytest.MonkeyPatch) -> None:
    text = sheet_text + '\nroute C "to the aldehyde" makes OXI\n  use B1\n'
    shown = view_content(read_model(text, 1), view_named("routes"), {"product": "ACD(s)"}, 600.0, None)
    names, _ = run(shown.content["code"], monkeypatch)
    assert [item.route.name for item in names["result"].profiles] == ["A", "B"]


def test_broken_lines_that_the_view_does_not_use_leave_the_code(
    sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(sheet_text.replace("dH -550", "dH -5x50"), 2, before)
    whole = view_content(model, view_named("routes"), {}, 600.0, None)
    assert whole.content["code"] == ""
    healthy = view_content(model, view_named("routes"), {"show": "route B"}, 600.0, None)
    names, _ = run(healthy.content["code"], monkeypatch)
    assert rh.svg(names["result"], width=600.0) == healthy.content["svg"]


def test_a_file_is_named_instead_of_its_text(sheet_text: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "it's a `sheet`.txt"
    path.write_text(sheet_text, encoding="utf-8")
    shown = view_content(read_model(sheet_text, 1), view_named("routes"), {}, 600.0, path)
    assert "uncertainty k" not in shown.content["code"]
    names, _ = run(shown.content["code"], monkeypatch)
    assert rh.svg(names["result"], width=600.0) == shown.content["svg"]


@pytest.mark.parametrize(
    "text",
    ['plain\n  text "quoted" `tick` $x$', 'ends with "', "back\\slash", 'triple """ quotes', "u\u2028v\tw\u202e", "'"],
)
def test_any_text_survives_as_a_literal(text: str) -> None:
    assert ast.literal_eval(sheet_literal(text)) == text


def test_the_summary_counts_in_words(sheet_text: str) -> None:
    model = read_model(sheet_text, 1)
    assert summary(model) == "RouteDesk: 2 routes, 2 targets, 4 known rows, 27 lines, no faults"


def test_the_page_without_a_kernel_shows_the_figure_and_runs_nothing(
    sheet_text: str, make_desk: Callable[..., Any]
) -> None:
    bundle, _ = make_desk(text=sheet_text)._repr_mimebundle_()
    page = bundle["text/html"]
    assert '<img alt="' in page
    assert "data:image/svg+xml;base64," in page
    assert "<table>" in page
    assert "<script" not in page
    assert len(page) < 200_000

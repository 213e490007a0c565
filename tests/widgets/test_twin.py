"""The code that a view shows makes the same thing when it is pasted in a cell."""

from __future__ import annotations

import ast
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

import routeheat as rh
from routeheat.present.html import render_table
from routeheat_widgets import _twin
from routeheat_widgets._export import take
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
    ("known", {"of": "target T"}),
    ("known", {"of": "nothing"}),
    ("known", {"known": "cycles"}),
    ("measure", {"of": "difference A | B"}),
    ("measure", {"of": "target T", "attainable": "2"}),
    ("scale", {"step": "A / A1"}),
    ("scale", {"step": "A / A1", "feed": "2", "T": "60"}),
    ("scale", {"step": "B / B2", "scale": "routes", "Xac": "0.3"}),
    ("typed", {}),
]
Run = Callable[[str], tuple[dict[str, Any], list[Any]]]


@pytest.mark.parametrize(("view", "options"), CASES)
def test_the_code_makes_what_the_view_shows(sheet_text: str, view: str, options: dict[str, str], run_code: Run) -> None:
    shown = view_content(read_model(sheet_text, 1), view_named(view), options, 600.0, None)
    names, displayed = run_code(shown.content["code"])
    picture = shown.picture
    assert picture is not None
    tables = "".join(map(render_table, names["result"].tables()))
    for table in picture.tables[: len(names["result"].tables())]:
        assert render_table(table) in tables
    if picture.drawn is None:
        assert displayed == [names["result"]]
    else:
        assert rh.svg(names.get("diagram", names["result"]), width=600.0) == shown.content["svg"]
        assert displayed[-1 - len(picture.more)] == rh.svg(picture.drawn)
        assert displayed[-len(picture.more) :] == [rh.svg(more) for _, more in picture.more] or not picture.more


@pytest.mark.parametrize(("view", "options"), CASES)
def test_the_code_that_saves_writes_files(
    sheet_text: str,
    view: str,
    options: dict[str, str],
    run_code: Run,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.chdir(tmp_path)
    content = view_content(read_model(sheet_text, 1), view_named(view), options, 600.0, None).content
    saving = [line for line in content["save_code"].splitlines() if "write_report" not in line]
    run_code("\n".join([content["code"], *saving]))
    written = sorted(path.suffix for path in tmp_path.iterdir())
    assert written == ([".pdf"] if content["svg"] else []) + [".xlsx"]


def test_the_report_of_the_code_is_the_one_that_is_downloaded(
    sheet_text: str, run_code: Run, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    model = read_model(sheet_text, 1)
    shown = view_content(model, view_named("typed"), {"per": "kg"}, 600.0, None)
    save = _twin.save_code(model, shown.picture, None, {"per": "kg"})
    run_code("\n".join([shown.content["code"], save]))
    taken = take(model, shown.picture, {"per": "kg"}, "report", "html")
    assert (tmp_path / taken.name).read_bytes() == taken.data


def test_routes_to_another_product_are_left_out_of_the_code(sheet_text: str, run_code: Run) -> None:
    text = sheet_text + '\nroute C "to the aldehyde" makes OXI\n  use B1\n'
    shown = view_content(read_model(text, 1), view_named("routes"), {"product": "ACD(s)"}, 600.0, None)
    names, _ = run_code(shown.content["code"])
    assert [item.route.name for item in names["result"].profiles] == ["A", "B"]


def test_broken_lines_that_the_view_does_not_use_leave_the_code(sheet_text: str, run_code: Run) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(sheet_text.replace("dH -550", "dH -5x50"), 2, before)
    whole = view_content(model, view_named("routes"), {}, 600.0, None)
    assert whole.content["code"] == ""
    healthy = view_content(model, view_named("routes"), {"show": "route B"}, 600.0, None)
    names, _ = run_code(healthy.content["code"])
    assert rh.svg(names["result"], width=600.0) == healthy.content["svg"]


def test_a_file_is_named_instead_of_its_text(sheet_text: str, tmp_path: Path, run_code: Run) -> None:
    path = tmp_path / "it's a `sheet`.txt"
    path.write_text(sheet_text, encoding="utf-8")
    shown = view_content(read_model(sheet_text, 1), view_named("routes"), {}, 600.0, path)
    assert "uncertainty k" not in shown.content["code"]
    names, _ = run_code(shown.content["code"])
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

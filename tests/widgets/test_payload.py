"""The payload: one JSON-safe state with everything escaped."""

from __future__ import annotations

import json
from typing import Any

import pytest

from routeheat import UnknownName
from routeheat_widgets._model import read_model
from routeheat_widgets._payload import VIEWS, sheet_content, view_content, view_named

HOSTILE = "<script>alert(1)</script>&\"'`$x$%{y}"


def content(text: str, view: str, **options: str) -> dict[str, Any]:
    return view_content(read_model(text, 1), view_named(view), options, 600.0, None).content


@pytest.mark.parametrize("view", list(VIEWS))
def test_every_view_is_json_safe(sheet_text: str, view: str) -> None:
    found = content(sheet_text, view)
    assert json.loads(json.dumps(found, allow_nan=False)) == found
    assert found["problem"] == []
    assert found["tables"]


@pytest.mark.parametrize("view", list(VIEWS))
def test_an_empty_sheet_has_words_for_every_view(view: str) -> None:
    found = content("", view)
    assert found["svg"] == ""
    assert found["empty"] or "Nothing is typed yet" in found["tables"]


@pytest.mark.parametrize("view", list(VIEWS))
def test_hostile_names_are_text_in_every_view(sheet_text: str, view: str) -> None:
    text = sheet_text.replace("in one go", HOSTILE.replace('"', "")).replace(
        "starting alcohol", "<img src=x onerror=1>"
    )
    text = text.replace("invented table", "<b>&amp;</b>")
    found = content(text, view)
    for part in (found["svg"], found["tables"]):
        assert "<script" not in part
        assert "<img" not in part
        assert "<b>" not in part


def test_the_basis_changes_the_numbers(sheet_text: str) -> None:
    assert "−688" in content(sheet_text, "routes", show="route A", per="mol")["svg"]
    assert "kJ kg" in content(sheet_text, "routes", show="route A", per="kg")["svg"]
    assert "12 kg of product" in content(sheet_text, "routes", per="batch", batch="12 kg")["svg"]


def test_a_basis_that_is_none_is_said_and_the_last_picture_stays(sheet_text: str) -> None:
    model = read_model(sheet_text, 1)
    good = view_content(model, view_named("routes"), {}, 600.0, None)
    bad = view_content(model, view_named("routes"), {"per": "batch", "batch": "12 apples"}, 600.0, None, good.content)
    assert bad.picture is None
    assert bad.content["svg"] == good.content["svg"]
    assert bad.content["problem"]
    assert bad.content["kept"]
    assert bad.content["code"] == ""


def test_a_heat_out_of_reach_says_what_is_missing(sheet_text: str) -> None:
    found = content(sheet_text, "heat", target="target U")
    assert found["svg"] == ""
    assert "vaporisation of H2O(l)" in found["tables"]


def test_a_heat_that_is_not_unique_shows_what_other_rows_give(sheet_text: str) -> None:
    found = content(sheet_text, "heat", target="target T")
    assert "other combination" in found["tables"]
    assert "227.4" in found["svg"]


def test_details_name_the_contributors(sheet_text: str) -> None:
    found = content(sheet_text, "routes")
    heads = dict(found["details"]["A, in one go\nA1"])
    assert heads["variance from"].startswith("A1 ")
    assert "yield of A1" in heads["variance from"]


def test_labels_know_their_lines(sheet_text: str) -> None:
    lines = sheet_content(read_model(sheet_text, 1))["lines"]
    assert sheet_text.split("\n")[lines["B2"] - 1].strip().startswith("[B2]")
    assert sheet_text.split("\n")[lines["K1"] - 1].strip().startswith("[K1]")


def test_faults_have_their_place(sheet_text: str) -> None:
    fault = sheet_content(read_model(sheet_text.replace("dH -550", "dH -5x50"), 1))["faults"][0]
    assert (fault["line"], fault["column"]) == (20, 13)


def test_an_unknown_view_is_refused() -> None:
    with pytest.raises(UnknownName):
        view_named("route")


def test_an_option_that_is_gone_falls_back(sheet_text: str) -> None:
    found = content(sheet_text, "steps", route="Z")
    assert found["controls"][0]["value"] == "A"


def test_diagram_notes_are_not_said_twice(sheet_text: str) -> None:
    found = content(sheet_text, "routes")
    assert "screening aid" not in found["tables"].lower()
    assert "screening aid" in found["svg"].lower()


def test_a_long_text_is_not_sent_for_editing() -> None:
    found = sheet_content(read_model("x" * 3_000_000, 1))
    assert not found["editable"]
    assert found["text"] == ""

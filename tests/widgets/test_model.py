"""What is shown while a line is broken: healthy parts anew, broken ones as they were, nothing made up."""

from __future__ import annotations

import pytest

from routeheat_widgets._model import clean_text, count_lines, read_model


def broken(text: str, old: str, new: str) -> str:
    assert text.count(old) == 1
    return text.replace(old, new)


def test_a_healthy_text_is_shown_as_it_is(sheet_text: str) -> None:
    model = read_model(sheet_text, 1)
    assert model.faults == ()
    assert model.shown is model.sheet
    assert model.kept == ()


def test_a_broken_route_is_kept_and_the_other_is_read_anew(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    text = broken(broken(sheet_text, "dH -550", "dH -5x50"), "dH -295", "dH -300")
    model = read_model(text, 2, before)
    assert model.shown.routes["A"].steps == before.sheet.routes["A"].steps
    assert model.shown.routes["B"].step("B2").row.heat.amount.value == -300  # type: ignore[union-attr]
    assert model.kept == ("Route A is shown as it was before line 20 was broken.",)
    assert model.kept_names == {("route", "A")}


def test_a_broken_known_row_is_kept(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(broken(sheet_text, "dH -1299.4", "dH -1299,4x"), 2, before)
    assert model.shown.known["K3"] == before.sheet.known["K3"]
    assert list(model.shown.known) == ["K1", "K2", "K3", "K4"]
    assert all(route.known is model.shown.known for route in model.shown.routes.values())
    assert ("known", "K3") in model.kept_names


def test_a_broken_coverage_factor_keeps_everything(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(broken(sheet_text, "uncertainty k = 2", "uncertainty k = two"), 2, before)
    assert model.shown == before.sheet
    assert model.kept == ("Shown as it was before line 1 was broken.",)


def test_without_an_earlier_version_a_broken_route_has_single_steps_but_no_sum(sheet_text: str) -> None:
    model = read_model(broken(sheet_text, "dH -295", "dH -29x5"), 1)
    assert list(model.shown.routes) == ["A"]
    assert [step.label for step in model.partial["B"].steps] == ["B1"]
    assert model.left_out == ("Route B is left out while line 26 is broken.",)


def test_an_unbalanced_step_with_a_heat_still_computes(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(broken(sheet_text, "[B2] OXI + 1/2 O2(g) -> ACD", "[B2] OXI + O2(g) -> ACD"), 2, before)
    assert model.faults
    assert model.kept == ()
    assert model.shown.routes["B"].step("B2") != before.sheet.routes["B"].step("B2")


def test_a_broken_header_keeps_its_route_in_its_place(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(broken(sheet_text, 'route A "in one go" makes ACD', 'route A "in one go" makes'), 2, before)
    assert list(model.shown.routes) == ["A", "B"]
    assert ("route", "A") in model.kept_names


def test_a_deleted_route_goes_when_nothing_is_broken(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(sheet_text[: sheet_text.index("route B")], 2, before)
    assert list(model.shown.routes) == ["A"]


def test_kept_parts_outlive_several_broken_texts(sheet_text: str) -> None:
    first = read_model(sheet_text, 1)
    second = read_model(broken(sheet_text, "dH -550", "dH -5x50"), 2, first)
    third = read_model(broken(sheet_text, "dH -550", "dH -5xy50"), 3, second)
    assert third.shown.routes["A"].steps == first.sheet.routes["A"].steps


@pytest.mark.parametrize("cut", range(0, 1200, 37))
def test_any_beginning_of_a_sheet_is_read_without_an_exception(sheet_text: str, cut: int) -> None:
    before = read_model(sheet_text, 1)
    model = read_model(sheet_text[:cut], 2, before)
    assert model.text == sheet_text[:cut]


def test_a_text_that_is_too_long_is_one_fault(sheet_text: str) -> None:
    before = read_model(sheet_text, 1)
    model = read_model("x" * 10_000_000, 2, before)
    assert len(model.faults) == 1
    assert model.shown == before.sheet


def test_line_ends_and_broken_characters_are_cleaned() -> None:
    assert clean_text("a\r\nb\rc\n") == "a\nb\nc\n"
    assert clean_text("a\ud800b\0") == "a\N{REPLACEMENT CHARACTER}b\N{REPLACEMENT CHARACTER}"
    assert clean_text("a\u2028b 😀") == "a\u2028b 😀"


def test_only_line_feeds_count_as_lines() -> None:
    assert count_lines("a\u2028b\nc") == 2

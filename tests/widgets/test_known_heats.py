"""The views of known heats, of cycles that do not close, and of what to measure next."""

from __future__ import annotations

from typing import Any

import pytest

import routeheat as rh
import routeheat_widgets as rw
from routeheat_widgets._model import read_model
from routeheat_widgets._payload import view_content, view_named


def content(text: str, view: str, **options: str) -> dict[str, Any]:
    return view_content(read_model(text, 1), view_named(view), options, 600.0, None).content


def column(result: Any, key: str) -> list[Any]:
    table = result.table()
    index = [item.key for item in table.columns].index(key)
    return [row[index] for row in table.rows]


def test_every_row_has_source_kind_temperature_and_adjusted_heat(sheet_text: str) -> None:
    result = rw.known_heats(rh.read_sheet(sheet_text))
    assert column(result, "kind") == ["formation", "formation", "combustion", "reaction"]
    assert column(result, "source") == ["invented table", "not stated", "not stated", "not stated"]
    assert column(result, "at") == [25.0] * 4
    reconciled = rh.reconcile(rh.read_sheet(sheet_text).known)
    assert reconciled.adjusted is not None
    labels = ["K1", "K2", "K3", "K4"]
    assert [cell.value for cell in column(result, "adjusted")] == [reconciled.adjusted.value(k) for k in labels]
    assert column(result, "residual") == [reconciled.residuals[k] for k in labels]


def test_shares_are_those_of_the_heat_and_sum_to_the_whole(sheet_text: str) -> None:
    sheet = rh.read_sheet(sheet_text)
    of = rh.combine(sheet.targets["T"], sheet.known)
    shares = column(rw.known_heats(sheet, of), "share")
    stated = {item.datum.name: item.share for item in of.heat.contributions}
    assert shares == [100 * share if (share := stated.get(f"K{n}")) is not None else "not in it" for n in range(1, 5)]
    assert sum(share for share in shares if isinstance(share, float)) == pytest.approx(100)


def test_a_row_without_an_uncertainty_is_said_to_be_left_out(sheet_text: str) -> None:
    result = rw.known_heats(rh.read_sheet(sheet_text.replace("-1299.4 ± 0.8", "-1299.4")))
    assert column(result, "remark")[2] == result.reconciled.network.left_out["K3"]
    assert column(result, "adjusted")[2] is None
    assert column(result, "typed")[2].u is None


def test_the_payload_has_a_bar_for_every_checked_row(sheet_text: str) -> None:
    found = content(sheet_text, "known", of="target T")
    assert found["search"]
    residuals, shares = found["bars"]
    assert [bool(cell) for cell in residuals["cells"]] == [True] * 4
    heads = found["tables"].split("</thead>")[0].split("<th ")[1:]
    assert "residual" in heads[residuals["column"]]
    assert "share of the heat of T" in heads[shares["column"]]
    assert '<th scope="row">K4</th>' in found["tables"]


def test_a_heat_out_of_reach_leaves_the_list_and_says_why(sheet_text: str) -> None:
    found = content(sheet_text, "known", of="target U")
    assert "No contributions to the target U" in found["empty"]
    assert "invented table" in found["tables"]
    assert found["problem"] == []


def test_cycles_that_close_are_said_to_close(sheet_text: str) -> None:
    result = rw.open_cycles(rh.read_sheet(sheet_text))
    assert result.table().title == "Every cycle closes"
    assert len(result.tables()) == 1


def test_a_cycle_that_does_not_close_stands_with_its_suspects(sheet_text: str) -> None:
    text = sheet_text.replace("dH 227.4 ± 1.5", "dH 240 ± 1.5")
    result = rw.open_cycles(rh.read_sheet(text))
    assert result.table().title == "Cycles that do not close"
    assert "K4" in result.table().rows[0][0]
    assert "left out" in str(result.tables()[1].columns[0].header)
    bars = content(text, "known", known="cycles")["bars"]
    assert "rhd-beyond" in bars[0]["cells"][0]


def test_without_a_cycle_the_view_says_that_nothing_is_checked(sheet_text: str) -> None:
    text = "\n".join(line for line in sheet_text.splitlines() if "[K4]" not in line)
    assert "No cycle links the known heats" in content(text, "known", known="cycles")["empty"]


def test_the_best_measurement_stands_first_and_shrinks_most(sheet_text: str) -> None:
    sheet = rh.read_sheet(sheet_text)
    of = rh.compare_routes(sheet.routes).differences[0]
    result = rw.measure_next(sheet, of, attainable=2.0)
    whole = rh.next_measurement(of, attainable=2.0, known=sheet.known, routes=sheet.routes)
    assert result.effects[0] == whole.effects[0]
    assert {item.label for item in result.effects} == {"A1", "B1", "B2"}


def test_nothing_typed_is_a_perfect_measurement_and_says_so(sheet_text: str) -> None:
    found = content(sheet_text, "measure")
    typed = next(item for item in found["controls"] if item["key"] == "attainable")
    assert typed["value"] == ""
    assert "u = 0" in typed["hint"]
    assert "to u = 0 kJ/mol" in found["empty"]


@pytest.mark.parametrize("typed", ["five", "-1", "nan", "inf"])
def test_an_uncertainty_that_is_none_is_refused_in_words(sheet_text: str, typed: str) -> None:
    found = content(sheet_text, "measure", attainable=typed)
    assert "is no uncertainty" in found["problem"][0]
    assert found["code"] == ""


def test_a_bar_of_what_remains_stands_beside_every_measurement(sheet_text: str) -> None:
    left, shares = content(sheet_text, "measure", of="difference A | B")["bars"]
    assert len(left["cells"]) == 3
    assert shares["table"] == 1
    assert all(left["cells"])

"""Interchange: what is written reads back equal, and obeys the published schemas."""

from __future__ import annotations

import json
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
from jsonschema import Draft202012Validator

import routeheat as rh
from routeheat.present.show import Shown
from routeheat.report.archive import Archived, json_schema, read_json, write_json

SHEET = """
uncertainty k = 2

species
  NB  C6H5NO2(l)  name "nitrobenzene" | cas 98-95-3
  TAR ?(l)        M 250 g/mol

known
  [K1] 1/2 N2(g) + 3/2 H2(g) -> NH3(g)
       dH -45.940(18) kJ/mol | source "a source; ‰ µ 试"
  [K2] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol
  [K3] combustion of C6H6(l) to CO2(g), H2O(l) | dH -3267.6 ± 0.4 kJ/mol (95 %)
  [K4] vaporisation of H2O(l) | dH x at 25 degC
  [K5] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol

target [T] 6 C(s, graphite) + 3 H2(g) -> C6H6(l)
target [U] H2O(l) -> H2O(g)

route A "over the nitro compound" makes NB
  [A1] C6H6(l) + HNO3(aq, 65 %) -> NB + H2O(l)
       dH -145 ± 8 kJ/mol | yield 96 ± 2 % | T 50 degC | feed 3 h
       conc 1.6 mol/kg | cp 1.75 kJ/(kg K) | equiv 1.05 of HNO3(aq, 65 %)
  [A2] H2SO4(l) -> H2SO4(aq)
       dH -80 kJ/mol | side of A1 | amount 0.3 mol/mol
route B makes NB
  use A1
"""


OTHER_HEATS = """
unstated u = 5 kJ/mol "old tables"

known
  [K1] sublimation of I2(s) | Q 0.62 ± 0.02 kJ (k = 1) for 10 mmol of I2(s) | shared "cup A" 2 %
  [K2] combustion of CH4(g) to CO2(g), H2O(l) | dU -885.4 kJ/mol
  [K3] fusion of H2O(s) | like K1 ± 20 kJ/mol (k = 1)
"""


def test_other_heats_come_back_equal_and_are_spelt_out() -> None:
    sheet = rh.read_sheet(OTHER_HEATS)
    text = write_json(sheet)
    _validate("sheet", text)
    assert read_json(text) == sheet
    content = json.loads(text)["content"]
    run, bomb, like = content["known"]
    assert content["unstated"]["reason"] == "old tables"
    assert (run["heat"]["key"], run["heat"]["portion"]["text"]) == ("Q", "10 mmol")
    assert (run["heat_as_written"]["value"], run["heat_as_written"]["u"]) == ("62", "2")
    assert bomb["heat"]["key"] == "dU"
    assert float(Fraction(bomb["heat_as_written"]["value"])) == pytest.approx(-885.4 - 2 * 2.479, abs=0.001)
    assert (like["heat"]["analogue"], like["estimated"], run["estimated"]) == ("K1", True, False)
    assert like["heat_as_written"]["value"] == "62"
    assert float(Fraction(like["heat_as_written"]["u"])) == pytest.approx((20**2 + 2**2) ** 0.5)


def _results() -> list[Shown]:
    sheet = rh.read_sheet(SHEET)
    found: list[Shown] = [rh.compare_routes(sheet.routes), rh.profile(sheet.routes["A"], per="kg")]
    for target in sheet.targets.values():
        found.append(rh.combine(target, sheet.known))
    try:
        rh.combine(rh.read_reaction("CO(g) -> CO2(g)"), sheet.known)
    except rh.OutOfReach as reason:
        found.append(rh.Refusal("V", rh.read_reaction("CO(g) -> CO2(g)"), reason))
    return found


def _validate(name: Any, text: str) -> None:
    Draft202012Validator(json_schema(name)).validate(json.loads(text))


@pytest.mark.parametrize("name", ["sheet", "result", "reference"])
def test_the_schemas_are_schemas_and_name_no_place_on_the_internet(name: Any) -> None:
    schema = json_schema(name)
    Draft202012Validator.check_schema(schema)
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert schema["$id"] == f"{name}.schema.json"


def test_an_unknown_schema_is_refused() -> None:
    with pytest.raises(rh.UnknownName, match="did you mean 'sheet'"):
        json_schema("sheets")  # type: ignore[arg-type]


def test_a_sheet_comes_back_equal_and_obeys_its_schema() -> None:
    sheet = rh.read_sheet(SHEET)
    text = write_json(sheet)
    assert read_json(text) == sheet
    _validate("sheet", text)


def test_the_schema_of_sheets_refuses_a_float_for_an_exact_number() -> None:
    content = json.loads(write_json(rh.read_sheet(SHEET)))
    content["content"]["known"][0]["reaction"]["reactants"][0]["coefficient"] = 0.5
    assert not Draft202012Validator(json_schema("sheet")).is_valid(content)


def test_the_content_spells_out_what_the_text_says() -> None:
    content = json.loads(write_json(rh.read_sheet(SHEET)))["content"]
    first = content["known"][0]
    assert first["reaction"]["reactants"][0]["coefficient"] == "1/2"
    assert first["heat_as_written"] == {"value": "-2297/50", "u": "9/500", "unit": "kJ/mol"}
    assert content["known"][3]["heat"]["symbol"] == "x"
    assert content["known"][3]["heat_as_written"] is None
    assert content["routes"][1]["steps"][0]["used_from_another_route"] is True


@pytest.mark.parametrize("result", _results(), ids=lambda result: type(result).__name__)
def test_a_result_comes_back_with_its_data_and_shows_itself(result: Shown) -> None:
    text = write_json(result)
    again = read_json(text)
    assert isinstance(again, Archived)
    assert again.kind == type(result).__name__
    assert again.text == result.text
    assert again._repr_mimebundle_() == result._repr_mimebundle_()
    assert again.to_dict() == (result.to_dict() if hasattr(result, "to_dict") else {})
    _validate("result", text)


def test_an_archived_result_writes_the_same_json_again() -> None:
    text = write_json(_results()[0])
    again = read_json(text)
    assert isinstance(again, Archived)
    assert write_json(again) == text


def test_a_file_holds_the_text(tmp_path: Path) -> None:
    path = tmp_path / "new" / "sheet.json"
    text = write_json(rh.read_sheet(SHEET), path)
    assert path.read_text(encoding="utf-8") == text
    assert read_json(path) == rh.read_sheet(SHEET)
    assert [item.name for item in path.parent.iterdir()] == ["sheet.json"]


def test_content_edited_without_the_text_is_refused() -> None:
    content = json.loads(write_json(rh.read_sheet(SHEET)))
    content["content"]["known"][0]["heat_as_written"]["value"] = "-46"
    with pytest.raises(rh.RouteheatError, match="different things"):
        read_json(json.dumps(content))
    del content["content"]
    assert read_json(json.dumps(content)) == rh.read_sheet(SHEET)


def test_faults_of_the_text_are_those_of_a_sheet() -> None:
    content = {"format": "routeheat sheet", "version": 1, "text": "known\n  [K1] formation of Xx(l)\n"}
    with pytest.raises(rh.SheetFaults, match="unknown element symbol"):
        read_json(json.dumps(content))


def test_a_sheet_that_its_text_would_not_give_back_is_not_written() -> None:
    sheet, faults = rh.check_sheet("known\n  [K1] H2(g) -> H2O(l) | dH -285 kJ/mol\n")
    assert faults
    with pytest.raises(rh.SheetFaults, match="does not balance"):
        write_json(sheet)


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("{", "no JSON"), ("[1]", "neither a"), ('{"format": "other"}', "neither a"), ("NaN", "NaN is no number"),
        ("[" * 100_000, "no JSON"), ("1" * 5_000, "no JSON"),
        ('{"format": "routeheat sheet"}', "does not say the version"),
        ('{"format": "routeheat sheet", "version": 2}', "newer than form 1"),
        ('{"format": "routeheat sheet", "version": 1}', "no text"),
        ('{"format": "routeheat result", "version": 1}', "lacks its kind"),
        ('{"format": "routeheat result", "version": 1, "kind": "X", "result": {}, "tables": [{}]}', "no table"),
    ],
)  # fmt: skip
def test_what_is_no_such_json_is_refused_in_words(text: str, words: str) -> None:
    with pytest.raises(rh.RouteheatError, match=words):
        read_json(text)


def test_a_file_that_is_no_text_is_refused_in_words(tmp_path: Path) -> None:
    path = tmp_path / "x.json"
    path.write_bytes(b"\xff\xfe\x00")
    with pytest.raises(rh.RouteheatError, match="no UTF-8 text"):
        read_json(path)

"""Keep and check."""

from __future__ import annotations

import json
import os
import pickle
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

import routeheat as rh
from routeheat.errors import ReferenceMoved
from routeheat.present.table import Column, Reading, Table
from routeheat.process.compare import Comparison
from routeheat.report.archive import json_schema
from routeheat.rerun import reference as module
from routeheat.rerun.reference import reference

SHEET = """
uncertainty k = 1
species
  AR   C8H9FO(l)
  NIT  C8H8FNO3(s)
  BRO  C8H8BrFO(l)

route A "nitration" makes NIT
  [A1] AR + HNO3(aq) -> NIT + H2O(l)
       dH -135 ± 8 kJ/mol | yield 88 % | source "notebook 1"
route B "bromination" makes NIT
  [B1] AR + Br2(l) -> BRO + HBr(g)
       dH -70 ± 10 kJ/mol | yield 82 %
  [B2] BRO + HNO3(aq) -> NIT + HOBr(aq)
       dH -75 ± 15 kJ/mol | yield 78 %
"""


@pytest.fixture(autouse=True)
def _plain_environment(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("CI", raising=False)
    monkeypatch.delenv("ROUTEHEAT_REFRESH", raising=False)
    monkeypatch.setattr(module, "_refreshed", {})


def _compare(text: str = SHEET) -> Comparison:
    return rh.compare_routes(rh.read_sheet(text).routes)


def test_the_first_time_it_is_kept_and_then_it_agrees(tmp_path: Path) -> None:
    assert reference("routes", _compare(), tmp_path).status == "kept"
    before = (tmp_path / "routes.json").read_bytes()
    assert reference("routes", _compare(), tmp_path).status == "agrees"
    assert (tmp_path / "routes.json").read_bytes() == before


def test_the_file_is_readable_sorted_exact_and_obeys_its_schema(tmp_path: Path) -> None:
    reference("routes", _compare(), tmp_path, sheet=rh.read_sheet(SHEET))
    text = (tmp_path / "routes.json").read_text(encoding="utf-8")
    content = json.loads(text)
    Draft202012Validator(json_schema("reference")).validate(content)
    assert text == json.dumps(content, indent=2, sort_keys=True, ensure_ascii=False) + "\n"
    assert content["heats"]["profiles / A / total"] == [{"coefficient": "25/22", "datum": "A1"}]
    assert content["data"]["A1"]["value"] == "-135"
    assert content["result"]["profiles"][0]["total"]["u"] == pytest.approx(8 / 0.88)
    assert content["sheet_digest"].startswith("sha256:")


def test_a_changed_datum_is_explained(tmp_path: Path) -> None:
    reference("routes", _compare(), tmp_path)
    with pytest.raises(ReferenceMoved) as caught:
        reference("routes", _compare(SHEET.replace("-135 ± 8", "-140 ± 8")), tmp_path)
    changes, edits, contributions = caught.value.tables
    assert isinstance(changes, Table)
    assert isinstance(edits, Table)
    assert isinstance(contributions, Table)
    assert ("profiles / A / total", "−153.4, u 9.1", "−159.1, u 9.1", "−5.7") in changes.rows
    assert edits.rows == (("A1", "dH -135 ± 8 kJ/mol", "dH -140 ± 8 kJ/mol"),)
    total = next(row for row in contributions.rows if row[0] == "profiles / A / total")
    assert total[1:4] == ("A1", Reading(-135.0, 8.0, 1.0), Reading(-140.0, 8.0, 1.0))
    assert total[6] == pytest.approx(-5 / 0.88)
    message = str(caught.value)
    assert message.startswith("reference routes: 8 values moved")
    assert "--routeheat-refresh" in message
    assert pickle.loads(pickle.dumps(caught.value)).name == "routes"


def test_a_source_or_a_comment_that_changes_moves_nothing(tmp_path: Path) -> None:
    reference("routes", _compare(), tmp_path)
    edited = SHEET.replace("notebook 1", "notebook 2") + "# a comment\n"
    assert reference("routes", _compare(edited), tmp_path).status == "agrees"


def test_a_part_of_the_own_uncertainty_may_be_allowed(tmp_path: Path) -> None:
    reference("routes", _compare(), tmp_path)
    edited = _compare(SHEET.replace("-135 ± 8", "-136 ± 8"))
    assert reference("routes", edited, tmp_path, of_uncertainty=0.2).status == "agrees"
    with pytest.raises(ReferenceMoved):
        reference("routes", edited, tmp_path, of_uncertainty=0.05)


def test_refresh_keeps_the_present_result(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    reference("routes", _compare(), tmp_path)
    edited = _compare(SHEET.replace("-135", "-140"))
    assert reference("routes", edited, tmp_path, refresh=True).status == "refreshed"
    assert reference("routes", edited, tmp_path).status == "agrees"
    monkeypatch.setenv("ROUTEHEAT_REFRESH", "1")
    assert reference("routes", _compare(), tmp_path).status == "refreshed"
    with pytest.raises(ReferenceMoved):
        reference("routes", edited, tmp_path, refresh=False)


def test_while_refreshing_two_results_cannot_share_a_name(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("ROUTEHEAT_REFRESH", "1")
    reference("routes", _compare(), tmp_path)
    assert reference("routes", _compare(), tmp_path).status == "refreshed"
    with pytest.raises(rh.RouteheatError, match="two results under one name"):
        reference("routes", _compare(SHEET.replace("-135", "-140")), tmp_path)


def test_another_kind_of_result_under_one_name_is_refused(tmp_path: Path) -> None:
    reference("routes", _compare(), tmp_path)
    with pytest.raises(rh.RouteheatError, match="holds a Comparison, this is a Profile"):
        reference("routes", _compare()["A"], tmp_path)


def test_where_ci_is_set_a_missing_reference_is_an_error(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("CI", "true")
    with pytest.raises(rh.RouteheatError, match="keep it on your machine and commit"):
        reference("routes", _compare(), tmp_path)
    assert list(tmp_path.iterdir()) == []
    monkeypatch.setenv("CI", "false")
    assert reference("routes", _compare(), tmp_path).status == "kept"


def test_a_folder_that_cannot_be_written_is_said_in_words(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("x")
    with pytest.raises(rh.RouteheatError, match="cannot be kept in"):
        reference("routes", _compare(), tmp_path / "file" / "references")


@pytest.mark.parametrize(
    "name", ["", "..", "../x", "a/b", "a\\b", "/etc/x", ".x", "x.", "con", "NUL.x", "a b", "a\n", "x" * 81, "é", "a\0"]
)
def test_names_are_checked(tmp_path: Path, name: str) -> None:
    with pytest.raises(rh.RouteheatError, match="cannot name a reference"):
        reference(name, _compare(), tmp_path)
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("option", ["absolute", "relative", "of_uncertainty"])
@pytest.mark.parametrize("size", [-1.0, float("nan"), float("inf")])
def test_tolerances_are_checked(tmp_path: Path, option: str, size: float) -> None:
    with pytest.raises(ValueError, match=f"the tolerance {option}"):
        reference("x", _compare(), tmp_path, **{option: size})  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"{", "no JSON"), (b"{}", "holds no reference"), (b"\xff", "no UTF-8"),
        (b'{"format": "routeheat reference", "version": 1}', "damaged"),
        (b'{"format": "routeheat reference", "version": 9}', "newer"),
    ],
)  # fmt: skip
def test_a_damaged_file_is_said_in_words(tmp_path: Path, content: bytes, words: str) -> None:
    (tmp_path / "x.json").write_bytes(content)
    with pytest.raises(rh.RouteheatError, match=words):
        reference("x", _compare(), tmp_path)


def test_a_renamed_file_is_noticed(tmp_path: Path) -> None:
    reference("x", _compare(), tmp_path)
    (tmp_path / "x.json").rename(tmp_path / "y.json")
    with pytest.raises(rh.RouteheatError, match="holds the reference x, not y"):
        reference("y", _compare(), tmp_path)


def test_many_at_once_keep_one_reference(tmp_path: Path) -> None:
    with ThreadPoolExecutor(8) as pool:
        found = list(pool.map(lambda _: reference("x", _compare(), tmp_path).status, range(16)))
    assert (found.count("kept"), found.count("agrees")) == (1, 15)
    assert [item.name for item in tmp_path.iterdir()] == ["x.json"]


def test_combinations_profiles_tables_and_refusals_can_be_kept(tmp_path: Path) -> None:
    known = [rh.row("K1", "formation of H2O(l)", "-285.830 ± 0.040 kJ/mol (k = 2)")]
    target = rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)")
    with pytest.raises(rh.OutOfReach) as caught:
        rh.combine(rh.read_reaction("H2O(l) -> H2O(g)"), known)
    results = {
        "combination": rh.combine(target, known), "profile": _compare()["A"],
        "refusal": rh.Refusal("T", target, caught.value),
        "table": Table("t", (Column("x", "x"),), ((Reading(1.0, 0.1),),)),
    }  # fmt: skip
    for name, result in results.items():
        assert reference(name, result, tmp_path).status == "kept"
        assert reference(name, result, tmp_path).status == "agrees"


def test_it_shows_itself_the_same_way_each_time(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    reference("routes", _compare())
    lines = repr(reference("routes", _compare())).splitlines()
    assert lines[0].split() == ["reference", "status", "values", "file", "rests", "on"]
    assert lines[2].split()[:2] == ["routes", "agrees"]
    assert lines[2].split()[3] == "references/routes.json"
    assert os.listdir("references") == ["routes.json"]

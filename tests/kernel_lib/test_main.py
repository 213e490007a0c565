"""The command line: the whole job without a browser."""

from __future__ import annotations

import csv
from pathlib import Path
from xml.etree import ElementTree

import pytest

from routeheat.__main__ import main

AMIDE = Path(__file__).parents[1] / "published" / "sheets" / "amide.txt"


def test_writes_tables_and_diagrams_and_prints_the_comparison(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main([str(AMIDE), "--out", str(tmp_path)]) == 0
    printed = capsys.readouterr().out
    assert "not distinguishable" in printed
    written = {path.name for path in tmp_path.iterdir()}
    assert {"comparison.csv", "comparison.svg", "route_1.csv", "route_1.svg", "route_2.csv"} <= written
    for path in tmp_path.glob("*.svg"):
        assert ElementTree.parse(path).getroot().tag.endswith("svg")
    rows = list(csv.reader((tmp_path / "comparison.csv").open(encoding="utf-8", newline="")))
    totals = [float(row[rows[0].index("total / (kJ/mol)")]) for row in rows[1:3]]
    assert totals == pytest.approx([-1011.6, -1009.9], abs=0.05)


def test_a_target_out_of_reach_is_written_as_such(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    sheet = tmp_path / "sheet.txt"
    sheet.write_text("known\n  [K1] formation of H2O(l) | dH -285.8 kJ/mol\ntarget [T] H2O(l) -> H2O(g)\n", "utf-8")
    assert main([str(sheet), "--out", str(tmp_path / "out")]) == 0
    assert "nothing known makes or uses H2O(g)" in capsys.readouterr().out
    assert (tmp_path / "out" / "target_T.csv").exists()


def test_a_bad_sheet_exits_with_its_faults(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    sheet = tmp_path / "sheet.txt"
    sheet.write_text("known\n  [K1] H2(g) + O2(g) -> H2O(l) | dH -285.8 kJ/mol\n", encoding="utf-8")
    assert main([str(sheet), "--out", str(tmp_path / "out")]) == 1
    shown = capsys.readouterr().err
    assert "line 2, column 8: does not balance" in shown
    assert "^^^^" in shown
    assert not (tmp_path / "out").exists()


def test_a_missing_file_is_said_plainly(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(tmp_path / "no.txt"), "--out", str(tmp_path)]) == 1
    assert "no.txt: No such file or directory" in capsys.readouterr().err


def test_a_file_that_is_no_text_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    sheet = tmp_path / "sheet.txt"
    sheet.write_bytes(b"known\n\xff\xfe\x00")
    assert main([str(sheet), "--out", str(tmp_path)]) == 1
    assert "is no UTF-8 text" in capsys.readouterr().err


def test_a_wrong_basis_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(AMIDE), "--out", str(tmp_path / "out"), "--per", "furlong"]) == 1
    assert "furlong" in capsys.readouterr().err

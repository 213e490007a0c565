"""Known heats from and to spreadsheets."""

from __future__ import annotations

import datetime
from pathlib import Path
from typing import Any

import openpyxl
import pytest

import routeheat as rh
from routeheat.report import spreadsheet_cells
from routeheat.report.spreadsheet import known_csv, read_known_heats, write_known_heats
from routeheat.report.workbook import write_workbook

SHEET = rh.read_sheet("""
uncertainty k = 2

species
  NB C6H5NO2(l) name "nitrobenzene"

known
  [K1] 1/2 N2(g) + 3/2 H2(g) -> NH3(g)
       dH -45.940(18) kJ/mol | source "=a source"
  [K2] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol (k = 2) | note "seen, twice; +-@"
  [K3] combustion of C6H6(l) to CO2(g), H2O(l) | dH -3267.6 ± 0.4 kJ/mol (95 %)
  [K4] vaporisation of H2O(l) | dH 2.440 kJ/g of H2O(l) at 25.0 degC
  [K5] formation of NB | dH x
  [K6] formation of CO2(g)
  [K7] formation of CO(g) | dH -110.5300000000000000001 kJ/mol
  [K8] sublimation of I2(s) | Q 0.62 ± 0.01 kJ (k = 2) for 10 mmol of I2(s) at 25 degC
       shared "cup A" 2 % | widen 2 "old, \'cup\'" | includes mixing
  [K9] combustion of CH4(g) to CO2(g), H2O(l) | dU -885.4 ± 0.3 kJ/mol (k = 2) | exclude "wet gas"
  [K10] fusion of H2O(s) | like K4 ± 20 kJ/mol (k = 2) | estimated dH
""")


def _book(path: Path, *rows: tuple[Any, ...], title: str = "heats") -> Path:
    book = openpyxl.Workbook()
    page = book.active
    page.title = title
    for row in rows:
        page.append(row)
    book.save(path)
    return path


def _faults(source: str | Path, **options: Any) -> list[tuple[int, int, str]]:
    with pytest.raises(rh.SheetFaults) as caught:
        read_known_heats(source, **options)
    return [(fault.line, fault.column, fault.message) for fault in caught.value.faults]


@pytest.mark.parametrize("ending", ["csv", "xlsx"])
def test_known_rows_come_back_equal(tmp_path: Path, ending: str) -> None:
    path = write_known_heats(SHEET.known, tmp_path / f"known.{ending}")
    assert read_known_heats(path, species=SHEET.species) == SHEET.known


def test_the_page_of_a_whole_workbook_comes_back_equal(tmp_path: Path) -> None:
    path = write_workbook(SHEET, tmp_path / "whole.xlsx")
    assert read_known_heats(path, species=SHEET.species) == SHEET.known


def test_csv_text_is_harmless_and_complete() -> None:
    lines = known_csv(SHEET.known).splitlines()
    assert lines[0] == (
        "label,reaction,heat,unit,uncertainty,k,per,temperature,source,note,estimated,includes,shared,accept,exclude,widen"
    )
    assert lines[1] == "K1,1/2 N2(g) + 3/2 H2(g) -> NH3(g),-45.940,kJ/mol,0.018,1,,,'=a source,,,,,,,"
    assert lines[8].startswith("K8,sublimation of I2(s),Q 0.62 ± 0.01 kJ (k = 2) for 10 mmol of I2(s) at 25 degC,,,,")
    assert "dU -885.4 ± 0.3 kJ/mol (k = 2)" in lines[9]
    assert "like K4 ± 20 kJ/mol (k = 2)" in lines[10]


def test_another_ending_is_refused(tmp_path: Path) -> None:
    with pytest.raises(rh.RouteheatError, match=r"\.csv or \.xlsx"):
        write_known_heats(SHEET.known, tmp_path / "known.ods")


@pytest.mark.parametrize(
    ("header", "cells", "typed"),
    [
        ("Row,Equation,dH,Units", "K1,formation of H2O(l),-285.83,kJ/mol", "-285.83 kJ/mol"),
        ("label,reaction,ΔrH / (kJ/mol)", "K1,formation of H2O(l),-285.83", "-285.83 kJ/mol"),
        ("label,reaction,heat (kJ/mol)", "K1,formation of H2O(l),-285.83", "-285.83 kJ/mol"),
        ("label,reaction,\"heat, kcal/mol\"", "K1,formation of H2O(l),-68.3", "-68.3 kcal/mol"),
        ("label,reaction,heat", "K1,formation of H2O(l),-285.830(40) kJ/mol", "-285.830 ± 0.04 kJ/mol (k = 1)"),
        ("label,reaction,heat,unit,u", "K1,formation of H2O(l),-285.83,kJ/mol,0.04", "-285.83 ± 0.04 kJ/mol (k = 1)"),
        ("label,reaction,heat,unit,standard uncertainty / (kJ/mol)", "K1,formation of H2O(l),-285.83,kJ/mol,0.04",
         "-285.83 ± 0.04 kJ/mol (k = 1)"),
        ("label,reaction,heat,unit,uncertainty (k = 2)", "K1,formation of H2O(l),-285.83,kJ/mol,0.04",
         "-285.83 ± 0.04 kJ/mol (k = 2)"),
        ("label,reaction,heat,unit,±,coverage factor", "K1,formation of H2O(l),-285.83,kJ/mol,0.04,95 %",
         "-285.83 ± 0.04 kJ/mol (95 %)"),
        ("label,reaction,heat,unit,uncertainty,k", "K1,formation of H2O(l),-285.83,kJ/mol,not stated,",
         "-285.83 kJ/mol"),
        ("label,reaction,heat,unit,per,temperature / degC", "K1,H2O(l) -> H2O(g),2.44,kJ/g,H2O(l),25",
         "2.44 kJ/g of H2O(l) at 25 degC"),
        ("label,reaction,heat / (kJ/mol),temperature / K", "K1,H2O(l) -> H2O(g),44,298.15", "44 kJ/mol at 298.15 K"),
    ],
)  # fmt: skip
def test_headers_in_plain_words(header: str, cells: str, typed: str) -> None:
    heat = read_known_heats(f"{header}\n{cells}\n")["K1"].heat
    assert heat is not None
    assert heat.text == typed


@pytest.mark.parametrize("separator", [",", ";", "\t"])
def test_the_usual_separators(separator: str) -> None:
    text = "label,reaction,heat\nK1,formation of H2O(l),-285.83 kJ/mol\n".replace(",", separator)
    assert list(read_known_heats(text)) == ["K1"]


def test_a_given_coverage_factor_holds_where_none_is_written() -> None:
    text = "label,reaction,heat,unit,uncertainty,k\nK1,formation of H2O(l),-285,kJ/mol,4,\n"
    rows = read_known_heats(text + "K2,formation of CO2(g),-393,kJ/mol,4,1\n", k=2)
    assert [row.datum.u for row in rows.values() if row.datum] == [2, 4]
    assert rows.k == 2


def test_an_uncertainty_without_its_coverage_factor_is_refused() -> None:
    text = "label,reaction,heat,unit,uncertainty\nK1,formation of H2O(l),-285,kJ/mol,4\n"
    assert _faults(text) == [(2, 5, "uncertainty: an uncertainty without its coverage factor")]


def test_every_bad_row_is_reported_with_its_line_and_column() -> None:
    text = (
        "Known heats of the project\n"
        "\n"
        "label;reaction;heat / (kJ/mol);u;source\n"
        "K1;formation of H2O(l);-285,83;0.04;x\n"
        "K2;formation of CO2(g);-393.51;0.13;good\n"
        ";formation of CO2(g);-393.51;0.13;x\n"
        "\n"
        "K4;H2(g) + O2(g) -> H2O(l);-285.8;0.1;x\n"
        "K5;formation of Xx(l);12;;\n"
        "K2;formation of CO(g);-110;;\n"
        "K7;formation of CO(g);;;\n"
        "K8;formation of CO(g);-110;;a;b\n"
        "K9;formation of CO(g) | dH 5 kJ/mol;-110;;\n"
    )
    assert _faults(text) == [
        (4, 3, "heat / (kJ/mol): a comma in a number"),
        (6, 1, "label: no label"),
        (8, 2, "reaction: does not balance: O −1"),
        (9, 2, "reaction: unknown element symbol 'Xx'"),
        (10, 1, "label: the label K2 is used twice"),
        (11, 3, "heat / (kJ/mol): no heat"),
        (12, 1, "label: more cells than headers"),
        (13, 2, "reaction: | cannot stand in this cell"),
    ]


def test_the_error_names_line_row_and_repair() -> None:
    with pytest.raises(rh.SheetFaults) as caught:
        read_known_heats("label,reaction,heat\nK1,formation of H2O(l),-285.83\n")
    assert str(caught.value) == ("line 2 (K1): heat: the unit of the number is missing\n  like dH -145 ± 8 kJ/mol")


def test_an_unknown_column_is_refused_unless_it_is_ignored() -> None:
    text = "label,reaction,heat,uncertianty,plant\nK1,formation of H2O(l),-285.83 kJ/mol,1,x\n"
    assert _faults(text) == [(1, 4, "unknown column uncertianty"), (1, 5, "unknown column plant")]
    assert list(read_known_heats(text, ignore=["Uncertianty", "plant"])) == ["K1"]


def test_two_columns_for_one_thing_are_refused() -> None:
    text = "label,reaction,heat,dH\nK1,formation of H2O(l),-285.83 kJ/mol,1\n"
    assert _faults(text) == [(1, 4, "two columns say heat")]


def test_a_file_without_the_headers_is_refused_in_words(tmp_path: Path) -> None:
    with pytest.raises(rh.RouteheatError, match="no line with the headers label, reaction, heat"):
        read_known_heats("a,b\n1,2\n")
    with pytest.raises(rh.RouteheatError, match="the first 30 of heats"):
        read_known_heats(_book(tmp_path / "x.xlsx", ("a", "b")))


def test_numbers_of_a_workbook_are_read_to_the_digits_it_shows(tmp_path: Path) -> None:
    cells = ("K1", "H2O(l) -> H2O(g)", 0.1 + 0.2, "kJ/mol")
    path = _book(tmp_path / "x.xlsx", ("label", "reaction", "heat", "unit"), cells)
    heat = read_known_heats(path)["K1"].heat
    assert heat is not None
    assert heat.text == "0.3 kJ/mol"


def test_a_date_where_a_number_should_be_is_reported(tmp_path: Path) -> None:
    day = datetime.datetime(2024, 1, 2)
    path = _book(tmp_path / "x.xlsx", ("label", "reaction", "heat"), ("K1", "formation of H2O(l)", day))
    assert _faults(path)[0][:2] == (2, 3)


def test_a_worksheet_can_be_named(tmp_path: Path) -> None:
    path = _book(tmp_path / "x.xlsx", ("label", "reaction", "heat"), ("K1", "formation of H2O(l)", "-285 kJ/mol"))
    assert list(read_known_heats(path, worksheet="heats")) == ["K1"]
    with pytest.raises(rh.RouteheatError, match="no worksheet 'other'; it has heats"):
        read_known_heats(path, worksheet="other")


def test_a_file_that_is_no_workbook_is_refused_in_words(tmp_path: Path) -> None:
    path = tmp_path / "x.xlsx"
    path.write_bytes(b"PK\x03\x04 no archive")
    with pytest.raises(rh.RouteheatError, match="no workbook that can be read"):
        read_known_heats(path)


def test_a_workbook_that_unpacks_to_too_much_is_not_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = _book(tmp_path / "x.xlsx", ("label", "reaction", "heat"))
    monkeypatch.setattr(spreadsheet_cells, "LARGEST_UNPACKED", 1000)
    with pytest.raises(rh.RouteheatError, match="larger than 1,000 bytes when unpacked"):
        read_known_heats(path)


def test_too_many_lines_columns_and_characters_are_refused() -> None:
    head = "label,reaction,heat\n"
    with pytest.raises(rh.RouteheatError, match="more than 10,000 rows"):
        read_known_heats(head + "K1,formation of H2O(l),-285 kJ/mol\n" * 10_001)
    with pytest.raises(rh.RouteheatError, match="more than 200 columns"):
        read_known_heats("x," * 300)
    assert _faults(head + f"K1,{'x' * 10_000},1 kJ/mol\n") == [(2, 2, "reaction: a cell of more than 4,000 characters")]


def test_a_label_cannot_smuggle_in_another_row() -> None:
    text = 'label,reaction,heat\n"K1] formation of CO(g) [",formation of H2O(l),-285 kJ/mol\n'
    assert _faults(text) == [(2, 1, "label: [ cannot stand in this cell")]


def test_double_quotes_in_texts_become_single_ones() -> None:
    text = 'label,reaction,heat,source\nK1,formation of H2O(l),-285 kJ/mol,"the ""red"" book"\n'
    assert read_known_heats(text)["K1"].source == "the 'red' book"

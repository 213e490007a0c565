"""Ways to get a wrong number that must not work."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

import routeheat as rh

SHEETS = Path(__file__).parent / "sheets"


def test_isomers_never_close_a_cycle() -> None:
    sheet = rh.read_sheet("""
species
  NPA  C3H8O(l)  name "1-propanol"
  IPA  C3H8O(l)  name "2-propanol"
known
  [K1] formation of NPA | dH -302.6 kJ/mol
  [K2] combustion of IPA to CO2(g), H2O(l) | dH -2005.8 kJ/mol
  [K3] formation of CO2(g) | dH -393.5 kJ/mol
  [K4] formation of H2O(l) | dH -285.8 kJ/mol
target [T] NPA -> IPA
target [U] combustion of NPA to CO2(g), H2O(l)
""")
    joined = rh.combine(sheet.targets["T"], sheet.known)
    assert set(joined.coefficients) == {"K1", "K2", "K3", "K4"}
    without = [row for row in sheet.known.values() if row.label != "K2"]
    with pytest.raises(rh.OutOfReach, match="IPA"):
        rh.combine(sheet.targets["T"], without)


@pytest.mark.parametrize("name", ["THF", "Ac2O", "NaOAc", "TsOH", "PrOH"])
def test_abbreviations_are_never_read_as_elements(name: str) -> None:
    with pytest.raises(rh.SheetFaults, match="an abbreviation"):
        rh.read_reaction(f"{name}(l) -> H2O(l)")


def _data(text: str) -> list[tuple[int, int]]:
    return [match.span() for match in re.finditer(r"dH [^|\n]+|yield [^|\n]+|amount [^|\n]+|equiv [^|\n]+", text)]


@pytest.mark.parametrize("number", range(len(_data((SHEETS / "amide.txt").read_text(encoding="utf-8")))))
def test_every_deleted_datum_changes_the_answer_or_is_refused(number: int) -> None:
    text = (SHEETS / "amide.txt").read_text(encoding="utf-8")
    begin, end = _data(text)[number]
    cut = text[:begin] + 'note "cut"' + text[end:]
    whole = rh.compare_routes(rh.read_sheet(text).routes)
    try:
        found = rh.compare_routes(rh.read_sheet(cut).routes)
    except rh.RouteheatError:
        return
    before = [(profile.total.exact, profile.not_entered) for profile in whole.profiles]
    assert before != [(profile.total.exact, profile.not_entered) for profile in found.profiles]


def test_a_deleted_known_row_is_missed() -> None:
    text = """
known
  [K1] formation of CO2(g)  | dH -393.51 kJ/mol
  [K2] formation of H2O(l)  | dH -285.83 kJ/mol
  [K3] combustion of C2H2(g) to CO2(g), H2O(l) | dH -1299.4 kJ/mol
target [T] formation of C2H2(g)
"""
    for label in ("K1", "K2", "K3"):
        sheet = rh.read_sheet(re.sub(rf"  \[{label}\][^\n]*\n", "", text))
        with pytest.raises(rh.OutOfReach):
            rh.combine(sheet.targets["T"], sheet.known)

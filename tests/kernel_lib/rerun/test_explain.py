"""Why a result moved: the contributions add up to the change exactly."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

import routeheat as rh
from routeheat.rerun.explain import effects, explain
from routeheat.rerun.kept import Kept, keep
from routeheat.rerun.leaves import Tolerance, leaves, moved

SHEET = """
uncertainty k = 1
species
  P C6H5NO2(l)
known
  [K1] formation of H2O(l) | dH -285.83 ± 0.04 kJ/mol
  [K2] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol
  [K3] formation of NH3(g) | dH -45.94 ± 0.35 kJ/mol
target [T] CO2(g) + 2 H2(g) -> C(s, graphite) + 2 H2O(l)
route A "nitration" makes P
  [A1] C6H6(l) + HNO3(l) -> P + H2O(l)
       dH -135 ± 8 kJ/mol | yield 88 %
"""


def _kept(text: str) -> Kept:
    return keep("x", rh.profile(rh.read_sheet(text).routes["A"]), None)


@given(heat=st.decimals(-900, 900, places=2), share=st.integers(1, 100))
def test_effects_add_up_to_the_change(heat: object, share: int) -> None:
    before, after = SHEET, SHEET.replace("-135 ±", f"{heat} ±").replace("88 %", f"{share} %")
    kept, now = _kept(before), _kept(after)
    found = effects(kept, now, ["total"])
    total = sum((item.by_value + item.by_coefficient for item in found), Fraction(0))
    assert total == Fraction(now.result["total"]["exact"]) - Fraction(kept.result["total"]["exact"])


def test_an_edited_heat_and_an_edited_yield_are_told_apart() -> None:
    kept = _kept(SHEET)
    (by_heat,) = effects(kept, _kept(SHEET.replace("-135", "-140")), ["total"])
    (by_yield,) = effects(kept, _kept(SHEET.replace("88 %", "80 %")), ["total"])
    assert (by_heat.by_value, by_heat.by_coefficient) == (Fraction(-5) / Fraction("0.88"), 0)
    assert (by_yield.by_value, by_yield.by_coefficient) == (0, -135 * (Fraction("1.25") - 1 / Fraction("0.88")))


def test_an_edited_uncertainty_alone_is_listed_without_effect() -> None:
    (found,) = effects(_kept(SHEET), _kept(SHEET.replace("± 8", "± 9")), ["total"])
    assert (found.datum, found.by_value, found.by_coefficient) == ("A1", 0, 0)


def test_tables_name_only_entries_the_result_rests_on() -> None:
    edited = SHEET.replace("-135", "-140").replace("-45.94", "-46.11")
    kept, now = _kept(SHEET), _kept(edited)
    _, edits, contributions = explain(kept, now, moved(leaves(kept.result), leaves(now.result), Tolerance()))
    assert edits.rows == (("A1", "dH -135 ± 8 kJ/mol", "dH -140 ± 8 kJ/mol"),)
    assert {row[1] for row in contributions.rows} == {"A1"}


def test_a_combination_that_uses_another_row_says_which() -> None:
    target = "target [T] N2(g) + 3 H2(g) -> 2 NH3(g)"
    one = SHEET.replace("target [T] CO2(g) + 2 H2(g) -> C(s, graphite) + 2 H2O(l)", target)
    two = one.replace("[K3] formation of NH3(g)", "[K4] 1/2 N2(g) + 3/2 H2(g) -> NH3(g)").replace("-45.94", "-46")
    sheets = [rh.read_sheet(text) for text in (one, two)]
    kept, now = (keep("x", rh.combine(sheet.targets["T"], sheet.known), None) for sheet in sheets)
    found = {item.datum: (item.coefficient_kept, item.coefficient_now) for item in effects(kept, now, ["heat"])}
    assert found == {"K3": (2, 0), "K4": (0, 2)}
    tables = explain(kept, now, moved(leaves(kept.result), leaves(now.result), Tolerance()))
    assert ("K3", "formation of NH3(g) | dH -45.94 ± 0.35 kJ/mol", "not there") in tables[1].rows


def test_an_edited_formula_of_a_declared_species_is_an_edit() -> None:
    text = SHEET.replace("P C6H5NO2(l)", "P ?(l) M 123 g/mol")
    kept, now = _kept(text), _kept(text.replace("123", "124"))
    assert (kept.rests_on["species P"], now.rests_on["species P"]) == ("? | M 123 g/mol", "? | M 124 g/mol")
    assert kept.rests_on_digest != now.rests_on_digest


def test_without_an_edit_the_versions_are_named(monkeypatch: pytest.MonkeyPatch) -> None:
    kept = _kept(SHEET)
    monkeypatch.setattr("routeheat.rerun.kept.__version__", "9.9")
    other = dict(kept.result, total=dict(kept.result["total"], exact="-1"))
    now = Kept("x", "Profile", "9.9", other, kept.heats, kept.data, kept.rests_on, kept.rests_on_digest, None)
    tables = explain(kept, now, moved(leaves(kept.result), leaves(now.result), Tolerance()))
    assert [note for table in tables for note in table.notes if "9.9" in note] == [
        "nothing that is typed and that the result rests on was edited; "
        f"it was calculated with routeheat {kept.version}, now with 9.9"
    ]

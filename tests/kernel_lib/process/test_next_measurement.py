"""What to measure next: rank-one updates against doing it again, chances against sampling, sentences."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from fractions import Fraction
from pathlib import Path

import numpy as np
import pytest

import routeheat as rh
from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.route import Sheet
from routeheat.chem.row import Rows
from routeheat.errors import RouteheatError, UnknownName
from routeheat.hess.reconcile import reconcile
from routeheat.process.next_measurement import Effect, NextMeasurement, next_measurement

AMIDE = Path(__file__).parents[2] / "published" / "sheets" / "amide.txt"

KNOWN = """
uncertainty k = 1
known
  [K1] formation of CO2(g)                       | dH -393.51 ± 0.5 kJ/mol
  [K2] formation of H2O(l)                       | dH -285.83 ± 0.3 kJ/mol
  [K3] combustion of C2H6O(l) to CO2(g), H2O(l)  | dH -1366.8 ± 2.0 kJ/mol
  [K4] C2H4(g) + H2O(l) -> C2H6O(l)              | dH -44.0 ± 1.5 kJ/mol
  [K5] formation of C2H4(g)                      | dH 52.5 ± 3.0 kJ/mol
target [T] 2 C(s, graphite) + 3 H2(g) + 1/2 O2(g) -> C2H6O(l)
"""


def effect(found: NextMeasurement, label: str) -> Effect:
    return next(item for item in found.effects if item.label == label)


def amide() -> Sheet:
    return rh.read_sheet(AMIDE)


def test_every_update_is_what_typing_the_new_uncertainty_gives() -> None:
    """Each effect against the whole comparison done again with that heat known to 4 kJ/mol."""
    sheet = amide()
    found = next_measurement(rh.compare_routes(sheet.routes).differences[0], attainable=4, routes=sheet.routes)
    text = AMIDE.read_text(encoding="utf-8")
    typed = {"C2": "-85 ± 10", "X2": "12 ± 8", "C": "-140 ± 8", "X2q": "-95 ± 10", "Y1": "-548 ± 15", "F": "-25 ± 5"}
    for label, heat in typed.items():
        assert text.count(f"dH {heat} ") == 1
        again = rh.read_sheet(text.replace(f"dH {heat} ", f"dH {heat.split(' ±')[0]} ± 4 "))
        difference = rh.compare_routes(again.routes).differences[0].heat
        assert difference is not None
        assert effect(found, label).u_after == pytest.approx(difference.u, rel=1e-9)


def test_the_least_is_a_perfect_measurement() -> None:
    sheet = amide()
    difference = rh.compare_routes(sheet.routes).differences[0]
    perfect = next_measurement(difference, attainable=0, routes=sheet.routes)
    some = next_measurement(difference, attainable=5, routes=sheet.routes)
    for item in perfect.effects:
        assert item.u_after == item.u_least == pytest.approx(effect(some, item.label).u_least)
    assert some.least == perfect.effects[0].u_after


def test_contributions_add_up_to_the_variance() -> None:
    sheet = amide()
    found = next_measurement(rh.compare_routes(sheet.routes).differences[0], attainable=5, routes=sheet.routes)
    assert sum(part.share or 0 for part in found.contributions) == pytest.approx(1)
    assert found.contributions[0].datum.label == "C2"


def test_what_both_routes_share_changes_nothing_and_nothing_gets_worse() -> None:
    sheet = amide()
    found = next_measurement(rh.compare_routes(sheet.routes).differences[0], attainable=20, routes=sheet.routes)
    assert effect(found, "F").remark == "does not change it"
    assert effect(found, "C2").remark == "known as well as that already"
    assert all(item.u_after == pytest.approx(found.heat.u) for item in found.effects)
    assert found.best is None
    assert found.sentence == "No single measurement listed would shrink the difference from u = 19.5."


def test_attainable_uncertainties_by_label() -> None:
    sheet = amide()
    difference = rh.compare_routes(sheet.routes).differences[0]
    found = next_measurement(difference, attainable=20, routes=sheet.routes, attainable_for={"X2": 1})
    assert found.best is not None
    assert (found.best.label, found.best.attainable) == ("X2", 1)
    with pytest.raises(UnknownName, match="Z9"):
        next_measurement(difference, attainable=5, routes=sheet.routes, attainable_for={"Z9": 1})
    with pytest.raises(RouteheatError, match="not negative"):
        next_measurement(difference, attainable=-1, routes=sheet.routes)


def test_the_unit_of_the_target_is_said() -> None:
    sheet = amide()
    found = next_measurement(rh.profile(sheet.routes["1"], per="kg"), attainable=5, routes=sheet.routes)
    assert found.sentence.startswith("Measuring Y1 to u = 5 kJ/mol would shrink the total from u = 69.1 to ")
    assert " kJ/kg; no single" in found.sentence


def test_reconciled_rows_are_updated_with_all_they_share() -> None:
    """Against adding the new measurement as one more row to the network and reconciling again."""
    sheet = rh.read_sheet(KNOWN)
    before = reconcile(sheet.known, accept="invented numbers")
    target = before.heat(sheet.targets["T"])
    found = next_measurement(target, attainable=0.4, known=before)
    assert before.adjusted is not None
    for label, row in sheet.known.items():
        now, item = before.adjusted[label].u, effect(found, label)
        assert item.u_now == pytest.approx(now)
        if now <= 0.4:
            continue
        # known to 0.4 afterwards means: measured with the uncertainty that, weighed with what is known, leaves 0.4
        measured = 1 / math.sqrt(1 / 0.4**2 - 1 / now**2)
        new = rh.row("NEW", row.reaction.text, f"{float(row.datum.value)} kJ/mol")  # type: ignore[union-attr]
        rows = Rows([*sheet.known.values(), new], 1.0)
        after = reconcile(rows, unstated=measured, accept="invented numbers")
        assert after.heat(sheet.targets["T"]).u == pytest.approx(item.u_after, rel=1e-6)


def test_formations_are_candidates_where_known_rows_lead_to_them() -> None:
    sheet = rh.read_sheet(KNOWN)
    combined = rh.combine(sheet.targets["T"], sheet.known)
    found = next_measurement(combined, attainable=0.1, known=reconcile(sheet.known, accept="invented numbers"))
    labels = [item.label for item in found.effects]
    assert "formation of C2H6O(l)" in labels
    assert "formation of CO2(g)" not in labels
    assert "T itself" in labels
    typed = next_measurement(combined, attainable=0.1, known=sheet.known)
    assert any("not reconciled" in note for note in typed.table().notes)
    lonely = rh.read_sheet("known\n  [K1] NH3(g) + HCl(g) -> NH4Cl(s) | dH -176.0(5) kJ/mol")
    found = next_measurement(HeatSum.zero(), attainable=1, known=lonely.known)
    assert found.unlinked == ("NH3(g)", "HCl(g)", "NH4Cl(s)")


def test_measuring_the_target_itself_leaves_what_is_attainable() -> None:
    sheet = rh.read_sheet(KNOWN)
    found = next_measurement(rh.combine(sheet.targets["T"], sheet.known), attainable=0.25, known=sheet.known)
    assert effect(found, "T itself").u_after == 0.25
    assert found.least == 0


def test_the_chance_of_a_clear_difference_is_what_sampling_gives() -> None:
    """The heat, once measured, is drawn 200,000 times; the difference is clear at twice its uncertainty."""
    rows = rh.read_sheet("uncertainty k = 1\nknown\n  [P] H2(g) -> H2(l) | dH -60 ± 8 kJ/mol").known
    (candidate,) = (row.datum for row in rows.values())
    assert candidate is not None
    heat = HeatSum.of(candidate) - HeatSum.of(Datum("Q", value=Fraction(-42), u=Fraction(6)))
    found = next_measurement(heat, attainable=2, known=rows, decides=True, name="difference")
    u_after = math.hypot(2, 6)
    shift = np.random.default_rng(7).normal(scale=math.sqrt(8**2 - 2**2), size=200_000)
    sampled = float(np.mean(np.abs(-18 + shift) >= 2 * u_after))
    assert heat.u == 10
    assert effect(found, "P").u_after == pytest.approx(u_after)
    assert effect(found, "P").chance == pytest.approx(sampled, abs=0.005)


def test_a_difference_that_no_measurement_moves_stays_as_clear_as_it_is() -> None:
    far, near = (HeatSum.of(Datum("P", value=Fraction(value), u=Fraction(1))) for value in (30, 1))
    rows = rh.read_sheet("uncertainty k = 1\nknown\n  [K1] H2(g) -> H2(l) | dH -60 ± 8 kJ/mol").known
    assert next_measurement(far, attainable=1, known=rows, decides=True).effects[0].chance == 1
    assert next_measurement(near, attainable=1, known=rows, decides=True).effects[0].chance == 0


def test_what_is_not_stated_comes_first() -> None:
    sheet = rh.read_sheet(AMIDE.read_text(encoding="utf-8").replace("dH 12 ± 8 kJ/mol", "dH 12 kJ/mol"))
    difference = rh.compare_routes(sheet.routes).differences[0]
    found = next_measurement(difference, attainable=5, routes=sheet.routes)
    first = found.effects[0]
    assert (first.label, first.u_now, first.unstated, first.chance) == ("X2", None, (), None)
    assert effect(found, "C2").unstated == ("X2",)
    assert found.sentence == ("The uncertainty of X2 is not stated, so the difference has none; measure X2 first.")
    typed = rh.read_sheet(AMIDE.read_text(encoding="utf-8").replace("dH 12 ± 8 kJ/mol", "dH 12 ± 5 kJ/mol"))
    stated = rh.compare_routes(typed.routes).differences[0].heat
    assert stated is not None
    assert first.u_after == pytest.approx(stated.u)


def test_without_a_number_there_is_nothing_to_shrink() -> None:
    text = AMIDE.read_text(encoding="utf-8")
    missing = rh.read_sheet(text.replace("dH -85 ± 10 kJ/mol | ", ""))
    with pytest.raises(RouteheatError, match="not entered in 2: C2"):
        next_measurement(rh.compare_routes(missing.routes).differences[0], attainable=5, routes=missing.routes)
    with pytest.raises(RouteheatError, match="route 2 has no total: not entered C2"):
        next_measurement(rh.profile(missing.routes["2"]), attainable=5, routes=missing.routes)
    symbol = rh.read_sheet(text.replace("dH -85 ± 10 kJ/mol", "dH x"))
    with pytest.raises(RouteheatError, match="has no number: x unknown"):
        next_measurement(rh.profile(symbol.routes["2"]), attainable=5, routes=symbol.routes)


def test_contradicting_rows_are_refused_until_accepted() -> None:
    sheet = rh.read_sheet(KNOWN.replace("52.5", "99.9"))
    with pytest.raises(RouteheatError, match="contradict"):
        next_measurement(HeatSum.zero(), attainable=1, known=reconcile(sheet.known))


def test_results_are_plain_data_and_show_themselves() -> None:
    sheet = amide()
    found = next_measurement(rh.compare_routes(sheet.routes).differences[0], attainable=5, routes=sheet.routes)
    plain = json.loads(json.dumps(found.to_dict(), allow_nan=False))
    assert plain["sentence"] == found.sentence
    assert found.table().notes[0] == found.sentence
    assert "share of the variance" in found.text
    assert replace(found, decides=False).table().columns[-1].key == "remark"

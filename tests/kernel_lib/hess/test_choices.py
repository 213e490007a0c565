"""Decisions about rows that contradict each other, typed in the sheet."""

from __future__ import annotations

import pytest

import routeheat as rh
from routeheat.hess.choices import Choice

TRIANGLE = """
{head}
species
  A  ?(l)
  B  ?(l)
  C  ?(l)
known
  [K1] A -> B | dH -50 ± 2 kJ/mol (k = 1){first}
  [K2] B -> C | dH -30 ± 2 kJ/mol (k = 1)
  [K3] A -> C | dH -95 ± 1 kJ/mol (k = 1){last}
"""


def typed(*, head: str = "", first: str = "", last: str = "") -> rh.Reconciled:
    return rh.reconcile(rh.read_sheet(TRIANGLE.format(head=head, first=first, last=last)).known)


def test_without_a_decision_a_contradiction_has_no_adjusted_value() -> None:
    found = typed()
    assert found.chi2 == pytest.approx(25.0)
    assert found.adjusted is None
    assert found.choices == ()


def test_a_contradiction_is_accepted_on_the_row_that_carries_the_reason() -> None:
    found = typed(first=' | accept "both measured twice"')
    assert found.adjusted is not None
    assert "the contradiction is accepted (typed at K1): both measured twice" in found.verdict
    assert found.choices == (Choice("accept", "K1", "both measured twice"),)


def test_a_row_is_excluded_with_its_reason() -> None:
    found = typed(last=' | exclude "wrong polymorph"')
    assert found.network.left_out == {"K3": "excluded: wrong polymorph"}
    assert "K3 is excluded: wrong polymorph" in found.table().notes
    assert "K3" not in found.rows()


def test_an_uncertainty_is_widened_with_its_reason() -> None:
    found = typed(last=' | widen 15 "cup without a lid"')
    assert found.network.heats["K3"].u == 15
    assert found.chi2 == pytest.approx(15**2 / (4 + 4 + 225))
    assert "the own uncertainty of K3 is multiplied by 15: cup without a lid" in found.table().notes


def test_the_call_goes_before_the_sheet() -> None:
    sheet = rh.read_sheet(TRIANGLE.format(head="", first="", last=' | widen 15 "cup"'))
    assert rh.reconcile(sheet.known, widen={"K3": 2}).network.heats["K3"].u == 2


UNSTATED = """
{head}
known
  [K1] H2O(s) -> H2O(l) | dH 6.0 kJ/mol
  [K2] H2O(l) -> H2O(g) | dH 44.0 ± 2.0 kJ/mol (k = 1)
  [K3] H2O(s) -> H2O(g) | dH 51.0 ± 2.0 kJ/mol (k = 1)
"""
LINE = 'unstated u = 3 kJ/mol "handbook of that time"'


def test_rows_that_state_no_uncertainty_take_part_as_the_sheet_says() -> None:
    found = rh.reconcile(rh.read_sheet(UNSTATED.format(head=LINE)).known)
    assert found.network.heats["K1"].u == 3
    assert found.chi2 == pytest.approx(1 / (9 + 4 + 4))
    words = "rows that state no uncertainty take part with u = 3 kJ/mol: handbook of that time"
    assert words in found.table().notes
    assert words in found.text


def test_without_the_line_they_do_not_take_part() -> None:
    assert list(rh.reconcile(rh.read_sheet(UNSTATED.format(head="")).known).network.left_out) == ["K1"]


def test_an_uncertainty_in_the_call_goes_before_the_line() -> None:
    found = rh.reconcile(rh.read_sheet(UNSTATED.format(head=LINE)).known, unstated=1.0)
    assert found.network.heats["K1"].u == 1
    assert [choice.text for choice in found.choices] == ["rows that state no uncertainty take part with u = 1 kJ/mol"]


@pytest.mark.parametrize("estimate", ["like K2 ± 2", "dH 7 ± 20 kJ/mol | estimated dH"])
def test_an_estimate_neither_checks_nor_is_adjusted(estimate: str) -> None:
    sheet = rh.read_sheet(UNSTATED.format(head="").replace("dH 6.0 kJ/mol", estimate))
    found = rh.reconcile(sheet.known)
    reason = "it is an estimate: it neither checks measured heats nor is adjusted to them"
    assert found.network.left_out == {"K1": reason}
    assert found.rows()["K1"] == sheet.known["K1"]

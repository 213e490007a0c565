"""Least-squares reconciliation: published closed forms, and one scenario worked out independently."""

from __future__ import annotations

from pathlib import Path

import pytest

import routeheat as rh
from routeheat.hess.reconcile import Reconciled, reconcile
from routeheat.process.next_measurement import next_measurement

SHEETS = Path(__file__).parent / "sheets"


def one_loop(direct: int) -> Reconciled:
    sheet = rh.read_sheet(f"""
uncertainty k = 1
species
  A  ?(l)
  B  ?(l)
  C  ?(l)
known
  [K1] A -> B | dH -50 ± 2 kJ/mol
  [K2] B -> C | dH -30 ± 2 kJ/mol
  [K3] A -> C | dH {direct} ± 1 kJ/mol
""")
    return reconcile(sheet.known)


def test_one_closed_loop() -> None:
    """Weighted least squares with conditions in closed form (E. M. Mikhail, Observations and Least Squares, 1976)."""
    found = one_loop(-83)
    assert found.adjusted is not None
    assert [heat.value for heat in found.adjusted.values()] == pytest.approx([-51.333, -31.333, -82.667], abs=1e-3)
    assert [heat.u for heat in found.adjusted.values()] == pytest.approx([1.491, 1.491, 0.943], abs=1e-3)
    assert (found.chi2, found.dof) == (pytest.approx(1.0), 1)
    assert found.p == pytest.approx(0.317, abs=1e-3)


def test_an_outlier_is_not_averaged_away() -> None:
    """Chi-square test; Birge ratio: R. T. Birge, Phys. Rev. 40 (1932) 207."""
    found = one_loop(-95)
    assert found.chi2 == pytest.approx(25.0)
    assert found.p == pytest.approx(5.73e-7, rel=1e-2)
    assert found.birge == pytest.approx(5.0)
    assert found.adjusted is None
    assert [cycle.text for cycle in found.cycles] == ["K1 + K2 − K3 should be 0, is 15.0 ± 3.0 (k = 1)"]


def test_the_next_measurement_for_two_ways_to_an_amide() -> None:
    """Invented scenario; numbers by an independent first-order calculation."""
    sheet = rh.read_sheet(SHEETS / "amide.txt")
    difference = rh.compare_routes(sheet.routes).difference("1", "2")
    found = next_measurement(difference, attainable=5, routes=sheet.routes)
    assert found.sentence == (
        "Measuring C2 to u = 5 kJ/mol would shrink the difference from u = 19.5 to 16.1; "
        "no single measurement brings it below 14.8."
    )

"""Routes with published or independently computed results."""

from __future__ import annotations

from pathlib import Path

import pytest

import routeheat as rh

SHEETS = Path(__file__).parent / "sheets"


def test_nitric_acid_without_recycle() -> None:
    """OpenStax, Chemistry 2e (2019), sec. 5.3, exercise on the Ostwald process: -494 kJ per mole of HNO3."""
    sheet = rh.read_sheet("""
route A "Ostwald" makes HNO3(aq)
  [S1] 4 NH3(g) + 5 O2(g) -> 4 NO(g) + 6 H2O(l)      | dH -907 kJ | product NO(g)
  [S2] 2 NO(g) + O2(g) -> 2 NO2(g)                    | dH -113 kJ
  [S3] 3 NO2(g) + H2O(l) -> 2 HNO3(aq) + NO(g)        | dH -139 kJ
""")
    profile = rh.profile(sheet.routes["A"])
    assert [str(step.extent) for step in profile.steps] == ["3/8", "3/4", "1/2"]
    assert profile.total.value == pytest.approx(-494.38, abs=0.6)


def test_linear_route_per_mole_of_isolated_product() -> None:
    """Arithmetic by hand: yields 90, 80, 75 %; heats per mole charged -80, -150, -45; M 250 g/mol."""
    sheet = rh.read_sheet("""
species
  A  ?(l)
  B  ?(l)
  C  ?(l)
  P  ?(s) | M 250 g/mol
route R makes P
  [R1] A -> B | dH -80 kJ/mol  | yield 90 %
  [R2] B -> C | dH -150 kJ/mol | yield 80 %
  [R3] C -> P | dH -45 kJ/mol  | yield 75 %
""")
    profile = rh.profile(sheet.routes["R"])
    assert [float(step.extent) for step in profile.steps] == pytest.approx([1.8519, 1.6667, 1.3333], abs=1e-4)
    assert [step.cumulative.value for step in profile.steps] == pytest.approx([-148.1, -398.1, -458.1], abs=0.1)
    assert rh.profile(sheet.routes["R"], per="kg").total.value == pytest.approx(-1833, abs=1)


def test_three_routes_to_one_amine() -> None:
    """Invented scenario; expected totals by an independent calculation of extents and first-order propagation."""
    sheet = rh.read_sheet(SHEETS / "amine.txt")
    profiles = {name: rh.profile(route) for name, route in sheet.routes.items()}
    assert [profiles[name].total.value for name in "ABC"] == pytest.approx([-743.0, -205.6, -380.3], abs=0.05)
    assert [profiles[name].total.u for name in "ABC"] == pytest.approx([23.4, 24.8, 37.1], abs=0.05)
    rises = {s.label: s.adiabatic_rise.value for p in profiles.values() for s in p.steps if s.adiabatic_rise}
    expected = {"A1": 123.4, "A2": 213.3, "B1": 56.0, "B2": 25.0, "C1": 24.0, "C2": 66.7, "C3": 30.5}
    assert rises == pytest.approx(expected, abs=0.05)


def test_convergent_routes_with_shared_steps() -> None:
    """Invented scenario; expected extents, totals and correlated uncertainty by an independent calculation."""
    sheet = rh.read_sheet(SHEETS / "amide.txt")
    comparison = rh.compare_routes(sheet.routes)
    one, two = comparison.profiles
    extents = [{step.label: float(step.extent) for step in profile.steps} for profile in (one, two)]
    assert extents[0]["X1"] == pytest.approx(1.3913, abs=5e-5)
    assert extents[1]["X1"] == pytest.approx(1.3618, abs=5e-5)
    assert extents[0]["X2q"] == pytest.approx(0.3882, abs=5e-5)
    assert extents[0]["Y1"] == pytest.approx(1.3135, abs=5e-5)
    assert extents[1]["Y1"] == pytest.approx(1.4613, abs=5e-5)
    assert [p.total.value for p in (one, two)] == pytest.approx([-1011.6, -1009.9], abs=0.05)
    assert [p.total.u for p in (one, two)] == pytest.approx([25.4, 26.2], abs=0.05)
    difference = comparison.differences[0]
    assert abs(difference.heat.value) == pytest.approx(1.7, abs=0.05)
    assert difference.heat.u == pytest.approx(19.5, abs=0.05)
    assert "not distinguishable" in difference.verdict


def test_retyped_steps_are_independent_data() -> None:
    """The same text under other labels is an independent datum: nothing shared, u = sqrt(25.4² + 26.2²) = 36.5."""
    text = (SHEETS / "amide.txt").read_text(encoding="utf-8")
    rows = {
        "use X1, Y1": "[X1b] EST + H2O(l) -> ACI + CH4O(l) | dH -55 ± 3 kJ/mol | yield 93 %\n"
        "  [Y1b] NIT + 3 H2(g) -> AMI + 2 H2O(l) | dH -548 ± 15 kJ/mol | yield 91 %",
        "use F": "[Fb] AMD(sln) -> AMD(s) | dH -25 ± 5 kJ/mol | yield 94 % | crystallisation | loss reacted",
    }
    for shared, retyped in rows.items():
        text = text.replace(shared, retyped)
    difference = rh.compare_routes(rh.read_sheet(text).routes).differences[0]
    assert difference.heat.u == pytest.approx(36.5, abs=0.05)

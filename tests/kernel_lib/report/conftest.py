"""Sheets that the report tests share; the heats of the small molecules are from memory, all others invented."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat.chem.row import Rows

SHEETS = Path(__file__).parents[2] / "published" / "sheets"
MIXED = """uncertainty k = 2

species
  NB   C6H5NO2(l) | name "nitrobenzene"
  ANI  C6H7N(l) | name "aniline" | cas 62-53-3

known
  [K1] formation of CO2(g)
       dH -393.51 ± 0.13 kJ/mol | source "CODATA 1989"
  [K2] formation of H2O(l)
       dH -285.830 ± 0.040 kJ/mol | source "CODATA 1989"
  [K3] combustion of C2H2(g) to CO2(g), H2O(l)
       dH -1299.4 ± 0.8 kJ/mol
  [K4] 3 C2H2(g) -> C6H6(l)
       dH -632 ± 3 kJ/mol
  [K5] formation of C6H6(l)
       dH 49.1 ± 0.6 kJ/mol
  [K6] formation of NB
       dH 12.5 kJ/mol
  [K7] formation of HNO3(l)
       dH -174.1 ± 0.8 kJ/mol

target [T] 2 C(s, graphite) + H2(g) -> C2H2(g)

target [U] C6H6(l) + Br2(l) -> C6H5Br(l) + HBr(g)

route A "over the nitro compound" makes ANI
  [A1] C6H6(l) + HNO3(l) -> NB + H2O(l)
       yield 96 ± 2 % | T 50 degC | conc 1.6 mol/kg | cp 1.75 kJ/(kg K)
  [A2] NB + 3 H2(g) -> ANI(sln) + 2 H2O(l)
       yield 98 %
  [A3] ANI(sln) -> ANI(l)
       dH -5 ± 2 kJ/mol | distillation
"""
"""A derived heat, one that is not entered, a target with two ways and one out of reach."""

WHOLE = """uncertainty k = 1

species
  EST  C12H16O3(l) | name "methyl ester"
  ACI  C11H14O3(s) | name "acid"
  AZI  C9H8FN3O2(sln) | groups azide | Qdec 900 J/g | onset 120 degC

known
  [K1] formation of CO2(g)
       dH -393.5 ± 0.1 kJ/mol
  [K2] formation of CO(g)
       dH -110.5 ± 0.2 kJ/mol
  [K3] 2 CO(g) + O2(g) -> 2 CO2(g)
       dH -560 ± 1 kJ/mol | widen 2 "old calorimeter" | accept "kept for comparison"
  [K4] formation of H2O(l)
       dH -285.83 ± 0.04 kJ/mol

route 1 "feed in a jacketed vessel" makes ACI
  [X1] EST + H2O(l) -> ACI + CH4O(l)
       dH -155 ± 3 kJ/mol | yield 93 % | T 40 degC | conc 1.0 mol/kg | cp 3.2 kJ/(kg K) | feed 2 h | Xac 20 %
       size 400 mol | U 350 W/(m2 K) | area 1.4 m2 | jacket 10 degC | MTT 95 ± 3 degC | TD24 110 ± 10 degC
       charges toluene 5 L/kg density 0.867 kg/L, water 3 kg
       nil "quench, work-up, neutralisation, dissolution, crystallisation, distillation, scrubber: one test step"
"""
"""Everything that a report has a section for; compounds and values invented."""

HOSTILE = (
    "<script>alert(1)</script>",
    "a & b \"double\" 'single' ]]>",
    "$\\href{javascript:alert(1)}{x}$",
    "\u202eevil\u2066 \u05d0\u05d1",
    "line\nbreak\x00\x1b\ufffe\ud800",
    "x" * 10_000,
    "word " * 2_000,
    "\u4e2d\u6587",
)


@pytest.fixture(scope="session")
def amine() -> Sheet:
    return rh.read_sheet(SHEETS / "amine.txt")


@pytest.fixture(scope="session")
def amide() -> Sheet:
    return rh.read_sheet(SHEETS / "amide.txt")


@pytest.fixture(scope="session")
def mixed() -> Sheet:
    return rh.read_sheet(MIXED)


@pytest.fixture(scope="session")
def amide_vessel() -> Sheet:
    return rh.read_sheet(SHEETS / "amide_vessel.txt")


@pytest.fixture(scope="session")
def whole() -> Sheet:
    return rh.read_sheet(WHOLE)


@pytest.fixture(params=range(len(HOSTILE)))
def hostile_text(request: pytest.FixtureRequest) -> str:
    return HOSTILE[request.param]


def _reason(key: str, text: str) -> str:
    return f'2 "{text}"' if key == "widen" else text


@pytest.fixture(params=["mixed", "whole"])
def hostile(request: pytest.FixtureRequest, hostile_text: str) -> Sheet:
    """One text as every name, title, source, reason and note of a sheet."""
    mixed: Sheet = request.getfixturevalue(request.param)
    text = hostile_text
    routes = {}
    for name, route in mixed.routes.items():
        steps = tuple(
            replace(step, row=replace(step.row, source=text, settings=(*step.row.settings, ("note", text))))
            for step in route.steps
        )
        routes[name] = replace(route, title=text, steps=steps)
    species = {name: replace(item, title=text, settings=(("note", text),)) for name, item in mixed.species.items()}
    known = Rows(
        [
            replace(row, source=text, settings=tuple((k, _reason(k, text)) for k, _ in row.settings))
            for row in mixed.known.values()
        ],
        mixed.known.k,
    )
    return replace(mixed, routes=routes, species=species, known=known)

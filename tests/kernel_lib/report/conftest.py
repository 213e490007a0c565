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


@pytest.fixture(params=range(len(HOSTILE)))
def hostile_text(request: pytest.FixtureRequest) -> str:
    return HOSTILE[request.param]


@pytest.fixture
def hostile(mixed: Sheet, hostile_text: str) -> Sheet:
    """One text as every name, title, source and note of a sheet."""
    text = hostile_text
    routes = {}
    for name, route in mixed.routes.items():
        steps = tuple(
            replace(step, row=replace(step.row, source=text, settings=(*step.row.settings, ("note", text))))
            for step in route.steps
        )
        routes[name] = replace(route, title=text, steps=steps)
    species = {name: replace(item, title=text, settings=(("note", text),)) for name, item in mixed.species.items()}
    known = Rows([replace(row, source=text) for row in mixed.known.values()], mixed.known.k)
    return replace(mixed, routes=routes, species=species, known=known)

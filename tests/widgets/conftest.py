"""A sheet of our own invention that every view has something to say about."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import Any

import pytest

import routeheat_widgets as rw

SHEET = """uncertainty k = 2

species
  SUB  C7H8O(l)    name "starting alcohol"
  OXI  C7H6O(l)    name "aldehyde"
  ACD  C7H6O2(s)   name "acid"

known
  [K1] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol | source "invented table"
  [K2] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol
  [K3] combustion of C2H2(g) to CO2(g), H2O(l) | dH -1299.4 ± 0.8 kJ/mol
  [K4] 2 C(s, graphite) + H2(g) -> C2H2(g) | dH 227.4 ± 1.5 kJ/mol

target [T] 2 C(s, graphite) + H2(g) -> C2H2(g)

target [U] H2O(l) -> H2O(g)

route A "in one go" makes ACD
  [A1] SUB + O2(g) -> ACD + H2O(l)
       dH -550 ± 30 kJ/mol | yield 80 ± 4 % | source "calorimeter"

route B "over the aldehyde" makes ACD
  [B1] SUB + 1/2 O2(g) -> OXI + H2O(l)
       dH -180 ± 12 kJ/mol | yield 90 %
  [B2] OXI + 1/2 O2(g) -> ACD
       dH -295 ± 15 kJ/mol | yield 92 %
"""


@pytest.fixture
def sheet_text() -> str:
    return SHEET


@pytest.fixture
def run_code(monkeypatch: pytest.MonkeyPatch) -> Callable[[str], tuple[dict[str, Any], list[Any]]]:
    """Runs code as a cell would: the names it leaves, and what it displays."""
    import IPython.display

    displayed: list[Any] = []
    monkeypatch.setattr(IPython.display, "display", lambda *items: displayed.extend(items))

    def run(code: str) -> tuple[dict[str, Any], list[Any]]:
        names: dict[str, Any] = {}
        exec(compile(code, "cell", "exec"), names)
        return names, displayed

    return run


@pytest.fixture
def make_desk() -> Iterator[Callable[..., Any]]:
    """Makes desks and closes them behind the test."""
    made: list[Any] = []

    def make(**keywords: Any) -> Any:
        made.append(rw.RouteDesk(**keywords))
        return made[-1]

    yield make
    for desk in made:
        desk.close()

"""Ladders that the drawing tests share; all numbers are invented."""

from __future__ import annotations

import random
from collections.abc import Callable

import pytest

from routeheat.present.ladder import Arrow, Column, Ladder
from routeheat.present.markup import Rich, Run

AXIS: Rich = (Run("Δ"), Run("r", "sub"), Run("H", "italic"))

HOSTILE = (
    "<script>alert(1)</script>",
    "a & b",
    "\"double\" and 'single'",
    "$\\href{javascript:alert(1)}{x}$",
    "%{customdata}",
    "\u202eevil\u2066",
    "line\nbreak\x00\x1b",
    "x" * 10_000,
    "word " * 2_000,
)


def chain(prefix: str, heats: list[float], *, u: float | None = 4.0, title: str = "") -> Column:
    """Steps one after another; the whisker of each level is ``2·u·√n``."""
    level = 0.0
    arrows = []
    for count, heat in enumerate(heats, start=1):
        spread = None if u is None else 2 * u * count**0.5
        arrows.append(
            Arrow(
                label=f"{prefix}{count}", caption=f"{heat:.0f} ± 8", start=level, end=level + heat, spread=spread,
                equation=(Run("C"), Run("6", "sub"), Run("H"), Run("6", "sub"), Run(" + Y → Z")), line=count,
                details=(("source", "invented"),),
            )
        )  # fmt: skip
        level += heat
    return Column(title or f"Route {prefix}", tuple(arrows), start_label="start", end_label="end")


def ladder(*columns: Column, overlay: bool = False, title: str = "A title") -> Ladder:
    """A ladder over ``columns``, k = 2."""
    return Ladder(title, columns, AXIS, "kJ mol⁻¹", 2.0, overlay=overlay, notes=("A note.",), alt="In words.")


@pytest.fixture
def one_step() -> Ladder:
    return ladder(chain("A", [-145.0]))


@pytest.fixture
def crowded() -> Ladder:
    """Forty levels within a few whisker lengths of each other."""
    source = random.Random(3)
    return ladder(chain("S", [float(source.randint(-40, 25)) for _ in range(40)], u=3.0))


@pytest.fixture
def overlaid() -> Ladder:
    """Three routes of twelve steps on one axis."""
    source = random.Random(5)
    return ladder(*(chain(name, [float(source.randint(-90, 40)) for _ in range(12)]) for name in "ABC"), overlay=True)


@pytest.fixture
def marks() -> Ladder:
    """Every kind of mark once."""
    arrows = (
        Arrow("A1", "−100 ± 10", 0.0, -100.0, 10.0),
        Arrow("A2", "not entered", -100.0, None, None),
        Arrow("A3", "−50 (u not stated)", -100.0, -150.0, None),
        Arrow("A4", "0 ± 5", -150.0, -150.0, 5.0),
        Arrow("A5", "+30 ± at least 12", -150.0, -120.0, 12.0, complete=False),
        Arrow("Q1", "−20 ± 2", -120.0, -140.0, 13.0, role="side"),
    )
    direct = Arrow("T", "−140 ± 3", 0.0, -140.0, 3.0, role="direct")
    return ladder(Column("steps", arrows, "from", "to"), Column("direct", (direct,)))


@pytest.fixture(params=range(len(HOSTILE)))
def hostile_text(request: pytest.FixtureRequest) -> str:
    return HOSTILE[request.param]


@pytest.fixture
def hostile(hostile_text: str) -> Ladder:
    """One text as every name of a ladder."""
    text = hostile_text
    rich = (Run(text), Run(text, "sub"))
    arrows = (
        Arrow(text, text, 0.0, -50.0, 4.0, equation=rich, details=((text, text),)),
        Arrow(text, rich, -50.0, -60.0, None, equation=text),
    )
    columns = (Column(text, arrows, text, rich), Column(rich, arrows[:1], rich, text))
    return Ladder(text, columns, rich, text, 2.0, notes=(text, text), alt=text)


@pytest.fixture
def make_chain() -> Callable[..., Column]:
    return chain


@pytest.fixture
def make_ladder() -> Callable[..., Ladder]:
    return ladder

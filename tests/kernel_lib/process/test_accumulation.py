"""Accumulation: analytic limits, the worst instant, and the reading of a step."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.step import Step
from routeheat.process.accumulation import accumulation, first_order, worst_first_order, worst_second_order
from routeheat.process.links import reactants
from routeheat.process.settings import Settings


@given(st.floats(1e-6, 1e3), st.floats(0.01, 100.0))
def test_first_order_lies_between_none_and_all(k: float, hours: float) -> None:
    assert 0 < first_order(k, hours) <= 1


def test_no_reaction_accumulates_everything() -> None:
    assert first_order(0.0, 3.0) == 1.0
    assert worst_second_order(0.0, 1.0).fraction == 1.0


def test_mass_correction_of_a_slow_feed_is_worst_at_its_end() -> None:
    worst = worst_first_order(0.1, 1.0, 0.4)
    assert (worst.time, worst.mass_ratio) == (1.0, 1.0)


def test_mass_correction_moves_the_worst_instant_of_a_fast_reaction_forward() -> None:
    worst = worst_first_order(20.0, 1.0, 0.4)
    assert worst.time < 0.5
    assert worst.fraction * worst.mass_ratio > first_order(20.0, 1.0)


def test_second_order_stoichiometric_feed_has_a_riccati_solution_without_dilution() -> None:
    """Fine explicit integration of dX/dθ = Da (1 − X)(θ − X) with a fourth-order method."""
    damkoehler, conversion, count = 5.0, 0.0, 20_000
    for index in range(count):
        time, h = index / count, 1 / count

        def slope(t: float, x: float) -> float:
            return damkoehler * (1 - x) * (t - x)

        a = slope(time, conversion)
        b = slope(time + h / 2, conversion + h / 2 * a)
        c = slope(time + h / 2, conversion + h / 2 * b)
        d = slope(time + h, conversion + h * c)
        conversion += h / 6 * (a + 2 * b + 2 * c + d)
    worst = worst_second_order(damkoehler, 1.0)
    assert worst.time == 1.0
    assert worst.fraction == pytest.approx(1 - conversion, abs=1e-6)


def test_second_order_is_worst_at_the_equivalence_point_of_an_excess() -> None:
    worst = worst_second_order(8.0, 1.25)
    assert worst.time == pytest.approx(0.8, abs=1e-3)


def test_mass_correction_counts_at_the_equivalence_point() -> None:
    worst = worst_second_order(8.0, 1.25, 0.3)
    assert worst.mass_ratio == pytest.approx(1 / (1 - 0.3 * 0.2), rel=1e-3)


def test_fast_second_order_reaction_accumulates_like_the_square_root() -> None:
    """At the end of a stoichiometric feed of a fast reaction 1 − X solves y' = 1 − Da y², so y → 1/√Da to leading
    order (quasi-steady state)."""
    assert worst_second_order(1e6, 1.0).fraction == pytest.approx(1e-3, rel=0.3)


def test_little_fed_counts_on_what_is_fed() -> None:
    slow = worst_second_order(0.0, 0.5)
    assert slow.fraction == 1.0


def read(code: SimpleNamespace, step: Step, **keys: object) -> object:
    settings = tuple((key, code.measured(text) if isinstance(text, str) else text) for key, text in keys.items())
    limiting = step.limiting or reactants(step)[0]
    return accumulation(replace(step, row=replace(step.row, settings=settings)), Settings(settings), limiting)


@pytest.fixture
def plain(code: SimpleNamespace) -> Step:
    found: Step = code.step("S", "C2H4(g) + H2(g) -> C2H6(g)", "-100", conc="1", cp="2")
    return found


def test_typed_value_is_used(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, Xac="30 ± 5 %", feed="3 h")
    assert (found.fraction.value, found.fraction.u, found.origin) == (0.3, pytest.approx(0.05), "typed")


def test_missing_accumulation_is_one_and_says_so(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, feed="3 h")
    assert found.fraction.value == 1.0
    assert found.notices == ("Xac = 1 is used: no accumulation and no rate constant typed",)


def test_batch_is_one_without_a_notice(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, batch=True)
    assert (found.fraction.value, found.notices, found.faults) == (1.0, (), ())


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ({"batch": True, "Xac": "0.5"}, "Xac is 1"),
        ({"Xac": "1.2", "feed": "1 h"}, "between 0 and 1"),
        ({"Xac": "-0.1", "feed": "1 h"}, "between 0 and 1"),
        ({"Xac": "0.5", "feed": "0 h"}, "feed time"),
        ({"Xac": "0.5", "feed": "1 h", "fedpart": "100 %"}, "fedpart"),
        ({"rate1": "0 h^-1", "feed": "1 h"}, "rate1 is not positive"),
    ],
)
def test_impossible_inputs_are_faults(code: SimpleNamespace, plain: Step, keys: dict[str, object], words: str) -> None:
    found = read(code, plain, **keys)
    assert words in found.faults[0]
    assert found.fraction.value == 1.0


def test_first_order_from_the_sheet(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, rate1="0.5 h^-1", feed="4 h")
    assert found.fraction.value == pytest.approx(0.4323, abs=1e-4)
    minutes = read(code, plain, rate1="0.5 h^-1", feed="240 min")
    assert minutes.fraction == found.fraction


def test_uncertain_rate_constant_is_propagated(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, rate1="0.5 ± 0.1 h^-1", feed="4 h")
    assert found.fraction.u == pytest.approx(0.1 * (first_order(0.49, 4) - first_order(0.51, 4)) / 0.02, rel=1e-3)


def test_rate_constant_without_a_feed_time_is_not_used(code: SimpleNamespace, plain: Step) -> None:
    assert "without a feed time" in read(code, plain, rate1="0.5 h^-1").notices[0]


def test_second_order_needs_to_know_what_is_fed(code: SimpleNamespace, plain: Step) -> None:
    found = read(code, plain, rate2="2 kg/(mol h)", feed="4 h")
    assert found.origin.startswith("second order")
    assert "stoichiometric amount is assumed" in found.notices[0]


def test_second_order_with_a_fed_limiting_reactant_equals_its_mirror(code: SimpleNamespace) -> None:
    """Feeding the limiting reactant into 1.25 equivalents: never more than all of it is fed, and none is in excess."""
    step = code.step(
        "S", "C2H4(g) + H2(g) -> C2H6(g)", "-100", conc="1", cp="2", equiv={"H2(g)": "1.25"}, limiting="C2H4(g)"
    )
    found = read(code, step, rate2="2 kg/(mol h)", feed="4 h", fed=code.species("C2H4(g)"))
    mirrored = worst_second_order(2 * 1.25 * 4, 0.8)
    assert found.fraction.value == pytest.approx(mirrored.fraction, rel=1e-9)
    assert found.notices == ()

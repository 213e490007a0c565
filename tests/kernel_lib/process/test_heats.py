"""Heat of a step: typed, derived, refused; and the adiabatic temperature rise."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from types import SimpleNamespace

import pytest

from routeheat.chem.row import Heat, Rows
from routeheat.errors import RouteError
from routeheat.process.extents import extents
from routeheat.process.heats import adiabatic_rise, heat_on_basis, molar_heat

PURE = "derived from known rows; pure components: no mixing, solvation or dilution"


def known(code: SimpleNamespace, *rows: tuple[str, str, str]) -> Rows:
    return Rows((code.row(label, text, heat) for label, text, heat in rows), 1.0)


def test_a_typed_heat_holds_at_the_temperature_of_its_step(code: SimpleNamespace) -> None:
    found = molar_heat(code.step("S1", "A(l) -> P(l)", "-10 ± 1", at="60 degC"), Rows(), 1.0)
    assert (found.heat.exact, found.origin, found.temperature) == (-10, "typed", Fraction("333.15"))


def test_the_temperature_of_the_heat_itself_comes_first(code: SimpleNamespace) -> None:
    step = code.step("S1", "A(l) -> P(l)", at="60 degC")
    step = replace(step, row=code.row("S1", "A(l) -> P(l)", "-10", at="25 degC"))
    assert molar_heat(step, Rows(), 1.0).temperature == Fraction("298.15")


def test_a_missing_heat_is_derived_from_known_rows(code: SimpleNamespace) -> None:
    rows = known(code, ("K1", "A(l) -> B(l)", "-10 ± 3"), ("K2", "B(l) -> P(l)", "-20 ± 4"))
    found = molar_heat(code.step("S1", "2 A(l) -> 2 P(l)"), rows, 1.0)
    assert (found.heat.exact, found.heat.u, found.origin) == (-60, 10.0, f"{PURE} (K1, K2)")
    assert found.temperature == Fraction("298.15")


def test_two_ways_that_differ_are_both_shown(code: SimpleNamespace) -> None:
    rows = known(code, ("K1", "A(l) -> P(l)", "-10 ± 3"), ("K2", "A(l) -> P(l)", "-12 ± 3"))
    found = molar_heat(code.step("S1", "A(l) -> P(l)"), rows, 1.0)
    assert "not unique" in found.origin
    assert "−10.0 ± 3.0 (k = 1) kJ/mol" in found.origin
    assert "−12.0 ± 3.0 (k = 1) kJ/mol" in found.origin


def test_two_ways_that_agree_need_no_word(code: SimpleNamespace) -> None:
    rows = known(code, ("K1", "A(l) -> P(l)", "-10 ± 3"), ("K2", "A(l) -> P(l)", "-10 ± 3"))
    assert "not unique" not in molar_heat(code.step("S1", "A(l) -> P(l)"), rows, 1.0).origin


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        ("A(sln) -> P(l)", "not entered: A(sln) is in a mixture or has no phase, so no heat can be derived"),
        ("A -> P(l)", "not entered: A is in a mixture or has no phase, so no heat can be derived"),
        ("A(l) -> N(l)", "not entered: "),
    ],
)
def test_what_cannot_be_derived_is_not_entered(code: SimpleNamespace, text: str, reason: str) -> None:
    rows = known(code, ("K1", "A(l) -> P(l)", "-10"))
    found = molar_heat(code.step("S1", text), rows, 1.0)
    assert found.heat is None
    assert found.origin.startswith(reason)


def test_other_steps_are_never_used(code: SimpleNamespace) -> None:
    found = molar_heat(code.step("S1", "A(l) -> P(l)"), Rows(), 1.0)
    assert (found.heat, found.origin) == (None, "not entered: no known rows to derive it from")


def test_a_basis_that_does_not_take_part_is_a_fault(code: SimpleNamespace) -> None:
    step = code.step("S1", "A(l) -> P(l)")
    heat = Heat(code.measured("-10 kJ/mol"), basis=code.species("Z"))
    with pytest.raises(RouteError, match="S1: Z does not take part"):
        molar_heat(replace(step, row=replace(step.row, heat=heat)), Rows(), 1.0)


@pytest.mark.parametrize(("loss", "heat", "slope"), [("reacted", -20, 40), ("unreacted", -10, 0)])
def test_a_yield_with_uncertainty_has_its_sensitivity(code: SimpleNamespace, loss: str, heat: int, slope: int) -> None:
    # ξ = 1/y: reacted ΔH/y, derivative −ΔH/y²; unreacted y·ΔH/y = ΔH, derivative 0
    made = code.route("R", "P", code.step("S1", "A -> P", "-10 ± 1", "50 ± 2 %"))
    step = made.steps[0]
    found = heat_on_basis(extents(made), step, step.row.heat_sum(1.0), Fraction(1), loss)
    assert found.exact == heat
    assert {d.what: c for d, c in found.terms}.get("yield", 0) == slope


def test_an_unreacted_loss_at_full_yield_still_has_a_sensitivity_upstream(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B", "-10 ± 1", "100 ± 1 %"),
        code.step("S2", "B -> P", "-10 ± 1", "100 ± 1 %", loss="unreacted"),
    )
    found = [heat_on_basis(extents(made), s, s.row.heat_sum(1.0), Fraction(1), s.loss_counts) for s in made.steps]
    assert {d.name: c for d, c in found[0].terms} == {"S1": 1, "yield of S1": 10, "yield of S2": 10}
    assert {d.name: c for d, c in found[1].terms} == {"S2": 1}


def test_adiabatic_rise_of_a_nitration(amine_routes: dict) -> None:  # type: ignore[type-arg]
    # invented step; 135 · 1.6 / 1.75 = 123.4 K, u = 8/135 of it
    found = extents(amine_routes["A"])
    step = found.route.steps[0]
    rise = adiabatic_rise(found, step, step.row.heat_sum(1.0), 1.0)
    assert rise is not None
    assert rise.value == pytest.approx(123.43, abs=0.01)
    assert rise.u == pytest.approx(7.31, abs=0.01)
    assert rise.at_least  # concentration and heat capacity state no uncertainty


def test_adiabatic_rise_combines_all_three_uncertainties(code: SimpleNamespace) -> None:
    step = code.step("S1", "2 A -> P", "-200 ± 20", conc="1 ± 0.1", cp="2 ± 0.2")
    made = code.route("R", "P", step)
    rise = adiabatic_rise(extents(made), step, step.row.heat_sum(1.0), 1.0)
    assert rise is not None
    assert (rise.value, rise.at_least) == (50.0, False)
    assert rise.u == pytest.approx(50 * 0.03**0.5)


@pytest.mark.parametrize("missing", ["concentration", "heat_capacity"])
def test_no_rise_without_its_data(code: SimpleNamespace, missing: str) -> None:
    step = replace(code.step("S1", "A -> P", "-200", conc="1", cp="2"), **{missing: None})
    assert adiabatic_rise(extents(code.route("R", "P", step)), step, step.row.heat_sum(1.0), 1.0) is None

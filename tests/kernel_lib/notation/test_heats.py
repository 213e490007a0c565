"""Heats at constant volume, from calorimeter runs and like other rows; the line for rows that state no uncertainty."""

from __future__ import annotations

from fractions import Fraction

import pytest

from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Sheet
from routeheat.chem.row import Row
from routeheat.notation.build import build_sheet
from routeheat.notation.write import write_sheet

HYDROGENATION = "C6H5NO2(l) + 3 H2(g) -> C6H7N(l) + 2 H2O(l)"


def known(*keys: str, reaction: str = HYDROGENATION) -> Sheet:
    rows = "".join(f"  [K{index}] {reaction} | {key}\n" for index, key in enumerate(keys, 1))
    sheet, faults = build_sheet(f"uncertainty k = 2\nknown\n{rows}")
    assert [str(fault) for fault in faults] == []
    return sheet


def heat(row: Row) -> HeatSum:
    found = row.heat_sum()
    assert found is not None
    return found


def fault_of(key: str, *, step: bool = False, reaction: str = HYDROGENATION) -> tuple[str, str]:
    section = "route A makes C6H7N(l)" if step else "known"
    _, faults = build_sheet(f"uncertainty k = 2\n{section}\n  [K1] {reaction} | {key}\n")
    (found,) = [fault for fault in faults if fault.severity == "fault"]
    return found.message, found.hint


def test_a_heat_at_constant_volume_becomes_one_at_constant_pressure() -> None:
    """ΔH = ΔU + Δν(gas) R T with R = 8.314 462 618 153 24 J/(mol K): three moles of gas disappear."""
    row = known("dU -545 ± 2 kJ/mol").known["K1"]
    assert heat(row).exact == -545 - 3 * Fraction("8.31446261815324") * Fraction("298.15") / 1000
    assert heat(row).u == 1.0
    assert row.remarks == (
        "K1: ΔU is typed, ΔH = ΔU + Δn(gas) R T adds −7.437 kJ/mol; corrections of a bomb to standard states "
        "(Washburn) are not included",
    )


def test_the_volume_work_is_counted_at_the_temperature_of_the_measurement() -> None:
    warm = heat(known("dU -545 kJ/mol at 80 degC").known["K1"])
    assert warm.exact == -545 - 3 * Fraction("8.31446261815324") * Fraction("353.15") / 1000


@pytest.mark.parametrize(
    ("key", "value"),
    [
        ("Q -5 kJ for 10 mmol of C6H5NO2(l)", "-500"),
        ("Q -5 kJ for 30 mmol of H2(g)", "-500"),
        ("Q -500 kJ for 1 mol of C6H5NO2(l) at 60 degC", "-500"),
        ("Q -1 kcal for 10 mmol of C6H5NO2(l)", "-418.4"),
    ],
)
def test_a_run_counts_what_reacted(key: str, value: str) -> None:
    assert heat(known(key).known["K1"]).exact == Fraction(value)


def test_a_weighed_portion_has_a_molar_mass_and_an_uncertainty() -> None:
    """u² = (uQ/Q)² + (um/m)², times the heat (JCGM 100:2008, eq. 12); u(m)/m = 4 %, u(Q)/Q = 3 %: 5 %."""
    row = known("Q -5.0 ± 0.3 kJ for 1.231 ± 0.09848 g of C6H5NO2(l)").known["K1"]
    molar_mass = row.reaction.species[0].molar_mass
    assert molar_mass is not None
    assert heat(row).exact == -5 * molar_mass / Fraction("1.231")
    assert heat(row).u == pytest.approx(0.05 * abs(heat(row).value), rel=1e-12)


def test_a_run_whose_heat_states_no_uncertainty_has_none() -> None:
    assert heat(known("Q -5.0 kJ for 1.231 ± 0.1 g of C6H5NO2(l)").known["K1"]).not_stated == ("K1",)


def test_a_declared_name_may_hold_the_word_of_a_run() -> None:
    row = "[K1] base for A -> base for A(s) | dU -10 kJ/mol of base for A(l)"
    sheet, faults = build_sheet(f"species\n  base for A  C6H7N(l)\nknown\n  {row}\n")
    assert faults == ()
    assert heat(sheet.known["K1"]).exact == -10


def test_a_run_in_a_bomb_is_converted_too() -> None:
    (run, molar) = known("dU -5.45 kJ for 10 mmol of C6H5NO2(l)", "dU -545 kJ/mol of C6H5NO2(l)").known.values()
    assert heat(run).exact == heat(molar).exact


@pytest.mark.parametrize(
    "key",
    [
        "dU -545 ± 2 kJ/mol", "dU -545 ± 2 kJ/mol of H2(g) (k = 1) at 30 degC", "dU -5.45 kJ for 10 mmol of H2(g)",
        "Q -48.8 ± 0.2 kJ (k = 1) for 3.12 ± 0.01 g (95 %) of C6H5NO2(l) at 298.15 K",
    ],
)  # fmt: skip
def test_every_form_is_written_as_it_was_typed(key: str) -> None:
    sheet = known(key)
    written = write_sheet(sheet)
    assert f"       {key}\n" in written
    assert build_sheet(written)[0] == sheet


@pytest.mark.parametrize(
    ("key", "message", "hint"),
    [
        ("Q x", "a heat of how much of what?", "like Q -48.8 kJ for 3.12 g"),
        ("dU x", "a number is expected here", "like -3225.63 ± 0.18 kJ/mol"),
        ("Q -5 kJ for 3 g", "of what?", "like 3 g of C6H12O6(s)"),
        ("Q -5 kJ for 0 g of C6H5NO2(l)", "what reacted is more than nothing", "like 3.12 g"),
        ("Q -5 kJ of H2(g) for 3 g of C6H5NO2(l)", "what reacted stands behind for", "like -48.8 kJ for"),
        ("Q -5 kJ for of H2(g)", "a number is expected here", "like 3.12 g of C6H12O6(s)"),
        ("Q -5 kJ for 3 g of Pd(s)", "Pd(s) does not take part in the reaction", "one of C6H5NO2(l)"),
        ("dU -5 kJ/kg", "a heat per mass of what?", "like kJ/kg of C6H5NO2(l)"),
    ],
)
def test_unreadable_heats(key: str, message: str, hint: str) -> None:
    said, repair = fault_of(key)
    assert said.startswith(message)
    assert repair.startswith(hint)


def test_a_step_says_at_which_temperature_its_bomb_ran() -> None:
    message, hint = fault_of("T 60 degC | dU -545 kJ/mol", step=True)
    assert message == "ΔU becomes ΔH at the temperature of the measurement, which is missing"
    assert hint == "like dU -545 kJ/mol at 25 degC"
    _, faults = build_sheet(f"route A makes C6H7N(l)\n  [A1] {HYDROGENATION} | dU -545 kJ/mol at 25 degC\n")
    assert faults == ()


def test_a_step_without_a_change_in_gas_needs_no_temperature() -> None:
    _, faults = build_sheet("route A makes C6H7N(s)\n  [A1] C6H7N(l) -> C6H7N(s) | dU -10 kJ/mol\n")
    assert faults == ()


def test_the_phases_of_all_species_must_be_known() -> None:
    message, _ = fault_of("dU -545 kJ/mol at 25 degC", step=True, reaction="C6H5NO2 + 3 H2(g) -> C6H7N(l) + 2 H2O(l)")
    assert message == "ΔU becomes ΔH by the change in moles of gas, but the phase of C6H5NO2 is not stated"


# analogues ----------------------------------------------------------------------------------------------------------


def test_an_analogue_shares_the_error_of_its_row_and_adds_its_own() -> None:
    first, like = (heat(row) for row in known("dH -145 ± 8 kJ/mol", "like K1 ± 30").known.values())
    assert like.exact == -145
    assert like.u == pytest.approx((4**2 + 15**2) ** 0.5)
    assert like.covariance(first) == 16
    assert (like - first).u == 15
    assert like.coefficients == {"K1": 1, "K2": 1}
    assert like.estimated == ("K2",)
    assert first.estimated == ()


def test_an_analogue_says_everywhere_that_it_is_an_estimate() -> None:
    row = known("dH -145 ± 8 kJ/mol", "like K1 ± 30 (k = 2)").known["K2"]
    assert row.estimated
    assert row.remarks == ("K2 is estimated, like K1",)
    assert str(heat(row)) == "−145 ± 31 (k = 2, estimated) kJ/mol"
    assert (row.heat.typed if row.heat else "") == "like K1 ± 30 kJ/mol (k = 2)"


def test_a_measured_heat_is_not_called_estimated() -> None:
    row = known("dH -145 ± 8 kJ/mol | estimated TD24").known["K1"]
    assert not row.estimated
    assert known("dH -145 ± 8 kJ/mol | estimated dH").known["K1"].estimated


def test_a_step_may_be_like_a_known_row_or_like_a_later_step_of_another_route() -> None:
    text = (
        "uncertainty k = 2\nknown\n  [K1] C6H7N(l) -> C6H7N(s) | dH -10 ± 2 kJ/mol\n"
        "route A makes C6H7N(s)\n  [A1] C6H7N(l) -> C6H7N(s) | like B1 ± 25 | T 20 degC\n"
        "route B makes C6H7N(s)\n  [B1] C6H7N(l) -> C6H7N(s) | dH -12 ± 2 kJ/mol\n"
        "route C makes C6H7N(s)\n  [C1] C6H7N(l) -> C6H7N(s) | like [K1] +/- 20 kJ/mol\n"
    )
    sheet, faults = build_sheet(text)
    assert faults == ()
    assert heat(sheet.routes["A"].step("A1").row).exact == -12
    assert heat(sheet.routes["C"].step("C1").row).exact == -10
    written = write_sheet(sheet)
    assert "like B1 ± 25 kJ/mol" in written
    assert build_sheet(written)[0] == sheet


def test_the_analogue_is_taken_per_mole_as_its_own_row_is_written() -> None:
    text = "known\n  [K1] 2 C6H7N(l) -> 2 C6H7N(s) | dH -10 kJ/mol of C6H7N(l)\n  [K2] I2(s) -> I2(g) | like K1 ± 9\n"
    assert heat(build_sheet(text)[0].known["K2"]).exact == -20


@pytest.mark.parametrize(
    ("rows", "message", "hint"),
    [
        (["like K9 ± 25"], "no row of this sheet is called K9", "name a known row or a step"),
        (["like K1 ± 25"], "a row is not its own analogue", "name a row with a measured heat"),
        (["like K2 ± 25", "note nothing"], "K2 has no heat of its own to take", "name a row"),
        (["like K2 ± 25", "dH x"], "the heat of K2 is the unknown x", "name a row"),
        (["like K2 ± 25", "like K3 ± 25", "dH -1 kJ/mol"], "K2 is itself only like K3", "name a row"),
        (["like"], "like which row?", "write like A1 ± 25"),
        (["like K2", "dH -1 kJ/mol"], "how far may it be off from its analogue?", "write like K2 ± 25"),
        (["like K2 ± 0", "dH -1 kJ/mol"], "an analogue is off by some kJ per mole", "write like A1 ± 25"),
        (["like K2 ± 20 %", "dH -1 kJ/mol"], "how far an analogue may be off is typed in kJ/mol", "write like"),
        (["like K2 ± 20 K", "dH -1 kJ/mol"], "K is not a unit for this", "write like A1 ± 25 kJ/mol"),
    ],
)
def test_what_cannot_be_an_analogue(rows: list[str], message: str, hint: str) -> None:
    text = "".join(f"  [K{index}] {HYDROGENATION} | {key}\n" for index, key in enumerate(rows, 1))
    sheet, faults = build_sheet(f"uncertainty k = 2\nknown\n{text}")
    (fault,) = [fault for fault in faults if fault.severity == "fault"]
    assert fault.message.startswith(message)
    assert fault.hint.startswith(hint)
    assert (fault.line, fault.subject) == (3, "K1")
    assert sheet.known["K1"].heat is None


# rows that state no uncertainty -------------------------------------------------------------------------------------


def test_the_class_of_rows_without_an_uncertainty_is_kept() -> None:
    line = 'unstated u = 1.50 kcal/mol "old tables"'
    sheet, faults = build_sheet(f"{line}\nknown\n  [K1] I2(s) -> I2(g) | dH 62 kJ/mol\n")
    assert faults == ()
    assert sheet.unstated is not None
    assert sheet.known.unstated is sheet.unstated
    assert (sheet.unstated.kj_per_mol, sheet.unstated.reason) == (Fraction("6.276"), "old tables")
    assert write_sheet(sheet).startswith('unstated u = 1.50 kcal/mol "old tables"\n\nknown\n')
    assert build_sheet(write_sheet(sheet))[0] == sheet


@pytest.mark.parametrize(
    ("line", "message"),
    [
        ("unstated", "an uncertainty for rows that state none, and the reason for it, are expected"),
        ("unstated u = 5 kJ/mol", "an uncertainty for rows that state none, and the reason for it, are expected"),
        ('unstated u = 5 kJ/mol ""', "the reason is missing"),
        ('unstated u = 5 "old"', "the unit of the number is missing"),
        ('unstated u = 0 kJ/mol "old"', "an uncertainty is more than zero"),
        ('unstated u = 5 ± 1 kJ/mol "old"', "one standard uncertainty for all such rows is expected"),
        ('unstated u = 5 kJ/mol "a"\nunstated u = 5 kJ/mol "b"', "a second line for rows that state no uncertainty"),
        ('unstated u = 5 kJ/mol "a"\n  [K1] I2(s) -> I2(g)', "nothing stands below the unstated line"),
        ('unstatd u = 5 kJ/mol "a"', "unknown section unstatd"),
        (' unstated u = 5 kJ/mol "a"\nknown', "unstated starts a section, and stands at the left margin"),
    ],
)
def test_wrong_lines_for_rows_without_an_uncertainty(line: str, message: str) -> None:
    _, faults = build_sheet(f"uncertainty k = 2\n{line}\n")
    assert [fault.message for fault in faults if fault.severity == "fault"] == [message]


# decisions ----------------------------------------------------------------------------------------------------------


def test_decisions_keep_their_reason_and_come_back() -> None:
    sheet = known('dH -1 kJ/mol | accept "checked twice"', 'dH -1 kJ/mol | exclude "wrong phase"',
                  'dH -1 kJ/mol | widen 2.5 "cup, no stirrer"')  # fmt: skip
    settings = [row.settings for row in sheet.known.values()]
    assert settings == [(("accept", "checked twice"),), (("exclude", "wrong phase"),),
                        (("widen", '2.5 "cup, no stirrer"'),)]  # fmt: skip
    assert build_sheet(write_sheet(sheet))[0] == sheet


@pytest.mark.parametrize(
    ("key", "message"),
    [
        ('accept ""', "accept needs a reason"),
        ('exclude " "', "exclude needs a reason"),
        ("widen 2", "by how much is the uncertainty widened, and why?"),
        ('widen 0 "reason 1"', "by how much is the uncertainty widened, and why?"),
        ('widen "reason"', "by how much is the uncertainty widened, and why?"),
        ('widen 2 ""', "by how much is the uncertainty widened, and why?"),
        ('widen 2 "open', "this quotation is not closed"),
    ],
)
def test_decisions_without_a_number_or_a_reason(key: str, message: str) -> None:
    assert fault_of(f"dH -1 kJ/mol | {key}")[0] == message

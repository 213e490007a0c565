"""The sentences that stand with a profile: temperatures, double counting, estimates, conversions."""

from __future__ import annotations

import pytest

import routeheat as rh


def route(*steps: str, known: str = "", makes: str = "H2O(s)") -> rh.Route:
    rows = "".join(f"  {step}\n" for step in steps)
    sheet = rh.read_sheet(f"uncertainty k = 2\n{known}\nroute A makes {makes}\n{rows}")
    return sheet.routes["A"]


def test_the_size_of_a_change_of_temperature_is_told_where_heat_capacities_are_known() -> None:
    """H2(g) + 1/2 O2(g) → H2O(l) from 75 °C to 25 °C: ΔCp = 75.3 − 28.8 − 14.7 = 31.8 J/(mol K); −50 K: −1.6 kJ/mol.

    Twice that for two moles of product."""
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol | T 75 degC | yield 100 %",
                 "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol | T 25 degC | yield 100 %")  # fmt: skip
    start = "heats at different temperatures, not brought to one temperature: A1 75 °C; A2 25 °C"
    assert f"{start}; bringing all to 25 °C would change the sum by −1.6 kJ/mol" in rh.profile(made).notes
    assert f"{start}; bringing all to 25 °C would change the sum by −3.2 kJ" in rh.profile(made, per="2 mol").notes


def test_the_first_temperature_counts_where_none_is_25_degrees() -> None:
    """H2O(g) → H2O(l) from 50 °C to 75 °C: ΔCp = 75.3 − 33.6 = 41.7 J/(mol K); 25 K: 1.0 kJ/mol."""
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(g) | dH -242 kJ/mol | T 75 degC",
                 "[A2] H2O(g) -> H2O(l) | dH -43 kJ/mol | T 50 degC", makes="H2O(l)")  # fmt: skip
    (note,) = [text for text in rh.profile(made).notes if "different temperatures" in text]
    assert note.endswith("A1 75 °C; A2 50 °C; bringing all to 75 °C would change the sum by 1.0 kJ/mol")


def test_without_heat_capacities_the_size_is_not_known() -> None:
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol | T 75 degC",
                 "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol | T 10 degC")  # fmt: skip
    (note,) = [text for text in rh.profile(made).notes if "different temperatures" in text]
    assert note.endswith("; by how much that would change the sum is not known: no heat capacity of H2O(s)")


def test_a_temperature_that_is_not_stated_has_no_size() -> None:
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol",
                 "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol | T 25 degC")  # fmt: skip
    (note,) = [text for text in rh.profile(made).notes if "different temperatures" in text]
    assert note.endswith("A1 temperature not stated; A2 25 °C")


def test_a_profile_names_double_counting_with_a_side_row() -> None:
    made = route(
        "[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol | includes neutralisation | T 25 degC",
        "[A1q] HCl(aq) + NaOH(aq) -> NaCl(aq) + H2O(l) | dH -57 kJ/mol | side of A1 | amount 0.1 mol/mol "
        "| neutralisation | T 25 degC",
        "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol | crystallisation | T 25 degC",
    )
    sentence = "double counting? A1 includes neutralisation, and A1q adds it"
    assert sentence in rh.profile(made).notes
    assert sentence in rh.profile(made).ladder().notes


def test_a_profile_names_double_counting_with_an_operation_on_its_product() -> None:
    steps = ("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol | includes {} | T 25 degC",
             "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol | crystallisation | T 25 degC")  # fmt: skip
    assert (
        "double counting? A1 includes crystallisation, and A2 adds it"
        in rh.profile(route(steps[0].format("freezing"), steps[1])).notes
    )
    assert not [n for n in rh.profile(route(steps[0].format("mixing"), steps[1])).notes if "double" in n]


def test_a_row_without_a_heat_adds_nothing_twice() -> None:
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 kJ/mol | includes crystallisation",
                 "[A2] H2O(l) -> H2O(s) | crystallisation")  # fmt: skip
    assert not [note for note in rh.profile(made).notes if "double" in note]


def test_a_known_row_behind_a_derived_heat_may_include_what_a_step_adds() -> None:
    known = "known\n  [K1] formation of H2O(l) | dH -285.8 kJ/mol | includes crystallisation\n"
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l)", "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol", known=known)
    assert "double counting? K1 includes crystallisation, and A2 adds it" in rh.profile(made).notes


ESTIMATED = ("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 ± 2 kJ/mol", "[A2] H2O(l) -> H2O(s) | like K9 ± 20")
FREEZING = "known\n  [K9] H2O(l) -> H2O(s) | dH -6 ± 2 kJ/mol\n"


def test_an_analogue_is_marked_in_notes_table_and_diagram() -> None:
    found = rh.profile(route(*ESTIMATED, known=FREEZING))
    assert found["A2"].origin == "estimated, like K9"
    assert "A2 is estimated, like K9" in found.notes
    text = found.text
    assert "−6 ± 20 (estimated)" in text
    assert "−284.0 ± 2.0 (estimated)" not in text
    (column,) = found.ladder().columns
    assert column.arrows[1].caption.endswith("(estimated)")
    assert ("estimated", "A2") in column.arrows[1].details
    assert "estimated: A2" in found.ladder().notes
    assert found.to_dict()["total"]["estimated"] == ["A2"]
    assert not column.arrows[0].caption.endswith("(estimated)")


def test_a_heat_derived_from_an_estimate_is_an_estimate() -> None:
    known = FREEZING.replace("dH -6 ± 2 kJ/mol", "dH -6 ± 30 kJ/mol | estimated dH")
    found = rh.profile(route(ESTIMATED[0], "[A2] H2O(l) -> H2O(s)", known=known))
    assert found["A2"].origin.endswith("(K9); estimated: K9")
    assert "K9 is estimated" in found.notes
    assert found.total.estimated == ("K9",)


def test_a_converted_heat_is_told_with_what_it_leaves_out() -> None:
    made = route("[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dU -282.1 kJ/mol at 25 degC",
                 "[A2] H2O(l) -> H2O(s) | dH -6 kJ/mol")  # fmt: skip
    (note,) = [text for text in rh.profile(made).notes if "Washburn" in text]
    assert note.startswith("A1: ΔU is typed, ΔH = ΔU + Δn(gas) R T adds −3.718 kJ/mol")


@pytest.mark.parametrize("marked", ["like K9 ± 20", "dH -6 ± 20 kJ/mol | estimated dH"])
def test_a_class_that_rests_on_an_estimated_heat_is_provisional(marked: str) -> None:
    made = route(ESTIMATED[0], f"[A2] H2O(l) -> H2O(s) | {marked} | conc 1 mol/kg | cp 2 kJ/(kg K) | T 20 degC",
                 known=FREEZING)  # fmt: skip
    assert rh.vessel(made.step("A2"), route=made).provisional == ("dH (A2 estimated)",)
    assert rh.vessel(made.step("A1"), route=made).provisional == ()

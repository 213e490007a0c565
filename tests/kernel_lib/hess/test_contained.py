"""What a heat includes, and which rows of a sum would count it again."""

from __future__ import annotations

import pytest

import routeheat as rh
from routeheat.hess.contained import Counted, double_counts, included, unknown_effects
from routeheat.notation.code import row


def sheet(*rows: str) -> rh.Sheet:
    return rh.read_sheet("known\n" + "".join(f"  [K{n}] {text}\n" for n, text in enumerate(rows, 1)))


NEUTRALISATION = "neutralisation of HCl(aq) with NaOH(aq) to NaCl(aq), H2O(l) | dH -57 kJ/mol"
DILUTION = "dilution of HCl(aq, 10 H2O) to HCl(aq) | dH -5.65 kJ/mol"


def counted(*rows: str) -> list[str]:
    return [item.text for item in double_counts(Counted(found) for found in sheet(*rows).known.values())]


def test_a_row_for_an_effect_that_a_heat_includes_is_named() -> None:
    assert counted(f"{NEUTRALISATION} | includes mixing, dilution", DILUTION) == [
        "double counting? K1 includes dilution, and K2 adds it"
    ]


def test_nothing_is_said_where_the_heat_does_not_include_the_effect() -> None:
    assert counted(NEUTRALISATION, DILUTION) == []
    assert counted(f"{NEUTRALISATION} | includes vaporisation", DILUTION) == []


def test_mixing_covers_a_dilution_that_is_not_named_beside_it() -> None:
    assert counted(f"{NEUTRALISATION} | includes mixing", DILUTION) == [
        "double counting? K1 includes mixing, and K2 adds it"
    ]


def test_an_effect_of_another_substance_is_no_double_counting() -> None:
    other = "dilution of HBr(aq, 10 H2O) to HBr(aq) | dH -5 kJ/mol"
    assert counted(f"{NEUTRALISATION} | includes dilution", other) == []


def test_water_alone_does_not_make_two_rows_meet() -> None:
    other = "neutralisation of HBr(aq) with KOH(aq) to KBr(aq), H2O(l) | dH -57 kJ/mol"
    assert counted(f"{NEUTRALISATION} | includes neutralisation", other) == []
    steam = "vaporisation of H2O(l) | dH 44 kJ/mol"
    assert counted(f"{NEUTRALISATION} | includes vaporisation", steam) == [
        "double counting? K1 includes vaporisation, and K2 adds it"
    ]


@pytest.mark.parametrize(
    ("effect", "adding"),
    [
        ("vaporisation", "C6H6(l) -> C6H6(g)"),
        ("evaporation", "vaporisation of C6H6(l)"),
        ("boiling", "C6H6(l) -> C6H6(g)"),
        ("condensation", "C6H6(g) -> C6H6(l)"),
        ("melting", "fusion of C6H6(s)"),
        ("crystallization", "C6H6(l) -> C6H6(s)"),
        ("precipitation", "C6H6(aq) -> C6H6(s)"),
        ("sublimation", "C6H6(s) -> C6H6(g)"),
        ("dissolution", "solution of C6H6(l) in H2O(l)"),
        ("solution", "C6H6(l) -> C6H6(aq)"),
        ("dilution", "C6H6(aq, 1 mol/kg) -> C6H6(aq)"),
        ("mixing", "C6H6(l) -> C6H6(l, 20 % in toluene)"),
    ],
)
def test_effects_are_known_by_their_names_and_by_what_changes(effect: str, adding: str) -> None:
    nitration = f"C6H6(l) + HNO3(l) -> C6H5NO2(l) + H2O(l) | dH -145 kJ/mol | includes {effect}"
    assert len(counted(nitration, f"{adding} | dH 1 J")) == 1


def test_the_neutralisation_and_the_solution_to_ions_are_known_by_their_kind() -> None:
    holder = "HCl(g) + NaOH(s) -> NaCl(s) + H2O(l) | dH -180 kJ/mol | includes solution, neutralisation"
    ions = "solution of NaOH(s) to Na+(aq), OH-(aq) | dH -44.5 kJ/mol"
    assert counted(holder, ions, NEUTRALISATION) == [
        "double counting? K1 includes solution, and K2 adds it",
        "double counting? K1 includes neutralisation, and K3 adds it",
    ]


def test_an_effect_that_is_taken_out_again_is_not_counted_twice() -> None:
    """The measured heat holds the dilution; the combination subtracts it."""
    known = sheet("HCl(aq, 10 H2O) + NaOH(aq) -> NaCl(aq) + H2O(l) | dH -62 kJ/mol | includes dilution", DILUTION).known
    taken_out = rh.combine(rh.read_reaction("HCl(aq) + NaOH(aq) -> NaCl(aq) + H2O(l)"), known)
    assert taken_out.coefficients == {"K1": 1, "K2": -1}
    assert not [note for note in taken_out.table().notes if "double" in note]


def test_a_concentration_is_no_dilution() -> None:
    back = "HCl(aq) -> HCl(aq, 10 H2O) | dH 5.65 kJ/mol"
    assert counted(f"{NEUTRALISATION} | includes dilution", back) == []


def test_a_combination_names_it_in_its_tables_and_in_its_diagram() -> None:
    known = sheet(f"{NEUTRALISATION} | includes dilution", DILUTION).known
    found = rh.combine(rh.read_reaction("HCl(aq, 10 H2O) + NaOH(aq) -> NaCl(aq) + H2O(l)"), known)
    sentence = "double counting? K1 includes dilution, and K2 adds it"
    assert sentence in found.table().notes
    assert sentence in found.ledger.notes
    assert sentence in found.ladder().notes


def test_words_for_effects_are_read_in_any_spelling() -> None:
    made = sheet("I2(s) -> I2(g) | dH 62 kJ/mol | includes Mixing,  vaporization, work-up, solvent swap").known["K1"]
    assert included(made) == ("mixing", "vaporisation", "workup", "solvent swap")
    assert included(row("K", "I2(s) -> I2(g)", "62 kJ/mol")) == ()


def test_a_word_nothing_is_looked_for_under_is_told_with_the_nearest() -> None:
    made = sheet("I2(s) -> I2(g) | dH 62 kJ/mol | includes mixin, dilutoin, magic").known["K1"]
    assert list(unknown_effects(made)) == [("mixin", "mixing"), ("dilutoin", "dilution"), ("magic", "")]

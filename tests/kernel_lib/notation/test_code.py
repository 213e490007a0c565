"""Reactions and rows made in code, through the readers of a typed sheet."""

import pickle
from fractions import Fraction

import pint
import pytest

from routeheat.errors import SheetFaults, UnitError
from routeheat.notation.build import build_sheet
from routeheat.notation.code import read_reaction, row

UNIT = pint.get_application_registry()
HYDROGENATION = "C6H5NO2(l) + 3 H2(g) -> C6H5NH2(l) + 2 H2O(l)"


def test_a_heat_may_be_typed_with_another_key() -> None:
    run = row("K1", "vaporisation of H2O(l)", "Q 0.44 kJ for 10 mmol of H2O(l)")
    bomb = row("K2", "H2(g) + 1/2 O2(g) -> H2O(l)", "dU -282.1 kJ/mol")
    assert run.datum is not None
    assert run.datum.value == 44
    assert bomb.heat is not None
    assert bomb.heat.key == "dU"
    with pytest.raises(SheetFaults):
        row("K3", "vaporisation of H2O(l)", "like K1 ± 3")


def test_a_row_in_code_is_the_row_of_a_sheet() -> None:
    sheet, _ = build_sheet('known\n  [K1] formation of NH3(g) | dH -45.94(18) kJ/mol | source "table"\n')
    assert row("K1", "formation of NH3(g)", "-45.94(18) kJ/mol", source="table") == sheet.known["K1"]


def test_heats_as_quantities() -> None:
    made = row("K", HYDROGENATION, UNIT.Quantity(-552.9, "kJ/mol"), u=UNIT.Quantity(8, "kJ/mol"), k=2)
    assert made.datum is not None
    assert (made.datum.value, made.datum.u) == (Fraction("-552.9"), 4)
    per_hydrogen = row("K", HYDROGENATION, UNIT.Quantity(-184300, "J/mol"), of="H2")
    assert per_hydrogen.datum is not None
    assert (per_hydrogen.datum.value, per_hydrogen.datum.u) == (Fraction("-552.9"), None)
    per_mass = row("K", HYDROGENATION, UNIT.Quantity(-4491, "J/g"), of="C6H5NO2(l)")
    assert per_mass.datum is not None
    assert per_mass.datum.value == pytest.approx(-552.9, abs=0.05)


def test_declared_names_of_a_sheet() -> None:
    sheet, _ = build_sheet("species\n  NB  C6H5NO2(l)\n")
    assert read_reaction("NB -> NB(g)", species=sheet.species).text == "NB(l) -> NB(g)"


def test_a_reaction_that_does_not_balance_is_read() -> None:
    assert not read_reaction("H2(g) + O2(g) -> H2O(l)").balanced


@pytest.mark.parametrize(
    ("reaction", "heat", "options", "message"),
    [
        ("H2(g) -> H2(g)", "1 kJ/mol", {}, "nothing changes in this reaction"),
        ("H2 -> H2(g)", "1 kJ/mol", {}, "the phase of H2 is missing in a known row"),
        ("H2(l) -> H2(g)", "1", {}, "the unit of the number is missing"),
        ("H2(l) -> H2(g)", UNIT.Quantity(1, "kJ/kg"), {}, "a heat per mass of what?"),
        ("H2(l) -> H2(g)", UNIT.Quantity(1, "kJ/mol"), {"of": "O2(g)"}, "O2(g) does not take part in the reaction"),
        ("H2(l) -> H2(g)", UNIT.Quantity(1, "kJ/mol"), {"of": "x y"}, "no element symbol starts with a small letter"),
        ("H2(l) -> H2(g)", UNIT.Quantity(1, "kJ/mol"), {"u": UNIT.Quantity(1, "kJ/mol"), "k": 0}, "a coverage factor"),
        ("H2\u202e(l) -> H2(g)", "1 kJ/mol", {}, "an invisible control character U+202E"),
        ("H2(l) -> " + "H" * 4000, "1 kJ/mol", {}, "a text of more than 4,000 characters"),
    ],
)
def test_wrong_rows_are_refused(reaction: str, heat: object, options: dict[str, object], message: str) -> None:
    with pytest.raises(SheetFaults) as caught:
        row("K", reaction, heat, **options)  # type: ignore[arg-type]
    assert message in str(caught.value)
    assert str(pickle.loads(pickle.dumps(caught.value))) == str(caught.value)


def test_a_quantity_of_another_kind_is_refused() -> None:
    with pytest.raises(UnitError, match="cannot be expressed in kJ/mol"):
        row("K", "H2(l) -> H2(g)", UNIT.Quantity(1, "kJ"))


def test_faults_stand_at_the_columns_of_the_text_given() -> None:
    with pytest.raises(SheetFaults) as caught:
        read_reaction("H\u200b2O(l)\n-> H2O(x)")
    (fault,) = caught.value.faults
    assert (fault.message, fault.column) == ("(x) is not a state symbol", 15)

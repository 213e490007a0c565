"""Units: what is read, exactly; what is refused, in plain words; the way to and from pint."""

from fractions import Fraction

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.errors import UnitError
from routeheat.units import (
    CALORIE,
    CELSIUS,
    GAS_CONSTANT,
    KELVIN,
    KJ_PER_KG_K,
    KJ_PER_MOL,
    PERCENT,
    PURE,
    from_pint,
    is_unit_symbol,
    read_unit,
    to_pint,
)


@pytest.mark.parametrize(
    ("typed", "canonical", "factor"),
    [
        ("kJ/mol", "kJ/mol", 1000),
        ("kJ mol^-1", "kJ/mol", 1000),
        ("kJ mol-1", "kJ/mol", 1000),
        ("kJ·mol⁻¹", "kJ/mol", 1000),
        ("kcal/mol", "kcal/mol", 4184),
        ("J/g", "J/g", 1000),
        ("kJ/(kg K)", "kJ/(kg K)", 1000),
        ("kJ/kg/K", "kJ/(kg K)", 1000),
        ("kJ kg⁻¹ K⁻¹", "kJ/(kg K)", 1000),
        ("W/(m2 K)", "W/(m2 K)", 1),
        ("W/(m² K)", "W/(m2 K)", 1),
        ("1/h", "1/h", Fraction(1, 3600)),
        ("°C", "degC", 1),
        ("\N{DEGREE CELSIUS}", "degC", 1),
        ("ml", "mL", Fraction(1, 10**6)),
        ("%", "%", Fraction(1, 100)),
        ("", "", 1),
    ],
)
def test_a_unit_is_read_exactly_and_written_canonically(typed: str, canonical: str, factor: Fraction) -> None:
    unit = read_unit(typed)
    assert (unit.text, unit.factor) == (canonical, factor)
    assert read_unit(unit.text) == unit


@pytest.mark.parametrize(
    ("typed", "message", "hint"),
    [
        ("kJ/kg K", "write what stands under the fraction bar in brackets", "like kJ/(kg K)"),
        ("kJ/kg·K", "write what stands under the fraction bar in brackets", "like kJ/(kg K)"),
        ("kJ/", "a unit is missing", ""),
        ("/mol", "a unit is missing", ""),
        ("kJ//mol", "a unit is missing", ""),
        ("kJ/(kg", "(kg does not belong in a unit", "like kJ/(kg K)"),
        ("kJ/moll", "unknown unit moll", "did you mean mol?"),
        ("C", "unknown unit C", "degrees Celsius are written degC"),
        ("M", "unknown unit M", "a concentration is written mol/L, a concentration per mass mol/kg"),
        ("percent", "unknown unit percent", "write %"),
        ("kJ^0", "kJ^0 does not belong in a unit", "like kJ/(kg K)"),
        ("% kJ/mol", "a per cent sign stands alone", "write the number without it"),
        ("J" * 61, "too long for a unit", ""),
        (" ".join(["°C"] * 20), "too long for a unit", ""),
    ],
)
def test_a_wrong_unit_is_refused_with_its_repair(typed: str, message: str, hint: str) -> None:
    with pytest.raises(UnitError) as caught:
        read_unit(typed)
    assert (caught.value.message, caught.value.hint) == (message, hint)


def test_celsius_has_an_offset_for_values_and_none_for_differences() -> None:
    assert CELSIUS.convert(Fraction(25), KELVIN) == Fraction("298.15")
    assert KELVIN.convert(Fraction("298.15"), CELSIUS) == 25
    assert CELSIUS.convert_difference(Fraction(5), KELVIN) == 5
    assert read_unit("kJ/(kg degC)").convert(Fraction(2), KJ_PER_KG_K) == 2


def test_the_thermochemical_calorie_is_exact() -> None:
    # 1 cal = 4.184 J by definition (ISO 80000-5)
    assert Fraction("4.184") == CALORIE
    assert read_unit("kcal/mol").convert(Fraction(-132), KJ_PER_MOL) == Fraction("-552.288")


def test_the_gas_constant_is_the_product_of_its_defining_constants() -> None:
    # k = 1.380649e-23 J/K and N_A = 6.02214076e23 1/mol are exact (SI Brochure, 9th ed., 2.2)
    assert Fraction("1.380649e-23") * Fraction("6.02214076e23") == GAS_CONSTANT


def test_another_dimension_cannot_be_converted() -> None:
    with pytest.raises(UnitError, match="kJ/mol cannot be expressed in K"):
        KJ_PER_MOL.convert(Fraction(1), KELVIN)
    assert PERCENT.convert(Fraction(96), PURE) == Fraction("0.96")


def test_unit_symbols_are_known_by_themselves() -> None:
    assert is_unit_symbol("kg")
    assert is_unit_symbol("°C")
    assert not is_unit_symbol("dH")


def test_pint_quantities_come_and_go_through_the_application_registry() -> None:
    registry = pint.get_application_registry()
    assert to_pint(-285.83, "kJ/mol") == registry.Quantity(-285.83, "kJ/mol")
    assert from_pint(registry.Quantity(-0.1, "MJ/mol"), KJ_PER_MOL, "kJ/mol") == -100
    assert from_pint(registry.Quantity(-285.83, "kJ/mol"), KJ_PER_MOL, "kJ/mol") == Fraction("-285.83")


@pytest.mark.parametrize("value", [3.5, "3 kJ/mol", None])
def test_what_is_no_quantity_is_refused(value: object) -> None:
    with pytest.raises(UnitError, match="a pint quantity in kJ/mol is expected"):
        from_pint(value, KJ_PER_MOL, "kJ/mol")


def test_a_quantity_of_another_kind_or_not_finite_is_refused() -> None:
    registry = pint.get_application_registry()
    with pytest.raises(UnitError, match="cannot be expressed in kJ/mol"):
        from_pint(registry.Quantity(1, "kelvin"), KJ_PER_MOL, "kJ/mol")
    with pytest.raises(UnitError, match="finite"):
        from_pint(registry.Quantity(float("nan"), "kJ/mol"), KJ_PER_MOL, "kJ/mol")


@given(st.text(max_size=80))
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        unit = read_unit(text)
    except UnitError:
        return
    assert read_unit(unit.text) == unit

from __future__ import annotations

from fractions import Fraction
from types import SimpleNamespace

import pytest

from routeheat.errors import UnitError
from routeheat.process.basis import read_basis
from routeheat.units import to_pint


@pytest.mark.parametrize(
    ("per", "unit", "moles"),
    [
        ("mol", "kJ/mol", Fraction(1)),
        ("3 mol", "kJ", Fraction(3)),
        ("1 kmol", "kJ", Fraction(1000)),
        ("2.5mmol", "kJ", Fraction(1, 400)),
    ],
)
def test_an_amount_counts_moles_exactly(code: SimpleNamespace, per: str, unit: str, moles: Fraction) -> None:
    basis = read_basis(per, code.species("H2O(l)"))
    assert (basis.unit, basis.moles) == (unit, moles)


@pytest.mark.parametrize(("per", "grams"), [("kg", 1000), ("12 kg", 12000), ("500 g", 500), ("2 t", 2_000_000)])
def test_a_mass_is_divided_by_the_molar_mass_of_the_product(code: SimpleNamespace, per: str, grams: int) -> None:
    water = code.species("H2O(l)")
    assert read_basis(per, water).moles == grams / water.molar_mass


def test_a_pint_quantity_is_a_batch(code: SimpleNamespace) -> None:
    basis = read_basis(to_pint(0.5, "kmol"), code.species("H2O(l)"))
    assert (basis.text, basis.unit, basis.moles) == ("500 mol", "kJ", Fraction(500))


@pytest.mark.parametrize("per", ["", "12", "kg kg", "-1 kg", "0 kg", "3 h", "banana", "1e3 kg", "1 kJ/mol", 5])
def test_anything_else_is_a_unit_error(code: SimpleNamespace, per: object) -> None:
    with pytest.raises(UnitError):
        read_basis(per, code.species("H2O(l)"))


def test_a_mass_of_a_species_without_molar_mass_is_refused(code: SimpleNamespace) -> None:
    with pytest.raises(UnitError, match="molar mass of P is not known"):
        read_basis("kg", code.species("P"))

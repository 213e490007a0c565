"""The basis of a profile: per mole of product, per kilogram, or per batch of a given size."""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from routeheat.chem.species import Species
from routeheat.errors import UnitError
from routeheat.units import KILOGRAM, Unit, from_pint, read_unit

_MOL = read_unit("mol")
_TYPED = re.compile(r"(?P<number>[0-9]{1,12}(?:\.[0-9]{1,12})?)?\s*(?P<unit>[A-Za-z]{1,5})")
_HINT = "like mol, kg, 12 kg, 500 g or 3 mol"
_WORDS = {"mol": "mole", "kg": "kilogram", "g": "gram", "t": "tonne"}
_SHOWN_UNITS = {"kJ/mol": "kJ mol⁻¹", "kJ/kg": "kJ kg⁻¹", "kJ/g": "kJ g⁻¹"}


@dataclass(frozen=True, slots=True)
class Basis:
    """How much product the heats of a profile are stated for."""

    text: str
    """As typed: ``mol``, ``kg``, ``12 kg``."""
    unit: str
    """Unit of the heats: ``kJ/mol``, ``kJ/kg``, or ``kJ`` for a batch."""
    moles: Fraction
    """Moles of product in one unit of the basis; exact."""

    @property
    def words(self) -> str:
        """As a reader says it: ``mole of product``, ``12 kg of product``."""
        return f"{_WORDS.get(self.text, self.text)} of product"

    @property
    def shown_unit(self) -> str:
        """The unit with exponents, for an axis: ``kJ mol⁻¹``."""
        return _SHOWN_UNITS.get(self.unit, self.unit)


def read_basis(per: Any, product: Species) -> Basis:
    """The basis typed as ``per``: a text such as ``kg`` or ``12 kg``, or a pint quantity of mass or amount.

    Raises :class:`~routeheat.errors.UnitError` for anything else, for a batch of nothing, and for a mass of a species
    without a known molar mass.
    """
    if not isinstance(per, str):
        return _from_quantity(per, product)
    typed = per.strip()
    match = _TYPED.fullmatch(typed)
    if match is None:
        raise UnitError("an amount or a mass of product is expected", per, _HINT)
    unit = read_unit(match["unit"])
    number = Fraction(match["number"] or 1)
    moles = _moles(number, unit, product, per)
    if match["number"] is None:
        return Basis(unit.text, f"kJ/{unit.text}", moles)
    return Basis(f"{match['number']} {unit.text}", "kJ", moles)


def _from_quantity(quantity: Any, product: Species) -> Basis:
    try:
        number, unit = from_pint(quantity, KILOGRAM, "kilogram"), KILOGRAM
    except UnitError:
        number, unit = from_pint(quantity, _MOL, "mole"), _MOL
    return Basis(f"{float(number):g} {unit.text}", "kJ", _moles(number, unit, product, str(quantity)))


def _moles(number: Fraction, unit: Unit, product: Species, typed: str) -> Fraction:
    if number <= 0:
        raise UnitError("a batch must be larger than zero", typed, _HINT)
    if unit.dimension == _MOL.dimension:
        return unit.convert(number, _MOL)
    if unit.dimension != KILOGRAM.dimension:
        raise UnitError("an amount or a mass of product is expected", typed, _HINT)
    if product.molar_mass is None:
        raise UnitError(f"the molar mass of {product} is not known", typed, "state its formula, or use mol")
    return unit.convert(number, KILOGRAM) * 1000 / product.molar_mass

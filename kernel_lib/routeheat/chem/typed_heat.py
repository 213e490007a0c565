"""A heat as typed behind its key: per mole or mass, at constant volume, from a calorimeter run, or like another row."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import isqrt
from typing import Literal

from routeheat.chem.heat import Datum
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.units import GAS_CONSTANT, KELVIN, KILOGRAM, KJ, KJ_PER_KG, KJ_PER_MOL, ZERO_CELSIUS

HeatKey = Literal["dH", "dU", "Q", "like"]
REFERENCE_TEMPERATURE = Fraction(25) + ZERO_CELSIUS
"""25 °C in kelvin: the temperature of a known row's heat that does not say its own."""
_FINE = 10**15
"""Square roots of variances are rounded to this part of a kJ/mol."""


@dataclass(frozen=True, slots=True)
class Heat:
    """A heat as typed: a number per something, or a letter for an unknown. Exothermic is negative."""

    amount: Measured | None
    """The number with its unit (kJ/mol, kJ/kg, kJ …); ``None`` for a symbolic unknown. Behind ``like`` zero, with what
    the row may differ by from its analogue."""
    basis: Species | None = None
    """The species it is stated per (``kJ/kg of NB``); ``None`` when it is per mole of reaction as written."""
    symbol: str = ""
    """Letter of an unknown heat, in kJ/mol of reaction as written."""
    temperature: Measured | None = None
    """The heat's own temperature (``at 25 degC``); ``None`` when not typed."""
    key: HeatKey = "dH"
    """``dH`` and ``Q`` are at constant pressure, ``dU`` is at constant volume, ``like`` is an estimate."""
    portion: Measured | None = None
    """Amount or mass of :attr:`basis` that reacted in a calorimeter run; :attr:`amount` is then an energy."""
    analogue: str = ""
    """Label of the row that the heat is taken from."""
    taken: Datum | None = None
    """The heat of that row, kJ per mole of its reaction as written."""

    def factor(self, reaction: Reaction) -> Fraction:
        """kJ/mol of reaction as written, per unit of :attr:`amount`; exact.

        Raises ``ValueError`` when the basis does not take part or has no molar mass.
        """
        assert self.amount is not None
        unit = self.amount.unit
        number = Fraction(1)
        if self.basis is not None:
            number = abs(reaction.net.get(self.basis, Fraction(0)))
            if not number:
                both = self.basis in reaction.species
                why = "stands on both sides and cancels" if both else "does not take part in the reaction"
                raise ValueError(f"{self.basis} {why}: no heat can be stated per amount of it")
        if unit.dimension == KJ.dimension:
            per_row = unit.factor / KJ.factor
            return per_row if self.portion is None else per_row * number / self._moles(self.portion)
        if unit.dimension == KJ_PER_KG.dimension:
            return unit.factor / KJ_PER_KG.factor * self._molar_mass() / 1000 * number
        return unit.convert(Fraction(1), KJ_PER_MOL) * number

    def value(self, reaction: Reaction) -> Fraction:
        """ΔrH in kJ per mole of reaction as written; zero behind ``like``. Raises as :meth:`factor` does."""
        assert self.amount is not None
        return self.amount.value * self.factor(reaction) + self.volume_work(reaction)

    def volume_work(self, reaction: Reaction) -> Fraction:
        """What ΔrH exceeds a typed ΔrU by in kJ/mol: Δν(gas)·R·T for ideal gases, condensed phases neglected.

        Zero for heats at constant pressure. Source: P. W. Atkins, J. de Paula, Physical Chemistry, enthalpy.
        """
        if self.key != "dU":
            return Fraction(0)
        kelvin = REFERENCE_TEMPERATURE if self.temperature is None else self.temperature.to(KELVIN)
        return reaction.gas_change * GAS_CONSTANT * kelvin / 1000

    def u(self, reaction: Reaction) -> Fraction | None:
        """Standard uncertainty in kJ per mole of reaction as written; ``None`` when that of the heat is not stated.

        That of a weighed portion is added to it as an independent one (JCGM 100:2008, eq. 12).
        """
        assert self.amount is not None
        if self.amount.u is None:
            return None
        factor = self.factor(reaction)
        own = self.amount.u * factor
        if self.portion is None or self.portion.u is None:
            return own
        weighed = self.amount.value * factor * self.portion.u / self.portion.value
        return Fraction(isqrt(int((own**2 + weighed**2) * _FINE**2)), _FINE)

    def _molar_mass(self) -> Fraction:
        mass = self.basis.molar_mass if self.basis is not None else None
        if mass is None:
            raise ValueError(f"a heat per mass needs a molar mass, and {self.basis or 'the species'} has none")
        return mass

    def _moles(self, portion: Measured) -> Fraction:
        if portion.unit.dimension == KILOGRAM.dimension:
            return portion.to(KILOGRAM) * 1000 / self._molar_mass()
        return portion.value * portion.unit.factor

    @property
    def text(self) -> str:
        """As written in a sheet behind its key."""
        if self.amount is None:
            body = self.symbol
        elif self.key == "like":
            body = f"{self.analogue} {self.amount.text.removeprefix('0 ')}"
        elif self.portion is not None:
            body = f"{self.amount.text} for {self.portion.text} of {self.basis}"
        else:
            number = self.amount.text
            qualifier = ""
            if number.endswith(")") and self.amount.spread is not None and self.amount.spread.stated:
                qualifier = f" ({self.amount.spread.stated})"
                number = number[: -len(qualifier)]
            body = number + (f" of {self.basis}" if self.basis is not None else "") + qualifier
        return body + (f" at {self.temperature.text}" if self.temperature is not None else "")

    @property
    def typed(self) -> str:
        """As a reader sees it: the text alone for a ``dH``, with its key for any other."""
        return self.text if self.key == "dH" else f"{self.key} {self.text}"

"""A measured quantity as typed: an exact decimal, a unit, and an uncertainty that knows its coverage factor."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from routeheat.units import Unit


@dataclass(frozen=True, slots=True)
class Spread:
    """An uncertainty as typed behind ``±``; :attr:`standard` is what is computed with."""

    half_width: Fraction
    """The number behind ``±``, in the unit of the value; not negative."""
    k: Fraction
    """Coverage factor of that number."""
    stated: str = ""
    """How ``k`` was typed beside the value (``k = 1``, ``95 %``); empty when it is the sheet's."""

    @property
    def standard(self) -> Fraction:
        """Standard uncertainty, ``half_width / k`` (JCGM 100:2008, 6.2.1)."""
        return self.half_width / self.k


@dataclass(frozen=True, slots=True)
class Measured:
    """A number with a unit and, where stated, an uncertainty. The number is the decimal as typed, exactly."""

    value: Fraction
    """The number in :attr:`unit`."""
    unit: Unit
    spread: Spread | None = None
    """``None`` when no uncertainty is stated: neither zero nor a guess."""
    decimals: int = 0
    """Decimals typed, so that it is written again as it was."""

    @property
    def u(self) -> Fraction | None:
        """Standard uncertainty in :attr:`unit`; ``None`` when not stated."""
        return None if self.spread is None else self.spread.standard

    def to(self, unit: Unit) -> Fraction:
        """The value converted to ``unit`` exactly; raises :class:`~routeheat.errors.UnitError` on another kind."""
        return self.unit.convert(self.value, unit)

    def u_to(self, unit: Unit) -> Fraction | None:
        """The standard uncertainty as a difference in ``unit``; ``None`` when not stated."""
        return None if self.u is None else self.unit.convert_difference(self.u, unit)

    @property
    def text(self) -> str:
        """As written in a sheet: ``-285.830 ± 0.040 kJ/mol (k = 1)``."""
        number = decimal_text(self.value, self.decimals)
        if self.spread is not None:
            number += f" ± {decimal_text(self.spread.half_width)}"
        qualifier = f" ({self.spread.stated})" if self.spread is not None and self.spread.stated else ""
        return f"{number} {self.unit.text}".rstrip() + qualifier


def decimal_text(value: Fraction, at_least: int = 0) -> str:
    """An exact decimal written out (``-45.94``), with at least the given number of decimals."""
    digits = max(at_least, 0)
    scaled = value * 10**digits
    while scaled.denominator != 1:
        digits += 1
        scaled = value * 10**digits
        if digits > 400:
            raise ValueError(f"{value} is not a decimal")
    whole = str(abs(scaled.numerator)).rjust(digits + 1, "0")
    sign = "-" if scaled < 0 else ""
    return sign + (whole if digits == 0 else f"{whole[:-digits]}.{whole[-digits:]}")

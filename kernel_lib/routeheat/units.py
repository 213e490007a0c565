"""Units: the few that a route sheet accepts, read by our own capped reader, and the way to and from pint.

Typed text never reaches pint's parser. A unit is an exact factor to SI base units with its dimension, so that
kcal/mol, J/g and kJ/kg convert without rounding. Pint quantities come in and go out through the application registry
(:func:`pint.get_application_registry`), which is only imported when one is used.
May import: :mod:`routeheat.errors`.
"""

from __future__ import annotations

import math
import re
import unicodedata
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from routeheat.errors import UnitError, nearest

GAS_CONSTANT = Fraction("8.31446261815324")
"""Molar gas constant R in J/(mol K), exact since 2019 (SI Brochure, 9th ed.; CODATA 2018)."""
CALORIE = Fraction("4.184")
"""Thermochemical calorie in joules (exact by definition; ISO 80000-5)."""
ZERO_CELSIUS = Fraction("273.15")
"""0 °C in kelvin (exact; SI Brochure, 9th ed., 2.3.1)."""

Dimension = tuple[int, int, int, int, int, int]
"""Exponents of (energy, amount, mass, temperature, time, length)."""

_DIMENSIONLESS: Dimension = (0, 0, 0, 0, 0, 0)
_ENERGY: Dimension = (1, 0, 0, 0, 0, 0)
_AMOUNT: Dimension = (0, 1, 0, 0, 0, 0)
_MASS: Dimension = (0, 0, 1, 0, 0, 0)
_TEMPERATURE: Dimension = (0, 0, 0, 1, 0, 0)
_TIME: Dimension = (0, 0, 0, 0, 1, 0)
_LENGTH: Dimension = (0, 0, 0, 0, 0, 1)
_VOLUME: Dimension = (0, 0, 0, 0, 0, 3)
_POWER: Dimension = (1, 0, 0, 0, -1, 0)
_PRESSURE: Dimension = (1, 0, 0, 0, 0, -3)

_SYMBOLS: dict[str, tuple[Fraction, Dimension]] = {
    "J": (Fraction(1), _ENERGY),
    "kJ": (Fraction(1000), _ENERGY),
    "MJ": (Fraction(10**6), _ENERGY),
    "cal": (CALORIE, _ENERGY),
    "kcal": (CALORIE * 1000, _ENERGY),
    "Wh": (Fraction(3600), _ENERGY),
    "kWh": (Fraction(3_600_000), _ENERGY),
    "mol": (Fraction(1), _AMOUNT),
    "mmol": (Fraction(1, 1000), _AMOUNT),
    "kmol": (Fraction(1000), _AMOUNT),
    "kg": (Fraction(1), _MASS),
    "g": (Fraction(1, 1000), _MASS),
    "mg": (Fraction(1, 10**6), _MASS),
    "t": (Fraction(1000), _MASS),
    "K": (Fraction(1), _TEMPERATURE),
    "degC": (Fraction(1), _TEMPERATURE),
    "s": (Fraction(1), _TIME),
    "min": (Fraction(60), _TIME),
    "h": (Fraction(3600), _TIME),
    "d": (Fraction(86400), _TIME),
    "m": (Fraction(1), _LENGTH),
    "mm": (Fraction(1, 1000), _LENGTH),
    "cm": (Fraction(1, 100), _LENGTH),
    "L": (Fraction(1, 1000), _VOLUME),
    "mL": (Fraction(1, 10**6), _VOLUME),
    "W": (Fraction(1), _POWER),
    "kW": (Fraction(1000), _POWER),
    "Pa": (Fraction(1), _PRESSURE),
    "kPa": (Fraction(1000), _PRESSURE),
    "MPa": (Fraction(10**6), _PRESSURE),
    "mbar": (Fraction(100), _PRESSURE),
    "bar": (Fraction(10**5), _PRESSURE),
    "atm": (Fraction(101325), _PRESSURE),
    "%": (Fraction(1, 100), _DIMENSIONLESS),
}
_SPELLINGS = {
    "°C": "degC",
    "\N{DEGREE CELSIUS}": "degC",
    "celsius": "degC",
    "Celsius": "degC",
    "kelvin": "K",
    "l": "L",
    "ml": "mL",
    "hr": "h",
    "hour": "h",
    "hours": "h",
    "minutes": "min",
    "Kcal": "kcal",
    "KJ": "kJ",
    "Kj": "kJ",
    "kj": "kJ",
    "KG": "kg",
    "Kg": "kg",
    "gr": "g",
    "moles": "mol",
    "mole": "mol",
}
_MEANT = {
    "C": "degrees Celsius are written degC",
    "°": "degrees Celsius are written degC",
    "M": "a concentration is written mol/L, a concentration per mass mol/kg",
    "percent": "write %",
}
"""What to say about symbols that are no units here but are often typed."""
_LIKE_ASCII = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺\N{MINUS SIGN}\N{NO-BREAK SPACE}", "0123456789-+- ")
_FACTOR = re.compile(r"(?P<symbol>°C|\N{DEGREE CELSIUS}|°|%|[A-Za-z]+)(?:\^?(?P<power>[-+]?[1-9]))?")
_TIMES = re.compile(r"[·*.\s]+")
_LONGEST = 60


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit with its exact factor to SI base units; temperatures in °C also have an offset."""

    text: str
    """Canonical text, e.g. ``kJ/mol``; empty for a pure number."""
    factor: Fraction
    """How many base units (J, mol, kg, K, s, m) it is."""
    dimension: Dimension
    offset: Fraction = Fraction(0)
    """Kelvin to add before the factor applies; 273.15 for °C alone, else 0."""

    def convert(self, value: Fraction, to: Unit) -> Fraction:
        """``value`` in this unit expressed in ``to``, exactly; raises :class:`UnitError` on another dimension."""
        self._require(to)
        return ((value + self.offset) * self.factor) / to.factor - to.offset

    def convert_difference(self, value: Fraction, to: Unit) -> Fraction:
        """A difference (an uncertainty, a temperature rise) expressed in ``to``; no offset applies."""
        self._require(to)
        return value * self.factor / to.factor

    def _require(self, to: Unit) -> None:
        if self.dimension != to.dimension:
            raise UnitError(
                f"{self.text or 'a pure number'} cannot be expressed in {to.text or 'a pure number'}", self.text
            )


def read_unit(text: str) -> Unit:
    """The unit written in ``text``: ``kJ/mol``, ``kJ mol^-1``, ``W/(m2 K)``, ``degC``, ``%``, or empty.

    unit    = product { "/" ( factor | "(" product ")" ) }
    product = factor { (" " | "·" | "*" | ".") factor }
    factor  = symbol [ [ "^" ] exponent ]

    Two factors under a fraction bar need brackets. Raises :class:`~routeheat.errors.UnitError` on anything it does
    not know; never evaluates text.
    """
    typed = unicodedata.normalize("NFC", text.strip())
    if len(typed) > _LONGEST:
        raise UnitError("too long for a unit", typed)
    typed = typed.translate(_LIKE_ASCII)
    if not typed:
        return PURE
    above, *below = typed.split("/")
    factors = [] if below and above.strip() == "1" else _product(above, text)
    for part in below:
        under = part.strip()
        if under.startswith("(") and under.endswith(")"):
            divisors = _product(under[1:-1], text)
        else:
            divisors = _product(under, text)
            if len(divisors) > 1:
                raise UnitError("write what stands under the fraction bar in brackets", text, "like kJ/(kg K)")
        factors += [(symbol, -power) for symbol, power in divisors]
    if len(factors) > 1 and any(symbol == "%" for symbol, _ in factors):
        raise UnitError("a per cent sign stands alone", text, "write the number without it")
    factor, dimension = Fraction(1), _DIMENSIONLESS
    for symbol, power in factors:
        size, exponents = _SYMBOLS[symbol]
        factor *= size**power
        dimension = _plus(dimension, _times(exponents, power))
    canonical = _canonical(factors)
    if len(canonical) > _LONGEST:
        raise UnitError("too long for a unit", typed)
    return Unit(canonical, factor, dimension, ZERO_CELSIUS if canonical == "degC" else Fraction(0))


def is_unit_symbol(word: str) -> bool:
    """True for a symbol or spelling of one unit: ``kg``, ``°C``."""
    return word in _SYMBOLS or word in _SPELLINGS


def _product(text: str, whole: str) -> list[tuple[str, int]]:
    """Symbols with their exponents, in typed order."""
    if not text.strip():
        raise UnitError("a unit is missing", whole)
    factors = []
    for typed in _TIMES.split(text.strip()):
        match = _FACTOR.fullmatch(typed)
        if match is None:
            raise UnitError(f"{typed or '.'} does not belong in a unit", whole, "like kJ/(kg K)")
        symbol = _SPELLINGS.get(match["symbol"], match["symbol"])
        if symbol not in _SYMBOLS:
            near = nearest(symbol, [*_SYMBOLS, *_SPELLINGS])
            hint = _MEANT.get(symbol) or (f"did you mean {near}?" if near else "")
            raise UnitError(f"unknown unit {symbol}", whole, hint)
        factors.append((symbol, int(match["power"] or 1)))
    return factors


def _canonical(factors: list[tuple[str, int]]) -> str:
    """``kJ/(kg K)``: everything above the bar, then everything below it."""
    above = [symbol + (str(power) if power > 1 else "") for symbol, power in factors if power > 0]
    below = [symbol + (str(-power) if power < -1 else "") for symbol, power in factors if power < 0]
    over = " ".join(above) or "1"
    if not below:
        return over
    return f"{over}/{below[0]}" if len(below) == 1 else f"{over}/({' '.join(below)})"


def _plus(a: Dimension, b: Dimension) -> Dimension:
    return (a[0] + b[0], a[1] + b[1], a[2] + b[2], a[3] + b[3], a[4] + b[4], a[5] + b[5])


def _times(a: Dimension, n: int) -> Dimension:
    return (a[0] * n, a[1] * n, a[2] * n, a[3] * n, a[4] * n, a[5] * n)


PURE = Unit("", Fraction(1), _DIMENSIONLESS)
"""The unit of a pure number."""
KJ_PER_MOL = Unit("kJ/mol", Fraction(1000), (1, -1, 0, 0, 0, 0))
KJ_PER_KG = Unit("kJ/kg", Fraction(1000), (1, 0, -1, 0, 0, 0))
KJ = Unit("kJ", Fraction(1000), _ENERGY)
KELVIN = Unit("K", Fraction(1), _TEMPERATURE)
CELSIUS = Unit("degC", Fraction(1), _TEMPERATURE, ZERO_CELSIUS)
PERCENT = Unit("%", Fraction(1, 100), _DIMENSIONLESS)
MOLE = Unit("mol", Fraction(1), _AMOUNT)
KILOGRAM = Unit("kg", Fraction(1), _MASS)
MOL_PER_KG = Unit("mol/kg", Fraction(1), (0, 1, -1, 0, 0, 0))
KJ_PER_KG_K = Unit("kJ/(kg K)", Fraction(1000), (1, 0, -1, -1, 0, 0))
HOUR = Unit("h", Fraction(3600), _TIME)
MOL_PER_MOL = Unit("mol/mol", Fraction(1), _DIMENSIONLESS)
GRAM_PER_MOL = Unit("g/mol", Fraction(1, 1000), (0, -1, 1, 0, 0, 0))


def to_pint(value: float, unit: str) -> Any:
    """``value`` as a pint quantity of the application registry; ``unit`` is a pint unit string of our own."""
    import pint

    return pint.get_application_registry().Quantity(value, unit)  # type: ignore[no-untyped-call]


def from_pint(quantity: Any, unit: Unit, pint_unit: str) -> Fraction:
    """The magnitude of a pint quantity in ``unit`` as an exact fraction of the shortest decimal that names it.

    Raises :class:`UnitError` when it is no quantity or has another dimension.
    """
    if not hasattr(quantity, "to") or not hasattr(quantity, "magnitude"):
        raise UnitError(f"a pint quantity in {unit.text} is expected", repr(quantity)[:80])
    import pint

    try:
        magnitude = quantity.to(pint_unit).magnitude
    except pint.DimensionalityError as problem:
        raise UnitError(f"{quantity.units} cannot be expressed in {unit.text}", str(quantity)[:80]) from problem
    if not math.isfinite(magnitude):
        raise UnitError("a finite number is expected", str(quantity)[:80])
    return Fraction(repr(float(magnitude)))

"""Heats: a datum that was typed, and a sum that remembers which data it is made of.

A result is ``value`` with the partial derivative of the value with respect to each datum. For heats these are the
exact coefficients of Hess's law; for yields they are sensitivities. Hence ``u² = Σ (cᵢ uᵢ)²`` over independent data
(JCGM 100:2008, eq. 10) and the covariance of two results follows from the data they share (JCGM 100:2008, F.1.2.3).
All arithmetic is in fractions: the order of rows never changes a result, and a result minus itself is 0 ± 0.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any, Literal

from routeheat.present.numbers import MINUS, fraction, reading
from routeheat.present.table import Reading

PER_MOLE = "kJ/mol"
"""Unit of a heat per mole of reaction, or of product."""


@dataclass(frozen=True, slots=True)
class Datum:
    """One typed number that results depend on. Data that are equal in every field are the same datum."""

    label: str
    """Label of the row it belongs to."""
    what: Literal["heat", "yield", "recycle", "calibration"] = "heat"
    """A ``calibration`` is an error that several heats share, in units of its own standard uncertainty."""
    value: Fraction = Fraction(0)
    """kJ per mole of reaction as written for a heat; a fraction of 1 for a yield or a recycle; 0 for a calibration."""
    u: Fraction | None = None
    """Standard uncertainty in the same unit; ``None`` when not stated."""
    symbol: str = ""
    """Letter of an unknown heat; its ``value`` is then meaningless and zero."""
    source: str = ""
    """Where the number comes from, as typed."""
    of: str = ""
    """The equation it belongs to, so that equal labels of two sheets are not taken for one datum."""
    estimated: bool = False
    """True when it is no measurement."""

    @property
    def name(self) -> str:
        """What a reader calls it: ``A1`` for a heat, ``yield of A1`` for a yield."""
        return self.label if self.what == "heat" else f"{self.what} of {self.label}"


@dataclass(frozen=True, slots=True)
class Contribution:
    """What one datum contributes to a heat sum and to its uncertainty."""

    datum: Datum
    coefficient: Fraction
    """Partial derivative of the sum with respect to the datum."""
    heat: Fraction | None
    """``coefficient · value`` in kJ/mol; ``None`` for a symbolic unknown and for yields."""
    u: float | None
    """``|coefficient| · u`` in kJ/mol; ``None`` when not stated."""
    share: float | None
    """Part of the stated variance, 0 to 1; ``None`` when not stated."""


@dataclass(frozen=True, slots=True)
class HeatSum:
    """A heat with its coefficients over the data it is made of. Exothermic is negative."""

    exact: Fraction
    """The numeric part in kJ/mol; symbolic unknowns add to it."""
    terms: tuple[tuple[Datum, Fraction], ...]
    """Pairs (datum, partial derivative), none of them zero."""
    k: float = 2.0
    """Coverage factor used when the sum is printed."""
    unit: str = PER_MOLE
    """Unit of :attr:`exact`; a profile per kilogram or per batch states its own."""

    @classmethod
    def of(cls, datum: Datum, coefficient: Fraction = Fraction(1), k: float = 2.0) -> HeatSum:
        """``coefficient`` times one heat."""
        value = Fraction(0) if datum.symbol else coefficient * datum.value
        return cls(value, ((datum, coefficient),) if coefficient else (), k)

    @classmethod
    def zero(cls, k: float = 2.0) -> HeatSum:
        """The heat of nothing: exactly zero."""
        return cls(Fraction(0), (), k)

    @classmethod
    def total(cls, parts: Iterable[tuple[Fraction, HeatSum]], k: float = 2.0) -> HeatSum:
        """``Σ factor · part``; shared data merge, data that cancel disappear."""
        value = Fraction(0)
        merged: dict[Datum, Fraction] = {}
        unit = PER_MOLE
        for factor, part in parts:
            value += factor * part.exact
            unit = part.unit if part.unit != PER_MOLE else unit
            for datum, coefficient in part.terms:
                merged[datum] = merged.get(datum, Fraction(0)) + factor * coefficient
        return cls(value, tuple((datum, c) for datum, c in merged.items() if c), k, unit)

    def __add__(self, other: HeatSum) -> HeatSum:
        return HeatSum.total(((Fraction(1), self), (Fraction(1), other)), self.k)

    def __sub__(self, other: HeatSum) -> HeatSum:
        return HeatSum.total(((Fraction(1), self), (Fraction(-1), other)), self.k)

    def scaled(self, factor: Fraction) -> HeatSum:
        """``factor`` times the sum."""
        return HeatSum.total(((factor, self),), self.k)

    @property
    def coefficients(self) -> dict[str, Fraction]:
        """Exact coefficient of every heat by label; yields are left out."""
        return {datum.label: c for datum, c in self.terms if datum.what == "heat"}

    @property
    def unknowns(self) -> dict[str, Fraction]:
        """Coefficient of every symbolic unknown heat, by its letter."""
        found: dict[str, Fraction] = {}
        for datum, c in self.terms:
            if datum.symbol:
                found[datum.symbol] = found.get(datum.symbol, Fraction(0)) + c
        return {symbol: c for symbol, c in found.items() if c}

    @property
    def value(self) -> Any:
        """kJ/mol as ``float``; a sympy expression when symbolic unknowns remain."""
        if not self.unknowns:
            return float(self.exact)
        import sympy

        total = sympy.Rational(self.exact.numerator, self.exact.denominator)
        for symbol, c in self.unknowns.items():
            total += sympy.Rational(c.numerator, c.denominator) * sympy.Symbol(symbol)
        return total

    @property
    def variance(self) -> Fraction:
        """Variance of the part whose uncertainty is stated, (kJ/mol)²."""
        return sum(((c * datum.u) ** 2 for datum, c in self.terms if datum.u is not None), Fraction(0))

    @property
    def u(self) -> float:
        """Standard uncertainty of the stated part in kJ/mol; a lower bound unless :attr:`complete`."""
        return math.sqrt(self.variance)

    @property
    def not_stated(self) -> tuple[str, ...]:
        """Data that enter without a stated uncertainty, by name; symbolic unknowns are among them."""
        return tuple(dict.fromkeys(datum.name for datum, _ in self.terms if datum.u is None))

    @property
    def estimated(self) -> tuple[str, ...]:
        """Data that are no measurements, by name; a sum with any of them is an estimate."""
        return tuple(dict.fromkeys(datum.name for datum, _ in self.terms if datum.estimated))

    @property
    def complete(self) -> bool:
        """True when the uncertainty of every datum is stated."""
        return not self.not_stated

    def covariance(self, other: HeatSum) -> Fraction:
        """Covariance with another sum in (kJ/mol)², from the data that both contain."""
        theirs = dict(other.terms)
        return sum(
            (c * theirs[datum] * datum.u**2 for datum, c in self.terms if datum.u is not None and datum in theirs),
            Fraction(0),
        )

    @property
    def contributions(self) -> tuple[Contribution, ...]:
        """What each datum contributes, largest uncertainty first; data without a stated one come before all."""
        variance = self.variance
        found = []
        for datum, c in self.terms:
            heat = c * datum.value if datum.what == "heat" and not datum.symbol else None
            spread = None if datum.u is None else abs(c) * datum.u
            share = None if spread is None else (float(spread**2 / variance) if variance else 0.0)
            found.append(Contribution(datum, c, heat, None if spread is None else float(spread), share))
        return tuple(sorted(found, key=lambda item: (item.u is not None, -(item.u or 0.0))))

    @property
    def reading(self) -> Reading:
        """Value and uncertainty for a table cell; words when symbolic unknowns remain."""
        if self.unknowns:
            return Reading(None, None, self.k, words=self.text)
        nothing = all(datum.u is None for datum, _ in self.terms) and bool(self.terms)
        spread = None if nothing else self.u
        return Reading(float(self.exact), spread, self.k, not self.complete, estimated=bool(self.estimated))

    @property
    def text(self) -> str:
        """The heat as printed, without its unit: ``−163.2 ± 9.7 (k = 1)``, or ``x − 134.90 ± 0.64 (k = 2)``."""
        return self._symbolic_text() if self.unknowns else reading(self.reading)

    def _symbolic_text(self) -> str:
        written = ""
        for symbol, c in self.unknowns.items():
            sign = (" + " if c > 0 else f" {MINUS} ") if written else ("" if c > 0 else MINUS)
            written += sign + (symbol if abs(c) == 1 else f"{fraction(abs(c))} {symbol}")
        stated = [datum for datum, _ in self.terms if not datum.symbol]
        if not stated:
            return written
        sign = f" {MINUS} " if self.exact < 0 else " + "
        u = None if all(datum.u is None for datum in stated) else self.u
        at_least = any(datum.u is None for datum in stated)
        number = Reading(float(abs(self.exact)), u, self.k, at_least, estimated=bool(self.estimated))
        return written + sign + reading(number)

    @property
    def quantity(self) -> Any:
        """The value as a pint quantity in kJ/mol (application registry); raises ``TypeError`` when symbolic."""
        if self.unknowns:
            raise TypeError(f"the heat contains unknown {', '.join(self.unknowns)}: it has no number")
        from routeheat.units import to_pint

        return to_pint(float(self.exact), self.unit)

    def __str__(self) -> str:
        return f"{self.text} {self.unit}"

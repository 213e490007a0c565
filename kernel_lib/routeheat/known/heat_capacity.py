"""Heat capacities at constant pressure: the forms in which they are tabulated, each with the range it holds in.

Every form is a frozen record with the methods of :class:`HeatCapacity`. Outside its range a form raises
:class:`OutOfRange` and never gives a number, with one exception: many fits start at 300.000 K; they are evaluated down
to 298.15 K, and :meth:`HeatCapacity.warning` says so.
"""

from __future__ import annotations

import math
from abc import ABC, abstractmethod
from dataclasses import dataclass
from typing import Protocol

from routeheat.errors import RouteheatError

GAS_CONSTANT = 8.314510
"""J/(mol K): the value that the NASA fits were made with (CODATA 1986; McBride, Zehe, Gordon,
NASA/TP-2002-211556)."""
REFERENCE = 298.15
"""K: temperature of the formation enthalpies that the forms go with."""
USUAL_START = 300.0
"""K: where fits start that are still evaluated at 298.15 K, with a warning."""


class OutOfRange(RouteheatError):
    """A heat capacity was asked for at a temperature that its data do not cover. Never a number."""

    def __init__(self, temperature: float, low: float, high: float, source: str = "") -> None:
        self.temperature = temperature
        """K, the temperature asked for."""
        self.low = low
        """K, lower end of the range."""
        self.high = high
        """K, upper end of the range."""
        self.source = source
        """Where the heat capacity comes from."""
        self.reason = f"{temperature:g} K lies outside the {low:g} to {high:g} K of this heat capacity"
        """What is refused and why, one sentence without a full stop."""
        super().__init__(self.reason + (f" ({source})" if source else ""))


class HeatCapacity(Protocol):
    """What every form of Cp(T) can do."""

    @property
    def low(self) -> float:
        """K, lower end of the range."""

    @property
    def high(self) -> float:
        """K, upper end of the range."""

    @property
    def source(self) -> str:
        """Where it comes from."""

    def covers(self, t: float) -> bool:
        """Whether :meth:`cp` gives a number at ``t`` K."""

    def cp(self, t: float) -> float:
        """Cp in J/(mol K) at ``t`` K; raises :class:`OutOfRange`."""

    def enthalpy_difference(self, t1: float, t2: float) -> float:
        """H(t2) − H(t1) in kJ/mol, temperatures in K; raises :class:`OutOfRange`."""

    def warning(self, t: float) -> str:
        """What a reader must know about the value at ``t`` K; empty when nothing."""


class _Form(ABC):
    """What the forms share: the guard of the range and the difference of two enthalpies."""

    __slots__ = ()
    low: float
    high: float
    source: str

    def covers(self, t: float) -> bool:
        """Whether :meth:`cp` gives a number at ``t`` K: inside the range, or 298.15 K up to a start at 300 K."""
        return self.low <= t <= self.high or self._just_below(t)

    def warning(self, t: float) -> str:
        """What a reader must know about the value at ``t`` K; empty when nothing."""
        if not self._just_below(t):
            return ""
        return f"the heat capacity starts at {self.low:.3f} K: extrapolated by {self.low - t:.2f} K"

    def cp(self, t: float) -> float:
        """Cp in J/(mol K) at ``t`` K; raises :class:`OutOfRange`."""
        self._guard(t)
        return self._cp(t)

    def enthalpy_difference(self, t1: float, t2: float) -> float:
        """H(t2) − H(t1) in kJ/mol, temperatures in K; raises :class:`OutOfRange`."""
        return self._guarded_enthalpy(t2) - self._guarded_enthalpy(t1)

    def _just_below(self, t: float) -> bool:
        return REFERENCE <= t < self.low <= USUAL_START

    def _guard(self, t: float) -> None:
        if not self.covers(t):
            raise OutOfRange(t, self.low, self.high, self.source)

    def _guarded_enthalpy(self, t: float) -> float:
        self._guard(t)
        return self._enthalpy(t)

    @abstractmethod
    def _cp(self, t: float) -> float:
        """J/(mol K)."""

    @abstractmethod
    def _enthalpy(self, t: float) -> float:
        """kJ/mol, up to a constant that is the same over the whole range."""


@dataclass(frozen=True, slots=True)
class ConstantCp(_Form):
    """A heat capacity known at one temperature and taken as constant."""

    value: float
    """J/(mol K)."""
    low: float = 0.0
    """K."""
    high: float = math.inf
    """K."""
    source: str = ""

    def _cp(self, t: float) -> float:  # noqa: ARG002
        return self.value

    def _enthalpy(self, t: float) -> float:
        return self.value * t / 1000


@dataclass(frozen=True, slots=True)
class PolynomialCp(_Form):
    """Cp = c0 + c1 T + c2 T² + …"""

    coefficients: tuple[float, ...]
    """c0, c1, …: J/(mol K), J/(mol K²), …"""
    low: float
    """K."""
    high: float
    """K."""
    source: str = ""

    def _cp(self, t: float) -> float:
        return sum(c * t**power for power, c in enumerate(self.coefficients))

    def _enthalpy(self, t: float) -> float:
        return sum(c * t ** (power + 1) / (power + 1) for power, c in enumerate(self.coefficients)) / 1000


@dataclass(frozen=True, slots=True)
class Shomate(_Form):
    """Cp = A + B t + C t² + D t³ + E/t², with t = T / (1000 K).

    H(T) − H(298.15 K) = A t + B t²/2 + C t³/3 + D t⁴/4 − E/t + F − H in kJ/mol (M. W. Chase, NIST-JANAF Thermochemical
    Tables, 4th ed., J. Phys. Chem. Ref. Data Monograph 9, 1998). By this definition the enthalpy at 298.15 K is zero
    also where the range starts higher, so a difference may start or end there.
    """

    a: float
    b: float
    c: float
    d: float
    e: float
    f: float
    g: float
    """Constant of the entropy; no heat uses it."""
    h: float
    """Formation enthalpy at 298.15 K in kJ/mol, subtracted with F."""
    low: float
    """K."""
    high: float
    """K."""
    source: str = ""

    def _cp(self, t: float) -> float:
        x = t / 1000
        return self.a + self.b * x + self.c * x**2 + self.d * x**3 + self.e / x**2

    def _enthalpy(self, t: float) -> float:
        x = t / 1000
        return self.a * x + self.b * x**2 / 2 + self.c * x**3 / 3 + self.d * x**4 / 4 - self.e / x + self.f - self.h

    def _guarded_enthalpy(self, t: float) -> float:
        if t == REFERENCE and t < self.low:
            return 0.0
        # without arguments, super() would look for the class that the decorator replaced by its slotted copy
        return _Form._guarded_enthalpy(self, t)


@dataclass(frozen=True, slots=True)
class Nasa7(_Form):
    """Cp/R = a1 + a2 T + a3 T² + a4 T³ + a5 T⁴ over one range.

    H/(RT) = a1 + a2 T/2 + a3 T²/3 + a4 T³/4 + a5 T⁴/5 + a6/T (Gordon, McBride, NASA RP-1311, 1994).
    """

    coefficients: tuple[float, ...]
    """a1 to a6; a7, the constant of the entropy, may follow and is not used."""
    low: float
    """K."""
    high: float
    """K."""
    source: str = ""

    def __post_init__(self) -> None:
        if len(self.coefficients) not in (6, 7):
            raise ValueError(f"a NASA-7 range has 6 or 7 coefficients, not {len(self.coefficients)}")

    def _cp(self, t: float) -> float:
        return GAS_CONSTANT * sum(a * t**power for power, a in enumerate(self.coefficients[:5]))

    def _enthalpy(self, t: float) -> float:
        terms = sum(a * t ** (power + 1) / (power + 1) for power, a in enumerate(self.coefficients[:5]))
        return GAS_CONSTANT * (terms + self.coefficients[5]) / 1000


@dataclass(frozen=True, slots=True)
class Nasa9Interval:
    """One temperature interval of a NASA-9 fit."""

    low: float
    """K."""
    high: float
    """K."""
    coefficients: tuple[float, ...]
    """a1 to a7, of the powers −2 to 4 of T."""
    b1: float
    """Constant of the enthalpy, K."""

    def __post_init__(self) -> None:
        if len(self.coefficients) != 7:
            raise ValueError(f"a NASA-9 interval has 7 coefficients, not {len(self.coefficients)}")

    def cp(self, t: float) -> float:
        """J/(mol K)."""
        return GAS_CONSTANT * sum(a * t ** (power - 2) for power, a in enumerate(self.coefficients))

    def enthalpy(self, t: float) -> float:
        """kJ/mol on the scale of the fit: the formation enthalpy at 298.15 K."""
        a1, a2, *rest = self.coefficients
        terms = -a1 / t + a2 * math.log(t) + sum(a * t ** (power + 1) / (power + 1) for power, a in enumerate(rest))
        return GAS_CONSTANT * (terms + self.b1) / 1000


@dataclass(frozen=True, slots=True)
class Nasa9(_Form):
    """Cp/R = a1 T⁻² + a2 T⁻¹ + a3 + a4 T + a5 T² + a6 T³ + a7 T⁴ in adjoining intervals.

    H/(RT) = −a1 T⁻² + a2 T⁻¹ ln T + a3 + a4 T/2 + a5 T²/3 + a6 T³/4 + a7 T⁴/5 + b1/T (McBride, Zehe, Gordon,
    NASA/TP-2002-211556). The enthalpy at 298.15 K of a fit that starts at 300.000 K is the tabulated one, where given.
    """

    intervals: tuple[Nasa9Interval, ...]
    """In order of temperature; each starts where the one before it ends."""
    formation_enthalpy: float | None = None
    """Tabulated ΔfH(298.15 K) in kJ/mol, the zero point of :meth:`enthalpy`; ``None`` when not given."""
    source: str = ""

    def __post_init__(self) -> None:
        if not self.intervals:
            raise ValueError("a NASA-9 fit has at least one interval")
        for before, after in zip(self.intervals, self.intervals[1:], strict=False):
            if before.high != after.low:
                raise ValueError(f"NASA-9 intervals do not adjoin: {before.high} K, {after.low} K")

    @property
    def low(self) -> float:  # type: ignore[override]
        """K, lower end of the first interval."""
        return self.intervals[0].low

    @property
    def high(self) -> float:  # type: ignore[override]
        """K, upper end of the last interval."""
        return self.intervals[-1].high

    def enthalpy(self, t: float) -> float:
        """ΔfH(298.15 K) + H(T) − H(298.15 K) in kJ/mol at ``t`` K; raises :class:`OutOfRange`."""
        return self._guarded_enthalpy(t)

    def _interval(self, t: float) -> Nasa9Interval:
        return next((item for item in self.intervals if t <= item.high), self.intervals[-1])

    def _cp(self, t: float) -> float:
        return self._interval(t).cp(t)

    def _enthalpy(self, t: float) -> float:
        if t == REFERENCE and t < self.low and self.formation_enthalpy is not None:
            return self.formation_enthalpy
        return self._interval(t).enthalpy(t)

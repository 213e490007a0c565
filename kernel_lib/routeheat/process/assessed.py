"""Values with an uncertainty that may be a lower bound, and refusals that are values of their own.

A refusal is never a number, a class or a level: what cannot be known must not look like something that is known.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.measured import Measured
from routeheat.present.numbers import reading
from routeheat.present.table import Reading
from routeheat.units import Unit

_STEP = 1e-3
"""Part of a standard uncertainty over which a derivative is taken."""


@dataclass(frozen=True, slots=True)
class Value:
    """A number with its standard uncertainty; the unit is that of the field it stands in."""

    value: float
    u: float | None = None
    """Standard uncertainty of the stated part; ``None`` when nothing is stated."""
    at_least: bool = False
    """True when some input has no stated uncertainty, so that ``u`` is a lower bound."""

    @property
    def spread(self) -> float:
        """Standard uncertainty as computed with: 0 where nothing is stated (and :attr:`complete` is False)."""
        return self.u or 0.0

    @property
    def complete(self) -> bool:
        """True when the uncertainty of every input is stated."""
        return self.u is not None and not self.at_least

    def text(self, k: float, decimals: int = 1) -> str:
        """As printed, without the unit: ``57.0 ± 2.2 (k = 1)``."""
        return reading(Reading(self.value, self.u, k, self.at_least), decimals=decimals)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {"value": self.value, "u": self.u, "at_least": self.at_least}


@dataclass(frozen=True, slots=True)
class NotAssessed:
    """A result that cannot be had from the data entered."""

    what: str
    """What is refused, in words: ``not classifiable``."""
    missing: tuple[str, ...] = ()
    """Names of the inputs that are missing."""
    reason: str = ""
    """Why, where it is not (only) something missing."""

    @property
    def text(self) -> str:
        """As printed: ``not classifiable: TD24 missing``."""
        parts = [f"{', '.join(self.missing)} missing"] if self.missing else []
        return ": ".join([self.what, "; ".join([*parts, *([self.reason] if self.reason else [])])])

    def __str__(self) -> str:
        return self.text

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {"not_assessed": self.text, "missing": list(self.missing)}


def from_measured(measured: Measured, unit: Unit) -> Value:
    """A typed quantity in ``unit``; raises :class:`~routeheat.errors.UnitError` on another dimension."""
    u = measured.u_to(unit)
    return Value(float(measured.to(unit)), None if u is None else float(u))


def from_heat(heat: HeatSum) -> Value:
    """A heat sum without symbolic unknowns as a value, kJ/mol."""
    stated = heat.reading
    return Value(float(heat.exact), stated.u, stated.at_least)


def propagate(function: Callable[..., float], inputs: Sequence[Value]) -> Value:
    """``function`` of independent inputs with first-order propagation, u² = Σ (∂f/∂xᵢ uᵢ)² (JCGM 100:2008, eq. 10).

    Derivatives are central differences over a thousandth of each standard uncertainty. A result is ``at_least`` when
    some input has no stated uncertainty, and has none itself when no input has one.
    """
    centre = [item.value for item in inputs]
    variance = 0.0
    for index, item in enumerate(inputs):
        if not item.u:
            continue
        shift = _STEP * item.u
        above, below = centre.copy(), centre.copy()
        above[index] += shift
        below[index] -= shift
        variance += ((function(*above) - function(*below)) / (2 * shift) * item.u) ** 2
    stated = any(item.u is not None for item in inputs)
    return Value(
        function(*centre), math.sqrt(variance) if stated else None, stated and not all(item.complete for item in inputs)
    )

"""Criticality classes 1 to 5 by the ordering of MTSR, MTT and TD24, and their probabilities.

The ordering is Stoessel's (F. Stoessel, Chem. Eng. Prog. 89(10) (1993) 68; Thermal Safety of Chemical Processes, 2008
and 2020; GB/T 42300-2022): from memory, check against the source. Ties go to the worse class, which is our choice.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass

from routeheat.process.assessed import NotAssessed
from routeheat.process.quadrature import integrate

AMBIENT_C = 30.0
"""Ambient temperature in °C unless a sheet says otherwise; a choice."""
NOT_CLASSIFIABLE = "not classifiable"
_TAIL = 8.0
"""Standard deviations behind which a normal distribution is taken as nothing (1e-15)."""


def class_of(temperature_c: float, mtt_c: float, td24_c: float) -> int:
    """The class of a scenario temperature, a complete partition with ties to the worse side.

    1: T < MTT < TD24; 2: T < TD24 ≤ MTT; 3: MTT ≤ T < TD24; 4: MTT < TD24 ≤ T; 5: TD24 ≤ T and TD24 ≤ MTT.
    """
    if td24_c <= mtt_c:
        return 2 if temperature_c < td24_c else 5
    if temperature_c < mtt_c:
        return 1
    return 3 if temperature_c < td24_c else 4


def classify(
    process_c: float | None,
    mtsr_c: float | None,
    mtt_c: float | None,
    td24_c: float | None,
    *,
    ambient_c: float = AMBIENT_C,
) -> tuple[int, ...] | NotAssessed:
    """The class as a tuple of one, or the possible classes worst first where MTT is missing, or a refusal.

    The scenario temperature is max(MTSR, ambient). A missing Tp, MTSR or TD24, and an input that contradicts itself
    (Tp above MTT, MTSR below Tp), is refused.
    """
    named = (("T", process_c), ("MTSR", mtsr_c), ("TD24", td24_c))
    missing = tuple(name for name, given in named if given is None)
    if missing or process_c is None or mtsr_c is None or td24_c is None:
        return NotAssessed(NOT_CLASSIFIABLE, missing)
    fault = inconsistency(process_c, mtsr_c, mtt_c)
    if fault:
        return NotAssessed(NOT_CLASSIFIABLE, reason=fault)
    temperature = max(mtsr_c, ambient_c)
    if mtt_c is None:
        return (3, 2, 1) if temperature < td24_c else (5, 4)
    return (class_of(temperature, mtt_c, td24_c),)


def inconsistency(process_c: float | None, mtsr_c: float | None, mtt_c: float | None) -> str:
    """What contradicts itself in the temperatures of an exothermic step; empty when nothing does."""
    if process_c is not None and mtt_c is not None and process_c > mtt_c:
        return "inconsistent input: T is above MTT"
    if process_c is not None and mtsr_c is not None and mtsr_c < process_c:
        return "inconsistent input: MTSR is below T for an exothermic step"
    return ""


@dataclass(frozen=True, slots=True)
class Normal:
    """A normal distribution, cut off below at ``floor``; ``sd`` 0 is a certain value."""

    mean: float
    sd: float = 0.0
    floor: float = -math.inf

    def below(self, x: float) -> float:
        """P(X < x)."""
        if x <= self.floor:
            return 0.0
        if self.sd == 0:
            return float(max(self.mean, self.floor) < x)
        return _phi((x - self.mean) / self.sd)

    def at_most(self, x: float) -> float:
        """P(X ≤ x)."""
        if x < self.floor:
            return 0.0
        if self.sd == 0:
            return float(max(self.mean, self.floor) <= x)
        return _phi((x - self.mean) / self.sd)

    def expect(self, function: Callable[[float], float], others: tuple[Normal, ...]) -> float:
        """E[f(X)], where f changes quickly only near the ``others``."""
        if self.sd == 0:
            return function(max(self.mean, self.floor))
        low, high = self.mean - _TAIL * self.sd, self.mean + _TAIL * self.sd
        atom = function(self.floor) * _phi((self.floor - self.mean) / self.sd) if self.floor > -math.inf else 0.0
        low = max(low, self.floor)
        if low >= high:
            return atom
        places = {low, high}
        for other in others:
            places |= {other.mean + step * other.sd for step in range(-8, 9)} | {other.floor}
        kept = [place for place in places if low <= place <= high]

        def density(x: float) -> float:
            deviation = (x - self.mean) / self.sd
            return function(x) * math.exp(-deviation * deviation / 2) / (self.sd * math.sqrt(2 * math.pi))

        return atom + integrate(density, kept, self.sd / 2)


def _phi(deviation: float) -> float:
    return 0.5 * math.erfc(-deviation / math.sqrt(2))


def class_probabilities(mtsr: Normal, mtt: Normal, td24: Normal, ambient_c: float = AMBIENT_C) -> Mapping[int, float]:
    """Probability of each class for independent normal MTSR, MTT and TD24 (°C), by integrals in one dimension.

    Each class is a chain of inequalities with one variable in the middle; given that one, the other two are
    independent. The scenario temperature max(MTSR, ambient) is a normal distribution cut off at ambient.
    """
    scenario = Normal(mtsr.mean, mtsr.sd, ambient_c)
    three = (scenario, mtt, td24)
    return {
        1: mtt.expect(lambda x: scenario.below(x) * (1 - td24.at_most(x)), three),
        2: td24.expect(lambda x: scenario.below(x) * (1 - mtt.below(x)), three),
        3: scenario.expect(lambda x: mtt.at_most(x) * (1 - td24.at_most(x)), three),
        4: td24.expect(lambda x: mtt.below(x) * (1 - scenario.below(x)), three),
        5: td24.expect(lambda x: (1 - scenario.below(x)) * (1 - mtt.below(x)), three),
    }


def decomposition_probability(mtsr: Normal, td24: Normal, ambient_c: float = AMBIENT_C) -> float:
    """P(TD24 ≤ max(MTSR, ambient)): the probability of classes 4 and 5 together."""
    scenario = Normal(mtsr.mean, mtsr.sd, ambient_c)
    return td24.expect(lambda x: 1 - scenario.below(x), (scenario, td24))

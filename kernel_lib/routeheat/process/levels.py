"""Severity and probability levels, with the thresholds a user may set. Ties go to the worse level.

All default thresholds are from memory (F. Stoessel, Thermal Safety of Chemical Processes, Wiley-VCH 2008, ch. 3;
GB/T 42300-2022, whose edges may differ): confirm them against your own standard.
"""

from __future__ import annotations

from dataclasses import dataclass

SEVERITY_3 = ("low", "medium", "high")
SEVERITY_4 = ("negligible", "medium", "critical", "catastrophic")
PROBABILITY_3 = ("low", "medium", "high")
PROBABILITY_6 = ("almost impossible", "improbable", "seldom", "occasional", "probable", "frequent")


@dataclass(frozen=True, slots=True)
class Thresholds:
    """Every limit that decides a level or a class; the defaults are from memory."""

    severity_3: tuple[float, float] = (50.0, 200.0)
    """ΔTad in K at which severity becomes medium, high (3 levels)."""
    severity_4: tuple[float, float, float] = (50.0, 200.0, 400.0)
    """ΔTad in K at which severity becomes medium, critical, catastrophic (4 levels)."""
    probability_3: tuple[float, float] = (24.0, 8.0)
    """TMRad in h at or below which probability is medium, high (3 levels)."""
    probability_6: tuple[float, float, float, float, float] = (100.0, 50.0, 24.0, 8.0, 1.0)
    """TMRad in h at or below which the six-level probability climbs by one level each."""
    reachable: float = 0.01
    """Least probability with which a class is listed."""
    margin: float = 0.8
    """Part of the cooling capacity that may be used; a choice, not a source."""

    def __post_init__(self) -> None:
        rising = (self.severity_3, self.severity_4)
        falling = (self.probability_3, self.probability_6)
        if any(list(item) != sorted(set(item)) for item in rising):
            raise ValueError("severity thresholds rise from level to level")
        if any(list(item) != sorted(set(item), reverse=True) for item in falling):
            raise ValueError("probability thresholds fall from level to level")
        if not 0 < self.margin <= 1 or not 0 <= self.reachable < 1:
            raise ValueError("margin lies in (0, 1], reachable in [0, 1)")


DEFAULTS = Thresholds()


@dataclass(frozen=True, slots=True)
class Level:
    """A level on a named scale."""

    scale: str
    """``severity, 3 levels``."""
    word: str
    """``medium``, or ``at least medium`` where gas or pressure is not weighed."""

    @property
    def text(self) -> str:
        """Level with its scale: ``medium (severity, 3 levels)``."""
        return f"{self.word} ({self.scale})"

    def __str__(self) -> str:
        return self.text


def severity(rise_k: float, *, gas: bool = False, levels: int = 3, thresholds: Thresholds = DEFAULTS) -> Level:
    """Severity of losing control from the adiabatic rise in K, on 3 or 4 levels.

    With ``gas`` (or pressure) the lowest level is not available: the word is then ``at least medium``.
    """
    if levels not in (3, 4):
        raise ValueError("severity has 3 or 4 levels")
    limits: tuple[float, ...] = thresholds.severity_3 if levels == 3 else thresholds.severity_4
    words = SEVERITY_3 if levels == 3 else SEVERITY_4
    place = sum(rise_k >= limit for limit in limits)
    word = f"at least {words[1]}" if gas and place == 0 else words[place]
    return Level(f"severity, {levels} levels", word)


def probability(tmrad_h: float, *, levels: int = 3, thresholds: Thresholds = DEFAULTS) -> Level:
    """Probability of a runaway from TMRad in hours, on 3 or 6 levels; a time on a limit counts as the shorter side."""
    if levels not in (3, 6):
        raise ValueError("probability has 3 or 6 levels")
    limits: tuple[float, ...] = thresholds.probability_3 if levels == 3 else thresholds.probability_6
    words = PROBABILITY_3 if levels == 3 else PROBABILITY_6
    return Level(f"probability, {levels} levels", words[sum(tmrad_h <= limit for limit in limits)])

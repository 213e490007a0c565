"""Integrals of smooth pieces, deterministic to many digits."""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable, Iterable

# five-point Gauss-Legendre rule on (-1, 1): closed form (Abramowitz and Stegun 1972, table 25.4)
_INNER = math.sqrt(5 - 2 * math.sqrt(10 / 7)) / 3
_OUTER = math.sqrt(5 + 2 * math.sqrt(10 / 7)) / 3
_RULE = (
    (0.0, 128 / 225),
    (_INNER, (322 + 13 * math.sqrt(70)) / 900),
    (-_INNER, (322 + 13 * math.sqrt(70)) / 900),
    (_OUTER, (322 - 13 * math.sqrt(70)) / 900),
    (-_OUTER, (322 - 13 * math.sqrt(70)) / 900),
)


def integrate(function: Callable[[float], float], places: Iterable[float], widest: float) -> float:
    """∫ f from the first to the last of the sorted ``places``; steps and kinks of f must be among them.

    Each piece is cut into panels no wider than ``widest``.
    """
    ordered = sorted(set(places))
    total = 0.0
    for low, high in itertools.pairwise(ordered):
        panels = max(1, math.ceil((high - low) / widest))
        half = (high - low) / panels / 2
        for index in range(panels):
            middle = low + (2 * index + 1) * half
            total += half * sum(weight * function(middle + half * node) for node, weight in _RULE)
    return total


def bisect(function: Callable[[float], float], low: float, high: float) -> float | None:
    """Where ``function`` changes sign between ``low`` and ``high``; ``None`` when it has one sign at both ends."""
    at_low = function(low)
    if at_low * function(high) > 0:
        return None
    for _ in range(200):
        middle = (low + high) / 2
        if middle in (low, high):
            break
        if function(middle) * at_low > 0:
            low = middle
        else:
            high = middle
    return (low + high) / 2

"""How numbers are written for people: true minus signs, and an uncertainty that always says its k.

Rounding follows JCGM 100:2008, 7.2.6: an uncertainty is quoted with two significant digits and the value is rounded
to the same decimal place.
"""

from __future__ import annotations

import math
from fractions import Fraction

from routeheat.present.cells import Reading

MINUS = "\N{MINUS SIGN}"


def number(value: float, decimals: int = 1) -> str:
    """``value`` with a fixed number of decimals and a true minus; never ``−0.0``."""
    if not math.isfinite(value):
        return "not a number"
    text = f"{value:.{max(decimals, 0)}f}" if decimals >= 0 else f"{round(value, decimals):.0f}"
    if text.startswith("-"):
        digits = text[1:]
        return digits if not digits.strip("0.") else MINUS + digits
    return text


def fraction(value: Fraction | int) -> str:
    """An exact number as chemists write it: ``2``, ``3/2``, ``−1/2``."""
    exact = Fraction(value)
    sign = MINUS if exact < 0 else ""
    exact = abs(exact)
    return f"{sign}{exact.numerator}" if exact.denominator == 1 else f"{sign}{exact.numerator}/{exact.denominator}"


def coverage(k: float) -> str:
    """The coverage factor as written beside a ±: ``k = 2``."""
    return f"k = {k:.3g}"


def decimals_for(spread: float) -> int:
    """Decimal place at which ``spread`` has two significant digits (may be negative)."""
    if spread <= 0 or not math.isfinite(spread):
        return 1
    place = 1 - math.floor(math.log10(spread))
    # 0.0996 rounds up to 0.10, which has one decimal place less
    return place - 1 if round(spread, place) >= 10.0 ** (2 - place) else place


def reading(item: Reading, *, decimals: int = 1, say_k: bool = True) -> str:
    """A value with its uncertainty: ``−163.2 ± 9.7 (k = 1)``.

    ``decimals`` is used when no uncertainty is stated. A lower bound is written ``± ≥ 9.7``; no statement at all is
    written in words, because a missing ± could be mistaken for zero. What rests on an estimate says so.
    """
    if item.value is None:
        return item.words or "not entered"
    mark = ["estimated"] if item.estimated else []
    if item.u is None:
        return f"{number(item.value, decimals)} ({', '.join(['u not stated', *mark])})"
    spread = item.k * item.u
    if spread == 0:
        bound = "u at least 0, not all stated" if item.at_least else "exact"
        return f"{number(item.value, decimals)} ({', '.join([bound, *mark])})"
    place = min(decimals_for(spread), 9)
    bound = "at least " if item.at_least else ""
    said = ", ".join([*([coverage(item.k)] if say_k else []), *mark])
    tail = f" ({said})" if said else ""
    return f"{number(item.value, place)} ± {bound}{number(spread, place)}{tail}"

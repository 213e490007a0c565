"""What bringing the rows of one sum to one temperature changes, from the heat capacities that are known.

May import: :mod:`routeheat.hess.heating`, :mod:`routeheat.hess.tabulated`, :mod:`routeheat.hess.temperature_views`,
:mod:`routeheat.chem`, :mod:`routeheat.present`.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.row import REFERENCE_TEMPERATURE, Row
from routeheat.hess.heating import Crossing, HeatCapacities, Part, Transition, follow, merged
from routeheat.hess.tabulated import tabulated
from routeheat.hess.temperature_views import bound_words
from routeheat.present.numbers import number

Ways = list[tuple[Reaction, Fraction]]
"""Reactions with the temperature in kelvin that each starts from."""
_NAMED = 3
"""Problems that a sentence lists."""


def temperature_warning(
    terms: Iterable[tuple[Row, Fraction]],
    *,
    heat_capacities: HeatCapacities | None = None,
    transitions: Iterable[Transition] | None = None,
) -> str:
    """What a reader must know when the rows of one sum hold at different temperatures, with the size of the effect.

    The size is what bringing the rows that hold elsewhere to 25 °C (or, without a row there, to the temperature of
    the first row) would change the sum by. Empty when all rows hold at one temperature.
    """
    listed = list(terms)
    temperatures = list(dict.fromkeys(row.temperature for row, _ in listed))
    if len(temperatures) < 2:
        return ""
    words = []
    for kelvin in temperatures:
        labels = ", ".join(row.label for row, _ in listed if row.temperature == kelvin)
        words.append(f"{labels} {number(float(kelvin), 2)} K")
    parts = [(row.reaction, c, row.temperature) for row, c in listed]
    size = at_one_temperature(parts, heat_capacities=heat_capacities, transitions=transitions).text
    return f"the heats hold at different temperatures ({'; '.join(words)}) and are added as they are; {size}"


@dataclass(frozen=True, slots=True)
class Change:
    """What bringing a sum to one temperature would change it by."""

    common: Fraction
    """K: 25 °C where a part holds there, else the temperature of the first part."""
    value: Fraction | None
    """kJ/mol; ``None`` when heat capacities are missing."""
    bound: tuple[float, float] | None
    """Interval of the change in kJ/mol when some are missing; ``None`` when nothing can be said."""
    problems: tuple[str, ...]
    """Why there is no value."""

    @property
    def text(self) -> str:
        """``bringing all to 298.15 K would change the sum by −1.20 kJ/mol``, or what is known of that change."""
        size = f"{number(float(self.value), 2)} kJ/mol" if self.value is not None else bound_words(self.bound)
        why = f" ({self.missing})" if self.problems else ""
        return f"bringing all to {number(float(self.common), 2)} K would change the sum by {size}{why}"

    @property
    def missing(self) -> str:
        """The first problems, and how many more there are."""
        more = len(self.problems) - _NAMED
        return "; ".join(self.problems[:_NAMED]) + (f"; and {more} more" if more > 0 else "")


def at_one_temperature(
    parts: Sequence[tuple[Reaction, Fraction, Fraction]],
    *,
    heat_capacities: HeatCapacities | None = None,
    transitions: Iterable[Transition] | None = None,
) -> Change:
    """The change for reactions with how often each is run and the temperature in kelvin that its heat holds at."""
    temperatures = [kelvin for _, _, kelvin in parts]
    common = REFERENCE_TEMPERATURE if REFERENCE_TEMPERATURE in temperatures else temperatures[0]
    ways = ways_of(part for part in parts if part[2] != common)
    found, crossed = follow_all(ways, common, heat_capacities, transitions)
    problems = tuple(dict.fromkeys(part.problem for part in found if part.problem))
    if problems:
        return Change(common, None, bound_of(found, crossed), problems)
    return Change(common, warming_of(found) + sum((item.heat.exact for item in crossed), Fraction(0)), None, ())


def ways_of(rows: Iterable[tuple[Reaction, Fraction, Fraction]]) -> Ways:
    """One net reaction per starting temperature, so that what cancels needs no heat capacity."""
    groups: dict[Fraction, list[tuple[Fraction, Reaction]]] = {}
    for reaction, c, begin in rows:
        groups.setdefault(begin, []).append((c, reaction))
    return [(Reaction.from_net(add_net(group)), begin) for begin, group in groups.items()]


def follow_all(
    ways: Ways, end: Fraction, capacities: HeatCapacities | None, transitions: Iterable[Transition] | None
) -> tuple[tuple[Part, ...], tuple[Crossing, ...]]:
    """What every species contributes on the way to ``end``, and the transitions passed.

    Without heat capacities or transitions those of the table of the package are used.
    """
    if capacities is None or transitions is None:
        table = tabulated(dict.fromkeys(species for reaction, _ in ways for species in reaction.species))
        capacities = table[0] if capacities is None else capacities
        transitions = table[1] if transitions is None else transitions
    listed = tuple(transitions)
    found = [follow(reaction, begin, end, capacities, listed) for reaction, begin in ways]
    return tuple(part for parts, _ in found for part in parts), merged(item for _, crossed in found for item in crossed)


def problems_of(parts: Iterable[Part]) -> str:
    """Why the change is not known; empty when it is."""
    return "; ".join(dict.fromkeys(part.problem for part in parts if part.problem))


def warming_of(parts: Iterable[Part]) -> Fraction:
    """What heat capacities alone add, kJ/mol, transitions aside."""
    # a billionth of a kJ/mol is far below what any heat capacity is known to
    return Fraction(f"{math.fsum(part.warming for part in parts):.9f}")


def bound_of(parts: Sequence[Part], crossed: Sequence[Crossing]) -> tuple[float, float] | None:
    """Interval of the change in kJ/mol where heat capacities are missing; ``None`` when nothing can be said."""
    known = math.fsum(part.warming for part in parts) + sum(float(item.heat.exact) for item in crossed)
    low = known + sum(part.open[0] for part in parts)
    high = known + sum(part.open[1] for part in parts)
    return None if math.isinf(low) and math.isinf(high) else (low, high)

"""What each species of a reaction takes up on the way from one temperature to another.

Heat capacities are followed piece by piece; phase transitions passed on the way change the form of a species.
May import: :mod:`routeheat.known`, :mod:`routeheat.chem`, :mod:`routeheat.present`.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.known.heat_capacity import HeatCapacity, OutOfRange
from routeheat.present.numbers import number

HeatCapacities = Mapping[Species, HeatCapacity | Sequence[HeatCapacity]]
"""Cp of each species: one form, or several that together cover a longer range."""
LARGEST_PER_ATOM = 40.0
"""J/(mol K) per atom that no ordinary pure substance exceeds; liquid bromine comes closest with 38 (from memory)."""
_PURE = ("s", "cr", "am", "l", "g")
_UNKNOWN = (-math.inf, math.inf)


@dataclass(frozen=True, slots=True)
class Transition:
    """A phase transition of one substance at the temperature where both phases are in equilibrium."""

    low: Species
    """The form that is stable below."""
    high: Species
    """The form that is stable above."""
    temperature: Fraction
    """K."""
    heat: HeatSum
    """ΔtrsH of low → high at that temperature in kJ/mol."""

    @property
    def text(self) -> str:
        """``H2O(l) → H2O(g) at 373.15 K``."""
        return f"{self.low} → {self.high} at {number(float(self.temperature), 2)} K"


@dataclass(frozen=True, slots=True)
class Crossing:
    """A transition that the way to the other temperature passes, and what it adds to the heat of the reaction."""

    transition: Transition
    coefficient: Fraction
    """Times ΔtrsH is added: the stoichiometric number on the way up, its negative on the way down."""

    @property
    def heat(self) -> HeatSum:
        """What it adds, kJ per mole of reaction as written."""
        return self.transition.heat.scaled(self.coefficient)

    @property
    def text(self) -> str:
        """``H2O(l) → H2O(g) at 373.15 K adds 81.31 ± 0.16 (k = 2) kJ/mol``."""
        return f"{self.transition.text} adds {self.heat}"


@dataclass(frozen=True, slots=True)
class Part:
    """What one species contributes to the change of a heat of reaction."""

    species: Species
    """As it takes part at the start."""
    coefficient: Fraction
    """Stoichiometric number."""
    start: Fraction
    """K."""
    end: Species
    """As it takes part at the end, after any transition."""
    warming: float
    """Coefficient · ∫ Cp dT in kJ/mol over the pieces whose Cp is known; transitions are not in it."""
    open: tuple[float, float] = (0.0, 0.0)
    """Interval of what the other pieces add, kJ/mol; its ends may be infinite."""
    problem: str = ""
    """Why a piece is not known; empty when all are."""
    notes: tuple[str, ...] = ()


def follow(
    reaction: Reaction, begin: Fraction, end: Fraction, capacities: HeatCapacities, transitions: Sequence[Transition]
) -> tuple[list[Part], list[Crossing]]:
    """What every species of ``reaction`` contributes on the way, and the transitions passed.

    A transition is passed when the way leads from its low form at or below its temperature to above it, or back. When
    both of its forms take part the reaction is about that very transition, and neither form changes.
    """
    net = reaction.net
    possible = [item for item in transitions if not (item.low in net and item.high in net)]
    parts: list[Part] = []
    crossings: list[Crossing] = []
    for species, nu in net.items():
        pieces, passed, last = _path(species, begin, end, possible)
        crossings += [Crossing(item, nu if end > begin else -nu) for item in passed]
        parts.append(_part(species, nu, begin, last, pieces, capacities))
    return parts, crossings


def merged(crossings: Iterable[Crossing]) -> tuple[Crossing, ...]:
    """One crossing per transition; those that cancel disappear."""
    total: dict[Transition, Fraction] = {}
    for crossing in crossings:
        total[crossing.transition] = total.get(crossing.transition, Fraction(0)) + crossing.coefficient
    return tuple(Crossing(transition, c) for transition, c in total.items() if c)


_Piece = tuple[Species, float, float]


def _path(
    species: Species, begin: Fraction, end: Fraction, transitions: Sequence[Transition]
) -> tuple[list[_Piece], list[Transition], Species]:
    """Pieces (form, from, to) of the way of one species, the transitions between them, and its form at the end."""
    pieces: list[_Piece] = []
    passed: list[Transition] = []
    here, form = begin, species
    while here != end:
        if end > begin:
            ahead = [item for item in transitions if item.low == form and here <= item.temperature < end]
        else:
            ahead = [item for item in transitions if item.high == form and end < item.temperature <= here]
        if not ahead:
            pieces.append((form, float(here), float(end)))
            break
        following = min(ahead, key=lambda item: abs(item.temperature - here))
        if following.temperature != here:
            pieces.append((form, float(here), float(following.temperature)))
        passed.append(following)
        here, form = following.temperature, following.high if end > begin else following.low
    return pieces, passed, form


def _part(
    species: Species, nu: Fraction, begin: Fraction, last: Species, pieces: Sequence[_Piece], capacities: HeatCapacities
) -> Part:
    warming, low, high = 0.0, 0.0, 0.0
    problems: list[str] = []
    notes: list[str] = []
    for form, t1, t2 in pieces:
        known = capacities.get(form, ())
        forms = list(known) if isinstance(known, Sequence) else [known]
        if forms:
            try:
                change, warnings = _difference(forms, t1, t2)
            except OutOfRange as outside:
                problems.append(f"{form}: {outside.reason}")
                low, high = _UNKNOWN
                continue
            warming += float(nu) * change
            notes += [f"{form}: {warning}" for warning in warnings]
        else:
            problems.append(f"no heat capacity of {form}")
            one, other = (float(nu) * (t2 - t1) / 1000 * capacity for capacity in _possible(form))
            low, high = low + min(one, other), high + max(one, other)
    return Part(species, nu, begin, last, warming, (low, high), "; ".join(problems), tuple(dict.fromkeys(notes)))


def _possible(form: Species) -> tuple[float, float]:
    """Interval of Cp in J/(mol K) of a species about which nothing is known but its formula and phase.

    A dissolved species can have any apparent heat capacity, also a negative one.
    """
    if form.phase not in _PURE:
        return _UNKNOWN
    if form.formula is None:
        return 0.0, math.inf
    return 0.0, LARGEST_PER_ATOM * sum(count for _, count in form.formula.counts)


def _difference(forms: Sequence[HeatCapacity], t1: float, t2: float) -> tuple[float, list[str]]:
    """H(t2) − H(t1) in kJ/mol with its warnings, from one form that reaches from end to end, else from several."""
    refused: list[OutOfRange] = []
    for form in forms:
        try:
            return form.enthalpy_difference(t1, t2), [text for t in (t1, t2) if (text := form.warning(t))]
        except OutOfRange as outside:
            refused.append(outside)
    low, high = min(t1, t2), max(t1, t2)
    total, here = 0.0, low
    warnings: list[str] = []
    while here < high:
        reaching = [form for form in forms if form.covers(here) and form.high > here]
        if len(forms) == 1 or not reaching:
            raise refused[0] if len(forms) == 1 else _gap(here, forms)
        form = max(reaching, key=lambda item: item.high)
        there = min(form.high, high)
        total += form.enthalpy_difference(here, there)
        warnings += [text for text in (form.warning(here),) if text]
        here = there
    return (total if t2 > t1 else -total), warnings


def _gap(here: float, forms: Sequence[HeatCapacity]) -> OutOfRange:
    return OutOfRange(here, min(form.low for form in forms), max(form.high for form in forms), forms[0].source)

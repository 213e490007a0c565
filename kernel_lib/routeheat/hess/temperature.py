"""The heat of a reaction at another temperature.

ΔrH(T₂) = ΔrH(T₁) + ∫ Σ νᵢ Cp,ᵢ dT + Σ νᵢ ΔtrsHᵢ over the transitions passed on the way (G. Kirchhoff, Ann. Phys. 179
(1858) 177; P. W. Atkins, J. de Paula, Physical Chemistry, Kirchhoff's law). Species are pure and at the standard
pressure throughout.
May import: the other modules of :mod:`routeheat.hess`, :mod:`routeheat.known`, :mod:`routeheat.chem`,
:mod:`routeheat.present`, :mod:`routeheat.units`.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.row import REFERENCE_TEMPERATURE, Row
from routeheat.chem.step import Step
from routeheat.hess import temperature_views
from routeheat.hess.combination import Combination
from routeheat.hess.heating import Crossing, HeatCapacities, Part, Transition
from routeheat.hess.warming import Ways, bound_of, follow_all, problems_of, warming_of, ways_of
from routeheat.present.numbers import number
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.units import KELVIN

__all__ = ["Corrected", "Crossing", "HeatCapacities", "Part", "Transition", "at_temperature"]
NO_UNCERTAINTY = "the correction counts as exact: no uncertainty of the heat capacities is given"


@dataclass(frozen=True, slots=True, repr=False)
class Corrected(Shown):
    """A heat brought to another temperature, or the reason why it is not."""

    name: str
    """What was corrected: a label, else the equation."""
    reaction: Reaction
    """The reaction at the end, in the forms that its species have there."""
    to: Fraction
    """K."""
    before: HeatSum | None
    """The heat before the correction in kJ/mol; ``None`` when there was none."""
    heat: HeatSum | None
    """The heat at :attr:`to` in kJ/mol; ``None`` when it cannot be had, see :attr:`reason`."""
    reason: str
    """Why there is no corrected heat; empty when there is one."""
    correction: HeatSum | None
    """What the heat changes by, kJ/mol, transitions included; ``None`` when it cannot be had."""
    parts: tuple[Part, ...]
    """What each species contributes, transitions aside."""
    crossed: tuple[Crossing, ...]
    """Transitions passed on the way."""
    bound: tuple[float, float] | None
    """Interval of the correction in kJ/mol when heat capacities are missing, 0 ≤ Cp ≤ 40 J/(mol K) per atom assumed for
    them; one end may be infinite. ``None`` when nothing is missing or nothing can be said."""
    notes: tuple[str, ...]
    k: float = 2.0
    """Coverage factor with which heats are printed."""

    def table(self) -> Table:
        """Species with what each contributes to the correction; the heat at the new temperature last."""
        return temperature_views.table(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content; kJ/mol and K."""
        return temperature_views.to_dict(self)


def at_temperature(
    subject: Row | Step | Combination | Reaction | HeatSum,
    to: Measured | Fraction | float,
    *,
    heat_capacities: HeatCapacities | None = None,
    transitions: Iterable[Transition] | None = None,
    of: Reaction | None = None,
    start: Measured | Fraction | float | None = None,
    u: float | None = None,
    k: float = 2.0,
) -> Corrected:
    """The heat of ``subject`` at ``to`` (kelvin, or typed with a unit).

    A row starts from the temperature of its heat (25 °C when it does not say), a step's typed heat from its own or the
    step's temperature, a combination row by row; ``start`` overrules. A :class:`~routeheat.chem.heat.HeatSum` needs its
    reaction ``of``; it and a bare reaction start from 298.15 K unless ``start`` is given. The correction counts as
    exact unless ``u``, its standard uncertainty in kJ/mol, is given. ``heat_capacities`` and ``transitions`` come from
    the table of the package where they are not given; ``transitions=()`` leaves every species in its phase. For when a
    transition is passed see :func:`~routeheat.hess.heating.follow`.

    Raises ``TypeError`` when a heat comes without its reaction, :class:`~routeheat.errors.UnitError` for a quantity
    that is no temperature.
    """
    name, ways, heat, reason = _read(subject, of, None if start is None else _kelvin(start), k)
    end = _kelvin(to)
    parts, crossed = follow_all(ways, end, heat_capacities, transitions)
    problems = problems_of(parts)
    correction = None
    if ways and not problems:
        correction = _correction(name, parts, crossed, end, u, k)
    both = None if correction is None or heat is None else (heat, correction)
    notes = [*(item.text for item in crossed), *dict.fromkeys(note for part in parts for note in part.notes)]
    if correction is not None and u is None and any(part.warming for part in parts):
        notes.append(NO_UNCERTAINTY)
    return Corrected(
        name=name,
        reaction=Reaction.from_net(add_net((part.coefficient, _one(part)) for part in parts)),
        to=end,
        before=heat,
        heat=None if both is None else HeatSum.total(((Fraction(1), item) for item in both), k),
        reason=problems or reason,
        correction=correction,
        parts=parts,
        crossed=crossed,
        bound=bound_of(parts, crossed) if problems else None,
        notes=tuple(notes),
        k=k,
    )


def _kelvin(typed: Measured | Fraction | float) -> Fraction:
    if isinstance(typed, Measured):
        return typed.to(KELVIN)
    return typed if isinstance(typed, Fraction) else Fraction(repr(typed))


def _read(
    subject: Row | Step | Combination | Reaction | HeatSum, of: Reaction | None, start: Fraction | None, k: float
) -> tuple[str, Ways, HeatSum | None, str]:
    """What is corrected: its name, reactions with the temperature each starts from, its heat, and what is missing."""
    if isinstance(subject, HeatSum):
        if of is None:
            raise TypeError("a heat alone does not say which reaction it belongs to: give it as of=")
        return of.text, [(of, start or REFERENCE_TEMPERATURE)], subject, ""
    if isinstance(subject, Reaction):
        return subject.text, [(subject, start or REFERENCE_TEMPERATURE)], None, "no heat given"
    if isinstance(subject, Combination):
        ways = ways_of((row.reaction, c, start or row.temperature) for row, c in subject.terms)
        return subject.name, ways, subject.heat, ""
    row = subject.row if isinstance(subject, Step) else subject
    heat = row.heat_sum(k)
    begin = start or row.temperature
    if isinstance(subject, Step) and start is None and (row.heat is None or row.heat.temperature is None):
        if subject.temperature is None:
            return row.label, [], heat, "neither the heat nor the step says its temperature"
        begin = subject.temperature.to(KELVIN)
    return row.label, [(row.reaction, begin)], heat, "" if heat is not None else "no heat typed"


def _one(part: Part) -> Reaction:
    return Reaction((), ((Fraction(1), part.end),))


def _correction(
    name: str, parts: Sequence[Part], crossed: Sequence[Crossing], end: Fraction, u: float | None, k: float
) -> HeatSum:
    warming = warming_of(parts)
    change = HeatSum(warming, (), k)
    if u is not None:
        label = f"correction of {name} to {number(float(end), 2)} K"
        change = HeatSum.of(Datum(label, value=warming, u=Fraction(repr(float(u))), source="∫ ΔCp dT"), k=k)
    return HeatSum.total(((Fraction(1), change), *((Fraction(1), item.heat) for item in crossed)), k)

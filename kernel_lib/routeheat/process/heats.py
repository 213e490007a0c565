"""The heat of a step: typed, or derived from the sheet's known rows; and what it comes to per mole of product."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.chem.heat import HeatSum
from routeheat.chem.row import Row
from routeheat.chem.step import Step
from routeheat.errors import OutOfReach, RouteError
from routeheat.hess.combination import alternatives, combine
from routeheat.present.table import Reading
from routeheat.process.extents import Extents
from routeheat.process.links import charge
from routeheat.units import KELVIN, KJ_PER_KG_K, MOL_PER_KG

Loss = Literal["reacted", "unreacted"]
PURE_COMPONENTS = "derived from known rows; pure components: no mixing, solvation or dilution"
ESTIMATED = "estimated"
_COMPARED = 10


@dataclass(frozen=True, slots=True)
class MolarHeat:
    """The heat of a row per mole of reaction as written, with where it comes from."""

    heat: HeatSum | None
    """kJ/mol, exothermic negative; ``None`` when it is not entered and cannot be derived."""
    origin: str
    """``typed``, ``estimated, like A1``, ``derived from known rows; …`` or ``not entered: …`` with the reason."""
    temperature: Fraction | None
    """Kelvin the heat holds at; ``None`` when that is not stated."""


def molar_heat(step: Step, known: Mapping[str, Row], k: float) -> MolarHeat:
    """The typed heat of a step; a missing one is derived from ``known`` alone, never from other steps.

    Raises :class:`~routeheat.errors.RouteError` when the heat is stated per a species that does not take part.
    """
    if step.row.heat is not None:
        try:
            heat = step.row.heat_sum(k)
        except ValueError as problem:
            raise RouteError(f"{step.label}: {problem}", step=step.label) from problem
        own = step.row.heat.temperature or step.temperature
        origin = f"typed, {ESTIMATED}" if step.row.estimated else "typed"
        if step.row.heat.analogue:
            origin = f"{ESTIMATED}, like {step.row.heat.analogue}"
        return MolarHeat(heat, origin, None if own is None else own.to(KELVIN))
    return _derived(step, known, k)


def _derived(step: Step, known: Mapping[str, Row], k: float) -> MolarHeat:
    mixed = [species.text for species in step.row.reaction.net if species.in_mixture]
    if mixed:
        return _not_entered(f"{', '.join(mixed)} is in a mixture or has no phase, so no heat can be derived")
    if not known:
        return _not_entered("no known rows to derive it from")
    try:
        combination = combine(step.row.reaction, known, k=k)
    except OutOfReach as problem:
        return _not_entered(str(problem).splitlines()[0])
    rows = [label for label, c in combination.coefficients.items() if c]
    origin = f"{PURE_COMPONENTS} ({', '.join(rows)})"
    if combination.heat.estimated:
        origin += f"; {ESTIMATED}: {', '.join(combination.heat.estimated)}"
    if not combination.unique:
        for other in alternatives(combination, _COMPARED):
            if (other.heat.exact, other.heat.unknowns) != (combination.heat.exact, combination.heat.unknowns):
                labels = ", ".join(label for label, c in other.coefficients.items() if c)
                origin += f"; not unique: {combination.heat} here, {other.heat} from {labels}"
                break
    temperatures = {known[label].temperature for label in rows}
    return MolarHeat(combination.heat, origin, temperatures.pop() if len(temperatures) == 1 else None)


def _not_entered(reason: str) -> MolarHeat:
    return MolarHeat(None, f"not entered: {reason}", None)


def heat_on_basis(found: Extents, step: Step, molar: HeatSum, moles: Fraction, loss: Loss) -> HeatSum:
    """Heat of one row for ``moles`` of product, with its sensitivities to yields and recycled parts.

    ``reacted``: extent · ΔH (per mole charged); ``unreacted``: extent · yield · ΔH. Side rows have no yield. A yield
    without a stated uncertainty adds no term.
    """
    unreacted = loss == "unreacted" and not step.side_of
    delivers = step.yield_value if unreacted else Fraction(1)
    terms = []
    for datum, changes in found.sensitivities:
        if datum.u is None:
            continue
        change = changes[step.label] * delivers
        if unreacted and datum.what == "yield" and datum.label == step.label:
            change += found[step.label]
        if change and molar.exact:
            terms.append((datum, change * molar.exact * moles))
    parts = ((found[step.label] * delivers * moles, molar), (Fraction(1), HeatSum(Fraction(0), tuple(terms))))
    return HeatSum.total(parts, molar.k)


def adiabatic_rise(found: Extents, step: Step, molar: HeatSum | None, k: float) -> Reading | None:
    """Adiabatic temperature rise in kelvin, −ΔrH · c / (cp · |ν|), always per mole of limiting reactant charged.

    c is mol of limiting reactant per kg of mixture, cp kJ/(kg K); positive for an exothermic step. ``None`` unless
    the heat, ``conc`` and ``cp`` are all typed. Source: Stoessel, Thermal Safety of Chemical Processes, 2008, ch. 2
    (from memory).
    """
    c, cp = step.concentration, step.heat_capacity
    if molar is None or molar.unknowns or c is None or cp is None or step.label not in found.links.limiting:
        return None
    number = charge(step, found.links.limiting[step.label])
    capacity = cp.to(KJ_PER_KG_K)
    if capacity <= 0:
        return None
    factor = c.to(MOL_PER_KG) / capacity / number
    value = -molar.exact * factor
    variance = molar.variance * factor**2
    spreads = [c.u_to(MOL_PER_KG), cp.u_to(KJ_PER_KG_K)]
    for size, spread in zip((c.to(MOL_PER_KG), capacity), spreads, strict=True):
        if spread is not None and size:
            variance += (value * spread / size) ** 2
    stated = any(spread is not None for spread in spreads) or len(molar.not_stated) < len(molar.terms)
    missing = None in spreads or not molar.complete
    return Reading(float(value), math.sqrt(variance) if stated else None, k, at_least=missing)

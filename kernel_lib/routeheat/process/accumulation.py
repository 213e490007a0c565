"""Accumulation: how much of the reaction is still to come when cooling fails, at the worst instant of a feed.

Xac is the part of the limiting reactant (of the whole charge) that has been charged together with its partner and
has not reacted. Isothermal, perfectly mixed, reactants fed at a constant rate; mass added with the feed.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.process.assessed import Value, propagate
from routeheat.process.links import charge, reactants
from routeheat.process.settings import HOURS, PER_HOUR, SECOND_ORDER, Settings
from routeheat.units import MOL_PER_KG, PURE

_INSTANTS = 1000
_GAMMA = 1 - math.sqrt(0.5)


@dataclass(frozen=True, slots=True)
class Instant:
    """The worst instant of a feed."""

    time: float
    """Part of the feed time, 0 to 1."""
    fraction: float
    """Xac, part of the limiting reactant."""
    mass_ratio: float
    """Final mass over mass at that instant, Mrf/Mr ≥ 1."""


def first_order(k_per_h: float, feed_h: float) -> float:
    """Xac at the end of a feed into an excess (pseudo-first order): (1 − e^(−k tD))/(k tD); 1 when k is zero.

    Analytic solution of dn/dt = ṅ − k n; F. Stoessel, Thermal Safety of Chemical Processes, 2008 (from memory, check).
    """
    product = k_per_h * feed_h
    return -math.expm1(-product) / product if product else 1.0


def worst_first_order(k_per_h: float, feed_h: float, fed_mass: float = 0.0) -> Instant:
    """Largest Xac Mrf/Mr of a pseudo-first-order feed; ``fed_mass`` is the feed's part of the final mass."""

    def at(time: float) -> Instant:
        return Instant(time, time * first_order(k_per_h, time * feed_h), _mass_ratio(time, fed_mass))

    return _worst([at(index / _INSTANTS) for index in range(_INSTANTS + 1)])


def worst_second_order(damkoehler: float, equivalents: float, fed_mass: float = 0.0) -> Instant:
    """Largest Xac Mrf/Mr of a feed of B into A with r = k cA cB.

    ``damkoehler`` = |νB| k cA0 tD with cA0 in the vessel before the feed; ``equivalents`` of B over A, both divided by
    their stoichiometric coefficients. With the conversion X of A and θ = t/tD:
    dX/dθ = Da (1 − X)(sθ − X)/(1 + εθ), ε = added over initial mass (equal densities);
    Xac = (min(sθ, 1) − X)/min(s, 1).
    Integrated with the two-stage L-stable method of R. Alexander, SIAM J. Numer. Anal. 14 (1977) 1006, whose stages are
    quadratic equations here. Largest at the equivalence point for slow reactions, as M. Steensma and K. R. Westerterp
    found (Ind. Eng. Chem. Res. 29 (1990) 1259; from memory, check).
    """
    growth = fed_mass / (1 - fed_mass)
    step = 1 / _INSTANTS
    conversion = 0.0
    found = [Instant(0.0, 0.0, _mass_ratio(0.0, fed_mass))]
    peak = 1 / equivalents

    def stage(base: float, time: float) -> float:
        # x = base + γ h Da (1 - x)(s t - x)/(1 + ε t): the smaller root of a quadratic in x
        a = _GAMMA * step * damkoehler / (1 + growth * time)
        b = 1 + a * (1 + equivalents * time)
        c = base + a * equivalents * time
        return 2 * c / (b + math.sqrt(max(0.0, b * b - 4 * a * c)))

    for index in range(_INSTANTS):
        time = index * step
        first = stage(conversion, time + _GAMMA * step)
        slope = (first - conversion) / _GAMMA
        second = stage(conversion + (1 - _GAMMA) * slope, time + step)
        before, conversion = conversion, second
        if time < peak < time + step:
            between = before + (conversion - before) * (peak - time) / step
            found.append(_second_order_instant(peak, between, equivalents, fed_mass))
        found.append(_second_order_instant(time + step, conversion, equivalents, fed_mass))
    return _worst(found)


def _second_order_instant(time: float, conversion: float, equivalents: float, fed_mass: float) -> Instant:
    pending = (min(equivalents * time, 1.0) - conversion) / min(equivalents, 1.0)
    return Instant(time, max(0.0, pending), _mass_ratio(time, fed_mass))


def _mass_ratio(time: float, fed_mass: float) -> float:
    return 1 / (1 - fed_mass * (1 - time))


def _worst(instants: list[Instant]) -> Instant:
    return max(instants, key=lambda item: item.fraction * item.mass_ratio)


@dataclass(frozen=True, slots=True)
class Accumulation:
    """The accumulation of a step, with where it comes from."""

    fraction: Value
    """Xac at the worst instant, 0 to 1."""
    mass_ratio: float
    """Final mass over mass at that instant."""
    origin: str
    """``typed``, ``batch``, ``first order …``, ``second order …`` or ``assumed``."""
    instant: float | None = None
    """Worst instant as a part of the feed time; ``None`` when it is not known."""
    notices: tuple[str, ...] = ()
    faults: tuple[str, ...] = ()

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "fraction": self.fraction.to_dict(),
            "mass_ratio": self.mass_ratio,
            "origin": self.origin,
            "instant": self.instant,
            "notices": list(self.notices),
        }


def accumulation(step: Step, settings: Settings, limiting: Species) -> Accumulation:
    """Xac as typed, as a batch has it, from kinetics, or 1 with a notice saying so."""
    typed = settings.value("Xac", PURE)
    feed = settings.value("feed", HOURS)
    fed_mass = settings.number("fedpart", PURE, 0.0)
    faults = [] if 0 <= fed_mass < 1 else ["fedpart is a part of the final mass: at least 0 %, below 100 %"]
    faults += [] if feed is None or feed.value > 0 else ["the feed time must be longer than zero"]
    faults += [
        f"{key} is not positive"
        for key, unit in (("rate1", PER_HOUR), ("rate2", SECOND_ORDER))
        if settings.number(key, unit, 1.0) <= 0
    ]
    if faults:
        return Accumulation(Value(1.0), 1.0, "assumed", faults=tuple(faults))
    if settings.flag("batch"):
        wrong = typed is not None and typed.value != 1
        return Accumulation(
            Value(1.0, 0.0), 1.0, "batch", faults=("a batch has everything in the vessel: Xac is 1",) if wrong else ()
        )
    if typed is not None:
        rates = "rate1" in settings or "rate2" in settings
        return _typed(typed, _fed_ratio(step, settings, limiting)[0], fed_mass, rates)
    return _from_kinetics(step, settings, limiting, feed, fed_mass)


def _typed(typed: Value, equivalents: float, fed_mass: float, kinetics: bool) -> Accumulation:
    if not 0 <= typed.value <= 1:
        return Accumulation(Value(1.0), 1.0, "assumed", faults=("Xac lies between 0 and 1",))
    peak = min(1.0, 1 / equivalents)
    notices = ("Xac as typed; the rate constant is not used",) if kinetics else ()
    return Accumulation(typed, _mass_ratio(peak, fed_mass), "typed", peak if fed_mass else None, notices)


def _from_kinetics(
    step: Step, settings: Settings, limiting: Species, feed: Value | None, fed_mass: float
) -> Accumulation:
    first, second = settings.value("rate1", PER_HOUR), settings.value("rate2", SECOND_ORDER)
    if first is None and second is None:
        return _assumed("no accumulation and no rate constant typed")
    if feed is None:
        return _assumed("a rate constant without a feed time")
    if first is not None:
        found = worst_first_order(first.value, feed.value, fed_mass)
        fraction = propagate(lambda k, hours: worst_first_order(k, hours, fed_mass).fraction, (first, feed))
        both = ("both rate constants typed: the first-order one is used",) if second is not None else ()
        return Accumulation(fraction, found.mass_ratio, "pseudo-first order, isothermal", found.time, both)
    assert second is not None
    if step.concentration is None:
        return _assumed("second-order kinetics without conc")
    equivalents, coefficient, stoichiometry, notices = _fed_ratio(step, settings, limiting)
    per_kg = float(step.concentration.to(MOL_PER_KG)) * stoichiometry / (1 - fed_mass)

    def worst(k: float, hours: float) -> Instant:
        return worst_second_order(coefficient * k * per_kg * hours, equivalents, fed_mass)

    found = worst(second.value, feed.value)
    fraction = propagate(lambda k, hours: worst(k, hours).fraction, (second, feed))
    return Accumulation(fraction, found.mass_ratio, "second order, isothermal", found.time, notices)


def _fed_ratio(step: Step, settings: Settings, limiting: Species) -> tuple[float, float, float, tuple[str, ...]]:
    """Equivalents fed, coefficient of what is fed, mol in the vessel per mol of limiting reactant, and notices."""
    others = [species for species in reactants(step) if species != limiting]
    fed = settings.species("fed")
    if fed is None or not others or fed not in reactants(step):
        notices = ("what is fed is not stated (fed …): the stoichiometric amount is assumed",)
        return 1.0, 1.0, 1.0, notices
    equivalents = dict(step.equivalents)
    net = step.row.reaction.net
    if fed != limiting:
        return float(equivalents.get(fed, Fraction(1))), float(-net[fed]), 1.0, ()
    partner = min(others, key=lambda species: equivalents.get(species, Fraction(1)))
    in_vessel = charge(step, partner) / charge(step, limiting)
    return float(1 / equivalents.get(partner, Fraction(1))), float(-net[fed]), float(in_vessel), ()


def _assumed(reason: str) -> Accumulation:
    return Accumulation(Value(1.0, 0.0), 1.0, "assumed", notices=(f"Xac = 1 is used: {reason}",))

"""Heat rate of a feed against the cooling of a vessel, its scale, boiling as a barrier, and gas: formulas and checks.

Heats exothermic negative; heat rates and capacities positive when heat is released or can be removed.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

from routeheat.present.numbers import number
from routeheat.process.cautions import NOTHING_EXCEEDED
from routeheat.process.runaway import R

TYPICAL_VESSELS: tuple[tuple[float, float], ...] = ((0.0001, 0.01), (0.001, 0.03), (0.1, 1.0), (1.0, 3.0), (10.0, 13.5))
"""Pairs (volume in m³, jacketed area in m²) from 0.1 L to 10 m³.

F. Stoessel, Thermal Safety of Chemical Processes, 2008, ch. 2 (areas from memory, check; use vessel data when known).
"""
_HOUR_S = 3600.0
_SMALL = 0.1
"""Accumulation above which a rate is no longer called controlled by the feed; a choice."""


def dosing_heat_rate(limiting_mol: float, heat_kj_per_mol: float, feed_h: float) -> float:
    """kW released while feeding evenly without accumulation, n (−ΔH)/tD."""
    return -heat_kj_per_mol * limiting_mol / (feed_h * _HOUR_S)


def sensible_heat_rate(fed_kg: float, cp_kj_per_kg_k: float, process_c: float, feed_c: float, feed_h: float) -> float:
    """kW that a feed colder than the mixture takes up, ṁ cp (Tp − Tfeed); negative for a hotter feed."""
    return fed_kg * cp_kj_per_kg_k * (process_c - feed_c) / (feed_h * _HOUR_S)


def jacket_capacity(u_w_per_m2_k: float, area_m2: float, difference_k: float) -> float:
    """kW through the jacket, U A ΔT."""
    return u_w_per_m2_k * area_m2 * difference_k / 1000


def shortest_feed(heat_kj: float, capacity_kw: float) -> float:
    """Hours in which ``heat_kj`` (positive, released) can be removed at a constant capacity."""
    return heat_kj / capacity_kw / _HOUR_S


def specific_cooling(u_w_per_m2_k: float, area_m2: float, mass_kg: float) -> float:
    """W/(kg K) that a vessel can remove, U A/m."""
    return u_w_per_m2_k * area_m2 / mass_kg


def time_constant(mass_kg: float, cp_kj_per_kg_k: float, u_w_per_m2_k: float, area_m2: float) -> float:
    """Thermal time constant in s, m cp/(U A)."""
    return mass_kg * cp_kj_per_kg_k * 1000 / (u_w_per_m2_k * area_m2)


def half_time(time_constant_s: float) -> float:
    """Seconds in which the difference to the jacket halves, τ ln 2."""
    return time_constant_s * math.log(2)


def evaporated_mass(mass_kg: float, cp_kj_per_kg_k: float, excess_k: float, latent_kj_per_kg: float) -> float:
    """kg evaporated when boiling at MTT stops a rise to MTSR, M cp (MTSR − MTT)/ΔHv; 0 below MTT."""
    return mass_kg * cp_kj_per_kg_k * max(0.0, excess_k) / latent_kj_per_kg


def vapour_rate(rate_w_per_kg: float, mass_kg: float, latent_kj_per_kg: float) -> float:
    """kg/h of vapour made by a heat rate at the boiling barrier, q m/ΔHv."""
    return rate_w_per_kg * mass_kg / 1000 / latent_kj_per_kg * _HOUR_S


def gas_volume(amount_mol: float, celsius: float, pressure_pa: float) -> float:
    """m³ of an ideal gas, n R T/p."""
    return amount_mol * R * (celsius + 273.15) / pressure_pa


@dataclass(frozen=True, slots=True)
class ScalePoint:
    """Specific cooling of a vessel of one size."""

    volume_m3: float
    area_m2: float
    u_w_per_m2_k: float
    per_kelvin: float
    """W/(kg K)."""
    at_difference: float
    """W/kg at the temperature difference asked for."""


def cooling_against_scale(
    u_w_per_m2_k: float, density_kg_per_m3: float = 1000.0, difference_k: float = 50.0
) -> tuple[ScalePoint, ...]:
    """Specific cooling of typical full vessels from 0.1 L to 10 m³."""
    found = []
    for volume, area in TYPICAL_VESSELS:
        each = specific_cooling(u_w_per_m2_k, area, volume * density_kg_per_m3)
        found.append(ScalePoint(volume, area, u_w_per_m2_k, each, each * difference_k))
    return tuple(found)


@dataclass(frozen=True, slots=True)
class Vessel:
    """Vessel and batch as typed, for one step in feed mode."""

    limiting_mol: float
    mass_kg: float
    """Final reaction mass."""
    heat_kj_per_mol: float
    """Per mole of limiting reactant charged; exothermic negative."""
    u_w_per_m2_k: float
    area_m2: float
    process_c: float
    jacket_c: float
    stirring_kw: float = 0.0
    fed_kg: float = 0.0
    """Mass fed; 0 when it is not stated, and its sensible heat is then left out."""
    feed_cp: float = 0.0
    """kJ/(kg K)."""
    feed_c: float = 0.0

    @property
    def capacity_kw(self) -> float:
        """U A (Tp − Tj)."""
        return jacket_capacity(self.u_w_per_m2_k, self.area_m2, self.process_c - self.jacket_c)

    @property
    def heat_kj(self) -> float:
        """Heat released by the whole charge, positive when exothermic."""
        return -self.heat_kj_per_mol * self.limiting_mol

    @property
    def feed_kj(self) -> float:
        """Heat that the whole feed takes up on its way to the process temperature."""
        return self.fed_kg * self.feed_cp * (self.process_c - self.feed_c)

    def load(self, feed_h: float) -> float:
        """Part of the jacket's capacity that a feed time needs: 1 is all of it."""
        released = (self.heat_kj - self.feed_kj) / (feed_h * _HOUR_S) + self.stirring_kw
        return released / self.capacity_kw

    def shortest(self, margin: float = 1.0) -> float | None:
        """Hours of the shortest feed within ``margin`` of the capacity; ``None`` when stirring alone needs it all."""
        left = margin * self.capacity_kw - self.stirring_kw
        return shortest_feed(max(0.0, self.heat_kj - self.feed_kj), left) if left > 0 else None


@dataclass(frozen=True, slots=True)
class FeedCheck:
    """Whether a vessel can remove the heat of a feed, if the reaction keeps up with it."""

    vessel: Vessel
    feed_h: float
    margin: float
    sensible: bool
    """True when the sensible heat of the feed is included."""

    @property
    def heat_rate_kw(self) -> float:
        """Released by the reaction while feeding."""
        return dosing_heat_rate(self.vessel.limiting_mol, self.vessel.heat_kj_per_mol, self.feed_h)

    @property
    def specific_heat_rate(self) -> float:
        """W per kg of final mass."""
        return self.heat_rate_kw * 1000 / self.vessel.mass_kg

    @property
    def sensible_kw(self) -> float:
        """Taken up by the feed."""
        return self.vessel.feed_kj / (self.feed_h * _HOUR_S)

    @property
    def load(self) -> float:
        """Part of the capacity needed; 1 is all of it."""
        return self.vessel.load(self.feed_h)

    @property
    def shortest_h(self) -> float | None:
        """Shortest feed at full capacity."""
        return self.vessel.shortest()

    @property
    def shortest_with_margin_h(self) -> float | None:
        """Shortest feed within the margin."""
        return self.vessel.shortest(self.margin)

    @property
    def verdict(self) -> str:
        """What the load means, in words."""
        if self.load > 1:
            if self.shortest_h is None:
                return "insufficient: stirring alone takes the whole capacity"
            return f"insufficient: extend feed to at least {number(rounded_up(self.shortest_h), 2)} h"
        if self.load > self.margin:
            wanted = self.shortest_with_margin_h
            tail = "stirring alone exceeds it" if wanted is None else f"it needs {number(rounded_up(wanted), 2)} h"
            return f"within the capacity, above the margin of {self.margin:g}: {tail}"
        return NOTHING_EXCEEDED

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "feed_h": self.feed_h,
            "margin": self.margin,
            "heat_rate_kw": self.heat_rate_kw,
            "specific_w_per_kg": self.specific_heat_rate,
            "sensible_kw": self.sensible_kw,
            "stirring_kw": self.vessel.stirring_kw,
            "capacity_kw": self.vessel.capacity_kw,
            "load": self.load,
            "shortest_h": self.shortest_h,
            "shortest_with_margin_h": self.shortest_with_margin_h,
            "verdict": self.verdict,
        }


def rounded_up(hours: float) -> float:
    """Hours rounded up to two decimals, so that the time printed is long enough; dust of floats aside."""
    return math.ceil(round(hours * 100, 6)) / 100


@dataclass(frozen=True, slots=True)
class Gas:
    """Gas evolved by a step."""

    per_mol: float
    """mol of gas per mole of limiting reactant charged."""
    origin: str
    """``from the equation`` or ``typed``."""
    celsius: float
    """°C at which volumes are stated."""
    pressure_pa: float
    limiting_mol: float | None
    """mol charged; ``None`` when the batch is not typed."""
    feed_h: float | None
    """Feed time; ``None`` when the step is not fed."""
    accumulated: float
    """Xac: a gas rate follows the feed only when this is small."""

    @property
    def per_hour(self) -> float | None:
        """mol/h while feeding; ``None`` when batch or feed time are not typed."""
        if self.limiting_mol is None or self.feed_h is None:
            return None
        return self.per_mol * self.limiting_mol / self.feed_h

    @property
    def volume_per_mol(self) -> float:
        """m³ per mole of limiting reactant."""
        return gas_volume(self.per_mol, self.celsius, self.pressure_pa)

    @property
    def volume_rate(self) -> float | None:
        """m³/h while feeding."""
        rate = self.per_hour
        return None if rate is None else gas_volume(rate, self.celsius, self.pressure_pa)

    @property
    def notes(self) -> tuple[str, ...]:
        """What limits the rate, and what does not."""
        found = []
        if self.per_mol and self.feed_h is None:
            found.append("gas: the rate is not limited by a feed")
        elif self.per_mol and self.accumulated > _SMALL:
            found.append(f"gas: the feed limits the rate only while little accumulates (Xac {self.accumulated:.2g})")
        if self.origin != "typed":
            found.append(
                "gas counts the gaseous products of the equation; dissolved gas and side reactions are not assessed"
            )
        return tuple(found)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "per_mol": self.per_mol,
            "origin": self.origin,
            "celsius": self.celsius,
            "pressure_pa": self.pressure_pa,
            "mol_per_h": self.per_hour,
            "m3_per_mol": self.volume_per_mol,
            "m3_per_h": self.volume_rate,
            "notes": list(self.notes),
        }


@dataclass(frozen=True, slots=True)
class Boiling:
    """Boiling at MTT as a barrier to a rise beyond it."""

    evaporated_kg: float
    """kg evaporated between MTT and MTSR; of the whole batch, or per kg of mixture when the batch is not typed."""
    per_kg: bool
    vapour_kg_per_h: float | None
    """Vapour made by the decomposition at MTT; ``None`` when its heat rate is not typed."""

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {"evaporated_kg": self.evaporated_kg, "per_kg": self.per_kg, "vapour_kg_per_h": self.vapour_kg_per_h}

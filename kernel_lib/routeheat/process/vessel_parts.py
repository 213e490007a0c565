"""The parts of a step in the vessel: its basis, its heat, its limits, its feed, as values or refusals."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Route
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.process import runaway
from routeheat.process.accumulation import Accumulation
from routeheat.process.assessed import NotAssessed, Value, from_heat, from_measured, propagate
from routeheat.process.charges import Charges
from routeheat.process.feed import (
    Boiling,
    FeedCheck,
    Gas,
    Vessel,
    evaporated_mass,
    time_constant,
    vapour_rate,
)
from routeheat.process.heats import molar_heat
from routeheat.process.levels import Thresholds
from routeheat.process.limits import ATMOSPHERE_PA, HeatRate, Limit
from routeheat.process.linking import read_links
from routeheat.process.links import charge, reactants
from routeheat.process.profile import StepHeat
from routeheat.process.settings import AREA, HEAT_TRANSFER, HOURS, KILOWATT, PASCAL, Settings
from routeheat.units import KELVIN, KILOGRAM, KJ_PER_KG, KJ_PER_KG_K, MOL_PER_KG, PURE

Mode = Literal["batch", "feed", "not stated"]
GAS_CELSIUS = 20.0
"""Temperature in °C at which gas volumes are stated unless ``gasT`` is typed; a choice."""


@dataclass(frozen=True, slots=True)
class Basis:
    """What a step is read with."""

    step: Step
    limiting: Species
    molar: HeatSum | None
    origin: str
    k: float
    notices: tuple[str, ...] = ()


def basis_of(step: Step | StepHeat, route: Route | None) -> Basis:
    """Limiting reactant and molar heat of a step: from a profile, from its route, or from itself alone."""
    if isinstance(step, StepHeat):
        return Basis(step.step, step.limiting, step.molar, step.origin, step.cumulative.k)
    if route is not None:
        links = read_links(route)
        if step.label not in links.limiting:
            raise (
                links.faults[0]
                if links.faults
                else RouteError(f"{step.label} is no step of route {route.name}", route.name, step.label)
            )
        molar = molar_heat(step, route.known, route.k)
        return Basis(step, links.limiting[step.label], molar.heat, molar.origin, route.k)
    uses = reactants(step)
    if not uses:
        raise RouteError(f"{step.label}: nothing is used up, so the step has no limiting reactant", step=step.label)
    limiting = step.limiting or uses[0]
    notices = () if step.limiting or len(uses) == 1 else (f"limiting reactant not stated: {limiting} is taken",)
    molar = molar_heat(step, {}, 2.0)
    return Basis(step, limiting, molar.heat, molar.origin, 2.0, notices)


def heat_of(basis: Basis) -> Value | NotAssessed:
    """kJ per mole of limiting reactant charged."""
    if basis.molar is None:
        return NotAssessed("heat not entered", ("dH",))
    if basis.molar.unknowns:
        return NotAssessed("heat not a number", reason=f"{', '.join(basis.molar.unknowns)} unknown")
    return from_heat(basis.molar.scaled(1 / charge(basis.step, basis.limiting)))


def stated(value: Value | None, name: str) -> Value | NotAssessed:
    """The value, or a refusal that names what is missing."""
    return NotAssessed("not stated", (name,)) if value is None else value


def concentration_of(step: Step, charged: Charges) -> Value | NotAssessed:
    """mol of limiting reactant per kg of mixture: typed, or from everything charged."""
    if step.concentration is not None:
        return from_measured(step.concentration, MOL_PER_KG)
    found = charged.concentration
    if found is not None:
        return Value(found)
    return NotAssessed("not stated", ("conc",), "; ".join(charged.missing))


def rise_of(
    settings: Settings, heat: Value | NotAssessed, concentration: Value | NotAssessed, cp: Value | NotAssessed
) -> Value | NotAssessed:
    """ΔTad in K: typed, or from heat, concentration and heat capacity."""
    measured = settings.value("dTad", KELVIN)
    if measured is not None:
        return measured
    named = (("dH", heat), ("conc", concentration), ("cp", cp))
    values = [item for _, item in named if isinstance(item, Value)]
    if len(values) < len(named):
        return NotAssessed("no adiabatic rise", tuple(name for name, item in named if isinstance(item, NotAssessed)))
    if values[2].value <= 0:
        return NotAssessed("no adiabatic rise", reason="cp must be positive")
    return propagate(runaway.adiabatic_rise, values)


def specific_heat_of(
    heat: Value | NotAssessed, concentration: Value | NotAssessed, rise: Value | NotAssessed, cp: Value | NotAssessed
) -> Value | NotAssessed:
    """kJ per kg of mixture: from heat and concentration, or back from a typed rise."""
    if isinstance(heat, Value) and isinstance(concentration, Value):
        return propagate(lambda h, c: h * c, (heat, concentration))
    if isinstance(rise, Value) and isinstance(cp, Value):
        return propagate(lambda dt, c: -dt * c, (rise, cp))
    named = (("dH", heat), ("conc", concentration))
    return NotAssessed("no heat per kilogram", tuple(name for name, item in named if isinstance(item, NotAssessed)))


def mtsr_of(
    settings: Settings, process: Value | NotAssessed, rise: Value | NotAssessed, found: Accumulation
) -> Value | NotAssessed:
    """MTSR in °C: typed, or with the accumulation at the worst instant."""
    measured = settings.celsius("MTSR")
    if measured is not None:
        return measured
    if isinstance(process, Value) and isinstance(rise, Value):
        ratio = found.mass_ratio
        return propagate(lambda t, dt, x: runaway.mtsr(t, dt, x, ratio), (process, rise, found.fraction))
    return _no_mtsr(process, rise)


def misfeed_of(process: Value | NotAssessed, rise: Value | NotAssessed) -> Value | NotAssessed:
    """MTSR in °C with everything charged at once."""
    if isinstance(process, Value) and isinstance(rise, Value):
        return propagate(lambda t, dt: runaway.mtsr(t, dt, 1.0), (process, rise))
    return _no_mtsr(process, rise)


def _no_mtsr(process: Value | NotAssessed, rise: Value | NotAssessed) -> NotAssessed:
    missing = (
        *(item for item in ("T",) if isinstance(process, NotAssessed)),
        *(rise.missing if isinstance(rise, NotAssessed) else ()),
    )
    return NotAssessed("no MTSR", missing, rise.reason if isinstance(rise, NotAssessed) else "")


def mass_of(settings: Settings, limiting_mol: float | None, concentration: Value | NotAssessed) -> float | None:
    """kg of final reaction mass: typed, or from the amount and the concentration."""
    typed = settings.value("mass", KILOGRAM)
    if typed is not None:
        return typed.value
    if limiting_mol is not None and isinstance(concentration, Value) and concentration.value > 0:
        return limiting_mol / concentration.value
    return None


def gas_per_mol(step: Step, limiting: Species) -> tuple[float, str]:
    """mol of gas evolved per mole of limiting reactant charged: typed, else the gaseous products of the equation."""
    typed = Settings(step.row.settings).value("gas", PURE)
    if typed is not None:
        return typed.value, "typed"
    made = sum((nu for species, nu in step.row.reaction.net.items() if nu > 0 and species.phase == "g"), Fraction(0))
    return float(made / charge(step, limiting)), "from the equation"


def gas_of(basis: Basis, settings: Settings, limiting_mol: float | None, found: Accumulation) -> Gas:
    """Gas evolved, with its rate while feeding."""
    per_mol, origin = gas_per_mol(basis.step, basis.limiting)
    feed = settings.value("feed", HOURS)
    place = settings.celsius("gasT")
    return Gas(
        per_mol,
        origin,
        GAS_CELSIUS if place is None else place.value,
        settings.number("gasp", PASCAL, ATMOSPHERE_PA),
        limiting_mol,
        None if feed is None or settings.flag("batch") or feed.value <= 0 else feed.value,
        found.fraction.value,
    )


def feed_check(
    settings: Settings,
    mode: Mode,
    heat: Value | NotAssessed,
    process: Value | NotAssessed,
    limiting_mol: float | None,
    mass: float | None,
    thresholds: Thresholds,
) -> FeedCheck | NotAssessed:
    """Heat rate of a feed against the jacket, or what is missing for it."""
    what = "feed and cooling not checked"
    if mode != "feed":
        return NotAssessed(what, reason=f"the mode is {mode}: only a feed can be slowed down to what a jacket removes")
    hours, u = settings.value("feed", HOURS), settings.value("U", HEAT_TRANSFER)
    area, jacket = settings.value("area", AREA), settings.celsius("jacket")
    if (
        hours is None
        or u is None
        or area is None
        or jacket is None
        or limiting_mol is None
        or mass is None
        or isinstance(heat, NotAssessed)
        or isinstance(process, NotAssessed)
    ):
        amount = limiting_mol if limiting_mol is not None else mass
        named: Mapping[str, object] = {
            "dH": None if isinstance(heat, NotAssessed) else heat,
            "T": None if isinstance(process, NotAssessed) else process,
            "size or mass": amount,
            "conc": 0.0 if amount is None or None not in (limiting_mol, mass) else None,
            "U": u,
            "area": area,
            "jacket": jacket,
        }
        return NotAssessed(what, tuple(name for name, item in named.items() if item is None))
    if min(hours.value, u.value, area.value, limiting_mol, mass) <= 0:
        return NotAssessed(what, reason="feed time, amounts, U and area must be positive")
    if jacket.value >= process.value:
        return NotAssessed(what, reason="the jacket is not colder than the mixture")
    cold, cp = settings.celsius("feedT"), settings.value("feedcp", KJ_PER_KG_K)
    part = settings.value("fedpart", PURE)
    sensible = cold is not None and cp is not None and part is not None
    built = Vessel(
        limiting_mol,
        mass,
        heat.value,
        u.value,
        area.value,
        process.value,
        jacket.value,
        settings.number("stirring", KILOWATT, 0.0),
        mass * part.value if part is not None and sensible else 0.0,
        cp.value if cp is not None and sensible else 0.0,
        cold.value if cold is not None and sensible else 0.0,
    )
    return FeedCheck(built, hours.value, settings.number("margin", PURE, thresholds.margin), sensible)


def boiling_of(
    settings: Settings,
    mtsr: Value | NotAssessed,
    limit: Limit | NotAssessed,
    cp: Value | None,
    decomposition: HeatRate | NotAssessed,
    mass: float | None,
) -> Boiling | NotAssessed:
    """Evaporation between MTT and MTSR in an open vessel."""
    what = "evaporation not assessed"
    latent = settings.value("latent", KJ_PER_KG)
    if isinstance(mtsr, NotAssessed) or isinstance(limit, NotAssessed) or cp is None or latent is None:
        named = (("MTSR", mtsr), ("MTT", limit), ("cp", cp), ("latent", latent))
        return NotAssessed(what, tuple(name for name, item in named if item is None or isinstance(item, NotAssessed)))
    if settings.flag("closed"):
        return NotAssessed(what, reason="a closed vessel does not boil off")
    if latent.value <= 0:
        return NotAssessed(what, reason="the latent heat must be positive")
    barrier = limit.celsius.value
    evaporated = evaporated_mass(mass or 1.0, cp.value, mtsr.value - barrier, latent.value)
    vapour = None
    if isinstance(decomposition, HeatRate) and mass is not None:
        vapour = vapour_rate(decomposition.at(barrier), mass, latent.value)
    return Boiling(evaporated, mass is None, vapour)


def time_constant_of(settings: Settings, mass: float | None, cp: Value | None) -> float | None:
    """Thermal time constant in s of the vessel typed; ``None`` when something is missing."""
    u, area = settings.value("U", HEAT_TRANSFER), settings.value("area", AREA)
    if u is None or area is None or mass is None or cp is None or u.value <= 0 or area.value <= 0:
        return None
    return time_constant(mass, cp.value, u.value, area.value)


def exothermic_energy(value: Value | None) -> Value | None:
    """A decomposition energy typed as a number of its own is exothermic, whichever sign it is typed with."""
    return None if value is None else Value(-abs(value.value), value.u, value.at_least)


def provisional_of(
    basis: Basis, settings: Settings, limit: Limit | NotAssessed, stability: Limit | NotAssessed
) -> tuple[str, ...]:
    """What is estimated, so that a class built on it is provisional."""
    found = [part.strip() for part in settings.text("estimated").split(",") if part.strip()]
    if basis.molar is not None and basis.molar.estimated:
        found = [name for name in found if name != "dH"] + [f"dH ({', '.join(basis.molar.estimated)} estimated)"]
    if basis.origin.startswith("derived"):
        found.append("dH (derived, pure components)")
    for name, item in (("MTT", limit), ("TD24", stability)):
        if isinstance(item, Limit) and item.provisional:
            found.append(f"{name} ({item.origin})")
    return tuple(dict.fromkeys(found))


def faults_of(settings: Settings, concentration: Value | NotAssessed, cp: Value | NotAssessed) -> tuple[str, ...]:
    """Inputs that contradict themselves or cannot be."""
    found = []
    if settings.flag("batch") and "feed" in settings:
        found.append("batch and feed are both typed: which one?")
    if isinstance(concentration, Value) and concentration.value <= 0:
        found.append("conc must be positive")
    if isinstance(cp, Value) and cp.value <= 0:
        found.append("cp must be positive")
    margin = settings.value("margin", PURE)
    if margin is not None and not 0 < margin.value <= 1:
        found.append("the margin is a part of the capacity, above 0 and up to 1")
    return tuple(found)


def notices_of(basis: Basis, settings: Settings, charged: Charges, found: Accumulation) -> tuple[str, ...]:
    """How the step was read where it leaves something open."""
    notices = [*basis.notices, *found.notices]
    if basis.step.side_of:
        notices.append(f"a side row of {basis.step.side_of}: its heat is no part of that reactor's duty")
    if basis.step.concentration is None and charged.concentration is not None:
        notices.append("conc follows from the charges")
    if basis.step.concentration is not None and charged.concentration is not None:
        typed = float(basis.step.concentration.to(MOL_PER_KG))
        if typed > 0 and abs(charged.concentration / typed - 1) > 0.05:
            notices.append(f"conc {typed:.3g} mol/kg is typed, the charges give {charged.concentration:.3g}")
    for key, other in (("MTSR", "T + Xac ΔTad"), ("dTad", "dH, conc and cp")):
        if key in settings:
            notices.append(f"{key} as typed, not from {other}")
    return tuple(notices)

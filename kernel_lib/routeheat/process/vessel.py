"""What a step would do in the vessel: heat per kilogram, adiabatic rise, accumulation, limits, feed, cooling, gas."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.present.curve import Curve
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.process import load_curve, vessel_views
from routeheat.process.accumulation import Accumulation, accumulation
from routeheat.process.assessed import NotAssessed, Value, from_measured
from routeheat.process.charges import charges
from routeheat.process.feed import Boiling, FeedCheck, Gas, ScalePoint, cooling_against_scale
from routeheat.process.levels import DEFAULTS, Thresholds
from routeheat.process.limits import HeatRate, Limit, amount_charged, heat_rate, mtt, td24
from routeheat.process.profile import StepHeat
from routeheat.process.settings import DENSITY, HEAT_TRANSFER, Settings
from routeheat.process.vessel_parts import (
    Mode,
    basis_of,
    boiling_of,
    concentration_of,
    exothermic_energy,
    faults_of,
    feed_check,
    gas_of,
    heat_of,
    mass_of,
    misfeed_of,
    mtsr_of,
    notices_of,
    provisional_of,
    rise_of,
    specific_heat_of,
    stated,
    time_constant_of,
)
from routeheat.units import CELSIUS, KJ_PER_KG, KJ_PER_KG_K, KJ_PER_MOL


@dataclass(frozen=True, slots=True)
class VesselStep(Shown):
    """One step in the vessel, per mole of limiting reactant charged and per kilogram of reaction mass."""

    label: str
    reaction: Reaction
    limiting: Species
    mode: Mode
    k: float
    """Coverage factor of every printed uncertainty."""
    heat: Value | NotAssessed
    """kJ per mole of limiting reactant charged; exothermic negative."""
    heat_origin: str
    """``typed``, ``derived from known rows; …`` or ``not entered: …``."""
    concentration: Value | NotAssessed
    """mol of limiting reactant per kg of mixture."""
    heat_capacity: Value | NotAssessed
    """kJ/(kg K) of the mixture."""
    specific_heat: Value | NotAssessed
    """kJ per kg of reaction mass; exothermic negative."""
    rise: Value | NotAssessed
    """ΔTad in K; positive when exothermic."""
    accumulation: Accumulation
    process: Value | NotAssessed
    """Tp in °C."""
    mtsr: Value | NotAssessed
    """°C, with the accumulation at the worst instant."""
    misfeed_mtsr: Value | NotAssessed
    """°C, everything charged at once."""
    mtt: Limit | NotAssessed
    td24: Limit | NotAssessed
    heat_rate: HeatRate | NotAssessed
    """Heat rate of the decomposition, for TMRad."""
    activation: Value | None
    """Activation energy of the decomposition in kJ/mol as typed; ``None`` also where it is autocatalytic."""
    ambient: float | None
    """°C as typed; ``None`` leaves the default."""
    gas: Gas
    feed: FeedCheck | NotAssessed
    boiling: Boiling | NotAssessed
    scale: tuple[ScalePoint, ...]
    """Specific cooling of typical vessels with the U typed, else with 300 W/(m² K)."""
    u_typed: bool
    """False when :attr:`scale` rests on the assumed U."""
    time_constant_s: float | None
    """m cp/(U A) of the vessel typed."""
    decomposition: Value | None
    """Decomposition energy of the mixture in kJ/kg as typed behind ``Qdec``; exothermic negative."""
    limiting_mol: float | None
    """mol of limiting reactant in the vessel; ``None`` when the batch is not typed."""
    side_of: str
    """Label of the parent of a side row, whose duty this is not part of; empty for a step."""
    provisional: tuple[str, ...]
    """What is estimated; a class built on it is provisional."""
    faults: tuple[str, ...]
    """Inputs that contradict themselves."""
    notices: tuple[str, ...]
    thresholds: Thresholds

    @property
    def exothermic(self) -> bool | None:
        """Whether the step releases heat; ``None`` when that is not known."""
        if isinstance(self.rise, Value):
            return self.rise.value >= 0
        return None if isinstance(self.heat, NotAssessed) else self.heat.value <= 0

    @property
    def sign_open(self) -> bool:
        """True when the stated uncertainty of the heat leaves its sign open (less than twice u from zero)."""
        return isinstance(self.heat, Value) and self.heat.spread > 0 and abs(self.heat.value) < 2 * self.heat.spread

    def tables(self) -> tuple[Table, ...]:
        """The step, and cooling against scale."""
        return (self.table(), vessel_views.scale_table(self))

    def table(self) -> Table:
        """Every quantity with its unit and where it comes from."""
        return vessel_views.table(self)

    def curve(self) -> Curve:
        """Load of the jacket against feed time, with its capacity; in words why there is none."""
        return load_curve.load_curve(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return vessel_views.to_dict(self)


def vessel(step: Step | StepHeat, *, route: Route | None = None, thresholds: Thresholds = DEFAULTS) -> VesselStep:
    """What a step would do in the vessel.

    A step of a profile, or a step with its ``route``, has the limiting reactant and the derived heat of the route; a
    step alone takes its first reactant where none is typed. Heat is per mole of limiting reactant charged.
    Raises :class:`~routeheat.errors.RouteError` when the step or its charges cannot be read and
    :class:`~routeheat.errors.UnitError` when a key holds another kind of quantity.
    """
    basis = basis_of(step, route)
    settings = Settings(basis.step.row.settings)
    charged = charges(basis.step, settings, basis.limiting)
    heat = heat_of(basis)
    concentration = concentration_of(basis.step, charged)
    heat_capacity = stated(
        None if basis.step.heat_capacity is None else from_measured(basis.step.heat_capacity, KJ_PER_KG_K), "cp"
    )
    process = stated(None if basis.step.temperature is None else from_measured(basis.step.temperature, CELSIUS), "T")
    rise = rise_of(settings, heat, concentration, heat_capacity)
    found = accumulation(basis.step, settings, basis.limiting)
    limiting_mol = amount_charged(settings, concentration if isinstance(concentration, Value) else None)
    gas = gas_of(basis, settings, limiting_mol, found)
    decomposition = heat_rate(settings)
    limit = mtt(settings, limiting_mol, gas.per_mol)
    mtsr = mtsr_of(settings, process, rise, found)
    typed_mode: Mode = "batch" if settings.flag("batch") else "feed" if "feed" in settings else "not stated"
    cp = heat_capacity if isinstance(heat_capacity, Value) else None
    stability = td24(settings, cp)
    mass = mass_of(settings, limiting_mol, concentration)
    return VesselStep(
        label=basis.step.label,
        reaction=basis.step.row.reaction,
        limiting=basis.limiting,
        mode=typed_mode,
        k=basis.k,
        heat=heat,
        heat_origin=basis.origin,
        concentration=concentration,
        heat_capacity=heat_capacity,
        specific_heat=specific_heat_of(heat, concentration, rise, heat_capacity),
        rise=rise,
        accumulation=found,
        process=process,
        mtsr=mtsr,
        misfeed_mtsr=misfeed_of(process, rise),
        mtt=limit,
        td24=stability,
        heat_rate=decomposition,
        activation=None if settings.flag("autocatalytic") else settings.value("E", KJ_PER_MOL),
        ambient=None if (typed := settings.celsius("ambient")) is None else typed.value,
        gas=gas,
        feed=feed_check(settings, typed_mode, heat, process, limiting_mol, mass, thresholds),
        boiling=boiling_of(settings, mtsr, limit, cp, decomposition, mass),
        scale=cooling_against_scale(
            settings.number("U", HEAT_TRANSFER, 300.0), settings.number("density", DENSITY, 1000.0)
        ),
        u_typed="U" in settings,
        time_constant_s=time_constant_of(settings, mass, cp),
        decomposition=exothermic_energy(settings.value("Qdec", KJ_PER_KG)),
        limiting_mol=limiting_mol,
        side_of=basis.step.side_of,
        provisional=provisional_of(basis, settings, limit, stability),
        faults=(*faults_of(settings, concentration, heat_capacity), *found.faults),
        notices=notices_of(basis, settings, charged, found),
        thresholds=thresholds,
    )

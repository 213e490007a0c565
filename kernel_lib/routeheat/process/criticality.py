"""Criticality of a step: its class as run and with everything charged at once, or the reason why there is none."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from routeheat.chem.route import Route
from routeheat.chem.step import Step
from routeheat.present.numbers import number
from routeheat.present.show import Shown
from routeheat.present.strip import Strip
from routeheat.present.table import Table
from routeheat.process import criticality_views, runaway, strips
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.cautions import AMBIENT, STOP
from routeheat.process.classes import (
    AMBIENT_C,
    NOT_CLASSIFIABLE,
    Normal,
    class_probabilities,
    classify,
    decomposition_probability,
)
from routeheat.process.criticality_views import Mark
from routeheat.process.levels import DEFAULTS, PROBABILITY_3, Level, Thresholds, probability, severity
from routeheat.process.limits import ZERO_C, HeatRate, Limit
from routeheat.process.profile import StepHeat
from routeheat.process.vessel import VesselStep, vessel

ENDOTHERMIC = NotAssessed("none", reason="endothermic: no MTSR class; gas and loss of heating are listed instead")
AS_RUN = "cooling failure, as run"
MISFEED = "everything charged at once"
_DAY_H = 24.0


@dataclass(frozen=True, slots=True)
class Reachable:
    """A class, or classes that cannot be told apart because MTT is missing."""

    classes: tuple[int, ...]
    """Worst first; more than one only without MTT."""
    probability: float
    """From the propagated distributions; 1 when nothing is uncertain."""

    @property
    def text(self) -> str:
        """``3``, or ``1, 2 or 3``."""
        numbers = [str(item) for item in sorted(self.classes)]
        return numbers[0] if len(numbers) == 1 else f"{', '.join(numbers[:-1])} or {numbers[-1]}"


@dataclass(frozen=True, slots=True)
class Scenario:
    """One way in which cooling fails, with the classes it can reach."""

    name: str
    mtsr: Value | NotAssessed
    """°C."""
    temperature: float | None
    """Scenario temperature max(MTSR, ambient) in °C; ``None`` without MTSR."""
    at_values: tuple[int, ...] | NotAssessed
    """Class at the typed values; several without MTT; a refusal where there is none."""
    reachable: tuple[Reachable, ...]
    """Every class at or above the least probability, worst first; empty with a refusal."""
    probabilities: Mapping[int, float] | None
    """Probability of all five classes; ``None`` with a refusal, without MTT, or where nothing is uncertain."""
    provisional: bool

    @property
    def worst(self) -> int | None:
        """The worst reachable class; ``None`` with a refusal."""
        return max((c for item in self.reachable for c in item.classes), default=None)

    @property
    def words(self) -> str:
        """``class 2``, ``classes 5 (9 %), 3 (65 %)``, or the refusal."""
        if isinstance(self.at_values, NotAssessed):
            return self.at_values.text
        head = "provisional: " if self.provisional else ""
        tail = " (MTT missing)" if len(self.at_values) > 1 else ""
        if len(self.reachable) == 1:
            plural = "es" if len(self.reachable[0].classes) > 1 else ""
            return f"{head}class{plural} {self.reachable[0].text}{tail}"
        listed = ", ".join(f"{item.text} ({number(100 * item.probability, 0)} %)" for item in self.reachable)
        return f"{head}classes {listed}{tail}"

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        refused = isinstance(self.at_values, NotAssessed)
        return {
            "name": self.name,
            "mtsr": self.mtsr.to_dict(),
            "temperature": self.temperature,
            "class_at_values": None if isinstance(self.at_values, NotAssessed) else list(self.at_values),
            "reachable": [{"classes": list(r.classes), "probability": r.probability} for r in self.reachable],
            "probabilities": None if self.probabilities is None else {str(c): p for c, p in self.probabilities.items()},
            "words": self.words,
            "refused": refused,
        }


@dataclass(frozen=True, slots=True)
class Criticality(Shown):
    """The criticality of one step."""

    step: VesselStep
    ambient: float
    """°C."""
    as_run: Scenario
    misfeed: Scenario
    stop: bool
    """TD24 at or below the process temperature: above any class."""
    severity: tuple[Level, ...] | NotAssessed
    """On 3 and on 4 levels."""
    probability: tuple[Level, ...] | NotAssessed
    """On 3 and, where TMRad is known, on 6 levels; at the scenario temperature as run."""
    tmrad_h: float | None
    """TMRad at the scenario temperature in h, zero order; ``None`` without E."""
    tmrad_integral_h: float | None
    """The same by the integral; ``None`` without a heat rate, or where the formula does not apply."""
    notices: tuple[str, ...]

    @property
    def label(self) -> str:
        """Label of the step."""
        return self.step.label

    @property
    def words(self) -> str:
        """The verdict in words, the stop notice before any class."""
        return f"{STOP}; {self.as_run.words}" if self.stop else self.as_run.words

    def marks(self) -> tuple[Mark, ...]:
        """The dots of a strip on one temperature axis, coldest first."""
        return criticality_views.marks(self)

    def strip(self) -> Strip:
        """The cooling-failure scenario as dots on one temperature axis, limits in words."""
        return strips.strip(self)

    def table(self) -> Table:
        """Both scenarios with their temperatures and classes."""
        return criticality_views.table(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return criticality_views.to_dict(self)


def criticality(
    step: Step | StepHeat | VesselStep, *, route: Route | None = None, thresholds: Thresholds = DEFAULTS
) -> Criticality:
    """The criticality class of a step as run and with everything charged at once, with levels and notices.

    Takes what :func:`routeheat.process.vessel.vessel` takes, or its result (whose thresholds then hold).
    """
    found = step if isinstance(step, VesselStep) else vessel(step, route=route, thresholds=thresholds)
    ambient = AMBIENT_C if found.ambient is None else found.ambient
    as_run = _scenario(AS_RUN, found, found.mtsr, ambient)
    misfeed = _scenario(MISFEED, found, found.misfeed_mtsr, ambient)
    limit = found.td24.celsius.value if isinstance(found.td24, Limit) else None
    stop = limit is not None and isinstance(found.process, Value) and limit <= found.process.value
    notices = [AMBIENT] if limit is not None and limit <= ambient else []
    hours, exact = _tmrad(found, as_run.temperature)
    return Criticality(
        found,
        ambient,
        as_run,
        misfeed,
        stop,
        _severity(found),
        _probability(found, as_run.temperature, hours),
        hours,
        exact,
        tuple(notices),
    )


def _scenario(name: str, found: VesselStep, mtsr: Value | NotAssessed, ambient: float) -> Scenario:
    temperature = max(mtsr.value, ambient) if isinstance(mtsr, Value) else None
    at_values = _at_values(found, mtsr, ambient)
    provisional = bool(found.provisional)
    if isinstance(at_values, NotAssessed):
        return Scenario(name, mtsr, temperature, at_values, (), None, provisional)
    assert isinstance(mtsr, Value)
    assert isinstance(found.td24, Limit)
    limit = found.td24.celsius
    boiling = found.mtt.celsius if isinstance(found.mtt, Limit) else None
    if not (mtsr.spread or limit.spread or (boiling is not None and boiling.spread)):
        return Scenario(name, mtsr, temperature, at_values, (Reachable(at_values, 1.0),), None, provisional)
    hot, breaks = Normal(mtsr.value, mtsr.spread), Normal(limit.value, limit.spread)
    least = found.thresholds.reachable
    if boiling is None:
        part = decomposition_probability(hot, breaks, ambient)
        sets = (Reachable((5, 4), part), Reachable((3, 2, 1), 1 - part))
        return Scenario(name, mtsr, temperature, at_values, _at_least(sets, least), None, provisional)
    chances = class_probabilities(hot, Normal(boiling.value, boiling.spread), breaks, ambient)
    single = tuple(Reachable((c,), chances[c]) for c in sorted(chances, reverse=True))
    return Scenario(name, mtsr, temperature, at_values, _at_least(single, least), chances, provisional)


def _at_least(sets: tuple[Reachable, ...], least: float) -> tuple[Reachable, ...]:
    return tuple(item for item in sets if item.probability >= least)


def _at_values(found: VesselStep, mtsr: Value | NotAssessed, ambient: float) -> tuple[int, ...] | NotAssessed:
    if found.faults:
        return NotAssessed(NOT_CLASSIFIABLE, reason=f"inconsistent input: {'; '.join(found.faults)}")
    if found.exothermic is False:
        return ENDOTHERMIC
    refusals = [item for item in (found.process, mtsr, found.td24) if isinstance(item, NotAssessed)]
    if refusals:
        missing = tuple(dict.fromkeys(name for item in refusals for name in item.missing))
        reasons = "; ".join(dict.fromkeys(item.reason for item in refusals if item.reason))
        return NotAssessed(NOT_CLASSIFIABLE, missing, reasons)
    assert isinstance(found.process, Value)
    assert isinstance(mtsr, Value)
    assert isinstance(found.td24, Limit)
    limit = found.mtt.celsius.value if isinstance(found.mtt, Limit) else None
    return classify(found.process.value, mtsr.value, limit, found.td24.celsius.value, ambient_c=ambient)


def _severity(found: VesselStep) -> tuple[Level, ...] | NotAssessed:
    if isinstance(found.rise, NotAssessed):
        return NotAssessed("severity not assessed", found.rise.missing, found.rise.reason)
    if found.exothermic is False:
        return NotAssessed("severity not assessed", reason="endothermic")
    gas = found.gas.per_mol > 0
    return tuple(severity(found.rise.value, gas=gas, levels=n, thresholds=found.thresholds) for n in (3, 4))


def _tmrad(found: VesselStep, temperature: float | None) -> tuple[float | None, float | None]:
    """TMRad in h at the scenario temperature: from the heat rate, else from TD24 and E; and by the integral."""
    if temperature is None:
        return None, None
    kelvin = temperature + ZERO_C
    if isinstance(found.heat_rate, HeatRate) and isinstance(found.heat_capacity, Value):
        rate, energy = found.heat_rate.at(temperature), found.heat_rate.energy.value * 1000
        cp = found.heat_capacity.value * 1000
        exact = None
        if kelvin < energy / (2 * runaway.R):
            exact = runaway.tmrad_integral(kelvin, rate, cp, energy) / 3600
        return runaway.tmrad(kelvin, rate, cp, energy) / 3600, exact
    if isinstance(found.td24, Limit) and found.activation is not None and found.activation.value > 0:
        limit = found.td24.celsius.value + ZERO_C
        return runaway.tmrad_from_td24(kelvin, limit, found.activation.value * 1000) / 3600, None
    return None, None


def _probability(found: VesselStep, temperature: float | None, hours: float | None) -> tuple[Level, ...] | NotAssessed:
    what = "probability not assessed"
    if found.exothermic is False:
        return NotAssessed(what, reason="endothermic")
    if hours is not None:
        return tuple(probability(hours, levels=n, thresholds=found.thresholds) for n in (3, 6))
    if temperature is None or not isinstance(found.td24, Limit):
        return NotAssessed(what, ("TD24",) if isinstance(found.td24, NotAssessed) else ("MTSR",))
    if found.thresholds.probability_3[0] != _DAY_H:
        return NotAssessed(what, ("E",))
    longer = temperature < found.td24.celsius.value
    return (Level("probability, 3 levels", PROBABILITY_3[0] if longer else f"at least {PROBABILITY_3[1]}"),)

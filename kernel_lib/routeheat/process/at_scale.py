"""Routes to one species compared by what their steps would do in the vessel. No overall score."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any

from routeheat.chem.route import Route
from routeheat.present.show import Shown
from routeheat.present.strip import Group, Strip
from routeheat.present.table import Table
from routeheat.process import at_scale_views, strips
from routeheat.process.assessed import NotAssessed, Value, propagate
from routeheat.process.cautions import NOTHING_EXCEEDED, STOP
from routeheat.process.checklist import Checklist, checklist, may_rank
from routeheat.process.compare import Comparison, compare_routes
from routeheat.process.criticality import ENDOTHERMIC, Criticality, Scenario, criticality
from routeheat.process.feed import FeedCheck
from routeheat.process.gas import gas_per_product
from routeheat.process.levels import DEFAULTS, Thresholds
from routeheat.process.limits import Limit
from routeheat.process.profile import Profile, StepHeat
from routeheat.process.vessel import VesselStep, vessel
from routeheat.process.waste import Count, Waste, waste


@dataclass(frozen=True, slots=True)
class StepAtScale:
    """One step of a route in the vessel."""

    heat: StepHeat
    vessel: VesselStep
    criticality: Criticality

    @property
    def label(self) -> str:
        """Label of the step."""
        return self.heat.label

    @property
    def margin(self) -> Value | NotAssessed:
        """TD24 minus the scenario temperature (MTSR, or ambient where that is higher) in K."""
        mtsr, limit = self.vessel.mtsr, self.vessel.td24
        missing = [name for name, item in (("MTSR", mtsr), ("TD24", limit)) if isinstance(item, NotAssessed)]
        if isinstance(mtsr, NotAssessed) or isinstance(limit, NotAssessed):
            return NotAssessed("no margin", tuple(missing))
        if self.vessel.exothermic is False:
            return NotAssessed("no margin", reason="endothermic")
        ambient = self.criticality.ambient
        return propagate(lambda td24, hot: td24 - max(hot, ambient), (limit.celsius, mtsr))

    @property
    def exceeded(self) -> tuple[str, ...]:
        """Criteria that are, or may be, exceeded on the data entered."""
        found = [STOP] if self.criticality.stop else []
        found += self.criticality.notices
        found += _reached("MTSR", self.criticality.as_run)
        found += _reached("everything charged at once", self.criticality.misfeed)
        check = self.vessel.feed
        if isinstance(check, FeedCheck) and check.load > check.margin:
            found.append(check.verdict)
        return tuple(found)

    @property
    def open_questions(self) -> tuple[str, ...]:
        """What is missing, contradictory, estimated or without a stated uncertainty."""
        step, refused = self.vessel, self.criticality.as_run.at_values
        missing = list(refused.missing) if isinstance(refused, NotAssessed) else []
        limits = (("MTT", step.mtt), ("TD24", step.td24))
        missing += [name for name, item in limits if isinstance(item, NotAssessed) and name not in missing]
        found = [f"{', '.join(missing)} missing"] if missing else []
        found += step.faults
        if step.sign_open:
            found.append("sign of the heat open")
        if step.provisional:
            found.append(f"estimated: {', '.join(step.provisional)}")
        if step.mode == "feed" and isinstance(step.feed, NotAssessed):
            found.append(step.feed.text)
        named = (("MTSR", step.mtsr), *((name, item.celsius) for name, item in limits if isinstance(item, Limit)))
        unstated = [name for name, item in named if isinstance(item, Value) and not item.complete]
        if unstated:
            found.append(f"u of {', '.join(unstated)} not (fully) stated")
        return tuple(found)


def _reached(what: str, scenario: Scenario) -> list[str]:
    """Which limits a scenario reaches: TD24 in classes 4 and 5, MTT in classes 3 and 4."""
    surely: list[str] = []
    perhaps: list[str] = []
    for limit, classes in (("TD24", {4, 5}), ("MTT", {3, 4})):
        hits = [set(item.classes) <= classes for item in scenario.reachable]
        if any(hits):
            (surely if all(hits) else perhaps).append(limit)
    return [f"{what} {verb} {' and '.join(limits)}" for verb, limits in (("reaches", surely), ("may reach", perhaps))
            if limits]  # fmt: skip


@dataclass(frozen=True, slots=True)
class Extreme:
    """The step in which a quantity is most extreme."""

    value: Value | None
    """``None`` when no step has the quantity."""
    labels: tuple[str, ...]
    """Steps that have that value."""
    open: tuple[str, ...]
    """Steps for which it is not known, so that the extreme may lie there."""


@dataclass(frozen=True, slots=True)
class RouteAtScale:
    """One route in the vessel."""

    profile: Profile
    steps: tuple[StepAtScale, ...]
    """In working order, side rows included."""
    checklist: Checklist
    waste: Waste

    @property
    def name(self) -> str:
        """Name of the route."""
        return self.profile.route.name

    @property
    def largest_rise(self) -> Extreme:
        """Largest adiabatic rise of an exothermic step in K."""
        return self._extreme(lambda step: step.vessel.rise, max)

    @property
    def highest_mtsr(self) -> Extreme:
        """Highest MTSR as run in °C."""
        return self._extreme(lambda step: step.vessel.mtsr, max)

    @property
    def least_margin(self) -> Extreme:
        """Smallest distance of a scenario temperature from TD24 in K; negative when beyond it."""
        return self._extreme(lambda step: step.margin, min)

    @property
    def gas(self) -> float:
        """mol of gas evolved per mole of product."""
        return gas_per_product(self.profile)

    @property
    def complete(self) -> bool:
        """True when every heat is entered and no operation is open, so that the sum may be called a total."""
        return self.profile.complete and self.checklist.complete

    @property
    def exceeded(self) -> tuple[str, ...]:
        """Criteria exceeded on the data entered, each with its step; never empty: says so when there is none."""
        found = [f"{step.label}: {item}" for step in self.steps for item in step.exceeded]
        if found:
            return tuple(found)
        without = self._unclassified(lambda item: item.as_run)
        return (f"{NOTHING_EXCEEDED}; not classifiable: {', '.join(without)}" if without else NOTHING_EXCEEDED,)

    @property
    def open_questions(self) -> tuple[str, ...]:
        """What is not known of the route."""
        found = [f"operations open: {', '.join(self.checklist.open)}"] if self.checklist.open else []
        if self.profile.not_entered:
            found.append(f"no heat: {', '.join(self.profile.not_entered)}")
        by_words: dict[str, list[str]] = {}
        for step in self.steps:
            for words in step.open_questions:
                by_words.setdefault(words, []).append(step.label)
        return (*found, *(f"{', '.join(labels)}: {words}" for words, labels in by_words.items()))

    def worst(self, scenario: Callable[[Criticality], Scenario]) -> str:
        """The worst class with every class reachable in its step, and the steps that have none."""
        stops = [step.label for step in self.steps if step.criticality.stop]
        found = [f"{STOP} ({', '.join(stops)})"] if stops else []
        seen = [(item.worst, item.words, step.label) for step in self.steps
                if (item := scenario(step.criticality)).worst is not None]  # fmt: skip
        highest = max((worst or 0 for worst, _, _ in seen), default=0)
        by_words: dict[str, list[str]] = {}
        for worst, words, label in seen:
            if worst == highest:
                by_words.setdefault(words, []).append(label)
        found += [f"{words} ({', '.join(labels)})" for words, labels in by_words.items()]
        if without := self._unclassified(scenario):
            found.append(f"not classifiable: {', '.join(without)}")
        return "; ".join(found) or "no exothermic step"

    def _unclassified(self, scenario: Callable[[Criticality], Scenario]) -> list[str]:
        found = ((step.label, scenario(step.criticality).at_values) for step in self.steps)
        return [label for label, item in found if isinstance(item, NotAssessed) and item is not ENDOTHERMIC]

    def _extreme(self, quantity: Callable[[StepAtScale], Value | NotAssessed], choose: Callable[..., float]) -> Extreme:
        """Over the steps that are not endothermic."""
        known: list[tuple[Value, str]] = []
        unknown = []
        for step in self.steps:
            if step.vessel.exothermic is False:
                continue
            item = quantity(step)
            if isinstance(item, Value):
                known.append((item, step.label))
            else:
                unknown.append(step.label)
        if not known:
            return Extreme(None, (), tuple(unknown))
        extreme = choose(item.value for item, _ in known)
        labels = tuple(label for item, label in known if item.value == extreme)
        return Extreme(next(item for item, _ in known if item.value == extreme), labels, tuple(unknown))


@dataclass(frozen=True, slots=True, repr=False)
class AtScale(Shown):
    """Routes side by side by what their steps would do in the vessel. Nothing is scored."""

    comparison: Comparison
    """Heats of the same routes; ranked only when :attr:`ranked`."""
    routes: tuple[RouteAtScale, ...]

    @property
    def ranked(self) -> bool:
        """True when no operation of any route is open and every heat is entered, so that totals may be compared."""
        return may_rank(item.checklist for item in self.routes) and all(item.complete for item in self.routes)

    def __getitem__(self, name: str) -> RouteAtScale:
        """The route with that name; raises ``KeyError``."""
        for item in self.routes:
            if item.name == name:
                return item
        raise KeyError(name)

    def tables(self) -> tuple[Table, ...]:
        """The routes, their steps, and the differences of totals when these may be compared."""
        pairs = (self.comparison.difference_table(),) if self.ranked and self.comparison.differences else ()
        return (self.table(), self.step_table(), *pairs)

    def table(self) -> Table:
        """One row a route."""
        return at_scale_views.table(self)

    def step_table(self) -> Table:
        """One row a step of every route."""
        return at_scale_views.step_table(self)

    def strip(self) -> Strip:
        """Dots of every route and step on one temperature axis, limits in words."""
        groups = tuple(
            Group(item.profile.route.heading,
                  tuple(strips.row(step.criticality, step.heat.step.row.line or None) for step in item.steps))
            for item in self.routes
        )  # fmt: skip
        makes = self.comparison.profiles[0].route.makes
        return strips.strip_of(groups, f"Routes to {makes}: temperatures when cooling fails", self.routes[0].profile.k)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return at_scale_views.to_dict(self)


def compare_at_scale(
    routes: Mapping[str, Route] | Iterable[Route], *, per: Any = "mol", water: Count = "in", side_rows: Count = "in",
    thresholds: Thresholds = DEFAULTS,
) -> AtScale:  # fmt: skip
    """Compare ``routes`` by class, adiabatic rise, MTSR, margin to TD24, gas, heat, waste and open questions.

    While an operation of the checklist is open the total is called incomplete and no ranking is given. ``per`` as for
    :func:`routeheat.process.compare.compare_routes`, ``water`` and ``side_rows`` as for
    :func:`routeheat.process.waste.waste`. Raises what these and :func:`routeheat.process.vessel.vessel` raise.
    """
    comparison = compare_routes(routes, per=per)
    return AtScale(comparison, tuple(_route(item, water, side_rows, thresholds) for item in comparison.profiles))


def _route(found: Profile, water: Count, side_rows: Count, thresholds: Thresholds) -> RouteAtScale:
    steps = []
    for item in found.steps:
        step = vessel(item, thresholds=thresholds)
        steps.append(StepAtScale(item, step, criticality(step)))
    return RouteAtScale(found, tuple(steps), checklist(found.route), waste(found, water=water, side_rows=side_rows))

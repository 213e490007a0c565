"""Routes to one species, side by side on one basis: differences that know what the routes share, and closure."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from itertools import combinations
from typing import Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Route
from routeheat.chem.row import Rows
from routeheat.errors import RouteError
from routeheat.present.ladder import Ladder
from routeheat.present.numbers import reading
from routeheat.present.show import Shown
from routeheat.present.table import Reading, Table
from routeheat.process import compare_views
from routeheat.process.closure import Closure, close, significant
from routeheat.process.profile import Profile, profile


@dataclass(frozen=True, slots=True)
class Difference:
    """Total of the second route minus total of the first; data that both use cancel in value and uncertainty."""

    first: str
    second: str
    heat: HeatSum | None
    """In the unit of the comparison; ``None`` when a step of either route is not entered."""
    verdict: str
    """``not distinguishable``, which route releases more and by how much, or ``cannot be judged: …``."""
    notes: tuple[str, ...] = ()
    """What the verdict leaves out, such as the uncertainty of yields."""


@dataclass(frozen=True, slots=True, repr=False)
class Comparison(Shown):
    """Profiles of several routes to one species on one basis. Nothing is ranked."""

    profiles: tuple[Profile, ...]
    differences: tuple[Difference, ...]
    """One for every pair, in the order of the routes."""
    closures: tuple[Closure, ...]
    """One for every pair, with theoretical extents, per mole of product."""

    @property
    def unit(self) -> str:
        """Unit of all heats but the closures, which are in kJ/mol."""
        return self.profiles[0].unit

    def __getitem__(self, name: str) -> Profile:
        """The profile of the route with that name; raises ``KeyError``."""
        for item in self.profiles:
            if item.route.name == name:
                return item
        raise KeyError(name)

    def difference(self, first: str, second: str) -> Difference:
        """The difference second − first of two routes in the order of the comparison; raises ``KeyError``."""
        for item in self.differences:
            if (item.first, item.second) == (first, second):
                return item
        raise KeyError((first, second))

    def tables(self) -> tuple[Table, ...]:
        """The routes, and where there are pairs their differences and closures."""
        pairs = (self.difference_table(), self.closure_table()) if self.differences else ()
        return (self.table(), *pairs)

    def table(self) -> Table:
        """The routes side by side."""
        return compare_views.table(self)

    def difference_table(self) -> Table:
        """Every pair of routes with the difference of their totals and what can be said of it."""
        return compare_views.difference_table(self)

    def closure_table(self) -> Table:
        """Every pair of routes with the check of their net equations."""
        return compare_views.closure_table(self)

    def ladder(self, *, overlay: bool = False) -> Ladder:
        """The routes' cumulative levels next to each other, or over each other on one axis."""
        return compare_views.ladder(self, overlay=overlay)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content; exact numbers are texts."""
        return compare_views.to_dict(self)


def compare_routes(
    routes: Mapping[str, Route] | Iterable[Route], *, per: Any = "mol", known: Rows | None = None
) -> Comparison:
    """Profiles of ``routes`` on one basis, their differences, and whether their data agree.

    ``per`` and ``known`` as in :func:`~routeheat.process.profile.profile`. Raises
    :class:`~routeheat.errors.RouteError` when there is no route, two have one name, they do not all make the
    same species, or one of them cannot be run as typed.
    """
    listed = list(routes.values()) if isinstance(routes, Mapping) else list(routes)
    if not listed:
        raise RouteError("there are no routes to compare")
    names = [route.name for route in listed]
    for name in names:
        if names.count(name) > 1:
            raise RouteError(f"two routes are called {name}", name, hint="give each a name of its own")
    for route in listed:
        if route.makes != listed[0].makes:
            raise RouteError(
                f"route {names[0]} makes {listed[0].makes}, route {route.name} makes {route.makes}",
                route.name,
                hint="only routes to the same species in the same phase can be compared",
            )
    profiles = tuple(profile(route, per=per, known=known) for route in listed)
    pairs = list(combinations(profiles, 2))
    return Comparison(
        profiles,
        tuple(_difference(first, second) for first, second in pairs),
        tuple(close(first, second) for first, second in pairs),
    )


def _difference(first: Profile, second: Profile) -> Difference:
    names = (first.route.name, second.route.name)
    missing = [f"{item.route.name}: {', '.join(item.not_entered)}" for item in (first, second) if item.not_entered]
    if missing:
        return Difference(*names, None, f"cannot be judged: not entered in {'; '.join(missing)}")
    heat = second.total - first.total
    notes = dict.fromkeys(
        f"{item.route.name}: {note}" for item in (first, second) for note in item.yield_notes if "not included" in note
    )
    return Difference(*names, heat, _verdict(first, second, heat), tuple(notes))


def _verdict(first: Profile, second: Profile, heat: HeatSum) -> str:
    if heat.unknowns:
        return f"cannot be judged: {', '.join(heat.unknowns)} unknown"
    if not heat.complete:
        return f"cannot be judged: uncertainty of {', '.join(heat.not_stated)} not stated"
    doubtful = [step.label for item in (first, second) for step in item.steps if "not unique" in step.origin]
    if doubtful:
        return f"cannot be judged: the known rows give more than one heat for {', '.join(dict.fromkeys(doubtful))}"
    if not heat.terms and not heat.exact:
        return "no difference: both totals rest on the same data"
    if not significant(heat):
        return "not distinguishable"
    lower, upper = (second, first) if heat.exact < 0 else (first, second)
    apart = Reading(abs(float(heat.exact)), heat.u, heat.k, estimated=bool(heat.estimated))
    size = f"{reading(apart)} {first.unit}"
    if any("yield uncertainty" in note for item in (first, second) for note in item.yield_notes):
        size += " (yield uncertainty not included)"
    if any("no yield typed" in note for item in (first, second) for note in item.yield_notes):
        size += " (yields that are not typed counted as 100 %)"
    if lower.total.exact > 0:
        return f"{upper.route.name} takes up more heat than {lower.route.name} by {size}"
    return f"{lower.route.name} releases more heat than {upper.route.name} by {size}"

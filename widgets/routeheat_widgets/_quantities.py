"""Heats that matter: what the uncertainty of known heats is weighed against, and what a measurement should settle."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import combinations

import routeheat as rh
from routeheat.hess.combination import Combination
from routeheat.process.compare import Difference
from routeheat.process.profile import Profile
from routeheat_widgets._model import DeskModel

Matter = Difference | Profile | Combination
MOST = 200
"""Heats that are offered; a reader does not choose from more."""


@dataclass(frozen=True, slots=True)
class Asked:
    """One heat that can be asked about."""

    words: str
    """As a reader chooses it: ``difference B − A``."""
    make: Callable[[], Matter]
    """Raises :class:`~routeheat.errors.RouteheatError` when it cannot be computed."""
    code: str
    """Expression that makes it from ``sheet``."""
    uses: frozenset[tuple[str, str]]


def asked(model: DeskModel) -> dict[str, Asked]:
    """Differences of routes to one species, totals of routes, targets; by option."""
    found: dict[str, Asked] = {}
    routes = model.shown.routes
    for first, second in combinations(routes.values(), 2):
        if first.makes == second.makes:
            found[f"difference {first.name} | {second.name}"] = Asked(
                f"difference {second.name} − {first.name}",
                lambda first=first, second=second: rh.compare_routes([first, second]).differences[0],  # type: ignore[misc]
                f"rh.compare_routes([sheet.routes[{first.name!r}], sheet.routes[{second.name!r}]]).differences[0]",
                frozenset([("route", first.name), ("route", second.name)]),
            )
    for name, route in routes.items():
        found[f"route {name}"] = Asked(
            f"total of route {name}",
            lambda route=route: rh.profile(route),  # type: ignore[misc]
            f"rh.profile(sheet.routes[{name!r}])",
            frozenset([("route", name)]),
        )
    known = model.shown.known
    for label, row in model.shown.targets.items():
        found[f"target {label}"] = Asked(
            f"target {label}",
            lambda row=row: rh.combine(row, known),  # type: ignore[misc]
            f"rh.combine(sheet.targets[{label!r}], sheet.known)",
            frozenset([("target", label)]),
        )
    return dict(list(found.items())[:MOST])

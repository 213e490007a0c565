"""What a report is about: a sheet with everything that is computed from it, each thing once."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route, Sheet
from routeheat.chem.species import Species
from routeheat.errors import OutOfReach, RouteError
from routeheat.hess.combination import Combination, combine
from routeheat.hess.reach import Refusal
from routeheat.notation.write import write_sheet
from routeheat.process.compare import Comparison, compare_routes
from routeheat.process.profile import Profile, profile


@dataclass(frozen=True, slots=True)
class Matter:
    """A sheet with its results."""

    sheet: Sheet
    title: str
    question: str
    date: str
    text: str
    """The sheet as typed, or its canonical text."""
    profiles: tuple[Profile, ...]
    comparisons: tuple[Comparison, ...]
    """One for each product that several routes make."""
    combinations: tuple[Combination | Refusal, ...]
    """One for each target."""
    derived: tuple[Combination, ...]
    """Combinations from which missing heats of steps are taken; labels are those of the steps."""
    troubles: tuple[tuple[Route, str], ...]
    """Routes that cannot be run as typed, with the reason."""


def gather(
    sheet: Sheet, *, title: str = "", question: str = "", date: str = "", per: Any = "mol", text: str | None = None
) -> Matter:
    """Everything that follows from the sheet.

    Raises :class:`~routeheat.errors.UnitError` for an unusable basis; a route that cannot be run is named instead.
    """
    profiles, troubles = [], []
    for route in sheet.routes.values():
        try:
            profiles.append(profile(route, per=per))
        except RouteError as problem:
            troubles.append((route, str(problem)))
    return Matter(
        sheet,
        title or _title(sheet),
        question,
        date,
        write_sheet(sheet) if text is None else text,
        tuple(profiles),
        tuple(_comparisons(profiles, per)),
        tuple(_combination(sheet, label) for label in sheet.targets),
        tuple(_derived(sheet, profiles)),
        tuple(troubles),
    )


def _title(sheet: Sheet) -> str:
    products = dict.fromkeys(route.makes.text for route in sheet.routes.values())
    return f"Heats of routes to {', '.join(products)}" if products else "Heats of reaction"


def by_product(profiles: Iterable[Profile]) -> tuple[tuple[Profile, ...], ...]:
    """The profiles of routes that make one species together, in the order of the sheet."""
    groups: dict[Species, list[Profile]] = {}
    for item in profiles:
        groups.setdefault(item.route.makes, []).append(item)
    return tuple(map(tuple, groups.values()))


def _comparisons(profiles: Iterable[Profile], per: Any) -> Iterable[Comparison]:
    groups = by_product(profiles)
    return [compare_routes([item.route for item in group], per=per) for group in groups if len(group) > 1]


def _combination(sheet: Sheet, label: str) -> Combination | Refusal:
    target = sheet.targets[label]
    try:
        return combine(target, sheet.known)
    except OutOfReach as reason:
        return Refusal(label, target.reaction, reason)


def _derived(sheet: Sheet, profiles: Iterable[Profile]) -> Iterable[Combination]:
    steps: dict[str, Reaction] = {}
    for item in profiles:
        steps |= {step.label: step.step.row.reaction for step in item.steps if step.origin.startswith("derived")}
    rows = {row.label: row for route in sheet.routes.values() for step in route.steps if (row := step.row)}
    return [combine(rows[label], sheet.known) for label in steps]

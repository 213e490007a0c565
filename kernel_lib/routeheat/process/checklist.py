"""Which operations of a route are entered: given as rows, declared nil with a reason, or open.

Quench, work-up and scrubber heats are those most often forgotten; while one operation is open, a total is incomplete
and routes are not ranked by it.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

from routeheat.chem.route import Route
from routeheat.chem.step import Step
from routeheat.errors import UnknownName
from routeheat.present.show import Shown
from routeheat.present.table import Column, Table
from routeheat.process.heats import molar_heat
from routeheat.process.settings import Settings

OPERATIONS: tuple[str, ...] = (
    "quench",
    "work-up",
    "neutralisation",
    "dissolution",
    "crystallisation",
    "distillation",
    "scrubber",
)
_SPELLINGS = {
    "workup": "work-up",
    "work up": "work-up",
    "neutralization": "neutralisation",
    "crystallization": "crystallisation",
    "scrubbing": "scrubber",
}
_KEYS = {"quench": "quench", "workup": "work-up", "neutralisation": "neutralisation", "scrubber": "scrubber"}
"""Flags of a row that say which operation it is, beside those of its :attr:`Step.operation`."""
INCOMPLETE = "incomplete"


@dataclass(frozen=True, slots=True)
class Item:
    """One operation of the checklist."""

    operation: str
    rows: tuple[str, ...]
    """Labels of the rows that are this operation, or whose heat includes it."""
    included: tuple[str, ...]
    """Labels among :attr:`rows` whose heat includes it; the others are rows of their own."""
    reasons: tuple[str, ...]
    """Why it does not occur, as declared, with the label of the step it is declared on."""

    @property
    def open(self) -> bool:
        """True while it is neither given nor declared nil."""
        return not self.rows and not self.reasons

    @property
    def words(self) -> str:
        """``given: X2q``, ``nil: …`` or ``open``."""
        parts = []
        if self.rows:
            parts.append("given: " + ", ".join(f"{x} (included)" if x in self.included else x for x in self.rows))
        if self.reasons:
            parts.append("nil: " + "; ".join(self.reasons))
        return "; ".join(parts) or "open"


@dataclass(frozen=True, slots=True)
class Checklist(Shown):
    """The operations of a route."""

    route: str
    items: tuple[Item, ...]
    unstated: tuple[str, ...]
    """Side rows that do not say which operation they are; they close no item."""
    not_entered: tuple[str, ...]
    """Rows that stand for an operation and have no heat; they close no item either."""

    @property
    def open(self) -> tuple[str, ...]:
        """Operations that are neither given nor declared nil."""
        return tuple(item.operation for item in self.items if item.open)

    @property
    def complete(self) -> bool:
        """True when no operation is open, so that a total may be called one."""
        return not self.open

    @property
    def words(self) -> str:
        """``every operation given or declared nil``, or what is open."""
        if self.complete:
            return "every operation given or declared nil"
        return f"total {INCOMPLETE}, no ranking; open: {', '.join(self.open)}"

    def table(self) -> Table:
        """One row an operation."""
        columns = (Column("operation", "Operation"), Column("state", "State"))
        notes = [self.words]
        if self.unstated:
            notes.append(
                f"side rows that do not say what they are (quench, work-up, neutralisation, scrubber): "
                f"{', '.join(self.unstated)}"
            )
        if self.not_entered:
            notes.append(f"no heat entered: {', '.join(self.not_entered)}")
        notes.append(
            "one row closes an operation for the whole route: check every step; side rows are no part of a "
            "reactor's duty"
        )
        return Table(
            f"Operations of route {self.route}",
            columns,
            tuple((item.operation, item.words) for item in self.items),
            tuple(notes),
        )

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "route": self.route,
            "complete": self.complete,
            "open": list(self.open),
            "items": [
                {
                    "operation": i.operation,
                    "rows": list(i.rows),
                    "included": list(i.included),
                    "reasons": list(i.reasons),
                    "open": i.open,
                }
                for i in self.items
            ],
            "unstated": list(self.unstated),
            "not_entered": list(self.not_entered),
            "words": self.words,
        }


def checklist(route: Route) -> Checklist:
    """The checklist of ``route``.

    A row is an operation by its flag (``quench``, ``crystallisation`` …), includes one by ``includes …``, and declares
    some nil by ``nil "quench, scrubber: no excess, no gas"``. A row whose heat is neither typed nor derived from
    known rows closes nothing. Raises :class:`~routeheat.errors.UnknownName` on a nil operation that is not listed.
    """
    given: dict[str, list[str]] = {name: [] for name in OPERATIONS}
    included: dict[str, list[str]] = {name: [] for name in OPERATIONS}
    reasons: dict[str, list[str]] = {name: [] for name in OPERATIONS}
    unstated, without = [], []
    for step in route.steps:
        settings = Settings(step.row.settings)
        own = operations_of(step)
        if step.side_of and not own:
            unstated.append(step.label)
        if own and molar_heat(step, route.known, route.k).heat is None:
            without.append(step.label)
        else:
            for name in own:
                given[name].append(step.label)
        for word in re.split(r"[,;]", settings.text("includes")):
            name = _name(word)
            if name in given:
                given[name].append(step.label)
                included[name].append(step.label)
        for names, reason in nil_of(step):
            for name in names:
                reasons[name].append(f"{reason} ({step.label})")
    items = tuple(
        Item(name, tuple(dict.fromkeys(given[name])), tuple(included[name]), tuple(reasons[name]))
        for name in OPERATIONS
    )
    return Checklist(route.name, items, tuple(unstated), tuple(without))


def may_rank(lists: Iterable[Checklist]) -> bool:
    """True only when no operation of any route is open."""
    return all(item.complete for item in lists)


def operations_of(step: Step) -> tuple[str, ...]:
    """Operations that a row is, by its flags."""
    settings = Settings(step.row.settings)
    own = [name for key, name in _KEYS.items() if settings.flag(key)]
    if step.operation in OPERATIONS:
        own.append(step.operation)
    return tuple(own)


def nil_of(step: Step) -> tuple[tuple[tuple[str, ...], str], ...]:
    """What a step declares not to occur, as pairs (operations, reason).

    ``nil "quench, scrubber: no excess; distillation: none"``. A declaration without a reason is refused.
    """
    text = Settings(step.row.settings).text("nil")
    found = []
    for part in filter(None, (piece.strip() for piece in text.split(";"))):
        head, colon, reason = part.partition(":")
        if not colon or not reason.strip():
            raise UnknownName(f"nil declaration of {step.label} (operation: reason)", part, OPERATIONS)
        names = tuple(_name(word) for word in head.split(","))
        for name in names:
            if name not in OPERATIONS:
                raise UnknownName("operation", name, OPERATIONS)
        found.append((names, reason.strip()))
    return tuple(found)


def _name(word: str) -> str:
    plain = word.strip().lower().removeprefix("base ").removeprefix("acid ")
    return _SPELLINGS.get(plain, plain)

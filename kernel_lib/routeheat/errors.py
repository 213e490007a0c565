"""Every error routeheat raises, in one place.

    RouteheatError
    ├── SheetFaults         a typed sheet has faults; all of them are in ``.faults``
    ├── FormulaError        a chemical formula cannot be read; ``.text``, ``.start``, ``.end``, ``.hint``
    ├── UnitError           a quantity has the wrong or an unknown unit; ``.text``, ``.hint``
    ├── OutOfReach          no combination of the known rows gives the target; ``.broken``, ``.missing``
    ├── RouteError          a route cannot be run as typed; ``.route``, ``.step``, ``.hint``
    ├── ReferenceMoved      a result is not what its kept reference says; ``.name``, ``.tables``
    └── UnknownName         a name or an option that does not exist; ``.name``, ``.choices``

Errors carry their data as fields, print themselves in plain words, and pickle.
May import: nothing of routeheat.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

__all__ = [
    "Fault",
    "FormulaError",
    "OutOfReach",
    "ReferenceMoved",
    "RouteError",
    "RouteheatError",
    "SheetFaults",
    "UnitError",
    "UnknownName",
    "nearest",
]


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong (or worth knowing) in a typed text, with its place and its repair."""

    message: str
    """What is wrong, one sentence without a full stop."""
    line: int
    """Line in the text, counted from 1."""
    column: int
    """Column of the first character, counted from 1 in characters of the line."""
    length: int = 1
    """How many characters of that line the fault covers; at least 1."""
    hint: str = ""
    """What to type instead; empty when nothing sensible can be proposed."""
    severity: Literal["fault", "notice"] = "fault"
    """A fault stops ``read_sheet``; a notice tells how something was read."""
    subject: str = ""
    """Label of the row, route or species concerned, where there is one."""

    def __str__(self) -> str:
        place = f"line {self.line}, column {self.column}"
        repair = f" ({self.hint})" if self.hint else ""
        return f"{place}: {self.message}{repair}"


class RouteheatError(Exception):
    """Base of every error that routeheat raises on purpose."""

    def __reduce__(self) -> tuple[object, ...]:
        return (_rebuild, (type(self), self.args, self.__dict__.copy()))


def _rebuild(kind: type[RouteheatError], args: tuple[object, ...], fields: dict[str, object]) -> RouteheatError:
    error = kind.__new__(kind)
    error.args = args
    error.__dict__.update(fields)
    return error


class SheetFaults(RouteheatError):
    """A typed sheet has faults. ``str()`` shows every one of them with a caret under its place."""

    def __init__(self, faults: Iterable[Fault], rendered: str) -> None:
        self.faults: tuple[Fault, ...] = tuple(faults)
        """All faults, in the order of the text; notices are not among them."""
        self.rendered = rendered
        """The faults as shown to the person who typed the sheet."""
        super().__init__(rendered)


class FormulaError(RouteheatError):
    """A chemical formula cannot be read."""

    def __init__(self, message: str, text: str, start: int = 0, end: int | None = None, hint: str = "") -> None:
        self.message = message
        self.text = text
        """The formula as typed."""
        self.start = start
        """Index in ``text`` of the first character at fault."""
        self.end = len(text) if end is None else end
        """Index just behind the last character at fault."""
        self.hint = hint
        super().__init__(f"{message}: {text[:80]!r}" + (f" ({hint})" if hint else ""))


class UnitError(RouteheatError):
    """A quantity has a unit that is unknown, or of the wrong kind."""

    def __init__(self, message: str, text: str, hint: str = "") -> None:
        self.message = message
        self.text = text
        self.hint = hint
        super().__init__(f"{message}: {text[:80]!r}" + (f" ({hint})" if hint else ""))


class OutOfReach(RouteheatError):
    """No exact combination of the known rows gives the target.

    ``broken`` is the conserved quantity that shows it: something that no known row changes and the target does.
    ``missing`` are reactions any one of which, once known, would close the gap.
    Both are result objects of :mod:`routeheat.hess.reach`; they print themselves.
    """

    def __init__(self, message: str, broken: object = None, missing: tuple[object, ...] = ()) -> None:
        self.broken = broken
        self.missing = missing
        super().__init__(message)


class RouteError(RouteheatError):
    """A route cannot be run as it is typed."""

    def __init__(self, message: str, route: str = "", step: str = "", hint: str = "") -> None:
        self.message = message
        self.route = route
        """Name of the route."""
        self.step = step
        """Label of the step at fault; empty when the route as a whole is."""
        self.hint = hint
        super().__init__(message + (f" ({hint})" if hint else ""))


class ReferenceMoved(RouteheatError):
    """A result is not what its kept reference says, beyond the tolerance.

    ``tables`` say what moved, which typed rows were edited, and what each contributes to the change; they are tables of
    :mod:`routeheat.present.table`.
    """

    def __init__(self, message: str, name: str, tables: tuple[object, ...] = ()) -> None:
        self.name = name
        """Name of the reference."""
        self.tables = tables
        super().__init__(message)


class UnknownName(RouteheatError):
    """A name or an option that does not exist; the nearest existing one is proposed."""

    def __init__(self, what: str, name: str, choices: Iterable[str]) -> None:
        self.name = name
        self.choices: tuple[str, ...] = tuple(choices)
        near = nearest(name, self.choices)
        tail = f"; did you mean {near!r}?" if near else ""
        super().__init__(f"unknown {what} {name[:60]!r}{tail} Known: {', '.join(self.choices)}")


def nearest(name: str, choices: Iterable[str]) -> str:
    """The choice that looks most like ``name``, or an empty text when none is close."""
    found = difflib.get_close_matches(name[:60], list(choices), n=1, cutoff=0.6)
    return found[0] if found else ""

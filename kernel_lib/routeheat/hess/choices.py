"""What the user decided about rows that contradict each other: in the sheet, or in the call.

May import: :mod:`routeheat.chem`, :mod:`routeheat.errors`.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.chem.row import Row, Rows
from routeheat.errors import RouteheatError, UnknownName

_WIDEN = re.compile(r'([0-9]{1,6}(?:\.[0-9]{1,6})?)\s*(?:"([^"]*)"|(.*))')


@dataclass(frozen=True, slots=True)
class Choice:
    """One decision; every report names it."""

    kind: Literal["accept", "exclude", "widen", "class"]
    label: str = ""
    """The row it is typed on or made for; empty when it concerns all."""
    reason: str = ""
    factor: Fraction = Fraction(1)
    """For ``widen`` the factor on the standard uncertainty, for ``class`` the standard uncertainty in kJ/mol."""

    @property
    def text(self) -> str:
        """In words, for notes."""
        reason = f": {self.reason}" if self.reason else ", no reason given"
        said = f": {self.reason}" if self.reason else ""
        on = f" (typed at {self.label})" if self.label else ""
        return {
            "accept": f"the contradiction is accepted{on}{reason}",
            "exclude": f"{self.label} is excluded{reason}",
            "widen": f"the own uncertainty of {self.label} is multiplied by {float(self.factor):g}{reason}",
            "class": f"rows that state no uncertainty take part with u = {float(self.factor):g} kJ/mol{said}",
        }[self.kind]


def choices(
    known: Mapping[str, Row],
    *,
    unstated: float | None,
    accept: str | None,
    exclude: Mapping[str, str],
    widen: Mapping[str, float],
) -> tuple[Choice, ...]:
    """All decisions, those of the call first; what the sheet says, of a row or of a class, gives way to the call.

    Raises :class:`~routeheat.errors.RouteheatError` for a row that does not exist, an empty reason to accept, and a
    factor or an uncertainty that is not positive.
    """
    for label in (*exclude, *widen):
        if label not in known:
            raise UnknownName("row", label, known)
    found: list[Choice] = []
    typed = known.unstated if isinstance(known, Rows) else None
    if unstated is not None:
        found.append(Choice("class", factor=_positive(unstated, "the uncertainty of a class")))
    elif typed is not None:
        found.append(Choice("class", "", typed.reason, _positive(typed.kj_per_mol, "the uncertainty of a class")))
    if accept is not None:
        found.append(_accepted("", accept))
    else:
        found += [_accepted(label, str(value)) for label, value in _typed(known, "accept")]
    found += [Choice("exclude", label, reason.strip()) for label, reason in exclude.items()]
    found += [Choice("exclude", label, str(value)) for label, value in _typed(known, "exclude") if label not in exclude]
    found += [Choice("widen", label, "", _positive(by, f"the factor on {label}")) for label, by in widen.items()]
    for label, value in _typed(known, "widen"):
        match = _WIDEN.fullmatch(str(value).strip())
        if match is None:
            raise RouteheatError(f'{label}: widen {str(value)[:60]} is not read; type widen 2 "reason"')
        if label not in widen:
            factor = _positive(Fraction(match[1]), f"the factor on {label}")
            found.append(Choice("widen", label, match[2] or match[3] or "", factor))
    return tuple(found)


def _typed(known: Mapping[str, Row], key: str) -> list[tuple[str, object]]:
    return [(label, row.setting(key)) for label, row in known.items() if row.setting(key) is not None]


def _accepted(label: str, reason: str) -> Choice:
    if not reason.strip():
        raise RouteheatError("a contradiction is accepted with a reason only")
    return Choice("accept", label, reason.strip())


def _positive(number: float | Fraction, what: str) -> Fraction:
    exact = number if isinstance(number, Fraction) else Fraction(repr(float(number)))
    if exact <= 0:
        raise RouteheatError(f"{what} must be positive, is {number}")
    return exact

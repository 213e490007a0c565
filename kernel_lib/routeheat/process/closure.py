"""Closure between routes: the same net change must have the same heat, whichever way it is made.

Net equations use theoretical extents (yields of 1, no excess, no recycle, no side rows), so these heats are state
functions, unlike the profiles. When two net equations differ by something the known rows span, its heat is taken off.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.row import Row
from routeheat.errors import OutOfReach, RouteError
from routeheat.hess.combination import combine
from routeheat.present.markup import Rich, as_rich, join, plain
from routeheat.process.extents import net_equation, theoretical
from routeheat.process.notes import temperature_note
from routeheat.process.profile import Profile

DIFFER = "no check: the net equations differ by"


@dataclass(frozen=True, slots=True)
class Closure:
    """Whether the heats of two routes agree with each other, as far as their net equations allow to say."""

    first: str
    second: str
    difference: Reaction | None
    """Net equation of the second route minus that of the first, per mole of product; ``None`` when there is none."""
    rows: tuple[str, ...]
    """Labels of the known rows that give the difference; empty when the net equations are equal."""
    discrepancy: HeatSum | None
    """H(second) − H(first) − H(known rows) in kJ per mole of product; zero if the data agree. ``None``: no check."""
    verdict: str
    """``closes within its uncertainty``, ``does not close: …``, ``cannot be judged: …`` or ``no check: …``."""
    notes: tuple[str, ...] = ()

    @property
    def words(self) -> Rich:
        """The verdict as printed, the difference of net equations with its subscripts."""
        if self.difference is None or not self.verdict.startswith(DIFFER):
            return as_rich(self.verdict)
        return join([f"{DIFFER} ", self.difference.rich])


def significant(heat: HeatSum) -> bool:
    """True when a difference is at least twice its standard uncertainty, and not exactly zero."""
    return heat.exact != 0 and heat.exact**2 >= 4 * heat.variance


def close(first: Profile, second: Profile) -> Closure:
    """The closure check of two routes that make the same species."""
    names = (first.route.name, second.route.name)
    try:
        equations = [net_equation(item.found.links) for item in (first, second)]
    except RouteError as problem:
        return Closure(*names, None, (), None, f"cannot be judged: {problem}")
    difference = Reaction.from_net(add_net(((Fraction(-1), equations[0]), (Fraction(1), equations[1]))))
    known = HeatSum.zero(first.k)
    rows: tuple[str, ...] = ()
    if difference.net:
        found = _from_known(difference, _all_known(first, second), first.k)
        if found is None:
            words = f"{DIFFER} {plain(difference.rich)}"
            return Closure(*names, difference, (), None, words)
        known, rows = found
    missing = [f"{item.route.name}: {', '.join(labels)}" for item in (first, second) if (labels := _missing(item))]
    if missing:
        return Closure(*names, difference, rows, None, f"cannot be judged: not entered in {'; '.join(missing)}")
    discrepancy = _theoretical_heat(second) - _theoretical_heat(first) - known
    items = [item for profile in (first, second) for item in profile.steps if not item.side]
    return Closure(*names, difference, rows, discrepancy, _verdict(discrepancy, rows), temperature_note(items))


def _from_known(difference: Reaction, known: Mapping[str, Row], k: float) -> tuple[HeatSum, tuple[str, ...]] | None:
    if not known or any(species.in_mixture for species in difference.net):
        return None
    try:
        combination = combine(difference, known, k=k)
    except OutOfReach:
        return None
    return combination.heat, tuple(label for label, c in combination.coefficients.items() if c)


def _all_known(first: Profile, second: Profile) -> dict[str, Row]:
    """Known rows of both routes; a label that means two different rows is left out."""
    mine, theirs = first.route.known, second.route.known
    return {label: row for label, row in {**theirs, **mine}.items() if mine.get(label, row) == theirs.get(label, row)}


def _missing(profile: Profile) -> list[str]:
    return [item.label for item in profile.steps if item.molar is None and not item.side]


def _theoretical_heat(profile: Profile) -> HeatSum:
    runs = theoretical(profile.found.links)
    parts = [(runs[item.label], item.molar) for item in profile.steps if item.molar is not None and not item.side]
    return HeatSum.total(parts, profile.k)


def _verdict(discrepancy: HeatSum, rows: tuple[str, ...]) -> str:
    over = f" over {', '.join(rows)}" if rows else ""
    if not discrepancy.terms:
        return f"no check{over}: both sides rest on the same data"
    if discrepancy.unknowns:
        return f"cannot be judged{over}: {', '.join(discrepancy.unknowns)} unknown"
    if not discrepancy.complete:
        return f"cannot be judged{over}: uncertainty of {', '.join(discrepancy.not_stated)} not stated"
    if significant(discrepancy):
        return f"does not close{over}: {discrepancy.text} kJ/mol is not zero within twice its standard uncertainty"
    return f"closes within its uncertainty{over}"

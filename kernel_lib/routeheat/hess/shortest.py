"""The combination a chemist would write down: fewest rows, then smallest coefficients.

Order of preference among combinations of independent rows: fewest rows; then smallest ``Σ|c|``; then the rows that
come first in the mapping given (compared one after another, first row first). With rows given in an order of their own
- not the order they were typed in - the preference is a property of the rows alone.

Finding the fewest rows is hard in general (B. K. Natarajan, SIAM J. Comput. 24 (1995) 227), so the search has a budget,
and every answer says whether the search was complete.
May import: :mod:`routeheat.chem.exact`.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Hashable, Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Generic, TypeVar

from routeheat.chem.exact import Solution, Span, Vector, presolve, primitive, solve, subtract

K = TypeVar("K", bound=Hashable)
L = TypeVar("L", bound=Hashable)
V = TypeVar("V", int, Fraction)

BUDGET = 100_000
"""Rows that a search may look at (each time it looks at one), before it settles for the best it has."""


@dataclass(frozen=True, slots=True)
class Shortest(Generic[L]):
    """A combination of independent rows."""

    coefficients: dict[L, Fraction]
    """Non-zero coefficients, in the order of the rows given."""
    proved: bool
    """True when no combination that comes before it in the order of preference has been overlooked."""


def shortest(rows: Mapping[L, Vector[K]], target: Vector[K], *, budget: int = BUDGET) -> Shortest[L] | None:
    """The most preferred combination ``Σ c · row = target``, or ``None`` when there is none at all."""
    found = alternatives(rows, target, 1, budget=budget)
    return found[0] if found else None


def alternatives(
    rows: Mapping[L, Vector[K]], target: Vector[K], count: int, *, budget: int = BUDGET
) -> tuple[Shortest[L], ...]:
    """Up to ``count`` combinations of independent rows in order of preference; empty when there is none at all.

    They differ in the rows they use: the coefficients over independent rows are unique. When the budget runs out the
    tuple holds what was found until then, at least one, and the doubtful ones are not ``proved``.
    """
    possible = {label: rows[label] for label in presolve(rows, target)}
    part = solve(possible, target)
    return () if part is None else ranked(possible, target, part, count, budget=budget)


def ranked(
    rows: Mapping[L, Vector[K]], target: Vector[K], part: Solution[L], count: int, *, budget: int = BUDGET
) -> tuple[Shortest[L], ...]:
    """As :func:`alternatives`, for rows and a target whose solution ``part`` is already at hand."""
    if not part.cycles:
        return (Shortest(_ordered(part.coefficients, part.relevant), True),)[:count]
    used = {label: rows[label] for label in part.relevant}
    place = {label: index for index, label in enumerate(used)}
    search = _Search({label: primitive(row)[0] for label, row in used.items()}, budget)
    found: list[dict[L, Fraction]] = []
    proved_size = 0
    try:
        for size in range(1, len(part.relevant) - len(part.cycles) + 1):
            for support in search.supports(target, size):
                coefficients = _over(support, used, target)
                if len(coefficients) == size:
                    found.append(coefficients)
            proved_size = size
            if len(found) >= count:
                break
    except _BudgetSpent:
        for support in search.found:
            coefficients = _over(support, used, target)
            if len(coefficients) == len(support):
                found.append(coefficients)
        if not found:
            found.append(_over(_exchanged(part.coefficients, part.cycles), used, target))
        for cycle in sorted(part.cycles, key=len):
            if len(found) < count and not found[0].keys().isdisjoint(cycle):
                coefficients = _over(_exchange(found[0], cycle), used, target)
                if coefficients not in found:
                    found.append(coefficients)
    found.sort(key=lambda coefficients: preference(coefficients, place))
    return tuple(Shortest(_ordered(c, used), len(c) <= proved_size) for c in found[:count])


def short_cycles(
    rows: Mapping[L, Vector[K]], cycles: Iterable[Mapping[L, int]], *, budget: int = BUDGET // 5
) -> tuple[dict[L, int], ...]:
    """A basis of the same null space made of short cycles, in order of preference; primitive integers, first one > 0.

    All cycles are listed in order of size, and one is taken when it is independent of those taken before; for a
    complete list this gives the basis with the fewest entries (greedy algorithm on a matroid). When the budget runs
    out, the given cycles fill up what is missing.
    """
    given = list(cycles)
    place = {label: index for index, label in enumerate(rows)}
    whole = {label: primitive(row)[0] for label, row in rows.items()}
    search = _Search(whole, budget)
    basis: Span[L, int] = Span()
    taken: list[dict[L, int]] = []

    def take(candidates: Iterable[Mapping[L, int]]) -> None:
        for cycle in sorted(candidates, key=lambda cycle: preference(cycle, place)):
            if len(taken) < len(given) and basis.add(len(taken), cycle) is None:
                taken.append(_ordered(primitive(cycle)[0], rows))

    size = 1
    try:
        while len(taken) < len(given):
            closed = []
            for label, row in whole.items():
                # each cycle is found at its first row only
                later = {other: whole[other] for other in whole if place[other] > place[label]}
                for support in search.supports(row, size, later):
                    coefficients = _over(support, rows, rows[label])
                    if len(coefficients) == size:
                        closed.append(primitive({label: Fraction(-1), **coefficients})[0])
            take(closed)
            size += 1
    except _BudgetSpent:
        take(given)
    return tuple(cycle if next(iter(cycle.values())) > 0 else {k: -v for k, v in cycle.items()} for cycle in taken)


def preference(coefficients: Vector[L], place: Mapping[L, int]) -> tuple[int, Fraction, list[int]]:
    """Sort key of a combination: number of rows, ``Σ|c|``, places of the rows."""
    size = sum((Fraction(value) if value > 0 else -Fraction(value) for value in coefficients.values()), Fraction(0))
    return len(coefficients), size, sorted(place[label] for label in coefficients)


class _BudgetSpent(Exception):
    """The search has looked at as many rows as it may."""


class _Search(Generic[K, L]):
    """All supports of combinations of a given size, by branching over the rows that can remove a key of the residual.

    A node has a set S of chosen rows with one pivot key each, the residual r of the target, and the remaining rows,
    both with all pivot keys eliminated by rows of S, that is, reduced modulo span(S). If r = 0 the target lies in
    span(S). Otherwise let k be any key of r, and T any set of independent rows that contains S and combines to the
    target. Reduction is linear and takes exactly span(S) to zero, so r is a combination of the reduced rows of T - S;
    since r has the key k, so has at least one of them. Branching over all remaining rows *whose reduced vector* has k
    is therefore complete - their original vectors need not have it, nor the residual's the original's keys. A row is
    withdrawn once its branch is done, so that each T is met once. A row reduced to zero depends on S and is dropped;
    so is a row with a key that neither r nor another remaining row has (:func:`presolve`), because it cannot take part.

    A branch is cut when it holds more keys with pairwise disjoint sets of rows than rows may still be chosen.
    """

    def __init__(self, rows: Mapping[L, dict[K, int]], budget: int) -> None:
        self.rows = rows
        self.left = budget
        self.found: list[tuple[L, ...]] = []
        """Supports of the size asked for last; a support may turn out smaller, when a coefficient is zero."""

    def supports(
        self, target: Vector[K], size: int, rows: Mapping[L, dict[K, int]] | None = None
    ) -> list[tuple[L, ...]]:
        """Every set of ``size`` independent rows in whose span, and in no smaller chosen one, the target lies."""
        self.found = []
        self._visit(primitive(target)[0], dict(self.rows if rows is None else rows), (), size)
        return self.found

    def _visit(self, residual: dict[K, int], rows: dict[L, dict[K, int]], chosen: tuple[L, ...], size: int) -> None:
        self.left -= len(rows)
        if self.left < 0:
            raise _BudgetSpent
        if not residual:
            return
        if size == 1:
            self.found.extend((*chosen, label) for label in _multiples(residual, rows))
            return
        if size > 2:
            rows = {label: rows[label] for label in presolve(rows, residual)}
        holders: dict[K, list[L]] = {key: [] for key in residual}
        for label, row in rows.items():
            for key in row:
                if key in holders:
                    holders[key].append(label)
        ranked = sorted(holders, key=lambda key: len(holders[key]))
        apart: set[L] = set()
        needed = 0
        for key in ranked:
            if apart.isdisjoint(holders[key]):
                apart.update(holders[key])
                needed += 1
        if needed > size:
            return
        key = ranked[0]
        for label in holders[key]:
            pivot = rows.pop(label)
            self._visit(_without(residual, key, pivot), _all_without(rows, key, pivot), (*chosen, label), size - 1)


def _multiples(residual: dict[K, int], rows: Mapping[L, dict[K, int]]) -> list[L]:
    key, value = next(iter(residual.items()))
    found = []
    for label, row in rows.items():
        own = row.get(key)
        if own and len(row) == len(residual) and all(row.get(k, 0) * value == v * own for k, v in residual.items()):
            found.append(label)
    return found


def _without(vector: dict[K, int], key: K, pivot: dict[K, int]) -> dict[K, int]:
    changed = dict(vector)
    subtract(changed, pivot[key], pivot, vector[key])
    return primitive(changed)[0]


def _all_without(rows: Mapping[L, dict[K, int]], key: K, pivot: dict[K, int]) -> dict[L, dict[K, int]]:
    reduced = {}
    for label, row in rows.items():
        left = _without(row, key, pivot) if key in row else row
        if left:
            reduced[label] = left
    return reduced


def _over(support: Iterable[L], rows: Mapping[L, Vector[K]], target: Vector[K]) -> dict[L, Fraction]:
    """Coefficients of the target over (a basis of) the rows of ``support``; zeros are left out."""
    return Span({label: rows[label] for label in support}).reduce(target)[1]


def _ordered(coefficients: Mapping[L, V], order: Iterable[L]) -> dict[L, V]:
    return {label: coefficients[label] for label in order if label in coefficients}


def _exchanged(coefficients: dict[L, Fraction], cycles: Iterable[Mapping[L, int]]) -> dict[L, Fraction]:
    """A combination with fewer rows, by adding multiples of cycles that remove more rows than they bring in."""
    best = coefficients
    better = True
    while better:
        better = False
        for cycle in cycles:
            shared = sum(label in best for label in cycle)
            # at most the shared rows go, and all others of the cycle come
            if 2 * shared > len(cycle):
                changed = _exchange(best, cycle)
                if len(changed) < len(best):
                    best, better = changed, True
    return best


def _exchange(coefficients: Mapping[L, Fraction], cycle: Mapping[L, int]) -> dict[L, Fraction]:
    """Add the multiple of a cycle that removes most rows; the two must share one."""
    ratios = Counter(coefficients[label] / value for label, value in cycle.items() if label in coefficients)
    factor = ratios.most_common(1)[0][0]
    changed = dict(coefficients)
    for label, value in cycle.items():
        changed[label] = changed.get(label, Fraction(0)) - factor * value
    return {label: value for label, value in changed.items() if value}

"""Exact elimination of sparse rational vectors.

Vectors are mappings from hashable keys to fractions (or integers). Inside, every vector is a primitive integer vector:
denominators are cleared once, two vectors are combined with integer factors, and the common divisor is taken out, so
that numbers stay small and nothing is ever rounded (fraction-free elimination: E. H. Bareiss, Math. Comp. 22 (1968)
565). Pivots are taken where they make the fewest new entries (H. M. Markowitz, Management Sci. 3 (1957) 255): a key
that only one vector still has, else the shortest vector with its rarest key.
May import: nothing of routeheat.
"""

from __future__ import annotations

import heapq
import math
from collections.abc import Hashable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Generic, TypeVar

K = TypeVar("K", bound=Hashable)
L = TypeVar("L", bound=Hashable)
Vector = Mapping[K, Fraction | int]
"""A sparse vector; absent keys are zero."""


def primitive(vector: Vector[K]) -> tuple[dict[K, int], Fraction]:
    """The vector as integers without a common divisor, and the positive factor it was multiplied by (1 for zero)."""
    scale = math.lcm(*[value.denominator for value in vector.values()])
    whole = {key: value.numerator * (scale // value.denominator) for key, value in vector.items() if value}
    divisor = math.gcd(*whole.values()) or 1
    return {key: value // divisor for key, value in whole.items()}, Fraction(scale, divisor)


def subtract(vector: dict[K, int], factor: int, other: Mapping[K, int], times: int) -> None:
    """Change ``vector`` in place to ``factor · vector − times · other``; zeros are removed."""
    if factor != 1:
        for key in vector:
            vector[key] *= factor
    for key, value in other.items():
        left = vector.get(key, 0) - times * value
        if left:
            vector[key] = left
        else:
            del vector[key]


def presolve(rows: Mapping[L, Vector[K]], target: Vector[K]) -> list[L]:
    """Labels of the rows that may take part in a combination giving ``target``, in the order of ``rows``.

    A row with a key that no other row and not the target has cannot take part, because nothing could cancel that key;
    it is dropped, which may make keys of other rows lonely in turn. Of the rest, only rows that are connected to the
    target through shared keys are kept. Every combination whose rows are independent survives.
    """
    holders: dict[K, set[L]] = {}
    for label, row in rows.items():
        for key, value in row.items():
            if value:
                holders.setdefault(key, set()).add(label)
    wanted = {key for key, value in target.items() if value}
    lonely = [key for key, labels in holders.items() if len(labels) == 1 and key not in wanted]
    while lonely:
        for label in tuple(holders[lonely.pop()]):
            for key, value in rows[label].items():
                if not value:
                    continue
                holders[key].discard(label)
                if len(holders[key]) == 1 and key not in wanted:
                    lonely.append(key)
    kept: set[L] = set()
    reached = [key for key in wanted if key in holders]
    seen = set(reached)
    while reached:
        for label in holders[reached.pop()] - kept:
            kept.add(label)
            for key, value in rows[label].items():
                if value and key not in seen:
                    seen.add(key)
                    reached.append(key)
    return [label for label in rows if label in kept]


@dataclass(slots=True)
class _Line(Generic[K, L]):
    """An integer vector with the integer combination of given rows that it is."""

    vector: dict[K, int]
    made: dict[L, int]

    def cancel(self, key: K, pivot: _Line[K, L]) -> None:
        """Take out ``key`` with the help of ``pivot``."""
        own, other = self.vector[key], pivot.vector[key]
        divisor = math.gcd(own, other) if other > 0 else -math.gcd(own, other)
        factor, times = other // divisor, own // divisor
        subtract(self.vector, factor, pivot.vector, times)
        subtract(self.made, factor, pivot.made, times)
        # without a factor the entries hardly grow, and looking for a divisor costs more than it saves
        if abs(factor) != 1 and (common := math.gcd(*self.vector.values(), *self.made.values())) > 1:
            self.vector = {key: value // common for key, value in self.vector.items()}
            self.made = {label: value // common for label, value in self.made.items()}


def _line(label: L, vector: Vector[K]) -> _Line[K, L]:
    whole, factor = primitive(vector)
    return _Line({key: value * factor.denominator for key, value in whole.items()}, {label: factor.numerator})


class Span(Generic[K, L]):
    """The span of labelled rows, which remembers for every vector how the rows make it."""

    __slots__ = ("_cycles", "_pivots", "_place")

    def __init__(self, rows: Mapping[L, Vector[K]] | None = None) -> None:
        self._pivots: list[tuple[K, _Line[K, L]]] = []
        self._place: dict[K, int] = {}
        self._cycles: list[dict[L, int]] = []
        if rows:
            self._eliminate([_line(label, vector) for label, vector in rows.items()])

    @property
    def rank(self) -> int:
        """Number of independent rows."""
        return len(self._pivots)

    @property
    def cycles(self) -> list[dict[L, int]]:
        """A basis of the null space: primitive integer combinations of rows that give nothing.

        Each contains one dependent row, in no other of them, and independent rows.
        """
        return [dict(cycle) for cycle in self._cycles]

    def add(self, label: L, vector: Vector[K]) -> dict[L, int] | None:
        """Take in one more row; returns its cycle when it depends on the rows so far, else ``None``."""
        line = _line(label, vector)
        self._reduce(line)
        if not line.vector:
            self._cycles.append(primitive(line.made)[0])
            return dict(self._cycles[-1])
        self._settle(next(iter(line.vector)), line)
        return None

    def reduce(self, vector: Vector[K]) -> tuple[dict[K, Fraction], dict[L, Fraction]]:
        """``(residual, c)`` with ``vector = residual + Σ c · row``; the residual is empty exactly within the span.

        The residual is a linear function of the vector, zero for every row.
        """
        line: _Line[K, L | None] = _line(None, vector)
        self._reduce(line)  # type: ignore[arg-type]
        scale = line.made.pop(None)
        residual = {key: Fraction(value, scale) for key, value in line.vector.items()}
        return residual, {label: Fraction(-value, scale) for label, value in line.made.items() if label is not None}

    def _reduce(self, line: _Line[K, L]) -> None:
        # a pivot line has no key of an earlier pivot, so one pass in the order of the pivots is enough
        waiting = [self._place[key] for key in line.vector if key in self._place]
        heapq.heapify(waiting)
        while waiting:
            key, pivot = self._pivots[heapq.heappop(waiting)]
            if key not in line.vector:
                continue
            line.cancel(key, pivot)
            for other in pivot.vector:
                if other in self._place and other in line.vector:
                    heapq.heappush(waiting, self._place[other])

    def _settle(self, key: K, line: _Line[K, L]) -> None:
        self._place[key] = len(self._pivots)
        self._pivots.append((key, line))

    def _eliminate(self, lines: list[_Line[K, L]]) -> None:
        holders: dict[K, set[int]] = {}
        for index, line in enumerate(lines):
            for key in line.vector:
                holders.setdefault(key, set()).add(index)
        lonely = [key for key, indices in holders.items() if len(indices) == 1]
        shortest = [(len(line.vector), index) for index, line in enumerate(lines)]
        heapq.heapify(shortest)
        active = set(range(len(lines)))

        def leave(key: K, index: int) -> None:
            holders[key].discard(index)
            if len(holders[key]) == 1:
                lonely.append(key)

        while active:
            if lonely:
                key = lonely.pop()
                if len(holders[key]) != 1:
                    continue
                (index,) = holders[key]
            else:
                length, index = heapq.heappop(shortest)
                if index not in active or length != len(lines[index].vector):
                    continue
                if not length:
                    active.discard(index)
                    self._cycles.append(primitive(lines[index].made)[0])
                    continue
                key = min(lines[index].vector, key=lambda key: len(holders[key]))
            pivot = lines[index]
            active.discard(index)
            for other in pivot.vector:
                leave(other, index)
            for changed in sorted(holders[key]):
                line = lines[changed]
                before = [other for other in pivot.vector if other in line.vector]
                line.cancel(key, pivot)
                for other in before:
                    if other not in line.vector:
                        leave(other, changed)
                for other in pivot.vector:
                    if other in line.vector:
                        holders[other].add(changed)
                heapq.heappush(shortest, (len(line.vector), changed))
            self._settle(key, pivot)


@dataclass(frozen=True, slots=True)
class Solution(Generic[L]):
    """One combination, and what can be exchanged for what in it."""

    coefficients: dict[L, Fraction]
    """The combination found by elimination; its rows are independent."""
    relevant: tuple[L, ...]
    """Rows that occur in at least one combination of independent rows, in the order given."""
    cycles: tuple[dict[L, int], ...]
    """Basis of the null space of the relevant rows; empty exactly when no other combination exists."""


def solve(rows: Mapping[L, Vector[K]], target: Vector[K]) -> Solution[L] | None:
    """A combination of ``rows`` that gives ``target``, or ``None`` when there is none; quick after :func:`presolve`.

    The rows that the fundamental cycles link to the combination, directly or through one another, are exactly those
    that some combination of independent rows uses (connected components of a linear matroid; J. Oxley, Matroid Theory,
    2nd ed. 2011, sec. 4.1 and 4.3, from memory). A cycle among other rows can be added as a whole to any combination,
    but no row of it can replace one that the target needs: such cycles are left out.
    """
    span = Span(rows)
    residual, coefficients = span.reduce(target)
    if residual:
        return None
    cycles = span.cycles
    linked = set(coefficients)
    apart = cycles
    touching = [cycle for cycle in apart if not linked.isdisjoint(cycle)]
    while touching:
        linked.update(*touching)
        apart = [cycle for cycle in apart if not linked.issuperset(cycle)]
        touching = [cycle for cycle in apart if not linked.isdisjoint(cycle)]
    kept = tuple(cycle for cycle in cycles if not linked.isdisjoint(cycle))
    return Solution(coefficients, tuple(label for label in rows if label in linked), kept)

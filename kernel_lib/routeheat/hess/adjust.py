"""Generalised least squares on a cycle space, without normal equations.

Data x₀ have errors G z, where z are independent with unit variance; true heats close every cycle: C x = 0. The estimate
is the z of least norm with C (x₀ + G z) = 0 (E. M. Mikhail, Observations and Least Squares, 1976, condition equations).
With A = C G, Aᵀ = Q R by Householder reflections:

    z = −Q R⁻ᵀ C x₀,    x = x₀ + G z,    V' = G (1 − Q Qᵀ) Gᵀ,    χ² = ‖z‖²

Uncertainties may differ by many orders of magnitude. The cycles are therefore rewritten first, so that each has one row
of its own that is about as uncertain as any other row in it: C = [W 1] with |W| u(row) ≤ 2 u(own row), which bounds the
condition of A whatever the uncertainties are (exchange of rows as in S. A. Goreinov et al., How to find a good
submatrix, in Matrix Methods, 2010, from memory).
May import: nothing of routeheat.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from numpy.typing import NDArray

_WIDER = 2.0
"""A row is exchanged when it is this many times more uncertain, as it enters, than the own row of a cycle."""
_NOTHING = 1e-9
"""Relative size below which a direction of the scaled cycles counts as exact."""


@dataclass(frozen=True, slots=True)
class Fit:
    """The adjusted heats of n rows with c shared components, and what the cycles say about each row."""

    values: NDArray[Any]
    """Adjusted heats, shape (n,), kJ/mol."""
    errors: NDArray[Any]
    """Factor H of the adjusted covariance V' = H Hᵀ, shape (n, n + c), kJ/mol."""
    u: NDArray[Any]
    """Standard uncertainty of each adjusted heat, shape (n,), kJ/mol."""
    weights: NDArray[Any]
    """Derivative of each adjusted heat with respect to each measured one, shape (n, n)."""
    chi2: float
    """Infinite when rows that share all of their error contradict each other."""
    dof: int
    """Independent cycles among uncertain rows."""
    gap: NDArray[Any]
    """Measured − what all other rows say of it, kJ/mol, shape (n,); zero where they say nothing."""
    gap_u: NDArray[Any]
    """Standard uncertainty of the gap, kJ/mol, shape (n,); infinite where the other rows say nothing."""
    moved_u: NDArray[Any]
    """Standard uncertainty of measured − adjusted, kJ/mol, shape (n,); zero for a row that is not adjusted."""


def adjust(
    values: Sequence[Fraction],
    own: Sequence[float],
    shared: Sequence[Sequence[float]],
    cycles: Sequence[Mapping[int, int]],
) -> Fit:
    """Adjusted heats of n rows.

    ``own`` are standard uncertainties (zero: exact by convention), ``shared`` the loadings of each row on c common
    errors of unit variance, in kJ/mol. ``cycles`` is a basis of the integer cycles over row numbers; every cycle has a
    row that no other of them has, and none consists of rows without any uncertainty.
    """
    import numpy as np

    count = len(values)
    x0 = np.array([float(value) for value in values])
    common = np.array(shared, dtype=float).reshape(count, -1)
    factor = np.hstack([np.diag(np.array(own, dtype=float)), common])
    matrix, misclosure = _scaled(values, np.linalg.norm(factor, axis=1), cycles)
    contradiction = False
    if any(common[row].any() for row in range(count) if not own[row]):
        matrix, misclosure, contradiction = _without_exact(matrix, misclosure, factor)
    q, r = np.linalg.qr((matrix @ factor).T)
    whitened = np.linalg.solve(r.T, np.column_stack([matrix, misclosure]))
    checks, surprise = whitened[:, :-1], whitened[:, -1]
    moved = factor @ q
    size = np.linalg.norm(checks, axis=0)
    checked = size > 0
    errors = factor - moved @ q.T
    return Fit(
        values=x0 - moved @ surprise,
        errors=errors,
        u=np.linalg.norm(errors, axis=1),
        weights=np.eye(count) - moved @ checks,
        chi2=math.inf if contradiction else float(surprise @ surprise),
        dof=len(surprise),
        gap=np.divide(surprise @ checks, size**2, out=np.zeros(count), where=checked),
        gap_u=np.divide(1.0, size, out=np.full(count, math.inf), where=checked),
        moved_u=np.linalg.norm(moved, axis=1),
    )


def _scaled(
    values: Sequence[Fraction], u: NDArray[Any], cycles: Sequence[Mapping[int, int]]
) -> tuple[NDArray[Any], NDArray[Any]]:
    """Cycles and their misclosures, each in units of the uncertainty of the cycle's own row."""
    import numpy as np

    found: dict[int, int] = {}
    for cycle in cycles:
        for row in cycle:
            found[row] = found.get(row, 0) + 1
    own = [max((row for row in cycle if found[row] == 1), key=lambda row: float(u[row])) for cycle in cycles]
    matrix = np.zeros((len(cycles), len(values)))
    misclosure = np.zeros(len(cycles))
    for line, (cycle, row) in enumerate(zip(cycles, own, strict=True)):
        for other, number in cycle.items():
            matrix[line, other] = float(Fraction(number, cycle[row]))
        gap = sum((number * values[other] for other, number in cycle.items()), Fraction(0))
        misclosure[line] = float(gap / cycle[row])
    _exchange(matrix, misclosure, own, u)
    return matrix / u[own][:, None], misclosure / u[own]


def _exchange(matrix: NDArray[Any], misclosure: NDArray[Any], own: list[int], u: NDArray[Any]) -> None:
    """Give each cycle, in place, an own row that is hardly less uncertain than the others in it.

    A row without uncertainty gives way to any that has some. Every exchange at least doubles the product of the own
    rows' uncertainties, so this ends.
    """
    import numpy as np

    others = u.copy()
    others[own] = 0.0
    exchanged = True
    while exchanged:
        exchanged = False
        # cycles whose own row has no uncertainty come first, before rounding can blur what they hold
        for line in sorted(range(len(own)), key=lambda line: float(u[own[line]])):
            reach = np.abs(matrix[line]) * others
            row = int(np.argmax(reach))
            if not reach[row] > _WIDER * u[own[line]]:
                continue
            exchanged = True
            pivot = float(matrix[line, row])
            matrix[line] /= pivot
            misclosure[line] /= pivot
            matrix[line, row] = 1.0
            multiples = matrix[:, row].copy()
            multiples[line] = 0.0
            changed = np.flatnonzero(multiples)
            matrix[changed] -= np.outer(multiples[changed], matrix[line])
            misclosure[changed] -= multiples[changed] * misclosure[line]
            matrix[changed, row] = 0.0
            others[own[line]], others[row] = u[own[line]], 0.0
            own[line] = row


def _without_exact(
    matrix: NDArray[Any], misclosure: NDArray[Any], factor: NDArray[Any]
) -> tuple[NDArray[Any], NDArray[Any], bool]:
    """The cycles combined so that none is exact, and whether an exact one does not close.

    Only rows that have a shared error and none of their own can cancel to an exact cycle.
    """
    import numpy as np

    left, sizes, _ = np.linalg.svd(matrix @ factor, full_matrices=False)
    kept = sizes > _NOTHING * float(sizes.max(initial=0.0))
    rest = left[:, ~kept].T @ misclosure
    contradiction = bool(np.any(np.abs(rest) > _NOTHING * np.linalg.norm(misclosure)))
    return left[:, kept].T @ matrix, left[:, kept].T @ misclosure, contradiction

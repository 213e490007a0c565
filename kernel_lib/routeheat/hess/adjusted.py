"""Adjusted heats as sums over the data that were measured, so that they know what they share with everything else.

May import: the other modules of :mod:`routeheat.hess`, :mod:`routeheat.chem`.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.row import Row
from routeheat.hess.adjust import Fit
from routeheat.hess.network import Network

if TYPE_CHECKING:
    from numpy.typing import NDArray

_FINEST = 2**60
_NOISE = 1e-14
"""Weights below this are rounding errors of the elimination."""


@dataclass(frozen=True, slots=True)
class AdjustedRow(Row):
    """A known row whose heat is the adjusted one; :attr:`heat` and :attr:`datum` still are what was typed."""

    adjusted: HeatSum = field(kw_only=True)
    """kJ per mole of reaction as written, over the measured data of all rows."""

    def heat_sum(self, k: float = 2.0) -> HeatSum | None:
        """The adjusted heat."""
        return HeatSum.total(((Fraction(1), self.adjusted),), k)


class Adjusted(Mapping[str, HeatSum]):
    """The adjusted heat of every row that takes part, by label; each sum is made when it is first asked for.

    Along every cycle the heats add up to exactly zero, value and coefficients alike, so it does not matter over which
    rows another heat is derived from them.
    """

    __slots__ = ("_dependent", "_fit", "_loadings", "_made", "_network", "_number", "_weights")

    def __init__(self, network: Network, numbered: list[str], fit: Fit | None) -> None:
        self._network = network
        self._fit = fit
        self._number = {label: index for index, label in enumerate(numbered)}
        self._made: dict[str, HeatSum] = {}
        self._weights: dict[str, list[int]] = {}
        self._dependent = _own_rows(network)
        self._loadings = _shared_loadings([network.heats[label] for label in numbered])

    def __getitem__(self, label: str) -> HeatSum:
        if label not in self._made:
            self._made[label] = self._make(label)
        return self._made[label]

    def __iter__(self) -> Iterator[str]:
        return iter(self._network.rows)

    def __len__(self) -> int:
        return len(self._network.rows)

    def value(self, label: str) -> float:
        """Adjusted heat in kJ/mol, without making its sum."""
        if self._fit is None or label not in self._number:
            return float(self._network.heats[label].exact)
        return float(self._fit.values[self._number[label]])

    def u(self, label: str) -> float:
        """Standard uncertainty of the adjusted heat in kJ/mol, without making its sum."""
        if self._fit is None or label not in self._number:
            return self._network.heats[label].u
        return float(self._fit.u[self._number[label]])

    def covariance(self) -> NDArray[Any]:
        """Full covariance in (kJ/mol)², rows and columns in the order of the mapping; symmetric."""
        import numpy as np

        _, errors = self.error_matrix()
        product = errors @ errors.T
        return np.asarray((product + product.T) / 2)

    def error_matrix(self) -> tuple[tuple[Datum, ...], NDArray[Any]]:
        """Independent measured data, and what one standard uncertainty of each does to every adjusted heat, in kJ/mol.

        Rows of the matrix are in the order of the mapping; the covariance is the matrix times its transpose.
        """
        import numpy as np

        heats = self._network.heats
        data = (
            *(heat.terms[0][0] for heat in heats.values()),
            *dict.fromkeys(datum for heat in heats.values() for datum, _ in heat.terms[1:]),
        )
        place = {datum: column for column, datum in enumerate(data)}
        line = {label: index for index, label in enumerate(heats)}
        matrix = np.zeros((len(heats), len(data)))
        for label, heat in heats.items():
            if label not in self._number:
                for datum, c in heat.terms:
                    matrix[line[label], place[datum]] = float(c * (datum.u or 0))
        if self._fit is not None:
            columns = [line[label] for label in self._number] + [place[datum] for datum in self._loadings]
            matrix[np.ix_([line[label] for label in self._number], columns)] = self._fit.errors
        return data, matrix

    def _make(self, label: str) -> HeatSum:
        if label not in self._number:
            return self._network.heats[label]
        weights, scale = self._whole_weights(label)
        measured = [self._network.heats[other] for other in self._number]
        used = [(weight, heat) for weight, heat in zip(weights, measured, strict=True) if weight]
        exact = sum((weight * heat.exact for weight, heat in used), Fraction(0))
        terms = [(heat.terms[0][0], Fraction(weight, scale)) for weight, heat in used]
        for datum, loadings in self._loadings.items():
            common = sum((weights[index] * loading for index, loading in loadings if weights[index]), Fraction(0))
            terms += [(datum, common / scale)] if common else []
        return HeatSum(exact / scale, tuple(terms), self._network.heats[label].k)

    def _whole_weights(self, label: str) -> tuple[list[int], int]:
        """Derivatives with respect to the measured heats, in the order of the fit, as numerators over one number."""
        cycle = self._dependent.get(label)
        if cycle is None:
            if label not in self._weights:
                assert self._fit is not None
                row = self._fit.weights[self._number[label]].tolist()
                self._weights[label] = [round(w * _FINEST) if abs(w) > _NOISE else 0 for w in row]
            return self._weights[label], _FINEST
        total = [0] * len(self._number)
        for other, number in cycle.items():
            if other != label:
                for index, weight in enumerate(self._whole_weights(other)[0]):
                    total[index] -= number * weight
        return total, cycle[label] * _FINEST


def _shared_loadings(heats: list[HeatSum]) -> dict[Datum, list[tuple[int, Fraction]]]:
    found: dict[Datum, list[tuple[int, Fraction]]] = {}
    for index, heat in enumerate(heats):
        for datum, loading in heat.terms[1:]:
            found.setdefault(datum, []).append((index, loading))
    return found


def _own_rows(network: Network) -> dict[str, Mapping[str, int]]:
    """One row for each cycle that no other cycle has, the most uncertain one: it follows from the other rows."""
    found: dict[str, int] = {}
    for cycle in network.cycles:
        for label in cycle:
            found[label] = found.get(label, 0) + 1
    own = {}
    for cycle in network.cycles:
        alone = [label for label in cycle if found[label] == 1]
        own[max(alone, key=lambda label: network.heats[label].variance)] = cycle
    return own

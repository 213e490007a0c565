"""Reconciliation: what known heats say together, and where they contradict each other.

All rows are adjusted at once by generalised least squares on the cycle space (numerics in
:mod:`routeheat.hess.adjust`; chemical networks: B. Ruscic et al., J. Phys. Chem. A 108 (2004) 9979). Contradictions are
never averaged away silently: below p = 0.01 there is no adjusted value until the user decides.
May import: the other modules of :mod:`routeheat.hess`, :mod:`routeheat.chem`, :mod:`routeheat.present`,
:mod:`routeheat.errors`.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Row, Rows
from routeheat.errors import RouteheatError
from routeheat.hess import reconcile_views
from routeheat.hess.adjust import Fit, adjust
from routeheat.hess.adjusted import Adjusted, AdjustedRow
from routeheat.hess.chi_square import upper_tail
from routeheat.hess.choices import Choice, choices
from routeheat.hess.combination import Combination, combine
from routeheat.hess.heating import HeatCapacities
from routeheat.hess.ledger import sum_text
from routeheat.hess.network import Network, network
from routeheat.hess.shortest import short_cycles
from routeheat.hess.warming import temperature_warning
from routeheat.present.numbers import reading
from routeheat.present.show import Shown
from routeheat.present.table import Table

if TYPE_CHECKING:
    from numpy.typing import NDArray

CONTRADICTION = 0.01
"""p of chi-square below which heats contradict each other."""
SEARCHED = 50_000
"""How many rows the search for short cycles may look at."""


@dataclass(frozen=True, slots=True)
class Cycle:
    """Rows that add up to no reaction at all: their heats should add up to zero."""

    terms: tuple[tuple[Row, int], ...]
    """Rows with whole coefficients."""
    misclosure: HeatSum
    """What the measured heats add up to, kJ/mol."""
    temperatures: str = ""
    """What the sum leaves out when the rows hold at different temperatures; empty when they do not."""

    @property
    def coefficients(self) -> dict[str, int]:
        """Whole coefficient of every row, by label."""
        return {row.label: number for row, number in self.terms}

    @property
    def u(self) -> float:
        """Standard uncertainty of the misclosure, kJ/mol."""
        return self.misclosure.u

    @property
    def closes(self) -> bool:
        """True when the misclosure is smaller than twice its standard uncertainty, or exactly zero."""
        gap = self.misclosure
        return gap.exact == 0 or gap.exact**2 < 4 * gap.variance

    @property
    def text(self) -> str:
        """``K2 + K7 − K9 should be 0, is 14.0 ± 5.0 (k = 1)``, in kJ/mol."""
        rows = sum_text([(row, Fraction(number)) for row, number in self.terms])
        return f"{rows} should be 0, is {reading(self.misclosure.reading)}"


@dataclass(frozen=True, slots=True)
class Suspect:
    """What leaving one row out does."""

    label: str
    gap: float
    """Typed heat − what all other rows say of it, kJ/mol."""
    gap_u: float
    """Standard uncertainty of that difference, kJ/mol."""
    chi2: float
    """Without the row."""
    dof: int
    """Without the row."""

    @property
    def p(self) -> float | None:
        """Without the row; ``None`` when then nothing is left to check."""
        return upper_tail(self.chi2, self.dof) if self.dof else None


@dataclass(frozen=True, slots=True, repr=False)
class Reconciled(Shown):
    """All known heats adjusted to each other, with what they say about each other."""

    network: Network
    adjusted: Adjusted | None
    """Adjusted heat of every row that takes part; ``None`` while a contradiction is not accepted."""
    chi2: float
    """Weighted sum of squared adjustments; infinite when heats without any uncertainty contradict each other."""
    dof: int
    """Degrees of freedom: number of independent cycles with an uncertain row."""
    p: float | None
    """Probability of a chi-square at least this large if all uncertainties are right; ``None`` without such a cycle."""
    cycles: tuple[Cycle, ...]
    """A basis of all cycles, smallest first."""
    residuals: Mapping[str, float | None]
    """(typed − adjusted) / its standard uncertainty; ``None`` for a row that no cycle checks."""
    suspects: tuple[Suspect, ...]
    """Rows by what leaving them out does, the most helpful first."""
    choices: tuple[Choice, ...]
    """What the user decided: accepted, excluded, widened, or classed."""
    known: Rows
    """All rows as given."""
    fitted: Adjusted = field(repr=False, compare=False)
    """As :attr:`adjusted`, also while a contradiction is not accepted; for tables of what is wrong, not for results."""
    k: float = 2.0
    """Coverage factor with which heats are printed."""

    @property
    def contradicts(self) -> bool:
        """True when the heats contradict each other: p below 0.01."""
        return self.p is not None and self.p < CONTRADICTION

    @property
    def birge(self) -> float | None:
        """Birge ratio √(χ²/dof) (R. T. Birge, Phys. Rev. 40 (1932) 207); ``None`` without an uncertain cycle."""
        return math.sqrt(self.chi2 / self.dof) if self.dof else None

    @property
    def labels(self) -> tuple[str, ...]:
        """Rows that take part, in the order of :attr:`covariance`."""
        return tuple(self.network.rows)

    @property
    def covariance(self) -> NDArray[Any] | None:
        """Covariance of the adjusted heats in (kJ/mol)²; ``None`` while there are none."""
        return None if self.adjusted is None else self.adjusted.covariance()

    @property
    def verdict(self) -> str:
        """In words: whether the heats agree, and what was decided about it."""
        return reconcile_views.verdict(self)

    def rows(self) -> Rows:
        """All rows but the excluded ones, those that take part with their adjusted heats.

        Raises :class:`~routeheat.errors.RouteheatError` while a contradiction is not accepted.
        """
        if self.adjusted is None:
            raise RouteheatError(self.verdict)
        excluded = {choice.label for choice in self.choices if choice.kind == "exclude"}
        rows: list[Row] = []
        for label, row in self.known.items():
            if label in self.adjusted:
                fields = {name: getattr(row, name) for name in Row.__slots__}
                rows.append(AdjustedRow(**fields, adjusted=self.adjusted[label]))
            elif label not in excluded:
                rows.append(row)
        return Rows(rows, self.k)

    def heat(self, target: Reaction | Row | Combination) -> HeatSum:
        """The heat of a reaction from the adjusted rows; it does not matter over which of them.

        Raises :class:`~routeheat.errors.RouteheatError` while a contradiction is not accepted, and
        :class:`~routeheat.errors.OutOfReach` when the rows do not give the reaction.
        """
        rows = self.rows()
        if isinstance(target, Combination):
            found = {label: c for label, c in target.coefficients.items() if label in rows}
            if len(found) < len(target.coefficients):
                return self.heat(target.target)
        else:
            found = combine(target, rows, k=self.k).coefficients
        heats = [(c, rows[label].heat_sum(self.k)) for label, c in found.items()]
        return HeatSum.total(((c, heat) for c, heat in heats if heat is not None), self.k)

    def tables(self) -> tuple[Table, ...]:
        """The rows, the cycles, and the suspects."""
        return reconcile_views.tables(self)

    def table(self) -> Table:
        """One line a row: typed, adjusted, residual, remark."""
        return reconcile_views.table(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content; heats in kJ/mol."""
        return reconcile_views.to_dict(self)


def reconcile(
    known: Mapping[str, Row],
    *,
    unstated: float | None = None,
    accept: str | None = None,
    exclude: Mapping[str, str] | None = None,
    widen: Mapping[str, float] | None = None,
    heat_capacities: HeatCapacities | None = None,
    k: float | None = None,
) -> Reconciled:
    """All known rows adjusted to each other.

    ``unstated``: standard uncertainty in kJ/mol for all rows that state none; without it, and without a line
    ``unstated u = … "reason"`` in the sheet, they do not take part.
    ``accept``: reason for which adjusted heats are wanted although the rows contradict each other (p < 0.01).
    ``exclude``: reason by label; ``widen``: factor on the own standard uncertainty by label. The keys ``accept``,
    ``exclude`` and ``widen`` of the rows say the same. ``heat_capacities`` size the effect of rows that hold at
    different temperatures. ``k`` is the coverage factor to print with; without it that of the known rows, else 2.

    Raises :class:`~routeheat.errors.RouteheatError` for a label that does not exist, a factor or an uncertainty that is
    not positive, and a contradiction accepted without a reason.
    """
    if k is None:
        k = known.k if isinstance(known, Rows) else 2.0
    made = choices(known, unstated=unstated, accept=accept, exclude=exclude or {}, widen=widen or {})
    net = network(
        known,
        k=k,
        unstated=next((choice.factor for choice in made if choice.kind == "class"), None),
        widen={choice.label: choice.factor for choice in made if choice.kind == "widen"},
        exclude={choice.label: choice.reason for choice in made if choice.kind == "exclude"},
    )
    numbered, fit = _fit(net)
    contradiction = bool(net.contradictions)
    chi2, dof = (0.0, 0) if fit is None else (fit.chi2, fit.dof)
    p = upper_tail(chi2, dof) if dof else None
    if contradiction:
        chi2, p = math.inf, 0.0
    fitted = Adjusted(net, numbered, fit)
    agreed = p is None or p >= CONTRADICTION
    accepted = any(choice.kind == "accept" for choice in made) and not math.isinf(chi2)
    return Reconciled(
        network=net,
        adjusted=fitted if agreed or accepted else None,
        chi2=chi2,
        dof=dof,
        p=p,
        cycles=_cycles(net, heat_capacities),
        residuals=_residuals(net, numbered, fit, fitted),
        suspects=_suspects(numbered, fit, dof),
        choices=made,
        known=Rows(known.values(), k, known.unstated if isinstance(known, Rows) else None),
        fitted=fitted,
        k=k,
    )


def _fit(net: Network) -> tuple[list[str], Fit | None]:
    """The fit of all rows in a cycle, and of those that share an error with others; ``None`` without a cycle."""
    if not net.cycles:
        return [], None
    in_cycle = {label for cycle in net.cycles for label in cycle}
    numbered = [label for label, heat in net.heats.items() if label in in_cycle or len(heat.terms) > 1]
    number = {label: index for index, label in enumerate(numbered)}
    common = list(dict.fromkeys(datum for label in numbered for datum, _ in net.heats[label].terms[1:]))
    own, shared = [], []
    for label in numbered:
        (datum, _), *rest = net.heats[label].terms
        loadings = dict(rest)
        own.append(float(datum.u or 0))
        shared.append([float(loadings.get(error, 0)) for error in common])
    values = [net.heats[label].exact for label in numbered]
    cycles = [{number[label]: c for label, c in cycle.items()} for cycle in net.cycles]
    return numbered, adjust(values, own, shared, cycles)


def _cycles(net: Network, heat_capacities: HeatCapacities | None) -> tuple[Cycle, ...]:
    basis = (*net.exact_cycles, *net.cycles)
    used = {label for cycle in basis for label in cycle}
    vectors = {label: net.vectors[label] for label in net.rows if label in used}
    found = []
    for coefficients in short_cycles(vectors, basis, budget=SEARCHED):
        terms = tuple((net.rows[label], coefficients[label]) for label in net.rows if label in coefficients)
        warning = temperature_warning(((row, Fraction(c)) for row, c in terms), heat_capacities=heat_capacities)
        found.append(Cycle(terms, net.misclosure(coefficients), warning))
    return tuple(sorted(found, key=lambda cycle: len(cycle.terms)))


def _residuals(net: Network, numbered: list[str], fit: Fit | None, fitted: Adjusted) -> dict[str, float | None]:
    found: dict[str, float | None] = dict.fromkeys(net.rows)
    if fit is not None:
        for index, label in enumerate(numbered):
            heat = net.heats[label]
            spread = float(fit.moved_u[index])
            if spread > 1e-9 * heat.u:
                found[label] = (float(heat.exact) - fitted.value(label)) / spread
    return found


def _suspects(numbered: list[str], fit: Fit | None, dof: int) -> tuple[Suspect, ...]:
    found = []
    if fit is not None and math.isfinite(fit.chi2):
        for index, label in enumerate(numbered):
            spread = float(fit.gap_u[index])
            if math.isfinite(spread):
                gap = float(fit.gap[index])
                left = max(fit.chi2 - (gap / spread) ** 2, 0.0)
                found.append(Suspect(label, gap, spread, left, dof - 1))
    # rows of one cycle explain it equally well; rounding must not decide between them
    return tuple(sorted(found, key=lambda suspect: float(f"{suspect.chi2:.6g}")))

"""What to measure next, for one heat that matters: a target, the total of a route, or the difference of two routes.

Knowing a heat c, of uncertainty u(c), to the uncertainty a afterwards changes the variance of a target t by rank one
(the update of J. Sherman, W. J. Morrison, Ann. Math. Stat. 21 (1950) 124, on the covariance):

    u'(t)² = u(t)² − cov(t, c)² (u(c)² − a²) / u(c)⁴

and a → 0 gives the least that a perfect measurement of c could leave. Nothing is solved again.
May import: the other modules of :mod:`routeheat.process`, :mod:`routeheat.hess`, :mod:`routeheat.chem`,
:mod:`routeheat.present`, :mod:`routeheat.errors`.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from routeheat.chem.heat import Contribution, Datum, HeatSum
from routeheat.chem.route import Route
from routeheat.chem.row import Row
from routeheat.errors import RouteheatError, UnknownName
from routeheat.hess.combination import Combination
from routeheat.hess.reconcile import Reconciled
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.process import next_measurement_views
from routeheat.process.candidates import Candidate, candidates
from routeheat.process.closure import significant
from routeheat.process.compare import Difference
from routeheat.process.profile import Profile

if TYPE_CHECKING:
    from numpy.typing import NDArray

CLEAR = 2.0
"""A difference is clear when it is at least this many times its standard uncertainty."""
_NOTHING = 1e-12
"""Part of the variance that counts as none: what rounding leaves where a perfect measurement removes it."""


@dataclass(frozen=True, slots=True)
class Effect:
    """What one measurement would do."""

    label: str
    """What is measured: a row, a step, ``formation of X``."""
    equation: str
    u_now: float | None
    """Standard uncertainty of that heat now, kJ/mol of reaction as written; ``None`` when not stated."""
    attainable: float
    """Standard uncertainty to which it would be known afterwards, kJ/mol of reaction as written."""
    u_after: float
    """Standard uncertainty of the target afterwards, in the unit of the target."""
    u_least: float
    """The same after a perfect measurement."""
    chance: float | None
    """Probability, as seen now, that the difference is clear afterwards; ``None`` when nothing is decided."""
    unstated: tuple[str, ...] = ()
    """Data of the target whose uncertainty is still not stated then: its uncertainties are lower bounds."""
    remark: str = ""


@dataclass(frozen=True, slots=True, repr=False)
class NextMeasurement(Shown):
    """What every single measurement would do to one heat, the most helpful first."""

    name: str
    """What matters: ``difference 2 − 1``, ``total of route A``, ``T``."""
    short: str
    """As in a sentence: ``difference``, ``total``, ``heat of T``."""
    heat: HeatSum
    """The heat as known now."""
    unit: str
    effects: tuple[Effect, ...]
    decides: bool
    """True for a difference: the question is whether it is clear, that is, at least twice its uncertainty."""
    unlinked: tuple[str, ...] = ()
    """Species that nothing known is linked to: measuring the formation of one of them alone changes nothing."""
    notes: tuple[str, ...] = ()
    k: float = 2.0
    """Coverage factor with which heats are printed."""

    @property
    def contributions(self) -> tuple[Contribution, ...]:
        """Which existing datum contributes how much of the variance now, largest first."""
        return self.heat.contributions

    @property
    def best(self) -> Effect | None:
        """The measurement that leaves the smallest uncertainty; ``None`` when none helps."""
        first = self.effects[0] if self.effects else None
        return first if first is not None and next_measurement_views.helps(self, first) else None

    @property
    def least(self) -> float:
        """The smallest uncertainty that any single measurement, however good, can leave."""
        return min((effect.u_least for effect in self.effects), default=self.heat.u)

    @property
    def sentence(self) -> str:
        """The answer in one sentence."""
        return next_measurement_views.sentence(self)

    def tables(self) -> tuple[Table, ...]:
        """Measurements, and what contributes now."""
        return self.table(), self.contribution_table()

    def table(self) -> Table:
        """One line a measurement, the most helpful first."""
        return next_measurement_views.table(self)

    def contribution_table(self) -> Table:
        """One line a datum: its share of the variance now."""
        return next_measurement_views.contribution_table(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return next_measurement_views.to_dict(self)


def next_measurement(
    target: Difference | Profile | Combination | HeatSum,
    *,
    attainable: float,
    known: Mapping[str, Row] | Reconciled | None = None,
    routes: Mapping[str, Route] | Iterable[Route] = (),
    attainable_for: Mapping[str, float] | None = None,
    name: str = "",
    unit: str = "kJ/mol",
    decides: bool = False,
) -> NextMeasurement:
    """What measuring each row of ``known``, each step of ``routes`` and each linked formation would do to ``target``.

    ``attainable`` is the standard uncertainty in kJ/mol of reaction as written to which a heat is known once it is
    measured, whatever was known before; ``attainable_for`` overrules it by label. A heat that is known better than that
    already gains nothing. ``known`` may be left out when the routes bring their own rows. ``name``, ``unit`` and
    ``decides`` describe a bare heat; a difference always decides. The unit of a difference is that of its comparison.

    Raises :class:`~routeheat.errors.RouteheatError` when the target has no number (steps not entered, unknowns), an
    attainable uncertainty is negative, or reconciled rows contradict each other without being accepted, and
    :class:`~routeheat.errors.UnknownName` for a label in ``attainable_for`` that is no candidate.
    """
    listed = list(routes.values()) if isinstance(routes, Mapping) else list(routes)
    title, short, heat, unit, decides = _read(target, name, unit, decides)
    if known is None:
        known = {label: row for route in listed for label, row in route.known.items()}
    found = candidates(known, listed, k=heat.k)
    labels = [candidate.label for candidate in found.listed]
    for label in attainable_for or {}:
        if label not in labels:
            raise UnknownName("measurement", label, labels)
    to = {label: (attainable_for or {}).get(label, attainable) for label in labels}
    if any(not value >= 0 for value in to.values()):
        raise RouteheatError("an attainable uncertainty is a number of kJ/mol, not negative")
    question = _Question(
        float(heat.exact),
        float(heat.variance),
        dict(heat.terms),
        heat.not_stated,
        found.error(heat),
        decides and significant(heat),
        decides,
    )
    effects = [question.effect(candidate, to[candidate.label]) for candidate in found.listed]
    if isinstance(target, Combination):
        effects.append(question.direct(target, attainable))
    # rounding must not decide the order between equals
    effects.sort(key=lambda item: (len(item.unstated), float(f"{item.u_after:.9g}"), float(f"{item.u_least:.9g}")))
    return NextMeasurement(title, short, heat, unit, tuple(effects), decides, found.unlinked, found.notes, heat.k)


def _read(
    target: Difference | Profile | Combination | HeatSum, name: str, unit: str, decides: bool
) -> tuple[str, str, HeatSum, str, bool]:
    if isinstance(target, Difference):
        if target.heat is None:
            raise RouteheatError(f"the difference {target.second} − {target.first} {target.verdict}")
        title, short, heat, decides = f"difference {target.second} − {target.first}", "difference", target.heat, True
    elif isinstance(target, Profile):
        if not target.complete:
            raise RouteheatError(f"route {target.route.name} has no total: not entered {', '.join(target.not_entered)}")
        title, short, heat, unit = f"total of route {target.route.name}", "total", target.total, target.unit
    elif isinstance(target, Combination):
        title, short, heat = target.name, f"heat of {target.name}", target.heat
    else:
        title, short, heat = name or "heat", name or "heat", target
    if heat.unknowns:
        raise RouteheatError(f"the {short} has no number: {', '.join(heat.unknowns)} unknown")
    return title, short, heat, unit, decides


@dataclass(frozen=True, slots=True)
class _Question:
    """The target, taken apart once for all candidates."""

    value: float
    variance: float
    """Of the part that is stated."""
    terms: Mapping[Datum, Fraction]
    not_stated: tuple[str, ...]
    error: NDArray[Any]
    """Over the data that candidates depend on."""
    clear: bool
    """Whether the difference is clear now."""
    decides: bool

    def effect(self, candidate: Candidate, attainable: float) -> Effect:
        """What measuring ``candidate`` would do."""
        before = self.variance
        if candidate.unstated:
            # alone, it has no other data that could be known better or worse than what is measured
            alone = len(candidate.unstated) == 1 and not candidate.error.any()
            added = float(self.terms.get(candidate.unstated[0], 0)) * attainable if alone else 0.0
            left = [name for name in self.not_stated if not alone or name != candidate.unstated[0].name]
            remark = "not stated now" if alone else "depends on data whose uncertainty is not stated"
            return self._made(candidate, None, attainable, before + added**2, before, tuple(left), remark)
        variance = float(candidate.error @ candidate.error)
        explained = float(candidate.error @ self.error) ** 2 / variance if variance else 0.0
        gain = max(1 - attainable**2 / variance, 0.0) if variance else 0.0
        remark = "exact already" if not variance else "" if gain else "known as well as that already"
        if explained <= _NOTHING * before:
            explained, remark = 0.0, "does not change it"
        return self._made(
            candidate,
            math.sqrt(variance),
            attainable,
            before - explained * gain,
            before - explained,
            self.not_stated,
            remark,
        )

    def direct(self, target: Combination, attainable: float) -> Effect:
        """What measuring the target reaction itself would do."""
        after = attainable**2 if self.not_stated else min(attainable**2, self.variance)
        itself = Candidate(f"{target.name} itself", target.target.text, self.error)
        u_now = None if self.not_stated else math.sqrt(self.variance)
        return self._made(itself, u_now, attainable, after, 0.0, (), "")

    def _made(
        self, candidate: Candidate, u_now: float | None, attainable: float, after: float, least: float,
        left: tuple[str, ...], remark: str,
    ) -> Effect:  # fmt: skip
        u_after, u_least = (math.sqrt(left) if left > _NOTHING * self.variance else 0.0 for left in (after, least))
        chance = self._chance(u_after) if self.decides and not self.not_stated else None
        return Effect(candidate.label, candidate.equation, u_now, attainable, u_after, u_least, chance, left, remark)

    def _chance(self, u_after: float) -> float:
        """Probability that the difference will be clear: its value afterwards is spread by √(u² − u'²) around today's.

        Preposterior analysis (H. Raiffa, R. Schlaifer, Applied Statistical Decision Theory, 1961, from memory).
        """
        needed = CLEAR * u_after
        spread = math.sqrt(max(self.variance - u_after**2, 0.0))
        if not spread:
            return 1.0 if self.clear else 0.0
        return _normal((self.value - needed) / spread) + _normal((-self.value - needed) / spread)


def _normal(x: float) -> float:
    return math.erfc(-x / math.sqrt(2)) / 2

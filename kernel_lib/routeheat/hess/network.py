"""The network that known rows form: measured heats with their uncertainties, and the cycles that check them.

A heat's error is its own (from ``±``) plus shared ones, such as the calibration of one calorimeter
(``shared "calorimeter A" 2 %``): relative, fully correlated between all rows that name it, and added to the own one.
May import: the other modules of :mod:`routeheat.hess`, :mod:`routeheat.notation`, :mod:`routeheat.chem`,
:mod:`routeheat.errors`.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from routeheat.chem.exact import Span
from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.row import Row
from routeheat.errors import RouteheatError
from routeheat.hess.numbering import Numbering
from routeheat.notation.quantity import COVERAGE_FACTORS

ESTIMATED = "it is an estimate: it neither checks measured heats nor is adjusted to them"
NOT_STATED = "its uncertainty is not stated: give one for all such rows as a class"
_NUMBER = r"[0-9]{1,6}(?:\.[0-9]{1,6})?"
_COMPONENT = re.compile(
    rf'\s*"(?P<name>[^"]+)"\s*(?P<size>{_NUMBER})\s*%'
    rf"(?:\s*\(\s*(?:k\s*=\s*(?P<k>{_NUMBER})|(?P<level>{_NUMBER})\s*%)\s*\))?\s*(?:,|$)"
)


@dataclass(frozen=True, slots=True)
class SharedComponent:
    """A relative error that all heats measured with one thing have in common."""

    name: str
    """What is shared, as typed: ``calorimeter A``."""
    relative: Fraction
    """Relative standard uncertainty, a fraction of the heat."""

    @property
    def datum(self) -> Datum:
        """The error as a datum, in units of its own standard uncertainty."""
        return Datum(self.name, "calibration", Fraction(0), Fraction(1))


def shared_components(row: Row, k: float) -> tuple[SharedComponent, ...]:
    """What ``shared "calorimeter A" 2 %`` of a row says; several are separated by commas.

    The percentage is read like any typed uncertainty: with the coverage factor ``k`` of the sheet, unless ``(k = 1)``
    or ``(95 %)`` stands behind it. Raises :class:`~routeheat.errors.RouteheatError` on anything else.
    """
    typed = row.setting("shared")
    if typed is None:
        return ()
    text = str(typed)
    found = []
    position = 0
    while position < len(text):
        match = _COMPONENT.match(text, position)
        level = Fraction(match["level"]) if match is not None and match["level"] else None
        if match is None or (level is not None and level not in COVERAGE_FACTORS) or match["k"] == "0":
            raise RouteheatError(f'{row.label}: shared {text[:60]} is not read; type shared "calorimeter A" 2 %')
        position = match.end()
        factor = COVERAGE_FACTORS[level] if level is not None else Fraction(match["k"] or repr(float(k)))
        found.append(SharedComponent(match["name"], Fraction(match["size"]) / 100 / factor))
    return tuple(found)


def measured_heat(row: Row, k: float, *, u: Fraction | None = None) -> HeatSum | None:
    """The typed heat of a row with its own and its shared errors; ``None`` when none is typed.

    ``u`` replaces the own standard uncertainty, in kJ per mole of reaction as written.
    """
    datum = row.datum
    if datum is None:
        return None
    own = HeatSum.of(datum if u is None else replace(datum, u=u), k=k)
    errors = [(component.datum, datum.value * component.relative) for component in shared_components(row, k)]
    return own + HeatSum(Fraction(0), tuple((error, size) for error, size in errors if size), k)


@dataclass(frozen=True, slots=True)
class Network:
    """Rows that can be checked against each other."""

    rows: Mapping[str, Row]
    """Rows that take part, in the order given; also those that no cycle checks."""
    heats: Mapping[str, HeatSum]
    """Measured heat of each, one own datum first, then shared ones."""
    left_out: Mapping[str, str]
    """Rows that do not take part, with the reason."""
    exact_cycles: tuple[Mapping[str, int], ...]
    """Integer cycles among rows without any uncertainty."""
    cycles: tuple[Mapping[str, int], ...]
    """Integer cycles that complete the basis; each has a row that no other of them has, and an uncertain row."""
    vectors: Mapping[str, Mapping[int, Fraction]]
    """Stoichiometric numbers of each row that takes part, over numbered species."""

    @property
    def contradictions(self) -> tuple[Mapping[str, int], ...]:
        """Cycles of rows without any uncertainty that do not close."""
        return tuple(cycle for cycle in self.exact_cycles if self.misclosure(cycle).exact)

    def misclosure(self, cycle: Mapping[str, int]) -> HeatSum:
        """``Σ coefficient · measured heat`` along a cycle; zero if the heats agree."""
        k = self.heats[next(iter(cycle))].k
        return HeatSum.total(((Fraction(number), self.heats[label]) for label, number in cycle.items()), k)


def network(
    known: Mapping[str, Row],
    *,
    k: float,
    unstated: Fraction | None = None,
    widen: Mapping[str, Fraction] | None = None,
    exclude: Mapping[str, str] | None = None,
) -> Network:
    """The network of all rows with a measured number for a heat and a stated uncertainty.

    ``unstated`` is the standard uncertainty in kJ/mol of rows that state none; without it they do not take part.
    ``widen`` multiplies own standard uncertainties, ``exclude`` leaves rows out.
    """
    numbering = Numbering()
    rows: dict[str, Row] = {}
    heats: dict[str, HeatSum] = {}
    left_out: dict[str, str] = {}
    for label, row in known.items():
        found = _heat(row, k, unstated, (widen or {}).get(label, Fraction(1)))
        reason = f"excluded: {exclude[label]}" if exclude and label in exclude else found
        if isinstance(reason, str):
            left_out[label] = reason
        elif isinstance(found, HeatSum):
            rows[label], heats[label] = row, found
    vectors = {label: numbering.vector(row.reaction) for label, row in rows.items()}
    certain = {label: vectors[label] for label, heat in heats.items() if not heat.variance}
    exact_cycles: list[dict[str, int]] = []
    span: Span[int, str] = Span()
    independent = dict(certain)
    for label, vector in certain.items():
        cycle = span.add(label, vector)
        if cycle is not None:
            exact_cycles.append(cycle)
            del independent[label]
    rest = {label: vectors[label] for label in rows if label not in certain or label in independent}
    return Network(rows, heats, left_out, tuple(exact_cycles), tuple(Span(rest).cycles), vectors)


def _heat(row: Row, k: float, unstated: Fraction | None, factor: Fraction) -> HeatSum | str:
    """The measured heat with the uncertainty to be used, or why there is none."""
    mixed = [species.text for species in row.reaction.species if species.in_mixture]
    if mixed:
        return f"{', '.join(mixed)} is in the reaction mixture: it never enters a Hess sum"
    if row.heat is None:
        return "no heat typed"
    if row.heat.amount is None:
        return f"its heat is the unknown {row.heat.symbol}"
    if row.estimated:
        return ESTIMATED
    try:
        datum = row.datum
        assert datum is not None
        u = datum.u if datum.u is not None else unstated
        if u is None:
            return NOT_STATED
        changed = None if datum.u is not None and factor == 1 else u * factor
        return measured_heat(row, k, u=changed) or "no heat typed"
    except (ValueError, RouteheatError) as problem:
        return str(problem)

"""Heats that could be measured next: every row again, every step, and the formation of every species.

Each is held as its error: what one standard uncertainty of every independent datum does to it.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from routeheat.chem.balance import formation
from routeheat.chem.exact import Span
from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.errors import RouteheatError
from routeheat.hess.numbering import Numbering
from routeheat.hess.reconcile import Reconciled
from routeheat.process.heats import molar_heat

if TYPE_CHECKING:
    from numpy.typing import NDArray

AMBIGUOUS = (
    "the known rows contain cycles and are not reconciled: what is known of a formation depends on the rows "
    "it is derived from"
)


@dataclass(frozen=True, slots=True)
class Candidate:
    """One heat that could be measured."""

    label: str
    """``K1``, ``A2``, or ``formation of NH3(g)``."""
    equation: str
    error: NDArray[Any]
    """What one standard uncertainty of each datum does to the heat, kJ/mol of reaction as written, shape (data,)."""
    unstated: tuple[Datum, ...] = ()
    """Data in it whose uncertainty is not stated."""


@dataclass(frozen=True, slots=True)
class Candidates:
    """All heats that could be measured, over one list of independent data."""

    columns: Mapping[Datum, int]
    """Place of each datum in an error."""
    listed: tuple[Candidate, ...]
    unlinked: tuple[str, ...]
    """Species that nothing known is linked to: measuring the formation of one of them alone changes nothing."""
    notes: tuple[str, ...] = ()

    def error(self, heat: HeatSum) -> NDArray[Any]:
        """The error of a heat over the data that candidates depend on; what other data do is left out."""
        return _error(heat, self.columns)


def candidates(known: Mapping[str, Row] | Reconciled, routes: Iterable[Route] = (), *, k: float = 2.0) -> Candidates:
    """Every known row, every step of ``routes``, and the formation of every species that ``known`` is linked to.

    Raises :class:`~routeheat.errors.RouteheatError` for rows that contradict each other and are not accepted.
    """
    import numpy as np

    adjusted, columns = _adjusted(known) if isinstance(known, Reconciled) else ({}, {})
    typed = {label: heat for label, row in _rows(known).items() if label not in adjusted and (heat := _typed(row, k))}
    rows = {label: row for label, row in _rows(known).items() if label in adjusted or label in typed}
    heats = dict(typed)
    equations = {label: row.reaction.text for label, row in rows.items()}
    steps = [(step, route) for route in routes for step in route.steps]
    for step, route in steps:
        heat = molar_heat(step, route.known, route.k).heat
        if heat is not None and not heat.unknowns and step.label not in equations:
            heats[step.label], equations[step.label] = heat, step.row.reaction.text
    for heat in heats.values():
        for datum, _ in heat.terms:
            columns.setdefault(datum, len(columns))
    errors = {label: np.pad(error, (0, len(columns) - len(error))) for label, error in adjusted.items()}
    errors |= {label: _error(heat, columns) for label, heat in heats.items()}
    unstated = {label: _unstated([heats[label]] if label in heats else []) for label in equations}
    listed = [Candidate(label, equations[label], errors[label], unstated[label]) for label in equations]
    reactions = [*(row.reaction for row in _rows(known).values()), *(step.row.reaction for step, _ in steps)]
    species = dict.fromkeys(item for reaction in reactions for item in reaction.species)
    found, unlinked, cycles = _formations(rows, errors, unstated, species)
    notes = (AMBIGUOUS,) if cycles and not isinstance(known, Reconciled) else ()
    return Candidates(columns, (*listed, *found), unlinked, notes)


def _rows(known: Mapping[str, Row] | Reconciled) -> Mapping[str, Row]:
    """The rows that count: all but those excluded from a reconciliation."""
    if not isinstance(known, Reconciled):
        return known
    excluded = {choice.label for choice in known.choices if choice.kind == "exclude"}
    return {label: row for label, row in known.known.items() if label not in excluded}


def _adjusted(known: Reconciled) -> tuple[dict[str, NDArray[Any]], dict[Datum, int]]:
    """The errors of adjusted heats over their data, straight from the fit, and the place of each datum."""
    if known.adjusted is None:
        raise RouteheatError(known.verdict)
    data, matrix = known.adjusted.error_matrix()
    return dict(zip(known.adjusted, matrix, strict=True)), {datum: column for column, datum in enumerate(data)}


def _typed(row: Row, k: float) -> HeatSum | None:
    try:
        heat = row.heat_sum(k)
    except ValueError:
        return None
    return None if heat is None or heat.unknowns else heat


def _error(heat: HeatSum, columns: Mapping[Datum, int]) -> NDArray[Any]:
    import numpy as np

    error = np.zeros(len(columns))
    for datum, c in heat.terms:
        if datum.u is not None and datum in columns:
            error[columns[datum]] = float(c * datum.u)
    return error


def _unstated(heats: Iterable[HeatSum]) -> tuple[Datum, ...]:
    return tuple(dict.fromkeys(datum for heat in heats for datum, _ in heat.terms if datum.u is None))


def _formations(
    rows: Mapping[str, Row],
    errors: Mapping[str, NDArray[Any]],
    unstated: Mapping[str, tuple[Datum, ...]],
    species: Iterable[Species],
) -> tuple[list[Candidate], tuple[str, ...], bool]:
    """Formations that the rows give, species whose formation they do not give, and whether the rows have cycles."""
    import numpy as np

    numbering = Numbering()
    pure = {label: row for label, row in rows.items() if not any(s.in_mixture for s in row.reaction.species)}
    span = Span({label: numbering.vector(row.reaction) for label, row in pure.items()})
    typed = {row.subject for row in rows.values() if row.kind == "formation"}
    found, unlinked = [], []
    for item in species:
        reaction = _formation(item)
        if reaction is None or item in typed:
            continue
        residual, combination = span.reduce(numbering.vector(reaction))
        if residual:
            unlinked.append(item.text)
            continue
        error = np.sum([float(c) * errors[label] for label, c in combination.items()], axis=0)
        open_data = dict.fromkeys(datum for label in combination for datum in unstated[label])
        found.append(Candidate(f"formation of {item}", reaction.text, error, tuple(open_data)))
    return found, tuple(unlinked), bool(span.cycles)


def _formation(species: Species) -> Reaction | None:
    """The formation, or ``None`` where it cannot be written: an element, an ion, an unknown formula, a mixture."""
    if species.in_mixture:
        return None
    try:
        return formation(species)
    except ValueError:
        return None

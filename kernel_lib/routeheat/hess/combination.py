"""Hess's law: the exact combinations of known rows that give a target, and the heat that follows.

``Σ c · row = target`` is solved in fractions over species; a species is a substance in a phase and a form, so isomers
that share a formula, or two phases, never close a cycle. Enthalpy is a state function, hence
``ΔrH(target) = Σ c · ΔrH(row)`` (G. H. Hess, Pogg. Ann. Phys. 50 (1840) 385; P. W. Atkins, J. de Paula, Physical
Chemistry, Hess's law).
May import: the other modules of :mod:`routeheat.hess`, :mod:`routeheat.chem`, :mod:`routeheat.present`,
:mod:`routeheat.units`, :mod:`routeheat.errors`.
"""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Any

from routeheat.chem.exact import presolve, solve
from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Row, Rows
from routeheat.errors import OutOfReach, UnitError
from routeheat.hess import ledger
from routeheat.hess.numbering import Numbering
from routeheat.hess.reach import explain
from routeheat.hess.shortest import Shortest, ranked, short_cycles
from routeheat.hess.shortest import alternatives as best_combinations
from routeheat.present.ladder import Ladder
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.units import KJ_PER_MOL


@dataclass(frozen=True, slots=True, repr=False)
class Combination(Shown):
    """One exact combination of known rows that gives the target, and all others through its cycles."""

    target: Reaction
    label: str
    """Label of the target (``T``); empty when a bare reaction was asked for."""
    terms: tuple[tuple[Row, Fraction], ...]
    """Rows used with their coefficients, in the order of the known rows; no coefficient is zero."""
    proved_shortest: bool
    """True when the search was complete: no combination comes before this one in the order of preference."""
    k: float = 2.0
    """Coverage factor with which the heat is printed."""
    pool: tuple[Row, ...] = field(default=(), compare=False, repr=False)
    """Rows that occur in some combination, in the order of the known rows."""
    loops: tuple[dict[str, int], ...] = field(default=(), compare=False, repr=False)
    """Any basis of the integer cycles among the rows of :attr:`pool`; :attr:`cycles` has short ones."""

    @property
    def name(self) -> str:
        """What the target is called in tables: its label, or ``target``."""
        return self.label or "target"

    @property
    def rows(self) -> tuple[Row, ...]:
        """The rows used, in the order of the known rows."""
        return tuple(row for row, _ in self.terms)

    @property
    def coefficients(self) -> dict[str, Fraction]:
        """Exact coefficient of every row used, by label."""
        return {row.label: c for row, c in self.terms}

    @property
    def unique(self) -> bool:
        """True when the target follows from the known rows in one way only."""
        return not self.loops

    @property
    def parameters(self) -> tuple[str, ...]:
        """Names of the free parameters of :attr:`family`: ``t1``, ``t2``, … one per cycle."""
        return tuple(f"t{index}" for index in range(1, len(self.loops) + 1))

    @property
    def cycles(self) -> tuple[dict[str, Fraction], ...]:
        """Integer combinations of known rows that change nothing, one behind each parameter, short ones first.

        Only cycles of rows that can replace one another in a combination giving the target are listed.
        """
        vectors = _vectors(Numbering(), _in_own_order(self.pool))
        found = short_cycles(vectors, self.loops)
        return tuple({r.label: Fraction(cycle[r.label]) for r in self.pool if r.label in cycle} for cycle in found)

    @property
    def family(self) -> dict[str, Any]:
        """Every combination: coefficient of each row as a sympy expression in :attr:`parameters`.

        Any values of the parameters give the target; zeros give this combination. Rows whose coefficient is zero for
        all values are left out.
        """
        import sympy

        def rational(value: Fraction) -> Any:
            return sympy.Rational(value.numerator, value.denominator)

        parts: dict[str, list[Any]] = {row.label: [] for row in self.pool}
        for label, c in self.coefficients.items():
            parts[label].append(rational(c))
        for parameter, cycle in zip(self.parameters, self.cycles, strict=True):
            for label, value in cycle.items():
                parts[label].append(rational(value) * sympy.Symbol(parameter))
        return {label: sympy.Add(*terms) for label, terms in parts.items() if terms}

    @property
    def heat(self) -> HeatSum:
        """``Σ c · ΔrH`` in kJ per mole of the target as written; symbolic unknowns stay symbolic."""
        return HeatSum.total(((Fraction(1), ledger.heat_of(row, c, self.k)) for row, c in self.terms), self.k)

    @property
    def ledger(self) -> Table:
        """The proof: species against scaled rows, with what cancels, and the heats in the last line."""
        return ledger.ledger(self.target, self.name, self.terms, self.heat)

    def tables(self) -> tuple[Table, ...]:
        """The table of rows and the ledger."""
        return self.table(), self.ledger

    def table(self) -> Table:
        """One line per row used: coefficient, scaled equation, heat, contribution, uncertainty, source."""
        table = ledger.row_table(self.target, self.name, self.terms, self.heat)
        return replace(table, notes=(*table.notes, self.standing))

    def ladder(self) -> Ladder:
        """Enthalpy diagram of the two ways: over the known rows, and direct."""
        return ledger.ladder(self.target, self.name, self.terms, self.heat)

    @property
    def standing(self) -> str:
        """In words: whether this is the only combination, and whether it is proved to be the shortest."""
        if self.unique:
            return "the only combination of the known rows"
        ways = f"not unique: {len(self.loops)} free parameter{'s' if len(self.loops) > 1 else ''}"
        return f"shortest combination, {ways}" if self.proved_shortest else f"not proved to be the shortest, {ways}"

    def to_dict(self) -> dict[str, Any]:
        """Plain data for JSON: fractions as strings, heats in kJ/mol."""
        heat = self.heat
        return {
            "label": self.label,
            "target": self.target.text,
            "coefficients": {label: str(c) for label, c in self.coefficients.items()},
            "unique": self.unique,
            "proved_shortest": self.proved_shortest,
            "parameters": list(self.parameters),
            "cycles": [{label: str(value) for label, value in cycle.items()} for cycle in self.cycles],
            "heat": {
                "value": None if heat.unknowns else float(heat.exact),
                "u": heat.u,
                "complete": heat.complete,
                "estimated": list(heat.estimated),
                "k": heat.k,
                "text": heat.text,
                "unit": "kJ/mol",
            },
        }


def combine(target: Reaction | Row, known: Mapping[str, Row] | Iterable[Row], *, k: float | None = None) -> Combination:
    """The preferred exact combination of known rows that gives ``target``.

    Preferred: fewest rows, then smallest ``Σ|c|``, then rows that come first in an order of their own: by equation as
    written, heat as written, source, and label (``K2`` before ``K10``). So the order in which the known rows are given
    never changes the result; only between rows that are alike in all but their label does the label decide.

    A row without a heat, and a row with a species in the reaction mixture (``sln``, or without a phase), is not used.
    Unbalanced rows are used as typed, and named in the notes. ``k`` is the coverage factor to print with; without it
    that of the known rows, else 2.

    Raises :class:`~routeheat.errors.OutOfReach` when no combination exists, saying why and what is missing, and
    ``ValueError`` when two known rows share a label.
    """
    rows = tuple(known.values() if isinstance(known, Mapping) else known)
    if len({row.label for row in rows}) != len(rows):
        raise ValueError("two known rows share a label")
    if k is None:
        k = known.k if isinstance(known, Rows) else 2.0
    reaction, label = (target.reaction, target.label) if isinstance(target, Row) else (target, "")
    mixed = [species.text for species in reaction.species if species.in_mixture]
    if mixed:
        raise OutOfReach(
            f"{label or 'the target'} contains {', '.join(mixed)} in the reaction mixture, whose composition is not "
            "stated: it never enters a Hess sum\ntype the phase, such as (l) or (aq), of every species of the target"
        )
    judged = [(row, _unfit(row)) for row in rows]
    usable = [row for row, reason in judged if not reason]
    numbering = Numbering()
    goal = numbering.vector(reaction)
    vectors = _vectors(numbering, usable)
    possible = set(presolve(vectors, goal))
    ordered = {row.label: vectors[row.label] for row in _in_own_order([r for r in usable if r.label in possible])}
    part = solve(ordered, goal)
    if part is None:
        raise explain(reaction, label, usable, [(row, reason) for row, reason in judged if reason])
    first = ranked(ordered, goal, part, 1)[0]
    relevant = set(part.relevant)
    pool = tuple(row for row in usable if row.label in relevant)
    whole = Combination(reaction, label, (), False, k, pool, part.cycles)
    return _chosen(whole, first)


def alternatives(combination: Combination, count: int = 10) -> tuple[Combination, ...]:
    """Up to ``count`` other combinations of independent rows, most preferred first; empty when it is unique."""
    if count < 1 or combination.unique:
        return ()
    numbering = Numbering()
    goal = numbering.vector(combination.target)
    found = best_combinations(_vectors(numbering, _in_own_order(combination.pool)), goal, count + 1)
    others = [item for item in found if item.coefficients != combination.coefficients]
    return tuple(_chosen(combination, item) for item in others[:count])


def _chosen(whole: Combination, item: Shortest[str]) -> Combination:
    terms = tuple((row, item.coefficients[row.label]) for row in whole.pool if row.label in item.coefficients)
    return replace(whole, terms=terms, proved_shortest=item.proved)


def _vectors(numbering: Numbering, rows: Iterable[Row]) -> dict[str, dict[int, Fraction]]:
    return {row.label: numbering.vector(row.reaction) for row in rows}


def _unfit(row: Row) -> str:
    """Why a row cannot be used; empty when it can."""
    if any(species.in_mixture for _, species in (*row.reaction.reactants, *row.reaction.products)):
        return "in the reaction mixture"
    if row.heat is None:
        return "no heat typed"
    if row.heat.analogue and row.heat.taken is None:
        return f"the heat of {row.heat.analogue}, which it is like, is not known"
    if row.heat.amount is not None and (row.heat.basis or row.heat.amount.unit != KJ_PER_MOL):
        try:
            row.heat.factor(row.reaction)
        except (ValueError, UnitError) as fault:
            return str(fault)
    return ""


def _in_own_order(rows: Sequence[Row]) -> list[Row]:
    """Rows in an order that does not depend on the order given."""

    def natural(label: str) -> list[tuple[int, str]]:
        return [(int(digits or 0), other) for digits, other in re.findall(r"([0-9]+)|([^0-9]+)", label)]

    texts = {row.label: row.reaction.text for row in rows}
    shared = Counter(texts.values())

    def key(row: Row) -> tuple[object, ...]:
        text = texts[row.label]
        if shared[text] == 1:
            return (text,)
        heat = row.heat.typed if row.heat is not None else ""
        return text, heat, row.source, natural(row.label), row.label

    return sorted(rows, key=key)

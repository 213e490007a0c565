"""Why no combination of the known rows gives a target, and what would have to be known.

A target outside the span of the rows changes some quantity ``Σ w · ν`` over species that no row changes (Fredholm
alternative). The sparsest such quantity is a shortest combination again, of species over the rows they take part in.
So is the smallest unmet balance: target minus a combination of rows, with the fewest species left over.
May import: :mod:`routeheat.chem.exact`, :mod:`routeheat.hess.shortest`, :mod:`routeheat.chem`,
:mod:`routeheat.present`, :mod:`routeheat.errors`.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import combinations
from typing import Literal

from routeheat.chem.balance import PHASE_CHANGES, completion, formation, imbalance_text
from routeheat.chem.exact import Span, Vector, primitive
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.errors import OutOfReach
from routeheat.hess.numbering import Numbering
from routeheat.hess.shortest import alternatives, shortest
from routeheat.present.numbers import MINUS, fraction
from routeheat.present.show import Shown
from routeheat.present.table import Column, Table

_MOST_REPAIRS = 3
_PHASE_ORDER = ("s", "cr", "am", "l", "g", "aq")


@dataclass(frozen=True, slots=True)
class Conserved:
    """A weighted sum of species amounts that no known row changes and the target does."""

    weights: tuple[tuple[Species, Fraction], ...]
    """Integer weights without a common divisor, none zero."""
    change: Fraction
    """What the target does to the sum, per mole of target as written; not zero."""

    @property
    def text(self) -> str:
        """The quantity in words."""
        names = [species.text for species, _ in self.weights]
        if len(names) == 1:
            return f"nothing known makes or uses {names[0]}"
        total = _weighted(self.weights)
        change = f"{'+' if self.change > 0 else MINUS}{fraction(abs(self.change))}"
        if all(weight > 0 for _, weight in self.weights):
            return f"the known rows never change the total of {total}, the target changes it by {change}"
        if [weight for _, weight in self.weights] in ([1, -1], [-1, 1]):
            return (
                f"the known rows make and use {names[0]} and {names[1]} only together ({total} stays the same), "
                f"the target changes {total} by {change}"
            )
        return f"the known rows never change {total}, the target changes it by {change}"

    def __str__(self) -> str:
        return self.text


@dataclass(frozen=True, slots=True)
class Missing:
    """A reaction whose heat, once known, brings the target within reach."""

    kind: Literal["phase change", "form", "reaction", "formation"]
    reaction: Reaction
    text: str
    """What it is, in words."""
    typed: tuple[str, ...]
    """What to type in the known section, without label and heat; several lines are needed together."""

    def __str__(self) -> str:
        return self.text


def explain(target: Reaction, label: str, rows: Sequence[Row], left_out: Sequence[tuple[Row, str]]) -> OutOfReach:
    """The error to raise for a target that is not a combination of ``rows``.

    ``left_out`` are known rows that could not be used, with the reason; one that has no heat may be what is missing.
    """
    gap = _Gap(target, rows)
    broken = gap.broken()
    lines = [f"no exact combination of the known rows gives {label or 'the target'}: {target.text}"]
    missing: tuple[Missing, ...] = ()
    if target.imbalance:
        hint = completion(target)
        lines.append(f"the target does not balance: {imbalance_text(target)}" + (f"; {hint}" if hint else ""))
    else:
        missing = gap.missing([row for row, _ in left_out if row.heat is None])
    others = [species.text for species in gap.absent if species != broken.weights[0][0]]
    lines.append(f"why: {broken.text}" + (f"; nor {', '.join(others)}" if gap.absent and others else ""))
    for item in missing:
        lines.append(f"missing: {item.text}")
        lines += [f"  type: {typed} | dH … kJ/mol" for typed in item.typed]
    if left_out:
        lines.append("not used: " + ", ".join(f"{row.label} ({reason})" for row, reason in left_out))
    return OutOfReach("\n".join(lines), broken, missing)


@dataclass(frozen=True, slots=True, repr=False)
class Refusal(Shown):
    """A target out of reach as a result that can be shown among others."""

    label: str
    target: Reaction
    reason: OutOfReach

    def table(self) -> Table:
        """The reason line by line: why, what is missing, what to type."""
        lines = [line.strip().partition(": ") for line in str(self.reason).splitlines()[1:]]
        rows = tuple((head, text) if text else ("", head) for head, _, text in lines)
        return Table(
            f"{self.label or 'target'}: {self.target.text}",
            (Column("what", ""), Column("text", "")),
            rows,
            ("out of reach: no exact combination of the known rows",),
        )


class _Gap:
    """A target and rows that do not reach it."""

    def __init__(self, target: Reaction, rows: Sequence[Row]) -> None:
        self.target = target
        self.numbering = Numbering()
        self.goal = self.numbering.vector(target)
        self.vectors = {row.label: self.numbering.vector(row.reaction) for row in rows}
        self.span: Span[int, str] = Span(self.vectors)
        self.residual = self.reduced(self.goal)
        others = [n for n in range(len(self.numbering.species)) if n not in self.goal]
        self.order = [*self.goal, *sorted(others, key=lambda n: self.numbering.species[n].text)]
        """Species of the target as typed, then all others by text."""
        known = {number for vector in self.vectors.values() for number in vector}
        self.absent = [self.numbering.species[number] for number in self.goal if number not in known]
        """Species that the target changes and no known row contains."""

    def reduced(self, vector: Vector[int]) -> dict[int, Fraction]:
        """What is left of a vector when the known rows are taken out; a linear function, zero for every known row."""
        return self.span.reduce(vector)[0]

    def closes(self, reaction: Reaction) -> bool:
        """True when the target is reached once ``reaction`` is known too."""
        left = self.reduced(self.numbering.vector(reaction))
        return bool(left) and not Span({0: left}).reduce(self.residual)[0]

    def broken(self) -> Conserved:
        """The conserved quantity with the fewest species."""
        takes_part: dict[int, dict[str | None, Fraction]] = {number: {} for number in self.order}
        for label, vector in (*self.vectors.items(), (None, self.goal)):
            for number, nu in vector.items():
                takes_part[number][label] = nu
        goal: dict[str | None, int] = {None: 1}
        found = shortest(takes_part, goal)
        assert found is not None
        whole, scale = primitive(found.coefficients)
        sign = 1 if next(iter(whole.values())) > 0 else -1
        weights = tuple((self.numbering.species[n], Fraction(sign * weight)) for n, weight in whole.items())
        return Conserved(weights, sign * scale)

    def missing(self, without_heat: Sequence[Row]) -> tuple[Missing, ...]:
        """Every repair found: typed rows without a heat, phase changes, the unmet balance, a formation."""
        found = [
            Missing(
                "reaction",
                row.reaction,
                f"the heat of {row.label}, {row.reaction.text}, would close it",
                (f"[{row.label}] {row.reaction.text}",),
            )
            for row in without_heat
            if not any(species.in_mixture for species in row.reaction.species) and self.closes(row.reaction)
        ]
        found += self.phase_changes()
        formations = self.formations()
        unmet = self.unmet()
        if not any(self.alike(item.reaction, unmet.reaction) for item in (*found, *formations)):
            # the target itself is an answer only when there is no other
            found += [unmet, *formations] if unmet.reaction != self.target else formations or ([] if found else [unmet])
        else:
            found += formations
        return tuple(found)

    def alike(self, a: Reaction, b: Reaction) -> bool:
        """True when one reaction is a multiple of the other."""
        return not Span({0: self.numbering.vector(a)}).reduce(self.numbering.vector(b))[0]

    def phase_changes(self) -> list[Missing]:
        """The fewest changes of phase or form, of species that occur, that close the gap."""
        substances: dict[Species, list[int]] = {}
        for number in self.order:
            species = self.numbering.species[number]
            substances.setdefault(replace(species, phase="", form=""), []).append(number)
        pairs: dict[tuple[int, int], dict[int, Fraction]] = {}
        for alike in substances.values():
            for a, b in combinations(sorted(alike, key=self.phase_place), 2):
                left = self.reduced({a: Fraction(-1), b: Fraction(1)})
                if left:
                    pairs[a, b] = left
        found = alternatives(pairs, self.residual, _MOST_REPAIRS)
        fewest = len(found[0].coefficients) if found else 0
        return [self.phase_repair(item.coefficients) for item in found if len(item.coefficients) == fewest]

    def phase_place(self, number: int) -> tuple[int, str]:
        """Sort key that puts fusion, vaporisation, sublimation and dissolution in their usual direction."""
        species = self.numbering.species[number]
        place = _PHASE_ORDER.index(species.phase) if species.phase in _PHASE_ORDER else len(_PHASE_ORDER)
        return place, species.text

    def phase_repair(self, coefficients: Mapping[tuple[int, int], Fraction]) -> Missing:
        """The changes of phase or form with those coefficients, as one missing reaction."""
        changes = [tuple(self.numbering.species[n] for n in pair) for pair in coefficients]
        only_forms = all(before.phase == after.phase for before, after in changes)
        net: dict[Species, Fraction] = {}
        single = len(changes) == 1
        for (before, after), c in zip(changes, coefficients.values(), strict=True):
            factor = Fraction(1) if single else c
            net[before] = net.get(before, Fraction(0)) - factor
            net[after] = net.get(after, Fraction(0)) + factor
        typed = tuple(_typed_change(before, after) for before, after in changes)
        shown = " together with ".join(f"{before} -> {after}" for before, after in changes)
        rows = " and ".join(f"`{line}`" for line in typed)
        text = f"{shown} would close it: add {'a row' if single else 'rows'} {rows}"
        return Missing("form" if only_forms else "phase change", Reaction.from_net(net), text, typed)

    def formations(self) -> list[Missing]:
        """The formation of the one species of the target that no known row contains, if that is enough."""
        if len(self.absent) != 1:
            return []
        try:
            reaction = formation(self.absent[0])
        except ValueError:
            return []
        if not self.closes(reaction):
            return []
        typed = f"formation of {self.absent[0]}"
        return [Missing("formation", reaction, f"{typed} would close it: {reaction.text}", (typed,))]

    def unmet(self) -> Missing:
        """Target minus a combination of rows: fewest species, then smallest coefficients; at most the target."""
        left = {number: self.reduced({number: Fraction(1)}) for number in self.order}
        found = shortest({number: vector for number, vector in left.items() if vector}, self.residual)
        assert found is not None
        balance: dict[int, Fraction] = found.coefficients
        one_sided = len({nu > 0 for nu in balance.values()}) == 1
        if one_sided or _size(balance) >= _size(self.goal):
            balance = self.goal
        # what the known rows deliver comes before what the target starts from
        order = [*(n for n in self.order if n not in self.goal), *self.goal]
        reaction = Reaction.from_net({self.numbering.species[n]: balance[n] for n in order if n in balance})
        if balance == self.goal:
            reaction = self.target
        return Missing("reaction", reaction, f"{reaction.text} would close it", (reaction.text,))


def _size(balance: Mapping[int, Fraction]) -> tuple[int, Fraction]:
    return len(balance), sum((abs(nu) for nu in balance.values()), Fraction(0))


def _typed_change(before: Species, after: Species) -> str:
    for name, (start, end) in PHASE_CHANGES.items():
        if (before.phase, after.phase) == (start, end) and not before.form and not after.form:
            return f"{name} of {before}"
    return f"{before} -> {after}"


def _weighted(weights: Sequence[tuple[Species, Fraction]]) -> str:
    text = ""
    for species, weight in weights:
        sign = (f" {MINUS} " if weight < 0 else " + ") if text else (MINUS if weight < 0 else "")
        text += sign + (f"{fraction(abs(weight))} " if abs(weight) != 1 else "") + species.text
    return text

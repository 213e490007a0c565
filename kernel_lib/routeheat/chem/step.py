"""A step: a row that is run in a route, with its yield, its charges and what leaves it."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from routeheat.chem.measured import Measured
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.units import PURE

OPERATIONS: tuple[str, ...] = ("crystallisation", "dissolution", "distillation")
"""Operations in which what is lost did not react: their heat counts only what came out, unless typed otherwise."""


@dataclass(frozen=True, slots=True)
class Recycle:
    """Part of a species that leaves a step and is used again here."""

    species: Species
    source: str
    """Label of the step it leaves."""
    part: Measured
    """Recovered part of what leaves, a fraction or per cent, with its uncertainty where stated."""


@dataclass(frozen=True, slots=True)
class Step:
    """One step of a route, as typed."""

    row: Row
    product: Species | None = None
    """Main product as typed; ``None`` leaves it to the route."""
    limiting: Species | None = None
    """Limiting reactant as typed; ``None`` leaves it to the route."""
    equivalents: tuple[tuple[Species, Fraction], ...] = ()
    """Multiples of the stoichiometric amount in which a species is charged."""
    yield_: Measured | None = None
    """Yield on the limiting reactant, a fraction or per cent; ``None`` counts as 100 %, and is named."""
    side_of: str = ""
    """Label of the step this row is a side row of (a quench, a scrubber); empty for a step of its own."""
    amount: Measured | None = None
    """For a side row: mol of this row as written, per mole of the parent's limiting reactant charged."""
    recycles: tuple[Recycle, ...] = ()
    loss: Literal["", "reacted", "unreacted"] = ""
    """Whether what the yield does not deliver has reacted; empty leaves it to the kind of step."""
    operation: str = ""
    """``crystallisation``, ``dissolution``, ``distillation``, ``equilibrium`` or empty."""
    temperature: Measured | None = None
    """Temperature the step runs at."""
    concentration: Measured | None = None
    """mol of limiting reactant per kg of reaction mixture."""
    heat_capacity: Measured | None = None
    """Specific heat capacity of the reaction mixture."""

    @property
    def label(self) -> str:
        """Label of the row."""
        return self.row.label

    @property
    def loss_counts(self) -> Literal["reacted", "unreacted"]:
        """``reacted``: heat per mole charged; ``unreacted``: heat only for what the yield delivers."""
        if self.loss:
            return self.loss
        physical = self.operation in (*OPERATIONS, "equilibrium") or self.row.reaction.reversible
        return "unreacted" if physical else "reacted"

    @property
    def yield_value(self) -> Fraction:
        """Yield as a fraction of 1; 1 when none is typed."""
        return Fraction(1) if self.yield_ is None else self.yield_.to(PURE)

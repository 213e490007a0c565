"""A route: steps in working order that make one species, and the sheet that holds routes, rows and targets."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from routeheat.chem.row import Row, Rows, Unstated
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import Fault


@dataclass(frozen=True, slots=True)
class Route:
    """One way to make a species. Working order is typed order."""

    name: str
    """Short name as typed behind ``route``: ``A``."""
    title: str
    """What a reader calls it; may be empty."""
    makes: Species
    """The species whose mole or kilogram totals are stated per."""
    steps: tuple[Step, ...]
    """Own steps, steps used from other routes, and side rows, in working order."""
    used: tuple[str, ...] = ()
    """Labels of the steps that are defined in another route (same label, same datum)."""
    known: Rows = field(default_factory=Rows)
    """The sheet's known rows, from which missing heats of steps are derived."""
    k: float = 2.0
    """Coverage factor with which results of this route are printed."""
    line: int = field(default=0, compare=False)

    def step(self, label: str) -> Step:
        """The step with that label; raises ``KeyError``."""
        for step in self.steps:
            if step.label == label:
                return step
        raise KeyError(label)

    @property
    def heading(self) -> str:
        """Name and title as a reader sees them: ``A, over the nitro compound``."""
        return f"{self.name}, {self.title}" if self.title else self.name


@dataclass(frozen=True, slots=True)
class Declaration:
    """A line of the species section."""

    species: Species
    """The declared species; its phase may be left to the equation."""
    title: str = ""
    """Full name as typed behind ``name``."""
    cas: str = ""
    """CAS Registry Number as typed, checked by its check digit."""
    settings: tuple[tuple[str, object], ...] = ()
    line: int = field(default=0, compare=False)


@dataclass(frozen=True, slots=True)
class Sheet:
    """Everything a route sheet says, as immutable objects."""

    coverage: Fraction | None
    """``k`` of the sheet's ``uncertainty`` line; ``None`` when the sheet has none and k = 2 is assumed."""
    species: Mapping[str, Declaration]
    """Declared species by name."""
    known: Rows
    targets: Mapping[str, Row]
    """Target reactions by label."""
    routes: Mapping[str, Route]
    """Routes by name."""
    notices: tuple[Fault, ...] = field(default=(), compare=False)
    """How doubtful things were read."""
    unstated: Unstated | None = None
    """The standard uncertainty of rows that state none, as a class; ``None`` when the sheet does not say."""

    @property
    def k(self) -> float:
        """Coverage factor with which results of this sheet are printed."""
        return float(self.coverage) if self.coverage is not None else 2.0

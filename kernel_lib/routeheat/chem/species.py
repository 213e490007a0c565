"""A species: a substance in a phase and a form. Equal composition never makes two species one."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.formula import Formula
from routeheat.present.markup import Rich, Run

PHASES: dict[str, str] = {
    "s": "solid",
    "cr": "crystalline solid",
    "am": "amorphous solid",
    "l": "liquid",
    "g": "gas",
    "aq": "in water; at infinite dilution unless a form says otherwise",
    "sln": "in the reaction mixture, composition unspecified",
}
"""State symbols that are read (IUPAC Green Book, 3rd ed., 2.10.1 (vi)), with their meaning here."""


@dataclass(frozen=True, slots=True)
class Species:
    """A substance in a phase (and form). Two species are the same only when every field is the same."""

    name: str
    """The declared name, or the formula as typed (element order and grouping kept)."""
    phase: str = ""
    """State symbol without brackets (``l``); empty when none is typed."""
    form: str = ""
    """Form within the phase (``graphite``, ``65 %``); empty for none. Bare ``aq`` is infinite dilution."""
    formula: Formula | None = None
    """Composition; ``None`` for a declared species of unknown formula: its balance cannot be checked."""
    declared: bool = False
    """True when the name comes from the species section."""
    molar_mass_typed: Fraction | None = None
    """Molar mass typed for a species without a formula, g/mol."""

    @property
    def state(self) -> str:
        """Phase and form as written behind the name: ``(s, graphite)``; empty when no phase is known."""
        if not self.phase:
            return ""
        return f"({self.phase}, {self.form})" if self.form else f"({self.phase})"

    @property
    def text(self) -> str:
        """The species as typed: ``H2O(l)``."""
        return self.name + self.state

    @property
    def rich(self) -> Rich:
        """The species as printed: formulas with subscripts, declared names as they are."""
        name: Rich = (Run(self.name),) if self.declared or self.formula is None else self.formula.rich
        return (*name, Run(self.state)) if self.state else name

    @property
    def molar_mass(self) -> Fraction | None:
        """Molar mass in g/mol; ``None`` when neither a formula nor a molar mass is known."""
        return self.formula.molar_mass if self.formula is not None else self.molar_mass_typed

    @property
    def in_mixture(self) -> bool:
        """True for ``(sln)`` and for no phase at all: it links steps but never enters a Hess sum."""
        return self.phase in ("sln", "")

    def __str__(self) -> str:
        return self.text

    def __hash__(self) -> int:
        # names and states tell nearly all species apart; hashing the fractions of a formula costs ten times as much
        return hash((self.name, self.phase, self.form))

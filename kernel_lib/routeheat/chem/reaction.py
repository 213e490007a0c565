"""A reaction: an exact signed sum of species.

Stoichiometric numbers are positive for products and negative for reactants (IUPAC Green Book, 3rd ed., 2.10.1).
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from routeheat.chem.species import Species
from routeheat.present.markup import Rich, join
from routeheat.present.numbers import fraction

Term = tuple[Fraction, Species]
CHARGE = "charge"
"""Key of the electric charge in a balance, beside the element symbols."""


@dataclass(frozen=True, slots=True)
class Reaction:
    """Reactants and products in typed order; a species may stand on both sides (a catalyst)."""

    reactants: tuple[Term, ...]
    """Pairs (coefficient > 0, species) left of the arrow."""
    products: tuple[Term, ...]
    """Pairs (coefficient > 0, species) right of the arrow."""
    reversible: bool = False
    """True when the arrow typed is an equilibrium arrow; arithmetic does not use it."""

    net: Mapping[Species, Fraction] = field(init=False, repr=False, compare=False)
    """Stoichiometric number of every species that does not cancel, in typed order."""

    def __post_init__(self) -> None:
        for coefficient, species in (*self.reactants, *self.products):
            if coefficient <= 0:
                raise ValueError(f"coefficient of {species} must be positive, is {coefficient}")
        # networks of hundreds of rows ask for it again and again, so it is made once, adding only where needed
        total: dict[Species, Fraction] = {}
        for coefficient, species in self.reactants:
            total[species] = total[species] - coefficient if species in total else -coefficient
        for coefficient, species in self.products:
            total[species] = total[species] + coefficient if species in total else coefficient
        object.__setattr__(self, "net", {species: nu for species, nu in total.items() if nu})

    @classmethod
    def from_net(cls, net: Mapping[Species, Fraction]) -> Reaction:
        """The reaction with the given stoichiometric numbers; zeros are left out."""
        return cls(
            tuple((-nu, species) for species, nu in net.items() if nu < 0),
            tuple((nu, species) for species, nu in net.items() if nu > 0),
        )

    @property
    def species(self) -> tuple[Species, ...]:
        """Every species once, in typed order."""
        return tuple(dict.fromkeys(species for _, species in (*self.reactants, *self.products)))

    @property
    def unchecked(self) -> tuple[Species, ...]:
        """Species of unknown formula: with any of them the balance cannot be checked."""
        return tuple(species for species in self.species if species.formula is None)

    @property
    def imbalance(self) -> dict[str, Fraction]:
        """Atoms (and charge) made minus used, for every element that does not balance; empty when balanced.

        Species of unknown formula are left out: look at :attr:`unchecked` too.
        """
        total: dict[str, Fraction] = {}
        for species, nu in self.net.items():
            if species.formula is None:
                continue
            for element, count in species.formula.counts:
                total[element] = total.get(element, Fraction(0)) + nu * count
            total[CHARGE] = total.get(CHARGE, Fraction(0)) + nu * species.formula.charge
        return {element: excess for element, excess in total.items() if excess}

    @property
    def balanced(self) -> bool:
        """True only when every formula is known and every element and the charge balance."""
        return not self.unchecked and not self.imbalance

    @property
    def gas_change(self) -> Fraction:
        """Stoichiometric numbers of the gases added up (Δν of gas per mole of reaction)."""
        return sum((nu for species, nu in self.net.items() if species.phase == "g"), Fraction(0))

    def scaled(self, factor: Fraction) -> Reaction:
        """The reaction run ``factor`` times; a negative factor reverses it."""
        if factor == 0:
            return Reaction((), ())
        left = tuple((abs(factor) * c, s) for c, s in self.reactants)
        right = tuple((abs(factor) * c, s) for c, s in self.products)
        return Reaction(left, right, self.reversible) if factor > 0 else Reaction(right, left, self.reversible)

    @property
    def text(self) -> str:
        """The reaction as it is typed: ``CH4(g) + 2 H2O(g) -> CO2(g) + 4 H2(g)``."""
        arrow = "<=>" if self.reversible else "->"

        def side(terms: Iterable[Term]) -> str:
            written = [(f"{c} " if c != 1 else "") + species.text for c, species in terms]
            return " + ".join(written) or "nothing"

        return f"{side(self.reactants)} {arrow} {side(self.products)}"

    @property
    def rich(self) -> Rich:
        """The reaction as it is printed, with subscripts and a true arrow."""

        def side(terms: Iterable[Term]) -> Rich:
            parts = [join([fraction(c) + " ", s.rich]) if c != 1 else s.rich for c, s in terms]
            return join(list(parts), " + ") or join(["nothing"])

        return join([side(self.reactants), " ⇌ " if self.reversible else " → ", side(self.products)])

    def __str__(self) -> str:
        return self.text


def add_net(parts: Iterable[tuple[Fraction, Reaction]]) -> dict[Species, Fraction]:
    """Stoichiometric numbers of ``Σ factor · reaction``; species that cancel are left out."""
    total: dict[Species, Fraction] = {}
    for factor, reaction in parts:
        for species, nu in reaction.net.items():
            total[species] = total.get(species, Fraction(0)) + factor * nu
    return {species: nu for species, nu in total.items() if nu}

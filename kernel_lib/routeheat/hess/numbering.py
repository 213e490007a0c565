"""Species by number, so that elimination works on small integers instead of whole records.

May import: :mod:`routeheat.chem`.
"""

from __future__ import annotations

from fractions import Fraction

from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species


class Numbering:
    """Gives every species a number; two species share one only when they are equal in every field."""

    __slots__ = ("_numbers", "species")

    def __init__(self) -> None:
        self.species: list[Species] = []
        """The species of each number."""
        self._numbers: dict[Species, int] = {}

    def number(self, species: Species) -> int:
        """The number of a species; a new one when it has none yet."""
        found = self._numbers.setdefault(species, len(self.species))
        if found == len(self.species):
            self.species.append(species)
        return found

    def vector(self, reaction: Reaction) -> dict[int, Fraction]:
        """Stoichiometric number of every species that does not cancel, in typed order."""
        return {self.number(species): nu for species, nu in reaction.net.items()}

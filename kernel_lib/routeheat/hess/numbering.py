"""Species by number, so that elimination works on small integers instead of whole records.

May import: :mod:`routeheat.chem`.
"""

from __future__ import annotations

from fractions import Fraction

from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species


class Numbering:
    """Gives every species a number; two species share one only when they are equal in every field."""

    __slots__ = ("_alike", "species")

    def __init__(self) -> None:
        self.species: list[Species] = []
        """The species of each number."""
        self._alike: dict[str, list[int]] = {}

    def number(self, species: Species) -> int:
        """The number of a species; a new one when it has none yet."""
        # the text is much cheaper to hash than the record; equality decides
        alike = self._alike.setdefault(species.text, [])
        for number in alike:
            if self.species[number] is species or self.species[number] == species:
                return number
        alike.append(len(self.species))
        self.species.append(species)
        return alike[-1]

    def vector(self, reaction: Reaction) -> dict[int, Fraction]:
        """Stoichiometric number of every species that does not cancel, in typed order."""
        total: dict[int, Fraction] = {}
        for side, terms in ((-1, reaction.reactants), (1, reaction.products)):
            for coefficient, species in terms:
                number = self.number(species)
                nu = coefficient if side > 0 else -coefficient
                total[number] = total[number] + nu if number in total else nu
        return {number: nu for number, nu in total.items() if nu}

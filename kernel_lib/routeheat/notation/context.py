"""What reading one sheet shares: names, the sheet's coverage factor, and everything found on the way."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TypeVar

from routeheat.chem.reaction import Reaction
from routeheat.errors import Fault
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.guesses import Guesses
from routeheat.notation.tokens import Piece, Trouble

_T = TypeVar("_T")


@dataclass(slots=True)
class Context:
    """Passed to every reader of an entry; faults and notices collect here."""

    reader: SpeciesReader
    sheet_k: Fraction
    """Coverage factor of a ``±`` that does not say its own."""
    faults: list[Fault] = field(default_factory=list)
    reaction: Reaction | None = None
    """The reaction of the row being read, for keys that name one of its species."""
    assumed: Piece | None = None
    """The first number whose ``±`` took the coverage factor of the sheet."""
    analogues: dict[str, Piece] = field(default_factory=dict)
    """Where each heat that is taken from another row was typed, by the label of the row that takes it."""

    @property
    def guesses(self) -> Guesses:
        """The budget of searches for repairs."""
        return self.reader.guesses

    def attempt(self, action: Callable[[], _T]) -> _T | None:
        """The result of ``action``, or ``None`` with its fault collected."""
        try:
            return action()
        except Trouble as trouble:
            self.faults.append(trouble.fault)
            return None

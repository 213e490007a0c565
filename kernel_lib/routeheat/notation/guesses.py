"""Repairs that are searched for, within a budget: a text full of faults must not take long to refuse."""

from __future__ import annotations

from collections.abc import Callable, Collection

from routeheat.errors import nearest

MOST_COMPARISONS = 6000
"""Names compared with misspelt names in one text; one completion of an equation counts as 100."""
COMPARISONS_OF_A_SEARCH = 100


class Guesses:
    """A budget of searches, shared by all readers of one text."""

    def __init__(self, budget: int = MOST_COMPARISONS) -> None:
        self.left = budget

    def nearest(self, name: str, choices: Collection[str]) -> str:
        """The choice that looks most like ``name``; empty when none is close or the budget is spent."""
        # comparing takes time with the square of the length
        return self.search(lambda: nearest(name, choices), len(choices) * (1 + len(name) ** 2 // 100))

    def search(self, action: Callable[[], str], cost: int = COMPARISONS_OF_A_SEARCH) -> str:
        """What ``action`` finds; empty when the budget does not allow for it."""
        if self.left < cost:
            return ""
        self.left -= cost
        return action()

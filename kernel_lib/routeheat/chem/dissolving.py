"""Reactions that follow from a name: dissolving, diluting and neutralising. Water that is only solvent takes no part.

The heat of such a row is per mole of the species it is named after. What a form says (``(aq, 10 H2O)``, ``(aq, 65 %)``)
is the composition of the solution; bare ``(aq)`` is infinite dilution (D. D. Wagman et al., J. Phys. Chem. Ref. Data 11
(1982) Suppl. 2, introduction, from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from routeheat.chem.balance import stoichiometry
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species

_UNDISSOLVED = ("s", "cr", "am", "l", "g")


def _is_same_substance(a: Species, b: Species) -> bool:
    return (a.name, a.formula, a.declared) == (b.name, b.formula, b.declared)


def _is_solution(species: Species) -> bool:
    """In water, or in a phase whose form says in what."""
    return species.phase == "aq" or (species.phase not in ("", "sln") and bool(species.form))


def solution(species: Species, products: Sequence[Species]) -> Reaction:
    """One mole of ``species`` → the dissolved ``products``: itself in solution, or its ions.

    Raises ``ValueError`` with a reason when it is dissolved already, a product is not in solution, or the products do
    not make it up in exactly one way.
    """
    if species.phase not in _UNDISSOLVED:
        raise ValueError(f"{species} does not say which pure substance is dissolved")
    wrong = next((item for item in products if not _is_solution(item)), None)
    if wrong is not None:
        raise ValueError(f"{wrong} is not in solution")
    if len(products) == 1 and _is_same_substance(species, products[0]):
        return Reaction(((Fraction(1), species),), ((Fraction(1), products[0]),))
    return _made_of([species], products, f"{species} does not dissolve to {_listed(products)} in exactly one way")


def dilution(start: Species, end: Species) -> Reaction:
    """One mole of a dissolved species from one composition of the solution to another.

    Raises ``ValueError`` with a reason when the two are not the same substance in two solutions.
    """
    wrong = next((item for item in (start, end) if not _is_solution(item)), None)
    if wrong is not None:
        raise ValueError(f"{wrong} is not in solution")
    if not _is_same_substance(start, end):
        raise ValueError(f"{start} and {end} are not the same substance")
    if start == end:
        raise ValueError(f"{start} stands on both sides: nothing is diluted")
    return Reaction(((Fraction(1), start),), ((Fraction(1), end),))


def neutralisation(first: Species, second: Species, products: Sequence[Species]) -> Reaction:
    """One mole of ``first`` and as much of ``second`` as it takes → the stated products, balanced.

    Raises ``ValueError`` with a reason when they do not balance in exactly one way.
    """
    return _made_of([first, second], products,
                    f"{first} with {second} does not neutralise to {_listed(products)} in exactly one way")  # fmt: skip


def _made_of(used: Sequence[Species], products: Sequence[Species], problem: str) -> Reaction:
    unknown = next((item for item in (*used, *products) if item.formula is None), None)
    if unknown is not None:
        raise ValueError(f"the formula of {unknown} is not known")
    numbers = stoichiometry([*used, *products])
    if numbers is None or any(numbers[item] >= 0 for item in used) or any(numbers[item] <= 0 for item in products):
        raise ValueError(problem)
    return Reaction(tuple((-numbers[item], item) for item in used), tuple((numbers[item], item) for item in products))


def _listed(products: Sequence[Species]) -> str:
    return ", ".join(item.text for item in products)

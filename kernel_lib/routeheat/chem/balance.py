"""Balancing: what is missing from a reaction, and reactions that follow from one species.

All of it is the null space of the matrix of elements (and charge) against species, found exactly.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction
from functools import cache
from itertools import combinations

from routeheat.chem.elements import elements
from routeheat.chem.exact import Span
from routeheat.chem.formula import read_formula
from routeheat.chem.reaction import CHARGE, Reaction
from routeheat.chem.species import Species
from routeheat.present.numbers import MINUS, fraction


def composition(species: Species) -> dict[str, Fraction]:
    """Atoms of each element and the charge of a species whose formula is known."""
    assert species.formula is not None
    counts = dict(species.formula.counts)
    if species.formula.charge:
        counts[CHARGE] = Fraction(species.formula.charge)
    return counts


def stoichiometry(species: Iterable[Species]) -> dict[Species, Fraction] | None:
    """Stoichiometric numbers that balance the species, when there is exactly one way; the first one is −1.

    ``None`` when they cannot be balanced, when there are several ways, or when a species would not take part.
    """
    listed = list(dict.fromkeys(species))
    if any(item.formula is None for item in listed):
        return None
    cycles = Span({item: composition(item) for item in listed}).cycles
    if len(cycles) != 1 or len(cycles[0]) != len(listed):
        return None
    first = cycles[0][listed[0]]
    return {item: Fraction(-cycles[0][item], first) for item in listed}


@cache
def _common() -> Sequence[Species]:
    """Small species that are often left out of an equation, in the order in which they are proposed."""
    texts = (
        ("H2O", "l"), ("HCl", "g"), ("H2", "g"), ("O2", "g"), ("CO2", "g"), ("N2", "g"), ("NH3", "g"), ("HBr", "g"),
        ("SO2", "g"), ("NaCl", "s"), ("NaBr", "s"), ("CO", "g"), ("HF", "g"), ("HI", "g"), ("CH4O", "l"),
        ("H^+", "aq"), ("OH^-", "aq"), ("Na^+", "aq"), ("Cl^-", "aq"),
    )  # fmt: skip
    return [Species(text, phase, "", read_formula(text)) for text, phase in texts]


def imbalance_text(reaction: Reaction) -> str:
    """What does not balance, as made minus used: ``H −4, O −2``."""
    return ", ".join(
        f"{element} {'+' if excess > 0 else MINUS}{fraction(abs(excess))}"
        for element, excess in reaction.imbalance.items()
    )


def completion(reaction: Reaction) -> str:
    """The smallest change that balances a reaction, in words; empty when none is found.

    Other coefficients for the species typed come first, then one common species added to a side, then two.
    """
    if reaction.unchecked:
        return ""
    rebalanced = _other_coefficients(reaction)
    if rebalanced is not None:
        return f"balanced: {rebalanced.text}"
    excess = reaction.imbalance
    present = {item.formula.text: item for item in reaction.species if item.formula is not None}
    candidates = [present.get(item.name, item) for item in _common()]
    for count in (1, 2):
        for chosen in combinations(candidates, count):
            span = Span({item: composition(item) for item in chosen})
            residual, numbers = span.reduce(excess)
            if not residual and len(numbers) == count:
                return "add " + " and ".join(
                    f"+ {_times(abs(n))}{item.text} on the {'left' if n > 0 else 'right'}"
                    for item, n in numbers.items()
                )
    return ""


def _times(number: Fraction) -> str:
    return "" if number == 1 else f"{number} "


def _other_coefficients(reaction: Reaction) -> Reaction | None:
    left = [species for _, species in reaction.reactants]
    right = [species for _, species in reaction.products]
    if set(left) & set(right):
        return None
    numbers = stoichiometry([*left, *right])
    if numbers is None or any(numbers[s] >= 0 for s in left) or any(numbers[s] <= 0 for s in right):
        return None
    scale = next(iter(reaction.reactants))[0]
    return Reaction.from_net({species: nu * scale for species, nu in numbers.items()})


def reference_species(symbol: str) -> Species | None:
    """The reference state of an element at 25 °C as a species (``H2(g)``); ``None`` where there is none."""
    element = elements().get(symbol)
    if element is None or not element.reference_state:
        return None
    name, _, state = element.reference_state.partition("(")
    phase, _, form = state.rstrip(")").partition(", ")
    return Species(name, phase, form, read_formula(name, declared=True))


def formation(species: Species) -> Reaction:
    """Reference states of the elements → one mole of ``species``.

    An aqueous ion is formed on the scale H^+(aq) = 0: H^+(aq) and H2(g) balance its charge, as in
    ``Na(s) + H^+(aq) -> Na^+(aq) + 1/2 H2(g)`` (CODATA Key Values: J. D. Cox, D. D. Wagman, V. A. Medvedev, 1989).

    Raises ``ValueError`` with a reason when the formula is unknown, an ion is not in water, an isotope is labelled, an
    element has no reference state here, or the formation is zero by definition.
    """
    if species.formula is None:
        raise ValueError(f"the formula of {species} is not known")
    charge = species.formula.charge
    if charge and species.phase != "aq":
        raise ValueError(f"{species} is an ion that is not in water: type its formation as an equation")
    hydrogen, proton = _hydrogen()
    net: dict[Species, Fraction] = {species: Fraction(1)}
    gas = Fraction(-charge)
    for symbol, count in species.formula.counts:
        reference = reference_species(symbol)
        if reference is None or reference.formula is None:
            raise ValueError(f"{symbol} has no reference state here: type the formation as an equation")
        if charge and reference == hydrogen:
            gas += count
            continue
        if reference == species:
            raise ValueError(f"{species} is the reference state of its element: its formation is zero, "
                             "and needs no row")  # fmt: skip
        net[reference] = -count / dict(reference.formula.counts)[symbol]
    if charge:
        if species == proton:
            raise ValueError(f"{species} is zero by definition, and needs no row")
        net |= {hydrogen: -gas / 2, proton: Fraction(-charge)}
    return Reaction.from_net(net)


@cache
def _hydrogen() -> tuple[Species, Species]:
    """H2(g) and H^+(aq)."""
    return Species("H2", "g", "", read_formula("H2")), Species("H^+", "aq", "", read_formula("H^+"))


def combustion(species: Species, products: Sequence[Species]) -> Reaction:
    """One mole of ``species`` + O2(g) → the stated products, balanced.

    Raises ``ValueError`` when the products do not fit the elements of the species, or leave a choice.
    """
    oxygen = Species("O2", "g", "", read_formula("O2"))
    if species.formula is None:
        raise ValueError(f"the formula of {species} is not known")
    unknown = [item for item in products if item.formula is None]
    if unknown:
        raise ValueError(f"the formula of {unknown[0]} is not known")
    numbers = stoichiometry([species, oxygen, *products])
    if numbers is None:
        made = {element for item in products for element in composition(item)}
        lost = [element for element in composition(species) if element not in made and element != "O"]
        listed = ", ".join(item.text for item in products)
        if lost:
            raise ValueError(f"no product of this combustion holds {', '.join(lost)}")
        raise ValueError(f"{species} with O2(g) does not burn to {listed} in exactly one way")
    wrong = [item for item in products if numbers[item] <= 0]
    if wrong or numbers[oxygen] >= 0:
        raise ValueError(f"{(wrong or [oxygen])[0]} stands on the wrong side of this combustion")
    return Reaction(
        ((Fraction(1), species), (-numbers[oxygen], oxygen)), tuple((numbers[item], item) for item in products)
    )


PHASE_CHANGES: dict[str, tuple[str, str]] = {
    "fusion": ("s", "l"),
    "vaporisation": ("l", "g"),
    "sublimation": ("s", "g"),
}
"""Phase before and after each named phase change (IUPAC Green Book, 3rd ed., 2.11.1 (i))."""


def phase_change(name: str, species: Species) -> Reaction:
    """One mole of ``species`` through the named phase change.

    Raises ``ValueError`` when the species stands in another phase than the change starts from.
    """
    before, after = PHASE_CHANGES[name]
    started = species.phase or before
    if started != before and not (before == "s" and started in ("cr", "am")):
        raise ValueError(f"{name} starts from ({before}), not from {species.state}")
    rest = (species.formula, species.declared, species.molar_mass_typed)
    start = Species(species.name, started, species.form, *rest)
    return Reaction(((Fraction(1), start),), ((Fraction(1), Species(species.name, after, "", *rest)),))

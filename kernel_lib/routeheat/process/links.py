"""Which step feeds which: main products, limiting reactants, what is charged and what leaves.

Only main products link steps. Every other species crosses the route's boundary unless it is recycled.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction

from routeheat.chem.route import Route
from routeheat.chem.species import Species
from routeheat.chem.step import Recycle, Step
from routeheat.errors import RouteError
from routeheat.units import MOL_PER_MOL, PURE


@dataclass(slots=True)
class Links:
    """The reading of one route; filled by :func:`routeheat.process.linking.read_links`, then only read."""

    route: Route
    product: dict[str, Species] = field(default_factory=dict)
    """Main product of every step that is no side row, by label."""
    limiting: dict[str, Species] = field(default_factory=dict)
    """Limiting reactant of every step and side row, by label."""
    maker: dict[Species, str] = field(default_factory=dict)
    """Label of the step that makes each main product."""
    faults: list[RouteError] = field(default_factory=list)
    """Everything that is wrong, in working order."""

    @property
    def main(self) -> tuple[Step, ...]:
        """The steps that are no side rows, in working order."""
        return tuple(step for step in self.route.steps if not step.side_of)

    @property
    def sides(self) -> tuple[Step, ...]:
        """The side rows, in working order."""
        return tuple(step for step in self.route.steps if step.side_of)

    @property
    def position(self) -> dict[str, int]:
        """Place of each step in working order, from 0."""
        return {step.label: place for place, step in enumerate(self.route.steps)}

    def incoming(self, step: Step) -> tuple[Species, ...]:
        """Reactants of ``step`` that an earlier step of the route makes, in typed order."""
        place = self.position
        return tuple(
            species
            for species in reactants(step)
            if species in self.maker and place[self.maker[species]] < place[step.label]
        )

    def leaves(self, step: Step, species: Species) -> tuple[Fraction, Fraction]:
        """What of ``species`` leaves ``step`` unused per run of it, as (a, b): a + b · yield, in mol.

        A by-product of a reacted loss leaves whole; of an unreacted loss only what the yield delivers. A reactant
        leaves as far as it is charged in excess or its loss has not reacted.
        """
        nu = step.row.reaction.net.get(species, Fraction(0))
        none = (Fraction(0), Fraction(0))
        if species == self.product.get(step.label):
            return none
        unreacted = step.loss_counts == "unreacted" and not step.side_of
        if nu > 0:
            return (Fraction(0), nu) if unreacted else (nu, Fraction(0))
        excess = charge(step, species) + nu if nu else charge(step, species)
        return (excess - nu, nu) if unreacted else (excess, Fraction(0))


def reactants(step: Step) -> tuple[Species, ...]:
    """Species that the step uses up (negative net number), in typed order."""
    return tuple(species for species, nu in step.row.reaction.net.items() if nu < 0)


def products(step: Step) -> tuple[Species, ...]:
    """Species that the step makes (positive net number), in typed order."""
    return tuple(species for species, nu in step.row.reaction.net.items() if nu > 0)


def charge(step: Step, species: Species) -> Fraction:
    """Moles of ``species`` charged per run of the step, with its equivalents.

    A species that cancels (a catalyst) is charged with the coefficient it is typed with.
    """
    nu = step.row.reaction.net.get(species, Fraction(0))
    if nu > 0:
        return Fraction(0)
    typed = sum((c for c, s in step.row.reaction.reactants if s == species), Fraction(0))
    return (-nu or typed) * dict(step.equivalents).get(species, Fraction(1))


def share(recycle: Recycle) -> Fraction:
    """Recovered part of a recycle as a fraction of 1."""
    return recycle.part.to(PURE)


def side_amount(step: Step) -> Fraction:
    """Runs of a side row per mole of its parent's limiting reactant charged."""
    assert step.amount is not None
    return step.amount.to(MOL_PER_MOL)


def same_substance(one: Species, other: Species) -> bool:
    """True when two species differ only in phase or form, as far as their names and formulas tell."""
    if one == other:
        return False
    if one.name == other.name:
        return True
    if one.declared == other.declared or one.formula is None or other.formula is None:
        return False
    return dict(one.formula.counts) == dict(other.formula.counts) and one.formula.charge == other.formula.charge


def recycles(user: Step, species: Species, source: Step | None = None) -> bool:
    """True when ``user`` takes ``species`` from a recycle (from ``source``, where given)."""
    return any(item.species == species and (source is None or item.source == source.label) for item in user.recycles)


def names(species: tuple[Species, ...] | list[Species], last: str = "or") -> str:
    """Species in words: ``A, B or C``."""
    texts = [item.text for item in species]
    return texts[0] if len(texts) == 1 else f"{', '.join(texts[:-1])} {last} {texts[-1]}" if texts else "nothing"

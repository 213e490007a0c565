"""What crosses the boundary of a route: what is bought and what leaves, in moles per mole of product."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.species import Species
from routeheat.process.extents import Extents, recycled
from routeheat.process.links import charge, reactants

Amounts = dict[Species, Fraction]


@dataclass(frozen=True, slots=True)
class Streams:
    """Species in and out of a route, mol per mol of product; exact. The product itself is in neither."""

    bought: Mapping[Species, Fraction]
    """Charged and not made by a step of the route, less what is recycled."""
    leaving: Mapping[Species, Fraction]
    """By-products, excess and what has not reacted, less what is recycled or taken up by a side row."""


def streams(found: Extents) -> Streams:
    """What is bought and what leaves.

    A side row takes first what leaves its parent (the excess it destroys, the gas it scrubs); the rest is bought. What
    a reacted loss has turned the main product into is not known and not listed.
    """
    links = found.links
    bought: Amounts = {}
    leaving: dict[str, Amounts] = {}
    for step in found.route.steps:
        runs = found[step.label]
        own: Amounts = {}
        for species in step.row.reaction.species:
            base, slope = links.leaves(step, species)
            amount = (base + slope * (1 if step.side_of else step.yield_value)) * runs
            if amount:
                own[species] = amount
        leaving[step.label] = own
    for step in links.main:
        for species in step.row.reaction.species:
            amount = charge(step, species) * found[step.label]
            if amount and species not in links.maker:
                bought[species] = bought.get(species, Fraction(0)) + amount
        for item in step.recycles:
            amount = recycled(found, item)
            leaving[item.source][item.species] -= amount
            if item.species not in links.maker:
                bought[item.species] -= amount
    for step in links.sides:
        parent = leaving[step.side_of]
        for species in reactants(step):
            need = charge(step, species) * found[step.label]
            taken = min(need, parent.get(species, Fraction(0)))
            if taken:
                parent[species] -= taken
            if need > taken:
                bought[species] = bought.get(species, Fraction(0)) + need - taken
    total: Amounts = {}
    for own in leaving.values():
        for species, amount in own.items():
            total[species] = total.get(species, Fraction(0)) + amount
    return Streams({s: n for s, n in bought.items() if n}, {s: n for s, n in total.items() if n})

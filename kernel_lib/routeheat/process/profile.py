"""The heat profile of a route: every step's heat on one basis of product, added up in working order."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Route
from routeheat.chem.row import Rows
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.present.ladder import Ladder
from routeheat.present.show import Shown
from routeheat.present.table import Reading, Table
from routeheat.process import profile_views
from routeheat.process.basis import Basis, read_basis
from routeheat.process.extents import Extents, extents, theoretical
from routeheat.process.heats import Loss, MolarHeat, adiabatic_rise, heat_on_basis, molar_heat
from routeheat.process.notes import profile_notes, yield_notes
from routeheat.process.streams import streams


@dataclass(frozen=True, slots=True)
class StepHeat:
    """One step or side row of a profile."""

    step: Step
    extent: Fraction
    """Runs of the row as written per mole of product."""
    charged: Fraction
    """Moles of the limiting reactant charged per mole of product."""
    limiting: Species
    product: Species | None
    """Main product; ``None`` for a side row."""
    molar: HeatSum | None
    """kJ per mole of reaction as written; ``None`` when not entered."""
    heat: HeatSum | None
    """On the basis of the profile, in its unit; ``None`` when not entered."""
    cumulative: HeatSum
    """Sum of the entered heats up to and with this one, in working order, side rows where they stand."""
    origin: str
    """``typed``, ``derived from known rows; …`` or ``not entered: …``."""
    temperature: Fraction | None
    """Kelvin the heat holds at; ``None`` when that is not stated."""
    adiabatic_rise: Reading | None
    """Kelvin, positive when exothermic, per mole charged; ``None`` without heat, concentration and heat capacity."""

    @property
    def label(self) -> str:
        """Label of the row."""
        return self.step.label

    @property
    def side(self) -> bool:
        """True for a side row (a quench, a scrubber)."""
        return bool(self.step.side_of)

    @property
    def counted_loss(self) -> Loss:
        """How the step's loss is counted; a side row has none and counts whole."""
        return "reacted" if self.side else self.step.loss_counts


@dataclass(frozen=True, slots=True, repr=False)
class Profile(Shown):
    """Heats of a route on one basis. They are sums of what was entered, after yields: not state functions."""

    route: Route
    basis: Basis
    steps: tuple[StepHeat, ...]
    """Steps and side rows in working order."""
    total: HeatSum
    """Sum of all entered heats, side rows included; only a total when :attr:`complete`."""
    side_total: HeatSum
    """Sum of the entered heats of side rows alone."""
    chain: tuple[str, ...]
    """Labels of the longest chain of steps, whose yields multiply to :attr:`overall_yield`."""
    yield_on_first_reactant: Fraction | None
    """Product made over what the limiting reactant of the chain's first step could make; excess lowers it.

    ``None`` when main products run in a circle that only a recycle opens."""
    bought: Mapping[Species, Fraction]
    """mol charged from outside per mol of product."""
    leaving: Mapping[Species, Fraction]
    """mol leaving the route per mol of product, the product itself aside."""
    found: Extents
    """The extents, with their derivatives."""

    @property
    def per(self) -> str:
        """The basis as typed: ``mol``, ``kg``, ``12 kg``."""
        return self.basis.text

    @property
    def unit(self) -> str:
        """Unit of the heats: ``kJ/mol``, ``kJ/kg``, or ``kJ`` for a batch."""
        return self.basis.unit

    @property
    def k(self) -> float:
        """Coverage factor of every printed uncertainty."""
        return self.route.k

    @property
    def not_entered(self) -> tuple[str, ...]:
        """Labels of the rows without a heat."""
        return tuple(item.label for item in self.steps if item.heat is None)

    @property
    def complete(self) -> bool:
        """True when every row has a heat, so that the sum may be called a total."""
        return not self.not_entered

    @property
    def overall_yield(self) -> Fraction:
        """Product of the yields along the longest chain; exact. Excess and recycles do not enter."""
        product = Fraction(1)
        for label in self.chain:
            product *= self.route.step(label).yield_value
        return product

    @property
    def largest_exotherm(self) -> StepHeat | None:
        """The row that releases most heat on the basis; ``None`` when no entered number is negative."""
        numbers = [(item.heat.exact, item) for item in self.steps if item.heat is not None and not item.heat.unknowns]
        exact, largest = min(numbers, key=lambda pair: pair[0], default=(Fraction(0), None))
        return largest if exact < 0 else None

    @property
    def yield_notes(self) -> tuple[str, ...]:
        """Which yields are not typed, and which uncertainties of yields and recycles are not included."""
        return yield_notes(self)

    @property
    def notes(self) -> tuple[str, ...]:
        """Everything a reader must see with the numbers."""
        return profile_notes(self)

    def total_if(self, loss: Loss) -> HeatSum:
        """The sum when the loss of every step counts as ``reacted`` or ``unreacted``; extents stay as they are."""
        parts = [
            (Fraction(1), heat_on_basis(self.found, item.step, item.molar, self.basis.moles, loss))
            for item in self.steps
            if item.molar is not None
        ]
        return replace(HeatSum.total(parts, self.k), unit=self.basis.unit)

    def __getitem__(self, label: str) -> StepHeat:
        """The row with that label; raises ``KeyError``."""
        for item in self.steps:
            if item.label == label:
                return item
        raise KeyError(label)

    def table(self) -> Table:
        """Steps in working order, side rows below a subtotal, the total last."""
        return profile_views.table(self)

    def ladder(self) -> Ladder:
        """Cumulative levels in working order; a whisker is the cumulative uncertainty at each head."""
        return profile_views.ladder(self)

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content; exact numbers are texts such as ``3/2``."""
        return profile_views.to_dict(self)


def profile(route: Route, *, per: Any = "mol", known: Rows | None = None) -> Profile:
    """The heat of every step of ``route`` per mole of product, per kilogram, or per batch, after all yields.

    ``per`` is ``mol``, ``kg``, a batch such as ``12 kg`` or ``3 mol``, or a pint quantity; it counts the species the
    route makes. ``known`` takes the place of the sheet's known rows, from which heats that are not typed are derived
    (reconciled rows, say). Raises :class:`~routeheat.errors.RouteError` when the route cannot be run as typed and
    :class:`~routeheat.errors.UnitError` for an unusable basis.
    """
    if known is not None:
        route = replace(route, known=known)
    basis = read_basis(per, route.makes)
    found = extents(route)
    items: list[StepHeat] = []
    cumulative = HeatSum.zero(route.k)
    for step in route.steps:
        molar = molar_heat(step, route.known, route.k)
        items.append(_step_heat(found, step, molar, basis, cumulative))
        cumulative = items[-1].cumulative
    side_parts = [(Fraction(1), item.heat) for item in items if item.side and item.heat is not None]
    flows = streams(found)
    chain = _longest_chain(found)
    return Profile(
        route=route,
        basis=basis,
        steps=tuple(items),
        total=cumulative,
        side_total=HeatSum.total(side_parts, route.k),
        chain=chain,
        yield_on_first_reactant=_yield_on_first(found, chain[0]),
        bought=flows.bought,
        leaving=flows.leaving,
        found=found,
    )


def _step_heat(found: Extents, step: Step, molar: MolarHeat, basis: Basis, before: HeatSum) -> StepHeat:
    k = found.route.k
    loss: Loss = "reacted" if step.side_of else step.loss_counts
    heat = None if molar.heat is None else heat_on_basis(found, step, molar.heat, basis.moles, loss)
    heat = None if heat is None else replace(heat, unit=basis.unit)
    return StepHeat(
        step=step,
        extent=found[step.label],
        charged=found.charged(step.label),
        limiting=found.links.limiting[step.label],
        product=found.links.product.get(step.label),
        molar=molar.heat,
        heat=heat,
        cumulative=before if heat is None else before + heat,
        origin=molar.origin,
        temperature=molar.temperature,
        adiabatic_rise=adiabatic_rise(found, step, molar.heat, k),
    )


def _longest_chain(found: Extents) -> tuple[str, ...]:
    """The most steps that feed one another, ending at the product; of equal chains the one typed first."""
    links = found.links
    place = links.position
    best: dict[str, tuple[str, ...]] = {}
    for step in links.main:
        before = [best[links.maker[species]] for species in links.incoming(step)]
        longest = min(before, key=lambda chain: (-len(chain), place[chain[0]]), default=())
        best[step.label] = (*longest, step.label)
    return best[links.maker[found.route.makes]]


def _yield_on_first(found: Extents, first: str) -> Fraction | None:
    try:
        return theoretical(found.links)[first] / found[first]
    except RouteError:
        return None

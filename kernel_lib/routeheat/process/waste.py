"""Waste: atom economy, E factor, process mass intensity and reaction mass efficiency, per step and for the whole.

Every figure states its boundary; figures with different boundaries are never compared.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Any, Literal

from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route
from routeheat.chem.species import Species
from routeheat.errors import RouteError
from routeheat.present.show import Shown
from routeheat.present.table import Cell, Column, Table
from routeheat.process.assessed import NotAssessed
from routeheat.process.cautions import WASTE
from routeheat.process.charges import Charge, Charges, charges
from routeheat.process.extents import net_equation
from routeheat.process.links import charge
from routeheat.process.profile import Profile, StepHeat, profile
from routeheat.process.settings import Settings

Count = Literal["in", "out"]


def atom_economy(product: float, reactants: float) -> float:
    """Per cent, 100 ν M(product)/Σ ν M(reactants); masses by stoichiometry, the product not among the reactants.

    B. M. Trost, Science 254 (1991) 1471.
    """
    return 100 * product / reactants


def mass_intensity(inputs: float, product: float) -> float:
    """Process mass intensity, mass of all inputs over mass of product (same unit)."""
    return inputs / product


def e_factor(inputs: float, product: float) -> float:
    """Mass of waste over mass of product, (inputs − product)/product = PMI − 1 with the same boundary.

    R. A. Sheldon, Green Chem. 9 (2007) 1273 (from memory, check).
    """
    return (inputs - product) / product


def mass_efficiency(product: float, reactants: float) -> float:
    """Reaction mass efficiency in per cent, 100 m(product)/Σ m(reactants charged).

    D. J. C. Constable, A. D. Curzons, V. L. Cunningham, Green Chem. 4 (2002) 521.
    """
    return 100 * product / reactants


@dataclass(frozen=True, slots=True)
class Boundary:
    """What the inputs of a figure count."""

    water: Count = "in"
    side_rows: Count = "in"
    charged: Literal["all that is charged", "reactants of the equations only", "mixed"] = "all that is charged"
    """Whether solvents and auxiliaries are stated (``charges …``) for every step, for none, or for some."""

    @property
    def text(self) -> str:
        """In words."""
        return f"{self.charged}; water {self.water}; side rows {self.side_rows}; recycles taken off"


@dataclass(frozen=True, slots=True)
class Metrics:
    """The figures of a step or of a whole route."""

    label: str
    atom_economy: float | NotAssessed
    """Per cent."""
    pmi: float | NotAssessed
    """kg of inputs per kg of product."""
    e_factor: float | NotAssessed
    """kg of waste per kg of product."""
    rme: float | NotAssessed
    """Per cent."""
    boundary: Boundary

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        names = ("atom_economy", "pmi", "e_factor", "rme")
        figures = {name: getattr(self, name) for name in names}
        return {
            "label": self.label,
            **{name: item.to_dict() if isinstance(item, NotAssessed) else item for name, item in figures.items()},
            "boundary": self.boundary.text,
        }


@dataclass(frozen=True, slots=True)
class Waste(Shown):
    """The waste figures of a route, per step and for the whole."""

    route: str
    product: Species
    steps: tuple[Metrics, ...]
    """Per kg of each step's own product; incoming intermediates are inputs."""
    whole: Metrics
    """Per kg of what the route makes, after all yields, branches included; intermediates are not inputs."""

    @property
    def boundary(self) -> Boundary:
        """Boundary of the figures of the whole."""
        return self.whole.boundary

    def table(self) -> Table:
        """One row a step, the whole last."""
        columns = (
            Column("step", "Step"),
            Column("atom_economy", "Atom economy", "%", "right", 1),
            Column("rme", "RME", "%", "right", 1),
            Column("pmi", "PMI", "kg/kg", "right", 2),
            Column("e_factor", "E factor", "kg/kg", "right", 2),
            Column("charged", "Inputs counted"),
        )
        rows = tuple(_row(item) for item in (*self.steps, self.whole))
        notes = (
            f"boundary of the whole: {self.boundary.text}",
            "a step counts what is charged to it, intermediates included; the whole counts what is bought",
            WASTE,
        )
        return Table(
            f"Waste of route {self.route}, per kg of {self.product}", columns, rows, notes, frozenset([len(rows) - 1])
        )

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "route": self.route,
            "product": self.product.text,
            "steps": [item.to_dict() for item in self.steps],
            "whole": self.whole.to_dict(),
        }


def _row(item: Metrics) -> tuple[Cell, ...]:
    figures = (item.atom_economy, item.rme, item.pmi, item.e_factor)
    return (item.label, *(f.text if isinstance(f, NotAssessed) else f for f in figures), item.boundary.charged)


def pmi_difference(first: Waste, second: Waste) -> float | NotAssessed:
    """PMI of the second route minus that of the first; refused between boundaries or products that differ."""
    what = "PMI not compared"
    if first.product != second.product:
        return NotAssessed(what, reason=f"{first.route} makes {first.product}, {second.route} makes {second.product}")
    if first.boundary != second.boundary:
        return NotAssessed(what, reason=f"different boundaries: {first.boundary.text} / {second.boundary.text}")
    if isinstance(first.whole.pmi, NotAssessed):
        return first.whole.pmi
    return second.whole.pmi if isinstance(second.whole.pmi, NotAssessed) else second.whole.pmi - first.whole.pmi


def waste(route: Route | Profile, *, water: Count = "in", side_rows: Count = "in") -> Waste:
    """Atom economy, E factor, PMI and RME of every step and of the whole route.

    ``water`` and ``side_rows`` set the boundary. Raises :class:`~routeheat.errors.RouteError` when the route cannot be
    run as typed or a step's charges cannot be read.
    """
    if water not in ("in", "out") or side_rows not in ("in", "out"):
        raise ValueError("water and side_rows are 'in' or 'out'")
    typed = route.route if isinstance(route, Profile) else route
    if side_rows == "out":
        typed = replace(typed, steps=tuple(step for step in typed.steps if not step.side_of))
    found = profile(typed)
    listed = list(found.steps)
    charged = {item.label: charges(item.step, Settings(item.step.row.settings), item.limiting) for item in listed}
    boundary = Boundary(water, side_rows)
    steps = tuple(_step(item, charged[item.label], boundary) for item in listed if not item.side)
    whole = _whole(found, listed, charged, replace(boundary, charged=_stated(charged.values())))
    return Waste(found.route.name, found.route.makes, steps, whole)


def _stated(lists: Iterable[Charges]) -> Literal["all that is charged", "reactants of the equations only", "mixed"]:
    stated = {item.stated for item in lists}
    if stated == {True}:
        return "all that is charged"
    return "mixed" if len(stated) > 1 else "reactants of the equations only"


def _mass(species: Species | None) -> float | None:
    mass = None if species is None else species.molar_mass
    return None if mass is None else float(mass) / 1000


def _economy(reaction: Reaction, product: Species | None) -> float | NotAssessed:
    what = "no atom economy"
    net = reaction.net
    if product is None or _mass(product) is None:
        return NotAssessed(what, ("molar mass of the product",))
    unknown = tuple(s.text for s, nu in net.items() if nu < 0 and _mass(s) is None)
    if unknown:
        return NotAssessed(what, tuple(f"molar mass of {text}" for text in unknown))
    used = sum(-float(nu) * (_mass(s) or 0.0) for s, nu in net.items() if nu < 0)
    return atom_economy(float(net[product]) * (_mass(product) or 0.0), used)


def _inputs(item: Charges, water: Count) -> float:
    return sum(part.mass or 0.0 for part in item.items if water == "in" or not part.water)


def _step(item: StepHeat, charged: Charges, boundary: Boundary) -> Metrics:
    economy = _economy(item.step.row.reaction, item.product)
    own = replace(boundary, charged=_stated([charged]))
    per_kg = _mass(item.product)
    missing = charged.missing if per_kg is not None else ("molar mass of the product",)
    if missing or item.product is None or per_kg is None:
        refused = NotAssessed("no mass balance", tuple(missing))
        return Metrics(item.label, economy, refused, refused, refused, own)
    made = float(item.step.row.reaction.net[item.product] / charge(item.step, item.limiting) * item.step.yield_value)
    product = made * per_kg
    inputs = _inputs(charged, boundary.water)
    reactants = sum(part.mass or 0.0 for part in charged.items if part.species is not None)
    return Metrics(
        item.label,
        economy,
        mass_intensity(inputs, product),
        e_factor(inputs, product),
        mass_efficiency(product, reactants),
        own,
    )


def _whole(found: Profile, listed: list[StepHeat], charged: dict[str, Charges], boundary: Boundary) -> Metrics:
    label = "whole route"
    try:
        economy = _economy(net_equation(found.found.links), found.route.makes)
    except RouteError as problem:
        economy = NotAssessed("no atom economy", reason=str(problem))
    per_kg = _mass(found.route.makes)
    missing = [text for item in charged.values() for text in item.missing]
    missing += [f"molar mass of {species}" for species in found.bought if _mass(species) is None]
    if per_kg is None:
        missing.append("molar mass of the product")
    if missing or per_kg is None:
        refused = NotAssessed("no mass balance", tuple(dict.fromkeys(missing)))
        return Metrics(label, economy, refused, refused, refused, boundary)
    bought, reactants = _bought(found, listed, charged, boundary)
    return Metrics(
        label,
        economy,
        mass_intensity(bought, per_kg),
        e_factor(bought, per_kg),
        mass_efficiency(per_kg, reactants),
        boundary,
    )


def _bought(
    found: Profile, listed: list[StepHeat], charged: dict[str, Charges], boundary: Boundary
) -> tuple[float, float]:
    """kg bought, and kg of reactants among it, per mole of product.

    What is bought of each reactant follows from the extents (recycles taken off); what a step's charges list beyond
    its equation, and more of a reactant than its equivalents say, is added.
    """
    total = reactants = 0.0
    for species, amount in found.bought.items():
        mass = float(amount) * (_mass(species) or 0.0)
        reactants += mass
        total += mass if boundary.water == "in" or not _water(species, charged) else 0.0
    for item in listed:
        for part in charged[item.label].items:
            if part.species in found.found.links.maker:
                continue
            extra = float(item.charged) * _extra(item, part)
            total += extra if boundary.water == "in" or not part.water else 0.0
            reactants += extra if part.species is not None else 0.0
    return total, reactants


def _extra(item: StepHeat, part: Charge) -> float:
    """kg per mole of limiting reactant that the charges list beyond the equation with its equivalents."""
    if part.species is None:
        return part.mass or 0.0
    by_equation = float(charge(item.step, part.species) / charge(item.step, item.limiting)) * (_mass(part.species) or 0)
    return (part.mass or 0.0) - by_equation


def _water(species: Species, charged: dict[str, Charges]) -> bool:
    return any(part.water for item in charged.values() for part in item.items if part.species == species)

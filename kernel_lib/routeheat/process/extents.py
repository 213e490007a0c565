"""Extents: how often each step runs per mole of product, from one exact linear system.

For the main product I of step s, with net coefficient p, yield y and extent ξ (runs as written, charged basis):

    p · y · ξ_s + Σ recycled I  =  Σ over users c of |ν_c(I)| · equivalents · ξ_c  +  (1 when the route makes I)

A recycle is a linear function of its source's extent, so a loop is the limit of its geometric series. The derivative
of every extent with respect to every yield and recycled part follows from the same matrix: A dξ = −dA ξ.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.exact import Span
from routeheat.chem.heat import Datum
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.route import Route
from routeheat.chem.step import Recycle, Step
from routeheat.errors import RouteError
from routeheat.process.linking import read_links
from routeheat.process.links import Links, charge, share, side_amount
from routeheat.units import PURE


@dataclass(frozen=True, slots=True)
class Entry:
    """One term of the system: (base + slope · yield of the column's step) · recycled part."""

    row: str
    """Label of the step whose balance it stands in."""
    column: str
    """Label of the step whose extent it multiplies."""
    base: Fraction
    slope: Fraction
    recycle: tuple[Step, Recycle] | None = None
    """The recycle, with the step it is typed on, whose part multiplies the term; ``None`` for none."""

    def value(self, y: Fraction) -> Fraction:
        """The number in the matrix, for yield ``y`` of the column's step."""
        return (self.base + self.slope * y) * self.part

    @property
    def part(self) -> Fraction:
        """The recycled part, 1 without a recycle."""
        return Fraction(1) if self.recycle is None else share(self.recycle[1])


@dataclass(frozen=True, slots=True)
class Extents:
    """How often each row of a route runs per mole of what the route makes, after all yields."""

    route: Route
    links: Links
    values: Mapping[str, Fraction]
    """Runs of the row as written, per mole of product, by label; side rows included."""
    sensitivities: tuple[tuple[Datum, Mapping[str, Fraction]], ...]
    """For each typed yield and recycled part: its datum and the derivative of every extent with respect to it."""

    def __getitem__(self, label: str) -> Fraction:
        return self.values[label]

    def charged(self, label: str) -> Fraction:
        """Moles of the limiting reactant charged to the step per mole of product."""
        return self.values[label] * charge(self.route.step(label), self.links.limiting[label])


def extents(route: Route) -> Extents:
    """The extents of all steps and side rows of ``route``.

    Raises :class:`~routeheat.errors.RouteError` when the route cannot be run as typed; with several faults the
    message lists all of them.
    """
    links = read_links(route)
    found = None if links.faults else _solve(links)
    faults = links.faults if found is None else _faults_of_solution(links, found)
    if found is None and not faults:
        faults = [_endless(links)]
    if faults:
        raise _together(route, faults)
    assert found is not None
    return found


def route_faults(route: Route) -> tuple[RouteError, ...]:
    """Everything that keeps ``route`` from being run, in working order; empty when nothing does."""
    links = read_links(route)
    if links.faults:
        return tuple(links.faults)
    found = _solve(links)
    return (_endless(links),) if found is None else tuple(_faults_of_solution(links, found))


def theoretical(links: Links) -> dict[str, Fraction]:
    """Extents with yields of 1, no excess, no recycle and no side rows, per mole of product.

    Raises :class:`~routeheat.errors.RouteError` when main products run in a circle without a recycle.
    """
    columns: dict[str, dict[str, Fraction]] = {}
    for step in links.main:
        net = step.row.reaction.net
        columns[step.label] = {
            maker: net[species]
            for species, maker in links.maker.items()
            if species in net and (net[species] < 0 or maker == step.label)
        }
    span: Span[str, str] = Span(columns)
    residual, solution = span.reduce({links.maker[links.route.makes]: Fraction(1)})
    if residual or span.rank < len(columns):
        raise _endless(links)
    return {label: solution.get(label, Fraction(0)) for label in columns}


def net_equation(links: Links) -> Reaction:
    """What the route does as a whole, per mole of product, with theoretical extents; intermediates cancel."""
    runs = theoretical(links)
    return Reaction.from_net(add_net((runs[step.label], step.row.reaction) for step in links.main))


def _entries(links: Links) -> list[Entry]:
    zero, one = Fraction(0), Fraction(1)
    found = []
    for step in links.main:
        species = links.product[step.label]
        found.append(Entry(step.label, step.label, zero, step.row.reaction.net[species]))
        for user in links.main:
            if species in user.row.reaction.net and user.label != step.label:
                found.append(Entry(step.label, user.label, -charge(user, species), zero))
            for item in user.recycles:
                if item.species == species:
                    source = links.route.step(item.source)
                    found.append(Entry(step.label, source.label, *links.leaves(source, species), (user, item)))
    for step in links.sides:
        parent = links.route.step(step.side_of)
        runs = side_amount(step) * charge(parent, links.limiting[parent.label])
        found += [Entry(step.label, step.label, one, zero), Entry(step.label, parent.label, -runs, zero)]
    return found


def _yield_of(step: Step) -> Fraction:
    return Fraction(1) if step.side_of else step.yield_value


def _solve(links: Links) -> Extents | None:
    """The solution, or ``None`` when the system is singular."""
    entries = _entries(links)
    yields = {step.label: _yield_of(step) for step in links.route.steps}
    columns: dict[str, dict[str, Fraction]] = {label: {} for label in yields}
    for entry in entries:
        column = columns[entry.column]
        column[entry.row] = column.get(entry.row, Fraction(0)) + entry.value(yields[entry.column])
    span: Span[str, str] = Span(columns)
    if span.rank < len(columns):
        return None

    def solution(right: Mapping[str, Fraction]) -> dict[str, Fraction]:
        found = span.reduce(right)[1]
        return {label: found.get(label, Fraction(0)) for label in columns}

    values = solution({links.maker[links.route.makes]: Fraction(1)})
    sensitivities = []
    for datum, changes in _parameters(links, entries, yields):
        right: dict[str, Fraction] = {}
        for entry, change in changes:
            right[entry.row] = right.get(entry.row, Fraction(0)) - change * values[entry.column]
        sensitivities.append((datum, solution(right)))
    return Extents(links.route, links, values, tuple(sensitivities))


def _parameters(
    links: Links, entries: list[Entry], yields: Mapping[str, Fraction]
) -> list[tuple[Datum, list[tuple[Entry, Fraction]]]]:
    """Each typed yield and recycled part, with the entries it changes and their derivatives."""
    found = []
    for step in links.main:
        if step.yield_ is not None:
            slopes = [(entry, entry.slope * entry.part) for entry in entries if entry.column == step.label]
            found.append((yield_datum(step), slopes))
        for item in step.recycles:
            own = [
                (entry, entry.base + entry.slope * yields[entry.column])
                for entry in entries
                if entry.recycle == (step, item)
            ]
            found.append((recycle_datum(step, item), own))
    return found


def yield_datum(step: Step) -> Datum:
    """The typed yield of a step as a datum, a fraction of 1."""
    assert step.yield_ is not None
    return Datum(step.label, "yield", step.yield_value, step.yield_.u_to(PURE), of=step.row.reaction.text)


def recycle_datum(step: Step, recycle: Recycle) -> Datum:
    """A typed recycled part as a datum, a fraction of 1."""
    of = f"{step.row.reaction.text} with {recycle.species} from {recycle.source}"
    return Datum(step.label, "recycle", share(recycle), recycle.part.u_to(PURE), of=of)


def _endless(links: Links) -> RouteError:
    return RouteError(
        f"route {links.route.name} never delivers {links.route.makes}: the recycle returns everything that is made",
        links.route.name,
        hint="lower the recycled part or check which step it leaves",
    )


def _faults_of_solution(links: Links, found: Extents) -> list[RouteError]:
    route = links.route
    faults = [
        RouteError(
            f"{step.label}: the recycle returns everything that is needed, so the step would run "
            f"{found[step.label]} times per mole of {route.makes}",
            route.name,
            step.label,
            "lower the recycled part",
        )
        for step in links.main
        if found[step.label] <= 0
    ]
    if faults:
        return faults
    for step in links.main:
        for species in dict.fromkeys(item.species for item in step.recycles):
            returned = sum((recycled(found, item) for item in step.recycles if item.species == species), Fraction(0))
            if returned > charge(step, species) * found[step.label]:
                faults.append(
                    RouteError(
                        f"{step.label}: the recycle returns more {species} than the step uses",
                        route.name,
                        step.label,
                        "lower the recycled part",
                    )
                )
    return faults


def recycled(found: Extents, item: Recycle) -> Fraction:
    """Moles of the species that a recycle brings back, per mole of product."""
    source = found.route.step(item.source)
    base, slope = found.links.leaves(source, item.species)
    return share(item) * (base + slope * _yield_of(source)) * found[source.label]


def _together(route: Route, faults: list[RouteError]) -> RouteError:
    if len(faults) == 1:
        return faults[0]
    text = "; ".join(str(fault) for fault in faults)
    return RouteError(f"route {route.name} has {len(faults)} faults: {text}", route.name, faults[0].step)

"""How a route is read into links, and everything that can be wrong with it. All faults are collected."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from routeheat.chem.route import Route
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.process.links import (
    Links,
    charge,
    names,
    products,
    reactants,
    recycles,
    same_substance,
    share,
    side_amount,
)


def read_links(route: Route) -> Links:
    """Main products, makers and limiting reactants of a route, with every structural fault in ``.faults``."""
    links = Links(route)
    if not links.main:
        links.faults.append(RouteError(f"route {route.name} has no steps", route.name))
        return links
    seen: set[str] = set()
    for step in route.steps:
        if step.label in seen:
            links.faults.append(
                RouteError(
                    f"step {step.label} stands twice in route {route.name}",
                    route.name,
                    step.label,
                    "give the second one a label of its own",
                )
            )
        seen.add(step.label)
    if links.faults:
        return links
    for step in route.steps:
        links.faults.extend(_faults_of_numbers(links, step))
    for step in links.main:
        _choose_product(links, step)
    _check_makers(links)
    for step in route.steps:
        _choose_limiting(links, step)
    for step in links.main:
        links.faults.extend(_faults_of_recycles(links, step))
    links.faults.extend(_faults_of_parts(links))
    return links


def _fault(links: Links, step: Step, message: str, hint: str = "") -> RouteError:
    return RouteError(f"{step.label}: {message}", links.route.name, step.label, hint)


def _faults_of_numbers(links: Links, step: Step) -> Iterator[RouteError]:
    """Faults that a step shows by itself: yield, equivalents, species that do not take part."""
    uses = reactants(step)
    if not uses:
        yield _fault(links, step, "nothing is used up, so the step has no limiting reactant")
    if step.limiting is not None and step.limiting not in uses:
        yield _fault(links, step, f"{step.limiting} is typed as limiting but is not used up", f"one of {names(uses)}")
    for species, equivalents in step.equivalents:
        if not charge(step, species):
            yield _fault(
                links, step, f"equivalents are typed for {species}, which is not charged", f"one of {names(uses)}"
            )
        if equivalents < 1:
            yield _fault(
                links,
                step,
                f"{equivalents} equivalents of {species} are less than the reaction needs",
                "type the reactant in deficit as limiting",
            )
    if step.side_of:
        yield from _faults_of_side(links, step)
    elif not 0 < step.yield_value <= 1:
        yield _fault(
            links, step, f"a yield of {float(step.yield_value * 100):g} % cannot be", "more than 0 and at most 100 %"
        )


def _faults_of_side(links: Links, step: Step) -> Iterator[RouteError]:
    if step.side_of not in [parent.label for parent in links.main]:
        yield _fault(
            links,
            step,
            f"it is a side row of {step.side_of}, which is no step of the route",
            f"one of {', '.join(parent.label for parent in links.main)}",
        )
    if step.amount is None:
        yield _fault(links, step, "a side row needs an amount", "like amount 0.3 mol/mol")
    elif side_amount(step) < 0:
        yield _fault(links, step, "the amount of a side row cannot be negative")
    if step.recycles:
        yield _fault(links, step, "a side row takes no recycle", "type the recycle on a step")


def _candidates(links: Links, step: Step) -> list[Species]:
    """Products of ``step`` that a later step uses other than by recycle, and what the route makes."""
    place = links.position[step.label]
    later = [user for user in links.main if links.position[user.label] > place]
    found = []
    for species in products(step):
        users = [user for user in later if species in reactants(user) and not recycles(user, species, step)]
        if users or species == links.route.makes:
            found.append(species)
    return found


def _choose_product(links: Links, step: Step) -> None:
    candidates = _candidates(links, step)
    made = products(step)
    if step.product is not None:
        if step.product not in made:
            links.faults.append(
                _fault(
                    links,
                    step,
                    f"{step.product} is typed as product but its net coefficient is not positive",
                    f"one of {names(made)}",
                )
            )
            return
        if step.product not in candidates:
            links.faults.append(_never_used(links, step, (step.product,)))
            return
        links.product[step.label] = step.product
    elif len(candidates) == 1:
        links.product[step.label] = candidates[0]
    elif candidates:
        links.faults.append(
            _fault(links, step, f"which is the main product: {names(candidates)}?", f"type product {candidates[0]}")
        )
    elif made:
        links.faults.append(_never_used(links, step, made))
    else:
        links.faults.append(_fault(links, step, "nothing is made"))


def _never_used(links: Links, step: Step, made: tuple[Species, ...]) -> RouteError:
    """Why none of ``made`` is used by a later step: another phase, a wrong order, or nobody needs it."""
    place = links.position
    for species in made:
        for user in links.main:
            if place[user.label] > place[step.label]:
                for reactant in reactants(user):
                    if same_substance(species, reactant):
                        return _jump(links, step, species, f"{reactant} used by {user.label}", reactant)
        if same_substance(species, links.route.makes):
            makes = links.route.makes
            return _jump(links, step, species, f"{makes} is what the route makes", makes)
    for user in links.main:
        for species in made:
            if place[user.label] < place[step.label] and species in reactants(user):
                return _too_early(links, user, species, step.label)
    return _fault(
        links,
        step,
        f"{names(made, 'and')} {'is' if len(made) == 1 else 'are'} made and never used",
        "only main products link steps; check the order of steps and the spelling of species",
    )


def _jump(links: Links, step: Step, made: Species, other: str, used: Species) -> RouteError:
    return _fault(
        links,
        step,
        f"a phase that jumps between steps: {made} made by {step.label}, {other}",
        f"add a row for {made} -> {used}",
    )


def _too_early(links: Links, user: Step, species: Species, maker: str) -> RouteError:
    return _fault(
        links,
        user,
        f"{species} is used before it is made (by {maker})",
        "typed order is working order: type the step that makes it first",
    )


def _check_makers(links: Links) -> None:
    route, place = links.route, links.position
    for step in links.main:
        species = links.product.get(step.label)
        if species is None:
            continue
        if species in links.maker:
            links.faults.append(
                _fault(
                    links,
                    step,
                    f"{species} is already made by {links.maker[species]}",
                    "two steps of one route cannot make the same main product",
                )
            )
        else:
            links.maker[species] = step.label
    settled = len(links.product) == len(links.main)
    if (
        route.makes not in links.maker
        and (settled or not any(route.makes in (*products(step), step.product) for step in links.main))
        and not any("jumps between steps" in fault.message for fault in links.faults)
    ):
        links.faults.append(
            RouteError(
                f"route {route.name} does not make {route.makes}", route.name, hint="no step has it as its main product"
            )
        )
    for user in links.main:
        for species in reactants(user):
            maker = links.maker.get(species)
            if maker is not None and place[maker] > place[user.label] and not recycles(user, species):
                links.faults.append(_too_early(links, user, species, maker))
            if maker is None and not recycles(user, species):
                for made, earlier in links.maker.items():
                    if place[earlier] < place[user.label] and same_substance(made, species):
                        links.faults.append(
                            _jump(links, route.step(earlier), made, f"{species} used by {user.label}", species)
                        )


def _choose_limiting(links: Links, step: Step) -> None:
    uses = reactants(step)
    if not uses or (step.limiting is not None and step.limiting not in uses):
        return
    incoming = () if step.side_of else links.incoming(step)
    if step.limiting is not None:
        chosen = step.limiting
    elif len(incoming) > 1:
        links.faults.append(
            _fault(
                links,
                step,
                f"{len(incoming)} intermediates come in, {names(incoming, 'and')}: which one is limiting?",
                f"type limiting {incoming[0]}",
            )
        )
        return
    else:
        chosen = incoming[0] if incoming else uses[0]
    if dict(step.equivalents).get(chosen, Fraction(1)) > 1:
        links.faults.append(
            _fault(
                links,
                step,
                f"{chosen} is limiting, so it has 1 equivalent",
                "type limiting for the reactant that is used up",
            )
        )
    links.limiting[step.label] = chosen


def _faults_of_recycles(links: Links, step: Step) -> Iterator[RouteError]:
    labels = [other.label for other in links.route.steps]
    for item in step.recycles:
        what = f"recycle {item.species} from {item.source}"
        if not charge(step, item.species):
            yield _fault(
                links, step, f"{what}: {item.species} is not used by {step.label}", f"one of {names(reactants(step))}"
            )
        if not 0 <= share(item) <= 1:
            yield _fault(
                links, step, f"{what}: a part of {float(share(item) * 100):g} % cannot be", "between 0 and 100 %"
            )
        if item.source not in labels:
            yield _fault(links, step, f"{what}: {item.source} is no step of the route", f"one of {', '.join(labels)}")
            continue
        source = links.route.step(item.source)
        if item.species == links.product.get(item.source):
            yield _fault(
                links, step, f"{what}: it is the main product of {item.source}, which hands it on without a recycle"
            )
            continue
        a, b = links.leaves(source, item.species)
        if a + b * (1 if source.side_of else source.yield_value) == 0:
            near = [s for s in source.row.reaction.species if same_substance(s, item.species)]
            yield _fault(
                links,
                step,
                f"nothing of {item.species} leaves {item.source}: there is nothing to recycle",
                f"did you mean {near[0]}?" if near else "",
            )


def _faults_of_parts(links: Links) -> Iterator[RouteError]:
    total: dict[tuple[Species, str], Fraction] = {}
    for step in links.main:
        for item in step.recycles:
            key = (item.species, item.source)
            before = total.get(key, Fraction(0))
            total[key] = before + share(item)
            if before <= 1 < total[key] and share(item) <= 1:
                yield _fault(
                    links,
                    step,
                    f"{float(total[key] * 100):g} % of the {item.species} that leaves {item.source} are recycled",
                    "all parts together cannot exceed 100 %",
                )

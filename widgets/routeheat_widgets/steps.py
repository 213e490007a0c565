"""The view of single steps: one arrow a step, per mole of reaction as written."""

from __future__ import annotations

from collections.abc import Mapping

import routeheat as rh
from routeheat.chem.route import Route
from routeheat.errors import RouteError
from routeheat.present.markup import plain
from routeheat.process.heats import molar_heat
from routeheat_widgets._model import DeskModel
from routeheat_widgets._view import Control, Details, Picture, View, contributors, select


class Steps(View):
    """What happens in each step?"""

    key = "steps"
    tab = "Steps"
    question = "What happens in each step?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The route."""
        routes = _routes(model)
        if not routes:
            return ()
        return (select("route", "Route", [(name, route.heading) for name, route in routes.items()], options),)

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """Arrows of the single steps, and the table of the route's profile."""
        routes = _routes(model)
        if not routes:
            return Picture(
                None,
                (),
                (),
                empty="No route is typed yet. A route starts with a line like "
                'route A "over the nitro compound" makes ANI',
            )
        route = routes[options["route"]]
        uses = frozenset([("route", route.name)])
        diagram = rh.step_ladder(route)
        name = f"steps of route {route.name}"
        code = [f"route = sheet.routes[{route.name!r}]"]
        alone = Picture(
            diagram, (), (*code, "result = diagram = rh.step_ladder(route)"), uses, _details(route), name=name
        )
        if route.name in model.partial:
            return alone
        try:
            tables = (rh.profile(route).table(),)
        except RouteError:
            # the steps by themselves are sound; only their sum is not, and its reason is among the faults
            return alone
        code += ["result = rh.profile(route)", "diagram = rh.step_ladder(route)"]
        return Picture(diagram, tables, tuple(code), uses, _details(route), name=name)


def _routes(model: DeskModel) -> dict[str, Route]:
    return {**model.shown.routes, **model.partial}


def _details(route: Route) -> dict[tuple[str, str], Details]:
    found: dict[tuple[str, str], Details] = {}
    for step in route.steps:
        heat = molar_heat(step, route.known, route.k).heat
        more: list[tuple[str, str]] = []
        if step.row.heat is not None:
            more.append(("typed", step.row.heat.typed))
        if step.row.source:
            more.append(("source", step.row.source))
        if step.temperature is not None:
            more.append(("runs at", step.temperature.text))
        if step.yield_ is not None:
            more.append(("yield", step.yield_.text))
        if heat is not None:
            more += contributors(heat)
        found[plain(step.label), step.label] = tuple(more)
    return found

"""The view of whole routes: profiles side by side or on one axis, their differences, and whether the data agree."""

from __future__ import annotations

from collections.abc import Mapping

import routeheat as rh
from routeheat.chem.route import Route
from routeheat.process.profile import Profile
from routeheat_widgets._model import DeskModel
from routeheat_widgets._view import Control, Details, Picture, View, contributors, select

BATCH = "batch"
_BATCH_DEFAULT = "10 kg"


class Routes(View):
    """Which route?"""

    key = "routes"
    tab = "Routes"
    question = "Which route?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """What to show, on which basis, and the product where routes make different ones."""
        routes = model.shown.routes
        if not routes:
            return ()
        products = list(dict.fromkeys(route.makes.text for route in routes.values()))
        found = [select("product", "Product", [(text, text) for text in products], options)]
        alike = [route for route in routes.values() if route.makes.text == found[0].value]
        if len(products) == 1:
            found = []
        shows = [(f"route {route.name}", f"route {route.name} alone") for route in alike]
        if len(alike) > 1:
            shows = [("side by side", "all, side by side"), ("one axis", "all, on one axis"), *shows]
        found.append(select("show", "Show", shows, options))
        bases = [("mol", "mole of product"), ("kg", "kilogram of product"), (BATCH, "batch of")]
        found.append(select("per", "Heat per", bases, options))
        if found[-1].value == BATCH:
            found.append(Control("batch", "Batch", options.get("batch", "") or _BATCH_DEFAULT))
        return tuple(found)

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The comparison, or one profile."""
        routes = model.shown.routes
        if not routes:
            return Picture(None, (), (), empty="No route is typed yet, or none can be summed up.")
        per = per_of(options)
        product = options.get("product", next(iter(routes.values())).makes.text)
        alike = {name: route for name, route in routes.items() if route.makes.text == product}
        show = options["show"]
        if show.startswith("route "):
            route = alike[show.removeprefix("route ")]
            profile = rh.profile(route, per=per)
            code = (f"result = rh.profile(sheet.routes[{route.name!r}], per={per!r})",)
            uses = frozenset([("route", route.name)])
            return Picture(profile, (profile.table(),), code, uses, _details(profile), name=f"route {route.name}")
        result = rh.compare_routes(alike, per=per)
        name = f"routes to {product}"
        lines = [f"result = rh.compare_routes({_named(alike, routes)}, per={per!r})"]
        details = {key: value for item in result.profiles for key, value in _details(item).items()}
        uses = frozenset(("route", name) for name in alike)
        tables = (result.table(), result.difference_table(), result.closure_table())
        if show == "one axis":
            lines.append("diagram = result.ladder(overlay=True)")
            return Picture(result.ladder(overlay=True), tables, tuple(lines), uses, details, name=f"{name} on one axis")
        return Picture(result, tables, tuple(lines), uses, details, name=name)


def per_of(options: Mapping[str, str]) -> str:
    """The basis as the library takes it: ``mol``, ``kg``, or the text of the batch."""
    per = options.get("per", "mol")
    return (options.get("batch", "") or _BATCH_DEFAULT) if per == BATCH else per


def _named(alike: Mapping[str, Route], routes: Mapping[str, Route]) -> str:
    if len(alike) == len(routes):
        return "sheet.routes"
    return f"[sheet.routes[name] for name in ({', '.join(map(repr, alike))})]"


def _details(profile: Profile) -> dict[tuple[str, str], Details]:
    return {
        (profile.route.heading, item.label): contributors(item.heat) for item in profile.steps if item.heat is not None
    }

"""What a result rests on: the heats it is a sum of, and the typed rows, routes and species behind it."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import fields, is_dataclass, replace

from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction
from routeheat.chem.route import Route, Sheet
from routeheat.chem.row import Row, Rows
from routeheat.hess.combination import Combination
from routeheat.notation.write import write_sheet
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.process.compare import Comparison
from routeheat.process.profile import Profile

Path = tuple[str, ...]
"""Place of a value in the data of a result: ``("profiles", "A", "total")``."""


def heats_of(result: Shown | Table) -> dict[Path, HeatSum]:
    """The heats of a result that say what it is made of, by their place in ``.to_dict()``.

    Cumulative heats, and heats per mole as written, follow from these and are left out.
    """
    return {path: heat for path, heat in _heats(result) if heat is not None}


def _heats(result: object) -> Iterator[tuple[Path, HeatSum | None]]:
    if isinstance(result, Comparison):
        for profile in result.profiles:
            yield from ((("profiles", profile.route.name, *path), heat) for path, heat in _heats(profile))
        yield from ((("differences", f"{d.first} {d.second}", "heat"), d.heat) for d in result.differences)
        yield from ((("closures", f"{c.first} {c.second}", "discrepancy"), c.discrepancy) for c in result.closures)
    elif isinstance(result, Profile):
        yield ("total",), result.total
        yield ("side_total",), result.side_total
        for step in result.steps:
            yield ("steps", step.label, "heat"), step.heat
    elif isinstance(result, Combination):
        yield ("heat",), result.heat
    elif is_dataclass(result):
        values = ((item.name, getattr(result, item.name)) for item in fields(result))
        yield from (((name,), value) for name, value in values if isinstance(value, HeatSum))


def rests_on(result: Shown | Table, sheet: Sheet | None = None) -> dict[str, str]:
    """Everything typed that a result rests on, as canonical text in one line each, by name.

    Rows have their label, routes ``route A``, declared species ``species NB``. A result that does not know its rows
    rests on all of ``sheet``, or on nothing that can be named.
    """
    known, routes, whole = _parts(result, sheet)
    labels = {datum.label for heat in heats_of(result).values() for datum, _ in heat.terms}
    labels |= {label for closure in getattr(result, "closures", ()) for label in closure.rows}
    used = [row for row in known.values() if whole or row.label in labels]
    found = {row.label: _row_text(row) for row in used}
    for route in routes:
        found[f"route {route.name}"] = f"makes {route.makes.text}: {', '.join(step.label for step in route.steps)}"
        found |= {step.label: _step_text(route, step.label) for step in route.steps}
    reactions = [row.reaction for row in used] + [step.row.reaction for route in routes for step in route.steps]
    if isinstance(result, Combination):
        found["target"] = result.target.text
        reactions.append(result.target)
    return found | dict(_species(reactions))


def _parts(result: Shown | Table, sheet: Sheet | None) -> tuple[Mapping[str, Row], list[Route], bool]:
    """Known rows, routes, and whether all of the rows count."""
    if isinstance(result, Combination):
        return {row.label: row for row in result.rows}, [], True
    if isinstance(result, Profile):
        return result.route.known, [result.route], False
    if isinstance(result, Comparison):
        routes = [profile.route for profile in result.profiles]
        return {label: row for route in routes for label, row in route.known.items()}, routes, False
    if sheet is None:
        return {}, [], False
    return {**sheet.known, **sheet.targets}, list(sheet.routes.values()), True


def _row_text(row: Row) -> str:
    return _one_line(write_sheet(Sheet(None, {}, Rows([row]), {}, {})))


def _step_text(route: Route, label: str) -> str:
    alone = replace(route, steps=(route.step(label),), used=())
    return _one_line(write_sheet(Sheet(None, {}, Rows(), {}, {route.name: alone})))


def _one_line(text: str) -> str:
    """An entry without its section line and its label."""
    lines = [line.strip() for line in text.splitlines()[1:]]
    return " | ".join(lines).partition("] ")[2]


def _species(reactions: Iterable[Reaction]) -> Iterator[tuple[str, str]]:
    for reaction in reactions:
        for species in reaction.species:
            if species.declared:
                formula = "?" if species.formula is None else species.formula.text
                mass = species.molar_mass
                yield f"species {species.name}", formula if mass is None else f"{formula} | M {float(mass):.6g} g/mol"

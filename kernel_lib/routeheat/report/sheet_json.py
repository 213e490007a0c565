"""What a sheet says as JSON-safe content, for programs that do not read the notation."""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction
from typing import Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction, Term
from routeheat.chem.route import Declaration, Route, Sheet
from routeheat.chem.row import Heat, Row
from routeheat.chem.species import Species
from routeheat.chem.step import Step


def sheet_content(sheet: Sheet) -> dict[str, Any]:
    """Species, known rows, targets and routes; exact numbers are text, order is typed order."""
    return {
        "coverage_factor": _exact(sheet.coverage),
        "species": [_declaration(item) for item in sheet.species.values()],
        "known": [_row(row) for row in sheet.known.values()],
        "targets": [_row(row) for row in sheet.targets.values()],
        "unstated": None
        if sheet.unstated is None
        else {"u": _measured(sheet.unstated.u), "reason": sheet.unstated.reason},
        "routes": [_route(route) for route in sheet.routes.values()],
    }


def _exact(value: Fraction | None) -> str | None:
    return None if value is None else str(value)


def _measured(item: Measured | None) -> dict[str, Any] | None:
    if item is None:
        return None
    return {
        "value": str(item.value), "u": _exact(item.u), "k": None if item.spread is None else str(item.spread.k),
        "unit": item.unit.text, "text": item.text,
    }  # fmt: skip


def _species(item: Species | None) -> dict[str, Any] | None:
    if item is None:
        return None
    formula = item.formula
    return {
        "text": item.text, "name": item.name, "phase": item.phase, "form": item.form,
        "formula": None if formula is None else formula.text,
        "composition": None if formula is None else {element: str(count) for element, count in formula.counts},
        "charge": None if formula is None else int(formula.charge),
        "molar_mass": _exact(item.molar_mass),
    }  # fmt: skip


def _declaration(item: Declaration) -> dict[str, Any]:
    return {"species": _species(item.species), "title": item.title, "cas": item.cas,
            "settings": _settings(item.settings)}  # fmt: skip


def _settings(settings: Iterable[tuple[str, object]]) -> dict[str, Any]:
    return {name: _measured(value) if isinstance(value, Measured) else value if value is True else str(value)
            for name, value in settings}  # fmt: skip


def _reaction(reaction: Reaction) -> dict[str, Any]:
    def side(terms: tuple[Term, ...]) -> list[dict[str, Any]]:
        return [{"coefficient": str(number), "species": _species(species)} for number, species in terms]

    return {"text": reaction.text, "reactants": side(reaction.reactants), "products": side(reaction.products),
            "reversible": reaction.reversible, "balanced": reaction.balanced}  # fmt: skip


def _heat(heat: Heat | None) -> dict[str, Any] | None:
    if heat is None:
        return None
    return {"typed": _measured(heat.amount), "per": None if heat.basis is None else heat.basis.text,
            "key": heat.key, "portion": _measured(heat.portion), "analogue": heat.analogue,
            "symbol": heat.symbol, "temperature": _measured(heat.temperature), "text": heat.text}  # fmt: skip


def _u(heat: HeatSum) -> str | None:
    """Standard uncertainty of a typed heat; ``None`` when not all of it is stated. Of several data it is rounded."""
    if not heat.complete:
        return None
    (datum, _), *others = heat.terms
    return _exact(Fraction(repr(heat.u)) if others else datum.u)


def _row(row: Row) -> dict[str, Any]:
    heat = row.heat_sum()
    numeric = heat is not None and not heat.unknowns
    return {
        "label": row.label, "kind": row.kind, "reaction": _reaction(row.reaction), "heat": _heat(row.heat),
        "heat_as_written": {"value": str(heat.exact), "u": _u(heat), "unit": "kJ/mol"}
        if heat is not None and numeric else None,
        "estimated": row.estimated,
        "source": row.source, "settings": _settings(row.settings),
    }  # fmt: skip


def _step(step: Step, used: bool) -> dict[str, Any]:
    return {
        **_row(step.row),
        "used_from_another_route": used,
        "yield": _measured(step.yield_),
        "product": None if step.product is None else step.product.text,
        "limiting": None if step.limiting is None else step.limiting.text,
        "equivalents": [{"species": species.text, "number": str(number)} for species, number in step.equivalents],
        "recycles": [{"species": r.species.text, "from": r.source, "part": _measured(r.part)} for r in step.recycles],
        "side_of": step.side_of,
        "amount": _measured(step.amount),
        "loss": step.loss,
        "operation": step.operation,
        "temperature": _measured(step.temperature),
        "concentration": _measured(step.concentration),
        "heat_capacity": _measured(step.heat_capacity),
    }


def _route(route: Route) -> dict[str, Any]:
    return {"name": route.name, "title": route.title, "makes": _species(route.makes),
            "steps": [_step(step, step.label in route.used) for step in route.steps]}  # fmt: skip

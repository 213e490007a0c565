"""Values of a step moved to other ones, without touching the typed text."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace
from fractions import Fraction

from routeheat.chem.measured import Measured
from routeheat.chem.route import Route, Sheet
from routeheat.chem.step import Step
from routeheat.errors import RouteError, UnitError, UnknownName
from routeheat.notation.keys import Key, find_key, key_order
from routeheat.units import KELVIN, PERCENT, PURE, Unit, read_unit

MOVABLE: tuple[str, ...] = ("feed", "T", "Xac", "size", "mass")
"""Keys of a step whose values can be moved."""
_NUMBER = re.compile(r"\s*([-+\N{MINUS SIGN}]?)([0-9]{1,12})(?:\.([0-9]{1,12}))?\s*(.{0,40})")


def moved(sheet: Sheet, label: str, **values: str) -> Sheet:
    """The sheet with other values of ``feed``, ``T``, ``Xac``, ``size`` or ``mass`` in the step ``label``.

    A value is a number with a unit, like ``feed="4 h"``; without a unit it has that of the typed value. An uncertainty
    that is typed stays. Raises :class:`~routeheat.errors.UnknownName` for another key,
    :class:`~routeheat.errors.UnitError` for a value that cannot be, :class:`~routeheat.errors.RouteError` when no
    route has the step.
    """
    for name in values:
        if name not in MOVABLE:
            raise UnknownName("value to move", name, MOVABLE)
    if not any(step.label == label for route in sheet.routes.values() for step in route.steps):
        raise RouteError(f"no route has a step {label}", step=label)
    routes = {name: _in_route(route, label, values) for name, route in sheet.routes.items()}
    return replace(sheet, routes=routes)


def _in_route(route: Route, label: str, values: Mapping[str, str]) -> Route:
    steps = tuple(_in_step(step, values) if step.label == label else step for step in route.steps)
    return replace(route, steps=steps)


def _in_step(step: Step, values: Mapping[str, str]) -> Step:
    settings = dict(step.row.settings)
    temperature = step.temperature
    for name, text in values.items():
        new = read_value(name, text, typed_value(step, name))
        if name == "T":
            temperature = new
        else:
            settings[name] = new
    kept = tuple(sorted(settings.items(), key=lambda item: key_order(item[0])))
    return replace(step, temperature=temperature, row=replace(step.row, settings=kept))


def typed_value(step: Step, name: str) -> Measured | None:
    """The value that a step has for one of :data:`MOVABLE`; ``None`` when none is typed."""
    found = step.temperature if name == "T" else step.row.setting(name)
    return found if isinstance(found, Measured) else None


def read_value(name: str, text: str, typed: Measured | None) -> Measured:
    """A moved value; raises :class:`~routeheat.errors.UnitError` with a hint when it cannot be."""
    key = find_key(name)
    assert key is not None
    match = _NUMBER.fullmatch(text)
    hint = f"like {key.example}"
    if match is None:
        raise UnitError(f"{name} is a number with a unit", text, hint)
    sign, whole, part, unit_text = match.groups()
    value = Fraction(f"{whole}.{part or 0}") * (-1 if sign in ("-", "\N{MINUS SIGN}") else 1)
    unit = read_unit(unit_text) if unit_text.strip() else unit_of(name, typed)
    if unit.dimension != key.unit.dimension:
        raise UnitError(f"{name} has another kind of unit", text, hint)
    spread = typed.spread if typed is not None and typed.unit == unit else None
    found = Measured(value, unit, spread, len(part or ""))
    _check(key, found, text, hint)
    return found


def unit_of(name: str, typed: Measured | None) -> Unit:
    """The unit in which a value is moved: the typed one, else that of its key, and per cent for a share."""
    key = find_key(name)
    assert key is not None
    usual = PERCENT if key.bounds == "share" else key.unit
    return usual if typed is None else typed.unit


def _check(key: Key, found: Measured, text: str, hint: str) -> None:
    if key.bounds == "positive" and found.value <= 0:
        raise UnitError(f"{key.name} must be more than zero", text, hint)
    if key.bounds == "share" and not 0 <= found.to(PURE) <= 1:
        raise UnitError(f"{key.name} is at least 0 and at most 100 %", text, hint)
    if key.bounds == "temperature" and found.to(KELVIN) <= 0:
        raise UnitError(f"{key.name} must lie above absolute zero", text, hint)

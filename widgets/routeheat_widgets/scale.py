"""The view of a step at scale: what happens when cooling fails, with values that can be moved before they are typed."""

from __future__ import annotations

import math
from collections.abc import Mapping
from contextlib import suppress

import routeheat as rh
from routeheat.chem.measured import Measured, decimal_text
from routeheat.chem.route import Route
from routeheat.chem.step import Step
from routeheat.errors import UnitError
from routeheat.present.markup import plain
from routeheat.units import PURE
from routeheat_widgets._model import DeskModel
from routeheat_widgets._moved import MOVABLE, moved, read_value, typed_value, unit_of
from routeheat_widgets._view import Control, Picture, View, Write, select
from routeheat_widgets._write_back import write_back
from routeheat_widgets.what_if import what_if

_LABELS = {"feed": "feed time", "T": "temperature", "Xac": "accumulation", "size": "batch size", "mass": "batch size"}
_SEPARATOR = " / "


class Scale(View):
    """What at scale?"""

    key = "scale"
    tab = "At scale"
    question = "What does a step do at scale when cooling fails?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The step, what to show, and the values that can be moved."""
        steps = _steps(model)
        if not steps:
            return ()
        chosen = select("step", "Step", [(key, words) for key, (words, _, _) in steps.items()], options)
        _, route, step = steps[chosen.value]
        alike = [item for item in model.shown.routes.values() if item.makes == route.makes]
        shows = [("step", "this step"), ("routes", "all steps of its route" if len(alike) == 1 else "routes compared")]
        found = [chosen, select("scale", "Show", shows, options)]
        # values moved in a step that is gone are not those of the step shown instead
        own = options if options.get("step", chosen.value) == chosen.value else {}
        return (*found, *(_moving(step, name, own) for name in _movable(step)))

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The strip with its tables, as typed and moved; or the routes compared with the moved values."""
        steps = _steps(model)
        if not steps:
            words = "No step is typed yet. What the vessel needs stands behind its equation: feed 3 h | TD24 95 degC"
            return Picture(None, (), (), empty=words)
        _, route, step = steps[options["step"]]
        values = {name: new for name in _movable(step) if (new := _new(step, name, options[name])) is not None}
        texts = {name: _bare(value) for name, value in values.items()}
        typed = "".join(f", {name}={text!r}" for name, text in texts.items())
        write = None
        if ("route", route.name) not in model.kept_names:
            write = write_back(model.text, step.label, values)
        if options["scale"] == "routes":
            return _compared(model, route, step, texts, typed, write)
        result = what_if(model.shown, route.name, step.label, **texts)
        code = (
            "import routeheat_widgets as rw",
            f"result = rw.what_if(sheet, {route.name!r}, {step.label!r}{typed})",
        )
        curve = result.curve()
        more = (("rh.svg(result.curve())", curve),) if curve.points else ()
        name = f"step {step.label} at scale{' with moved values' if texts else ''}"
        uses = frozenset([("route", route.name)])
        return Picture(result, result.tables(), code, uses, name=name, more=more, write=write)


def _compared(
    model: DeskModel, route: Route, step: Step, texts: Mapping[str, str], typed: str, write: Write | None
) -> Picture:
    sheet = model.shown
    lines = []
    if texts:
        sheet = moved(sheet, step.label, **texts)
        lines = ["import routeheat_widgets as rw", f"sheet = rw.moved(sheet, {step.label!r}{typed})"]
    alike = {name: item for name, item in sheet.routes.items() if item.makes == route.makes}
    result = rh.compare_at_scale(alike)
    listed = "sheet.routes"
    if len(alike) < len(sheet.routes):
        listed = f"[sheet.routes[name] for name in ({', '.join(map(repr, alike))},)]"
    lines.append(f"result = rh.compare_at_scale({listed})")
    uses = frozenset(("route", name) for name in alike)
    name = f"routes to {plain(route.makes.rich)} at scale{' with moved values' if texts else ''}"
    return Picture(result, result.tables(), tuple(lines), uses, name=name, write=write)


def _steps(model: DeskModel) -> dict[str, tuple[str, Route, Step]]:
    """Every step once, by option: words for the reader, its route, the step."""
    found: dict[str, tuple[str, Route, Step]] = {}
    for route in model.shown.routes.values():
        for step in route.steps:
            if step.label not in route.used:
                words = f"{step.label}, route {route.name}"
                found[f"{route.name}{_SEPARATOR}{step.label}"] = (words, route, step)
    return found


def _movable(step: Step) -> tuple[str, ...]:
    """The keys that can be moved; of the two that say the size of a batch the one that is typed."""
    left_out = "size" if typed_value(step, "mass") is not None and typed_value(step, "size") is None else "mass"
    return tuple(name for name in MOVABLE if name != left_out)


def _moving(step: Step, name: str, options: Mapping[str, str]) -> Control:
    typed = typed_value(step, name)
    unit = unit_of(name, typed)
    value = options.get(name, "").strip()
    if not value and typed is not None:
        value = decimal_text(typed.value, typed.decimals)
    elif value:
        value = _in_unit(name, value, typed)
    hint = "not typed" if typed is None else f"typed {typed.text}"
    return Control(name, _LABELS[name], value, unit=unit.text, hint=hint, moves=True, limits=_limits(name, typed))


def _in_unit(name: str, text: str, typed: Measured | None) -> str:
    """The number alone where its unit is the one that stands beside the field; else as given, to be refused or read."""
    with suppress(UnitError):
        new = read_value(name, text, typed)
        if new.unit == unit_of(name, typed):
            return decimal_text(new.value, new.decimals)
    return text


def _new(step: Step, name: str, text: str) -> Measured | None:
    """A value other than the typed one; ``None`` when it is not moved. Raises ``UnitError``."""
    typed = typed_value(step, name)
    if not text:
        return None
    new = read_value(name, text, typed)
    return None if typed is not None and new.unit == typed.unit and new.value == typed.value else new


def _bare(value: Measured) -> str:
    """Number and unit without the uncertainty, which is kept anyway."""
    return Measured(value.value, value.unit, None, value.decimals).text


def _limits(name: str, typed: Measured | None) -> tuple[float, float, float] | None:
    """Lowest, highest and step of the slider; none for a value that is not typed, because a slider always shows one."""
    if typed is None:
        return None
    value = float(typed.value)
    if name == "Xac":
        return (0.0, 1.0, 0.01) if typed.unit == PURE else (0.0, 100.0, 1.0)
    if name == "T":
        return (math.floor(value) - 50.0, math.floor(value) + 100.0, 1.0)
    step = 10.0 ** math.floor(math.log10(value) - 1)
    return (max(step, round(value / 5 / step) * step), round(4 * value / step) * step, step)

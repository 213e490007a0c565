"""From a model and a choice of view to what the page shows: one pure function, JSON-safe, everything escaped."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

from routeheat.draw import Drawing, as_drawing, svg
from routeheat.errors import Fault, RouteheatError, UnknownName
from routeheat.present.html import render_table, stylesheet
from routeheat.present.table import Table
from routeheat.present.text import visible
from routeheat_widgets import _export, _twin
from routeheat_widgets._model import TEXT_LIMIT, DeskModel
from routeheat_widgets._turned import turned
from routeheat_widgets._view import Control, Picture, View, Write
from routeheat_widgets.heat import HeatView
from routeheat_widgets.known import Known
from routeheat_widgets.measure import Measure
from routeheat_widgets.routes import Routes
from routeheat_widgets.scale import Scale
from routeheat_widgets.steps import Steps
from routeheat_widgets.typed import TypedView

_ALL: tuple[View, ...] = (Routes(), Steps(), HeatView(), Known(), Measure(), Scale(), TypedView())
VIEWS: dict[str, View] = {view.key: view for view in _ALL}
_MOST_FAULTS = 100


@dataclass(frozen=True, slots=True)
class Shown:
    """A view as computed: the picture for code and figures, the content for the page."""

    picture: Picture | None
    """``None`` when it could not be computed."""
    content: dict[str, Any]


def view_named(key: str) -> View:
    """The view with that key; raises :class:`~routeheat.errors.UnknownName`."""
    if key not in VIEWS:
        raise UnknownName("view", key, VIEWS)
    return VIEWS[key]


def sheet_content(model: DeskModel) -> dict[str, Any]:
    """What the page shows of the text: the text itself, its faults and notices, the line of every label."""
    shown = model.faults[:_MOST_FAULTS]
    more = len(model.faults) - len(shown)
    editable = len(model.text) <= TEXT_LIMIT
    return {
        "revision": model.revision,
        "text": model.text if editable else "",
        "editable": editable,
        "faults": [_fault(fault) for fault in shown],
        "more_faults": f"and {more} more" if more else "",
        "notices": [_fault(fault) for fault in model.notices[:_MOST_FAULTS]],
        "lines": _lines(model),
    }


def view_content(
    model: DeskModel,
    view: View,
    options: Mapping[str, str],
    width: float | None,
    path: Path | None,
    last: Mapping[str, Any] | None = None,
) -> Shown:
    """What the page shows of the view; ``last`` is its last good content, which stays when nothing can be computed."""
    controls = view.controls(model, options)
    chosen = {control.key: control.value for control in controls}
    base: dict[str, Any] = {
        "view": view.key,
        "question": view.question,
        "controls": [_control(control) for control in controls],
    }
    try:
        picture = view.render(model, chosen)
        content = _drawn(model, picture, width, path, chosen)
    except RouteheatError as problem:
        lines = str(problem).splitlines()
        if last is None:
            return Shown(None, {**base, **_EMPTY, "problem": lines})
        kept = ["The picture is the last one that could be computed."]
        return Shown(None, {**base, **{key: last[key] for key in _EMPTY}, **_NOTHING, "problem": lines, "kept": kept})
    return Shown(picture, {**base, **_EMPTY, **content})


_NOTHING: dict[str, Any] = {"code": "", "save_code": "", "write": None, "take": {"figures": [], "tables": []}}
"""What cannot be offered for a picture that is not of the text as it is."""
_EMPTY: dict[str, Any] = {
    **_NOTHING,
    "svg": "",
    "more_svg": [],
    "bars": [],
    "search": False,
    "tables": "",
    "empty": "",
    "problem": [],
    "kept": [],
    "left_out": [],
    "details": {},
}


def _control(control: Control) -> dict[str, Any]:
    return {
        "key": control.key,
        "label": control.label,
        "value": control.value,
        "choices": [list(choice) for choice in control.choices],
        "unit": control.unit,
        "hint": visible(control.hint),
        "moves": control.moves,
        "limits": None if control.limits is None else list(control.limits),
    }


def _drawn(
    model: DeskModel, picture: Picture, width: float | None, path: Path | None, chosen: Mapping[str, str]
) -> dict[str, Any]:
    drawing = None if picture.drawn is None else as_drawing(picture.drawn)
    kept = list(model.kept) if model.kept_names & picture.uses else []
    barred = {bars.table for bars in picture.bars}
    return {
        "svg": "" if drawing is None else str(svg(drawing, width=width)),
        "more_svg": [str(svg(more, width=width)) for _, more in picture.more],
        "tables": "".join(
            _table(table if number in barred else turned(table), drawing) for number, table in enumerate(picture.tables)
        ),
        "bars": [
            {"table": bars.table, "column": _index(picture.tables[bars.table], bars.column), "cells": list(bars.cells)}
            for bars in picture.bars
        ],
        "search": picture.search,
        "empty": picture.empty,
        "kept": kept,
        "left_out": list(model.left_out),
        "code": _twin.code(model, picture, path),
        "save_code": _twin.save_code(model, picture, path, chosen),
        "take": _export.offers(picture),
        "write": _write(model.text, picture.write),
        "details": {
            f"{visible(column)}\n{visible(label)}": [[visible(head), visible(text)] for head, text in details]
            for (column, label), details in picture.details.items()
            if details
        },
    }


def _index(table: Table, key: str) -> int:
    return [column.key for column in table.columns].index(key)


def _write(text: str, write: Write | None) -> dict[str, Any] | None:
    """The edit in places as a page counts them: in UTF-16 units."""
    if write is None:
        return None
    start, end = (len(text[:place].encode("utf-16-le")) // 2 for place in (write.start, write.end))
    return {"start": start, "end": end, "text": write.text, "words": visible(write.words)}


def _table(table: Table, drawing: Drawing | None) -> str:
    """The table without the notes that the diagram already shows; the page carries the stylesheet once."""
    said = set() if drawing is None else set(drawing.notes)
    shorter = replace(table, notes=tuple(note for note in table.notes if note not in said))
    return render_table(shorter).replace(f"<style>{stylesheet()}</style>", "", 1)


def _fault(fault: Fault) -> dict[str, Any]:
    return {
        "line": fault.line,
        "column": fault.column,
        "length": fault.length,
        "message": visible(fault.message),
        "hint": visible(fault.hint),
    }


def _lines(model: DeskModel) -> dict[str, int]:
    """Line of every row, step and declared species by label, for going from a picture to the text."""
    sheet = model.sheet
    found = {visible(name): item.line for name, item in sheet.species.items()}
    found |= {visible(route.heading): route.line for route in sheet.routes.values()}
    rows = [*sheet.known.values(), *sheet.targets.values()]
    rows += [step.row for route in sheet.routes.values() for step in route.steps]
    return found | {visible(row.label): row.line for row in rows}

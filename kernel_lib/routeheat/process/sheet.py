"""Reading a whole sheet: what the notation refuses and what the routes cannot do come in one list."""

from __future__ import annotations

from pathlib import Path

from routeheat.chem.route import Route, Sheet
from routeheat.errors import Fault, RouteError, RouteheatError, SheetFaults
from routeheat.notation.build import build_sheet
from routeheat.notation.faults import render, split_lines
from routeheat.process.extents import route_faults


def check_sheet(text: str) -> tuple[Sheet, tuple[Fault, ...]]:
    """The sheet as far as it can be read, with every fault and notice in the order of the text.

    Never raises on any text. What the healthy lines say can be computed from the sheet returned.
    """
    sheet, found = build_sheet(text)
    broken = {fault.subject for fault in found if fault.severity == "fault"}
    lines = split_lines(text) if sheet.routes else []
    more = [
        _placed(problem, route, lines)
        for route in sheet.routes.values()
        for problem in route_faults(route)
        if problem.step not in broken
    ]
    ordered = sorted((*found, *more), key=lambda fault: (fault.line, fault.column, fault.severity))
    return sheet, tuple(ordered)


def read_sheet(source: str | Path) -> Sheet:
    """The sheet in ``source``: a ``str`` is the text itself, a :class:`pathlib.Path` a UTF-8 file.

    Raises :class:`~routeheat.errors.SheetFaults` with all faults together, ``OSError`` when the file cannot be read,
    :class:`~routeheat.errors.RouteheatError` when it is no UTF-8 text.
    """
    if isinstance(source, Path):
        try:
            text = source.read_text(encoding="utf-8-sig")
        except UnicodeDecodeError as problem:
            raise RouteheatError(f"{source} is no UTF-8 text (byte {problem.start}): save it as UTF-8") from problem
    elif isinstance(source, str):
        text = source
    else:
        raise TypeError(f"a sheet is a str or a pathlib.Path, not {type(source).__name__}")
    sheet, found = check_sheet(text)
    faults = [fault for fault in found if fault.severity == "fault"]
    if faults:
        raise SheetFaults(faults, render(text, faults))
    return sheet


def _placed(problem: RouteError, route: Route, lines: list[str]) -> Fault:
    """The fault of a route at the line of the step that has it, or of the route itself."""
    steps = {step.label: step.row.line for step in route.steps if step.label not in route.used}
    line = steps.get(problem.step, route.line)
    typed = lines[line - 1] if 0 < line <= len(lines) else ""
    column = len(typed) - len(typed.lstrip()) + 1
    length = max(1, len(typed.split("#")[0].strip()))
    return Fault(problem.message, line, column, length, problem.hint, "fault", problem.step or route.name)

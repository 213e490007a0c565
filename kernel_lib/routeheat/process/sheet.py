"""Reading a whole sheet: what the notation refuses and what the routes cannot do come in one list."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path
from typing import Literal

from routeheat.chem.route import Route, Sheet
from routeheat.errors import Fault, RouteError, RouteheatError, SheetFaults
from routeheat.hess.contained import EFFECTS, Counted, double_counts, unknown_effects
from routeheat.notation.build import build_sheet
from routeheat.notation.faults import render, split_lines
from routeheat.process.extents import route_faults


def check_sheet(text: str) -> tuple[Sheet, tuple[Fault, ...]]:
    """The sheet as far as it can be read, with every fault and notice in the order of the text.

    Never raises on any text. What the healthy lines say can be computed from the sheet returned.
    """
    sheet, found = build_sheet(text)
    broken = {fault.subject for fault in found if fault.severity == "fault"}
    lines = split_lines(text) if sheet.routes or sheet.known else []
    more = [
        _placed(problem, route, lines)
        for route in sheet.routes.values()
        for problem in route_faults(route)
        if problem.step not in broken
    ]
    notices = list(_contained(sheet, lines))
    if notices:
        sheet = replace(sheet, notices=tuple(sorted((*sheet.notices, *notices), key=_in_text)))
    return sheet, tuple(sorted((*found, *more, *notices), key=_in_text))


def _in_text(fault: Fault) -> tuple[int, int, str]:
    return fault.line, fault.column, fault.severity


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


def _contained(sheet: Sheet, lines: list[str]) -> Iterator[Fault]:
    """Notices: effects that a heat includes and another step of its route adds, and effects that nobody looks for."""
    rows = {row.label: row for row in sheet.known.values()}
    said: set[str] = set()
    for route in sheet.routes.values():
        rows |= {step.label: step.row for step in route.steps}
        for item in double_counts(Counted.step(step) for step in route.steps):
            if item.text not in said:
                said.add(item.text)
                hint = f"leave it out of one of the two, or out of includes of {item.holder}"
                yield _at(rows[item.adding].line, lines, item.text, hint, "notice", item.adding)
    for row in rows.values():
        for word, near in unknown_effects(row):
            hint = f"did you mean {near}?" if near else f"known: {', '.join(EFFECTS)}"
            message = f"no row is looked for that adds {word[:40]} a second time"
            yield _at(row.line, lines, message, hint, "notice", row.label)


def _placed(problem: RouteError, route: Route, lines: list[str]) -> Fault:
    """The fault of a route at the line of the step that has it, or of the route itself."""
    steps = {step.label: step.row.line for step in route.steps if step.label not in route.used}
    line = steps.get(problem.step, route.line)
    return _at(line, lines, problem.message, problem.hint, "fault", problem.step or route.name)


def _at(
    line: int, lines: list[str], message: str, hint: str, severity: Literal["fault", "notice"], subject: str
) -> Fault:
    """A fault that covers what is typed on a line."""
    typed = lines[line - 1] if 0 < line <= len(lines) else ""
    column = len(typed) - len(typed.lstrip()) + 1
    length = max(1, len(typed.split("#")[0].strip()))
    return Fault(message, line, column, length, hint, severity, subject)

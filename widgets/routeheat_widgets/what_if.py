"""A step at scale with some of its values moved, beside the same step as typed: a result that a cell can make too."""

from __future__ import annotations

from dataclasses import dataclass, replace

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat.present.curve import Curve
from routeheat.present.show import Shown
from routeheat.present.strip import Group, Strip
from routeheat.present.table import Column, Table
from routeheat.process import strips
from routeheat.process.criticality import Criticality
from routeheat.report.together import together
from routeheat_widgets._moved import moved, typed_value

_VALUES = Column("values", "values")
_TYPED, _MOVED = "as typed", "moved"


@dataclass(frozen=True, slots=True, repr=False)
class WhatIf(Shown):
    """One step when cooling fails, as typed and with moved values."""

    label: str
    line: int
    """Line of the sheet where the step is typed; 0 when it was made in code."""
    typed: Criticality
    moved: Criticality | None
    """``None`` when nothing is moved."""
    changes: tuple[tuple[str, str, str], ...]
    """For every moved value: key, as typed (``not typed``), as moved."""

    @property
    def shown(self) -> Criticality:
        """With the moved values, where there are any."""
        return self.typed if self.moved is None else self.moved

    def tables(self) -> tuple[Table, ...]:
        """What is moved, the criticality of both, and the step in the vessel with the moved values."""
        return (*self._changes(), self.table(), *self._vessel())

    def table(self) -> Table:
        """Both scenarios, as typed and moved."""
        if self.moved is None:
            return self.typed.table()
        title = f"Criticality of {self.label}, as typed and with moved values"
        return together(title, _VALUES, [(_TYPED, self.typed.table()), (_MOVED, self.moved.table())])

    def _changes(self) -> tuple[Table, ...]:
        if not self.changes:
            return ()
        columns = (Column("key", "key"), Column("typed", "as typed"), Column("moved", "moved to"))
        return (Table(f"Moved in {self.label}, not written in the sheet", columns, self.changes),)

    def _vessel(self) -> tuple[Table, ...]:
        tables = self.shown.step.tables()
        if self.moved is None:
            return tables
        first = replace(tables[0], title=f"{self.label} in the vessel, with moved values")
        return (first, *tables[1:])

    def strip(self) -> Strip:
        """Temperatures when cooling fails on one axis: a row as typed, and one with the moved values."""
        line = self.line or None
        rows = [strips.row(self.typed, line)]
        if self.moved is not None:
            rows = [
                replace(rows[0], label=f"{self.label} {_TYPED}"),
                replace(strips.row(self.moved, line), label=f"{self.label} {_MOVED}"),
            ]
        title = f"{self.label}: temperatures when cooling fails"
        return strips.strip_of((Group("", tuple(rows)),), title, self.typed.step.k)

    def curve(self) -> Curve:
        """Load of the jacket against feed time, with the moved values."""
        curve = self.shown.step.curve()
        if not any(key == "feed" for key, _, _ in self.changes):
            return curve
        spots = tuple(replace(spot, words=_as_moved(spot.words)) for spot in curve.spots)
        return replace(curve, spots=spots, alt=_as_moved(curve.alt))


def _as_moved(words: str) -> str:
    """The feed time is not the typed one."""
    return words.replace("feed as typed", "feed as moved")


def what_if(sheet: Sheet, route: str, label: str, **values: str) -> WhatIf:
    """The step ``label`` of a route when cooling fails, as typed and with other values.

    ``values`` are those of ``feed``, ``T``, ``Xac``, ``size`` and ``mass``: ``what_if(sheet, "A", "A1", feed="4 h")``.
    Nothing of the sheet changes. Raises :class:`~routeheat.errors.UnknownName` for another key or route,
    :class:`~routeheat.errors.UnitError` for a value that cannot be, and what
    :func:`~routeheat.process.criticality.criticality` raises.
    """
    if route not in sheet.routes:
        raise rh.UnknownName("route", route, sheet.routes)
    now = sheet.routes[route]
    if not any(step.label == label for step in now.steps):
        raise rh.RouteError(f"route {route} has no step {label}", route, label)
    step = now.step(label)
    typed = rh.criticality(step, route=now)
    if not values:
        return WhatIf(label, step.row.line, typed, None, ())
    then = moved(sheet, label, **values).routes[route]
    changed = then.step(label)
    changes = []
    for name in values:
        old, new = typed_value(step, name), typed_value(changed, name)
        assert new is not None
        changes.append((name, "not typed" if old is None else old.text, new.text))
    return WhatIf(label, step.row.line, typed, rh.criticality(changed, route=then), tuple(changes))

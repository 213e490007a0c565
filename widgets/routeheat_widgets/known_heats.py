"""Known heats as a list, and the cycles of them that do not close: results that a cell can make as well."""

from __future__ import annotations

from dataclasses import dataclass, replace

import routeheat as rh
from routeheat.chem.heat import HeatSum
from routeheat.chem.route import Sheet
from routeheat.chem.row import Row
from routeheat.errors import RouteheatError
from routeheat.hess.reconcile import Cycle, Reconciled
from routeheat.present.markup import Rich, join
from routeheat.present.numbers import number
from routeheat.present.show import Shown
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process.profile import Profile
from routeheat.units import CELSIUS, KELVIN
from routeheat_widgets._quantities import Matter

_RESIDUAL = "bars: dashed lines at 2, full lines at 3 standard uncertainties; no bar: no cycle checks the row"
_SHARE = "share: part of the variance of the {name} that the row brings in, as typed"


@dataclass(frozen=True, slots=True, repr=False)
class KnownHeats(Shown):
    """Every known row: where it comes from, its heat as typed and adjusted, and what it contributes."""

    reconciled: Reconciled
    name: str = ""
    """The heat that contributions are to; empty for none."""
    heat: HeatSum | None = None

    @property
    def shares(self) -> dict[str, float | None]:
        """Part of the variance of the heat by row that is in it; ``None`` when its uncertainty is not stated."""
        return {} if self.heat is None else {item.datum.name: item.share for item in self.heat.contributions}

    def table(self) -> Table:
        """One line a row, in the order typed."""
        columns = [
            Column("row", "row"),
            Column("heat", "heat of"),
            Column("typed", "typed", "kJ/mol", "right"),
            Column("adjusted", "adjusted", "kJ/mol", "right"),
            Column("residual", "residual / u", align="right", decimals=2),
        ]
        if self.heat is not None:
            columns.append(Column("share", f"share of the {self.name}", "%", "right", 1))
        columns += [Column("source", "source"), Column("at", "at", "°C", "right", 1), Column("kind", "kind"),
                    Column("remark", "remark")]  # fmt: skip
        shares = self.shares
        lines = tuple(self._line(row, shares) for row in self.reconciled.known.values())
        notes = (*self.reconciled.table().notes, _RESIDUAL)
        if self.heat is not None:
            notes = (*notes, _SHARE.format(name=self.name))
        return Table("Known heats", tuple(columns), lines, notes)

    def _line(self, row: Row, shares: dict[str, float | None]) -> tuple[Cell, ...]:
        found, label = self.reconciled, row.label
        if label in found.network.rows:
            typed: Cell = found.network.heats[label].reading
            residual = found.residuals[label]
            remark = "no cycle checks it" if residual is None else ""
            adjusted: Cell = "not given" if found.adjusted is None else Reading(
                found.adjusted.value(label), found.adjusted.u(label), found.k
            )  # fmt: skip
        else:
            typed = _typed(row, found.k)
            residual, adjusted, remark = None, None, found.network.left_out[label]
        cells: list[Cell] = [label, _subject(row), typed, adjusted, residual]
        if self.heat is not None:
            share = shares.get(label, 0.0)
            cells.append("not stated" if share is None else 100 * share if label in shares else "not in it")
        at = float(KELVIN.convert(row.temperature, CELSIUS))
        return (*cells, row.source or "not stated", at, row.kind, remark)


def known_heats(sheet: Sheet, of: Matter | None = None) -> KnownHeats:
    """The known rows of a sheet, with what each contributes to the variance of ``of``.

    ``of`` is a combination, a profile (its total counts) or a difference of two routes. Raises what
    :func:`~routeheat.hess.reconcile.reconcile` raises, and :class:`~routeheat.errors.RouteheatError` for a difference
    without a number.
    """
    found = rh.reconcile(sheet.known)
    return KnownHeats(found) if of is None else KnownHeats(found, *named_heat(of))


def named_heat(of: Matter) -> tuple[str, HeatSum]:
    """What a heat is called, and the heat; raises :class:`~routeheat.errors.RouteheatError` where it has no number."""
    if isinstance(of, Profile):
        return f"total of route {of.route.name}", of.total
    if isinstance(of, rh.Combination):
        return f"heat of {of.name}", of.heat
    if of.heat is None:
        raise RouteheatError(f"the difference {of.second} − {of.first} {of.verdict}")
    return f"difference {of.second} − {of.first}", of.heat


def _typed(row: Row, k: float) -> Cell:
    """The heat of a row that takes no part."""
    if row.heat is None:
        return "no heat typed"
    heat = row.heat_sum(k)
    return row.heat.typed if heat is None or heat.unknowns else heat.reading


def _subject(row: Row) -> Rich:
    return row.reaction.rich if row.subject is None else join([f"{row.kind} of ", row.subject.rich])


@dataclass(frozen=True, slots=True, repr=False)
class OpenCycles(Shown):
    """Cycles of known rows that do not close, and which row may be wrong."""

    reconciled: Reconciled

    @property
    def cycles(self) -> tuple[Cycle, ...]:
        """Those that do not close, the worst first; all of them where every one closes."""
        found = self.reconciled.cycles
        listed = [cycle for cycle in found if not cycle.closes] or list(found)
        return tuple(sorted(listed, key=lambda cycle: -abs(times_u(cycle) or 0.0)))

    def tables(self) -> tuple[Table, ...]:
        """The cycles, and what leaving each row out does."""
        suspects = self.reconciled.tables()[2:] if any(not cycle.closes for cycle in self.reconciled.cycles) else ()
        return (self.table(), *suspects)

    def table(self) -> Table:
        """One line a cycle."""
        found = self.reconciled.cycles
        count = sum(not cycle.closes for cycle in found)
        columns = (
            Column("cycle", "cycle, kJ/mol"),
            Column("misclosure", "misclosure", "kJ/mol", "right"),
            Column("times", "over its u", align="right", decimals=2),
            Column("temperatures", "remark"),
        )
        lines = tuple(
            (cycle.text, replace(cycle.misclosure.reading, k=self.reconciled.k), times_u(cycle), cycle.temperatures)
            for cycle in self.cycles
        )
        title = "Cycles that do not close" if count else "Every cycle closes"
        notes = (
            self.reconciled.verdict,
            f"{number(count, 0)} of {len(found)} cycles of the basis do not close",
            "a cycle closes when its misclosure is below twice its standard uncertainty (full lines)",
        )
        return Table(title, columns, lines, notes)


def open_cycles(sheet: Sheet) -> OpenCycles:
    """The cycles of the known rows of a sheet that do not close; raises what reconciling raises."""
    return OpenCycles(rh.reconcile(sheet.known))


def times_u(cycle: Cycle) -> float | None:
    """Misclosure over its standard uncertainty; ``None`` without any."""
    return float(cycle.misclosure.exact) / cycle.u if cycle.u else None

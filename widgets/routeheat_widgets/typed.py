"""The view of what was typed: species, known rows, targets and steps as read, each with its line."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from routeheat.chem.route import Sheet
from routeheat.chem.row import Row
from routeheat.present.show import Shown
from routeheat.present.table import Cell, Column, Table
from routeheat_widgets._model import DeskModel
from routeheat_widgets._view import Control, Picture, View, everything

_LINE = Column("line", "line", align="right")


@dataclass(frozen=True, slots=True, repr=False)
class Typed(Shown):
    """A sheet as tables: what was read from which line."""

    sheet: Sheet

    def tables(self) -> tuple[Table, ...]:
        """Species, known rows, targets, and the steps of every route; parts that are not typed are left out."""
        found = [
            _species(self.sheet),
            _rows("Known rows", self.sheet.known),
            _rows("Targets", self.sheet.targets),
            *_steps(self.sheet),
        ]
        kept = tuple(table for table in found if table.rows)
        return kept or (Table("Nothing is typed yet", (_LINE,), ()),)

    def table(self) -> Table:
        """The first table."""
        return self.tables()[0]


class TypedView(View):
    """What is typed?"""

    key = "typed"
    tab = "As read"
    question = "What is typed, and how was it read?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:  # noqa: ARG002
        """None."""
        return ()

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:  # noqa: ARG002
        """The tables of :class:`Typed`."""
        code = ("import routeheat_widgets as rw", "result = rw.Typed(sheet)")
        return Picture(None, Typed(model.shown).tables(), code, everything(model), name="sheet as read")


def _species(sheet: Sheet) -> Table:
    columns = (
        Column("name", "species"),
        _LINE,
        Column("formula", "formula"),
        Column("phase", "phase"),
        Column("mass", "molar mass", "g/mol", "right", 2),
        Column("title", "full name"),
        Column("cas", "CAS"),
    )
    rows: list[tuple[Cell, ...]] = []
    for name, item in sheet.species.items():
        species = item.species
        mass = species.molar_mass
        formula: Cell = "not known" if species.formula is None else species.formula.rich
        rows.append(
            (name, item.line, formula, species.state, None if mass is None else float(mass), item.title, item.cas)
        )
    return Table("Species", columns, tuple(rows))


def _rows(title: str, rows: Mapping[str, Row]) -> Table:
    columns = (
        Column("label", "label"),
        _LINE,
        Column("reaction", "reaction"),
        Column("heat", "heat as typed"),
        Column("source", "source"),
        Column("other", "other keys"),
    )
    return Table(
        title,
        columns,
        tuple((label, row.line, row.reaction.rich, _heat(row), row.source, _kept(row)) for label, row in rows.items()),
    )


def _steps(sheet: Sheet) -> list[Table]:
    columns = (
        Column("step", "step"),
        _LINE,
        Column("reaction", "reaction"),
        Column("heat", "heat as typed"),
        Column("yield", "yield"),
        Column("temperature", "runs at"),
        Column("role", "role"),
        Column("other", "other keys"),
    )
    found = []
    for route in sheet.routes.values():
        rows = []
        for step in route.steps:
            role = f"side row of {step.side_of}" if step.side_of else step.operation
            if step.label in route.used:
                role = ", ".join(filter(None, (role, "defined in another route")))
            rows.append(
                (
                    step.label,
                    step.row.line,
                    step.row.reaction.rich,
                    _heat(step.row),
                    "" if step.yield_ is None else step.yield_.text,
                    "" if step.temperature is None else step.temperature.text,
                    role,
                    _kept(step.row),
                )
            )
        found.append(Table(f"Route {route.heading}, makes {route.makes.text}", columns, tuple(rows)))
    return found


def _heat(row: Row) -> str:
    return "not entered" if row.heat is None else row.heat.typed


def _kept(row: Row) -> str:
    return ", ".join(key if value is True else f"{key} {getattr(value, 'text', value)}" for key, value in row.settings)

"""Known rows as lines of a spreadsheet: the columns, and the cells of a row."""

from __future__ import annotations

from decimal import Decimal

from routeheat.chem.measured import Measured, decimal_text
from routeheat.chem.route import Sheet
from routeheat.chem.row import Row, Rows
from routeheat.notation.keys import HEATS, names_in
from routeheat.notation.write import write_sheet

TEXT_COLUMNS: tuple[str, ...] = tuple(name for name in names_in("known") if name not in HEATS)
"""Keys of a known row that hold a text; each may be a column."""
KNOWN_COLUMNS: tuple[str, ...] = (
    "label", "reaction", "heat", "unit", "uncertainty", "k", "per", "temperature", *TEXT_COLUMNS,
)  # fmt: skip
"""Headers in the order in which they are written."""
NO_HEAT = "not entered"
"""Stands in the heat column of a row without a heat; an empty cell there is a fault."""

KnownCell = str | Decimal | None


def known_cells(row: Row) -> tuple[KnownCell, ...]:
    """One cell for each of :data:`KNOWN_COLUMNS`; numbers keep the decimals that were typed."""
    found: dict[str, KnownCell] = {"label": row.label, "reaction": equation(row), "heat": NO_HEAT}
    heat = row.heat
    if heat is not None and heat.key != "dH":
        # the key says what the number means, so the cell holds all of it
        found["heat"] = heat.typed
    elif heat is not None:
        found["heat"] = heat.symbol
        if heat.amount is not None:
            found |= _amount(heat.amount)
        if heat.basis is not None:
            found["per"] = heat.basis.text
        if heat.temperature is not None:
            found["temperature"] = heat.temperature.text
    found["source"] = row.source or None
    for name, value in row.settings:
        found[name] = value.text if isinstance(value, Measured) else str(value)
    return tuple(found.get(name) for name in KNOWN_COLUMNS)


def _amount(amount: Measured) -> dict[str, KnownCell]:
    cells: dict[str, KnownCell] = {
        "heat": Decimal(decimal_text(amount.value, amount.decimals)), "unit": amount.unit.text,
    }  # fmt: skip
    if amount.spread is not None:
        cells["uncertainty"] = Decimal(decimal_text(amount.spread.half_width))
        level = amount.spread.stated.endswith("%")
        cells["k"] = amount.spread.stated if level else Decimal(decimal_text(amount.spread.k))
    return cells


def equation(row: Row) -> str:
    """The reaction as it is typed behind the label: an equation, or ``formation of H2O(l)``."""
    lines = write_sheet(Sheet(None, {}, Rows([row]), {}, {})).splitlines()
    return lines[1].partition("] ")[2]

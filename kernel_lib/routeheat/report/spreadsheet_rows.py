"""One line of a spreadsheet as one typed row of a sheet, with the place of every column in it."""

from __future__ import annotations

import re
from collections.abc import Mapping
from fractions import Fraction

from routeheat.chem.measured import decimal_text
from routeheat.errors import Fault
from routeheat.notation.keys import AS_TYPED, HEATS
from routeheat.notation.pasted import plain_characters
from routeheat.report.known_columns import NO_HEAT, TEXT_COLUMNS
from routeheat.report.spreadsheet_cells import Line
from routeheat.report.spreadsheet_header import Header
from routeheat.report.tables import harmless

_LONGEST_CELL = 4_000
_NUMBER = re.compile(r"[-+]?[0-9][0-9.]*(?:[eE][-+]?[0-9]+)?(?:\([0-9]+\))?")


class Unfit(Exception):
    """A cell that cannot become part of a typed row."""

    def __init__(self, column: str, message: str, hint: str = "") -> None:
        super().__init__(message)
        self.column = column
        """Canonical name of its column."""
        self.message = message
        self.hint = hint


class TypedRow:
    """The row under construction: :attr:`text` is read by the notation, :attr:`spans` tell whose fault it is."""

    def __init__(self, line: Line, header: Header, k: float | None) -> None:
        """Put the row together; raises :class:`Unfit`."""
        self.line = line
        self.header = header
        self.text = ""
        self.spans: dict[str, tuple[int, int]] = {}
        """Start and end in :attr:`text` of what each column says."""
        for name in ("label", "reaction", "heat"):
            if not self.plain(name):
                raise Unfit(name, f"no {name}", f"{NO_HEAT}, where it is not known" if name == "heat" else "")
        if any(cell.strip() for cell in line.cells[header.width :]):
            raise Unfit("label", "more cells than headers", "a text or number that holds the separator is quoted")
        self.add("label", self.plain("label"), "[", "]")
        self.add("reaction", self.plain("reaction"), " ")
        heat = self.plain("heat")
        if heat.partition(" ")[0] in HEATS:
            self.add("heat", heat, " | ")
        elif heat.casefold() != NO_HEAT:
            self.add("heat", heat, " | dH ")
            self.add_rest_of_heat(heat, k)
        for name in TEXT_COLUMNS:
            text = plain_characters(self.cell(name))
            if name in AS_TYPED:
                self.add(name, text, f" | {name} ")
            else:
                self.add(name, text.replace('"', "'"), f' | {name} "', '"')

    def add(self, name: str, text: str, before: str = "", after: str = "") -> None:
        """Append what a column says, unless it says nothing."""
        if text:
            start = len(self.text) + len(before)
            self.spans[name] = (start, start + len(text))
            self.text += f"{before}{text}{after}"

    def add_rest_of_heat(self, heat: str, k: float | None) -> None:
        """Append what the other columns say of the heat, in the order of the notation."""
        uncertainty = self.plain("uncertainty")
        if uncertainty.casefold() == "not stated":
            uncertainty = ""
        coverage = self.coverage(k) if uncertainty else ""
        if uncertainty and not coverage:
            hint = "fill the column k, or call the column standard uncertainty"
            raise Unfit("uncertainty", "an uncertainty without its coverage factor", hint)
        self.add("uncertainty", uncertainty, " ± ")
        if _NUMBER.fullmatch(heat):
            self.add("unit", self.plain("unit") or self.header.units.get("heat", ""), " ")
        self.add("per", self.plain("per"), " of ")
        self.add("k", coverage, " (", ")")
        temperature = self.plain("temperature")
        if _NUMBER.fullmatch(temperature):
            temperature = f"{temperature} {self.header.units.get('temperature', '')}".strip()
        self.add("temperature", temperature, " at ")

    def coverage(self, k: float | None) -> str:
        """Coverage factor of the uncertainty: typed in the row, in the header, or given; empty for none."""
        typed = self.plain("k").strip("()").strip()
        if typed:
            return f"k = {typed}" if re.fullmatch(r"[0-9.]+", typed) else typed
        if self.header.coverage:
            return self.header.coverage
        return "" if k is None else f"k = {decimal_text(Fraction(repr(float(k))))}"

    def cell(self, name: str) -> str:
        """Text of a cell on one line; the apostrophe that made a formula harmless is taken off."""
        index = self.header.columns.get(name)
        text = self.line.cells[index] if index is not None and index < len(self.line.cells) else ""
        text = " ".join(text.split())
        return text[1:] if text.startswith("'") and harmless(text[1:]) == text else text

    def plain(self, name: str) -> str:
        """A cell that goes into the typed row without quotation marks; raises :class:`Unfit`."""
        text = plain_characters(self.cell(name))
        if len(text) > _LONGEST_CELL:
            raise Unfit(name, f"a cell of more than {_LONGEST_CELL:,} characters", "shorten it")
        for char in '|#"[]' if name == "label" else '|#"':
            if char in text:
                raise Unfit(name, f"{char} cannot stand in this cell", "each thing has a column of its own")
        return text


def unfit_fault(unfit: Unfit, line: Line, header: Header) -> Fault:
    """The fault of a line that cannot become a typed row."""
    message = f"{header.names.get(unfit.column, unfit.column)}: {unfit.message}"
    place = header.columns["label"]
    label = line.cells[place].strip()[:40] if place < len(line.cells) else ""
    return Fault(message, line.number, header.columns.get(unfit.column, place) + 1, hint=unfit.hint, subject=label)


def moved(fault: Fault, rows: Mapping[int, TypedRow]) -> Fault:
    """The fault of a typed row, given by its line, at the line of the file and in the column it is about."""
    if fault.line not in rows:
        return fault
    row = rows[fault.line]
    at = fault.column - 1
    column = next((name for name, (_, end) in row.spans.items() if at < end), "heat")
    header = row.header
    place = header.columns.get(column, header.columns["heat"])
    message = f"{header.names.get(column, column)}: {fault.message}"
    return Fault(message, row.line.number, place + 1, 1, fault.hint, "fault", fault.subject)

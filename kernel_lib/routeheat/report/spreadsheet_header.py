"""The header line of a spreadsheet of known heats: which column is which, and what its header says beside that."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace

from routeheat.errors import Fault, nearest
from routeheat.notation.pasted import plain_characters
from routeheat.report.known_columns import KNOWN_COLUMNS
from routeheat.report.spreadsheet_cells import Line

_ALIASES: dict[str, str] = {
    "row": "label", "id": "label",
    "equation": "reaction",
    "dh": "heat", "δh": "heat", "δrh": "heat", "enthalpy": "heat", "enthalpy of reaction": "heat", "value": "heat",
    "heat of reaction": "heat",
    "units": "unit",
    "±": "uncertainty", "+/-": "uncertainty", "expanded uncertainty": "uncertainty",
    "u": "standard uncertainty", "standard uncertainty": "standard uncertainty",
    "coverage factor": "k", "coverage": "k",
    "of": "per", "basis": "per",
    "t": "temperature", "at": "temperature",
    "sources": "source", "reference": "source", "literature": "source",
    "notes": "note", "remark": "note", "comment": "note",
}  # fmt: skip
"""Other headers that are read, without regard to capitals."""
NEEDED = ("label", "reaction", "heat")
SEARCHED = 30
"""Lines in which the header line is looked for."""


@dataclass(frozen=True, slots=True)
class Header:
    """What the header line says."""

    number: int
    """Its line in the file, counted from 1."""
    columns: dict[str, int]
    """Place of each column, by canonical name."""
    names: dict[str, str]
    """What the file calls each column."""
    units: dict[str, str]
    """Unit in the header: ``heat / (kJ/mol)``."""
    width: int
    """Number of its cells."""
    coverage: str = ""
    """Coverage factor in the header: ``uncertainty (k = 2)``; empty for none."""


def plain_header(text: str) -> str:
    """A header without regard to capitals, pasted characters and blanks."""
    return " ".join(plain_characters(text).casefold().split())


def find_header(lines: Sequence[Line], skipped: set[str]) -> tuple[Header, list[Fault]] | None:
    """The first line that has the needed headers, with its faults; ``None`` when there is none.

    ``skipped`` are plain headers that are not read.
    """
    for line in lines[:SEARCHED]:
        header, faults = _header(line, skipped)
        if all(name in header.columns for name in NEEDED):
            return header, faults
    return None


def _header(line: Line, skipped: set[str]) -> tuple[Header, list[Fault]]:
    header = Header(line.number, {}, {}, {}, len(line.cells))
    faults = []
    for index, cell in enumerate(line.cells):
        text = plain_header(cell)
        if not text or text in skipped:
            continue
        match = re.fullmatch(r"(.*?)\s*(?:/\s*(.+)|\((.+)\)|\[(.+)\]|,\s*(.+))?", text)
        assert match is not None  # every part is optional
        name = match[1] if _canonical(text) is None else text
        canonical = _canonical(name)
        # units keep their capitals
        aside = plain_characters(cell).strip()[len(name) :].strip(" /,") if name != text else ""
        if canonical is None:
            near = nearest(name, (*KNOWN_COLUMNS, *_ALIASES))
            hint = f"did you mean {near}?" if near else "rename it, or name it in ignore"
            faults.append(Fault(f"unknown column {cell.strip()[:60]}", line.number, index + 1, hint=hint))
            continue
        if canonical in header.columns:
            faults.append(Fault(f"two columns say {canonical}", line.number, index + 1, hint="keep one"))
            continue
        header.columns[canonical] = index
        header.names[canonical] = cell.strip()[:60]
        if aside:
            header.units[canonical] = re.sub(r"^([(\[])(.*)[)\]]$", r"\2", aside).strip()
    if "uncertainty" in header.columns and "standard uncertainty" in header.columns:
        place = header.columns["standard uncertainty"] + 1
        faults.append(Fault("two columns say the uncertainty", line.number, place, hint="keep one"))
    coverage = header.units.pop("uncertainty", "")
    if "standard uncertainty" in header.columns:
        header.columns.setdefault("uncertainty", header.columns["standard uncertainty"])
        header.names.setdefault("uncertainty", header.names["standard uncertainty"])
        coverage = "k = 1"
    elif coverage and re.fullmatch(r"k\s*=\s*[0-9.]+|[0-9.]+\s*%", coverage) is None:
        # a unit behind the uncertainty is that of the heat
        header.units.setdefault("heat", coverage)
        coverage = ""
    return replace(header, coverage=coverage), faults


def _canonical(name: str) -> str | None:
    if name in KNOWN_COLUMNS:
        return name
    return _ALIASES.get(name)

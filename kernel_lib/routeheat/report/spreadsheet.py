"""Known heats from and to a spreadsheet (CSV, XLSX), with plain headers; every bad row is reported with its line.

Each line is put together as one typed row of a sheet and read by the notation, so it means and refuses the same.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from decimal import Decimal
from pathlib import Path

from routeheat.chem.route import Declaration, Sheet
from routeheat.chem.row import Row, Rows
from routeheat.errors import Fault, RouteheatError, SheetFaults
from routeheat.notation.build import DEFAULT_K, build_sheet
from routeheat.notation.sections import MOST_ROWS
from routeheat.notation.write import write_sheet
from routeheat.report.files import write_whole
from routeheat.report.known_columns import KNOWN_COLUMNS, known_cells
from routeheat.report.spreadsheet_cells import Line, csv_lines, workbook_lines
from routeheat.report.spreadsheet_header import NEEDED, SEARCHED, Header, find_header, plain_header
from routeheat.report.spreadsheet_rows import TypedRow, Unfit, moved, unfit_fault
from routeheat.report.tables import harmless
from routeheat.report.workbook import workbook_bytes

_MOST_SHOWN = 50


def read_known_heats(
    source: str | Path,
    *,
    species: Mapping[str, Declaration] | None = None,
    k: float | None = None,
    worksheet: str | None = None,
    ignore: Iterable[str] = (),
) -> Rows:
    """Known rows from a spreadsheet: a :class:`pathlib.Path` to a CSV or XLSX file, or CSV text.

    Columns by their headers, in any order: ``label``, ``reaction`` (an equation, or ``formation of X``), ``heat``
    (exothermic negative), ``unit``, ``uncertainty`` with ``k`` (or ``standard uncertainty``), ``per`` (the species of a
    heat per amount or mass of it), ``temperature``, ``source``, ``note``. Units may stand in the header,
    ``heat / (kJ/mol)``, and the coverage factor, ``uncertainty (k = 2)``. A heat cell may hold everything as in a
    sheet, ``-45.94(18) kJ/mol``, also with another key, ``dU -3225.63 kJ/mol``; ``not entered`` stands for no heat. The
    header line is the first that has label, reaction and heat; in a workbook without ``worksheet`` the first page that
    has one.

    ``species`` are declared names (``sheet.species``), ``k`` the coverage factor of uncertainties that say none, and
    ``ignore`` headers that are not read. Numbers of a workbook are taken to the 15 digits it shows. Double quotation
    marks in texts become single ones, which a sheet can hold.

    Raises :class:`~routeheat.errors.SheetFaults` with every bad row and its line,
    :class:`~routeheat.errors.RouteheatError` when the file is no such spreadsheet, ``OSError``.
    """
    if isinstance(source, Path) and source.suffix.casefold() in (".xlsx", ".xlsm"):
        pages = workbook_lines(source, worksheet)
    else:
        pages = {"": csv_lines(source)}
    skipped = {plain_header(name) for name in ignore}
    for lines in pages.values():
        found = find_header(lines, skipped)
        if found is not None:
            header, faults = found
            return _read([line for line in lines if line.number > header.number], header, faults, species or {}, k)
    raise RouteheatError(
        f"no line with the headers {', '.join(NEEDED)} among the first {SEARCHED}"
        + (f" of {', '.join(pages)}" if "" not in pages else "")
    )


def write_known_heats(rows: Mapping[str, Row] | Iterable[Row], path: str | Path) -> Path:
    """Write known rows as CSV or XLSX (by the ending of ``path``) in the form :func:`read_known_heats` reads.

    Raises :class:`~routeheat.errors.RouteheatError` for another ending, ``OSError``.
    """
    listed = Rows(rows.values() if isinstance(rows, Mapping) else rows)
    made = Path(path)
    ending = made.suffix.casefold()
    if ending == ".csv":
        write_whole(made, known_csv(listed).encode("utf-8-sig"))
    elif ending == ".xlsx":
        write_whole(made, workbook_bytes({"known heats": listed}))
    else:
        raise RouteheatError(f"known heats are written as .csv or .xlsx, not as {ending or 'a file without ending'}")
    return made


def known_csv(rows: Rows) -> str:
    """Known rows as CSV text (RFC 4180); texts that look like formulas get a leading apostrophe."""
    out = io.StringIO()
    writer = csv.writer(out)
    writer.writerow(KNOWN_COLUMNS)
    for row in rows.values():
        writer.writerow(["" if cell is None else format(cell, "f") if isinstance(cell, Decimal) else harmless(cell)
                         for cell in known_cells(row)])  # fmt: skip
    return out.getvalue()


def _read(
    lines: Sequence[Line], header: Header, faults: list[Fault], species: Mapping[str, Declaration], k: float | None
) -> Rows:
    if len(lines) > MOST_ROWS:
        raise RouteheatError(f"more than {MOST_ROWS:,} rows: split the file")
    declared = write_sheet(Sheet(None, species, Rows(), {}, {})).strip("\n").split("\n") if species else []
    typed = [*declared, "known"]
    rows: dict[int, TypedRow] = {}
    for line in lines:
        try:
            row = TypedRow(line, header, k)
        except Unfit as unfit:
            faults.append(unfit_fault(unfit, line, header))
            continue
        typed.append(row.text)
        rows[len(typed)] = row
    sheet, found = build_sheet("\n".join(typed) + "\n")
    faults += [moved(fault, rows) for fault in found if fault.severity == "fault"]
    if faults:
        faults.sort(key=lambda fault: (fault.line, fault.column))
        raise SheetFaults(faults, _rendered(faults))
    coverage = float(DEFAULT_K) if k is None else float(k)
    return Rows((replace(row, line=rows[row.line].line.number) for row in sheet.known.values()), coverage)


def _rendered(faults: Sequence[Fault]) -> str:
    shown = [
        f"line {fault.line}{f' ({fault.subject})' if fault.subject else ''}: {fault.message}"
        + (f"\n  {fault.hint}" if fault.hint else "")
        for fault in faults[:_MOST_SHOWN]
    ]
    if len(faults) > _MOST_SHOWN:
        shown.append(f"… and {len(faults) - _MOST_SHOWN} more")
    return "\n".join(shown)

"""Interchange: sheets and results as JSON (RFC 8259) whose form is published as JSON schemas in this package.

A sheet carries its canonical text, which is the truth, and the same content spelled out for programs that do not read
the notation. A result carries its data and its tables, and shows itself again after reading.
"""

from __future__ import annotations

from dataclasses import dataclass
from importlib.resources import files
from pathlib import Path
from typing import Any, Literal, cast

from routeheat._version import __version__
from routeheat.chem.route import Sheet
from routeheat.errors import RouteheatError, SheetFaults, UnknownName
from routeheat.notation.write import write_sheet
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.process.sheet import read_sheet
from routeheat.report.files import write_whole
from routeheat.report.plain_json import digest, json_text, read_json_text
from routeheat.report.sheet_json import sheet_content
from routeheat.report.table_json import read_table, table_content

SHEET, RESULT = "routeheat sheet", "routeheat result"
VERSION = 1
"""Version of the form; a file with a higher one is refused."""
SchemaName = Literal["sheet", "result", "reference"]
_SCHEMAS: tuple[SchemaName, ...] = ("sheet", "result", "reference")


@dataclass(frozen=True, slots=True, repr=False)
class Archived(Shown):
    """A result read from JSON: its data and its tables as they were written."""

    kind: str
    """What it was: ``Comparison``, ``Profile``, ``Combination`` …"""
    made_with: str
    """Version of routeheat that wrote it."""
    content: dict[str, Any]
    """What ``.to_dict()`` of the result gave; empty when the result had none."""
    shown: tuple[Table, ...]

    def tables(self) -> tuple[Table, ...]:
        """The tables of the result."""
        return self.shown

    def table(self) -> Table:
        """The first table of the result."""
        return self.shown[0]

    def to_dict(self) -> dict[str, Any]:
        """The data of the result."""
        return self.content


def write_json(item: Sheet | Shown, path: str | Path | None = None) -> str:
    """A sheet or a result as JSON text, also written to ``path`` when one is given.

    Raises :class:`~routeheat.errors.SheetFaults` or :class:`~routeheat.errors.RouteheatError` for a sheet that its own
    text would not give back (one with faults, or made in code with texts that the notation cannot hold), ``OSError``.
    """
    text = json_text(_of_sheet(item) if isinstance(item, Sheet) else _of_result(item))
    if path is not None:
        write_whole(Path(path), text.encode("utf-8"))
    return text


def read_json(source: str | Path) -> Sheet | Archived:
    """The sheet or result that :func:`write_json` wrote: a ``str`` is JSON text, a :class:`pathlib.Path` a file.

    Raises :class:`~routeheat.errors.RouteheatError` when it is no such JSON, or when text and content of a sheet say
    different things; :class:`~routeheat.errors.SheetFaults` when the text of a sheet has faults.
    """
    found = read_json_text(source)
    if not isinstance(found, dict) or found.get("format") not in (SHEET, RESULT):
        raise RouteheatError(f'this JSON is neither a "{SHEET}" nor a "{RESULT}"')
    check_version(found)
    return _read_sheet(found) if found["format"] == SHEET else _read_result(found)


def json_schema(name: SchemaName) -> dict[str, Any]:
    """The JSON schema (draft 2020-12) of ``sheet``, ``result`` or ``reference``; raises UnknownName for another."""
    if name not in _SCHEMAS:
        raise UnknownName("schema", str(name), _SCHEMAS)
    text = files("routeheat.report").joinpath("schema", f"{name}.schema.json").read_text(encoding="utf-8")
    return cast("dict[str, Any]", read_json_text(text))


def check_version(found: dict[str, Any]) -> None:
    """Raise :class:`~routeheat.errors.RouteheatError` unless the form is one that is read here."""
    version = found.get("version")
    if not isinstance(version, int) or isinstance(version, bool) or version < 1:
        raise RouteheatError("this JSON does not say the version of its form")
    if version > VERSION:
        raise RouteheatError(f"form {version} is newer than form {VERSION}, which is read here: update routeheat")


def _of_sheet(sheet: Sheet) -> dict[str, Any]:
    text = write_sheet(sheet)
    if read_sheet(text) != sheet:
        raise RouteheatError("the text of this sheet gives another sheet: a text in it cannot be typed")
    return {
        "format": SHEET, "version": VERSION, "routeheat": __version__, "text": text, "digest": digest(text),
        "content": sheet_content(sheet),
    }  # fmt: skip


def _of_result(result: Shown) -> dict[str, Any]:
    kind, version = type(result).__name__, __version__
    if isinstance(result, Archived):
        kind, version = result.kind, result.made_with
    to_dict = getattr(result, "to_dict", None)
    return {
        "format": RESULT, "version": VERSION, "routeheat": version, "kind": kind,
        "result": {} if to_dict is None else to_dict(),
        "tables": [table_content(table) for table in result.tables()],
    }  # fmt: skip


def _read_sheet(found: dict[str, Any]) -> Sheet:
    text = found.get("text")
    if not isinstance(text, str):
        raise RouteheatError("this JSON of a sheet has no text")
    try:
        sheet = read_sheet(text)
    except SheetFaults as faults:
        faults.add_note("in the text of a sheet read from JSON")
        raise
    if "content" in found and found["content"] != sheet_content(sheet):
        raise RouteheatError(
            "text and content of this JSON say different things: one was edited without the other\n"
            "edit the text and leave out the content to read the text alone"
        )
    return sheet


def _read_result(found: dict[str, Any]) -> Archived:
    content, tables, kind = found.get("result"), found.get("tables"), found.get("kind")
    if not isinstance(content, dict) or not isinstance(tables, list) or not isinstance(kind, str) or not tables:
        raise RouteheatError("this JSON of a result lacks its kind, its result or its tables")
    return Archived(kind, str(found.get("routeheat", "")), content, tuple(read_table(table) for table in tables))

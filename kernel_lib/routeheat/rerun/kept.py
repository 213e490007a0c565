"""The file of a reference: readable JSON with the result, the data it is made of and what it rests on."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from pathlib import Path as FilePath
from typing import Any, cast

from routeheat._version import __version__
from routeheat.chem.heat import Datum
from routeheat.chem.route import Sheet
from routeheat.errors import RouteheatError
from routeheat.notation.write import write_sheet
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.report.archive import VERSION, check_version
from routeheat.report.plain_json import digest, exact, json_text, read_json_text
from routeheat.report.table_json import table_content
from routeheat.rerun.restson import heats_of, rests_on

FORMAT = "routeheat reference"


@dataclass(frozen=True, slots=True)
class Amount:
    """A typed number as a reference keeps it."""

    label: str
    what: str
    """``heat``, ``yield``, ``recycle`` or ``calibration``."""
    value: Fraction
    u: Fraction | None
    symbol: str


@dataclass(frozen=True, slots=True)
class Kept:
    """A result as it is kept."""

    name: str
    kind: str
    version: str
    """Version of the package that calculated it."""
    result: dict[str, Any]
    heats: dict[str, dict[str, Fraction]]
    """For each heat of the result, by its path as text: coefficient of every datum, by the name of the datum."""
    data: dict[str, Amount]
    rests_on: dict[str, str]
    rests_on_digest: str
    """Of everything typed that the result rests on; the same digest means the same input."""
    sheet_digest: str | None

    def content(self) -> dict[str, Any]:
        """As JSON-safe content, in the form of ``reference.schema.json``."""
        return {
            "format": FORMAT, "version": VERSION, "routeheat": self.version, "name": self.name, "kind": self.kind,
            "result": self.result,
            "heats": {
                path: [{"datum": name, "coefficient": str(c)} for name, c in terms.items()]
                for path, terms in self.heats.items()
            },
            "data": {
                name: {"label": item.label, "what": item.what, "value": str(item.value),
                       "u": None if item.u is None else str(item.u), "symbol": item.symbol}
                for name, item in self.data.items()
            },
            "rests_on": self.rests_on, "rests_on_digest": self.rests_on_digest, "sheet_digest": self.sheet_digest,
        }  # fmt: skip

    def text(self) -> str:
        """The text of the file."""
        return json_text(self.content())


def path_text(path: tuple[str, ...]) -> str:
    """A path as a reader sees it: ``profiles / A / total``."""
    return " / ".join(path)


def keep(name: str, result: Shown | Table, sheet: Sheet | None) -> Kept:
    """The present result in the form in which it is kept."""
    found = heats_of(result)
    data: dict[str, Amount] = {}
    heats: dict[str, dict[str, Fraction]] = {}
    for path, heat in found.items():
        named = {_datum_name(datum, data): c for datum, c in heat.terms}
        heats[path_text(path)] = named
    base = rests_on(result, sheet)
    kind = "Table" if isinstance(result, Table) else type(result).__name__
    return Kept(
        name, kind, __version__, _content(result), heats, data, base, digest(json_text(base)),
        None if sheet is None else digest(write_sheet(sheet)),
    )  # fmt: skip


def _datum_name(datum: Datum, data: dict[str, Amount]) -> str:
    """Register a datum; equal names of different data get a number."""
    amount = Amount(datum.label, datum.what, datum.value, datum.u, datum.symbol)
    name, number = datum.name, 1
    while data.setdefault(name, amount) != amount:
        number += 1
        name = f"{datum.name} ({number})"
    return name


def _content(result: Shown | Table) -> dict[str, Any]:
    to_dict = getattr(result, "to_dict", None)
    if to_dict is not None:
        return cast("dict[str, Any]", to_dict())
    tables = (result,) if isinstance(result, Table) else result.tables()
    return {"tables": [table_content(table) for table in tables]}


def read_kept(file: FilePath) -> Kept:
    """The reference in a file; raises :class:`~routeheat.errors.RouteheatError` when it is none, ``OSError``."""
    found = read_json_text(file)
    if not isinstance(found, dict) or found.get("format") != FORMAT:
        raise RouteheatError(f"{file} holds no reference result: move it away, or refresh the reference")
    check_version(found)
    try:
        return Kept(
            str(found["name"]), str(found["kind"]), str(found["routeheat"]), dict(found["result"]),
            {path: {str(term["datum"]): exact(term["coefficient"]) for term in terms}
             for path, terms in found["heats"].items()},
            {name: _amount(item) for name, item in found["data"].items()},
            {str(name): str(text) for name, text in found["rests_on"].items()},
            str(found["rests_on_digest"]), found["sheet_digest"],
        )  # fmt: skip
    except (KeyError, TypeError, ValueError, AttributeError) as problem:
        raise RouteheatError(f"{file} is a damaged reference ({problem!r}): restore it, or refresh it") from problem


def _amount(item: dict[str, Any]) -> Amount:
    u = item["u"]
    return Amount(
        str(item["label"]), str(item["what"]), exact(item["value"]), None if u is None else exact(u),
        str(item["symbol"]),
    )  # fmt: skip

"""What a reader takes along: the shown figure, a table, or the report, as the bytes of a file; nothing is saved."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass

from routeheat.draw import Drawing, as_drawing, paper_bytes
from routeheat.errors import RouteheatError, UnknownName
from routeheat.present.markup import plain
from routeheat.present.text import visible
from routeheat.report.tables import csv_text
from routeheat.report.workbook import workbook_bytes
from routeheat.report.write import report_bytes
from routeheat_widgets._model import DeskModel
from routeheat_widgets._view import Picture
from routeheat_widgets.routes import per_of

FIGURE_FORMS = ("svg", "pdf", "png")
TABLE_FORMS = ("csv", "xlsx")
REPORT_FORMS = ("html", "docx", "pdf")
WIDTHS = ("84 mm", "174 mm")
"""One and two columns of a printed page."""
_MIME = {
    "svg": "image/svg+xml",
    "pdf": "application/pdf",
    "png": "image/png",
    "csv": "text/csv;charset=utf-8",
    "xlsx": "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet",
    "html": "text/html;charset=utf-8",
    "docx": "application/vnd.openxmlformats-officedocument.wordprocessingml.document",
}
_LONGEST_NAME = 60


@dataclass(frozen=True, slots=True)
class Taken:
    """A file in memory."""

    name: str
    mime: str
    data: bytes


def drawings(picture: Picture) -> tuple[Drawing, ...]:
    """The figures of a view, the main one first."""
    first = () if picture.drawn is None else (as_drawing(picture.drawn),)
    return (*first, *(drawing for _, drawing in picture.more))


def take(
    model: DeskModel, picture: Picture | None, options: Mapping[str, str], what: str, form: str,
    *, width: str = "84 mm", index: int = 0,
) -> Taken:  # fmt: skip
    """The shown figure or table number ``index``, or the report of the sheet.

    Raises :class:`~routeheat.errors.UnknownName` for an unknown kind or form, and
    :class:`~routeheat.errors.RouteheatError` where there is nothing to take, or a line that it is made of is broken.
    """
    makers = {"figure": FIGURE_FORMS, "table": TABLE_FORMS, "report": REPORT_FORMS}
    if what not in makers:
        raise UnknownName("thing to take along", what, makers)
    if form not in makers[what]:
        raise UnknownName(f"form of a {what}", form, makers[what])
    if what == "report":
        if model.faults:
            raise RouteheatError(f"no report while a line is broken: line {model.faults[0].line}")
        data = report_bytes(model.sheet, form, per=per_of(options), text=model.text)
        return Taken(f"{report_name(model)}.{form}", _MIME[form], data)
    if picture is None or model.kept_names & picture.uses:
        raise RouteheatError(f"no {what} while a line that it is made of is broken")
    if what == "figure":
        offered = drawings(picture)
        if not 0 <= index < len(offered):
            raise RouteheatError("this view shows no figure to take along; its tables can be")
        tail = file_name(f"{name_of(picture)} {index + 1}" if index else name_of(picture))
        return Taken(f"{tail}_{width.replace(' ', '')}.{form}", _MIME[form],
                     paper_bytes(offered[index], form, width=width))  # fmt: skip
    if not 0 <= index < len(picture.tables):
        raise RouteheatError("this view shows no table to take along")
    if form == "xlsx":
        pages = {f"{n} {plain(table.title)}": (table,) for n, table in enumerate(picture.tables, 1)}
        return Taken(f"{file_name(name_of(picture))}.xlsx", _MIME[form], workbook_bytes(pages))
    title = f"{name_of(picture)} {index + 1}" if len(picture.tables) > 1 else name_of(picture)
    # the byte order mark tells spreadsheets that the file is UTF-8
    return Taken(f"{file_name(title)}.csv", _MIME[form], csv_text(picture.tables[index]).encode("utf-8-sig"))


def offers(picture: Picture | None) -> dict[str, list[str]]:
    """Titles of the figures and tables that can be taken along."""
    if picture is None:
        return {"figures": [], "tables": []}
    return {
        "figures": [visible(plain(drawing.title)) for drawing in drawings(picture)],
        "tables": [visible(plain(table.title)) for table in picture.tables],
    }


def name_of(picture: Picture) -> str:
    """What the picture is of, in words."""
    return picture.name or "sheet"


def report_name(model: DeskModel) -> str:
    """Name of a report's file, without its suffix: from what the routes make, else from the targets."""
    makes = dict.fromkeys(plain(route.makes.rich) for route in model.sheet.routes.values())
    subject = " ".join(["routes to", *makes]) if makes else " ".join(model.sheet.targets)
    return file_name(f"report {subject}")


def file_name(words: str) -> str:
    """``words`` as a name that every file system takes: letters, digits and hyphens joined by underscores."""
    joined = re.sub(r"[^\w-]+", "_", unicodedata.normalize("NFKC", words)).strip("_-")
    return joined[:_LONGEST_NAME].strip("_-") or "sheet"

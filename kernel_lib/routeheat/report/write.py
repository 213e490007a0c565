"""The report in one call: as a file, or as bytes for a download."""

from __future__ import annotations

import datetime
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import Any

from routeheat.chem.route import Sheet
from routeheat.draw.drawable import refuse
from routeheat.errors import UnknownName
from routeheat.report import html, pdf, word
from routeheat.report.document import Document
from routeheat.report.files import write_whole
from routeheat.report.matter import gather
from routeheat.report.sections import build

_RENDERERS: dict[str, Callable[[Document], bytes]] = {"html": html.render, "docx": word.render, "pdf": pdf.render}
FORMS = tuple(_RENDERERS)
_OPTIONS = ("title", "question", "date", "per", "leave_out", "text")


def write_report(
    sheet: Sheet, path: str | Path, *, title: str = "", question: str = "",
    date: str | datetime.date | None = None, per: Any = "mol", leave_out: Iterable[str] = (),
    text: str | None = None, **unknown: object,
) -> Path:  # fmt: skip
    """Writes the report of a sheet; the suffix of ``path`` decides the form (.html, .docx, .pdf).

    ``title`` and ``question`` stand first; a ``date`` only when given. ``per`` is the basis of the profiles (``mol``,
    ``kg``, ``12 kg``). ``leave_out`` names sections to leave out. ``text`` is the sheet as typed for the appendix;
    without it the canonical text. The same input gives the same bytes. Returns the path written.
    Raises :class:`~routeheat.errors.UnknownName` for another suffix, section or option,
    :class:`~routeheat.errors.UnitError` for an unusable basis, ``OSError`` when the file cannot be written.
    """
    target = Path(path)
    content = report_bytes(
        sheet, target.suffix.lower(), title=title, question=question, date=date, per=per, leave_out=leave_out,
        text=text, **unknown,
    )  # fmt: skip
    write_whole(target, content)
    return target


def report_bytes(
    sheet: Sheet, form: str, *, title: str = "", question: str = "", date: str | datetime.date | None = None,
    per: Any = "mol", leave_out: Iterable[str] = (), text: str | None = None, **unknown: object,
) -> bytes:  # fmt: skip
    """The file that :func:`write_report` writes, in memory; ``form`` is ``html``, ``docx`` or ``pdf``."""
    refuse(unknown, _OPTIONS)
    kind = form.removeprefix(".")
    if kind not in _RENDERERS:
        raise UnknownName("form of a report", form, FORMS)
    day = date.isoformat() if isinstance(date, datetime.date) else date or ""
    matter = gather(sheet, title=title, question=question, date=day, per=per, text=text)
    return _RENDERERS[kind](build(matter, leave_out))

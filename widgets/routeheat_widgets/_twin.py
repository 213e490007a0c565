"""What a desk leaves in a notebook: code that makes the same thing, one line of text, and a page without a kernel."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

from routeheat.draw import as_drawing, static_svg
from routeheat.present.html import escape, figure_html, render_table
from routeheat.present.markup import plain
from routeheat.process.cautions import SHORT
from routeheat_widgets import _export
from routeheat_widgets._model import DeskModel, count_lines
from routeheat_widgets._view import Picture
from routeheat_widgets.routes import per_of


def code(model: DeskModel, picture: Picture, path: Path | None) -> str:
    """Code that makes the picture again in a cell; an empty text while a broken line is stood in for."""
    if model.kept_names & picture.uses or not picture.code:
        return ""
    read = f"Path({str(path)!r}).read_text(encoding='utf-8-sig')"
    lines = ["import routeheat as rh", "from IPython.display import display"]
    if path is not None:
        lines.insert(0, "from pathlib import Path\n")
    lines += ["", f"text = {sheet_literal(model.text) if path is None else read}"]
    broken = "sheet, faults = rh.check_sheet(text)  # healthy lines only"
    lines.append("sheet = rh.read_sheet(text)" if model.healthy else broken)
    lines += picture.code
    if picture.drawn is None:
        lines.append("display(result)")
    else:
        shown = "" if not _has_tables(picture) else "result, "
        more = "".join(f", {expression}" for expression, _ in picture.more)
        lines.append(f"display({shown}rh.svg({_drawn(picture)}){more})")
    return "\n".join(lines)


def save_code(model: DeskModel, picture: Picture, path: Path | None, options: Mapping[str, str]) -> str:
    """Code that saves what the page takes along, to run after :func:`code`; empty where that is."""
    if not code(model, picture, path):
        return ""
    name = _export.file_name(_export.name_of(picture))
    lines = []
    if picture.drawn is not None:
        lines.append(f"rh.paper({_drawn(picture)}, {f'{name}.pdf'!r}, width='84 mm')  # .svg, .png; 174 mm")
    if picture.tables and _has_tables(picture):
        lines.append(f"rh.write_workbook(result, {f'{name}.xlsx'!r})")
    if model.healthy:
        report = f"{_export.report_name(model)}.html"
        lines.append(f"rh.write_report(sheet, {report!r}, per={per_of(options)!r}, text=text)  # .docx, .pdf")
    return "\n".join(lines)


def _drawn(picture: Picture) -> str:
    """The name of what is drawn in the code."""
    return "diagram" if any("diagram" in line for line in picture.code) else "result"


def _has_tables(picture: Picture) -> bool:
    """False where the code's result is a diagram alone."""
    return not any(line.startswith("result = diagram") for line in picture.code)


def sheet_literal(text: str) -> str:
    """``text`` as a Python literal: with its lines as typed where that is safe, else escaped."""
    plain_enough = all(char == "\n" or char.isprintable() for char in text)
    if plain_enough and "\\" not in text and '"""' not in text and not text.endswith('"'):
        return f'"""{text}"""'
    return repr(text)


def summary(model: DeskModel) -> str:
    """The desk in one line, the same every time."""
    counts = [
        _count(len(model.sheet.routes), "route", "routes"),
        _count(len(model.sheet.targets), "target", "targets"),
        _count(len(model.sheet.known), "known row", "known rows"),
    ]
    said = [words for words in counts if words] or ["nothing typed"]
    faults = _count(len(model.faults), "fault", "faults") or "no faults"
    lines = _count(count_lines(model.text), "line", "lines")
    return f"RouteDesk: {', '.join(said)}, {lines}, {faults}"


def static_page(model: DeskModel, picture: Picture | None, question: str) -> str:
    """The shown view as HTML without scripts: an ``<img>`` with its bytes inside, and tables."""
    parts = [f'<div class="rhd-twin"><p><b>{escape(question)}</b></p>']
    if picture is None:
        parts.append(f"<p>{escape(summary(model))}</p>")
    else:
        if picture.drawn is not None:
            for drawing in (as_drawing(picture.drawn), *(more for _, more in picture.more)):
                parts.append(figure_html(static_svg(drawing), drawing.alt or plain(drawing.title)))
        parts += [render_table(table) for table in picture.tables]
        if picture.empty:
            parts.append(f"<p>{escape(picture.empty)}</p>")
    parts += [f"<p>{escape(str(fault))}</p>" for fault in model.faults[:20]]
    parts.append(f"<p>{escape(SHORT)}</p></div>")
    return "\n".join(parts)


def _count(number: int, one: str, many: str) -> str:
    return "" if not number else f"{number} {one if number == 1 else many}"

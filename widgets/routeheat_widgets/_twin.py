"""What a desk leaves in a notebook: code that makes the same thing, one line of text, and a page without a kernel."""

from __future__ import annotations

from pathlib import Path

from routeheat.draw import as_ladder, static_svg
from routeheat.present.html import escape, figure_html, render_table
from routeheat.present.markup import plain
from routeheat_widgets._model import DeskModel, count_lines
from routeheat_widgets._view import Picture

CAUTION = "Screening aid: values typed are not verified; no substitute for tests, a hazard study or a competent person."


def code(model: DeskModel, picture: Picture, path: Path | None) -> str:
    """Code that makes the picture again in a cell; an empty text while a broken line is stood in for."""
    if model.kept_names & picture.uses or not picture.code:
        return ""
    source = sheet_literal(model.text) if path is None else f"Path({str(path)!r})"
    lines = ["import routeheat as rh", "from IPython.display import display"]
    if path is not None:
        lines.insert(0, "from pathlib import Path\n")
    if model.healthy:
        lines += ["", f"sheet = rh.read_sheet({source})"]
    else:
        text = source if path is None else f"{source}.read_text(encoding='utf-8-sig')"
        lines += ["", f"sheet, faults = rh.check_sheet({text})  # healthy lines only"]
    lines += picture.code
    if picture.drawn is None:
        lines.append("display(result)")
    else:
        drawn = "diagram" if any("diagram" in line for line in picture.code) else "result"
        shown = "" if any(line.startswith("result = diagram") for line in picture.code) else "result, "
        lines.append(f"display({shown}rh.svg({drawn}))")
    return "\n".join(lines)


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
            ladder = as_ladder(picture.drawn)
            parts.append(figure_html(static_svg(ladder), ladder.alt or plain(ladder.title)))
        parts += [render_table(table) for table in picture.tables]
        if picture.empty:
            parts.append(f"<p>{escape(picture.empty)}</p>")
    parts += [f"<p>{escape(str(fault))}</p>" for fault in model.faults[:20]]
    parts.append(f"<p>{escape(CAUTION)}</p></div>")
    return "\n".join(parts)


def _count(number: int, one: str, many: str) -> str:
    return "" if not number else f"{number} {one if number == 1 else many}"

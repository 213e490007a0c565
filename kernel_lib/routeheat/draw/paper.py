"""Figures for print through matplotlib: SVG with outlined text, PDF with embedded fonts, PNG at 600 dpi.

No pyplot and no browser; the fonts come with matplotlib. The same input gives the same bytes on one version of
matplotlib: no dates, no random identifiers.
"""

from __future__ import annotations

import io
import re
import threading
import warnings
from fractions import Fraction
from pathlib import Path
from typing import TYPE_CHECKING, Any, Literal

from routeheat.draw.arrange import Drawing
from routeheat.draw.decks import Stack, stack
from routeheat.draw.drawable import Drawable, as_drawing, refuse
from routeheat.draw.glyphs import font_file, shown
from routeheat.draw.glyphs import width as text_width
from routeheat.draw.ink import TEXT, Mark, Shape, Stroke, Word, marks
from routeheat.draw.printing import printable_drawing, unit_in_parentheses
from routeheat.errors import UnitError, UnknownName
from routeheat.present.html import escape
from routeheat.present.text import visible
from routeheat.units import read_unit

if TYPE_CHECKING:
    from matplotlib.artist import Artist
    from matplotlib.figure import Figure
    from matplotlib.transforms import Transform

FORMS = ("svg", "pdf", "png")
AXIS_STYLES = ("quantity / unit", "quantity (unit)")
DPI = 600
POINTS_PER_PX = 7.0 / TEXT
"""Scale of print: the text of a figure is set in 7 pt."""
POINTS_PER_MM = 72 / 25.4
NARROWEST = 60.0
WIDEST = 400.0
"""Widths that are accepted, mm."""
_OPTIONS = ("width", "axis_style")
_LONGEST_DATUM = 4000
_SETTINGS: Any = {
    "svg.fonttype": "path",
    "svg.hashsalt": "routeheat",
    "pdf.fonttype": 42,
    "pdf.compression": 6,
    "path.simplify": False,
    "text.hinting": "none",
    "text.usetex": False,
    "text.parse_math": False,
    "axes.unicode_minus": False,
}
_settings_lock = threading.RLock()


def paper(
    result: Drawing | Drawable, path: str | Path, *, width: str = "84 mm", axis_style: str = "quantity / unit",
    **unknown: object,
) -> Path:  # fmt: skip
    """Writes the diagram of ``result`` for print; the suffix of ``path`` decides the form (.svg, .pdf, .png).

    ``width`` is a length from 60 to 400 mm, such as ``84 mm`` (one column), ``174 mm`` (two) or ``12 cm``; the height
    follows. Text is 7 pt. ``axis_style`` is ``quantity / unit`` or ``quantity (unit)``. Returns the path written.
    Raises :class:`~routeheat.errors.UnknownName` for another suffix, style or option,
    :class:`~routeheat.errors.UnitError` for a width that is no such length, ``OSError`` when the file cannot be
    written.
    """
    target = Path(path)
    data = paper_bytes(result, target.suffix.lower(), width=width, axis_style=axis_style, **unknown)
    target.write_bytes(data)
    return target


def paper_bytes(
    result: Drawing | Drawable, form: str, *, width: str = "84 mm", axis_style: str = "quantity / unit",
    **unknown: object,
) -> bytes:  # fmt: skip
    """The file that :func:`paper` writes, in memory; ``form`` is ``svg``, ``pdf`` or ``png``."""
    refuse(unknown, _OPTIONS)
    kind = form.removeprefix(".")
    if kind not in FORMS:
        raise UnknownName("form of a figure", form, FORMS)
    if axis_style not in AXIS_STYLES:
        raise UnknownName("axis style", axis_style, AXIS_STYLES)
    room = millimetres(width)
    figure = print_layout(as_drawing(result), room, axis_style=axis_style)
    return rendered(figure, kind, scale=min(POINTS_PER_PX, room * POINTS_PER_MM / figure.width))


def print_layout(
    drawing: Drawing, width: float, *, axis_style: str = "quantity / unit", listing: bool = True
) -> Stack:  # fmt: skip
    """The figure in print characters, laid out ``width`` mm wide; lengths of the result are px."""
    if axis_style == "quantity (unit)":
        drawing = unit_in_parentheses(drawing)
    return stack(printable_drawing(drawing), width * POINTS_PER_MM / POINTS_PER_PX, listing=listing)


def millimetres(width: str) -> float:
    """A typed length in mm; raises :class:`~routeheat.errors.UnitError`."""
    hint = f"a length from {NARROWEST:.0f} to {WIDEST:.0f} mm, like 84 mm or 174 mm"
    match = re.fullmatch(r"\s*([0-9]{1,4}(?:\.[0-9]{1,6})?)\s*([a-z]{1,2})\s*", width)
    if match is None:
        raise UnitError("the width of a figure is not a length", width, hint)
    found = float(read_unit(match[2]).convert(Fraction(match[1]), read_unit("mm")))
    if not NARROWEST <= found <= WIDEST:
        raise UnitError("the width of a figure is out of range", width, hint)
    return found


def rendered(figure: Stack, form: str, *, scale: float = POINTS_PER_PX, dpi: int = DPI) -> bytes:
    """A figure as the bytes of an SVG, PDF or PNG file; ``scale`` is points per px, ``dpi`` counts for PNG."""
    import matplotlib as mpl
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    title, alt = (visible(shown(text))[:_LONGEST_DATUM] for text in (figure.title, figure.alt))
    metadata: dict[str, dict[str, Any]] = {
        "svg": {"Date": None, "Creator": "routeheat", "Title": title or None, "Description": alt or None},
        "pdf": {"CreationDate": None, "ModDate": None, "Creator": "routeheat", "Producer": None,
                "Title": title, "Subject": alt},
        "png": {"Software": "routeheat", "Title": title, "Description": alt},
    }  # fmt: skip
    out = io.BytesIO()
    # matplotlib keeps its settings for the whole process, so figures are painted one at a time
    with _settings_lock, mpl.rc_context(_SETTINGS), warnings.catch_warnings():
        warnings.filterwarnings("ignore", module="matplotlib")
        sheet = Figure(figsize=(figure.width * scale / 72, figure.height * scale / 72), facecolor="white")
        FigureCanvasAgg(sheet)
        _paint(sheet, figure, scale)
        sheet.savefig(out, format=form, dpi=dpi, metadata=metadata[form], facecolor="white")
    return _described(out.getvalue(), alt) if form == "svg" else out.getvalue()


def _described(svg: bytes, alt: str) -> bytes:
    """The SVG as an image with a description for screen readers."""
    text = svg.decode("utf-8").replace("<svg ", '<svg role="img" ', 1)
    ends = ("</title>", ">") if "</title>" in text else (">",)
    place = text.index("<svg ")
    for end in reversed(ends):
        place = text.index(end, place) + len(end)
    return f"{text[:place]}\n <desc>{escape(alt)}</desc>{text[place:]}".encode()


def _paint(sheet: Figure, figure: Stack, scale: float) -> None:
    from matplotlib.transforms import Affine2D

    inch = scale / 72
    place = Affine2D().scale(inch, -inch).translate(0, figure.height * inch) + sheet.dpi_scale_trans
    for mark in marks(figure, text_width):
        sheet.add_artist(_artist(mark, place, scale))


def _artist(mark: Mark, place: Transform, scale: float) -> Artist:
    from matplotlib.font_manager import FontProperties
    from matplotlib.lines import Line2D
    from matplotlib.patches import Circle, Polygon
    from matplotlib.text import Text

    if isinstance(mark, Word):
        font = FontProperties(fname=str(font_file(bold=mark.bold, italic=mark.italic)), size=mark.size * scale)
        return Text(
            mark.x, mark.y, mark.text, color=mark.colour, fontproperties=font, transform=place, parse_math=False,
            rotation=90 if mark.upright else 0, rotation_mode="anchor", ha="left", va="baseline",
        )  # fmt: skip
    if isinstance(mark, Stroke):
        dash = tuple(part / mark.width for part in mark.dash)
        cap: Literal["round", "butt"] = "round" if mark.round else "butt"
        return Line2D(
            [x for x, _ in mark.points], [y for _, y in mark.points], color=mark.colour,
            linewidth=mark.width * scale, linestyle=(0, dash) if dash else "-", dash_capstyle=cap,
            solid_capstyle=cap, transform=place,
        )  # fmt: skip
    outline = Polygon(list(mark.points)) if isinstance(mark, Shape) else Circle((mark.x, mark.y), mark.radius)
    outline.set(
        facecolor=mark.colour if mark.filled else "white", edgecolor=mark.colour, linewidth=mark.width * scale,
        joinstyle="miter", transform=place,
    )  # fmt: skip
    return outline

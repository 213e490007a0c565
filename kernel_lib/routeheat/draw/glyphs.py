"""The fonts of print, which come with matplotlib, so that a figure is the same on every machine."""

from __future__ import annotations

import threading
from functools import cache
from pathlib import Path
from typing import Any

from routeheat.present.markup import Rich, Run, as_rich
from routeheat.present.text import visible

FAMILY = "DejaVu Sans"
LACKING = "\N{WHITE SQUARE}"
LACKING_NOTE = f"{LACKING} stands for a character that the print font lacks."
_FILES = {
    (False, False): "DejaVuSans.ttf",
    (True, False): "DejaVuSans-Bold.ttf",
    (False, True): "DejaVuSans-Oblique.ttf",
    (True, True): "DejaVuSans-BoldOblique.ttf",
}
_FINE = 1000
"""Size at which widths are measured, so that no rounding to pixels enters."""
_lock = threading.Lock()


def font_file(*, bold: bool = False, italic: bool = False, mono: bool = False) -> Path:
    """The TrueType file of one style."""
    import matplotlib

    name = _FILES[(bold, italic)]
    return Path(matplotlib.get_data_path(), "fonts", "ttf", name.replace("Sans", "SansMono") if mono else name)


@cache
def _font(bold: bool, italic: bool, mono: bool = False) -> Any:
    from matplotlib.ft2font import FT2Font

    font = FT2Font(str(font_file(bold=bold, italic=italic, mono=mono)))
    font.set_size(_FINE, 72)
    return font


@cache
def characters(*, bold: bool = False, italic: bool = False, mono: bool = False) -> frozenset[int]:
    """Code points that the font of one style has."""
    return frozenset(_font(bold, italic, mono).get_charmap())


@cache
def _everywhere() -> frozenset[int]:
    """Code points that upright, bold and oblique letters all have."""
    return characters() & characters(bold=True) & characters(italic=True)


@cache
def _advance(character: str, bold: bool, italic: bool) -> float:
    from matplotlib.ft2font import LoadFlags

    with _lock:
        glyph = _font(bold, italic).load_char(ord(character), flags=LoadFlags.NO_HINTING)
        return float(glyph.linearHoriAdvance) / 65536 / _FINE


def width(text: str, size: float, bold: bool = False, italic: bool = False) -> float:
    """Width of ``text`` at ``size``, in the unit of ``size``: the sum of the advance widths."""
    return sum(_advance(character, bold, italic) for character in text) * size


def shown(text: str, *, mono: bool = False) -> str:
    """``text`` harmless, with a square in place of every character that one of the fonts lacks."""
    kept = characters(mono=True) if mono else _everywhere()
    return "".join(c if ord(c) in kept else LACKING for c in visible(text))


def shown_rich(rich: Rich | str) -> Rich:
    """:func:`shown` for every run."""
    return tuple(Run(shown(run.text), run.style) for run in as_rich(rich))

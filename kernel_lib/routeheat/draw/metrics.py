"""Widths of text without a browser: a conservative table, wrapping and shortening.

The widths are the larger of the advance widths of an Arial-metric sans serif and of DejaVu Sans, in thousandths of
the font size rounded up to the next 20, so text never comes out wider than the box it was given.
"""

from __future__ import annotations

import unicodedata

from routeheat.present.markup import Rich, Run

SCRIPT = 0.7
"""Size of sub- and superscripts relative to the text they belong to."""
LINE = 1.3
"""Height of one line of text relative to its size."""
BOLD = 1.15
"""Bold text is at most this much wider, for the letters labels and titles are made of."""
ELLIPSIS = "…"

_UNKNOWN = 1100
_BY_WIDTH = {
    180: "⁄ⁱ",
    240: "′",
    260: "⁽⁾₍₎",
    280: "'ijlìíîïĩīĭįıĵĺļ",
    300: "IÌÍÎÏĨĪĬĮİłΙΪ",
    320: " \xa0,.·‘’",
    340: "/:;\\|¦ίι∕",
    360: "fŀſ",
    380: "-ľ‐\u2011″",
    400: "()[]tţťŧⁿₐ⟨⟩",
    420: "!r¡²³¹ŕŗř⁰⁴⁵⁶⁷⁸⁹₀₁₂₃₄₅₆₇₈₉ₑₒℓ",
    460: '"ₓ',
    480: "ªº",
    500: "*J`¨°´¸Ĵ",
    520: "“”",
    540: "szśŝşšźżž⁺⁻⁼₊₋₌∫",
    560: "?L_c§¯çćĉċčĳĹĻĽĿΓέεζνξ–†‡",
    580: "kķĸŁΰυχ",
    600: "vxyýÿŷγκλς•",
    620: "FTaeo«»¿àáâãäåèéêëðòóôõöøāăąēĕėęěōŏőŢŤŦΤδθοτϑϵ",
    640: "$0123456789bdghnpqu{}¢£¤¥µ¶ßñùúûüþďđĝğġģĥńņňŋũūŭůűųΣήβημρσ∙√",
    660: "Ξάαφϕ",
    680: "EKPSYÈÉÊËÝÞĒĔĖĘĚĶŚŜŞŠŶŸΕΚΡΥΫ∆",
    700: "ABVXZÀÁÂÃÄÅĀĂĄħŹŻŽΑΒΔΖΛΧπ",
    720: "ψ∑",
    740: "CRUÇÙÚÛÜĆĈĊČĲŔŖŘŨŪŬŮŰŲ",
    760: "HNÑĤŃŅŇŊΗΝΠ",
    780: "&DGÐĎĐĜĞĠĢΩ",
    800: "OQÒÓÔÕÖØŌŎŐΘΟΦ",
    820: "wŉŵ",
    840: "#+<=>^~¬±×÷Ψω↑↓⇌⇒−∓∞≈≠≤≥∏",
    880: "MΜ",
    920: "Ħ",
    960: "%",
    980: "m¼½¾⅓⅔⅛⅜⅝⅞",
    1000: "W©®ÆæŴ—…←→↔",
    1020: "@",
    1040: "œ",
    1080: "Œ",
    1140: "℃",
    1360: "‰",
    1440: "⟶⟵",
}
_WIDTHS = {character: width for width, characters in _BY_WIDTH.items() for character in characters}


def character_width(character: str) -> int:
    """Advance width in thousandths of the font size; combining characters have none."""
    width = _WIDTHS.get(character)
    if width is None:
        width = 0 if unicodedata.category(character) in ("Mn", "Me", "Cf") else _UNKNOWN
    return width


def text_width(text: str, size: float, *, bold: bool = False) -> float:
    """Width in px of ``text`` set at ``size`` px."""
    return sum(map(character_width, text)) * size * (BOLD if bold else 1.0) / 1000


def rich_width(rich: Rich, size: float, *, bold: bool = False) -> float:
    """Width in px of a rich text set at ``size`` px."""
    return sum(text_width(run.text, run_size(run, size), bold=bold) for run in rich)


def run_size(run: Run, size: float) -> float:
    """Font size of one run in px."""
    return size * SCRIPT if run.style in ("sub", "sup") else size


def shorten(rich: Rich, width: float, size: float, *, bold: bool = False) -> Rich:
    """``rich`` itself where it fits in ``width`` px, else with its middle replaced by an ellipsis."""
    if rich_width(rich, size, bold=bold) <= width:
        return rich
    # no letter is narrower than an eighth of its size, so more letters than this never fit
    most = int(8 * width / size) + 1
    first = _letters(rich, most)
    last = _letters(tuple(Run(run.text[::-1], run.style) for run in reversed(rich)), most)
    room = width - text_width(ELLIPSIS, size, bold=bold)
    head = _fitting(first, room / 2, size, bold)
    used = rich_width(tuple(first[:head]), size, bold=bold)
    tail = _fitting(last, room - used, size, bold)
    return _merged([*first[:head], Run(ELLIPSIS), *reversed(last[:tail])])


def wrap(rich: Rich, width: float, size: float, *, lines: int, bold: bool = False) -> tuple[Rich, ...]:
    """``rich`` broken at spaces into at most ``lines`` lines of at most ``width`` px.

    A word longer than a line is shortened in its middle; when the lines do not suffice the last one holds the rest,
    shortened in its middle.
    """
    words = _words(rich)
    space = text_width(" ", size, bold=bold)
    result: list[Rich] = []
    current: list[Run] = []
    used = 0.0
    for index, word in enumerate(words):
        need = rich_width(word, size, bold=bold)
        if current and used + space + need > width:
            if len(result) == lines - 1:
                rest = [run for later in words[index:] for run in (Run(" "), *later)]
                return (*result, shorten(_merged([*current, *rest]), width, size, bold=bold))
            result.append(_merged(current))
            current, used = [], 0.0
        if current:
            current.append(Run(" "))
            used += space
        piece = shorten(word, width, size, bold=bold)
        current.extend(piece)
        used += min(need, width)
    return (*result, _merged(current)) if current else tuple(result)


def _words(rich: Rich) -> list[Rich]:
    words: list[Rich] = []
    word: list[Run] = []
    for run in rich:
        for index, piece in enumerate(run.text.split(" ")):
            if index and word:
                words.append(tuple(word))
                word = []
            if piece:
                word.append(Run(piece, run.style))
    if word:
        words.append(tuple(word))
    return words


def _letters(rich: Rich, most: int) -> list[Run]:
    """The first letters, each a run of its own."""
    return [Run(letter, run.style) for run in rich for letter in run.text[:most]][:most]


def _fitting(letters: list[Run], width: float, size: float, bold: bool) -> int:
    """How many letters fit into ``width`` px."""
    used = 0.0
    for count, letter in enumerate(letters):
        used += text_width(letter.text, run_size(letter, size), bold=bold)
        if used > width:
            return count
    return len(letters)


def _merged(runs: list[Run]) -> Rich:
    merged: list[Run] = []
    for run in runs:
        if merged and merged[-1].style == run.style:
            merged[-1] = Run(merged[-1].text + run.text, run.style)
        else:
            merged.append(run)
    return tuple(merged)

"""Text pasted from a word processor reads the same as typed text.

Look-alike characters are replaced one for one, so that columns stay true. Characters that nobody can see are taken
out, and faults are moved back to the columns of the text as typed.
"""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace

from routeheat.errors import Fault

_SPACES = (
    "\t\v\f\N{NEXT LINE}\N{NO-BREAK SPACE}\N{OGHAM SPACE MARK}\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008"
    "\N{THIN SPACE}\N{HAIR SPACE}\N{NARROW NO-BREAK SPACE}\N{MEDIUM MATHEMATICAL SPACE}\N{IDEOGRAPHIC SPACE}"
    "\N{LINE SEPARATOR}\N{PARAGRAPH SEPARATOR}"
)
_ALIKE = str.maketrans(
    {
        **dict.fromkeys(_SPACES, " "),
        **dict.fromkeys("\N{MINUS SIGN}\N{EN DASH}\N{NON-BREAKING HYPHEN}\N{HYPHEN}\N{FIGURE DASH}", "-"),
        **dict.fromkeys("\N{LEFT DOUBLE QUOTATION MARK}\N{RIGHT DOUBLE QUOTATION MARK}", '"'),
        **dict.fromkeys("\N{DOUBLE LOW-9 QUOTATION MARK}\N{DOUBLE HIGH-REVERSED-9 QUOTATION MARK}", '"'),
        **dict.fromkeys("\N{LEFT SINGLE QUOTATION MARK}\N{RIGHT SINGLE QUOTATION MARK}", "'"),
        "\N{FRACTION SLASH}": "/",
        "\N{MASCULINE ORDINAL INDICATOR}": "\N{DEGREE SIGN}",
        "\N{INCREMENT}": "\N{GREEK CAPITAL LETTER DELTA}",
        "\N{FULLWIDTH PLUS SIGN}": "+",
        "\N{FULLWIDTH COMMA}": ",",
    }
)
_HARMLESS = frozenset(
    "\N{ZERO WIDTH SPACE}\N{ZERO WIDTH NON-JOINER}\N{ZERO WIDTH JOINER}\N{WORD JOINER}\N{SOFT HYPHEN}"
    "\N{ZERO WIDTH NO-BREAK SPACE}\N{VARIATION SELECTOR-16}"
)
"""Invisible characters that word processors and web pages leave in pasted text; they are ignored."""


def plain_characters(line: str) -> str:
    """The line with look-alike characters replaced one for one; its length never changes."""
    return line.translate(_ALIKE)


@dataclass(frozen=True, slots=True)
class PlainLine:
    """One line as it is read."""

    text: str
    """The characters, plain and visible."""
    origin: Sequence[int] | None
    """Index in the typed line of every character of ``text``; ``None`` when nothing was taken out."""
    control: int | None
    """Index in the typed line of the first control character, such as one that reverses the direction of writing."""


def plain_line(typed: str) -> PlainLine:
    """The line with plain characters, and without the invisible ones."""
    text = plain_characters(typed)
    if text.isprintable():
        return PlainLine(text, None, None)
    kept = [index for index, char in enumerate(text) if not _invisible(char)]
    control = next((i for i, char in enumerate(text) if _invisible(char) and char not in _HARMLESS), None)
    if len(kept) == len(text):
        return PlainLine(text, None, None)
    return PlainLine("".join(text[index] for index in kept), kept, control)


def _invisible(char: str) -> bool:
    return char in _HARMLESS or unicodedata.category(char) in ("Cc", "Cf", "Cs")


def control_fault(typed: str, number: int, place: int) -> Fault:
    """The fault of the control character at index ``place`` of the line as typed, in columns of that line."""
    message = f"an invisible control character U+{ord(typed[place]):04X}"
    return Fault(message, number, place + 1, 1, "delete it: what is seen here may not be what is read")


def as_typed(faults: Iterable[Fault], origins: Mapping[int, Sequence[int]]) -> list[Fault]:
    """The faults at the columns of the typed text, where invisible characters were taken out."""
    return [_moved(fault, origins[fault.line]) if fault.line in origins else fault for fault in faults]


def _moved(fault: Fault, origin: Sequence[int]) -> Fault:
    def column(index: int) -> int:
        """Index in the typed line; places behind the end keep their distance from it."""
        if not origin:
            return index
        return origin[index] if index < len(origin) else origin[-1] + 1 + index - len(origin)

    start = column(fault.column - 1)
    last = column(fault.column - 1 + fault.length - 1)
    return replace(fault, column=start + 1, length=max(1, last - start + 1))

"""Faults as they are shown: the line as typed, a caret under the place, the repair below it."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable

from routeheat.errors import Fault

_WIDEST = 160
"""Longest part of a typed line that is shown around a fault."""
_MOST = 50
"""Faults rendered in full; the rest is counted."""


def split_lines(text: str) -> list[str]:
    """The lines of a text; only line feeds and carriage returns separate lines."""
    return text.replace("\r\n", "\n").replace("\r", "\n").split("\n")


def render(text: str, faults: Iterable[Fault]) -> str:
    """Every fault with its line and a caret; deterministic, safe for any text."""
    lines = split_lines(text)
    found = list(faults)
    shown = [_render_one(lines, fault) for fault in found[:_MOST]]
    if len(found) > _MOST:
        shown.append(f"… and {len(found) - _MOST} more")
    return "\n\n".join(shown)


def _render_one(lines: list[str], fault: Fault) -> str:
    notice = "notice: " if fault.severity == "notice" else ""
    head = f"line {fault.line}, column {fault.column}: {notice}{fault.message}"
    repair = [f"  {fault.hint}"] if fault.hint else []
    if not 1 <= fault.line <= len(lines):
        return "\n".join([head, *repair])
    typed = lines[fault.line - 1]
    start = min(max(fault.column - 1, 0), len(typed))
    cut = max(0, start - _WIDEST // 2)
    window = typed[cut : cut + _WIDEST]
    number = f"{fault.line:>5} | "
    length = max(1, min(fault.length, len(window) - (start - cut)))
    carets = "^" * max(1, sum(_columns(char) for char in window[start - cut : start - cut + length]))
    pad = "".join("\t" if char == "\t" else " " * _columns(char) for char in window[: start - cut])
    shown = "".join(map(_visible, window))
    return "\n".join([head, number + shown, " " * (len(number) - 2) + "| " + pad + carets, *repair])


def _visible(char: str) -> str:
    """Special blanks become plain ones; characters without a width stay if they combine and vanish if they control."""
    if _columns(char):
        return char if char == "\t" or char.isprintable() else " "
    return char if unicodedata.combining(char) else ""


def _columns(char: str) -> int:
    if char == "\t":
        return 1
    if unicodedata.combining(char) or unicodedata.category(char) in ("Cf", "Cc"):
        return 0
    return 2 if unicodedata.east_asian_width(char) in "WF" else 1

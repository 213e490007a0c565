"""Moved values written into the typed text: only the numbers of their keys change, nothing else."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from itertools import accumulate

from routeheat.chem.measured import Measured
from routeheat.notation.faults import split_lines
from routeheat.notation.keys import find_key
from routeheat.notation.sections import Entry, Lines, parts, read_sections
from routeheat.notation.tokens import Piece
from routeheat_widgets._view import Write

_LABEL = re.compile(r"\[\s*([^\]]*?)\s*\]")
_VALUE = re.compile(r"(\S+)(\s+)(\S.*)")
_NUMBER = re.compile(r"[-+]?[0-9]+(?:\.[0-9]+)?(?![0-9.eE(/])")
_ROOM = 100
"""Characters of a line behind which an added key starts a line of its own."""
_INDENT = 5


def write_back(text: str, label: str, values: Mapping[str, Measured]) -> Write | None:
    """The edit that gives the keys of the step ``label`` new values; ``None`` when the text has no such step.

    ``text`` has line feeds only. A typed value keeps everything but its number (unit, uncertainty, blanks), unless the
    number is not a plain one. A key that is not typed is added behind the last one. Comments stay.
    """
    found = read_sections(text)
    entry = _entry(found, label)
    if entry is None or not values:
        return None
    starts = [0, *accumulate(len(line) + 1 for line in split_lines(text))]
    edits: list[tuple[int, int, str]] = []
    added: list[str] = []
    pieces = list(parts(entry))
    for name, value in values.items():
        piece = next((item for item in pieces[1:] if _key_of(item) == name), None)
        if piece is None:
            added.append(f"{name} {value.text}")
        else:
            begin, end, new = _replacement(piece, value)
            start = starts[piece.line - 1]
            edits.append((start + _place(found, piece, begin), start + _place(found, piece, end), new))
    if added:
        edits.append(_addition(found, entry, starts, added))
    return _one_edit(text, edits, label, values)


def _entry(found: Lines, label: str) -> Entry | None:
    for section in found.sections:
        if section.word == "route":
            for entry in section.entries:
                match = _LABEL.match(entry.head.text)
                if match is not None and match[1] == label:
                    return entry
    return None


def _key_of(piece: Piece) -> str:
    word = piece.text.split(None, 1)[0] if piece.text.strip() else ""
    key = find_key(word)
    return "" if key is None else key.name


def _replacement(piece: Piece, value: Measured) -> tuple[int, int, str]:
    """Stretch of the piece that is replaced, and by what."""
    match = _VALUE.fullmatch(piece.text)
    if match is None:
        return len(piece.text), len(piece.text), f" {value.text}"
    number = _NUMBER.match(match[3])
    if number is None or value.unit.text not in match[3]:
        return match.start(3), match.end(3), value.text
    bare = Measured(value.value, value.unit, None, value.decimals).text
    return match.start(3), match.start(3) + number.end(), bare.split(" ", 1)[0]


def _addition(found: Lines, entry: Entry, starts: Sequence[int], added: list[str]) -> tuple[int, int, str]:
    """Behind the last key on its line, or on a line of its own where that would become long."""
    line = [entry.head, *entry.more][-1]
    words = " | ".join(added)
    place = _place(found, line, len(line.text.rstrip()))
    if place + 3 + len(words) > _ROOM:
        indent = entry.more[-1].start if entry.more else entry.head.start + _INDENT
        new = f"\n{' ' * indent}{words}"
    else:
        new = f" {words}" if line.text.rstrip().endswith("|") else f" | {words}"
    at = starts[line.line - 1] + place
    return at, at, new


def _place(found: Lines, piece: Piece, index: int) -> int:
    """Index in the typed line of a character of a piece, or of the place behind its last one."""
    at = piece.start + index
    origin = found.origins.get(piece.line)
    if origin is None:
        return at
    return origin[at] if at < len(origin) else origin[-1] + 1


def _one_edit(text: str, edits: list[tuple[int, int, str]], label: str, values: Mapping[str, Measured]) -> Write:
    """All edits as one stretch, so that one undo takes them back."""
    edits = sorted(edits)
    first, last = edits[0][0], edits[-1][1]
    made, at = [], first
    for start, end, new in edits:
        made += [text[at:start], new]
        at = end
    words = ", ".join(f"{name} {value.text}" for name, value in values.items())
    return Write(first, last, "".join(made), f"{words} in [{label}]")

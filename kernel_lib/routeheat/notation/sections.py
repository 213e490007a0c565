"""A sheet as sections and entries: which lines belong together, before anything in them is read.

Lines that start a section stand at the left margin; the common indentation of the whole text is ignored. ``#`` starts
a comment outside quotes. A row starts with its label in brackets; lines that follow belong to it.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from routeheat.errors import Fault, nearest
from routeheat.notation.faults import split_lines
from routeheat.notation.pasted import control_fault, plain_line
from routeheat.notation.tokens import Piece, split_outside_quotes

LONGEST_TEXT = 2_000_000
"""Characters of a sheet; a longer one is refused before it is read."""
LONGEST_LINE = 4_000
MOST_LINES = 40_000
MOST_ROWS = 10_000
"""Entries (declarations, rows, use lines) of a sheet."""

_HEADERS = ("species", "known", "target", "route", "uncertainty", "unstated")
_HEADER_LINE = re.compile(
    r"(?:species|known)\s*:?|target\s*(?::?\s*\[.*|:)|target|route\s+\S.*\smakes\s+\S.*"
    r"|uncertainty\s*:?\s*(?:k\s*=|[0-9]).*"
    r"|unstated\s*:?\s*(?:u\b|[0-9]).*",
    re.IGNORECASE,
)


@dataclass(slots=True)
class Entry:
    """One declaration, row or ``use`` line with the lines that continue it."""

    head: Piece
    """The first line without its comment."""
    more: list[Piece] = field(default_factory=list)
    """Continuation lines."""
    indent: int = 0


@dataclass(slots=True)
class Section:
    """A section header with its entries."""

    word: str
    """``species``, ``known``, ``target``, ``route``, ``uncertainty``, ``unstated``; empty before any header."""
    header: Piece
    """What stands behind the word on the header line."""
    entries: list[Entry] = field(default_factory=list)


@dataclass(slots=True)
class Lines:
    """The sections of a text, with what was met on the way."""

    sections: list[Section] = field(default_factory=list)
    faults: list[Fault] = field(default_factory=list)
    """In columns of the lines as they are read."""
    controls: list[Fault] = field(default_factory=list)
    """Control characters, in columns of the lines as typed."""
    origins: dict[int, Sequence[int]] = field(default_factory=dict)
    """For lines with invisible characters: index in the typed line of every character that is read."""


def too_large(text: str) -> Fault | None:
    """The fault of a text that is too large to be a sheet, found without reading it."""
    if len(text) > LONGEST_TEXT:
        message = f"{len(text):,} characters are too many for a route sheet (at most {LONGEST_TEXT:,})"
        return Fault(message, 1, 1, hint="is this the right text?")
    lines = text.count("\n") + text.count("\r") - text.count("\r\n")
    if lines > MOST_LINES:
        message = f"{lines:,} lines are too many for a route sheet (at most {MOST_LINES:,})"
        return Fault(message, 1, 1, hint="is this the right text?")
    return None


def read_sections(text: str) -> Lines:
    """Sections in typed order; lines that are too long or belong nowhere are reported and left out."""
    found = Lines()
    pieces = [piece for piece in _pieces(text, found) if piece.text]
    margin = min((piece.start for piece in pieces), default=0)
    rows = 0
    for piece in pieces:
        if _starts_section(piece, piece.start - margin, found):
            continue
        if not found.sections:
            hint = "start with species, known, target or route"
            found.faults.append(piece.fault("this line stands before any section", hint))
            found.sections.append(Section("", piece.part(0, 0)))
            continue
        rows += _add(found.sections[-1], piece, piece.start - margin)
        if rows > MOST_ROWS:
            message = f"more than {MOST_ROWS:,} rows and species: the rest is not read"
            found.faults.append(piece.fault(message, "split the sheet"))
            break
    return found


def _pieces(text: str, found: Lines) -> Iterator[Piece]:
    """Every line without its comment and the blanks around it."""
    for number, typed in enumerate(split_lines(text), 1):
        if len(typed) > LONGEST_LINE:
            message = f"a line of more than {LONGEST_LINE:,} characters"
            found.faults.append(Fault(message, number, 1, LONGEST_LINE, "keys may stand on lines of their own"))
            continue
        line = plain_line(typed)
        if line.origin is not None:
            found.origins[number] = line.origin
        if line.control is not None:
            found.controls.append(control_fault(typed, number, line.control))
        piece = Piece(line.text, number, 0)
        yield (next(split_outside_quotes(piece, "#")) if "#" in piece.text else piece).strip()


def _starts_section(piece: Piece, indent: int, found: Lines) -> bool:
    """True when the line starts a section, also when its word is misspelt or indented (a fault)."""
    match = re.match(r"[A-Za-z]+", piece.text)
    if match is None:
        return False
    typed, rest = match[0], piece.text[match.end() :]
    word = typed.lower()
    section = found.sections[-1] if found.sections else None
    if word in _HEADERS:
        if indent == 0 and _is_header(word, rest):
            found.sections.append(Section(word, _behind(piece, match.end())))
            return True
        if indent and _HEADER_LINE.fullmatch(piece.text) and not _reads_as_entry(section, piece):
            message = f"{typed} starts a section, and stands at the left margin"
            found.faults.append(piece.fault(message, "delete the blanks before it", 0, match.end()))
            found.sections.append(Section(word, _behind(piece, match.end())))
            return True
        return False
    if indent or not _could_be_header(section, rest):
        return False
    near = nearest(word, _HEADERS)
    if not near or not _HEADER_LINE.fullmatch(near + rest):
        return False
    found.faults.append(piece.fault(f"unknown section {typed}", f"did you mean {near}?", 0, match.end()))
    found.sections.append(Section(near, _behind(piece, match.end())))
    return True


def _behind(piece: Piece, end: int) -> Piece:
    """What stands behind a section word; a colon is tolerated."""
    rest = piece.part(end).strip()
    return rest.part(1).strip() if rest.text.startswith(":") else rest


def _is_header(word: str, rest: str) -> bool:
    """``species`` and ``known`` stand alone on their line; the others carry something."""
    return rest.strip() in ("", ":") if word in ("species", "known") else rest[:1] in ("", " ", ":", "[")


def _reads_as_entry(section: Section | None, piece: Piece) -> bool:
    """An indented line ``route …`` in a species section declares a species of that name."""
    return section is not None and section.word == "species" and "makes" not in piece.text and " " in piece.text.strip()


def _could_be_header(section: Section | None, rest: str) -> bool:
    """A misspelt header is looked for where entries are indented, or where the line carries what a header carries."""
    if section is None or not section.entries:
        return True
    return section.entries[0].indent > 0 or section.word != "species" or not rest.strip() or " makes " in rest


def _add(section: Section, piece: Piece, indent: int) -> bool:
    """Put a line where it belongs; True when it starts an entry."""
    entries = section.entries
    if section.word == "species":
        starts = not entries or indent <= entries[-1].indent
    else:
        starts = not entries or piece.text.startswith("[") or re.match(r"use\b", piece.text) is not None
    if starts:
        entries.append(Entry(piece, [], indent))
    else:
        entries[-1].more.append(piece)
    return starts


def parts(entry: Entry) -> Iterator[Piece]:
    """The head of an entry up to its first ``|``, then every key with its value; empty parts are skipped.

    The head comes first also when it is empty.
    """
    head, *keys = split_outside_quotes(entry.head, "|")
    yield head.strip()
    for line in entry.more:
        keys.extend(split_outside_quotes(line, "|"))
    for part in keys:
        piece = part.strip()
        if piece.text:
            yield piece

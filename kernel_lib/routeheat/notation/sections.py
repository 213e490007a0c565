"""A sheet as sections and entries: which lines belong together, before anything in them is read.

Lines that start a section stand at the left margin; the common indentation of the whole text is ignored. ``#`` starts
a comment outside quotes. A row starts with its label in brackets; lines that follow belong to it.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field

from routeheat.errors import Fault
from routeheat.notation.faults import split_lines
from routeheat.notation.tokens import Piece, plain_characters, split_outside_quotes

LONGEST_TEXT = 2_000_000
"""Characters of a sheet; a longer one is refused before it is read."""
LONGEST_LINE = 4_000
MOST_LINES = 40_000

_HEADERS = ("species", "known", "target", "route", "uncertainty")


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
    """``species``, ``known``, ``target``, ``route`` or ``uncertainty``; empty for lines before any header."""
    header: Piece
    """What stands behind the word on the header line."""
    entries: list[Entry] = field(default_factory=list)


def too_large(text: str) -> Fault | None:
    """The fault of a text that is too large to be a sheet, found without reading it."""
    if len(text) > LONGEST_TEXT:
        return Fault(
            f"{len(text):,} characters are too many for a route sheet (limit {LONGEST_TEXT:,})", 1, 1,
            hint="is this the right text?",
        )  # fmt: skip
    lines = text.count("\n") + text.count("\r")
    if lines > MOST_LINES:
        return Fault(f"{lines:,} lines are too many for a route sheet (limit {MOST_LINES:,})", 1, 1)
    return None


def read_sections(text: str, faults: list[Fault]) -> list[Section]:
    """Sections in typed order; lines that are too long or belong nowhere are reported and left out."""
    lines = [plain_characters(line) for line in split_lines(text)]
    margin = min((len(line) - len(line.lstrip()) for line in lines if _content(line)), default=0)
    sections: list[Section] = []
    for number, line in enumerate(lines, 1):
        if len(line) > LONGEST_LINE:
            faults.append(Fault(f"a line of more than {LONGEST_LINE:,} characters", number, 1, LONGEST_LINE))
            continue
        piece = _without_comment(Piece(line, number, 0)).strip()
        if not piece.text:
            continue
        indent = piece.start - margin
        word = re.match(r"[A-Za-z]+", piece.text)
        if indent == 0 and word is not None and word[0].lower() in _HEADERS and _is_header(piece.text, word[0]):
            sections.append(Section(word[0].lower(), piece.part(word.end()).strip()))
            continue
        if not sections:
            faults.append(piece.fault("this line stands before any section", "start with species, known, target or route"))
            sections.append(Section("", piece.part(0, 0)))
            continue
        _add(sections[-1], piece, indent)
    return sections


def _is_header(text: str, word: str) -> bool:
    """``species`` and ``known`` stand alone on their line (a colon is tolerated); the others carry something."""
    rest = text[len(word) :].strip()
    return rest in ("", ":") if word.lower() in ("species", "known") else not rest or text[len(word)] in " :"


def _add(section: Section, piece: Piece, indent: int) -> None:
    entries = section.entries
    if section.word == "species":
        starts = not entries or indent <= entries[-1].indent
    else:
        starts = piece.text.startswith("[") or re.match(r"use\b", piece.text) is not None or not entries
    if starts:
        entries.append(Entry(piece, [], indent))
    else:
        entries[-1].more.append(piece)


def _content(line: str) -> str:
    return "" if line.lstrip().startswith("#") else line.strip()


def _without_comment(piece: Piece) -> Piece:
    return next(split_outside_quotes(piece, "#")) if "#" in piece.text else piece


def parts(entry: Entry) -> Iterator[Piece]:
    """The head of an entry up to its first ``|``, then every key with its value; empty parts are skipped."""
    for line in (entry.head, *entry.more):
        for part in split_outside_quotes(line, "|"):
            piece = part.strip()
            if piece.text:
                yield piece

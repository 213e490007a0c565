"""Typed text as pieces that know where they stand."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import NoReturn

from routeheat.errors import Fault

LABEL = re.compile(r"[^\W_][\w.\-+*']{0,39}")
"""A label of a row, without its brackets."""


class Trouble(Exception):
    """A fault met while reading; the reader of the enclosing entry collects it and goes on."""

    def __init__(self, fault: Fault) -> None:
        self.fault = fault
        super().__init__(fault.message)


@dataclass(frozen=True, slots=True)
class Piece:
    """A part of one line that knows its place."""

    text: str
    """The characters, already plain."""
    line: int
    """Line number from 1."""
    start: int
    """Index of the first character in its line."""

    def part(self, begin: int, end: int | None = None) -> Piece:
        """The characters from ``begin`` to ``end`` of this piece."""
        return Piece(self.text[begin:end], self.line, self.start + begin)

    def strip(self) -> Piece:
        """Without the blanks around it."""
        begin = len(self.text) - len(self.text.lstrip())
        return self.part(begin, max(begin, len(self.text.rstrip())))

    def fault(
        self,
        message: str,
        hint: str = "",
        begin: int = 0,
        end: int | None = None,
        subject: str = "",
        notice: bool = False,
    ) -> Fault:
        """A fault that covers the characters from ``begin`` to ``end`` of this piece."""
        stop = len(self.text) if end is None else end
        return Fault(
            message,
            self.line,
            self.start + begin + 1,
            max(1, stop - begin),
            hint,
            "notice" if notice else "fault",
            subject,
        )

    def refuse(self, message: str, hint: str = "", begin: int = 0, end: int | None = None) -> NoReturn:
        """Stop reading here with a fault."""
        raise Trouble(self.fault(message, hint, begin, end))


def split_outside_quotes(piece: Piece, separator: str) -> Iterator[Piece]:
    """The parts of a piece between separators (one character) that stand outside double quotes."""
    begin, quoted = 0, False
    for index, char in enumerate(piece.text):
        if char == '"':
            quoted = not quoted
        elif char == separator and not quoted:
            yield piece.part(begin, index)
            begin = index + 1
    yield piece.part(begin)


def split_list(piece: Piece) -> Iterator[Piece]:
    """The parts of a list at commas outside brackets that a blank or the end follows, without blanks around them."""
    begin, depth = 0, 0
    for index, char in enumerate(piece.text):
        depth = max(0, depth + (char == "(") - (char == ")"))
        if char == "," and depth == 0 and piece.text[index + 1 : index + 2] in (" ", ""):
            yield piece.part(begin, index).strip()
            begin = index + 1
    yield piece.part(begin).strip()

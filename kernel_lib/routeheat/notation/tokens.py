"""Typed text as pieces that know where they stand, and the tokens of quantities.

Text pasted from a word processor reads the same as typed text: every substitute character is replaced one for one, so
that columns stay true.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import NoReturn

from routeheat.errors import Fault

_SPACES = "\t\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u205f\u3000\u2028\u2029"
_PASTED = str.maketrans(
    {
        **dict.fromkeys(_SPACES, " "),
        "\N{MINUS SIGN}": "-",
        "\N{EN DASH}": "-",
        "\N{NON-BREAKING HYPHEN}": "-",
        "\N{HYPHEN}": "-",
        "\N{LEFT DOUBLE QUOTATION MARK}": '"',
        "\N{RIGHT DOUBLE QUOTATION MARK}": '"',
        "\N{DOUBLE LOW-9 QUOTATION MARK}": '"',
        "\N{LEFT SINGLE QUOTATION MARK}": "'",
        "\N{RIGHT SINGLE QUOTATION MARK}": "'",
        "\N{FRACTION SLASH}": "/",
        "\N{DEGREE CELSIUS}": "\N{DEGREE SIGN}",
        "\N{MASCULINE ORDINAL INDICATOR}": "\N{DEGREE SIGN}",
        "\ufeff": " ",
    }
)


def plain_characters(line: str) -> str:
    """The line with substitute characters replaced one for one; its length never changes."""
    return line.translate(_PASTED)


class Trouble(Exception):  # noqa: N818 - never leaves the notation layer
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
        self, message: str, hint: str = "", begin: int = 0, end: int | None = None, subject: str = "", notice: bool = False
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
    """The parts of a list at commas that stand outside brackets, each without blanks around it."""
    begin, depth = 0, 0
    for index, char in enumerate(piece.text):
        depth += (char == "(") - (char == ")")
        if char == "," and depth <= 0 and piece.text[index + 1 : index + 2] in (" ", ""):
            yield piece.part(begin, index).strip()
            begin = index + 1
    yield piece.part(begin).strip()


@dataclass(frozen=True, slots=True)
class Token:
    """One token of a quantity."""

    kind: str
    """``number``, ``digits`` (uncertainty of the last digits), ``plusminus``, ``coverage``, ``of``, ``at``, ``unit``."""
    piece: Piece


_RULES = (
    ("coverage", r"\(\s*k\s*=\s*(?:[0-9.]+)\s*\)|\(\s*[0-9.]+\s*%\s*\)"),
    ("digits", r"\([0-9]+\)"),
    ("plusminus", r"±|\+/-|\+-"),
    ("number", r"[+-]?(?:[0-9]+(?:\.[0-9]+)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"),
    ("of", r"of\s"),
    ("at", r"at\s"),
    ("unit", r"(?:°C|%|[A-Za-z]+[0-9²³⁻¹]*(?:\^-?[0-9])?)(?:[ ·*]?/[ ]?\([^()]*\)|[ ]?[/·*][ ]?(?:°C|[A-Za-z]+[0-9²³]*)|"
             r"[ ·](?!of\s|at\s)[A-Za-z]+\^?[-⁻][0-9¹²³])*"),
)
_TOKENS = re.compile("|".join(f"(?P<{name}>{rule})" for name, rule in _RULES))


def quantity_tokens(piece: Piece) -> list[Token]:
    """The tokens of a quantity such as ``-45.94(18) kJ/mol of NB at 25 degC``, in order, with their places.

    Everything after ``of`` up to ``at`` or the coverage bracket is left to the species reader: it comes as one
    ``species`` token. Raises :class:`Trouble` at a character that fits no rule.
    """
    tokens: list[Token] = []
    index, text = 0, piece.text
    while index < len(text):
        if text[index] == " ":
            index += 1
            continue
        match = _TOKENS.match(text, index)
        if match is None or match.lastgroup is None:
            piece.refuse(f"{text[index]!r} is not expected in a quantity", "", index, index + 1)
        kind = match.lastgroup
        tokens.append(Token(kind, piece.part(match.start(), match.end())))
        index = match.end()
        if kind == "of":
            tail = re.search(r"\s+at\s|\s*\((?:\s*k\s*=|\s*[0-9.]+\s*%\s*\))", text[index:])
            stop = len(text) if tail is None else index + tail.start()
            tokens.append(Token("species", piece.part(index, stop).strip()))
            index = stop
    return tokens

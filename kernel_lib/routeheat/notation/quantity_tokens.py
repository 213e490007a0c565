"""The tokens of a quantity such as ``-45.94(18) kJ/mol of NB at 25 degC``, each with its place.

number    = [ sign ] digits [ "." digits ] [ "e" [ sign ] digits ]
digits    = "(" digits ")"                              uncertainty in the last digits
plusminus = "±" | "+/-" | "+-"
coverage  = "(" "k" "=" number ")" | "(" number "%" ")"
unit      = factor { separator factor }                 read by routeheat.units
of        = "of" species                                up to "at" and a number, "±", or a coverage bracket
at        = "at" before a number
"""

from __future__ import annotations

import re
from collections.abc import Container
from dataclasses import dataclass
from typing import Literal, NoReturn, cast

from routeheat.notation.tokens import Piece
from routeheat.units import is_unit_symbol

Kind = Literal["number", "digits", "plusminus", "coverage", "unit", "of", "species", "at"]

_RULES = (
    ("coverage", r"\(\s*k\s*=\s*[0-9.]+\s*\)|\(\s*[0-9.]+\s*%\s*\)"),
    ("digits", r"\([0-9]+\)"),
    ("plusminus", r"±|\+/-|\+-"),
    ("number", r"[+-]?(?:[0-9]+(?:\.[0-9]+)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"),
    ("of", r"of(?=\s|$)"),
    ("at", r"at(?=\s|$)"),
)
_TOKEN = re.compile("|".join(f"(?P<{name}>{rule})" for name, rule in _RULES))
_FACTOR = re.compile(r"(?P<symbol>°C|\N{DEGREE CELSIUS}|°|%|[A-Za-z]+)(?:\^?[-+⁻]?[1-9¹²³⁴⁵⁶⁷⁸⁹])?")
_JOINT = re.compile(r"\s?(?P<bar>/)\s?|\s?[·*]\s?|\.(?=[A-Za-z])|(?P<space>\s)")
_BRACKET = re.compile(r"\([^()]*\)")
_SPECIES_END = re.compile(r"(?<=\s)at\s+(?=[-+.]?[0-9])|±|\+/-|\+-|(?P<coverage>\(\s*k\s*=|\(\s*[0-9.]+\s*%\s*\))")


@dataclass(frozen=True, slots=True)
class Token:
    """One token of a quantity."""

    kind: Kind
    piece: Piece


def quantity_tokens(piece: Piece, names: Container[str] = ()) -> list[Token]:
    """The tokens in order. ``names`` are declared names, which may end in what looks like a coverage bracket.

    Raises :class:`~routeheat.notation.tokens.Trouble` at a character that fits no rule.
    """
    tokens: list[Token] = []
    index, text = 0, piece.text
    while index < len(text):
        if text[index].isspace():
            index += 1
            continue
        match = _TOKEN.match(text, index)
        end = _unit_end(text, index) if match is None else match.end()
        if end == index:
            _unexpected(piece, index, tokens)
        kind: Kind = "unit" if match is None else cast(Kind, match.lastgroup)
        tokens.append(Token(kind, piece.part(index, end)))
        index = end
        if kind == "of":
            end = _species_end(text, index, names)
            tokens.append(Token("species", piece.part(index, end).strip()))
            index = end
    return tokens


def _unit_end(text: str, index: int) -> int:
    """Where the unit that starts at ``index`` ends; ``index`` itself when none starts there."""
    match = _FACTOR.match(text, index)
    if match is None:
        return index
    end = match.end()
    while match["symbol"] != "%":
        joint = _JOINT.match(text, end)
        if joint is None:
            return end
        following = _FACTOR.match(text, joint.end())
        if joint["bar"] and following is None:
            following = _BRACKET.match(text, joint.end())
        if following is None:
            return joint.end() if joint["bar"] else end
        if joint["space"] and not is_unit_symbol(following["symbol"]):
            return end
        end = following.end()
    return end


def _species_end(text: str, index: int, names: Container[str]) -> int:
    for match in _SPECIES_END.finditer(text, index):
        closed = text.find(")", match.start()) + 1
        if match["coverage"] is None or text[index:closed].strip() not in names:
            return match.start()
    return len(text)


def _unexpected(piece: Piece, index: int, tokens: list[Token]) -> NoReturn:
    """Refuse the character at ``index`` with the likeliest repair."""
    text, char = piece.text, piece.text[index]
    before = tokens[-1] if tokens else None
    rest = text[index + 1 :].lstrip()
    touches = before is not None and before.piece.start + len(before.piece.text) == piece.start + index
    if before is not None and before.kind == "number" and touches:
        typed = before.piece.text
        decimals = re.match(r"[0-9]{1,20}", text[index + 1 :])
        if char == "," and decimals is not None:
            piece.refuse("a comma in a number", f"write a decimal point: {typed}.{decimals[0]}", index, index + 1)
        if char == ".":
            piece.refuse("a digit is missing behind the decimal point", f"write {typed}", index, index + 1)
        if char == "/":
            piece.refuse("a fraction is not read in a quantity", "write a decimal", index, index + 1)
    if char in "+-" and before is None and rest[:1].isdigit():
        piece.refuse("a blank stands behind the sign", f"write {char}{rest.split(' ')[0]}", index, index + 1)
    if char == "(" and before is None:
        piece.refuse("a number is expected before a bracket", "like -145 ± 8 kJ/mol", index, index + 1)
    if char == ",":
        piece.refuse("a comma is not read in a quantity", "keys are separated by |", index, index + 1)
    if before is not None and before.kind == "unit":
        hint = "the species it is stated per stands behind of, like kJ/mol of NB"
        piece.refuse("this does not belong to the quantity", hint, before.piece.start - piece.start, len(text))
    piece.refuse(f"{char} is not expected in a quantity", "like -145 ± 8 kJ/mol", index, index + 1)

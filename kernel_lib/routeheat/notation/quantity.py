"""Numbers with units and uncertainties, as typed: capped, exact, never evaluated.

``-45.94(18)`` is a standard uncertainty in the last digits (JCGM 100:2008, 7.2.2). A number behind ``±`` takes its
coverage factor from ``(k = 1)`` or ``(95 %)`` beside it, else from the sheet.
"""

from __future__ import annotations

import re
from collections.abc import Container
from dataclasses import dataclass
from fractions import Fraction
from typing import NoReturn

from routeheat.chem.measured import Measured, Spread, decimal_text
from routeheat.errors import UnitError
from routeheat.notation.keys import find_key
from routeheat.notation.quantity_tokens import Kind, Token, quantity_tokens
from routeheat.notation.tokens import Piece, Trouble
from routeheat.units import PERCENT, PURE, Unit, read_unit

COVERAGE_FACTORS: dict[Fraction, Fraction] = {
    Fraction("68.27"): Fraction(1),
    Fraction("90"): Fraction("1.645"),
    Fraction("95"): Fraction("1.960"),
    Fraction("95.45"): Fraction(2),
    Fraction("99"): Fraction("2.576"),
    Fraction("99.73"): Fraction(3),
}
"""Level of confidence in per cent to coverage factor, normal distribution (JCGM 100:2008, table G.1)."""

LONGEST_NUMBER = 40
"""Characters of a number, as typed and as written out without exponent; more is refused."""
LARGEST_EXPONENT = 30
MOST_LAST_DIGITS = 6
"""Digits of an uncertainty in brackets."""


@dataclass(frozen=True, slots=True)
class Quantity:
    """What was read: a number with its unit, and what stands behind ``of`` and ``at``."""

    measured: Measured
    unit_piece: Piece
    """The unit, or the place where it is missing."""
    basis: Piece | None
    """The species behind ``of``, unread."""
    temperature: Piece | None
    """The temperature behind ``at``, unread."""
    assumed_k: bool
    """True when the coverage factor is the sheet's, because none is typed beside the number."""


def read_number(piece: Piece) -> tuple[Fraction, int]:
    """An exact decimal and how many decimals were typed; raises :class:`Trouble` on too long a number."""
    text = piece.text.strip()
    if len(text) > LONGEST_NUMBER:
        piece.refuse(f"a number of more than {LONGEST_NUMBER} characters", "round it")
    match = re.fullmatch(r"([+-]?)([0-9]*)(?:\.([0-9]+))?(?:[eE]([+-]?[0-9]+))?", text)
    if match is None or not (match[2] or match[3]):
        hint = "write a decimal point" if re.fullmatch(r"[+-]?[0-9]+,[0-9]+", text) else "like 12.5"
        piece.refuse("a number is expected here", hint)
    if not match[2]:
        piece.refuse("a decimal needs a leading digit", f"write {match[1]}0.{match[3]}")
    exponent = int(match[4] or 0)
    if abs(exponent) > LARGEST_EXPONENT:
        piece.refuse(f"an exponent beyond ±{LARGEST_EXPONENT}", "is the number right?")
    digits = match[2] + (match[3] or "")
    decimals = len(match[3] or "") - exponent
    value = Fraction(int(digits)) / Fraction(10) ** decimals
    value = -value if match[1] == "-" else value
    decimals = max(decimals, 0)
    if len(decimal_text(value, decimals)) > LONGEST_NUMBER:
        piece.refuse(f"a number of more than {LONGEST_NUMBER} characters when it is written out", "round it")
    return value, decimals


def read_coverage(piece: Piece) -> tuple[Fraction, str]:
    """The coverage factor of ``k = 2`` or ``95 %`` (with or without brackets), and its canonical text."""
    text = piece.text.strip().strip("()").strip()
    level = re.fullmatch(r"([0-9.]+)\s*%", text)
    if level is not None:
        percent, _ = read_number(Piece(level[1], piece.line, piece.start))
        k = COVERAGE_FACTORS.get(percent)
        if k is None:
            known = ", ".join(f"{decimal_text(p)} %" for p in COVERAGE_FACTORS)
            piece.refuse("this level of confidence has no coverage factor here", f"type k = …, or one of {known}")
        return k, f"{decimal_text(percent)} %"
    factor = re.fullmatch(r"k\s*=\s*([0-9.]+)", text)
    if factor is None:
        piece.refuse("a coverage factor is expected", "like k = 2, or 95 %")
    k, _ = read_number(Piece(factor[1], piece.line, piece.start))
    if not 0 < k <= 10:
        hint = "k = 1 for a standard uncertainty, else mostly k = 2"
        piece.refuse("a coverage factor is more than 0 and at most 10", hint)
    return k, f"k = {decimal_text(k)}"


def read_quantity(
    piece: Piece, sheet_k: Fraction, example: str = "-145 ± 8 kJ/mol", names: Container[str] = ()
) -> Quantity:
    """A whole quantity.

    quantity  = number [ digits ] [ unit ] [ spread ] [ unit ] [ coverage ] [ "of" species ] [ coverage ]
                [ "at" temperature ]
    spread    = "±" number [ "%" | unit ] [ coverage ]

    ``piece`` is what stands behind the key, ``example`` what it should look like, ``names`` are the declared names.
    Raises :class:`Trouble`.
    """
    if not piece.text:
        piece.refuse("a value is missing here", f"like {example}")
    return _Reader(quantity_tokens(piece, names), piece, sheet_k, example).read()


class _Reader:
    """Recursive descent over the tokens of one quantity."""

    def __init__(self, tokens: list[Token], piece: Piece, sheet_k: Fraction, example: str) -> None:
        self.tokens = tokens
        self.piece = piece
        self.sheet_k = sheet_k
        self.example = example
        self.index = 0

    def take(self, kind: Kind) -> Piece | None:
        """The next token when it is of that kind."""
        if self.index < len(self.tokens) and self.tokens[self.index].kind == kind:
            self.index += 1
            return self.tokens[self.index - 1].piece
        return None

    def read(self) -> Quantity:
        first = self.take("number")
        if first is None:
            self.piece.refuse("a number is expected here", f"like {self.example}")
        value, decimals = read_number(first)
        digits = self.take("digits")
        unit_piece = self.take("unit")
        sign = self.take("plusminus")
        half_piece = half_unit = None
        if sign is not None:
            half_piece = self.take("number")
            if half_piece is None:
                sign.refuse("a number is missing behind ±", f"like {self.example}")
            if digits is not None:
                sign.refuse("two uncertainties for one number", "keep either (…) or ± …")
            half_unit = self.take("unit")
        coverage = self.take("coverage")
        if unit_piece is None and (half_unit is None or half_unit.text == "%"):
            unit_piece = self.take("unit")
        unit_piece = unit_piece or half_unit
        unit = _unit(unit_piece, self.example)
        coverage = coverage or self.take("coverage")
        basis = self.basis()
        coverage = coverage or self.take("coverage")
        temperature = self.temperature()
        if self.index < len(self.tokens):
            self.left_over(self.tokens[self.index].piece)
        spread = None
        if digits is not None:
            if coverage is not None:
                coverage.refuse("digits in brackets are a standard uncertainty already", "leave this out")
            spread = _last_digits(first, digits, decimals)
        elif half_piece is not None:
            half = self.half_width(value, unit, half_piece, None if half_unit is unit_piece else half_unit)
            k, stated = (self.sheet_k, "") if coverage is None else read_coverage(coverage)
            spread = Spread(half, k, stated)
        elif coverage is not None:
            coverage.refuse("a coverage factor without an uncertainty", "write ± and a number before it")
        measured = Measured(value, unit, spread, decimals)
        end = self.piece.part(len(first.text) + first.start - self.piece.start).part(0, 0)
        return Quantity(measured, unit_piece or end, basis, temperature, spread is not None and not spread.stated)

    def basis(self) -> Piece | None:
        """The species behind ``of``."""
        word = self.take("of")
        if word is None:
            return None
        species = self.take("species")
        if species is None or not species.text:
            word.refuse("a species is missing behind of", "like kJ/mol of NB")
        return species

    def temperature(self) -> Piece | None:
        """Everything behind ``at``."""
        word = self.take("at")
        if word is None:
            return None
        rest = self.piece.part(word.start - self.piece.start + len(word.text)).strip()
        if not rest.text:
            word.refuse("a temperature is missing behind at", "like at 25 degC")
        self.index = len(self.tokens)
        return rest

    def half_width(self, value: Fraction, unit: Unit, half_piece: Piece, half_unit: Piece | None) -> Fraction:
        """The number behind ± in the unit of the value; per cent of the value where that is typed."""
        half, _ = read_number(half_piece)
        if half < 0:
            half_piece.refuse("an uncertainty is not negative", "leave the sign out")
        if half_unit is not None:
            typed = _unit(half_unit, self.example)
            if typed == PERCENT != unit:
                half = abs(value) * half / 100
            else:
                try:
                    half = typed.convert_difference(half, unit)
                except UnitError as problem:
                    half_unit.refuse(problem.message, f"write the uncertainty in {unit.text or 'the same unit'}")
        try:
            fits = len(decimal_text(half)) <= LONGEST_NUMBER
        except ValueError:
            fits = False
        if not fits:
            half_piece.refuse("this uncertainty is no short decimal", f"write it rounded, in {unit.text}")
        return half

    def left_over(self, piece: Piece) -> NoReturn:
        """Refuse what stands behind a whole quantity, with the likeliest repair."""
        word = piece.text.split()[0]
        hint = f"like {self.example}"
        if find_key(word) is not None:
            hint = "keys are separated by |"
        elif piece.text in ("±", "+/-", "+-"):
            hint = "the uncertainty stands right behind the number, like -145 ± 8 kJ/mol of NB"
        elif word[0].isalpha() and self.index and self.tokens[self.index - 1].kind == "unit":
            unit = self.tokens[self.index - 1].piece.text
            hint = f"the species it is stated per stands behind of, like {unit} of NB"
        piece.refuse("this does not belong to the quantity", hint)


def _last_digits(number: Piece, digits: Piece, decimals: int) -> Spread:
    if len(digits.text) - 2 > MOST_LAST_DIGITS:
        digits.refuse(f"an uncertainty of more than {MOST_LAST_DIGITS} digits in brackets", "like 45.94(18)")
    if re.search(r"[eE]", number.text):
        number.refuse("digits in brackets do not go with an exponent", "write the uncertainty behind ±")
    return Spread(int(digits.text[1:-1]) * Fraction(1, 10**decimals), Fraction(1), "k = 1")


def _unit(piece: Piece | None, example: str) -> Unit:
    if piece is None:
        return PURE
    try:
        return read_unit(piece.text)
    except UnitError as problem:
        raise Trouble(piece.fault(problem.message, problem.hint or f"like {example}")) from None


def require_dimension(quantity: Quantity, like: Unit, hint: str) -> Measured:
    """The number, when its unit has the dimension of ``like``; raises :class:`Trouble` otherwise."""
    measured = quantity.measured
    if measured.unit.dimension != like.dimension:
        typed = measured.unit.text
        missing = typed in ("", "%")
        message = "the unit of the number is missing" if missing else f"{typed} is not a unit for this"
        quantity.unit_piece.refuse(message, hint)
    return measured

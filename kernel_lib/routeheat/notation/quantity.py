"""Numbers with units and uncertainties, as typed: capped, exact, never evaluated.

``-45.94(18)`` is a standard uncertainty in the last digits (JCGM 100:2008, 7.2.2). A number behind ``±`` takes its
coverage factor from ``(k = 1)`` or ``(95 %)`` beside it, else from the sheet.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.measured import Measured, Spread
from routeheat.errors import UnitError
from routeheat.notation.tokens import Piece, Token, Trouble, quantity_tokens
from routeheat.units import PURE, Unit, read_unit

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
"""Characters of a number; more is refused."""
LARGEST_EXPONENT = 30


@dataclass(frozen=True, slots=True)
class Quantity:
    """What was read: a number with its unit, and what stands behind ``of`` and ``at``."""

    measured: Measured
    unit_piece: Piece
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
        piece.refuse(f"a number of more than {LONGEST_NUMBER} characters")
    match = re.fullmatch(r"([+-]?)([0-9]*)(?:\.([0-9]+))?(?:[eE]([+-]?[0-9]+))?", text)
    if match is None or not (match[2] or match[3]):
        hint = "write a decimal point" if re.fullmatch(r"[+-]?[0-9]+,[0-9]+", text) else "like 12.5"
        piece.refuse("a number is expected here", hint)
    if not match[2]:
        piece.refuse("a decimal needs a leading digit", f"write {match[1]}0.{match[3]}")
    exponent = int(match[4] or 0)
    if abs(exponent) > LARGEST_EXPONENT:
        piece.refuse(f"an exponent beyond ±{LARGEST_EXPONENT}")
    digits = match[2] + (match[3] or "")
    decimals = len(match[3] or "") - exponent
    value = Fraction(int(digits)) / Fraction(10) ** decimals
    return (-value if match[1] == "-" else value), max(decimals, 0)


def read_coverage(piece: Piece) -> tuple[Fraction, str]:
    """The coverage factor of ``k = 2`` or ``95 %`` (with or without brackets), and its canonical text."""
    text = piece.text.strip().strip("()").strip()
    level = re.fullmatch(r"([0-9.]+)\s*%", text)
    if level is not None:
        percent, _ = read_number(Piece(level[1], piece.line, piece.start))
        k = COVERAGE_FACTORS.get(percent)
        if k is None:
            known = ", ".join(f"{float(p):g} %" for p in COVERAGE_FACTORS)
            piece.refuse("this level of confidence has no coverage factor here", f"type k = …, or one of {known}")
        return k, f"{float(percent):g} %"
    factor = re.fullmatch(r"k\s*=\s*([0-9.]+)", text)
    if factor is None:
        piece.refuse("a coverage factor is expected", "like k = 2, or 95 %")
    k, _ = read_number(Piece(factor[1], piece.line, piece.start))
    if not 0 < k <= 10:
        piece.refuse("a coverage factor lies between 0 and 10")
    return k, f"k = {float(k):g}"


def read_quantity(piece: Piece, sheet_k: Fraction) -> Quantity:
    """A whole quantity.

    quantity  = number [ digits ] [ unit ] [ spread ] [ unit ] [ "of" species ] [ coverage ] [ "at" temperature ]
    spread    = "±" number [ "%" | unit ] [ coverage ]

    ``piece`` is what stands behind the key. Raises :class:`Trouble`.
    """
    if not piece.text:
        piece.refuse("a value is missing here")
    reader = _Reader(quantity_tokens(piece), piece, sheet_k)
    return reader.read()


class _Reader:
    def __init__(self, tokens: list[Token], piece: Piece, sheet_k: Fraction) -> None:
        self.tokens = tokens
        self.piece = piece
        self.sheet_k = sheet_k
        self.index = 0

    def take(self, kind: str) -> Piece | None:
        if self.index < len(self.tokens) and self.tokens[self.index].kind == kind:
            self.index += 1
            return self.tokens[self.index - 1].piece
        return None

    def read(self) -> Quantity:
        first = self.take("number")
        if first is None:
            self.piece.refuse("a number is expected here", "like -45.9 kJ/mol")
        value, decimals = read_number(first)
        digits = self.take("digits")
        unit_piece = self.take("unit")
        spread_piece, spread_unit = None, None
        sign = self.take("plusminus")
        if sign is not None:
            spread_piece = self.take("number")
            if spread_piece is None:
                sign.refuse("a number is missing behind ±")
            if digits is not None:
                sign.refuse("two uncertainties for one number", "keep either (…) or ± …")
            spread_unit = self.take("unit")
        coverage = self.take("coverage")
        if unit_piece is None and spread_unit is None:
            unit_piece = self.take("unit")
        basis = self.take("species") if self.take("of") is not None else None
        coverage = coverage or self.take("coverage")
        temperature = None
        if self.take("at") is not None:
            start = self.index
            while self.index < len(self.tokens):
                self.index += 1
            if start == self.index:
                self.piece.refuse("a temperature is missing behind at", "like at 25 degC")
            begin = self.tokens[start].piece.start - self.piece.start
            temperature = self.piece.part(begin)
        if self.index < len(self.tokens):
            self.tokens[self.index].piece.refuse("this does not belong to the quantity")
        return self._finish(value, decimals, digits, first, spread_piece, unit_piece, spread_unit, coverage, basis, temperature)

    def _finish(
        self,
        value: Fraction,
        decimals: int,
        digits: Piece | None,
        first: Piece,
        spread_piece: Piece | None,
        unit_piece: Piece | None,
        spread_unit: Piece | None,
        coverage: Piece | None,
        basis: Piece | None,
        temperature: Piece | None,
    ) -> Quantity:
        relative = unit_piece is not None and spread_unit is not None and spread_unit.text == "%" != unit_piece.text
        unit = _unit(unit_piece or spread_unit)
        spread = None
        assumed = False
        if digits is not None:
            if coverage is not None:
                coverage.refuse("digits in brackets are a standard uncertainty already", "leave this out")
            step = Fraction(1, 10**decimals)
            if re.search(r"[eE]", first.text):
                first.refuse("digits in brackets do not go with an exponent", "write the uncertainty behind ±")
            spread = Spread(int(digits.text[1:-1]) * step, Fraction(1), "k = 1")
        elif spread_piece is not None:
            half, _ = read_number(spread_piece)
            if half < 0:
                spread_piece.refuse("an uncertainty is not negative")
            if relative:
                half = abs(value) * half / 100
            elif spread_unit is not None and unit_piece is not None:
                half = _unit(spread_unit).convert_difference(half, unit)
            k, stated = (self.sheet_k, "") if coverage is None else read_coverage(coverage)
            spread = Spread(half, k, stated)
            assumed = coverage is None
        elif coverage is not None:
            coverage.refuse("a coverage factor without an uncertainty")
        end = self.piece.part(len(self.piece.text))
        return Quantity(
            Measured(value, unit, spread, decimals), unit_piece or spread_unit or end, basis, temperature, assumed
        )


def _unit(piece: Piece | None) -> Unit:
    if piece is None:
        return PURE
    try:
        return read_unit(piece.text)
    except UnitError as problem:
        raise Trouble(piece.fault(problem.message, problem.hint)) from None


def require_dimension(quantity: Quantity, like: Unit, hint: str) -> Measured:
    """The number, when its unit has the dimension of ``like``; raises :class:`Trouble` otherwise."""
    measured = quantity.measured
    if measured.unit.dimension == like.dimension:
        return measured
    typed = measured.unit.text
    message = f"{typed} is not a unit for this" if typed else "the unit is missing"
    quantity.unit_piece.refuse(message, hint)

"""Chemical formulas: what a chemist types, read exactly or refused with a reason.

Grammar, after normalising look-alike characters (subscript digits, dots, dashes)::

    formula    = component { separator [amount] component } [charge]
    separator  = "·" | "*" | "."
    amount     = integer | decimal | integer "/" integer
    component  = { (element | isotope | "(" component ")" | "[" component "]") [number] }
    isotope    = "[" digits element "]"
    number     = integer | decimal with a leading digit
    charge     = "^" digits sign | "^" sign digits | superscripts | sign | " " digits sign

A dot behind digits is read thus: behind 0 or 1, or where nothing follows its digits, or inside brackets, it is a
decimal point (``Fe0.95O``, ``YBa2Cu3O6.9``); otherwise it separates (``CuSO4.5H2O`` is CuSO4 + 5 H2O).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction
from typing import NoReturn

from routeheat.chem.elements import HYDROGEN_ISOTOPES, elements, isotopes, weight_bounds, weight_of
from routeheat.errors import FormulaError
from routeheat.present.markup import Rich, Run, join

__all__ = ["Formula", "read_formula"]

MAX_LENGTH = 200
MAX_DIGITS = 9
MAX_DEPTH = 12

_DIGITS = "0123456789"
_SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻"
_RAISED = str.maketrans(_SUPERSCRIPTS, _DIGITS + "+-")
_ALIKE = str.maketrans("₀₁₂₃₄₅₆₇₈₉", _DIGITS) | dict.fromkeys(map(ord, "₋−–‑‐﹣－"), "-")
_ALIKE |= dict.fromkeys(map(ord, "₊﹢＋"), "+") | dict.fromkeys(map(ord, "•∙⋅‧・"), "·")
_CLOSING = {"(": ")", "[": "]"}
_ABBREVIATION = "an abbreviation? declare it as a species, with its formula"
_AMBIGUOUS_SYMBOLS = frozenset(["D", "T", "Ac", "Ts", "Pr", "At"])
_HEAVY_HYDROGEN = frozenset(["D2", "T2", "D2O", "T2O"])
_COMMON = frozenset(
    [
        "H",
        "Li",
        "B",
        "C",
        "N",
        "O",
        "F",
        "Na",
        "Mg",
        "Al",
        "Si",
        "P",
        "S",
        "Cl",
        "K",
        "Ca",
        "Cr",
        "Mn",
        "Fe",
        "Ni",
        "Cu",
        "Zn",
        "Br",
        "Ag",
        "Sn",
        "I",
        "Ba",
        "Pt",
        "Au",
        "Hg",
        "Pb",
    ]
)

_NUMBER = re.compile(r"([0-9]+)(\.[0-9]+)?")
_AMOUNT = re.compile(r"½|[0-9]+/[0-9]+|[0-9]+(?:\.[0-9]+)?")
_ISOTOPE = re.compile(r"\[([0-9]+)([A-Z][a-z]?)\]")
_OXIDATION_NUMBER = re.compile(r"\((?:I{1,3}|IV|VI{0,3})\)")
_SYMBOL = re.compile(r"[A-Z][a-z]*")
_SEPARATOR = re.compile(r"\s*[·*.]\s*")
_FORMULA_AHEAD = re.compile(r"\s*[A-Za-z(\[]|\.[0-9]|/[0-9]")
_ONE_ELEMENT_AHEAD = re.compile(r"\s*[A-Z][a-z]?[0-9]*(?![0-9A-Za-z(\[])")
_CLEAR_DECIMAL = re.compile(r"[A-Za-z)\]][01]\.[0-9]")
_TYPED_CHARGE = re.compile(r"(?:\^|\s+(?=[0-9]))?([0-9]*)([+-])|\^?([+-])([0-9]+)")


@dataclass(frozen=True, slots=True)
class Formula:
    """A chemical formula as typed: element order and grouping are part of it, so isomers may differ by it."""

    text: str
    """Canonical typed text, e.g. ``"CaSO4·0.5H2O"``, ``"SO4^2-"``, ``"Na^+"``."""
    counts: tuple[tuple[str, Fraction], ...]
    """Element or isotope symbol and how many atoms of it, in order of first appearance; D is ``"[2H]"``."""
    charge: int = 0
    """In elementary charges."""

    def __post_init__(self) -> None:
        known = {symbol for symbol, _ in self.counts if symbol in elements() or symbol in isotopes()}
        if not self.counts or len(known) != len(self.counts) or any(count <= 0 for _, count in self.counts):
            raise FormulaError("a formula counts each of its elements once, and more than zero of it", self.text)

    @property
    def composition(self) -> dict[str, Fraction]:
        """Atoms of each element or isotope in one formula unit."""
        return dict(self.counts)

    @property
    def molar_mass(self) -> Fraction:
        """g/mol with conventional atomic weights; the mass of electrons gained or lost is neglected."""
        return sum((count * weight_of(symbol) for symbol, count in self.counts), Fraction(0))

    @property
    def molar_mass_range(self) -> tuple[Fraction, Fraction]:
        """g/mol, least and greatest that normal materials can have by the IUPAC intervals of atomic weights."""
        bounds = [(count, *weight_bounds(symbol)) for symbol, count in self.counts]
        low = sum((count * least for count, least, _ in bounds), Fraction(0))
        return low, sum((count * most for count, _, most in bounds), Fraction(0))

    @property
    def hill(self) -> str:
        """Elements in the order of Hill (J. Am. Chem. Soc. 22 (1900) 478): C, H, then by the alphabet; no carbon, all
        by the alphabet. Isotopes stand behind their element; the charge is left out."""
        carbon = any(_element_of(symbol) == "C" for symbol, _ in self.counts)

        def place(pair: tuple[str, Fraction]) -> tuple[int, str, str]:
            element = _element_of(pair[0])
            first = ["C", "H"].index(element) if carbon and element in ("C", "H") else 2
            return first, element, "" if pair[0] == element else pair[0]

        return "".join(symbol + _subscript(count) for symbol, count in sorted(self.counts, key=place))

    @property
    def rich(self) -> Rich:
        """The text with subscripts, superscript charge (number before the sign) and isotope numbers."""
        body, _, charge = self.text.partition("^")
        runs: list[Rich | str] = []
        for piece in re.findall(r"·[0-9./]*|\[[0-9]+(?=[A-Z])|[0-9./]+|[^0-9·]", body):
            if piece[0] == "[" and len(piece) > 1:
                runs += ["[", (Run(piece[1:], "sup"),)]
            else:
                runs.append((Run(piece, "sub"),) if piece[0].isdigit() else piece)
        runs.append((Run(charge.replace("-", "−"), "sup"),))
        return join(runs)

    def __str__(self) -> str:
        return self.text


def read_formula(text: str, *, declared: bool = False) -> Formula:
    """Read one chemical formula, without coefficient and phase.

    ``declared`` says that the formula belongs to a declared species, where D, T, Ac, Ts, Pr and At are the elements;
    elsewhere they are refused (D2, T2, D2O, T2O aside), for they are more often abbreviations (Ac2O, PrOH, THF).

    Raises :class:`~routeheat.errors.FormulaError`, with the place and where possible the repair, on anything else.
    """
    return _Reader(text, declared).read()


def _element_of(symbol: str) -> str:
    return isotopes()[symbol].element if symbol in isotopes() else symbol


def _number_text(value: Fraction) -> str:
    """A decimal where one fits into the digits that can be read back, else a fraction."""
    for places in range(MAX_DIGITS):
        scaled = value * 10**places
        if scaled.denominator == 1:
            digits = str(scaled.numerator).rjust(places + 1, "0")
            text = f"{digits[:-places]}.{digits[-places:]}" if places else digits
            return text if len(digits) <= MAX_DIGITS else str(value)
    return str(value)


def _subscript(count: Fraction) -> str:
    if count == 1:
        return ""
    text = _number_text(count)
    return f"({text})" if "/" in text else text


def _charge_text(charge: int) -> str:
    size = abs(charge)
    return f"^{size if size > 1 else ''}{'+' if charge > 0 else '-'}"


def _recased(text: str) -> str:
    """The text with the capitals that turn it into symbols of common elements, fewest first; empty if there are none.

    One pass over the text keeps the cheapest reading that ends at each character.
    """
    best: list[tuple[int, str] | None] = [(0, "")]
    for end in range(1, len(text) + 1):
        choices: list[tuple[int, str]] = []
        for start in (end - 1, end - 2):
            before = best[start] if start >= 0 else None
            piece = text[start:end] if start >= 0 else ""
            symbol = piece.capitalize()
            if before is not None and (symbol in _COMMON or (len(piece) == 1 and not piece.isalpha())):
                choices.append((before[0] + 1, before[1] + symbol))
        best.append(min(choices, default=None))
    return best[-1][1] if best[-1] else ""


class _Reader:
    """Recursive descent over one formula; ``pos`` is always an index of the text as typed."""

    def __init__(self, text: str, declared: bool) -> None:
        self.text = text
        self.declared = declared
        self.chars = text.translate(_ALIKE)
        self.end = len(self.chars.rstrip())
        self.pos = len(self.chars) - len(self.chars.lstrip())
        self.out: list[str] = []

    def fail(self, message: str, start: int, end: int, hint: str = "") -> NoReturn:
        raise FormulaError(message, self.text, start, max(end, start + 1) if self.text else end, hint)

    def peek(self) -> str:
        return self.chars[self.pos] if self.pos < self.end else ""

    def match(self, pattern: re.Pattern[str]) -> re.Match[str] | None:
        found = pattern.match(self.chars, self.pos, self.end)
        if found:
            self.pos = found.end()
        return found

    def read(self) -> Formula:
        if len(self.text) > MAX_LENGTH:
            self.fail(f"a formula has at most {MAX_LENGTH} characters", MAX_LENGTH, len(self.text))
        if self.pos >= self.end:
            self.fail("there is no formula", 0, len(self.text), "type one, such as H2O")
        leading = re.compile(r"[0-9½][0-9./½]*").match(self.chars, self.pos, self.end)
        if leading:
            only = leading.end() == self.end
            hint = "" if only else "a coefficient belongs to an equation; a mass number is written [13C]"
            self.fail("a formula does not start with a number", self.pos, leading.end(), hint)
        start = self.pos
        counts = self.component(0)
        while self.match(_SEPARATOR):
            self.out.append("·")
            amount = self.amount()
            for symbol, count in self.component(0).items():
                counts[symbol] = counts.get(symbol, Fraction(0)) + amount * count
        charge = 0
        if self.pos < self.end:
            charge, counts = self.charge(start, counts)
            self.out.append(_charge_text(charge))
        canonical = "".join(self.out)
        if len(canonical) > MAX_LENGTH:
            self.fail(f"a formula has at most {MAX_LENGTH} characters", 0, len(self.text))
        return Formula(canonical, tuple(counts.items()), charge)

    def component(self, depth: int) -> dict[str, Fraction]:
        """``{ (element | isotope | group) [number] }``, at least one; its atoms."""
        start = self.pos
        counts: dict[str, Fraction] = {}
        doubtful: tuple[int, int] | None = None
        while True:
            place = self.pos
            isotope = self.match(_ISOTOPE)
            if isotope:
                group = {self.isotope(isotope): Fraction(1)}
            elif self.peek() in _CLOSING:
                group = self.group(depth)
            elif self.peek() and self.peek() in "ABCDEFGHIJKLMNOPQRSTUVWXYZ":
                symbol = self.symbol()
                group = {HYDROGEN_ISOTOPES.get(symbol, symbol): Fraction(1)}
                if symbol in _AMBIGUOUS_SYMBOLS and doubtful is None:
                    doubtful = (place, self.pos)
            else:
                break
            multiplier = self.subscript(depth)
            for symbol, count in group.items():
                counts[symbol] = counts.get(symbol, Fraction(0)) + multiplier * count
        if doubtful and not self.declared and (depth or self.chars[start : self.pos] not in _HEAVY_HYDROGEN):
            self.doubtful_symbol(*doubtful)
        if not counts or (self.pos < self.end and not self.may_follow(depth)):
            self.unexpected(depth)
        return counts

    def may_follow(self, depth: int) -> bool:
        if depth:
            return self.peek() in _CLOSING.values()
        return self.peek() in "^+-" or self.peek() in _SUPERSCRIPTS or self.peek().isspace() or self.peek() in "·*."

    def isotope(self, found: re.Match[str]) -> str:
        symbol = found[0]
        if symbol not in isotopes():
            known = ", ".join(name for name, isotope in isotopes().items() if isotope.element == found[2])
            hint = f"known: {known}" if known else "leave out the mass number"
            self.fail(f"no mass is tabulated for the isotope {symbol}", found.start(), found.end(), hint)
        self.out.append(symbol)
        return symbol

    def group(self, depth: int) -> dict[str, Fraction]:
        """``"(" component ")"`` or ``"[" component "]"``."""
        start = self.pos
        opening = self.peek()
        if depth == MAX_DEPTH:
            self.fail(f"brackets are nested more than {MAX_DEPTH} deep", start, start + 1)
        oxidation = _OXIDATION_NUMBER.match(self.chars, start, self.end)
        if oxidation:
            self.fail("an oxidation number is not part of a formula", start, oxidation.end(), "leave it out")
        self.pos += 1
        self.out.append(opening)
        if self.peek() == _CLOSING[opening]:
            self.fail("there is nothing between the brackets", start, self.pos + 1)
        if self.peek() in list(_DIGITS):
            hint = "an isotope is written [13C], with its count behind the bracket: [2H]6"
            self.fail("a number cannot follow an opening bracket", self.pos, self.pos + 1, hint)
        counts = self.component(depth + 1) if self.pos < self.end else {}
        if self.peek() != _CLOSING[opening]:
            self.fail(f"this bracket is not closed by {_CLOSING[opening]!r}", start, start + 1)
        self.out.append(self.peek())
        self.pos += 1
        return counts

    def symbol(self) -> str:
        found = self.match(_SYMBOL)
        assert found is not None  # the caller has seen a capital letter
        symbol = found[0]
        if symbol not in elements() and symbol not in HYDROGEN_ISOTOPES:
            hint = _ABBREVIATION
            recased = _recased(self.chars.strip()) if self.text.isupper() else ""
            if recased:
                hint = f"{recased}, if that is meant; {hint}"
            self.fail(f"unknown element symbol {symbol!r}", found.start(), found.end(), hint)
        self.out.append(symbol)
        return symbol

    def subscript(self, depth: int) -> Fraction:
        """The count behind a symbol or a bracket, 1 if none; a dot that separates is left standing."""
        found = _NUMBER.match(self.chars, self.pos, self.end)
        if not found:
            return Fraction(1)
        whole, end = found[1], found.end()
        if found[2] and depth == 0 and whole not in ("0", "1") and _FORMULA_AHEAD.match(self.chars, end, self.end):
            one = _ONE_ELEMENT_AHEAD.match(self.chars, end, self.end)
            if one or _CLEAR_DECIMAL.search(self.chars):
                hint = "put the part with decimal subscripts in brackets, or separate with '·'"
                self.fail("this dot may be a decimal point or a separator", found.start(2), found.start(2) + 1, hint)
            end = found.end(1)
        value = self.number(self.chars[self.pos : end], self.pos)
        self.pos = end
        self.out.append(_subscript(value))
        return value

    def amount(self) -> Fraction:
        """The number in front of what a separator attaches, 1 if none."""
        start = self.pos
        found = self.match(_AMOUNT)
        if not found:
            return Fraction(1)
        value = self.number("1/2" if found[0] == "½" else found[0], start)
        if value != 1:
            self.out.append(_number_text(value))
        while self.peek().isspace():
            self.pos += 1
        return value

    def number(self, typed: str, start: int) -> Fraction:
        end = start + len(typed)
        if sum(character.isdigit() for character in typed) > MAX_DIGITS:
            self.fail(f"a number has at most {MAX_DIGITS} digits", start, end)
        if any(re.fullmatch(r"0[0-9]+(\.[0-9]+)?", part) for part in typed.split("/")):
            self.fail("a number does not start with 0", start, end)
        if "/" in typed and int(typed.partition("/")[2]) == 0:
            self.fail("a fraction cannot have the denominator 0", start, end)
        value = Fraction(typed)
        if value == 0:
            self.fail("a count cannot be zero", start, end)
        return value

    def charge(self, start: int, counts: dict[str, Fraction]) -> tuple[int, dict[str, Fraction]]:
        """The charge that ends the text; of ``Ca2+`` also the atoms, for its digit is no count."""
        place = self.pos
        raised = self.chars[place : self.end].translate(_RAISED)
        found = _TYPED_CHARGE.fullmatch(raised)
        plain = self.peek() in "+-"
        if not found or (plain and found[4]):
            self.unreadable_charge(place, start)
        digits, sign = (found[1] or "", found[2]) if found[2] else (found[4], found[3])
        stem = self.chars[start:place].rstrip(_DIGITS + ".")
        if plain and start + len(stem) < place:
            return self.touching_charge(stem, self.chars[start + len(stem) : place], sign, counts)
        if len(digits) > 2 or (digits and int(digits) == 0) or digits.startswith("0"):
            self.fail("a charge is a whole number from 1 to 99", place, self.end)
        self.pos = self.end
        return int(sign + (digits or "1")), counts

    def touching_charge(
        self, stem: str, digits: str, sign: str, counts: dict[str, Fraction]
    ) -> tuple[int, dict[str, Fraction]]:
        """A sign right behind digits, which may be a count, a charge or both."""
        metals = any(elements()[_element_of(symbol)].is_metal for symbol in counts)
        single = stem in elements()
        if single and metals and sign == "+" and len(digits) == 1 and digits in "12345678":
            self.out[:] = [stem]
            self.pos = self.end
            return int(digits), {stem: Fraction(1)}
        whole_group = stem.endswith("]") or (stem.startswith("(") and stem.endswith(")"))
        if len(digits) > 1 or len(counts) == 1 or whole_group or (metals and sign == "+"):
            last = digits[-1]
            readings = [f"{stem}{digits}^{sign}"]
            if last in "123456789" and "." not in digits:
                readings.insert(0, f"{stem}{digits[:-1]}^{'' if last == '1' else last}{sign}")
            hint = f"write {' or '.join(readings)}"
            self.fail("the digits may belong to the count or to the charge", self.pos - len(digits), self.pos + 1, hint)
        self.pos = self.end
        return int(sign + "1"), counts

    def doubtful_symbol(self, start: int, end: int) -> NoReturn:
        symbol = self.chars[start:end]
        isotope = HYDROGEN_ISOTOPES.get(symbol)
        hint = f"{_ABBREVIATION}; the isotope is written {isotope}" if isotope else _ABBREVIATION
        self.fail(f"{symbol!r} may be an element or part of an abbreviation", start, end, hint)

    def unreadable_charge(self, place: int, start: int) -> NoReturn:
        tail = self.chars[place : self.end]
        swapped = re.fullmatch(r"([+-])([1-9][0-9]?)", tail)
        repeated = re.fullmatch(r"(\++|-+)", tail)
        stem = self.chars[start:place]
        if swapped:
            self.fail("a charge cannot be read", place, self.end, f"write {stem}^{swapped[2]}{swapped[1]}")
        if repeated:
            self.fail("a charge cannot be read", place, self.end, f"write {stem}^{len(tail)}{tail[0]}")
        if tail[0].isspace():
            self.fail("a formula has no spaces, except before a charge such as 2-", place, self.end)
        if tail[0] in "+-":
            hint = "leave out bonds and inner charges: CH3CH3, NaCl"
            self.fail("only a charge at the end has a sign", place, place + 1, hint)
        hint = "write it at the end, as in SO4^2- or Na^+; an isotope is written [13C]"
        self.fail("a charge cannot be read", place, self.end, hint)

    def unexpected(self, depth: int) -> NoReturn:
        """Refuse the character at ``pos``, where a formula cannot go on."""
        place, character = self.pos, self.peek()
        if not character:
            self.fail("the formula ends too early", max(self.end - 1, 0), self.end)
        if character.islower():
            run = re.compile(r"[^\W\d_]+").match(self.chars, place, self.end)
            recased = _recased(self.chars.strip().lower())
            hint = f"write {recased}" if recased else f"element symbols start with a capital letter; {_ABBREVIATION}"
            self.fail("no element symbol starts with a small letter", place, run.end() if run else place + 1, hint)
        if character in ")]":
            self.fail("this bracket does not match an opening one", place, place + 1)
        if depth and (character in "^+-" or character in _SUPERSCRIPTS):
            self.fail("a charge cannot stand inside brackets", place, place + 1, "write it at the end: [Fe(CN)6]^4-")
        if depth and character in "·*.":
            self.fail("what a dot attaches cannot stand inside brackets", place, place + 1)
        hint = "leave out bonds: CH2CH2, not CH2=CH2" if character in "=#≡" else ""
        if character in _SUPERSCRIPTS:
            hint = "an isotope is written [13C]"
        self.fail(f"a formula cannot have {character!r} here", place, place + 1, hint)

"""The values behind keys: one reader for each kind of value in the table of keys."""

from __future__ import annotations

import re
from collections.abc import Callable
from fractions import Fraction

from routeheat.chem.measured import Measured
from routeheat.chem.species import Species
from routeheat.chem.step import Recycle
from routeheat.notation.context import Context
from routeheat.notation.heats import label_of, note_assumed, one_of_row, read_analogue, read_heat
from routeheat.notation.keys import AS_TYPED, Key
from routeheat.notation.quantity import Quantity, read_quantity, require_dimension
from routeheat.notation.tokens import Piece
from routeheat.units import KELVIN, PURE

LONGEST_QUOTE = 1000
"""Characters of a quoted text."""

_WIDEN = re.compile(r'(?!0+(?:\.0+)?\s*")[0-9]{1,6}(?:\.[0-9]{1,6})?\s*"[^"]*[^"\s][^"]*"')
_REASONED = ("accept", "exclude")
"""Keys whose text is the reason of a decision."""


def read_value(key: Key, value: Piece, context: Context) -> object:
    """The value of ``key`` typed in ``value``; raises :class:`~routeheat.notation.tokens.Trouble`."""
    return _READERS[key.value](key, value, context)


def _quantity(key: Key, value: Piece, context: Context) -> Quantity:
    return read_quantity(value, context.sheet_k, key.example.partition(" ")[2], context.reader.declared)


def _measured(key: Key, value: Piece, context: Context) -> Measured:
    quantity = _quantity(key, value, context)
    if quantity.basis is not None or quantity.temperature is not None:
        value.refuse(f"{key.name} takes a number with a unit only", f"like {key.example}")
    measured = require_dimension(quantity, key.unit, key.hint or f"like {key.example}")
    _check_bounds(key, measured, value)
    note_assumed(quantity, value, context)
    return measured


def _check_bounds(key: Key, measured: Measured, value: Piece) -> None:
    if key.bounds == "positive" and measured.value <= 0:
        value.refuse(f"{key.name} must be more than zero", f"like {key.example}")
    if key.bounds == "temperature" and measured.to(KELVIN) <= 0:
        value.refuse(f"{measured.text} is not above absolute zero", f"like {key.example}")
    if key.bounds in ("share", "yield"):
        _check_share(key.name, measured, value, key.example, zero=key.bounds == "share")


def _check_share(name: str, measured: Measured, value: Piece, example: str, *, zero: bool) -> None:
    share = measured.to(PURE)
    if not measured.unit.text and share > 2:
        meaning = f"{float(share * 100):g} %"
        value.refuse(f"{name} {measured.text} without a unit means {meaning}", f"write {measured.text} %")
    if share > 1 or share < 0 or (share == 0 and not zero):
        low = "at least 0" if zero else "more than 0"
        value.refuse(f"{name} {measured.text} cannot be: it is {low} and at most 100 %", f"like {example}")
    if measured.unit.text == "%" and 0 < measured.value < 1 and name == "yield":
        value.refuse(f"{name} {measured.text} is less than one per cent", f"write {float(measured.value * 100):g} %, "
                     f"or {float(share):g}")  # fmt: skip


def _text(key: Key, value: Piece, _context: Context) -> str:
    if not value.text:
        value.refuse(f"a value is missing behind {key.name}", f"like {key.example}")
    if value.text.count('"') % 2:
        place = value.text.rindex('"')
        value.refuse("this quotation is not closed", 'put " at its end', place)
    text = value.text if key.name in AS_TYPED else _unquoted(value)
    if key.name in _REASONED and not text.strip():
        value.refuse(f"{key.name} needs a reason", f"like {key.example}")
    if key.name == "widen" and _WIDEN.fullmatch(text) is None:
        value.refuse("by how much is the uncertainty widened, and why?", f"like {key.example}")
    if len(text) > LONGEST_QUOTE:
        value.refuse(f"a text of more than {LONGEST_QUOTE} characters", "shorten it")
    if key.name == "cas":
        _check_cas(value, text)
    return text


def _unquoted(value: Piece) -> str:
    if not value.text.startswith('"'):
        if '"' in value.text:
            value.refuse("a quotation inside a text", 'put the whole text in "…"', value.text.index('"'))
        return value.text
    end = value.text.index('"', 1)
    if value.text[end + 1 :].strip():
        value.part(end + 1).strip().refuse("this stands behind the quotation", "keys are separated by |")
    return value.text[1:end]


def _check_cas(value: Piece, text: str) -> None:
    match = re.fullmatch(r"([0-9]{2,7})-([0-9]{2})-([0-9])", text)
    if match is None:
        value.refuse("this is no CAS Registry Number", "like 62-53-3")
    digits = (match[1] + match[2])[::-1]
    if sum(place * int(digit) for place, digit in enumerate(digits, 1)) % 10 != int(match[3]):
        value.refuse("the check digit of this CAS Registry Number is wrong", "a digit was mistyped")


def _flag(key: Key, value: Piece, _context: Context) -> bool:
    if value.text:
        value.refuse(f"{key.name} takes no value", "keys are separated by |")
    return True


def _species(key: Key, value: Piece, context: Context) -> Species:
    if not value.text:
        value.refuse(f"a species is missing behind {key.name}", f"like {key.example}")
    return one_of_row(value, context)


def _equivalents(key: Key, value: Piece, context: Context) -> tuple[Species, Fraction]:
    match = re.match(r"(\S+)\s+of\s+(?=\S)", value.text)
    if match is None:
        value.refuse("how many equivalents, of what?", f"like {key.example}")
    quantity = read_quantity(value.part(0, match.end(1)), context.sheet_k, "1.05")
    number = quantity.measured
    if number.unit != PURE or number.spread is not None:
        value.refuse("equivalents are a plain number", f"like {key.example}", 0, match.end(1))
    if number.value <= 0:
        value.refuse("equivalents are more than zero", f"like {key.example}", 0, match.end(1))
    return one_of_row(value.part(match.end()), context), number.value


def _recycle(key: Key, value: Piece, context: Context) -> Recycle:
    place = value.text.rfind(" from ")
    tail = re.match(r"\s*(\S+)\s+(?=\S)", value.text[place + len(" from ") :]) if place > 0 else None
    if tail is None:
        value.refuse("recycle what, from which step, how much of it?", f"like {key.example}")
    share = value.part(place + len(" from ") + tail.end())
    quantity = read_quantity(share, context.sheet_k, "90 %")
    part = require_dimension(quantity, PURE, "like 90 %")
    _check_share("the recycled part", part, share, "90 %", zero=False)
    note_assumed(quantity, share, context)
    return Recycle(one_of_row(value.part(0, place).strip(), context), label_of(tail[1], value), part)


def _side(key: Key, value: Piece, _context: Context) -> str:
    match = re.fullmatch(r"of\s+(\S+)", value.text)
    if match is None:
        value.refuse("a side row of which step?", f"like {key.example}")
    return label_of(match[1], value)


def _loss(_key: Key, value: Piece, _context: Context) -> str:
    if value.text.lower() not in ("reacted", "unreacted"):
        value.refuse("what is lost has either reacted or not", "write loss reacted, or loss unreacted")
    return value.text.lower()


_READERS: dict[str, Callable[[Key, Piece, Context], object]] = {
    "heat": read_heat,
    "analogue": read_analogue,
    "measured": _measured,
    "text": _text,
    "flag": _flag,
    "species": _species,
    "equivalents": _equivalents,
    "recycle": _recycle,
    "label": _side,
    "loss": _loss,
}

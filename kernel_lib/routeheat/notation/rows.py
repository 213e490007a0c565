"""Rows and their keys: what stands in brackets, the equation or the named reaction, and every key with its value."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Literal, TypeVar, cast

from routeheat.chem.balance import (
    PHASE_CHANGES,
    combustion,
    completion,
    formation,
    imbalance_text,
    phase_change,
)
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Heat, Row
from routeheat.chem.species import Species
from routeheat.chem.step import Recycle, Step
from routeheat.errors import Fault, nearest
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.keys import Key, Where, find_key, spellings
from routeheat.notation.quantity import read_quantity, require_dimension
from routeheat.notation.sections import Entry, parts
from routeheat.notation.tokens import Piece, Trouble, split_list
from routeheat.units import CELSIUS, KJ, KJ_PER_KG, KJ_PER_MOL, PURE

LONGEST_QUOTE = 1000
"""Characters of a quoted text."""

_LABEL = re.compile(r"\[\s*([^\[\]|\"#]*?)\s*\]")
_NAMED = re.compile(
    r"(formation|combustion|fusion|vapori[sz]ation|sublimation|melting|evaporation|boiling)\s+of\s+", re.IGNORECASE
)
_SYNONYMS = {"vaporization": "vaporisation", "evaporation": "vaporisation", "boiling": "vaporisation",
             "melting": "fusion"}  # fmt: skip
_T = TypeVar("_T")


@dataclass(slots=True)
class Context:
    """What reading one sheet shares: names, the sheet's k, and what was found on the way."""

    reader: SpeciesReader
    sheet_k: Fraction
    faults: list[Fault] = field(default_factory=list)
    assumed: Piece | None = None
    """The first number whose ``±`` took the coverage factor of the sheet."""
    unused: dict[str, Piece] = field(default_factory=dict)
    """First place of every key that nothing uses yet."""

    def attempt(self, action: Callable[[], _T]) -> _T | None:
        """The result of ``action``, or ``None`` with its fault collected."""
        try:
            return action()
        except Trouble as trouble:
            self.faults.append(trouble.fault)
            return None


@dataclass(slots=True)
class Keyed:
    """The keys of one entry with their values, as read."""

    values: dict[str, object] = field(default_factory=dict)
    places: dict[str, Piece] = field(default_factory=dict)
    equivalents: list[tuple[Species, Fraction]] = field(default_factory=list)
    recycles: list[Recycle] = field(default_factory=list)

    def measured(self, name: str) -> Measured | None:
        """Value of a measured key, or ``None``."""
        return cast("Measured | None", self.values.get(name))

    def text(self, name: str) -> str:
        """Value of a text key, or an empty text."""
        return cast(str, self.values.get(name, ""))

    def species(self, name: str) -> Species | None:
        """Value of a species key, or ``None``."""
        return cast("Species | None", self.values.get(name))


def read_row(entry: Entry, context: Context, where: Where) -> tuple[Row, Keyed] | None:
    """A row with its keys; ``None`` when its equation cannot be read (the faults are in the context)."""
    pieces = list(parts(entry))
    label, body = _label(pieces[0], context)
    if body is None:
        return None
    before = len(context.faults)
    read = context.attempt(lambda: _reaction(body, context))
    keyed = read_keys(pieces[1:], context, where)
    for index in range(before, len(context.faults)):
        context.faults[index] = _about(context.faults[index], label)
    if read is None:
        return None
    reaction, kind, subject = read
    _check_balance(reaction, body, label, context)
    heat = cast("Heat | None", keyed.values.get("dH"))
    if heat is not None:
        heat = _checked_heat(heat, reaction, kind, keyed.places["dH"], label, context)
    settings = tuple(
        (name, value) for name, value in keyed.values.items() if name == "note" or not _feeds(name)
    )
    row = Row(label, reaction, heat, kind, subject, keyed.text("source"), settings, entry.head.line)
    return row, keyed


def _feeds(name: str) -> bool:
    key = find_key(name)
    return key is not None and bool(key.feeds)


def _about(fault: Fault, label: str) -> Fault:
    return Fault(fault.message, fault.line, fault.column, fault.length, fault.hint, fault.severity, label)


def _label(piece: Piece, context: Context) -> tuple[str, Piece | None]:
    match = _LABEL.match(piece.text)
    if match is None:
        hint = "start the row with its label, like [K1]"
        if find_key(piece.text.split(" ")[0]) is not None:
            hint = "this key stands before the first row"
        context.faults.append(piece.fault("a row starts with a label in brackets", hint))
        return "", None
    label = match[1]
    if not re.fullmatch(r"[^\W_][\w.\-+*']{0,39}", label):
        context.faults.append(
            piece.fault(
                "a label is a word of letters, digits and . - + * _", "like [K1], at most 40 characters",
                match.start(), match.end(),
            )  # fmt: skip
        )
        return "", None
    body = piece.part(match.end()).strip()
    if not body.text:
        context.faults.append(piece.fault("a reaction is missing behind the label", "like A(l) -> B(l)", subject=label))
        return label, None
    return label, body


def _reaction(body: Piece, context: Context) -> tuple[Reaction, str, Species | None]:
    named = _NAMED.match(body.text)
    if named is None:
        return context.reader.equation(body), "reaction", None
    kind = named[1].lower()
    kind = _SYNONYMS.get(kind, kind)
    rest = body.part(named.end()).strip()
    if kind == "combustion":
        return _burn(rest, context)
    subject = context.reader.species(rest)
    try:
        if kind == "formation":
            if not subject.phase:
                rest.refuse("the phase is missing", f"like {subject.name}(l)")
            return formation(subject), kind, subject
        return _changed(kind, subject)
    except ValueError as problem:
        rest.refuse(str(problem))


def _changed(kind: str, subject: Species) -> tuple[Reaction, str, Species | None]:
    reaction = phase_change(kind, subject)
    return reaction, kind, reaction.species[0]


def _burn(rest: Piece, context: Context) -> tuple[Reaction, str, Species | None]:
    split = re.search(r"\s+to\s+", rest.text)
    if split is None:
        rest.refuse(
            "the products of the combustion are missing",
            "like to CO2(g), H2O(l): with water as liquid or gas, HCl(aq) or HCl(g), SO2(g) or H2SO4(aq) the heat "
            "differs by tens of kJ/mol",
        )
    subject = context.reader.species(rest.part(0, split.start()).strip())
    products = [context.reader.species(part) for part in split_list(rest.part(split.end()))]
    for item in (subject, *products):
        if not item.phase:
            rest.refuse(f"the phase of {item.name} is missing", f"like {item.name}(l)")
    try:
        return combustion(subject, products), "combustion", subject
    except ValueError as problem:
        rest.refuse(str(problem), "name every product that holds an element of the compound")


def _check_balance(reaction: Reaction, body: Piece, label: str, context: Context) -> None:
    if not reaction.net:
        context.faults.append(body.fault("nothing changes in this reaction", subject=label))
    elif reaction.imbalance and not reaction.unchecked:
        message = f"does not balance: {imbalance_text(reaction)}"
        context.faults.append(body.fault(message, completion(reaction), subject=label))
    elif reaction.unchecked:
        names = ", ".join(species.text for species in reaction.unchecked)
        context.faults.append(
            body.fault(f"balance not checked: the formula of {names} is not known", notice=True, subject=label)
        )


def _checked_heat(
    heat: Heat, reaction: Reaction, kind: str, place: Piece, label: str, context: Context
) -> Heat | None:
    if heat.amount is None:
        return heat
    try:
        heat.factor(reaction)
    except ValueError as problem:
        choices = ", ".join(species.text for species in reaction.net)
        context.faults.append(place.fault(str(problem), f"one of {choices}", subject=label))
        return None
    expected = {"combustion": -1, "vaporisation": 1, "fusion": 1, "sublimation": 1}.get(kind)
    if expected is not None and heat.amount.value * expected < 0:
        usual = "exothermic, negative" if expected < 0 else "endothermic, positive"
        context.faults.append(
            place.fault(f"is the sign right? {kind} is {usual} dH", notice=True, subject=label)
        )
    return heat


# keys ---------------------------------------------------------------------------------------------------------------


def read_keys(pieces: list[Piece], context: Context, where: Where) -> Keyed:
    """Every key of an entry; unknown keys, keys typed twice and bad values are collected as faults."""
    keyed = Keyed()
    for piece in pieces:
        word = re.match(r"[^\s=]+", piece.text)
        assert word is not None
        key = find_key(word[0])
        if key is None:
            near = nearest(word[0], spellings(where))
            hint = f"did you mean {near}?" if near else f"known here: {', '.join(spellings(where))}"
            context.faults.append(piece.fault(f"unknown key {word[0][:40]}", hint, 0, word.end()))
            continue
        if where not in key.where:
            places = " or ".join({"species": "a species", "known": "a known row", "step": "a step"}[w]
                                 for w in ("species", "known", "step") if w in key.where)  # fmt: skip
            context.faults.append(piece.fault(f"{key.name} belongs to {places}, not here", "", 0, word.end()))
            continue
        value = piece.part(word.end()).strip()
        if value.text.startswith("="):
            value = value.part(1).strip()
        _take(key, piece, value, keyed, context)
    return keyed


def _take(key: Key, piece: Piece, value: Piece, keyed: Keyed, context: Context) -> None:
    if key.name in keyed.values:
        context.faults.append(piece.fault(f"{key.name} is typed twice for this entry", "keep one"))
        return
    if not key.feeds:
        context.unused.setdefault(key.name, piece)
    try:
        read = _VALUES[key.value](key, value, context)
    except Trouble as trouble:
        context.faults.append(trouble.fault)
        return
    if key.value == "equivalents":
        keyed.equivalents.append(cast("tuple[Species, Fraction]", read))
    elif key.value == "recycle":
        keyed.recycles.append(cast(Recycle, read))
    else:
        keyed.values[key.name] = read
    keyed.places[key.name] = piece


def _measured(key: Key, value: Piece, context: Context) -> Measured:
    quantity = read_quantity(value, context.sheet_k)
    if quantity.basis is not None or quantity.temperature is not None:
        value.refuse(f"{key.name} takes a number with a unit only", f"like {key.example}")
    if quantity.assumed_k and context.assumed is None:
        context.assumed = value
    return require_dimension(quantity, key.unit, f"like {key.example}")


def _heat(key: Key, value: Piece, context: Context) -> Heat:
    letter = re.match(r"([A-Za-z][A-Za-z0-9_]{0,11})(?=$|\s+at\s)", value.text)
    if letter is not None:
        at = re.match(r"\s+at\s+", value.text[letter.end() :])
        tail = value.part(letter.end() + at.end()) if at else None
        return Heat(None, None, letter[1], None if tail is None else _temperature(tail, context))
    quantity = read_quantity(value, context.sheet_k)
    if quantity.assumed_k and context.assumed is None:
        context.assumed = value
    dimension = quantity.measured.unit.dimension
    if dimension == KJ_PER_KG.dimension and quantity.basis is None:
        quantity.unit_piece.refuse("a heat per mass of what?", f"like {quantity.measured.unit.text} of NB")
    if dimension == KJ.dimension and quantity.basis is not None:
        quantity.unit_piece.refuse("a bare energy is per mole of reaction as written", "like kJ/mol of NB")
    if dimension not in (KJ.dimension, KJ_PER_KG.dimension):
        require_dimension(quantity, KJ_PER_MOL, f"like {key.example}")
    basis = None if quantity.basis is None else context.reader.species(quantity.basis)
    at = None if quantity.temperature is None else _temperature(quantity.temperature, context)
    return Heat(quantity.measured, basis, "", at)


def _temperature(piece: Piece, context: Context) -> Measured:
    return require_dimension(read_quantity(piece, context.sheet_k), CELSIUS, "like 25 degC, or 298.15 K")


def _text(key: Key, value: Piece, _context: Context) -> str:
    if not value.text:
        value.refuse(f"a value is missing behind {key.name}", f"like {key.example}")
    if key.name == "shared" or not value.text.startswith('"'):
        text = value.text
        if '"' in text and key.name != "shared":
            value.refuse("a quotation mark inside a text", 'put the whole text in "…"')
    else:
        end = value.text.find('"', 1)
        if end < 0:
            value.refuse("this quotation is not closed", 'put " at its end')
        if value.text[end + 1 :].strip():
            value.refuse("this stands behind the quotation", "keys are separated by |", end + 1)
        text = value.text[1:end]
    if len(text) > LONGEST_QUOTE:
        value.refuse(f"a text of more than {LONGEST_QUOTE} characters")
    if key.name == "cas":
        _check_cas(value, text)
    return text


def _check_cas(value: Piece, text: str) -> None:
    match = re.fullmatch(r"([0-9]{2,7})-([0-9]{2})-([0-9])", text)
    if match is None:
        value.refuse("this is no CAS Registry Number", "like 62-53-3")
    digits = (match[1] + match[2])[::-1]
    if sum(place * int(digit) for place, digit in enumerate(digits, 1)) % 10 != int(match[3]):
        value.refuse("the check digit of this CAS Registry Number is wrong", "a digit was mistyped")


def _flag(key: Key, value: Piece, _context: Context) -> bool:
    if value.text:
        value.refuse(f"{key.name} takes no value", "separate keys by |")
    return True


def _species(key: Key, value: Piece, context: Context) -> Species:
    if not value.text:
        value.refuse(f"a species is missing behind {key.name}", f"like {key.example}")
    return context.reader.species(value)


def _equivalents(key: Key, value: Piece, context: Context) -> tuple[Species, Fraction]:
    match = re.fullmatch(r"(\S+)\s+of\s+(.+)", value.text)
    if match is None:
        value.refuse("equivalents of what?", f"like {key.example}")
    number = read_quantity(value.part(0, match.end(1)), context.sheet_k).measured
    if number.unit != PURE or number.spread is not None:
        value.refuse("equivalents are a plain number", f"like {key.example}", 0, match.end(1))
    return context.reader.species(value.part(match.start(2))), number.value


def _recycle(key: Key, value: Piece, context: Context) -> Recycle:
    match = re.fullmatch(r"(.+?)\s+from\s+(\S+)\s+(.+)", value.text)
    if match is None:
        value.refuse("recycle what, from where, how much?", f"like {key.example}")
    part = require_dimension(
        read_quantity(value.part(match.start(3)), context.sheet_k), PURE, f"like {key.example}"
    )
    return Recycle(context.reader.species(value.part(0, match.end(1))), match[2], part)


def _side(key: Key, value: Piece, _context: Context) -> str:
    match = re.fullmatch(r"of\s+(\S+)", value.text)
    if match is None:
        value.refuse("a side row of which step?", f"like {key.example}")
    return match[1].strip("[]")


def _loss(key: Key, value: Piece, _context: Context) -> str:
    if value.text not in ("reacted", "unreacted"):
        value.refuse("what is lost has either reacted or not", "loss reacted, or loss unreacted")
    return value.text


_VALUES: dict[str, Callable[[Key, Piece, Context], object]] = {
    "heat": _heat,
    "measured": _measured,
    "text": _text,
    "flag": _flag,
    "species": _species,
    "equivalents": _equivalents,
    "recycle": _recycle,
    "label": _side,
    "loss": _loss,
}


def as_step(row: Row, keyed: Keyed) -> Step:
    """The row as a step of a route, with what its keys say."""
    operation = next(
        (name for name in ("crystallisation", "dissolution", "distillation", "equilibrium") if name in keyed.values), ""
    )
    return Step(
        row,
        keyed.species("product"),
        keyed.species("limiting"),
        tuple(keyed.equivalents),
        keyed.measured("yield"),
        keyed.text("side"),
        keyed.measured("amount"),
        tuple(keyed.recycles),
        cast('Literal["", "reacted", "unreacted"]', keyed.text("loss")),
        operation,
        keyed.measured("T"),
        keyed.measured("conc"),
        keyed.measured("cp"),
    )


def missing_phases(reaction: Reaction) -> Iterator[Species]:
    """Species of a reaction that have no phase."""
    return (species for species in reaction.species if not species.phase)

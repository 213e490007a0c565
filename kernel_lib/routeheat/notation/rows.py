"""Rows and their keys: what stands in brackets, the equation or the named reaction, and every key with its value."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Literal, NoReturn, cast

from routeheat.chem.balance import completion, imbalance_text
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Heat, Row
from routeheat.chem.species import Species
from routeheat.chem.step import OPERATIONS, Recycle, Step
from routeheat.notation.context import Context
from routeheat.notation.keys import HEATS, Key, Where, find_key, key_order, names_in, nearest_key
from routeheat.notation.named import read_named
from routeheat.notation.sections import Entry, parts
from routeheat.notation.tokens import LABEL, Piece, Trouble
from routeheat.notation.values import read_value

_KIND_OF_ENTRY: dict[Where, str] = {
    "species": "a species", "known": "a known row", "target": "a target", "step": "a step",
}  # fmt: skip
_USUAL_SIGN = {"combustion": -1, "neutralisation": -1, "vaporisation": 1, "fusion": 1, "sublimation": 1}


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

    def heat(self) -> tuple[Heat | None, Piece | None]:
        """The heat of the entry and the place of its key, whichever key it is."""
        for name in HEATS:
            if name in self.places:
                return cast("Heat | None", self.values.get(name)), self.places[name]
        return None, None

    def text(self, name: str) -> str:
        """Value of a text key, or an empty text."""
        return cast(str, self.values.get(name, ""))

    def species(self, name: str) -> Species | None:
        """Value of a species key, or ``None``."""
        return cast("Species | None", self.values.get(name))

    def settings(self, *used: str) -> tuple[tuple[str, object], ...]:
        """Keys that are kept as typed, in the order of the table of keys; ``used`` have a place of their own."""
        kept = [(name, value) for name, value in self.values.items() if name not in used]
        return tuple(sorted(kept, key=lambda pair: key_order(pair[0])))


@dataclass(slots=True)
class ReadRow:
    """One row as read."""

    row: Row
    keyed: Keyed
    places: dict[Species, Piece]
    """Where each of its species was read."""
    clean: bool
    """False when the row has faults."""


def read_row(entry: Entry, context: Context, where: Where) -> ReadRow | None:
    """A row with its keys; ``None`` when its equation cannot be read (the faults are in the context)."""
    pieces = list(parts(entry))
    label, body = _label(pieces, context)
    if body is None:
        return None
    before, noticed = len(context.faults), len(context.reader.notices)
    context.reader.places = {}
    read = context.attempt(lambda: _reaction(body, context))
    places = context.reader.places
    context.reaction = None if read is None else read[0]
    keyed = read_keys(pieces[1:], context, where)
    result = None
    if read is not None:
        reaction, kind, subject = read
        _check_balance(reaction, body, context)
        heat, place = keyed.heat()
        if heat is not None and place is not None:
            _check_heat(heat, place, reaction, kind, where, context)
            if heat.analogue:
                context.analogues[label] = place
        settings = keyed.settings(*_OF_ROWS)
        row = Row(label, reaction, heat, kind, subject, keyed.text("source"), settings, entry.head.line)
        clean = all(fault.severity == "notice" for fault in context.faults[before:])
        result = ReadRow(row, keyed, places, clean)
    context.reaction = None
    for found, start in ((context.faults, before), (context.reader.notices, noticed)):
        found[start:] = [replace(fault, subject=label) for fault in found[start:]]
    return result


def _check_heat(heat: Heat, place: Piece, reaction: Reaction, kind: str, where: Where, context: Context) -> None:
    """A sign that is unusual for the kind of row, and a ΔU that cannot become a ΔH."""
    if heat.amount is not None and heat.amount.value * _USUAL_SIGN.get(kind, 0) < 0:
        usual = "exothermic" if _USUAL_SIGN[kind] < 0 else "endothermic"
        sign = f"{heat.key} is {'negative' if _USUAL_SIGN[kind] < 0 else 'positive'}"
        context.faults.append(place.fault(f"is the sign right? {kind} is {usual}: {sign}", notice=True))
    if heat.key != "dU":
        return
    mixed = [species.text for species in reaction.net if species.in_mixture]
    if mixed:
        message = f"ΔU becomes ΔH by the change in moles of gas, but the phase of {mixed[0]} is not stated"
        context.faults.append(place.fault(message, "state the phase of every species, or type dH"))
    elif where == "step" and heat.temperature is None and reaction.gas_change:
        message = "ΔU becomes ΔH at the temperature of the measurement, which is missing"
        context.faults.append(place.fault(message, f"like dU {heat.text} at 25 degC"))


_OF_ROWS = (
    *HEATS, "source", "yield", "T", "conc", "cp", "product", "limiting", "side", "amount", "loss", *OPERATIONS,
    "equilibrium",
)  # fmt: skip
"""Keys with a place of their own in a row or a step."""


def _label(pieces: list[Piece], context: Context) -> tuple[str, Piece | None]:
    """The label and what stands behind it; an equation may start on the line below."""
    piece = pieces[0]
    end = piece.text.find("]")
    if not piece.text.startswith("[") or end < 0:
        hint = "start the row with its label, like [K1]"
        if piece.text.startswith("["):
            hint = "close the label with ]"
        elif re.match(r"use\b", piece.text):
            hint = "only a route has use lines, with labels, like use A1, A2"
        elif find_key(piece.text.split(" ")[0]) is not None:
            hint = "this key stands before the first row"
        context.faults.append(piece.fault("a row starts with a label in brackets", hint))
        return "", None
    label = piece.text[1:end].strip()
    if LABEL.fullmatch(label) is None:
        hint = "like [K1], at most 40 characters"
        context.faults.append(piece.fault("a label is one word of letters, digits and . - + * _", hint, 0, end + 1))
        return "", None
    body = piece.part(end + 1).strip()
    if body.text:
        return label, body
    if len(pieces) > 1 and find_key(pieces[1].text.split(" ")[0]) is None:
        return label, pieces.pop(1)
    context.faults.append(piece.fault("a reaction is missing behind the label", "like A(l) -> B(l)", subject=label))
    return label, None


def _reaction(body: Piece, context: Context) -> tuple[Reaction, str, Species | None]:
    named = read_named(body, context.reader)
    return (context.reader.equation(body), "reaction", None) if named is None else named


def _check_balance(reaction: Reaction, body: Piece, context: Context) -> None:
    if not reaction.net:
        context.faults.append(body.fault("nothing changes in this reaction", "the same species stand on both sides"))
    elif reaction.unchecked:
        names = ", ".join(dict.fromkeys(species.name for species in reaction.unchecked))
        context.faults.append(body.fault(f"balance not checked: the formula of {names} is not known", notice=True))
    elif reaction.imbalance:
        hint = context.guesses.search(lambda: completion(reaction)) or _misspelt(reaction, context)
        context.faults.append(body.fault(f"does not balance: {imbalance_text(reaction)}", hint))


def _misspelt(reaction: Reaction, context: Context) -> str:
    """A formula that looks like a declared name may be that name, mistyped."""
    for species in reaction.species:
        if not species.declared:
            near = context.guesses.nearest(species.name, context.reader.declared)
            if near:
                return f"did you mean {near} instead of {species.name}?"
    return "every element and the charge must balance"


def missing_phases(read: ReadRow) -> Iterator[tuple[Species, Piece | None]]:
    """Species of a row that have no phase, with the places where they were read."""
    return ((species, read.places.get(species)) for species in read.row.reaction.species if not species.phase)


# keys ---------------------------------------------------------------------------------------------------------------


def read_keys(pieces: list[Piece], context: Context, where: Where) -> Keyed:
    """Every key of an entry; unknown keys, keys typed twice and bad values are collected as faults."""
    keyed = Keyed()
    for piece in pieces:
        try:
            _read_key(piece, keyed, context, where)
        except Trouble as trouble:
            context.faults.append(trouble.fault)
    return keyed


def _read_key(piece: Piece, keyed: Keyed, context: Context, where: Where) -> None:
    end = next((index for index, char in enumerate(piece.text) if char in " =:"), len(piece.text))
    word = piece.text[:end]
    key = find_key(word)
    if key is None:
        _refuse_key(piece, word, context, where)
    if where not in key.where:
        places = " or ".join(_KIND_OF_ENTRY[kind] for kind in _KIND_OF_ENTRY if kind in key.where)
        hint = "a heat takes its own temperature, like dH 44 kJ/mol at 25 degC" if key.name == "T" else "leave it out"
        piece.refuse(f"{key.name} belongs to {places}, not to {_KIND_OF_ENTRY[where]}", hint, 0, end)
    value = piece.part(end).strip()
    if value.text[:1] in ("=", ":"):
        value = value.part(1).strip()
    if key.name in keyed.values:
        piece.refuse(f"{key.name} is typed twice for this entry", "keep one")
    earlier = next((name for name in HEATS if name in keyed.places), None)
    if key.name in HEATS and earlier is not None:
        piece.refuse(f"a row has one heat, and {earlier} is typed already", f"keep {earlier} or {key.name}", 0, end)
    _take(key, read_value(key, value, context), piece, keyed)


def _refuse_key(piece: Piece, word: str, context: Context, where: Where) -> NoReturn:
    if not word or word[0] in "-+→⟶⇌<":
        piece.refuse("this belongs to no key", "an equation stands on one line", 0, 1)
    near = context.guesses.search(lambda: nearest_key(word, where))
    hint = f"did you mean {near}?" if near else f"known here: {', '.join(names_in(where))}"
    piece.refuse(f"unknown key {word[:40]}", hint, 0, len(word))


def _take(key: Key, read: object, piece: Piece, keyed: Keyed) -> None:
    if key.value == "equivalents":
        species, number = cast("tuple[Species, Fraction]", read)
        if any(species == other for other, _ in keyed.equivalents):
            piece.refuse(f"equivalents of {species} are typed twice", "keep one")
        keyed.equivalents.append((species, number))
    elif key.value == "recycle":
        keyed.recycles.append(cast(Recycle, read))
    else:
        operations = (*OPERATIONS, "equilibrium")
        other = next((name for name in operations if name in keyed.values), None)
        if key.name in operations and other is not None:
            piece.refuse(f"a step is either {other} or {key.name}", "keep one")
        keyed.values[key.name] = read
    keyed.places[key.name] = piece


def as_step(row: Row, keyed: Keyed) -> Step:
    """The row as a step of a route, with what its keys say."""
    operation = next((name for name in (*OPERATIONS, "equilibrium") if name in keyed.values), "")
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

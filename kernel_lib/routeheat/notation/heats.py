"""Heats as typed: ``dH`` and ``dU`` per something, ``Q`` of a calorimeter run, and ``like`` another row.

heat     = quantity | energy "for" ( mass | amount ) "of" species [ "at" temperature ] | letter
analogue = label "±" number [ "kJ/mol" ] [ coverage ] [ "at" temperature ]
"""

from __future__ import annotations

import re
from dataclasses import replace

from routeheat.chem.measured import Measured
from routeheat.chem.species import Species
from routeheat.chem.typed_heat import Heat, HeatKey
from routeheat.notation.context import Context
from routeheat.notation.keys import Key
from routeheat.notation.quantity import Quantity, read_quantity, require_dimension
from routeheat.notation.tokens import LABEL, Piece
from routeheat.units import CELSIUS, KELVIN, KILOGRAM, KJ, KJ_PER_KG, KJ_PER_MOL, MOLE, PERCENT, PURE, is_unit_symbol

_LETTER = re.compile(r"[^\W\d_](?:_?[0-9]{1,3})?")
_HEAT_KEYS: dict[str, HeatKey] = {"dH": "dH", "dU": "dU", "Q": "Q"}


def read_heat(key: Key, value: Piece, context: Context) -> Heat:
    """The value of ``dH``, ``dU`` or ``Q``; raises :class:`~routeheat.notation.tokens.Trouble`."""
    unknown = _unknown_heat(value, context) if key.name == "dH" else None
    if unknown is not None:
        return unknown
    run = re.search(r"\sfor\s", value.text)
    # a declared name behind "of" may hold the word too
    if run is not None and (key.name == "Q" or not re.search(r"\sof\s", value.text[: run.start()])):
        if key.name == "dH":
            hint = f"write Q {value.text}, or dU for a run at constant volume"
            value.refuse("a calorimeter run is typed behind Q", hint)
        return _run(key, value.part(0, run.start()).strip(), value.part(run.end()).strip(), context)
    if key.name == "Q":
        value.refuse("a heat of how much of what?", f"like {key.example}")
    example = key.example.partition(" ")[2]
    quantity = read_quantity(value, context.sheet_k, example, context.reader.declared)
    dimension = quantity.measured.unit.dimension
    if dimension == KJ_PER_KG.dimension and quantity.basis is None:
        species = "a species" if context.reaction is None else next(iter(context.reaction.net), "a species")
        hint = f"like {quantity.measured.unit.text} of {species}"
        quantity.unit_piece.refuse("a heat per mass of what?", hint)
    if dimension == KJ.dimension and quantity.basis is not None:
        hint = "write kJ/mol of, or kJ/kg of"
        quantity.unit_piece.refuse("a bare energy is per mole of reaction as written", hint)
    if dimension not in (KJ.dimension, KJ_PER_KG.dimension):
        require_dimension(quantity, KJ_PER_MOL, f"like {key.example}")
    basis = None if quantity.basis is None else one_of_row(quantity.basis, context)
    at = None if quantity.temperature is None else _temperature(quantity.temperature, context)
    heat = Heat(quantity.measured, basis, "", at, _HEAT_KEYS[key.name])
    if basis is not None and context.reaction is not None:
        _check_basis(heat, quantity.basis or value, context)
    note_assumed(quantity, value, context)
    return heat


def _run(key: Key, energy: Piece, charged: Piece, context: Context) -> Heat:
    """A calorimeter run: an energy for a weighed or counted portion of one species."""
    heat = read_quantity(energy, context.sheet_k, "-48.8 kJ")
    if heat.basis is not None or heat.temperature is not None:
        energy.refuse("what reacted stands behind for", "like -48.8 kJ for 3.12 g of C6H12O6(s)")
    amount = require_dimension(heat, KJ, "an energy, like -48.8 kJ")
    quantity = read_quantity(charged, context.sheet_k, "3.12 g of C6H12O6(s)", context.reader.declared)
    portion = quantity.measured
    if portion.unit.dimension not in (KILOGRAM.dimension, MOLE.dimension):
        require_dimension(quantity, KILOGRAM, "a mass or an amount, like 3.12 g of C6H12O6(s)")
    if quantity.basis is None:
        charged.refuse("of what?", f"like {portion.text} of C6H12O6(s)")
    if portion.value <= 0:
        charged.refuse("what reacted is more than nothing", "like 3.12 g of C6H12O6(s)")
    basis = one_of_row(quantity.basis, context)
    at = None if quantity.temperature is None else _temperature(quantity.temperature, context)
    found = Heat(amount, basis, "", at, _HEAT_KEYS[key.name], portion)
    if context.reaction is not None:
        _check_basis(found, quantity.basis, context)
    note_assumed(heat, energy, context)
    note_assumed(quantity, charged, context)
    return found


def read_analogue(key: Key, value: Piece, context: Context) -> Heat:
    """The value of ``like``: a heat taken from another row of the sheet, found when all rows are read."""
    match = re.match(r"\[?([^\s\]±]+)\]?\s*", value.text)
    if match is None:
        value.refuse("like which row?", f"write {key.example}")
    label = label_of(match[1], value)
    rest = value.part(match.end())
    if re.match(r"±|\+/-|\+-", rest.text) is None:
        value.refuse("how far may it be off from its analogue?", f"write {key.name} {label} ± 25")
    # what may differ is read as a zero with its uncertainty
    quantity = read_quantity(Piece(f"0 {rest.text}", rest.line, rest.start - 2), context.sheet_k, "A1 ± 25 kJ/mol")
    if quantity.basis is not None or quantity.measured.spread is None or not quantity.measured.spread.half_width:
        rest.refuse("an analogue is off by some kJ per mole of reaction as written", f"write {key.example}")
    if quantity.measured.unit == PERCENT:
        rest.refuse("how far an analogue may be off is typed in kJ/mol", f"write {key.example}")
    if quantity.measured.unit == PURE:
        quantity = replace(quantity, measured=replace(quantity.measured, unit=KJ_PER_MOL))
    measured = require_dimension(quantity, KJ_PER_MOL, f"write {key.example} kJ/mol")
    at = None if quantity.temperature is None else _temperature(quantity.temperature, context)
    note_assumed(quantity, value, context)
    return Heat(measured, None, "", at, "like", None, label)


def _check_basis(heat: Heat, place: Piece, context: Context) -> None:
    assert context.reaction is not None  # the caller has looked
    try:
        heat.factor(context.reaction)
    except ValueError as problem:
        place.refuse(str(problem), f"one of {', '.join(species.text for species in context.reaction.net)}")


def _unknown_heat(value: Piece, context: Context) -> Heat | None:
    """The letter of a heat that is not known; ``None`` when a number is typed."""
    word, _, rest = value.text.partition(" ")
    if not word or not word[0].isalpha():
        return None
    if is_unit_symbol(word.split("/")[0]) and word not in ("g", "h", "t", "s", "d", "m", "L", "K", "W"):
        value.refuse("the number is missing before the unit", "like -145 ± 8 kJ/mol", 0, len(word))
    at = re.match(r"\s*at\s+", rest)
    if _LETTER.fullmatch(word) is None or (rest.strip() and at is None):
        hint = "an unknown heat is one letter, like x or x1; leave dH out where nothing is known"
        value.refuse("a number or one letter is expected here", hint)
    tail = None if at is None else value.part(len(word) + 1 + at.end())
    return Heat(None, None, word, None if tail is None else _temperature(tail, context))


def _temperature(piece: Piece, context: Context) -> Measured:
    quantity = read_quantity(piece, context.sheet_k, "25 degC, or 298.15 K")
    if quantity.basis is not None or quantity.temperature is not None:
        piece.refuse("a temperature is the last thing of a heat", "like kJ/mol of NB at 25 degC")
    measured = require_dimension(quantity, CELSIUS, "like 25 degC, or 298.15 K")
    if measured.to(KELVIN) <= 0:
        piece.refuse(f"{measured.text} is not above absolute zero", "like 25 degC, or 298.15 K")
    return measured


def note_assumed(quantity: Quantity, value: Piece, context: Context) -> None:
    """Remember the first number whose ± took the coverage factor of the sheet."""
    if quantity.assumed_k and context.assumed is None:
        context.assumed = value


def one_of_row(piece: Piece, context: Context) -> Species:
    """The species named, which a name without its state picks from the row."""
    return context.reader.member(piece, () if context.reaction is None else context.reaction.species)


def label_of(typed: str, value: Piece) -> str:
    label = typed.strip("[]")
    if LABEL.fullmatch(label) is None:
        value.refuse(f"{typed[:40]} is no label of a step", "like A1")
    return label

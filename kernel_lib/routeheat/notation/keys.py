"""The one table of keys: what may stand behind an equation or a species, in which unit, and what it feeds."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from routeheat.units import (
    CELSIUS,
    GRAM_PER_MOL,
    HOUR,
    KJ_PER_KG_K,
    KJ_PER_MOL,
    MOL_PER_KG,
    PURE,
    Unit,
)

Where = Literal["species", "known", "step"]
Value = Literal["heat", "measured", "text", "flag", "species", "equivalents", "recycle", "label", "loss"]


@dataclass(frozen=True, slots=True)
class Key:
    """One key of the notation."""

    name: str
    """Canonical spelling."""
    value: Value
    where: frozenset[Where]
    """Kinds of entry it may stand in."""
    feeds: str
    """What uses it; empty while nothing does: it is then kept and shown as not used yet."""
    unit: Unit = PURE
    """For ``measured``: a unit of the right dimension."""
    example: str = ""
    """How it is typed."""
    spellings: tuple[str, ...] = ()


def _key(
    name: str,
    value: Value,
    where: str,
    feeds: str,
    *,
    unit: Unit = PURE,
    example: str = "",
    spellings: tuple[str, ...] = (),
) -> Key:
    places: dict[str, Where] = {"species": "species", "known": "known", "step": "step"}
    return Key(name, value, frozenset(places[word] for word in where.split()), feeds, unit, example or name, spellings)


KEYS: tuple[Key, ...] = (
    _key("name", "text", "species", "labels", example='name "aniline"'),
    _key("cas", "text", "species", "tables", example="cas 62-53-3"),
    _key("M", "measured", "species", "heats per mass of a species without a formula", unit=GRAM_PER_MOL,
         example="M 250 g/mol"),
    _key("dH", "heat", "known step", "every heat", unit=KJ_PER_MOL, example="dH -145 ± 8 kJ/mol",
         spellings=("ΔH", "ΔrH", "DH")),
    _key("source", "text", "known step", "tables and reports", example='source "laboratory notebook 12"'),
    _key("note", "text", "species known step", "tables", example='note "seeded"'),
    _key("yield", "measured", "step", "extents", example="yield 96 ± 2 %"),
    _key("T", "measured", "step", "the temperature of the step's heat", unit=CELSIUS, example="T 50 degC"),
    _key("conc", "measured", "step", "the adiabatic temperature rise", unit=MOL_PER_KG, example="conc 1.6 mol/kg"),
    _key("cp", "measured", "step", "the adiabatic temperature rise", unit=KJ_PER_KG_K, example="cp 1.75 kJ/(kg K)"),
    _key("product", "species", "step", "extents", example="product NB"),
    _key("limiting", "species", "step", "extents", example="limiting NB"),
    _key("equiv", "equivalents", "step", "extents and charges", example="equiv 1.05 of NB"),
    _key("recycle", "recycle", "step", "extents", example="recycle NO(g) from A3 90 %"),
    _key("side", "label", "step", "side rows", example="side of A1"),
    _key("amount", "measured", "step", "side rows", example="amount 0.3 mol/mol"),
    _key("loss", "loss", "step", "heat per mole charged or delivered", example="loss reacted"),
    _key("crystallisation", "flag", "step", "the default of loss", spellings=("crystallization",)),
    _key("dissolution", "flag", "step", "the default of loss"),
    _key("distillation", "flag", "step", "the default of loss"),
    _key("equilibrium", "flag", "step", "the default of loss"),
    _key("batch", "flag", "step", ""),
    _key("feed", "measured", "step", "", unit=HOUR, example="feed 3 h"),
    _key("Xac", "measured", "step", "", example="Xac 0.30"),
    _key("MTT", "measured", "step", "", unit=CELSIUS, example="MTT 130 degC"),
    _key("TD24", "measured", "step", "", unit=CELSIUS, example="TD24 95 degC"),
    _key("groups", "text", "species", "", example="groups azide"),
    _key("includes", "text", "known step", "", example="includes mixing, dilution"),
    _key("shared", "text", "known step", "", example='shared "calorimeter A" 2 %'),
    _key("accept", "text", "known step", "", example='accept "reason"'),
)

_BY_SPELLING = {spelling: key for key in KEYS for spelling in (key.name, *key.spellings)}


def find_key(word: str) -> Key | None:
    """The key with that spelling; capital letters matter only where two keys would be confused."""
    return _BY_SPELLING.get(word) or _BY_SPELLING.get(word.lower())


def spellings(where: Where) -> list[str]:
    """Every spelling that may stand in that kind of entry."""
    return [spelling for spelling, key in _BY_SPELLING.items() if where in key.where]

"""The one table of keys: what may stand behind an equation or a species, in which unit, and what it feeds."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from routeheat.errors import nearest
from routeheat.units import (
    CELSIUS,
    GRAM_PER_MOL,
    HOUR,
    KELVIN,
    KILOGRAM,
    KJ_PER_KG_K,
    KJ_PER_MOL,
    MOL_PER_KG,
    PURE,
    Unit,
    read_unit,
)

Where = Literal["species", "known", "target", "step"]
Value = Literal["heat", "analogue", "measured", "text", "flag", "species", "equivalents", "recycle", "label", "loss"]
Bounds = Literal["", "positive", "share", "yield", "temperature"]
"""``share`` is 0 to 100 %, ``yield`` the same without 0, ``temperature`` lies above absolute zero."""


@dataclass(frozen=True, slots=True)
class Key:
    """One key of the notation."""

    name: str
    """Canonical spelling."""
    value: Value
    where: frozenset[Where]
    """Kinds of entry it may stand in."""
    feeds: str
    """What uses it."""
    unit: Unit = PURE
    """For ``measured``: a unit of the right dimension."""
    example: str = ""
    """How it is typed."""
    spellings: tuple[str, ...] = ()
    """Other spellings that are read."""
    bounds: Bounds = ""
    """For ``measured``: which values make sense."""
    hint: str = ""
    """For ``measured``: what to say when the unit is of another kind; empty for the example."""


def _key(
    name: str,
    value: Value,
    where: str,
    feeds: str,
    *,
    unit: Unit = PURE,
    example: str = "",
    spellings: tuple[str, ...] = (),
    bounds: Bounds = "",
    hint: str = "",
) -> Key:
    places: dict[str, Where] = {"species": "species", "known": "known", "target": "target", "step": "step"}
    places_of = frozenset(places[word] for word in where.split())
    return Key(name, value, places_of, feeds, unit, example or name, spellings, bounds, hint)


KEYS: tuple[Key, ...] = (
    _key("name", "text", "species", "labels", example='name "aniline"'),
    _key("cas", "text", "species", "tables", example="cas 62-53-3"),
    _key(
        "M",
        "measured",
        "species",
        "heats per mass of a species without a formula",
        unit=GRAM_PER_MOL,
        example="M 250 g/mol",
        bounds="positive",
    ),
    _key(
        "dH", "heat", "known step", "every heat", unit=KJ_PER_MOL, example="dH -145 ± 8 kJ/mol", spellings=("ΔH", "ΔrH")
    ),
    _key(
        "dU",
        "heat",
        "known step",
        "every heat, converted to constant pressure",
        unit=KJ_PER_MOL,
        example="dU -3225.63 ± 0.18 kJ/mol",
        spellings=("ΔU", "ΔcU", "ΔrU"),
    ),
    _key(
        "Q",
        "heat",
        "known step",
        "every heat, from a calorimeter run",
        unit=KJ_PER_MOL,
        example="Q -48.8 kJ for 3.12 g of C6H12O6(s)",
    ),
    _key("like", "analogue", "known step", "every heat, as an estimate", unit=KJ_PER_MOL, example="like A1 ± 25"),
    _key("source", "text", "known step", "tables and reports", example='source "laboratory notebook 12"'),
    _key("note", "text", "species known target step", "tables", example='note "seeded"'),
    _key("yield", "measured", "step", "extents", example="yield 96 ± 2 %", bounds="yield"),
    _key(
        "T",
        "measured",
        "step",
        "the temperature of the step's heat",
        unit=CELSIUS,
        example="T 50 degC",
        bounds="temperature",
    ),
    _key(
        "conc",
        "measured",
        "step",
        "the adiabatic temperature rise",
        unit=MOL_PER_KG,
        example="conc 1.6 mol/kg",
        bounds="positive",
        hint="it is mol of limiting reactant per kg of mixture, like conc 1.6 mol/kg",
    ),
    _key(
        "cp",
        "measured",
        "step",
        "the adiabatic temperature rise",
        unit=KJ_PER_KG_K,
        example="cp 1.75 kJ/(kg K)",
        bounds="positive",
    ),
    _key("product", "species", "step", "extents", example="product NB"),
    _key("limiting", "species", "step", "extents", example="limiting NB"),
    _key("equiv", "equivalents", "step", "extents and charges", example="equiv 1.05 of NB"),
    _key("recycle", "recycle", "step", "extents", example="recycle NO(g) from A3 90 %"),
    _key("side", "label", "step", "side rows", example="side of A1"),
    _key("amount", "measured", "step", "side rows", example="amount 0.3 mol/mol", bounds="positive"),
    _key("loss", "loss", "step", "heat per mole charged or delivered", example="loss reacted"),
    _key("crystallisation", "flag", "step", "the default of loss", spellings=("crystallization",)),
    _key("dissolution", "flag", "step", "the default of loss"),
    _key("distillation", "flag", "step", "the default of loss"),
    _key("equilibrium", "flag", "step", "the default of loss"),
    _key("quench", "flag", "step", "the checklist of operations"),
    _key("workup", "flag", "step", "the checklist of operations"),
    _key("neutralisation", "flag", "step", "the checklist of operations", spellings=("neutralization",)),
    _key("scrubber", "flag", "step", "the checklist of operations"),
    _key("nil", "text", "step", "the checklist of operations", example='nil "quench: no excess reagent"'),
    _key("charges", "text", "step", "waste", example="charges toluene 5 L/kg density 0.867 kg/L, water 3 kg"),
    _key("batch", "flag", "step", "accumulation"),
    _key(
        "feed", "measured", "step", "accumulation, feed and cooling", unit=HOUR, example="feed 3 h", bounds="positive"
    ),
    _key("fed", "species", "step", "accumulation", example="fed HNO3(aq)"),
    _key("fedpart", "measured", "step", "accumulation", example="fedpart 20 %", bounds="share"),
    _key("Xac", "measured", "step", "MTSR", example="Xac 0.30", bounds="share"),
    _key(
        "rate1", "measured", "step", "accumulation", unit=read_unit("h^-1"), example="rate1 0.5 h^-1", bounds="positive"
    ),
    _key(
        "rate2",
        "measured",
        "step",
        "accumulation",
        unit=read_unit("kg/(mol h)"),
        example="rate2 20 kg/(mol h)",
        bounds="positive",
    ),
    _key("dTad", "measured", "step", "MTSR", unit=KELVIN, example="dTad 120 ± 6 K", hint="a rise, like dTad 120 K"),
    _key(
        "MTSR",
        "measured",
        "step",
        "the criticality class",
        unit=CELSIUS,
        example="MTSR 60 ± 3 degC",
        bounds="temperature",
    ),
    _key(
        "MTT", "measured", "step", "the criticality class", unit=CELSIUS, example="MTT 130 degC", bounds="temperature"
    ),
    _key(
        "TD24", "measured", "step", "the criticality class", unit=CELSIUS, example="TD24 95 degC", bounds="temperature"
    ),
    _key(
        "ambient",
        "measured",
        "step",
        "the criticality class",
        unit=CELSIUS,
        example="ambient 30 degC",
        bounds="temperature",
    ),
    _key("estimated", "text", "known step", "the words estimated and provisional", example="estimated dH, TD24"),
    _key(
        "onset",
        "measured",
        "species step",
        "TD24, screening",
        unit=CELSIUS,
        example="onset 180 degC",
        bounds="temperature",
    ),
    _key(
        "detection", "measured", "step", "TD24", unit=read_unit("W/kg"), example="detection 10 W/kg", bounds="positive"
    ),
    _key("E", "measured", "step", "TD24", unit=KJ_PER_MOL, example="E 100 kJ/mol", bounds="positive"),
    _key("qref", "measured", "step", "TD24", unit=read_unit("W/kg"), example="qref 10 W/kg", bounds="positive"),
    _key("Tref", "measured", "step", "TD24", unit=CELSIUS, example="Tref 180 degC", bounds="temperature"),
    _key("qref2", "measured", "step", "TD24", unit=read_unit("W/kg"), example="qref2 40 W/kg", bounds="positive"),
    _key("Tref2", "measured", "step", "TD24", unit=CELSIUS, example="Tref2 200 degC", bounds="temperature"),
    _key("autocatalytic", "flag", "step", "TD24"),
    _key("boiling", "measured", "step", "MTT", unit=CELSIUS, example="boiling 40 degC", bounds="temperature"),
    _key("closed", "flag", "step", "MTT"),
    _key("pressure", "measured", "step", "MTT", unit=read_unit("bar"), example="pressure 1 bar", bounds="positive"),
    _key("pmax", "measured", "step", "MTT", unit=read_unit("bar"), example="pmax 6 bar", bounds="positive"),
    _key(
        "latent",
        "measured",
        "step",
        "evaporation",
        unit=read_unit("kJ/kg"),
        example="latent 400 kJ/kg",
        bounds="positive",
    ),
    _key(
        "vapourM", "measured", "step", "evaporation", unit=GRAM_PER_MOL, example="vapourM 85 g/mol", bounds="positive"
    ),
    _key("headspace", "measured", "step", "MTT", unit=read_unit("m3"), example="headspace 1 m3", bounds="positive"),
    _key("gas", "measured", "step", "gas evolved", example="gas 0.02 mol/mol"),
    _key("gasT", "measured", "step", "gas evolved", unit=CELSIUS, example="gasT 20 degC", bounds="temperature"),
    _key("gasp", "measured", "step", "gas evolved", unit=read_unit("bar"), example="gasp 1 bar", bounds="positive"),
    _key(
        "size",
        "measured",
        "step",
        "feed and cooling",
        unit=read_unit("mol"),
        example="size 400 mol",
        bounds="positive",
        hint="mol of limiting reactant in the vessel, like size 400 mol",
    ),
    _key("mass", "measured", "step", "feed and cooling", unit=KILOGRAM, example="mass 250 kg", bounds="positive"),
    _key(
        "density",
        "measured",
        "step",
        "feed and cooling",
        unit=read_unit("kg/m3"),
        example="density 900 kg/m3",
        bounds="positive",
    ),
    _key(
        "U",
        "measured",
        "step",
        "feed and cooling",
        unit=read_unit("W/(m2 K)"),
        example="U 350 W/(m2 K)",
        bounds="positive",
    ),
    _key(
        "area", "measured", "step", "feed and cooling", unit=read_unit("m2"), example="area 1.4 m2", bounds="positive"
    ),
    _key(
        "jacket", "measured", "step", "feed and cooling", unit=CELSIUS, example="jacket -10 degC", bounds="temperature"
    ),
    _key("feedT", "measured", "step", "feed and cooling", unit=CELSIUS, example="feedT 20 degC", bounds="temperature"),
    _key(
        "feedcp",
        "measured",
        "step",
        "feed and cooling",
        unit=KJ_PER_KG_K,
        example="feedcp 2.5 kJ/(kg K)",
        bounds="positive",
    ),
    _key("margin", "measured", "step", "feed and cooling", example="margin 0.8", bounds="share"),
    _key(
        "stirring",
        "measured",
        "step",
        "feed and cooling",
        unit=read_unit("kW"),
        example="stirring 0.5 kW",
        bounds="positive",
    ),
    _key(
        "Qdec",
        "measured",
        "species step",
        "screening",
        unit=read_unit("kJ/kg"),
        example="Qdec 900 J/g",
        bounds="positive",
        hint="heat released on decomposition, like Qdec 900 J/g",
    ),
    _key("groups", "text", "species", "screening", example="groups azide"),
    _key("smiles", "text", "species", "screening, estimates", example='smiles "Nc1ccccc1"'),
    _key("SADT", "measured", "species", "screening", unit=CELSIUS, example="SADT 60 degC", bounds="temperature"),
    _key("purity", "measured", "species", "screening", example="purity 75 %", bounds="share"),
    _key("h2o2", "measured", "species", "screening", example="h2o2 1 %", bounds="share"),
    _key("includes", "text", "known step", "the warning of double counting", example="includes mixing, dilution"),
    _key("shared", "text", "known step", "reconciliation", example='shared "calorimeter A" 2 %'),
    _key("accept", "text", "known step", "reconciliation", example='accept "reason"'),
    _key("exclude", "text", "known", "reconciliation", example='exclude "reason"'),
    _key("widen", "text", "known", "reconciliation", example='widen 2 "reason"'),
)

HEATS: tuple[str, ...] = ("dH", "dU", "Q", "like")
"""Keys that say the heat of a row; a row has one of them at most."""
AS_TYPED: frozenset[str] = frozenset(["shared", "widen"])
"""Keys whose text holds a quotation among other things, and is kept as typed."""

_BY_SPELLING = {spelling: key for key in KEYS for spelling in (key.name, *key.spellings)}
_BY_LETTERS = {spelling.casefold(): key for spelling, key in _BY_SPELLING.items()}
_ORDER = {key.name: place for place, key in enumerate(KEYS)}


def find_key(word: str) -> Key | None:
    """The key with that spelling; capitals do not matter."""
    return _BY_SPELLING.get(word) or _BY_LETTERS.get(word.casefold())


def key_order(name: str) -> int:
    """Place of a key in the table: the order in which keys are kept and written."""
    return _ORDER[name]


def names_in(where: Where) -> list[str]:
    """The keys that may stand in that kind of entry."""
    return [key.name for key in KEYS if where in key.where]


def nearest_key(word: str, where: Where) -> str:
    """The key of that kind of entry that looks most like ``word``; empty when none is close."""
    spellings = {s.casefold(): key.name for s, key in _BY_SPELLING.items() if where in key.where}
    near = nearest(word.casefold(), spellings)
    return spellings.get(near, "")

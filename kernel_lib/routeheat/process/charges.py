"""What is charged to a step, typed as the laboratory does: equivalents, volumes, masses, weight per cent.

``charges toluene 5 L/kg density 0.867 kg/L, H2SO4 0.05 mol/mol, HNO3(aq) 1.1 mol/mol as 65 %, water 3 kg, salt 2 %``

An amount is mol/mol (equivalents), L/kg ("volumes": litres per kilogram of limiting reactant), kg/kg or kg (masses) or
% (of the whole reaction mass). ``as 65 %`` is the strength of a solution, whose rest is charged with it; ``density``
and ``M`` belong to the item before them. ``charges nil`` says that nothing but the reactants of the equation is
charged. A reactant of the equation that is not listed is charged as its equivalents say.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from fractions import Fraction

from routeheat.chem.formula import read_formula
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import FormulaError, RouteError, UnitError
from routeheat.process.links import charge, reactants
from routeheat.process.settings import AMOUNT, Settings
from routeheat.units import GRAM_PER_MOL, KILOGRAM, PERCENT, Unit, read_unit

_MOL_PER_MOL = read_unit("mol/mol")
_LITRE_PER_KG = read_unit("L/kg")
_KG_PER_KG = read_unit("kg/kg")
_KG_PER_LITRE = read_unit("kg/L")
_AMOUNT = re.compile(
    r"(?P<name>(?:[^()]|\([^()]*\))+?)\s+(?P<number>[0-9]{1,12}(?:\.[0-9]{1,12})?)\s*(?P<unit>[^0-9].*)?"
)
_SPOKEN = {
    "eq": "mol/mol",
    "equiv": "mol/mol",
    "vol": "L/kg",
    "volumes": "L/kg",
    "wt %": "%",
    "wt%": "%",
    "w/w": "kg/kg",
}
_HINT = "like toluene 5 L/kg density 0.867 kg/L, or H2SO4 0.05 mol/mol"
_BETWEEN = re.compile(r",\s+(?![^()]*\))")
"""The comma between two charges; one within the state of a species is part of its name."""
_DUST = 1e-6
"""Relative difference that rounding of typed masses may leave."""
_WATER = {"H": Fraction(2), "O": Fraction(1)}


@dataclass(frozen=True, slots=True)
class Charge:
    """One thing that is charged."""

    name: str
    mass: float | None
    """kg per mole of limiting reactant charged; ``None`` when it cannot be worked out."""
    species: Species | None = None
    """The reactant of the equation it is, or ``None`` for a solvent, a catalyst, an auxiliary."""
    water: bool = False
    why: str = ""
    """What is missing when :attr:`mass` is ``None``."""


@dataclass(frozen=True, slots=True)
class Charges:
    """Everything charged to a step per mole of limiting reactant."""

    items: tuple[Charge, ...]
    stated: bool
    """True when the step says what else is charged (``charges …``); False leaves solvents and auxiliaries open."""

    @property
    def missing(self) -> tuple[str, ...]:
        """Items without a mass, with the reason."""
        return tuple(f"{item.name}: {item.why}" for item in self.items if item.mass is None)

    @property
    def total(self) -> float | None:
        """kg per mole of limiting reactant; ``None`` while a mass is missing."""
        return None if self.missing else sum(item.mass or 0.0 for item in self.items)

    @property
    def concentration(self) -> float | None:
        """mol of limiting reactant per kg of everything charged; ``None`` unless all is stated."""
        total = self.total
        return 1 / total if self.stated and total else None


def charges(step: Step, settings: Settings, limiting: Species) -> Charges:
    """Everything charged to ``step``; raises :class:`~routeheat.errors.RouteError` on a text that cannot be read."""
    items = {species: _reactant(step, species, limiting) for species in reactants(step)}
    text = settings.text("charges")
    if not text:
        return Charges(tuple(items.values()), False)
    if text.strip().lower() in ("nil", "none"):
        return Charges(tuple(items.values()), True)
    drafts = [_read(part, step) for part in _BETWEEN.split(text.strip().rstrip(","))]
    size = settings.value("size", AMOUNT)
    scale = next(
        (_moles(draft) for draft in drafts if draft.species == limiting and draft.unit == KILOGRAM),
        None if size is None else Fraction(size.value),
    )
    extras: list[Charge] = []
    percents: list[tuple[Charge, float]] = []
    for draft in drafts:
        if draft.unit == PERCENT:
            part = float(draft.number) / 100
            percents.append((Charge(draft.name, None, draft.species, draft.is_water), part))
            continue
        found = _weigh(draft, limiting, scale)
        if draft.species is not None:
            _enough(step, items[draft.species], found[0])
            items[draft.species] = found[0]
            extras += found[1:]
        else:
            extras += found
    for species in (item.species for item, _ in percents):
        if species is not None:
            items.pop(species, None)
    listed = [*items.values(), *extras]
    return Charges((*listed, *_percents(step, percents, listed)), True)


@dataclass(frozen=True, slots=True)
class _Draft:
    """One item as read."""

    name: str
    number: Fraction
    unit: Unit
    """One of mol/mol, L/kg, kg/kg, kg, %, by canonical unit."""
    species: Species | None
    strength: Fraction | None
    density: Fraction | None
    """kg/L."""
    molar_mass: Fraction | None
    """g/mol."""
    is_water: bool


def _read(part: str, step: Step) -> _Draft:
    pieces = re.split(r"\s+(as|density|M)\s+", part.strip())
    match = _AMOUNT.fullmatch(pieces[0])
    if match is None:
        raise RouteError(f"{step.label}: charges: {part[:60]!r} has no amount", step=step.label, hint=_HINT)
    name = match["name"]
    number, unit = _number(match["number"], match["unit"] or "", step)
    species = next((item for item in reactants(step) if name in (item.name, item.text)), None)
    modifiers: dict[str, Fraction] = {}
    for word, text in zip(pieces[1::2], pieces[2::2], strict=True):
        typed = re.fullmatch(r"([0-9]{1,12}(?:\.[0-9]{1,12})?)\s*(.*)", text.strip())
        if typed is None:
            raise RouteError(f"{step.label}: charges: a number belongs behind {word}", step=step.label, hint=_HINT)
        wanted = {"as": PERCENT, "density": _KG_PER_LITRE, "M": GRAM_PER_MOL}[word]
        try:
            modifiers[word] = read_unit(typed[2]).convert(Fraction(typed[1]), wanted)
        except UnitError as problem:
            raise RouteError(f"{step.label}: charges: {problem}", step=step.label, hint=_HINT) from problem
    strength = modifiers.get("as")
    if strength is not None and not 0 < strength <= 100:
        raise RouteError(f"{step.label}: charges: a strength lies above 0 and up to 100 %", step=step.label)
    mass = modifiers.get("M") or (species.molar_mass if species is not None else _molar_mass(name))
    return _Draft(name, number, unit, species, strength, modifiers.get("density"), mass, _is_water(name, species))


def _number(text: str, unit: str, step: Step) -> tuple[Fraction, Unit]:
    typed = unit.strip()
    try:
        read = read_unit(_SPOKEN.get(typed, typed))
        number = Fraction(text)
        if read.text == "%":
            return number, PERCENT
        if read.dimension == _LITRE_PER_KG.dimension:
            return read.convert(number, _LITRE_PER_KG), _LITRE_PER_KG
        if read.dimension == KILOGRAM.dimension:
            return read.convert(number, KILOGRAM), KILOGRAM
        if read.dimension == _MOL_PER_MOL.dimension and read.text:
            by_mass = "g" in read.text or "t" in read.text
            return read.convert(number, _MOL_PER_MOL), _KG_PER_KG if by_mass else _MOL_PER_MOL
    except UnitError as problem:
        raise RouteError(f"{step.label}: charges: {problem}", step=step.label, hint=_HINT) from problem
    raise RouteError(
        f"{step.label}: charges: {text} {typed} is no amount", step=step.label, hint="mol/mol, L/kg, kg/kg, kg or %"
    )


def _molar_mass(name: str) -> Fraction | None:
    try:
        return read_formula(name).molar_mass
    except FormulaError:
        return Fraction("18.015") if name.lower() == "water" else None


def _is_water(name: str, species: Species | None) -> bool:
    if species is not None:
        return species.formula is not None and species.formula.composition == _WATER
    return name.lower() == "water" or name.split("(")[0] == "H2O"


def _moles(draft: _Draft) -> Fraction | None:
    """mol of the limiting reactant when it is given as a mass."""
    if draft.molar_mass is None:
        return None
    return draft.number * (draft.strength or 100) / 100 * 1000 / draft.molar_mass


def _reactant(step: Step, species: Species, limiting: Species) -> Charge:
    per_mol = charge(step, species) / charge(step, limiting)
    mass = None if species.molar_mass is None else float(per_mol * species.molar_mass / 1000)
    return Charge(species.text, mass, species, _is_water(species.name, species), "" if mass else "molar mass not known")


def _weigh(draft: _Draft, limiting: Species, scale: Fraction | None) -> list[Charge]:
    """The item, and the rest of its solution where it has a strength below 100 %."""
    charged = Charge(draft.name, None, draft.species, draft.is_water)
    limiting_mass = limiting.molar_mass
    pure: float | None = None
    why = ""
    if draft.unit == _MOL_PER_MOL:
        why = "molar mass not known (M …)"
        if draft.molar_mass is not None:
            pure = float(draft.number * draft.molar_mass / 1000)
    elif draft.unit == KILOGRAM:
        why = "a mass needs the mass of the limiting reactant or a size"
        if scale:
            pure = float(draft.number / scale * (draft.strength or 100) / 100)
    else:
        why = "molar mass of the limiting reactant not known"
        if limiting_mass is not None and draft.unit == _KG_PER_KG:
            pure = float(draft.number * limiting_mass / 1000 * (draft.strength or 100) / 100)
        elif limiting_mass is not None and draft.density is None:
            why = "volumes need a density (density …)"
        elif limiting_mass is not None and draft.density is not None:
            pure = float(draft.number * limiting_mass / 1000 * draft.density * (draft.strength or 100) / 100)
    if pure is None:
        return [replace(charged, why=why)]
    found = [replace(charged, mass=pure)]
    if draft.strength is not None and draft.strength < 100:
        rest = pure * float((100 - draft.strength) / draft.strength)
        aqueous = (draft.species is not None and draft.species.phase == "aq") or "(aq" in draft.name
        found.append(Charge(f"rest of {draft.name}", rest, None, aqueous))
    return found


def _enough(step: Step, needed: Charge, found: Charge) -> None:
    stoichiometric = (
        None
        if needed.species is None or needed.mass is None
        else needed.mass / float(dict(step.equivalents).get(needed.species, Fraction(1)))
    )
    if found.mass is not None and stoichiometric is not None and found.mass < stoichiometric * (1 - _DUST):
        raise RouteError(
            f"{step.label}: charges: less {found.name} than the reaction needs",
            step=step.label,
            hint="type the reactant in deficit as limiting",
        )


def _percents(step: Step, percents: list[tuple[Charge, float]], others: list[Charge]) -> list[Charge]:
    total = sum(part for _, part in percents)
    if total >= 1:
        raise RouteError(f"{step.label}: charges: the weight per cents leave nothing for the rest", step=step.label)
    if any(item.mass is None for item in others):
        return [replace(item, why="the other masses are not all known") for item, _ in percents]
    whole = sum(item.mass or 0.0 for item in others) / (1 - total)
    return [replace(item, mass=whole * part) for item, part in percents]

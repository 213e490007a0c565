"""The energetic screening of one species: every check with its finding and what it is not proof of."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from routeheat.chem.formula import Formula
from routeheat.chem.route import Declaration
from routeheat.chem.species import Species
from routeheat.present.numbers import number
from routeheat.present.show import Shown
from routeheat.present.table import Column, Table
from routeheat.process import energetic
from routeheat.process.cautions import FROM_MEMORY, SCREENING
from routeheat.process.groups import Group, groups_of_structure, read_groups
from routeheat.process.settings import Settings
from routeheat.units import PERCENT, read_unit

_J_PER_G = read_unit("J/g")
NOT_DECLARED = "energetic groups not declared"
TEST = "test before any handling as a solid"


@dataclass(frozen=True, slots=True)
class Check:
    """One check of a screening."""

    name: str
    value: str
    """The figure with its unit, or why there is none."""
    finding: str
    """What it says; never more than the data entered."""
    not_proof: str
    """What it is not proof of, or what it leaves out."""


@dataclass(frozen=True, slots=True)
class Screening(Shown):
    """What composition, groups and typed measurements say of a species; no verdict over all checks."""

    species: Species
    groups: Mapping[Group, int] | None
    """Energetic groups with their number; ``None`` when they are not declared, which is not "none"."""
    origin: str
    """``declared``, ``from the structure`` or ``not declared``."""
    checks: tuple[Check, ...]

    def __getitem__(self, name: str) -> Check:
        """The check with that name; raises ``KeyError``."""
        for check in self.checks:
            if check.name == name:
                return check
        raise KeyError(name)

    @property
    def group_words(self) -> str:
        """Groups in words."""
        if self.groups is None:
            return NOT_DECLARED
        listed = [f"{count} {group.name}" if count > 1 else group.name for group, count in self.groups.items()]
        return f"{', '.join(listed) or 'none'} ({self.origin})"

    def table(self) -> Table:
        """Every check with its figure, its finding and what it is not proof of."""
        columns = (
            Column("check", "Check"),
            Column("value", "Value"),
            Column("finding", "Finding"),
            Column("not_proof", "Not proof of"),
        )
        rows = tuple((c.name, c.value, c.finding, c.not_proof) for c in self.checks)
        sources = tuple(dict.fromkeys(f"{g.name}: {g.source}" for g in self.groups or ()))
        return Table(
            f"Energetic screening of {self.species}",
            columns,
            rows,
            (f"groups: {self.group_words}", *sources, f"bands, limits and coefficients: {FROM_MEMORY}", SCREENING),
        )

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "species": self.species.text,
            "groups": None if self.groups is None else {group.name: count for group, count in self.groups.items()},
            "origin": self.origin,
            "checks": [
                {"name": c.name, "value": c.value, "finding": c.finding, "not_proof": c.not_proof} for c in self.checks
            ],
        }


def energetic_screen(species: Species | Declaration, *, groups: str = "", structure: str = "") -> Screening:
    """Screen one species from its formula and its groups.

    A declaration brings what is typed behind it: ``groups``, ``smiles``, ``Qdec``, ``onset``, ``SADT``, ``purity``,
    ``h2o2``. Groups typed win over a structure. Raises :class:`~routeheat.errors.UnknownName` on an unknown group and
    what :func:`routeheat.process.groups.groups_of_structure` raises.
    """
    declared = species if isinstance(species, Declaration) else None
    chosen = species.species if isinstance(species, Declaration) else species
    settings = Settings(declared.settings if declared is not None else ())
    found, origin = read_groups(groups or settings.text("groups")), "declared"
    smiles = structure or settings.text("smiles")
    if found is None and smiles:
        found, origin = groups_of_structure(smiles), "from the structure"
    if found is None:
        origin = "not declared"
    if chosen.formula is None:
        unknown = Check("composition", "formula not known", "nothing can be screened", "anything")
        return Screening(chosen, found, origin, (unknown,))
    formula = chosen.formula
    return Screening(
        chosen,
        found,
        origin,
        (
            *_balance(formula, found),
            *_azide(formula, found),
            *_dilution(formula, found),
            *_peroxide(formula, found, settings),
            *_energy(formula, found, settings),
            *_waivers(formula, found, settings),
            *_yoshida(settings),
        ),
    )


def _balance(formula: Formula, found: Mapping[Group, int] | None) -> list[Check]:
    balance = energetic.oxygen_balance(formula)
    loose = "stability; without an energetic group it says nothing"
    if isinstance(balance, str):
        return [Check("oxygen balance", "none", balance, loose)]
    words = f"{energetic.band(balance.per_cent)} band"
    if found is None:
        words += f"; {NOT_DECLARED}"
    elif not found:
        words += "; no energetic group declared: meaningless alone"
    return [Check("oxygen balance", f"{number(balance.per_cent, 1)} % ({balance.products})", words, loose)]


def _has(found: Mapping[Group, int] | None, *names: str) -> int:
    return sum(count for group, count in (found or {}).items() if group.name in names)


def _azide(formula: Formula, found: Mapping[Group, int] | None) -> list[Check]:
    ratios = energetic.azide_ratios(formula)
    if not _has(found, "azide", "sulfonyl azide") or ratios is None:
        return []
    total, carbon = ratios
    words = "below 3: do not isolate" if total < 3 else "3 or more: with due care"
    if carbon < 1:
        words += "; more nitrogen than carbon"
    return [
        Check("(C + O)/N of an azide", number(total, 2), words, "thermal stability: measure it"),
        Check(
            "C/N of an azide",
            number(carbon, 2),
            energetic.azide_limit(carbon),
            "stability at that scale; the tiers are one fact sheet's",
        ),
    ]


def _dilution(formula: Formula, found: Mapping[Group, int] | None) -> list[Check]:
    energetic_groups = sum((found or {}).values())
    if not energetic_groups:
        return []
    ratio = energetic.six_per_group(formula, energetic_groups)
    words = "fewer than six: little dilution" if ratio < 6 else "six or more"
    return [Check("carbon atoms per energetic group", number(ratio, 1), words, "stability: a rule of thumb")]


def _peroxide(formula: Formula, found: Mapping[Group, int] | None, settings: Settings) -> list[Check]:
    peroxy = _has(found, "peroxide")
    if not peroxy:
        return []
    purity = settings.number("purity", PERCENT, 100.0)
    oxygen = energetic.available_oxygen(((peroxy, purity, float(formula.molar_mass)),))
    hydrogen_peroxide = settings.value("h2o2", PERCENT)
    if hydrogen_peroxide is None:
        words = "hydrogen peroxide content (h2o2) not stated: no waiver"
    elif energetic.peroxide_waiver(oxygen, hydrogen_peroxide.value):
        words = "below the limits of the organic peroxide class"
    else:
        words = "not below the limits of the organic peroxide class"
    assay = f"at {number(purity, 0)} %"
    return [Check("available oxygen", f"{number(oxygen, 2)} % {assay}", words, "thermal stability")]


def _energy(formula: Formula, found: Mapping[Group, int] | None, settings: Settings) -> list[Check]:
    checks = []
    measured = settings.value("Qdec", _J_PER_G)
    if measured is not None:
        size = abs(measured.value)
        words = (
            f"above {energetic.WAIVER_ENERGY:.0f} J/g: {TEST}"
            if size >= energetic.WAIVER_ENERGY
            else f"below {energetic.WAIVER_ENERGY:.0f} J/g"
        )
        checks.append(
            Check(
                "decomposition energy, measured",
                f"{number(size, 0)} J/g released",
                words,
                "another cell, heating rate or purity",
            )
        )
    if found:
        low, high = (
            energetic.specific_energy(sum(value(g) * n for g, n in found.items()), float(formula.molar_mass))
            for value in (_low, _high)
        )
        words = (
            f"up to more than {energetic.WAIVER_ENERGY:.0f} J/g: {TEST}"
            if high >= energetic.WAIVER_ENERGY
            else f"below {energetic.WAIVER_ENERGY:.0f} J/g"
        )
        checks.append(
            Check(
                "decomposition energy by groups",
                f"{number(low, 0)} to {number(high, 0)} J/g released",
                f"provisional: {words}",
                "the energy of this substance: measure it",
            )
        )
    elif found is None:
        checks.append(Check("decomposition energy by groups", "none", NOT_DECLARED, "stability"))
    return checks


def _low(group: Group) -> float:
    return group.released_low


def _high(group: Group) -> float:
    return group.released_high


def _waivers(formula: Formula, found: Mapping[Group, int] | None, settings: Settings) -> list[Check]:
    measured, onset = settings.value("Qdec", _J_PER_G), settings.celsius("onset")
    sadt = settings.celsius("SADT")
    energy = None if measured is None else abs(measured.value)
    balance = energetic.un_oxygen_balance(formula)
    small = (
        energy is not None
        and energy < energetic.WAIVER_ENERGY
        and onset is not None
        and onset.value < energetic.WAIVER_ONSET
    )
    met = []
    if found is not None and not any(group.listed == "explosive" for group in found):
        met.append("no listed group declared")
    if found is not None and "O" in energetic.atoms(formula) and balance < energetic.WAIVER_BALANCE:
        met.append(f"oxygen balance (C, H, O) {number(balance, 0)} below {energetic.WAIVER_BALANCE:.0f}")
    if small:
        met.append("measured energy below 500 J/g with an onset below 500 °C")
    words = "; ".join(met) or "no waiver on the data entered"
    if met:
        words = f"acceptance procedure need not apply: {words}"
    elif found is None:
        words += f" ({NOT_DECLARED})"
    checks = [
        Check(
            "waiver, explosives class",
            f"{number(balance, 0)} % (C, H, O)",
            words,
            "stability; only that a test series need not be run",
        )
    ]
    reasons = []
    if energy is not None and energy < energetic.SELF_REACTIVE_ENERGY:
        reasons.append(f"measured energy below {energetic.SELF_REACTIVE_ENERGY:.0f} J/g")
    if sadt is not None and sadt.value > energetic.SELF_REACTIVE_SADT:
        reasons.append(f"SADT above {energetic.SELF_REACTIVE_SADT:.0f} °C for a 50 kg package")
    given = [
        text
        for text in (
            None if energy is None else f"{number(energy, 0)} J/g",
            None if sadt is None else f"SADT {number(sadt.value, 0)} °C",
        )
        if text
    ]
    checks.append(
        Check(
            "waiver, self-reactive class",
            ", ".join(given) or "not measured",
            "; ".join(reasons) or "no waiver on the data entered",
            "stability in a larger package",
        )
    )
    return checks


def _yoshida(settings: Settings) -> list[Check]:
    measured, onset = settings.value("Qdec", _J_PER_G), settings.celsius("onset")
    if measured is None or onset is None or not measured.value or onset.value <= 25:
        return []
    size = abs(measured.value)
    checks = []
    for cautious, word in ((False, "Yoshida"), (True, "Yoshida, cautious slopes")):
        propagation, shock = energetic.yoshida(size, onset.value, cautious=cautious)
        signs = [name for name, figure in (("propagates", propagation), ("shock sensitive", shock)) if figure >= 0]
        checks.append(
            Check(
                word,
                f"EP {number(propagation, 3)}, SS {number(shock, 3)} from "
                f"{number(energetic.joule_to_calorie(size), 0)} cal/g",
                f"positive: {', '.join(signs)}; test" if signs else "negative, which proves nothing",
                "absence of explosive properties",
            )
        )
    return checks

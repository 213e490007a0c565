"""The table that ships with the package: formation enthalpies, heat capacities and transitions of known species.

Three files, one thing a line, each line with its source and year:

``species.csv``      ΔfH°(298.15 K) of a species in one phase and form; aqueous ions on the scale H^+(aq) = 0
``transitions.csv``  enthalpy of a fusion, vaporisation, sublimation or solid-solid transition at one temperature
``nasa9.csv``        coefficients of Cp(T), read from the NASA Glenn file, one temperature interval a line

Where the numbers come from. NASA Glenn and ATcT values were read from machine-readable files. CODATA, NBS and organic
values, transitions, and the source each is attributed to were typed from memory, not from the page; the numbers were
then compared with independent data sets. ``checked`` names those that agree (0.5 kJ/mol for inorganic, 1.2 kJ/mol for
organic species, or the stated uncertainty), or how they differ; a value that could not be compared carries "from
memory, unverified" in its source. Uncertainties could not be compared. Sources are not re-adjusted to one another: a
cycle over CODATA ions and NBS crystals closes to about 2 kJ/mol.
"""

from __future__ import annotations

import csv
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from importlib.resources import files

from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.species import Species
from routeheat.known.heat_capacity import ConstantCp, HeatCapacity, Nasa9, Nasa9Interval
from routeheat.units import KJ_PER_MOL

NINETY_FIVE = Fraction(49, 25)
"""Coverage factor of a 95 % interval (JCGM 100:2008, table G.1)."""
CONSTANT_LOW = 273.15
CONSTANT_HIGH = 373.15
"""K: where a heat capacity known only at 298.15 K is taken as constant, unless a transition comes first."""


@dataclass(frozen=True, slots=True)
class KnownSpecies:
    """One line of the species table: a substance in one phase and form."""

    name: str
    """Trade or IUPAC name."""
    other_names: tuple[str, ...]
    """Further names and structural formulas."""
    formula: Formula
    phase: str
    """State symbol without brackets."""
    form: str
    """Form within the phase; empty for none."""
    cas: str
    """CAS Registry Number; empty when none is known here."""
    value: Fraction
    """ΔfH°(298.15 K) in kJ/mol, the decimal as printed."""
    decimals: int
    """Decimals of that number."""
    half_width: Fraction | None
    """Half of the 95 % interval in kJ/mol; ``None`` when the source states none."""
    u_kind: str
    """How :attr:`half_width` is meant: printed as 95 %, taken as 95 %, exact, not stated."""
    cp: float | None
    """Cp at 298.15 K in J/(mol K)."""
    cp_source: str
    source: str
    """Where :attr:`value` comes from."""
    year: int
    """Year of the source."""
    checked: str
    """Independent data sets that agree, or how they differ."""

    @property
    def u(self) -> Fraction | None:
        """Standard uncertainty in kJ/mol; ``None`` when not stated."""
        return None if self.half_width is None else self.half_width / NINETY_FIVE

    @property
    def is_reference(self) -> bool:
        """True for the reference state of an element and for H^+(aq): zero by definition."""
        return self.u_kind.startswith("exact")

    @property
    def verified(self) -> bool:
        """False when the value is from memory and could not be compared with another data set."""
        return "unverified" not in self.source

    @property
    def measured(self) -> Measured:
        """The value with its uncertainty as it is typed in a sheet."""
        stated = None if not self.half_width else Spread(self.half_width, NINETY_FIVE, "95 %")
        return Measured(self.value, KJ_PER_MOL, stated, self.decimals)

    @property
    def composition(self) -> tuple[dict[str, Fraction], int]:
        """Atoms of each element, and the charge."""
        return self.formula.composition, self.formula.charge

    @property
    def state(self) -> str:
        """Phase and form in brackets, as typed behind a name."""
        return f"({self.phase}, {self.form})" if self.form else f"({self.phase})"


@dataclass(frozen=True, slots=True)
class Transition:
    """One line of the table of transitions."""

    name: str
    """Name of the substance as in the species table."""
    formula: str
    kind: str
    """``fusion``, ``vaporisation``, ``sublimation`` or ``solid-solid``."""
    before: str
    """Phase it starts from."""
    form: str
    """Form it starts from; empty for none."""
    after: str
    """Phase it leads to."""
    temperature: float
    """K."""
    enthalpy: Fraction
    """kJ/mol at that temperature; positive."""
    source: str
    year: int
    checked: str
    """Independent data sets that agree."""


def _lines(name: str) -> Iterator[dict[str, str]]:
    text = (files("routeheat.known") / name).read_text(encoding="utf-8")
    return iter(csv.DictReader(text.splitlines()))


@cache
def species_table() -> tuple[KnownSpecies, ...]:
    """Every line of the species table, in its order."""
    return tuple(
        KnownSpecies(
            name=line["name"],
            other_names=tuple(name for name in line["other_names"].split(";") if name),
            formula=read_formula(line["formula"]),
            phase=line["phase"],
            form=line["form"],
            cas=line["cas"],
            value=Fraction(line["dfH"]),
            decimals=len(line["dfH"].partition(".")[2]),
            half_width=Fraction(line["half_width"]) if line["half_width"] else None,
            u_kind=line["u_kind"],
            cp=float(line["cp"]) if line["cp"] else None,
            cp_source=line["cp_source"],
            source=line["source"],
            year=int(line["year"]),
            checked=line["checked"],
        )
        for line in _lines("species.csv")
    )


@cache
def transitions() -> tuple[Transition, ...]:
    """Every line of the table of transitions, in its order."""
    return tuple(
        Transition(
            name=line["name"],
            formula=line["formula"],
            kind=line["kind"],
            before=line["before"],
            form=line["form"],
            after=line["after"],
            temperature=float(line["T"]),
            enthalpy=Fraction(line["dH"]),
            source=line["source"],
            year=int(line["year"]),
            checked=line["checked"],
        )
        for line in _lines("transitions.csv")
    )


@cache
def _fits() -> dict[tuple[str, str], Nasa9]:
    found: dict[tuple[str, str], list[dict[str, str]]] = {}
    for line in _lines("nasa9.csv"):
        found.setdefault((line["cas"], line["state"]), []).append(line)
    return {
        key: Nasa9(
            tuple(
                Nasa9Interval(
                    float(line["low"]),
                    float(line["high"]),
                    tuple(float(line[f"a{index}"]) for index in range(1, 8)),
                    float(line["b1"]),
                )
                for line in lines
            ),
            formation_enthalpy=float(lines[0]["dfH"]),
            source=lines[0]["source"],
        )
        for key, lines in found.items()
    }


def known_in(species: Species) -> tuple[KnownSpecies, ...]:
    """Lines of the table with the composition, phase and form of a species.

    Several lines are isomers: the caller must say which one is meant, by name or CAS Registry Number.
    """
    if species.formula is None:
        return ()
    wanted = (species.formula.composition, species.formula.charge)
    return tuple(
        line
        for line in species_table()
        if line.phase == species.phase and line.form == species.form and line.composition == wanted
    )


def heat_capacity(known: KnownSpecies) -> HeatCapacity | None:
    """Cp(T) of a line of the table, with the range it holds in; ``None`` when the table has none.

    A NASA-9 fit where there is one. Else the single value at 298.15 K, taken as constant from 273.15 to 373.15 K or to
    the nearest transition of that phase.
    """
    fit = _fits().get((known.cas, known.state))
    if fit is not None:
        return fit
    if known.cp is None:
        return None
    low, high = CONSTANT_LOW, CONSTANT_HIGH
    for change in transitions():
        if change.name != known.name:
            continue
        if change.before == known.phase and change.form in ("", known.form) and change.temperature > 298.15:
            high = min(high, change.temperature)
        if change.after == known.phase and change.kind == "fusion" and change.temperature < 298.15:
            low = max(low, change.temperature)
    return ConstantCp(known.cp, low, high, f"{known.cp_source}; at 298.15 K, taken as constant")

"""A row: a reaction with the heat that is known of it. Every known heat is a row, and so is every step and target."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.units import KELVIN, KJ, KJ_PER_KG, KJ_PER_MOL, ZERO_CELSIUS

REFERENCE_TEMPERATURE = Fraction(25) + ZERO_CELSIUS
"""25 °C in kelvin: the temperature of a known row's heat that does not say its own."""


@dataclass(frozen=True, slots=True)
class Heat:
    """A heat as typed behind ``dH``: a number per something, or a letter for an unknown."""

    amount: Measured | None
    """The number with its unit (kJ/mol, kJ/kg, kJ …); ``None`` for a symbolic unknown. Exothermic is negative."""
    basis: Species | None = None
    """The species it is stated per (``kJ/kg of NB``); ``None`` when it is per mole of reaction as written."""
    symbol: str = ""
    """Letter of an unknown heat, in kJ/mol of reaction as written."""
    temperature: Measured | None = None
    """The heat's own temperature (``at 25 degC``); ``None`` when not typed."""

    def factor(self, reaction: Reaction) -> Fraction:
        """kJ/mol of reaction as written, per unit of :attr:`amount`; exact.

        Raises ``ValueError`` when the basis does not take part or has no molar mass.
        """
        assert self.amount is not None
        unit = self.amount.unit
        if unit.dimension == KJ.dimension:
            return unit.factor / KJ.factor
        number = Fraction(1)
        if self.basis is not None:
            number = abs(reaction.net.get(self.basis, Fraction(0)))
            if not number:
                both = self.basis in reaction.species
                why = "stands on both sides and cancels" if both else "does not take part in the reaction"
                raise ValueError(f"{self.basis} {why}: no heat can be stated per amount of it")
        if unit.dimension == KJ_PER_KG.dimension:
            mass = self.basis.molar_mass if self.basis is not None else None
            if mass is None:
                raise ValueError(f"a heat per mass needs a molar mass, and {self.basis or 'the species'} has none")
            return unit.factor / KJ_PER_KG.factor * mass / 1000 * number
        return unit.convert(Fraction(1), KJ_PER_MOL) * number

    @property
    def text(self) -> str:
        """As written in a sheet behind ``dH``."""
        if self.amount is None:
            body = self.symbol
        else:
            number = self.amount.text
            qualifier = ""
            if number.endswith(")") and self.amount.spread is not None and self.amount.spread.stated:
                qualifier = f" ({self.amount.spread.stated})"
                number = number[: -len(qualifier)]
            body = number + (f" of {self.basis}" if self.basis is not None else "") + qualifier
        return body + (f" at {self.temperature.text}" if self.temperature is not None else "")


@dataclass(frozen=True, slots=True)
class Row:
    """A reaction with a label and, where known, a heat."""

    label: str
    """Unique in a sheet: ``K1``."""
    reaction: Reaction
    heat: Heat | None = None
    """``None`` when no heat is typed."""
    kind: str = "reaction"
    """``reaction``, ``formation``, ``combustion``, ``fusion``, ``vaporisation``, ``sublimation``, ``target``."""
    subject: Species | None = None
    """The species of a formation, combustion or phase-change row."""
    source: str = ""
    """Where the heat comes from, as typed."""
    settings: tuple[tuple[str, object], ...] = ()
    """Every other key with its value as typed; keys that nothing uses yet are kept here."""
    line: int = field(default=0, compare=False)
    """Line of the sheet, counted from 1; 0 when it was made in code."""

    @property
    def datum(self) -> Datum | None:
        """The heat as a datum in kJ per mole of reaction as written; ``None`` when none is typed."""
        if self.heat is None:
            return None
        if self.heat.amount is None:
            return Datum(self.label, symbol=self.heat.symbol, source=self.source, of=self.reaction.text)
        factor = self.heat.factor(self.reaction)
        u = self.heat.amount.u
        return Datum(
            self.label,
            value=self.heat.amount.value * factor,
            u=None if u is None else u * factor,
            source=self.source,
            of=self.reaction.text,
        )

    def heat_sum(self, k: float = 2.0) -> HeatSum | None:
        """The typed heat as a sum of one datum; ``None`` when none is typed."""
        datum = self.datum
        return None if datum is None else HeatSum.of(datum, k=k)

    @property
    def temperature(self) -> Fraction:
        """Temperature of the typed heat in kelvin; 25 °C when the row does not say."""
        if self.heat is not None and self.heat.temperature is not None:
            return self.heat.temperature.to(KELVIN)
        return REFERENCE_TEMPERATURE

    def setting(self, key: str) -> object | None:
        """Value of a kept key, or ``None``."""
        return dict(self.settings).get(key)


class Rows(Mapping[str, Row]):
    """Rows by label, in typed order. Immutable; equal when the rows are equal in order."""

    __slots__ = ("_by_label", "k")

    def __init__(self, rows: Iterable[Row] = (), k: float = 2.0) -> None:
        self._by_label = {row.label: row for row in rows}
        self.k = k
        """Coverage factor with which results over these rows are printed."""

    def __getitem__(self, label: str) -> Row:
        return self._by_label[label]

    def __iter__(self) -> Iterator[str]:
        return iter(self._by_label)

    def __len__(self) -> int:
        return len(self._by_label)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Rows) and list(self.values()) == list(other.values())

    def __hash__(self) -> int:
        return hash(tuple(self.values()))

    def __repr__(self) -> str:
        return f"Rows({', '.join(self._by_label)})"

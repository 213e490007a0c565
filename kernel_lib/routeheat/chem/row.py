"""A row: a reaction with the heat that is known of it. Every known heat is a row, and so is every step and target."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.chem.typed_heat import REFERENCE_TEMPERATURE, Heat
from routeheat.present.numbers import number
from routeheat.units import KELVIN, KJ_PER_MOL

__all__ = ["REFERENCE_TEMPERATURE", "Heat", "Row", "Rows", "Unstated"]


@dataclass(frozen=True, slots=True)
class Unstated:
    """What the user decided about rows that state no uncertainty, as a class."""

    u: Measured
    """Their standard uncertainty, an energy per amount."""
    reason: str
    """Why that is right."""

    @property
    def kj_per_mol(self) -> Fraction:
        """The standard uncertainty in kJ/mol."""
        return self.u.to(KJ_PER_MOL)


@dataclass(frozen=True, slots=True)
class Row:
    """A reaction with a label and, where known, a heat."""

    label: str
    """Unique in a sheet: ``K1``."""
    reaction: Reaction
    heat: Heat | None = None
    """``None`` when no heat is typed."""
    kind: str = "reaction"
    """``reaction``, ``formation``, ``combustion``, ``fusion``, ``vaporisation``, ``sublimation``, ``solution``,
    ``dilution``, ``neutralisation``, ``target``."""
    subject: Species | None = None
    """The species that a row is named after (``formation of …``); ``None`` for an equation."""
    source: str = ""
    """Where the heat comes from, as typed."""
    settings: tuple[tuple[str, object], ...] = ()
    """Every other key with its value as typed."""
    line: int = field(default=0, compare=False)
    """Line of the sheet, counted from 1; 0 when it was made in code."""

    @property
    def datum(self) -> Datum | None:
        """The row's own datum in kJ per mole of reaction as written; ``None`` when no heat is typed.

        For a heat taken from an analogue it is the difference from it, which is zero with a wide uncertainty.
        """
        if self.heat is None or (self.heat.analogue and self.heat.taken is None):
            return None
        if self.heat.amount is None:
            return Datum(self.label, symbol=self.heat.symbol, source=self.source, of=self.reaction.text)
        return Datum(
            self.label,
            value=self.heat.value(self.reaction),
            u=self.heat.u(self.reaction),
            source=self.source or (f"like {self.heat.analogue}" if self.heat.analogue else ""),
            of=self.reaction.text,
            estimated=self.estimated,
        )

    def heat_sum(self, k: float = 2.0) -> HeatSum | None:
        """The typed heat as a sum of its data; ``None`` when none is typed."""
        datum = self.datum
        if datum is None:
            return None
        own = HeatSum.of(datum, k=k)
        taken = None if self.heat is None else self.heat.taken
        return own if taken is None else HeatSum.of(taken, k=k) + own

    @property
    def estimated(self) -> bool:
        """True when the heat is no measurement: taken from an analogue, or marked ``estimated dH``."""
        if self.heat is not None and self.heat.key == "like":
            return True
        marked = {part.strip() for part in str(self.setting("estimated") or "").split(",")}
        return self.heat is not None and bool(marked & {"dH", self.heat.key})

    @property
    def remarks(self) -> tuple[str, ...]:
        """How the typed heat is to be understood, where it is no measured ΔrH."""
        heat = self.heat
        if heat is None:
            return ()
        found = []
        if heat.key == "dU":
            work = number(float(heat.volume_work(self.reaction)), 3)
            found.append(f"{self.label}: ΔU is typed, ΔH = ΔU + Δn(gas) R T adds {work} kJ/mol; corrections of a bomb "
                         "to standard states (Washburn) are not included")  # fmt: skip
        if self.estimated:
            like = f", like {heat.analogue}" if heat.analogue else ""
            found.append(f"{self.label} is estimated{like}")
        return tuple(found)

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

    __slots__ = ("_by_label", "k", "unstated")

    def __init__(self, rows: Iterable[Row] = (), k: float = 2.0, unstated: Unstated | None = None) -> None:
        self._by_label = {row.label: row for row in rows}
        self.k = k
        """Coverage factor with which results over these rows are printed."""
        self.unstated = unstated
        """The sheet's line for rows that state no uncertainty; used by reconciliation."""

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

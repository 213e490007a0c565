"""The keys of a step or a declared species that the vessel, screening and waste calculations read, by name."""

from __future__ import annotations

from collections.abc import Iterable

from routeheat.chem.measured import Measured
from routeheat.chem.species import Species
from routeheat.process.assessed import Value, from_measured
from routeheat.units import CELSIUS, PURE, Unit, read_unit

HOURS = read_unit("h")
PER_HOUR = read_unit("h^-1")
SECOND_ORDER = read_unit("kg/(mol h)")
HEAT_RATE = read_unit("W/kg")
HEAT_TRANSFER = read_unit("W/(m2 K)")
AREA = read_unit("m2")
VOLUME = read_unit("m3")
DENSITY = read_unit("kg/m3")
KILOWATT = read_unit("kW")
AMOUNT = read_unit("mol")
PASCAL = read_unit("Pa")


class Settings:
    """Typed keys with their values; a key that is not typed is ``None``, empty or False."""

    __slots__ = ("_values",)

    def __init__(self, settings: Iterable[tuple[str, object]]) -> None:
        self._values = dict(settings)

    def __contains__(self, key: str) -> bool:
        return key in self._values

    def value(self, key: str, unit: Unit = PURE) -> Value | None:
        """A measured key in ``unit``; raises :class:`~routeheat.errors.UnitError` on another dimension."""
        found = self._values.get(key)
        return from_measured(found, unit) if isinstance(found, Measured) else None

    def number(self, key: str, unit: Unit, default: float) -> float:
        """The number of a measured key in ``unit``, or the default where it is not typed."""
        found = self.value(key, unit)
        return default if found is None else found.value

    def celsius(self, key: str) -> Value | None:
        """A temperature in °C."""
        return self.value(key, CELSIUS)

    def text(self, key: str) -> str:
        """A text key; empty when it is not typed."""
        found = self._values.get(key)
        return found if isinstance(found, str) else ""

    def flag(self, key: str) -> bool:
        """True when the flag is typed."""
        return self._values.get(key) is True

    def species(self, key: str) -> Species | None:
        """A species key."""
        found = self._values.get(key)
        return found if isinstance(found, Species) else None

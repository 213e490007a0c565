"""TD24 and MTT of a step: typed, or worked out from what is typed, or refused."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from routeheat.process import runaway
from routeheat.process.assessed import NotAssessed, Value, propagate
from routeheat.process.cautions import FROM_MEMORY
from routeheat.process.settings import AMOUNT, HEAT_RATE, PASCAL, VOLUME, Settings
from routeheat.units import KILOGRAM, KJ_PER_KG, KJ_PER_MOL, PURE, ZERO_CELSIUS, read_unit

ZERO_C = float(ZERO_CELSIUS)
ATMOSPHERE_PA = 101325.0
"""Standard atmosphere (exact)."""
_GRAM_PER_MOL = read_unit("g/mol")


@dataclass(frozen=True, slots=True)
class Limit:
    """A temperature limit in °C with where it comes from."""

    celsius: Value
    origin: str
    provisional: bool = False
    """True when it rests on an estimate, so that a class built on it is provisional."""
    notes: tuple[str, ...] = ()

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content."""
        return {
            "celsius": self.celsius.to_dict(),
            "origin": self.origin,
            "provisional": self.provisional,
            "notes": list(self.notes),
        }


@dataclass(frozen=True, slots=True)
class HeatRate:
    """One decomposition heat rate with its activation energy, for zero-order arithmetic."""

    rate: Value
    """W/kg."""
    celsius: Value
    """°C at which the rate holds."""
    energy: Value
    """Activation energy, kJ/mol."""
    origin: str

    def at(self, celsius: float) -> float:
        """W/kg at another temperature, without consumption."""
        return runaway.arrhenius(
            self.rate.value, self.celsius.value + ZERO_C, celsius + ZERO_C, self.energy.value * 1000
        )


def heat_rate(settings: Settings) -> HeatRate | NotAssessed:
    """The decomposition heat rate from ``qref``/``Tref`` or ``onset``/``detection``, with ``E``.

    With two rates (``qref2``, ``Tref2``) the activation energy follows from them. An onset counts only with the
    detection limit of the method and E typed beside it.
    """
    what = "no heat rate of the decomposition"
    if settings.flag("autocatalytic"):
        return NotAssessed(what, reason="autocatalytic: zero order is not conservative")
    rate, place, energy = settings.value("qref", HEAT_RATE), settings.celsius("Tref"), settings.value("E", KJ_PER_MOL)
    origin = "from a heat rate, zero order"
    if rate is None and place is None and "onset" in settings:
        rate, place = settings.value("detection", HEAT_RATE), settings.celsius("onset")
        origin = f"from a dynamic onset with its detection limit, zero order ({FROM_MEMORY})"
        if rate is None or energy is None:
            absent = [name for name, item in (("detection", rate), ("E", energy)) if item is None]
            return NotAssessed("an onset is not a TD24", tuple(absent))
    second = (settings.value("qref2", HEAT_RATE), settings.celsius("Tref2"))
    absent = [name for name, item in (("qref", rate), ("Tref", place)) if item is None]
    if rate is None or place is None:
        return NotAssessed(what, tuple(absent))
    if energy is None and second[0] is not None and second[1] is not None:
        energy = _energy(rate, place, second[0], second[1])
        origin = "from two heat rates, zero order"
    if energy is None:
        return NotAssessed(what, ("E",))
    if rate.value <= 0 or energy.value <= 0 or place.value <= -ZERO_C:
        return NotAssessed(what, reason="heat rate, activation energy and kelvin must be positive")
    return HeatRate(rate, place, energy, origin)


def _energy(rate: Value, place: Value, rate_2: Value, place_2: Value) -> Value | None:
    if min(rate.value, rate_2.value) <= 0 or place.value == place_2.value:
        return None
    return propagate(
        lambda q1, t1, q2, t2: runaway.activation_energy(q1, t1 + ZERO_C, q2, t2 + ZERO_C) / 1000,
        (rate, place, rate_2, place_2),
    )


def td24(settings: Settings, heat_capacity: Value | None) -> Limit | NotAssessed:
    """TD24 as typed, or from a heat rate or an onset and cp (kJ/(kg K)); refused otherwise."""
    typed = settings.celsius("TD24")
    if typed is not None:
        note = ("autocatalytic: a measured TD24 depends on the thermal history",)
        return Limit(typed, "typed", notes=note if settings.flag("autocatalytic") else ())
    if not any(key in settings for key in ("qref", "Tref", "onset", "detection")):
        return NotAssessed("no TD24", ("TD24",))
    rate = heat_rate(settings)
    if isinstance(rate, NotAssessed):
        return NotAssessed("no TD24", ("TD24",), rate.text)
    if heat_capacity is None or heat_capacity.value <= 0:
        return NotAssessed("no TD24", ("TD24",), "cp of the mixture is needed")

    def solve(q: float, t: float, e: float, cp: float, *, integral: bool = False) -> float:
        found = runaway.td24(q, t + ZERO_C, cp * 1000, e * 1000, integral=integral)
        return float("nan") if found is None else found - ZERO_C

    inputs = (rate.rate, rate.celsius, rate.energy, heat_capacity)
    found = propagate(solve, inputs)
    if found.value != found.value:
        return NotAssessed("no TD24", ("TD24",), "no temperature gives 24 h with these numbers")
    exact = solve(*(item.value for item in inputs), integral=True)
    notes = (
        f"with the integral instead of the zero-order formula TD24 is {exact:.1f} °C",
        "zero order: not conservative for autocatalytic decompositions or after thermal history",
    )
    return Limit(found, rate.origin, "onset" in rate.origin, notes)


def mtt(settings: Settings, limiting_mol: float | None, gas_per_mol: float) -> Limit | NotAssessed:
    """MTT as typed; else the boiling point at the operating pressure, or in a closed vessel the pressure limit."""
    typed = settings.celsius("MTT")
    if typed is not None:
        return Limit(typed, "typed")
    boiling = settings.celsius("boiling")
    if boiling is None:
        return NotAssessed("no MTT", ("MTT",))
    latent = settings.value("latent", KJ_PER_KG)
    mass = settings.value("vapourM", _GRAM_PER_MOL)
    molar = latent.value * mass.value if latent is not None and mass is not None else None
    if settings.flag("closed"):
        return _closed(settings, boiling, molar, limiting_mol, gas_per_mol)
    pressure = settings.value("pressure", PASCAL)
    if pressure is None:
        return Limit(boiling, "boiling point as typed, taken at the operating pressure")
    if molar is None or molar <= 0 or pressure.value <= 0:
        absent = [name for name, item in (("latent", latent), ("vapourM", mass)) if item is None]
        return NotAssessed("no MTT", ("MTT",), f"another pressure needs {' and '.join(absent) or 'positive numbers'}")
    found = propagate(
        lambda t, p: runaway.boiling_point(p, t + ZERO_C, ATMOSPHERE_PA, molar) - ZERO_C, (boiling, pressure)
    )
    return Limit(found, "boiling point at the operating pressure (boiling typed at 101 325 Pa)")


def _closed(
    settings: Settings, boiling: Value, molar: float | None, limiting_mol: float | None, gas_per_mol: float
) -> Limit | NotAssessed:
    limit = settings.value("pmax", PASCAL)
    gas_per_mol = settings.number("gas", PURE, gas_per_mol)
    headspace = settings.value("headspace", VOLUME)
    needed = [("pmax", limit), ("latent and vapourM", molar)]
    if gas_per_mol:
        needed += [("headspace", headspace), ("size", limiting_mol)]
    absent = [name for name, item in needed if item is None]
    if absent or limit is None or molar is None:
        return NotAssessed("no MTT", ("MTT",), f"a closed vessel needs {', '.join(absent)}")
    if min(limit.value, molar) <= 0 or (headspace is not None and headspace.value <= 0):
        return NotAssessed("no MTT", ("MTT",), "pressure, latent heat and headspace must be positive")
    gas = gas_per_mol * (limiting_mol or 0.0)
    room = headspace.value if headspace is not None else 0.0

    def solve(t: float, p: float) -> float:
        found = runaway.pressure_limit(p, t + ZERO_C, ATMOSPHERE_PA, molar, gas, room)
        return float("nan") if found is None else found - ZERO_C

    found = propagate(solve, (boiling, limit))
    if found.value != found.value:
        return NotAssessed("no MTT", ("MTT",), "the pressure limit is not reached between 150 K and 1000 K")
    return Limit(found, "temperature at the pressure limit of the closed vessel, gas included (none dissolved)")


def amount_charged(settings: Settings, concentration: Value | None) -> float | None:
    """mol of limiting reactant in the vessel, from ``size`` or from ``mass`` and the concentration."""
    size, mass = settings.value("size", AMOUNT), settings.value("mass", KILOGRAM)
    if size is not None:
        return size.value
    if mass is not None and concentration is not None:
        return mass.value * concentration.value
    return None

"""The tables and the JSON of a step in the vessel."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from routeheat.present.numbers import coverage, number
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process import runaway
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.cautions import FROM_MEMORY, SHORT, THRESHOLDS
from routeheat.process.feed import Boiling, FeedCheck, half_time
from routeheat.process.levels import severity
from routeheat.process.limits import Limit

if TYPE_CHECKING:
    from routeheat.process.vessel import VesselStep

_COLUMNS = (
    Column("quantity", "Quantity"),
    Column("value", "Value", align="right", decimals=1),
    Column("unit", "Unit"),
    Column("from", "From"),
)
_Row = tuple[Cell, ...]


def table(step: VesselStep) -> Table:
    """Every quantity of the step with its unit and where it comes from."""
    rows = [*_heat_rows(step), *_runaway_rows(step), *_feed_rows(step), *_gas_rows(step)]
    return Table(f"{step.label} in the vessel", _COLUMNS, tuple(rows), notes(step))


def notes(step: VesselStep) -> tuple[str, ...]:
    """What a reader must see with the numbers."""
    found = [f"inconsistent input: {fault}" for fault in step.faults]
    found += step.notices
    if step.provisional:
        found.append(f"provisional, rests on estimates: {', '.join(step.provisional)}")
    for item in (step.mtt, step.td24):
        if isinstance(item, Limit):
            found += item.notes
    if step.exothermic is False:
        found.append("endothermic: no MTSR class; gas and loss of heating are listed instead")
    if step.sign_open:
        found.append("within twice its standard uncertainty the heat may have the other sign")
    found += step.gas.notes
    if isinstance(step.feed, FeedCheck):
        found.append("the load holds when the reaction keeps up with the feed (little accumulation)")
    return (*found, THRESHOLDS, f"± is {coverage(step.k)}; exothermic is negative", SHORT)


def shown(item: Value | NotAssessed, k: float, decimals: int = 1) -> str:
    """A value as printed, or the words of its refusal."""
    return item.text(k, decimals) if isinstance(item, Value) else item.text


def _row(name: str, item: Value | NotAssessed, unit: str, origin: str, k: float, decimals: int = 1) -> _Row:
    return (name, shown(item, k, decimals), unit if isinstance(item, Value) else "", origin)


def _heat_rows(step: VesselStep) -> list[_Row]:
    k = step.k
    rows = [
        ("mode", step.mode, "", "typed" if step.mode != "not stated" else ""),
        _row("heat", step.heat, "kJ/mol", f"{step.heat_origin}; per mole of {step.limiting} charged", k),
        _row("concentration", step.concentration, "mol/kg", "limiting reactant per kg of mixture", k, 3),
        _row("heat capacity", step.heat_capacity, "kJ/(kg K)", "of the mixture at that instant", k, 2),
        _row("heat", step.specific_heat, "kJ/kg", "per kg of reaction mass", k),
        _row("adiabatic rise", step.rise, "K", "all of it at once", k),
    ]
    if isinstance(step.rise, Value) and step.rise.value >= 0:
        levels = [
            severity(step.rise.value, gas=step.gas.per_mol > 0, levels=n, thresholds=step.thresholds).text
            for n in (3, 4)
        ]
        rows.append(("severity", "; ".join(levels), "", "from the adiabatic rise"))
    if isinstance(step.specific_heat, Value) and step.specific_heat.value < 0:
        heat = step.specific_heat.value
        methanol = runaway.evaporated_part(heat, runaway.METHANOL_LATENT_KJ_PER_KG)
        words = (
            f"evaporates {number(methanol, 2)} kg of methanol per kg, or lifts the mixture by "
            f"{number(runaway.height_equivalent_km(heat), 1)} km, or throws it at "
            f"{number(runaway.speed_equivalent_km_per_s(heat), 2)} km/s"
        )
        rows.append(("energy equivalent", words, "", f"methanol at 1100 kJ/kg, {FROM_MEMORY}"))
    if step.decomposition is not None:
        rows.append(_row("decomposition energy", step.decomposition, "kJ/kg", "typed", k, 0))
        if isinstance(step.heat_capacity, Value) and step.heat_capacity.value > 0:
            rise = runaway.specific_adiabatic_rise(step.decomposition.value, step.heat_capacity.value)
            rows.append(
                (
                    "adiabatic rise, decomposition",
                    number(rise, 0),
                    "K",
                    severity(rise, gas=True, thresholds=step.thresholds).text,
                )
            )
    return rows


def _runaway_rows(step: VesselStep) -> list[_Row]:
    k, found = step.k, step.accumulation
    rows: list[_Row] = [_row("accumulation Xac", found.fraction, "", found.origin, k, 3)]
    if found.mass_ratio != 1:
        instant = "" if found.instant is None else f"at {number(100 * found.instant, 0)} % of the feed time"
        rows.append(("mass correction Mrf/Mr", number(found.mass_ratio, 3), "", instant))
    rows.append(_row("process temperature", step.process, "°C", "typed", k))
    if step.exothermic is False:
        if isinstance(step.rise, Value):
            rows.append(
                (
                    "loss of heating",
                    number(-step.rise.value, 1),
                    "K",
                    "could cool by this much; what has not reacted accumulates until heating returns",
                )
            )
    else:
        rows += [
            _row("MTSR", step.mtsr, "°C", "worst instant", k),
            _row("MTSR, everything charged at once", step.misfeed_mtsr, "°C", "misfeed", k),
        ]
    for name, item in (("MTT", step.mtt), ("TD24", step.td24)):
        if isinstance(item, Limit):
            rows.append(_row(name, item.celsius, "°C", item.origin, k))
        else:
            rows.append((name, item.text, "", ""))
    if isinstance(step.boiling, Boiling):
        basis = "per kg of mixture" if step.boiling.per_kg else "of the batch"
        rows.append(("evaporated before MTSR", number(step.boiling.evaporated_kg, 2), "kg", basis))
        if step.boiling.vapour_kg_per_h is not None:
            rows.append(("vapour at MTT", number(step.boiling.vapour_kg_per_h, 1), "kg/h", "decomposition alone"))
    return rows


def _feed_rows(step: VesselStep) -> list[_Row]:
    check = step.feed
    if isinstance(check, NotAssessed):
        rows: list[_Row] = [("feed and cooling", check.text, "", "")]
    else:
        rows = [
            ("heat rate while feeding", number(check.heat_rate_kw, 2), "kW", f"feed {number(check.feed_h, 2)} h"),
            ("heat rate while feeding", number(check.specific_heat_rate, 1), "W/kg", "of final mass"),
            (
                "sensible heat of the feed",
                number(check.sensible_kw, 2) if check.sensible else "not included",
                "kW",
                "taken up" if check.sensible else "type feedT, feedcp and fedpart",
            ),
            ("jacket capacity", number(check.vessel.capacity_kw, 2), "kW", "U A ΔT"),
            ("load", number(100 * check.load, 0), "%", check.verdict),
        ]
        for name, hours in (
            ("at full capacity", check.shortest_h),
            (f"with a margin of {check.margin:g}", check.shortest_with_margin_h),
        ):
            rows.append(("shortest feed", "none" if hours is None else number(hours, 2), "h", name))
    if step.time_constant_s is not None:
        rows.append(
            (
                "thermal time constant",
                number(step.time_constant_s, 0),
                "s",
                f"half of the difference in {number(half_time(step.time_constant_s), 0)} s",
            )
        )
    return rows


def _gas_rows(step: VesselStep) -> list[_Row]:
    gas = step.gas
    rows: list[_Row] = [("gas evolved", number(gas.per_mol, 3), "mol/mol", gas.origin)]
    if not gas.per_mol:
        return rows
    state = f"at {number(gas.celsius, 0)} °C and {number(gas.pressure_pa / 1000, 1)} kPa, ideal"
    rows.append(("gas volume", number(1000 * gas.volume_per_mol, 1), "L/mol", state))
    if gas.volume_rate is not None and gas.per_hour is not None:
        rows.append(
            ("gas rate while feeding", number(gas.volume_rate, 2), "m³/h", f"{number(gas.per_hour, 1)} mol/h, {state}")
        )
    return rows


def scale_table(step: VesselStep) -> Table:
    """Specific cooling of typical vessels from 0.1 L to 10 m³."""
    columns = (
        Column("volume", "Volume", "L", "right", 1),
        Column("area", "Jacketed area", "m²", "right", 2),
        Column("per_kelvin", "Specific cooling", "W/(kg K)", "right", 2),
        Column("at_50", "at 50 K", "W/kg", "right", 0),
    )
    rows = tuple((p.volume_m3 * 1000, p.area_m2, p.per_kelvin, p.at_difference) for p in step.scale)
    u = step.scale[0].u_w_per_m2_k
    return Table(
        f"Cooling against scale, U {number(u, 0)} W/(m² K){'' if step.u_typed else ' (assumed: none typed)'}",
        columns,
        rows,
        (f"typical areas are {FROM_MEMORY}; use the data of the vessel when they are known",),
    )


def as_dict(item: Value | Limit | NotAssessed | Any) -> dict[str, Any] | None:
    """JSON-safe content of a result or of its refusal."""
    return None if item is None else item.to_dict()


def to_dict(step: VesselStep) -> dict[str, Any]:
    """JSON-safe content of a step in the vessel."""
    names = (
        "heat",
        "concentration",
        "heat_capacity",
        "specific_heat",
        "rise",
        "accumulation",
        "process",
        "mtsr",
        "misfeed_mtsr",
        "mtt",
        "td24",
        "gas",
        "feed",
        "boiling",
        "decomposition",
    )
    return {
        "label": step.label,
        "equation": step.reaction.text,
        "limiting": step.limiting.text,
        "mode": step.mode,
        "k": step.k,
        **{name: as_dict(getattr(step, name)) for name in names},
        "time_constant_s": step.time_constant_s,
        "side_of": step.side_of,
        "provisional": list(step.provisional),
        "faults": list(step.faults),
        "notes": list(notes(step)),
    }


def value_cell(item: Value | NotAssessed, k: float) -> Cell:
    """A table cell of a value, or the words of its refusal."""
    return Reading(item.value, item.u, k, item.at_least) if isinstance(item, Value) else item.text

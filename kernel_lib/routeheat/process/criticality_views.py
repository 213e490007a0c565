"""The strip of dots, the table and the JSON of a criticality."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Literal

from routeheat.present.numbers import coverage, number
from routeheat.present.table import Cell, Column, Table
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.cautions import SHORT, STOP, THRESHOLDS
from routeheat.process.limits import Limit
from routeheat.process.vessel_views import notes as vessel_notes
from routeheat.process.vessel_views import shown

if TYPE_CHECKING:
    from routeheat.process.criticality import Criticality, Scenario


@dataclass(frozen=True, slots=True)
class Mark:
    """A dot on the temperature axis of a scenario strip."""

    label: str
    value: float
    """°C."""
    u: float | None
    """Standard uncertainty in K; ``None`` when not stated."""
    words: str
    kind: Literal["process", "ambient", "scenario", "limit"] = "limit"


def marks(found: Criticality) -> tuple[Mark, ...]:
    """The dots of a strip, coldest first; endothermic steps have no MTSR."""
    step = found.step
    dots = [Mark("ambient", found.ambient, None, "ambient", "ambient")]
    if isinstance(step.process, Value):
        dots.append(Mark("Tp", step.process.value, step.process.u, "process temperature", "process"))
    if step.exothermic is not False:
        for label, item, words in (
            ("MTSR", step.mtsr, "maximum temperature of the synthesis reaction"),
            ("MTSR, all at once", step.misfeed_mtsr, "everything charged at once"),
        ):
            if isinstance(item, Value):
                dots.append(Mark(label, item.value, item.u, words, "scenario"))
    for label, limit, words in (
        ("MTT", step.mtt, "boiling point or pressure limit"),
        ("TD24", step.td24, "decomposition within 24 h, adiabatic"),
    ):
        if isinstance(limit, Limit):
            dots.append(Mark(label, limit.celsius.value, limit.celsius.u, words))
    return tuple(sorted(dots, key=lambda dot: dot.value))


def table(found: Criticality) -> Table:
    """Both scenarios with their temperatures and classes."""
    columns = (
        Column("scenario", "Cooling fails"),
        Column("mtsr", "MTSR / °C", align="right"),
        Column("temperature", "Scenario temperature", "°C", "right", 1),
        Column("at_values", "At the values"),
        Column("class", "Criticality class"),
    )
    rows = tuple(_row(item, found) for item in (found.as_run, found.misfeed))
    return Table(f"Criticality of {found.label}", columns, rows, notes(found))


def _row(item: Scenario, found: Criticality) -> tuple[Cell, ...]:
    endothermic = found.step.exothermic is False
    at_values = "none" if isinstance(item.at_values, NotAssessed) else " or ".join(map(str, item.at_values[::-1]))
    return (
        item.name,
        "" if endothermic else shown(item.mtsr, found.step.k),
        None if endothermic else item.temperature,
        at_values,
        item.words,
    )


def notes(found: Criticality) -> tuple[str, ...]:
    """Stop and ambient notices first, then levels, limits, what the probabilities rest on, and cautions."""
    listed = [f"{STOP}: no class covers that"] if found.stop else []
    listed += found.notices
    listed += _temperatures(found)
    listed += _levels(found)
    listed += _uncertainty(found)
    own = (THRESHOLDS, SHORT)
    listed += [note for note in vessel_notes(found.step) if note not in own and not note.startswith("±")]
    return (
        *listed,
        "class by the ordering of MTSR, MTT and TD24, ties to the worse class; " + THRESHOLDS,
        f"± is {coverage(found.step.k)}",
        SHORT,
    )


def _temperatures(found: Criticality) -> list[str]:
    step = found.step
    parts = [f"T {shown(step.process, step.k)}{' °C' if isinstance(step.process, Value) else ''}"]
    for name, item in (("MTT", step.mtt), ("TD24", step.td24)):
        parts.append(f"{name} {item.celsius.text(step.k)} °C" if isinstance(item, Limit) else item.text)
    parts.append(f"ambient {number(found.ambient, 0)} °C")
    return ["; ".join(parts)]


def _levels(found: Criticality) -> list[str]:
    listed = []
    for item in (found.severity, found.probability):
        listed.append(item.text if isinstance(item, NotAssessed) else "; ".join(level.text for level in item))
    if found.tmrad_h is not None:
        exact = "" if found.tmrad_integral_h is None else f", by the integral {number(found.tmrad_integral_h, 1)} h"
        listed.append(f"TMRad at the scenario temperature {number(found.tmrad_h, 1)} h (zero order{exact})")
    return listed


def _uncertainty(found: Criticality) -> list[str]:
    step, run = found.step, found.as_run
    if isinstance(run.at_values, NotAssessed):
        return []
    named = [("MTSR", step.mtsr)]
    named += [
        (name, item.celsius) for name, item in (("MTT", step.mtt), ("TD24", step.td24)) if isinstance(item, Limit)
    ]
    open_ = [name for name, item in named if isinstance(item, Value) and not item.complete]
    listed = []
    if len(run.reachable) > 1 or run.probabilities is not None:
        listed.append(
            "probabilities: independent normal distributions of MTSR, MTT and TD24; listed from "
            f"{number(100 * step.thresholds.reachable, 0)} %"
        )
    if open_:
        listed.append(f"uncertainty of {', '.join(open_)} not (fully) stated: other classes may be reachable")
    return listed


def to_dict(found: Criticality) -> dict[str, Any]:
    """JSON-safe content of a criticality."""
    return {
        "label": found.label,
        "ambient": found.ambient,
        "stop": found.stop,
        "words": found.words,
        "as_run": found.as_run.to_dict(),
        "misfeed": found.misfeed.to_dict(),
        "severity": _levels_dict(found.severity),
        "probability": _levels_dict(found.probability),
        "tmrad_h": found.tmrad_h,
        "tmrad_integral_h": found.tmrad_integral_h,
        "marks": [
            {"label": m.label, "value": m.value, "u": m.u, "words": m.words, "kind": m.kind} for m in marks(found)
        ],
        "notes": list(notes(found)),
    }


def _levels_dict(item: tuple[Any, ...] | NotAssessed) -> Any:
    return item.to_dict() if isinstance(item, NotAssessed) else [{"scale": x.scale, "word": x.word} for x in item]

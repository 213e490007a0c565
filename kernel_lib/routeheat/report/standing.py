"""What a reader must know of the data: what is not entered, and what is assumed."""

from __future__ import annotations

from collections.abc import Iterator

from routeheat.chem.heat import HeatSum
from routeheat.hess.combination import Combination
from routeheat.present.numbers import coverage
from routeheat.process.notes import temperature_note, yield_notes
from routeheat.report.document import Block, Bullets, Paragraph, line
from routeheat.report.matter import Matter


def not_entered(matter: Matter) -> Iterator[Block]:
    """Heats, uncertainties, yields and sources that the sheet does not state."""
    found = tuple(dict.fromkeys(_gaps(matter)))
    if found:
        yield Bullets(tuple(map(line, found)))
    elif matter.sheet.routes or matter.sheet.targets:
        yield Paragraph(line("Every heat, uncertainty, yield and source that the results rest on is typed."))


def assumptions(matter: Matter) -> Iterator[Block]:
    """How the numbers were read and counted."""
    yield Bullets(tuple(map(line, dict.fromkeys(_assumed(matter)))))


def _gaps(matter: Matter) -> Iterator[str]:
    for item in matter.profiles:
        for step in item.steps:
            if step.heat is None:
                yield f"Route {item.route.name}, {step.label}: heat {step.origin}."
    for route, reason in matter.troubles:
        yield f"Route {route.name} cannot be computed as typed: {reason}."
    for combination in matter.combinations:
        if not isinstance(combination, Combination):
            yield f"Target {combination.label}: out of reach of the known rows."
    totals = [(f"Route {item.route.name}", item.total) for item in matter.profiles]
    totals += [(f"Target {c.name}", c.heat) for c in matter.combinations if isinstance(c, Combination)]
    for name, heat in totals:
        yield from _not_stated(name, heat)
    for item in matter.profiles:
        yield from (f"Route {item.route.name}: {note}." for note in yield_notes(item))
    silent = [row.label for row in matter.sheet.known.values() if row.heat is not None and not row.source]
    for route in matter.sheet.routes.values():
        own = [step.row for step in route.steps if step.label not in route.used]
        silent += [row.label for row in own if row.heat is not None and not row.source]
    if silent:
        yield f"Source not stated: {', '.join(silent)}."


def _not_stated(name: str, heat: HeatSum) -> Iterator[str]:
    if heat.unknowns:
        yield f"{name}: unknown heat {', '.join(heat.unknowns)}."
    if labels := [datum.name for datum, _ in heat.terms if datum.u is None and not datum.symbol]:
        yield f"{name}: uncertainty not stated: {', '.join(dict.fromkeys(labels))}."


def _assumed(matter: Matter) -> Iterator[str]:
    sheet = matter.sheet
    stated = "as the sheet says" if sheet.coverage is not None else "assumed, since the sheet does not say"
    yield f"A printed ± is {coverage(sheet.k)}, {stated}. Exothermic is negative."
    yield "All data are independent of each other, except that one label is one datum wherever it is used."
    if sheet.known:
        yield "A known row holds at 25 °C unless it says its own temperature."
    if sheet.routes:
        yield "Only main products link steps; every other species crosses the boundary of its route unless recycled."
    for item in matter.profiles:
        name = item.route.name
        for loss, meaning in (("reacted", "heat per mole charged"), ("unreacted", "heat of what the yield delivers")):
            labels = [step.label for step in item.steps if not step.side and step.counted_loss == loss]
            if labels:
                yield f"Route {name}: loss counted as {loss} ({meaning}) in {', '.join(labels)}."
        yield from (f"Route {name}: {note}." for note in temperature_note(item.steps, item.basis))
        for step in item.steps:
            if step.origin.startswith("derived"):
                yield f"Route {name}, {step.label}: {step.origin}."
    for notice in sheet.notices:
        yield f"{notice.subject}: {notice.message}." if notice.subject else f"{notice.message}."

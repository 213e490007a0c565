"""The sentences a reader must see with a profile: what is not entered, how losses and yields count, which k."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING

from routeheat.chem.row import Row
from routeheat.hess.contained import Counted, double_counts
from routeheat.hess.warming import at_one_temperature
from routeheat.present.numbers import coverage, number
from routeheat.process.cautions import SHORT
from routeheat.process.heats import Loss
from routeheat.units import ZERO_CELSIUS

if TYPE_CHECKING:
    from routeheat.process.basis import Basis
    from routeheat.process.profile import Profile, StepHeat

_MEANING = {"reacted": "heat per mole charged", "unreacted": "heat of what the yield delivers"}


def profile_notes(profile: Profile) -> tuple[str, ...]:
    """All notes of a profile, most important first."""
    found = [
        *_not_entered(profile),
        *_unbalanced(profile),
        *_losses(profile),
        *profile.yield_notes,
        *(f"{item.label}: {item.origin}" for item in profile.steps if item.origin.startswith("derived")),
        *_sides(profile),
        *_remarks(profile),
        *_double_counts(profile),
        *temperature_note(profile.steps, profile.basis),
        f"± is {coverage(profile.k)}; exothermic is negative. Sums after yields are not state functions.",
        SHORT,
    ]
    return tuple(found)


def figure_notes(profiles: Sequence[Profile]) -> tuple[str, ...]:
    """What a reader of a diagram must see of one or several profiles; everything else stands with the table."""
    return merged(
        profiles,
        lambda item: (
            *_not_entered(item),
            *_unbalanced(item),
            *item.yield_notes,
            *_estimated(item),
            *_double_counts(item),
            *temperature_note(item.steps),
            SHORT,
        ),
    )


def _unbalanced(profile: Profile) -> list[str]:
    found = [item.label for item in profile.steps if item.step.row.reaction.imbalance]
    return [f"does not balance and is counted as typed: {', '.join(found)}"] if found else []


def merged(profiles: Sequence[Profile], notes: Callable[[Profile], Iterable[str]]) -> tuple[str, ...]:
    """Notes of several profiles; those that all share are said once, the caution last."""
    found: dict[str, list[str]] = {}
    for item in profiles:
        for note in notes(item):
            if note != SHORT:
                found.setdefault(note, []).append(item.route.name)
    shared = len(profiles)
    texts = [note if len(names) == shared else f"route {', '.join(names)}: {note}" for note, names in found.items()]
    return (*texts, SHORT)


def yield_notes(profile: Profile) -> tuple[str, ...]:
    """Yields that are not typed, and uncertainties of yields, recycles and amounts that are not included."""
    main = [item.step for item in profile.steps if not item.side]
    found = []
    if untyped := [step.label for step in main if step.yield_ is None]:
        found.append(f"no yield typed, counted as 100 %: {', '.join(untyped)}")
    if unstated := [step.label for step in main if step.yield_ is not None and step.yield_.u is None]:
        found.append(f"yield uncertainty not included: {', '.join(unstated)}")
    if parts := [step.label for step in main if any(item.part.u is None for item in step.recycles)]:
        found.append(f"uncertainty of the recycled part not included: {', '.join(parts)}")
    if sides := [item.label for item in profile.steps if item.side]:
        found.append(f"uncertainty of the amount of side rows not included: {', '.join(sides)}")
    return tuple(found)


def temperature_note(items: Iterable[StepHeat], basis: Basis | None = None) -> tuple[str, ...]:
    """Names the temperatures when the heats do not all hold at one; empty when they do, or none is stated.

    With the ``basis`` of a profile the note also says what bringing all of them to one temperature would change the
    sum by, every species staying in its phase.
    """
    items = tuple(items)
    by_temperature: dict[Fraction | None, list[str]] = {}
    for item in items:
        if item.heat is not None:
            by_temperature.setdefault(item.temperature, []).append(item.label)
    if len(by_temperature) < 2:
        return ()
    words = [f"{', '.join(labels)} {_celsius(kelvin)}" for kelvin, labels in by_temperature.items()]
    note = f"heats at different temperatures, not brought to one temperature: {'; '.join(words)}"
    return (note + ("" if basis is None else _size(items, basis)),)


def _size(items: Sequence[StepHeat], basis: Basis) -> str:
    """What one temperature for all would change; empty when fewer than two temperatures are stated."""
    stated = [
        (item.step.row.reaction, item.extent * basis.moles, item.temperature)
        for item in items
        if item.heat is not None and item.temperature is not None
    ]
    if len({kelvin for _, _, kelvin in stated}) < 2:
        return ""
    change = at_one_temperature(stated, transitions=())
    if change.value is None:
        return f"; by how much that would change the sum is not known: {change.missing}"
    where = f"{number(float(change.common - ZERO_CELSIUS), 0)} °C"
    return f"; bringing all to {where} would change the sum by {number(float(change.value), 1)} {basis.unit}"


def _rows(profile: Profile) -> list[Row]:
    """Rows whose typed heats the profile rests on: its steps, and the known rows that others are derived from."""
    found: dict[str, Row] = {}
    for item in profile.steps:
        if item.step.row.heat is not None:
            found[item.label] = item.step.row
        elif item.molar is not None:
            known = profile.route.known
            found |= {name: known[name] for name in item.molar.coefficients if name in known}
    return list(found.values())


def _remarks(profile: Profile) -> list[str]:
    return [remark for row in _rows(profile) for remark in row.remarks]


def _estimated(profile: Profile) -> list[str]:
    found = [row.label for row in _rows(profile) if row.estimated]
    return [f"estimated: {', '.join(found)}"] if found else []


def _double_counts(profile: Profile) -> list[str]:
    steps = [Counted.step(item.step) for item in profile.steps if item.heat is not None]
    derived_from = [
        Counted(profile.route.known[name], c)
        for item in profile.steps
        if item.step.row.heat is None and item.molar is not None
        for name, c in item.molar.coefficients.items()
        if name in profile.route.known
    ]
    return [found.text for found in double_counts([*steps, *derived_from])]


def _celsius(kelvin: Fraction | None) -> str:
    return "temperature not stated" if kelvin is None else f"{number(float(kelvin - ZERO_CELSIUS), 0)} °C"


def _not_entered(profile: Profile) -> list[str]:
    if profile.complete:
        return []
    found = [f"sum of entered steps; not entered: {', '.join(profile.not_entered)}"]
    return found + [f"{item.label}: {item.origin}" for item in profile.steps if item.heat is None]


def _losses(profile: Profile) -> list[str]:
    kinds: dict[str, list[str]] = {}
    for item in profile.steps:
        if not item.side:
            kinds.setdefault(item.counted_loss, []).append(item.label)
    if len(kinds) == 1:
        found = [f"loss counted as {kind}: {_MEANING[kind]}" for kind in kinds]
    else:
        found = [f"loss counted as {kind} ({_MEANING[kind]}) in {', '.join(labels)}" for kind, labels in kinds.items()]
    word = "total" if profile.complete else "sum of entered steps"
    losses: tuple[Loss, ...] = ("reacted", "unreacted")
    for loss in losses:
        if kinds.keys() == {loss}:
            continue
        other = profile.total_if(loss)
        if (other.exact, other.unknowns) != (profile.total.exact, profile.total.unknowns):
            found.append(f"with the loss of every step counted as {loss}, the {word} is {other.text} {profile.unit}")
    return found


def _sides(profile: Profile) -> list[str]:
    sides = [item for item in profile.steps if item.side]
    found = []
    if sides:
        found.append("cumulative heats count side rows where they stand in working order")
    if typed := [item.label for item in sides if item.step.yield_ is not None]:
        found.append(f"a side row runs as often as its amount says; its yield is not used: {', '.join(typed)}")
    for item in sides:
        drawn = [
            s.text
            for s, nu in item.step.row.reaction.net.items()
            if nu < 0 and s in profile.bought and s in profile.found.links.maker
        ]
        if drawn:
            found.append(f"side rows never draw on a step: {', '.join(drawn)} in {item.label} counts as bought")
    return found

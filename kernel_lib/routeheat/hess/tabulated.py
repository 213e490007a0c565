"""Heat capacities and phase transitions of the species of a reaction, from the table that ships with the package.

May import: :mod:`routeheat.hess.heating`, :mod:`routeheat.known`, :mod:`routeheat.chem`.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from fractions import Fraction

from routeheat.chem.heat import Datum, HeatSum
from routeheat.chem.species import Species
from routeheat.hess.heating import Transition
from routeheat.known.heat_capacity import HeatCapacity
from routeheat.known.table import KnownSpecies, heat_capacity, known_in, transitions


def tabulated(species: Iterable[Species]) -> tuple[dict[Species, HeatCapacity], tuple[Transition, ...]]:
    """Heat capacities of the species and of every phase that they can change into, with those transitions.

    A species whose formula several substances share is found by its name only. What the table does not hold is left
    out. The table states no uncertainty of transition enthalpies.
    """
    capacities: dict[Species, HeatCapacity] = {}
    found: dict[Transition, None] = {}
    waiting = list(species)
    seen = set(waiting)
    while waiting:
        item = waiting.pop()
        line = _line(item)
        if line is None:
            continue
        capacity = heat_capacity(line)
        if capacity is not None:
            capacities[item] = capacity
        for transition in _changes(item, line.name):
            found[transition] = None
            for other in (transition.low, transition.high):
                if other not in seen:
                    seen.add(other)
                    waiting.append(other)
    return capacities, tuple(found)


def _line(species: Species) -> KnownSpecies | None:
    lines = known_in(species)
    if len(lines) > 1:
        name = species.name.casefold()
        lines = tuple(line for line in lines if name in {text.casefold() for text in (line.name, *line.other_names)})
    return lines[0] if len(lines) == 1 else None


def _changes(species: Species, name: str) -> list[Transition]:
    found = []
    for change in transitions():
        # a line at 298.15 K is a heat brought to that temperature, not the place where the phase changes
        if change.name != name or change.temperature == 298.15:
            continue
        heat = HeatSum.of(Datum(f"{change.kind} of {name}", value=change.enthalpy, source=change.source))
        temperature = Fraction(repr(change.temperature))
        if species.phase == change.before and change.form in ("", species.form):
            found.append(Transition(species, replace(species, phase=change.after, form=""), temperature, heat))
        elif species.phase == change.after:
            low = replace(species, phase=change.before, form=change.form)
            found.append(Transition(low, species, temperature, heat))
    return found

"""What moved in a result, and why: the typed entries that were edited, and what each does to each heat.

A heat is ``H = Σ cᵢ hᵢ`` with exact coefficients, so its change is exactly ``Σ (c̄ᵢ Δhᵢ + h̄ᵢ Δcᵢ)`` with the means of
old and new: the first part is the edit of the heat itself, the second that of everything that sets how often it runs
(yields, equivalents, recycles, the choice of the combination).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

from routeheat.present.numbers import decimals_for, number
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.rerun.kept import Amount, Kept, path_text
from routeheat.rerun.leaves import Leaf, Measure, Moved

MOST_SHOWN = 60
"""Rows of each table; the rest is counted."""
_DIGITS = 12


@dataclass(frozen=True, slots=True)
class Effect:
    """What one typed heat does to the change of one heat of the result."""

    heat: str
    """Path of the heat in the result."""
    datum: str
    kept: Amount | None
    now: Amount | None
    coefficient_kept: Fraction
    coefficient_now: Fraction
    by_value: Fraction
    """``c̄ Δh``, in the unit of the heat."""
    by_coefficient: Fraction
    """``h̄ Δc``."""


def effects(kept: Kept, now: Kept, paths: Sequence[str]) -> tuple[Effect, ...]:
    """The effects on the given heats, largest first within each heat; heats that are unknown letters have none."""
    found: list[Effect] = []
    for path in paths:
        if path in kept.heats and path in now.heats:
            own = list(_effects(kept, now, path))
            found += sorted(own, key=lambda effect: -abs(effect.by_value + effect.by_coefficient))
    return tuple(found)


def _effects(kept: Kept, now: Kept, path: str) -> Iterator[Effect]:
    before, after = kept.heats[path], now.heats[path]
    for name in dict.fromkeys((*after, *before)):
        old, new = kept.data.get(name), now.data.get(name)
        if any(item is not None and (item.what != "heat" or item.symbol) for item in (old, new)):
            continue
        c_old, c_new = before.get(name, Fraction(0)), after.get(name, Fraction(0))
        # a datum that only one of the two has keeps its value: it came or went with its coefficient
        h_new = new.value if new is not None else old.value if old is not None else Fraction(0)
        h_old = old.value if old is not None else h_new
        effect = Effect(path, name, old, new, c_old, c_new, (c_old + c_new) / 2 * (h_new - h_old),
                        (h_old + h_new) / 2 * (c_new - c_old))  # fmt: skip
        if effect.by_value or effect.by_coefficient or (old is not None and new is not None and old.u != new.u):
            yield effect


def explain(kept: Kept, now: Kept, moved: Sequence[Moved]) -> tuple[Table, ...]:
    """What moved, what was edited, and the contributions to the change."""
    paths = [path_text(item.path) for item in moved]
    return tuple(
        table
        for table in (_moved_table(now.name, moved), _edits_table(kept, now), _effects_table(kept, now, paths))
        if table.rows or table.notes
    )


def _cut(rows: list[tuple[Cell, ...]]) -> tuple[tuple[tuple[Cell, ...], ...], tuple[str, ...]]:
    more = len(rows) - MOST_SHOWN
    return tuple(rows[:MOST_SHOWN]), (f"and {more} more",) if more > 0 else ()


def _moved_table(name: str, moved: Sequence[Moved]) -> Table:
    rows, notes = _cut([_moved_row(item) for item in moved])
    columns = (
        Column("what", "what"), Column("kept", "kept", align="right"), Column("now", "now", align="right"),
        Column("change", "change", align="right"),
    )  # fmt: skip
    measured = any(isinstance(leaf, Measure) and leaf.u is not None for item in moved for leaf in (item.kept, item.now))
    tail = ("u is the standard uncertainty",) if measured else ()
    return Table(f"Reference {name}: what moved", columns, rows, (*notes, *tail))


def _moved_row(item: Moved) -> tuple[Cell, ...]:
    change = item.change
    finest = min((abs(size) for size in (change, _change_of_u(item)) if size), default=0.0)
    decimals = min(max(decimals_for(finest), 1), _DIGITS) if finest else 1
    kept = item.missing if item.missing == "new" else _leaf_text(item.kept, decimals)
    now = item.missing if item.missing == "gone" else _leaf_text(item.now, decimals)
    of_u = _change_of_u(item)
    words = "" if change is None else number(change, decimals)
    if not change and of_u:
        words = f"u {number(of_u, decimals)}"
    return path_text(item.path), kept, now, words


def _change_of_u(item: Moved) -> float | None:
    kept, now = item.kept, item.now
    if isinstance(kept, Measure) and isinstance(now, Measure) and kept.u is not None and now.u is not None:
        return now.u - kept.u
    return None


def _leaf_text(leaf: Leaf, decimals: int) -> str:
    if isinstance(leaf, Measure):
        value = "no number" if leaf.value is None else number(float(leaf.value), decimals)
        return f"{value}, u not stated" if leaf.u is None else f"{value}, u {number(leaf.u, decimals)}"
    if isinstance(leaf, bool):
        return "yes" if leaf else "no"
    if isinstance(leaf, Fraction):
        return str(leaf) if len(str(leaf)) <= _DIGITS else number(float(leaf), max(decimals, 6))
    if isinstance(leaf, float):
        return number(leaf, decimals)
    return "nothing" if leaf is None else leaf


def _edits_table(kept: Kept, now: Kept) -> Table:
    """Entries that differ, with the keys that do."""
    rows: list[tuple[Cell, ...]] = []
    for name in dict.fromkeys((*now.rests_on, *kept.rests_on)):
        before, after = kept.rests_on.get(name), now.rests_on.get(name)
        if before != after:
            rows.append((name, _unlike(before, after), _unlike(after, before)))
    shown, notes = _cut(rows)
    if not rows and kept.rests_on:
        versions = f"it was calculated with routeheat {kept.version}, now with {now.version}"
        notes = (f"nothing that is typed and that the result rests on was edited; {versions}",)
    columns = Column("entry", "entry"), Column("kept", "kept"), Column("now", "now")
    return Table("Edited entries of the sheet", columns, shown, notes)


def _unlike(one: str | None, other: str | None) -> str:
    """The keys of an entry that the other does not have."""
    if one is None:
        return "not there"
    theirs = set((other or "").split(" | "))
    return " | ".join(part for part in one.split(" | ") if part not in theirs) or "the same without it"


def _effects_table(kept: Kept, now: Kept, paths: Sequence[str]) -> Table:
    found = effects(kept, now, paths)
    rows, notes = _cut([_effect_row(item) for item in found])
    if any(item.by_coefficient for item in found):
        notes += ("a coefficient changes with yields, equivalents, recycles, or with the combination chosen",)
    columns = (
        Column("heat", "heat of the result"), Column("row", "row"),
        Column("kept", "heat kept", "kJ/mol", "right", 3), Column("now", "heat now", "kJ/mol", "right", 3),
        Column("coefficient_kept", "coefficient kept", align="right", decimals=4),
        Column("coefficient_now", "now", align="right", decimals=4),
        Column("by_heat", "effect of the heat", align="right", decimals=3),
        Column("by_coefficient", "effect of the coefficient", align="right", decimals=3),
    )  # fmt: skip
    return Table("Contributions to the change", columns, rows, notes)


def _effect_row(item: Effect) -> tuple[Cell, ...]:
    return (
        item.heat, item.datum, _amount_cell(item.kept), _amount_cell(item.now), float(item.coefficient_kept),
        float(item.coefficient_now), float(item.by_value), float(item.by_coefficient),
    )  # fmt: skip


def _amount_cell(amount: Amount | None) -> Cell:
    if amount is None:
        return Reading(None, None, words="not used")
    return Reading(float(amount.value), None if amount.u is None else float(amount.u), 1.0)

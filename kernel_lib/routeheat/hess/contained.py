"""What a measured heat already contains, and the rows of a sum that would count it a second time.

``includes mixing, dilution`` says what was measured along with a heat. A row of the same sum that is that effect, of a
species that the first row names or at a side row of it, is named: the heat may be counted twice.
May import: :mod:`routeheat.chem`, :mod:`routeheat.errors`.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Row
from routeheat.chem.step import Step
from routeheat.errors import nearest

EFFECTS: tuple[str, ...] = (
    "mixing", "dilution", "solution", "neutralisation", "vaporisation", "condensation", "fusion", "sublimation",
    "crystallisation", "quench", "workup", "scrubber",
)  # fmt: skip
"""Effects that are looked for."""
_SYNONYMS = {
    "dissolution": "solution", "dissolving": "solution", "solvation": "solution", "neutralization": "neutralisation",
    "vaporization": "vaporisation", "evaporation": "vaporisation", "boiling": "vaporisation",
    "distillation": "vaporisation", "reflux": "vaporisation", "melting": "fusion", "crystallization": "crystallisation",
    "precipitation": "crystallisation", "freezing": "crystallisation", "work-up": "workup", "scrubbing": "scrubber",
}  # fmt: skip
_COVERS = {"mixing": frozenset(["mixing", "dilution"])}
"""Effects that a wider word contains, unless they are named beside it."""
_SOLIDS = ("s", "cr", "am")
_FLAGS = ("quench", "workup", "neutralisation", "scrubber")
"""Keys of a step that name what it is."""


@dataclass(frozen=True, slots=True)
class Counted:
    """A row as it is counted in a sum."""

    row: Row
    coefficient: Fraction = Fraction(1)
    operations: tuple[str, ...] = ()
    """Effects that a step is flagged with."""
    side_of: str = ""
    """Label of the step that it is a side row of."""

    @classmethod
    def step(cls, step: Step) -> Counted:
        """A step of a route with what it is flagged with."""
        flags = [step.operation, *(name for name in _FLAGS if step.row.setting(name) is True)]
        return cls(step.row, Fraction(1), tuple(_canonical(flag) for flag in flags if flag), step.side_of)


@dataclass(frozen=True, slots=True)
class DoubleCount:
    """An effect that one row contains and another row of the same sum adds."""

    holder: str
    """Label of the row whose heat includes the effect."""
    adding: str
    """Label of the row that adds it."""
    effect: str

    @property
    def text(self) -> str:
        """``double counting? A1 includes dilution, and A2 adds it``."""
        return f"double counting? {self.holder} includes {self.effect}, and {self.adding} adds it"


def included(row: Row) -> tuple[str, ...]:
    """What the row's heat contains, in the words of :data:`EFFECTS` where they are among them."""
    typed = str(row.setting("includes") or "").split(",")
    return tuple(dict.fromkeys(_canonical(part.strip()) for part in typed if part.strip()))


def unknown_effects(row: Row) -> Iterator[tuple[str, str]]:
    """Words behind ``includes`` that nothing is looked for under, each with the effect that looks most like it."""
    for word in included(row):
        if word not in EFFECTS:
            yield word, _canonical(nearest(word, [*EFFECTS, *_SYNONYMS]))


def double_counts(items: Iterable[Counted]) -> tuple[DoubleCount, ...]:
    """Every effect that some row includes and another one adds, in the order given; each once."""
    listed = list(items)
    found: dict[DoubleCount, None] = {}
    for holder in listed:
        for effect in included(holder.row):
            for other in listed:
                if other.row.label != holder.row.label and _adds(other, holder, effect):
                    found[DoubleCount(holder.row.label, other.row.label, effect)] = None
    return tuple(found)


def double_counting(terms: Sequence[tuple[Row, Fraction]]) -> tuple[str, ...]:
    """The sentences for rows with their coefficients."""
    return tuple(item.text for item in double_counts(Counted(row, c) for row, c in terms))


def _canonical(word: str) -> str:
    lower = word.lower()
    return _SYNONYMS.get(lower, lower if lower in EFFECTS else word)


def _adds(item: Counted, holder: Counted, effect: str) -> bool:
    effects = {*item.operations, *_effects(item.row, item.coefficient * holder.coefficient > 0)}
    meant = {effect, *_COVERS.get(effect, frozenset()) - set(included(holder.row))}
    if not effects & meant:
        return False
    named = {species.name for species in holder.row.reaction.species}
    return item.side_of == holder.row.label or bool(_subjects(item.row) & named)


def _subjects(row: Row) -> frozenset[str]:
    """Names of what a row is about: water only where there is nothing else, because nearly every row has water."""
    names = frozenset(species.name for species in row.reaction.net)
    return names - {"H2O"} or names


def _effects(row: Row, forward: bool) -> set[str]:
    """What effect a row is, from its kind and from what changes in it; reversed when it is subtracted."""
    if row.kind == "neutralisation" or (row.kind == "solution" and len(row.reaction.products) > 1):
        return {row.kind} if forward else set()
    if forward:
        return {_change(row.reaction)} - {""}
    # a dilution or a mixing that is run backwards takes heat out again
    return {_change(row.reaction.scaled(Fraction(-1)))} - {"", "dilution", "mixing"}


def _change(reaction: Reaction) -> str:
    """The effect of one substance changing its state; empty for anything else."""
    if len(reaction.reactants) != 1 or len(reaction.products) != 1:
        return ""
    before, after = reaction.reactants[0][1], reaction.products[0][1]
    if (before.name, before.formula) != (after.name, after.formula):
        return ""
    if after.phase == "aq":
        if before.phase != "aq":
            return "solution"
        # from infinite dilution nothing is diluted further
        return "dilution" if before.form else ""
    if after.phase in _SOLIDS:
        return "crystallisation" if before.phase in ("aq", "l") else ""
    if before.phase in _SOLIDS:
        return {"l": "solution" if after.form else "fusion", "g": "sublimation"}.get(after.phase, "")
    if before.phase == after.phase == "l":
        return "mixing"
    return {("l", "g"): "vaporisation", ("g", "l"): "condensation"}.get((before.phase, after.phase), "")

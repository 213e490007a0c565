"""The desk's model: a text, what it says, and what is still shown while a line of it is broken. Immutable."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TypeVar

from routeheat import check_sheet
from routeheat.chem.route import Route, Sheet
from routeheat.chem.row import Row, Rows
from routeheat.errors import Fault
from routeheat.notation.faults import split_lines
from routeheat.notation.sections import LONGEST_TEXT
from routeheat_widgets._broken import Broken, broken_parts

_T = TypeVar("_T", Row, Route)
_WORDS = {"known": "Row", "target": "Target", "route": "Route"}
EMPTY = Sheet(None, {}, Rows(), {}, {})
TEXT_LIMIT = LONGEST_TEXT
"""Characters of a text that is still shown for editing."""


@dataclass(frozen=True, slots=True)
class DeskModel:
    """A text as read, with every earlier version that stands in for a broken part."""

    text: str
    revision: int
    sheet: Sheet
    """What the text says, as far as it can be read."""
    faults: tuple[Fault, ...]
    """Everything wrong, in the order of the text; notices are in :attr:`notices`."""
    notices: tuple[Fault, ...]
    shown: Sheet
    """What the views compute from: healthy parts of the text, and earlier versions of broken ones."""
    kept: tuple[str, ...] = ()
    """Which earlier versions stand in, one sentence each; empty when the whole text is healthy."""
    kept_names: frozenset[tuple[str, str]] = frozenset()
    """Pairs (``route``, ``known`` or ``target``; name) of the parts that stand in for broken ones."""
    left_out: tuple[str, ...] = ()
    """Which broken parts have no earlier version and are left out, one sentence each."""
    partial: dict[str, Route] = field(default_factory=dict)
    """Routes with broken steps and no earlier version, without those steps: good for single steps, not for sums."""

    @property
    def healthy(self) -> bool:
        """True when nothing in the text is at fault."""
        return not self.faults


def read_model(text: str, revision: int, before: DeskModel | None = None) -> DeskModel:
    """The model of ``text``; ``before`` is the model shown until now, whose parts stand in for broken ones.

    Never raises on any text.
    """
    sheet, found = check_sheet(text)
    faults = tuple(fault for fault in found if fault.severity == "fault")
    notices = tuple(fault for fault in found if fault.severity == "notice")
    if not faults:
        return DeskModel(text, revision, sheet, (), notices, sheet)
    earlier = EMPTY if before is None else before.shown
    broken = broken_parts(text, sheet, faults)
    return _merge(DeskModel(text, revision, sheet, faults, notices, sheet), earlier, broken)


def clean_text(text: str) -> str:
    """``text`` with line feeds as line ends and nothing that cannot be sent or saved as UTF-8."""
    joined = text.replace("\r\n", "\n").replace("\r", "\n").replace("\0", "\N{REPLACEMENT CHARACTER}")
    return joined.encode("utf-16-le", "surrogatepass").decode("utf-16-le", "replace")


def count_lines(text: str) -> int:
    """Lines of a text as an editor numbers them."""
    return len(split_lines(text))


class _Merge:
    """Puts the healthy parts of a broken text together with earlier versions of the others."""

    def __init__(self, first_line: int) -> None:
        self.first_line = first_line
        """Line of the first fault: the one to name when a part is gone without a fault of its own."""
        self.kept: list[str] = []
        self.names: list[tuple[str, str]] = []
        self.left_out: list[str] = []

    def choose(
        self, kind: str, new: Mapping[str, _T], old: Mapping[str, _T], broken: Mapping[str, int]
    ) -> dict[str, _T]:
        """The parts to show, in the order of the new text; a part that is gone stays while anything is broken."""
        found: dict[str, _T] = {}
        for name in _woven(list(new), list(old)):
            line = broken.get(name, self.first_line)
            if name in new and name not in broken:
                found[name] = new[name]
            elif name in old:
                found[name] = old[name]
                self.kept.append(f"{_WORDS[kind]} {name} is shown as it was before line {line} was broken.")
                self.names.append((kind, name))
            else:
                self.left_out.append(f"{_WORDS[kind]} {name} is left out while line {line} is broken.")
        return found


def _woven(new: list[str], old: list[str]) -> list[str]:
    """The names of ``new``, with those that only ``old`` has behind the neighbour they had there."""
    names = list(new)
    for index, name in enumerate(old):
        if name not in names:
            names.insert(names.index(old[index - 1]) + 1 if index else 0, name)
    return names


def _merge(model: DeskModel, earlier: Sheet, broken: Broken) -> DeskModel:
    if broken.everything:
        kept = (f"Shown as it was before line {broken.everything} was broken.",) if earlier != EMPTY else ()
        names = [("route", name) for name in earlier.routes] + [("known", label) for label in earlier.known]
        names += [("target", label) for label in earlier.targets]
        return replace(model, shown=earlier, kept=kept, kept_names=frozenset(names))
    sheet = model.sheet
    merge = _Merge(model.faults[0].line)
    rows = Rows(merge.choose("known", sheet.known, earlier.known, broken.rows).values(), sheet.k, sheet.unstated)
    targets = merge.choose("target", sheet.targets, earlier.targets, broken.rows)
    chosen = merge.choose("route", sheet.routes, earlier.routes, broken.routes)
    routes = {name: replace(route, known=rows) for name, route in chosen.items()}
    partial = {}
    for name, route in sheet.routes.items():
        if name not in routes:
            healthy = tuple(step for step in route.steps if step.label not in broken.steps)
            partial[name] = replace(route, steps=healthy, known=rows)
    species = {**earlier.species, **sheet.species}
    shown = replace(sheet, species=species, known=rows, targets=targets, routes=routes)
    return replace(
        model,
        shown=shown,
        kept=tuple(merge.kept),
        kept_names=frozenset(merge.names),
        left_out=tuple(merge.left_out),
        partial=partial,
    )

"""What every view of the desk is: a question, a few choices, and a picture with the code that makes it again."""

from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import ClassVar

from routeheat.chem.heat import HeatSum
from routeheat.draw import Drawable, Drawing
from routeheat.present.numbers import number
from routeheat.present.table import Table
from routeheat_widgets._model import DeskModel

Details = tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class Control:
    """One choice above a view."""

    key: str
    """Name of the option."""
    label: str
    value: str
    choices: tuple[tuple[str, str], ...] = ()
    """Pairs (value, what a reader sees); none for a field to type in."""
    unit: str = ""
    """Unit of a number to type or to move."""
    hint: str = ""
    """What stands in an empty field, or beside the value: ``typed 3 h``, ``not typed``."""
    moves: bool = False
    """True for a value of the sheet that is moved here without touching the text."""
    limits: tuple[float, float, float] | None = None
    """Lowest, highest and step of a slider; ``None`` for a field alone."""


@dataclass(frozen=True, slots=True)
class Bars:
    """Small bars beside the numbers of one column."""

    table: int
    """Index of the table."""
    column: str
    """Key of the column."""
    cells: tuple[str, ...]
    """SVG elements without any typed text, one a row; empty for none."""


@dataclass(frozen=True, slots=True)
class Write:
    """An edit of the typed text that the page may make: one stretch of it, replaced."""

    start: int
    end: int
    """Characters ``start`` to ``end`` of the text are replaced."""
    text: str
    words: str
    """What it does: ``feed 4 h in [A1]``."""


@dataclass(frozen=True, slots=True)
class Picture:
    """What a view shows of a model."""

    drawn: Drawing | Drawable | None
    """What the diagram is made of; ``None`` for a view, or a state, without one."""
    tables: tuple[Table, ...]
    code: tuple[str, ...]
    """Lines that make ``result`` (and ``diagram``, where it is not the result's own) from ``sheet``."""
    uses: frozenset[tuple[str, str]] = frozenset()
    """Parts of the sheet it is made of: pairs (``route``, ``known`` or ``target``; name)."""
    details: Mapping[tuple[str, str], Details] = field(default_factory=dict)
    """More to read about an arrow, by (column title, label): pairs (heading, text)."""
    empty: str = ""
    """What to say when there is nothing to show yet."""
    name: str = ""
    """What it is of, for names of files: ``route A``."""
    more: tuple[tuple[str, Drawing], ...] = ()
    """Further diagrams below the first, each with code that names it."""
    bars: tuple[Bars, ...] = ()
    search: bool = False
    """True when a reader will want to search the rows of the first table."""
    write: Write | None = None
    """What *Write into the sheet* would do; ``None`` when nothing is moved or it cannot be written."""


class View(ABC):
    """One question that the desk answers."""

    key: ClassVar[str]
    tab: ClassVar[str]
    """Short name on its tab."""
    question: ClassVar[str]
    """The question, as its heading."""

    @abstractmethod
    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The choices offered for ``model``; an option that is not among them falls back to the first."""

    @abstractmethod
    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The picture; ``options`` are the values of :meth:`controls`.

        Raises :class:`~routeheat.errors.RouteheatError` when it cannot be computed, in words for the reader.
        """


def select(key: str, label: str, choices: list[tuple[str, str]], options: Mapping[str, str]) -> Control:
    """A choice whose value falls back to the first when the wanted one is not offered."""
    offered = [value for value, _ in choices]
    wanted = options.get(key, "")
    return Control(key, label, wanted if wanted in offered else offered[0], tuple(choices))


def contributors(heat: HeatSum) -> Details:
    """Who makes the uncertainty of a heat, largest first, as one line of words."""
    missing = [item.datum.name for item in heat.contributions if item.share is None]
    stated = [item for item in heat.contributions if item.share]
    words = [f"{item.datum.name} {number(100 * (item.share or 0), 0)} %" for item in stated[:5]]
    if len(stated) > 5:
        words.append(f"{len(stated) - 5} more")
    found = [("variance from", ", ".join(words))] if words else []
    if missing:
        found.append(("not stated", ", ".join(missing)))
    return tuple(found)


def everything(model: DeskModel) -> frozenset[tuple[str, str]]:
    """All parts of the shown sheet."""
    shown = model.shown
    return frozenset(
        [("known", label) for label in shown.known]
        + [("target", label) for label in shown.targets]
        + [("route", name) for name in shown.routes]
    )

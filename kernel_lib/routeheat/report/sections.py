"""The sections of a report in their fixed order. A section of a later kind joins by one entry in :data:`PARTS`."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass

from routeheat.errors import UnknownName
from routeheat.present.markup import as_rich
from routeheat.process.cautions import FULL, SHORT
from routeheat.report import results, standing
from routeheat.report.agreement import reconciled
from routeheat.report.data import data_tables
from routeheat.report.document import (
    LONGEST_CELL,
    Block,
    Bullets,
    Code,
    Document,
    Paragraph,
    Section,
    line,
    lines,
    numbered,
    table_block,
)
from routeheat.report.matter import Matter
from routeheat.report.measure_next import next_heat
from routeheat.report.methods import methods_of
from routeheat.report.scale import at_scale
from routeheat.report.screening import screened
from routeheat.report.waste import wasted


@dataclass(frozen=True, slots=True)
class Part:
    """How one section is made."""

    name: str
    """Name by which it is left out."""
    heading: str
    blocks: Callable[[Matter], Iterable[Block]]
    """Its content; a section without content is left out."""


def build(matter: Matter, leave_out: Iterable[str] = ()) -> Document:
    """The report of ``matter`` without the sections named.

    Raises :class:`~routeheat.errors.UnknownName` for a name that no section has.
    """
    omitted = {leave_out} if isinstance(leave_out, str) else set(leave_out)
    for name in sorted(omitted):
        if name not in SECTION_NAMES:
            raise UnknownName("section", name, SECTION_NAMES)
    sections = [
        Section(part.name, part.heading, blocks)
        for part in PARTS
        if part.name not in omitted and (blocks := tuple(part.blocks(matter)))
    ]
    title, date = line(matter.title, LONGEST_CELL), line(matter.date, LONGEST_CELL)
    return Document(title, date, line(SHORT), numbered(sections))


def _question(matter: Matter) -> Iterator[Block]:
    for text in lines(matter.question):
        if text.strip():
            yield Paragraph(as_rich(text))


def _methods(matter: Matter) -> Iterator[Block]:
    yield Bullets(tuple(map(line, methods_of(matter.sheet))))


def _data(matter: Matter) -> Iterator[Block]:
    for number, table in enumerate(data_tables(matter.sheet), 1):
        yield table_block(f"data-{number}", table)


def _typed(matter: Matter) -> Iterator[Block]:
    if matter.text.strip():
        yield Code("typed-sheet", line("The route sheet, as typed."), lines(matter.text))


def _cautions(_: Matter) -> Iterator[Block]:
    yield Bullets(tuple(map(line, FULL)))


PARTS: tuple[Part, ...] = (
    Part("question", "Question", _question),
    Part("routes", "Routes and equations", results.routes),
    Part("comparison", "Comparison of routes", results.comparison),
    Part("profiles", "Heat profiles", results.profiles),
    Part("steps", "Single steps", results.steps),
    Part("combinations", "Combinations of known heats", results.combinations),
    Part("not_entered", "What is not entered", standing.not_entered),
    Part("assumptions", "Assumptions", standing.assumptions),
    Part("reconciled", "Agreement of the known heats", reconciled),
    Part("next", "What to measure next", next_heat),
    Part("scale", "Heat at scale", at_scale),
    Part("screening", "Energetic screening", screened),
    Part("waste", "Waste", wasted),
    Part("methods", "Methods and sources", _methods),
    Part("data", "Data", _data),
    Part("sheet", "Appendix: the route sheet", _typed),
    Part("cautions", "Cautions", _cautions),
)
SECTION_NAMES: tuple[str, ...] = tuple(part.name for part in PARTS)

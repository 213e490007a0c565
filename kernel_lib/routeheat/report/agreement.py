"""The section on the agreement of known heats: what their cycles say, and what the user decided about it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from routeheat.chem.exact import Span
from routeheat.chem.route import Sheet
from routeheat.errors import RouteheatError
from routeheat.hess.numbering import Numbering
from routeheat.hess.reconcile import Reconciled, reconcile
from routeheat.present.table import Table
from routeheat.process.cautions import SHORT
from routeheat.report.document import Block, Bullets, Heading, Paragraph, line, table_block
from routeheat.report.matter import Matter

_CHOICES = ("accept", "exclude", "widen")


def reconciled(matter: Matter) -> Iterator[Block]:
    """Verdict, decisions, adjusted heats, cycles that do not close, suspects; nothing without a cycle."""
    if not has_cycle(matter.sheet):
        return
    try:
        found = reconcile(matter.sheet.known)
    except RouteheatError as problem:
        yield Paragraph(line(f"not assessed: {problem}"), "caution")
        return
    yield from _verdict(found)
    rows, *others = found.tables()
    said = {found.verdict, *(choice.text for choice in found.choices)}
    notes = tuple(note for note in rows.notes if note not in said)
    yield table_block("reconciled-rows", replace(rows, notes=notes), SHORT)
    yield from _cycles(found, others)


def has_cycle(sheet: Sheet) -> bool:
    """True when known rows with a heat form a cycle, or a row says what to do about one."""
    if any(row.setting(key) is not None for row in sheet.known.values() for key in _CHOICES):
        return True
    numbering = Numbering()
    pure = {
        label: numbering.vector(row.reaction)
        for label, row in sheet.known.items()
        if row.heat is not None and not any(species.in_mixture for species in row.reaction.species)
    }
    return bool(Span(pure).cycles)


def _verdict(found: Reconciled) -> Iterator[Block]:
    words = f"{found.verdict[0].upper()}{found.verdict[1:]}."
    if found.p is None:
        words = f"Not assessed: {found.verdict}."
    yield Paragraph(line(words), "caution" if found.contradicts or found.p is None else "text")
    if found.choices:
        yield Heading("reconciled-choices", line("Decisions"))
        yield Bullets(tuple(line(choice.text) for choice in found.choices))


def _cycles(found: Reconciled, others: Sequence[Table]) -> Iterator[Block]:
    """The cycles that do not close with the rows that could explain them; a sentence when all close."""
    if not found.cycles:
        return
    if all(cycle.closes for cycle in found.cycles):
        count = len(found.cycles)
        words = "The only cycle closes" if count == 1 else f"All {count} cycles of the basis close"
        yield Paragraph(line(f"{words} within twice the standard uncertainty of the misclosure."))
        return
    cycles, *suspects = others
    rows = tuple(row for row, cycle in zip(cycles.rows, found.cycles, strict=True) if not cycle.closes)
    yield table_block("reconciled-cycles", replace(cycles, title="Cycles that do not close", rows=rows))
    for table in suspects:
        yield table_block("reconciled-suspects", table)

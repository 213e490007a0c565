"""From typed text to a sheet: sections are read in an order in which names are known before they are used."""

from __future__ import annotations

import re
from dataclasses import replace
from fractions import Fraction

from routeheat.chem.route import Sheet
from routeheat.chem.row import Row, Rows, Unstated
from routeheat.chem.step import Step
from routeheat.errors import Fault
from routeheat.notation.analogues import with_analogue
from routeheat.notation.context import Context
from routeheat.notation.declarations import read_declarations
from routeheat.notation.grammar import SpeciesReader
from routeheat.notation.guesses import Guesses
from routeheat.notation.pasted import as_typed
from routeheat.notation.quantity import read_coverage, read_quantity, require_dimension
from routeheat.notation.routes import NewLabel, build_routes, read_drafts, require_phases
from routeheat.notation.rows import ReadRow, read_row
from routeheat.notation.sections import Entry, Section, read_sections, too_large
from routeheat.notation.tokens import Piece, Trouble
from routeheat.units import KJ_PER_MOL

DEFAULT_K = Fraction(2)
"""Coverage factor of a ``±`` when neither the number nor the sheet says one."""


def build_sheet(text: str) -> tuple[Sheet, tuple[Fault, ...]]:
    """The sheet that ``text`` says, as far as it can be read, and everything that is wrong with it or worth knowing.

    Never raises on any text. Faults and notices come in the order of the text.
    """
    large = too_large(text)
    if large is not None:
        return Sheet(None, {}, Rows(), {}, {}), (large,)
    lines = read_sections(text)
    sections = lines.sections
    guesses = Guesses()
    coverage = _coverage(sections, lines.faults)
    # keys of species need no names, so a reader without names serves for the declarations
    declaring = Context(SpeciesReader({}, guesses), coverage or DEFAULT_K, lines.faults)
    declared = read_declarations(sections, declaring)
    context = Context(
        SpeciesReader(declared, guesses), coverage or DEFAULT_K, lines.faults,
        assumed=declaring.assumed,
    )  # fmt: skip
    new_label = _labels(context)
    k = float(coverage or DEFAULT_K)
    unstated = _unstated(sections, context)
    rows = _known(sections, context, new_label)
    targets = _targets(sections, context, new_label)
    drafts = read_drafts(sections, context, new_label)
    by_label = {row.label: row for row in (*rows, *(step.row for draft in drafts for step in draft.own))}
    known = Rows((with_analogue(row, by_label, context) for row in rows), k, unstated)
    for draft in drafts:
        draft.items = [
            replace(item, row=with_analogue(item.row, by_label, context)) if isinstance(item, Step) else item
            for item in draft.items
        ]
    routes = build_routes(drafts, known, k, context)
    context.faults.extend(context.reader.notices)
    _notices(context, coverage)
    faults = [*as_typed(context.faults, lines.origins), *lines.controls]
    ordered = tuple(sorted(faults, key=lambda fault: (fault.line, fault.column, fault.severity)))
    notices = tuple(fault for fault in ordered if fault.severity == "notice")
    return Sheet(coverage, declared, known, targets, routes, notices, unstated), ordered


def _coverage(sections: list[Section], faults: list[Fault]) -> Fraction | None:
    found: Fraction | None = None
    for section in sections:
        if section.word != "uncertainty":
            continue
        for entry in section.entries:
            faults.append(entry.head.fault("nothing stands below the uncertainty line", "start a section"))
        if found is not None:
            faults.append(section.header.fault("a second uncertainty line", "one holds for the whole sheet"))
            continue
        try:
            found = read_coverage(section.header)[0]
        except Trouble as trouble:
            faults.append(trouble.fault)
    return found


_UNSTATED = re.compile(r'(?:u\s*=?\s*)?(?P<u>[^"]*[^"\s])\s*"(?P<reason>[^"]*)"')
_UNSTATED_LIKE = 'like unstated u = 5 kJ/mol "textbook values of that time"'


def _unstated(sections: list[Section], context: Context) -> Unstated | None:
    """The line for rows that state no uncertainty."""
    found: Unstated | None = None
    for section in sections:
        if section.word != "unstated":
            continue
        for entry in section.entries:
            context.faults.append(entry.head.fault("nothing stands below the unstated line", "start a section"))
        if found is not None:
            message = "a second line for rows that state no uncertainty"
            context.faults.append(section.header.fault(message, "one holds for the whole sheet"))
            continue
        found = context.attempt(lambda piece=section.header: _read_unstated(piece, context))  # type: ignore[misc]
    return found


def _read_unstated(piece: Piece, context: Context) -> Unstated:
    match = _UNSTATED.fullmatch(piece.text)
    if match is None:
        piece.refuse("an uncertainty for rows that state none, and the reason for it, are expected", _UNSTATED_LIKE)
    place = piece.part(match.start("u"), match.end("u"))
    quantity = read_quantity(place, context.sheet_k, "5 kJ/mol")
    u = require_dimension(quantity, KJ_PER_MOL, _UNSTATED_LIKE)
    if quantity.basis is not None or quantity.temperature is not None or u.spread is not None:
        place.refuse("one standard uncertainty for all such rows is expected", _UNSTATED_LIKE)
    if u.value <= 0:
        place.refuse("an uncertainty is more than zero", _UNSTATED_LIKE)
    if not match["reason"].strip():
        piece.refuse("the reason is missing", _UNSTATED_LIKE)
    return Unstated(u, match["reason"].strip())


def _notices(context: Context, coverage: Fraction | None) -> None:
    if context.assumed is not None and coverage is None:
        message = "± without a coverage factor is read as k = 2"
        hint = "say it once for the sheet: uncertainty k = 2"
        context.faults.append(context.assumed.fault(message, hint, notice=True))


def _labels(context: Context) -> NewLabel:
    """A register of the labels of one sheet."""
    first: dict[str, int] = {}

    def new_label(read: ReadRow, entry: Entry) -> bool:
        label = read.row.label
        if label not in first:
            first[label] = entry.head.line
            return True
        hint = f"first in line {first[label]}; a step of another route runs here by: use {label}"
        end = entry.head.text.find("]") + 1
        context.faults.append(entry.head.fault(f"the label {label} is used twice", hint, 0, end, label))
        return False

    return new_label


def _known(sections: list[Section], context: Context, new_label: NewLabel) -> list[Row]:
    rows: list[Row] = []
    for section in sections:
        if section.word != "known":
            continue
        for entry in section.entries:
            read = read_row(entry, context, "known")
            if read is None or not new_label(read, entry):
                continue
            row = read.row
            require_phases(read, context, "a known row")
            for species in row.reaction.species:
                if species.phase == "sln":
                    place = read.places.get(species, entry.head)
                    message = "(sln) links the steps of routes, but never enters a known row"
                    context.faults.append(place.fault(message, "state the phase, like (l) or (aq)", subject=row.label))
            if row.heat is None and read.clean:
                message = "no heat is typed for this known row: it is not used"
                hint = "like dH -285.8 kJ/mol"
                context.faults.append(entry.head.fault(message, hint, subject=row.label, notice=True))
            rows.append(row)
    return rows


def _targets(sections: list[Section], context: Context, new_label: NewLabel) -> dict[str, Row]:
    targets: dict[str, Row] = {}
    for section in sections:
        if section.word != "target":
            continue
        entries = list(section.entries)
        if section.header.text:
            first = Entry(section.header)
            if entries and not entries[0].head.text.startswith("["):
                first.more.extend([entries[0].head, *entries[0].more])
                del entries[0]
            entries.insert(0, first)
        if not entries:
            context.faults.append(section.header.fault("a target reaction is missing", "target [T] A(l) -> B(l)"))
        for entry in entries:
            read = read_row(entry, context, "target")
            if read is None or not new_label(read, entry):
                continue
            row = replace(read.row, kind="target" if read.row.kind == "reaction" else read.row.kind)
            require_phases(read, context, "a target")
            targets[row.label] = row
    return targets

"""From typed text to a sheet: sections are read in an order in which names are known before they are used."""

from __future__ import annotations

import re
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import cast

from routeheat.chem.formula import read_formula
from routeheat.chem.measured import Measured
from routeheat.chem.route import Declaration, Route, Sheet
from routeheat.chem.row import Row, Rows
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.errors import Fault, FormulaError, nearest
from routeheat.notation.grammar import SpeciesReader, read_name, split_state
from routeheat.notation.keys import find_key
from routeheat.notation.quantity import read_coverage
from routeheat.notation.rows import Context, as_step, missing_phases, read_keys, read_row
from routeheat.notation.sections import Entry, Section, parts, read_sections, too_large
from routeheat.notation.tokens import Piece, Trouble, split_list
from routeheat.units import GRAM_PER_MOL

DEFAULT_K = Fraction(2)
"""Coverage factor of a ``±`` when neither the number nor the sheet says one."""


@dataclass(slots=True)
class _Draft:
    """A route while it is read: its own steps, and where the steps of others come in."""

    name: str
    title: str
    makes: Species
    header: Piece
    items: list[Step | Piece] = field(default_factory=list)
    """Own steps, and the label pieces of ``use`` lines, in working order."""


def build_sheet(text: str) -> tuple[Sheet, tuple[Fault, ...]]:
    """The sheet that ``text`` says, as far as it can be read, and everything that is wrong with it or worth knowing.

    Never raises on any text. Faults and notices come in the order of the text.
    """
    large = too_large(text)
    if large is not None:
        return Sheet(None, {}, Rows(), {}, {}), (large,)
    faults: list[Fault] = []
    sections = read_sections(text, faults)
    coverage = _coverage(sections, faults)
    declared = _species(sections, faults)
    context = Context(SpeciesReader(declared), coverage or DEFAULT_K, faults)
    labels: dict[str, Piece] = {}
    k = float(coverage or DEFAULT_K)
    known = Rows(_rows(sections, context, labels), k)
    targets = _targets(sections, context, labels)
    drafts = _drafts(sections, context, labels)
    routes = _routes(drafts, known, k, context)
    faults.extend(context.reader.notices)
    _notices(context, coverage)
    ordered = tuple(sorted(faults, key=lambda fault: (fault.line, fault.column, fault.severity)))
    notices = tuple(fault for fault in ordered if fault.severity == "notice")
    return Sheet(coverage, declared, known, targets, routes, notices), ordered


def _coverage(sections: list[Section], faults: list[Fault]) -> Fraction | None:
    found: Fraction | None = None
    for section in sections:
        if section.word != "uncertainty":
            continue
        if found is not None:
            faults.append(section.header.fault("a second uncertainty line", "one holds for the whole sheet"))
            continue
        try:
            found = read_coverage(section.header)[0]
        except Trouble as trouble:
            faults.append(trouble.fault)
        for entry in section.entries:
            faults.append(entry.head.fault("nothing stands below the uncertainty line", "start a section"))
    return found


def _notices(context: Context, coverage: Fraction | None) -> None:
    if context.assumed is not None and coverage is None:
        context.faults.append(
            context.assumed.fault(
                "± without a coverage factor is read as k = 2", "say it once for the sheet: uncertainty k = 2", notice=True
            )
        )
    if context.unused:
        names = ", ".join(context.unused)
        first = next(iter(context.unused.values()))
        context.faults.append(first.fault(f"kept, but not used yet: {names}", notice=True))


# species ------------------------------------------------------------------------------------------------------------


def _species(sections: list[Section], faults: list[Fault]) -> dict[str, Declaration]:
    declared: dict[str, Declaration] = {}
    # species keys need no names, so an empty reader serves here
    context = Context(SpeciesReader({}), DEFAULT_K, faults)
    for section in sections:
        if section.word != "species":
            continue
        for entry in section.entries:
            declaration = context.attempt(lambda entry=entry: _declaration(entry, context))  # type: ignore[misc]
            if declaration is None:
                continue
            name = declaration.species.name
            if name in declared:
                faults.append(entry.head.fault(f"{name} is declared twice", f"first in line {declared[name].line}"))
            else:
                declared[name] = declaration
    if context.unused:
        first = next(iter(context.unused.values()))
        faults.append(first.fault(f"kept, but not used yet: {', '.join(context.unused)}", notice=True))
    return declared


def _declaration(entry: Entry, context: Context) -> Declaration:
    pieces = list(parts(entry))
    head, first_key = _split_keys(pieces[0])
    keyed = read_keys([*([first_key] if first_key else []), *pieces[1:]], context, "species")
    name_piece, formula_piece = _split_name(head)
    body, phase, form = split_state(formula_piece) if formula_piece.text else split_state(name_piece)
    if not formula_piece.text:
        name_piece = body
        formula = None
    elif body.text == "?":
        formula = None
    else:
        try:
            formula = read_formula(body.text, declared=True)
        except FormulaError as problem:
            raise Trouble(body.fault(problem.message, problem.hint, problem.start, problem.end)) from None
    name = read_name(name_piece)
    mass = cast("Measured | None", keyed.values.get("M"))
    if mass is not None and formula is not None:
        keyed.places["M"].refuse("the molar mass follows from the formula", "leave M out")
    if mass is not None and mass.value <= 0:
        keyed.places["M"].refuse("a molar mass is positive")
    species = Species(name, phase, form, formula, True, None if mass is None else mass.to(GRAM_PER_MOL))
    settings = tuple((key, value) for key, value in keyed.values.items() if key not in ("name", "cas"))
    return Declaration(species, keyed.text("name"), keyed.text("cas"), settings, entry.head.line)


def _split_keys(piece: Piece) -> tuple[Piece, Piece | None]:
    """The name and formula of a declaration, and the key that follows them without a bar."""
    quoted = False
    for match in re.finditer(r'"|(?<=\s)[A-Za-z]+(?=\s)', piece.text):
        if match[0] == '"':
            quoted = not quoted
            continue
        key = find_key(match[0])
        behind = piece.text[: match.start()].rstrip()
        if not quoted and key is not None and "species" in key.where and match[0] != "M" and behind:
            return piece.part(0, match.start()).strip(), piece.part(match.start())
        if match[0] == "M" and re.match(r"M\s+[0-9]", piece.text[match.start() :]) and behind:
            return piece.part(0, match.start()).strip(), piece.part(match.start())
    return piece, None


def _split_name(head: Piece) -> tuple[Piece, Piece]:
    """Name and formula: split at two blanks, else before the shortest end that reads as a formula."""
    text = head.text
    wide = list(re.finditer(r"\s{2,}", text))
    if wide:
        return head.part(0, wide[-1].start()).strip(), head.part(wide[-1].end()).strip()
    body, _, _ = split_state(head)
    blanks = [match.start() for match in re.finditer(r"\s", body.text)]
    for blank in reversed(blanks):
        candidate = body.text[blank + 1 :]
        if candidate == "?" or _reads(candidate):
            return head.part(0, blank).strip(), head.part(blank + 1).strip()
    if not blanks:
        if _reads(body.text) and len(body.text) > 1 and body.text != head.text:
            head.refuse("a name is missing before the formula", f"like WATER  {text}")
        return head, head.part(len(text))
    return head.part(0, blanks[-1]).strip(), head.part(blanks[-1] + 1).strip()


def _reads(text: str) -> bool:
    try:
        read_formula(text, declared=True)
    except FormulaError:
        return False
    return True


# rows ---------------------------------------------------------------------------------------------------------------


def _new_label(row: Row, entry: Entry, labels: dict[str, Piece], context: Context) -> bool:
    earlier = labels.get(row.label)
    if earlier is None:
        labels[row.label] = entry.head
        return True
    context.faults.append(
        entry.head.fault(
            f"the label {row.label} is used twice", f"first in line {earlier.line}; to run that step here: use {row.label}",
            0, len(row.label) + 2, row.label,
        )  # fmt: skip
    )
    return False


def _rows(sections: list[Section], context: Context, labels: dict[str, Piece]) -> list[Row]:
    rows: list[Row] = []
    for section in sections:
        if section.word != "known":
            continue
        for entry in section.entries:
            read = read_row(entry, context, "known")
            if read is None or not _new_label(read[0], entry, labels, context):
                continue
            row = read[0]
            _require_phases(row, entry, context, "a known row")
            if any(species.phase == "sln" for species in row.reaction.species):
                context.faults.append(
                    entry.head.fault("(sln) links steps but never enters a Hess sum", "state the phase", subject=row.label)
                )
            if row.heat is None and not any(fault.subject == row.label for fault in context.faults):
                context.faults.append(
                    entry.head.fault("no heat is typed for this known row: it cannot be used", notice=True, subject=row.label)
                )
            rows.append(row)
    return rows


def _require_phases(row: Row, entry: Entry, context: Context, what: str) -> None:
    for species in missing_phases(row.reaction):
        context.faults.append(
            entry.head.fault(f"the phase of {species.name} is missing in {what}", f"like {species.name}(l)", subject=row.label)
        )


def _targets(sections: list[Section], context: Context, labels: dict[str, Piece]) -> dict[str, Row]:
    targets: dict[str, Row] = {}
    for section in sections:
        if section.word != "target":
            continue
        entries = list(section.entries)
        if section.header.text.strip(" :"):
            first = Entry(section.header)
            if entries and not entries[0].head.text.startswith("["):
                first.more.extend([entries[0].head, *entries[0].more])
                del entries[0]
            entries.insert(0, first)
        if not entries:
            context.faults.append(section.header.fault("a target reaction is missing", "target [T] A(l) -> B(l)"))
        for entry in entries:
            read = read_row(entry, context, "known")
            if read is None or not _new_label(read[0], entry, labels, context):
                continue
            row = replace(read[0], kind="target" if read[0].kind == "reaction" else read[0].kind)
            _require_phases(row, entry, context, "a target")
            targets[row.label] = row
    return targets


# routes -------------------------------------------------------------------------------------------------------------

_ROUTE = re.compile(r'(?P<name>[^\s"]+)\s*(?:"(?P<title>[^"]*)")?\s*makes\s+(?P<makes>.+)')


def _drafts(sections: list[Section], context: Context, labels: dict[str, Piece]) -> list[_Draft]:
    drafts: list[_Draft] = []
    for section in sections:
        if section.word != "route":
            continue
        draft = context.attempt(lambda section=section: _header(section, context))  # type: ignore[misc]
        steps = _items(section, context, labels)
        if draft is None:
            continue
        draft.items = steps
        if any(other.name == draft.name for other in drafts):
            context.faults.append(draft.header.fault(f"a second route is called {draft.name}", "give it another name"))
        else:
            drafts.append(draft)
    return drafts


def _header(section: Section, context: Context) -> _Draft:
    header = section.header
    match = _ROUTE.fullmatch(header.text)
    if match is None:
        header.refuse("a route line says its name and what it makes", 'like route A "over the nitro compound" makes ANI')
    if len(match["name"]) > 40:
        header.refuse("a route name of more than 40 characters", "put the long text in quotes behind it", 0, match.end("name"))
    makes = context.reader.species(header.part(match.start("makes")).strip())
    return _Draft(match["name"], match["title"] or "", makes, header)


def _items(section: Section, context: Context, labels: dict[str, Piece]) -> list[Step | Piece]:
    items: list[Step | Piece] = []
    for entry in section.entries:
        use = re.match(r"use\s+", entry.head.text)
        if use is not None:
            items.extend(piece for piece in split_list(entry.head.part(use.end())) if piece.text)
            for extra in entry.more:
                context.faults.append(extra.fault("nothing belongs to a use line", "start a row with its label"))
            continue
        read = read_row(entry, context, "step")
        if read is None or not _new_label(read[0], entry, labels, context):
            continue
        row, keyed = read
        if row.heat is None and not any(fault.subject == row.label for fault in context.faults):
            _require_phases(row, entry, context, "a step without a heat of its own")
        items.append(as_step(row, keyed))
    return items


def _routes(drafts: list[_Draft], known: Rows, k: float, context: Context) -> dict[str, Route]:
    defined = {item.label: (item, draft) for draft in drafts for item in draft.items if isinstance(item, Step)}
    routes: dict[str, Route] = {}
    for draft in drafts:
        steps: list[Step] = []
        used: list[str] = []
        for item in draft.items:
            if isinstance(item, Step):
                steps.append(item)
                continue
            label = item.text.strip("[]")
            found = defined.get(label)
            if found is None:
                near = nearest(label, defined)
                hint = f"did you mean {near}?" if near else "a step that another route of this sheet defines"
                context.faults.append(item.fault(f"no route defines a step {label}", hint, subject=label))
            elif any(step.label == label for step in steps) or found[1] is draft:
                context.faults.append(item.fault(f"{label} already runs in this route", subject=label))
            else:
                steps.append(found[0])
                used.append(label)
                _forgotten_sides(item, found[0], found[1], draft, context)
        routes[draft.name] = Route(
            draft.name, draft.title, draft.makes, tuple(steps), tuple(used), known, k, draft.header.line
        )
    return routes


def _forgotten_sides(place: Piece, step: Step, home: _Draft, draft: _Draft, context: Context) -> None:
    """A used step whose side rows (quench, scrubber) the using route leaves out deserves a word."""
    here = {item.label if isinstance(item, Step) else item.text.strip("[]") for item in draft.items}
    for item in home.items:
        if isinstance(item, Step) and item.side_of == step.label and item.label not in here:
            context.faults.append(
                place.fault(
                    f"{item.label}, a side row of {step.label} in route {home.name}, does not run here",
                    f"if it does: use {step.label}, {item.label}", notice=True, subject=step.label,
                )  # fmt: skip
            )

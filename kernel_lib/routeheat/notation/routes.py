"""The route sections: a header, own steps, side rows, and steps used from other routes."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, field

from routeheat.chem.route import Route
from routeheat.chem.row import Rows
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.notation.context import Context
from routeheat.notation.names import one_spaced
from routeheat.notation.rows import ReadRow, as_step, missing_phases, read_row
from routeheat.notation.sections import Entry, Section
from routeheat.notation.tokens import LABEL, Piece, split_list

LONGEST_ROUTE_NAME = 40

NewLabel = Callable[[ReadRow, Entry], bool]
"""Registers the label of a row; False (and a fault) when the sheet has it already."""

_ROUTE = re.compile(r'(?P<name>[^\s"|]+)(?:\s+"(?P<title>[^"]*)")?\s+makes\s+(?P<makes>\S.*)')
_MAKES_WHAT = 'like route A "over the nitro compound" makes ANI'


@dataclass(slots=True)
class Draft:
    """A route while it is read: its own steps, and where the steps of others come in."""

    name: str
    title: str
    makes: Species
    makes_piece: Piece
    header: Piece
    items: list[Step | Piece] = field(default_factory=list)
    """Own steps, and the label pieces of ``use`` lines, in working order."""

    @property
    def own(self) -> list[Step]:
        """Steps that this route defines itself."""
        return [item for item in self.items if isinstance(item, Step)]

    @property
    def labels(self) -> set[str]:
        """Labels of everything that runs in the route."""
        return {item.label if isinstance(item, Step) else item.text for item in self.items}


def read_drafts(sections: list[Section], context: Context, new_label: NewLabel) -> list[Draft]:
    """Every route as typed, before steps are looked up in other routes."""
    drafts: dict[str, Draft] = {}
    for section in sections:
        if section.word != "route":
            continue
        header = section.header
        draft = context.attempt(lambda header=header: _header(header, context))  # type: ignore[misc]
        items = _items(section, context, new_label)
        if draft is None:
            continue
        draft.items = items
        if draft.name in drafts:
            hint = f"first in line {drafts[draft.name].header.line}: give it another name"
            context.faults.append(header.fault(f"a second route is called {draft.name}", hint, 0, len(draft.name)))
        else:
            drafts[draft.name] = draft
    return list(drafts.values())


def _header(header: Piece, context: Context) -> Draft:
    text = header.text
    match = _ROUTE.fullmatch(text)
    if match is None:
        message = "a route line says its name and what it makes"
        if text.count('"') % 2:
            message = "the title of this route is not closed by a quotation mark"
        elif text.startswith('"'):
            message = "the name of this route is missing before its title"
        elif re.search(r"\bmakes\b", text) and '"' not in text:
            message = "a route has a short name of one word, then a title in quotes"
        header.refuse(message, _MAKES_WHAT)
    if len(match["name"]) > LONGEST_ROUTE_NAME:
        hint = "put the long text in quotes behind a short name"
        header.refuse(f"a route name of more than {LONGEST_ROUTE_NAME} characters", hint, 0, match.end("name"))
    if "|" in match["makes"]:
        place = match.start("makes") + match["makes"].index("|")
        header.refuse("a route line holds no keys", "put a note on a step", place)
    piece = header.part(match.start("makes")).strip()
    return Draft(match["name"], match["title"] or "", context.reader.species(piece), piece, header)


def _items(section: Section, context: Context, new_label: NewLabel) -> list[Step | Piece]:
    items: list[Step | Piece] = []
    for entry in section.entries:
        if re.match(r"use\b", entry.head.text) is not None:
            items.extend(_used(entry, context))
            continue
        read = read_row(entry, context, "step")
        if read is None or not new_label(read, entry):
            continue
        if read.row.heat is None and read.clean:
            require_phases(read, context, "a step without a heat of its own")
        items.append(as_step(read.row, read.keyed))
    return items


def _used(entry: Entry, context: Context) -> list[Piece]:
    """The labels of a use line, without brackets."""
    listed = entry.head.part(len("use")).strip()
    found: list[Piece] = []
    if not listed.text:
        context.faults.append(entry.head.fault("a label is missing behind use", "like use A1, A2"))
    for piece in split_list(listed):
        inner = piece.part(1, -1).strip() if piece.text.startswith("[") and piece.text.endswith("]") else piece
        if not inner.text:
            continue
        if LABEL.fullmatch(inner.text) is None:
            hint = "a use line holds labels only" if "|" in inner.text else "separate labels by commas, like use A1, A2"
            context.faults.append(piece.fault(f"{inner.text[:40]} is no label", hint))
        else:
            found.append(inner)
    for extra in entry.more:
        hint = "a step runs here as its own route defines it"
        context.faults.append(extra.fault("nothing belongs to a use line", hint))
    return found


def require_phases(read: ReadRow, context: Context, what: str) -> None:
    """A fault for every species without a phase, where it stands."""
    for species, place in missing_phases(read):
        if place is not None:
            name = species.name
            hint = f"like {name}(l), {name}(g) or {name}(s)"
            message = f"the phase of {name} is missing in {what}"
            context.faults.append(place.fault(message, hint, subject=read.row.label))


def build_routes(drafts: list[Draft], known: Rows, k: float, context: Context) -> dict[str, Route]:
    """The routes, with the steps that they use from each other."""
    defined = {item.label: (item, draft) for draft in drafts for item in draft.items if isinstance(item, Step)}
    sides = _sides(drafts)
    routes: dict[str, Route] = {}
    for draft in drafts:
        steps: dict[str, Step] = {}
        used: list[str] = []
        labels = draft.labels
        for item in draft.items:
            if isinstance(item, Step):
                steps[item.label] = item
                continue
            step = _look_up(item, draft, defined, steps, known, context)
            if step is not None:
                steps[step.label] = step
                used.append(step.label)
                _forgotten_sides(item, sides.get(step.label, []), labels, context)
        makes = _made(draft, list(steps.values()), context)
        routes[draft.name] = Route(
            draft.name, draft.title, makes, tuple(steps.values()), tuple(used), known, k, draft.header.line
        )
    return routes


def _look_up(
    place: Piece,
    draft: Draft,
    defined: dict[str, tuple[Step, Draft]],
    running: dict[str, Step],
    known: Rows,
    context: Context,
) -> Step | None:
    label = place.text
    if label in defined and (label in running or defined[label][1] is draft):
        hint = "a step runs once in a route: leave this out"
        context.faults.append(place.fault(f"{label} already runs in this route", hint, subject=label))
        return None
    if label in defined:
        return defined[label][0]
    near = context.guesses.nearest(label, defined)
    hint = f"did you mean {near}?" if near else "use names a step that another route of this sheet defines"
    message = f"{label} is a known row, not a step" if label in known else f"no route defines a step {label}"
    context.faults.append(place.fault(message, hint, subject=label))
    return None


def _made(draft: Draft, steps: list[Step], context: Context) -> Species:
    """What the route makes; a name without its state means the only product with that name."""
    made = [species for step in steps for species, nu in step.row.reaction.net.items() if nu > 0]
    if draft.makes in made or one_spaced(draft.makes_piece.text) != draft.makes.name:
        return draft.makes
    return context.reader.member(draft.makes_piece, made)


def _sides(drafts: list[Draft]) -> dict[str, list[tuple[Step, Draft]]]:
    found: dict[str, list[tuple[Step, Draft]]] = {}
    for draft in drafts:
        for item in draft.items:
            if isinstance(item, Step) and item.side_of:
                found.setdefault(item.side_of, []).append((item, draft))
    return found


def _forgotten_sides(place: Piece, sides: list[tuple[Step, Draft]], labels: set[str], context: Context) -> None:
    """A used step whose side rows (quench, scrubber) the using route leaves out deserves a word."""
    for side, home in sides:
        if side.label not in labels:
            message = f"{side.label}, a side row of {place.text} in route {home.name}, does not run here"
            hint = f"if it does: use {place.text}, {side.label}"
            context.faults.append(place.fault(message, hint, notice=True, subject=place.text))

"""Which parts of a sheet the faults of its text touch."""

from __future__ import annotations

import re
from collections import Counter
from dataclasses import dataclass, field

from routeheat.chem.route import Sheet
from routeheat.chem.row import Row
from routeheat.errors import Fault
from routeheat.notation.sections import Section, read_sections, too_large

_LABEL = re.compile(r"\[([^\]]+)\]")


@dataclass(slots=True)
class Broken:
    """Parts at fault, each with the line of its first fault."""

    everything: int = 0
    """Line of a fault that leaves nothing to trust (the sheet's coverage factor, no section); 0 for none."""
    rows: dict[str, int] = field(default_factory=dict)
    """Known rows and targets by label."""
    routes: dict[str, int] = field(default_factory=dict)
    """Routes by name."""
    steps: dict[str, int] = field(default_factory=dict)
    """Steps by label."""


def broken_parts(text: str, sheet: Sheet, faults: tuple[Fault, ...]) -> Broken:
    """What the ``faults`` of ``text`` make unfit to compute with.

    A row whose only fault is that it does not balance still computes, as the notation promises.
    """
    if too_large(text) is not None:
        return Broken(everything=1)
    sections = read_sections(text).sections
    per_subject = Counter(fault.subject for fault in faults)
    rows = {**sheet.known, **sheet.targets, **{s.label: s.row for r in sheet.routes.values() for s in r.steps}}
    found = Broken()
    for fault in faults:
        row = rows.get(fault.subject)
        if row is not None and per_subject[fault.subject] == 1 and _only_unbalanced(row, fault):
            continue
        _place(found, fault, sections)
    for route in sheet.routes.values():
        for step in route.steps:
            if step.label in found.steps:
                found.routes.setdefault(route.name, found.steps[step.label])
    return found


def _only_unbalanced(row: Row, fault: Fault) -> bool:
    return bool(row.reaction.imbalance) and "balance" in fault.message


def _place(found: Broken, fault: Fault, sections: list[Section]) -> None:
    above = [section for section in sections if section.header.line <= fault.line]
    section = above[-1] if above else None
    if section is None or section.word in ("", "uncertainty"):
        found.everything = found.everything or fault.line
        return
    entries = [entry for entry in section.entries if entry.head.line <= fault.line]
    label = _LABEL.match(entries[-1].head.text) if entries else _LABEL.search(section.header.text)
    if section.word == "route":
        name = section.header.text.split()[0] if section.header.text.strip() else ""
        found.routes.setdefault(name, fault.line)
        if label is not None and entries:
            found.steps.setdefault(label[1].strip(), fault.line)
    elif section.word in ("known", "target") and label is not None:
        found.rows.setdefault(label[1].strip(), fault.line)

"""The section on energetic screening of the declared species."""

from __future__ import annotations

from collections.abc import Iterator

from routeheat.chem.route import Declaration, Sheet
from routeheat.errors import RouteheatError
from routeheat.process.screening import NOT_DECLARED, energetic_screen
from routeheat.process.settings import Settings
from routeheat.report.document import Block, Paragraph, line, table_block
from routeheat.report.matter import Matter

_KEYS = ("groups", "smiles", "Qdec", "onset", "SADT", "h2o2")


def screened(matter: Matter) -> Iterator[Block]:
    """A table for each species with groups, a structure or a measurement; the others are named as not assessed."""
    if not declares(matter.sheet):
        return
    silent = []
    for number, item in enumerate(matter.sheet.species.values(), 1):
        if not _declares(item):
            silent.append(item.species.text)
            continue
        try:
            yield table_block(f"screening-{number}", energetic_screen(item).table())
        except RouteheatError as problem:
            yield Paragraph(line(f"Not assessed: {item.species.text}: {problem}."), "caution")
    if silent:
        yield Paragraph(line(f"Not assessed: {', '.join(silent)}: {NOT_DECLARED}."), "caution")


def declares(sheet: Sheet) -> bool:
    """True when some species states groups, a structure, or a measured decomposition."""
    return any(map(_declares, sheet.species.values()))


def _declares(item: Declaration) -> bool:
    settings = Settings(item.settings)
    return any(key in settings for key in _KEYS)

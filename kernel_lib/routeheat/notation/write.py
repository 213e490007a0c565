"""From a sheet to its canonical text; reading that text gives equal objects. Comments are not part of a sheet."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from itertools import groupby
from textwrap import fill

from routeheat.chem.measured import Measured, decimal_text
from routeheat.chem.route import Declaration, Route, Sheet
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.notation.keys import AS_TYPED
from routeheat.notation.pasted import plain_line
from routeheat.notation.values import LONGEST_QUOTE

_IN_WATER = re.compile(r"(?:[0-9]+(?:\.[0-9]+)? H2O)?")
"""Forms of a solution that are typed as so much water."""
_WIDTH = 100
"""Columns after which the next key starts a line of its own."""


def write_sheet(sheet: Sheet) -> str:
    """The sheet as typed text: one blank line between sections, one key order, two spaces of indentation."""
    blocks: list[list[str]] = []
    if sheet.coverage is not None:
        blocks.append([f"uncertainty k = {decimal_text(sheet.coverage)}"])
    if sheet.unstated is not None:
        blocks.append([f"unstated u = {sheet.unstated.u.text} {_quoted(sheet.unstated.reason)}"])
    if sheet.species:
        width = max(len(name) for name in sheet.species)
        blocks.append(["species", *(line for item in sheet.species.values() for line in _declaration(item, width))])
    if sheet.known:
        blocks.append(["known", *(line for row in sheet.known.values() for line in _row(row, _row_keys(row)))])
    for target in sheet.targets.values():
        first, *rest = _row(target, _row_keys(target))
        blocks.append([f"target {first.strip()}", *rest])
    blocks.extend(list(_route(route)) for route in sheet.routes.values())
    return "\n\n".join("\n".join(block) for block in blocks) + "\n"


def _declaration(item: Declaration, width: int) -> Iterator[str]:
    species = item.species
    formula = "?" if species.formula is None else species.formula.text
    keys = []
    if item.title:
        keys.append(f"name {_quoted(item.title)}")
    if item.cas:
        keys.append(f"cas {item.cas}")
    keys.extend(_setting(name, value) for name, value in item.settings)
    line = f"  {species.name:<{width}}  {formula}{species.state}"
    yield from _wrapped(line, keys, " " * 6)


def _route(route: Route) -> Iterator[str]:
    title = f' "{route.title}"' if route.title else ""
    yield f"route {route.name}{title} makes {route.makes.text}"
    used = set(route.used)
    for is_used, steps in groupby(route.steps, lambda step: step.label in used):
        if is_used:
            yield from fill(
                ", ".join(step.label for step in steps), _WIDTH, initial_indent="  use ", subsequent_indent="  use ",
                break_long_words=False, break_on_hyphens=False,
            ).splitlines()  # fmt: skip
        else:
            for step in steps:
                yield from _row(step.row, _row_keys(step.row, _step_keys(step)))


def _row(row: Row, keys: list[str]) -> Iterator[str]:
    yield f"  [{row.label}] {_equation(row)}"
    if keys:
        indent = " " * 7
        yield from _wrapped(indent + keys[0], keys[1:], indent)


def _wrapped(line: str, keys: list[str], indent: str) -> Iterator[str]:
    """``line`` with the keys behind it, as many on a line as fit."""
    for key in keys:
        if len(line) + len(" | ") + len(key) > _WIDTH:
            yield line
            line = indent + key
        else:
            line = f"{line} | {key}"
    yield line


def _equation(row: Row) -> str:
    if row.subject is None:
        return row.reaction.text
    text = f"{row.kind} of {row.subject.text}"
    products = [species for _, species in row.reaction.products]
    if row.kind == "neutralisation":
        text += f" with {row.reaction.reactants[1][1].text}"
    elif row.kind == "solution" and [(item.name, item.phase) for item in products] == [(row.subject.name, "aq")]:
        water = _IN_WATER.fullmatch(products[0].form)
        if water is not None:
            return f"{text} in {water[0] or 'H2O'}(l)"
    if row.kind in ("combustion", "solution", "dilution", "neutralisation"):
        text += f" to {', '.join(species.text for species in products)}"
    return text


def _row_keys(row: Row, of_step: Iterable[str] = ()) -> list[str]:
    """The heat first, then what belongs to a step, then where it comes from and what is kept."""
    keys = [] if row.heat is None else [f"{row.heat.key} {row.heat.text}"]
    keys.extend(of_step)
    if row.source:
        keys.append(f"source {_quoted(row.source)}")
    keys.extend(_setting(name, value) for name, value in row.settings)
    return keys


def _step_keys(step: Step) -> Iterator[str]:
    named: tuple[tuple[str, Measured | Species | None], ...] = (
        ("yield", step.yield_), ("T", step.temperature), ("conc", step.concentration), ("cp", step.heat_capacity),
        ("product", step.product), ("limiting", step.limiting), ("amount", step.amount),
    )  # fmt: skip
    if step.side_of:
        yield f"side of {step.side_of}"
    for name, value in named:
        if value is not None:
            yield f"{name} {value.text}"
    for species, equivalents in step.equivalents:
        yield f"equiv {decimal_text(equivalents)} of {species.text}"
    for recycle in step.recycles:
        yield f"recycle {recycle.species.text} from {recycle.source} {recycle.part.text}"
    if step.operation:
        yield step.operation
    if step.loss:
        yield f"loss {step.loss}"


def _setting(name: str, value: object) -> str:
    if value is True:
        return name
    if isinstance(value, Measured):
        return f"{name} {value.text}"
    return f"{name} {value}" if name in AS_TYPED else f"{name} {_quoted(str(value))}"


def _quoted(text: str) -> str:
    """A text in quotes, without what no sheet can hold: quotation marks, line ends, control characters."""
    line = plain_line(" ".join(text.splitlines())).text if not text.isprintable() else text
    return '"' + line.replace('"', "'")[:LONGEST_QUOTE] + '"'

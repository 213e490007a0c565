"""The view of one heat: the combination of known rows that gives it, its ledger, or why it is out of reach."""

from __future__ import annotations

from collections.abc import Mapping

import routeheat as rh
from routeheat.chem.row import Row
from routeheat.hess.combination import Combination
from routeheat.hess.ledger import sum_text
from routeheat.present.table import Column, Table
from routeheat_widgets._model import DeskModel
from routeheat_widgets._view import Control, Picture, View, contributors, select

_OTHERS = 5


class HeatView(View):
    """What is this heat, and why?"""

    key = "heat"
    tab = "One heat"
    question = "What is this heat, and why?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The target: a target of the sheet, or a step of a route."""
        offered = _targets(model)
        if not offered:
            return ()
        return (select("target", "Heat of", [(key, words) for key, (words, _, _) in offered.items()], options),)

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The combination with its ledger and the other combinations, or the reason why there is none."""
        offered = _targets(model)
        if not offered:
            return Picture(
                None,
                (),
                (),
                empty="No target and no step is typed yet. A target is a line like "
                "target [T] CH4(g) + 2 H2O(g) -> CO2(g) + 4 H2(g)",
            )
        _, row, code = offered[options["target"]]
        uses = frozenset([("known", label) for label in model.shown.known] + [_part(model, options["target"])])
        try:
            result = rh.combine(row, model.shown.known)
        except rh.OutOfReach as reason:
            refused = rh.Refusal(row.label, row.reaction, reason)
            refusing = (
                code,
                "try:",
                "    result = rh.combine(target, sheet.known)",
                "except rh.OutOfReach as reason:",
                "    result = rh.Refusal(target.label, target.reaction, reason)",
            )
            return Picture(None, refused.tables(), refusing, uses, name=options["target"])
        others = rh.alternatives(result, _OTHERS)
        tables = (*result.tables(), *(() if result.unique else (_other_table(result, others),)))
        lines = [code, "result = rh.combine(target, sheet.known)"]
        if not result.unique:
            lines.append(f"others = rh.alternatives(result, {_OTHERS})")
        details = {("direct", result.name): contributors(result.heat)}
        return Picture(result, tables, tuple(lines), uses, details, name=options["target"])


def _targets(model: DeskModel) -> dict[str, tuple[str, Row, str]]:
    """What can be asked for, by option: words for the reader, the row, the code that names it."""
    found: dict[str, tuple[str, Row, str]] = {}
    for label, row in model.shown.targets.items():
        found[f"target {label}"] = (f"target {label}", row, f"target = sheet.targets[{label!r}]")
    for name, route in model.shown.routes.items():
        for step in route.steps:
            if step.label not in route.used and not any(s.in_mixture for s in step.row.reaction.net):
                words = f"step {step.label} from known rows"
                code = f"target = sheet.routes[{name!r}].step({step.label!r}).row"
                found[f"step {step.label}"] = (words, step.row, code)
    return found


def _part(model: DeskModel, option: str) -> tuple[str, str]:
    kind, _, label = option.partition(" ")
    if kind == "target":
        return "target", label
    return "route", next(n for n, r in model.shown.routes.items() if any(s.label == label for s in r.steps))


def _other_table(result: Combination, others: tuple[Combination, ...]) -> Table:
    """Other combinations with their heats, and the cycles that lead from one to the next."""
    columns = (Column("combination", "other combination"), Column("heat", "heat", "kJ/mol", "right"))
    rows = tuple((sum_text(item.terms), item.heat.reading) for item in others)
    pool = {row.label: row for row in result.pool}
    cycles = [
        f"{name} adds {sum_text([(pool[label], c) for label, c in cycle.items() if c])}"
        for name, cycle in zip(result.parameters, result.cycles, strict=True)
    ]
    notes = (
        f"any multiple of a cycle may be added: {'; '.join(cycles)}",
        "combinations that differ in their heat show how well the known rows agree",
    )
    return Table("Not unique: what other rows give", columns, rows, notes)

"""A reconciliation as tables, sentences and JSON-safe content.

May import: :mod:`routeheat.present`.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from routeheat.present.numbers import MINUS, coverage
from routeheat.present.table import Cell, Column, Reading, Table

if TYPE_CHECKING:
    from routeheat.hess.reconcile import Reconciled

LARGE_RESIDUAL = 3.0
"""Normalised residual beyond which a row is named."""
_LISTED = 10
"""Suspects shown in the table."""


def verdict(item: Reconciled) -> str:
    """Whether the heats agree, and what was decided about it."""
    if item.p is None:
        return "no cycle with an uncertain row checks these heats: there is nothing to reconcile"
    if math.isinf(item.chi2):
        return (
            "heats without any uncertainty contradict each other: no adjusted value until one of them is excluded "
            "or gets an uncertainty"
        )
    statistics = f"chi-square {_general(item.chi2)} on {item.dof} degree{'s' if item.dof > 1 else ''} of freedom, "
    statistics += f"p = {_general(item.p)}, Birge ratio {_general(item.birge or 0.0)}"
    if not item.contradicts:
        return f"the heats agree within their uncertainties: {statistics}"
    if item.adjusted is None:
        return (
            f"the heats contradict each other: {statistics}; no adjusted value until a row is excluded or widened, "
            "or the contradiction is accepted with a reason"
        )
    accepted = next(choice for choice in item.choices if choice.kind == "accept")
    return (
        f"the heats contradict each other: {statistics}; {accepted.text}; the uncertainties of the adjusted "
        "heats are not enlarged for it"
    )


def _general(value: float) -> str:
    if math.isinf(value):
        return "infinite"
    return f"{value:.3g}".replace("-", MINUS)


def tables(item: Reconciled) -> tuple[Table, ...]:
    """Rows; then cycles and suspects, where there are any."""
    found = [table(item)]
    if item.cycles:
        found.append(_cycle_table(item))
    if item.suspects:
        found.append(_suspect_table(item))
    return tuple(found)


def table(item: Reconciled) -> Table:
    """One line a row, in the order given."""
    lines: list[tuple[Cell, ...]] = []
    for label, row in item.known.items():
        if label not in item.network.rows:
            heat = row.heat.typed if row.heat is not None else "no heat typed"
            lines.append((label, row.reaction.rich, heat, None, None, item.network.left_out[label]))
            continue
        residual = item.residuals[label]
        lines.append(
            (
                label,
                row.reaction.rich,
                item.network.heats[label].reading,
                _adjusted(item, label),
                residual,
                "no cycle checks it" if residual is None else "",
            )
        )
    columns = (
        Column("row", "row"),
        Column("equation", "equation"),
        Column("measured", "measured", "kJ/mol", "right"),
        Column("adjusted", "adjusted", "kJ/mol", "right"),
        Column("residual", "normalised residual", align="right", decimals=2),
        Column("remark", "remark"),
    )
    return Table("Known heats, reconciled", columns, tuple(lines), notes(item))


def _adjusted(item: Reconciled, label: str) -> Reading:
    if item.adjusted is None:
        return Reading(None, None, item.k, words="not given")
    return Reading(item.adjusted.value(label), item.adjusted.u(label), item.k)


def notes(item: Reconciled) -> tuple[str, ...]:
    """The verdict, every decision, large residuals, shared errors and temperatures."""
    found = [item.verdict]
    for choice in item.choices:
        needed = choice.kind != "accept" or item.contradicts
        found.append(choice.text if needed else f"nothing contradicts, so this is not needed: {choice.text}")
    large = [label for label, value in item.residuals.items() if value is not None and abs(value) > LARGE_RESIDUAL]
    if large:
        found.append(f"normalised residual beyond {LARGE_RESIDUAL:g}: {', '.join(large)}")
    shared: dict[str, list[str]] = {}
    for label, heat in item.network.heats.items():
        for datum, _ in heat.terms[1:]:
            shared.setdefault(datum.label, []).append(label)
    found += [
        f"{name}: its error is shared by {', '.join(labels)}, added to their own uncertainties"
        for name, labels in shared.items()
    ]
    found += dict.fromkeys(cycle.temperatures for cycle in item.cycles if cycle.temperatures)
    found.append(
        f"± is {coverage(item.k)}; exothermic is negative; a normalised residual is measured − adjusted over "
        "its standard uncertainty"
    )
    return tuple(found)


def _cycle_table(item: Reconciled) -> Table:
    lines = tuple(
        (cycle.text, float(cycle.misclosure.exact), cycle.u, "closes" if cycle.closes else "does not close")
        for cycle in item.cycles
    )
    columns = (
        Column("cycle", "cycle, kJ/mol"),
        Column("misclosure", "misclosure", "kJ/mol", "right", 2),
        Column("u", "its standard uncertainty", "kJ/mol", "right", 2),
        Column("verdict", ""),
    )
    open_ones = sum(not cycle.closes for cycle in item.cycles)
    rule = "a cycle closes when its misclosure is below twice its standard uncertainty"
    return Table("Cycles, smallest first", columns, lines, (f"{open_ones} of {len(lines)} do not close", rule))


def _suspect_table(item: Reconciled) -> Table:
    shown = item.suspects[:_LISTED]
    lines = tuple(
        (
            suspect.label,
            item.network.heats[suspect.label].reading,
            float(item.network.heats[suspect.label].exact) - suspect.gap,
            Reading(suspect.gap, suspect.gap_u, item.k),
            suspect.chi2,
            "nothing left to check" if suspect.p is None else _general(suspect.p),
        )
        for suspect in shown
    )
    columns = (
        Column("row", "left out"),
        Column("measured", "measured", "kJ/mol", "right"),
        Column("others", "what the others say", "kJ/mol", "right"),
        Column("gap", "difference", "kJ/mol", "right"),
        Column("chi2", "chi-square without it", align="right", decimals=2),
        Column("p", "p without it", align="right"),
    )
    found = []
    best = [suspect.label for suspect in item.suspects if f"{suspect.chi2:.6g}" == f"{shown[0].chi2:.6g}"]
    if len(best) > 1:
        found.append(f"the heats cannot tell these apart: {', '.join(best)}")
    if len(item.suspects) > len(shown):
        found.append(f"{len(item.suspects) - len(shown)} more rows explain less")
    return Table("Suspects: what leaving each row out does", columns, lines, tuple(found))


def to_dict(item: Reconciled) -> dict[str, Any]:
    """JSON-safe content; an infinite chi-square is ``None``."""
    return {
        "chi2": item.chi2 if math.isfinite(item.chi2) else None,
        "dof": item.dof,
        "p": item.p,
        "birge": item.birge if item.birge is not None and math.isfinite(item.birge) else None,
        "contradicts": item.contradicts,
        "verdict": item.verdict,
        "rows": [
            {
                "label": label,
                "measured": float(heat.exact),
                "u": heat.u,
                "adjusted": None if item.adjusted is None else item.adjusted.value(label),
                "u_adjusted": None if item.adjusted is None else item.adjusted.u(label),
                "residual": item.residuals[label],
            }
            for label, heat in item.network.heats.items()
        ],
        "left_out": dict(item.network.left_out),
        "cycles": [
            {
                "text": cycle.text,
                "coefficients": dict(cycle.coefficients),
                "misclosure": float(cycle.misclosure.exact),
                "u": cycle.u,
                "closes": cycle.closes,
                "temperatures": cycle.temperatures,
            }
            for cycle in item.cycles
        ],
        "suspects": [
            {
                "label": suspect.label,
                "gap": suspect.gap,
                "u": suspect.gap_u,
                "chi2": suspect.chi2,
                "dof": suspect.dof,
                "p": suspect.p,
            }
            for suspect in item.suspects
        ],
        "choices": [
            {"kind": choice.kind, "label": choice.label, "reason": choice.reason, "factor": str(choice.factor)}
            for choice in item.choices
        ],
        "notes": list(notes(item)),
        "unit": "kJ/mol",
    }

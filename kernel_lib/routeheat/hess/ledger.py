"""A combination as a chemist checks it: the ledger of species, the table of rows, the ladder of the two ways.

May import: :mod:`routeheat.hess.contained`, :mod:`routeheat.hess.warming`, :mod:`routeheat.chem`,
:mod:`routeheat.present`.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from fractions import Fraction

from routeheat.chem.balance import imbalance_text
from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Reaction, Term, add_net
from routeheat.chem.row import Row
from routeheat.hess.contained import double_counting
from routeheat.hess.warming import temperature_warning
from routeheat.present.ladder import Arrow, Ladder
from routeheat.present.ladder import Column as Chain
from routeheat.present.markup import Rich, Run, join
from routeheat.present.numbers import MINUS, coverage, fraction, number, reading
from routeheat.present.table import Cell, Column, Table

Terms = Sequence[tuple[Row, Fraction]]
"""Rows with their coefficients."""

REACTION_ENTHALPY: Rich = (Run("Δ"), Run("r", "sub"), Run("H", "italic"))
"""Symbol of the enthalpy of reaction (IUPAC Green Book, 3rd ed., 2.11.1 (i))."""


def sum_text(terms: Terms) -> str:
    """The combination in one line: ``K1 + 2 K2 − 1/2 K3``; ``nothing`` when there are no rows."""
    text = ""
    for row, c in terms:
        sign = (f" {MINUS} " if c < 0 else " + ") if text else (MINUS if c < 0 else "")
        text += sign + (f"{fraction(abs(c))} " if abs(c) != 1 else "") + row.label
    return text or "nothing"


def heat_of(row: Row, c: Fraction, k: float) -> HeatSum:
    """``c`` times the heat of a row, which must have one."""
    heat = row.heat_sum(k)
    assert heat is not None
    return heat.scaled(c)


def ledger(target: Reaction, name: str, terms: Terms, heat: HeatSum) -> Table:
    """Species against scaled rows: every line adds up to the target's stoichiometric number, or cancels to 0."""
    scaled = [{species: c * nu for species, nu in row.reaction.net.items()} for row, c in terms]
    total = add_net((c, row.reaction) for row, c in terms)
    wanted = target.net
    species = dict.fromkeys([*wanted, *(item for net in scaled for item in net)])
    columns = (
        Column("species", "species"),
        *(
            Column(f"row_{index}_{_slug(row.label)}", sum_text([(row, c)]), align="right")
            for index, (row, c) in enumerate(terms, 1)
        ),
        Column("sum", "sum", align="right"),
        Column("target", name, align="right"),
        Column("remark", ""),
    )
    lines: list[tuple[Cell, ...]] = []
    for item in species:
        cells: list[Cell] = [net.get(item) for net in scaled]
        sum_, goal = total.get(item, Fraction(0)), wanted.get(item, Fraction(0))
        lines.append((item.rich, *cells, sum_, goal, "" if goal else "cancels"))
    heats: list[Cell] = [heat_of(row, c, heat.k).reading for row, c in terms]
    lines.append((join([REACTION_ENTHALPY, " / (kJ/mol)"]), *heats, heat.reading, None, ""))
    return Table(
        f"Ledger of {name}: {target.text}",
        columns,
        tuple(lines),
        (f"{name} = {sum_text(terms)}", "sum equals target for every species", *_notes(target, terms, heat)),
        frozenset([len(lines) - 1]),
    )


def row_table(target: Reaction, name: str, terms: Terms, heat: HeatSum) -> Table:
    """One line per row used: coefficient, scaled equation, its heat, what it contributes, where it comes from."""
    lines: list[tuple[Cell, ...]] = []
    for row, c in terms:
        own, part = heat_of(row, Fraction(1), heat.k), heat_of(row, c, heat.k)
        spread: Cell = part.u if part.complete else "not stated"
        lines.append((row.label, c, row.reaction.scaled(c).rich, own.reading, part.reading, spread, row.source))
    total_u: Cell = heat.u if heat.complete else f"at least {number(heat.u, 2)}"
    if heat.terms and all(datum.u is None for datum, _ in heat.terms):
        total_u = "not stated"
    lines.append((name, None, target.rich, None, heat.reading, total_u, ""))
    columns = (
        Column("row", "row"),
        Column("coefficient", "coefficient", align="right"),
        Column("equation", "equation, scaled"),
        Column("heat", join([REACTION_ENTHALPY, " of the row"]), "kJ/mol", "right"),
        Column("contribution", "contribution", "kJ/mol", "right"),
        Column("u_contribution", "standard uncertainty contributed", "kJ/mol", "right", 2),
        Column("source", "source"),
    )
    notes = (f"{name} = {sum_text(terms)}", *_notes(target, terms, heat))
    return Table(f"{name}: {target.text}", columns, tuple(lines), notes, frozenset([len(lines) - 1]))


def ladder(target: Reaction, name: str, terms: Terms, heat: HeatSum) -> Ladder:
    """Two ways, one result: the scaled rows one after another, and the target beside them.

    Levels are cumulative and so are the whiskers ``k·u``. Behind an unknown heat the levels go on where they stood.
    """
    arrows = []
    level = HeatSum.zero(heat.k)
    unknown = []
    for row, c in terms:
        part = heat_of(row, c, heat.k)
        start = float(level.exact)
        level = level + part
        open_ended = bool(part.unknowns)
        if open_ended:
            unknown.append(row.label)
        arrows.append(
            Arrow(
                row.label,
                reading(part.reading, say_k=False),
                start,
                None if open_ended else float(level.exact),
                None if open_ended else _spread(level),
                "known",
                row.reaction.scaled(c).rich,
                _details(row, c, part),
                row.line or None,
                level.complete,
            )
        )
    symbolic = bool(heat.unknowns)
    direct = Arrow(
        name,
        reading(heat.reading, say_k=False),
        0.0,
        None if symbolic else float(heat.exact),
        None if symbolic else _spread(heat),
        "direct",
        target.rich,
        (("combination", f"{name} = {sum_text(terms)}"), ("heat", str(heat))),
        complete=heat.complete,
    )
    sides = (_side(target.reactants), _side(target.products))
    return Ladder(
        f"{name} = {sum_text(terms)}",
        (Chain("known rows", tuple(arrows), *sides), Chain("direct", (direct,), *sides)),
        REACTION_ENTHALPY,
        "kJ mol⁻¹",
        heat.k,
        notes=(
            *([f"heat of {', '.join(unknown)} not known: levels go on where they stood"] if unknown else []),
            *_notes(target, terms, heat),
        ),
        alt=f"Two ways to {name}. Over the known rows: "
        + "; ".join(f"{arrow.label} {arrow.caption}" for arrow in arrows)
        + f". Direct: {direct.caption} kJ/mol ({coverage(heat.k)}).",
    )


def _side(terms: Sequence[Term]) -> Rich:
    return join([join([fraction(c) + " ", species.rich]) if c != 1 else species.rich for c, species in terms], " + ")


def _spread(level: HeatSum) -> float | None:
    nothing = bool(level.terms) and all(datum.u is None for datum, _ in level.terms)
    return None if nothing else level.k * level.u


def _details(row: Row, c: Fraction, part: HeatSum) -> tuple[tuple[str, str], ...]:
    return (
        ("as typed", row.heat.typed if row.heat is not None else ""),
        ("coefficient", fraction(c)),
        ("contribution", str(part)),
        ("source", row.source or "not stated"),
        *((("estimated", "yes"),) if row.estimated else ()),
    )


def _notes(target: Reaction, terms: Terms, heat: HeatSum) -> tuple[str, ...]:
    notes = []
    if heat.not_stated:
        notes.append(f"uncertainty at least: {', '.join(heat.not_stated)} not stated")
    for label, reaction in [("the target", target), *((row.label, row.reaction) for row, _ in terms)]:
        if reaction.imbalance:
            notes.append(f"{label} does not balance and is used as typed: {imbalance_text(reaction)}")
        if reaction.unchecked:
            listed = ", ".join(species.text for species in reaction.unchecked)
            notes.append(f"{label}: balance not checked, formula of {listed} not known")
    notes += [remark for row, _ in terms for remark in row.remarks]
    notes += double_counting(terms)
    warning = temperature_warning(terms)
    return (*notes, warning) if warning else tuple(notes)


def _slug(label: str) -> str:
    return re.sub(r"[^a-z0-9]+", "_", label.lower()).strip("_") or "row"

"""A profile as a table, as a ladder and as JSON-safe content; and the diagram of single steps."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from routeheat.chem.heat import HeatSum
from routeheat.chem.reaction import Term
from routeheat.chem.route import Route
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.chem.step import Step
from routeheat.present.ladder import Arrow, Ladder
from routeheat.present.ladder import Column as LadderColumn
from routeheat.present.markup import Rich, Run, join
from routeheat.present.numbers import fraction, number, reading
from routeheat.present.table import Cell, Column, Reading, Table
from routeheat.process.heats import molar_heat
from routeheat.process.notes import figure_notes
from routeheat.units import ZERO_CELSIUS

if TYPE_CHECKING:
    from routeheat.process.profile import Profile, StepHeat

CUMULATIVE: Rich = (Run("cumulative Δ"), Run("r", "sub"), Run("H", "italic"))
REACTION_HEAT: Rich = (Run("Δ"), Run("r", "sub"), Run("H", "italic"))
_RISE: Rich = (Run("Δ"), Run("T", "italic"), Run("ad", "sub"))


def title(profile: Profile) -> str:
    """``Route A, over the nitro compound: cumulative heat per mole of product``."""
    return f"Route {profile.route.heading}: cumulative heat per {profile.basis.words}"


def table(profile: Profile) -> Table:
    """Steps in working order, side rows below a subtotal, the total last."""
    rises = any(item.adiabatic_rise is not None for item in profile.steps)
    columns = [
        Column("step", "step"),
        Column("equation", "equation"),
        Column("charged", "charged", "mol/mol", "right", 4),
        Column("heat_as_written", REACTION_HEAT, "kJ/mol", "right"),
        Column("heat", "heat", profile.unit, "right"),
        Column("cumulative", "cumulative", profile.unit, "right"),
        Column("heat_released", "heat released", profile.unit, "right"),
    ]
    if rises:
        columns.append(Column("adiabatic_rise", _RISE, "K", "right"))
    main = [item for item in profile.steps if not item.side]
    sides = [item for item in profile.steps if item.side]
    rows = [_row(item, rises) for item in main]
    strong = []
    word = "total" if profile.complete else "sum of entered steps"
    if sides:
        strong.append(len(rows))
        entered = all(item.heat is not None for item in main)
        rows.append(
            _sum_row(
                "steps without side rows" if entered else "entered steps without side rows",
                profile.total - profile.side_total,
                rises,
            )
        )
        rows += [_row(item, rises) for item in sides]
    strong.append(len(rows))
    rows.append(_sum_row(word, profile.total, rises))
    return Table(title(profile), tuple(columns), tuple(rows), profile.notes, frozenset(strong))


def _row(item: StepHeat, rises: bool) -> tuple[Cell, ...]:
    absent = Reading(None, None, words="not entered")
    label = f"{item.label} (side row of {item.step.side_of})" if item.side else item.label
    row: tuple[Cell, ...] = (
        label,
        item.step.row.reaction.rich,
        float(item.charged),
        absent if item.molar is None else item.molar.reading,
        absent if item.heat is None else item.heat.reading,
        sum_reading(item.cumulative),
        absent if item.heat is None else _released(item.heat),
    )
    return (*row, item.adiabatic_rise) if rises else row


def _sum_row(word: str, heat: HeatSum, rises: bool) -> tuple[Cell, ...]:
    row: tuple[Cell, ...] = (word, "", None, None, sum_reading(heat), None, _released(heat))
    return (*row, None) if rises else row


def _released(heat: HeatSum) -> Cell:
    return None if heat.unknowns or not heat.terms else -float(heat.exact)


def sum_reading(heat: HeatSum) -> Reading:
    """The reading of a sum; in words when nothing was entered, which must not be taken for zero."""
    return heat.reading if heat.terms else Reading(None, None, words="nothing entered")


def sum_text(heat: HeatSum, unit: str) -> str:
    """A sum with its unit, or words when nothing was entered."""
    return f"{heat.text} {unit}" if heat.terms else "nothing entered"


def ladder(profile: Profile) -> Ladder:
    """Cumulative levels in working order; caption = the step's own heat, whisker = the cumulative uncertainty."""
    notes = figure_notes([profile])
    column = ladder_column(profile)
    return Ladder(
        title(profile), (column,), CUMULATIVE, profile.basis.shown_unit, profile.k, notes=notes, alt=in_words(profile)
    )


def ladder_column(profile: Profile) -> LadderColumn:
    """The arrows of one route; a heat that is not a number leaves a labelled gap."""
    arrows = []
    level = 0.0
    for item in profile.steps:
        heat = item.heat
        known = heat is not None and not heat.unknowns
        end = float(item.cumulative.exact) if known else None
        spread = item.cumulative.reading.u if known and not item.cumulative.unknowns else None
        arrows.append(
            Arrow(
                item.label,
                "not entered" if heat is None else caption(heat),
                level,
                end,
                None if spread is None else profile.k * spread,
                "side" if item.side else "step",
                item.step.row.reaction.rich,
                _details(item, profile),
                item.step.row.line or None,
                item.cumulative.complete,
            )
        )
        level = level if end is None else end
    return LadderColumn(profile.route.heading, tuple(arrows), "", profile.route.makes.rich)


def caption(heat: HeatSum) -> str:
    """A heat beside its arrow, without the k that the diagram states once."""
    return heat.text if heat.unknowns else reading(heat.reading, say_k=False)


def _details(item: StepHeat, profile: Profile) -> tuple[tuple[str, str], ...]:
    found = [
        ("heat as written", "not entered" if item.molar is None else f"{item.molar.text} kJ/mol"),
        ("charged", f"{number(float(item.charged), 4)} mol {item.limiting} per mol of product"),
        ("cumulative", sum_text(item.cumulative, profile.unit)),
        ("origin", item.origin),
    ]
    if item.molar is not None and item.molar.estimated:
        found.append(("estimated", ", ".join(item.molar.estimated)))
    if item.temperature is not None:
        found.append(("at", f"{number(float(item.temperature - ZERO_CELSIUS), 0)} °C"))
    if item.step.row.source:
        found.append(("source", item.step.row.source))
    return tuple(found)


def in_words(profile: Profile) -> str:
    """The profile as one sentence."""
    parts = [f"{item.label} {'not entered' if item.heat is None else caption(item.heat)}" for item in profile.steps]
    word = "total" if profile.complete else f"sum of entered steps (not entered: {', '.join(profile.not_entered)})"
    return f"{title(profile)}: {'; '.join(parts)}; {word} {sum_text(profile.total, profile.unit)}."


def step_ladder(item: Route | Step, *, known: Mapping[str, Row] | None = None, k: float | None = None) -> Ladder:
    """Each step by itself: reactants at level 0, products at ΔrH, in kJ per mole of reaction as written.

    A step without a heat of its own is derived from ``known`` (for a route: the rows of its sheet). ``k`` defaults to
    the route's coverage factor, else 2.
    """
    steps = item.steps if isinstance(item, Route) else (item,)
    if isinstance(item, Route):
        rows: Mapping[str, Row] = item.known if known is None else known
        factor = item.k if k is None else k
        heading = f"Route {item.heading}: single steps"
    else:
        rows, factor = known or {}, 2.0 if k is None else k
        heading = f"Step {item.label}"
    columns = tuple(_single(step, rows, factor) for step in steps)
    words = "; ".join(f"{column.arrows[0].label} {column.arrows[0].caption}" for column in columns)
    notes = ("kJ per mole of reaction as written",)
    return Ladder(heading, columns, REACTION_HEAT, "kJ mol⁻¹", factor, notes=notes, alt=f"{heading}: {words}.")


def _single(step: Step, known: Mapping[str, Row], k: float) -> LadderColumn:
    molar = molar_heat(step, known, k)
    heat = molar.heat
    drawn = heat is not None and not heat.unknowns
    spread = heat.reading.u if heat is not None and drawn else None
    arrow = Arrow(
        step.label,
        "not entered" if heat is None else caption(heat),
        0.0,
        float(heat.exact) if heat is not None and drawn else None,
        None if spread is None else k * spread,
        "side" if step.side_of else "step",
        step.row.reaction.rich,
        (("origin", molar.origin),),
        step.row.line or None,
        heat is not None and heat.complete,
    )
    reaction = step.row.reaction
    return LadderColumn(step.label, (arrow,), _side(reaction.reactants), _side(reaction.products))


def _side(terms: tuple[Term, ...]) -> Rich:
    parts: list[Rich | str] = [join([fraction(c) + " ", s.rich]) if c != 1 else s.rich for c, s in terms]
    return join(parts, " + ")


def heat_dict(heat: HeatSum | None) -> dict[str, Any] | None:
    """A heat as JSON-safe content; ``None`` when it is not entered."""
    if heat is None:
        return None
    return {
        "value": None if heat.unknowns else float(heat.exact),
        "exact": str(heat.exact),
        "unknowns": {symbol: str(c) for symbol, c in heat.unknowns.items()},
        "u": heat.reading.u,
        "k": heat.k,
        "complete": heat.complete,
        "not_stated": list(heat.not_stated),
        "estimated": list(heat.estimated),
        "text": heat.text,
    }


def sum_dict(heat: HeatSum) -> dict[str, Any] | None:
    """A sum as JSON-safe content; ``None`` when nothing was entered."""
    return heat_dict(heat) if heat.terms else None


def to_dict(profile: Profile) -> dict[str, Any]:
    """JSON-safe content of a profile; exact numbers are texts."""
    largest, on_first = profile.largest_exotherm, profile.yield_on_first_reactant
    return {
        "route": profile.route.name,
        "title": title(profile),
        "makes": profile.route.makes.text,
        "per": profile.per,
        "unit": profile.unit,
        "k": profile.k,
        "steps": [_step_dict(item) for item in profile.steps],
        "total": sum_dict(profile.total),
        "complete": profile.complete,
        "side_total": sum_dict(profile.side_total),
        "total_if_reacted": sum_dict(profile.total_if("reacted")),
        "total_if_unreacted": sum_dict(profile.total_if("unreacted")),
        "largest_exotherm": None if largest is None else largest.label,
        "not_entered": list(profile.not_entered),
        "overall_yield": str(profile.overall_yield),
        "chain": list(profile.chain),
        "yield_on_first_reactant": None if on_first is None else str(on_first),
        "bought": _amounts(profile.bought),
        "leaving": _amounts(profile.leaving),
        "notes": list(profile.notes),
    }


def _step_dict(item: StepHeat) -> dict[str, Any]:
    rise = item.adiabatic_rise
    return {
        "label": item.label,
        "equation": item.step.row.reaction.text,
        "extent": str(item.extent),
        "charged": str(item.charged),
        "limiting": item.limiting.text,
        "product": None if item.product is None else item.product.text,
        "molar": heat_dict(item.molar),
        "heat": heat_dict(item.heat),
        "cumulative": sum_dict(item.cumulative),
        "origin": item.origin,
        "side_of": item.step.side_of,
        "loss": item.counted_loss,
        "adiabatic_rise": None if rise is None else {"value": rise.value, "u": rise.u, "at_least": rise.at_least},
    }


def _amounts(amounts: Mapping[Species, Fraction]) -> dict[str, str]:
    return {species.text: str(amount) for species, amount in amounts.items()}

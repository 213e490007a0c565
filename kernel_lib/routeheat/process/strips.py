"""The cooling-failure scenario of a step as dots on one temperature axis, its limits in words."""

from __future__ import annotations

from typing import TYPE_CHECKING

from routeheat.present.markup import Rich, Run, join, plain
from routeheat.present.numbers import decimals_for, number
from routeheat.present.strip import Dot, Group, Look, Row, Strip
from routeheat.process.assessed import NotAssessed, Value
from routeheat.process.cautions import SHORT, STOP, THRESHOLDS
from routeheat.process.limits import Limit

if TYPE_CHECKING:
    from routeheat.process.criticality import Criticality

AXIS: Rich = (Run("T", "italic"),)
UNIT = "°C"
_TP: Rich = (Run("T", "italic"), Run("p", "sub"))
_TD24: Rich = (Run("T", "italic"), Run("D24", "sub"))
KEY: tuple[tuple[Look, Rich | str], ...] = (
    ("ring", join([_TP, " process temperature"])),
    ("disc", "MTSR maximum temperature of the synthesis reaction, cooling failed"),
    ("diamond", "all at once: the same with everything charged at once"),
    ("square", "MTT boiling point or pressure limit"),
    ("triangle", join([_TD24, " decomposition within 24 h, adiabatic"])),
)
"""What each form means, ambient aside."""
NOTES = (
    "Thick line: rise from the process temperature to MTSR when cooling fails. What has no dot is not known.",
    f"{THRESHOLDS[0].upper()}{THRESHOLDS[1:]}. {SHORT}",
)


def strip(found: Criticality) -> Strip:
    """The scenario of one step."""
    return strip_of((Group("", (row(found),)),), f"{found.label}: temperatures when cooling fails", found.step.k)


def strip_of(groups: tuple[Group, ...], title: str, k: float, *notes: str) -> Strip:
    """Rows of steps on one temperature axis."""
    words = [_in_words(item, group.title) for group in groups for item in group.rows]
    return Strip(title, groups, AXIS, UNIT, k, _key(groups), (*notes, *NOTES), " ".join([f"{title}.", *words]))


def _key(groups: tuple[Group, ...]) -> tuple[tuple[Look, Rich | str], ...]:
    """What each form means; ambient with its temperature where all steps share one."""
    shared = {dot.caption for group in groups for item in group.rows for dot in item.dots if dot.look == "post"}
    ambient = f"ambient {shared.pop()} {UNIT}" if len(shared) == 1 else "ambient"
    return (*KEY, ("post", ambient))


def row(found: Criticality, line: int | None = None) -> Row:
    """The dots of one step, with its class and what is not known in words; ``line`` is where the step is typed."""
    step = found.step
    dots = [Dot("ambient", found.ambient, f"{number(found.ambient, 0)}", None, "post", reached=False)]
    bar = None
    if isinstance(step.process, Value):
        dots.append(_dot(_TP, step.process, step.k, "ring"))
    if step.exothermic is not False:
        if isinstance(step.misfeed_mtsr, Value):
            dots.append(_dot("all at once", step.misfeed_mtsr, step.k, "diamond"))
        if isinstance(step.mtsr, Value):
            dots.append(_dot("MTSR", step.mtsr, step.k, "disc"))
        if isinstance(step.process, Value) and isinstance(step.mtsr, Value):
            bar = (step.process.value, step.mtsr.value)
    limits: tuple[tuple[Rich | str, Limit | NotAssessed, Look], ...] = (
        ("MTT", step.mtt, "square"), (_TD24, step.td24, "triangle"),
    )  # fmt: skip
    for label, limit, look in limits:
        if isinstance(limit, Limit):
            dots.append(_dot(label, limit.celsius, step.k, look, reached=False))
    details = (("everything charged at once", found.misfeed.words),)
    return Row(step.label, tuple(dots), _words(found), STOP if found.stop else "", bar, details, line)


def _dot(label: Rich | str, item: Value, k: float, look: Look, *, reached: bool = True) -> Dot:
    spread = None if item.u is None else k * item.u
    return Dot(label, item.value, _caption(item, k), spread, look, reached, not item.at_least)


def _caption(item: Value, k: float) -> str:
    """Value and uncertainty to at most one decimal, the uncertainty never rounded down to nothing."""
    if item.u is None:
        return number(item.value, 0 if abs(item.value - round(item.value)) < 0.05 else 1)
    spread = k * item.u
    place = min(decimals_for(spread), 1) if spread else 1
    shown = number(max(spread, 0.1) if spread else 0.0, place)
    return f"{number(item.value, place)} ± {'≥ ' if item.at_least else ''}{shown}"


def _words(found: Criticality) -> tuple[str, ...]:
    """The class, then what is not entered, then each limit that is not typed as a temperature."""
    words = [*_verdict(found), *found.notices]
    for label, limit in (("MTT", found.step.mtt), ("TD24", found.step.td24)):
        if isinstance(limit, NotAssessed):
            words.append(f"{label}: {limit.reason}" if limit.reason else f"{label} not entered")
        elif limit.origin != "typed":
            words.append(f"{label}: {_origin(limit.origin)}")
    return tuple(words)


def _verdict(found: Criticality) -> list[str]:
    refused = found.as_run.at_values
    if not isinstance(refused, NotAssessed):
        same = found.misfeed.words == found.as_run.words
        return [found.as_run.words, *([] if same else [f"all at once: {found.misfeed.words}"])]
    others = [name for name in refused.missing if name not in ("MTT", "TD24")]
    words = [": ".join(part for part in (refused.what, refused.reason) if part and part != "none")]
    return [*words, f"{', '.join(others)} not entered"] if others else words


def _origin(text: str) -> str:
    """The first clause of where a limit comes from."""
    return text.split(",")[0].split(" (")[0]


def _in_words(item: Row, group: Rich | str) -> str:
    """One row as a sentence, for readers who cannot see the figure."""
    head = ", ".join(part for part in (plain(group), item.label) if part)
    values = ", ".join(f"{plain(dot.label)} {dot.caption} {UNIT}" for dot in item.dots)
    said = "; ".join(part for part in (item.warning, *item.words) if part)
    return f"{head}: {said}. {values}." if values else f"{head}: {said}."

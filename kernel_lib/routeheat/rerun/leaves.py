"""The data of a result as a flat list of values with names, and what moved between two of them."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from routeheat.present.numbers import MINUS
from routeheat.report.plain_json import exact, is_exact
from routeheat.rerun.restson import Path

_NUMBER = re.compile(rf"(?<![\w.])[-{MINUS}]?\d+(?:\.\d+)?(?![\w.]*\w)")
_RENDERED = ("value", "u", "exact", "text")
"""Keys of a value with its uncertainty that say the same in several ways."""
_LONGEST_NAME = 60
"""Characters of a sentence that name it."""


@dataclass(frozen=True, slots=True)
class Measure:
    """A number with its standard uncertainty, as a result states it."""

    value: Fraction | float | None
    u: float | None


Leaf = Measure | Fraction | float | str | bool | None


@dataclass(frozen=True, slots=True)
class Tolerance:
    """How far a number may move."""

    absolute: float = 0.0
    """In the unit of the value; for values that have an uncertainty."""
    relative: float = 1e-9
    """Part of the value; for every number."""
    of_uncertainty: float = 0.0
    """Part of the kept standard uncertainty of the value itself."""

    def covers(self, kept: Fraction | float, now: Fraction | float, u: float | None = None, *, measured: bool) -> bool:
        """Whether the two agree: within any of the tolerances that apply."""
        distance = abs(_difference(kept, now))
        allowed = self.relative * max(abs(float(kept)), abs(float(now)))
        if measured:
            allowed = max(allowed, self.absolute, self.of_uncertainty * (u or 0.0))
        return distance <= allowed

    @property
    def wide(self) -> bool:
        """True when measured values may move visibly."""
        return self.absolute > 0 or self.of_uncertainty > 0


@dataclass(frozen=True, slots=True)
class Moved:
    """One value that is not what was kept."""

    path: Path
    kept: Leaf
    now: Leaf
    missing: str = ""
    """``new`` or ``gone``, when only one of the two results has it."""

    @property
    def change(self) -> float | None:
        """Now minus kept, for numbers."""
        kept, now = _value(self.kept), _value(self.now)
        return None if kept is None or now is None else _difference(kept, now)


def _difference(kept: Fraction | float, now: Fraction | float) -> float:
    """Now minus kept, exactly where both are exact."""
    if isinstance(kept, Fraction) and isinstance(now, Fraction):
        return float(now - kept)
    return float(now) - float(kept)


def _value(leaf: Leaf) -> Fraction | float | None:
    if isinstance(leaf, Measure):
        return leaf.value
    return leaf if isinstance(leaf, Fraction | float) else None


def leaves(content: Any) -> dict[Path, Leaf]:
    """Every value of JSON-safe content by its path; items of a list are named by their label, route or pair."""
    return dict(_leaves(content, ()))


def _leaves(content: Any, path: Path) -> Iterator[tuple[Path, Leaf]]:
    if isinstance(content, dict):
        measure = "value" in content and "u" in content
        if measure:
            yield path, _measure(content)
        for key, item in content.items():
            if not (measure and key in _RENDERED):
                yield from _leaves(item, (*path, str(key)))
    elif isinstance(content, list):
        for name, item in zip(_names(content), content, strict=True):
            yield from _leaves(item, (*path, name))
    elif isinstance(content, bool) or content is None:
        yield path, content
    elif isinstance(content, int | float):
        yield path, Fraction(content) if isinstance(content, int) else content
    else:
        yield path, exact(content) if is_exact(content) else str(content)


def _measure(content: dict[str, Any]) -> Measure:
    value = content["value"]
    if value is not None and is_exact(content.get("exact")):
        value = exact(content["exact"])
    u = content["u"]
    number = value if value is None or isinstance(value, Fraction) else float(value)
    return Measure(number, None if u is None else float(u))


def _names(items: list[Any]) -> list[str]:
    if items and all(isinstance(item, str) for item in items):
        # a sentence is its own name: one that is added does not move the others
        names = [_NUMBER.sub("…", item)[:_LONGEST_NAME] for item in items]
    else:
        names = [_name(item) for item in items]
    distinct = len(set(names)) == len(names) and all(names)
    return names if distinct else [str(number) for number in range(1, len(items) + 1)]


def _name(item: Any) -> str:
    if not isinstance(item, dict):
        return ""
    if isinstance(item.get("first"), str) and isinstance(item.get("second"), str):
        return f"{item['first']} {item['second']}"
    name = item.get("label", item.get("route", ""))
    return name if isinstance(name, str) else ""


def moved(kept: dict[Path, Leaf], now: dict[Path, Leaf], tolerance: Tolerance) -> tuple[Moved, ...]:
    """What differs beyond the tolerance, in the order of the present result; what is gone comes last."""
    found = []
    for path, leaf in now.items():
        if path not in kept:
            found.append(Moved(path, None, leaf, "new"))
        elif not _agrees(kept[path], leaf, tolerance):
            found.append(Moved(path, kept[path], leaf))
    found += [Moved(path, leaf, None, "gone") for path, leaf in kept.items() if path not in now]
    return tuple(found)


def _agrees(kept: Leaf, now: Leaf, tolerance: Tolerance) -> bool:
    if isinstance(kept, Measure) and isinstance(now, Measure):
        return _measures_agree(kept, now, tolerance)
    if isinstance(kept, str) and isinstance(now, str):
        return kept == now or _sentences_agree(kept, now, tolerance)
    if isinstance(kept, Fraction | float) and isinstance(now, Fraction | float):
        return tolerance.covers(kept, now, measured=False)
    return type(kept) is type(now) and kept == now


def _measures_agree(kept: Measure, now: Measure, tolerance: Tolerance) -> bool:
    if (kept.value is None) != (now.value is None) or (kept.u is None) != (now.u is None):
        return False
    values = kept.value is None or now.value is None or tolerance.covers(kept.value, now.value, kept.u, measured=True)
    return values and (kept.u is None or now.u is None or tolerance.covers(kept.u, now.u, kept.u, measured=True))


def _sentences_agree(kept: str, now: str, tolerance: Tolerance) -> bool:
    """Sentences agree when only rounded numbers in them differ, and these no more than the values behind them may."""
    if _NUMBER.sub("", kept) != _NUMBER.sub("", now):
        return False
    for first, second in zip(_NUMBER.finditer(kept), _NUMBER.finditer(now), strict=True):
        texts = first.group().replace(MINUS, "-"), second.group().replace(MINUS, "-")
        if texts[0] == texts[1]:
            continue
        beside = "±" in kept[max(0, first.start() - 2) : first.end() + 2]
        rounded = beside or all("." in text for text in texts)
        numbers = Fraction(texts[0]), Fraction(texts[1])
        last_place = Fraction(1, 10 ** len(texts[0].partition(".")[2]))
        if not rounded:
            # a whole number in a sentence is a count or a coefficient
            return False
        if (
            not tolerance.wide
            and abs(numbers[1] - numbers[0]) > last_place
            and not tolerance.covers(*numbers, measured=False)
        ):
            return False
    return True

"""Text with subscripts, superscripts and italics, as a tuple of runs.

A :data:`Rich` text has one run per change of style. Painters and HTML render the styles; plain text drops them.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

Style = Literal["", "sub", "sup", "italic"]


@dataclass(frozen=True, slots=True)
class Run:
    """A piece of text in one style."""

    text: str
    style: Style = ""


Rich = tuple[Run, ...]


def plain(rich: Rich | str) -> str:
    """The characters of a rich text without their styles."""
    return rich if isinstance(rich, str) else "".join(run.text for run in rich)


def as_rich(text: Rich | str) -> Rich:
    """A rich text; a plain ``str`` becomes one unstyled run."""
    return (Run(text),) if isinstance(text, str) else text


def join(parts: list[Rich | str], separator: str = "") -> Rich:
    """Rich texts one after another, with a plain separator between them; neighbouring runs of one style merge."""
    runs: list[Run] = []
    for index, part in enumerate(parts):
        pieces = list(as_rich(part))
        if index and separator:
            pieces.insert(0, Run(separator))
        for run in pieces:
            if not run.text:
                continue
            if runs and runs[-1].style == run.style:
                runs[-1] = Run(runs[-1].text + run.text, run.style)
            else:
                runs.append(run)
    return tuple(runs)

"""Tables as pandas data frames, where pandas is installed."""

from __future__ import annotations

from typing import Any

from routeheat.present.flat import Flat, Plain, flat
from routeheat.present.markup import plain
from routeheat.present.table import Table


def frame(table: Table) -> Any:
    """The table as a ``pandas.DataFrame``, one row per row, units in the column names.

    A column with uncertainties becomes value, ``u(…)`` (standard uncertainty) and a remark; an unknown number is NaN
    and the remark says why. Exact fractions are text. Title and notes are in ``.attrs``.
    Raises ``ModuleNotFoundError`` when pandas is not installed.
    """
    try:
        import pandas
    except ModuleNotFoundError as problem:
        raise ModuleNotFoundError("a data frame needs pandas: pip install pandas", name="pandas") from problem
    content = flat(table)
    columns = {head.text: _column(content, index) for index, head in enumerate(content.heads)}
    made = pandas.DataFrame(columns, columns=[head.text for head in content.heads])
    made.attrs["title"] = plain(table.title)
    made.attrs["notes"] = list(table.notes)
    return made


def _column(content: Flat, index: int) -> list[Plain]:
    cells = [row[index] for row in content.rows]
    if content.heads[index].role in ("value", "u"):
        return [float(cell) if isinstance(cell, int | float) else float("nan") for cell in cells]
    if any(isinstance(cell, str) for cell in cells):
        # one fraction makes the column text, so that 2 and 3/2 compare as what they are
        return [str(cell) if isinstance(cell, int) else cell for cell in cells]
    return cells

"""The view of the known heats: a list to search, and the cycles that do not close."""

from __future__ import annotations

from collections.abc import Mapping

from routeheat.errors import RouteheatError
from routeheat.present.table import Table
from routeheat_widgets._bars import residual_bar, share_bar
from routeheat_widgets._model import DeskModel
from routeheat_widgets._quantities import asked
from routeheat_widgets._view import Bars, Control, Picture, View, select
from routeheat_widgets.known_heats import KnownHeats, known_heats, open_cycles, times_u

_NONE = "nothing"


class Known(View):
    """Do the known heats agree?"""

    key = "known"
    tab = "Known heats"
    question = "Which heats are known, and do they agree?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The list or the cycles, and the heat that contributions are to."""
        if not model.shown.known:
            return ()
        shows = [("list", "every known heat"), ("cycles", "cycles that do not close")]
        found = [select("known", "Show", shows, options)]
        heats = [(key, item.words) for key, item in asked(model).items()]
        # known rows make up targets; routes mostly rest on their own steps
        targets = [item for item in heats if item[0].startswith("target ")]
        others = [item for item in heats if item not in targets]
        if found[0].value == "list" and heats:
            found.append(select("of", "Contribution to", [*targets, (_NONE, "nothing"), *others], options))
        return tuple(found)

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The list, or the cycles with the suspects."""
        sheet = model.shown
        if not sheet.known:
            words = "No known heat is typed yet. They stand in a section that starts with the line known"
            return Picture(None, (), (), empty=words)
        uses = frozenset(("known", label) for label in sheet.known)
        if options["known"] == "cycles":
            cycles = open_cycles(sheet)
            code: tuple[str, ...] = ("import routeheat_widgets as rw", "result = rw.open_cycles(sheet)")
            if not cycles.cycles:
                words = "No cycle links the known heats: nothing checks one of them against the others."
                return Picture(None, (), code, uses, empty=words, name="cycles")
            marks = tuple(residual_bar(times_u(cycle), (2.0,)) for cycle in cycles.cycles)
            bars = (Bars(0, "times", marks),)
            return Picture(None, cycles.tables(), code, uses, name="cycles that do not close", bars=bars)
        of = asked(model).get(options.get("of", ""))
        if of is None:
            code = ("import routeheat_widgets as rw", "result = rw.known_heats(sheet)")
            return self._list(known_heats(sheet), code, uses, "")
        try:
            result = known_heats(sheet, of.make())
        except RouteheatError as problem:
            code = ("import routeheat_widgets as rw", "result = rw.known_heats(sheet)")
            said = f"No contributions to the {of.words}: {str(problem).splitlines()[0]}"
            return self._list(known_heats(sheet), code, uses, said)
        code = ("import routeheat_widgets as rw", f"of = {of.code}", "result = rw.known_heats(sheet, of)")
        return self._list(result, code, uses | of.uses, "")

    def _list(self, result: KnownHeats, code: tuple[str, ...], uses: frozenset[tuple[str, str]], said: str) -> Picture:
        table = result.table()
        bars = [Bars(0, "residual", tuple(map(residual_bar, _numbers(table, "residual"))))]
        if result.heat is not None:
            shares = (None if value is None else value / 100 for value in _numbers(table, "share"))
            bars.append(Bars(0, "share", tuple(map(share_bar, shares))))
        return Picture(None, (table,), code, uses, empty=said, name="known heats", bars=tuple(bars), search=True)


def _numbers(table: Table, key: str) -> list[float | None]:
    """The numbers of a column; ``None`` where words stand."""
    index = [column.key for column in table.columns].index(key)
    return [cell if isinstance(cell := row[index], float) else None for row in table.rows]

"""The view of what to measure next: which single measurement would shrink the uncertainty that matters."""

from __future__ import annotations

from collections.abc import Mapping

from routeheat.errors import RouteheatError
from routeheat_widgets._bars import remaining_bar, share_bar
from routeheat_widgets._model import DeskModel
from routeheat_widgets._quantities import asked
from routeheat_widgets._view import Bars, Control, Picture, View, select
from routeheat_widgets.measure_next import measure_next


class Measure(View):
    """What to measure next?"""

    key = "measure"
    tab = "Measure next"
    question = "Which one measurement would tell most?"

    def controls(self, model: DeskModel, options: Mapping[str, str]) -> tuple[Control, ...]:
        """The heat that matters, and how well a new measurement would know a heat."""
        heats = [(key, item.words) for key, item in asked(model).items()]
        if not heats:
            return ()
        typed = options.get("attainable", "").strip()
        hint = "" if typed else "not typed: perfect measurements (u = 0), the most that each could do"
        return (
            select("of", "For", heats, options),
            Control("attainable", "Measured to u", typed, unit="kJ/mol", hint=hint),
        )

    def render(self, model: DeskModel, options: Mapping[str, str]) -> Picture:
        """The measurements with what they leave, and what the uncertainty is made of now."""
        offered = asked(model)
        if not offered:
            words = "No route and no target is typed yet: there is no heat that a measurement could settle."
            return Picture(None, (), (), empty=words)
        of = offered[options["of"]]
        attainable = _number(options["attainable"])
        sheet = model.shown
        result = measure_next(sheet, of.make(), attainable=attainable)
        code = (
            "import routeheat_widgets as rw",
            f"of = {of.code}",
            f"result = rw.measure_next(sheet, of, attainable={attainable!r})",
        )
        uses = frozenset(
            [("known", label) for label in sheet.known] + [("route", name) for name in sheet.routes]
        ) | of.uses  # fmt: skip
        column = "u_after"
        left = tuple(remaining_bar(item.u_after, item.u_least, result.heat.u) for item in result.effects)
        shares = tuple(share_bar(part.share) for part in result.contributions)
        bars = (Bars(0, column, left), Bars(1, "share", shares))
        return Picture(
            None, result.tables(), code, uses, empty=result.sentence, name=f"measure next for {of.words}", bars=bars
        )


def _number(text: str) -> float:
    """A typed uncertainty in kJ/mol; nothing typed is a perfect measurement."""
    try:
        value = float(text or 0)
    except ValueError:
        value = -1.0
    if not 0 <= value < 1e9:
        raise RouteheatError(f"{text[:20]!r} is no uncertainty in kJ/mol: like 5, or 0 for a perfect measurement")
    return value

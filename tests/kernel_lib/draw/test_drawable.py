"""Results of every shape reach the same painters."""

from __future__ import annotations

from dataclasses import dataclass

import pytest

from routeheat.draw import as_drawing, draw, paper_bytes, svg
from routeheat.draw.decks import natural_width, stack
from routeheat.draw.printing import printable_drawing, unit_in_parentheses
from routeheat.present.curve import Curve
from routeheat.present.ladder import Ladder
from routeheat.present.markup import Run, plain
from routeheat.present.strip import Dot, Group, Row, Strip

STRIP = Strip("Title", (Group("G", (Row("A", (Dot("Tp", 20.0, "20", None, "ring"),)),)),), (Run("T"),), "°C", 2.0)
CURVE = Curve("Title", ((1.0, 50.0), (2.0, 25.0)), (Run("time"),), "h", (Run("load"),), "%")


@dataclass
class WithStrip:
    shape: object

    def strip(self) -> object:
        return self.shape


@dataclass
class WithCurve:
    shape: object

    def curve(self) -> object:
        return self.shape


def test_a_result_is_drawn_as_what_it_has() -> None:
    assert as_drawing(WithStrip(STRIP)) is STRIP  # type: ignore[arg-type]
    assert as_drawing(WithCurve(CURVE)) is CURVE  # type: ignore[arg-type]
    assert svg(WithStrip(STRIP)) == svg(STRIP)  # type: ignore[arg-type]


def test_what_gives_another_shape_is_refused() -> None:
    with pytest.raises(TypeError, match=r"strip\(\) gave Curve, not a Strip"):
        as_drawing(WithStrip(CURVE))  # type: ignore[arg-type]
    with pytest.raises(TypeError, match="no ladder, strip or curve"):
        as_drawing(42)  # type: ignore[arg-type]


@pytest.mark.parametrize("drawing", [STRIP, CURVE])
def test_every_painter_takes_it(drawing: Strip | Curve) -> None:
    assert str(svg(drawing)).startswith("<svg ")
    assert svg(drawing)._repr_mimebundle_()["text/plain"] == "Title"
    assert len(draw(drawing).data) > 0
    assert paper_bytes(drawing, "png").startswith(b"\x89PNG")


@pytest.mark.parametrize("drawing", [STRIP, CURVE])
def test_a_report_gives_it_a_width(drawing: Strip | Curve) -> None:
    assert stack(drawing, 500.0).width == 500.0
    assert natural_width(drawing) >= 500.0


def test_axes_may_write_the_unit_in_parentheses() -> None:
    changed = unit_in_parentheses(CURVE)
    assert isinstance(changed, Curve)
    assert (plain(changed.axis), plain(changed.along)) == ("load (%)", "time (h)")
    assert (changed.unit, changed.along_unit) == ("", "")


def test_characters_that_print_lacks_are_replaced_and_said() -> None:
    lacking = "\N{CUNEIFORM SIGN A}"
    row = Row(lacking, (Dot("Tp", 20.0, "20", None, "ring"),))
    changed = printable_drawing(Strip("Title", (Group("G", (row,)),), (Run("T"),), "°C", 2.0))
    assert isinstance(changed, Strip)
    assert lacking not in changed.rows[0].label
    assert any("print font lacks" in note for note in changed.notes)


def test_a_ladder_still_prints(one_step: Ladder) -> None:
    assert paper_bytes(one_step, "svg", axis_style="quantity (unit)").startswith(b"<?xml")

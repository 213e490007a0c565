from __future__ import annotations

import subprocess
import sys
import xml.etree.ElementTree as ET
from collections.abc import Callable
from dataclasses import dataclass

import pytest

from routeheat.draw import as_ladder, svg
from routeheat.draw import draw as draw_figure
from routeheat.errors import UnknownName
from routeheat.present.ladder import Ladder


@dataclass
class Result:
    shape: object

    def ladder(self) -> object:
        return self.shape


def test_a_ladder_and_a_result_that_has_one_draw_the_same(one_step: Ladder) -> None:
    assert svg(one_step) == svg(Result(one_step))  # type: ignore[arg-type]
    assert draw_figure(Result(one_step)).to_json() == draw_figure(one_step).to_json()  # type: ignore[arg-type]


@pytest.mark.parametrize("thing", [42, "text", Result("no ladder")])
def test_what_has_no_ladder_is_refused(thing: object) -> None:
    with pytest.raises(TypeError, match="adder"):
        as_ladder(thing)  # type: ignore[arg-type]


def test_width_is_passed_on(one_step: Ladder) -> None:
    assert ET.fromstring(svg(one_step, width=812)).get("width") == "812"


@pytest.mark.parametrize("function", [svg, draw_figure])
def test_an_unknown_keyword_is_refused_by_name(function: Callable[..., object], one_step: Ladder) -> None:
    with pytest.raises(UnknownName, match="colour"):
        function(one_step, colour="red")


def test_importing_the_drawing_layer_does_not_import_plotly() -> None:
    code = "import sys, routeheat.draw; sys.exit('plotly' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0

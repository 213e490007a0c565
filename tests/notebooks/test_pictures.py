"""The README's pictures are what the example notebooks draw; run as a script, this module redraws them."""

from __future__ import annotations

import ast
import json
from pathlib import Path

import pytest

import routeheat as rh
from routeheat.draw import as_drawing, static_svg

ROOT = Path(__file__).parents[2]
NOTEBOOKS = ROOT / "example_notebooks"


def sheet_of(notebook: str) -> rh.Sheet:
    """The sheet that is typed in a notebook, as the text of its first ``rh.read_sheet`` call."""
    cells = json.loads((NOTEBOOKS / notebook).read_text(encoding="utf-8"))["cells"]
    for cell in cells:
        if cell["cell_type"] != "code":
            continue
        for node in ast.walk(ast.parse("".join(cell["source"]))):
            if isinstance(node, ast.Assign) and ast.unparse(node.targets[0]) == "TEXT":
                return rh.read_sheet(ast.literal_eval(node.value))
            if isinstance(node, ast.Call) and ast.unparse(node.func) == "rh.read_sheet":
                return rh.read_sheet(ast.literal_eval(node.args[0]))
    raise LookupError(f"{notebook} reads no sheet")


def comparison() -> str:
    return static_svg(as_drawing(rh.compare_routes(sheet_of("01_comparing_two_routes.ipynb").routes)))


def combination() -> str:
    sheet = sheet_of("02_what_is_this_heat.ipynb")
    return static_svg(as_drawing(rh.combine(sheet.targets["T1"], sheet.known)))


def scale() -> str:
    sheet = sheet_of("06_from_bench_to_jacket.ipynb")
    return static_svg(as_drawing(rh.compare_at_scale(sheet.routes)))


PICTURES = {"comparison.svg": comparison, "combination.svg": combination, "scale.svg": scale}


@pytest.mark.parametrize("name", PICTURES)
def test_the_readme_shows_what_the_notebooks_draw(name: str) -> None:
    assert (NOTEBOOKS / "pictures" / name).read_text(encoding="utf-8") == PICTURES[name]()
    assert f"example_notebooks/pictures/{name}" in (ROOT / "README.md").read_text(encoding="utf-8")


if __name__ == "__main__":
    for name, draw in PICTURES.items():
        (NOTEBOOKS / "pictures" / name).write_text(draw(), encoding="utf-8")

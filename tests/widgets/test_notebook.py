"""A notebook with a desk: the same outputs every time, small, and with its figure where there is no kernel."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import nbformat
import pytest
from nbclient import NotebookClient
from nbconvert import HTMLExporter

ROOT = Path(__file__).parents[2]
LIMIT = 1_000_000
LIVE = "application/vnd.jupyter.widget-view+json"


@pytest.fixture(scope="module")
def executed() -> list[Any]:
    """One notebook, executed twice."""
    folders = [str(ROOT / "kernel_lib"), str(ROOT / "widgets")]
    text = (
        "uncertainty k = 2\n\nroute A makes C2H6O(l)\n  [A1] C2H4(g) + H2O(l) -> C2H6O(l)\n"
        "       dH -44 ± 2 kJ/mol | yield 95 %\n"
    )
    source = f"import sys\nsys.path[:0] = {folders!r}\nimport routeheat_widgets as rw\nrw.RouteDesk(text={text!r})"
    found = []
    for _ in range(2):
        notebook = nbformat.v4.new_notebook(cells=[nbformat.v4.new_code_cell(source, id="desk")])
        NotebookClient(notebook, kernel_name="python3", timeout=120).execute()
        found.append(notebook)
    return found


def test_everything_that_is_compared_is_the_same_in_every_run(executed: list[Any]) -> None:
    def compared(notebook: Any) -> list[dict[str, str]]:
        return [
            {kind: text for kind, text in output["data"].items() if kind != LIVE}
            for output in notebook.cells[0].outputs
        ]

    first, second = map(compared, executed)
    assert first == second
    assert [output["output_type"] for output in executed[0].cells[0].outputs] == ["display_data"] * 2


def test_the_notebook_stays_small_with_all_it_stores(executed: list[Any]) -> None:
    stored = nbformat.writes(executed[0])
    assert json.loads(stored)["metadata"]["widgets"]
    assert len(stored) < LIMIT / 4


@pytest.mark.parametrize("keep_state", [True, False])
def test_a_converted_page_shows_the_figure_without_a_kernel(executed: list[Any], keep_state: bool) -> None:
    notebook = nbformat.reads(nbformat.writes(executed[0]), as_version=4)
    if not keep_state:
        del notebook.metadata["widgets"]
    page, _ = HTMLExporter().from_notebook_node(notebook)
    assert 'src="data:image/svg+xml;base64,' in page
    assert "RouteDesk: 1 route" in page or keep_state
    assert len(page) < LIMIT

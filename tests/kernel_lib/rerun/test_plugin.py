"""The pytest plugin, in a pytest of its own."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import nbformat
import pytest

HEATS = """
import routeheat as rh

def combination(heat):
    row = rh.row("K1", "formation of H2O(l)", heat)
    return rh.combine(rh.read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), [row])
"""
TEST = """
from heats import combination

def test_water(heat_reference):
    heat_reference("water", combination({!r}))
"""
FIRST, SECOND = "-285.83 ± 0.04 kJ/mol (k = 2)", "-286.83 ± 0.04 kJ/mol (k = 2)"


def _run(folder: Path, *options: str, **environment: str) -> tuple[int, str]:
    own = ("CI", "ROUTEHEAT_REFRESH", "PYTEST_ADDOPTS")
    clean = {name: value for name, value in os.environ.items() if name not in own}
    # plugins by name, so that it does not matter whether the package is installed
    plugins = ["-p", "no:cacheprovider", "-p", "routeheat.rerun.plugin", "-p", "nbval.plugin"]
    done = subprocess.run(
        [sys.executable, "-m", "pytest", "-q", *plugins, *options],
        cwd=folder, env={**clean, "PYTEST_DISABLE_PLUGIN_AUTOLOAD": "1", **environment},
        capture_output=True, text=True, check=False, timeout=300,
    )  # fmt: skip
    return done.returncode, done.stdout + done.stderr


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "heats.py").write_text(HEATS, encoding="utf-8")
    (tmp_path / "test_water.py").write_text(TEST.format(FIRST), encoding="utf-8")
    return tmp_path


def test_keep_check_move_and_refresh(folder: Path) -> None:
    code, shown = _run(folder)
    assert code == 0, shown
    assert "routeheat references written, not checked" in shown
    assert f"kept: {folder / 'references' / 'water.json'}" in shown
    code, shown = _run(folder)
    assert (code, "written" in shown) == (0, False), shown
    (folder / "test_water.py").write_text(TEST.format(SECOND), encoding="utf-8")
    code, shown = _run(folder)
    assert code == 1
    assert "reference water: 1 value moved" in shown
    assert "dH -285.83 ± 0.04 kJ/mol (k = 2)" in shown
    code, shown = _run(folder, "--routeheat-refresh")
    assert code == 0, shown
    assert "refreshed: " in shown
    assert _run(folder)[0] == 0


def test_in_ci_a_missing_reference_fails(folder: Path) -> None:
    code, shown = _run(folder, CI="1")
    assert code == 1
    assert "keep it on your machine and commit" in shown
    assert not (folder / "references").exists()


def test_two_tests_cannot_share_a_reference(folder: Path) -> None:
    (folder / "test_more.py").write_text(TEST.format(SECOND), encoding="utf-8")
    code, shown = _run(folder, "--routeheat-refresh")
    assert code == 1
    assert "two results under one name: reference water is used by test_more.py::test_water already" in shown


def test_the_recipe_for_notebooks(folder: Path) -> None:
    """A notebook whose printed output does not show the change fails all the same, and can be refreshed."""
    code = "import routeheat as rh\nfrom routeheat.rerun.reference import reference\nfrom heats import combination\n"
    code += f"reference('water', combination({FIRST!r})).name"
    book = nbformat.v4.new_notebook(cells=[nbformat.v4.new_code_cell(code)])
    book.metadata["kernelspec"] = {"name": "python3", "display_name": "Python 3", "language": "python"}
    path = folder / "water.ipynb"
    nbformat.write(book, path)
    options = ("--nbval-lax", "--nbval-current-env", "water.ipynb")
    status, shown = _run(folder, *options)
    assert status == 0, shown
    kept = json.loads((folder / "references" / "water.json").read_text(encoding="utf-8"))
    assert kept["result"]["heat"]["value"] == -285.83
    book.cells[0].source = code.replace(FIRST, SECOND)
    nbformat.write(book, path)
    status, shown = _run(folder, *options)
    assert status == 1
    assert "reference water: 1 value moved" in shown
    status, shown = _run(folder, *options, "--routeheat-refresh")
    assert status == 0, shown
    kept = json.loads((folder / "references" / "water.json").read_text(encoding="utf-8"))
    assert kept["result"]["heat"]["value"] == -286.83

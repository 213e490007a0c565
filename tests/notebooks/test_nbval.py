"""The example notebooks are regression tests: they pass unmodified, and a changed heat makes them fail."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

NOTEBOOKS = Path(__file__).parents[2] / "example_notebooks"
SOURCES = os.pathsep.join(str(Path(__file__).parents[2] / folder) for folder in ("kernel_lib", "widgets"))


def rerun(notebook: Path) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "pytest", "--nbval", "--nbval-current-env", "-p", "no:cacheprovider", "-q", "-c",
         os.devnull, "--rootdir", str(notebook.parent), str(notebook)],
        capture_output=True, text=True, check=False, env={**os.environ, "PYTHONPATH": SOURCES},
    )  # fmt: skip


@pytest.mark.parametrize("name", sorted(path.name for path in NOTEBOOKS.glob("*.ipynb")))
def test_notebook_reruns_unmodified(name: str) -> None:
    done = rerun(NOTEBOOKS / name)
    assert done.returncode == 0, done.stdout[-3000:]


def test_a_changed_heat_makes_the_notebook_fail(tmp_path: Path) -> None:
    text = (NOTEBOOKS / "02_what_is_this_heat.ipynb").read_text(encoding="utf-8")
    assert text.count("-283.0 ± 0.3") == 1
    copy = tmp_path / "changed.ipynb"
    copy.write_text(text.replace("-283.0 ± 0.3", "-283.4 ± 0.3"), encoding="utf-8")
    done = rerun(copy)
    assert done.returncode == 1
    assert "-283.4" in done.stdout or "283.40" in done.stdout


@pytest.mark.parametrize("name", sorted(path.name for path in NOTEBOOKS.glob("*.ipynb")))
def test_notebook_is_small_and_says_nothing_of_this_machine(name: str) -> None:
    text = (NOTEBOOKS / name).read_text(encoding="utf-8")
    assert len(text.encode()) < 1_000_000
    for cell in json.loads(text)["cells"]:
        assert "/home/" not in "".join(cell["source"])

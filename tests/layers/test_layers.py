"""The house stands as it is drawn: public names, packages, imports."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import routeheat as rh

ROOT = Path(__file__).parents[2]
SOURCES = sorted([*(ROOT / "kernel_lib").rglob("*.py"), *(ROOT / "widgets").rglob("*.py")])


def test_every_public_name_is_sorted_listed_and_there() -> None:
    assert list(rh.__all__) == sorted(rh.__all__)
    assert dir(rh) == list(rh.__all__)
    for name in rh.__all__:
        assert not isinstance(getattr(rh, name), type(sys)), f"{name} is a module, not a name"


def test_source_roots_are_plain_folders() -> None:
    assert not (ROOT / "kernel_lib" / "__init__.py").exists()
    assert not (ROOT / "widgets" / "__init__.py").exists()


@pytest.mark.parametrize("path", SOURCES, ids=lambda path: str(path.relative_to(ROOT)))
def test_nobody_imports_through_the_source_root(path: Path) -> None:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    names = [alias.name for node in ast.walk(tree) if isinstance(node, ast.Import) for alias in node.names] + [
        node.module or "" for node in ast.walk(tree) if isinstance(node, ast.ImportFrom)
    ]
    assert not [name for name in names if name.startswith(("kernel_lib", "widgets"))]


@pytest.mark.parametrize("heavy", ["numpy", "pint", "sympy", "plotly", "pandas", "matplotlib", "ipywidgets", "IPython"])
def test_import_is_light(heavy: str) -> None:
    code = f"import sys, routeheat; sys.exit({heavy!r} in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_every_package_says_its_purpose_and_what_it_may_import() -> None:
    for init in (ROOT / "kernel_lib").rglob("__init__.py"):
        docstring = ast.get_docstring(ast.parse(init.read_text(encoding="utf-8"))) or ""
        assert "May import" in docstring, init


def test_the_tour_in_the_package_docstring_runs() -> None:
    import doctest

    result = doctest.testmod(rh)
    assert result.attempted >= 4
    assert result.failed == 0

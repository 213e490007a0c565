"""Fixtures of the browser tests: one JupyterLab a session, one page a test."""

from __future__ import annotations

import importlib.util
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

# test folders are no packages, so the helper module beside this file is loaded by its path
_spec = importlib.util.spec_from_file_location("browser_lab", Path(__file__).with_name("lab.py"))
assert _spec is not None
assert _spec.loader is not None
browser_lab = importlib.util.module_from_spec(_spec)
sys.modules["browser_lab"] = browser_lab
_spec.loader.exec_module(browser_lab)


@pytest.fixture(scope="session")
def lab(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Any]:
    with browser_lab.start_lab(tmp_path_factory.mktemp("lab")) as running:
        yield running


@pytest.fixture(scope="session")
def browser() -> Iterator[Any]:
    sync_api = pytest.importorskip("playwright.sync_api")
    with sync_api.sync_playwright() as playwright:
        running = browser_lab.launch(playwright)
        yield running
        running.close()


@pytest.fixture
def sight(lab: Any, browser: Any) -> Iterator[Any]:
    page = browser.new_page(viewport={"width": 1280, "height": 800})
    seen = browser_lab.Sight(page, lab)
    seen.watch()
    yield seen
    if not page.is_closed():
        page.evaluate("window.jupyterapp?.serviceManager.sessions.shutdownAll()")
        page.close()

"""What holds for the whole test suite. With NO_SKIPS set, as in CI, a skipped test fails."""

from __future__ import annotations

import os
from collections.abc import Generator

import pytest
from hypothesis import settings

# machines are noisy, so no deadlines; the same examples every time, so that a failure can be repeated
settings.register_profile("routeheat", deadline=None, derandomize=True)
settings.load_profile("routeheat")


def pytest_collection_modifyitems(config: pytest.Config, items: list[pytest.Item]) -> None:
    """Browser tests run when they are asked for with ``-m browser``."""
    if "browser" in str(config.getoption("-m")):
        return
    kept = [item for item in items if item.get_closest_marker("browser") is None]
    config.hook.pytest_deselected(items=[item for item in items if item not in kept])
    items[:] = kept


@pytest.hookimpl(wrapper=True)
def pytest_runtest_makereport() -> Generator[None, pytest.TestReport, pytest.TestReport]:
    report = yield
    if report.skipped and os.environ.get("NO_SKIPS"):
        report.outcome = "failed"
        report.longrepr = f"skipped, but no skip is allowed here: {report.longrepr}"
    return report

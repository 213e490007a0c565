"""The pytest plugin: the option ``--routeheat-refresh`` and the fixture ``heat_reference``.

May import: :mod:`routeheat.rerun.reference` and pytest.
"""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from routeheat.errors import RouteheatError
from routeheat.rerun.reference import REFRESH_VARIABLE, Reference, reference

_OWNERS = pytest.StashKey[dict[Path, str]]()
_BEFORE = pytest.StashKey[str | None]()
_PROPERTY = "routeheat reference"

HeatReference = Callable[..., Reference]
"""``heat_reference(name, result, store=None, **options)``: see :func:`routeheat.rerun.reference.reference`."""


def pytest_addoption(parser: pytest.Parser) -> None:
    """Add the option."""
    parser.getgroup("routeheat").addoption(
        "--routeheat-refresh", action="store_true",
        help="keep the present results as references instead of checking them (also in notebooks under nbval)",
    )  # fmt: skip


def pytest_configure(config: pytest.Config) -> None:
    """Pass the option on through the environment, which the kernels of notebooks inherit."""
    config.stash[_OWNERS] = {}
    if config.getoption("--routeheat-refresh"):
        config.stash[_BEFORE] = os.environ.get(REFRESH_VARIABLE)
        os.environ[REFRESH_VARIABLE] = "1"


def pytest_unconfigure(config: pytest.Config) -> None:
    """Leave the environment as it was."""
    if _BEFORE in config.stash:
        before = config.stash[_BEFORE]
        if before is None:
            os.environ.pop(REFRESH_VARIABLE, None)
        else:
            os.environ[REFRESH_VARIABLE] = before


@pytest.fixture
def heat_reference(request: pytest.FixtureRequest) -> HeatReference:
    """Keep a result beside the test, in ``references``, or check it: ``heat_reference("routes", comparison)``.

    Takes the options of :func:`routeheat.rerun.reference.reference`. Two tests, or two calls in one test, that use one
    file raise :class:`~routeheat.errors.RouteheatError`.
    """
    owners = request.config.stash[_OWNERS]
    used: set[Path] = set()

    def check(name: str, result: Any, store: str | Path | None = None, **options: Any) -> Reference:
        folder = request.path.parent / "references" if store is None else Path(store)
        place = (folder / name).absolute()
        owner = owners.setdefault(place, request.node.nodeid)
        if owner != request.node.nodeid or place in used:
            raise RouteheatError(f"two results under one name: reference {name} is used by {owner} already")
        used.add(place)
        found = reference(name, result, folder, **options)
        if found.status != "agrees":
            request.node.user_properties.append((_PROPERTY, f"{found.status}: {found.path}"))
        return found

    return check


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter) -> None:
    """Name the references that were written: they were not checked, and want to be committed."""
    reports = (report for reports in terminalreporter.stats.values() for report in reports)
    lines = dict.fromkeys(
        str(text) for report in reports for name, text in getattr(report, "user_properties", ()) if name == _PROPERTY
    )
    if lines:
        terminalreporter.section("routeheat references written, not checked: look at them and commit them")
        for line in sorted(lines):
            terminalreporter.write_line(line)

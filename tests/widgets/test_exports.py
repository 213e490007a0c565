"""The public names are the real ones."""

from __future__ import annotations

import doctest

import routeheat_widgets as rw


def test_the_public_names_exist_and_are_sorted() -> None:
    assert list(rw.__all__) == sorted(rw.__all__)
    assert all(hasattr(rw, name) for name in rw.__all__)


def test_the_tour_runs() -> None:
    result = doctest.testmod(rw)
    assert result.attempted > 0
    assert result.failed == 0

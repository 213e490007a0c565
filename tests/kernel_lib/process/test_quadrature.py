"""Integrals and roots."""

from __future__ import annotations

import math

import pytest

from routeheat.process.quadrature import bisect, integrate


def test_polynomial_of_ninth_degree_is_exact() -> None:
    assert integrate(lambda x: x**9, (0.0, 2.0), 2.0) == pytest.approx(2**10 / 10, rel=1e-14)


def test_smooth_function() -> None:
    assert integrate(math.sin, (0.0, math.pi), 0.5) == pytest.approx(2.0, rel=1e-12)


def test_step_at_a_listed_place_is_exact() -> None:
    assert integrate(lambda x: float(x > 0.3), (0.0, 0.3, 1.0), 1.0) == pytest.approx(0.7, rel=1e-14)


def test_root() -> None:
    assert bisect(lambda x: x * x - 2, 0.0, 2.0) == pytest.approx(math.sqrt(2), abs=1e-15)


def test_no_change_of_sign_has_no_root() -> None:
    assert bisect(lambda x: x * x + 1, -1.0, 1.0) is None

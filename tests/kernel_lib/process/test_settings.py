"""Keys by name."""

from __future__ import annotations

from types import SimpleNamespace

import pytest

from routeheat.errors import UnitError
from routeheat.process.settings import HOURS, Settings


def test_keys_that_are_not_typed_are_nothing() -> None:
    empty = Settings(())
    assert (empty.value("feed", HOURS), empty.text("nil"), empty.flag("batch"), empty.species("fed")) == (
        None,
        "",
        False,
        None,
    )
    assert "feed" not in empty
    assert empty.number("margin", HOURS, 0.8) == 0.8


def test_values_come_in_the_unit_asked_for(code: SimpleNamespace) -> None:
    found = Settings([("feed", code.measured("90 min")), ("batch", True), ("fed", code.species("H2(g)"))])
    assert found.number("feed", HOURS, 0.0) == 1.5
    assert found.flag("batch")
    assert found.species("fed") == code.species("H2(g)")


def test_another_kind_of_quantity_is_refused(code: SimpleNamespace) -> None:
    with pytest.raises(UnitError):
        Settings([("feed", code.measured("90 kg"))]).value("feed", HOURS)


def test_flag_is_not_any_text() -> None:
    assert not Settings([("batch", "no")]).flag("batch")

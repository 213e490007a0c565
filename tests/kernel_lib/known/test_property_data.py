"""The adapter to the reference library: only named data sets, and every known defect refused with its reason."""

import builtins
from fractions import Fraction

import pytest

from routeheat.errors import RouteheatError, UnknownName
from routeheat.known.lookup import rows_text
from routeheat.known.property_data import REFUSED, DataRefused, fetch, fetch_vaporisation
from routeheat.process.sheet import read_sheet

chemicals = pytest.importorskip("chemicals", reason="the extra 'data' is not installed")

ANILINE = "62-53-3"
TITANIUM_TETRACHLORIDE = "7550-45-0"
ACIDS = {"formic": "64-18-6", "acetic": "64-19-7", "butanoic": "107-92-6", "methacrylic": "79-41-4"}


def test_a_fetched_value_is_an_ordinary_sheet_line_with_its_source() -> None:
    text = rows_text((fetch(ANILINE, "l", "CRC"),))
    row = read_sheet(text).known["aniline_l"]
    assert row.source == f"chemicals {chemicals.__version__}, data set CRC, CAS 62-53-3"
    assert row.datum is not None
    assert row.datum.value == Fraction("31.6")


def test_a_fetched_value_states_no_uncertainty() -> None:
    assert fetch(ANILINE, "l", "CRC").u is None


@pytest.mark.parametrize("data_set", REFUSED)
def test_a_defective_data_set_is_refused(data_set: str) -> None:
    with pytest.raises(DataRefused) as caught:
        fetch(ANILINE, "g", data_set)
    assert caught.value.reason == REFUSED[data_set]


def test_an_unknown_data_set_is_refused_with_the_known_ones() -> None:
    with pytest.raises(UnknownName) as caught:
        fetch(ANILINE, "s", "ATcT")
    assert "ATcT (g)" in caught.value.choices


def test_a_missing_value_is_refused_and_not_taken_from_another_data_set() -> None:
    with pytest.raises(DataRefused, match=r"no value for the phase \(g\)"):
        fetch(ANILINE, "g", "JANAF")


def test_a_name_is_no_cas_number() -> None:
    with pytest.raises(DataRefused, match="no CAS Registry Number"):
        fetch("aniline", "l", "CRC")


def test_a_wrong_sign_is_refused() -> None:
    with pytest.raises(DataRefused, match="its sign is wrong"):
        fetch(TITANIUM_TETRACHLORIDE, "l", "JANAF")


def test_the_vaporisation_of_a_hydrocarbon_is_read() -> None:
    assert fetch_vaporisation("71-43-2")[0] == Fraction("33.83")


@pytest.mark.parametrize("cas", ACIDS.values(), ids=ACIDS)
def test_the_vaporisation_of_a_carboxylic_acid_is_refused(cas: str) -> None:
    with pytest.raises(DataRefused, match="dimers"):
        fetch_vaporisation(cas)


def test_an_ester_is_no_carboxylic_acid() -> None:
    assert fetch_vaporisation("141-78-6")[0] == Fraction("35.6")


def test_without_the_library_the_extra_is_named(monkeypatch: pytest.MonkeyPatch) -> None:
    real = builtins.__import__

    def refuse(name: str, *rest: object, **named: object) -> object:
        if name == "chemicals":
            raise ImportError(name)
        return real(name, *rest, **named)  # type: ignore[arg-type]

    monkeypatch.setattr(builtins, "__import__", refuse)
    with pytest.raises(RouteheatError, match=r"pip install routeheat\[data\]"):
        fetch(ANILINE, "l", "CRC")

"""The screening of a species: what each check says, and that unknown is never harmless."""

from __future__ import annotations

import json
from types import SimpleNamespace

import pytest

from routeheat.chem.route import Declaration
from routeheat.errors import UnknownName
from routeheat.process.screening import Screening, energetic_screen


def screen(code: SimpleNamespace, formula: str, **keys: str) -> Screening:
    settings = tuple(
        (key, code.measured(item) if item[0].isdigit() and key != "groups" else item) for key, item in keys.items()
    )
    species = code.species("SUB(s)", {"SUB": formula})
    return energetic_screen(Declaration(species, settings=settings))


def test_acyl_azide_of_the_scenario(code: SimpleNamespace) -> None:
    found = screen(code, "C9H8FN3O2", groups="azide")
    assert found["oxygen balance"].value.startswith("−149.2 %")
    assert "F as HF" in found["oxygen balance"].value
    assert found["oxygen balance"].finding == "medium band"
    assert found["(C + O)/N of an azide"].value == "3.67"
    assert found["decomposition energy by groups"].value == "956 to 1147 J/g released"
    assert "provisional" in found["decomposition energy by groups"].finding
    assert "test before any handling as a solid" in found["decomposition energy by groups"].finding
    assert found["waiver, explosives class"].finding == "no waiver on the data entered"


def test_groups_not_declared_is_not_no_groups(code: SimpleNamespace) -> None:
    found = screen(code, "C9H8FN3O2")
    assert found.groups is None
    assert "not declared" in found["oxygen balance"].finding
    assert found["waiver, explosives class"].finding == "no waiver on the data entered (energetic groups not declared)"
    assert found["decomposition energy by groups"].value == "none"


def test_declared_none_is_a_waiver_that_proves_nothing(code: SimpleNamespace) -> None:
    found = screen(code, "C7H8", groups="none")
    assert "no listed group declared" in found["waiver, explosives class"].finding
    assert "meaningless alone" in found["oxygen balance"].finding
    assert found["waiver, explosives class"].not_proof.startswith("stability")


def test_oxygen_balance_waiver_needs_the_c_h_o_formula(code: SimpleNamespace) -> None:
    found = screen(code, "C16H33NO2", groups="nitroalkane")
    assert "−274" in found["waiver, explosives class"].finding


def test_energy_waiver_needs_a_measurement_with_its_onset(code: SimpleNamespace) -> None:
    measured = screen(code, "C7H7NO2", groups="nitroarene", Qdec="450 J/g", onset="250 degC")
    assert "measured energy below 500 J/g" in measured["waiver, explosives class"].finding
    without = screen(code, "C7H7NO2", groups="nitroarene", Qdec="450 J/g")
    assert without["waiver, explosives class"].finding == "no waiver on the data entered"


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ({"Qdec": "299 J/g"}, "below 300 J/g"),
        ({"Qdec": "300 J/g"}, "no waiver"),
        ({"SADT": "76 degC"}, "SADT above 75 °C"),
        ({"SADT": "75 degC"}, "no waiver"),
        ({}, "no waiver"),
    ],
)
def test_self_reactive_waiver(code: SimpleNamespace, keys: dict[str, str], words: str) -> None:
    assert words in screen(code, "C7H7NO2", groups="nitroarene", **keys)["waiver, self-reactive class"].finding


def test_units_never_change_a_finding(code: SimpleNamespace) -> None:
    joule = screen(code, "C7H7NO2", groups="nitroarene", Qdec="1255.2 J/g", onset="150 degC")
    calorie = screen(code, "C7H7NO2", groups="nitroarene", Qdec="300 cal/g", onset="423.15 K")
    assert joule == calorie
    assert "from 300 cal/g" in joule["Yoshida"].value


def test_yoshida_reads_positive_or_proves_nothing(code: SimpleNamespace) -> None:
    positive = screen(code, "C7H7NO2", groups="nitroarene", Qdec="3000 J/g", onset="150 degC")
    negative = screen(code, "C7H7NO2", groups="nitroarene", Qdec="300 J/g", onset="250 degC")
    assert positive["Yoshida"].finding == "positive: propagates, shock sensitive; test"
    assert negative["Yoshida"].finding == "negative, which proves nothing"


def test_azide_below_three(code: SimpleNamespace) -> None:
    found = screen(code, "C7H7N3", groups="azide")
    assert found["(C + O)/N of an azide"].finding == "below 3: do not isolate"
    assert "5 g" in found["C/N of an azide"].finding


def test_nitrogen_above_carbon(code: SimpleNamespace) -> None:
    found = screen(code, "CH3N3", groups="azide")
    assert "more nitrogen than carbon" in found["(C + O)/N of an azide"].finding
    assert "never isolate" in found["C/N of an azide"].finding


def test_peroxide_formulation(code: SimpleNamespace) -> None:
    found = screen(code, "C14H10O4", groups="peroxide", purity="75 %")
    assert found["available oxygen"].value == "4.95 % at 75 %"
    assert "not stated: no waiver" in found["available oxygen"].finding
    dilute = screen(code, "C14H10O4", groups="peroxide", purity="10 %", h2o2="0.5 %")
    assert found["available oxygen"] != dilute["available oxygen"]
    assert dilute["available oxygen"].finding == "below the limits of the organic peroxide class"


def test_species_alone_with_groups_given(code: SimpleNamespace) -> None:
    found = energetic_screen(code.species("C7H7N3(l)"), groups="azide")
    assert found.origin == "declared"
    with pytest.raises(UnknownName):
        energetic_screen(code.species("C7H7N3(l)"), groups="azidde")


def test_unknown_formula_screens_nothing(code: SimpleNamespace) -> None:
    found = energetic_screen(code.species("X(s)"))
    assert [check.finding for check in found.checks] == ["nothing can be screened"]


def test_every_check_says_what_it_is_not_proof_of(code: SimpleNamespace) -> None:
    found = screen(code, "C7H6N4O2", groups="azide, nitroarene, peroxide", Qdec="900 J/g", onset="150 degC")
    assert len(found.checks) == 11
    assert all(check.not_proof for check in found.checks)
    text = found.text.lower()
    assert "safe" not in text
    assert "not explosive" not in text
    assert "from memory" in text
    assert json.loads(json.dumps(found.to_dict()))["groups"] == {"azide": 1, "nitroarene": 1, "peroxide": 1}

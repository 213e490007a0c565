"""The criticality of a step: scenarios, levels, notices, marks."""

from __future__ import annotations

import json
from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.chem.step import Step
from routeheat.process.assessed import NotAssessed
from routeheat.process.cautions import AMBIENT, STOP
from routeheat.process.criticality import criticality
from routeheat.process.levels import Thresholds
from routeheat.process.vessel import vessel

TYPED = {"Xac": "0.30", "feed": "1.5 h", "MTT": "130 degC", "TD24": "95 degC"}


def made(code: SimpleNamespace, heat: str = "-135", **keys: object) -> Step:
    step = code.step("A1", "C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)", heat, conc="1.6", cp="1.75", at="20 degC")
    settings = {**TYPED, **keys}
    read = tuple(
        (key, code.measured(item) if isinstance(item, str) and item[:1] in "0123456789-" else item)
        for key, item in settings.items()
        if item is not None
    )
    return replace(step, row=replace(step.row, settings=read))


def test_certain_inputs_give_one_class(code: SimpleNamespace) -> None:
    found = criticality(made(code))
    assert found.as_run.words == "class 2"
    assert found.misfeed.words == "class 5"
    assert (found.as_run.worst, found.as_run.probabilities) == (2, None)


def test_uncertainty_of_zero_gives_the_deterministic_class(code: SimpleNamespace) -> None:
    zero = criticality(made(code, "-135 ± 0", MTT="130 ± 0 degC", TD24="95 ± 0 degC"))
    plain = criticality(made(code))
    assert zero.as_run.reachable == plain.as_run.reachable
    assert zero.as_run.at_values == plain.as_run.at_values == (2,)


def test_uncertain_inputs_list_every_reachable_class(code: SimpleNamespace) -> None:
    found = criticality(made(code, "-135 ± 27", TD24="70 ± 12 degC")).as_run
    assert [item.classes for item in found.reachable] == [(5,), (2,)]
    assert found.words.startswith("classes 5 (")
    assert sum(item.probability for item in found.reachable) == pytest.approx(1.0, abs=0.01)


def test_least_probability_can_be_set(code: SimpleNamespace) -> None:
    step = made(code, "-135 ± 27", TD24="70 ± 12 degC")
    found = criticality(step, thresholds=Thresholds(reachable=0.5)).as_run
    assert [item.classes for item in found.reachable] == [(2,)]


def test_missing_mtt_gives_a_set(code: SimpleNamespace) -> None:
    found = criticality(made(code, MTT=None))
    assert found.as_run.words == "classes 1, 2 or 3 (MTT missing)"
    assert found.misfeed.words == "classes 4 or 5 (MTT missing)"
    assert found.as_run.worst == 3


def test_missing_mtt_with_uncertainty_gives_both_sets(code: SimpleNamespace) -> None:
    found = criticality(made(code, "-135 ± 27", MTT=None, TD24="60 ± 8 degC")).as_run
    assert [item.classes for item in found.reachable] == [(5, 4), (3, 2, 1)]
    assert found.words.endswith("(MTT missing)")


def test_missing_td24_gives_no_class(code: SimpleNamespace) -> None:
    found = criticality(made(code, TD24=None))
    assert found.words == "not classifiable: TD24 missing"
    assert (found.as_run.reachable, found.as_run.worst) == ((), None)
    assert "class 1" not in found.text


def test_stop_notice_stands_above_the_class(code: SimpleNamespace) -> None:
    found = criticality(made(code, TD24="20 degC"))
    assert found.stop
    assert found.words == f"{STOP}; class 5"
    assert found.table().notes[0].startswith(STOP)
    assert found.notices == (AMBIENT,)


def test_stop_notice_without_a_class(code: SimpleNamespace) -> None:
    found = criticality(replace(made(code, TD24="15 degC"), concentration=None))
    assert found.words == f"{STOP}; not classifiable: conc missing"


def test_ambient_from_the_sheet(code: SimpleNamespace) -> None:
    assert criticality(made(code, ambient="96 degC")).as_run.words == "class 5"


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ({"MTT": "10 degC"}, "T is above MTT"),
        ({"MTSR": "10 degC"}, "MTSR is below T"),
        ({"Xac": "1.5"}, "between 0 and 1"),
        ({"batch": True}, "batch and feed"),
    ],
)
def test_inconsistent_input_is_no_class(code: SimpleNamespace, keys: dict[str, object], words: str) -> None:
    found = criticality(made(code, **keys)).as_run
    assert isinstance(found.at_values, NotAssessed)
    assert words in found.words
    assert found.reachable == ()


def test_endothermic_step(code: SimpleNamespace) -> None:
    found = criticality(made(code, "12 ± 8"))
    assert found.as_run.words.startswith("none: endothermic")
    assert "MTSR" not in [mark.label for mark in found.marks()]
    assert any("other sign" in note for note in found.table().notes)
    assert isinstance(found.severity, NotAssessed)


def test_estimate_makes_the_class_provisional(code: SimpleNamespace) -> None:
    assert criticality(made(code, estimated="TD24, cp")).as_run.words == "provisional: class 2"
    onset = criticality(made(code, TD24=None, onset="200 degC", detection="10 W/kg", E="50 kJ/mol"))
    assert onset.as_run.words.startswith("provisional: class")


def test_levels_name_their_scale(code: SimpleNamespace) -> None:
    found = criticality(made(code))
    assert not isinstance(found.severity, NotAssessed)
    assert [level.text for level in found.severity] == ["medium (severity, 3 levels)", "medium (severity, 4 levels)"]


def test_probability_below_td24_is_low_without_kinetics(code: SimpleNamespace) -> None:
    found = criticality(made(code))
    assert not isinstance(found.probability, NotAssessed)
    assert [level.word for level in found.probability] == ["low"]
    above = criticality(made(code, Xac="1"))
    assert not isinstance(above.probability, NotAssessed)
    assert [level.word for level in above.probability] == ["at least medium"]


def test_tmrad_from_td24_and_activation_energy(code: SimpleNamespace) -> None:
    found = criticality(made(code, Xac="0.6076389", E="100 kJ/mol"))
    assert found.as_run.temperature == pytest.approx(95.0, abs=1e-4)
    assert found.tmrad_h == pytest.approx(24.0, rel=1e-4)
    assert not isinstance(found.probability, NotAssessed)
    assert len(found.probability) == 2


def test_tmrad_of_an_autocatalytic_mixture_is_not_worked_out(code: SimpleNamespace) -> None:
    assert criticality(made(code, E="100 kJ/mol", autocatalytic=True)).tmrad_h is None


def test_tmrad_from_a_rate_has_the_integral_beside_it(code: SimpleNamespace) -> None:
    found = criticality(made(code, TD24=None, qref="10 W/kg", Tref="180 degC", E="100 kJ/mol"))
    assert found.tmrad_h is not None
    assert found.tmrad_integral_h is not None
    assert 1.03 < found.tmrad_integral_h / found.tmrad_h < 1.10


def test_marks_are_sorted_dots_on_one_axis(code: SimpleNamespace) -> None:
    marks = criticality(made(code, "-135 ± 8")).marks()
    assert [mark.label for mark in marks] == ["Tp", "ambient", "MTSR", "TD24", "MTT", "MTSR, all at once"]
    assert marks[2].u == pytest.approx(0.3 * 8 * 1.6 / 1.75)
    assert marks[4].u is None


def test_unstated_uncertainty_is_said(code: SimpleNamespace) -> None:
    notes = criticality(made(code, "-135 ± 8")).table().notes
    assert any("uncertainty of MTSR, MTT, TD24 not (fully) stated" in note for note in notes)


def test_result_of_vessel_is_taken_with_its_thresholds(code: SimpleNamespace) -> None:
    step = vessel(made(code), thresholds=Thresholds(severity_3=(10.0, 100.0)))
    found = criticality(step)
    assert not isinstance(found.severity, NotAssessed)
    assert found.severity[0].word == "high"


def test_text_says_where_thresholds_are_from_and_never_safe(code: SimpleNamespace) -> None:
    text = criticality(made(code)).text
    assert "thresholds from memory" in text.replace("\n", " ")
    assert "safe" not in text.lower()
    assert json.loads(json.dumps(criticality(made(code)).to_dict()))["as_run"]["words"] == "class 2"

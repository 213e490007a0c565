"""Charges as the laboratory types them."""

from __future__ import annotations

from types import SimpleNamespace

import pytest

from routeheat.chem.step import Step
from routeheat.errors import RouteError
from routeheat.process.charges import Charges, charges
from routeheat.process.settings import Settings


@pytest.fixture
def nitration(code: SimpleNamespace) -> Step:
    made: Step = code.step("A1", "C6H6(l) + HNO3(aq) -> C6H5NO2(l) + H2O(l)", "-135", equiv={"HNO3(aq)": "1.1"})
    return made


def read(step: Step, text: str, **more: object) -> Charges:
    return charges(step, Settings([("charges", text), *more.items()]), step.row.reaction.reactants[0][1])


def masses(found: Charges) -> dict[str, float]:
    return {item.name: item.mass for item in found.items if item.mass is not None}


def test_nothing_typed_leaves_solvents_open(nitration: Step) -> None:
    found = read(nitration, "")
    assert not found.stated
    assert found.concentration is None
    assert masses(found) == pytest.approx({"C6H6(l)": 0.078114, "HNO3(aq)": 1.1 * 0.063012}, rel=1e-4)


def test_nil_states_that_there_is_nothing_else(nitration: Step) -> None:
    found = read(nitration, "nil")
    assert found.stated
    assert found.concentration == pytest.approx(1 / (0.078114 + 1.1 * 0.063012), rel=1e-4)


@pytest.mark.parametrize(
    ("text", "mass"),
    [
        ("toluene 5 L/kg density 0.867 kg/L", 0.078114 * 5 * 0.867),
        ("toluene 5 vol density 867 kg/m3", 0.078114 * 4.335),
        ("toluene 5 mL/g density 0.867 g/mL", 0.078114 * 4.335),
        ("toluene 2 kg/kg", 0.156228),
        ("toluene 2 g/g", 0.156228),
        ("toluene 0.05 mol/mol M 92.14 g/mol", 0.05 * 0.09214),
        ("toluene 0.05 eq M 92.14 g/mol", 0.05 * 0.09214),
        ("H2SO4 0.05 mol/mol", 0.05 * 0.098072),
        ("N,N-dimethylformamide 2 kg/kg", 0.156228),
    ],
)
def test_amounts(nitration: Step, text: str, mass: float) -> None:
    found = read(nitration, text)
    assert found.missing == ()
    assert found.items[-1].mass == pytest.approx(mass, rel=1e-4)


def test_strength_charges_the_rest_of_the_solution(nitration: Step) -> None:
    found = read(nitration, "HNO3(aq) 1.2 mol/mol as 65 %")
    assert masses(found)["HNO3(aq)"] == pytest.approx(1.2 * 0.063012, rel=1e-4)
    assert masses(found)["rest of HNO3(aq)"] == pytest.approx(1.2 * 0.063012 * 35 / 65, rel=1e-4)
    assert found.items[-1].water


def test_masses_are_scaled_by_the_limiting_reactant(nitration: Step) -> None:
    found = read(nitration, "C6H6(l) 7.8114 kg, toluene 30 kg")
    assert masses(found)["C6H6(l)"] == pytest.approx(0.078114, rel=1e-4)
    assert masses(found)["toluene"] == pytest.approx(0.3, rel=1e-4)


def test_masses_are_scaled_by_the_size(code: SimpleNamespace, nitration: Step) -> None:
    found = read(nitration, "toluene 30 kg", size=code.measured("100 mol"))
    assert masses(found)["toluene"] == pytest.approx(0.3)


def test_weight_per_cent_of_the_whole(nitration: Step) -> None:
    found = read(nitration, "toluene 2 kg/kg, catalyst 2 %")
    assert masses(found)["catalyst"] == pytest.approx(0.02 * (found.total or 0.0))


@pytest.mark.parametrize(
    ("text", "why"),
    [
        ("toluene 5 L/kg", "volumes need a density"),
        ("toluene 0.5 mol/mol", "molar mass not known"),
        ("toluene 3 kg", "the mass of the limiting reactant or a size"),
    ],
)
def test_missing_masses_say_what_is_missing(nitration: Step, text: str, why: str) -> None:
    found = read(nitration, text)
    assert why in found.missing[0]
    assert (found.total, found.concentration) == (None, None)


def test_per_cent_beside_a_missing_mass(nitration: Step) -> None:
    assert len(read(nitration, "toluene 5 L/kg, catalyst 2 %").missing) == 2


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("toluene", "has no amount"),
        ("toluene 5 furlongs", "unknown unit"),
        ("toluene 5", "is no amount"),
        ("toluene 5 h", "is no amount"),
        ("toluene 5 L/kg density heavy", "a number belongs behind density"),
        ("toluene 5 L/kg density 3 h", "cannot be expressed"),
        ("HNO3(aq) 1.2 mol/mol as 0 %", "a strength lies"),
        ("HNO3(aq) 0.9 mol/mol", "less HNO3(aq) than the reaction needs"),
        ("a 60 %, b 40 %", "leave nothing for the rest"),
    ],
)
def test_faults(nitration: Step, text: str, words: str) -> None:
    with pytest.raises(RouteError) as caught:
        read(nitration, text)
    assert words in str(caught.value)
    assert caught.value.step == "A1"


def test_water_is_known(nitration: Step) -> None:
    found = read(nitration, "water 3 kg/kg, H2O 0.5 mol/mol")
    assert [item.water for item in found.items[-2:]] == [True, True]

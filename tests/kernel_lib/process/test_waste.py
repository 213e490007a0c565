"""Waste figures of routes: whole, convergent, bounded."""

from __future__ import annotations

import json
from dataclasses import replace
from types import SimpleNamespace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.route import Route
from routeheat.process.assessed import NotAssessed
from routeheat.process.profile import profile
from routeheat.process.waste import e_factor, mass_intensity, pmi_difference, waste


def charged(route: Route, **texts: str) -> Route:
    steps = tuple(
        replace(step, row=replace(step.row, settings=(*step.row.settings, ("charges", texts[step.label]))))
        if step.label in texts
        else step
        for step in route.steps
    )
    return replace(route, steps=steps)


@given(st.floats(1.0, 1e4), st.floats(1e-3, 1.0))
def test_e_factor_is_pmi_less_one(inputs: float, product: float) -> None:
    assert e_factor(inputs, product) == pytest.approx(mass_intensity(inputs, product) - 1, rel=1e-9, abs=1e-9)


def test_mass_balance_of_a_whole_route(amide_routes: dict[str, Route]) -> None:
    """Everything bought less the product leaves, when nothing is lost unaccounted: by masses in and out."""
    found = profile(amide_routes["1"])
    bought = sum(float(n * s.molar_mass) for s, n in found.bought.items() if s.molar_mass is not None)
    figure = waste(amide_routes["1"]).whole
    assert figure.pmi == pytest.approx(bought / float(amide_routes["1"].makes.molar_mass or 1))
    assert figure.rme == pytest.approx(100 / figure.pmi)


def test_convergent_atom_economy_counts_both_branches(amide_routes: dict[str, Route]) -> None:
    """EST + SOCl2 + NIT + 3 H2 + base to the amide and its by-products, water used in X1 made in Y1."""
    species = amide_routes["1"].makes
    used = 208.257 + 118.96 + 222.2 + 3 * 2.016 + 101.19
    assert waste(amide_routes["1"]).whole.atom_economy == pytest.approx(
        100 * float(species.molar_mass or 0) / used, abs=0.1
    )


def test_side_rows_in_or_out(amide_routes: dict[str, Route]) -> None:
    """X2q takes up its SOCl2 from outside here: 0.3 mol/mol, with as much water."""
    inside, outside = waste(amide_routes["1"]), waste(amide_routes["1"], side_rows="out")
    extra = 0.3 * 1.29387 * (118.96 + 18.015) / 368.43
    assert inside.whole.pmi - outside.whole.pmi == pytest.approx(extra, rel=1e-3)
    assert [item.label for item in inside.steps] == ["X1", "X2", "Y1", "C", "F"]


def test_water_out(amide_routes: dict[str, Route]) -> None:
    inside = waste(charged(amide_routes["1"], X1="water 5 kg/kg"))
    outside = waste(charged(amide_routes["1"], X1="water 5 kg/kg"), water="out")
    assert inside.whole.pmi > outside.whole.pmi + 3
    assert inside.whole.rme == outside.whole.rme


def test_solvents_are_scaled_by_the_extents(amine_routes: dict[str, Route]) -> None:
    plain = waste(amine_routes["A"]).whole.pmi
    more = waste(charged(amine_routes["A"], A1="toluene 10 kg/kg", A2="nil"))
    mass = 10 * 140.157 * 1.20890 / 155.17
    assert more.whole.pmi - plain == pytest.approx(mass, rel=1e-3)
    assert more.boundary.charged == "all that is charged"
    assert waste(charged(amine_routes["A"], A1="toluene 10 kg/kg")).boundary.charged == "mixed"


def test_step_counts_its_incoming_intermediate(amine_routes: dict[str, Route]) -> None:
    step = waste(amine_routes["A"]).steps[1]
    assert step.pmi == pytest.approx((185.154 + 3 * 2.016) / (0.94 * 155.17), rel=1e-3)
    assert step.rme == pytest.approx(100 / step.pmi)


def test_different_boundaries_are_not_compared(amine_routes: dict[str, Route]) -> None:
    one, two = waste(amine_routes["A"]), waste(amine_routes["B"])
    difference = pmi_difference(one, two)
    assert not isinstance(difference, NotAssessed)
    assert difference == pytest.approx(two.whole.pmi - one.whole.pmi)
    refused = pmi_difference(one, waste(amine_routes["B"], water="out"))
    assert isinstance(refused, NotAssessed)
    assert "different boundaries" in refused.text
    stated = pmi_difference(one, waste(charged(amine_routes["B"], B1="nil", B2="nil")))
    assert isinstance(stated, NotAssessed)


def test_different_products_are_not_compared(amine_routes: dict[str, Route], amide_routes: dict[str, Route]) -> None:
    refused = pmi_difference(waste(amine_routes["A"]), waste(amide_routes["1"]))
    assert isinstance(refused, NotAssessed)
    assert "makes" in refused.text


def test_missing_masses_are_refused_not_zero(code: SimpleNamespace, amine_routes: dict[str, Route]) -> None:
    found = waste(charged(amine_routes["A"], A1="toluene 5 L/kg"))
    assert isinstance(found.whole.pmi, NotAssessed)
    assert "volumes need a density" in found.whole.pmi.text
    assert "density" in found.text
    unknown = code.route("A", "P(s)", code.step("A1", "A -> P(s)", "-10"))
    figure = waste(unknown).whole
    assert isinstance(figure.atom_economy, NotAssessed)
    assert isinstance(figure.pmi, NotAssessed)


def test_unknown_boundary_is_refused(amine_routes: dict[str, Route]) -> None:
    with pytest.raises(ValueError, match="'in' or 'out'"):
        waste(amine_routes["A"], water="half")  # type: ignore[arg-type]


def test_profile_is_taken_too(amine_routes: dict[str, Route]) -> None:
    assert waste(profile(amine_routes["A"])).to_dict() == waste(amine_routes["A"]).to_dict()


def test_table_states_the_boundary(amine_routes: dict[str, Route]) -> None:
    found = waste(amine_routes["A"])
    assert "boundary of the whole: reactants of the equations only; water in; side rows in" in found.text
    assert found.table().strong == frozenset([2])
    assert json.loads(json.dumps(found.to_dict()))["route"] == "A"

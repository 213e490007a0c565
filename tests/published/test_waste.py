"""Green metrics with published or hand-computed results, each with its source."""

from __future__ import annotations

from dataclasses import replace

import pytest

import routeheat as rh
from routeheat.process.waste import atom_economy, e_factor, mass_efficiency, mass_intensity, waste


@pytest.mark.parametrize(("reactants", "published"), [(514.5, 40.1), (134.22 + 102.09 + 2.016 + 28.01, 77.5)])
def test_atom_economy_of_ibuprofen(reactants: float, published: float) -> None:
    """OpenStax, Chemistry 2e (2019), sec. 4.4: 514 g of reactants, 40 %; the three-step route about 80 %."""
    assert atom_economy(206.28, reactants) == pytest.approx(published, abs=0.3)


@pytest.mark.parametrize(
    ("equation", "published"),
    [
        ("C6H6(l) + 9/2 O2(g) -> C4H2O3(s) + 2 CO2(g) + 2 H2O(l)", 44.1),
        ("C4H8(g) + 3 O2(g) -> C4H2O3(s) + 3 H2O(l)", 64.5),
    ],
)
def test_atom_economy_of_maleic_anhydride(equation: str, published: float) -> None:
    """Lancaster, Green Chemistry (from memory)."""
    sheet = rh.read_sheet(f"route A makes C4H2O3(s)\n  [A1] {equation} | dH -1000 kJ | yield 70 %")
    found = waste(sheet.routes["A"])
    assert found.whole.atom_economy == pytest.approx(published, abs=0.2)
    assert found.steps[0].atom_economy == pytest.approx(published, abs=0.2)


def test_mass_figures_of_one_step() -> None:
    """Constable, Curzons, Cunningham, Green Chem. 4 (2002) 521, worked example (from memory); masses in g."""
    alcohol, chloride, toluene, base, product = 10.81, 21.9, 500.0, 15.0, 23.6
    inputs = alcohol + chloride + toluene + base
    assert mass_intensity(inputs, product) == pytest.approx(23.2, abs=0.05)
    assert e_factor(inputs, product) == pytest.approx(22.2, abs=0.05)
    assert 100 * product / inputs == pytest.approx(4.3, abs=0.05)
    assert mass_efficiency(product, alcohol + chloride + base) == pytest.approx(49.5, abs=0.1)
    assert mass_efficiency(product, alcohol + chloride) == pytest.approx(72.1, abs=0.1)


def test_the_same_step_from_a_sheet() -> None:
    """The same example through charges typed as masses: PMI 23.2, RME 49.5 % with the base among the reactants."""
    sheet = rh.read_sheet("""
route A makes C14H14O3S(s)
  [A1] C7H8O(l) + C7H7ClO2S(s) + C6H15N(l) -> C14H14O3S(s) + C6H16NCl(s)
       dH -100 kJ/mol | yield 90 % | limiting C7H8O(l)
""")
    route = sheet.routes["A"]
    text = "C7H8O(l) 10.81 g, C7H7ClO2S(s) 21.9 g, C6H15N(l) 15 g, toluene 500 g"
    step = route.steps[0]
    step = replace(step, row=replace(step.row, settings=(("charges", text),)))
    found = waste(replace(route, steps=(step,))).whole
    made = 10.81 / 108.14 * 0.9 * 262.32
    assert found.pmi == pytest.approx((10.81 + 21.9 + 15 + 500) / made, rel=1e-4)
    assert found.rme == pytest.approx(100 * made / (10.81 + 21.9 + 15), rel=1e-4)
    assert found.e_factor == pytest.approx(found.pmi - 1)

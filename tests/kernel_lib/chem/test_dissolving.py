"""Dissolving, diluting and neutralising: balanced, per mole of the species they are named after."""

from __future__ import annotations

import pytest

from routeheat.chem.dissolving import dilution, neutralisation, solution
from routeheat.chem.species import Species
from routeheat.notation.code import read_reaction


def species(typed: str) -> Species:
    return read_reaction(f"{typed} -> He(g)").reactants[0][1]


def several(*typed: str) -> list[Species]:
    return [species(item) for item in typed]


def test_a_solution_is_of_one_mole_and_balances() -> None:
    assert solution(species("NaCl(s)"), several("NaCl(aq, 100 H2O)")).text == "NaCl(s) -> NaCl(aq, 100 H2O)"
    ions = solution(species("Al2(SO4)3(s)"), several("Al^3+(aq)", "SO4^2-(aq)"))
    assert ions.text == "Al2(SO4)3(s) -> 2 Al^3+(aq) + 3 SO4^2-(aq)"
    assert ions.balanced


def test_a_gas_that_reacts_with_water_needs_it_among_what_is_used() -> None:
    with pytest.raises(ValueError, match="does not dissolve to"):
        solution(species("NH3(g)"), several("NH4^+(aq)", "OH^-(aq)"))


def test_a_dilution_keeps_the_substance() -> None:
    assert dilution(*several("HCl(aq, 10 H2O)", "HCl(aq)")).text == "HCl(aq, 10 H2O) -> HCl(aq)"


def test_a_neutralisation_is_of_one_mole_of_the_first() -> None:
    products = several("Na2SO4(aq)", "H2O(l)")
    made = neutralisation(species("H2SO4(aq)"), species("NaOH(aq)"), products)
    assert made.text == "H2SO4(aq) + 2 NaOH(aq) -> Na2SO4(aq) + 2 H2O(l)"
    other = neutralisation(species("NaOH(aq)"), species("H2SO4(aq)"), products)
    assert other.text == "NaOH(aq) + 1/2 H2SO4(aq) -> 1/2 Na2SO4(aq) + H2O(l)"


@pytest.mark.parametrize(
    ("used", "products", "reason"),
    [
        (["HCl(aq)", "NaOH(aq)"], ["NaCl(aq)"], "in exactly one way"),
        (["NaCl(aq)", "H2O(l)"], ["HCl(aq)", "NaBr(aq)"], "in exactly one way"),
        (["HCl(aq)", "NaCl(aq)"], ["NaOH(aq)", "H2O(l)"], "in exactly one way"),
    ],
)
def test_what_does_not_balance_is_refused(used: list[str], products: list[str], reason: str) -> None:
    with pytest.raises(ValueError, match=reason):
        neutralisation(*several(*used), several(*products))


def test_a_substance_of_unknown_formula_is_no_salt() -> None:
    tar = Species("TAR", "aq")
    with pytest.raises(ValueError, match="the formula of TAR"):
        neutralisation(tar, species("NaOH(aq)"), several("NaCl(aq)"))

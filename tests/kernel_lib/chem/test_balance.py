"""Balancing: completions of unbalanced equations, and the rows that follow from one species."""

from fractions import Fraction

import pytest

from routeheat.chem.balance import combustion, completion, formation, imbalance_text, phase_change, reference_species
from routeheat.chem.elements import elements
from routeheat.chem.formula import read_formula
from routeheat.chem.reaction import Reaction
from routeheat.chem.species import Species
from routeheat.notation.code import read_reaction


def species(text: str) -> Species:
    name, _, state = text.rstrip(")").partition("(")
    phase, _, form = state.partition(", ")
    return Species(name, phase, form, read_formula(name))


@pytest.mark.parametrize(
    ("typed", "wrong", "proposed"),
    [
        ("H2(g) + O2(g) -> H2O(l)", "O −1", "balanced: H2(g) + 1/2 O2(g) -> H2O(l)"),
        ("C6H6(l) + HNO3(aq) -> C6H5NO2(l)", "H −2, O −1", "add + H2O(l) on the right"),
        ("C6H5NO2(l) + 3 H2(g) -> C6H5NH2(l)", "H −4, O −2", "add + 2 H2O(l) on the right"),
        ("CH4(g) + Cl2(g) -> CH3Cl(g)", "H −1, Cl −1", "add + HCl(g) on the right"),
        ("H2O(g) + C6H5CN(l) -> C6H5COOH(s)", "N −1, H −1, O +1", "add + NH3(g) on the right and + H2O(g) on the left"),
        ("HCl(aq) -> Cl^-(aq)", "H −1, charge −1", "add + H^+(aq) on the right"),
    ],
)
def test_an_imbalance_is_named_with_its_smallest_completion(typed: str, wrong: str, proposed: str) -> None:
    reaction = read_reaction(typed)
    assert sorted(imbalance_text(reaction).split(", ")) == sorted(wrong.split(", "))
    assert completion(reaction) == proposed


def test_no_completion_is_proposed_where_none_is_found() -> None:
    assert completion(read_reaction("Au(s) -> Pt(s)")) == ""


def test_reference_states_of_the_elements() -> None:
    symbols = ("H", "C", "N", "O", "P", "S", "Br", "I", "Hg", "Sn")
    states = {symbol: str(reference_species(symbol)) for symbol in symbols}
    # CODATA key values (Cox, Wagman, Medvedev 1989) use these, phosphorus white (from memory)
    assert states == {
        "H": "H2(g)", "C": "C(s, graphite)", "N": "N2(g)", "O": "O2(g)", "P": "P(s, white)", "S": "S(s, rhombic)",
        "Br": "Br2(l)", "I": "I2(s)", "Hg": "Hg(l)", "Sn": "Sn(s, white)",
    }  # fmt: skip


def test_every_reference_state_is_a_species_of_its_element_alone() -> None:
    for symbol in elements():
        found = reference_species(symbol)
        if found is not None:
            assert found.formula is not None
            assert set(found.formula.composition) == {symbol}
            assert found.phase


@pytest.mark.parametrize(
    ("typed", "expanded"),
    [
        ("NH3(g)", "1/2 N2(g) + 3/2 H2(g) -> NH3(g)"),
        ("C6H5NO2(l)", "6 C(s, graphite) + 5/2 H2(g) + 1/2 N2(g) + O2(g) -> C6H5NO2(l)"),
        ("C(s, diamond)", "C(s, graphite) -> C(s, diamond)"),
        ("O3(g)", "3/2 O2(g) -> O3(g)"),
        ("P4O10(s)", "4 P(s, white) + 5 O2(g) -> P4O10(s)"),
        ("CBrI(l)", "C(s, graphite) + 1/2 Br2(l) + 1/2 I2(s) -> CBrI(l)"),
        ("HgS(s)", "Hg(l) + S(s, rhombic) -> HgS(s)"),
        ("Na^+(aq)", "Na(s) + H^+(aq) -> Na^+(aq) + 1/2 H2(g)"),
        ("Cl^-(aq)", "1/2 Cl2(g) + 1/2 H2(g) -> Cl^-(aq) + H^+(aq)"),
        ("SO4^2-(aq)", "S(s, rhombic) + 2 O2(g) + H2(g) -> SO4^2-(aq) + 2 H^+(aq)"),
        ("NH4^+(aq)", "1/2 N2(g) + 3/2 H2(g) + H^+(aq) -> NH4^+(aq)"),
        ("OH^-(aq)", "1/2 O2(g) + H2(g) -> OH^-(aq) + H^+(aq)"),
    ],
)
def test_formation_starts_from_the_reference_states(typed: str, expanded: str) -> None:
    assert formation(species(typed)).net == read_reaction(expanded).net


@pytest.mark.parametrize(
    ("typed", "reason"),
    [
        ("O2(g)", "is the reference state of its element"),
        ("Na^+(g)", "is an ion that is not in water"),
        ("H^+(aq)", "is zero by definition"),
        ("D2O(l)", r"\[2H\] has no reference state here"),
    ],
)
def test_some_formations_are_typed_as_equations(typed: str, reason: str) -> None:
    with pytest.raises(ValueError, match=reason):
        formation(species(typed))


def burn(fuel: str, *products: str) -> Reaction:
    return combustion(species(fuel), [species(item) for item in products])


def test_combustion_is_balanced_over_the_stated_products() -> None:
    assert burn("C6H6(l)", "CO2(g)", "H2O(l)").text == "C6H6(l) + 15/2 O2(g) -> 6 CO2(g) + 3 H2O(l)"
    chlorine = burn("C6H5Cl(l)", "CO2(g)", "H2O(l)", "HCl(aq)")
    assert chlorine.net == read_reaction("C6H5Cl(l) + 7 O2(g) -> 6 CO2(g) + 2 H2O(l) + HCl(aq)").net
    assert chlorine.reactants[0] == (Fraction(1), species("C6H5Cl(l)"))


@pytest.mark.parametrize(
    ("fuel", "products", "reason"),
    [
        ("C6H6(l)", ["CO2(g)"], "no product of this combustion holds H"),
        ("C6H6(l)", ["CO2(g)", "CO(g)", "H2O(l)"], "in exactly one way"),
        ("CO2(g)", ["CO(g)"], "stands on the wrong side"),
    ],
)
def test_an_impossible_combustion_is_refused(fuel: str, products: list[str], reason: str) -> None:
    with pytest.raises(ValueError, match=reason):
        burn(fuel, *products)


def test_phase_changes_start_from_their_own_phase() -> None:
    assert phase_change("vaporisation", species("H2O(l)")).text == "H2O(l) -> H2O(g)"
    assert phase_change("fusion", species("H2O")).text == "H2O(s) -> H2O(l)"
    assert phase_change("sublimation", species("I2(cr)")).text == "I2(cr) -> I2(g)"
    with pytest.raises(ValueError, match=r"fusion starts from \(s\), not from \(g\)"):
        phase_change("fusion", species("H2O(g)"))


def test_an_element_whose_symbol_is_often_an_abbreviation_still_forms_compounds() -> None:
    chloride = Species("PRC", "s", "", read_formula("PrCl3", declared=True), True)
    assert formation(chloride).text == "Pr(s) + 3/2 Cl2(g) -> PRC(s)"

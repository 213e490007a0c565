"""Reactions: net stoichiometry, balance, reversal and scaling."""

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from routeheat.chem.formula import read_formula
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.species import Species
from routeheat.present.markup import plain


def species(formula: str, phase: str = "g") -> Species:
    return Species(formula, phase, "", read_formula(formula))


H2, O2, N2 = species("H2"), species("O2"), species("N2")
WATER, STEAM = species("H2O", "l"), species("H2O")
CATALYST = Species("Pd/C", "s", "", None, True)
BURN = Reaction(((Fraction(1), H2), (Fraction(1, 2), O2)), ((Fraction(1), WATER),))


def test_stoichiometric_numbers_are_negative_for_reactants() -> None:
    assert BURN.net == {H2: -1, O2: Fraction(-1, 2), WATER: 1}
    assert BURN.balanced
    assert BURN.gas_change == Fraction(-3, 2)


def test_phase_makes_another_species() -> None:
    assert WATER != STEAM
    assert Reaction(((Fraction(1), WATER),), ((Fraction(1), STEAM),)).net == {WATER: -1, STEAM: 1}


def test_a_catalyst_cancels_and_is_listed() -> None:
    one = Fraction(1)
    reaction = Reaction((*BURN.reactants, (one, CATALYST)), (*BURN.products, (one, CATALYST)))
    assert reaction.net == BURN.net
    assert CATALYST in reaction.species
    assert reaction.unchecked == (CATALYST,)
    assert not reaction.balanced


def test_imbalance_is_made_minus_used_with_the_charge() -> None:
    sodium, ion = species("Na", "s"), species("Na^+", "aq")
    assert Reaction(((Fraction(1), sodium),), ((Fraction(1), ion),)).imbalance == {"charge": 1}
    assert Reaction(((Fraction(1), H2), (Fraction(1), O2)), ((Fraction(1), WATER),)).imbalance == {"O": -1}


def test_a_coefficient_must_be_positive() -> None:
    with pytest.raises(ValueError, match="must be positive"):
        Reaction(((Fraction(0), H2),), ())


def test_text_is_what_is_typed_and_rich_is_what_is_printed() -> None:
    assert BURN.text == "H2(g) + 1/2 O2(g) -> H2O(l)"
    assert plain(BURN.rich) == "H2(g) + 1/2 O2(g) → H2O(l)"
    assert Reaction(BURN.reactants, BURN.products, reversible=True).text == "H2(g) + 1/2 O2(g) <=> H2O(l)"
    assert Reaction((), ()).text == "nothing -> nothing"


numbers = st.fractions(min_value=-5, max_value=5, max_denominator=12)
nets = st.dictionaries(st.sampled_from([H2, O2, N2, WATER, STEAM]), numbers.filter(bool), max_size=5)


@given(nets)
def test_a_net_makes_the_reaction_it_came_from(net: dict[Species, Fraction]) -> None:
    assert Reaction.from_net(net).net == net


@given(nets, numbers)
def test_scaling_scales_the_net_and_minus_one_reverses(net: dict[Species, Fraction], factor: Fraction) -> None:
    reaction = Reaction.from_net(net)
    assert reaction.scaled(factor).net == {item: nu * factor for item, nu in net.items() if nu * factor}
    assert reaction.scaled(Fraction(-1)).reactants == reaction.products


@given(st.lists(st.tuples(numbers, nets), max_size=4))
def test_a_sum_does_not_depend_on_the_order(parts: list[tuple[Fraction, dict[Species, Fraction]]]) -> None:
    rows = [(factor, Reaction.from_net(net)) for factor, net in parts]
    assert add_net(rows) == add_net(rows[::-1])
    assert add_net([*rows, *((-factor, row) for factor, row in rows)]) == {}

"""Why a target is out of reach, and what would bring it within reach."""

import pickle
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Heat, Row
from routeheat.chem.species import Species
from routeheat.errors import OutOfReach
from routeheat.hess.combination import combine
from routeheat.hess.reach import Refusal
from routeheat.notation.code import read_reaction, row
from routeheat.units import KJ_PER_MOL

COMPOUNDS = [Species(name, phase, declared=True) for name in "ABC" for phase in ("l", "g")]


def refused(target, *rows):
    with pytest.raises(OutOfReach) as caught:
        combine(read_reaction(target), rows)
    return caught.value


def outcome(target, rows):
    """The refusal, or ``None`` when there is a combination."""
    try:
        combine(target, rows)
    except OutOfReach as error:
        return error
    return None


def with_heat(label, reaction):
    return Row(label, reaction, Heat(Measured(Fraction(-1), KJ_PER_MOL)))


def test_iron_trichloride_from_dichloride_alone():
    # one of the two rows of OpenStax, Chemistry 2e (2019), sec. 5.3, FeCl3 example; refusal by the rank test
    error = refused("Fe(s) + 3/2 Cl2(g) -> FeCl3(s)", row("R1", "Fe(s) + Cl2(g) -> FeCl2(s)", "-341.8 kJ/mol"))
    assert error.broken.text == "nothing known makes or uses FeCl3(s)"
    assert error.missing[0].reaction.text == "FeCl2(s) + 1/2 Cl2(g) -> FeCl3(s)"
    assert [item.kind for item in error.missing] == ["reaction", "formation"]
    assert str(error) == (
        "no exact combination of the known rows gives the target: Fe(s) + 3/2 Cl2(g) -> FeCl3(s)\n"
        "why: nothing known makes or uses FeCl3(s)\n"
        "missing: FeCl2(s) + 1/2 Cl2(g) -> FeCl3(s) would close it\n"
        "  type: FeCl2(s) + 1/2 Cl2(g) -> FeCl3(s) | dH … kJ/mol\n"
        "missing: formation of FeCl3(s) would close it: Fe(s) + 3/2 Cl2(g) -> FeCl3(s)\n"
        "  type: formation of FeCl3(s) | dH … kJ/mol"
    )


def test_a_phase_change_closes_the_gap():
    error = refused("2 H2(g) + O2(g) -> 2 H2O(g)", row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.8 kJ/mol"))
    first = error.missing[0]
    assert first.kind == "phase change"
    assert first.reaction == read_reaction("H2O(l) -> H2O(g)")
    assert first.text == "H2O(l) -> H2O(g) would close it: add a row `vaporisation of H2O(l)`"


def test_two_phase_changes_are_asked_for_together():
    error = refused("CH4(g) + H2O(l) -> CH4O(g) + H2(g)", row("K1", "CH4(g) + H2O(g) -> CH4O(l) + H2(g)", "10 kJ/mol"))
    assert error.missing[0].typed == ("vaporisation of H2O(l)", "vaporisation of CH4O(l)")
    assert error.missing[0].reaction == read_reaction("H2O(l) + CH4O(l) -> H2O(g) + CH4O(g)")


def test_a_change_of_form_closes_the_gap():
    error = refused("C(s, diamond) + O2(g) -> CO2(g)", row("K1", "C(s, graphite) + O2(g) -> CO2(g)", "-393.5 kJ/mol"))
    assert error.missing[0].kind == "form"
    assert error.missing[0].reaction == read_reaction("C(s, diamond) -> C(s, graphite)")


def test_a_typed_row_without_its_heat_is_named_first():
    error = refused(
        "H2(g) + 1/2 O2(g) -> H2O(g)",
        row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.8 kJ/mol"),
        row("K7", "H2O(g) -> H2O(l)"),
    )
    assert error.missing[0].text == "the heat of K7, H2O(g) -> H2O(l), would close it"
    assert "not used: K7 (no heat typed)" in str(error)


def test_a_formation_closes_the_gap():
    error = refused(
        "CH4(g) + 2 O2(g) -> CO2(g) + 2 H2O(l)",
        row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.8 kJ/mol"),
        row("K2", "C(s, graphite) + O2(g) -> CO2(g)", "-393.5 kJ/mol"),
    )
    (only,) = error.missing
    assert (only.kind, only.typed) == ("formation", ("formation of CH4(g)",))


def test_an_unbalanced_target_is_told_so_first():
    error = refused("CH4(g) + O2(g) -> CO2(g) + 2 H2O(l)", row("K1", "H2O(l) -> H2O(g)", "44 kJ/mol"))
    assert str(error).splitlines()[1].startswith("the target does not balance: O +2")
    assert error.missing == ()


def test_a_conserved_total_is_said_in_words():
    error = refused("N2O4(g) -> 2 NO2(g)", row("K1", "N2O4(g) -> N2O4(l)", "-38 kJ/mol"),
                    row("K2", "NO2(g) -> NO2(l)", "-30 kJ/mol"))  # fmt: skip
    assert error.broken.text == "the known rows never change the total of NO2(g) + NO2(l), the target changes it by +2"


def test_species_that_only_come_together_are_said_in_words():
    error = refused("H2(g) -> 2 H(g)", row("K1", "HI(g) -> H(g) + I(g)", "298 kJ/mol"),
                    row("K2", "H2(g) + I2(g) -> 2 HI(g)", "-9 kJ/mol"))  # fmt: skip
    assert error.broken.text == (
        "the known rows make and use H(g) and I(g) only together (H(g) − I(g) stays the same), "
        "the target changes H(g) − I(g) by +2"
    )


def test_it_pickles_and_is_shown_as_a_table():
    error = refused("H2O(s) -> H2O(g)", row("K1", "H2O(l) -> H2O(g)", "44 kJ/mol"))
    again = pickle.loads(pickle.dumps(error))
    assert (str(again), again.broken, again.missing) == (str(error), error.broken, error.missing)
    shown = Refusal("T", read_reaction("H2O(s) -> H2O(g)"), error).table()
    assert shown.rows[0] == ("why", "nothing known makes or uses H2O(s)")


NETS = st.dictionaries(
    st.sampled_from(COMPOUNDS), st.sampled_from([Fraction(-2), Fraction(-1), Fraction(1), Fraction(1, 2)]), min_size=1
)


@settings(deadline=None)
@given(st.lists(NETS, max_size=5), NETS)
def test_the_broken_quantity_holds_for_every_row_and_every_repair_works(nets, target):
    rows = [with_heat(f"K{i}", Reaction.from_net(net)) for i, net in enumerate(nets)]
    goal = Reaction.from_net(target)
    error = outcome(goal, rows)
    if error is None:
        return
    weights = dict(error.broken.weights)

    def change(net):
        return sum((weights.get(species, 0) * nu for species, nu in net.items()), Fraction(0))

    assert all(change(net) == 0 for net in nets)
    assert change(target) == error.broken.change != 0
    assert error.missing
    for item in error.missing:
        assert outcome(goal, [*rows, with_heat("new", item.reaction)]) is None
    assert all(len(item.reaction.net) <= len(target) for item in error.missing if item.kind == "reaction")


@settings(deadline=None)
@given(st.lists(NETS, max_size=5), NETS, st.randoms(use_true_random=False))
def test_the_order_of_known_rows_never_changes_the_explanation(nets, target, random):
    rows = [with_heat(f"K{i}", Reaction.from_net(net)) for i, net in enumerate(nets)]
    shuffled = list(rows)
    random.shuffle(shuffled)
    goal = Reaction.from_net(target)
    assert str(outcome(goal, shuffled)) == str(outcome(goal, rows))

"""Combinations of known rows: published examples, laws, and random networks with a hidden truth."""

import json
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.chem.formula import read_formula
from routeheat.chem.heat import HeatSum
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.row import Heat, Row, Rows
from routeheat.chem.species import Species
from routeheat.errors import OutOfReach
from routeheat.hess.combination import alternatives, combine
from routeheat.notation.code import read_reaction, row
from routeheat.units import KJ_PER_MOL

COMPOUNDS = [Species(name, "l", declared=True) for name in "ABCDEFG"]


def made_row(label, net, value, u=Fraction(1, 2)):
    return Row(label, Reaction.from_net(net), Heat(Measured(value, KJ_PER_MOL, Spread(u, Fraction(1)))))


@st.composite
def networks(draw):
    """Rows whose heats follow from hidden formation values, and the values."""
    hidden = {species: Fraction(draw(st.integers(-500, 500)), 10) for species in COMPOUNDS}
    rows = []
    for index in range(draw(st.integers(1, 7))):
        net = draw(
            st.dictionaries(
                st.sampled_from(COMPOUNDS),
                st.sampled_from([Fraction(n, d) for n in (-2, -1, 1, 2) for d in (1, 2)]),
                min_size=1,
                max_size=4,
            )
        )
        heat = sum((nu * hidden[species] for species, nu in net.items()), Fraction(0))
        rows.append(made_row(f"K{index}", net, heat))
    weights = st.sampled_from([Fraction(-1), Fraction(1), Fraction(3, 2)])
    chosen = draw(st.lists(st.tuples(weights, st.sampled_from(rows)), min_size=1, max_size=3))
    target = Reaction.from_net(add_net((weight, chosen_row.reaction) for weight, chosen_row in chosen))
    return rows, target, hidden


def dense_solution_exists(rows, target):
    """Gauss elimination on the full matrix of fractions: species down, rows across, the target last."""
    species = sorted({s for r in (*rows, target) for s in r}, key=str)
    matrix = [[net.get(s, Fraction(0)) for net in (*rows, target)] for s in species]
    done = 0
    for column in range(len(rows) + 1):
        pivot = next((i for i in range(done, len(matrix)) if matrix[i][column]), None)
        if pivot is None:
            continue
        if column == len(rows):
            return False
        matrix[done], matrix[pivot] = matrix[pivot], matrix[done]
        for i in range(len(matrix)):
            if i != done and matrix[i][column]:
                factor = matrix[i][column] / matrix[done][column]
                matrix[i] = [a - factor * b for a, b in zip(matrix[i], matrix[done], strict=True)]
        done += 1
    return True


def test_chlorine_fluorides_need_halves():
    # OpenStax, Chemistry 2e (2019), sec. 5.3, "A more challenging problem using Hess's law": -104.5 kJ
    rows = [
        row("R2", "2 OF2(g) -> O2(g) + 2 F2(g)", "-49.4 kJ/mol"),
        row("R3", "2 ClF(g) + O2(g) -> Cl2O(g) + OF2(g)", "214.0 kJ/mol"),
        row("R4", "ClF3(g) + O2(g) -> 1/2 Cl2O(g) + 3/2 OF2(g)", "236.2 kJ/mol"),
    ]
    found = combine(read_reaction("ClF(g) + F2(g) -> ClF3(g)"), rows)
    assert found.coefficients == {"R2": Fraction(-1, 2), "R3": Fraction(1, 2), "R4": Fraction(-1)}
    assert found.heat.exact == Fraction("-104.5")
    assert found.unique
    assert found.proved_shortest


def test_known_row_equal_to_the_target_is_a_combination_of_one_row():
    known = row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.83(4) kJ/mol")
    found = combine(known, [known, row("K2", "H2O(l) -> H2O(g)", "44 kJ/mol")])
    assert found.coefficients == {"K1": 1}
    assert found.label == "K1"


def test_a_target_that_cancels_needs_no_row():
    known = row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.83 kJ/mol")
    found = combine(read_reaction("H2O(l) -> H2O(l)"), [known])
    assert found.coefficients == {}
    assert (found.heat.exact, found.heat.u) == (0, 0)


def test_isomers_sharing_a_formula_never_close_a_cycle():
    a, b = (Species(name, "l", formula=read_formula("C2H6O"), declared=True) for name in "AB")
    c = Species("C", "l", declared=True)
    known = made_row("K1", {c: Fraction(-1), a: Fraction(1)}, Fraction(-10))
    with pytest.raises(OutOfReach):
        combine(Reaction.from_net({c: Fraction(-1), b: Fraction(1)}), [known])


def test_phases_are_not_interchangeable():
    known = row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.83 kJ/mol")
    with pytest.raises(OutOfReach):
        combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(g)"), [known])


def test_rows_without_a_heat_or_in_the_mixture_are_not_used():
    rows = [
        row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)"),
        row("K2", "H2(g) + 1/2 O2(g) -> H2O(sln)", "-286 kJ/mol"),
        row("K3", "H2O(sln) -> H2O(l)", "0 kJ/mol"),
    ]
    with pytest.raises(OutOfReach, match=r"K1 \(no heat typed\), K2 \(in the reaction mixture\)"):
        combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), rows)


def test_a_target_in_the_mixture_is_refused_by_name():
    with pytest.raises(OutOfReach, match=r"H2O\(sln\) in the reaction mixture"):
        combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(sln)"), [row("K1", "H2(g) -> H2(l)", "1 kJ/mol")])


def test_equal_labels_are_refused():
    known = row("K1", "H2O(l) -> H2O(g)", "44 kJ/mol")
    with pytest.raises(ValueError, match="share a label"):
        combine(known.reaction, [known, known])


def test_unknown_heats_stay_symbolic():
    rows = [row("K1", "H2(g) + 1/2 O2(g) -> H2O(g)", "x"), row("K2", "H2O(l) -> H2O(g)", "44 kJ/mol")]
    found = combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), rows)
    assert found.heat.unknowns == {"x": 1}
    assert found.heat.exact == -44
    ends = [arrow.end for column in found.ladder().columns for arrow in column.arrows]
    assert ends == [None, -44.0, None]


def test_alike_rows_fall_to_the_label_numbers_counted_as_numbers():
    rows = [row(label, "H2O(l) -> H2O(g)", "44 kJ/mol") for label in ("K10", "K2")]
    assert combine(rows[0].reaction, rows).coefficients == {"K2": 1}


def test_alternatives_are_in_order_and_leave_out_the_combination_itself():
    rows = [
        row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.8 kJ/mol"),
        row("K2", "2 H2(g) + O2(g) -> 2 H2O(l)", "-571.6 kJ/mol"),
        row("K3", "H2(g) + 1/2 O2(g) -> H2O(g)", "-241.8 kJ/mol"),
        row("K4", "H2O(l) -> H2O(g)", "44 kJ/mol"),
    ]
    first = combine(rows[0].reaction, rows)
    others = alternatives(first)
    assert first.coefficients == {"K2": Fraction(1, 2)}
    assert [other.coefficients for other in others] == [{"K1": 1}, {"K3": 1, "K4": -1}]
    assert alternatives(first, 1) == others[:1]
    assert [item.coefficients for item in alternatives(others[0])] == [first.coefficients, others[1].coefficients]


def test_coverage_factor_comes_from_the_known_rows_unless_given():
    known = row("K1", "H2O(l) -> H2O(g)", "44.0 ± 0.4 kJ/mol (k = 2)")
    assert combine(known.reaction, Rows([known], k=3.0)).heat.k == 3.0
    assert combine(known.reaction, Rows([known], k=3.0), k=1).heat.k == 1
    assert combine(known.reaction, [known]).heat.k == 2.0


def test_plain_data_survive_json_with_fractions_as_text():
    rows = [row("K1", "2 H2(g) + O2(g) -> 2 H2O(l)", "-571.6 ± 0.4 kJ/mol (k = 2)")]
    plain = json.loads(json.dumps(combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), rows).to_dict()))
    assert plain["coefficients"] == {"K1": "1/2"}
    assert plain["heat"]["value"] == pytest.approx(-285.8)
    assert plain["heat"]["u"] == pytest.approx(0.1)


@settings(deadline=None)
@given(networks())
def test_the_hidden_heat_is_found_and_the_sum_is_the_target(network):
    rows, target, hidden = network
    found = combine(target, rows)
    assert add_net((c, r.reaction) for r, c in found.terms) == target.net
    assert found.heat.exact == sum((nu * hidden[s] for s, nu in target.net.items()), Fraction(0))


@settings(deadline=None)
@given(networks(), st.randoms(use_true_random=False))
def test_the_order_of_known_rows_never_changes_the_first_combination(network, random):
    rows, target, _ = network
    shuffled = list(rows)
    random.shuffle(shuffled)
    assert combine(target, shuffled).coefficients == combine(target, rows).coefficients


@settings(deadline=None)
@given(networks(), st.sampled_from([Fraction(-1), Fraction(2), Fraction(-3, 7)]))
def test_a_scaled_or_reversed_target_scales_coefficients_and_heat(network, factor):
    rows, target, _ = network
    plain, scaled = combine(target, rows), combine(target.scaled(factor), rows)
    assert scaled.coefficients == {label: factor * c for label, c in plain.coefficients.items()}
    assert scaled.heat.exact == factor * plain.heat.exact


@settings(deadline=None)
@given(networks(), st.integers(-5, 5), st.integers(-5, 5))
def test_the_family_gives_the_target_for_any_parameters(network, first, second):
    rows, target, _ = network
    found = combine(target, rows)
    values = {name: Fraction([first, second][i % 2], i + 1) for i, name in enumerate(found.parameters)}
    by_label = {r.label: r.reaction for r in rows}
    parts = []
    for label, expression in found.family.items():
        number = expression.subs(values)
        parts.append((Fraction(int(number.p), int(number.q)), by_label[label]))
    assert add_net(parts) == target.net
    assert found.unique == (not found.parameters)


@settings(deadline=None)
@given(
    networks(), st.dictionaries(st.sampled_from(COMPOUNDS), st.sampled_from([Fraction(-1), Fraction(1)]), max_size=4)
)
def test_a_target_is_refused_exactly_when_the_rank_grows(network, net):
    rows, _, _ = network
    reachable = dense_solution_exists([r.reaction.net for r in rows], net)
    try:
        combine(Reaction.from_net(net), rows)
    except OutOfReach:
        assert not reachable
    else:
        assert reachable


@settings(deadline=None)
@given(networks())
def test_a_result_minus_itself_is_exactly_nothing(network):
    rows, target, _ = network
    heat = combine(target, rows).heat
    assert heat - heat == HeatSum.zero(heat.k)

"""The ledger, the table of rows, and the ladder of a combination."""

from fractions import Fraction

import pytest

from routeheat.chem.row import Row
from routeheat.hess.combination import combine
from routeheat.notation.code import read_reaction, row
from routeheat.present.markup import plain
from routeheat.present.table import Reading


@pytest.fixture
def found():
    rows = [
        row("K1", "2 H2(g) + O2(g) -> 2 H2O(g)", "-483.6 ± 0.4 kJ/mol (k = 2)", source="first book"),
        row("K2", "H2O(l) -> H2O(g)", "44.0 ± 0.2 kJ/mol (k = 1)"),
    ]
    return combine(read_reaction("H2(g) + 1/2 O2(g) -> H2O(l)"), rows)


def test_every_line_of_the_ledger_adds_up_and_says_what_cancels(found):
    ledger = found.ledger
    lines = {plain(line[0]): line[1:] for line in ledger.rows[:-1]}
    assert lines == {
        "H2(g)": (Fraction(-1), None, -1, -1, ""),
        "O2(g)": (Fraction(-1, 2), None, Fraction(-1, 2), Fraction(-1, 2), ""),
        "H2O(l)": (None, 1, 1, 1, ""),
        "H2O(g)": (1, -1, 0, 0, "cancels"),
    }
    assert [column.header for column in ledger.columns[1:3]] == ["1/2 K1", "−K2"]
    assert "target = 1/2 K1 − K2" in ledger.notes


def test_the_last_line_of_the_ledger_is_heats_with_the_total(found):
    *_, last = found.ledger.rows
    first, second, total = (cell for cell in last if isinstance(cell, Reading))
    assert (first.value, second.value) == (-241.8, -44.0)
    assert total.value == pytest.approx(-285.8)
    # u² = (0.2/2)² + 0.2²
    assert total.u == pytest.approx(0.05**0.5)
    assert found.ledger.strong == {len(found.ledger.rows) - 1}


def test_the_table_has_coefficients_contributions_and_sources(found):
    first, second, total = found.table().rows
    assert first[:2] == ("K1", Fraction(1, 2))
    assert plain(first[2]) == "H2(g) + 1/2 O2(g) → H2O(g)"
    assert (first[3].value, first[4].value, first[5], first[6]) == (-483.6, -241.8, 0.1, "first book")
    assert plain(second[2]) == "H2O(g) → H2O(l)"
    assert total[5] == pytest.approx(0.05**0.5)


def test_an_uncertainty_that_is_not_stated_is_never_zero():
    rows = [row("K1", "H2O(l) -> H2O(g)", "44 kJ/mol"), row("K2", "H2O(s) -> H2O(l)", "6.0 ± 0.1 kJ/mol (k = 1)")]
    table = combine(read_reaction("H2O(s) -> H2O(g)"), rows).table()
    assert [line[5] for line in table.rows] == ["not stated", 0.1, "at least 0.10"]
    assert "uncertainty at least: K1 not stated" in table.notes


def test_the_two_ways_of_the_ladder_end_at_the_same_level(found):
    over, direct = found.ladder().columns
    assert [arrow.label for arrow in over.arrows] == ["K1", "K2"]
    assert [arrow.role for arrow in (*over.arrows, *direct.arrows)] == ["known", "known", "direct"]
    assert over.arrows[1].start == over.arrows[0].end == -241.8
    assert over.arrows[-1].end == direct.arrows[0].end == pytest.approx(-285.8)
    assert over.arrows[-1].spread == direct.arrows[0].spread == pytest.approx(2 * 0.05**0.5)
    assert plain(over.start_label) == "H2(g) + 1/2 O2(g)"


def test_unbalanced_rows_and_different_temperatures_are_named():
    rows = [row("K1", "H2O(l) -> H2O(g)", "40.7 kJ/mol at 100 degC"), row("K2", "H2O(s) -> H2O(l)", "6.0 kJ/mol")]
    notes = combine(read_reaction("H2O(s) -> H2O(g)"), rows).table().notes
    # ΔCp = 33.6 − 75.3 J/(mol K) over −75 K
    assert ("the heats hold at different temperatures (K1 373.15 K; K2 298.15 K) and are added as they are; bringing "
            "all to 298.15 K would change the sum by 3.13 kJ/mol") in notes  # fmt: skip


def test_a_row_that_does_not_balance_is_flagged():
    heat = row("K1", "H2(g) + 1/2 O2(g) -> H2O(l)", "-285.8 kJ/mol").heat
    unbalanced = Row("K1", read_reaction("H2(g) + O2(g) -> H2O(l)"), heat)
    notes = combine(unbalanced, [unbalanced]).ledger.notes
    assert "K1 does not balance and is used as typed: O −1" in notes


def test_text_is_the_same_every_time_and_says_whether_it_is_the_only_way(found):
    assert found.text == found.text
    assert "the only combination of the known rows" in found.text

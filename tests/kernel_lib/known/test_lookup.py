"""Looking up: what matches, what is refused, and that every line of the table reads as a balanced row."""

from fractions import Fraction

import pytest

from routeheat.errors import UnknownName
from routeheat.known.lookup import find_species, known_row, must_be_declared, row_label, rows_text
from routeheat.known.table import KnownSpecies, species_table
from routeheat.process.sheet import read_sheet


def line(name: str, phase: str) -> KnownSpecies:
    return next(item for item in species_table() if item.name == name and item.phase == phase)


@pytest.mark.parametrize("query", ["62-53-3", "aniline", "Aniline", "C6H5NH2", "C6H7N", "phenylamine"])
def test_a_species_is_found_by_number_name_and_formula(query: str) -> None:
    assert {(item.name, item.phase) for item in find_species(query).exact} == {("aniline", "l"), ("aniline", "g")}


@pytest.mark.parametrize("query", ["H2O", "OH2", "HOH"])
def test_a_formula_is_compared_by_composition(query: str) -> None:
    assert find_species(query).names == ("water",)


def test_a_formula_lists_every_isomer() -> None:
    assert find_species("C8H10").names == ("ethylbenzene", "o-xylene", "m-xylene", "p-xylene")


def test_the_charge_is_part_of_a_formula() -> None:
    assert find_species("NH4^+").names == ("ammonium",)
    assert "ammonia" in find_species("NH3").names


def test_a_near_name_is_offered_and_not_taken() -> None:
    found = find_species("nitrobenzen")
    assert not found.exact
    assert found.near[0].name == "nitrobenzene"


def test_an_exact_name_is_not_listed_again_as_near() -> None:
    assert "aniline" not in {item.name for item in find_species("aniline").near}


def test_nothing_found_says_that_the_list_is_not_complete() -> None:
    assert find_species("unobtainium").table().notes == (
        "Nothing in the table looks like this. It is not a complete list of species.",
    )


def test_several_substances_are_called_several() -> None:
    assert any(note.startswith("Several substances fit") for note in find_species("C3H8O").table().notes)


def test_a_value_from_memory_is_called_so() -> None:
    found = find_species("chlorosulfonic acid")
    assert found.exact[0].source.endswith("from memory, unverified")
    assert any("unverified" in note for note in found.table().notes)


def test_an_uncertainty_that_is_not_stated_is_not_shown_as_zero() -> None:
    assert "−425.61 (u not stated)" in find_species("sodium hydroxide").text


def test_the_transitions_of_a_substance_are_shown_with_it() -> None:
    changes = find_species("benzene").transitions
    assert {(change.kind, change.temperature) for change in changes} >= {("fusion", 278.68), ("vaporisation", 298.15)}
    assert len(find_species("benzene").tables()) == 2


def test_an_inorganic_row_is_typed_by_its_formula() -> None:
    assert rows_text((line("water", "l"),)) == (
        "known\n"
        "  [H2O_l] formation of H2O(l) | dH -285.830 ± 0.04 kJ/mol (95 %)"
        ' | source "CODATA Key Values for Thermodynamics (Cox, Wagman, Medvedev 1989)"\n'
    )


def test_an_organic_row_declares_its_name() -> None:
    text = rows_text((line("aniline", "l"),))
    declared, known = text.split("\n\n")
    assert declared == "species\n  aniline  C6H7N | cas 62-53-3"
    assert known.startswith("known\n  [aniline_l] formation of aniline(l) | dH ")


def test_isomers_are_declared_even_when_they_are_small() -> None:
    assert must_be_declared(line("propyne", "g"))
    assert not must_be_declared(line("methane", "g"))


def test_a_reference_state_makes_a_comment() -> None:
    assert rows_text((line("oxygen", "g"),)) == "known\n  # O2(g) is a reference state: zero by definition\n"


def test_the_whole_table_reads_as_one_sheet_of_balanced_rows() -> None:
    sheet = read_sheet(rows_text(species_table()))
    wanted = [item for item in species_table() if not item.is_reference]
    assert len(sheet.known) == len(wanted)
    assert not [row.label for row in sheet.known.values() if not row.reaction.balanced]


def test_the_whole_table_keeps_its_values_and_uncertainties_in_a_sheet() -> None:
    sheet = read_sheet(rows_text(species_table()))
    for item in species_table():
        if not item.is_reference:
            datum = sheet.known[row_label(item)].datum
            assert datum is not None
            assert (datum.value, datum.u) == (item.value, item.u), item.name


def test_a_known_row_is_the_row_of_the_sheet() -> None:
    row = known_row("aniline", "l")
    assert row.reaction.text == "6 C(s, graphite) + 7/2 H2(g) + 1/2 N2(g) -> aniline(l)"
    assert row.datum is not None
    assert row.datum.value == Fraction("31.3")
    assert row.source.startswith("Pedley")


def test_a_known_row_may_have_a_label_of_its_own() -> None:
    assert known_row("water", "l", label="K2").label == "K2"


def test_a_formula_with_isomers_is_not_a_known_row() -> None:
    with pytest.raises(UnknownName) as caught:
        known_row("C3H8O", "l")
    assert caught.value.choices == ("1-propanol(l) [71-23-8]", "2-propanol(l) [67-63-0]")


def test_a_form_decides_between_two_solids() -> None:
    with pytest.raises(UnknownName):
        known_row("CaCO3", "s")
    assert known_row("CaCO3", "s", "aragonite").reaction.text.endswith("CaCO3(s, aragonite)")


def test_an_unknown_phase_lists_the_known_ones() -> None:
    with pytest.raises(UnknownName) as caught:
        known_row("aniline", "s")
    assert caught.value.choices[:2] == ("aniline(l) [62-53-3]", "aniline(g) [62-53-3]")


def test_a_reference_state_has_no_formation_row() -> None:
    with pytest.raises(ValueError, match="zero by definition"):
        known_row("oxygen", "g")

"""Rows: a heat per mole of reaction as written, whatever it is stated per."""

from fractions import Fraction

import pytest

from routeheat.chem.formula import read_formula
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import REFERENCE_TEMPERATURE, Heat, Row, Rows
from routeheat.chem.species import Species
from routeheat.units import CELSIUS, KJ, KJ_PER_KG, KJ_PER_MOL, Unit, read_unit


def species(formula: str, phase: str) -> Species:
    return Species(formula, phase, "", read_formula(formula))


NITROBENZENE, HYDROGEN = species("C6H5NO2", "l"), species("H2", "g")
ANILINE, WATER = species("C6H5NH2", "l"), species("H2O", "l")
ONE = Fraction(1)
HYDROGENATION = Reaction(((ONE, NITROBENZENE), (3 * ONE, HYDROGEN)), ((ONE, ANILINE), (2 * ONE, WATER)))


def heat(value: str, unit: Unit, basis: Species | None = None, half: str | None = None) -> Heat:
    spread = None if half is None else Spread(Fraction(half), Fraction(2), "k = 2")
    return Heat(Measured(Fraction(value), unit, spread), basis)


def kj_per_mol(typed: Heat) -> Fraction:
    datum = Row("A", HYDROGENATION, typed).datum
    assert datum is not None
    return datum.value


def test_one_heat_on_every_basis() -> None:
    # -552.9 kJ/mol as written is -184.3 kJ per mol of H2, and -4491 kJ per kg of nitrobenzene (M = 123.111 g/mol)
    assert kj_per_mol(heat("-552.9", KJ_PER_MOL)) == Fraction("-552.9")
    assert kj_per_mol(heat("-552.9", KJ)) == Fraction("-552.9")
    assert kj_per_mol(heat("-184.3", KJ_PER_MOL, HYDROGEN)) == Fraction("-552.9")
    assert kj_per_mol(heat("-276.45", KJ_PER_MOL, WATER)) == Fraction("-552.9")
    assert kj_per_mol(heat("-4491", KJ_PER_KG, NITROBENZENE)) == pytest.approx(-552.9, abs=0.05)
    assert kj_per_mol(heat("-4491", read_unit("J/g"), NITROBENZENE)) == kj_per_mol(
        heat("-4.491", read_unit("MJ/kg"), NITROBENZENE)
    )


def test_the_sign_never_changes_with_the_basis() -> None:
    for basis in (NITROBENZENE, HYDROGEN, ANILINE, WATER):
        assert kj_per_mol(heat("-1", KJ_PER_MOL, basis)) < 0
        assert kj_per_mol(heat("-1", KJ_PER_KG, basis)) < 0


def test_the_uncertainty_scales_with_the_heat() -> None:
    datum = Row("A", HYDROGENATION, heat("-184.3", KJ_PER_MOL, HYDROGEN, "4")).datum
    assert datum is not None
    assert datum.u == 6


def test_a_species_that_is_absent_or_cancels_is_no_basis() -> None:
    absent = Row("A", HYDROGENATION, heat("-1", KJ_PER_MOL, species("O2", "g")))
    with pytest.raises(ValueError, match=r"O2\(g\) does not take part in the reaction"):
        _ = absent.datum
    both = Reaction((*HYDROGENATION.reactants, (2 * ONE, WATER)), HYDROGENATION.products)
    with pytest.raises(ValueError, match=r"H2O\(l\) stands on both sides and cancels"):
        _ = Row("A", both, heat("-1", KJ_PER_MOL, WATER)).datum


def test_a_heat_per_mass_needs_a_molar_mass() -> None:
    tar = Species("tar", "l", "", None, True)
    made = Reaction(((ONE, NITROBENZENE),), ((ONE, tar),))
    with pytest.raises(ValueError, match="needs a molar mass"):
        _ = Row("A", made, heat("-1", KJ_PER_KG, tar)).datum
    weighed = Species("tar", "l", "", None, True, Fraction(500))
    datum = Row("A", Reaction(((ONE, NITROBENZENE),), ((ONE, weighed),)), heat("-2", KJ_PER_KG, weighed)).datum
    assert datum is not None
    assert datum.value == -1


def test_a_letter_is_an_unknown_without_a_number() -> None:
    row = Row("A", HYDROGENATION, Heat(None, symbol="x"))
    total = row.heat_sum()
    assert total is not None
    assert total.unknowns == {"x": 1}
    assert row.datum is not None
    assert row.datum.u is None


def test_a_known_row_holds_at_25_degrees_unless_it_says_otherwise() -> None:
    assert Fraction("298.15") == REFERENCE_TEMPERATURE
    assert Row("A", HYDROGENATION, heat("-1", KJ_PER_MOL)).temperature == REFERENCE_TEMPERATURE
    at = Heat(Measured(ONE, KJ_PER_MOL), temperature=Measured(Fraction(50), CELSIUS))
    assert Row("A", HYDROGENATION, at).temperature == Fraction("323.15")
    assert Row("A", HYDROGENATION).datum is None


def test_heats_are_written_as_they_are_typed() -> None:
    typed = Heat(
        Measured(Fraction(-4490), KJ_PER_KG, Spread(Fraction(50), Fraction("1.96"), "95 %")), NITROBENZENE,
        temperature=Measured(Fraction(25), CELSIUS),
    )  # fmt: skip
    assert typed.text == "-4490 ± 50 kJ/kg of C6H5NO2(l) (95 %) at 25 degC"


def test_rows_are_a_mapping_in_typed_order() -> None:
    first, second = Row("B", HYDROGENATION), Row("A", HYDROGENATION.scaled(Fraction(-1)))
    rows = Rows([first, second])
    assert list(rows) == ["B", "A"]
    assert rows["A"] is second
    assert rows == Rows([first, second])
    assert rows != Rows([second, first])
    assert hash(rows) == hash(Rows([first, second]))

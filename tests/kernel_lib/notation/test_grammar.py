"""Equations and species: every way that is read, and every trap with its place, reason and repair."""

from collections.abc import Mapping

import pytest

from routeheat.chem.route import Declaration
from routeheat.errors import Fault, SheetFaults
from routeheat.notation.build import build_sheet
from routeheat.notation.code import read_reaction


def declared(*lines: str) -> Mapping[str, Declaration]:
    sheet, faults = build_sheet("species\n" + "".join(f"  {line}\n" for line in lines))
    assert [fault for fault in faults if fault.severity == "fault"] == []
    return sheet.species


def fault_of(text: str, *species: str) -> Fault:
    with pytest.raises(SheetFaults) as caught:
        read_reaction(text, species=declared(*species))
    (fault,) = caught.value.faults
    return fault


@pytest.mark.parametrize("arrow", ["->", "→", "⟶", "=", "-->"])
def test_arrows(arrow: str) -> None:
    assert read_reaction(f"H2O(l) {arrow} H2O(g)").text == "H2O(l) -> H2O(g)"


@pytest.mark.parametrize("arrow", ["⇌", "<=>"])
def test_equilibrium_arrows(arrow: str) -> None:
    assert read_reaction(f"H2O(l) {arrow} H2O(g)").reversible


@pytest.mark.parametrize(
    ("typed", "read"),
    [
        ("2H2O(l) -> 2 H2(g) + O2(g)", "2 H2O(l) -> 2 H2(g) + O2(g)"),
        ("H2(g) + ½ O2(g) -> H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)"),
        ("H2(g) + ½O2(g) -> H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)"),
        ("H2(g) + 0.5 O2(g)->H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)"),
        ("H2(g) + 1/2O2(g) -> H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)"),
        ("1½ O2(g) -> O3(g)", "3/2 O2(g) -> O3(g)"),
        ("C6H6(l) + 7.5O2(g) -> 6 CO2(g) + 3 H2O(l)", "C6H6(l) + 15/2 O2(g) -> 6 CO2(g) + 3 H2O(l)"),
        ("H2O (l) -> H2O ( g )", "H2O(l) -> H2O(g)"),
        ("HNO3(aq,65%) -> HNO3(aq)", "HNO3(aq, 65 %) -> HNO3(aq)"),
        ("C(graphite) -> C(diamond)", "C(s, graphite) -> C(s, diamond)"),
        ("C(s,  Graphite) -> C(s, gray)", "C(s, graphite) -> C(s, grey)"),
        ("SO₄²⁻(aq) + Ba²⁺(aq) -> BaSO₄(s)", "SO4^2-(aq) + Ba^2+(aq) -> BaSO4(s)"),
        ("SO4 2-(aq) + Ba2+(aq) -> BaSO4(s)", "SO4^2-(aq) + Ba^2+(aq) -> BaSO4(s)"),
        ("Fe3+(aq) + 3 OH-(aq) -> Fe(OH)3(s)", "Fe^3+(aq) + 3 OH^-(aq) -> Fe(OH)3(s)"),
        ("CaSO4.0.5H2O(s) + 1.5 H2O(l) -> CaSO4.2H2O(s)", "CaSO4·0.5H2O(s) + 3/2 H2O(l) -> CaSO4·2H2O(s)"),
        ("D2O(l) -> D2O(g)", "D2O(l) -> D2O(g)"),
        ("H2 + O2 -> H2O2", "H2 + O2 -> H2O2"),
    ],
)
def test_what_chemists_type_is_read(typed: str, read: str) -> None:
    reaction = read_reaction(typed)
    assert reaction.text == read
    assert read_reaction(reaction.text) == reaction


@pytest.mark.parametrize(
    ("typed", "column", "length", "message", "hint"),
    [
        ("THF(l) -> C4H8O(l)", 1, 1, "'T' may be an element", "an abbreviation? declare it"),
        ("Ac2O(l) -> H2O(l)", 1, 2, "'Ac' may be an element", "an abbreviation? declare it"),
        ("NaOAc(s) -> NaOAc(aq)", 4, 2, "'Ac' may be an element", "an abbreviation? declare it"),
        ("TsOH(s) -> H2O(l)", 1, 2, "'Ts' may be an element", "an abbreviation? declare it"),
        ("HDO(l) -> H2O(l)", 2, 1, "'D' may be an element", "the isotope is written [2H]"),
        ("O2-(aq) -> O2(g)", 2, 2, "the digits may belong", "write O^2- or O2^-"),
        ("I3-(aq) -> I2(s)", 2, 2, "the digits may belong", "write I^3- or I3^-"),
        ("N3-(aq) -> N2(g)", 2, 2, "the digits may belong", "write N^3- or N3^-"),
        ("H2(g) + .5 O2(g) -> H2O(l)", 9, 8, "a decimal needs a leading digit", "write 0.5 O2(g)"),
        ("H2(g)+1/2 O2(g) -> H2O(l)", 6, 1, "species are separated by + between blanks", "write H2(g) + 1/2 O2(g)"),
        ("H2(g) + + O2(g) -> H2O(l)", 9, 1, "a species is missing beside this +", "a + stands between two species"),
        ("H2(g) + -> H2O(l)", 7, 1, "a species is missing beside this +", "a + stands between two species"),
        ("H2(g) -> ", 9, 1, "nothing stands behind the arrow", "both sides"),
        ("-> H2(g)", 1, 1, "nothing stands before the arrow", "both sides"),
        ("H2(g)", 1, 5, "an arrow is missing", "like C6H6(l)"),
        ("H2(g)=H2(l)", 6, 1, "this is not an arrow", "write ->, or = between blanks"),
        ("H2(g) => H2(l)", 7, 2, "this is not an arrow", "write ->"),
        ("H2(g) - > H2(l)", 7, 3, "this is not an arrow", "write ->"),
        ("H2(g) -> H2(l) -> H2(s)", 16, 2, "a second arrow", "one reaction a row"),
        ("0 H2(g) -> H2(l)", 1, 2, "a coefficient of zero", "leave the species out"),
        ("1/0 H2(g) -> H2(l)", 1, 3, "a coefficient divided by zero", "is the fraction right?"),
        ("2 -> H2(l)", 1, 1, "a species is missing behind the coefficient", "like 2 H2O(l)"),
        ("1234567890123456 H2(g) -> H2(l)", 1, 16, "a coefficient of more than 15 characters", "round it"),
        ("1 1/2 O2(g) -> O3(g)", 1, 5, "two coefficients before one species", "write 3/2"),
        ("2 2 H2(g) -> H2(l)", 1, 3, "two coefficients before one species", "write one number"),
        ("2*H2O(l) -> H2O(g)", 1, 2, "a coefficient is followed by a blank only", "write 2 H2O(l)"),
        ("1/2½ O2(g) -> O(g)", 1, 4, "two fractions in one coefficient", "write one number"),
        ("H2O(liq) -> H2O(g)", 4, 5, "(liq) is not a state symbol", "write (l)"),
        ("H2O(L) -> H2O(g)", 4, 3, "(L) is not a state symbol", "write (l)"),
        ("NaCl(S) -> NaCl(aq)", 5, 3, "(S) is not a state symbol", "write (s)"),
        ("H2O(x) -> H2O(g)", 4, 3, "(x) is not a state symbol", "write one of (s), (cr)"),
        ("(s) -> H2(g)", 1, 3, "a species is missing before (s)", "like H2O(s)"),
        ("h2o(l) -> H2O(g)", 1, 1, "no element symbol starts with a small letter", "write H2O"),
        ("nitrobenzene(l) -> H2(g)", 1, 12, "nitrobenzene is neither a declared name nor a formula", "declare it"),
        ("4-nitrotoluene -> H2(g)", 1, 14, "4-nitrotoluene is neither a declared name nor a formula", "declare it"),
        ("e- + H+(aq) -> H2(g)", 1, 2, "electrons are no species here", "type a reaction between substances"),
        ("P(s) -> P(g)", 1, 4, "which form of phosphorus?", "write P(s, white) or P(s, red)"),
        ("H2O(l) dH -3 -> H2O(g)", 1, 12, "a key stands in the equation", "keys stand behind |"),
        ("HNO3(aq, " + "6" * 41 + ") -> H2(g)", 5, 47, "this form of a state cannot be read", "like (aq, 65 %)"),
        ("C" * 251 + " -> H2(g)", 1, 251, "a species of more than 250 characters", "declare a short name"),
    ],
)
def test_traps_are_faults_with_place_and_repair(typed: str, column: int, length: int, message: str, hint: str) -> None:
    fault = fault_of(typed)
    assert fault.message.startswith(message)
    assert hint in fault.hint
    assert (fault.column, fault.length) == (column, length)


def test_too_many_species_on_one_side() -> None:
    side = " + ".join(["H2(g)"] * 61)
    assert fault_of(f"{side} -> H2(l)").message == "more than 60 species on one side"


def test_an_equation_that_grows_when_written_out_is_refused() -> None:
    name = "A  C2H6(aq, " + "6" * 40 + ")"
    side = " + ".join(["A"] * 60)
    assert fault_of(f"{side} -> {side}", name).message == "this equation is too long when it is written out"


@pytest.mark.parametrize(
    ("name", "formula"),
    [
        ("2,4-DNT", "C7H6N2O4(s)"),
        ("4-nitrotoluene", "C7H7NO2(s)"),
        ("benzoic acid", "C7H6O2(s)"),
        ("Pd/C (5 %)", "?(s)"),
        ("N,N-dimethylaniline", "C8H11N(l)"),
        ("tert-butyl (R)-lactate", "C7H14O3(l)"),
        ("α-pinene", "C10H16(l)"),
        ("Na+", "Na+(aq)"),
        ("use", "H2(g)"),
        ("species", "H2(g)"),
        ("route 66", "H2(g)"),
        ("dH", "H2(g)"),
        ("formation", "H2(g)"),
        ("T", "H2(g)"),
        ("salt at 5", "NaCl(s)"),
    ],
)
def test_declared_names_match_as_they_are(name: str, formula: str) -> None:
    names = declared(f"{name}  {formula}", "W  H2O(l)")
    reaction = read_reaction(f"{name} + 2 {name} + W -> 3 {name}(sln) + W", species=names)
    (_, first), (two, second), _ = reaction.reactants
    assert (first.name, first.phase, two) == (name, names[name].species.phase, 2)
    assert first == second
    assert reaction.products[0][1].phase == "sln"
    assert read_reaction(reaction.text, species=names) == reaction


def test_a_name_that_is_the_beginning_of_another_one() -> None:
    names = declared("A  C2H6(g)", "A B  H2(g)", "AB  C2H4(g)")
    assert read_reaction("A -> AB + A B", species=names).text == "A(g) -> AB(g) + A B(g)"


def test_a_coefficient_touches_formulas_only() -> None:
    fault = fault_of("2benzoic acid -> H2(g)", "benzoic acid  C7H6O2(s)")
    assert fault.hint == "write 2 benzoic acid"
    assert read_reaction("2H2O -> 2H2 + O2", species=declared("H2O  H2O(l)")).reactants[0][0] == 2


def test_a_name_typed_with_two_blanks_is_the_same_name() -> None:
    assert read_reaction("benzoic  acid -> H2(g)", species=declared("benzoic acid  C7H6O2(s)")).reactants[0][1].declared


def test_a_misspelt_name_is_repaired() -> None:
    assert fault_of("anilin -> H2(g)", "aniline  C6H7N(l)").hint == "did you mean aniline?"


def test_two_isomers_make_their_formula_a_fault() -> None:
    fault = fault_of("C8H10(l) -> oX", "oX  C8H10(l)", "pX  C8H10(l)")
    assert fault.message == "C8H10 is the formula of oX or pX: isomers are never merged"
    assert fault.hint == "write the name"


def test_one_declared_formula_is_the_declared_species() -> None:
    names = declared("oX  C8H10(l)")
    assert read_reaction("C8H10(l) -> C8H10(g)", species=names) == read_reaction("oX -> oX(g)", species=names)
    # element order is kept, so this is another species
    assert read_reaction("H10C8(l) -> oX", species=names).net


def test_what_is_typed_as_state_holds_and_the_rest_is_as_declared() -> None:
    names = declared("acid  HCl(aq, 36 %)", "X  C2H6")
    (_, strong), (_, dilute), (_, free) = read_reaction("acid + acid(aq) + X -> H2(g)", species=names).reactants
    assert (strong.form, dilute.form, free.phase) == ("36 %", "", "")
    assert read_reaction("X(l) -> X(g)", species=names).net


@pytest.mark.parametrize(
    ("typed", "read", "notice"),
    [
        ("C(s)", "C(s, graphite)", "C(s) read as C(s, graphite)"),
        ("S(cr)", "S(s, rhombic)", "S(cr) read as S(s, rhombic)"),
        ("Fe(cr)", "Fe(s)", "Fe(cr) read as Fe(s)"),
        ("S8(s)", "S8(s)", "S8(s) is another species than S(s, rhombic), from which formation rows start"),
        ("S(g)", "S(g)", None),
        ("C(s, diamond)", "C(s, diamond)", None),
        ("I2(s)", "I2(s)", None),
    ],
)
def test_solid_elements_without_a_form(typed: str, read: str, notice: str | None) -> None:
    sheet, faults = build_sheet(f"known\n  [K] {typed} -> U(s) | dH 1 kJ/mol\n")
    assert sheet.known["K"].reaction.reactants[0][1].text == read
    assert [fault.message for fault in faults if fault.severity == "notice"] == ([notice] if notice else [])


def test_only_named_species_take_part() -> None:
    spectator = read_reaction("H2O(l) + NaCl(s) -> NaCl(aq) + H2O(l)")
    assert spectator.net == read_reaction("NaCl(s) -> NaCl(aq)").net

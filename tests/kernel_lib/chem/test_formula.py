"""Formulas: masses against two independent libraries, readings, refusals with place and repair, and laws."""

import re
from fractions import Fraction

import molmass
import periodictable
import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from routeheat.chem.elements import elements, isotopes
from routeheat.chem.formula import MAX_LENGTH, Formula, read_formula
from routeheat.errors import FormulaError
from routeheat.present.markup import Run, plain

# Our text, and the same compound in the dialects of periodictable and molmass.
COMPOUNDS = [
    ("H2O", "H2O", "H2O"),
    ("NH3", "NH3", "NH3"),
    ("CO2", "CO2", "CO2"),
    ("CH4", "CH4", "CH4"),
    ("C6H6", "C6H6", "C6H6"),
    ("C6H7N", "C6H7N", "C6H7N"),
    ("C6H5NO2", "C6H5NO2", "C6H5NO2"),
    ("CH3COOH", "CH3COOH", "CH3COOH"),
    ("(CH3)2CO", "(CH3)2CO", "(CH3)2CO"),
    ("C2H5OH", "C2H5OH", "C2H5OH"),
    ("CHCl3", "CHCl3", "CHCl3"),
    ("SOCl2", "SOCl2", "SOCl2"),
    ("POCl3", "POCl3", "POCl3"),
    ("HNO3", "HNO3", "HNO3"),
    ("H2SO4", "H2SO4", "H2SO4"),
    ("H3PO4", "H3PO4", "H3PO4"),
    ("NaOH", "NaOH", "NaOH"),
    ("NaBH4", "NaBH4", "NaBH4"),
    ("LiAlH4", "LiAlH4", "LiAlH4"),
    ("LiC4H9", "LiC4H9", "LiC4H9"),
    ("KMnO4", "KMnO4", "KMnO4"),
    ("K2Cr2O7", "K2Cr2O7", "K2Cr2O7"),
    ("(NH4)2SO4", "(NH4)2SO4", "(NH4)2SO4"),
    ("Ca(OH)2", "Ca(OH)2", "Ca(OH)2"),
    ("Ca3(PO4)2", "Ca3(PO4)2", "Ca3(PO4)2"),
    ("Al2(SO4)3", "Al2(SO4)3", "Al2(SO4)3"),
    ("Mg3Si2O5(OH)4", "Mg3Si2O5(OH)4", "Mg3Si2O5(OH)4"),
    ("K4[Fe(CN)6]", "K4(Fe(CN)6)", "K4[Fe(CN)6]"),
    ("Pd(P(C6H5)3)4", "Pd(P(C6H5)3)4", "Pd(P(C6H5)3)4"),
    ("SiCl4", "SiCl4", "SiCl4"),
    ("PbO2", "PbO2", "PbO2"),
    ("HgCl2", "HgCl2", "HgCl2"),
    ("AuCl3", "AuCl3", "AuCl3"),
    ("BF3", "BF3", "BF3"),
    ("CBr4", "CBr4", "CBr4"),
    ("CH3I", "CH3I", "CH3I"),
    ("SF6", "SF6", "SF6"),
    ("UO2", "UO2", "UO2"),
    ("C60", "C60", "C60"),
    ("WC", "WC", "WC"),
    ("CuSO4.5H2O", "CuSO4+5H2O", "CuSO4(H2O)5"),
    ("Na2CO3·10H2O", "Na2CO3+10H2O", "Na2CO3(H2O)10"),
    ("MgSO4*7H2O", "MgSO4+7H2O", "MgSO4(H2O)7"),
    ("K4[Fe(CN)6].3H2O", "K4(Fe(CN)6)+3H2O", "K4[Fe(CN)6](H2O)3"),
    ("CaSO4·2H2O", "CaSO4+2H2O", "CaSO4(H2O)2"),
    ("SO4^2-", "SO4", "SO4"),
    ("NH4+", "NH4", "NH4"),
    ("Ca2+", "Ca", "Ca"),
    ("CH3COO-", "CH3COO", "CH3COO"),
    ("[Fe(CN)6]^4-", "Fe(CN)6", "Fe(CN)6"),
]


@pytest.mark.parametrize(("ours", "theirs", "_"), COMPOUNDS)
def test_mass_and_composition_agree_with_periodictable(ours: str, theirs: str, _: str) -> None:
    formula, other = read_formula(ours), periodictable.formula(theirs)
    assert float(formula.molar_mass) == pytest.approx(other.mass, rel=1e-9)
    assert formula.composition == {atom.symbol: count for atom, count in other.atoms.items()}


@pytest.mark.parametrize(("ours", "_", "theirs"), COMPOUNDS)
def test_mass_and_composition_agree_with_molmass(ours: str, _: str, theirs: str) -> None:
    formula, other = read_formula(ours), molmass.Formula(theirs)
    # molmass holds older weights; lithium, boron and sulfur differ the most.
    assert float(formula.molar_mass) == pytest.approx(other.mass, rel=2e-4)
    assert formula.composition == {symbol: item.count for symbol, item in other.composition().items()}


def test_masses_are_exact() -> None:
    assert read_formula("CaSO4·0.5H2O").molar_mass == Fraction("145.1415")
    assert read_formula("CuSO4·1/3H2O").molar_mass == Fraction("159.602") + Fraction("18.015") / 3


def test_isotopes_count_apart_and_weigh_their_own_mass() -> None:
    formula = read_formula("[13C]H3CH2OH")
    assert formula.composition == {"[13C]": 1, "H": 6, "C": 1, "O": 1}
    other = periodictable.formula("C[13]H3CH2OH")
    assert float(formula.molar_mass) == pytest.approx(other.mass, rel=1e-9)


def test_heavy_water_is_two_deuterium_atoms_and_oxygen() -> None:
    assert read_formula("D2O").composition == {"[2H]": 2, "O": 1} == read_formula("[2H]2O").composition
    assert float(read_formula("D2O").molar_mass) == pytest.approx(periodictable.formula("D2O").mass, rel=1e-9)


def test_mass_range_comes_from_the_intervals() -> None:
    # Prohaska et al. 2022: H [1.00784, 1.00811], Cl [35.446, 35.457].
    low, high = read_formula("HCl").molar_mass_range
    assert (low, high) == (Fraction("36.45384"), Fraction("36.46511"))


@pytest.mark.parametrize(
    ("typed", "text", "charge"),
    [
        ("  H2O ", "H2O", 0),
        ("H₂O", "H2O", 0),
        ("(NH₄)₂SO₄", "(NH4)2SO4", 0),
        ("CH3COOH", "CH3COOH", 0),
        ("C2H4O2", "C2H4O2", 0),
        ("C1H4", "CH4", 0),
        ("CuSO4.5H2O", "CuSO4·5H2O", 0),
        ("CuSO4*5H2O", "CuSO4·5H2O", 0),
        ("CuSO4 · 5 H2O", "CuSO4·5H2O", 0),
        ("CuSO4•5H2O", "CuSO4·5H2O", 0),
        ("CuSO4.5D2O", "CuSO4·5D2O", 0),
        ("NaClO4·H2O", "NaClO4·H2O", 0),
        ("CaSO4.0.5H2O", "CaSO4·0.5H2O", 0),
        ("CaSO4.1/2H2O", "CaSO4·0.5H2O", 0),
        ("CaSO4·½H2O", "CaSO4·0.5H2O", 0),
        ("CuSO4·2/6H2O", "CuSO4·1/3H2O", 0),
        ("Na2CO3.1.5H2O2", "Na2CO3·1.5H2O2", 0),
        ("Al2O3.2SiO2.2H2O", "Al2O3·2SiO2·2H2O", 0),
        ("Fe0.95O", "Fe0.95O", 0),
        ("Fe0.950O", "Fe0.95O", 0),
        ("La1.85Sr0.15CuO4", "La1.85Sr0.15CuO4", 0),
        ("YBa2Cu3O6.9", "YBa2Cu3O6.9", 0),
        ("(Fe2.5Mn0.5)O4", "(Fe2.5Mn0.5)O4", 0),
        ("SO4^2-", "SO4^2-", -2),
        ("SO4^-2", "SO4^2-", -2),
        ("SO₄²⁻", "SO4^2-", -2),
        ("SO4²-", "SO4^2-", -2),
        ("SO4 2-", "SO4^2-", -2),
        ("SO4\u00a02−", "SO4^2-", -2),
        ("Na^+", "Na^+", 1),
        ("Na+", "Na^+", 1),
        ("Na⁺", "Na^+", 1),
        ("Ca2+", "Ca^2+", 2),
        ("Fe3+", "Fe^3+", 3),
        ("Hg2+", "Hg^2+", 2),
        ("Hg2^2+", "Hg2^2+", 2),
        ("NH4+", "NH4^+", 1),
        ("NO3-", "NO3^-", -1),
        ("OH-", "OH^-", -1),
        ("HCO3-", "HCO3^-", -1),
        ("CH3COO−", "CH3COO^-", -1),
        ("MnO4-", "MnO4^-", -1),
        ("O2^-", "O2^-", -1),
        ("O2 2-", "O2^2-", -2),
        ("[Fe(CN)6]^4-", "[Fe(CN)6]^4-", -4),
        ("D2O", "D2O", 0),
        ("T2", "T2", 0),
    ],
)
def test_canonical_text_and_charge(typed: str, text: str, charge: int) -> None:
    formula = read_formula(typed)
    assert (formula.text, formula.charge) == (text, charge)


@pytest.mark.parametrize(
    ("typed", "counts"),
    [
        ("CuSO4.5H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}),
        ("YBa2Cu3O6.9", {"Y": 1, "Ba": 2, "Cu": 3, "O": Fraction("6.9")}),
        ("K4[Fe(CN)6]", {"K": 4, "Fe": 1, "C": 6, "N": 6}),
        ("(CH3)1.5Cl", {"C": Fraction("1.5"), "H": Fraction("4.5"), "Cl": 1}),
        ("Ca2+", {"Ca": 1}),
        ("Co", {"Co": 1}),
        ("CO", {"C": 1, "O": 1}),
    ],
)
def test_counts_in_order_of_first_appearance(typed: str, counts: dict[str, Fraction]) -> None:
    assert read_formula(typed).counts == tuple(counts.items())


@pytest.mark.parametrize(
    ("typed", "hill"),
    [
        ("CH3COOH", "C2H4O2"),
        ("NaCl", "ClNa"),
        ("H2SO4", "H2O4S"),
        ("BrCH2CN", "C2H2BrN"),
        ("[13C]H3CHO[2H]", "C[13C]H4[2H]O"),
        ("CuSO4·1/3H2O", "CuH(2/3)O(13/3)S"),
    ],
)
def test_hill_order(typed: str, hill: str) -> None:
    assert read_formula(typed).hill == hill


@pytest.mark.parametrize(
    ("typed", "runs"),
    [
        ("SO4^2-", (Run("SO"), Run("4", "sub"), Run("2−", "sup"))),
        ("Na+", (Run("Na"), Run("+", "sup"))),
        ("CaSO4.0.5H2O", (Run("CaSO"), Run("4", "sub"), Run("·0.5H"), Run("2", "sub"), Run("O"))),
        ("Fe0.95O", (Run("Fe"), Run("0.95", "sub"), Run("O"))),
        ("[13C]O2", (Run("["), Run("13", "sup"), Run("C]O"), Run("2", "sub"))),
    ],
)
def test_rich_text(typed: str, runs: tuple[Run, ...]) -> None:
    assert read_formula(typed).rich == runs


def test_typed_grouping_tells_isomers_apart() -> None:
    acid, ester = read_formula("CH3COOH"), read_formula("HCOOCH3")
    assert acid != ester
    assert acid.composition == ester.composition


def test_a_formula_can_be_a_key_and_prints_its_text() -> None:
    assert {read_formula("H₂O"): 1}[read_formula("H2O")] == 1
    assert str(read_formula("H₂O")) == "H2O"


@pytest.mark.parametrize("counts", [(), (("X", Fraction(1)),), (("H", Fraction(0)),), (("H", Fraction(1)),) * 2])
def test_a_wrong_record_cannot_be_made(counts: tuple[tuple[str, Fraction], ...]) -> None:
    with pytest.raises(FormulaError, match="counts each of its elements once"):
        Formula("H", counts)


BOTH = "the digits may belong to the count or to the charge"
DECLARE = "an abbreviation? declare it as a species, with its formula"


@pytest.mark.parametrize(
    ("typed", "fault", "message", "hint"),
    [
        ("O2-", "2-", BOTH, "write O^2- or O2^-"),
        ("I3-", "3-", BOTH, "write I^3- or I3^-"),
        ("N3-", "3-", BOTH, "write N^3- or N3^-"),
        ("S2-", "2-", BOTH, "write S^2- or S2^-"),
        ("Cl2-", "2-", BOTH, "write Cl^2- or Cl2^-"),
        ("H2+", "2+", BOTH, "write H^2+ or H2^+"),
        ("F1-", "1-", BOTH, "write F^- or F1^-"),
        ("SO42-", "42-", BOTH, "write SO4^2- or SO42^-"),
        ("CO32-", "32-", BOTH, "write CO3^2- or CO32^-"),
        ("PO₄3−", "₄3−", BOTH, "write PO4^3- or PO43^-"),
        ("Hg22+", "22+", BOTH, "write Hg2^2+ or Hg22^+"),
        ("C60-", "60-", BOTH, "write C60^-"),
        ("VO2+", "2+", BOTH, "write VO^2+ or VO2^+"),
        ("Au2-", "2-", BOTH, "write Au^2- or Au2^-"),
        ("[Fe(CN)6]4-", "4-", BOTH, "write [Fe(CN)6]^4- or [Fe(CN)6]4^-"),
        ("Et2O", "Et", "unknown element symbol 'Et'", DECLARE),
        ("MeOH", "Me", "unknown element symbol 'Me'", DECLARE),
        ("BuLi", "Bu", "unknown element symbol 'Bu'", DECLARE),
        ("Ph3P", "Ph", "unknown element symbol 'Ph'", DECLARE),
        ("HCL", "L", "unknown element symbol 'L'", f"HCl, if that is meant; {DECLARE}"),
        ("nacl", "nacl", "no element symbol starts with a small letter", "write NaCl"),
        ("h2o", "h", "no element symbol starts with a small letter", "write H2O"),
        ("Na2co3", "co", "no element symbol starts with a small letter", "write Na2CO3"),
        ("THF", "T", "'T' may be an element or part of an abbreviation", f"{DECLARE}; the isotope is written [3H]"),
        ("CD3OD", "D", "'D' may be an element or part of an abbreviation", f"{DECLARE}; the isotope is written [2H]"),
        ("Ac2O", "Ac", "'Ac' may be an element or part of an abbreviation", DECLARE),
        ("NaOAc", "Ac", "'Ac' may be an element or part of an abbreviation", DECLARE),
        ("TsOH", "Ts", "'Ts' may be an element or part of an abbreviation", DECLARE),
        ("PrOH", "Pr", "'Pr' may be an element or part of an abbreviation", DECLARE),
        ("HAt", "At", "'At' may be an element or part of an abbreviation", DECLARE),
        ("Pd(OAc)2", "Ac", "'Ac' may be an element or part of an abbreviation", DECLARE),
        (
            "2H2O",
            "2",
            "a formula does not start with a number",
            "a coefficient belongs to an equation; a mass number is written [13C]",
        ),
        ("12", "12", "a formula does not start with a number", ""),
        ("", "", "there is no formula", "type one, such as H2O"),
        ("   ", "   ", "there is no formula", "type one, such as H2O"),
        ("H0O", "0", "a count cannot be zero", ""),
        ("H02", "02", "a number does not start with 0", ""),
        ("CaSO4·05H2O", "05", "a number does not start with 0", ""),
        ("CaSO4·1/0H2O", "1/0", "a fraction cannot have the denominator 0", ""),
        ("H1234567890", "1234567890", "a number has at most 9 digits", ""),
        ("H2O()", "()", "there is nothing between the brackets", ""),
        ("Ca(OH", "(", "this bracket is not closed by ')'", ""),
        ("Ca(OH]2", "(", "this bracket is not closed by ')'", ""),
        ("OH)2", ")", "this bracket does not match an opening one", ""),
        ("Cu(II)O", "(II)", "an oxidation number is not part of a formula", "leave it out"),
        (
            "[13CO]",
            "1",
            "a number cannot follow an opening bracket",
            "an isotope is written [13C], with its count behind the bracket: [2H]6",
        ),
        ("[17C]O", "[17C]", "no mass is tabulated for the isotope [17C]", "known: [11C], [12C], [13C], [14C]"),
        ("¹³CO2", "¹", "a formula cannot have '¹' here", "an isotope is written [13C]"),
        ("CH2=CH2", "=", "a formula cannot have '=' here", "leave out bonds: CH2CH2, not CH2=CH2"),
        (
            "CH3-CH3",
            "-",
            "only a charge at the end has a sign",
            "leave out bonds and inner charges: CH3CH3, NaCl",
        ),
        ("[NH4+]Cl", "+", "a charge cannot stand inside brackets", "write it at the end: [Fe(CN)6]^4-"),
        ("(CuSO4·H2O)2", "·", "what a dot attaches cannot stand inside brackets", ""),
        ("Ca++", "++", "a charge cannot be read", "write Ca^2+"),
        ("SO4-2", "-2", "a charge cannot be read", "write SO4^2-"),
        ("CO^0+", "^0+", "a charge is a whole number from 1 to 99", ""),
        ("Na Cl", " Cl", "a formula has no spaces, except before a charge such as 2-", ""),
        ("Na +", " +", "a formula has no spaces, except before a charge such as 2-", ""),
        ("CuSO4.", ".", "the formula ends too early", ""),
        (
            "Fe2.5O4",
            ".",
            "this dot may be a decimal point or a separator",
            "put the part with decimal subscripts in brackets, or separate with '·'",
        ),
        (
            "Ba2.5La0.5CuO4",
            ".",
            "this dot may be a decimal point or a separator",
            "put the part with decimal subscripts in brackets, or separate with '·'",
        ),
        ("(" * 13 + "H" + ")" * 13, "(", "brackets are nested more than 12 deep", ""),
    ],
)
def test_refused_with_place_and_repair(typed: str, fault: str, message: str, hint: str) -> None:
    with pytest.raises(FormulaError) as caught:
        read_formula(typed)
    error = caught.value
    assert (typed[error.start : error.end], error.message, error.hint) == (fault, message, hint)


def test_declared_species_may_use_the_doubtful_symbols() -> None:
    assert read_formula("CD3OD", declared=True).composition == {"C": 1, "[2H]": 4, "O": 1}
    assert read_formula("Pr2O3", declared=True).composition == {"Pr": 2, "O": 3}


def test_declared_does_not_turn_abbreviations_into_elements() -> None:
    with pytest.raises(FormulaError, match="unknown element symbol 'Me'"):
        read_formula("MeOH", declared=True)


def test_longest_formula_and_deepest_nesting() -> None:
    assert read_formula("H" * MAX_LENGTH).composition == {"H": MAX_LENGTH}
    assert read_formula("(" * 12 + "H" + ")2" * 12).composition == {"H": 2**12}
    with pytest.raises(FormulaError, match="at most 200 characters") as caught:
        read_formula("H" * (MAX_LENGTH + 1))
    assert caught.value.start == MAX_LENGTH


@pytest.mark.parametrize("text", ["(" * 10**6, "H" * 10**6, "n" * 10**6, "h" * MAX_LENGTH, "H2." * 66])
def test_hostile_text_is_refused(text: str) -> None:
    with pytest.raises(FormulaError):
        read_formula(text)


# Text from pieces of formulas gets deeper into the reader than arbitrary characters do.
PIECES = [*"()[]^+-·*./ ½₂²⁺⁻−0123456789ax=", "[13C]", "[2H]", "H2O", "1/2", "0.5", "D", "Ts", "(II)"]
PIECES += list(elements())[:30]
formula_like = st.lists(st.sampled_from(PIECES), max_size=14).map("".join)


@given(st.one_of(st.text(max_size=40), formula_like), st.booleans())
@example("\u0130" * 5, False)
@example("ß2", False)
@example("H٣", False)
@example("H²", False)
def test_arbitrary_text_gives_a_formula_that_reads_back_or_a_formula_error(text: str, declared: bool) -> None:
    refused: FormulaError | None = None
    try:
        formula = read_formula(text, declared=declared)
    except FormulaError as error:
        refused = error
    if refused:
        assert 0 <= refused.start <= refused.end <= len(text)
        assert refused.start < refused.end or not text
        return
    assert read_formula(formula.text, declared=True) == formula
    assert plain(formula.rich) == formula.text.replace("^", "").replace("-", "−")


symbols = st.sampled_from([*elements(), *isotopes()])
counts = st.one_of(
    st.integers(1, 999).map(str), st.decimals("0.01", "1.99", places=2).map(lambda number: str(number.normalize()))
)
groups = st.tuples(symbols, counts).map("".join)
neutral = st.lists(groups, min_size=1, max_size=5).map("".join).map(lambda text: f"({text})2")


@given(neutral, neutral)
def test_formulas_written_one_after_another_add_their_masses(first: str, second: str) -> None:
    a, b = read_formula(first, declared=True), read_formula(second, declared=True)
    for joined in (first + second, f"{first}·{second}"):
        assert read_formula(joined, declared=True).molar_mass == a.molar_mass + b.molar_mass


@given(neutral, st.integers(1, 999))
def test_a_bracket_multiplies_everything_inside(text: str, times: int) -> None:
    inner, outer = read_formula(text, declared=True), read_formula(f"[{text}]{times}", declared=True)
    assert outer.composition == {symbol: times * count for symbol, count in inner.composition.items()}


@given(neutral, st.integers(1, 99), st.sampled_from("+-"))
def test_a_charge_changes_neither_atoms_nor_mass(text: str, size: int, sign: str) -> None:
    atoms, ion = read_formula(text, declared=True), read_formula(f"{text}^{size}{sign}", declared=True)
    assert (ion.counts, ion.molar_mass) == (atoms.counts, atoms.molar_mass)
    assert ion.charge == int(f"{sign}{size}")


@given(neutral)
def test_hill_text_has_the_same_atoms(text: str) -> None:
    formula = read_formula(text, declared=True)
    if not re.search(r"\(", formula.hill):
        again = read_formula(f"({formula.hill})", declared=True)
        assert again.composition == formula.composition


@given(neutral)
def test_mass_range_contains_the_conventional_mass(text: str) -> None:
    formula = read_formula(text, declared=True)
    low, high = formula.molar_mass_range
    assert low <= formula.molar_mass <= high

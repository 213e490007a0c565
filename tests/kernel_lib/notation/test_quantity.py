"""Numbers, units and uncertainties as typed."""

from fractions import Fraction

import pytest

from routeheat.chem.row import Row
from routeheat.errors import Fault
from routeheat.notation.build import build_sheet

ROW = "C6H5NO2(l) + 3 H2(g) -> C6H5NH2(l) + 2 H2O(l)"


def read(key: str, *, first: str = "uncertainty k = 2\n", row: str = ROW) -> tuple[Row, list[Fault]]:
    sheet, faults = build_sheet(f"{first}known\n[K] {row} | {key}\n")
    return sheet.known["K"], list(faults)


@pytest.mark.parametrize(
    "typed",
    [
        "dH -552.9 kJ/mol", "ΔH -552.9 kJ/mol", "ΔrH -552.9 kJ/mol", "∆H -552.9 kJ/mol", "dh -552.9 kJ/mol",
        "dH=-552.9 kJ/mol", "dH = -552.9 kJ/mol", "dH: -552.9 kJ/mol", "dH \N{MINUS SIGN}552.9 kJ/mol",
        "dH -552.9 kJ", "dH -552.9 kJ mol^-1", "dH -552.9 kJ·mol⁻¹", "dH -552.9kJ/mol", "dH -552900 J/mol",
        "dH -5.529e2 kJ/mol", "dH -184.3 kJ/mol of H2(g)", "dH -184.3 kJ/mol of H2", "dH -552.9 kJ/mol of C6H5NO2",
    ],
)  # fmt: skip
def test_one_heat_typed_in_many_ways(typed: str) -> None:
    row, faults = read(typed)
    assert faults == []
    assert row.datum is not None
    assert row.datum.value == Fraction("-552.9")


def test_heats_per_mass_use_the_molar_mass() -> None:
    # M(C6H5NO2) = 123.111 g/mol, so -552.9 kJ/mol is -4491 kJ/kg
    for typed in ("-4491 kJ/kg of C6H5NO2(l)", "-4491 J/g of C6H5NO2(l)", "-4.491 MJ/kg of C6H5NO2"):
        row, faults = read(f"dH {typed}")
        assert faults == []
        assert row.datum is not None
        assert row.datum.value == pytest.approx(-552.9, abs=0.05)


@pytest.mark.parametrize(
    ("typed", "u"),
    [
        ("-45.94(18) kJ/mol", "0.18"),
        ("-45.94(8) kJ/mol", "0.08"),
        ("-459(18) kJ/mol", "18"),
        ("-45.94 (18) kJ/mol", "0.18"),
        ("-100 ± 8 kJ/mol", "4"),
        ("-100 ± 8 kJ/mol (k = 1)", "8"),
        ("-100 ± 8 (k=1) kJ/mol", "8"),
        ("-100 kJ/mol ± 8 (k = 2)", "4"),
        ("-100 +/- 8 kJ/mol (95 %)", Fraction(800, 196)),
        ("-100 +- 8 (95%) kJ/mol", Fraction(800, 196)),
        ("-100 ± 8 kJ/mol (68.27 %)", "8"),
        ("-100 kJ/mol ± 5 % (k = 1)", "5"),
        ("-100 ± 5 % kJ/mol (k = 1)", "5"),
        ("-100 kJ/mol ± 500 J/mol (k = 1)", "0.5"),
        ("-100 ± 8 kJ/mol of H2(g) (k = 1)", "24"),
        ("-100 ± 8 kJ/mol (k = 1) of H2(g)", "24"),
        ("-100 ± 0 kJ/mol", "0"),
        ("-100 kJ/mol", None),
    ],
)
def test_standard_uncertainty(typed: str, u: str | Fraction | None) -> None:
    row, faults = read(f"dH {typed}")
    assert faults == []
    assert row.datum is not None
    assert row.datum.u == (None if u is None else Fraction(u))


@pytest.mark.parametrize(("first", "u"), [("uncertainty k = 1\n", 8), ("uncertainty k = 2\n", 4),
                                          ("uncertainty 95 %\n", Fraction(800, 196)), ("", 4)])  # fmt: skip
def test_the_coverage_factor_of_the_sheet(first: str, u: Fraction) -> None:
    row, faults = read("dH -100 ± 8 kJ/mol", first=first)
    assert row.datum is not None
    assert row.datum.u == u
    notices = [fault.message for fault in faults]
    assert notices == ([] if first else ["± without a coverage factor is read as k = 2"])


def test_the_assumed_coverage_factor_is_said_once() -> None:
    _, faults = build_sheet("known\n[K] H2(g) -> H2(l) | dH 1 ± 1 kJ\n[L] N2(g) -> N2(l) | dH 1 ± 1 kJ\n")
    assert [(fault.line, fault.hint) for fault in faults] == [(2, "say it once for the sheet: uncertainty k = 2")]


def test_a_letter_is_an_unknown_heat() -> None:
    for typed, symbol in (("x", "x"), ("x1", "x1"), ("x_12", "x_12"), ("h", "h"), ("x at 50 degC", "x")):
        row, faults = read(f"dH {typed}")
        assert faults == []
        assert row.heat is not None
        assert (row.heat.symbol, row.heat.amount) == (symbol, None)


def test_the_temperature_of_a_heat() -> None:
    for typed in ("at 25 degC", "at 25 °C", "at 298.15 K"):
        row, faults = read(f"dH -1 kJ/mol of H2(g) {typed}")
        assert faults == []
        assert row.temperature == Fraction("298.15")
    assert read("dH -1 kJ at 50 degC")[0].temperature == Fraction("323.15")


def test_a_declared_name_may_look_like_a_coverage_bracket_or_a_temperature() -> None:
    for name in ("ethanol (95 %)", "salt at pH"):
        text = f"species\n  {name}  C2H6O(l)\nknown\n  [K] {name} -> {name}(g) | dH 900 kJ/kg of {name} at 25 degC\n"
        sheet, faults = build_sheet(text)
        assert faults == ()
        heat = sheet.known["K"].heat
        assert heat is not None
        assert heat.basis is not None
        assert (heat.basis.name, heat.temperature is None) == (name, False)


@pytest.mark.parametrize(
    ("typed", "column", "message", "hint"),
    [
        ("", 3, "a value is missing here", "like -145 ± 8 kJ/mol"),
        ("-552.9", 10, "the unit of the number is missing", "like dH -145 ± 8 kJ/mol"),
        ("-552.9 ± 5 %", 15, "the unit of the number is missing", "like dH -145 ± 8 kJ/mol"),
        ("-552,9 kJ/mol", 8, "a comma in a number", "write a decimal point: -552.9"),
        ("-4491 kJ/kg", 10, "a heat per mass of what?", "like kJ/kg of C6H5NO2(l)"),
        ("-1 kJ of H2(g)", 7, "a bare energy is per mole of reaction as written", "write kJ/mol of, or kJ/kg of"),
        (
            "-1 kJ/mol of O2(g)",
            17,
            "O2(g) does not take part in the reaction: no heat can be stated per amount of it",
            "one of C6H5NO2(l), H2(g), C6H5NH2(l), H2O(l)",
        ),
        ("-1 kJ/mol of", 14, "a species is missing behind of", "like kJ/mol of NB"),
        ("-1 kJ/mol at", 14, "a temperature is missing behind at", "like at 25 degC"),
        ("-1 kJ/mol at 25", 19, "the unit of the number is missing", "like 25 degC, or 298.15 K"),
        ("-1 kJ/mol at 0 K", 17, "0 K is not above absolute zero", "like 25 degC, or 298.15 K"),
        (
            "-1 kJ/mol at 25 degC of H2(g)",
            17,
            "a temperature is the last thing of a heat",
            "like kJ/mol of NB at 25 degC",
        ),
        ("-1 kJ/K", 7, "kJ/K is not a unit for this", "like dH -145 ± 8 kJ/mol"),
        ("-1 kJ/moll", 7, "unknown unit moll", "did you mean mol?"),
        (
            "-1 kJ/mol H2(g)",
            14,
            "this does not belong to the quantity",
            "the species it is stated per stands behind of, like kJ/mol of NB",
        ),
        (
            "-1 kJ/mol of H2(g) ± 8",
            23,
            "this does not belong to the quantity",
            "the uncertainty stands right behind the number, like -145 ± 8 kJ/mol of NB",
        ),
        ("-1 kJ/mol, 25 degC", 13, "a comma is not read in a quantity", "keys are separated by |"),
        ("-1 kJ/mol source x", 14, "this does not belong to the quantity", "keys are separated by |"),
        ("(-1 ± 8) kJ/mol", 4, "a number is expected before a bracket", "like -145 ± 8 kJ/mol"),
        ("- 1 kJ/mol", 4, "a blank stands behind the sign", "write -1"),
        ("-.5 kJ/mol", 4, "a decimal needs a leading digit", "write -0.5"),
        ("-5. kJ/mol", 6, "a digit is missing behind the decimal point", "write -5"),
        ("1/3 kJ/mol", 5, "a fraction is not read in a quantity", "write a decimal"),
        ("~-1 kJ/mol", 4, "~ is not expected in a quantity", "like -145 ± 8 kJ/mol"),
        ("kJ/mol", 4, "the number is missing before the unit", "like -145 ± 8 kJ/mol"),
        ("kJ", 4, "the number is missing before the unit", "like -145 ± 8 kJ/mol"),
        ("unknown", 4, "a number or one letter is expected here", "an unknown heat is one letter"),
        ("1e31 kJ/mol", 4, "an exponent beyond ±30", "is the number right?"),
        ("1" * 41 + " kJ/mol", 4, "a number of more than 40 characters", "round it"),
        ("1.23456789012345e-30 kJ/mol", 4, "a number of more than 40 characters when it is written out", "round it"),
        ("-1(8) ± 3 kJ/mol", 10, "two uncertainties for one number", "keep either (…) or ± …"),
        ("-1(8) kJ/mol (95 %)", 17, "digits in brackets are a standard uncertainty already", "leave this out"),
        ("-1(1234567) kJ/mol", 6, "an uncertainty of more than 6 digits in brackets", "like 45.94(18)"),
        ("-1e2(8) kJ/mol", 4, "digits in brackets do not go with an exponent", "write the uncertainty behind ±"),
        ("-1 ± -3 kJ/mol", 9, "an uncertainty is not negative", "leave the sign out"),
        ("-1 ± kJ/mol", 7, "a number is missing behind ±", "like -145 ± 8 kJ/mol"),
        ("-1 kJ/mol (k = 2)", 14, "a coverage factor without an uncertainty", "write ± and a number before it"),
        ("-1 ± 8 kJ (k = 0)", 14, "a coverage factor is more than 0 and at most 10", "k = 1 for a standard"),
        ("-1 ± 8 kJ (73 %)", 14, "this level of confidence has no coverage factor here", "type k = …, or one of"),
        ("-1 kcal/mol ± 1 kJ/mol", 18, "this uncertainty is no short decimal", "write it rounded, in kcal/mol"),
        ("-1 kJ/mol ± 1 K", 18, "K cannot be expressed in kJ/mol", "write the uncertainty in kJ/mol"),
    ],
)
def test_wrong_heats(typed: str, column: int, message: str, hint: str) -> None:
    row, faults = read(f"dH {typed}".rstrip())
    (fault,) = [fault for fault in faults if fault.severity == "fault"]
    assert fault.message == message
    assert fault.hint.startswith(hint)
    assert fault.column - len(f"[K] {ROW} | ") == column
    assert row.heat is None


def test_a_species_that_cancels_is_no_basis() -> None:
    _, faults = read("dH -1 kJ/mol of H2O(l)", row="H2O(l) + NaCl(s) -> NaCl(aq) + H2O(l)")
    (fault,) = faults
    assert fault.message.startswith("H2O(l) stands on both sides and cancels")


@pytest.mark.parametrize(
    ("line", "message"),
    [
        ("uncertainty", "a coverage factor is expected"),
        ("uncertainty 2", "a coverage factor is expected"),
        ("uncertainty k = 0", "a coverage factor is more than 0 and at most 10"),
        ("uncertainty k = 1\nuncertainty k = 2", "a second uncertainty line"),
        ("uncertainty k = 1\n  x", "nothing stands below the uncertainty line"),
    ],
)
def test_wrong_uncertainty_lines(line: str, message: str) -> None:
    assert [fault.message for fault in build_sheet(line)[1]] == [message]


@pytest.mark.parametrize("line", ["uncertainty k = 1.96", ": k=1.96", " 95 %", " (95 %)"])
def test_uncertainty_lines(line: str) -> None:
    sheet, faults = build_sheet(f"Uncertainty{line.removeprefix('uncertainty')}")
    assert faults == ()
    assert (sheet.coverage, sheet.k) == (Fraction("1.96"), 1.96)

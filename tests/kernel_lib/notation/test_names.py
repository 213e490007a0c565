"""Names and states: what may be declared, and what looks like a state."""

import pytest

from routeheat.notation.build import build_sheet
from routeheat.notation.names import read_name, split_state, state_of_name
from routeheat.notation.tokens import Piece, Trouble


@pytest.mark.parametrize(
    ("name", "message", "column", "length"),
    [
        ("2 x", "a name cannot start with a number and a blank", 1, 3),
        ("½ x", "a name cannot start with a number and a blank", 1, 3),
        ("a + b", "a name cannot hold a + between blanks", 2, 3),
        ("a, b", "a name cannot hold a comma before a blank", 2, 2),
        ("a  b", "a name cannot hold two blanks", 2, 2),
        ('a"b', "a name cannot hold a quotation mark", 2, 1),
        ("a -> b", "a name cannot hold an arrow", 3, 2),
        ("a = b", "a name cannot hold an arrow", 3, 1),
        ("[x]", "a name cannot start with [", 1, 1),
        ("ANI:", "a name cannot end with :", 4, 1),
        ("ANI(l)", "a name cannot end in a state", 1, 6),
        ("x" * 81, "a name of more than 80 characters", 1, 81),
        ("", "a name is missing", 1, 1),
    ],
)
def test_names_that_could_be_misread_are_refused(name: str, message: str, column: int, length: int) -> None:
    with pytest.raises(Trouble) as caught:
        read_name(Piece(name, 1, 0))
    fault = caught.value.fault
    assert (fault.message, fault.column, fault.length) == (message, column, length)
    assert fault.hint


@pytest.mark.parametrize("name", ["2,4-DNT", "a+b", "a=b", "Pd/C (5 %)", "x(y)", "1-2", "N,N-DMA", "a-", "Na+"])
def test_names_that_are_clear_are_taken(name: str) -> None:
    assert read_name(Piece(name, 1, 0)) == name


@pytest.mark.parametrize(
    ("typed", "parts"),
    [
        ("H2O(l)", ("H2O", "l", "")),
        ("HNO3 ( aq ,  65% )", ("HNO3", "aq", "65 %")),
        ("C(graphite)", ("C", "s", "graphite")),
        ("Ca(OH)2", ("Ca(OH)2", "", "")),
        ("Pd/C (5 %)", ("Pd/C (5 %)", "", "")),
        ("Fe(CN)", ("Fe(CN)", "", "")),
        ("a((l)", ("a(", "l", "")),
    ],
)
def test_the_state_is_the_last_bracket(typed: str, parts: tuple[str, str, str]) -> None:
    body, phase, form = split_state(Piece(typed, 1, 0))
    assert (body.text, phase, form) == parts


def test_only_phases_end_a_name() -> None:
    assert state_of_name("aniline(l)") == ("aniline", "l", "")
    assert state_of_name("Pd/C (5 %)") is None
    assert state_of_name("(l)") is None


@pytest.mark.parametrize(
    ("line", "name", "formula", "state"),
    [
        ("ANI  C6H7N(l)", "ANI", "C6H7N", "(l)"),
        ("ANI C6H7N(l)", "ANI", "C6H7N", "(l)"),
        ("ANI  C6H7N  (l)", "ANI", "C6H7N", "(l)"),
        ("ANI\tC6H7N(l)", "ANI", "C6H7N", "(l)"),
        ("benzoic acid C7H6O2", "benzoic acid", "C7H6O2", ""),
        ("sulfate SO4 2-(aq)", "sulfate", "SO4^2-", "(aq)"),
        ("TAR ?", "TAR", None, ""),
        ("Pd/C (5 %)  ?(s)", "Pd/C (5 %)", None, "(s)"),
        ("my name  C6H7N(l)", "my name", "C6H7N", "(l)"),
        ("THF  C4H8O(l)", "THF", "C4H8O", "(l)"),
        ("NaOAc  NaOAc(s)", "NaOAc", "NaOAc", "(s)"),
    ],
)
def test_declarations(line: str, name: str, formula: str | None, state: str) -> None:
    sheet, faults = build_sheet(f"species\n  {line}\n")
    assert [fault for fault in faults if fault.severity == "fault"] == []
    species = sheet.species[name].species
    assert (None if species.formula is None else species.formula.text, species.state) == (formula, state)


@pytest.mark.parametrize(
    ("line", "message", "hint"),
    [
        ("ANI = C6H7N(l)", "a name cannot end with =", "name and formula are separated by blanks"),
        ("C6H7N(l)", "a name is missing before the formula", "like WATER  C6H7N(l)"),
        (
            "sodium hydroxide",
            "no formula stands at the end of this line",
            "type ? where it is not known: sodium hydroxide  ?",
        ),
        ("Pd/C (5 %)", "no formula stands at the end of this line", "type ? where it is not known: Pd/C (5 %)  ?"),
        ("X  c6h7n(l)", "no element symbol starts with a small letter", "write C6H7N"),
        ("X  C6H7N(liq)", "(liq) is not a state symbol", "write (l)"),
        ("X  C6H7N | cas 62-53-4", "the check digit of this CAS Registry Number is wrong", "a digit was mistyped"),
        ("X  C6H7N | cas 62533", "this is no CAS Registry Number", "like 62-53-3"),
        ("X  C6H7N | M 93 g/mol", "the molar mass follows from the formula", "leave M out"),
        ("X  ? | M 25", "the unit of the number is missing", "like M 250 g/mol"),
        ("X  ? | M -25 g/mol", "M must be more than zero", "like M 250 g/mol"),
        ("X  C6H7N | yield 9 %", "yield belongs to a step, not to a species", "leave it out"),
        ("X  C6H7N | nane x", "unknown key nane", "did you mean name?"),
        ('X  C6H7N name "x', "this quotation is not closed", 'put " at its end'),
    ],
)
def test_wrong_declarations(line: str, message: str, hint: str) -> None:
    _, faults = build_sheet(f"species\n  {line}\n")
    assert [(fault.message, fault.hint) for fault in faults] == [(message, hint)]


def test_a_declaration_takes_its_keys_with_and_without_a_bar() -> None:
    sheet, faults = build_sheet(
        'species\n  A  C6H7N(l)  name "an | amine # 1" | cas 62-53-3 # comment\n  B  ?(s)\n'
        "    name tar\n    M 250 g/mol\n  C  C2H6N6 groups azide\n"
    )
    assert sheet.species["A"].title == "an | amine # 1"
    assert sheet.species["A"].cas == "62-53-3"
    assert (sheet.species["B"].title, sheet.species["B"].species.molar_mass) == ("tar", 250)
    assert sheet.species["C"].settings == (("groups", "azide"),)
    assert faults == ()


def test_a_name_is_declared_once() -> None:
    sheet, (fault,) = build_sheet("species\n  A  C2H6(l)\n  A  C2H6(g)\n")
    assert (fault.message, fault.line, fault.hint) == ("A is declared twice", 3, "first in line 2: keep one")
    assert sheet.species["A"].species.phase == "l"


def test_a_forgotten_formula_is_worth_a_notice() -> None:
    sheet, (notice,) = build_sheet("species\n  ANI\n")
    assert notice.severity == "notice"
    assert notice.message == "no formula is typed for ANI: balances with it are not checked"
    assert sheet.species["ANI"].species.formula is None


def test_a_small_molecule_declared_as_something_else_is_worth_a_notice() -> None:
    _, (notice,) = build_sheet("species\n  CO  C5H10O(l)\n")
    assert notice.message == "CO means C5H10O everywhere in this sheet, not the formula CO"
    assert build_sheet("species\n  CO  CO(g)\n")[1] == ()

"""Rows, labels and keys: what belongs where, and what is wrong with it."""

import itertools
from fractions import Fraction

import pytest

from routeheat.chem.measured import Measured
from routeheat.chem.step import Step
from routeheat.errors import Fault
from routeheat.notation.build import build_sheet
from routeheat.notation.keys import HEATS, KEYS, find_key, names_in

SPECIES = "species\n  NB  C6H5NO2(l)\n  ANI  C6H7N(l)\n"
ROW = "NB + 3 H2(g) -> ANI + 2 H2O(l)"


def read_step(*keys: str, equation: str = ROW) -> tuple[Step, list[Fault]]:
    lines = "".join(f"    {key}\n" for key in keys)
    text = f"uncertainty k = 2\n{SPECIES}route A makes ANI\n  [A1] {equation} | dH -1 kJ/mol\n{lines}"
    sheet, faults = build_sheet(text)
    return sheet.routes["A"].steps[0], list(faults)


@pytest.mark.parametrize(
    ("key", "message", "hint"),
    [
        ("T 50", "the unit of the number is missing", "like T 50 degC"),
        ("T 50 C", "unknown unit C", "degrees Celsius are written degC"),
        ("T 50 kJ", "kJ is not a unit for this", "like T 50 degC"),
        ("T -300 degC", "-300 degC is not above absolute zero", "like T 50 degC"),
        ("T 50 degC at 3", "T takes a number with a unit only", "like T 50 degC"),
        ("T 50 degC of NB", "T takes a number with a unit only", "like T 50 degC"),
        ("yield 96", "yield 96 without a unit means 9600 %", "write 96 %"),
        ("yield 0 %", "yield 0 % cannot be: it is more than 0 and at most 100 %", "like yield 96 ± 2 %"),
        ("yield 120 %", "yield 120 % cannot be: it is more than 0 and at most 100 %", "like yield 96 ± 2 %"),
        ("yield -5 %", "yield -5 % cannot be: it is more than 0 and at most 100 %", "like yield 96 ± 2 %"),
        ("yield 0.96 ± 2 %", "yield 0.96 ± 2 % is less than one per cent", "write 96 %, or 0.0096"),
        ("yield 96 percent", "unknown unit percent", "write %"),
        ("yield quantitative", "a number is expected here", "like 96 ± 2 %"),
        ("yield", "a value is missing here", "like 96 ± 2 %"),
        ("yield 96 %, T 50 degC", "a comma is not read in a quantity", "keys are separated by |"),
        ("yield 96 % T 50 degC", "this does not belong to the quantity", "keys are separated by |"),
        ("conc 200 g/L", "g/L is not a unit for this", "it is mol of limiting reactant per kg of mixture"),
        ("conc 1.6 mol/L", "mol/L is not a unit for this", "it is mol of limiting reactant per kg of mixture"),
        ("conc 1.6 M", "unknown unit M", "a concentration is written mol/L"),
        ("conc 0 mol/kg", "conc must be more than zero", "like conc 1.6 mol/kg"),
        ("conc -1 mol/kg", "conc must be more than zero", "like conc 1.6 mol/kg"),
        ("cp 0 kJ/(kg K)", "cp must be more than zero", "like cp 1.75 kJ/(kg K)"),
        ("cp 1.75 kJ/kg K", "write what stands under the fraction bar in brackets", "like kJ/(kg K)"),
        ("feed 3 kg", "kg is not a unit for this", "like feed 3 h"),
        ("feed 0 h", "feed must be more than zero", "like feed 3 h"),
        ("Xac 1.5", "Xac 1.5 cannot be: it is at least 0 and at most 100 %", "like Xac 0.30"),
        ("Xac -0.1", "Xac -0.1 cannot be: it is at least 0 and at most 100 %", "like Xac 0.30"),
        ("MTT 130", "the unit of the number is missing", "like MTT 130 degC"),
        ("TD24 95 kg", "kg is not a unit for this", "like TD24 95 degC"),
        ("product", "a species is missing behind product", "like product NB"),
        ("limiting Zz", "unknown element symbol 'Zz'", "an abbreviation? declare it"),
        ("equiv 1.05", "how many equivalents, of what?", "like equiv 1.05 of NB"),
        ("equiv 1.05 NB", "how many equivalents, of what?", "like equiv 1.05 of NB"),
        ("equiv of NB", "how many equivalents, of what?", "like equiv 1.05 of NB"),
        ("equiv 1,05 of NB", "a comma in a number", "write a decimal point: 1.05"),
        ("equiv 105% of NB", "equivalents are a plain number", "like equiv 1.05 of NB"),
        ("equiv 0 of NB", "equivalents are more than zero", "like equiv 1.05 of NB"),
        ("recycle H2(g)", "recycle what, from which step, how much of it?", "like recycle NO(g) from A3 90 %"),
        ("recycle H2(g) from A3", "recycle what, from which step, how much of it?", "like recycle NO(g) from A3 90 %"),
        ("recycle H2(g) 90 %", "recycle what, from which step, how much of it?", "like recycle NO(g) from A3 90 %"),
        ("recycle H2(g) from A3 90", "the recycled part 90 without a unit means 9000 %", "write 90 %"),
        ("recycle H2(g) from A3 190 %", "the recycled part 190 % cannot be", "like 90 %"),
        ("recycle H2(g) from [] 90 %", "[] is no label of a step", "like A1"),
        ("side", "a side row of which step?", "like side of A1"),
        ("side A1", "a side row of which step?", "like side of A1"),
        ('side of a"b', 'a"b is no label of a step', "like A1"),
        ("amount -0.3 mol/mol", "amount must be more than zero", "like amount 0.3 mol/mol"),
        ("amount 0.3 kg", "kg is not a unit for this", "like amount 0.3 mol/mol"),
        ("loss", "what is lost has either reacted or not", "write loss reacted, or loss unreacted"),
        ("loss lost", "what is lost has either reacted or not", "write loss reacted, or loss unreacted"),
        ("crystallisation yes", "crystallisation takes no value", "keys are separated by |"),
        ("source", "a value is missing behind source", 'like source "laboratory notebook 12"'),
        ('source "abc', "this quotation is not closed", 'put " at its end'),
        ('source "abc" 1990', "this stands behind the quotation", "keys are separated by |"),
        ('note a "b" c', "a quotation inside a text", 'put the whole text in "…"'),
        ("note " + "x" * 1001, "a text of more than 1000 characters", "shorten it"),
        ('shared "a" "b', "this quotation is not closed", 'put " at its end'),
        ("yeild 96 %", "unknown key yeild", "did you mean yield?"),
        ("Td42 96 degC", "unknown key Td42", "did you mean TD24?"),
        ("foo 1", "unknown key foo", "known here: dH, dU, Q, like, source, note, yield"),
        ('name "x"', "name belongs to a species, not to a step", "leave it out"),
        ("groups azide", "groups belongs to a species, not to a step", "leave it out"),
        ("-> H2O(g)", "this belongs to no key", "an equation stands on one line"),
    ],
)
def test_wrong_keys(key: str, message: str, hint: str) -> None:
    _, faults = read_step(key)
    assert [fault.message for fault in faults] == [message] or faults[0].message.startswith(message)
    assert faults[0].hint.startswith(hint)
    assert (faults[0].line, faults[0].subject, len(faults)) == (7, "A1", 1)


@pytest.mark.parametrize(
    ("keys", "message"),
    [
        (("yield 96 %", "yield 97 %"), "yield is typed twice for this entry"),
        (("equiv 1.05 of NB", "equiv 1.1 of NB"), "equivalents of NB(l) are typed twice"),
        (("crystallisation", "distillation"), "a step is either crystallisation or distillation"),
    ],
)
def test_keys_that_exclude_each_other(keys: tuple[str, str], message: str) -> None:
    step, (fault,) = read_step(*keys)
    assert (fault.message, fault.line) == (message, 8)
    assert step.yield_ is None or step.yield_.value == 96


def test_every_key_of_a_step() -> None:
    step, faults = read_step(
        "yield 96 ± 2 % | T 50 degC | conc 1.6 mol/kg | cp 1.75 J/(g K)",
        "product ANI | limiting H2 | equiv 1.05 of NB | equiv 3.3 of H2(g)",
        "recycle H2 from A3 90 ± 1 % | side of [A9] | amount 0.3 mol/mol | loss Unreacted | equilibrium",
        'batch | feed 90 min | Xac 30 % | MTT 130 degC | TD24 95 degC | includes mixing | shared "bomb 1" 2 %',
        "accept “twice measured” | source “book # 2” | note free text, unquoted",
    )
    assert faults == []
    assert [str(step.product), str(step.limiting)] == ["ANI(l)", "H2(g)"]
    assert step.yield_value == Fraction("0.96")
    assert [(str(species), number) for species, number in step.equivalents] == [
        ("NB(l)", Fraction("1.05")), ("H2(g)", Fraction("3.3")),
    ]  # fmt: skip
    assert [(str(r.species), r.source, r.part.text) for r in step.recycles] == [("H2(g)", "A3", "90 ± 1 %")]
    assert (step.side_of, step.loss, step.operation, step.row.source) == ("A9", "unreacted", "equilibrium", "book # 2")
    kept = {name: value.text if isinstance(value, Measured) else value for name, value in step.row.settings}
    assert kept == {
        "note": "free text, unquoted", "batch": True, "feed": "90 min", "Xac": "30 %", "MTT": "130 degC",
        "TD24": "95 degC", "includes": "mixing", "shared": '"bomb 1" 2 %', "accept": "twice measured",
    }  # fmt: skip


def test_every_key_of_the_table_reads_its_own_example() -> None:
    for key in KEYS:
        assert key.feeds, key.name
        if key.name in HEATS[1:]:
            continue  # a step has one heat: they are read in test_heats.py
        if "step" in key.where:
            _, faults = read_step(key.example) if key.name != "dH" else read_step()
            assert faults == [], key.name
            assert find_key(key.name.upper()) is key
    assert set(names_in("target")) == {"note"}


def test_keys_in_any_order_give_the_same_sheet() -> None:
    keys = ["T 50 degC", "yield 96 %", "batch", "note x", "MTT 130 degC"]
    steps = {read_step(*order)[0] for order in itertools.permutations(keys)}
    assert len(steps) == 1


@pytest.mark.parametrize(
    ("row", "message", "hint"),
    [
        ("H2(g) -> H2(l)", "a row starts with a label in brackets", "start the row with its label, like [K1]"),
        ("K1 H2(g) -> H2(l)", "a row starts with a label in brackets", "start the row with its label, like [K1]"),
        ("[K1 H2(g) -> H2(l)", "a row starts with a label in brackets", "close the label with ]"),
        ("dH 3 kJ/mol", "a row starts with a label in brackets", "this key stands before the first row"),
        ("use K1", "a row starts with a label in brackets", "only a route has use lines"),
        ("[] H2(g) -> H2(l)", "a label is one word of letters, digits and . - + * _", "like [K1]"),
        ("[K 1] H2(g) -> H2(l)", "a label is one word of letters, digits and . - + * _", "like [K1]"),
        ("[" + "K" * 41 + "] H2(g) -> H2(l)", "a label is one word of letters, digits and . - + * _", "like [K1]"),
        ("[K1]", "a reaction is missing behind the label", "like A(l) -> B(l)"),
        ("[K1] | dH 3 kJ", "a reaction is missing behind the label", "like A(l) -> B(l)"),
        ("[K1] H2(g) -> H2(g) | dH 1 kJ", "nothing changes in this reaction", "the same species"),
        ("[K1] H2 -> H2(l) | dH 1 kJ", "the phase of H2 is missing in a known row", "like H2(l), H2(g) or H2(s)"),
        ("[K1] H2(sln) -> H2(l) | dH 1 kJ", "(sln) links the steps of routes, but never enters a known row", "state"),
        ("[K1] H2(g) -> H2(l) | T 50 degC", "T belongs to a step, not to a known row", "a heat takes"),
        ("[K1] H2(g) -> H2(l) | yield 9 %", "yield belongs to a step, not to a known row", "leave it out"),
    ],
)
def test_wrong_rows(row: str, message: str, hint: str) -> None:
    _, faults = build_sheet(f"known\n  {row}\n")
    (fault,) = [fault for fault in faults if fault.severity == "fault"]
    assert (fault.message, fault.line) == (message, 2)
    assert fault.hint.startswith(hint)


def test_a_known_row_without_a_heat_is_worth_a_notice() -> None:
    _, (notice,) = build_sheet("known\n  [K1] H2(g) -> H2(l)\n")
    assert (notice.severity, notice.message) == ("notice", "no heat is typed for this known row: it is not used")


def test_an_equation_may_stand_below_its_label() -> None:
    sheet, faults = build_sheet("known\n  [K1]\n     H2(g) -> H2(l)\n     dH 1 kJ/mol\n")
    assert faults == ()
    assert sheet.known["K1"].reaction.text == "H2(g) -> H2(l)"


def test_labels_are_unique_in_the_sheet() -> None:
    row = "[K] H2(g) -> H2(l)"
    text = f"known\n  {row} | dH 1 kJ\ntarget {row}\nroute A makes H2(l)\n  {row}\n"
    sheet, faults = build_sheet(text)
    assert [(fault.message, fault.line) for fault in faults] == [
        ("the label K is used twice", 3), ("the label K is used twice", 5),
    ]  # fmt: skip
    assert (list(sheet.known), list(sheet.targets), sheet.routes["A"].steps) == (["K"], [], ())


def test_an_unbalanced_row_is_a_fault_and_still_has_its_heat() -> None:
    sheet, (fault,) = build_sheet("known\n  [K] C6H6(l) + HNO3(aq) -> C6H5NO2(l) | dH -145 kJ/mol\n")
    assert (fault.message, fault.hint) == ("does not balance: H −2, O −1", "add + H2O(l) on the right")
    datum = sheet.known["K"].datum
    assert datum is not None
    assert datum.value == -145


def test_an_unbalanced_row_with_a_mistyped_name() -> None:
    _, faults = build_sheet("species\n  NIB  C6H5NO2(l)\nknown\n  [K] NIB -> NOB(g) | dH 3 kJ\n")
    assert faults[0].hint == "did you mean NIB instead of NOB?"


def test_a_species_of_unknown_formula_leaves_the_balance_unchecked() -> None:
    _, (notice,) = build_sheet("species\n  TAR  ?(l)\nknown\n  [K] C6H6(l) -> TAR | dH 3 kJ\n")
    assert (notice.severity, notice.message) == ("notice", "balance not checked: the formula of TAR is not known")


def test_phases_may_be_left_out_where_the_step_has_its_own_heat() -> None:
    assert read_step(equation="NB + 3 H2 -> ANI + 2 H2O")[1] == []
    _, faults = build_sheet(f"{SPECIES}route A makes ANI\n  [A1] NB + 3 H2 -> ANI + 2 H2O(l)\n")
    assert [(f.message, f.column, f.length) for f in faults] == [
        ("the phase of H2 is missing in a step without a heat of its own", 15, 2)
    ]
    # a heat that cannot be read is its own fault
    _, faults = build_sheet(f"{SPECIES}route A makes ANI\n  [A1] NB + 3 H2 -> ANI + 2 H2O | dH 3\n")
    assert [fault.message for fault in faults] == ["the unit of the number is missing"]

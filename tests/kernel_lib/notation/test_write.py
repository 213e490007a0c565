"""Canonical writing: what is written is stable, and reading it gives equal objects."""

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.chem.route import Sheet
from routeheat.chem.row import Rows
from routeheat.notation.build import build_sheet
from routeheat.notation.code import row
from routeheat.notation.write import write_sheet

TYPED = """
uncertainty 95 %
species
 2,4-DNT C7H6N2O4 (s) name "dinitro" | cas 121-14-2
 TAR ?(l) | M 250 g/mol | note "a | b # c"
known
 [K1] formation of NH3(g)| ΔH = −45.94(18) kJ·mol⁻¹ | source “table”
 [K2] combustion of C6H6(l) to CO2(g), H2O(l) | dH -3267.6 ± 0.4 kJ/mol (k = 1) at 298.15 K
 [K3] 2H2O(l) ⇌ 2H2O(g) | dH 44.0 kJ/mol of H2O(l)
 [K4] ½ N2(g) + 1.5 H2(g) → NH3(g) | dH x
target [T] CH4(g) + 2 H2O(g) = CO2(g) + 4 H2(g) | note "why"
route A "by way of tar" makes TAR
 [A1] 2,4-DNT -> TAR | T 50 °C | dH -4490 ± 5 % kJ/kg of 2,4-DNT | yield 96 ± 2 % | crystallization
   loss reacted | equiv 1.05 of 2,4-DNT | recycle 2,4-DNT from A1 90 % | batch | Xac 0.30 | cp 1.75 J g^-1 K^-1
 [A1q] H2O(l) -> H2O(g) | side of A1 | amount 0.3 mol/mol
route B makes TAR
 use A1, A1q
"""
WRITTEN = """\
uncertainty k = 1.96

species
  2,4-DNT  C7H6N2O4(s) | name "dinitro" | cas 121-14-2
  TAR      ?(l) | M 250 g/mol | note "a | b # c"

known
  [K1] formation of NH3(g)
       dH -45.94 ± 0.18 kJ/mol (k = 1) | source "table"
  [K2] combustion of C6H6(l) to CO2(g), H2O(l)
       dH -3267.6 ± 0.4 kJ/mol (k = 1) at 298.15 K
  [K3] 2 H2O(l) <=> 2 H2O(g)
       dH 44.0 kJ/mol of H2O(l)
  [K4] 1/2 N2(g) + 3/2 H2(g) -> NH3(g)
       dH x

target [T] CH4(g) + 2 H2O(g) -> CO2(g) + 4 H2(g)
       note "why"

route A "by way of tar" makes TAR(l)
  [A1] 2,4-DNT(s) -> TAR(l)
       dH -4490 ± 224.5 kJ/kg of 2,4-DNT(s) | yield 96 ± 2 % | T 50 degC | cp 1.75 J/(g K)
       equiv 1.05 of 2,4-DNT(s) | recycle 2,4-DNT(s) from A1 90 % | crystallisation | loss reacted
       batch | Xac 0.30
  [A1q] H2O(l) -> H2O(g)
       side of A1 | amount 0.3 mol/mol

route B makes TAR(l)
  use A1, A1q
"""


def test_the_canonical_text() -> None:
    sheet, _ = build_sheet(TYPED)
    assert write_sheet(sheet) == WRITTEN


def test_reading_what_is_written_gives_the_same_sheet() -> None:
    sheet, faults = build_sheet(TYPED)
    again, faults_again = build_sheet(write_sheet(sheet))
    assert again == sheet
    assert write_sheet(again) == write_sheet(sheet)
    assert [fault.message for fault in faults if fault.severity == "fault"] == []
    assert [fault.message for fault in faults_again if fault.severity == "fault"] == []


def test_what_no_sheet_can_hold_is_written_readably() -> None:
    made = row("K1", "H2O(l) -> H2O(g)", "44 kJ/mol", source='a "b"\n| c\u202e # d' + "e" * 1000)
    written = write_sheet(Sheet(None, {}, Rows([made]), {}, {}))
    again, faults = build_sheet(written)
    assert faults == ()
    assert again.known["K1"].source.startswith("a 'b' | c # dee")


@pytest.mark.parametrize("path", sorted(Path(__file__).with_name("sheets").glob("*/*.txt")), ids=lambda path: path.stem)
def test_every_golden_sheet_makes_the_round_trip(path: Path) -> None:
    sheet, _ = build_sheet(path.read_text(encoding="utf-8"))
    assert build_sheet(write_sheet(sheet))[0] == sheet


# generated sheets ---------------------------------------------------------------------------------------------------

names = st.from_regex(r"[A-Za-z0-9][A-Za-z0-9,'()%/-]{0,8}( [a-z]{1,6})?", fullmatch=True)
formulas = st.sampled_from(["C6H6", "H2O", "C7H6N2O4", "Na+", "SO4^2-", "CaSO4·0.5H2O", "D2O", "[13C]H4", "?"])
states = st.sampled_from(["", "(s)", "(l)", "(g)", "(aq)", "(aq, 65 %)", "(s, form II)", "(sln)"])
decimals = st.decimals(-5000, 5000, allow_nan=False, places=3).map(str)
spreads = st.one_of(
    st.just(""),
    st.decimals(0, 50, places=2).map(lambda half: f" ± {half}"),
    st.tuples(st.decimals(0, 50, places=1), st.sampled_from(["(k = 1)", "(95 %)", "(k = 2.5)"])).map(
        lambda pair: f" ± {pair[0]} {pair[1]}"
    ),
)
readable = st.characters(exclude_characters='"', exclude_categories=("Cc", "Cf", "Cs", "Zl", "Zp"))
sentences = st.text(readable, max_size=30)


@st.composite
def heats(draw: st.DrawFn, species: list[str]) -> str:
    if draw(st.integers(0, 5)) == 0:
        return draw(st.sampled_from(["x", "y1", "z_2"]))
    unit, basis = draw(st.sampled_from([("kJ/mol", False), ("kJ", False), ("kcal/mol", True), ("kJ/kg", True)]))
    of = f" of {draw(st.sampled_from(species))}" if basis else ""
    at = draw(st.sampled_from(["", " at 25 degC", " at 310.5 K"]))
    return f"{draw(decimals)}{draw(spreads)} {unit}{of}{at}"


@st.composite
def sheets(draw: st.DrawFn) -> str:
    declared = draw(st.lists(st.tuples(names, formulas, states), max_size=4, unique_by=lambda item: item[0]))
    lines = [draw(st.sampled_from(["", "uncertainty k = 1", "uncertainty 95 %", "uncertainty k = 2.5"]))]
    lines.append("species")
    lines += [f'  {name}  {formula}{state} | note "{draw(sentences)}"' for name, formula, state in declared]
    species = [*(name for name, _, _ in declared), "H2O(l)", "C6H6(g)", "HNO3(aq, 65 %)", "Fe^3+(aq)", "H2(sln)"]
    numbers = st.sampled_from(["", "2 ", "1/2 ", "0.25 ", "½ ", "17/3 "])
    terms = st.lists(st.tuples(numbers, st.sampled_from(species)), min_size=1, max_size=4)

    def reaction() -> str:
        left, right = (" + ".join(number + name for number, name in draw(terms)) for _ in range(2))
        return f"{left} {draw(st.sampled_from(['->', '<=>', '=']))} {right}"

    lines.append("known")
    for label in draw(st.lists(st.integers(0, 99), max_size=3, unique=True)):
        lines.append(f"  [K{label}] {reaction()} | dH {draw(heats(species))} | source {draw(sentences)}")
    lines.append(f"target [T] {reaction()}")
    lines.append(f'route A "{draw(sentences)}" makes {draw(st.sampled_from(species))}')
    keys = st.permutations(
        ["yield 96.5 ± 2 %", "T 50 degC", "conc 1.6 mol/kg", "cp 1.75 kJ/(kg K)", "batch", "feed 90 min", "Xac 30 %",
         "loss unreacted", "equilibrium", "side of A1", "amount 0.3", f"limiting {draw(st.sampled_from(species))}",
         f"equiv 1.05 of {draw(st.sampled_from(species))}", 'shared "a" 2 %', "includes mixing"]
    )  # fmt: skip
    for label in range(draw(st.integers(0, 3))):
        chosen = " | ".join(draw(keys)[: draw(st.integers(0, 15))])
        lines.append(f"  [A{label}] {reaction()} | dH {draw(heats(species))}\n     {chosen}")
    lines.append("route B makes H2O(l)\n  use A0, A1")
    return "\n".join(lines)


@settings(max_examples=80)
@given(sheets())
def test_generated_sheets_make_the_round_trip(text: str) -> None:
    sheet, faults = build_sheet(text)
    written = write_sheet(sheet)
    again, faults_again = build_sheet(written)
    assert again == sheet
    assert write_sheet(again) == written
    if all(fault.severity == "notice" for fault in faults):
        assert all(fault.severity == "notice" for fault in faults_again)

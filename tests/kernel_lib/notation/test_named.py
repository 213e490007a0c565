"""Formation, combustion and phase-change rows."""

import pytest

from routeheat.notation.build import build_sheet
from routeheat.notation.write import write_sheet


@pytest.mark.parametrize(
    ("typed", "expanded", "kind"),
    [
        ("formation of NH3(g)", "1/2 N2(g) + 3/2 H2(g) -> NH3(g)", "formation"),
        ("Formation of H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)", "formation"),
        ("combustion of C6H6(l) to CO2(g), H2O(l)", "C6H6(l) + 15/2 O2(g) -> 6 CO2(g) + 3 H2O(l)", "combustion"),
        (
            "combustion of C2H4Cl2(l) to CO2(g), H2O(l), HCl(aq, 600 H2O)",
            "C2H4Cl2(l) + 5/2 O2(g) -> 2 CO2(g) + H2O(l) + 2 HCl(aq, 600 H2O)",
            "combustion",
        ),
        ("vaporisation of H2O(l)", "H2O(l) -> H2O(g)", "vaporisation"),
        ("vaporization of H2O", "H2O(l) -> H2O(g)", "vaporisation"),
        ("fusion of H2O(s)", "H2O(s) -> H2O(l)", "fusion"),
        ("melting of H2O", "H2O(s) -> H2O(l)", "fusion"),
        ("sublimation of I2(s)", "I2(s) -> I2(g)", "sublimation"),
        ("formation of Na+(aq)", "Na(s) + H^+(aq) -> Na^+(aq) + 1/2 H2(g)", "formation"),
        ("formation of SO4^2-(aq)", "S(s, rhombic) + 2 O2(g) + H2(g) -> SO4^2-(aq) + 2 H^+(aq)", "formation"),
        ("solution of HCl(g) in 10 H2O(l)", "HCl(g) -> HCl(aq, 10 H2O)", "solution"),
        ("solution of HCl(g) in 10 mol water", "HCl(g) -> HCl(aq, 10 H2O)", "solution"),
        ("dissolution of NaCl(s) in H2O", "NaCl(s) -> NaCl(aq)", "solution"),
        ("solution of CaCl2(s) to Ca2+(aq), Cl-(aq)", "CaCl2(s) -> Ca2+(aq) + 2 Cl-(aq)", "solution"),
        ("solution of I2(s) to I2(l, in toluene)", "I2(s) -> I2(l, in toluene)", "solution"),
        ("dilution of HCl(aq, 10 H2O) to HCl(aq)", "HCl(aq, 10 H2O) -> HCl(aq)", "dilution"),
        (
            "neutralisation of H2SO4(aq) with NaOH(aq) to Na2SO4(aq), H2O(l)",
            "H2SO4(aq) + 2 NaOH(aq) -> Na2SO4(aq) + 2 H2O(l)",
            "neutralisation",
        ),
        ("neutralization of H+(aq) with OH-(aq) to H2O(l)", "H+(aq) + OH-(aq) -> H2O(l)", "neutralisation"),
    ],
)
def test_named_rows_expand(typed: str, expanded: str, kind: str) -> None:
    sign = "-" if kind in ("combustion", "neutralisation") else ""
    sheet, faults = build_sheet(f"known\n  [K] {typed} | dH {sign}1 kJ/mol\n  [L] {expanded} | dH 1 kJ/mol\n")
    assert faults == ()
    assert sheet.known["K"].kind == kind
    assert sheet.known["K"].reaction.net == sheet.known["L"].reaction.net


@pytest.mark.parametrize(
    ("typed", "canonical"),
    [
        ("solution of HCl(g) in 10.5 water", "solution of HCl(g) in 10.5 H2O(l)"),
        ("solution of HCl(g) to HCl(aq, 10 H2O)", "solution of HCl(g) in 10 H2O(l)"),
        ("dissolution of HCl(g) to HCl(aq)", "solution of HCl(g) in H2O(l)"),
        ("solution of HCl(g) to HCl(aq, 30 %)", "solution of HCl(g) to HCl(aq, 30 %)"),
        ("solution of NaCl(s) to Na+(aq), Cl-(aq)", "solution of NaCl(s) to Na^+(aq), Cl^-(aq)"),
        ("dilution of HCl(aq, 30%) to HCl(aq, 1 mol/kg)", "dilution of HCl(aq, 30 %) to HCl(aq, 1 mol/kg)"),
        ("neutralisation of ACID with NaOH(aq) to NaC2F3O2(aq), H2O(l)",
         "neutralisation of ACID(aq) with NaOH(aq) to NaC2F3O2(aq), H2O(l)"),
        ("formation of Na+(aq)", "formation of Na^+(aq)"),
    ],
)  # fmt: skip
def test_named_rows_are_written_as_such_and_read_back(typed: str, canonical: str) -> None:
    sheet, _ = build_sheet(f"species\n  ACID  C2HF3O2(aq)\nknown\n  [K] {typed} | dH -1 kJ/mol\n")
    written = write_sheet(sheet)
    assert f"[K] {canonical}\n" in written
    assert build_sheet(written)[0] == sheet


def test_a_solution_may_be_of_a_substance_without_a_formula() -> None:
    sheet, _ = build_sheet("species\n  TAR  ?(l)\nknown\n  [K] solution of TAR in H2O(l) | dH 1 kJ/mol\n")
    assert sheet.known["K"].reaction.text == "TAR(l) -> TAR(aq)"


def test_named_rows_speak_of_declared_species() -> None:
    sheet, faults = build_sheet(
        "species\n  OXY  O2(g)\n  oil to burn  C6H6(l)\nknown\n  [K] formation of H2O(l) | dH -1 kJ\n"
        "  [L] combustion of oil to burn to CO2(g), H2O(l) | dH -1 kJ\n"
    )
    assert faults == ()
    assert sheet.known["K"].reaction.text == "H2(g) + 1/2 OXY(g) -> H2O(l)"
    assert sheet.known["L"].reaction.text == "oil to burn(l) + 15/2 OXY(g) -> 6 CO2(g) + 3 H2O(l)"


def test_a_declared_name_may_sound_like_a_named_row() -> None:
    sheet, faults = build_sheet("species\n  fusion of A  H2(l)\nknown\n  [K] fusion of A -> fusion of A(g) | dH 1 kJ\n")
    assert faults == ()
    assert sheet.known["K"].kind == "reaction"


@pytest.mark.parametrize(
    ("typed", "column", "message", "hint"),
    [
        ("formation of H2O", 20, "the phase is missing", "like H2O(l), H2O(g) or H2O(s)"),
        ("formation of", 7, "an arrow is missing", "like C6H6(l)"),
        ("formation NH3(g)", 7, "of is missing behind formation", "write formation of NH3(g)"),
        ("formation of O2(g)", 20, "O2(g) is the reference state of its element", "delete this row"),
        ("formation of Na+(g)", 20, "Na^+(g) is an ion that is not in water: type its formation", "like H2(g)"),
        ("formation of H+(aq)", 20, "H^+(aq) is zero by definition, and needs no row", "delete this row"),
        ("formation of Na+", 20, "the phase is missing", "like Na^+(aq)"),
        ("formation of D2O(l)", 20, "[2H] has no reference state here: type the formation", "like H2(g)"),
        (
            "combustion of C6H6(l)",
            21,
            "the products of the combustion are missing",
            "like combustion of C6H6(l) to CO2(g), H2O(l): with H2O(l) or H2O(g), HCl(aq) or HCl(g), "
            "SO2(g) or H2SO4(aq)",
        ),
        (
            "combustion of C6H6(l) to CO2(g) + H2O(l)",
            32,
            "the products of a combustion are separated by commas",
            "like to CO2(g), H2O(l)",
        ),
        ("combustion of C6H6(l) to CO2(g), H2O", 40, "the phase of H2O is missing", "like H2O(l), H2O(g) or H2O(s)"),
        (
            "combustion of C6H6(l) to CO2(g)",
            21,
            "no product of this combustion holds H",
            "like combustion of C6H6(l) to CO2(g), H2O(l): with H2O(l) or H2O(g)",
        ),
        (
            "combustion of C6H6(l) to CO2(g), CO(g), H2O(l)",
            21,
            "C6H6(l) with O2(g) does not burn to",
            "name every product, once",
        ),
        ("combustion of C6H6(l) to CO2(g),, H2O(l)", 32, "CO2(g), is neither a declared name nor a formula", "declare"),
        ("vaporisation of H2O(g)", 23, "vaporisation starts from (l), not from (g)", "write vaporisation of H2O(l)"),
        ("fusion of H2O(l)", 17, "fusion starts from (s), not from (l)", "write fusion of H2O(s)"),
        ("crystallisation of NaCl(s)", 7, "a crystallisation is typed as an equation", "like NaCl(s) -> NaCl(aq)"),
        ("dissolution of NaCl(s)", 22, "what forms is missing behind the solution", "like solution of HCl(g) in 10"),
        ("solution of NaCl in H2O(l)", 19, "the phase of NaCl is missing", "like NaCl(l), NaCl(g) or NaCl(s)"),
        ("solution of NaCl(aq) in H2O(l)", 19, "NaCl(aq) does not say which pure substance is dissolved", "like"),
        (
            "solution of NaCl(s) in C7H8(l)",
            30,
            "only water is a solvent here",
            "say what forms, like solution of X(s) to X(l, in C7H8)",
        ),
        ("solution of NaCl(s) in H2O(g)", 30, "water dissolves as (l), not as (g)", "write H2O(l)"),
        ("solution of NaCl(s) to NaCl(l)", 19, "NaCl(l) is not in solution", "like"),
        ("solution of NaCl(s) to KCl(aq)", 19, "NaCl(s) does not dissolve to KCl(aq) in exactly one way", "like"),
        ("dilution of HCl(aq, 10 H2O)", 19, "the diluted solution is missing", "like dilution of HCl(aq, 10 H2O) to"),
        ("dilution of HCl(aq) to HCl(aq)", 19, "HCl(aq) stands on both sides: nothing is diluted", "like"),
        (
            "dilution of HCl(aq, 10 H2O) to HBr(aq)",
            19,
            "HCl(aq, 10 H2O) and HBr(aq) are not the same substance",
            "like",
        ),
        ("dilution of HCl(g) to HCl(aq)", 19, "HCl(g) is not in solution", "like"),
        (
            "neutralisation of HCl(aq) with NaOH(aq)",
            25,
            "the products of the neutralisation are missing",
            "like neutralisation of HCl(aq) with NaOH(aq) to NaCl(aq), H2O(l): a salt in solution or (s)",
        ),
        ("neutralisation of HCl(aq) to NaCl(aq)", 25, "with is missing between the two", "like neutralisation"),
        (
            "neutralisation of HCl(aq) with NaOH(aq) to NaCl(aq)",
            25,
            "HCl(aq) with NaOH(aq) does not neutralise to NaCl(aq) in exactly one way",
            "like neutralisation",
        ),
        ("neutralisation HCl(aq)", 7, "of is missing behind neutralisation", "write neutralisation of HCl(aq)"),
    ],
)
def test_wrong_named_rows(typed: str, column: int, message: str, hint: str) -> None:
    _, faults = build_sheet(f"known\n  [K] {typed} | dH 1 kJ/mol\n")
    (fault,) = [fault for fault in faults if fault.severity == "fault"]
    assert fault.message.startswith(message)
    assert fault.hint.startswith(hint)
    assert fault.column == column


@pytest.mark.parametrize(
    ("typed", "usual"),
    [
        ("combustion of C6H6(l) to CO2(g), H2O(l) | dH 3267 kJ/mol", "exothermic: dH is negative"),
        ("fusion of H2O(s) | dH -6 kJ/mol", "endothermic: dH is positive"),
        ("combustion of C6H6(l) to CO2(g), H2O(l) | dU 3267 kJ/mol", "exothermic: dU is negative"),
        ("neutralisation of H+(aq) with OH-(aq) to H2O(l) | Q 2 kJ for 50 mmol of H+(aq)", "exothermic: Q is negative"),
    ],
)
def test_an_unusual_sign_is_worth_a_notice(typed: str, usual: str) -> None:
    _, (notice,) = build_sheet(f"known\n  [K] {typed}\n")
    assert notice.severity == "notice"
    assert notice.message.endswith(usual)

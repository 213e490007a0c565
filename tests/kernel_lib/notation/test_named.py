"""Formation, combustion and phase-change rows."""

import pytest

from routeheat.notation.build import build_sheet


@pytest.mark.parametrize(
    ("typed", "expanded", "kind"),
    [
        ("formation of NH3(g)", "1/2 N2(g) + 3/2 H2(g) -> NH3(g)", "formation"),
        ("Formation of H2O(l)", "H2(g) + 1/2 O2(g) -> H2O(l)", "formation"),
        ("combustion of C6H6(l) to CO2(g), H2O(l)", "C6H6(l) + 15/2 O2(g) -> 6 CO2(g) + 3 H2O(l)", "combustion"),
        ("combustion of C2H4Cl2(l) to CO2(g), H2O(l), HCl(aq, 600 H2O)",
         "C2H4Cl2(l) + 5/2 O2(g) -> 2 CO2(g) + H2O(l) + 2 HCl(aq, 600 H2O)", "combustion"),
        ("vaporisation of H2O(l)", "H2O(l) -> H2O(g)", "vaporisation"),
        ("vaporization of H2O", "H2O(l) -> H2O(g)", "vaporisation"),
        ("fusion of H2O(s)", "H2O(s) -> H2O(l)", "fusion"),
        ("melting of H2O", "H2O(s) -> H2O(l)", "fusion"),
        ("sublimation of I2(s)", "I2(s) -> I2(g)", "sublimation"),
    ],
)
def test_named_rows_expand(typed: str, expanded: str, kind: str) -> None:
    sign = "-" if kind == "combustion" else ""
    sheet, faults = build_sheet(f"known\n  [K] {typed} | dH {sign}1 kJ/mol\n  [L] {expanded} | dH 1 kJ/mol\n")
    assert faults == ()
    assert sheet.known["K"].kind == kind
    assert sheet.known["K"].reaction.net == sheet.known["L"].reaction.net


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
        ("formation of Na+(aq)", 20, "Na^+(aq) is an ion: type its formation as an equation", "like Na(s) + H^+(aq)"),
        ("formation of D2O(l)", 20, "[2H] has no reference state here: type the formation", "like H2(g)"),
        ("combustion of C6H6(l)", 21, "the products of the combustion are missing",
         "like combustion of C6H6(l) to CO2(g), H2O(l): with H2O(l) or H2O(g), HCl(aq) or HCl(g), SO2(g) or H2SO4(aq)"),
        ("combustion of C6H6(l) to CO2(g) + H2O(l)", 32, "the products of a combustion are separated by commas",
         "like to CO2(g), H2O(l)"),
        ("combustion of C6H6(l) to CO2(g), H2O", 40, "the phase of H2O is missing", "like H2O(l), H2O(g) or H2O(s)"),
        ("combustion of C6H6(l) to CO2(g)", 21, "no product of this combustion holds H", "name every product, once"),
        ("combustion of C6H6(l) to CO2(g), CO(g), H2O(l)", 21, "C6H6(l) with O2(g) does not burn to",
         "name every product, once"),
        ("combustion of C6H6(l) to CO2(g),, H2O(l)", 32, "CO2(g), is neither a declared name nor a formula", "declare"),
        ("vaporisation of H2O(g)", 23, "vaporisation starts from (l), not from (g)", "write vaporisation of H2O(l)"),
        ("fusion of H2O(l)", 17, "fusion starts from (s), not from (l)", "write fusion of H2O(s)"),
        ("dissolution of NaCl(s)", 7, "a dissolution is typed as an equation", "like NaCl(s) -> NaCl(aq)"),
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
    ],
)
def test_an_unusual_sign_is_worth_a_notice(typed: str, usual: str) -> None:
    _, (notice,) = build_sheet(f"known\n  [K] {typed}\n")
    assert notice.severity == "notice"
    assert notice.message.endswith(usual)

"""What checking a whole sheet says beyond its notation."""

from __future__ import annotations

import routeheat as rh

SHEET = """uncertainty k = 2
known
  [K1] formation of H2O(l) | dH -285.8 ± 0.1 kJ/mol | includes magic
route A makes H2O(s)
  [A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -284 ± 2 kJ/mol | includes crystalisation
  [A2] H2O(l) -> H2O(s) | dH -6 ± 1 kJ/mol | crystallisation
"""


def notices(text: str) -> list[tuple[str, int, str, str]]:
    sheet, faults = rh.check_sheet(text)
    assert [fault for fault in faults if fault.severity == "fault"] == []
    assert list(sheet.notices) == [fault for fault in faults if fault.severity == "notice"]
    return [(fault.message, fault.line, fault.hint, fault.subject) for fault in sheet.notices]


def test_effects_that_nobody_looks_for_are_named_where_they_stand() -> None:
    found = notices(SHEET)
    assert found[0][:2] == ("no row is looked for that adds magic a second time", 3)
    assert found[0][2].startswith("known: mixing, dilution")
    assert found[1] == (
        "no row is looked for that adds crystalisation a second time", 5, "did you mean crystallisation?", "A1",
    )  # fmt: skip


def test_double_counting_is_a_notice_at_the_row_that_adds() -> None:
    text = SHEET.replace("crystalisation", "crystallisation").replace(" | includes magic", "")
    assert notices(text) == [
        (
            "double counting? A1 includes crystallisation, and A2 adds it",
            6,
            "leave it out of one of the two, or out of includes of A1",
            "A2",
        )
    ]
    assert rh.read_sheet(text).notices


def test_a_step_used_in_two_routes_is_named_once() -> None:
    text = SHEET.replace("crystalisation", "crystallisation").replace(" | includes magic", "")
    assert len(notices(text + "route B makes H2O(s)\n  use A1, A2\n")) == 1


def test_a_sheet_without_doubts_has_no_notice() -> None:
    assert notices(SHEET.replace(" | includes crystalisation", "").replace(" | includes magic", "")) == []

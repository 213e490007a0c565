"""Whatever is typed, building a sheet never raises, and every fault has a place inside the text and a repair."""

from hypothesis import example, given, settings
from hypothesis import strategies as st

from routeheat.notation.build import build_sheet
from routeheat.notation.faults import render, split_lines
from routeheat.notation.write import write_sheet

FRAGMENTS = [
    "species", "known", "target", "route A", "makes", "use", "uncertainty", "k", "=", "[K1]", "[A1]", "[T]", "H2O",
    "(l)", "(g)", "(aq, 65 %)", "->", "⇌", "+", "2", "1/2", "½", ".5", "0.5", " ", "  ", "\n", "\n  ", "|", "#", '"',
    "dH", "ΔH", "-45.94(18)", "kJ/mol", "kJ/kg of", "of", "at", "25 degC", "±", "8", "(k = 1)", "(95 %)", "%", "yield",
    "T", "conc", "cp", "side of", "amount", "recycle", "from", "A1 90 %", "equiv 1.05 of", "limiting", "product",
    "name", "cas", "62-53-3", "NB", "C6H5NO2", "?", "·", "^2-", "-", "(", "[", ")", "]", "\u200b", "\u202e", "\t",
    "\xa0", "formation of", "combustion of", "to", "fusion of", ",", "é", "😀", "\x00", "\ud800", "9" * 50, "e99", "M",
    "250 g/mol", "note", "shared", "x", "loss", "reacted", "crystallisation", "nan", "inf", "∞", "C(s)", "P(s)", "I3-",
    "CuSO4.5H2O", "\r", "\r\n", "\u2028", "\x85", "\ufeff", "PrCl3(s)", "D2O(l)", "1e-30", "1/0", "kJ^9", "rout",
    "knwon",
]  # fmt: skip
typed = st.one_of(
    st.text(max_size=200),
    st.lists(st.sampled_from(FRAGMENTS), max_size=40).map("".join),
    st.lists(st.sampled_from(FRAGMENTS), max_size=40).map(" ".join),
    st.lists(st.sampled_from(FRAGMENTS), max_size=12).map(lambda parts: "known\n  [K1] " + " ".join(parts)),
    st.lists(st.sampled_from(FRAGMENTS), max_size=12).map(lambda parts: "species\n  " + " ".join(parts)),
    st.lists(st.sampled_from(FRAGMENTS), max_size=12).map(
        lambda parts: "route A makes H2O(l)\n  [A1] H2(g) + 1/2 O2(g) -> H2O(l) | " + " ".join(parts)
    ),
)


@settings(max_examples=600, deadline=None)
@given(typed)
@example("species\n  X  PrCl3(s)\nknown\n  [K] formation of X | dH 1 kJ/mol")
@example("known\n  [K] H2(g) -> H2(l) | dH -132 kcal/mol ± 1 kJ/mol")
@example("known\n  [K] H2(g) -> H2(l) | dH 1 kJ ± 8 (k = 1.2345678)")
@example("known\n  [K] 0.123456789012345 H2(g) -> H2(l) | dH 1 kJ")
@example("known\n  [K] H2(g) -> H2(l) | dH 1.5e-30 kJ ± 3 %")
def test_any_text_gives_a_sheet_and_faults(text: str) -> None:
    sheet, faults = build_sheet(text)
    lines = split_lines(text)
    for fault in faults:
        assert 1 <= fault.line <= len(lines)
        assert 1 <= fault.column <= len(lines[fault.line - 1]) + 1
        assert fault.message
        assert len(fault.message) < 2000
        assert fault.hint or fault.severity == "notice", fault
    assert render(text, faults).count("\nline ") <= len(faults)
    written = write_sheet(sheet)
    assert build_sheet(written)[0] == sheet

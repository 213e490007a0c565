"""Golden sheets: adding a file adds a test.

``sheets/good/*.txt`` read without faults. ``sheets/bad/*.txt`` give exactly the text in ``*.faults.txt`` beside them.
"""

from pathlib import Path

import pytest

from routeheat.notation.build import build_sheet
from routeheat.notation.faults import render
from routeheat.notation.write import write_sheet

SHEETS = Path(__file__).with_name("sheets")
GOOD = sorted(SHEETS.glob("good/*.txt"))
BAD = sorted(path for path in SHEETS.glob("bad/*.txt") if not path.name.endswith(".faults.txt"))


def test_there_are_golden_sheets() -> None:
    assert GOOD
    assert BAD


@pytest.mark.parametrize("path", GOOD, ids=lambda path: path.stem)
def test_good_sheets(path: Path) -> None:
    sheet, faults = build_sheet(path.read_text(encoding="utf-8"))
    assert [str(fault) for fault in faults if fault.severity == "fault"] == []
    again, _ = build_sheet(write_sheet(sheet))
    assert again == sheet


@pytest.mark.parametrize("path", BAD, ids=lambda path: path.stem)
def test_bad_sheets(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    _, faults = build_sheet(text)
    expected = path.with_suffix(".faults.txt").read_text(encoding="utf-8")
    assert render(text, faults) + "\n" == expected

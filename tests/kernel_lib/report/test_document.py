"""The content of a report, before it becomes a file."""

from __future__ import annotations

import datetime
from pathlib import Path

import pytest

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat.errors import UnitError, UnknownName
from routeheat.present.markup import Run, plain
from routeheat.present.table import Column, Table
from routeheat.process.cautions import FULL, SHORT
from routeheat.report.columns import PAGE, folded, needs, widths
from routeheat.report.document import (
    LONGEST_CELL,
    Bullets,
    Code,
    Document,
    FigureBlock,
    Heading,
    Paragraph,
    TableBlock,
    blocks_of,
    table_block,
)
from routeheat.report.matter import gather
from routeheat.report.sections import PARTS, SECTION_NAMES, build
from routeheat.report.write import report_bytes, write_report


def section(document: Document, name: str) -> str:
    """Everything a section says, as plain text."""
    found = next(item for item in document.sections if item.name == name)
    texts = []
    for block in found.blocks:
        if isinstance(block, Heading | Paragraph):
            texts.append(plain(block.text))
        elif isinstance(block, Bullets):
            texts += map(plain, block.items)
        elif isinstance(block, TableBlock):
            texts.append(plain(block.caption))
            for row in (block.grid.header, *block.grid.rows):
                texts.append(" | ".join(map(plain, row)))
            texts += map(plain, block.notes)
        elif isinstance(block, FigureBlock):
            texts += [plain(block.caption), block.drawing.alt, *map(plain, block.notes)]
        elif isinstance(block, Code):
            texts += block.lines
    return "\n".join(texts)


def test_sections_stand_in_the_fixed_order(mixed: Sheet) -> None:
    document = build(gather(mixed, question="Which way?"))
    names = [item.name for item in document.sections]
    assert names == [name for name in SECTION_NAMES if name not in ("comparison", "screening")]
    assert SECTION_NAMES == (
        "question", "routes", "comparison", "profiles", "steps", "combinations", "not_entered", "assumptions",
        "reconciled", "next", "scale", "screening", "waste", "methods", "data", "sheet", "cautions",
    )  # fmt: skip


@pytest.mark.parametrize("name", SECTION_NAMES)
def test_any_section_can_be_left_out_by_name(amine: Sheet, name: str) -> None:
    matter = gather(amine, question="Which way?")
    whole = [item.name for item in build(matter).sections]
    assert [item.name for item in build(matter, (name,)).sections] == [other for other in whole if other != name]


def test_an_unknown_section_is_refused(amine: Sheet) -> None:
    with pytest.raises(UnknownName, match="cautions"):
        build(gather(amine), ("caution",))


def test_a_later_section_joins_by_one_entry() -> None:
    assert all(part.name and part.heading and callable(part.blocks) for part in PARTS)
    assert len({part.name for part in PARTS}) == len(PARTS)


def test_tables_and_figures_are_numbered_through(amine: Sheet) -> None:
    blocks = list(blocks_of(build(gather(amine))))
    tables = [block.number for block in blocks if isinstance(block, TableBlock)]
    figures = [block.number for block in blocks if isinstance(block, FigureBlock)]
    assert tables == list(range(1, len(tables) + 1))
    assert figures == list(range(1, 9))  # the comparison, three profiles, single steps of three routes, the strip


def test_every_id_is_used_once(mixed: Sheet) -> None:
    document = build(gather(mixed))
    named = [block for block in blocks_of(document) if isinstance(block, Heading | TableBlock | FigureBlock | Code)]
    ids = [block.id for block in named] + [item.name for item in document.sections]
    assert len(set(ids)) == len(ids)


def test_the_short_caution_stands_first_and_the_full_one_last(mixed: Sheet) -> None:
    document = build(gather(mixed))
    assert plain(document.caution) == SHORT
    assert section(document, "cautions").splitlines() == list(FULL)


def test_every_table_and_figure_with_heats_bears_a_caution(mixed: Sheet) -> None:
    for block in blocks_of(build(gather(mixed))):
        if isinstance(block, FigureBlock) or (isinstance(block, TableBlock) and block.id.startswith(("rows", "prof"))):
            assert any("screening aid" in plain(note) for note in block.notes), block.id


def test_what_is_not_entered_is_named(mixed: Sheet) -> None:
    text = section(build(gather(mixed)), "not_entered")
    assert "Route A, A2: heat not entered" in text
    assert "Target U: out of reach" in text
    assert "uncertainty not stated: K6" in text
    assert "Source not stated: K3" in text


def test_a_complete_sheet_says_so() -> None:
    sheet = rh.read_sheet(
        'uncertainty k = 2\nroute A makes C(s)\n  [A1] B(s) -> C(s)\n  dH -5 ± 1 kJ/mol | yield 90 ± 1 % | source "x"\n'
        .replace("B(s)", "SiO2(s)").replace("C(s)", "SiO2(l)")
    )  # fmt: skip
    assert section(build(gather(sheet)), "not_entered").startswith("Every heat")


def test_assumptions_say_k_and_where_heats_are_derived(mixed: Sheet, amine: Sheet) -> None:
    text = section(build(gather(mixed)), "assumptions")
    assert "A printed ± is k = 2, as the sheet says." in text
    assert "A1: derived from known rows; pure components" in text
    assert "A printed ± is k = 1" in section(build(gather(amine)), "assumptions")


def test_every_datum_is_listed_with_kind_and_source(mixed: Sheet) -> None:
    text = section(build(gather(mixed)), "data")
    assert "K2 | heat of formation, known row | H2(g) + 1/2 O2(g) → H2O(l) | −285.830 ± 0.04 kJ/mol | CODATA 1989" in (
        text
    )
    for line in (
        "A1 | yield |  | 96 ± 2 % | not stated",
        "A3 | heat of step, typed | ANI(sln) → ANI(l) | −5 ± 2 kJ/mol",
    ):
        assert line in text


def test_combinations_show_rows_ledger_figure_and_other_ways(mixed: Sheet) -> None:
    document = build(gather(mixed))
    text = section(document, "combinations")
    assert "Target T: 227.0 ± 1.0 (k = 2) kJ/mol" in text
    assert "sum equals target for every species" in text
    assert "2 K1 + K2 − K3 | 226.55 ± 0.84" in text
    assert "Target U: out of reach" in text
    assert "Step A1:" in text


def test_the_question_title_and_date_are_shown_and_a_date_only_when_given(amine: Sheet) -> None:
    document = build(gather(amine, title="A title", question="One?\n\nTwo?", date="1 May"))
    assert (plain(document.title), plain(document.date)) == ("A title", "1 May")
    assert section(document, "question") == "One?\nTwo?"
    bare = build(gather(amine))
    assert plain(bare.title) == "Heats of routes to AMI(s)"
    assert bare.date == ()
    assert "question" not in [item.name for item in bare.sections]


def test_the_appendix_is_the_sheet_as_typed_else_its_canonical_text(mixed: Sheet) -> None:
    assert section(build(gather(mixed, text="# mine\n  x\n")), "sheet").splitlines()[-2:] == ["# mine", "  x"]
    assert section(build(gather(mixed)), "sheet") == rh.write_sheet(mixed).rstrip("\n")


def test_the_basis_of_the_profiles_can_be_chosen(amine: Sheet) -> None:
    assert "per kilogram of product" in section(build(gather(amine, per="kg")), "profiles")
    with pytest.raises(UnitError):
        gather(amine, per="lb of product")


def test_routes_to_different_products_are_compared_by_product() -> None:
    sheet = rh.read_sheet(
        "uncertainty k = 2\n"
        + "".join(
            f"route {name} makes {product}\n  [{name}1] {reactant} -> {product}\n  dH -5 ± 1 kJ/mol | yield 90 %\n"
            for name, reactant, product in (
                ("A", "SiO2(s)", "SiO2(l)"), ("B", "SiO2(g)", "SiO2(l)"), ("C", "CO2(g)", "CO2(l)"),
            )
        )
    )  # fmt: skip
    matter = gather(sheet)
    assert [[item.route.name for item in found.profiles] for found in matter.comparisons] == [["A", "B"]]


def test_cells_headings_and_the_title_are_shortened_when_endless(hostile: Sheet, hostile_text: str) -> None:
    document = build(gather(hostile, title=hostile_text))
    assert len(plain(document.title)) <= LONGEST_CELL
    for block in blocks_of(document):
        if isinstance(block, TableBlock):
            assert max(len(plain(cell)) for row in block.grid.rows for cell in row) <= LONGEST_CELL


def test_no_control_or_bidirectional_character_is_left(hostile: Sheet, hostile_text: str) -> None:
    document = build(gather(hostile, title=hostile_text, question=hostile_text, text=hostile_text))
    for item in document.sections:
        text = section(document, item.name)
        assert not {"\x00", "\x1b", "\u202e", "\u2066", "\ufffe", "\ud800"} & set(text)


def test_wide_tables_are_folded_and_fit_the_page(mixed: Sheet) -> None:
    grids = [block.grid for block in blocks_of(build(gather(mixed))) if isinstance(block, TableBlock)]
    assert any(len(folded(grid)) > 1 for grid in grids)
    for grid in grids:
        parts = folded(grid)
        assert [name for part in parts for name in part.header[1:]] == list(grid.header[1:])
        for part in parts:
            assert part.header[0] == grid.header[0]
            assert sum(widths(part)) <= PAGE + 0.01
            assert all(width >= need.least - 0.01 for width, need in zip(widths(part), needs(part), strict=True))


def test_the_suffix_decides_the_form(amine: Sheet, tmp_path: Path) -> None:
    for form, magic in (("html", b"<!DOCTYPE"), ("DOCX", b"PK"), ("pdf", b"%PDF")):
        target = tmp_path / f"report.{form}"
        assert write_report(amine, str(target), leave_out=("profiles", "steps", "comparison")) == target
        assert target.read_bytes().startswith(magic)
    with pytest.raises(UnknownName, match="form of a report"):
        write_report(amine, tmp_path / "report.odt")


def test_unknown_options_are_refused(amine: Sheet) -> None:
    with pytest.raises(UnknownName, match="titel"):
        report_bytes(amine, "html", titel="x")


def test_a_date_object_is_written_in_iso_form(amine: Sheet) -> None:
    assert b"2024-05-01" in report_bytes(amine, "html", date=datetime.date(2024, 5, 1))


def test_an_empty_sheet_still_makes_a_report() -> None:
    for form in ("html", "docx", "pdf"):
        assert report_bytes(rh.read_sheet(""), form)


def test_the_k_of_a_ledger_stands_with_its_row_and_not_in_every_header(mixed: Sheet) -> None:
    blocks = blocks_of(build(gather(mixed)))
    ledger = next(block for block in blocks if isinstance(block, TableBlock) and block.id == "ledger-1")
    assert not any("k" in plain(cell).split() or "±" in plain(cell) for cell in ledger.grid.header)
    assert plain(ledger.grid.rows[-1][0]) == "ΔrH / (kJ/mol), ± k = 2".replace(" / ", " /\xa0").replace(
        "± k = ", "±\xa0k\xa0=\xa0"
    )


def test_columns_without_content_are_left_out() -> None:
    table = Table("t", (Column("a", "a"), Column("b", "b"), Column("c", "c")), (("x", "", 1), ("y", None, 2)))
    assert [plain(cell) for cell in table_block("t", table).grid.header] == ["a", "c"]


def test_a_title_may_have_subscripts() -> None:
    table = Table((Run("H"), Run("2", "sub"), Run("O")), (Column("a", "a"),), (("x",),))
    assert table_block("t", table).caption == (Run("H"), Run("2", "sub"), Run("O"))

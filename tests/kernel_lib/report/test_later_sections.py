"""What the sections on agreement, measuring, scale, screening and waste say, and when they are there."""

from __future__ import annotations

import io
import re

import pypdf
import pytest

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat.present.markup import plain
from routeheat.process.cautions import FULL, SHORT
from routeheat.report.document import (
    Bullets,
    Document,
    FigureBlock,
    Heading,
    Paragraph,
    TableBlock,
    blocks_of,
)
from routeheat.report.matter import gather
from routeheat.report.sections import build
from routeheat.report.write import report_bytes

LATER = ("reconciled", "next", "scale", "screening", "waste")
BARE = """uncertainty k = 1
route A makes SiO2(l)
  [A1] SiO2(s) -> SiO2(l)
       dH 9 ± 1 kJ/mol | yield 90 %
"""
"""A route without any key of the vessel; invented."""


def names(sheet: Sheet, *leave_out: str) -> list[str]:
    return [item.name for item in build(gather(sheet), leave_out).sections if item.name in LATER]


def text(document: Document, name: str) -> str:
    """Everything a section says, one line a row of a table."""
    found = []
    for block in next(item for item in document.sections if item.name == name).blocks:
        if isinstance(block, Heading | Paragraph):
            found.append(plain(block.text))
        elif isinstance(block, Bullets):
            found += map(plain, block.items)
        elif isinstance(block, TableBlock):
            rows = [" | ".join(map(plain, row)) for row in (block.grid.header, *block.grid.rows)]
            found += [plain(block.caption), *rows, *map(plain, block.notes)]
        elif isinstance(block, FigureBlock):
            found += [plain(block.caption), block.drawing.alt, *map(plain, block.notes)]
    return "\n".join(found).replace("\xa0", " ")


@pytest.fixture(scope="module")
def everything(whole: Sheet) -> Document:
    return build(gather(whole))


def test_all_sections_are_there_when_the_sheet_has_keys_for_them(whole: Sheet) -> None:
    assert tuple(names(whole)) == LATER


@pytest.mark.parametrize("name", LATER)
def test_each_is_absent_when_left_out(whole: Sheet, name: str) -> None:
    assert names(whole, name) == [other for other in LATER if other != name]


def test_sections_without_a_key_are_left_out_silently() -> None:
    assert names(rh.read_sheet(BARE)) == ["next", "waste"]
    assert names(rh.read_sheet("")) == []


def test_agreement_says_verdict_decisions_and_open_cycles(everything: Document) -> None:
    found = text(everything, "reconciled")
    assert "the own uncertainty of K3 is multiplied by 2: old calorimeter" in found
    assert "the contradiction is accepted (typed at K3): kept for comparison" in found
    assert "Cycles that do not close" in found
    assert "chi-square" in found
    assert re.search(r"K1 \| .* \| −393\.50 ± 0\.10 \| −393\.\d+ ± ", found)
    assert "K4" in found  # takes part although no cycle checks it


def test_agreement_is_not_assessed_when_no_uncertainty_is_stated() -> None:
    typed = "uncertainty k = 1\nknown\n  [K1] formation of CO(g)\n  dH -110 kJ/mol\n" \
        "  [K2] CO(g) -> C(s, graphite) + 1/2 O2(g)\n  dH 111 kJ/mol\n"  # fmt: skip
    found = text(build(gather(rh.read_sheet(typed))), "reconciled")
    assert found.startswith("Not assessed: no cycle with an uncertain row")
    assert "its uncertainty is not stated" in found


def test_cycles_that_close_are_said_to_close() -> None:
    typed = "uncertainty k = 1\nknown\n  [K1] formation of CO(g)\n  dH -110 ± 1 kJ/mol\n" \
        "  [K2] CO(g) -> C(s, graphite) + 1/2 O2(g)\n  dH 111 ± 1 kJ/mol\n"  # fmt: skip
    found = text(build(gather(rh.read_sheet(typed))), "reconciled")
    assert "The heats agree within their uncertainties" in found
    assert "The only cycle closes" in found
    assert "Cycles that do not close" not in found


def test_the_next_measurement_is_for_the_first_pair_and_says_what_it_assumes(amine: Sheet) -> None:
    found = text(build(gather(amine)), "next")
    # u of A2 is 20 and enters 1.064 times; 34.1 now (quadrature of the four steps)
    assert "For the difference B − A: Measuring A2 to u = 10 kJ/mol would shrink the difference from u = 34.1" in found
    assert "halves the standard uncertainty that a heat has now" in found
    assert "A2 | NIT(s) + 3 H2(g) → AMI(s) + 2 H2O(l) | 20.00 | 10.00" in found


def test_the_next_measurement_of_a_single_route_is_for_its_total(everything: Document) -> None:
    found = text(everything, "next")
    assert "For the total of route 1: Measuring X1 to u = 1.5 kJ/mol" in found
    assert "no single measurement brings it below 0." in found


def test_a_difference_without_a_number_is_not_assessed_and_the_target_is_asked_for(mixed: Sheet) -> None:
    found = text(build(gather(mixed)), "next")
    assert found.startswith("Not assessed: route A has no total: not entered A2.")
    assert "For the heat of T: Measuring T itself to u = 0.25 kJ/mol" in found


def test_routes_at_scale_stand_beside_each_other(amine: Sheet) -> None:
    found = text(build(gather(amine)), "scale")
    assert "route | A, nitration, hydrogenation | B, bromination, amination | C, acyl azide, rearrangement" in found
    assert "largest ΔTad / K, ± k = 1 | 213.3 ± at least 7.8 (A2) |" in found
    assert "\nin |" not in found


def test_many_routes_stand_below_each_other(amine: Sheet) -> None:
    from dataclasses import replace

    many = {name: replace(amine.routes["A"], name=name) for name in "ABCDE"}
    document = build(gather(replace(amine, routes=many)))
    table = next(block for block in blocks_of(document) if getattr(block, "id", "") == "scale-routes-1")
    assert isinstance(table, TableBlock)
    assert [plain(row[0])[0] for row in table.grid.rows] == list("ABCDE")


def test_nothing_is_ranked_while_an_operation_is_open(amine: Sheet, everything: Document) -> None:
    found = text(build(gather(amine)), "scale")
    assert "No ranking: operations are open" in found
    assert "releases more heat" not in found
    assert "differences of totals" not in found
    assert "quench | open | open | open" in found
    assert "No ranking" not in text(everything, "scale")


def test_a_complete_checklist_gives_the_differences() -> None:
    nil = 'nil "quench, work-up, neutralisation, dissolution, crystallisation, distillation, scrubber: one melt"'
    typed = "uncertainty k = 1\n" + "".join(
        f"route {name} makes SiO2(l)\n  [{name}1] SiO2({phase}) -> SiO2(l)\n"
        f"       dH {heat} ± 1 kJ/mol | yield 90 ± 1 % | T 20 degC | {nil}\n"
        for name, phase, heat in (("A", "s", -9), ("B", "g", -90))
    )
    assert "B releases more heat than A" in text(build(gather(rh.read_sheet(typed))), "scale")


def test_what_a_step_lacks_is_named(amide_vessel: Sheet) -> None:
    found = text(build(gather(amide_vessel)), "scale")
    assert "Not assessed: X2q: not classifiable: conc, cp, TD24 missing" in found


def test_a_route_that_cannot_be_read_at_scale_leaves_the_others(amine: Sheet) -> None:
    typed = rh.write_sheet(amine).replace("TD24 95 degC", 'TD24 95 degC | nil "quench"')
    found = text(build(gather(rh.read_sheet(typed))), "scale")
    assert "Not assessed: route A: " in found
    assert "route | B, bromination, amination | C, acyl azide, rearrangement" in found


def test_classes_come_with_probabilities_for_every_step(amine: Sheet) -> None:
    found = text(build(gather(amine)), "scale")
    # MTSR 175 with u = 5 lies one standard uncertainty above MTT 170: below it with Φ(−1) = 16 %
    assert "B2 | cooling failure, as run | 175.0 ± at least 5.0 (k = 1) | 175.0 | 3 | classes 3 (84 %), 1 (16 %)" \
        in found  # fmt: skip
    assert found.count("criticality when cooling fails") == 3


def test_a_shared_step_stands_in_the_vessel_once(amide_vessel: Sheet) -> None:
    found = text(build(gather(amide_vessel)), "scale")
    assert found.count("X1 in the vessel") == 1
    assert "In the vessel as shown with an earlier route: X1, Y1, F." in found


def test_tables_of_vessels_fold_on_a_screen_and_the_verdict_does_not(amine: Sheet) -> None:
    blocks = [block for block in blocks_of(build(gather(amine))) if isinstance(block, TableBlock)]
    assert {block.id.rsplit("-", 3)[0] for block in blocks if block.folds} == {"scale-vessel"}
    assert len([block for block in blocks if block.folds]) == 7  # steps of amine.txt
    page = report_bytes(amine, "html").decode("utf-8")
    assert page.count("<details") == 7
    assert "<details open" not in page


def test_a_load_curve_is_drawn_where_feed_and_jacket_are_typed(everything: Document, amine: Sheet) -> None:
    assert "X1: load of the jacket against feed time" in text(everything, "scale")
    assert "load of the jacket against feed time" not in text(build(gather(amine)), "scale")
    assert "Not assessed: A1: feed and cooling not checked: size or mass, U, area, jacket missing" in text(
        build(gather(amine)), "scale"
    )


def test_the_cautions_stand_in_full_and_nothing_is_called_safe(everything: Document, amine: Sheet) -> None:
    for document in (everything, build(gather(amine))):
        lines = text(document, "scale").splitlines()
        assert tuple(lines[-len(FULL) :]) == FULL
        for name in ("scale", "next", "waste", "screening"):
            assert not re.search(r"\bsafe(ly)?\b", text(document, name), re.IGNORECASE)


def test_screening_lists_checks_and_names_species_that_declare_nothing(everything: Document) -> None:
    found = text(everything, "screening")
    assert "Energetic screening of AZI(sln)" in found
    assert "decomposition energy, measured | 900 J/g released" in found
    assert "Not assessed: EST(l), ACI(s): energetic groups not declared." in found


def test_an_unknown_group_is_not_assessed() -> None:
    found = text(build(gather(rh.read_sheet("species\n  X C6H6(l) | groups phlogiston\n"))), "screening")
    assert found.startswith("Not assessed: X(l): ")
    assert "phlogiston" in found


def test_waste_has_every_step_and_the_whole_with_its_boundary(everything: Document) -> None:
    found = text(everything, "waste")
    assert re.search(r"^1 \| X1 \| [\d.]+ \|", found, re.MULTILINE)
    assert "1 | whole route |" in found
    assert "boundary of the whole: all that is charged; water in" in found


def test_methods_name_only_what_the_report_uses(whole: Sheet) -> None:
    full = text(build(gather(whole)), "methods")
    bare = text(build(gather(rh.read_sheet(BARE))), "methods")
    for words in ("Reconciliation:", "TMRad:", "Oxygen balance:"):
        assert words in full
        assert words not in bare
    assert "Waste:" in bare
    # orderings of the classes have not been read in their source
    line = next(item for item in full.splitlines() if item.startswith("Criticality class:"))
    assert "from memory, check against the source" in line


def test_every_table_of_the_vessel_bears_the_caution(amine: Sheet) -> None:
    blocks = [block for block in blocks_of(build(gather(amine))) if isinstance(block, TableBlock)]
    wanted = [block for block in blocks if block.id.startswith(("scale-routes", "scale-classes", "scale-vessel"))]
    assert len(wanted) == 1 + 3 + 7
    for block in wanted:
        assert SHORT in [plain(note) for note in block.notes], block.id


@pytest.mark.parametrize("form", ["html", "docx", "pdf"])
def test_the_same_sheet_gives_the_same_bytes(whole: Sheet, form: str) -> None:
    assert report_bytes(whole, form) == report_bytes(whole, form)


def test_no_note_of_a_short_list_is_alone_at_the_head_of_a_page(amide_vessel: Sheet) -> None:
    reader = pypdf.PdfReader(io.BytesIO(report_bytes(amide_vessel, "pdf")))
    for page in reader.pages:
        lines = [line for line in page.extract_text().splitlines() if not line.strip().isdigit()]
        assert lines[0] != SHORT

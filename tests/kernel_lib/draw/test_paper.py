"""Figures for print: every form opens, nothing is clipped or overlaps, the same input gives the same bytes."""

from __future__ import annotations

import io
import itertools
import subprocess
import sys
import xml.etree.ElementTree as ElementTree
from pathlib import Path
from typing import Any

import numpy as np
import pypdf
import pypdfium2
import pytest
import resvg_py
from PIL import Image

from routeheat.draw import paper, paper_bytes
from routeheat.draw.decks import Stack, pages, stack
from routeheat.draw.geometry import Geometry, TextBox
from routeheat.draw.glyphs import LACKING, LACKING_NOTE
from routeheat.draw.glyphs import width as text_width
from routeheat.draw.ink import Shape, Stroke, Word
from routeheat.draw.ink import marks as ink_marks
from routeheat.draw.looks import DASHES, HEADS, SERIES
from routeheat.draw.metrics import run_size
from routeheat.draw.paper import POINTS_PER_PX, print_layout
from routeheat.errors import UnitError, UnknownName
from routeheat.present.ladder import Arrow, Column, Ladder
from routeheat.present.markup import plain

WIDTHS = (60.0, 84.0, 174.0)
SVG = "{http://www.w3.org/2000/svg}"
LADDERS = ("one_step", "crowded", "overlaid", "marks")


@pytest.fixture(params=LADDERS)
def ladder(request: pytest.FixtureRequest) -> Ladder:
    found: Ladder = request.getfixturevalue(request.param)
    return found


def boxes(figure: Stack) -> list[TextBox]:
    """Every text of the figure at its place on the page."""
    found = list(figure.texts)
    for panel in figure.panels:
        found += [
            TextBox(box.x, box.y + panel.y, box.w, box.h, box.rich, box.anchor, box.kind, box.size, rotated=box.rotated,
                    bold=box.bold)
            for box in panel.geometry.texts
        ]  # fmt: skip
    return found


def inked(picture: Image.Image) -> np.ndarray[Any, Any]:
    return np.asarray(picture.convert("L")) < 200


@pytest.mark.parametrize("width", WIDTHS)
def test_no_two_texts_overlap_and_none_leaves_the_page(ladder: Ladder, width: float) -> None:
    figure = print_layout(ladder, width)
    found = boxes(figure)
    for box in found:
        assert box.x >= 0
        assert box.y >= 0
        assert box.x + box.w <= figure.width + 0.01, plain(box.rich)
        assert box.y + box.h <= figure.height + 0.01, plain(box.rich)
    for one, other in itertools.combinations(found, 2):
        apart = (
            one.x + one.w <= other.x + 0.01 or other.x + other.w <= one.x + 0.01
            or one.y + one.h <= other.y + 0.01 or other.y + other.h <= one.y + 0.01
        )  # fmt: skip
        assert apart, (plain(one.rich), plain(other.rich))


@pytest.mark.parametrize("width", WIDTHS)
def test_printed_words_are_no_wider_than_the_boxes_reserved_for_them(ladder: Ladder, width: float) -> None:
    for box in boxes(print_layout(ladder, width)):
        printed = sum(text_width(run.text, run_size(run, 11.5), box.bold, run.style == "italic") for run in box.rich)
        assert printed <= (box.h if box.rotated else box.w) + 0.01, plain(box.rich)


@pytest.mark.parametrize("width", WIDTHS)
def test_the_rendered_figure_has_no_ink_at_its_edges(ladder: Ladder, width: float) -> None:
    picture = Image.open(io.BytesIO(paper_bytes(ladder, "png", width=f"{width} mm")))
    ink = inked(picture)
    rim = round(0.8 / 25.4 * 600)
    assert ink[rim:-rim, rim:-rim].any()
    assert not ink[:rim].any()
    assert not ink[-rim:].any()
    assert not ink[:, :rim].any()
    assert not ink[:, -rim:].any()


@pytest.mark.parametrize("width", ["84 mm", "174 mm", "12 cm", "100.5 mm"])
def test_sizes_are_those_asked_for_in_every_form(one_step: Ladder, width: str) -> None:
    number, unit = width.split()
    millimetres = float(number) * (10 if unit == "cm" else 1)
    picture = Image.open(io.BytesIO(paper_bytes(one_step, "png", width=width)))
    assert picture.width == pytest.approx(millimetres / 25.4 * 600, abs=1)
    assert picture.info["dpi"] == pytest.approx((600, 600), abs=0.1)
    page = pypdf.PdfReader(io.BytesIO(paper_bytes(one_step, "pdf", width=width))).pages[0]
    assert float(page.mediabox.width) == pytest.approx(millimetres / 25.4 * 72, abs=0.01)
    root = ElementTree.fromstring(paper_bytes(one_step, "svg", width=width))
    assert float(root.attrib["width"].removesuffix("pt")) == pytest.approx(millimetres / 25.4 * 72, abs=0.01)


@pytest.mark.parametrize("form", ["svg", "pdf", "png"])
def test_the_same_input_gives_the_same_bytes(marks: Ladder, form: str) -> None:
    assert paper_bytes(marks, form) == paper_bytes(marks, form)


def test_bytes_do_not_depend_on_the_process() -> None:
    code = (
        "import sys, hashlib; from routeheat.draw import paper_bytes;"
        "from routeheat.present.ladder import Arrow, Column, Ladder; from routeheat.present.markup import Run;"
        "ladder = Ladder('t', (Column('A', (Arrow('A1', '-5', 0.0, -5.0, 1.0),)),), (Run('H', 'italic'),), 'kJ', 2.0);"
        "print([hashlib.sha256(paper_bytes(ladder, form)).hexdigest() for form in ('svg', 'pdf', 'png')])"
    )
    runs = {subprocess.run([sys.executable, "-c", code], check=True, capture_output=True).stdout for _ in range(2)}
    assert len(runs) == 1


def test_svg_is_outlined_described_and_dateless(marks: Ladder) -> None:
    data = paper_bytes(marks, "svg")
    root = ElementTree.fromstring(data)
    assert root.tag == f"{SVG}svg"
    assert root.attrib["role"] == "img"
    assert [item.text for item in root.iter(f"{SVG}desc")] == ["In words."]
    assert not list(root.iter(f"{SVG}text"))
    assert b"dc:date" not in data
    assert not list(root.iter(f"{SVG}script"))


def test_svg_rasterises_to_the_same_picture_as_the_png(one_step: Ladder) -> None:
    png = Image.open(io.BytesIO(paper_bytes(one_step, "png")))
    svg = paper_bytes(one_step, "svg").decode()
    drawn = Image.open(io.BytesIO(bytes(resvg_py.svg_to_bytes(svg_string=svg, dpi=96, zoom=4))))
    size = (200, round(200 * png.height / png.width))
    grey = [np.asarray(item.convert("L").resize(size, Image.Resampling.BOX), dtype=float) for item in (png, drawn)]
    assert np.abs(grey[0] - grey[1]).mean() < 3


def test_pdf_embeds_its_fonts_and_its_text_can_be_found(marks: Ladder) -> None:
    reader = pypdf.PdfReader(io.BytesIO(paper_bytes(marks, "pdf")))
    assert len(reader.pages) == 1
    fonts = reader.pages[0]["/Resources"]["/Font"]  # type: ignore[index]
    for font in fonts.values():
        descriptor = font.get_object()["/DescendantFonts"][0].get_object()["/FontDescriptor"]
        assert "/FontFile2" in descriptor
    text = reader.pages[0].extract_text()
    assert "−100 ± 10" in text
    assert "not entered" in text
    assert reader.metadata is not None
    assert reader.metadata.subject == "In words."
    assert reader.metadata.creation_date is None


def test_pdf_renders_to_the_same_picture_as_the_png(one_step: Ladder) -> None:
    png = Image.open(io.BytesIO(paper_bytes(one_step, "png")))
    page = pypdfium2.PdfDocument(paper_bytes(one_step, "pdf"))[0]
    drawn = page.render(scale=4).to_pil()
    size = (200, round(200 * png.height / png.width))
    grey = [np.asarray(item.convert("L").resize(size, Image.Resampling.BOX), dtype=float) for item in (png, drawn)]
    assert np.abs(grey[0] - grey[1]).mean() < 3


@pytest.mark.parametrize("form", ["svg", "pdf", "png"])
def test_hostile_texts_come_out_as_harmless_text(hostile: Ladder, form: str) -> None:
    data = paper_bytes(hostile, form)
    if form == "svg":
        root = ElementTree.fromstring(data)
        assert not list(root.iter(f"{SVG}script"))
        assert not list(root.iter(f"{SVG}a"))
    elif form == "pdf":
        assert "/AA" not in pypdf.PdfReader(io.BytesIO(data)).trailer["/Root"]
        assert list(pypdf.PdfReader(io.BytesIO(data)).pages[0].annotations or []) == []
    else:
        Image.open(io.BytesIO(data)).verify()


def test_all_text_is_seven_points_with_smaller_scripts(marks: Ladder) -> None:
    found = {round(mark.size * POINTS_PER_PX, 3) for mark in _ink(print_layout(marks, 84.0)) if isinstance(mark, Word)}
    assert found == {7.0, 4.9}


def test_lines_are_thick_enough_to_print(marks: Ladder) -> None:
    assert min(mark.width for mark in _ink(print_layout(marks, 84.0)) if isinstance(mark, Stroke | Shape)) > 0.7


def test_columns_on_one_axis_differ_without_colour(overlaid: Ladder) -> None:
    figure = print_layout(overlaid, 174.0)
    used = {arrow.series for panel in figure.panels for arrow in _geometry(panel.geometry).arrows}
    assert used == {0, 1, 2}
    assert len({DASHES[series] for series in used}) == 3
    assert len({HEADS[series] for series in used}) == 3


@pytest.mark.parametrize("colour", SERIES)
def test_every_colour_is_dark_enough_in_grey(colour: str) -> None:
    red, green, blue = (int(colour[start : start + 2], 16) / 255 for start in (1, 3, 5))
    linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in (red, green, blue)]
    luminance = 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]
    assert 1.05 / (luminance + 0.05) >= 3  # WCAG 2.1, 1.4.11


def test_narrow_figures_stack_columns_on_one_scale(make_chain: Any, make_ladder: Any) -> None:
    ladder = make_ladder(make_chain("A", [-100.0, -200.0, -80.0, 30.0]), make_chain("B", [-50.0, -60.0, 20.0, -10.0]))
    assert len(print_layout(ladder, 174.0).panels) == 1
    narrow = print_layout(ladder, 84.0)
    assert len(narrow.panels) == 2
    assert len({_geometry(panel.geometry).scale.px_per_unit for panel in narrow.panels}) == 1
    assert [_geometry(panel.geometry).arrows[0].series for panel in narrow.panels] == [0, 1]


def test_a_long_route_goes_on_in_the_next_plot_at_its_level(crowded: Ladder) -> None:
    figure = print_layout(crowded, 84.0)
    assert len(figure.panels) > 1
    plots = [_geometry(panel.geometry) for panel in figure.panels]
    labels = [arrow.label for plot in plots for arrow in plot.arrows]
    assert labels == [arrow.label for arrow in crowded.columns[0].arrows]
    for before, after in itertools.pairwise(plots):
        assert before.scale.heat(before.arrows[-1].y1) == pytest.approx(after.scale.heat(after.arrows[0].y0))


def test_a_tall_figure_is_cut_between_its_plots(crowded: Ladder) -> None:
    whole = stack(crowded, 391.0, listing=False)
    parts = pages(whole, 600.0)
    assert len(parts) > 1
    assert all(part.height <= 600.0 for part in parts)
    assert sum(len(part.panels) for part in parts) == len(whole.panels)
    assert sum(len(part.texts) for part in parts) == len(whole.texts)


def test_the_axis_style_can_be_chosen(one_step: Ladder) -> None:
    def title(style: str) -> str:
        figure = print_layout(one_step, 84.0, axis_style=style)
        return next(plain(box.rich) for box in boxes(figure) if box.kind == "axis")

    assert title("quantity / unit") == "ΔrH / (kJ mol⁻¹)"
    assert title("quantity (unit)") == "ΔrH (kJ mol⁻¹)"


def test_a_character_without_a_glyph_is_a_square_and_a_note_says_so() -> None:
    ladder = Ladder("\u4e2d", (Column("A", (Arrow("A1", "-5", 0.0, -5.0, 1.0),)),), (), "kJ", 2.0)
    texts = [plain(box.rich) for box in boxes(print_layout(ladder, 84.0))]
    assert LACKING in texts
    assert LACKING_NOTE in texts


def test_the_suffix_decides_the_form_and_the_path_is_returned(one_step: Ladder, tmp_path: Path) -> None:
    for form, magic in (("svg", b"<?xml"), ("PDF", b"%PDF"), ("png", b"\x89PNG")):
        target = tmp_path / f"figure.{form}"
        assert paper(one_step, str(target)) == target
        assert target.read_bytes().startswith(magic)


@pytest.mark.parametrize("suffix", ["tif", "", "svgz"])
def test_another_form_is_refused(one_step: Ladder, tmp_path: Path, suffix: str) -> None:
    with pytest.raises(UnknownName, match="form of a figure"):
        paper(one_step, tmp_path / f"figure.{suffix}")


@pytest.mark.parametrize("width", ["", "84", "84 px", "-84 mm", "1e3 mm", "59 mm", "401 mm", "84 mm; x"])
def test_a_width_that_is_no_length_in_range_is_refused(one_step: Ladder, width: str) -> None:
    with pytest.raises(UnitError):
        paper_bytes(one_step, "svg", width=width)


def test_unknown_options_and_styles_are_refused(one_step: Ladder) -> None:
    with pytest.raises(UnknownName, match="dpi"):
        paper_bytes(one_step, "png", dpi=300)
    with pytest.raises(UnknownName, match="axis style"):
        paper_bytes(one_step, "png", axis_style="unit")


def test_no_pyplot_is_loaded_and_the_readers_settings_stay(one_step: Ladder) -> None:
    import matplotlib as mpl

    before = dict(mpl.rcParams)
    paper_bytes(one_step, "svg")
    assert dict(mpl.rcParams) == before
    code = (
        "import sys; from routeheat.draw import paper_bytes;"
        "from routeheat.present.ladder import Arrow, Column, Ladder;"
        "paper_bytes(Ladder('t', (Column('A', (Arrow('A1', '-5', 0.0, -5.0, 1.0),)),), (), 'kJ', 2.0), 'png');"
        "assert 'matplotlib.pyplot' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True)


def _ink(figure: Stack) -> list[object]:
    return list(ink_marks(figure, text_width))


def _geometry(plot: object) -> Geometry:
    assert isinstance(plot, Geometry)
    return plot

from __future__ import annotations

import dataclasses
import math
from collections.abc import Callable
from itertools import combinations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from routeheat.draw.declutter import Rect, Segment, crosses
from routeheat.draw.geometry import ArrowMark, Geometry, TextBox
from routeheat.draw.layout import lay_out
from routeheat.present.ladder import Arrow, Column, Ladder
from routeheat.present.markup import Run, plain

ROUNDING = 1e-6


def rect(box: TextBox) -> Rect:
    return Rect(box.x + ROUNDING, box.y + ROUNDING, box.x + box.w - ROUNDING, box.y + box.h - ROUNDING)


def drawn(arrow: ArrowMark) -> list[Rect]:
    """Shaft with head, and whisker with caps."""
    low, high = sorted((arrow.y0, arrow.y1))
    shapes = [Rect(arrow.x - 4, low, arrow.x + 4, high + 0.1)]
    if arrow.whisker:
        shapes.append(Rect(arrow.whisker_x - 3.5, arrow.whisker[1], arrow.whisker_x + 3.5, arrow.whisker[0]))
    return shapes


def collisions(geometry: Geometry) -> list[str]:
    """Everything that overlaps although it must not."""
    found = [
        f"{plain(one.rich)[:20]!r} over {plain(other.rich)[:20]!r}"
        for one, other in combinations(geometry.texts, 2)
        if rect(one).overlaps(rect(other))
    ]
    for box in geometry.texts:
        if box.x < 0 or box.y < 0 or box.x + box.w > geometry.width or box.y + box.h > geometry.height:
            found.append(f"{plain(box.rich)[:20]!r} leaves the canvas")
        for arrow in geometry.arrows:
            if any(rect(box).overlaps(shape) for shape in drawn(arrow)):
                found.append(f"{plain(box.rich)[:20]!r} over arrow {arrow.label[:20]!r}")
        for line in (*geometry.carriers, *geometry.leaders):
            if crosses(Segment(line.x0, line.y0, line.x1, line.y1), rect(box)):
                found.append(f"{plain(box.rich)[:20]!r} over a line")
        for tick in geometry.axis.ticks:
            if rect(box).overlaps(Rect(geometry.axis.x - 5, tick.y - 0.5, geometry.axis.x, tick.y + 0.5)):
                found.append(f"{plain(box.rich)[:20]!r} over a tick")
        inside = box.kind in ("caption", "label", "level")
        axis = geometry.axis
        if inside and not (axis.x < box.x and axis.y_top < box.y and box.y + box.h < axis.y_bottom):
            found.append(f"{plain(box.rich)[:20]!r} leaves the plot")
    return found


def arrows_of(ladder: Ladder) -> list[Arrow]:
    return [arrow for column in ladder.columns for arrow in column.arrows]


@pytest.mark.parametrize("name", ["one_step", "crowded", "overlaid", "marks"])
def test_height_is_linear_in_heat_and_whiskers_are_as_long_as_their_spread(
    name: str, request: pytest.FixtureRequest
) -> None:
    ladder: Ladder = request.getfixturevalue(name)
    geometry = lay_out(ladder)
    ticks = [(float(tick.text.replace("−", "-")), tick.y) for tick in geometry.axis.ticks]
    slope = (ticks[-1][1] - ticks[0][1]) / (ticks[-1][0] - ticks[0][0])
    assert slope < 0
    for arrow, mark in zip(arrows_of(ladder), geometry.arrows, strict=True):
        if arrow.end is None:
            assert (mark.y0 + mark.y1) / 2 == pytest.approx(ticks[0][1] + slope * (arrow.start - ticks[0][0]), abs=0.1)
            continue
        assert mark.y0 == pytest.approx(ticks[0][1] + slope * (arrow.start - ticks[0][0]), abs=0.1)
        assert mark.y1 == pytest.approx(ticks[0][1] + slope * (arrow.end - ticks[0][0]), abs=0.1)
        if arrow.spread is None:
            assert mark.whisker is None
        else:
            assert mark.whisker is not None
            low, high = mark.whisker
            assert low - mark.y1 == pytest.approx(-slope * arrow.spread, abs=0.1)
            assert mark.y1 - high == pytest.approx(-slope * arrow.spread, abs=0.1)


@pytest.mark.parametrize("name", ["one_step", "crowded", "overlaid", "marks"])
def test_texts_overlap_neither_each_other_nor_arrows_nor_lines(name: str, request: pytest.FixtureRequest) -> None:
    assert collisions(lay_out(request.getfixturevalue(name))) == []


def test_hostile_names_overlap_nothing(hostile: Ladder) -> None:
    assert collisions(lay_out(hostile)) == []


LEVEL = st.integers(-300, 300).map(float)
ARROW = st.builds(
    Arrow, label=st.sampled_from(["A1", "B12", "−4 K2"]), caption=st.sampled_from(["−163 ± 19", "not entered"]),
    start=LEVEL, end=st.none() | LEVEL, spread=st.none() | st.integers(0, 200).map(float),
    role=st.sampled_from(["step", "side", "known", "direct"]), complete=st.booleans(),
    equation=st.sampled_from(["", "A + B → C + D"]),
)  # fmt: skip
COLUMN = st.builds(
    Column, title=st.sampled_from(["", "over the nitro compound"]), arrows=st.lists(ARROW, max_size=6).map(tuple),
    start_label=st.sampled_from(["", "C6H6(l) + HNO3(aq)"]), end_label=st.sampled_from(["", "a name"]),
)  # fmt: skip
LADDER = st.builds(
    Ladder, title=st.just("t"), columns=st.lists(COLUMN, max_size=4).map(tuple),
    axis=st.just((Run("ΔH"),)), unit=st.just("kJ"), k=st.just(2.0), overlay=st.booleans(),
)  # fmt: skip


@settings(max_examples=60, deadline=None, derandomize=True)
@given(LADDER)
def test_any_ladder_finds_a_layout_without_overlap(ladder: Ladder) -> None:
    assert collisions(lay_out(ladder)) == []


def test_a_crowded_diagram_grows_instead_of_dropping_texts(crowded: Ladder) -> None:
    geometry = lay_out(crowded, width=500, height=400)
    assert geometry.width > 500
    labels = [plain(box.rich) for box in geometry.texts if box.kind == "label"]
    assert labels == [arrow.label for arrow in arrows_of(crowded)]


def test_the_size_asked_for_is_kept_where_texts_fit(one_step: Ladder) -> None:
    geometry = lay_out(one_step, width=700, height=520)
    assert (geometry.width, round(geometry.height)) == (700, 520)


def test_long_names_do_not_widen_the_canvas_without_bound(hostile: Ladder) -> None:
    geometry = lay_out(hostile)
    assert geometry.width < 1200
    assert geometry.height < 1500


def test_a_shortened_text_keeps_its_whole(
    make_ladder: Callable[..., Ladder], make_chain: Callable[..., Column]
) -> None:
    name = "a" + "-very" * 100 + "-long-name"
    geometry = lay_out(make_ladder(make_chain("A", [-10.0], title=name)))
    heading = next(box for box in geometry.texts if box.kind == "heading")
    assert "…" in plain(heading.rich)
    assert heading.full == name


def test_a_heat_that_is_not_entered_leaves_a_gap_and_the_chain_goes_on_from_its_stated_level(marks: Ladder) -> None:
    geometry = lay_out(marks)
    gap, following = geometry.arrows[1], geometry.arrows[2]
    assert not gap.entered
    assert gap.whisker is None
    assert following.y0 == geometry.scale.y(-100.0)


def test_carriers_join_heads_to_tails_at_the_level(one_step: Ladder, make_chain: Callable[..., Column]) -> None:
    ladder = dataclasses.replace(one_step, columns=(make_chain("A", [-50.0, 20.0]),))
    geometry = lay_out(ladder)
    first, second = geometry.arrows
    joins = [line for line in geometry.carriers if line.x0 <= first.x and line.x1 >= second.x]
    assert [line.y0 for line in joins] == [first.y1]


def test_the_direct_reaction_shares_the_levels_of_the_chain(marks: Ladder) -> None:
    geometry = lay_out(marks)
    first, last, direct = geometry.arrows[0], geometry.arrows[5], geometry.arrows[6]
    for x, y in ((first.x, direct.y0), (last.x, direct.y1)):
        assert [line for line in geometry.carriers if line.x0 <= x and direct.x <= line.x1 and line.y0 == y]


def test_no_level_is_drawn_twice(marks: Ladder) -> None:
    for one, other in combinations(lay_out(marks).carriers, 2):
        assert one.y0 != other.y0 or one.x1 < other.x0 or other.x1 < one.x0


def test_overlaid_columns_start_in_the_same_region(overlaid: Ladder) -> None:
    geometry = lay_out(overlaid)
    firsts = [next(arrow.x for arrow in geometry.arrows if arrow.series == series) for series in range(3)]
    second = next(arrow.x for arrow in geometry.arrows if arrow.label == "A2")
    assert max(firsts) < second
    assert len(geometry.keys) == 3


def test_every_diagram_with_a_whisker_names_its_coverage_factor(one_step: Ladder) -> None:
    notes = " ".join(plain(box.rich) for box in lay_out(one_step).texts if box.kind == "note")
    assert "k = 2" in notes


@pytest.mark.parametrize("level", [math.nan, math.inf])
def test_a_level_that_is_not_finite_is_refused(level: float, make_ladder: Callable[..., Ladder]) -> None:
    with pytest.raises(ValueError, match="not a finite number"):
        lay_out(make_ladder(Column("A", (Arrow("A1", "", 0.0, level, None),))))


@pytest.mark.parametrize("heat", [1e-9, 1.0, 1e12])
def test_axis_labels_fit_left_of_the_axis_at_any_magnitude(heat: float, make_ladder: Callable[..., Ladder]) -> None:
    geometry = lay_out(make_ladder(Column("A", (Arrow("A1", "x", 0.0, -heat, None),))))
    assert len(geometry.axis.ticks) >= 3
    assert collisions(geometry) == []

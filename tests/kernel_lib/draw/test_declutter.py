from __future__ import annotations

import pytest

from routeheat.draw.declutter import Rect, Segment, Space, along, beside, crosses

PAGE = Rect(0, 0, 400, 300)
EVERYWHERE = (0.0, 400.0)


@pytest.mark.parametrize(
    ("segment", "hit"),
    [
        (Segment(0, 5, 20, 5), True),
        (Segment(0, 15, 20, 15), False),
        (Segment(0, 0, 9, 9), True),
        (Segment(0, 12, 12, 14), False),
        (Segment(5, 5, 6, 6), True),
    ],
)
def test_crosses(segment: Segment, hit: bool) -> None:
    assert crosses(segment, Rect(2, 2, 10, 10)) is hit


def test_a_free_text_stands_right_of_the_middle_without_a_leader() -> None:
    spot = beside(Space(PAGE), 100, 50, 150, 60, 20, reach=60, within=EVERYWHERE)
    assert spot is not None
    assert spot.rect == Rect(108, 90, 168, 110)
    assert spot.leader is None


def test_an_occupied_place_is_left_for_the_nearest_free_one() -> None:
    space = Space(PAGE)
    space.occupy(Rect(105, 92, 300, 96))
    spot = beside(space, 100, 50, 150, 60, 20, reach=60, within=EVERYWHERE)
    assert spot is not None
    assert not spot.rect.overlaps(Rect(105, 92, 300, 96))
    assert spot.rect.x0 == 108
    assert 50 <= spot.rect.y0 < spot.rect.y1 <= 150


def test_a_text_far_from_its_arrow_gets_a_leader_that_ends_at_both() -> None:
    space = Space(PAGE)
    space.occupy(Rect(0, 70, 400, 98))
    space.occupy(Rect(0, 100.5, 400, 130), thin=True)
    spot = beside(space, 100, 99, 100, 60, 20, reach=200, within=EVERYWHERE)
    assert spot is not None
    assert spot.leader is not None
    assert spot.leader.y0 == pytest.approx(104.5)
    assert spot.leader.y1 == pytest.approx(spot.rect.y0 - 1)


def test_no_place_within_reach_is_said() -> None:
    space = Space(PAGE)
    space.occupy(PAGE)
    assert beside(space, 100, 50, 150, 60, 20, reach=60, within=EVERYWHERE) is None


def test_a_level_name_stands_over_its_line_or_else_under_it() -> None:
    space = Space(PAGE)
    over = along(space, 50, 150, 100, 60, 16, above=True, at_end=False, reach=60)
    assert over is not None
    assert over.rect == Rect(50, 81, 110, 97)
    space.occupy(Rect(0, 0, 400, 99))
    under = along(space, 50, 150, 100, 60, 16, above=True, at_end=False, reach=60)
    assert under is not None
    assert under.rect.y0 == 103

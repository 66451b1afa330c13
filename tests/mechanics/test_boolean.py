"""Outlines put together: overlaps, cuts and distances, against areas by hand and sums that must hold."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.mechanics.boolean import cut, distance, overlap, separate_pieces, share_outside
from calcgen.mechanics.outline import Outline, OutlineError
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import circle, rectangle, tube


def box(b: float, h: float, x: float = 0.0, y: float = 0.0, turned: float = 0.0) -> Outline:
    return rectangle(b=b, h=h).placed(x, y, turned=turned).outline


def disc(d: float, x: float = 0.0, y: float = 0.0) -> Outline:
    return circle(d=d).placed(x, y).outline


def area(*parts: Outline) -> float:
    return section_properties(*parts).area if parts else 0.0


@pytest.mark.parametrize(
    ("first", "second", "expected"),
    [  # area of the overlap by hand
        (box(2, 2), box(2, 2, 1.5, 0.5), 0.5 * 1.5),
        (box(2, 2), box(1, 1), 1.0),
        (box(2, 2), box(2, 2, 2, 0), 0.0),  # a common edge
        (box(2, 2), box(2, 2, 2, 2), 0.0),  # a common corner
        (box(2, 2), box(2, 2, 2 - 1e-10, 0), 0.0),  # nearer to touching than drawings are
        (box(2, 2), box(1, 1, 5, 5), 0.0),
        (tube(d=4, t=0.5).outline, disc(3), 0.0),  # a core fills its tube
        (box(2, 2), box(2, 2, turned=math.pi / 4), 8 * (math.sqrt(2) - 1)),  # a regular octagon
    ],
)
def test_overlap(first: Outline, second: Outline, expected: float) -> None:
    for a, b in ((first, second), (second, first)):
        found = overlap([a], [b])
        assert (found.area if found else 0.0) == pytest.approx(expected, rel=1e-9)


def test_overlap_tells_where() -> None:
    found = overlap([box(2, 2)], [box(2, 2, 1.5, 0.5)])
    assert found is not None
    assert found.bounds.middle == pytest.approx((0.75, 0.25))
    assert (found.bounds.width, found.bounds.height) == pytest.approx((0.5, 1.5))


@pytest.mark.parametrize(
    ("part", "hole", "pieces", "expected"),
    [
        (box(4, 2), disc(1), 1, 8 - math.pi / 4),
        (box(4, 2), box(1, 4), 2, 6.0),
        (box(4, 2), box(1, 1, 2, 0), 1, 7.5),  # a notch in the edge
        (box(4, 2), box(1, 1, 1.5, 0), 1, 7.0),  # along an edge
        (box(4, 2), box(4, 2), 0, 0.0),
        (box(4, 2), box(9, 9), 0, 0.0),
        (box(4, 2), box(1, 1, 9, 0), 1, 8.0),
        (box(4, 2), tube(d=1.5, t=0.25).outline, 2, 8 - math.pi / 4 * (1.5**2 - 1)),  # leaves its core
    ],
)
def test_cut(part: Outline, hole: Outline, pieces: int, expected: float) -> None:
    left = cut([part], [hole])
    assert len(left) == pieces
    assert area(*left) == pytest.approx(expected, rel=1e-9)


def test_a_hole_apart_leaves_the_part_as_it_is() -> None:
    part = box(4, 2)
    assert cut([part], [box(1, 1, 9, 0)]) == (part,)


def test_a_hole_that_touches_the_edge_at_a_point_is_refused() -> None:
    with pytest.raises(OutlineError):
        cut([box(4, 2)], [box(1, 1, 0, 1 - math.sqrt(0.5), turned=math.pi / 4)])


def test_share_outside_and_distance() -> None:
    assert share_outside([box(2, 1, 2, 0)], [box(4, 2)]) == pytest.approx(0.5)
    assert share_outside([box(1, 1)], [box(4, 2)]) == 0.0
    assert share_outside([box(1, 1)], []) == 1.0
    assert distance([box(2, 2)], [box(2, 2, 5, 6)]) == pytest.approx(math.hypot(3, 4))


def test_separate_pieces() -> None:
    assert separate_pieces([box(2, 2)]) == 1
    assert separate_pieces([box(2, 2), box(2, 2, 2, 0)]) == 1
    assert separate_pieces([box(2, 2), box(2, 2, 5, 0), box(3, 1, 3.0, 9)]) == 3
    assert separate_pieces([box(2, 2), box(2, 2, 5, 0), box(7, 1, 2.5, 1.5)]) == 1


@settings(max_examples=50, deadline=None)
@given(
    b=st.floats(0.5, 3),
    h=st.floats(0.5, 3),
    x=st.floats(-2, 2),
    y=st.floats(-2, 2),
    turned=st.floats(0.01, 1.5),
)
def test_what_is_left_and_what_is_cut_make_the_whole(
    b: float, h: float, x: float, y: float, turned: float
) -> None:
    part, hole = box(4, 2), box(b, h, x, y, turned)
    found = overlap([part], [hole])
    cut_away = found.area if found else 0.0
    try:
        left = cut([part], [hole])
    except OutlineError:  # a corner of the hole on an edge of the part
        return
    assert area(*left) + cut_away == pytest.approx(8.0, rel=1e-8)

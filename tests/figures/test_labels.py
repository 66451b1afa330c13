"""Widths and places of labels against matplotlib, shapely and scipy."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from matplotlib.font_manager import FontProperties
from matplotlib.textpath import TextPath
from scipy.optimize import isotonic_regression
from shapely.geometry import LineString, box

from calcgen.figures.labels import Box, Obstacles, spread, text_width
from calcgen.figures.picture import Label, thin, wrap

place = st.floats(-100, 100, allow_subnormal=False)
size = st.floats(1, 50)


@pytest.mark.parametrize("text", ["−104.6 MPa", "45.0 kN·m at 3.00 m", "neutral axis", "σ_vM = 12 N/mm²"])
@pytest.mark.parametrize("bold", [False, True])
def test_the_width_of_text_is_that_of_its_glyphs(text: str, bold: bool) -> None:
    prop = FontProperties(family="DejaVu Sans", weight="bold" if bold else "normal")
    drawn = TextPath((0, 0), text, size=11, prop=prop).get_extents()
    # the glyphs lie inside their advances: the bearings at both ends, and kerning, are all that differs
    assert drawn.width <= text_width(text, 11, bold=bold) <= drawn.width + 0.35 * 11


@given(st.tuples(place, size, place, size), st.tuples(place, place, place, place))
def test_a_segment_meets_a_box_as_shapely_has_it(
    sides: tuple[float, float, float, float], ends: tuple[float, float, float, float]
) -> None:
    left, breadth, top, height = sides
    ours = Box(left, top, left + breadth, top + height)
    line = LineString([ends[:2], ends[2:]])
    theirs = box(ours.left, ours.top, ours.right, ours.bottom)
    if abs(line.distance(theirs.boundary)) > 1e-9 or theirs.buffer(-1e-6).intersects(line):
        assert ours.crosses(np.array([ends[:2]]), np.array([ends[2:]])) == theirs.intersects(line)


@given(st.lists(st.tuples(st.floats(0, 300), st.floats(1, 40)), min_size=1, max_size=12))
def test_labels_spread_side_by_side_in_their_order_and_in_bounds(items: list[tuple[float, float]]) -> None:
    wanted, widths = sorted(x for x, _ in items), [w for _, w in items]
    placed = spread(wanted, widths, 0, 300)
    if sum(widths) > 300:
        assert placed is None
        return
    assert placed is not None
    starts = [x - w / 2 for x, w in zip(placed, widths, strict=True)]
    ends = [x + w / 2 for x, w in zip(placed, widths, strict=True)]
    assert starts[0] >= -1e-9
    assert ends[-1] <= 300 + 1e-9
    assert all(a <= b + 1e-9 for a, b in zip(ends, starts[1:], strict=False))


@given(st.lists(st.floats(0, 300), min_size=1, max_size=12))
def test_spread_moves_labels_as_little_as_least_squares_allow(places: list[float]) -> None:
    wanted, breadth = sorted(places), 20.0
    placed = spread(wanted, [breadth] * len(wanted), -1e4, 1e4)
    assert placed is not None
    offsets = breadth * np.arange(len(wanted))
    best = isotonic_regression(np.array(wanted) - offsets).x + offsets
    np.testing.assert_allclose(placed, best, atol=1e-9)


def test_what_is_placed_is_in_the_way_of_what_comes_next() -> None:
    obstacles = Obstacles(0, 100)
    label = Label(50, 20, "first")
    assert obstacles.clear(label.box)
    obstacles.boxes.append(label.box)
    assert not obstacles.clear(label.moved(5, 0).box)
    assert obstacles.clear(label.moved(0, 30).box)
    obstacles.add_line([(0, 45), (100, 45)])
    assert not obstacles.clear(label.moved(0, 30).box)
    assert not obstacles.clear(label.moved(60, 60).box)


def test_thinning_keeps_corners_and_jumps_and_drops_points_on_lines() -> None:
    points = [(0, 0), (1, 1), (2, 2), (2, -5), (3, -5), (4, -5)]
    assert thin(points).tolist() == [[0, 0], [2, 2], [2, -5], [4, -5]]


def test_wrapped_lines_are_no_wider_than_asked_and_lose_no_word() -> None:
    text = "Cut face of the part towards the start: tension leaves it, compression enters it."
    lines = wrap(text, 10, 160)
    assert " ".join(lines) == text
    assert max(text_width(line, 10) for line in lines) <= 160

"""What an outline accepts, what it refuses, and how it moves."""

import math
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import Polygon

from calcgen.mechanics.outline import Outline, OutlineError, outline
from tests.mechanics.strategies import outlines, star

SQUARE = [(0, 0), (1, 0), (1, 1), (0, 1)]
INNER = [(0.2, 0.2), (0.4, 0.2), (0.4, 0.4), (0.2, 0.4)]


def shapely_of(part: Outline) -> Polygon:
    return Polygon(part.exterior, part.holes)


def test_rings_are_oriented_and_read_only() -> None:
    for exterior in (SQUARE, SQUARE[::-1]):
        for hole in (INNER, INNER[::-1]):
            made = outline(exterior, [hole])
            assert Polygon(made.exterior).exterior.is_ccw
            assert not Polygon(made.holes[0]).exterior.is_ccw
            with pytest.raises(ValueError, match="read-only"):
                made.exterior[0, 0] = 9.0


def test_repeated_corners_count_once() -> None:
    assert len(outline([(0, 0), (1, 0), (1, 0), (1, 1), (0, 0)]).exterior) == 3


REFUSED: list[tuple[str, Any, list[Any], str, int, tuple[int, ...]]] = [
    ("two corners", [(0, 0), (1, 0)], [], "three corners", 0, ()),
    ("three corners, two places", [(0, 0), (1, 0), (1, 0)], [], "three corners", 0, ()),
    ("a line", [(0, 0), (1, 0), (2, 0)], [], "no area", 0, ()),
    ("not a number", [(0, 0), (1, math.nan), (1, 1)], [], "not finite", 0, (1,)),
    ("bow tie", [(0, 0), (1, 1), (1, 0), (0, 2)], [], "crosses or touches itself", 0, (0, 2)),
    (
        "corner on an edge",
        [(0, 0), (2, 0), (2, 2), (1, 0), (0, 2)],
        [],
        "crosses or touches itself",
        0,
        (0, 2),
    ),
    ("spike", [(0, 0), (1, 0), (1, 1), (1, 2), (1, 1.5), (0, 1)], [], "folds back", 0, (3,)),
    ("slit", [(0, 0), (2, 0), (2, 2), (1, 2), (1, 1), (1, 2), (0, 2)], [], "folds back", 0, (4,)),
    (
        "hole crosses",
        SQUARE,
        [[(0.5, 0.5), (1.5, 0.5), (0.5, 0.7)]],
        "crosses or touches the outer ring",
        1,
        (0,),
    ),
    (
        "hole touches",
        SQUARE,
        [[(0.5, 0.5), (1.0, 0.5), (0.5, 0.7)]],
        "crosses or touches the outer ring",
        1,
        (0,),
    ),
    ("hole outside", SQUARE, [[(2, 2), (3, 2), (3, 3)]], "outside", 1, ()),
    (
        "hole in a hole",
        SQUARE,
        [INNER, [(0.3, 0.3), (0.35, 0.3), (0.35, 0.35)]],
        "inside another hole",
        2,
        (),
    ),
    ("hole around it", INNER, [SQUARE], "outside", 1, ()),
    ("same hole twice", SQUARE, [INNER, INNER], "crosses or touches another hole", 2, (0,)),
]


@pytest.mark.parametrize(
    ("exterior", "holes", "reason", "ring", "vertices"),
    [case[1:] for case in REFUSED],
    ids=[case[0] for case in REFUSED],
)
def test_rings_that_bound_no_section_are_refused(
    exterior: Any, holes: list[Any], reason: str, ring: int, vertices: tuple[int, ...]
) -> None:
    with pytest.raises(OutlineError, match=reason) as error:
        outline(exterior, holes)
    assert (error.value.ring, error.value.vertices) == (ring, vertices)


@given(st.lists(st.tuples(st.integers(0, 6), st.integers(0, 6)), min_size=3, max_size=8))
@settings(max_examples=300, deadline=None)
def test_refuses_exactly_what_is_not_simple(corners: list[tuple[int, int]]) -> None:
    """Shapely as the oracle; on a grid of 7 × 7 crossings, contacts and overlaps are frequent."""
    distinct = [p for i, p in enumerate(corners) if p != corners[i - 1]]
    simple = len(distinct) > 2 and Polygon(distinct).is_valid and Polygon(distinct).area > 0.0
    try:
        outline(corners)
    except OutlineError:
        assert not simple
    else:
        assert simple


@given(outlines(), st.floats(-7.0, 7.0), st.floats(-10.0, 10.0))
@settings(max_examples=40, deadline=None)
def test_moves_keep_the_area_and_what_they_turn_about(part: Outline, angle: float, shift: float) -> None:
    area = shapely_of(part).area
    for image in (part.moved(shift, -shift), part.mirrored(), part.turned(angle)):
        assert shapely_of(image).area == pytest.approx(area, rel=1e-10)
        assert Polygon(image.exterior).exterior.is_ccw
    np.testing.assert_allclose(part.mirrored().bounds.middle, part.bounds.middle, atol=1e-12)
    np.testing.assert_allclose(
        part.turned(angle).turned(-angle).placed(*part.bounds.middle).exterior, part.exterior, atol=1e-12
    )
    np.testing.assert_allclose(part.placed(shift, 1.0).bounds.middle, (shift, 1.0), atol=1e-12)


def test_a_turn_is_counter_clockwise_and_exact_at_quarters() -> None:
    wide = outline([(-2, -1), (2, -1), (2, 1), (-1, 1)])  # cut off at the top left
    turned = wide.turned(0.5 * math.pi)
    assert (turned.bounds.width, turned.bounds.height) == (2.0, 4.0)
    cut = turned.exterior[np.argmin(turned.exterior @ (1.0, 1.0))]
    assert cut.tolist() == [-1.0, -1.0]  # the corner at the upper left went to the lower left
    assert wide.mirrored().exterior[:, 0].min() == -2.0


@pytest.mark.parametrize("corners", [4_000, 20_000])
def test_thousands_of_corners_are_checked_and_a_late_crossing_found(corners: int) -> None:
    ring = star([1.0 + 0.3 * math.sin(50.0 * k / corners * 2.0 * math.pi) for k in range(corners)], 0.2, 0.0)
    assert len(outline(ring).exterior) == corners
    ring[[corners - 3, corners - 2]] = ring[[corners - 2, corners - 3]]
    with pytest.raises(OutlineError, match="crosses") as error:
        outline(ring)
    assert all(vertex >= corners - 5 for vertex in error.value.vertices)


@pytest.mark.parametrize(
    ("point", "inside"),
    [
        ((0.5, 0.5), False),
        ((0.1, 0.5), True),
        ((0.0, 0.0), True),
        ((1.0, 0.3), True),
        ((1.1, 0.3), False),
        ((0.25, 0.4), True),
    ],
)
def test_contains(point: tuple[float, float], inside: bool) -> None:
    hole = [(0.25, 0.25), (0.75, 0.25), (0.75, 0.75), (0.25, 0.75)]
    assert outline([(0.0, 0.0), (1.0, 0.0), (1.0, 1.0), (0.0, 1.0)], [hole]).contains(point) is inside

"""Each shape against closed forms; what its sizes must satisfy; marks; placing."""

import math
from collections.abc import Callable, Mapping
from itertools import pairwise
from typing import Any

import numpy as np
import pytest
import shapely

from calcgen.mechanics.arrays import Point
from calcgen.mechanics.outline import OutlineError
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import (
    SHAPES,
    Shape,
    ShapeError,
    angle,
    box,
    canonical,
    channel,
    circle,
    ellipse,
    form_for,
    i_shape,
    polygon,
    rectangle,
    strip,
    tee,
    trapezium,
    tube,
    unequal_i_shape,
    zed,
)

PI = math.pi
FILLET = 1.0 - PI / 4.0  # area between a quarter circle of radius 1 and its tangents

# shape, area and second moment about the horizontal centroidal axis in closed form (elementary geometry)
CLOSED_FORMS: list[tuple[str, Shape, float, float]] = [
    ("rectangle", rectangle(b=0.2, h=0.3), 0.06, 0.2 * 0.3**3 / 12),
    ("circle", circle(d=0.4), PI * 0.04, PI * 0.4**4 / 64),
    ("ellipse", ellipse(b=0.2, h=0.6), PI * 0.03, PI * 0.2 * 0.6**3 / 64),
    ("tube", tube(d=0.4, t=0.05), PI * (0.04 - 0.0225), PI * (0.4**4 - 0.3**4) / 64),
    ("thin tube", tube(d=0.4, t=0.001), PI * 0.399 * 0.001, PI * (0.4**4 - 0.398**4) / 64),
    ("box", box(b=0.1, h=0.2, t=0.01), 0.02 - 0.08 * 0.18, (0.1 * 0.2**3 - 0.08 * 0.18**3) / 12),
    ("i_shape", i_shape(h=0.3, b=0.2, t_w=0.01, t_f=0.02), 0.0106, (0.2 * 0.3**3 - 0.19 * 0.26**3) / 12),
    ("channel", channel(h=0.3, b=0.2, t_w=0.01, t_f=0.02), 0.0106, (0.2 * 0.3**3 - 0.19 * 0.26**3) / 12),
    ("zed", zed(h=0.2, b=0.1, t=0.01), 0.0038, (0.1 * 0.2**3 - 0.09 * 0.18**3) / 12),
    ("trapezium", trapezium(b_t=0.1, b_b=0.2, h=0.3), 0.045, 0.3**3 * (0.04 + 4 * 0.02 + 0.01) / (36 * 0.3)),
]


@pytest.mark.parametrize(
    ("shape", "area", "I_h"), [c[1:] for c in CLOSED_FORMS], ids=[c[0] for c in CLOSED_FORMS]
)
def test_closed_forms(shape: Shape, area: float, I_h: float) -> None:
    """Areas are exact, and second moments but for 1e-6 where arcs are many short edges."""
    found = section_properties(shape.outline)
    assert found.area == pytest.approx(area, rel=1e-12)
    assert found.I_h == pytest.approx(I_h, rel=1e-6)
    assert shape.outline.bounds.middle == pytest.approx((0.0, 0.0), abs=1e-15)


AREAS_WITH_RADII: list[tuple[str, Shape, float]] = [
    (
        "i_shape",
        i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015),
        2 * 0.15 * 0.0107 + (0.3 - 0.0214) * 0.0071 + 4 * FILLET * 0.015**2,
    ),
    (
        "unequal",
        unequal_i_shape(h=0.3, b_t=0.1, t_t=0.02, b_b=0.2, t_b=0.01, t_w=0.008, r=0.01),
        0.002 + 0.002 + 0.27 * 0.008 + 4 * FILLET * 1e-4,
    ),
    (
        "tee",
        tee(h=0.15, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015),
        0.15 * 0.0107 + (0.15 - 0.0107) * 0.0071 + 2 * FILLET * 0.015**2,
    ),
    (
        "channel",
        channel(h=0.2, b=0.08, t_w=0.006, t_f=0.01, r=0.012, r_toe=0.004),
        2 * 0.0008 + 0.18 * 0.006 + 2 * FILLET * (0.012**2 - 0.004**2),
    ),
    (
        "angle",
        angle(h=0.15, b=0.1, t=0.01, r_1=0.012, r_2=0.006),
        0.0024 + FILLET * (0.012**2 - 2 * 0.006**2),
    ),
    ("box", box(b=0.1, h=0.2, t=0.01, r_o=0.02), 0.02 - 0.0144 - 4 * FILLET * (0.02**2 - 0.01**2)),
    ("fully rounded", box(b=0.2, h=0.2, t=0.05, r_o=0.1), PI * (0.01 - 0.0025)),
    ("toe radius uses the whole edge", angle(h=0.1, b=0.1, t=0.01, r_2=0.01), 0.0019 - 2 * FILLET * 1e-4),
    # a taper adds and takes the same on either side of where t_f stands, here the middle of the projection
    (
        "steep channel",
        channel(h=0.25, b=0.08, t_w=0.01, t_f=0.012, slope=1 / 6),
        0.25 * 0.01 + 2 * 0.07 * 0.012,
    ),
    (
        "deep European channel",
        channel(h=0.4, b=0.11, t_w=0.014, t_f=0.018, slope=0.05),
        0.4 * 0.014 + 2 * 0.096 * 0.018,
    ),
    ("steep I", i_shape(h=0.25, b=0.12, t_w=0.01, t_f=0.012, slope=1 / 6), 0.25 * 0.01 + 4 * 0.055 * 0.012),
    # at b/2 the middle of the projection is t_w/2 further out and 0.08 t_w/2 thinner
    (
        "shallow European channel",
        channel(h=0.2, b=0.08, t_w=0.01, t_f=0.012, slope=0.08),
        0.2 * 0.01 + 2 * 0.07 * (0.012 - 0.08 * 0.005),
    ),
]


@pytest.mark.parametrize(
    ("shape", "area"), [c[1:] for c in AREAS_WITH_RADII], ids=[c[0] for c in AREAS_WITH_RADII]
)
def test_radii_and_tapers_enter_the_area_exactly(shape: Shape, area: float) -> None:
    assert section_properties(shape.outline).area == pytest.approx(area, rel=1e-12)


def test_a_circle_reaches_its_diameter_and_no_further_than_a_hair() -> None:
    disc = circle(d=2.0)
    assert (disc.outline.bounds.width, disc.outline.bounds.height) == (2.0, 2.0)
    assert np.hypot(*disc.outline.exterior.T).max() < 1.0 + 2e-5


SIZES: dict[str, float] = {"h": 0.3, "b": 0.15, "t_w": 0.007, "t_f": 0.01}
REFUSED: list[tuple[Callable[..., Shape], Mapping[str, float], str, str]] = [
    (rectangle, {"b": 0.0, "h": 1.0}, "b", "positive"),
    (rectangle, {"b": 1.0, "h": -1.0}, "h", "positive"),
    (circle, {"d": math.nan}, "d", "positive"),
    (circle, {"d": math.inf}, "d", "positive"),
    (tube, {"d": 0.1, "t": 0.05}, "t", "less than d/2"),
    (box, {"b": 0.1, "h": 0.2, "t": 0.05}, "t", "less than b/2"),
    (box, {"b": 0.2, "h": 0.1, "t": 0.05}, "t", "less than h/2"),
    (box, {"b": 0.1, "h": 0.2, "t": 0.01, "r_o": 0.06}, "r_o", "half the smaller"),
    (box, {"b": 0.1, "h": 0.2, "t": 0.01, "r_i": 0.05}, "r_i", "inside the walls"),
    (box, {"b": 0.1, "h": 0.2, "t": 0.001, "r_o": 0.05, "r_i": 0.0}, "r_i", "no wall at the corner"),
    (i_shape, SIZES | {"t_w": 0.15}, "t_w", "less than b"),
    (i_shape, SIZES | {"t_f": 0.15}, "t_f", "less than h/2"),
    (i_shape, SIZES | {"r": -0.01}, "r", "not be negative"),
    (i_shape, SIZES | {"r": 0.08}, "r", "does not fit"),
    (i_shape, SIZES | {"slope": 0.14, "t_f": 0.005}, "slope", "tip"),
    (i_shape, SIZES | {"slope": 0.3, "t_f": 0.14}, "slope", "no web"),
    (
        unequal_i_shape,
        {"h": 0.1, "b_t": 0.1, "t_t": 0.05, "b_b": 0.1, "t_b": 0.05, "t_w": 0.01},
        "t_t",
        "leave a web",
    ),
    (
        unequal_i_shape,
        {"h": 0.2, "b_t": 0.1, "t_t": 0.05, "b_b": 0.02, "t_b": 0.05, "t_w": 0.02},
        "t_w",
        "both flange widths",
    ),
    (channel, SIZES | {"r": 0.2}, "r", "does not fit"),
    (channel, SIZES | {"r_toe": 0.011}, "r_toe", "does not fit"),
    (tee, {"h": 0.1, "b": 0.1, "t_w": 0.01, "t_f": 0.1}, "t_f", "less than h"),
    (angle, {"h": 0.1, "b": 0.05, "t": 0.05}, "t", "both legs"),
    (zed, {"h": 0.1, "b": 0.05, "t": 0.05}, "t", "less than b"),
    (trapezium, {"b_t": 0.0, "b_b": 0.1, "h": 0.1}, "b_t", "positive"),
    (rectangle, {"b": 1e-20, "h": 1.0}, "b", "makes an outline that"),
]


@pytest.mark.parametrize(("build", "sizes", "parameter", "reason"), REFUSED)
def test_sizes_that_make_no_shape_are_refused(
    build: Callable[..., Shape], sizes: Mapping[str, float], parameter: str, reason: str
) -> None:
    with pytest.raises(ShapeError, match=reason) as error:
        build(**sizes)
    assert error.value.parameter == parameter
    assert error.value.value == pytest.approx(sizes.get(parameter, error.value.value), nan_ok=True)


def test_a_polygon_keeps_its_coordinates() -> None:
    triangle = polygon(points=[(1.0, 1.0), (1.0, 4.0), (3.0, 1.0)])
    found = section_properties(triangle.outline)
    assert (found.x_bar, found.y_bar) == pytest.approx((5 / 3, 2.0))
    assert triangle.dimensions == {"b": 2.0, "h": 3.0}
    with pytest.raises(OutlineError):
        polygon(points=[(0.0, 0.0), (1.0, 1.0), (1.0, 0.0), (0.0, 2.0)])


LIPPED: list[Point] = [(0.06, 0.02), (0.06, 0.0), (0.0, 0.0), (0.0, 0.15), (0.06, 0.15), (0.06, 0.13)]
HAT: list[Point] = [(-0.1, 0.0), (-0.05, 0.0), (-0.03, 0.08), (0.03, 0.08), (0.05, 0.0), (0.1, 0.0)]
CLOSED: list[Point] = [(0.0, 0.0), (0.1, 0.0), (0.12, 0.08), (0.0, 0.05), (0.0, 0.0)]


@pytest.mark.parametrize("points", [LIPPED, HAT, CLOSED, CLOSED[::-1], LIPPED[::-1], HAT[:2]])
@pytest.mark.parametrize("r", [0.0, 0.003])
def test_a_strip_is_as_large_as_its_centreline_is_long(points: list[Point], r: float) -> None:
    """A bend of θ replaces two tangents (r + t/2) tan(θ/2) by an arc (r + t/2) θ; a mitre keeps them."""
    t = 0.002
    length = sum(math.dist(a, b) for a, b in pairwise(points))
    closed = points[0] == points[-1]
    ring = np.array(points[:-1] if closed else points)
    along = np.diff(np.vstack((ring, ring[:2])) if closed else ring, axis=0)
    heading = np.arctan2(along[:, 1], along[:, 0])
    turns = np.abs((np.diff(heading) + PI) % (2.0 * PI) - PI)
    rho = r + 0.5 * t if r else 0.0
    length -= float(np.sum(rho * (2.0 * np.tan(0.5 * turns) - turns)))
    shape = strip(t=t, r=r, points=points)
    assert section_properties(shape.outline).area == pytest.approx(t * length, rel=1e-9)
    assert len(shape.outline.holes) == (1 if closed else 0)


@pytest.mark.parametrize("points", [LIPPED, HAT, HAT[:3]])
def test_a_strip_without_radius_is_the_mitred_buffer_of_its_centreline(points: list[Point]) -> None:
    """Against shapely; corners stand where the centreline's straight parts meet."""
    found = shapely.Polygon(strip(t=0.004, points=points).outline.exterior)
    buffer = shapely.LineString(points).buffer(0.002, cap_style="flat", join_style="mitre", mitre_limit=100.0)
    assert found.symmetric_difference(buffer).area < 1e-9 * buffer.area


def test_a_strip_with_radius_is_the_buffer_of_its_bent_mid_line() -> None:
    """Against shapely, along the mid-line that the walls follow; both have arcs of short edges."""
    bent = strip(t=0.004, r=0.006, points=LIPPED)
    mid_line = [bent.walls[0].start, *(wall.end for wall in bent.walls)]
    buffer = shapely.LineString(mid_line).buffer(0.002, cap_style="flat", join_style="mitre")
    found = shapely.Polygon(bent.outline.exterior)
    assert found.symmetric_difference(buffer).area < 2e-4 * buffer.area
    assert {wall.t for wall in bent.walls} == {0.004}


def test_a_strip_keeps_its_coordinates_and_has_square_ends() -> None:
    flat = strip(t=0.01, points=[(1.0, 2.0), (1.5, 2.0)])
    box_ = flat.outline.bounds
    assert (box_.left, box_.right, box_.bottom, box_.top) == pytest.approx((1.0, 1.5, 1.995, 2.005))
    assert flat.dimensions == pytest.approx({"t": 0.01, "r": 0.0, "b": 0.5, "h": 0.01})
    assert {mark.symbol for mark in flat.marks} == {"b", "h", "t"}
    slanting = strip(t=0.01, points=[(0.0, 0.0), (1.0, 1.0)])
    assert {mark.symbol for mark in slanting.marks} == {"b", "h"}  # no level or upright part to measure t on


STRIPS_REFUSED: list[tuple[list[Point], float, float, str, str, tuple[int, ...]]] = [
    ([(0.0, 0.0)], 0.01, 0.0, "points", "two points", ()),
    ([], 0.01, 0.0, "points", "two points", ()),
    ([(0.0, 0.0), (0.0, 0.0)], 0.01, 0.0, "points", "repeats", (0, 1)),
    ([(0.0, 0.0), (math.nan, 1.0)], 0.01, 0.0, "points", "not finite", (1,)),
    ([(0.0, 0.0), (1.0, 0.0), (0.0, 0.0)], 0.01, 0.0, "points", "three corners", ()),
    ([(0.0, 0.0), (1.0, 0.0), (0.5, 0.0)], 0.01, 0.0, "points", "folds back", (1,)),
    ([(0.0, 0.0), (1.0, 0.0)], 0.0, 0.0, "t", "positive", ()),
    ([(0.0, 0.0), (1.0, 0.0)], 0.1, -0.1, "r", "negative", ()),
    ([(0.0, 0.0), (1.0, 0.0), (1.0, 0.1), (0.0, 0.1)], 0.01, 0.06, "r", "does not fit", (1, 2)),
    ([(0.0, 0.0), (1.0, 0.0), (1.0, 0.1), (0.0, 0.1)], 0.15, 0.0, "t", "does not fit", (1, 2)),
    ([(0.0, 0.0), (1.0, 0.0), (1.0, 1.0), (0.5, 1.0), (0.5, -1.0)], 0.01, 0.0, "t", "cross", (0, 1, 3, 4)),
    # parallel walls nearer to each other than they are thick
    ([(0.0, 0.0), (1.0, 0.0), (1.0, 0.5), (0.5, 0.5), (0.5, 0.09)], 0.2, 0.0, "t", "cross", (0, 1, 3, 4)),
]


@pytest.mark.parametrize(("points", "t", "r", "parameter", "reason", "concerned"), STRIPS_REFUSED)
def test_strips_that_make_no_section_are_refused(
    points: list[Point], t: float, r: float, parameter: str, reason: str, concerned: tuple[int, ...]
) -> None:
    with pytest.raises(ShapeError, match=reason) as error:
        strip(t=t, r=r, points=points)
    assert (error.value.parameter, error.value.points) == (parameter, concerned)


ALL_SHAPES = (
    [c[1] for c in CLOSED_FORMS]
    + [c[1] for c in AREAS_WITH_RADII]
    + [polygon(points=[(1, 1), (2, 1), (1, 4)])]
    + [strip(t=0.002, r=0.003, points=LIPPED), strip(t=0.002, points=CLOSED)]
)


@pytest.mark.parametrize("shape", [shape for shape in ALL_SHAPES if shape.walls])
@pytest.mark.parametrize("placing", [{}, {"mirrored": True, "x": 3.0}, {"turned": 0.3}])
def test_walls_stay_in_the_middle_of_the_material_wherever_the_shape_is_placed(
    shape: Shape, placing: Mapping[str, Any]
) -> None:
    placed = shape.placed(**placing)
    outline = placed.outline
    assert len(placed.walls) == len(shape.walls)
    for wall in placed.walls[:: max(1, len(placed.walls) // 16)]:
        middle = 0.5 * (np.array(wall.start) + np.array(wall.end))
        along = (np.array(wall.end) - np.array(wall.start)) / math.dist(wall.start, wall.end)
        for side in (-0.48, 0.0, 0.48):
            x, y = (middle + side * wall.t * np.array([-along[1], along[0]])).tolist()
            assert outline.contains((x, y))


def test_solid_shapes_have_no_walls() -> None:
    solid = (
        rectangle(b=0.1, h=0.2),
        circle(d=0.1),
        ellipse(b=0.1, h=0.2),
        trapezium(b_t=0.1, b_b=0.2, h=0.3),
    )
    assert not any(shape.walls for shape in solid)


@pytest.mark.parametrize("shape", ALL_SHAPES)
@pytest.mark.parametrize(
    "placing", [{}, {"mirrored": True}, {"turned": PI / 2}, {"x": 3.0, "y": -2.0, "turned": -PI / 2}]
)
def test_marks_measure_what_they_say_wherever_the_shape_is_placed(
    shape: Shape, placing: Mapping[str, Any]
) -> None:
    placed = shape.placed(**placing) if placing else shape
    box_ = placed.outline.bounds
    assert placed.marks
    for mark in placed.marks:
        assert mark.value == shape.dimensions[mark.symbol]
        assert math.dist(mark.start, mark.end) == pytest.approx(mark.value)
        for x, y in (mark.start, mark.end):
            assert box_.left - 1e-12 <= x <= box_.right + 1e-12
            assert box_.bottom - 1e-12 <= y <= box_.top + 1e-12


def test_placing_mirrors_then_turns_then_places() -> None:
    heel = angle(h=0.2, b=0.1, t=0.01).placed(1.0, 2.0, mirrored=True, turned=PI / 2)
    # mirrored, the heel is bottom right; a quarter turn brings it to the top right, and h lies along x
    assert heel.outline.bounds.middle == pytest.approx((1.0, 2.0))
    assert (heel.outline.bounds.width, heel.outline.bounds.height) == pytest.approx((0.2, 0.1))
    found = section_properties(heel.outline)
    assert found.c_right < found.c_left
    assert found.c_top < found.c_bottom
    # h stood on the left: mirrored on the right, turned on the top; t the other way round
    assert {mark.symbol: mark.side for mark in heel.marks} == {"h": "top", "b": "right", "t": "bottom"}
    assert not angle(h=0.2, b=0.1, t=0.01).placed(turned=0.3).marks


def test_the_table_of_shapes_picks_the_form_by_the_names_given() -> None:
    assert form_for("i_shape", ["h", "b", "t_w", "t_f"]).build is i_shape
    assert form_for("i_shape", ["d", "b_f", "t_w", "t_f", "r"]).build is i_shape
    assert form_for("i_shape", ["h", "b_t", "t_t", "b_b", "t_b", "t_w"]).build is unequal_i_shape
    assert form_for("i_shape", []).build is i_shape
    assert canonical(form_for("circle", ["d"]), "d") == "d"
    assert canonical(form_for("i_shape", ["d"]), "d") == "h"
    assert form_for("strip", []).required == {"t", "points"}
    notes = {p.name: p.note for p in form_for("strip", []).parameters}
    assert notes["r"] == "inside radius of the bends"
    assert form_for("tee", []).required == {"h", "b", "t_w", "t_f"}
    assert {p.name for form in SHAPES["channel"] for p in form.parameters if p.optional} == {
        "r",
        "slope",
        "r_toe",
    }
    assert {p.kind for forms in SHAPES.values() for form in forms for p in form.parameters} == {
        "length",
        "number",
        "points",
    }

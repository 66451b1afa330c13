"""Meshes fill their outlines with triangles of decent shape, whatever the outline."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import Polygon

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import MeshError, Size
from calcgen.mechanics.mesh import Mesh, refined, triangulate
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.shapes import angle, box, i_shape, rectangle, tube
from tests.mechanics.strategies import outlines


def angles(mesh: Mesh) -> FloatArray:
    """Angles of the triangles (m, 3), degrees, from their sides by the law of cosines."""
    corners = mesh.points[mesh.triangles[:, :3]]
    a, b, c = (np.hypot(*(corners[:, (k + 1) % 3] - corners[:, (k + 2) % 3]).T) for k in range(3))
    cosines = [(q * q + r * r - p * p) / (2.0 * q * r) for p, q, r in ((a, b, c), (b, c, a), (c, a, b))]
    found: FloatArray = np.degrees(np.arccos(np.clip(cosines, -1.0, 1.0))).T
    return found


def area(part: Outline) -> float:
    return float(Polygon(part.exterior, part.holes).area)


WALLS = {
    "square": (rectangle(b=1.0, h=1.0).outline, 0.2),
    "strip, 1/100": (rectangle(b=0.01, h=1.0).outline, 0.02),
    "inclined strip, 1/100": (rectangle(b=0.01, h=1.0).outline.turned(0.3), 0.02),
    "I with fillets": (i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01, r=0.015).outline, 0.01),
    "angle with toes": (angle(h=0.1, b=0.1, t=0.01, r_1=0.012, r_2=0.006).outline, 0.01),
    "box, 1/100": (box(b=0.1, h=0.2, t=0.001).outline, 0.002),
    "tube": (tube(d=0.1, t=0.005).outline, 0.01),
    "slit": (outline([(0, 0), (1, 0), (1, 1), (0, 1), (0, 0.501), (0.8, 0.501), (0.8, 0.5), (0, 0.5)]), 0.2),
}


@pytest.mark.parametrize(("part", "size"), WALLS.values(), ids=WALLS.keys())
def test_no_angle_is_small_where_no_corner_is(part: Outline, size: float) -> None:
    mesh = triangulate([part], Size(size))
    assert mesh.area.min() > 0.0
    assert mesh.area.sum() == pytest.approx(area(part), rel=1e-12)
    assert angles(mesh).min() > 24.99


SHARP = {
    "wedge of 3°": [(0.0, 0.0), (1.0, 0.0), (1.0, 0.05)],
    "two wedges": [(0.0, 0.0), (1.0, 0.02), (0.1, 0.1), (0.02, 1.0)],
    "needle of 0.1°": [(0.0, 0.0), (1.0, 0.0), (1.0, 0.002)],
    "notch of 1°": [(0, 0), (1, 0), (1, 1), (0.51, 1), (0.5, 0.4), (0.49, 1), (0, 1)],
}


@pytest.mark.parametrize("corners", SHARP.values(), ids=SHARP.keys())
def test_sharp_corners_end_the_refinement(corners: list[tuple[float, float]]) -> None:
    part = outline(corners)
    mesh = triangulate([part], Size(0.1))
    assert mesh.area.sum() == pytest.approx(area(part), rel=1e-12)
    assert len(mesh.triangles) < 6_000


def test_long_triangles_may_be_thin_where_that_is_asked() -> None:
    """A foil of 1/10,000: by good triangles some 30,000; by long ones a few, which are good at its ends."""
    part = rectangle(b=1.0, h=1e-4).outline
    size = Size(near=part.exterior, at_points=5e-5, thin_beyond=3e-4)
    mesh = triangulate([part], size)
    assert len(mesh.triangles) < 300
    assert mesh.area.sum() == pytest.approx(1e-4, rel=1e-12)
    short = np.ptp(mesh.points[mesh.triangles[:, :3]], axis=1).max(axis=1) < 2e-4
    assert np.count_nonzero(short) > 4
    assert angles(mesh)[short].min() > 24.99
    finer = refined(mesh, np.ones(len(mesh.triangles), dtype=bool), Size(thin_beyond=3e-4))
    assert len(mesh.triangles) < len(finer.triangles) < 10 * len(mesh.triangles)


def test_triangles_may_be_thin_where_walls_are_thinner_than_the_finest() -> None:
    """A neck of 1e-5 beside a hole: good triangles would be 100,000 there."""
    square = rectangle(b=1.0, h=1.0).outline.exterior
    part = outline(square, [[(-0.3, -0.49999), (0.3, -0.49999), (0.3, 0.0), (-0.3, 0.0)]])
    mesh = triangulate([part], Size(0.2, finest=0.005))
    assert len(mesh.triangles) < 2_000
    assert mesh.area.sum() == pytest.approx(area(part), rel=1e-12)
    used = np.unique(mesh.triangles)
    assert len(used) == len(mesh.points)  # no point lies outside


def test_edges_that_cross_are_a_fault() -> None:
    crossed = Outline(np.array([(0.0, 0.0), (2.0, 0.0), (0.5, 1.0), (1.5, 1.0), (-1.0, -0.5)]))
    with pytest.raises(MeshError, match="edges"):
        triangulate([crossed], Size(0.5))


@given(outlines(), st.floats(0.02, 0.3))
@settings(max_examples=30, deadline=None)
def test_triangles_fill_the_outline_and_edges_its_boundary(part: Outline, size: float) -> None:
    mesh = triangulate([part], Size(size))
    assert mesh.area.min() > 0.0
    assert mesh.area.sum() == pytest.approx(area(part), rel=1e-10)
    start, end, middle = (mesh.points[mesh.boundary[:, k]] for k in range(3))
    length = float(np.hypot(*(end - start).T).sum())
    assert length == pytest.approx(Polygon(part.exterior, part.holes).length, rel=1e-10)
    np.testing.assert_allclose(middle, 0.5 * (start + end), rtol=0.0, atol=1e-15 + 1e-15 * abs(middle).max())
    # a triangle lies on the left of each edge, and nothing on its right
    sides = {tuple(pair) for k in range(3) for pair in mesh.triangles[:, [k, (k + 1) % 3]].tolist()}
    assert all((i, j) in sides and (j, i) not in sides for i, j, _ in mesh.boundary.tolist())


def test_triangles_are_small_where_that_is_asked() -> None:
    part = rectangle(b=1.0, h=1.0).outline
    mesh = triangulate([part], Size(0.25, np.array([[0.0, 0.0]]), at_points=0.01))
    place = mesh.points[mesh.triangles[:, :3]].mean(axis=1)
    distance = np.hypot(*place.T)
    assert np.sqrt(mesh.area[distance < 0.02]).max() < 0.02
    assert np.sqrt(mesh.area[distance > 0.4]).max() > 0.06


def test_marked_triangles_are_split_and_pieces_stay_apart() -> None:
    left, right = tube(d=0.2, t=0.02).outline, rectangle(b=0.1, h=0.1).outline.moved(0.5, 0.0)
    mesh = triangulate([left, right], Size(0.05))
    assert mesh.outer.tolist() == [True, False, True]
    marked = mesh.piece == 1
    finer = refined(mesh, marked)
    assert np.count_nonzero(finer.piece == 1) >= 3 * np.count_nonzero(marked)
    assert np.count_nonzero(finer.piece == 0) == np.count_nonzero(mesh.piece == 0)
    assert finer.area.sum() == pytest.approx(area(left) + area(right), rel=1e-12)
    assert finer.outer.tolist() == mesh.outer.tolist()


def test_the_same_outline_gives_the_same_mesh() -> None:
    part = i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01, r=0.015).outline
    first, second = (triangulate([part], Size(0.01)) for _ in range(2))
    assert np.array_equal(first.points, second.points)
    assert np.array_equal(first.triangles, second.triangles)


def test_points_are_located() -> None:
    """Area coordinates give the point back, inside without negative ones; outside the nearest edge serves."""
    mesh = triangulate([angle(h=0.2, b=0.1, t=0.01).outline], Size(0.01))
    generator = np.random.default_rng(3)
    corners = mesh.points[mesh.triangles[:, :3]]
    shares = generator.dirichlet((1.0, 1.0, 1.0), len(corners))
    points = np.einsum("mk,mkd->md", shares, corners)
    triangle, coordinates = mesh.locate(points)
    assert np.array_equal(triangle, np.arange(len(corners)))
    np.testing.assert_allclose(coordinates, shares, atol=1e-9)
    (outside,), (beyond,) = mesh.locate(np.array([[-0.051, 0.0]]))
    assert beyond.min() < 0.0
    assert beyond @ mesh.points[mesh.triangles[outside, :3]] == pytest.approx(np.array([-0.051, 0.0]))
    assert math.isclose(beyond.sum(), 1.0)

"""Section properties against published tables, exact integration, and what shifts, turns and mirrors do."""

import math

import numpy as np
import pytest
import sympy
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from shapely import Polygon, constrained_delaunay_triangles
from shapely import box as box_of

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.section import Inertia, section_properties
from calcgen.mechanics.shapes import angle, box, channel, circle, i_shape, rectangle, tube, zed
from tests.exact.section_cases import CASES, Published, SectionCase
from tests.mechanics.strategies import outlines, star

PUBLISHED = [(case, value) for case in CASES for value in case.published]


@pytest.mark.parametrize(
    ("case", "published"), PUBLISHED, ids=[f"{case.name} {value.symbol}" for case, value in PUBLISHED]
)
def test_published_values(case: SectionCase, published: Published) -> None:
    found = getattr(section_properties(case.shape().outline), published.symbol) / published.unit
    assert found == pytest.approx(published.value, rel=published.tolerance), published.source


def exact_moments(corners: FloatArray) -> dict[tuple[int, int], sympy.Rational]:
    """∫x^p y^q dA of a counter-clockwise ring about the origin, in rational numbers, by Green's theorem.

    With u from 0 to 1 along an edge, ∮ x^(p+1) y^q / (p+1) dy.
    """
    u = sympy.Symbol("u")
    moments = {}
    points = [(sympy.Rational(float(x)), sympy.Rational(float(y))) for x, y in corners]
    for p, q in [(0, 0), (1, 0), (0, 1), (2, 0), (0, 2), (1, 1)]:
        total = sympy.Rational(0)
        for (x0, y0), (x1, y1) in zip(points, points[1:] + points[:1], strict=True):
            x, y = x0 + (x1 - x0) * u, y0 + (y1 - y0) * u
            along = sympy.Poly(x ** (p + 1) * y**q * (y1 - y0) / (p + 1), u)
            total += along.integrate(u).eval(1)
        moments[p, q] = total
    return moments


def test_a_ring_with_a_hole_against_rational_arithmetic() -> None:
    """sympy integrates both rings in rational numbers; the shift to the centroid is exact too."""
    generator = np.random.default_rng(7)
    shift = np.array([0.4, -0.9])
    outer = star(generator.uniform(0.4, 1.0, 9).tolist(), 0.3, 0.2) + shift
    inner = star(generator.uniform(0.4, 1.0, 6).tolist(), 0.09, 0.5) + shift
    whole, void = exact_moments(outer), exact_moments(inner)
    exact = {key: whole[key] - void[key] for key in whole}
    area, x, y = exact[0, 0], exact[1, 0] / exact[0, 0], exact[0, 1] / exact[0, 0]
    found = section_properties(outline(outer, [inner]))
    assert found.area == pytest.approx(float(area), rel=1e-12)
    assert (found.x_bar, found.y_bar) == pytest.approx((float(x), float(y)), rel=1e-12)
    assert found.I_h == pytest.approx(float(exact[0, 2] - area * y * y), rel=1e-12)
    assert found.I_v == pytest.approx(float(exact[2, 0] - area * x * x), rel=1e-12)
    assert found.I_hv == pytest.approx(float(exact[1, 1] - area * x * y), rel=1e-12)


@given(outlines())
@settings(max_examples=50, deadline=None)
def test_area_and_centroid_against_shapely(part: Outline) -> None:
    polygon = Polygon(part.exterior, part.holes)
    found = section_properties(part)
    assert found.area == pytest.approx(polygon.area, rel=1e-10)
    assert (found.x_bar, found.y_bar) == pytest.approx((polygon.centroid.x, polygon.centroid.y), abs=1e-10)


@st.composite
def perforated(draw: st.DrawFn) -> Outline:
    """A star of 0.5 m with up to five star-shaped holes on a circle about its middle."""
    radii = st.lists(st.floats(0.8, 1.0), min_size=9, max_size=20)
    rays = 2.0 * math.pi * np.arange(5) / 5 + draw(st.floats(0.0, 1.0))
    chosen = draw(st.sets(st.integers(0, 4), min_size=1))
    holes = [
        star(draw(radii), 0.05 + 0.05 * draw(st.floats(0.0, 1.0)), 0.0)
        + 0.2 * np.array([math.cos(rays[k]), math.sin(rays[k])])
        for k in sorted(chosen)
    ]
    return outline(star(draw(radii), 0.5, draw(st.floats(0.0, 6.0))), holes).moved(
        draw(st.floats(-2.0, 2.0)), 0.3
    )


@given(perforated())
@settings(max_examples=50, deadline=None)
def test_sections_with_several_holes_against_triangles(part: Outline) -> None:
    """Shapely cuts it into triangles; the midpoints of their sides integrate second degrees exactly."""
    polygon = Polygon(part.exterior, part.holes)
    triangles = np.array(
        [piece.exterior.coords[:3] for piece in constrained_delaunay_triangles(polygon).geoms]
    )
    centroid = np.array([polygon.centroid.x, polygon.centroid.y])
    middles = 0.5 * (triangles + np.roll(triangles, -1, axis=1)) - centroid
    (ax, ay), (bx, by) = (triangles[:, 1] - triangles[:, 0]).T, (triangles[:, 2] - triangles[:, 0]).T
    weights = np.abs(ax * by - bx * ay)[:, None] / 6.0
    x, y = middles[..., 0], middles[..., 1]
    found = section_properties(part)
    assert found.area == pytest.approx(polygon.area, rel=1e-10)
    assert (found.x_bar, found.y_bar) == pytest.approx(centroid.tolist(), abs=1e-10)
    assert found.I_h == pytest.approx(float((weights * y * y).sum()), rel=1e-10)
    assert found.I_v == pytest.approx(float((weights * x * x).sum()), rel=1e-10)
    assert found.I_hv == pytest.approx(float((weights * x * y).sum()), abs=1e-10 * found.I_1)


@given(perforated())
@settings(max_examples=25, deadline=None)
def test_half_area_axes_and_plastic_moduli_against_shapely(part: Outline) -> None:
    """The polygon cut by a box below the axis: half its area, and the moments of both halves."""
    polygon, found = Polygon(part.exterior, part.holes), section_properties(part)
    left, bottom, right, top = polygon.bounds
    for axis, modulus, below, arm in (
        (found.y_p, found.W_pl_h, (left, bottom, right, found.y_p), 1),
        (found.x_p, found.W_pl_v, (left, bottom, found.x_p, top), 0),
    ):
        half = polygon.intersection(box_of(*below))
        other = polygon.difference(box_of(*below))
        assert half.area == pytest.approx(0.5 * polygon.area, rel=1e-10)
        arms = [abs(piece.centroid.coords[0][arm] - axis) for piece in (half, other)]
        assert modulus == pytest.approx(half.area * arms[0] + other.area * arms[1], rel=1e-9)


SYMBOLS = ["area", "I_h", "I_v", "I_1", "I_2", "W_el_h", "W_el_v", "W_pl_h", "W_pl_v", "Q_h", "Q_v"]


@given(outlines(), st.floats(-50.0, 50.0))
@settings(max_examples=40, deadline=None)
def test_a_shift_moves_the_centroid_and_nothing_else(part: Outline, shift: float) -> None:
    here, there = section_properties(part), section_properties(part.moved(shift, -2.0 * shift))
    for symbol in SYMBOLS:
        assert getattr(there, symbol) == pytest.approx(getattr(here, symbol), rel=1e-10), symbol
    assert there.I_hv == pytest.approx(here.I_hv, abs=1e-10 * here.I_1)
    assert (there.x_bar - here.x_bar, there.y_p - here.y_p) == pytest.approx((shift, -2.0 * shift), abs=1e-10)


@given(outlines())
@settings(max_examples=40, deadline=None)
def test_a_mirror_exchanges_left_and_right(part: Outline) -> None:
    here, there = section_properties(part), section_properties(part.mirrored())
    for symbol in SYMBOLS:
        assert getattr(there, symbol) == pytest.approx(getattr(here, symbol), rel=1e-10), symbol
    assert there.I_hv == pytest.approx(-here.I_hv, abs=1e-10 * here.I_1)
    assert (there.c_left, there.c_right) == pytest.approx((here.c_right, here.c_left), rel=1e-10)


@given(outlines(), st.floats(-3.0, 3.0))
@settings(max_examples=40, deadline=None)
def test_a_turn_keeps_the_principal_values_and_turns_their_axes(part: Outline, turn: float) -> None:
    here, there = section_properties(part), section_properties(part.turned(turn))
    assume(here.I_1 > 1.001 * here.I_2)
    assert (there.area, there.I_1, there.I_2) == pytest.approx((here.area, here.I_1, here.I_2), rel=1e-10)
    assert there.I_h + there.I_v == pytest.approx(here.I_h + here.I_v, rel=1e-10)
    assert -0.5 * math.pi < there.alpha <= 0.5 * math.pi
    # the axis is a line: angles agree but for half turns
    assert math.sin(there.alpha - here.alpha - turn) == pytest.approx(0.0, abs=1e-9)


def test_the_stiffer_axis_is_found_where_it_is() -> None:
    upright, lying = rectangle(b=0.1, h=0.2).outline, rectangle(b=0.2, h=0.1).outline
    assert section_properties(upright).alpha == 0.0
    assert section_properties(lying).alpha == 0.5 * math.pi
    assert section_properties(upright.turned(0.3)).alpha == pytest.approx(0.3)
    assert section_properties(upright.turned(-0.3)).alpha == pytest.approx(-0.3)
    for round_ in (circle(d=0.2), rectangle(b=0.1, h=0.1), tube(d=0.2, t=0.01)):
        assert section_properties(round_.outline.turned(0.3)).alpha == 0.0
    # heel bottom left: the legs reach into the 2nd and 4th quadrant, so ∫xy dA is negative; the stiffer
    # axis runs through the heel
    equal = section_properties(angle(h=0.1, b=0.1, t=0.01).outline)
    assert equal.I_hv < 0.0
    assert equal.alpha == pytest.approx(0.25 * math.pi)
    assert section_properties(zed(h=0.2, b=0.1, t=0.01).outline).I_hv < 0.0


def test_a_slender_inclined_plate_keeps_some_digits_of_its_small_second_moment() -> None:
    plate = section_properties(rectangle(b=1e-5, h=1.0).outline.turned(0.7))
    # I_1 is 1e10 times larger, so rounding leaves about six digits
    assert abs(plate.I_2 / (1e-15 / 12) - 1.0) < 1e-5
    assert Inertia(1.0, 0.0, 0.0, 2.0, 2.0, 1.0).I_2 == 1.0


def test_symmetric_sections_have_true_zeros_and_equal_sides() -> None:
    for shape in (
        i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015),
        box(b=0.1, h=0.2, t=0.01, r_o=0.02),
    ):
        found = section_properties(shape.outline)
        assert (found.x_bar, found.y_bar, found.I_hv, found.x_p, found.y_p) == (0.0, 0.0, 0.0, 0.0, 0.0)
        assert found.W_el_h_top == found.W_el_h_bottom == found.W_el_h
        # the half above the centroid gives half the plastic modulus of a doubly symmetric section
        assert found.Q_h == pytest.approx(0.5 * found.W_pl_h, rel=1e-12)
        assert found.Q_v == pytest.approx(0.5 * found.W_pl_v, rel=1e-12)


def test_moduli_belong_to_their_fibres() -> None:
    found = section_properties(channel(h=0.2, b=0.08, t_w=0.006, t_f=0.01).outline)
    assert found.c_left < found.c_right
    assert found.W_el_v == found.W_el_v_right < found.W_el_v_left
    assert found.i_h == pytest.approx(math.sqrt(found.I_h / found.A))
    assert (found.i_1, found.i_2) == pytest.approx((found.i_h, found.i_v))


def test_parts_of_one_section_add_up() -> None:
    """A rectangle cut into two parts has the rectangle's properties."""
    whole = section_properties(rectangle(b=0.1, h=0.3).outline)
    parts = section_properties(
        rectangle(b=0.1, h=0.1).outline.moved(0.0, -0.1), rectangle(b=0.1, h=0.2).outline.moved(0.0, 0.05)
    )
    for symbol in SYMBOLS:
        assert getattr(parts, symbol) == pytest.approx(getattr(whole, symbol), rel=1e-12), symbol

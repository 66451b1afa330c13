"""Elastic stress against published examples, signs, places of extremes, and the neutral axis."""

import math

import numpy as np
import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.section import Inertia, section_properties
from calcgen.mechanics.shapes import Shape, angle, channel, circle, i_shape, polygon, rectangle, tube
from calcgen.mechanics.stress import Forces, StressPlane, elastic_stress
from tests.mechanics.strategies import forces, outlines

MM = 1e-3
MPA = 1e6
BEAM = rectangle(b=0.1, h=0.3)
IPE = i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015)


def stress(shape: Shape | Outline, applied: Forces) -> tuple[Outline, StressPlane]:
    part = shape.outline if isinstance(shape, Shape) else shape
    return part, elastic_stress(section_properties(part), applied)


def test_tee_with_an_offset_flange() -> None:
    """From memory: Megson, Aircraft Structures for Engineering Students, ch. 16; 1500 N·m.

    Tension in the flange, at the top, is a negative M. I_xy is printed as a magnitude; with x right and y up
    it is positive here, as the flange's longer part lies right of the centroid and above it.
    """
    corners = [(0, -80), (8, -80), (8, 0), (84, 0), (84, 8), (-36, 8), (-36, 0), (0, 0)]
    part, plane = stress(outline(np.array(corners) * MM), Forces(M=-1500.0))
    found = section_properties(part)
    assert found.c_top == pytest.approx(21.6 * MM, rel=1.1e-3)
    assert found.c_left == pytest.approx(52.0 * MM, rel=1.06e-3)
    assert found.I_h == pytest.approx(1.09e6 * MM**4, rel=5e-4)
    assert found.I_v == pytest.approx(1.31e6 * MM**4, rel=9.41e-4)
    assert found.I_hv == pytest.approx(0.34e6 * MM**4, rel=7.65e-3)
    most, least = plane.extremes(part)
    assert least.value == pytest.approx(-96 * MPA, rel=5.73e-3)
    assert abs(least.value) > most.value
    assert (least.x, least.y) == pytest.approx((8 * MM, -80 * MM))


def test_channel_under_an_inclined_load() -> None:
    """From memory: Boresi & Schmidt, Advanced Mechanics of Materials, Example 7.2; I given, principal axes.

    M = -36 kN·m has the components M_x = M sin φ and M_y = -M cos φ there, with σ = M_x y/I_x - M_y x/I_y:
    tension at the top for M_x > 0 and on the left for M_y > 0. Here M is positive with tension at the bottom,
    M_lat on the right, so M = -M_x and M_lat = -M_y.
    """
    phi, moment = math.pi / 3, -36.0e3
    section = Inertia(area=1.0, x_bar=0.0, y_bar=0.0, I_h=39.69e6 * MM**4, I_v=30.73e6 * MM**4, I_hv=0.0)
    plane = elastic_stress(section, Forces(M=-moment * math.sin(phi), M_lat=moment * math.cos(phi)))
    at_a, at_b = plane.at(np.array([(-70, -118), (70, 82)]) * MM)
    axis = plane.neutral_axis
    assert axis is not None
    assert axis.angle == pytest.approx(-0.6407, rel=5e-4)
    assert at_a == pytest.approx(133.7 * MPA, rel=5e-4)
    assert at_b == pytest.approx(-105.4 * MPA, rel=5.22e-4)


def test_purlin_on_a_sloping_roof() -> None:
    """From memory: Gere & Goodno, Mechanics of Materials, 7th ed., Example 6-4; 100 × 150 mm, 1.6 m, 3 kN/m.

    Found twice: with the moment's components on the upright section, and with the section turned under it.
    """
    moment, slope = 3.0e3 * 1.6**2 / 8, math.radians(26.57)
    purlin = rectangle(b=0.100, h=0.150)
    part, plane = stress(purlin, Forces(M=moment * math.cos(slope), M_lat=moment * math.sin(slope)))
    turned_part, turned = stress(purlin.outline.turned(slope), Forces(M=moment))
    for each, here in ((plane, part), (turned, turned_part)):
        most, least = each.extremes(here)
        assert most.value == pytest.approx(4.01 * MPA, rel=1.37e-3)
        assert least.value == pytest.approx(-most.value, rel=1e-12)
    axis = plane.neutral_axis
    assert axis is not None
    assert math.degrees(axis.angle) == pytest.approx(48.4, rel=1.14e-3)


def test_column_section_under_axial_force_and_two_moments() -> None:
    """Closed form (Navier), with the table's A and I (from memory: EN 10365), and with the outline's."""
    table = Inertia(149.1e-4, 0.0, 0.0, 25170e-8, 8563e-8, 0.0)
    column = i_shape(h=0.3, b=0.3, t_w=0.011, t_f=0.019, r=0.027).outline
    for section in (table, section_properties(column)):
        plane = elastic_stress(section, Forces(N=-500e3, M=100e3, M_lat=30e3))
        most, least = plane.extremes(column)
        assert least.value == pytest.approx(-145.681 * MPA, rel=1e-3)
        assert most.value == pytest.approx(78.6119 * MPA, rel=1e-3)
        assert (most.x, most.y, least.x, least.y) == (0.15, -0.15, -0.15, 0.15)
        axis = plane.neutral_axis
        assert axis is not None
        # compression shifts it towards the tension side: down for M > 0, right for M_lat > 0
        assert axis.above == pytest.approx(-84.4064 * MM, rel=1e-3)
        assert axis.right == pytest.approx(95.7188 * MM, rel=1e-3)


# kern distances in closed form: h/6, b/6, R/4, (R² + r²)/(4R), and W/A of a table (A 53.8 cm², W 557.1 cm³)
KERNS = [
    ("rectangle, depth", section_properties(rectangle(b=0.3, h=0.6).outline), 0.3, 0.100),
    ("rectangle, width", section_properties(rectangle(b=0.6, h=0.3).outline), 0.15, 0.050),
    ("circle", section_properties(circle(d=0.4).outline), 0.2, 0.050),
    ("tube", section_properties(tube(d=0.4, t=0.05).outline), 0.2, 0.078125),
    ("IPE 300, table", Inertia(53.8e-4, 0.0, 0.0, 557.1e-6 * 0.15, 1.0, 0.0), 0.15, 0.10355),
]


@pytest.mark.parametrize(("section", "far_fibre", "kern"), [c[1:] for c in KERNS], ids=[c[0] for c in KERNS])
def test_a_force_at_the_edge_of_the_kern_leaves_the_far_fibre_without_stress(
    section: Inertia, far_fibre: float, kern: float
) -> None:
    """A push at the depth `kern` below the centroid puts the neutral axis at the top."""
    axis = elastic_stress(section, Forces(N=-1e3, M=-1e3 * kern)).neutral_axis
    assert axis is not None
    assert axis.above == pytest.approx(far_fibre, rel=1e-4)


# forces, sign of the stress at the middle of top, bottom, left and right
SIGNS: list[tuple[Forces, tuple[int, int, int, int]]] = [
    (Forces(N=1.0), (1, 1, 1, 1)),
    (Forces(N=-1.0), (-1, -1, -1, -1)),
    (Forces(M=1.0), (-1, 1, 0, 0)),
    (Forces(M=-1.0), (1, -1, 0, 0)),
    (Forces(M_lat=1.0), (0, 0, -1, 1)),
    (Forces(M_lat=-1.0), (0, 0, 1, -1)),
]


@pytest.mark.parametrize(("applied", "signs"), SIGNS)
def test_signs(applied: Forces, signs: tuple[int, ...]) -> None:
    _, plane = stress(BEAM, applied)
    middles = np.array([(0, 0.15), (0, -0.15), (-0.05, 0), (0.05, 0)])
    assert np.sign(plane.at(middles)).tolist() == list(signs)


def test_a_whole_edge_in_tension_is_reported_by_its_middle_and_its_ends() -> None:
    part, plane = stress(IPE, Forces(M=10e3))
    most, least = plane.extremes(part)
    assert (most.x, most.y, most.ends) == (0.0, -0.15, ((-0.075, -0.15), (0.075, -0.15)))
    assert (least.x, least.y, least.ends) == (0.0, 0.15, ((-0.075, 0.15), (0.075, 0.15)))
    assert most.value == pytest.approx(10e3 / section_properties(part).W_el_h, rel=1e-12)
    assert plane.at_bottom(part) == pytest.approx(most.value)
    assert plane.at_top(part) == pytest.approx(least.value)


def test_of_two_tied_edges_the_leftmost_or_lowest_is_reported() -> None:
    part, plane = stress(channel(h=0.2, b=0.08, t_w=0.006, t_f=0.01), Forces(M_lat=1e3))
    most, least = plane.extremes(part)
    assert (most.x, most.y) == pytest.approx((0.04, -0.095))  # the tip of the bottom flange
    assert (least.x, least.y) == (-0.04, 0.0)  # the back of the web
    tees = polygon(points=[(-3, 1), (-3, 0), (3, 0), (3, 1), (2, 1), (2, 0.5), (-2, 0.5), (-2, 1)])
    part, plane = stress(tees, Forces(M=1.0))
    assert (plane.extremes(part)[1].x, plane.extremes(part)[1].y) == (-2.5, 1.0)


def test_a_fibre_under_varying_stress_gives_the_larger_magnitude() -> None:
    part, plane = stress(BEAM, Forces(M=9e3, M_lat=1e3))
    # σ = ∓ 9e3/1.5e-3 ± 1e3/0.5e-3
    assert plane.at_top(part) == pytest.approx(-8.0 * MPA)
    assert plane.at_bottom(part) == pytest.approx(8.0 * MPA)
    _, lateral = stress(BEAM, Forces(M_lat=1e3))
    assert lateral.at_top(part) == pytest.approx(2.0 * MPA)  # of equal magnitudes the tension


def test_no_force_no_stress_and_no_neutral_axis() -> None:
    part, plane = stress(BEAM, Forces())
    assert plane.uniform
    assert plane.neutral_axis is None
    assert [extreme.value for extreme in plane.extremes(part)] == [0.0, 0.0]
    assert (plane.curvature(210e9).resultant, plane.curvature(210e9).radius) == (0.0, None)


@pytest.mark.parametrize("noise", [0.0, 1e-13, -1e-13])
def test_pure_axial_force_has_no_neutral_axis_even_with_rounding_in_the_moment(noise: float) -> None:
    part, plane = stress(IPE, Forces(N=1e3, M=noise))
    assert plane.neutral_axis is None
    most, least = plane.extremes(part)
    assert most == least
    assert (most.x, most.y) == (0.0, 0.0)
    assert most.value == pytest.approx(1e3 / section_properties(part).area)


@pytest.mark.parametrize("axial", [1e-12, -1e-12, 1e-300])
def test_a_tiny_axial_force_leaves_the_neutral_axis_at_the_centroid(axial: float) -> None:
    _, plane = stress(IPE, Forces(N=axial, M=10e3))
    axis = plane.neutral_axis
    assert axis is not None
    assert (axis.above, axis.angle, axis.right) == (0.0, 0.0, None)


# a turn of the neutral axis with the moment, on a section whose axes are all principal
ANGLES = [
    (1.0, 0.0, 0.0),
    (-1.0, 0.0, 0.0),
    (0.0, 1.0, 90.0),
    (0.0, -1.0, 90.0),
    (1.0, 1.0, 45.0),
    (1.0, -1.0, -45.0),
]


@pytest.mark.parametrize(("moment", "lateral", "degrees"), ANGLES)
def test_angle_of_the_neutral_axis(moment: float, lateral: float, degrees: float) -> None:
    _, plane = stress(circle(d=0.2), Forces(M=moment, M_lat=lateral))
    axis = plane.neutral_axis
    assert axis is not None
    assert math.degrees(axis.angle) == pytest.approx(degrees, abs=1e-9)


@given(outlines(), forces)
@example(circle(d=1.0).outline, Forces(M_lat=5e-167))  # its square is no number any more
@settings(max_examples=60, deadline=None)
def test_stress_vanishes_along_the_neutral_axis(part: Outline, applied: Forces) -> None:
    plane = elastic_stress(section_properties(part), applied)
    axis = plane.neutral_axis
    if axis is None:
        return
    scale = abs(plane.sigma_0) + math.hypot(plane.g_x, plane.g_y)
    along = np.array(
        [(axis.x + s * math.cos(axis.angle), axis.y + s * math.sin(axis.angle)) for s in (-1, 0, 1)]
    )
    np.testing.assert_allclose(plane.at(along) / scale, 0.0, atol=1e-9)
    assert -0.5 * math.pi < axis.angle <= 0.5 * math.pi
    if axis.above is not None and abs(axis.above) < 1e3:
        assert plane.at(np.array([(plane.x_bar, plane.y_bar + axis.above)]))[0] / scale == pytest.approx(
            0.0, abs=1e-9
        )


@given(outlines(), forces)
@settings(max_examples=60, deadline=None)
def test_extremes_bound_the_stress_of_every_corner(part: Outline, applied: Forces) -> None:
    plane = elastic_stress(section_properties(part), applied)
    most, least = plane.extremes(part)
    everywhere = plane.at(np.concatenate(part.rings))
    slack = 1e-9 * (most.value - least.value) + 1e-12 * abs(plane.sigma_0)
    assert least.value - slack <= everywhere.min()
    assert everywhere.max() <= most.value + slack
    for extreme in (most, least):
        found = plane.at(np.array([*extreme.ends, (extreme.x, extreme.y)]))
        assert found == pytest.approx(extreme.value, abs=slack)


@given(forces, st.floats(-3.0, 3.0))
@settings(max_examples=40, deadline=None)
def test_turning_the_section_with_its_moments_turns_the_stress(applied: Forces, turn: float) -> None:
    """(M, M_lat) turns like a vector with the horizontal part M and the vertical part M_lat."""
    leg = angle(h=0.15, b=0.1, t=0.01).outline
    cos, sin = math.cos(turn), math.sin(turn)
    turned = Forces(applied.N, applied.M * cos - applied.M_lat * sin, applied.M * sin + applied.M_lat * cos)
    _, here = stress(leg, applied)
    _, there = stress(leg.turned(turn), turned)
    size = abs(here.sigma_0) + 0.15 * math.hypot(here.g_x, here.g_y) + 1e-300
    difference = there.at(leg.turned(turn).exterior) - here.at(leg.exterior)
    np.testing.assert_allclose(difference / size, 0.0, atol=1e-9)


def test_curvature_and_strain() -> None:
    """κ = M/(E I), M 10 kN·m on 100 × 300 mm of 10 GPa; the bottom lengthens."""
    part, plane = stress(BEAM, Forces(M=10e3, M_lat=-1e3))
    bent = plane.curvature(10e9)
    assert bent.kappa_h == pytest.approx(10e3 / (10e9 * 0.1 * 0.3**3 / 12))
    assert bent.kappa_v == pytest.approx(-1e3 / (10e9 * 0.3 * 0.1**3 / 12))
    assert bent.resultant == pytest.approx(math.hypot(bent.kappa_h, bent.kappa_v))
    assert bent.radius == pytest.approx(1.0 / bent.resultant)
    assert plane.strain_at(part.exterior, 10e9) == pytest.approx(plane.at(part.exterior) / 10e9)


def test_parts_tied_in_whole_do_not_hold_up_the_search() -> None:
    """A part of a billionth of the section's size, all of whose corners count as tied."""
    speck = rectangle(b=1e-10, h=1e-10).outline.moved(0.0, -0.15)
    part, plane = stress(BEAM, Forces(M=1.0))
    assert plane.extremes(part.moved(0.0, 0.001), speck)[0].y == pytest.approx(-0.15)

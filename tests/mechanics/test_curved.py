"""Curved bars against published examples, closed forms, quadrature and the straight bar."""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from calcgen.mechanics.curved import Centre, CurvatureError, CurvedStress, curved_stress
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.curved import curved_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import (
    Shape,
    circle,
    ellipse,
    i_shape,
    polygon,
    rectangle,
    tee,
    trapezium,
    tube,
    unequal_i_shape,
    zed,
)
from calcgen.mechanics.stress import Forces, elastic_stress
from tests.mechanics.strategies import outlines

MM, IN, KIP = 1e-3, 0.0254, 4448.2216152605
MPA, KSI = 1e6, KIP / IN**2


def stress_of(
    part: Outline, N: float = 0.0, M: float = 1.0, *, R_c: float, centre: Centre = "bottom"
) -> CurvedStress:
    return curved_stress(section_properties(part), N, M, R_c, centre, part)


def test_a_curved_frame() -> None:
    """From memory: Boresi & Schmidt, Advanced Mechanics of Materials, 6th ed., Example 9.1."""
    found = stress_of(rectangle(b=0.05, h=0.05).outline, 9.5e3, 9.5e3 * 0.155, R_c=55 * MM)
    assert found.A_m / MM == pytest.approx(49.04, rel=5e-4)
    assert found.inner.value / MPA == pytest.approx(106.2, rel=5.18e-4)
    assert found.outer.value / MPA == pytest.approx(-49.3, rel=1.12e-3)


def test_a_crane_hook() -> None:
    """From memory: Shigley's Mechanical Engineering Design, Example 3-15."""
    F = 5 * KIP
    found = stress_of(rectangle(b=0.75 * IN, h=4 * IN).outline, F, F * 4 * IN, R_c=4 * IN)
    assert found.r_n / IN == pytest.approx(3.641, rel=5e-4)
    assert found.e / IN == pytest.approx(0.359, rel=1.53e-3)
    assert found.inner.value / KSI == pytest.approx(16.9, rel=3.25e-3)
    assert found.outer.value / KSI == pytest.approx(-5.63, rel=9.77e-4)
    # the force acts in the centre of curvature: no stress in the centroid
    axis = found.neutral_axis
    assert axis is not None
    assert axis.r == pytest.approx(4 * IN, rel=1e-12)
    assert axis.inside


def test_a_ring_of_round_bar() -> None:
    """Closed form: A_m = 2π (R - √(R² - b²))."""
    found = stress_of(circle(d=40 * MM).outline, 10e3, 500.0, R_c=50 * MM)
    assert found.A_m / MM == pytest.approx(26.2275, rel=5e-4)
    assert found.r_n / MM == pytest.approx(47.9129, rel=5e-4)
    assert found.inner.value / MPA == pytest.approx(121.788, rel=5e-4)
    assert found.outer.value / MPA == pytest.approx(-52.1947, rel=5e-4)


# A_m from the inner radius r, inner side at the bottom: from memory of the tables of Boresi & Schmidt and of
# Roark, and each ∫b(r) dr/r by hand. Arcs are many short edges.
A_M: list[tuple[str, Shape, Callable[[float], float], float]] = [
    ("rectangle", rectangle(b=0.03, h=0.08), lambda r: 0.03 * math.log((r + 0.08) / r), 1e-12),
    (
        "trapezium",
        trapezium(b_t=0.02, b_b=0.05, h=0.09),
        lambda r: (0.05 * (r + 0.09) - 0.02 * r) / 0.09 * math.log((r + 0.09) / r) - (0.05 - 0.02),
        1e-12,
    ),
    (
        "triangle, base inside",
        polygon(points=[(0.0, 0.0), (0.06, 0.0), (0.03, 0.09)]),
        lambda r: 0.06 * (r + 0.09) / 0.09 * math.log((r + 0.09) / r) - 0.06,
        1e-12,
    ),
    (
        "circle",
        circle(d=0.08),
        lambda r: 2.0 * math.pi * (r + 0.04 - math.sqrt((r + 0.04) ** 2 - 0.0016)),
        1e-6,
    ),
    (
        "ellipse",
        ellipse(b=0.04, h=0.1),
        lambda r: 2.0 * math.pi * 0.02 / 0.05 * (r + 0.05 - math.sqrt((r + 0.05) ** 2 - 0.0025)),
        1e-6,
    ),
    (
        "tube",
        tube(d=0.08, t=0.01),
        lambda r: 2.0 * math.pi * (math.sqrt((r + 0.04) ** 2 - 0.0009) - math.sqrt((r + 0.04) ** 2 - 0.0016)),
        1e-6,
    ),
    (
        "I of unequal flanges",
        unequal_i_shape(h=0.1, b_t=0.05, t_t=0.01, b_b=0.08, t_b=0.02, t_w=0.01),
        lambda r: (
            0.08 * math.log((r + 0.02) / r)
            + 0.01 * math.log((r + 0.09) / (r + 0.02))
            + 0.05 * math.log((r + 0.1) / (r + 0.09))
        ),
        1e-12,
    ),
]


@pytest.mark.parametrize("r", [1e-4, 0.01, 0.1, 1.0])
@pytest.mark.parametrize(("shape", "A_m", "rel"), [c[1:] for c in A_M], ids=[c[0] for c in A_M])
def test_closed_forms(shape: Shape, A_m: Callable[[float], float], rel: float, r: float) -> None:
    part = shape.outline
    section = section_properties(part)
    found = stress_of(part, R_c=r + section.c_bottom)
    if rel > 1e-9 and r < 0.01:
        rel = 1e-3  # a faceted arc at a hundredth of its radius from the centre of curvature
    assert found.A_m == pytest.approx(A_m(r), rel=rel)
    assert found.r_n == pytest.approx(section.area / A_m(r), rel=rel)
    assert found.r_inner == pytest.approx(r, rel=1e-9)


@pytest.mark.parametrize("centre", ["bottom", "top"])
@pytest.mark.parametrize("ratio", [1e-3, 0.3, 3.0, 30.0])
def test_against_quadrature(centre: Centre, ratio: float) -> None:
    """A tee by its widths: scipy integrates dA/r, σ dA and -σ y dA over the depth."""
    part = tee(h=0.2, b=0.15, t_w=0.012, t_f=0.02).outline
    section = section_properties(part)
    inner = section.c_bottom if centre == "bottom" else section.c_top
    found = stress_of(part, 3e4, -2e3, R_c=inner + ratio * 0.2, centre=centre)

    def over_depth(f: Callable[[float], float]) -> float:
        flange = 0.1 - 0.02
        web, _ = quad(f, -0.1, flange, epsrel=1e-12, limit=400)
        top, _ = quad(f, flange, 0.1, epsrel=1e-12, limit=400)
        return float(0.012 * web + 0.15 * top)

    def sigma(y: float) -> float:
        return float(found.at_heights(np.array([y]))[0])

    assert found.A_m == pytest.approx(over_depth(lambda y: 1.0 / found.radius(y)), rel=1e-10)
    assert over_depth(sigma) == pytest.approx(3e4, rel=1e-8)
    assert over_depth(lambda y: -sigma(y) * (y - section.y_bar)) == pytest.approx(-2e3, rel=1e-8)


@given(
    outlines(),
    st.floats(-1e5, 1e5),
    st.floats(-1e4, 1e4),
    st.floats(1e-2, 1e4),
    st.sampled_from(["bottom", "top"]),
)
@settings(max_examples=50, deadline=None)
def test_fibres_return_the_forces(part: Outline, N: float, M: float, ratio: float, centre: Centre) -> None:
    """Also the sideways moment that holds an unsymmetric section."""
    section = section_properties(part)
    inner = section.c_bottom if centre == "bottom" else section.c_top
    found = curved_stress(section, N, M, inner + ratio * part.bounds.height, centre, part)
    assert all(residual.holds for residual in curved_residuals(found, part))


def test_the_second_route_finds_a_spoiled_value() -> None:
    part = rectangle(b=0.05, h=0.2).outline
    found = stress_of(part, 1e3, 1e3, R_c=0.2)
    for spoiled in (
        replace(found, I_c=found.I_c * (1 + 1e-5)),
        replace(found, A=found.A * (1 + 1e-5)),
        replace(found, y_bar=found.y_bar + 1e-6),
    ):
        assert not all(residual.holds for residual in curved_residuals(spoiled, part))


def test_a_slightly_curved_bar_is_straight() -> None:
    """The error at the inner fibre of a rectangle is -h/(3R) to the first order, by hand.

    It must not drown in rounding up to R/h = 1e6 and beyond.
    """
    part = rectangle(b=0.1, h=0.3).outline
    section = section_properties(part)
    plane = elastic_stress(section, Forces(N=2e3, M=-5e3))
    for ratio in (1e2, 1e4, 1e6, 1e8):
        pure = stress_of(part, R_c=0.3 * ratio)
        assert pure.straight_error is not None
        assert pure.straight_error == pytest.approx(-1.0 / (3.0 * ratio), rel=1.0 / ratio, abs=4e-15)
        assert pure.e == pytest.approx(0.3 / (12.0 * ratio), rel=1.0 / ratio)
        found = stress_of(part, 2e3, -5e3, R_c=0.3 * ratio, centre="top")
        points = np.array([[0.0, -0.15], [0.0, 0.02], [0.0, 0.15]])
        np.testing.assert_allclose(found.at(points), plane.at(points), rtol=2.0 / ratio)
    assert found.I_c == pytest.approx(section.I_h, rel=1e-14)


@given(outlines(), st.floats(-1e5, 1e5), st.floats(-1e4, 1e4), st.floats(1e-2, 100.0))
@settings(max_examples=50, deadline=None)
def test_turned_upside_down_nothing_changes(part: Outline, N: float, M: float, ratio: float) -> None:
    section = section_properties(part)
    R_c = section.c_bottom + ratio * part.bounds.height
    here = curved_stress(section, N, M, R_c, "bottom", part)
    half_turn = part.turned(math.pi)
    there = curved_stress(section_properties(half_turn), N, -M, R_c, "top", half_turn)
    scale = max(abs(here.top.value), abs(here.bottom.value))
    assert there.inner.value == pytest.approx(here.inner.value, abs=1e-9 * scale)
    assert there.outer.value == pytest.approx(here.outer.value, abs=1e-9 * scale)
    assert (there.A_m, there.e) == pytest.approx((here.A_m, here.e), rel=1e-9)


@given(outlines(), st.floats(-1e5, 1e5), st.floats(-1e4, 1e4), st.floats(1e-2, 100.0))
@settings(max_examples=50, deadline=None)
def test_extremes_lie_at_the_edges_and_the_axis_has_no_stress(
    part: Outline, N: float, M: float, ratio: float
) -> None:
    section = section_properties(part)
    found = curved_stress(section, N, M, section.c_bottom + ratio * part.bounds.height, "bottom", part)
    most, least = found.extremes
    profile = found.profile()
    scale = 1e-9 * (abs(most.value) + abs(least.value)) + 1e-9
    assert profile[:, 1].max() <= most.value + scale
    assert profile[:, 1].min() >= least.value - scale
    assert (profile[0, 0], profile[-1, 0]) == pytest.approx((found.inner.y, found.outer.y), abs=1e-15)
    axis = found.neutral_axis
    if axis is not None and axis.inside:
        assert found.at_heights(np.array([axis.y]))[0] == pytest.approx(0.0, abs=scale)
    if M != 0.0 and most.value > scale and least.value < -scale:
        assert axis is not None
        assert axis.inside


def test_pure_bending_has_its_axis_nearer_to_the_centre_of_curvature() -> None:
    part = i_shape(h=0.2, b=0.1, t_w=0.006, t_f=0.01).outline
    sides: dict[Centre, float] = {"bottom": -1.0, "top": 1.0}
    for centre, side in sides.items():
        found = stress_of(part, 0.0, 1e4, R_c=0.3, centre=centre)
        axis = found.neutral_axis
        assert axis is not None
        assert axis.r == pytest.approx(found.r_n)
        assert axis.y == pytest.approx(side * found.e)
        assert found.bottom.value > 0.0 > found.top.value  # M is positive with tension at the bottom
        assert abs(found.inner.value) > abs(found.straight(found.inner.y))
        assert found.straight_error is not None
        assert found.straight_error < 0.0


def test_without_moment_the_stress_is_uniform() -> None:
    part = rectangle(b=0.1, h=0.2).outline
    found = stress_of(part, 4e3, 0.0, R_c=0.15)
    most, least = found.extremes
    assert most == least
    assert (most.value, most.x, most.y) == pytest.approx((4e3 / 0.02, 0.0, 0.0), rel=1e-12)
    assert found.neutral_axis is None
    assert found.straight_error == 0.0
    nothing = stress_of(part, 0.0, 0.0, R_c=0.15)
    assert nothing.neutral_axis is None
    assert nothing.straight_error is None


def test_symmetry_is_told() -> None:
    assert stress_of(tee(h=0.2, b=0.1, t_w=0.01, t_f=0.01).outline, R_c=0.3).in_plane
    assert stress_of(rectangle(b=0.1, h=0.2).outline.moved(7.0, -3.0), R_c=0.3).in_plane
    crooked = stress_of(zed(h=0.2, b=0.08, t=0.01).outline, R_c=0.3)
    assert not crooked.in_plane
    assert crooked.M_lat != 0.0
    # I_hv = 0 is not enough: the bar of this section would bend in its plane if it were straight
    pair = [
        rectangle(b=0.02, h=0.1).outline.moved(-0.1, 0.0),
        rectangle(b=0.02, h=0.05).outline.moved(0.1, 0.05),
        rectangle(b=0.02, h=0.05).outline.moved(0.1, -0.05),
    ]
    section = section_properties(*pair)
    assert section.I_hv == 0.0
    assert not curved_stress(section, 0.0, 1.0, 0.3, "bottom", *pair).in_plane


def test_a_section_that_reaches_the_centre_of_curvature_is_refused() -> None:
    part = rectangle(b=0.1, h=0.2).outline
    for R_c in (0.1, 0.05, 0.0, -1.0, math.nan, math.inf):
        with pytest.raises(CurvatureError) as error:
            stress_of(part, R_c=R_c)
        assert error.value.least == pytest.approx(0.1)
    assert stress_of(part, R_c=0.1001).inner.value > 0.0
    upright = trapezium(b_t=0.02, b_b=0.1, h=0.2).outline
    section = section_properties(upright)
    with pytest.raises(CurvatureError):
        curved_stress(section, 0.0, 1.0, 0.5 * (section.c_bottom + section.c_top), "top", upright)


def test_the_exact_solution_of_elasticity_is_near() -> None:
    """Rectangle of unit thickness from r = 1 to 2 under end couples, tension inside.

    Golovin's solution (Timoshenko & Goodier, Theory of Elasticity, art. 29, from memory, with its table of
    7.755 and -4.917, and 7.725 and -4.863 by Winkler's theory).
    """
    a, b = 1.0, 2.0
    N = (b**2 - a**2) ** 2 - 4.0 * (a * b * math.log(b / a)) ** 2

    def exact(r: float) -> float:
        logs = -((a * b / r) ** 2) * math.log(b / a) + b**2 * math.log(r / b) + a**2 * math.log(a / r)
        return -4.0 / N * (logs + b**2 - a**2)

    found = stress_of(rectangle(b=1.0, h=1.0).outline, R_c=1.5)
    assert (exact(a), exact(b)) == pytest.approx((7.755, -4.917), abs=6e-4)
    assert (found.inner.value, found.outer.value) == pytest.approx((7.725, -4.863), abs=6e-4)

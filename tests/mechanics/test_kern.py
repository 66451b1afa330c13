"""The kern against closed forms and the stress it is about; the monosymmetry constant against sympy."""

import math

import numpy as np
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import LineString, Point, Polygon
from sympy.integrals.intpoly import polytope_integrate

from calcgen.mechanics.kern import Kern, kern
from calcgen.mechanics.monosymmetry import monosymmetry
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import angle, circle, i_shape, rectangle, tee, tube, unequal_i_shape, zed
from calcgen.mechanics.stress import Forces, elastic_stress
from tests.mechanics.strategies import outlines, star

MM = 1e-3


def kern_of(*parts: Outline) -> Kern:
    return kern(section_properties(*parts), *parts)


def test_a_rectangle_has_a_rhombus_of_its_sixths() -> None:
    """Closed form: h/6 and b/6."""
    found = kern_of(rectangle(b=0.3, h=0.6).outline.moved(2.0, -1.0))
    assert (found.k_top, found.k_bottom) == pytest.approx((0.1, 0.1), rel=1e-12)
    assert (found.k_left, found.k_right) == pytest.approx((0.05, 0.05), rel=1e-12)
    rhombus = Polygon([(2.05, -1.0), (2.0, -0.9), (1.95, -1.0), (2.0, -1.1)])
    assert len(found.corners) == 4
    assert Polygon(found.corners).exterior.is_ccw
    assert Polygon(found.corners).symmetric_difference(rhombus).area < 1e-12


def test_round_sections() -> None:
    """Closed form: R/4, and (R² + r²)/(4R) for a tube; arcs are many short edges."""
    solid, hollow = kern_of(circle(d=0.4).outline), kern_of(tube(d=0.4, t=0.05).outline)
    for found, exact in ((solid, 50.0), (hollow, 78.125)):
        reach = [found.k_top, found.k_bottom, found.k_left, found.k_right]
        assert [k / MM for k in reach] == pytest.approx([exact] * 4, rel=1e-4)


def test_an_i_section_reaches_as_far_as_its_modulus_over_its_area() -> None:
    """Closed form k = W/A: 103.55 mm from the published A = 53.8 cm² and W = 557.1 cm³ of an IPE 300."""
    part = i_shape(h=0.3, b=0.15, t_w=7.1 * MM, t_f=10.7 * MM, r=0.015).outline
    assert kern_of(part).k_top / MM == pytest.approx(103.55, rel=1e-3)
    section = section_properties(part)
    assert kern_of(part).k_top == pytest.approx(section.W_el_h / section.area, rel=1e-12)


def test_upwards_it_is_the_bottom_fibre_that_counts() -> None:
    part = tee(h=0.2, b=0.1, t_w=0.01, t_f=0.01).outline
    section, found = section_properties(part), kern_of(part)
    assert found.k_top == pytest.approx(section.W_el_h_bottom / section.area, rel=1e-12)
    assert found.k_bottom == pytest.approx(section.W_el_h_top / section.area, rel=1e-12)
    assert len(found.corners) == 6  # the hull has the sides of the flange, its top, the foot and two slants


@pytest.mark.parametrize(
    "part", [zed(h=0.2, b=0.08, t=0.01).outline, angle(h=0.15, b=0.1, t=0.01).outline], ids=["zed", "angle"]
)
def test_off_the_principal_axes_the_stress_at_the_rim_is_zero(part: Outline) -> None:
    section, found = section_properties(part), kern_of(part)
    rim = [(0.0, found.k_top), (0.0, -found.k_bottom), (found.k_right, 0.0), (-found.k_left, 0.0)]
    corners = (found.corners - (section.x_bar, section.y_bar)).tolist()
    for x, y in [*rim, *corners]:
        # tension N at (x, y): M is positive with tension at the bottom
        most, least = elastic_stress(section, Forces(N=1.0, M=-y, M_lat=x)).extremes(part)
        assert least.value == pytest.approx(0.0, abs=1e-9 * most.value)


@given(outlines(), st.floats(0.0, 6.3))
@settings(max_examples=50, deadline=None)
def test_inside_no_stress_changes_sign_and_outside_some_does(part: Outline, direction: float) -> None:
    section = section_properties(part)
    found = Polygon(kern_of(part).corners)
    assert found.is_valid
    assert found.contains(Point(section.x_bar, section.y_bar))
    far = np.array([math.cos(direction), math.sin(direction)])
    ray = [(section.x_bar, section.y_bar), (section.x_bar + far[0], section.y_bar + far[1])]
    reach = found.exterior.intersection(LineString(ray))
    e = np.array([reach.x - section.x_bar, reach.y - section.y_bar])
    for share, one_sign in ((0.999, True), (1.001, False)):
        x, y = (share * e).tolist()
        least = elastic_stress(section, Forces(N=1.0, M=-y, M_lat=x)).extremes(part)[1].value
        assert (least > 0.0) is one_sign


@given(outlines(), st.floats(-3.0, 3.0))
@settings(max_examples=30, deadline=None)
def test_it_turns_with_the_section(part: Outline, turn: float) -> None:
    here, there = kern_of(part), kern_of(part.turned(turn))
    back = there.corners - part.bounds.middle
    cos, sin = math.cos(turn), math.sin(turn)
    turned = Polygon(back @ np.array([[cos, -sin], [sin, cos]]) + part.bounds.middle)
    assert turned.symmetric_difference(Polygon(here.corners)).area <= 1e-8 * turned.area


def test_beta_against_sympy() -> None:
    """∫y (x² + y²) dA of a ring less its hole in rational numbers."""
    generator = np.random.default_rng(3)
    outer = np.round(star(generator.uniform(0.4, 1.0, 7).tolist(), 0.3, 0.2), 3)
    inner = np.round(star(generator.uniform(0.4, 1.0, 5).tolist(), 0.09, 0.5), 3)
    x, y = sympy.symbols("x y")

    def exact(form: sympy.Expr) -> sympy.Rational:
        total = sympy.Rational(0)
        for ring, sign in ((outer, 1), (inner, -1)):
            corners = [tuple(sympy.Rational(str(value)) for value in row) for row in ring.tolist()]
            total += sign * polytope_integrate(sympy.Polygon(*corners), form)
        return total

    part = outline(outer, [inner])
    section = section_properties(part)
    area = exact(sympy.Integer(1))
    x_bar, y_bar = exact(x) / area, exact(y) / area
    across, up = x - x_bar, y - y_bar
    I_h = exact(sympy.expand(up**2))
    integral = exact(sympy.expand(up * (across**2 + up**2)))
    assert abs(float(area)) == pytest.approx(section.area, rel=1e-12)
    y_s = 0.02
    assert monosymmetry(section, y_s, part) == pytest.approx(
        float(integral / I_h) - 2.0 * (y_s - float(y_bar)), rel=1e-10
    )


def test_beta_of_thin_flanges() -> None:
    """Closed form of the mid-line, each flange at its height with its own second moment about the web.

    β = [a (b_t³ t/12 + A_t a²) - c (b_b³ t/12 + A_b c²) + t_w (a⁴ - c⁴)/4]/I_h - 2 y_s, a and c the distances
    of the flanges from the centroid.
    """
    t, h, b_t, b_b = 1e-5, 0.3, 0.2, 0.1
    part = unequal_i_shape(h=h + t, b_t=b_t, t_t=t, b_b=b_b, t_b=t, t_w=t).outline
    section = section_properties(part)
    a, c = 0.5 * h - section.y_bar, 0.5 * h + section.y_bar
    I_t, I_b = b_t**3 / 12.0, b_b**3 / 12.0
    y_s = -0.5 * h + h * I_t / (I_t + I_b)  # from the bottom in the share of the top flange
    I_h = b_t * a**2 + b_b * c**2 + (a**3 + c**3) / 3.0
    integral = a * (I_t + b_t * a**2) - c * (I_b + b_b * c**2) + (a**4 - c**4) / 4.0
    exact = integral / I_h - 2.0 * (y_s - section.y_bar)
    found = monosymmetry(section, y_s, part)
    assert found == pytest.approx(exact, rel=1e-4)
    assert found < 0.0  # the larger flange is on top
    # the usual approximation 0.9 h (2 ρ - 1)(1 - (I_v/I_h)²), from memory of AS 4100 5.6.1.2
    rho = I_t / (I_t + I_b)
    assert -found == pytest.approx(
        0.9 * h * (2.0 * rho - 1.0) * (1.0 - (section.I_v / section.I_h) ** 2), rel=0.1
    )


def test_beta_turns_its_sign_upside_down_and_vanishes_for_two_axes() -> None:
    part = tee(h=0.2, b=0.1, t_w=0.01, t_f=0.01, r=0.01).outline
    section = section_properties(part)
    y_s = 0.095
    upright = monosymmetry(section, y_s, part)
    half_turn = part.turned(math.pi)
    assert upright < 0.0
    assert monosymmetry(section_properties(half_turn), -y_s, half_turn) == pytest.approx(-upright, rel=1e-10)
    for double in (i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01, r=0.015), circle(d=0.2)):
        assert monosymmetry(section_properties(double.outline), 0.0, double.outline) == 0.0

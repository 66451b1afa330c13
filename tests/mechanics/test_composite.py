"""Transformed sections and their stresses against published examples, closed forms and plain properties."""

import math

import numpy as np
import pytest
from hypothesis import given, settings

from calcgen.mechanics.composite import transformed_inertia, transformed_properties
from calcgen.mechanics.equilibrium import solve
from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.field import field_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import rectangle
from calcgen.mechanics.stress import Forces
from calcgen.mechanics.stress_blocks import plastic_state
from tests.mechanics.strategies import forces, outlines

MM, IN = 1e-3, 0.0254
MPA, KSI, KIP = 1e6, 6894757.293168, 4448.2216152605


def plate(b: float, h: float, x: float = 0.0, y: float = 0.0) -> Outline:
    return rectangle(b=b, h=h).outline.placed(x, y)


def test_timber_with_a_steel_plate_on_top() -> None:
    """Read: an exercise with answers after Philpot, Mechanics of Materials; M = 30 kN·m, axis closed form."""
    wood = Piece("wood", (plate(0.14, 0.4, y=0.2),))
    steel = Piece("steel", (plate(0.2, 0.008, y=0.404),), Law(200.0 / 12.5))
    pieces = (wood, steel)
    assert transformed_inertia(pieces).y_bar == pytest.approx(264 * MM, rel=5e-4)
    field = solve(pieces, (), Forces(M=30e3)).field
    most, least = field.extremes_of(wood)
    assert most.value == pytest.approx(5.36 * MPA, rel=1.03e-3)
    assert least.value == pytest.approx(-2.76 * MPA, rel=1.99e-3)
    overall = field.extremes()
    assert overall[1].value == pytest.approx(-46.8 * MPA, rel=1.18e-3)
    assert (overall[0].part, overall[1].part) == ("wood", "steel")
    assert field.at_top() == overall[1].value
    parts = transformed_properties(pieces)
    assert 30e3 / parts.part("steel").W_el_h_top == pytest.approx(46.8 * MPA, rel=1.18e-3)
    assert 30e3 / parts.part("wood").W_el_h == pytest.approx(5.36 * MPA, rel=1.03e-3)


def test_steel_core_between_brass_strips() -> None:
    """From memory: Beer & Johnston, Mechanics of Materials, Example 4.03; transformed to brass, 40 kip·in.

    The text rounds the transformed width to 2.25 in, within the tolerances.
    """
    brass = Piece("brass", (plate(0.4 * IN, 3 * IN, -0.575 * IN), plate(0.4 * IN, 3 * IN, 0.575 * IN)))
    steel = Piece("steel", (plate(0.75 * IN, 3 * IN),), Law(29 / 15))
    found = transformed_properties((brass, steel))
    assert found.I_h / IN**4 == pytest.approx(5.063, rel=5e-4)
    moment = 40 * KIP * IN
    assert moment / found.part("brass").W_el_h / KSI == pytest.approx(11.85, rel=5e-4)
    assert moment / found.part("steel").W_el_h / KSI == pytest.approx(22.9, rel=2.4e-3)


def test_flitch_beam() -> None:
    """From memory: Megson, Structural and Stress Analysis, Example 12.1; M = 50 kN·m, n = 12."""
    timber = Piece("timber", (plate(0.1, 0.4, -0.056), plate(0.1, 0.4, 0.056)))
    steel = Piece("steel", (plate(0.012, 0.3),), Law(12.0))
    field = solve((timber, steel), (), Forces(M=50e3)).field
    assert field.extremes_of(timber)[0].value == pytest.approx(7.2 * MPA, rel=7.64e-3)
    assert field.extremes_of(steel)[0].value == pytest.approx(64.7 * MPA, rel=8.5e-4)


def test_bars_displace_the_concrete_in_which_they_lie() -> None:
    """Closed form: b h + (n - 1) A_s, and the first and second moments of the same."""
    concrete = Piece("concrete", (plate(0.3, 0.5),))
    places, area, n = np.array([[-0.1, -0.2], [0.1, -0.2]]), 314e-6, 16.7
    bars = Bars("bars", places, area, Law(n), concrete.law)
    found = transformed_properties((concrete,), (bars,))
    added = (n - 1) * 2 * area
    y_bar = -0.2 * added / (0.15 + added)
    assert found.area == pytest.approx(0.15 + added, rel=1e-14)
    assert found.y_bar == pytest.approx(y_bar, rel=1e-12)
    I_h = 0.3 * 0.5**3 / 12 + 0.15 * y_bar**2 + added * (0.2 + y_bar) ** 2
    assert found.I_h == pytest.approx(I_h, rel=1e-12)
    assert found.I_v == pytest.approx(0.5 * 0.3**3 / 12 + added * 0.1**2, rel=1e-12)
    assert (found.x_bar, found.I_hv) == (0.0, 0.0)
    assert found.Q_h == pytest.approx(0.3 * (0.25 - y_bar) ** 2 / 2, rel=1e-12)
    assert found.Q_v == pytest.approx(0.5 * 0.15**2 / 2 + added / 2 * 0.1, rel=1e-12)
    in_nothing = transformed_inertia((concrete,), (Bars("bars", places, area, Law(n)),))
    assert in_nothing.area == pytest.approx(0.15 + n * 2 * area, rel=1e-14)


@given(outlines())
@settings(max_examples=30, deadline=None)
def test_one_material_has_the_plain_properties_exactly(part: Outline) -> None:
    plain, found = section_properties(part), transformed_properties((Piece("", (part,)),))
    names = ["area", "x_bar", "y_bar", "I_h", "I_v", "I_hv", "c_top", "c_bottom", "c_left", "c_right"]
    assert [getattr(found, name) for name in names] == [getattr(plain, name) for name in names]
    assert (found.Q_h, found.Q_v) == pytest.approx((plain.Q_h, plain.Q_v), rel=1e-12)
    moduli = found.part("")
    for name in ("W_el_h_top", "W_el_h_bottom", "W_el_v_left", "W_el_v_right", "W_el_h", "W_el_v"):
        assert getattr(moduli, name) == pytest.approx(getattr(plain, name), rel=1e-12)


def test_a_section_cut_in_two_is_the_same_section() -> None:
    halves = (Piece("left", (plate(0.1, 0.3, -0.05),)), Piece("right", (plate(0.1, 0.3, 0.05),)))
    found, plain = transformed_inertia(halves), section_properties(plate(0.2, 0.3))
    for name in ("area", "x_bar", "y_bar", "I_h", "I_v", "I_hv"):
        assert getattr(found, name) == pytest.approx(getattr(plain, name), rel=1e-13)


@given(outlines(), forces)
@settings(max_examples=30, deadline=None)
def test_composites_return_their_forces(part: Outline, applied: Forces) -> None:
    """A random part, a stiffer one beside it, and bars in the first."""
    first = Piece("first", (part,))
    second = Piece("second", (plate(0.1, 0.2, part.bounds.right + 0.05, part.bounds.top),), Law(17.0))
    bars = Bars("bars", part.exterior[:3], 1e-4, Law(8.0), first.law)
    field = solve((first, second), (bars,), applied).field
    assert all(residual.holds for residual in field_residuals(field, applied))


def test_plastic_moment_of_a_flitch_beam_from_its_strengths() -> None:
    """Closed form: both parts are symmetrical to one axis, so M_pl is the sum of f b h²/4."""
    timber = Piece("timber", (plate(0.1, 0.4, -0.056), plate(0.1, 0.4, 0.056)), Law(1.0, 30e6, 30e6))
    steel = Piece("steel", (plate(0.012, 0.3),), Law(12.0, 275e6, 275e6))
    found = plastic_state((timber, steel), towards="bottom").forces
    expected = 30e6 * 0.2 * 0.4**2 / 4 + 275e6 * 0.012 * 0.3**2 / 4
    assert math.isclose(found.M, expected, rel_tol=1e-12)


def test_plastic_moment_of_a_composite_slab_and_beam() -> None:
    """Closed form (blocks of EN 1994-1-1, 6.2.1.2): the axis in the slab, x = A_a f_yd/(b 0.85 f_cd)."""
    slab = Piece("slab", (plate(2.0, 0.12, y=0.06),), Law(0.1, 0.0, 0.85 * 20e6))
    steel = Piece("steel", (plate(0.15, 0.01, y=-0.005), plate(0.15, 0.02, y=-0.3)), Law(1.0, 235e6, 235e6))
    force = [235e6 * 0.15 * 0.01, 235e6 * 0.15 * 0.02]
    x = sum(force) / (2.0 * 0.85 * 20e6)
    state = plastic_state((slab, steel), towards="bottom")
    assert state.field.neutral_axis is not None
    assert 0.12 - state.field.neutral_axis.y == pytest.approx(x, rel=1e-12)
    expected = force[0] * 0.005 + force[1] * 0.3 + sum(force) * (0.12 - x / 2)
    assert math.isclose(state.forces.M, expected, rel_tol=1e-12)

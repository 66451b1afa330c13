"""Shear stress on the actual outline: published cases, composite sections, joints, and sums that return V."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.second_route.shear import cut_residuals, flow_residual, joint_residual
from calcgen.mechanics.section import Inertia, section_properties
from calcgen.mechanics.shapes import Shape, angle, circle, i_shape, polygon, rectangle, tee, tube
from calcgen.mechanics.shear import Cuts, Direction, ShearForces, cuts, gain
from tests.mechanics.strategies import outlines

INCH, LBF = 0.0254, 4.4482216152605
PSI = LBF / INCH**2


def of_one(part: Outline, shear: ShearForces, direction: Direction = "level") -> Cuts:
    return cuts(direction, section_properties(part), shear, [Piece("", (part,))])


def transformed(pieces: Sequence[Piece]) -> Inertia:
    """Composite section by summing the properties of its parts (Steiner)."""
    parts = [(piece.law.factor, section_properties(o)) for piece in pieces for o in piece.outlines]
    A = sum(n * p.A for n, p in parts)
    x = sum(n * p.A * p.x_bar for n, p in parts) / A
    y = sum(n * p.A * p.y_bar for n, p in parts) / A
    return Inertia(
        A,
        x,
        y,
        sum(n * (p.I_h + p.A * (p.y_bar - y) ** 2) for n, p in parts),
        sum(n * (p.I_v + p.A * (p.x_bar - x) ** 2) for n, p in parts),
        sum(n * (p.I_hv + p.A * (p.x_bar - x) * (p.y_bar - y)) for n, p in parts),
    )


@pytest.mark.parametrize(
    ("shape", "tau"),
    [
        (rectangle(b=0.05, h=0.1), 3.0e6),
        (circle(d=0.08), 2.65258e6),
        # 2 V/A is the limit of a thin wall; with (R² + R r + r²)/(R² + r²) 4/3 V/A it is exact
        (tube(d=0.102, t=0.002), 4e4 / 3.0 * (0.051**2 + 0.051 * 0.049 + 0.049**2) / (0.051**2 + 0.049**2)
         / (math.pi * (0.051**2 - 0.049**2))),
    ],
)  # fmt: skip
def test_basic_sections(shape: Shape, tau: float) -> None:
    """SH-BASIC, closed forms; largest at mid-height. The tube's thin-wall value is checked with the walls."""
    extreme = of_one(shape.outline, ShearForces(V=1e4)).profile.extreme
    assert extreme.tau == pytest.approx(tau, rel=1e-4)
    assert extreme.level == pytest.approx(0.0, abs=1e-9)


def test_the_thin_tube_of_the_basic_case() -> None:
    """SH-BASIC (c): 31.831 N/mm² is 2 V/A of the mid-line; the outline of 2 mm on 50 mm is 0.027 % off."""
    found = of_one(tube(d=0.102, t=0.002).outline, ShearForces(V=1e4)).profile.extreme.tau
    assert found == pytest.approx(31.831e6, rel=5e-4)


def test_a_welded_i_section() -> None:
    """SH-GERE-I: Gere & Goodno, Mechanics of Materials, 7th ed., example 5-14 (from memory)."""
    shape = i_shape(h=0.320, b=0.165, t_f=0.015, t_w=0.0075)
    assert section_properties(shape.outline).I_h == pytest.approx(130450000e-12, rel=0.0005)
    level = of_one(shape.outline, ShearForces(V=45e3))
    assert level.profile.extreme.tau == pytest.approx(21.0e6, rel=0.00262)
    assert level.one(0.145, above=False).tau == pytest.approx(17.4e6, rel=0.00316)
    # in the flange the same flow is spread over its whole width
    assert level.one(0.145).tau == pytest.approx(17.4e6 * 7.5 / 165.0, rel=0.00316)
    assert level.one(0.145).b == pytest.approx(0.165)


def test_a_t_beam() -> None:
    """SH-GERE-T: Gere & Goodno, Mechanics of Materials, 7th ed., example 5-15 (from memory)."""
    shape = tee(h=8 * INCH, b=4 * INCH, t_w=INCH, t_f=INCH)
    section = section_properties(shape.outline)
    assert section.c_top / INCH == pytest.approx(3.045, rel=0.0005)
    assert section.I_h / INCH**4 == pytest.approx(69.65, rel=0.0005)
    level = of_one(shape.outline, ShearForces(V=10000 * LBF))
    assert level.one(3 * INCH, above=False).tau / PSI == pytest.approx(1460, rel=0.00377)
    assert level.profile.extreme.tau / PSI == pytest.approx(1760, rel=0.00313)
    assert level.profile.extreme.level == pytest.approx(section.y_bar)


def test_nails_between_planks() -> None:
    """SH-BJ-NAILS: Beer & Johnston, Mechanics of Materials, example 6.01 (from memory)."""
    flange = rectangle(b=0.1, h=0.02).outline
    pieces = [
        Piece("top", (flange.placed(0.0, 0.06),)),
        Piece("web", (rectangle(b=0.02, h=0.1).outline,)),
        Piece("bottom", (flange.placed(0.0, -0.06),)),
    ]
    section = transformed(pieces)
    assert section.I_h == pytest.approx(16200000e-12, rel=0.0005)
    shear = ShearForces(V=500.0)
    for piece in (pieces[0], pieces[2]):
        q = abs(gain(section, shear, piece))
        assert q == pytest.approx(3704.0, rel=0.0005)
        assert q * 0.025 == pytest.approx(92.6, rel=0.000594)
        assert joint_residual(section, shear, piece, q).holds
    assert gain(section, shear, pieces[1]) == pytest.approx(0.0, abs=1e-9)
    assert not joint_residual(section, shear, pieces[0], 3704.0).holds


TRIANGLE = polygon(points=[(0.0, 0.0), (0.12, 0.0), (0.06, 0.2)]).outline


def test_a_triangle_has_its_largest_shear_at_mid_height() -> None:
    """3/2 V/A at mid-height, not at the centroid (Timoshenko, Strength of Materials, from memory)."""
    profile = of_one(TRIANGLE, ShearForces(V=1e3)).profile
    assert profile.extreme.tau == pytest.approx(1.5e3 / 0.012, rel=1e-12)
    assert profile.extreme.level == pytest.approx(0.1, rel=1e-9)
    assert profile.values.tau[[0, -1]] == pytest.approx(0.0, abs=1e-9)  # a tip carries nothing


def test_flow_is_the_integral_of_the_stress_rate_above_the_cut() -> None:
    """Against scipy's quadrature of V y b(y)/I over a triangle."""
    section, level = section_properties(TRIANGLE), of_one(TRIANGLE, ShearForces(V=1e3))
    for height in (0.03, 0.0666, 0.15):
        first = quad(lambda y: (y - section.y_bar) * 0.12 * (1.0 - y / 0.2), height, 0.2)[0]
        cut = level.one(height)
        assert first == pytest.approx(cut.S, rel=1e-10)
        assert cut.q == pytest.approx(1e3 * first / section.I_h, rel=1e-10)
        assert cut.b == pytest.approx(0.12 * (1.0 - height / 0.2), rel=1e-12)


def test_lateral_shear_is_vertical_shear_of_the_section_on_its_side() -> None:
    heel = angle(h=0.15, b=0.1, t=0.012, r_1=0.012, r_2=0.006)
    upright = of_one(heel.outline, ShearForces(V_lat=2e3), "upright").profile
    turned = heel.placed(turned=0.5 * math.pi).outline  # what was right is above, and V_lat points down: -V
    level = of_one(turned, ShearForces(V=2e3)).profile
    assert upright.values.q == pytest.approx(level.values.q, rel=1e-9, abs=1e-6)
    assert upright.extreme.tau == pytest.approx(level.extreme.tau, rel=1e-9)


def test_layers_of_two_materials() -> None:
    """A timber web under a steel plate: q = V S/I and τ = q/b, with S and I transformed to timber, n = 20."""
    timber = Piece("web", (rectangle(b=0.1, h=0.2).outline,))
    plate = Piece("plate", (rectangle(b=0.1, h=0.01).outline.placed(0.0, 0.105),), Law(20.0))
    section = transformed([timber, plate])
    y_bar = 20.0 * 0.001 * 0.105 / (0.02 + 0.02)
    I_h = 0.1 * 0.2**3 / 12 + 0.02 * y_bar**2 + 20.0 * (0.1 * 0.01**3 / 12 + 0.001 * (0.105 - y_bar) ** 2)
    shear = ShearForces(V=5e3)
    level = cuts("level", section, shear, [timber, plate])
    q = 5e3 * 20.0 * 0.001 * (0.105 - y_bar) / I_h
    below, above = level.one(0.1, above=False), level.one(0.1)
    assert (below.q, above.q) == pytest.approx((q, q), rel=1e-12)
    assert (below.tau, above.tau) == pytest.approx((q / 0.1, q / 0.1), rel=1e-12)  # the same width
    assert (below.b, above.b) == pytest.approx((0.1, 2.0))
    assert abs(gain(section, shear, plate)) == pytest.approx(q, rel=1e-12)
    upright = cuts("upright", section, shear, [timber, plate])
    assert all(residual.holds for residual in cut_residuals(level, upright, shear))
    assert flow_residual(level, section, shear, [timber, plate]).holds


def test_parts_side_by_side_share_by_stiffness() -> None:
    """A flitch of plates of equal depth: each carries its share of V, 1.5 V_i/A_i at mid-height."""
    oak = Piece("oak", tuple(rectangle(b=0.05, h=0.2).outline.placed(x, 0.0) for x in (-0.03, 0.03)))
    steel = Piece("steel", (rectangle(b=0.01, h=0.2).outline,), Law(20.0))
    level = cuts("level", transformed([oak, steel]), ShearForces(V=12e3), [oak, steel])
    of_steel = 12e3 * 0.2 / (0.2 + 0.1)  # EA: 20 · 0.01 against 0.1
    assert level.profile.extreme.tau == pytest.approx(1.5 * of_steel / 0.002, rel=1e-12)
    assert level.profile.extreme.level == 0.0


def test_bars_add_their_force_to_the_flow() -> None:
    """Two bars n = 10, less the concrete they displace, far from the axis: S grows by 9 A_s y."""
    concrete = Piece("", (rectangle(b=0.3, h=0.5).outline,))
    bars = [Bars(name, np.array([[0.0, y]]), 1e-3, Law(10.0), Law()) for name, y in (("t", -0.2), ("c", 0.2))]
    plain = transformed([concrete])
    section = replace(plain, area=plain.A + 0.018, I_h=plain.I_h + 0.018 * 0.04)
    shear = ShearForces(V=1e5)
    level, upright = (cuts(way, section, shear, [concrete], bars) for way in ("level", "upright"))
    first = level.one(0.0).S
    assert first == pytest.approx(0.3 * 0.25**2 / 2.0 + 0.009 * 0.2, rel=1e-12)
    jump = level.one(0.2, above=False).q - level.one(0.2).q
    assert jump == pytest.approx(1e5 * 0.009 * 0.2 / section.I_h, rel=1e-9)
    assert all(residual.holds for residual in cut_residuals(level, upright, shear))


def test_flow_across_a_gap_has_no_stress() -> None:
    flange = rectangle(b=0.1, h=0.02).outline
    apart = Piece("", (flange.placed(0.0, 0.1), flange.placed(0.0, -0.1)))
    level = cuts("level", transformed([apart]), ShearForces(V=1e3), [apart])
    inside = level.at(np.array([0.0, 0.05]))
    assert np.isnan(inside.tau).all()
    assert np.all(inside.q > 0.0)
    assert math.isfinite(level.profile.extreme.tau)


def test_the_profile_shows_both_widths_where_a_flange_ends() -> None:
    profile = of_one(i_shape(h=0.3, b=0.15, t_w=0.01, t_f=0.02).outline, ShearForces(V=1e3)).profile
    values = profile.values
    twice = values.level[:-1][np.diff(values.level) == 0.0]
    assert twice == pytest.approx([-0.13, 0.13])
    at = np.flatnonzero(np.isclose(values.level, 0.13))
    assert values.b[at] == pytest.approx([0.01, 0.15])
    assert values.q[at[0]] == pytest.approx(values.q[at[1]])
    assert len(values.level) >= 48
    assert profile.exact


shears = st.builds(ShearForces, V=st.integers(-1000, 1000), V_lat=st.integers(-1000, 1000))


@given(outlines(), shears)
@settings(max_examples=50, deadline=None)
def test_random_sections_return_their_shear_forces(part: Outline, shear: ShearForces) -> None:
    """Also where I_hv is not zero, and V alone brings flow across upright cuts."""
    section, pieces = section_properties(part), [Piece("", (part,))]
    level, upright = (cuts(way, section, shear, pieces) for way in ("level", "upright"))
    for residual in (*cut_residuals(level, upright, shear), flow_residual(level, section, shear, pieces)):
        assert residual.holds, residual


@given(outlines(), st.integers(0, 50))
@settings(max_examples=30, deadline=None)
def test_no_drawn_stress_exceeds_the_extreme(part: Outline, share: int) -> None:
    level = of_one(part, ShearForces(V=1e3))
    tau = np.abs(level.profile.values.tau)
    most = abs(level.profile.extreme.tau)
    assert np.nanmax(tau) <= most * (1.0 + 3e-5)
    height = part.bounds.bottom + part.bounds.height * (0.01 + 0.98 * share / 50.0)
    assert abs(level.one(height).tau) <= most * (1.0 + 3e-5)


@given(outlines(), shears)
@settings(max_examples=30, deadline=None)
def test_mirroring_turns_the_sign_of_lateral_shear_only(part: Outline, shear: ShearForces) -> None:
    here = of_one(part, shear).profile
    there = of_one(part.mirrored(), replace(shear, V_lat=-shear.V_lat)).profile
    size = float(np.abs(here.values.q).max())
    assert there.values.q == pytest.approx(here.values.q, abs=1e-9 * size + 1e-12)


@pytest.mark.parametrize("spoil", [1.000001, 0.999])
def test_a_flow_that_is_off_is_found(spoil: float) -> None:
    part, shear = angle(h=0.15, b=0.1, t=0.01).outline, ShearForces(V=1e4)
    level, upright = of_one(part, shear), of_one(part, shear, "upright")
    spoiled = replace(level, g_x=level.g_x * spoil, g_y=level.g_y * spoil)
    assert not cut_residuals(spoiled, upright, shear)[0].holds


def test_very_many_corners_keep_the_levels_that_matter() -> None:
    """A toothed I of 40,000 corners: V S/(I b) of the smooth one within a thousandth; V comes back."""
    y = np.linspace(-0.14, 0.14, 20_001)
    teeth = 0.005 + 1e-6 * (np.arange(len(y)) % 2)
    right = np.column_stack((teeth, y))
    half = np.concatenate(([(0.1, -0.15), (0.1, -0.14)], right, [(0.1, 0.14), (0.1, 0.15)]))
    ring = np.concatenate((half, (half * [-1.0, 1.0])[::-1]))
    shear = ShearForces(V=1e4)
    level, upright = (of_one(outline(ring), shear, way) for way in ("level", "upright"))
    smooth = of_one(i_shape(h=0.3, b=0.2, t_w=0.01, t_f=0.01).outline, shear).profile.extreme.tau
    assert not level.exact
    assert level.profile.extreme.tau == pytest.approx(smooth, rel=1e-3)
    assert {-0.14, 0.14} <= set(level.profile.bands.round(12).tolist())
    assert all(residual.holds for residual in cut_residuals(level, upright, shear))

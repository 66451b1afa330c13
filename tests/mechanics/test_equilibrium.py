"""Planes of strain in equilibrium: closed forms, published examples, quadrature, random sections."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.optimize import brentq

from calcgen.mechanics.equilibrium import (
    EquilibriumError,
    curvature_ratio,
    elastic_plane,
    limit_factor,
    solve,
    yield_factor,
)
from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.resultants import field_forces
from calcgen.mechanics.second_route.field import field_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import circle, i_shape, rectangle, tee
from calcgen.mechanics.stress import Forces, elastic_stress
from tests.mechanics.strategies import forces, outlines

IN, KIP, PSI = 0.0254, 4448.2216152605, 6894.757293168
MPA = 1e6
F_Y = 235 * MPA
B, H = 0.1, 0.3
NO_TENSION = Law(tension=0.0)
STEEL = Law(tension=F_Y, compression=F_Y)


def piece(part: Outline, law: Law) -> tuple[Piece, ...]:
    return (Piece("", (part,), law),)


BAR = rectangle(b=B, h=H).outline
M_PL = F_Y * B * H * H / 4


# ---- elastic–plastic


@pytest.mark.parametrize("share", [0.7, 0.9, 0.999, 0.999999])
def test_elastic_core_of_a_rectangle(share: float) -> None:
    """Closed form: M = M_pl (1 - (core/h)²/3) and κ/κ_y = h/core, with κ_y of first yield at 2/3 M_pl."""
    found = solve(piece(BAR, STEEL), (), Forces(M=share * M_PL)).field
    core = H * math.sqrt(3 * (1 - share))
    assert found.elastic_core() == pytest.approx(core, rel=1e-9)
    elastic = elastic_plane(found.pieces, (), Forces(M=share * M_PL))
    assert curvature_ratio(found, elastic) == pytest.approx((H / core) / (1.5 * share), rel=1e-9)


def test_residual_stress_of_a_rectangle() -> None:
    """Closed form: after full plasticity nearly, the fibres keep f_y (1 - 1.5 M/M_pl), the axis up to f_y."""
    applied = Forces(M=0.999999 * M_PL)
    loaded = solve(piece(BAR, STEEL), (), applied).field
    left = loaded.after_unloading(elastic_plane(loaded.pieces, (), applied))
    core, outer = H * math.sqrt(3e-6), 1.5 * 0.999999
    most, least = left.extremes()
    assert most.value == pytest.approx(F_Y * (1 - outer * core / H), rel=1e-9)
    assert (most.x, most.y) == pytest.approx((-B / 2, -core / 2), abs=1e-9)
    assert least.value == pytest.approx(-most.value, rel=1e-9)
    assert left.at_bottom() == pytest.approx(F_Y * (1 - outer), rel=1e-9)
    assert left.at_top() == pytest.approx(-F_Y * (1 - outer), rel=1e-9)
    assert abs(field_forces(left).M) <= 1e-12 * M_PL
    assert all(residual.holds for residual in field_residuals(left, Forces()))


def test_a_rectangle_that_yields_under_axial_force_and_moment() -> None:
    """Against scipy: the two conditions for strain at the centre and curvature, by quadrature."""
    applied = Forces(N=0.3 * F_Y * B * H, M=0.8 * M_PL)
    found = solve(piece(BAR, STEEL), (), applied).field
    kinks = [part for part in found.profile().parts[0].heights if abs(part) < H / 2]

    def stress(y: float) -> float:
        return float(np.clip(found.plane.sigma_0 + found.plane.g_y * y, -F_Y, F_Y))

    axial, _ = quad(lambda y: B * stress(y), -H / 2, H / 2, points=kinks)
    moment, _ = quad(lambda y: -B * y * stress(y), -H / 2, H / 2, points=kinks)
    assert (axial, moment) == pytest.approx((applied.N, applied.M), rel=1e-9)


@pytest.mark.parametrize("over", [1 + 1e-6, 1.3, 1e6])
def test_beyond_the_plastic_moment_the_limit_is_said(over: float) -> None:
    with pytest.raises(EquilibriumError) as fault:
        solve(piece(BAR, STEEL), (), Forces(M=over * M_PL))
    assert fault.value.reason == "limit"
    assert fault.value.limit == pytest.approx(1.0 / over, rel=1e-9)


@pytest.mark.parametrize("n", [0.0, 0.2, -0.5, 0.9])
def test_limit_of_a_rectangle_under_axial_force_and_moment(n: float) -> None:
    """From memory: Chen & Atsuta, Theory of Beam-Columns; M/M_pl = 1 - (N/N_pl)² for a rectangle."""
    at_limit = Forces(N=n * F_Y * B * H, M=M_PL * (1 - n * n))
    assert limit_factor(piece(BAR, STEEL), (), at_limit) == pytest.approx(1.0, rel=1e-9)


# ---- no tension


@pytest.mark.parametrize("e", [0.06, 0.1, 0.14, 0.1499])
def test_no_tension_rectangle(e: float) -> None:
    """Closed form: the zone x = 3 (h/2 - e) and the edge stress 2N/(b x), for h/6 < e < h/2."""
    found = solve(piece(BAR, NO_TENSION), (), Forces(N=-100e3, M=100e3 * e)).field
    depth = 3 * (H / 2 - e)
    axis = found.neutral_axis
    assert axis is not None
    assert axis.above == pytest.approx(H / 2 - depth, rel=1e-8)
    most, least = found.extremes()
    assert least.value == pytest.approx(-2 * 100e3 / (B * depth), rel=1e-8)
    assert (most.value, least.y, most.y) == (0.0, H / 2, -H / 2)
    assert found.elastic_core() == pytest.approx(depth, rel=1e-8)


def test_inside_the_kern_no_tension_is_elastic() -> None:
    solution = solve(piece(BAR, NO_TENSION), (), Forces(N=-100e3, M=100e3 * 0.049))
    assert solution.iterations == 0


@pytest.mark.parametrize("e", [0.15, 0.1501, 0.4])
def test_a_resultant_outside_the_section_finds_no_equilibrium(e: float) -> None:
    with pytest.raises(EquilibriumError) as fault:
        solve(piece(BAR, NO_TENSION), (), Forces(N=-100e3, M=100e3 * e))
    assert (fault.value.reason, fault.value.limit) == ("resultant", 0.0)
    with pytest.raises(EquilibriumError):
        solve(piece(BAR, NO_TENSION), (), Forces(N=100e3))


@pytest.mark.parametrize("e", [0.08, 0.12, 0.16])
def test_no_tension_circle(e: float) -> None:
    """Against scipy: the axis y_0 for which quadratures of ∫(y - y_0) dA and of its moment have ratio e."""
    r = 0.2

    def moments(y_0: float) -> tuple[float, float]:
        def width(y: float) -> float:
            return 2 * math.sqrt(max(r * r - y * y, 0.0))

        return (
            quad(lambda y: width(y) * (y - y_0), y_0, r, epsabs=1e-13)[0],
            quad(lambda y: width(y) * (y - y_0) * y, y_0, r, epsabs=1e-13)[0],
        )

    y_0 = brentq(lambda level: moments(level)[1] - e * moments(level)[0], -r, 0.95 * r, xtol=1e-13)
    found = solve(piece(circle(d=2 * r).outline, NO_TENSION), (), Forces(N=-1e5, M=1e5 * e)).field
    axis = found.neutral_axis
    assert axis is not None
    assert axis.above == pytest.approx(y_0, abs=1e-4 * r)  # the outline is a polygon of the circle's area
    assert found.extremes()[1].value == pytest.approx(-1e5 * (r - y_0) / moments(y_0)[0], rel=1e-3)


# ---- cracked


def test_cracked_slab() -> None:
    """From memory: Beer & Johnston, Mechanics of Materials, Sample Problem 4.4; 40 kip·in on a 12 in strip.

    The figures of the text carry its rounding of n A_s; the tolerances are those of its printed digits.
    """
    strip = rectangle(b=12 * IN, h=5 * IN).outline  # 4 in to the bars, 1 in of cover, which is cracked
    bars = Bars(
        "bars",
        np.array([[-3.0, -1.5], [3.0, -1.5]]) * IN,
        math.pi / 4 * (0.625 * IN) ** 2,
        Law(29e6 / 3.6e6),
        NO_TENSION,
    )
    found = solve(piece(strip, NO_TENSION), (bars,), Forces(M=40 * KIP * IN)).field
    x = found.elastic_core(found.pieces[0])
    assert x is not None
    assert x == pytest.approx(1.45 * IN, rel=3.79e-3)
    most, least = found.extremes()
    assert (most.part, least.part) == ("bars", "")
    assert -least.value / (1e3 * PSI) == pytest.approx(1.306, rel=1.7e-3)
    assert most.value / (1e3 * PSI) == pytest.approx(18.52, rel=1.12e-3)
    # I_cr = M x/σ_c
    assert 40 * KIP * IN * x / -least.value / IN**4 == pytest.approx(44.4, rel=1.82e-3)


def test_cracked_beam_of_the_american_code() -> None:
    """Closed form (ACI 318-19, 19.2.2 and 24.2.3): n = 29e6/57000√f'c, kd and I_cr; b = 12, d = 17.5 in."""
    n = 29e6 / (57000 * math.sqrt(4000.0))
    beam = rectangle(b=12 * IN, h=20 * IN).outline
    bars = Bars("bars", np.array([[x, -7.5] for x in (-4, -1, 1, 4)]) * IN, 0.79 * IN**2, Law(n), NO_TENSION)
    found = solve(piece(beam, NO_TENSION), (bars,), Forces(M=100 * KIP * 12 * IN)).field
    kd = found.elastic_core(found.pieces[0])
    assert kd is not None
    assert kd / IN == pytest.approx(6.74899, rel=5e-5)
    assert 100 * KIP * 12 * IN / -found.plane.g_y / IN**4 == pytest.approx(4167.82, rel=5e-5)


def test_cracked_tee_with_the_axis_in_its_web() -> None:
    """Against scipy: the root of the first moment of the cracked section, without the displaced concrete."""
    n, area, d = 8.0, 3e-3, 0.55
    outline = tee(h=0.6, b=0.5, t_w=0.2, t_f=0.08).outline

    def first_moment(x: float) -> float:
        return 0.5 * 0.08 * (x - 0.04) + 0.2 * (x - 0.08) ** 2 / 2 - n * area * (d - x)

    x = brentq(first_moment, 0.08, d)
    top = outline.bounds.top
    bars = Bars("bars", np.array([[0.0, top - d]]), area, Law(n), NO_TENSION)
    found = solve(piece(outline, NO_TENSION), (bars,), Forces(M=150e3)).field
    assert found.elastic_core(found.pieces[0]) == pytest.approx(x, rel=1e-9)


# ---- any section, any forces


@given(outlines(), forces, st.sampled_from([1e6, 30e6, 300e6]), st.floats(0.1, 1.0))
@settings(max_examples=40, deadline=None)
def test_random_sections_return_random_forces_up_to_their_limit(
    part: Outline, applied: Forces, strength: float, ratio: float
) -> None:
    pieces = piece(part, Law(2.0, strength, ratio * strength))
    limit = limit_factor(pieces, (), applied)
    for share in (0.5, 0.999, 0.999999):
        scale = share * limit if math.isfinite(limit) else 1.0
        scaled = Forces(scale * applied.N, scale * applied.M, scale * applied.M_lat)
        found = solve(pieces, (), scaled)
        assert all(residual.holds for residual in field_residuals(found.field, scaled))
    if math.isfinite(limit):
        beyond = 1.001 * limit
        with pytest.raises(EquilibriumError) as fault:
            solve(pieces, (), Forces(beyond * applied.N, beyond * applied.M, beyond * applied.M_lat))
        assert fault.value.limit == pytest.approx(1 / 1.001, rel=1e-8)


@given(outlines(), st.lists(st.floats(0.0, 1.0), min_size=30, max_size=30))
@settings(max_examples=40, deadline=None)
def test_a_push_anywhere_within_the_corners_finds_a_no_tension_field(
    part: Outline, weights: list[float]
) -> None:
    n = len(part.exterior)
    share = np.array(weights[:n]) + 0.01
    x, y = (share / share.sum()) @ part.exterior
    section = section_properties(part)
    applied = Forces(-1e5, 1e5 * (y - section.y_bar), -1e5 * (x - section.x_bar))
    found = solve(piece(part, NO_TENSION), (), applied).field
    assert all(residual.holds for residual in field_residuals(found, applied))


@given(outlines(), forces)
@settings(max_examples=30, deadline=None)
def test_without_limits_it_is_the_elastic_stress(part: Outline, applied: Forces) -> None:
    solution = solve(piece(part, Law()), (), applied)
    assert solution.iterations == 0
    assert solution.field.plane == elastic_stress(section_properties(part), applied)


@given(outlines(), forces, st.floats(0.0, 6.0))
@settings(max_examples=25, deadline=None)
def test_turning_section_and_moments_turns_the_field(part: Outline, applied: Forces, angle: float) -> None:
    cos, sin = math.cos(angle), math.sin(angle)
    pieces = piece(part, Law(1.0, 100 * MPA, 60 * MPA))
    limit = limit_factor(pieces, (), applied)
    scale = 0.9 * limit if math.isfinite(limit) else 1.0
    here = Forces(scale * applied.N, scale * applied.M, scale * applied.M_lat)
    # (M_lat, -M) = ∫σ (x, y) dA turns as a vector
    there = Forces(here.N, here.M * cos - here.M_lat * sin, here.M_lat * cos + here.M * sin)
    first = solve(pieces, (), here).field.plane
    second = solve(piece(part.turned(angle), pieces[0].law), (), there).field.plane
    size = math.hypot(first.g_x, first.g_y)
    turned = (first.g_x * cos - first.g_y * sin, first.g_x * sin + first.g_y * cos)
    assert (second.g_x, second.g_y) == pytest.approx(turned, abs=1e-8 * size)
    assert second.sigma_0 == pytest.approx(first.sigma_0, abs=1e-8 * (abs(first.sigma_0) + size * 0.5))


@pytest.mark.parametrize("unit", [1e-6, 1e-3, 1.0, 1e3])
@pytest.mark.parametrize("force", [1e-9, 1.0, 1e12])
def test_units_do_not_matter(unit: float, force: float) -> None:
    """A rectangle of 0.1 × 0.3 units at 0.9 of its plastic moment has the same core in any unit."""
    part = rectangle(b=B * unit, h=H * unit).outline
    strength = force / unit**2
    applied = Forces(M=0.9 * strength * B * H * H / 4 * unit**3)
    found = solve(piece(part, Law(1.0, strength, strength)), (), applied).field
    assert found.elastic_core() == pytest.approx(H * unit * math.sqrt(0.3), rel=1e-9)


def test_no_forces_and_forces_at_another_point() -> None:
    assert solve(piece(BAR, STEEL), (), Forces()).field.plane.uniform
    below = solve(piece(BAR, STEEL), (), Forces(N=50e3), about=(0.0, -0.05)).field
    moment = field_forces(below, about=(0.0, 0.0)).M
    assert moment == pytest.approx(50e3 * 0.05)
    assert below.plane.at(np.zeros((1, 2)))[0] == pytest.approx(50e3 / (B * H))


def test_a_row_of_bars_alone_has_no_stiffness() -> None:
    bars = Bars("bars", np.array([[-0.1, 0.0], [0.1, 0.0]]), 1e-4, Law())
    with pytest.raises(EquilibriumError) as fault:
        solve(piece(BAR, Law(0.0)), (bars,), Forces(N=1e3))
    assert fault.value.reason == "stiffness"


def test_first_yield_of_an_i_section() -> None:
    part = i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline
    pieces = piece(part, STEEL)
    elastic = StressField(elastic_plane(pieces, (), Forces(M=1e3)), pieces)
    assert yield_factor(elastic) * 1e3 == pytest.approx(F_Y * section_properties(part).W_el_h, rel=1e-12)
    assert yield_factor(StressField(elastic.plane, piece(part, NO_TENSION))) == 0.0
    assert yield_factor(StressField(elastic.plane, piece(part, Law()))) == math.inf

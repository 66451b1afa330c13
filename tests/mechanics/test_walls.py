"""Thin walls: closed forms of handbooks, cells, flows that return their forces, what placing leaves alone."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from calcgen.mechanics.arrays import Point
from calcgen.mechanics.second_route.shear import torsion_residuals, wall_residuals
from calcgen.mechanics.shapes import (
    Shape,
    angle,
    box,
    channel,
    i_shape,
    strip,
    tee,
    tube,
    unequal_i_shape,
    zed,
)
from calcgen.mechanics.shear import ShearForces, stress_rate
from calcgen.mechanics.wall_shear import wall_flow, wall_torsion
from calcgen.mechanics.walls import Wall, graph, wall_section

INCH, KIP = 0.0254, 4448.2216152605


def walls_along(points: Sequence[Point], t: float) -> list[Wall]:
    return [Wall(a, b, t) for a, b in pairwise(points)]


def arc(radius: float, half_angle: float, n: int) -> list[Point]:
    """Points on a circle about the origin, open to the right."""
    angles = np.linspace(math.pi - half_angle, math.pi + half_angle, n + 1)
    return [(radius * math.cos(a), radius * math.sin(a)) for a in angles.tolist()]


# name, walls, shear centre, I_t, I_w: closed forms for the mid-line, from memory of handbook tables (Roark,
# Formulas for Stress and Strain, table of torsional properties; Pilkey, Formulas for Stress, Strain and
# Structural Matrices). b and h are mid-line sizes; None where the table has no entry.
B, H, T = 0.09, 0.19, 0.01
I_TOP, I_BOTTOM = 0.02 * 0.1**3 / 12.0, 0.01 * 0.2**3 / 12.0
OPEN: list[tuple[str, Shape, Point, float, float]] = [
    (
        "channel",
        channel(h=0.2, b=B + 0.005, t_w=T, t_f=T),
        (-0.5 * (B + 0.005) + 0.005 - 3.0 * B**2 / (H + 6.0 * B), 0.0),
        (2.0 * B + H) * T**3 / 3.0,
        B**3 * H**2 * T * (3.0 * B + 2.0 * H) / (12.0 * (6.0 * B + H)),
    ),
    (
        "channel with thick flanges",
        channel(h=0.2, b=0.094, t_w=0.008, t_f=0.016),
        (-0.047 + 0.004 - 3.0 * 0.09**2 * 0.016 / (6.0 * 0.09 * 0.016 + 0.184 * 0.008), 0.0),
        (0.18 * 0.016**3 + 0.184 * 0.008**3) / 3.0,
        0.016 * 0.09**3 * 0.184**2 / 12.0
        * (3.0 * 0.09 * 0.016 + 2.0 * 0.184 * 0.008) / (6.0 * 0.09 * 0.016 + 0.184 * 0.008),
    ),
    (
        "I",
        i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01),
        (0.0, 0.0),
        (0.3 * 0.01**3 + 0.29 * 0.007**3) / 3.0,
        0.01 * 0.15**3 / 12.0 * 0.29**2 / 2.0,
    ),
    (
        "I with unequal flanges",
        unequal_i_shape(h=0.315, b_t=0.1, t_t=0.02, b_b=0.2, t_b=0.01, t_w=0.008),
        (0.0, -0.1575 + 0.005 + 0.3 * I_TOP / (I_TOP + I_BOTTOM)),
        (0.1 * 0.02**3 + 0.2 * 0.01**3 + 0.3 * 0.008**3) / 3.0,
        0.3**2 * I_TOP * I_BOTTOM / (I_TOP + I_BOTTOM),
    ),
    (
        "zed",
        zed(h=0.2, b=B + 0.005, t=T),
        (0.0, 0.0),
        (2.0 * B + H) * T**3 / 3.0,
        H**2 * B**3 * T * (B + 2.0 * H) / (12.0 * (2.0 * B + H)),
    ),
    ("angle", angle(h=0.2, b=0.1, t=T), (-0.045, -0.095), (0.195 + 0.095) * T**3 / 3.0, 0.0),
    ("tee", tee(h=0.2, b=0.1, t_w=T, t_f=T), (0.0, 0.095), (0.195 + 0.1) * T**3 / 3.0, 0.0),
    ("flat", strip(t=T, points=[(0.0, 0.0), (0.4, 0.3)]), (0.2, 0.15), 0.5 * T**3 / 3.0, 0.0),
]  # fmt: skip


@pytest.mark.parametrize(("shape", "centre", "I_t", "I_w"), [c[1:] for c in OPEN], ids=[c[0] for c in OPEN])
def test_open_sections_against_closed_forms(shape: Shape, centre: Point, I_t: float, I_w: float) -> None:
    found = wall_section(shape.walls)
    assert (found.x_s, found.y_s) == pytest.approx(centre, abs=1e-12)
    assert found.I_t == pytest.approx(I_t, rel=1e-12)
    assert found.I_w == pytest.approx(I_w, rel=1e-12)
    assert not found.closed
    assert found.torsion_method == "mid-line formula Σ l t³/3, open section"


def test_open_arcs_against_closed_forms() -> None:
    """Shear centre 2R and I_w of a slit tube, 4R/π of half a ring, from their centre, away from the opening.

    From memory of Timoshenko's Strength of Materials; 800 chords leave 1e-4 of relative error.
    """
    R, t = 0.1, 0.002
    slit = wall_section(walls_along(arc(R, math.pi * (1.0 - 1e-6), 800), t))
    assert slit.x_s == pytest.approx(-2.0 * R, rel=1e-4)
    assert slit.I_w == pytest.approx(2.0 * math.pi * t * R**5 * (math.pi**2 / 3.0 - 2.0), rel=1e-4)
    half = wall_section(walls_along(arc(R, 0.5 * math.pi, 800), t))
    assert half.x_s == pytest.approx(-4.0 * R / math.pi, rel=1e-4)


def test_closed_sections_against_bredt() -> None:
    """Square corners, round corners as EN 10210-2 Annex A takes them (2 K A_h of its formula), and a tube."""
    sharp = wall_section(box(b=0.1, h=0.2, t=0.01).walls)
    assert sharp.I_t == pytest.approx(4.0 * (0.09 * 0.19) ** 2 * 0.01 / (2.0 * (0.09 + 0.19)), rel=1e-12)
    assert sharp.torsion_method == "Bredt's formula on the mid-line, closed section"
    R_c = 0.5 * (0.015 + 0.01)
    h = 2.0 * (0.09 + 0.19) - 2.0 * R_c * (4.0 - math.pi)
    A_h = 0.09 * 0.19 - R_c**2 * (4.0 - math.pi)
    assert wall_section(box(b=0.1, h=0.2, t=0.01, r_o=0.015).walls).I_t == pytest.approx(
        4.0 * A_h**2 * 0.01 / h, rel=1e-4
    )
    ring = wall_section(tube(d=0.102, t=0.002).walls)
    assert ring.I_t == pytest.approx(2.0 * math.pi * 0.05**3 * 0.002, rel=1e-4)
    assert (ring.x_s, ring.y_s) == pytest.approx((0.0, 0.0), abs=1e-9)


def two_cells(a_1: float, a_2: float, h: float, t: float, t_m: float) -> list[Wall]:
    """Two boxes side by side that share a web t_m thick."""
    outer = [(0.0, 0.0), (a_1, 0.0), (a_1 + a_2, 0.0), (a_1 + a_2, h), (a_1, h), (0.0, h), (0.0, 0.0)]
    return [*walls_along(outer, t), Wall((a_1, 0.0), (a_1, h), t_m)]


@pytest.mark.parametrize("sizes", [(0.2, 0.1, 0.1, 0.004, 0.008), (0.3, 0.25, 0.2, 0.005, 0.002)])
def test_two_cells_against_the_solved_cell_equations(sizes: tuple[float, ...]) -> None:
    """J = 4 (A_1² δ_22 + 2 A_1 A_2 δ_12 + A_2² δ_11)/(δ_11 δ_22 - δ_12²), δ = ∮ds/t of and between cells.

    Boresi and Schmidt, Advanced Mechanics of Materials (from memory).
    """
    a_1, a_2, h, t, t_m = sizes
    A_1, A_2, shared = a_1 * h, a_2 * h, h / t_m
    d_1, d_2 = (2.0 * a_1 + h) / t + shared, (2.0 * a_2 + h) / t + shared
    J = 4.0 * (A_1**2 * d_2 + 2.0 * A_1 * A_2 * shared + A_2**2 * d_1) / (d_1 * d_2 - shared**2)
    found = wall_section(two_cells(*sizes))
    assert found.I_t == pytest.approx(J, rel=1e-12)
    assert found.kind == "closed section of 2 cells"


def test_the_web_between_equal_cells_does_not_work_in_torsion() -> None:
    a, t = 0.1, 0.004
    found = wall_section(two_cells(a, a, a, t, t))
    assert found.I_t == pytest.approx(8.0 * a**3 * t / 3.0, rel=1e-12)
    assert wall_torsion(found, 1e3).q[-1] == pytest.approx(0.0, abs=1e-9)


def test_a_closed_section_with_fins_adds_them_as_open_walls() -> None:
    square = walls_along([(0.0, 0.0), (0.1, 0.0), (0.1, 0.1), (0.0, 0.1), (0.0, 0.0)], 0.005)
    finned = wall_section([*square, Wall((0.1, 0.0), (0.2, 0.0), 0.006)])
    assert finned.I_t == pytest.approx(0.1**3 * 0.005 + 0.1 * 0.006**3 / 3.0, rel=1e-12)
    assert finned.I_t_cells == pytest.approx(0.1**3 * 0.005, rel=1e-12)
    assert finned.torsion_method.endswith("with Σ l t³/3 of the walls outside the cells, closed section")
    torsion = wall_torsion(finned, 500.0)
    assert torsion.tau_surface.tolist() == pytest.approx([0.0] * 4 + [500.0 * 0.006 / finned.I_t])
    # clockwise on the seen face: against the square's corners, which follow one another counter-clockwise
    assert torsion.q[:4] == pytest.approx(-500.0 * finned.I_t_cells / finned.I_t / (2.0 * 0.01))


def test_a_published_channel() -> None:
    """SC-CHANNEL-BJ: Beer & Johnston, Mechanics of Materials, examples 6.06 and 6.07 (from memory)."""
    shape = channel(h=6.15 * INCH, b=4.075 * INCH, t_w=0.15 * INCH, t_f=0.15 * INCH)
    section = wall_section(shape.walls)
    web = shape.walls[1].start[0]
    assert (web - section.x_s) / INCH == pytest.approx(1.6, rel=0.0011)
    flow = wall_flow(section, ShearForces(V=2.5 * KIP))
    ksi = KIP / INCH**2
    lower, upright, upper = flow.at(np.array([0.0, 0.5, 1.0])) / (0.15 * INCH) / ksi
    assert lower[0] == pytest.approx(0.0, abs=1e-12)
    assert lower[2] == pytest.approx(2.22, rel=0.00248)
    assert upright[1] == pytest.approx(3.06, rel=0.00182)
    assert upper[2] == pytest.approx(0.0, abs=1e-12)
    extreme = flow.greatest_stress
    assert extreme.wall == 1
    assert extreme.u == pytest.approx(0.5)
    assert extreme.tau / ksi == pytest.approx(3.06, rel=0.00182)


def test_flow_goes_in_at_one_flange_and_out_at_the_other() -> None:
    """For V > 0 the seen face has flow up the web of a channel, inwards below, outwards above."""
    flow = wall_flow(wall_section(channel(h=0.2, b=0.1, t_w=0.01, t_f=0.01).walls), ShearForces(V=1e3))
    assert np.all(flow.at(np.array([0.25, 0.5, 0.75])) > 0.0)  # walls run tip, corner, corner, tip
    assert flow.resultant == pytest.approx((0.0, 1e3), abs=1e-9)
    lateral = wall_flow(wall_section(channel(h=0.2, b=0.1, t_w=0.01, t_f=0.01).walls), ShearForces(V_lat=1e3))
    assert lateral.resultant == pytest.approx((-1e3, 0.0), abs=1e-9)


@pytest.mark.parametrize("shear", [ShearForces(V=1e3), ShearForces(V_lat=-2e3), ShearForces(1e3, 3e3)])
def test_flow_is_the_integral_of_the_stress_rate_along_the_path(shear: ShearForces) -> None:
    """A lipped zed against scipy's quadrature of t dσ/dz from its free end."""
    t = 0.003
    points = [(-0.07, 0.18), (-0.07, 0.2), (0.0, 0.2), (0.0, 0.0), (0.06, 0.0), (0.06, 0.03)]
    section = wall_section(walls_along(points, t))
    rate = stress_rate(section.inertia, shear)
    so_far = 0.0
    flow = wall_flow(section, shear).at(np.array([0.4, 1.0]))
    for (a, b), found in zip(pairwise(points), flow.tolist(), strict=True):

        def per_length(u: float, a: Point = a, b: Point = b) -> float:
            place = np.array([[a[0] + u * (b[0] - a[0]), a[1] + u * (b[1] - a[1])]])
            return float(rate.at(place)[0]) * t * math.dist(a, b)

        assert found[0] == pytest.approx(so_far + quad(per_length, 0.0, 0.4)[0], abs=1e-6)
        so_far += quad(per_length, 0.0, 1.0)[0]
        assert found[1] == pytest.approx(so_far, abs=1e-6)


def test_a_box_shares_its_shear_between_both_webs() -> None:
    """By symmetry the flow is zero in the middle of both flanges; largest V S/(2 I) at mid-height."""
    section = wall_section(box(b=0.1, h=0.2, t=0.01).walls)
    flow = wall_flow(section, ShearForces(V=1e4))
    I_h = section.inertia.I_h
    S = 0.09 * 0.01 * 0.095 + 2.0 * 0.095 * 0.01 * 0.0475
    assert abs(flow.greatest_flow.q) == pytest.approx(1e4 * S / (2.0 * I_h), rel=1e-12)
    assert (abs(flow.greatest_flow.x), flow.greatest_flow.y) == pytest.approx((0.045, 0.0), abs=1e-12)


def test_force_across_a_flat_strip_brings_no_flow_along_it() -> None:
    section = wall_section([Wall((0.0, 0.0), (0.1, 0.0), 0.01)])
    assert section.in_one_line
    assert np.all(wall_flow(section, ShearForces(V=1e3)).coefficients == 0.0)
    along = wall_flow(section, ShearForces(V_lat=1e3))
    assert along.greatest_stress.tau == pytest.approx(
        -1.5e6
    )  # 1.5 V/A, to the left along a wall to the right


@pytest.mark.parametrize(
    "walls",
    [
        [],
        [Wall((0.0, 0.0), (0.0, 0.0), 0.1)],
        [Wall((0.0, 0.0), (1.0, 0.0), 0.0)],
        [Wall((0.0, 0.0), (1.0, 0.0), 0.1), Wall((2.0, 0.0), (3.0, 0.0), 0.1)],
    ],
)
def test_walls_that_make_no_section_are_a_fault_of_the_program(walls: list[Wall]) -> None:
    with pytest.raises(ValueError, match="wall"):
        graph(walls)


@pytest.mark.parametrize(
    ("spoiled", "found"),
    [
        ({"x_s": 0.001}, {"T"}),  # a shear centre 1 mm off
        ({"scale": 1.000001}, {"V"}),
        ({"around": 1.0}, {"θ_1", "T"}),  # a flow around the cell that twists it
    ],
)
def test_wrong_flows_and_places_are_found(spoiled: dict[str, float], found: set[str]) -> None:
    section, shear = wall_section(box(b=0.1, h=0.2, t=0.01).walls), ShearForces(V=1e4)
    flow = wall_flow(section, shear)
    constant = np.array([spoiled.get("around", 0.0), 0.0, 0.0])
    flow = replace(flow, coefficients=flow.coefficients * spoiled.get("scale", 1.0) + constant)
    section = replace(section, x_s=spoiled.get("x_s", 0.0))
    assert {r.what for r in wall_residuals(section, flow, shear) if not r.holds} == found


def test_a_wrong_torsion_constant_is_found() -> None:
    for shape in (box(b=0.1, h=0.2, t=0.01), i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01)):
        section = wall_section(shape.walls)
        torsion = wall_torsion(replace(section, I_t=section.I_t * 1.000001), 1e3)
        assert not torsion_residuals(section, torsion, 1e3)[0].holds


coordinate = st.integers(-20, 20).map(lambda n: 0.01 * n)


@st.composite
def wall_sections(draw: st.DrawFn) -> list[Wall]:
    """Trees of walls, some with further walls that close cells, of several thicknesses."""
    points = draw(st.lists(st.tuples(coordinate, coordinate), min_size=3, max_size=9, unique=True))
    pairs = [(draw(st.integers(0, i - 1)), i) for i in range(1, len(points))]
    beyond = draw(st.lists(st.tuples(*[st.integers(0, len(points) - 1)] * 2), max_size=3))
    ordered = dict.fromkeys((min(pair), max(pair)) for pair in beyond)
    pairs += [pair for pair in ordered if pair[0] != pair[1] and pair not in pairs]
    return [Wall(points[i], points[j], draw(st.sampled_from([0.004, 0.01]))) for i, j in pairs]


shears = st.builds(ShearForces, V=st.integers(-99, 99), V_lat=st.integers(-99, 99))


@given(wall_sections(), shears, st.integers(-99, 99))
@settings(max_examples=50, deadline=None)
def test_random_walls_return_their_forces(walls: list[Wall], shear: ShearForces, T: float) -> None:
    section = wall_section(walls)
    for residual in wall_residuals(section, wall_flow(section, shear), shear):
        assert residual.holds, residual
    for residual in torsion_residuals(section, wall_torsion(section, T), T):
        assert residual.holds, residual


@given(wall_sections(), st.floats(0.0, 6.0), st.booleans())
@settings(max_examples=50, deadline=None)
def test_turning_mirroring_shifting_and_renumbering_change_nothing_they_should_not(
    walls: list[Wall], turn: float, mirror: bool
) -> None:
    cos, sin = math.cos(turn), math.sin(turn)

    def moved(p: Point) -> Point:
        x, y = (-p[0] if mirror else p[0]), p[1]
        return cos * x - sin * y + 0.7, sin * x + cos * y - 1.3

    placed = [Wall(moved(w.end), moved(w.start), w.t) for w in reversed(walls)]
    first, second = wall_section(walls), wall_section(placed)
    assert second.I_t == pytest.approx(first.I_t, rel=1e-9)
    size = first.inertia.A * 0.4**4
    assert second.I_w == pytest.approx(first.I_w, rel=1e-6, abs=1e-9 * size)
    if not first.in_one_line and first.inertia.I_2 > 1e-6 * first.inertia.I_1:
        assert (second.x_s, second.y_s) == pytest.approx(moved((first.x_s, first.y_s)), abs=1e-7)

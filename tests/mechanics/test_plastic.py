"""Half-area axes, plastic moduli and fully plastic states against closed forms and published examples."""

import math
from typing import Literal

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.mechanics.equilibrium import EquilibriumError, limit_factor
from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.plastic import plastic_axes
from calcgen.mechanics.second_route.field import field_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import Shape, circle, i_shape, polygon, rectangle, tee, tube, unequal_i_shape
from calcgen.mechanics.stress import Forces
from calcgen.mechanics.stress_blocks import (
    PlasticState,
    Side,
    interaction,
    plastic_bending,
    plastic_state,
    shape_factor,
)
from tests.mechanics.strategies import outlines

MM, IN = 1e-3, 0.0254
KIP = 4448.2216152605  # N

DIAMOND = polygon(points=[(0.0, -1.0), (1.0, 0.0), (0.0, 1.0), (-1.0, 0.0)])

# W_pl/W_el: 3/2, 16/(3π), 2 and, for a vanishing wall, 4/π
SHAPE_FACTORS: list[tuple[str, Shape, float]] = [
    ("rectangle", rectangle(b=0.1, h=0.3), 1.5),
    ("circle", circle(d=0.3), 16.0 / (3.0 * math.pi)),
    ("square on its diagonal", DIAMOND, 2.0),
    ("thin tube", tube(d=1.0, t=1e-4), 4.0 / math.pi),
]


@pytest.mark.parametrize(
    ("shape", "factor"), [c[1:] for c in SHAPE_FACTORS], ids=[c[0] for c in SHAPE_FACTORS]
)
def test_shape_factors(shape: Shape, factor: float) -> None:
    found = section_properties(shape.outline)
    assert found.W_pl_h / found.W_el_h == pytest.approx(factor, rel=5e-4)
    assert found.W_pl_v / found.W_el_v == pytest.approx(factor, rel=5e-4)


def test_welded_plates_with_a_larger_compression_flange() -> None:
    """Read: a University of Iowa text on steel bending (A, y, I, S); the plastic values are closed form."""
    plates = unequal_i_shape(h=24 * IN, b_t=12 * IN, t_t=2 * IN, b_b=9 * IN, t_b=2 * IN, t_w=0.5 * IN)
    found = section_properties(plates.outline)
    ksi = KIP / IN**2
    assert found.area / IN**2 == pytest.approx(52.0, rel=1.1e-3)
    assert found.c_bottom / IN == pytest.approx(13.2692, rel=1e-4)
    assert found.c_top / IN == pytest.approx(10.7308, rel=1e-4)
    assert found.I_h / IN**4 == pytest.approx(5345.56, rel=1e-4)
    assert found.W_el_h_top / IN**3 == pytest.approx(498.153, rel=1e-4)
    assert found.W_el_h_bottom / IN**3 == pytest.approx(402.854, rel=1e-4)
    assert (plates.outline.bounds.top - found.y_p) / IN == pytest.approx(6.0, rel=1e-4)
    assert found.W_pl_h / IN**3 == pytest.approx(494.0, rel=1e-4)
    assert 50 * ksi * found.W_el_h / (KIP * IN) == pytest.approx(20142.7, rel=1e-4)
    assert 50 * ksi * found.W_pl_h / (KIP * IN) == pytest.approx(24700.0, rel=1e-4)


def test_plastic_moment_of_an_unequal_i_section() -> None:
    """From memory: Beer & Johnston, Mechanics of Materials, Sample Problem 4.6; f_y = 240 MPa."""
    part = unequal_i_shape(h=120 * MM, b_t=100 * MM, t_t=20 * MM, b_b=60 * MM, t_b=20 * MM, t_w=20 * MM)
    found = plastic_axes(part.outline)
    assert part.outline.bounds.top - found.y_p == pytest.approx(40 * MM, rel=1.1e-3)
    assert 240e6 * found.W_pl_h == pytest.approx(44.2e3, rel=1.24e-3)


def test_a_tee_whose_axis_lies_in_the_flange() -> None:
    """Closed form: b y = A/2 from the top, then the two lever arms."""
    part = tee(h=0.1, b=0.2, t_w=0.01, t_f=0.02).outline
    depth = (0.2 * 0.02 + 0.08 * 0.01) / 2 / 0.2
    found = plastic_axes(part)
    assert part.bounds.top - found.y_p == pytest.approx(depth, rel=1e-12)
    above, below = 0.2 * depth**2 / 2, 0.2 * (0.02 - depth) ** 2 / 2
    assert found.W_pl_h == pytest.approx(above + below + 0.08 * 0.01 * (0.06 - depth), rel=1e-12)


def test_a_gap_that_halves_the_area_has_the_axis_in_its_middle() -> None:
    lower, upper = (rectangle(b=0.1, h=0.02).outline.moved(0.0, y) for y in (-0.1, 0.2))
    found = plastic_axes(lower, upper)
    assert found.y_p == pytest.approx(0.05, rel=1e-12)
    assert found.W_pl_h == pytest.approx(0.1 * 0.02 * 0.3, rel=1e-12)


def test_holes_are_left_out() -> None:
    square = [(-1, -1), (1, -1), (1, 1), (-1, 1)]
    hole = [(-0.5, -0.5), (0.5, -0.5), (0.5, 0.5), (-0.5, 0.5)]
    assert plastic_axes(outline(square, [hole])).W_pl_h == pytest.approx(2**3 / 4 - 1**3 / 4, rel=1e-12)


@given(outlines())
@settings(max_examples=50, deadline=None)
def test_the_plastic_modulus_is_never_below_the_elastic_one(part: Outline) -> None:
    """∫|y - y_p| dA ≥ ∫ y²/c dA, as |y| ≤ c and the centroid balances any shift of the axis."""
    found = section_properties(part)
    assert found.W_pl_h >= found.W_el_h
    assert found.W_pl_v >= found.W_el_v


@given(outlines())
@settings(max_examples=30, deadline=None)
def test_a_quarter_turn_exchanges_the_axes(part: Outline) -> None:
    here, there = plastic_axes(part), plastic_axes(part.turned(0.5 * math.pi))
    assert (there.W_pl_h, there.W_pl_v) == pytest.approx((here.W_pl_v, here.W_pl_h), rel=1e-10)


def test_fillets_count() -> None:
    """IPE 300: the four fillets make up 2.7 % of W_pl (closed form of plates alone: 0.6113e-3 m³)."""
    sizes = {"h": 0.3, "b": 0.15, "t_w": 0.0071, "t_f": 0.0107}
    plates = 0.15 * 0.0107 * (0.3 - 0.0107) + 0.0071 * (0.3 - 0.0214) ** 2 / 4
    assert plastic_axes(i_shape(**sizes).outline).W_pl_h == pytest.approx(plates, rel=1e-12)
    r = 0.015
    area = (1 - math.pi / 4) * r * r
    # centroid of a fillet from its corner: r (10 - 3π)/(3 (4 - π))
    arm = 0.15 - 0.0107 - r * (10 - 3 * math.pi) / (3 * (4 - math.pi))
    assert plastic_axes(i_shape(**sizes, r=r).outline).W_pl_h == pytest.approx(
        plates + 4 * area * arm, rel=1e-6
    )


# ---- fully plastic states

F_Y = 235e6
STEEL = Law(1.0, F_Y, F_Y)
CONCRETE = Law(0.1, 0.0, 0.85 * 30e6)
REINFORCEMENT = Law(1.0, 500e6, 500e6)


def piece(part: Outline, law: Law = STEEL) -> tuple[Piece, ...]:
    return (Piece("", (part,), law),)


def moment(state: PlasticState) -> float:
    return state.forces.M


def holds(state: PlasticState) -> bool:
    return all(residual.holds for residual in field_residuals(state.field, state.forces))


@pytest.mark.parametrize(
    ("shape", "factor"), [c[1:] for c in SHAPE_FACTORS], ids=[c[0] for c in SHAPE_FACTORS]
)
def test_shape_factors_from_stress_blocks(shape: Shape, factor: float) -> None:
    for M, M_lat in ((1.0, 0.0), (-1.0, 0.0), (0.0, 1.0)):
        assert shape_factor(piece(shape.outline), M=M, M_lat=M_lat) == pytest.approx(factor, rel=5e-4)


def test_the_plates_and_the_unequal_section_again() -> None:
    """The two published sections above: axis and moment of the stress blocks."""
    plates = unequal_i_shape(h=24 * IN, b_t=12 * IN, t_t=2 * IN, b_b=9 * IN, t_b=2 * IN, t_w=0.5 * IN)
    part = unequal_i_shape(h=120 * MM, b_t=100 * MM, t_t=20 * MM, b_b=60 * MM, t_b=20 * MM, t_w=20 * MM)
    for shape, strength, depth, plastic, tolerance in (
        (plates, 50 * KIP / IN**2, 6 * IN, 24700.0 * KIP * IN, 1e-4),
        (part, 240e6, 40 * MM, 44.2e3, 1.24e-3),
    ):
        for towards, sign in (((0.0, -1.0), 1.0), ((0.0, 1.0), -1.0)):
            state = plastic_state(piece(shape.outline, Law(1.0, strength, strength)), towards=towards)
            axis = state.field.neutral_axis
            assert axis is not None
            assert shape.outline.bounds.top - axis.y == pytest.approx(depth, rel=1.1e-3)
            assert moment(state) == pytest.approx(sign * plastic, rel=tolerance)
            assert holds(state)


@given(outlines())
@settings(max_examples=30, deadline=None)
def test_the_level_axis_gives_the_plastic_modulus(part: Outline) -> None:
    modulus = plastic_axes(part)
    for towards, expected in (((0.0, -1.0), modulus.W_pl_h), ((0.0, 1.0), -modulus.W_pl_h)):
        state = plastic_state(piece(part), towards=towards)
        assert moment(state) == pytest.approx(F_Y * expected, rel=1e-9)
    assert plastic_state(piece(part), towards="right").forces.M_lat == pytest.approx(
        F_Y * modulus.W_pl_v, rel=1e-9
    )


def test_a_gap_leaves_the_axis_in_its_middle() -> None:
    lower, upper = (rectangle(b=0.1, h=0.02).outline.moved(0.0, y) for y in (-0.1, 0.2))
    state = plastic_state((Piece("", (lower, upper), STEEL),), towards="bottom")
    assert state.field.neutral_axis is not None
    assert state.field.neutral_axis.y == pytest.approx(0.05, rel=1e-12)
    assert moment(state) == pytest.approx(F_Y * 0.1 * 0.02 * 0.3, rel=1e-12)


def test_interaction_of_a_rectangle() -> None:
    """From memory: Chen & Atsuta, Theory of Beam-Columns; M/M_pl = 1 - (N/N_pl)²."""
    N_pl, M_pl = F_Y * 0.03, F_Y * 0.1 * 0.3**2 / 4
    curve = interaction(piece(rectangle(b=0.1, h=0.3).outline), n=15)
    n, m = curve[:, 0] / N_pl, curve[:, 1] / M_pl
    assert np.abs(m) == pytest.approx(1 - n * n, abs=1e-12)
    assert curve[0] == pytest.approx([N_pl, 0.0], abs=1e-9)
    assert np.array_equal(curve[0], curve[-1])
    assert {(0.0, 1.0), (0.0, -1.0)} <= set(zip(n.round(12).tolist(), m.round(12).tolist(), strict=True))


@pytest.mark.parametrize("n", [0.1, 0.3, 0.6, 0.9])
def test_axial_force_on_an_i_section(n: float) -> None:
    """Closed form: the force takes the web's middle first, N²/(4 t_w f_y) of moment; then the flanges."""
    h, b, t_w, t_f = 0.3, 0.15, 0.0071, 0.0107
    part = i_shape(h=h, b=b, t_w=t_w, t_f=t_f).outline
    area, web = 2 * b * t_f + (h - 2 * t_f) * t_w, (h - 2 * t_f) * t_w
    N = n * area * F_Y
    if n * area <= web:
        expected = F_Y * plastic_axes(part).W_pl_h - N * N / (4 * t_w * F_Y)
    else:
        left = (area - n * area) / (2 * b)  # depth of each flange that still makes a couple
        expected = F_Y * b * left * (h - left)
    for axial in (N, -N):
        state = plastic_state(piece(part), towards="bottom", N=axial)
        assert moment(state) == pytest.approx(expected, rel=1e-9)


def test_reinforced_concrete_beam() -> None:
    """From memory: Wight & MacGregor, Reinforced Concrete, Example 4-1M (ACI 318): a and M_n.

    The code's block is a = β_1 c deep; as a plastic block it is bounded by the axis itself.
    """
    beam = rectangle(b=0.25, h=0.63).outline
    concrete, steel = Law(0.1, 0.0, 0.85 * 20e6), Law(1.0, 420e6, 420e6)
    places = np.array([[x, 0.315 - 0.565] for x in (-0.08, 0.0, 0.08)])
    state = plastic_state(
        piece(beam, concrete), (Bars("bars", places, 1530e-6 / 3, steel, concrete),), towards="bottom"
    )
    assert state.field.neutral_axis is not None
    assert 0.315 - state.field.neutral_axis.y == pytest.approx(0.151, rel=3.64e-3)
    assert moment(state) == pytest.approx(315e3, rel=2.03e-3)
    assert holds(state)


def test_bars_on_the_axis_carry_what_equilibrium_leaves() -> None:
    """Closed form: half the concrete in compression, the upper bars with what the lower ones lack."""
    slab = rectangle(b=0.1, h=0.3).outline
    lower = Bars("lower", np.array([[0.0, -0.12]]), 1e-3, REINFORCEMENT, CONCRETE)
    middle = Bars("middle", np.array([[-0.03, 0.0], [0.03, 0.0]]), 1e-3, REINFORCEMENT, CONCRETE)
    state = plastic_state(piece(slab, CONCRETE), (lower, middle), towards="bottom")
    block = 0.1 * 0.15 * CONCRETE.compression
    on_axis = [group for group in state.field.bars if group.name == "middle"]
    stresses = [float(state.field.stress(group, group.points)[0]) for group in on_axis]
    assert stresses == pytest.approx([(block - 500e3) / 2e-3] * 2, rel=1e-9)
    assert moment(state) == pytest.approx(500e3 * 0.12 + block * 0.075, rel=1e-12)
    assert holds(state)


def test_an_axial_force_beyond_the_section() -> None:
    part = piece(rectangle(b=0.1, h=0.3).outline, Law(1.0, F_Y, 0.5 * F_Y))
    for N, limit in ((2 * 0.03 * F_Y, 0.5), (-0.03 * F_Y, 0.5)):
        with pytest.raises(EquilibriumError) as fault:
            plastic_state(part, towards="bottom", N=N)
        assert fault.value.limit == pytest.approx(limit, rel=1e-12)


def test_a_material_without_strength_is_a_fault_of_the_caller() -> None:
    with pytest.raises(ValueError, match="strength"):
        plastic_state(piece(rectangle(b=0.1, h=0.3).outline, Law()), towards="bottom")


@given(
    outlines(),
    st.floats(0.0, 6.28),
    st.floats(-0.5, 0.5),
    st.sampled_from([0.3, 1.0]),
    st.integers(0, 4),
)
@settings(max_examples=20, deadline=None)
def test_plastic_bending_reaches_the_limit_of_equilibrium(
    part: Outline, angle: float, n: float, ratio: float, count: int
) -> None:
    """Two ways to one surface: the turned axis here, and the elastic-plastic section followed to its limit.

    A row of bars makes edges on the surface, where two bars on the axis share differently.
    """
    law, section = Law(1.0, F_Y, ratio * F_Y), section_properties(part)
    middle = (section.x_bar, section.y_bar)
    row = np.column_stack((np.linspace(-0.1, 0.12, count) + middle[0], np.full(count, 0.03 + middle[1])))
    bars = (Bars("row", row, 0.03 * section.area, Law(1.0, 5 * F_Y, 5 * F_Y), law),) if count else ()
    wanted = Forces(n * 0.3 * section.area * F_Y, math.cos(angle), math.sin(angle))
    state = plastic_bending(piece(part, law), bars, M=wanted.M, M_lat=wanted.M_lat, N=wanted.N, about=middle)
    found = state.forces
    size = math.hypot(found.M, found.M_lat)
    assert abs(found.N - wanted.N) <= 1e-9 * F_Y * section.area
    assert (found.M / size, found.M_lat / size) == pytest.approx((wanted.M, wanted.M_lat), abs=1e-8)
    assert holds(state)
    assert limit_factor(piece(part, law), bars, found, middle) == pytest.approx(1.0, rel=1e-7)


SIDES: list[Side] = ["bottom", "top", "right", "left"]


@given(outlines(), st.floats(-0.9, 0.9))
@settings(max_examples=20, deadline=None)
def test_no_state_with_the_same_axial_force_lies_beyond(part: Outline, n: float) -> None:
    """The moment towards a side is largest when the axis lies across it."""
    section = section_properties(part)
    middle, N = (section.x_bar, section.y_bar), n * section.area * F_Y
    found = [plastic_state(piece(part), towards=side, N=N, about=middle).forces for side in SIDES]
    rounding = 1e-12 * F_Y * section.area
    excess = max(forces.M for forces in found) - found[0].M
    excess_lat = max(forces.M_lat for forces in found) - found[2].M_lat
    assert max(excess, excess_lat) <= rounding


def test_interaction_of_an_unsymmetrical_section_crosses_zero_moment_exactly() -> None:
    part = tee(h=0.1, b=0.2, t_w=0.01, t_f=0.02).outline
    y_bar = section_properties(part).y_bar
    law = Law(1.0, F_Y, 0.4 * F_Y)
    curve = interaction(piece(part, law), about=(0.0, y_bar), n=12)
    area = section_properties(part).area
    assert curve[:, 0].max() == pytest.approx(F_Y * area, rel=1e-12)
    assert curve[:, 0].min() == pytest.approx(-0.4 * F_Y * area, rel=1e-12)
    assert np.count_nonzero(curve[:, 0] == 0.0) == 2
    for N in curve[curve[:, 1] == 0.0, 0]:
        moments = [
            plastic_state(piece(part, law), towards=side, N=N, about=(0.0, y_bar)).forces.M
            for side in SIDES[:2]
        ]
        assert min(map(abs, moments)) <= 1e-9 * F_Y * area * 0.1


@pytest.mark.parametrize("axis", ["h", "v"])
def test_interaction_of_reinforced_concrete_is_convex(axis: Literal["h", "v"]) -> None:
    """The forces that a section can carry are a convex set; its corners are where bars change sides."""
    lower = Bars("lower", np.array([[-0.03, -0.12], [0.04, -0.12]]), 1e-3, REINFORCEMENT, CONCRETE)
    upper = Bars("upper", np.array([[-0.03, 0.12]]), 5e-4, REINFORCEMENT, CONCRETE)
    slab = piece(rectangle(b=0.1, h=0.3).outline, CONCRETE)
    curve = interaction(slab, (lower, upper), axis=axis, n=20)
    steel = 2.5e-3 * REINFORCEMENT.tension
    assert curve[0, 0] == pytest.approx(steel, rel=1e-12)
    assert curve[:, 0].min() == pytest.approx(-steel - (0.03 - 2.5e-3) * CONCRETE.compression, rel=1e-12)
    sides = np.diff(curve / np.array([steel, 0.1 * steel]), axis=0)
    sides = sides[np.hypot(*sides.T) > 1e-9]
    following = np.roll(sides, -1, axis=0)
    turn = sides[:, 0] * following[:, 1] - sides[:, 1] * following[:, 0]
    assert turn.min() >= -1e-9

"""Half-area axes and plastic moduli against closed forms and published examples."""

import math

import pytest
from hypothesis import given, settings

from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.plastic import plastic_axes
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import Shape, circle, i_shape, polygon, rectangle, tee, tube, unequal_i_shape
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

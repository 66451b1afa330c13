"""Closed forms of torsion against tables, limits and the elements; the second route finds what is spoiled."""

import math
from dataclasses import replace

import pytest

from calcgen.mechanics.outline import Outline
from calcgen.mechanics.saint_venant import saint_venant
from calcgen.mechanics.second_route.torsion import closed_form_residual, torsion_residuals
from calcgen.mechanics.shapes import box, channel, circle, ellipse, i_shape, rectangle, tube
from calcgen.mechanics.torsion import (
    TorsionConstant,
    circle_torsion,
    ellipse_torsion,
    rectangle_torsion,
    tube_torsion,
)

# l/t, k_1 of J = k_1 l t³, k_2 of τ = T/(k_2 l t²): S. Timoshenko and J. N. Goodier, Theory of elasticity,
# article 109, from memory; printed to three digits
PRINTED = [
    (1.0, 0.1406, 0.208),
    (1.2, 0.166, 0.219),
    (1.5, 0.196, 0.231),
    (2.0, 0.229, 0.246),
    (2.5, 0.249, 0.258),
    (3.0, 0.263, 0.267),
    (4.0, 0.281, 0.282),
    (5.0, 0.291, 0.291),
    (10.0, 0.312, 0.312),
]


@pytest.mark.parametrize(("ratio", "k_1", "k_2"), PRINTED)
def test_rectangle_against_the_printed_table(ratio: float, k_1: float, k_2: float) -> None:
    t = 0.03
    found = rectangle_torsion(b=ratio * t, h=t)
    assert found.value / (ratio * t**4) == pytest.approx(k_1, abs=6e-4)
    assert 1.0 / (found.tau_max_per_T * ratio * t**3) == pytest.approx(k_2, abs=6e-4)


def test_rectangle_in_the_limit_is_a_strip() -> None:
    """J = (l - 0.630 t) t³/3 and τ = T t/J for a thin strip."""
    found = rectangle_torsion(b=0.001, h=1.0)
    assert found.value == pytest.approx((1.0 - 0.630249 * 0.001) * 1e-9 / 3.0, rel=1e-8)
    assert found.tau_max_per_T == pytest.approx(0.001 / found.value, rel=1e-12)
    assert found.place == (0.0005, 0.0)
    assert rectangle_torsion(b=1.0, h=0.001).place == (0.0, 0.0005)


def test_the_round_ones_agree_with_one_another() -> None:
    disc, ring = circle_torsion(0.2), tube_torsion(0.2, 0.1)
    assert ring.value == pytest.approx(disc.value, rel=1e-14)
    assert ellipse_torsion(0.2, 0.2).value == pytest.approx(disc.value, rel=1e-14)
    assert ellipse_torsion(0.2, 0.2).tau_max_per_T == pytest.approx(disc.tau_max_per_T, rel=1e-14)
    assert disc.tau_max_per_T == pytest.approx(16.0 / (math.pi * 0.2**3), rel=1e-14)
    thin = tube_torsion(1.0, 1e-7)  # 2πr³t and T/(2πr²t) of the mid-line
    assert thin.value == pytest.approx(2.0 * math.pi * 0.5**3 * 1e-7, rel=1e-6)
    assert thin.tau_max_per_T == pytest.approx(1.0 / (2.0 * math.pi * 0.25 * 1e-7), rel=1e-6)
    assert ellipse_torsion(0.4, 0.2).place == (0.0, 0.1)
    assert ellipse_torsion(0.2, 0.4).place == (0.1, 0.0)


CLOSED = {
    "circle": (circle_torsion(0.2), circle(d=0.2).outline),
    "tube": (tube_torsion(0.2, 0.01), tube(d=0.2, t=0.01).outline),
    "thick tube": (tube_torsion(0.2, 0.06), tube(d=0.2, t=0.06).outline),
    "thin tube": (tube_torsion(0.2, 0.002), tube(d=0.2, t=0.002).outline),
    "ellipse": (ellipse_torsion(0.4, 0.1), ellipse(b=0.4, h=0.1).outline),
    **{
        f"rectangle 1:{ratio}": (
            rectangle_torsion(ratio * 0.02, 0.02),
            rectangle(b=ratio * 0.02, h=0.02).outline,
        )
        for ratio in (1, 2, 5, 10, 50)
    },
}


@pytest.mark.parametrize(("closed", "part"), CLOSED.values(), ids=CLOSED.keys())
def test_closed_forms_and_elements_agree(closed: TorsionConstant, part: Outline) -> None:
    elements = saint_venant(part)
    residual = closed_form_residual(closed, elements)
    assert residual.holds, residual
    assert elements.tau_max.value == pytest.approx(closed.tau_max_per_T, rel=0.03)
    assert not closed_form_residual(replace(closed, value=1.003 * closed.value), elements).holds


SECTIONS = {
    "I with fillets": i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline,
    "channel without": channel(h=0.2, b=0.08, t_w=0.006, t_f=0.01).outline,
    "box": box(b=0.1, h=0.2, t=0.005).outline,
    "far from the origin": i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107).outline.moved(20.0, -30.0),
}


@pytest.mark.parametrize("part", SECTIONS.values(), ids=SECTIONS.keys())
def test_bounds_are_close_and_the_stresses_make_the_torque(part: Outline) -> None:
    found = saint_venant(part)
    residuals = torsion_residuals(found)
    assert [residual.what for residual in residuals] == ["J", "T"]
    assert all(residual.holds for residual in residuals), residuals
    wide = torsion_residuals(replace(found, J_upper=1.005 * found.J_upper))
    turned = torsion_residuals(replace(found, per_T=-found.per_T))
    assert not wide[0].holds
    assert turned[1].residual == pytest.approx(-2.0, abs=0.01)


def test_two_pieces_twist_alike() -> None:
    plate = rectangle(b=0.1, h=0.01).outline
    assert all(r.holds for r in torsion_residuals(saint_venant(plate, plate.moved(0.0, 0.2))))

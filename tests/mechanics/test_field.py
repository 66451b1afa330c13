"""Stress fields: laws, extremes, points, profiles; and the second route, which finds what is spoiled."""

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.resultants import field_forces, resultants
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.field import field_residuals
from calcgen.mechanics.shapes import rectangle
from calcgen.mechanics.stress import Forces, StressPlane
from tests.mechanics.strategies import outlines

MPA = 1e6
BAR = rectangle(b=0.1, h=0.3).outline


def bent(g_y: float, sigma_0: float = 0.0, g_x: float = 0.0) -> StressPlane:
    return StressPlane(sigma_0, g_x, g_y, 0.0, 0.0)


LAWS = [
    (Law(), [-300.0, 0.0, 300.0]),
    (Law(2.0), [-600.0, 0.0, 600.0]),
    (Law(2.0, 100.0, 50.0), [-50.0, 0.0, 100.0]),
    (Law(tension=0.0), [-300.0, 0.0, 0.0]),
    (Law(math.inf, 100.0, 50.0), [-50.0, 0.0, 100.0]),
    (Law(0.0), [0.0, 0.0, 0.0]),
    (Law.constant(-7.0), [-7.0, -7.0, -7.0]),
]


@pytest.mark.parametrize(("law", "stresses"), LAWS)
def test_laws(law: Law, stresses: list[float]) -> None:
    assert law.stress(np.array([-300.0, 0.0, 300.0])).tolist() == stresses


def test_kinks() -> None:
    assert Law(2.0, 100.0, 50.0).kinks == (-25.0, 50.0)
    assert Law(tension=0.0).kinks == (0.0,)
    assert (Law().kinks, Law(0.0).kinks, Law(math.inf, 1.0, 1.0).kinks) == ((), (), (0.0,))


def test_a_limit_reached_over_a_region_has_its_place_at_the_outermost_edge() -> None:
    field = StressField(bent(-4000 * MPA), (Piece("bar", (BAR,), Law(1.0, 235 * MPA, 235 * MPA)),))
    most, least = field.extremes()
    assert (most.value, most.x, most.y, most.part) == (235 * MPA, 0.0, -0.15, "bar")
    assert most.ends == ((-0.05, -0.15), (0.05, -0.15))
    assert (least.value, least.y) == (-235 * MPA, 0.15)
    assert (field.at_bottom(), field.at_top()) == (235 * MPA, -235 * MPA)


def test_uniform_strain_has_its_place_in_each_piece() -> None:
    pieces = (Piece("a", (BAR,)), Piece("b", (BAR.moved(0.2, 0.0),), Law(3.0)))
    most, least = StressField(StressPlane(10.0, 0.0, 0.0, 0.0, 0.0), pieces).extremes()
    assert (most.value, most.part) == (30.0, "b")
    assert most.x == pytest.approx(0.2)
    assert (least.value, least.part, least.x) == (10.0, "a", 0.0)


def test_bars_have_their_own_stress_and_displace() -> None:
    bars = Bars("bars", np.array([[-0.03, -0.1], [0.03, -0.1]]), 1e-4, Law(10.0, 500.0), Law(1.0))
    field = StressField(bent(-100.0), (Piece("host", (BAR,)),), (bars,))
    assert field.extremes_of(bars)[0].value == pytest.approx(100.0)
    assert field.extremes()[0] == field.extremes_of(bars)[0]
    assert (field.extremes()[0].part, field.extremes()[0].x) == ("bars", -0.03)
    assert field.bar_forces(bars).tolist() == pytest.approx([1e-4 * (100 - 10)] * 2)


def test_a_point_on_an_interface_has_the_stress_of_larger_magnitude() -> None:
    lower, upper = Piece("lower", (BAR,)), Piece("upper", (BAR.moved(0.0, 0.3),), Law(5.0))
    field = StressField(bent(-100.0), (lower, upper))
    here = field.at((0.0, 0.15))
    assert here is not None
    assert here.value == pytest.approx(-75.0)
    assert (here.part, here.others) == ("upper", ("lower",))
    inside = field.at((0.02, -0.1))
    assert inside is not None
    assert inside.value == pytest.approx(10.0)
    assert (inside.part, inside.others) == ("lower", ())
    assert field.at((0.2, 0.0)) is None


def test_a_profile_bends_at_limits_and_jumps_at_interfaces() -> None:
    lower = Piece("lower", (BAR,), Law(1.0, 10.0, 10.0))
    upper = Piece("upper", (BAR.moved(0.0, 0.3),), Law(5.0))
    profile = StressField(bent(-100.0), (lower, upper)).profile()
    assert profile.direction == (0.0, 1.0)
    first, second = profile.parts
    assert first.heights.tolist() == pytest.approx([-0.15, -0.1, 0.1, 0.15])
    assert first.stresses.tolist() == pytest.approx([10.0, 10.0, -10.0, -10.0])
    assert second.heights.tolist() == pytest.approx([0.15, 0.45])
    assert second.stresses.tolist() == pytest.approx([-75.0, -225.0])


def test_a_profile_of_fully_plastic_stress_jumps_at_the_axis() -> None:
    part = Piece("", (BAR,), Law(math.inf, 20.0, 10.0))
    (profile,) = StressField(bent(-100.0, sigma_0=5.0), (part,)).profile().parts
    assert profile.heights.tolist() == pytest.approx([-0.15, 0.05, 0.05, 0.15])
    assert profile.stresses.tolist() == [20.0, 20.0, -10.0, -10.0]
    (beyond,) = StressField(bent(-100.0, sigma_0=50.0), (part,)).profile().parts
    assert beyond.stresses.tolist() == [20.0, 20.0]


def test_a_profile_across_a_turned_axis_and_over_a_gap() -> None:
    parts = (BAR, BAR.moved(0.3, 0.0))
    profile = StressField(bent(0.0, g_x=-50.0), (Piece("", parts),)).profile()
    assert profile.direction == (1.0, 0.0)
    assert [each.heights.tolist() for each in profile.parts] == [
        pytest.approx([-0.05, 0.05]),
        pytest.approx([0.25, 0.35]),
    ]
    assert profile.parts[1].stresses.tolist() == pytest.approx([-12.5, -17.5])
    assert StressField(bent(0.0, sigma_0=1.0), (Piece("", (BAR,)),)).profile().direction == (0.0, 1.0)


def test_the_elastic_core_of_pieces_and_of_the_whole() -> None:
    inner = Piece("inner", (BAR,), Law(1.0, 10.0, 5.0))
    outer = Piece("outer", (BAR.moved(0.1, 0.0),), Law(1.0, 1.0, 1.0))
    field = StressField(bent(-100.0), (inner, outer))
    assert field.elastic_core(inner) == pytest.approx(0.15)
    assert field.elastic_core(outer) == pytest.approx(0.02)
    assert field.elastic_core() == pytest.approx(0.15)
    assert StressField(bent(0.0, 1.0), (inner,)).elastic_core() is None


planes = st.builds(
    StressPlane,
    st.floats(-200.0, 200.0),
    st.floats(-2000.0, 2000.0),
    st.floats(-2000.0, 2000.0),
    st.floats(-0.5, 0.5),
    st.floats(-0.5, 0.5),
)
laws = st.sampled_from([Law(), Law(3.0, 90.0, 40.0), Law(tension=0.0), Law(math.inf, 90.0, 40.0)])


@given(outlines(), planes, laws)
@settings(max_examples=50, deadline=None)
def test_integrals_along_edges_are_those_over_fibres(part: Outline, plane: StressPlane, law: Law) -> None:
    field = StressField(plane, (Piece("", (part,), law),))
    assert all(residual.holds for residual in field_residuals(field, field_forces(field)))
    about = (0.3, -0.2)
    assert all(residual.holds for residual in field_residuals(field, field_forces(field, about), about))


@given(outlines(), planes)
@settings(max_examples=30, deadline=None)
def test_the_tangent_is_the_change_of_the_resultants(part: Outline, plane: StressPlane) -> None:
    """Against central differences; steps large beside rounding and small beside the elastic band."""
    pieces = (Piece("", (part,), Law(3.0, 90.0, 40.0)),)
    tangent = resultants(plane, pieces).tangent
    elastic = resultants(plane, (Piece("", (part,), Law(3.0)),)).tangent
    for column, name in enumerate(("sigma_0", "g_x", "g_y")):
        ends = [
            resultants(replace(plane, **{name: getattr(plane, name) + step}), pieces).vector
            for step in (1e-3, -1e-3)
        ]
        slope = (ends[0] - ends[1]) / 2e-3
        scale = np.sqrt(np.diag(elastic) * elastic[column, column])
        assert np.all(np.abs(slope - tangent[:, column]) <= 2e-3 * scale)


@given(outlines(), planes, planes)
@settings(max_examples=30, deadline=None)
def test_residual_stress_is_nowhere_beyond_its_extremes(
    part: Outline, plane: StressPlane, elastic: StressPlane
) -> None:
    field = StressField(plane, (Piece("", (part,), Law(1.0, 90.0, 40.0)),)).after_unloading(elastic)
    bundle = fibres(part)
    stresses = field.stress(field.pieces[0], np.column_stack((bundle.x, bundle.y)))
    most, least = field.extremes()
    assert stresses.max() <= most.value + 1e-9 * abs(most.value)
    assert stresses.min() >= least.value - 1e-9 * abs(least.value)
    for extreme in (most, least):
        place = np.array([[extreme.x, extreme.y]])
        assert field.stress(field.pieces[0], place)[0] == pytest.approx(extreme.value, rel=1e-6, abs=1e-6)
    assert all(residual.holds for residual in field_residuals(field, field_forces(field)))


@pytest.mark.parametrize("spoiled", ["sigma_0", "g_x", "g_y"])
def test_a_field_off_by_a_millionth_is_found(spoiled: str) -> None:
    bars = Bars("bars", np.array([[0.02, -0.1]]), 1e-3, Law(10.0), Law(1.0))
    field = StressField(bent(-900.0, 30.0, 200.0), (Piece("", (BAR,), Law(1.0, 80.0, 60.0)),), (bars,))
    given_forces = field_forces(field)
    other = replace(field.plane, **{spoiled: getattr(field.plane, spoiled) * (1 + 1e-6)})
    assert not all(r.holds for r in field_residuals(replace(field, plane=other), given_forces))
    assert not all(r.holds for r in field_residuals(replace(field, bars=()), given_forces))
    assert all(r.holds for r in field_residuals(field, given_forces))


def test_no_stress_has_no_residual() -> None:
    field = StressField(bent(0.0), (Piece("", (BAR,), Law(tension=0.0)),))
    assert [residual.residual for residual in field_residuals(field, Forces())] == [0.0, 0.0, 0.0]

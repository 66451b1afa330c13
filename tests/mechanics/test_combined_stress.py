"""Normal and shear stress together: formulas, places of the extremes, both descriptions."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.combined_stress import (
    Stations,
    StressState,
    combined_extremes,
    field_stress,
    outline_stations,
    wall_stations,
)
from calcgen.mechanics.field import Law, Piece, StressField
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import Shape, box, channel, i_shape, polygon, rectangle
from calcgen.mechanics.shear import ShearForces, cuts
from calcgen.mechanics.stress import Forces, StressPlane, elastic_stress
from calcgen.mechanics.wall_shear import wall_flow, wall_torsion
from calcgen.mechanics.walls import wall_section


@given(st.integers(-1000, 1000), st.integers(0, 1000))
def test_principal_and_von_mises_stresses_are_those_of_the_tensor(sigma: int, tau: int) -> None:
    """Against numpy's eigenvalues, and the second invariant of the deviator: σ_vM² = 3 J_2."""
    state = StressState(0.0, 0.0, float(sigma), float(tau), "outline")
    tensor = np.array([[sigma, tau, 0.0], [tau, 0.0, 0.0], [0.0, 0.0, 0.0]])
    values, vectors = np.linalg.eigh(tensor)
    assert (state.sigma_2, state.sigma_1) == pytest.approx((values[0], values[-1]), abs=1e-9)
    deviator = tensor - np.eye(3) * sigma / 3.0
    assert state.von_mises == pytest.approx(math.sqrt(1.5 * float(np.sum(deviator**2))), abs=1e-9)
    if tau:
        axis = vectors[:, -1]
        assert math.tan(state.angle) == pytest.approx(axis[1] / axis[0], rel=1e-6)


def on_outline(shape: Shape, forces: Forces, shear: ShearForces, torsion: float = 0.0) -> Stations:
    section, pieces = section_properties(shape.outline), [Piece("", (shape.outline,))]
    level, upright = (cuts(way, section, shear, pieces) for way in ("level", "upright"))
    field = StressField(elastic_stress(section, forces), tuple(pieces))
    return outline_stations(
        pieces, level, upright, field_stress(field), lambda points: np.full(len(points), torsion)
    )


def test_a_rectangle_under_bending_and_shear() -> None:
    """σ = M/W at the edges without shear, τ = 1.5 V/A in the middle without σ."""
    shape = rectangle(b=0.1, h=0.2)
    sigma, tau = 6.0 * 8e3 / (0.1 * 0.04), 1.5 * 5e4 / 0.02
    found = combined_extremes(on_outline(shape, Forces(M=8e3), ShearForces(V=5e4)))
    assert found.tau_max.tau == pytest.approx(tau, rel=1e-9)
    assert (found.tau_max.y, found.tau_max.sigma) == pytest.approx((0.0, 0.0), abs=1e-6)
    assert found.sigma_1_max.sigma_1 == pytest.approx(sigma, rel=1e-9)
    assert found.sigma_1_max.y == pytest.approx(-0.1)
    assert found.sigma_2_min.sigma_2 == pytest.approx(-sigma, rel=1e-9)
    assert found.von_mises_max.von_mises == pytest.approx(sigma, rel=1e-9)


def test_both_shear_forces_and_torsion_on_a_rectangle() -> None:
    """In the middle 1.5/A times both forces at right angles, and the torsional stress on top of that."""
    found = combined_extremes(on_outline(rectangle(b=0.1, h=0.2), Forces(), ShearForces(3e4, 4e4), 1e6))
    assert found.tau_max.tau == pytest.approx(1.5 * 5e4 / 0.02 + 1e6, rel=1e-9)
    assert (found.tau_max.x, found.tau_max.y) == pytest.approx((0.0, 0.0), abs=1e-12)


def test_an_i_section_yields_first_where_the_web_meets_the_flange() -> None:
    """σ_vM of M y/I and V S/(I t_w) at the end of the web exceeds both extremes of the depth."""
    shape = i_shape(h=0.4, b=0.2, t_w=0.008, t_f=0.02)
    section = section_properties(shape.outline)
    found = combined_extremes(on_outline(shape, Forces(M=3e5), ShearForces(V=2e5))).von_mises_max
    sigma = 3e5 * 0.18 / section.I_h
    tau = 2e5 * 0.2 * 0.02 * 0.19 / section.I_h / 0.008
    assert abs(found.y) == pytest.approx(0.18)
    assert abs(found.x) == pytest.approx(0.004)
    assert found.von_mises == pytest.approx(math.sqrt(sigma**2 + 3.0 * tau**2), rel=1e-9)


def test_torsion_of_open_walls_acts_on_their_surfaces() -> None:
    """T t/I_t on both surfaces of the thickest wall, none of it on the mid-line."""
    shape = i_shape(h=0.3, b=0.2, t_w=0.008, t_f=0.016)
    walls = wall_section(shape.walls)
    flow = wall_flow(walls, ShearForces())
    stations = wall_stations(flow, lambda points: np.zeros(len(points)), wall_torsion(walls, 200.0))
    found = combined_extremes(stations).tau_max
    assert found.tau == pytest.approx(200.0 * 0.016 / walls.I_t, rel=1e-12)
    assert found.description == "walls"
    assert abs(found.y) in (pytest.approx(0.15), pytest.approx(0.134))


def test_flows_of_shear_and_torsion_add_in_one_web_of_a_box_and_relieve_the_other() -> None:
    """T clockwise runs down the right web and up the left one, and V up both."""
    shape = box(b=0.1, h=0.2, t=0.01)
    walls = wall_section(shape.walls)
    flow, torsion = wall_flow(walls, ShearForces(V=1e5)), wall_torsion(walls, 2e3)
    found = combined_extremes(wall_stations(flow, lambda points: np.zeros(len(points)), torsion)).tau_max
    of_T = 2e3 / (2.0 * 0.09 * 0.19 * 0.01)
    assert found.tau == pytest.approx(abs(flow.greatest_stress.tau) + of_T, rel=1e-9)
    assert (found.x, found.y) == pytest.approx((-0.045, 0.0), abs=1e-9)


def test_the_larger_of_both_descriptions_is_taken() -> None:
    """The flow in the flanges of a channel is in its walls alone."""
    shape = channel(h=0.2, b=0.1, t_w=0.006, t_f=0.012)
    section = section_properties(shape.outline)
    plane = elastic_stress(section, Forces(M=1e3))
    walls = wall_stations(wall_flow(wall_section(shape.walls), ShearForces(V=1e4)), plane.at)
    outline = on_outline(shape, Forces(M=1e3), ShearForces(V=1e4))
    both, alone = combined_extremes(outline, walls), combined_extremes(outline)
    assert both.tau_max.tau == max(alone.tau_max.tau, combined_extremes(walls).tau_max.tau)
    assert both.von_mises_max.von_mises >= alone.von_mises_max.von_mises


def test_each_part_of_a_composite_has_its_own_stress() -> None:
    """Strain is common: the plate's normal stress is n times that of the timber beside it."""
    oak = Piece("oak", tuple(rectangle(b=0.05, h=0.2).outline.placed(x, 0.0) for x in (-0.03, 0.03)))
    steel = Piece("steel", (rectangle(b=0.01, h=0.2).outline,), Law(20.0))
    field = StressField(StressPlane(0.0, 0.0, -1e7, 0.0, 0.0), (oak, steel))
    one = section_properties(rectangle(b=0.3, h=0.2).outline)  # the transformed section: 0.1 + 20 · 0.01 wide
    level, upright = (cuts(way, one, ShearForces(V=12e3), (oak, steel)) for way in ("level", "upright"))
    found = combined_extremes(outline_stations((oak, steel), level, upright, field_stress(field)))
    assert found.sigma_1_max.sigma == pytest.approx(20.0 * 1e7 * 0.1)
    assert abs(found.sigma_1_max.x) <= 0.005 + 1e-12
    assert found.tau_max.tau == pytest.approx(1.5 * 8e3 / 0.002, rel=1e-9)


def test_jagged_outlines_have_a_bounded_number_of_stations() -> None:
    """A comb of two hundred teeth."""
    x = np.arange(401) * 5e-3
    teeth: FloatArray = np.column_stack((x, 0.1 + 0.05 * (np.arange(401) % 2)))
    comb = polygon(points=[(2.0, 0.0), *map(tuple, teeth[::-1].tolist()), (0.0, 0.0)])
    stations = on_outline(comb, Forces(M=1e3), ShearForces(V=1e4))
    assert len(stations.sigma) < 25_000
    assert np.isfinite(stations.tau).all()

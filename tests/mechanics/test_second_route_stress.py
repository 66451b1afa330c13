"""The stress field, integrated over fibres, returns the forces it was made from."""

from dataclasses import replace

import pytest
from hypothesis import given, settings

from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.stress import stress_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import angle, i_shape
from calcgen.mechanics.stress import Forces, elastic_stress
from tests.mechanics.strategies import forces, outlines

ANGLE = angle(h=0.15, b=0.1, t=0.012, r_1=0.012, r_2=0.006).outline


@given(outlines(), forces)
@settings(max_examples=80, deadline=None)
def test_random_sections_return_random_forces(part: Outline, applied: Forces) -> None:
    plane = elastic_stress(section_properties(part), applied)
    for residual in stress_residuals(plane, applied, part):
        assert residual.holds, residual


@pytest.mark.parametrize(
    "applied",
    [
        Forces(),
        Forces(N=-1e3),
        Forces(M=1e3),
        Forces(M_lat=1e3),
        Forces(N=1e-9, M=1e3),
        Forces(1e3, 1e-12, -1e-12),
    ],
)
def test_single_and_negligible_forces_hold_too(applied: Forces) -> None:
    for part in (ANGLE, i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline):
        plane = elastic_stress(section_properties(part), applied)
        assert all(residual.holds for residual in stress_residuals(plane, applied, part))


@pytest.mark.parametrize(("term", "returned"), [("sigma_0", "N"), ("g_y", "M"), ("g_x", "M_lat")])
def test_a_term_off_by_a_millionth_is_found(term: str, returned: str) -> None:
    applied = Forces(N=-20e3, M=5e3, M_lat=2e3)
    plane = elastic_stress(section_properties(ANGLE), applied)
    spoiled = replace(plane, **{term: getattr(plane, term) * (1.0 + 1e-6)})
    residuals = {residual.what: residual for residual in stress_residuals(spoiled, applied, ANGLE)}
    assert not residuals[returned].holds


def test_bending_about_axes_that_are_not_principal_needs_the_product_moment() -> None:
    """Leaving I_hv out of an angle's stress brings a sideways moment that nobody applied."""
    found = section_properties(ANGLE)
    plane = elastic_stress(replace(found, I_hv=0.0), Forces(M=1e3))
    residuals = {residual.what: residual for residual in stress_residuals(plane, Forces(M=1e3), ANGLE)}
    assert residuals["M"].holds
    assert abs(residuals["M_lat"].residual) > 0.1

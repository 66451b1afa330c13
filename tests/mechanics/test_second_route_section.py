"""Fibres return the first route's properties, and find what has been spoiled."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings

from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.second_route.section import published_residuals, section_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import rectangle
from tests.exact.section_cases import CASES, SectionCase
from tests.mechanics.strategies import outlines


def failing(residuals: tuple[Residual, ...]) -> set[str]:
    return {residual.what for residual in residuals if not residual.holds}


@given(outlines())
@settings(max_examples=60, deadline=None)
def test_both_routes_agree_on_random_outlines_with_holes(part: Outline) -> None:
    assert not failing(section_residuals(section_properties(part), part))


@pytest.mark.parametrize("case", CASES, ids=[case.name for case in CASES])
def test_both_routes_agree_on_catalogued_sections(case: SectionCase) -> None:
    part = case.shape().outline
    assert not failing(section_residuals(section_properties(part), part))


def test_both_routes_agree_on_parts_that_touch_and_parts_with_a_gap() -> None:
    plates = [rectangle(b=0.2, h=0.02).outline.moved(0.0, y) for y in (0.0, 0.02, 0.3)]
    assert not failing(section_residuals(section_properties(*plates), *plates))


SPOILED = ["area", "x_bar", "y_bar", "I_h", "I_v", "I_hv", "y_p", "W_pl_h", "x_p", "W_pl_v"]


@pytest.mark.parametrize("symbol", SPOILED)
def test_a_value_off_by_a_millionth_is_found(symbol: str) -> None:
    part = outline([(0.0, 0.0), (0.3, 0.0), (0.1, 0.5)])
    found = section_properties(part)
    spoiled = replace(found, **{symbol: getattr(found, symbol) * (1.0 + 1e-6)})
    assert {"area": "A"}.get(symbol, symbol) in failing(section_residuals(spoiled, part))


@given(outlines())
@settings(max_examples=30, deadline=None)
def test_neither_the_sense_of_rings_nor_their_order_matters_to_fibres(part: Outline) -> None:
    first_hole = part.holes[:1]
    other = Outline(part.exterior[::-1].copy(), tuple(hole[::-1].copy() for hole in first_hole))
    here, there = fibres(part), fibres(other)
    for each in (here, there):
        assert each.area.min() >= 0.0
    assert there.area.sum() == pytest.approx(here.area.sum(), rel=1e-12)
    assert there.area @ there.y**2 == pytest.approx(here.area @ here.y**2, rel=1e-12)


def test_no_fibre_reaches_across_the_cut() -> None:
    """Sums of |y| over a rectangle cut at its middle are exact: b h²/4."""
    bundle = fibres(rectangle(b=0.1, h=0.3).outline, cut=0.0)
    assert bundle.area @ np.abs(bundle.y) == pytest.approx(0.1 * 0.3**2 / 4, rel=1e-14)


def test_published_values_against_the_outline() -> None:
    found = section_properties(rectangle(b=0.1, h=0.2).outline)
    published = {"A": 0.0202, "x_bar": 0.05, "I_h": 0.1 * 0.2**3 / 12, "I_t": 1.0, "W_el_h": 1.0}
    residuals = published_residuals(published, found, {"A": 0.005, "x_bar": 1e-9, "I_h": 1e-9, "I_t": 0.1})
    assert [residual.what for residual in residuals] == ["A", "x_bar", "I_h"]
    assert residuals[0].residual == pytest.approx(-0.0002 / 0.0202)
    assert failing(residuals) == {"A"}


def test_a_residual_that_is_not_a_number_never_holds() -> None:
    assert not Residual("A", float("nan"), 1e-9, "").holds
    assert (relative(0.0, 0.0), relative(1.0, 0.0), relative(1.0, 4.0)) == (0.0, float("inf"), 0.25)

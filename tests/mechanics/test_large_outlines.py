"""Outlines of thousands of corners: smooth ones, and combs and stars whose long edges all lie side by side.

By default with 20,000 corners, and with 100,000 where marked slow. The sweep that serves them is also tried
on small ones, of which many can be held against shapely.
"""

from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st
from shapely import LineString, Polygon

import calcgen.mechanics.crossings
import calcgen.mechanics.second_route.fibres
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.curved import curved_stress
from calcgen.mechanics.kern import kern
from calcgen.mechanics.outline import Outline, OutlineError, outline
from calcgen.mechanics.second_route.curved import curved_residuals
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.section import section_residuals
from calcgen.mechanics.second_route.stress import stress_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import box, i_shape, rectangle
from calcgen.mechanics.stress import Forces, elastic_stress
from tests.mechanics.strategies import outlines


def circle(corners: int) -> FloatArray:
    angles = np.linspace(0.0, 2.0 * np.pi, corners, endpoint=False)
    return 0.3 * np.column_stack((np.cos(angles), np.sin(angles)))


def comb(corners: int) -> FloatArray:
    """Upright teeth of random heights with gaps of random depths, on a common back."""
    generator = np.random.default_rng(1)
    teeth = (corners - 2) // 4
    x = np.arange(teeth) / teeth
    tip, gap = generator.uniform(0.2, 1.0, teeth), generator.uniform(0.02, 0.1, teeth)
    places = (x, x, x + 0.5 / teeth, x + 0.5 / teeth)
    profile = np.stack(
        [np.column_stack(pair) for pair in zip(places, (gap, tip, tip, gap), strict=True)], axis=1
    )
    return np.concatenate(([[0.0, -0.1]], profile.reshape(-1, 2), [[1.0, gap[-1]], [1.0, -0.1]]))


def slanting_comb(corners: int) -> FloatArray:
    """A comb whose edges overlap along both axes."""
    cos, sin = np.cos(0.7), np.sin(0.7)
    turned: FloatArray = comb(corners) @ np.array([[cos, sin], [-sin, cos]])
    return turned


def spikes(corners: int) -> FloatArray:
    """A star of spikes: from every direction, most edges overlap."""
    generator = np.random.default_rng(2)
    radii = np.where(
        np.arange(corners) % 2, generator.uniform(0.3, 0.4, corners), generator.uniform(0.8, 1.0, corners)
    )
    return circle(corners) / 0.3 * radii[:, None]


RINGS: list[Callable[[int], FloatArray]] = [circle, comb, slanting_comb, spikes]
SIZES = [20_000, pytest.param(100_000, marks=pytest.mark.slow)]


@pytest.mark.parametrize("corners", SIZES)
@pytest.mark.parametrize("ring", RINGS)
def test_both_routes_agree(ring: Callable[[int], FloatArray], corners: int) -> None:
    part = outline(ring(corners))
    assert len(part.exterior) > 0.99 * corners
    section = section_properties(part)
    polygon = Polygon(part.exterior)
    assert section.area == pytest.approx(polygon.area, rel=1e-11)
    assert (section.x_bar, section.y_bar) == pytest.approx(
        (polygon.centroid.x, polygon.centroid.y), abs=1e-11
    )
    assert all(residual.holds for residual in section_residuals(section, part))
    forces = Forces(N=1e3, M=2e3, M_lat=-1e3)
    assert all(each.holds for each in stress_residuals(elastic_stress(section, forces), forces, part))


@pytest.mark.parametrize("corners", SIZES)
@pytest.mark.parametrize("ring", [circle, spikes])
def test_curved_bars_and_kerns(ring: Callable[[int], FloatArray], corners: int) -> None:
    part = outline(ring(corners))
    section = section_properties(part)
    stress = curved_stress(section, 1e3, 2e3, 1.5 * section.c_bottom, "bottom", part)
    assert all(residual.holds for residual in curved_residuals(stress, part))
    assert Polygon(kern(section, part).corners).is_valid


@pytest.mark.parametrize("corners", SIZES)
@pytest.mark.parametrize("ring", [slanting_comb, spikes])
def test_a_crossing_among_long_edges_is_found(ring: Callable[[int], FloatArray], corners: int) -> None:
    points = ring(corners)
    k = corners // 12 * 4 + 2
    points[[k, k + 4]] = points[[k + 4, k]]  # the tips of two teeth
    assert not LineString(points[k - 2 : k + 7]).is_simple
    with pytest.raises(OutlineError, match="crosses") as error:
        outline(points)
    assert all(k - 1 <= vertex <= k + 4 for vertex in error.value.vertices)


@pytest.mark.parametrize("corners", SIZES)
def test_a_plate_with_many_holes(corners: int) -> None:
    """Square holes in rows: the areas and second moments add up, by Steiner's theorem."""
    across = round((corners / 4) ** 0.5)
    square = np.array([(-0.2, -0.2), (0.2, -0.2), (0.2, 0.2), (-0.2, 0.2)])
    places = [(i + 0.5, j + 0.5) for i in range(across) for j in range(across)]
    plate = [(0, 0), (across, 0), (across, across), (0, across)]
    found = section_properties(outline(plate, [square + place for place in places]))
    arms = np.array(places)[:, 1] - 0.5 * across
    assert found.area == pytest.approx(across**2 * (1.0 - 0.16), rel=1e-12)
    assert found.I_h == pytest.approx(
        across**4 / 12.0 - len(places) * 0.4**4 / 12.0 - 0.16 * float(arms @ arms), rel=1e-12
    )


@pytest.fixture
def swept(monkeypatch: pytest.MonkeyPatch) -> None:
    """Every outline is large."""
    monkeypatch.setattr(calcgen.mechanics.crossings, "PAIRS_AT_ONCE", -1)
    monkeypatch.setattr(calcgen.mechanics.second_route.fibres, "MANY_PIECES", -1)


@pytest.mark.usefixtures("swept")
@given(st.lists(st.tuples(st.integers(0, 6), st.integers(0, 6)), min_size=3, max_size=9))
@example([(2, 2), (1, 0), (1, 2), (0, 0), (0, 3), (1, 2)])  # two corners at one place
@settings(max_examples=300, deadline=None)
def test_the_sweep_refuses_exactly_what_is_not_simple(corners: list[tuple[int, int]]) -> None:
    """Shapely as the oracle; on a grid of 7 × 7 crossings, contacts and level edges are frequent."""
    distinct = [p for i, p in enumerate(corners) if p != corners[i - 1]]
    simple = len(distinct) > 2 and Polygon(distinct).is_valid and Polygon(distinct).area > 0.0
    try:
        part = outline(corners)
    except OutlineError:
        assert not simple
    else:
        assert simple
        assert fibres(part).area.sum() == pytest.approx(Polygon(distinct).area, rel=1e-12)


@pytest.mark.usefixtures("swept")
@given(outlines())
@settings(max_examples=40, deadline=None)
def test_the_sweep_gives_the_same_sums(part: Outline) -> None:
    section = section_properties(part)
    assert all(residual.holds for residual in section_residuals(section, part))
    bundle = fibres(part, cut=[section.y_bar, section.y_bar + 0.01])
    assert bundle.area.min() >= 0.0


@pytest.mark.usefixtures("swept")
def test_the_sweep_takes_parts_that_touch_and_level_edges() -> None:
    parts = [
        *(rectangle(b=0.2, h=0.02).outline.moved(0.0, y) for y in (0.0, 0.02, 0.3)),
        box(b=0.1, h=0.2, t=0.01, r_o=0.015).outline.moved(0.0, 0.6),
        i_shape(h=0.2, b=0.1, t_w=0.006, t_f=0.01, r=0.01).outline.moved(0.4, 0.0),
    ]
    assert all(residual.holds for residual in section_residuals(section_properties(*parts), *parts))


def test_fibres_of_an_outline_that_was_not_checked_say_so(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(calcgen.mechanics.second_route.fibres, "MANY_PIECES", -1)
    bow_tie = Outline(np.array([(0.0, 0.0), (1.0, 1.0), (1.0, 0.0), (0.0, 2.0)]))
    with pytest.raises(ValueError, match="meet beside its corners"):
        fibres(bow_tie)

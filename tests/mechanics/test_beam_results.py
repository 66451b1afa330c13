"""Reading a solution: sides of jumps, extremes and their places, crossings, lines to draw, envelopes."""

from __future__ import annotations

import numpy as np
import pytest

from calcgen.mechanics.beam import (
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    Load,
    PointLoad,
    PointMoment,
    Quantity,
    Settlement,
    combine,
    fixed,
    pin,
    prismatic,
    solve,
)
from calcgen.mechanics.combinations import Envelope

EI = 2e6
SIMPLE = prismatic(6.0, EI, (pin(0.0), pin(6.0)))
TWO_SPANS = prismatic(12.0, EI, (pin(0.0), pin(6.0), pin(12.0)))


def solved(*loads: Load) -> CaseSolution:
    return solve(SIMPLE, {"case": loads})["case"]


def test_a_jump_has_two_sides() -> None:
    s = solved(PointLoad(2.0, 9e3))
    assert s.at("V", 2.0, "left") == pytest.approx(6e3)
    assert s.at("V", 2.0, "right") == pytest.approx(-3e3)
    assert s.at("V", 2.0) == pytest.approx(6e3)  # the larger of the two, when no side is named
    assert s.at("V", 0.0, "left") == pytest.approx(6e3)  # at the ends the inner side


@pytest.mark.parametrize("offset", [0.0, 3e-9, -3e-9])
def test_a_place_within_rounding_of_a_node_is_the_node(offset: float) -> None:
    s = solved(PointLoad(2.0, 9e3))
    assert s.at("V", 2.0 + offset, "left") == pytest.approx(6e3)


def test_of_equal_extremes_the_leftmost_is_named() -> None:
    s = solved(PointLoad(2.0, 9e3), PointLoad(4.0, 9e3))
    e = s.extremes("M")
    assert e.max == pytest.approx(18e3)
    assert e.x_max == 2.0
    assert (e.min, e.x_min) == (0.0, 0.0)
    shear = s.extremes("V")
    assert (shear.x_max, shear.x_min, shear.x_abs) == (0.0, 4.0, 0.0)


def test_extremes_of_a_range_take_its_inner_sides() -> None:
    s = solved(PointLoad(2.0, 9e3))
    assert s.extremes("V", 2.0, 5.0).max == pytest.approx(-3e3)
    assert s.extremes("V", 1.0, 2.0).min == pytest.approx(6e3)
    inner = s.extremes("M", 2.5, 3.5)
    assert (inner.x_max, inner.x_min) == (2.5, 3.5)


def both_sides(s: CaseSolution, quantity: Quantity, x: float) -> tuple[float, float]:
    return s.at(quantity, x, "left"), s.at(quantity, x, "right")


@pytest.mark.parametrize("quantity", ["w", "slope", "M", "V"])
def test_extremes_bound_a_fine_sampling_and_are_attained(quantity: Quantity) -> None:
    model = prismatic(15.0, EI, (fixed(0.0), pin(5.0), pin(11.0)), (2.0,))
    loads = (DistributedLoad(1.0, 13.0, -4e3, 9e3), PointLoad(15.0, -6e3), PointMoment(8.0, 7e3))
    s = solve(model, {"case": loads})["case"]
    for start, end in ((0.0, 15.0), (3.3, 9.7), (5.0, 11.0)):
        e = s.extremes(quantity, start, end)
        x = np.linspace(start, end, 4001)[1:-1]
        values = s.values(quantity, x)
        slack = 1e-10 * np.abs(values).max()
        assert e.min - slack <= values.min()
        assert values.max() <= e.max + slack
        assert any(e.max == pytest.approx(value, rel=1e-9) for value in both_sides(s, quantity, e.x_max))
        assert any(e.min == pytest.approx(value, rel=1e-9) for value in both_sides(s, quantity, e.x_min))


def test_points_of_contraflexure() -> None:
    """Fixed ends under a uniform load: L(3 ± √3)/6. A pinned end is none."""
    s = solve(prismatic(6.0, EI, (fixed(0.0), fixed(6.0))), {"case": (DistributedLoad.uniform(0, 6, 1e3),)})[
        "case"
    ]
    assert s.crossings("M") == pytest.approx((3 - 3**0.5, 3 + 3**0.5), rel=1e-10)
    assert s.crossings("M", 0.0, 3.0) == pytest.approx((3 - 3**0.5,), rel=1e-10)
    assert solved(DistributedLoad.uniform(0, 6, 1e3)).crossings("M") == ()


def test_a_sign_changes_at_a_jump_and_across_zeros() -> None:
    assert solved(PointLoad(2.0, 9e3)).crossings("V") == (2.0,)
    assert solved(PointMoment(2.0, 9e3)).crossings("M") == (2.0,)
    assert solved(PointLoad(2.0, 9e3), PointLoad(4.0, 9e3)).crossings("V") == (2.0,)  # V = 0 from 2 m to 4 m
    overhangs = prismatic(8.0, EI, (pin(1.0), pin(7.0)))
    touching = solve(overhangs, {"case": (PointMoment(1.0, 1e3), PointMoment(7.0, -1e3))})["case"]
    assert touching.crossings("M") == ()


def test_spans_lie_between_supports() -> None:
    model = prismatic(10.0, EI, (pin(1.0), pin(4.0, ("lateral",)), pin(6.0), pin(9.0)))
    assert model.spans == ((1.0, 6.0), (6.0, 9.0))


def test_a_line_to_draw_shows_both_sides() -> None:
    s = solved(PointLoad(2.0, 9e3))
    x, V = s.polyline("V", 4)
    assert x.tolist() == [0.0, 0.5, 1.0, 1.5, 2.0, 2.0, 3.0, 4.0, 5.0, 6.0]
    assert pytest.approx([6e3] * 5 + [-3e3] * 5) == V


def test_lateral_results_need_lateral_stiffness() -> None:
    with pytest.raises(ValueError, match="vertical axis"):
        solved().at("w_lat", 1.0)
    model = prismatic(6.0, BendingStiffness(EI, EI), SIMPLE.supports)
    still = solve(model, {"case": (PointLoad(2.0, 9e3),)})["case"]
    assert still.extremes("w_lat").abs == 0.0


def test_places_outside_the_beam() -> None:
    with pytest.raises(ValueError, match="outside"):
        solved().at("M", 6.5)
    with pytest.raises(ValueError, match="length"):
        solved().extremes("M", 3.0, 3.0)


def test_rounding_is_not_shown_as_a_result() -> None:
    """A settlement does not stress a determinate beam."""
    s = solved(Settlement(1, 0.03))
    assert s.extremes("M").abs == 0.0
    assert [r.force for r in s.reactions] == [0.0, 0.0]
    assert s.at("w", 3.0) == pytest.approx(0.015, rel=1e-12)


@pytest.fixture(scope="module")
def envelope() -> Envelope:
    cases = solve(
        TWO_SPANS,
        {
            "G": (DistributedLoad.uniform(0, 12, 2e3),),
            "Q1": (DistributedLoad.uniform(0, 6, 5e3),),
            "Q2": (DistributedLoad.uniform(6, 12, 5e3),),
        },
    )
    return Envelope(
        {
            "left": combine(cases, {"G": 1.35, "Q1": 1.5}),
            "right": combine(cases, {"G": 1.35, "Q2": 1.5}),
            "both": combine(cases, {"G": 1.35, "Q1": 1.5, "Q2": 1.5}),
        }
    )


def test_an_envelope_names_what_governs(envelope: Envelope) -> None:
    """Two equal spans: M_B = -(q_1 + q_2)L²/16, and in a span R²/2q with R = qL/2 + M_B/L."""
    low, high = 1.35 * 2e3, 1.35 * 2e3 + 1.5 * 5e3
    M = envelope.extremes("M")
    assert (M.min.combination, M.min.x) == ("both", 6.0)
    assert M.min.value == pytest.approx(-2 * high * 36 / 16, rel=1e-10)
    R = high * 3 - (low + high) * 36 / 16 / 6
    assert M.max.combination == "left"
    assert M.max.x == pytest.approx(R / high, rel=1e-10)
    assert M.max.value == pytest.approx(R**2 / (2 * high), rel=1e-10)
    assert M.abs == M.min
    in_span_2 = envelope.extremes("M", 6.0, 12.0).max
    assert in_span_2.combination == "right"
    assert in_span_2.x == pytest.approx(12 - R / high, rel=1e-10)


def test_an_envelope_of_a_place_and_of_a_reaction(envelope: Envelope) -> None:
    at_support = envelope.at("V", 6.0)
    assert (at_support.min.combination, at_support.max.combination) == ("both", "both")
    assert at_support.max.value == pytest.approx(-at_support.min.value, rel=1e-10)
    end = envelope.reaction(0)
    assert (end.max.combination, end.min.combination) == ("left", "right")
    middle = envelope.reaction(1)
    assert middle.max.value == pytest.approx(1.25 * (1.35 * 2e3 + 1.5 * 5e3) * 6, rel=1e-10)
    assert middle.min.combination == "left"  # equal to "right", and named first


def test_a_band_lies_around_every_combination(envelope: Envelope) -> None:
    band = envelope.band("M", 10)
    for solution in envelope.solutions.values():
        x, M = solution.polyline("M", 10)
        assert np.array_equal(x, band.x)
        assert np.all((band.low <= M) & (band.high >= M))
    assert np.count_nonzero(band.x == 6.0) == 2


def test_an_envelope_needs_one_mesh(envelope: Envelope) -> None:
    other = solve(TWO_SPANS, {"case": ()})["case"]
    with pytest.raises(ValueError, match="different"):
        Envelope({**envelope.solutions, "other": other})
    with pytest.raises(ValueError, match="at least one"):
        Envelope({})

"""What governs along an envelope: every state tried at many places, and roots by scipy."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

from calcgen.mechanics.actions import Actions, Combination, Governs
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    DistributedLoad,
    Load,
    PointLoad,
    Quantity,
    combine,
    fixed,
    pin,
    prismatic,
    solve,
)
from calcgen.mechanics.combinations import Envelope
from calcgen.mechanics.envelope import effects
from calcgen.mechanics.governing import stretches

BEAM = prismatic(17.0, 2e7, (fixed(0.0), pin(6.0), pin(14.0)), hinges=(9.0,))
CASES: dict[str, tuple[Load, ...]] = {
    "G": (DistributedLoad.uniform(0.0, 17.0, 4e3),),
    "Q": (DistributedLoad.uniform(0.0, 6.0, 7e3), PointLoad(11.0, 9e3)),
    "R": (DistributedLoad.uniform(6.0, 17.0, 6e3),),
}
FACTORS = {
    "U1": {"G": 1.35, "Q": 1.5},
    "U2": {"G": 1.35, "R": 1.5},
    "U3": {"G": 1.35, "Q": 1.5, "R": 1.05},
    "U4": {"G": 1.0},
}
quantities = pytest.mark.parametrize("quantity", ["M", "V", "w"])


@pytest.fixture(scope="module")
def envelope() -> Envelope:
    solved = solve(BEAM, CASES)
    return Envelope({name: combine(solved, factors) for name, factors in FACTORS.items()})


def names(stretch: Governs) -> set[str]:
    return {stretch.combination, *stretch.others}


@quantities
def test_each_stretch_names_the_combinations_that_give_the_extreme(
    envelope: Envelope, quantity: Quantity
) -> None:
    band = envelope.band(quantity, 40)
    nodes = envelope.solutions["U1"].nodes
    longest = float(np.diff(nodes).max())
    for row, sign in ((band.governs_high, 1.0), (band.governs_low, -1.0)):
        assert (row[0].start, row[-1].end) == (0.0, BEAM.length)
        assert all(a.end == b.start and names(a) != names(b) for a, b in pairwise(row))
        for stretch in row:
            margin = 1e-3 * BEAM.length
            x = np.linspace(stretch.start + margin, stretch.end - margin, 50)
            beside = np.min(np.abs(x[:, None] - nodes), axis=1)
            x = x[(beside > longest / 40) & (stretch.end - stretch.start > 2 * margin)]
            if not len(x):  # what governs on less than the distance of two places may be missed
                continue
            values = {n: sign * s.values(quantity, x) for n, s in envelope.solutions.items()}
            best = np.max(list(values.values()), axis=0)
            for name in names(stretch):
                np.testing.assert_allclose(values[name], best, atol=1e-9 * np.abs(best).max() + 1e-12)


@quantities
def test_a_stretch_ends_where_two_combinations_are_equal(envelope: Envelope, quantity: Quantity) -> None:
    """Roots by scipy.optimize.brentq; interpolation is off by the square of a 40th of an element at most."""
    nodes = envelope.solutions["U1"].nodes
    for row in (envelope.band(quantity, 40).governs_high, envelope.band(quantity, 40).governs_low):
        for before, after in pairwise(row):
            if np.min(np.abs(nodes - before.end)) < 0.2:
                continue  # at a jump, or a zero of both at a support

            def lead(x: float, one: str = before.combination, other: str = after.combination) -> float:
                here = np.array([x])
                states = envelope.solutions
                return float((states[one].values(quantity, here) - states[other].values(quantity, here))[0])

            exact = brentq(lead, before.end - 0.15, before.end + 0.15)
            assert before.end == pytest.approx(exact, abs=8.0 / 40**2)


def test_the_curves_of_few_states_make_the_edges(envelope: Envelope) -> None:
    band = envelope.band("M", 30)
    assert [curve.combination for curve in band.curves] == list(FACTORS)
    values = np.array([curve.values for curve in band.curves])
    np.testing.assert_array_equal(values.max(axis=0), band.high)
    np.testing.assert_array_equal(values.min(axis=0), band.low)


def test_the_curves_of_patterns_that_govern_make_the_edges() -> None:
    model = prismatic(12.0, 2e7, (pin(0.0), pin(6.0), pin(12.0)))
    cases = {"G": (DistributedLoad.uniform(0.0, 12.0, 3e3),), "Q": (DistributedLoad.uniform(0.0, 12.0, 5e3),)}
    actions = Actions(cases, frozenset({"Q"}))
    band = effects(model, actions, [Combination("U", {"G": 1.35, "Q": 1.5})]).band("M", 40)
    assert {curve.patterns for curve in band.curves} == {
        stretch.patterns for stretch in (*band.governs_high, *band.governs_low)
    }
    values = np.array([curve.values for curve in band.curves])
    size = np.abs(values).max()
    # an edge is made of these curves but for the place between two of its points where they cross
    assert np.abs(values.max(axis=0) - band.high).max() < 1e-3 * size
    assert np.abs(values.min(axis=0) - band.low).max() < 1e-3 * size


def test_combinations_that_are_equal_all_along_are_one_stretch() -> None:
    solved = solve(BEAM, CASES)
    factors = {"A": {"G": 1.35, "Q": 1.5}, "B": {"Q": 1.5, "G": 1.35}, "C": {"G": 1.0}}
    same = Envelope({name: combine(solved, each) for name, each in factors.items()})
    for row in (same.band("M").governs_high, same.band("M").governs_low):
        for stretch in row:
            assert names(stretch) in ({"A", "B"}, {"C"}, {"A", "B", "C"})


@settings(max_examples=60)
@given(st.lists(st.lists(st.integers(-2, 2), min_size=8, max_size=8), min_size=1, max_size=4))
def test_no_division_has_fewer_stretches(heights: list[list[int]]) -> None:
    """Against the fewest by trying every division (dynamic programming over the places)."""
    sums = np.array(heights, dtype=np.float64)

    def value(state: tuple[int, FloatArray], where: slice) -> FloatArray:
        return sums[state[0], where]

    found = list(stretches(np.arange(8.0), 1, sums, np.zeros((0, 8)), 0.0, value))
    best = sums == sums.max(axis=0)
    fewest = [0] + [99] * 6
    for end in range(1, 7):
        for start in range(end):
            if best[:, 1 + start : 1 + end].all(axis=1).any():
                fewest[end] = min(fewest[end], fewest[start] + 1)
    assert len(found) == fewest[6]

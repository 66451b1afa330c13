"""Bounds of what a train can do on a stretch: never passed, and close once the stretch is short."""

from __future__ import annotations

from math import comb

import numpy as np
import pytest
from hypothesis import given, settings

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    NO_SHEAR,
    BeamModel,
    Quantity,
    ShearStiffness,
    fixed,
    pin,
    prismatic,
)
from calcgen.mechanics.influence import influence
from calcgen.mechanics.moving_loads import Crossing
from calcgen.mechanics.stretch_bounds import DEGREE
from calcgen.mechanics.trains import Train
from tests.mechanics.test_trains import crossings

OF_A_BEAM: tuple[Quantity, ...] = ("M", "V", "w", "slope", "rotation")


def overshoot(crossing: Crossing, quantity: Quantity, parts: int) -> tuple[FloatArray, float]:
    """Return how far the bounds lie beyond what is reached within each stretch, and the largest effect."""
    nodes = crossing.influence.nodes
    length = np.repeat(np.diff(nodes), parts) / parts
    start = np.repeat(nodes[:-1], parts) + length * np.tile(np.arange(parts), len(nodes) - 1)
    part = np.random.default_rng(1).random(len(start))
    i = np.arange(DEGREE + 1)
    weights = (
        np.array([comb(DEGREE, k) for k in i]) * part[:, None] ** i * (1.0 - part[:, None]) ** (DEGREE - i)
    )
    high, low = np.sum(crossing.bounds(quantity, start, length) * weights, axis=2)
    reached = crossing.reach(quantity, start + part * length, right=np.ones(len(start), dtype=bool))
    size = max(float(reached.high.max()), -float(reached.low.min()))
    return np.concatenate([high - reached.high, reached.low - low]), size


@pytest.mark.parametrize("quantity", OF_A_BEAM)
@given(crossings())
@settings(max_examples=10, deadline=None)
def test_no_effect_passes_the_bounds(quantity: Quantity, drawn: tuple[BeamModel, Train]) -> None:
    crossing = Crossing(influence(drawn[0]), drawn[1])
    for parts in (1, 3, 20):
        beyond, size = overshoot(crossing, quantity, parts)
        assert beyond.min() >= -1e-11 * size


@pytest.mark.parametrize("shear", [NO_SHEAR, ShearStiffness(1e7)])
@pytest.mark.parametrize("quantity", OF_A_BEAM)
def test_on_short_stretches_the_bounds_are_close(quantity: Quantity, shear: ShearStiffness) -> None:
    """Ten times shorter, a hundred times closer, but for single stretches with a kink or jump."""
    model = prismatic(22.0, 2e7, (fixed(0.0), pin(6.0), pin(14.0), pin(20.0)), shear=shear)
    crossing = Crossing(influence(model), Train((80e3, 80e3, 40e3), (1.2, 3.6)))
    for parts, share in ((30, 3e-3), (300, 3e-5)):
        beyond, size = overshoot(crossing, quantity, parts)
        assert np.quantile(beyond, 0.9) <= share * size

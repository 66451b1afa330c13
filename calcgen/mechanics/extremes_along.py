"""Extremes of combinations along a beam: by roots where no train moves, else by bounds of what is reached."""

from __future__ import annotations

from itertools import product
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.acting import Shares
from calcgen.mechanics.actions import Effect, EffectRange
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import Quantity
from calcgen.mechanics.beam.mesh import nearest
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.combined import Combined
from calcgen.mechanics.influence import BoolArray, IntArray
from calcgen.mechanics.peaks import Places, divided, stationary
from calcgen.mechanics.search import Curves, highest

_Found: TypeAlias = dict[tuple[int, bool], Effect]
"""Extremes in one range, by the number of the combination and whether it is the smallest."""


def extremes_of_each(
    combined: Combined, quantity: Quantity, joints: FloatArray, range_of: IntArray
) -> list[dict[str, EffectRange]]:
    """Give the extremes of each combination in each range.

    Effects run smoothly between `joints` (i + 1,), m, and `range_of` (i,) numbers the range of each interval.
    """
    found: list[_Found] = [{} for _ in range(int(range_of.max()) + 1)]
    if combined.moving.any():
        _by_bounds(combined, quantity, joints, range_of, found)
    if not combined.moving.all():
        _by_roots(combined, quantity, joints, range_of, found)
    return [
        {c.name: EffectRange(each[i, False], each[i, True]) for i, c in enumerate(combined.combinations)}
        for each in found
    ]


def _by_roots(
    combined: Combined,
    quantity: Quantity,
    joints: FloatArray,
    range_of: IntArray,
    found: list[_Found],
) -> None:
    """Find the extremes of the combinations without trains: they lie at joints and roots."""
    pieces, noise = combined.acting.of(quantity)
    fixed, varying = combined.factors
    count, nodes = len(combined.acting.fixed), combined.acting.nodes
    shares = pieces[count:].copy()
    shares[np.abs(shares).max(axis=2) <= noise[count:, None]] = 0.0
    own = np.tensordot(fixed, pieces[:count], axes=1)
    parts = varying[:, : len(combined.acting.by_length)] @ combined.acting.member
    ends, sides = divided(joints[:-1], joints[1:], 1)
    x, right = ends.ravel(), sides.ravel()
    seeds = combined.acting.shares(quantity, x, right, trains=False)
    h = np.diff(nodes)
    for number, low in product(range(len(found)), (False, True)):
        here = np.flatnonzero(range_of == number)
        start, end = (
            np.clip((joint - nodes[:-1]) / h, 0.0, 1.0) for joint in (joints[here[0]], joints[here[-1] + 1])
        )
        at = slice(2 * here[0], 2 * here[-1] + 2)
        sign = -1.0 if low else 1.0
        values = sign * combined.sums(seeds, low=low)[:, at]
        for c in np.flatnonzero(~combined.moving).tolist():
            best = float(values[c].max())
            equal = values[c] >= best - TIE * abs(best)
            turns = stationary(sign * own[c, None], sign * parts[c, None], shares, start, end, best)
            places = [
                *zip(x[at][equal].tolist(), right[at][equal].tolist(), strict=True),
                *((float(nodes[element] + h[element] * t), True) for element, t in turns),
            ]
            found[number][c, low] = _best_of(combined, quantity, joints, places, c, low=low)


def _by_bounds(
    combined: Combined,
    quantity: Quantity,
    joints: FloatArray,
    range_of: IntArray,
    found: list[_Found],
) -> None:
    """Find the extremes of the combinations with trains."""
    moving = np.flatnonzero(combined.moving)

    def both(shares: Shares) -> FloatArray:
        high, low = (combined.sums(shares, low=low)[moving] for low in (False, True))
        return np.concatenate([high, -low])

    def bounds(start: FloatArray, length: FloatArray) -> FloatArray:
        controls = both(combined.acting.control_shares(quantity, start, length))
        return np.asarray(controls.reshape(len(controls), len(start), -1).max(axis=2))

    noise = sum(
        np.abs(factors[moving]) @ each
        for factors, each in zip(combined.factors, combined.acting.noise(quantity), strict=True)
    )
    curves = Curves(
        joints,
        lambda x, right: both(combined.acting.shares(quantity, x, right)),
        bounds,
        np.tile(noise, 2),
    )
    x, right = _snapped(combined, joints, *highest(curves, range_of))
    shares = combined.acting.shares(quantity, x.ravel(), right.ravel())
    for curve, number in np.ndindex(x.shape):
        c, low = int(moving[curve % len(moving)]), curve >= len(moving)
        place = curve * x.shape[1] + number
        found[number][c, low] = combined.effect(shares, c, place, low=low)


def _best_of(
    combined: Combined, quantity: Quantity, joints: FloatArray, places: Places, combination: int, *, low: bool
) -> Effect:
    """Give the extreme of a combination without trains among places; of equal ones the first."""
    x, right = (np.array(each) for each in zip(*places, strict=True))
    shares = combined.acting.shares(quantity, *_snapped(combined, joints, x, right), trains=False)
    values = combined.sums(shares, low=low)[combination] * (-1.0 if low else 1.0)
    best = float(values.max())
    return combined.effect(shares, combination, int(np.argmax(values >= best - TIE * abs(best))), low=low)


def _snapped(
    combined: Combined, joints: FloatArray, x: FloatArray, right: BoolArray
) -> tuple[FloatArray, BoolArray]:
    """Take a place that is next to a joint for the joint, on the side from which it was reached."""
    near = joints[nearest(joints, x)]
    close = np.abs(x - near) <= 2.0 * combined.acting.model.tolerance
    return np.where(close, near, x), np.where(close & (x != near), x > near, right)

"""Where curves along a beam are largest, found by bounds: no stretch is left out that could hold the largest.

Stretches are divided as long as a curve may exceed, on them, the best value found by more than `CERTAIN` of
it. The best place is then closed in on, within the stretches beside it.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.influence import BoolArray, IntArray
from calcgen.mechanics.peaks import divided

CERTAIN: Final = 1e-9
"""Part of the best value by which no place left out exceeds it."""
_PARTS, _DEPTH, _MOST = 4, 12, 5000
"""Parts of a divided stretch, how often at most (at a jump a bound never comes down to the values), and the
most stretches that are divided at once: a curve that is nearly level would have them without end."""
_BESIDE, _CLOSER, _ROUNDS, _FLAT = np.array([-2, -1, 1, 2]) / 3, 3.0, 30, 1e-15
"""Where it is looked beside a best place, how much closer each time, how often at most, and what is flat."""


@dataclass(frozen=True, eq=False)
class Curves:
    """Curves along a beam, that are polynomials between `joints` (i + 1,), m, but for kinks and jumps.

    `values` gives all c of them at places (k,), on the right of each or on the left, (c, k); `bounds` what
    none exceeds on stretches between joints, given by start and length, m, (k,) each, (c, k). `noise` (c,) is
    the size below which a value is rounding error.
    """

    joints: FloatArray
    values: Callable[[FloatArray, BoolArray], FloatArray]
    bounds: Callable[[FloatArray, FloatArray], FloatArray]
    noise: FloatArray


@dataclass(eq=False)
class _Best:
    """The best place of each curve in each range so far, (c, r), and the `reach` to the places beside it."""

    value: FloatArray
    x: FloatArray
    interval: IntArray
    reach: FloatArray

    def better(
        self, values: FloatArray, x: FloatArray, interval: IntArray, reach: FloatArray, range_of: IntArray
    ) -> None:
        """Take better places (k,) from values (c, k); of equal ones the first stays."""
        for number in np.unique(range_of):
            here = np.flatnonzero(range_of == number)
            most = values[:, here].max(axis=1)
            first = np.argmax(values[:, here] >= (most - TIE * np.abs(most))[:, None], axis=1)
            value = values[np.arange(len(values)), here[first]]
            held = self.value[:, number]
            new = np.flatnonzero(value > held + np.where(np.isfinite(held), TIE * np.abs(held), 0.0))
            place = here[first[new]]
            self.value[new, number], self.x[new, number] = value[new], x[place]
            self.interval[new, number], self.reach[new, number] = interval[place], reach[place]


def highest(curves: Curves, range_of: IntArray) -> tuple[FloatArray, BoolArray]:
    """Give where each curve is largest in each of r ranges: places (c, r), and whether on their right side.

    `range_of` (i,) numbers the range of each interval between joints.
    """
    joints = curves.joints
    start, end = joints[:-1], joints[1:]
    x, right = divided(start, end, _PARTS)
    values = curves.values(x.ravel(), right.ravel())
    interval, reach = np.arange(len(start)), (end - start) / _PARTS
    shape = len(values), int(range_of.max()) + 1
    best = _Best(np.full(shape, -np.inf), np.zeros(shape), np.zeros(shape, dtype=np.intp), np.zeros(shape))
    each = np.repeat(interval, _PARTS + 1)
    best.better(values, x.ravel(), each, reach[each], range_of[each])
    a, w, at = x[:, :-1].ravel(), np.repeat(reach, _PARTS), np.repeat(interval, _PARTS)
    alive = np.ones((len(values), len(a)), dtype=bool)
    for _ in range(_DEPTH):
        held = best.value[:, range_of[at]]
        slack = np.maximum(CERTAIN * np.abs(held), curves.noise[:, None])
        alive &= curves.bounds(a, w) > held + slack
        kept = alive.any(axis=0)
        if not 0 < kept.sum() < _MOST:
            break
        a, w, at, alive = a[kept], w[kept] / _PARTS, at[kept], alive[:, kept]
        inner = (a[:, None] + w[:, None] * np.arange(1, _PARTS)).ravel()
        each = np.repeat(at, _PARTS - 1)
        values = curves.values(inner, np.ones(len(inner), dtype=bool))
        values[~np.repeat(alive, _PARTS - 1, axis=1)] = -np.inf
        best.better(values, inner, each, np.repeat(w, _PARTS - 1), range_of[each])
        a = (a[:, None] + w[:, None] * np.arange(_PARTS)).ravel()
        w, at, alive = (np.repeat(part, _PARTS, axis=-1) for part in (w, at, alive))
    return _closed_in(curves, best)


def _closed_in(curves: Curves, best: _Best) -> tuple[FloatArray, BoolArray]:
    """Look ever closer beside the best places that lie between joints."""
    shape, interval = best.value.shape, best.interval.ravel()
    x, value, reach = best.x.ravel().copy(), best.value.ravel().copy(), best.reach.ravel().copy()
    low, high = curves.joints[interval], curves.joints[interval + 1]
    curve = np.repeat(np.arange(shape[0]), shape[1])
    moving = np.flatnonzero((x > low) & (x < high))
    for _ in range(_ROUNDS):
        if not len(moving):
            break
        at = np.clip(x[moving, None] + reach[moving, None] * _BESIDE, low[moving, None], high[moving, None])
        found = curves.values(at.ravel(), (at < high[moving, None]).ravel())
        found = found.reshape(shape[0], *at.shape)[curve[moving], np.arange(len(moving))]
        top = found.argmax(axis=1)[:, None]
        most = np.take_along_axis(found, top, axis=1)[:, 0]
        better = most > value[moving]
        x[moving] = np.where(better, np.take_along_axis(at, top, axis=1)[:, 0], x[moving])
        value[moving] = np.maximum(most, value[moving])
        reach[moving] /= _CLOSER
        falls = value[moving] - found.min(axis=1)
        moving = moving[falls > _FLAT * np.abs(value[moving])]
    return x.reshape(shape), (x < high).reshape(shape)

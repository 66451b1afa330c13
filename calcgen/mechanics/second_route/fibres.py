"""A section as a bundle of small fibres, from scan lines between the levels of its corners."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TypeAlias

import numpy as np
from numpy.typing import ArrayLike

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.sweep import IntArray, cells

Trapezia: TypeAlias = tuple[FloatArray, ...]  # bottom and height, m; x at bottom and top, left and right, m

GAUSS = 0.5 * (1.0 + np.array([-1.0, 1.0]) / np.sqrt(3.0))  # two points, exact for cubics
MANY_PIECES = 500_000  # of edges between neighbouring levels: combs and stars have millions


@dataclass(frozen=True, eq=False)
class Fibres:
    """Places x, y, m, and areas, m², of the fibres, (n,) each.

    Sums over them integrate any polynomial of the second degree in x and y exactly.
    """

    x: FloatArray
    y: FloatArray
    area: FloatArray


def fibres(*outlines: Outline, cut: ArrayLike | None = None) -> Fibres:
    """Split outlines that don't overlap into fibres; none reaches across the level or levels `cut`, m.

    The section is a stack of trapezia. Each gives 2 × 2 Gauss points. What lies inside follows from counting
    crossings: neither the sense of the rings nor which of them are holes is used.
    """
    cuts = np.unique(np.array([] if cut is None else cut, dtype=np.float64))
    low, height, left_low, left_high, right_low, right_high = _trapezia(outlines, cuts)
    x, y, area = [], [], []
    for v in GAUSS:
        x_left = left_low + v * (left_high - left_low)
        width = right_low + v * (right_high - right_low) - x_left
        for u in GAUSS:
            x.append(x_left + u * width)
            y.append(low + v * height)
            area.append(0.25 * width * height)
    return Fibres(np.concatenate(x), np.concatenate(y), np.concatenate(area))


def _trapezia(outlines: Sequence[Outline], cuts: FloatArray) -> Trapezia:
    """Cut all edges at the levels of all corners: between two of these the section is a row of trapezia."""
    rings = [ring for part in outlines for ring in part.rings]
    x_0, y_0 = np.concatenate(rings).T
    x_1, y_1 = np.concatenate([np.roll(ring, -1, axis=0) for ring in rings]).T
    levels = np.unique(np.append(y_0, cuts))
    first = np.searchsorted(levels, np.minimum(y_0, y_1))
    count = np.searchsorted(levels, np.maximum(y_0, y_1)) - first
    if count.sum() > MANY_PIECES:
        parts = [_cells(part, cuts) for part in outlines]
        return tuple(np.concatenate(arrays) for arrays in zip(*parts, strict=True))
    edge = np.repeat(np.arange(len(count)), count)
    band = np.arange(len(edge)) - np.repeat(np.cumsum(count) - count, count) + first[edge]
    run = (x_1 - x_0)[edge] / (y_1 - y_0)[edge]
    x_low = x_0[edge] + run * (levels[band] - y_0[edge])
    x_high = x_0[edge] + run * (levels[band + 1] - y_0[edge])
    order = np.lexsort((x_low + x_high, band))
    left, right = order[0::2], order[1::2]
    low, height = levels[band[left]], np.diff(levels)[band[left]]
    return low, height, x_low[left], x_high[left], x_low[right], x_high[right]


def _cells(part: Outline, cuts: FloatArray) -> Trapezia:
    """Cut an outline at `cuts` and where an edge gets another neighbour: about one trapezium a corner."""
    lengths = [len(ring) for ring in part.rings]
    start = np.concatenate(part.rings)
    end = np.concatenate([np.roll(ring, -1, axis=0) for ring in part.rings])
    follower = np.arange(1, len(start) + 1)
    follower[np.cumsum(lengths) - 1] -= lengths
    swept = cells(start, end, follower)
    if not swept.complete:
        raise ValueError("the edges of the outline meet beside its corners")
    solid = swept.inside & (swept.high > swept.low)
    low, high = swept.low[solid], swept.high[solid]
    first = np.searchsorted(cuts, low, side="right")
    count = np.searchsorted(cuts, high) - first + 1
    cell = np.repeat(np.arange(len(count)), count)
    index = np.arange(len(cell)) - np.repeat(np.cumsum(count) - count, count) + first[cell]
    levels = np.concatenate(([-np.inf], cuts, [np.inf]))
    low, high = np.maximum(low[cell], levels[index]), np.minimum(high[cell], levels[index + 1])

    def x(edge: IntArray, y: FloatArray) -> FloatArray:
        (x_0, y_0), (x_1, y_1) = start[edge].T, end[edge].T
        return np.asarray(x_0 + (x_1 - x_0) / (y_1 - y_0) * (y - y_0))

    left, right = swept.left[solid][cell], swept.right[solid][cell]
    return low, high - low, x(left, low), x(left, high), x(right, low), x(right, high)

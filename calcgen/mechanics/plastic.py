"""The axis that halves the area, and the plastic modulus about it, by clipping the outline exactly.

For a section without an axis of symmetry the modulus about a level half-area axis is the usual tabulated one;
bending then also needs the moment about the other axis that this stress block brings with it.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline

EQUAL_AREA = 1e-12  # of the whole area: smaller differences are rounding


@dataclass(frozen=True)
class PlasticAxes:
    """The level and the upright line that halve the area, m, and the plastic moduli about them, m³."""

    y_p: float
    x_p: float
    W_pl_h: float
    W_pl_v: float


def plastic_axes(*outlines: Outline) -> PlasticAxes:
    """Halve the area of outlines that don't overlap (one part each) both ways.

    Where a gap between parts halves the area, the axis is the middle of the gap.
    """
    start, end = all_edges(*outlines)
    y_p, W_pl_h = _half_area(start, end)
    x_p, W_pl_v = _half_area(seen_from_right(start), seen_from_right(end))
    return PlasticAxes(y_p, x_p, W_pl_h, W_pl_v)


def all_edges(*outlines: Outline) -> tuple[FloatArray, FloatArray]:
    """Start and end points of the edges of all outlines, (n, 2) each, m."""
    starts, ends = zip(*(part.edges for part in outlines), strict=True)
    return np.concatenate(starts), np.concatenate(ends)


def seen_from_right(points: FloatArray) -> FloatArray:
    """Turn points (n, 2) a quarter, so that their x becomes the height."""
    return np.column_stack((-points[:, 1], points[:, 0]))


def above(start: FloatArray, end: FloatArray, level: float) -> tuple[float, float]:
    """Return the area above `level`, m², and its first moment about the level, m³.

    By Green's theorem with heights from the level, A = -∮ y dx and S = -∮ y²/2 dx: the cut itself, where
    y = 0, adds nothing, so the clipped ring need not be closed.
    """
    y_start, y_end = start[:, 1] - level, end[:, 1] - level
    p, q = np.maximum(y_start, 0.0), np.maximum(y_end, 0.0)
    whole = np.abs(y_start) + np.abs(y_end)
    share = (p + q) / np.where(whole > 0.0, whole, 1.0)  # of the edge that lies above the level
    dx = share * (end[:, 0] - start[:, 0])
    return -0.5 * float(np.sum(dx * (p + q))), -float(np.sum(dx * (p * p + p * q + q * q))) / 6.0


def _half_area(start: FloatArray, end: FloatArray) -> tuple[float, float]:
    """Return the height that halves the area and the plastic modulus about it."""
    levels = np.unique(start[:, 1])
    area, moment = above(start, end, float(levels[0]))
    half = 0.5 * area
    lower = _last_level(start, end, levels, half + EQUAL_AREA * area)
    upper = _last_level(start, end, levels, half - EQUAL_AREA * area) + 1
    if (
        upper - lower > 1
    ):  # the levels between have half the area above them: one corner, or both sides of a gap
        height = 0.5 * float(levels[lower + 1] + levels[upper - 1])
    else:
        height = _within_band(start, end, float(levels[lower]), float(levels[upper]), half)
    upper_moment = above(start, end, height)[1]
    lower_moment = upper_moment - (moment - area * (height - float(levels[0])))
    return height, upper_moment + lower_moment


def _last_level(start: FloatArray, end: FloatArray, levels: FloatArray, target: float) -> int:
    """Index of the highest of the levels with more than `target` above it."""
    low, high = 0, len(levels) - 1
    while high - low > 1:
        middle = (low + high) // 2
        if above(start, end, float(levels[middle]))[0] > target:
            low = middle
        else:
            high = middle
    return low


def _within_band(start: FloatArray, end: FloatArray, low: float, high: float, target: float) -> float:
    """Height between neighbouring levels with the area `target` above: widths are linear, areas quadratic."""
    at_low, at_middle, at_high = (
        above(start, end, level)[0] - target for level in (low, 0.5 * (low + high), high)
    )
    c = 2.0 * (at_low - 2.0 * at_middle + at_high)
    b = at_high - at_low - c
    part = 2.0 * at_low / (-b + math.sqrt(max(b * b - 4.0 * c * at_low, 0.0)))
    return low + min(max(part, 0.0), 1.0) * (high - low)

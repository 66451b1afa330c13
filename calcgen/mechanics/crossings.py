"""Where edges of closed rings that are not neighbours meet; near O(n log n)."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.sweep import IntArray, cells

PAIRS_AT_ONCE = (
    500_000  # bounds the memory of one step to some tens of megabytes; beyond it a sweep is faster
)


def first_contact(
    start: FloatArray, end: FloatArray, follower: IntArray, tolerance: float
) -> tuple[int, int] | None:
    """Find two edges that cross or touch and are not neighbours in their ring.

    Parameters
    ----------
    start, end : (n, 2) end points of the edges, m.
    follower : (n,) index of the edge that follows in the same ring.
    tolerance : distance below which a point lies on a line, m.

    Returns
    -------
    The indices of the two edges, the smaller first, or None.
    """
    low, high = np.minimum(start, end) - tolerance, np.maximum(start, end) + tolerance

    def first_of(left: IntArray, right: IntArray) -> tuple[int, int] | None:
        near = ((low[left] <= high[right]) & (low[right] <= high[left])).all(axis=1)
        near &= (follower[left] != right) & (follower[right] != left)
        left, right = left[near], right[near]
        met = _meet(start[left], end[left], start[right], end[right], tolerance)
        if not met.any():
            return None
        pairs = np.sort(np.column_stack((left[met], right[met])), axis=1)
        i, j = pairs[np.lexsort((pairs[:, 1], pairs[:, 0]))[0]]
        return int(i), int(j)

    order, counts = _overlaps(low, high)
    totals = np.cumsum(counts)
    if totals[-1] > PAIRS_AT_ONCE:
        swept = cells(start, end, follower)
        # where two corners are one place, no cell need lie between the edges that meet there
        found = first_of(*_same_places(start, tolerance)) or first_of(swept.left, swept.right)
        if found is not None or swept.complete:
            return found
    first = 0
    while first < len(order):
        done = totals[first - 1] if first else 0
        last = max(first + 1, int(np.searchsorted(totals, done + PAIRS_AT_ONCE, side="right")))
        found = first_of(*_pairs(order, counts, first, last))
        if found is not None:
            return found
        first = last
    return None


def _same_places(points: FloatArray, tolerance: float) -> tuple[IntArray, IntArray]:
    """List corners within the tolerance of each other, as neighbours in the order of their places."""
    order = np.lexsort(points.T)
    near = np.flatnonzero((np.abs(np.diff(points[order], axis=0)) <= tolerance).all(axis=1))
    return order[near], order[near + 1]


def _overlaps(low: FloatArray, high: FloatArray) -> tuple[IntArray, IntArray]:
    """Sort edges along the axis on which fewer overlap; count those that each one overlaps further on."""
    sweeps = []
    for axis in (0, 1):
        order = np.argsort(low[:, axis], kind="stable")
        reach = np.searchsorted(low[order, axis], high[order, axis], side="right")
        sweeps.append((order, reach - np.arange(len(order)) - 1))
    return min(sweeps, key=lambda sweep: int(sweep[1].sum()))


def _pairs(order: IntArray, counts: IntArray, first: int, last: int) -> tuple[IntArray, IntArray]:
    """List the overlapping pairs of the edges `first` to `last` of the sweep, as indices of edges."""
    some = counts[first:last]
    left = np.repeat(np.arange(first, last), some)
    offset = np.arange(len(left)) - np.repeat(np.cumsum(some) - some, some)
    return order[left], order[left + 1 + offset]


def _meet(a: FloatArray, b: FloatArray, c: FloatArray, d: FloatArray, tolerance: float) -> NDArray[np.bool_]:
    """Tell which segments ab and cd share a point; their bounding boxes are known to overlap."""
    astride_ab = _side(a, b, c, tolerance) * _side(a, b, d, tolerance) <= 0
    astride_cd = _side(c, d, a, tolerance) * _side(c, d, b, tolerance) <= 0
    met: NDArray[np.bool_] = astride_ab & astride_cd
    return met


def _side(a: FloatArray, b: FloatArray, p: FloatArray, tolerance: float) -> FloatArray:
    """Return +1 where p lies left of the line ab, -1 right of it, 0 on it."""
    along, to_p = b - a, p - a
    cross = along[:, 0] * to_p[:, 1] - along[:, 1] * to_p[:, 0]
    on_line = np.abs(cross) <= tolerance * np.hypot(along[:, 0], along[:, 1])
    return np.where(on_line, 0.0, np.sign(cross))

"""The plane cut into cells by a level line that sweeps upwards over closed rings, in O(n log n).

Between two corners that the line meets, it crosses the same edges in the same order. A cell lies between two
edges that follow each other on the line, from where they become neighbours to where they cease to be. This
serves outlines with so many long edges beside each other that pairs, or rows of all edges at each level, are
too many: combs, zigzags, stars.
"""

from __future__ import annotations

from bisect import bisect_left
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray

IntArray = NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Cells:
    """Cells between neighbouring edges, (n,) each.

    left, right : indices of the edges; low, high : heights between which they are neighbours, m, equal
    for a moment at one level; inside : whether an odd number of edges lies to the left, `left` included.
    complete : whether the sweep reached the top. It stops where edges turn out not to be in order, which
    happens at a crossing or contact alone; the two edges concerned have been neighbours by then.
    """

    left: IntArray
    right: IntArray
    low: FloatArray
    high: FloatArray
    inside: NDArray[np.bool_]
    complete: bool


def cells(start: FloatArray, end: FloatArray, follower: IntArray) -> Cells:
    """Sweep over closed rings.

    Parameters
    ----------
    start, end : (n, 2) end points of the edges, m; none has no length.
    follower : (n,) index of the edge that follows in the same ring.
    """
    found, complete = _Line(start, end, follower).swept()
    table = np.array(found, dtype=np.float64).reshape(-1, 5)
    left, right, odd = table[:, [0, 1, 4]].astype(np.intp).T
    return Cells(left, right, table[:, 2], table[:, 3], odd == 1, complete)


class _Line:
    """The sweeping line: the edges it crosses, from left to right, and since when each has its neighbour.

    Corners are met from below, and from the left at one level, so that a level edge rises towards the right.
    """

    def __init__(self, start: FloatArray, end: FloatArray, follower: IntArray) -> None:
        x, y = start.T
        order = np.lexsort((x, y))
        rank, leader = np.empty_like(follower), np.empty_like(follower)
        rank[order] = np.arange(len(follower))
        leader[follower] = np.arange(len(follower))
        rises = rank < rank[follower]
        lower, upper = np.where(rises[:, None], start, end), np.where(rises[:, None], end, start)
        dx, dy = (upper - lower).T
        level = dy == 0.0
        self.x, self.y = x.tolist(), y.tolist()
        self.order, self.leader, self.rises = order.tolist(), leader.tolist(), rises.tolist()
        self.base_x: list[float] = np.where(level, upper[:, 0], lower[:, 0]).tolist()
        self.base_y: list[float] = lower[:, 1].tolist()
        self.run: list[float] = np.where(level, 0.0, dx / np.where(level, 1.0, dy)).tolist()
        out, back = end - start, start[leader] - start
        self.turns_left = (out[:, 0] * back[:, 1] - out[:, 1] * back[:, 0] > 0.0).tolist()
        self.edges: list[int] = []
        self.since = [0.0] * len(follower)
        self.found: list[tuple[int, int, float, float, int]] = []

    def swept(self) -> tuple[list[tuple[int, int, float, float, int]], bool]:
        """Meet all corners; return the cells, and whether the edges stayed in order."""
        base_x, base_y, run = self.base_x, self.base_y, self.run
        y = 0.0

        def place(edge: int) -> float:
            return base_x[edge] + (y - base_y[edge]) * run[edge]

        for corner in self.order:
            y = self.y[corner]
            index = bisect_left(self.edges, self.x[corner], key=place)
            after, before = corner, self.leader[corner]  # the edges that meet in this corner
            begins, ends = self.rises[after], self.rises[before]
            if begins and not ends:
                pair = (after, before) if not self.turns_left[corner] else (before, after)
                self._replace(index, index, pair, y)
                continue
            near = max(index - 2, 0)
            window = self.edges[near : index + 2]  # rounding may put the corner beside its own edges
            if begins or not ends:
                old, new = (before, after) if begins else (after, before)
                if old not in window:
                    return self._stopped(y)
                at = near + window.index(old)
                self._replace(at, at + 1, (new,), y)
            else:
                if after not in window or before not in window:
                    return self._stopped(y)
                first, second = sorted((near + window.index(after), near + window.index(before)))
                if second != first + 1:
                    return self._stopped(y)
                self._replace(first, second + 1, (), y)
        return self.found, True

    def _stopped(self, y: float) -> tuple[list[tuple[int, int, float, float, int]], bool]:
        """Close all cells: the two edges out of order are neighbours now, or have been before."""
        self._replace(0, len(self.edges), (), y)
        return self.found, False

    def _replace(self, first: int, last: int, new: tuple[int, ...], y: float) -> None:
        """Put `new` in the place of the edges `first` to `last`, closing the cells on either side."""
        edges, since = self.edges, self.since
        for left in range(max(first - 1, 0), min(last, len(edges) - 1)):
            edge = edges[left]
            self.found.append((edge, edges[left + 1], since[edge], y, 1 - left % 2))
        edges[first:last] = new
        for left in range(max(first - 1, 0), first + len(new)):
            since[edges[left]] = y

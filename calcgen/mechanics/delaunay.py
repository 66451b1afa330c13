"""Triangles of good quality between given edges, by Delaunay refinement in rounds.

A round triangulates all points at once. Edges that are missing or encroached upon (a point lies in the circle
over them) are split; once there are none, points go to the centres of the circles round triangles that are
too thin or too large (J. Ruppert, A Delaunay refinement algorithm for quality 2-dimensional mesh generation,
1995, from memory). Edges at an acute corner are split at powers of two from it, so that both sides of the
corner match and the splitting ends. The work is bounded: at the bound, triangles stay as they are.

Machines that round differently find the same triangles: equal lengths are equal but for a small difference,
new points lie on a grid, and of four points on one circle a slight shear tells which diagonal is chosen.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray

IntArray: TypeAlias = NDArray[np.intp]
BoolArray: TypeAlias = NDArray[np.bool_]

SMALLEST_ANGLE = math.radians(25.0)
THIN = 0.5 / math.sin(SMALLEST_ANGLE)  # circumradius over shortest side of a triangle with that angle
ACUTE = math.radians(75.0)  # corners below it are split in shells; the theory asks for 60°
ENCROACHED = 1e-9  # of the squared length: how far inside the circle over an edge a point must lie
SMALLEST = 1e-7  # of the size: sides that are not split for the sake of a better angle
POINTS = 6_000  # no more for better triangles
WORK = 60_000  # points of all rounds together: no more rounds for better triangles
MOST_WORK = 200_000  # no more rounds for edges that are missing
AT_ONCE = 1_000  # points put in one round; bounds the memory of comparing all pairs
EQUAL = 1e-9  # of a length: a smaller difference is none
GRID = 2.0**-33  # of the size, about: new points lie on a grid
SHEAR = np.array([[1.0, 7.1e-6], [1.3e-5, 1.0]])  # no four points stay on one circle
SCATTER = np.array(
    [1414.0, 1732.0]
)  # of equally bad triangles those come first that lie anywhere, not in a row
FAR = 4.0  # of the size: corners of a square round all points, so that no edge lies on the convex hull


class MeshError(ArithmeticError):
    """An outline cannot be meshed: its edges cross, or lie too close to each other for its size."""


@dataclass(frozen=True, eq=False)
class Corners:
    """Points (n, 2), edges of the boundary (k, 2), material on their left, and the ring of each edge (k,)."""

    points: FloatArray
    edges: IntArray
    ring: IntArray


@dataclass(frozen=True, eq=False)
class Size:
    """The length that sides of triangles should not exceed, m.

    `everywhere`; near each of the points `near` (n, 2) less: `at_points` plus `slope` times the distance.
    Triangles may be thin that have a side shorter than `finest`, or one longer than `thin_beyond`.
    """

    everywhere: float = math.inf
    near: FloatArray | None = None
    at_points: float = 0.0
    slope: float = 0.6
    finest: float = 0.0
    thin_beyond: float = math.inf

    def at(self, places: FloatArray) -> FloatArray:
        """Return the length, m, at places (n, 2), m."""
        everywhere = np.full(len(places), self.everywhere)
        if self.near is None or len(self.near) == 0:
            return everywhere
        from scipy.spatial import KDTree  # loaded only where something is meshed

        distance = KDTree(self.near).query(places)[0]
        length: FloatArray = np.minimum(everywhere, self.at_points + self.slope * distance)
        return length


def refine(corners: Corners, size: Size) -> tuple[Corners, IntArray]:
    """Return the corners with those that were added, and the triangles (m, 3), counter-clockwise.

    Raises
    ------
    MeshError
        Where the edges cannot all be made sides of triangles, because they cross or all but touch.
    """
    acute = _acute_corners(corners)
    smallest = max(size.finest, SMALLEST * float(np.ptp(corners.points, axis=0).max()))
    grid = GRID * 2.0 ** math.ceil(math.log2(float(np.ptp(corners.points, axis=0).max())))
    while (long := _lengths(corners) > (1.0 + EQUAL) * size.at(_middles(corners))).any():
        corners = _split(corners, long, acute)
    work = 0
    while True:
        inside, missing, encroached_upon = _triangles(corners)
        work += len(corners.points)
        good_enough = work > WORK or len(corners.points) > POINTS
        length = _lengths(corners)
        improved = (length > size.finest) & (length <= size.thin_beyond)
        broken: BoolArray = missing if good_enough else missing | (encroached_upon & improved)
        if broken.any():
            if work > MOST_WORK:
                break
            corners = _split(corners, broken, acute)
            continue
        if good_enough or _doubled_areas(corners, inside).min() <= 0.0:
            break
        middles, centres = _centres_of_bad(corners, inside, size, acute, smallest)
        encroached = _encroached_by(centres, corners)
        struck: BoolArray = np.logical_or.reduce(encroached, axis=0) & (length > size.finest)
        lost = encroached.any(axis=1) | _leave(middles, centres, corners, encroached_upon)
        centres = np.round(centres[~lost] / grid) * grid
        if not struck.any() and len(centres) == 0:
            break
        if struck.any():
            corners = _split(corners, struck, acute)
        corners = Corners(np.concatenate((corners.points, centres)), corners.edges, corners.ring)
    if missing.any() or not _closed(corners, inside):
        raise MeshError("the edges of the outline cannot be made sides of triangles")
    if _doubled_areas(corners, inside).min() <= 0.0:
        raise MeshError("walls of the outline are too thin for the digits of their coordinates")
    # where walls are thinner than the finest triangles, points may have come to lie outside
    used, triangles = np.unique(inside, return_inverse=True)
    edges = np.searchsorted(used, corners.edges)
    return Corners(corners.points[used], edges, corners.ring), triangles.reshape(-1, 3)


def cross(a: FloatArray, b: FloatArray) -> FloatArray:
    """Return the third component of the vector products of (n, 2) with (n, 2)."""
    product: FloatArray = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]
    return product


def _triangles(corners: Corners) -> tuple[IntArray, BoolArray, BoolArray]:
    """Return the triangles inside (m, 3), and which edges (k,) are missing, and which encroached upon.

    An edge is encroached upon from inside only. The triangles make sense where no edge is missing.
    """
    from scipy.sparse import coo_array  # loaded only where something is meshed
    from scipy.sparse.csgraph import connected_components
    from scipy.spatial import Delaunay, QhullError

    points = corners.points
    low, high = points.min(axis=0), points.max(axis=0)
    far = FAR * float(np.max(high - low)) * np.array([[-1.0, -1.0], [1.0, -1.0], [1.0, 1.0], [-1.0, 1.0]])
    n = len(points) + 4
    try:
        found = Delaunay(np.concatenate((points - 0.5 * (low + high), far)) @ SHEAR)
    except QhullError as flat:  # all points lie on one line, to the digits there are
        raise MeshError("the outline has no width") from flat
    triangles = found.simplices.astype(np.intp)
    sides = triangles * n + np.roll(triangles, -1, axis=1)  # from each corner to the next
    order = np.argsort(sides, axis=None)
    ordered = sides.reshape(-1)[order]

    def side_of(start: IntArray, end: IntArray) -> tuple[IntArray, BoolArray]:
        place = np.minimum(np.searchsorted(ordered, start * n + end), len(ordered) - 1)
        return order[place], ordered[place] == start * n + end

    start, end = corners.edges.T
    left, there = side_of(start, end)
    right, there_too = side_of(end, start)
    apex = points[np.minimum(triangles[left // 3, (left % 3 + 2) % 3], len(points) - 1)]
    to_start, to_end = points[start] - apex, points[end] - apex
    squared = np.sum((points[end] - points[start]) ** 2, axis=1)
    encroached_upon = np.sum(to_start * to_end, axis=1) < -ENCROACHED * squared

    # triangles that hang together without crossing an edge are inside when one has an edge on its left
    is_edge = np.zeros(len(triangles) * 3, dtype=bool)
    is_edge[left[there]] = True
    is_edge[right[there_too]] = True
    neighbours = found.neighbors[:, [2, 0, 1]].reshape(-1)  # across the side from each corner to the next
    own = np.repeat(np.arange(len(triangles)), 3)
    open_ = (neighbours >= 0) & ~is_edge
    m = len(triangles)
    graph = coo_array(
        (np.ones(int(open_.sum()), dtype=np.int8), (own[open_], neighbours[open_])), shape=(m, m)
    )
    _, region = connected_components(graph, directed=False)
    within = np.zeros(int(region.max()) + 1, dtype=bool)
    within[region[left[there] // 3]] = True
    inside = triangles[within[region]]
    return inside, ~(there & there_too), encroached_upon


def _closed(corners: Corners, inside: IntArray) -> bool:
    """Tell whether the triangles fill what the edges bound."""
    start, end = (corners.points[corners.edges[:, k]] - corners.points[0] for k in range(2))
    bounded = float(cross(start, end).sum())
    return math.isclose(float(_doubled_areas(corners, inside).sum()), bounded, rel_tol=1e-9)


def _doubled_areas(corners: Corners, inside: IntArray) -> FloatArray:
    a, b, c = (corners.points[inside[:, k]] for k in range(3))
    return cross(b - a, c - a)


def _lengths(corners: Corners) -> FloatArray:
    start, end = (corners.points[corners.edges[:, k]] for k in range(2))
    length: FloatArray = np.hypot(*(end - start).T)
    return length


def _middles(corners: Corners) -> FloatArray:
    start, end = (corners.points[corners.edges[:, k]] for k in range(2))
    middle: FloatArray = 0.5 * (start + end)
    return middle


def _acute_corners(corners: Corners) -> FloatArray:
    """Return 1 at points (n,) where the material has an acute angle, -1 where a notch has, 0 elsewhere."""
    start, end = corners.edges.T
    out_of, into = np.zeros_like(corners.points), np.zeros_like(corners.points)
    out_of[start] = into[end] = corners.points[end] - corners.points[start]
    turn = np.arctan2(cross(into, out_of), np.sum(into * out_of, axis=1))
    angle = math.pi - turn
    on_edge = np.zeros(len(corners.points), dtype=bool)
    on_edge[start] = True
    return np.where(on_edge & (angle < ACUTE), 1.0, np.where(angle > 2.0 * math.pi - ACUTE, -1.0, 0.0))


def _split(corners: Corners, which: BoolArray, acute: FloatArray) -> Corners:
    """Split edges in the middle, or at a power of two from the one acute corner that they end in."""
    start, end = corners.edges[which].T
    from_, to = corners.points[start], corners.points[end]
    length = np.hypot(*(to - from_).T)
    exponent = np.round(np.log2(0.5 * length) - EQUAL).astype(int)
    shell = np.round(np.ldexp(1.0, exponent) / length / GRID) * GRID  # between 0.35 and 0.71
    sharp = np.zeros(len(corners.points), dtype=bool)
    sharp[: len(acute)] = acute != 0.0
    share = np.where(sharp[start] == sharp[end], 0.5, np.where(sharp[start], shell, 1.0 - shell))
    new = len(corners.points) + np.arange(len(start))
    kept, ring = corners.edges[~which], corners.ring[which]
    return Corners(
        np.concatenate((corners.points, from_ + share[:, None] * (to - from_))),
        np.concatenate((kept, np.column_stack((start, new)), np.column_stack((new, end)))),
        np.concatenate((corners.ring[~which], ring, ring)),
    )


def _centres_of_bad(
    corners: Corners, inside: IntArray, size: Size, acute: FloatArray, smallest: float
) -> tuple[FloatArray, FloatArray]:
    """Return the middles of triangles that are too thin or too large, the worst first, and of their circles.

    Of centres that lie in each other's circle only the first is kept: the others may not be needed then.
    A triangle that is thin because of an acute corner of the outline cannot be helped.
    """
    corner = corners.points[inside]
    opposite = np.roll(corner, -2, axis=1) - np.roll(corner, -1, axis=1)
    sides = np.hypot(opposite[..., 0], opposite[..., 1])
    a, b = corner[:, 1] - corner[:, 0], corner[:, 2] - corner[:, 0]
    doubled = cross(a, b)
    radius = 0.5 * sides.prod(axis=1) / doubled
    shortest = np.argmax(sides <= (1.0 + EQUAL) * sides.min(axis=1)[:, None], axis=1)
    rows = np.arange(len(inside))
    tip = inside[rows, shortest]
    sharp = np.zeros(len(corners.points))
    sharp[: len(acute)] = acute
    thinness = radius / sides[rows, shortest]
    thin = (thinness > (1.0 + EQUAL) * THIN) & (sharp[tip] <= 0.0) & (sides[rows, shortest] > smallest)
    excess = radius * math.sqrt(3.0) / size.at(corner.mean(axis=1))  # an equilateral triangle's side
    bad = np.flatnonzero((thin | (excess > 1.0 + EQUAL)) & (sides.max(axis=1) <= size.thin_beyond))
    worst = np.maximum(np.where(thin, thinness / THIN, 0.0), excess)[bad]
    scattered = np.mod(corner[bad].mean(axis=1) @ SCATTER / np.ptp(corners.points), 1.0)
    first = np.lexsort((scattered, np.round(-worst, 6)))
    bad = bad[first[:AT_ONCE]]
    squared_a, squared_b = (np.sum(v[bad] ** 2, axis=1) for v in (a, b))
    to_centre = (
        np.column_stack(
            (
                b[bad, 1] * squared_a - a[bad, 1] * squared_b,
                a[bad, 0] * squared_b - b[bad, 0] * squared_a,
            )
        )
        / (2.0 * doubled[bad])[:, None]
    )
    centres = corner[bad, 0] + to_centre
    x, y = centres.T
    near = (
        np.hypot(x[:, None] - x, y[:, None] - y) < (1.0 - EQUAL) * radius[bad]
    )  # within the circle of the row
    kept = ~np.tril(near, -1).any(axis=1)
    return corner[bad[kept]].mean(axis=1), centres[kept]


def _encroached_by(centres: FloatArray, corners: Corners) -> BoolArray:
    """Tell for each centre and edge (c, k) whether the centre lies in the circle over the edge."""
    middle, half = _middles(corners), 0.5 * _lengths(corners)
    distance = np.hypot(centres[:, :1] - middle[:, 0], centres[:, 1:] - middle[:, 1])
    within: BoolArray = distance < (1.0 - EQUAL) * half
    return within


def _leave(middles: FloatArray, centres: FloatArray, corners: Corners, which: BoolArray) -> BoolArray:
    """Tell for each centre (c,) whether one of the edges marked lies between it and its triangle's middle."""
    start, end = (corners.points[corners.edges[which, k]] for k in range(2))
    along = end - start

    def side(points: FloatArray) -> FloatArray:
        found: FloatArray = along[:, 0] * (points[:, None, 1] - start[:, 1]) - along[:, 1] * (
            points[:, None, 0] - start[:, 0]
        )
        return found

    way = centres - middles
    ends = [
        way[:, :1] * (p[:, 1] - middles[:, 1:]) - way[:, 1:] * (p[:, 0] - middles[:, :1])
        for p in (start, end)
    ]
    beyond: BoolArray = ((side(centres) <= 0.0) & (side(middles) > 0.0) & (ends[0] * ends[1] <= 0.0)).any(
        axis=1
    )
    return beyond

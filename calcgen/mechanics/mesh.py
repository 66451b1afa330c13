"""Meshes of six-node triangles for outlines."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import BoolArray, Corners, IntArray, Size, cross, refine
from calcgen.mechanics.outline import Outline

CANDIDATES = 10  # triangles with the nearest middles, of which one mostly is the triangle sought
BESIDE = 1e-9  # a smaller negative area coordinate is rounding
AT_ONCE = 300_000  # pairs of a point and a triangle that are compared in one step


@dataclass(frozen=True, eq=False)
class Mesh:
    """Six-node triangles with straight edges.

    points : (n, 2), m; the corners of triangles first, then the middles of their edges.
    corners : how many of the points are corners.
    triangles : (m, 6) indices: corners counter-clockwise, then the middles of edges 0-1, 1-2 and 2-0.
    piece : (m,) the outline, in the order given, that a triangle is part of.
    boundary : (k, 3) indices: start, end and middle of each edge of the boundary, material on its left.
    ring : (k,) the ring that such an edge belongs to, counted through all outlines.
    outer : for each ring whether it is an outer one; the holes of its outline follow it.
    """

    points: FloatArray
    corners: int
    triangles: IntArray
    piece: IntArray
    boundary: IntArray
    ring: IntArray
    outer: BoolArray

    @cached_property
    def area(self) -> FloatArray:
        """Areas of the triangles (m,), m²."""
        a, b, c = (self.points[self.triangles[:, k]] for k in range(3))
        return 0.5 * cross(b - a, c - a)

    @cached_property
    def gradients(self) -> FloatArray:
        """Gradients of the area coordinates (m, 3, 2), 1/m."""
        corners = self.points[self.triangles[:, :3]]
        opposite = np.roll(corners, -2, axis=1) - np.roll(corners, -1, axis=1)
        inwards = np.stack((-opposite[..., 1], opposite[..., 0]), axis=-1)
        gradients: FloatArray = inwards / (2.0 * self.area)[:, None, None]
        return gradients

    def mapped(self, matrix: FloatArray, shift: FloatArray) -> Mesh:
        """Return the mesh with each point as row times `matrix` (2, 2), plus `shift`, m."""
        return replace(self, points=self.points @ matrix + shift)

    def locate(self, points: FloatArray) -> tuple[IntArray, FloatArray]:
        """Return the triangle (n,) that each point (n, 2), m, lies in, and its area coordinates there (n, 3).

        A point outside the mesh gets the triangle that it lies least beyond an edge of, with negative
        coordinates.
        """
        from scipy.spatial import KDTree  # loaded only where something is meshed

        tree = KDTree(self.points[self.triangles[:, :3]].mean(axis=1))
        candidates = tree.query(points, k=range(1, min(CANDIDATES, len(self.triangles)) + 1))[1]
        triangle, coordinates = self._fitting(points, candidates)
        others = np.flatnonzero(coordinates.min(axis=1) < -BESIDE)
        every = np.arange(len(self.triangles))
        step = max(1, AT_ONCE // len(every))
        for first in range(0, len(others), step):
            some = others[first : first + step]
            triangle[some], coordinates[some] = self._fitting(
                points[some], np.broadcast_to(every, (len(some), len(every)))
            )
        return triangle, coordinates

    def _fitting(self, points: FloatArray, candidates: IntArray) -> tuple[IntArray, FloatArray]:
        """Choose among the candidates (n, k) of each point the triangle that it lies farthest inside of."""
        gradients = self.gradients[candidates]
        origin = self.points[self.triangles[candidates, :3]]
        # each coordinate is 1 at its own corner
        coordinates = 1.0 + np.einsum("pkcd,pkcd->pkc", gradients, points[:, None, None] - origin)
        inside = (coordinates / np.hypot(gradients[..., 0], gradients[..., 1])).min(axis=2)
        best, rows = inside.argmax(axis=1), np.arange(len(points))
        return candidates[rows, best], coordinates[rows, best]


def triangulate(outlines: Sequence[Outline], size: Size) -> Mesh:
    """Mesh each outline by itself; the edges of outlines are edges of triangles, split where needed.

    Outlines are not joined: where two of them touch, each has points of its own.
    """
    return _joined([refine(_corners_of(part), size) for part in outlines])


def refined(mesh: Mesh, marked: BoolArray, size: Size | None = None) -> Mesh:
    """Return a finer mesh, with points in the middles of the edges of the marked triangles (m,).

    size : what else is asked of the triangles.
    """
    split = np.zeros(len(mesh.points), dtype=bool)
    split[mesh.triangles[marked, 3:]] = True
    parts = []
    for piece, rings in enumerate(np.split(np.arange(len(mesh.outer)), np.flatnonzero(mesh.outer)[1:])):
        nodes = np.unique(mesh.triangles[mesh.piece == piece])
        edges = np.flatnonzero(np.isin(mesh.ring, rings))
        start, end, middle = mesh.boundary[edges].T
        cut = split[middle]
        kept = nodes[(nodes < mesh.corners) | split[nodes]]
        pairs = np.concatenate(
            (
                np.column_stack((start, end))[~cut],
                np.column_stack((start, middle))[cut],
                np.column_stack((middle, end))[cut],
            )
        )
        ring = mesh.ring[edges] - rings[0]
        corners = Corners(
            mesh.points[kept],
            np.searchsorted(kept, pairs),
            np.concatenate((ring[~cut], ring[cut], ring[cut])),
        )
        parts.append(refine(corners, size or Size()))
    return _joined(parts)


def _corners_of(part: Outline) -> Corners:
    lengths = [len(ring) for ring in part.rings]
    firsts = np.cumsum([0, *lengths[:-1]])
    ends = [first + np.roll(np.arange(n), -1) for first, n in zip(firsts, lengths, strict=True)]
    edges = np.column_stack((np.arange(sum(lengths)), np.concatenate(ends)))
    return Corners(np.concatenate(part.rings), edges, np.repeat(np.arange(len(lengths)), lengths))


def _joined(parts: Sequence[tuple[Corners, IntArray]]) -> Mesh:
    """Join the pieces: count corners and rings through, and add the middles of edges."""
    point_shift = np.cumsum([0, *(len(corners.points) for corners, _ in parts)])
    rings = [int(corners.ring.max()) + 1 for corners, _ in parts]
    ring_shift = np.cumsum([0, *rings])
    points = np.concatenate([corners.points for corners, _ in parts])
    triangles = np.concatenate([found + shift for (_, found), shift in zip(parts, point_shift, strict=False)])
    edges = np.concatenate(
        [corners.edges + shift for (corners, _), shift in zip(parts, point_shift, strict=False)]
    )
    sides = np.stack((triangles, np.roll(triangles, -1, axis=1)), axis=-1).reshape(-1, 2)
    n = len(points)
    keys, side = np.unique(sides.min(axis=1) * n + sides.max(axis=1), return_inverse=True)
    first, second = np.divmod(keys, n)
    of_edges = np.searchsorted(keys, edges.min(axis=1) * n + edges.max(axis=1))
    outer = np.zeros(int(ring_shift[-1]), dtype=bool)
    outer[ring_shift[:-1]] = True
    return Mesh(
        points=np.concatenate((points, 0.5 * (points[first] + points[second]))),
        corners=n,
        triangles=np.column_stack((triangles, n + side.reshape(-1, 3))),
        piece=np.repeat(np.arange(len(parts)), [len(found) for _, found in parts]),
        boundary=np.column_stack((edges, n + of_edges)),
        ring=np.concatenate(
            [corners.ring + shift for (corners, _), shift in zip(parts, ring_shift, strict=False)]
        ),
        outer=outer,
    )

"""The outline of a section: one outer ring and its holes, checked once at the door."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.crossings import first_contact
from calcgen.mechanics.sweep import IntArray

TOUCHING = 1e-12  # of the outline's size: closer than this, two points are one
THINNEST = 1e-6  # area over the square of the size: a thinner section leaves no digits to its properties


class OutlineError(ValueError):
    """Rings that bound no section.

    Attributes
    ----------
    reason : what is wrong, as a phrase whose subject is the outline.
    ring : 0 for the outer ring, 1, 2, … for the holes.
    vertices : the corners concerned, as indices into that ring as it was given (empty: the whole ring).
    points : coordinates of the places concerned, m.
    """

    def __init__(
        self, reason: str, ring: int, vertices: tuple[int, ...] = (), points: tuple[Point, ...] = ()
    ) -> None:
        self.reason, self.ring, self.vertices, self.points = reason, ring, vertices, points
        super().__init__(reason)


@dataclass(frozen=True)
class Bounds:
    """The bounding box, m."""

    left: float
    bottom: float
    right: float
    top: float

    @property
    def width(self) -> float:
        """Extent along x."""
        return self.right - self.left

    @property
    def height(self) -> float:
        """Extent along y."""
        return self.top - self.bottom

    @property
    def middle(self) -> Point:
        """Middle of the box."""
        return 0.5 * (self.left + self.right), 0.5 * (self.bottom + self.top)


@dataclass(frozen=True, eq=False)
class Outline:
    """A section's boundary, m: x right, y up. Made by `outline`, which checks; the arrays are read-only.

    `exterior` is (n, 2), counter-clockwise; each of `holes` is (m, 2), clockwise. No ring repeats its first
    corner at the end.
    """

    exterior: FloatArray
    holes: tuple[FloatArray, ...] = ()

    def __post_init__(self) -> None:
        for ring in self.rings:
            ring.setflags(write=False)

    @property
    def rings(self) -> tuple[FloatArray, ...]:
        """The outer ring, then the holes."""
        return (self.exterior, *self.holes)

    @cached_property
    def bounds(self) -> Bounds:
        """The bounding box."""
        (left, bottom), (right, top) = self.exterior.min(axis=0), self.exterior.max(axis=0)
        return Bounds(float(left), float(bottom), float(right), float(top))

    @cached_property
    def edges(self) -> tuple[FloatArray, FloatArray]:
        """Start and end points of all edges, (n, 2) each, with the material on their left."""
        start = np.concatenate(self.rings)
        end = np.concatenate([np.roll(ring, -1, axis=0) for ring in self.rings])
        return start, end

    def contains(self, point: Point) -> bool:
        """Tell whether a point, m, lies in the material or, within 1e-9 of the size, on its edge."""
        start, end = self.edges
        along, to_point = end - start, np.array(point) - start
        share = np.clip(np.sum(along * to_point, axis=1) / np.sum(along * along, axis=1), 0.0, 1.0)
        gap = np.hypot(*(to_point - share[:, None] * along).T).min()
        if gap <= 1e-9 * max(self.bounds.width, self.bounds.height):
            return True
        astride = (start[:, 1] > point[1]) != (end[:, 1] > point[1])
        rise = np.where(astride, along[:, 1], 1.0)
        crossing = start[:, 0] + (point[1] - start[:, 1]) / rise * along[:, 0]
        return bool(np.count_nonzero(astride & (crossing > point[0])) % 2)

    def moved(self, dx: float, dy: float) -> Outline:
        """Return the outline shifted by (dx, dy), m."""
        shift = np.array([dx, dy])
        return Outline(self.exterior + shift, tuple(hole + shift for hole in self.holes))

    def mirrored(self) -> Outline:
        """Return the outline with left and right exchanged about the middle of its bounding box."""
        flip, shift = np.array([-1.0, 1.0]), np.array([self.bounds.left + self.bounds.right, 0.0])
        exterior, *holes = (ring[::-1] * flip + shift for ring in self.rings)
        return Outline(exterior, tuple(holes))

    def turned(self, angle: float) -> Outline:
        """Return the outline turned by `angle`, rad, counter-clockwise about its bounding box's middle."""
        cos, sin = exact_cos_sin(angle)
        matrix, middle = np.array([[cos, sin], [-sin, cos]]), np.array(self.bounds.middle)
        exterior, *holes = ((ring - middle) @ matrix + middle for ring in self.rings)
        return Outline(exterior, tuple(holes))

    def placed(self, x: float, y: float) -> Outline:
        """Return the outline with the middle of its bounding box at (x, y), m."""
        middle_x, middle_y = self.bounds.middle
        return self.moved(x - middle_x, y - middle_y)


def exact_cos_sin(angle: float) -> tuple[float, float]:
    """Return cosine and sine with true zeros at quarter turns, so that a turned edge stays level."""
    cos, sin = math.cos(angle), math.sin(angle)
    if abs(cos) < 1e-15:
        return 0.0, math.copysign(1.0, sin)
    if abs(sin) < 1e-15:
        return math.copysign(1.0, cos), 0.0
    return cos, sin


def outline(exterior: ArrayLike, holes: Sequence[ArrayLike] = ()) -> Outline:
    """Check rings of corners in either sense, and orient them.

    Parameters
    ----------
    exterior : (n, 2) corners of the outer ring, m; a repeated corner counts once.
    holes : rings inside it that touch neither it nor one another.

    Raises
    ------
    OutlineError
        For fewer than three corners, no area, a ring that crosses, touches or folds back on itself or
        another, a hole outside the outer ring or inside another hole.
    """
    arrays = [_points(points, index) for index, points in enumerate((exterior, *holes))]
    size = max(float(np.ptp(ring, axis=0).max()) for ring in arrays)
    reach = max(float(np.abs(ring).max()) for ring in arrays)
    tolerance = TOUCHING * size + 4.0 * np.finfo(np.float64).eps * reach
    rings, kept = [], []
    for index, points in enumerate(arrays):
        keep = _distinct(points, tolerance)
        _require_ring(points[keep], keep, index, tolerance)
        rings.append(points[keep])
        kept.append(keep)
    _require_no_contact(rings, kept, tolerance)
    _require_holes_inside(rings)
    outer, *inner = rings
    return Outline(
        np.ascontiguousarray(outer if signed_area(outer) > 0.0 else outer[::-1]),
        tuple(np.ascontiguousarray(ring if signed_area(ring) < 0.0 else ring[::-1]) for ring in inner),
    )


def signed_area(ring: FloatArray) -> float:
    """Return the area of a ring, m²: positive when it runs counter-clockwise."""
    x, y = (ring - ring[0]).T
    return 0.5 * float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))


def _points(points: ArrayLike, index: int) -> FloatArray:
    """Return a fresh array of corners of shape (n, 2)."""
    array: FloatArray = np.array(points, dtype=np.float64)
    if array.ndim != 2 or array.shape[1] != 2 or len(array) < 3:
        raise OutlineError("needs three corners or more", index)
    broken = np.flatnonzero(~np.isfinite(array).all(axis=1))
    if broken.size:
        raise OutlineError("has a coordinate that is not finite", index, tuple(broken.tolist()))
    return array


def _distinct(points: FloatArray, tolerance: float) -> IntArray:
    """Return the indices of corners that do not repeat the one before them."""
    step = np.hypot(*(points - np.roll(points, 1, axis=0)).T)
    return np.flatnonzero(step > tolerance)


def _require_ring(points: FloatArray, kept: IntArray, index: int, tolerance: float) -> None:
    """Require three corners, an area, and no edge that doubles back along the one before it."""
    if len(points) < 3:
        raise OutlineError("needs three corners or more", index)
    size = float(np.ptp(points, axis=0).max())
    if abs(signed_area(points)) <= tolerance * size:
        raise OutlineError("encloses no area", index)
    if index == 0 and abs(signed_area(points)) <= THINNEST * size * size:
        raise OutlineError("is thinner than a millionth of its size", index)
    before, after = points - np.roll(points, 1, axis=0), np.roll(points, -1, axis=0) - points
    cross = before[:, 0] * after[:, 1] - before[:, 1] * after[:, 0]
    longer = np.maximum(np.hypot(*before.T), np.hypot(*after.T))
    folds = np.flatnonzero((np.abs(cross) <= tolerance * longer) & (np.sum(before * after, axis=1) < 0.0))
    if folds.size:
        raise OutlineError("folds back on itself", index, (int(kept[folds[0]]),), (_point(points[folds[0]]),))


def _require_no_contact(rings: list[FloatArray], kept: list[IntArray], tolerance: float) -> None:
    """Require that edges meet nowhere but at the corner which neighbours share."""
    lengths = [len(ring) for ring in rings]
    offsets = np.cumsum([0, *lengths])
    start = np.concatenate(rings)
    end = np.concatenate([np.roll(ring, -1, axis=0) for ring in rings])
    follower = np.concatenate(
        [offset + np.roll(np.arange(n), -1) for offset, n in zip(offsets, lengths, strict=False)]
    )
    pair = first_contact(start, end, follower, tolerance)
    if pair is None:
        return
    first, second = (int(np.searchsorted(offsets, edge, side="right")) - 1 for edge in pair)
    points = (_point(start[pair[0]]), _point(start[pair[1]]))
    if first == second:
        vertices = tuple(int(kept[first][edge - offsets[first]]) for edge in pair)
        raise OutlineError("crosses or touches itself", first, vertices, points)
    other = "the outer ring" if first == 0 else "another hole"
    vertex = int(kept[second][pair[1] - offsets[second]])
    raise OutlineError(f"has a hole that crosses or touches {other}", second, (vertex,), points)


def _require_holes_inside(rings: list[FloatArray]) -> None:
    """Require each hole inside the outer ring and outside the others; no two rings touch by now."""
    outer, *holes = rings
    left, bottom = np.array([hole.min(axis=0) for hole in holes]).reshape(-1, 2).T.copy()
    right, top = np.array([hole.max(axis=0) for hole in holes]).reshape(-1, 2).T.copy()
    for index, hole in enumerate(holes):
        corner = hole[0]
        if not _encloses(outer, corner):
            raise OutlineError("has a hole outside the outer ring", index + 1, (), (_point(corner),))
        x, y = _point(corner)
        around = np.flatnonzero((left <= x) & (x <= right) & (bottom <= y) & (y <= top))
        if any(_encloses(holes[other], corner) for other in around if other != index):
            raise OutlineError("has a hole inside another hole", index + 1, (), (_point(corner),))


def _encloses(ring: FloatArray, point: FloatArray) -> bool:
    """Tell whether a point that is not on the ring lies inside: a ray to the right crosses it oddly often."""
    (x_0, y_0), (x_1, y_1) = ring.T, np.roll(ring, -1, axis=0).T
    astride = np.flatnonzero((y_0 > point[1]) != (y_1 > point[1]))
    x_0, y_0, x_1, y_1 = (values[astride] for values in (x_0, y_0, x_1, y_1))
    crossed = x_0 + (point[1] - y_0) / (y_1 - y_0) * (x_1 - x_0) > point[0]
    return bool(np.count_nonzero(crossed) % 2)


def _point(row: FloatArray) -> Point:
    return float(row[0]), float(row[1])

"""Places where an outline touches itself, or all but does: there it comes apart, so that it can be meshed.

No stress passes through a point. Where corners meet, each keeps the material between its own two edges and
draws back into it a little; what closes at a point only is open, and what hangs by a point only is a piece of
its own.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Sequence
from functools import partial

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import BoolArray, IntArray, cross
from calcgen.mechanics.outline import Outline

CLOSE = 1e-6  # of the size: corners that are nearer to another edge touch it
GRIDS = (
    1e-6,
    2.3e-6,
    5.1e-6,
)  # of the size: edges that round to the same line become one; the first that does
BACK = 2e-5  # of the size: how far corners draw back
LOST = 1e-3  # of the area: an outline that loses more is so thin that it stays as it is
AT_ONCE = 300_000  # pairs of a corner and an edge that are compared in one step


def apart(outlines: Sequence[Outline]) -> tuple[Outline, ...]:
    """Return the outlines, and in the place of one that touches itself its pieces, which do not."""
    return tuple(
        piece for part in outlines for piece in (_pieces(part) if _touches_itself(part) else (part,))
    )


def _touches_itself(part: Outline) -> bool:
    """Tell whether a corner lies close to an edge that does not end in it."""
    start, end = part.edges
    along = end - start
    squared = np.maximum(np.sum(along**2, axis=1), np.finfo(float).tiny)
    firsts = np.cumsum([0, *(len(ring) for ring in part.rings)])
    ends = np.concatenate(
        [first + np.roll(np.arange(len(ring)), -1) for first, ring in zip(firsts, part.rings, strict=False)]
    )
    n = len(start)
    step = max(1, AT_ONCE // n)
    for first in range(0, n, step):
        corners = np.arange(first, min(first + step, n))
        to_corner = start[corners, None] - start
        share = np.clip(np.einsum("ckd,kd->ck", to_corner, along) / squared, 0.0, 1.0)
        distance = np.hypot(*np.moveaxis(to_corner - share[..., None] * along, 2, 0))
        own = (corners[:, None] == np.arange(n)) | (corners[:, None] == ends)
        if (distance[~own] < CLOSE * _size(part)).any():
            return True
    return False


def _size(part: Outline) -> float:
    return float(np.ptp(part.exterior, axis=0).max())


def _pieces(part: Outline) -> tuple[Outline, ...]:
    """Return the pieces of an outline that touches itself."""
    pieces: tuple[Outline, ...] = (part,)
    for grid in GRIDS:
        pieces = _parted(part, grid * _size(part))
        if not any(_touches_itself(piece) for piece in pieces):
            break
    return pieces


def _parted(part: Outline, grid: float) -> tuple[Outline, ...]:
    """Bring close edges together on a grid, walk round the material edge by edge, and draw corners back."""
    from shapely import make_valid, set_precision  # loaded only for an outline that needs it
    from shapely.geometry import Polygon

    whole = make_valid(Polygon(part.exterior, part.holes))
    region = set_precision(whole, grid)
    edges = list(_edges(region))
    if not edges or abs(region.area - whole.area) > LOST * whole.area:
        return (part,)
    points, index = np.unique(np.array(edges).reshape(-1, 2), axis=0, return_inverse=True)
    pairs = index.reshape(-1, 2)
    several = np.bincount(pairs[:, 0], minlength=len(points)) > 1
    exact = _exact(points, np.concatenate(part.rings), grid)
    rings = [ring for walked in _walked(points, pairs) if len(ring := _without_doubles(walked, exact)) > 2]
    found = _nested([_drawn_back(exact[ring], several[ring], BACK * _size(part)) for ring in rings])
    area = sum(_doubled_area(ring) for piece in found for ring in piece.rings) / 2.0
    return found if abs(area - whole.area) <= LOST * whole.area else (part,)


def _edges(region: object) -> Iterator[tuple[tuple[float, float], tuple[float, float]]]:
    """Give the edges of polygons with the material on their left."""
    from shapely.geometry import Polygon
    from shapely.geometry.polygon import orient

    for polygon in getattr(region, "geoms", (region,)):
        if not isinstance(polygon, Polygon) or polygon.is_empty:
            continue
        turned = orient(polygon)
        for ring in (turned.exterior, *turned.interiors):
            yield from itertools.pairwise((float(x), float(y)) for x, y in ring.coords)


def _walked(points: FloatArray, edges: IntArray) -> list[list[int]]:
    """Return rings of points: at each, on to the edge that bounds the same material as the last one."""
    leaving: dict[int, list[int]] = {}
    for number, (start, _) in enumerate(edges.tolist()):
        leaving.setdefault(start, []).append(number)

    def clockwise(back: FloatArray, edge: int) -> float:
        """Return the angle of an edge, clockwise from the way back along the last one."""
        on = points[edges[edge, 1]] - points[edges[edge, 0]]
        angle = math.atan2(on[0] * back[1] - on[1] * back[0], float(on @ back))
        return angle if angle > 0.0 else angle + 2.0 * math.pi

    following = []
    for start, end in edges.tolist():
        back = points[start] - points[end]
        following.append(min(leaving[end], key=partial(clockwise, back)))
    rings, left = [], set(range(len(edges)))
    while left:
        edge = min(left)
        ring = []
        while edge in left:
            left.remove(edge)
            ring.append(int(edges[edge, 0]))
            edge = following[edge]
        rings.append(ring)
    return rings


def _exact(points: FloatArray, corners: FloatArray, reach: float) -> FloatArray:
    """Return the points, those within reach of a corner in its place."""
    from scipy.spatial import KDTree  # loaded only for an outline that needs it

    distance, nearest = KDTree(corners).query(points)
    return np.where((distance < reach)[:, None], corners[nearest], points)


def _without_doubles(ring: list[int], exact: FloatArray) -> list[int]:
    """Leave out points that have the place of the one before."""
    return [
        here
        for before, here in zip([ring[-1], *ring], ring, strict=False)
        if (exact[before] != exact[here]).any()
    ]


def _drawn_back(ring: FloatArray, which: BoolArray, by: float) -> FloatArray:
    """Move the corners marked into the material between their edges, unless that is half a turn or more."""
    into, out_of = ring - np.roll(ring, 1, axis=0), np.roll(ring, -1, axis=0) - ring
    short = np.minimum(np.hypot(*into.T), np.hypot(*out_of.T))
    into, out_of = (v / np.hypot(*v.T)[:, None] for v in (into, out_of))
    turn = np.arctan2(cross(into, out_of), np.sum(into * out_of, axis=1))  # to the left at a corner of less
    middle, left = out_of - into, into + out_of
    left = np.column_stack((-left[:, 1], left[:, 0]))
    blunt = np.abs(turn) < 0.5 * math.pi  # the sum that is the larger gives the direction
    inwards = np.where(blunt[:, None], left, middle)
    inwards /= np.hypot(*inwards.T)[:, None]
    step = np.where(which & (turn > 0.0), np.minimum(by, 0.25 * short), 0.0)
    drawn: FloatArray = ring + step[:, None] * inwards
    return drawn


def _nested(rings: Sequence[FloatArray]) -> tuple[Outline, ...]:
    """Return outlines of rings: a ring that runs clockwise is a hole of the smallest one round it."""
    from shapely.geometry import Polygon

    outer = sorted((r for r in rings if _doubled_area(r) > 0.0), key=_doubled_area)
    holes: list[list[FloatArray]] = [[] for _ in outer]
    for hole in rings:
        if _doubled_area(hole) < 0.0:
            inside = Polygon(hole).representative_point()
            holes[next(k for k, ring in enumerate(outer) if Polygon(ring).contains(inside))].append(hole)
    found = [Outline(ring, tuple(own)) for ring, own in zip(outer, holes, strict=True)]
    return tuple(sorted(found, key=lambda piece: (piece.bounds.left, piece.bounds.bottom)))


def _doubled_area(ring: FloatArray) -> float:
    from_first = ring - ring[0]
    return float(cross(from_first, np.roll(from_first, -1, axis=0)).sum())

"""Outlines put together: where they overlap, what a hole leaves, how far apart they lie, what lies inside."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.crossings import first_contact
from calcgen.mechanics.outline import Bounds, Outline, OutlineError, outline

TOUCHING = 1e-9  # of the smaller area: a smaller overlap is parts that touch
EDGE = 1e-9  # of the size: a point as near to the edge lies on it
SNAP = 1e-9  # of the size: grid on which cuts along an edge are made where the exact cut leaves no clean ring


@dataclass(frozen=True)
class Overlap:
    """Where two parts overlap: the area, m², and the box around it."""

    area: float
    bounds: Bounds


@dataclass(frozen=True)
class SelfContact:
    """Where a ring meets itself: the corners at which each of two edges starts and ends, and the place, m."""

    first: tuple[int, int]
    second: tuple[int, int]
    place: Point


def self_contact(corners: Sequence[Point]) -> SelfContact | None:
    """Return where two edges of a closed ring cross or touch; None for a ring that is simple."""
    given = np.array(corners, dtype=np.float64).reshape(-1, 2)
    step = np.hypot(*(given - np.roll(given, 1, axis=0)).T)
    tolerance = EDGE * float(np.ptp(given, axis=0).max(initial=0.0))
    kept = np.flatnonzero(step > tolerance)  # a repeated corner counts once
    if len(kept) < 4:  # of three edges each is the neighbour of the others
        return None
    start = given[kept]
    end = np.roll(start, -1, axis=0)
    pair = first_contact(start, end, np.roll(np.arange(len(start)), -1), tolerance)
    if pair is None:
        return None
    from shapely.geometry import LineString
    from shapely.ops import nearest_points

    place, _ = nearest_points(*(LineString([start[edge], end[edge]]) for edge in pair))
    first, second = ((int(kept[edge]), int(kept[(edge + 1) % len(kept)])) for edge in pair)
    return SelfContact(first, second, (float(place.x), float(place.y)))


def overlap(first: Sequence[Outline], second: Sequence[Outline]) -> Overlap | None:
    """Return where two parts overlap; None where they lie apart or touch (1e-9 of the smaller area)."""
    if not _boxes_meet(first, second):
        return None
    a, b = _region(first), _region(second)
    common = a.intersection(b)
    if common.area <= TOUCHING * min(a.area, b.area):
        return None
    return Overlap(float(common.area), Bounds(*(float(v) for v in common.bounds)))


def cut(part: Sequence[Outline], hole: Sequence[Outline]) -> tuple[Outline, ...]:
    """Return what a hole leaves of a part: its pieces from left to right, none where nothing is left.

    A hole that only touches the part leaves it as it is.

    Raises
    ------
    OutlineError
        Where the rings that are left touch one another at a point: the hole just touches an edge.
    """
    if overlap(part, hole) is None:
        return tuple(part)
    a, b = _region(part), _region(hole)
    try:
        return _outlines(a.difference(b), TOUCHING * a.area)
    except OutlineError:
        left, bottom, right, top = a.bounds
        snapped = a.difference(b, grid_size=SNAP * max(right - left, top - bottom))
        return _outlines(snapped, TOUCHING * a.area)


def share_outside(hole: Sequence[Outline], parts: Sequence[Outline]) -> float:
    """Return the share of the area of a hole that lies outside the parts, 0 to 1; touching counts as 0."""
    region = _region(hole)
    share = float(region.difference(_region(parts)).area / region.area) if parts else 1.0
    return 0.0 if share <= TOUCHING else share


def inside(points: FloatArray, part: Sequence[Outline]) -> NDArray[np.bool_]:
    """Tell which points, (n, 2), m, lie in a part or, within 1e-9 of the size, on its edge."""
    from shapely import distance as gap
    from shapely import points as places

    at = places(points)
    found = np.zeros(len(points), dtype=np.bool_)
    for each in part:
        found |= gap(_region([each]), at) <= EDGE * max(each.bounds.width, each.bounds.height)
    return found


def distance(first: Sequence[Outline], second: Sequence[Outline]) -> float:
    """Return the smallest distance between two parts, m; 0 where they meet."""
    return float(_region(first).distance(_region(second)))


def contact(first: Sequence[Outline], second: Sequence[Outline]) -> tuple[tuple[Point, ...], ...]:
    """Return the lines along which two parts touch, m: their joints; none where they lie apart."""
    a, b = _region(first).boundary, _region(second).boundary
    left, bottom, right, top = a.bounds
    common = a.intersection(b, grid_size=SNAP * max(right - left, top - bottom))
    lines = [line for line in getattr(common, "geoms", (common,)) if line.length > 0.0]
    if not lines:
        return ()
    from shapely.ops import linemerge

    merged = linemerge(lines)
    return tuple(
        tuple((float(x), float(y)) for x, y in line.coords) for line in getattr(merged, "geoms", (merged,))
    )


def separate_pieces(parts: Sequence[Outline]) -> int:
    """Count the pieces of a section; outlines that share an edge, or a point, hang together."""
    if len(parts) == 1:
        return 1
    size = max(max(p.bounds.width, p.bounds.height) for p in parts)
    regions = [_region([p]) for p in parts]
    group = list(range(len(parts)))
    for i, first in enumerate(regions):
        for j in range(i):
            if group[i] != group[j] and first.distance(regions[j]) <= TOUCHING * size:
                group = [group[j] if g == group[i] else g for g in group]
    return len(set(group))


def _boxes_meet(first: Sequence[Outline], second: Sequence[Outline]) -> bool:
    return any(
        a.bounds.left < b.bounds.right
        and b.bounds.left < a.bounds.right
        and a.bounds.bottom < b.bounds.top
        and b.bounds.bottom < a.bounds.top
        for a in first
        for b in second
    )


def _region(parts: Sequence[Outline]) -> Any:
    from shapely import union_all  # loaded only for a section that is put together
    from shapely.geometry import Polygon

    polygons = [Polygon(part.exterior, part.holes) for part in parts]
    return polygons[0] if len(polygons) == 1 else union_all(polygons)


def _outlines(region: Any, sliver: float) -> tuple[Outline, ...]:
    """Return the polygons of a region without slivers."""
    polygons = [p for p in getattr(region, "geoms", (region,)) if p.area > sliver]
    found = [outline(p.exterior.coords[:-1], [ring.coords[:-1] for ring in p.interiors]) for p in polygons]
    return tuple(sorted(found, key=lambda piece: (piece.bounds.left, piece.bounds.bottom)))

"""Outlines made ready to be meshed: touching ones joined, and as few corners as their shape needs."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from typing import Any

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import BoolArray, IntArray
from calcgen.mechanics.outline import Outline, OutlineError, outline
from calcgen.mechanics.saint_venant.contacts import apart

TOLERANCE = 0.003  # of the mean thickness: sixteen edges to a quarter of a solid circle
MOST_CORNERS = 1_000  # the tolerance is doubled until no more are left
DOUBLINGS = 16  # of the tolerance, at most
EVEN = 1e-6  # of the length of all edges: a smaller mean has no direction
LEVEL = 1e-9  # rad: a smaller angle is none
SNAP = 1e-7  # of the size: edges closer than twice this are one, necks thinner than four times this none
LOST = 1e-4  # of the area: a larger change is none of slits and necks
EQUAL = 1e-9  # of a length: a smaller difference is none, so that rounding decides nothing
SLENDER = 500.0  # times as long as thick: for what is thinner the grid is finer
GRID = 2.0**-33  # of the size, about: corners are brought on a grid, so that rounding decides nothing


def joined(outlines: Sequence[Outline]) -> tuple[Outline, ...]:
    """Return the outlines of the pieces that hang together: those which share an edge become one.

    Pieces that share no more than a point stay apart; an overlap counts once.
    """
    if len(outlines) == 1:
        return tuple(outlines)
    from shapely import set_precision, union_all  # loaded only for a section that is put together
    from shapely.geometry import Polygon
    from shapely.geometry.polygon import orient

    corners = np.concatenate([part.exterior for part in outlines])
    size = float(np.ptp(corners, axis=0).max())
    union = region = union_all([Polygon(part.exterior, part.holes) for part in outlines])
    for step in (1.0, -3.0):  # closes slits between edges that touch but for rounding; parts mere points
        region = region.buffer(step * SNAP * size, join_style="mitre")
    grown = [piece.buffer(2.0 * SNAP * size, join_style="mitre") for piece in _polygons(region)]
    if abs(sum(piece.area for piece in grown) - union.area) > LOST * union.area:
        grown = [set_precision(union, SNAP * size)]  # rarely, a buffer loses a piece
    pieces = [orient(polygon) for piece in grown for polygon in _polygons(piece)]
    found = [
        Outline(np.array(piece.exterior.coords[:-1]), tuple(np.array(r.coords[:-1]) for r in piece.interiors))
        for piece in pieces
    ]
    return tuple(sorted(found, key=lambda piece: (piece.bounds.left, piece.bounds.bottom)))


def _polygons(region: Any) -> tuple[Any, ...]:
    return tuple(polygon for polygon in getattr(region, "geoms", (region,)) if not polygon.is_empty)


def along_walls(outlines: Sequence[Outline]) -> FloatArray:
    """Return the matrix (2, 2) that turns the section's edges along the axes as far as they can be.

    The angle is that of the mean of the edges' directions, to the fourth power and weighted by their lengths.
    """
    edges = [part.edges for part in outlines]
    along = np.concatenate([(end - start) @ np.array([1.0, 1.0j]) for start, end in edges])
    length = np.abs(along)
    mean = np.sum(length * (along / length) ** 4)
    angle = 0.25 * float(np.angle(mean)) if abs(mean) > EVEN * length.sum() else 0.0
    if abs(angle) < LEVEL:
        return np.eye(2)
    cos, sin = np.cos(angle), np.sin(angle)
    return np.array([[cos, sin], [-sin, cos]])


def mean_thickness(outlines: Sequence[Outline]) -> float:
    """Return twice the area over the length of all edges, m: of a strip its thickness."""
    edges = [part.edges for part in outlines]
    doubled = sum(float(np.sum(a[:, 0] * b[:, 1] - b[:, 0] * a[:, 1])) for a, b in edges)
    return doubled / sum(float(np.hypot(*(b - a).T).sum()) for a, b in edges)


def simplified(outlines: Sequence[Outline]) -> tuple[tuple[Outline, ...], float]:
    """Leave out corners that change the shape little; keep the areas.

    Returns
    -------
    The outlines, and the distance, m, that corners left out may have from the chord in their place. What
    lies between chord and old outline is made up for by moving the chord's ends, so that areas agree to
    second order in it (1e-5 and less for arcs).
    """
    tolerance = TOLERANCE * mean_thickness(outlines)
    for _ in range(DOUBLINGS):
        found = [_fewer_corners(part, tolerance) for part in outlines]
        if _count(found) <= MOST_CORNERS:
            break
        tolerance *= 2.0
    return tuple(
        piece
        for rings, part in zip(found, outlines, strict=True)
        for piece in _checked(rings, part, tolerance)
    ), tolerance


def _fewer_corners(part: Outline, tolerance: float) -> list[FloatArray]:
    return [_simplified(ring, tolerance) for ring in part.rings]


def _count(parts: Iterable[Sequence[FloatArray]]) -> int:
    return sum(len(ring) for part in parts for ring in part)


def on_grid(outlines: Sequence[Outline]) -> tuple[Outline, ...]:
    """Return the outlines with corners on a fine grid, which machines that round differently find alike."""
    size = max(float(np.ptp(part.exterior, axis=0).max()) for part in outlines)
    step = GRID * 2.0 ** math.ceil(math.log2(min(size, SLENDER * mean_thickness(outlines))))
    return tuple(
        Outline(np.round(part.exterior / step) * step, tuple(np.round(h / step) * step for h in part.holes))
        for part in outlines
    )


def _checked(rings: Sequence[FloatArray], part: Outline, tolerance: float) -> tuple[Outline, ...]:
    """Return the outline of simplified rings; where they cross, take it apart and simplify less."""
    pieces = [(part, rings)]
    for finer in (1.0, 0.25, 0.0625):
        try:
            return tuple(outline(found[0], found[1:]) for _, found in pieces)
        except OutlineError:
            parts = apart([piece for piece, _ in pieces]) if finer == 1.0 else [piece for piece, _ in pieces]
            pieces = [(piece, _fewer_corners(piece, finer * tolerance)) for piece in parts]
            if _count([found for _, found in pieces]) > MOST_CORNERS:
                break
    return tuple(_carefully_simplified(piece, tolerance) for piece, _ in pieces)


def _carefully_simplified(part: Outline, tolerance: float) -> Outline:
    """Simplify so that no edges come to cross; the area does not quite stay."""
    from shapely.geometry import Polygon  # loaded only for an outline that needs it
    from shapely.geometry.polygon import orient

    whole = Polygon(part.exterior, part.holes)
    for doubled in range(DOUBLINGS):
        found = orient(whole.simplify(tolerance * 2.0**doubled, preserve_topology=True))
        rings = [np.array(ring.coords[:-1]) for ring in (found.exterior, *found.interiors)]
        if _count([rings]) <= MOST_CORNERS:
            break
    return Outline(rings[0], tuple(rings[1:]))


def _simplified(ring: FloatArray, tolerance: float) -> FloatArray:
    """Keep corners by the rule of Douglas and Peucker, and move them so that the area stays.

    The first two are the one farthest from the middle of all and the one farthest from that.
    """
    first = _farthest(ring, ring.mean(axis=0))
    ring = np.roll(ring, -first, axis=0)
    closed = np.concatenate((ring, ring[:1]))
    kept = np.zeros(len(closed), dtype=bool)
    second = _farthest(ring, ring[0])
    kept[[0, second, -1]] = True
    kept[1 + _farthest_from_chord(closed[1:-1], ring[0], ring[second])] = (
        True  # three, however small the ring
    )
    while (further := _beyond(closed, np.flatnonzero(kept), tolerance)).any():
        kept |= further
        if np.count_nonzero(kept) > MOST_CORNERS + 1:
            break  # too many whatever follows
    chosen = np.flatnonzero(kept)
    return _with_the_area_of(closed, chosen, tolerance)


def _farthest(ring: FloatArray, place: FloatArray) -> int:
    distance = np.hypot(*(ring - place).T)
    return int(np.argmax(distance >= distance.max() * (1.0 - EQUAL)))  # the first of equals


def _farthest_from_chord(places: FloatArray, start: FloatArray, end: FloatArray) -> int:
    along, to_place = end - start, places - start
    return int(np.argmax(np.abs(along[0] * to_place[:, 1] - along[1] * to_place[:, 0])))


def _beyond(closed: FloatArray, chosen: IntArray, tolerance: float) -> BoolArray:
    """Mark between each two chosen corners the one farthest from their chord, where it is too far."""
    chord = np.repeat(np.arange(len(chosen) - 1), np.diff(chosen))
    start, end = closed[chosen[chord]], closed[chosen[chord + 1]]
    along, to_point = end - start, closed[:-1] - start
    share = np.clip(np.sum(along * to_point, axis=1) / np.sum(along * along, axis=1), 0.0, 1.0)
    distance = np.hypot(*(to_point - share[:, None] * along).T)
    largest = np.maximum.reduceat(distance, chosen[:-1])
    candidates = np.flatnonzero((distance > tolerance) & (distance >= largest[chord] * (1.0 - EQUAL)))
    _, first = np.unique(chord[candidates], return_index=True)
    marked = np.zeros(len(closed), dtype=bool)
    marked[candidates[first]] = True
    return marked


def _with_the_area_of(closed: FloatArray, chosen: IntArray, tolerance: float) -> FloatArray:
    """Move the chosen corners outwards by what the chords beside them have cut off, each taking half."""
    middle = closed.mean(axis=0)
    closed = closed - middle
    swept = closed[:-1, 0] * closed[1:, 1] - closed[1:, 0] * closed[:-1, 1]
    corners = closed[chosen]
    a, b = corners[:-1], corners[1:]
    lost = 0.5 * (np.add.reduceat(swept, chosen[:-1]) - (a[:, 0] * b[:, 1] - b[:, 0] * a[:, 1]))
    across = np.roll(a, -1, axis=0) - np.roll(a, 1, axis=0)
    width = np.hypot(*across.T)
    outwards = np.column_stack((across[:, 1], -across[:, 0])) / width[:, None]
    step = np.clip((lost + np.roll(lost, 1)) / width, -tolerance, tolerance)
    moved: FloatArray = a + step[:, None] * outwards + middle
    return moved

"""The lines of a strip: the outline of constant thickness along a centreline with bends, and its mid-line."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.outline import Outline, OutlineError, outline, signed_area
from calcgen.mechanics.rounding import SPARE, Corner, CornerError, rounded
from calcgen.mechanics.shape import ShapeError

STRAIGHT = 1e-9  # rad: a smaller turn is none
FOLDED = math.pi - 1e-3  # rad: a larger turn has its corner out of reach


@dataclass(frozen=True, eq=False)
class StripLines:
    """Outline and mid-line of a strip.

    mid_line : (n, 2), m, bends as many short edges; its last point is its first where the strip is closed;
    across : ends of a line across the thickness in the middle of the longest level or upright part, m; empty
    where there is none.
    """

    outline: Outline
    mid_line: FloatArray
    across: tuple[tuple[Point, Point], ...]


def strip_lines(points: Sequence[Point], t: float, r: float) -> StripLines:
    """Draw a strip of thickness `t` and inside bend radius `r`, m, through the corners of its centreline.

    A corner of the centreline is where its straight parts would meet. Both faces turn about the same centre,
    so that bends have the radii r and r + t and the area is t times the length of the mid-line, exactly.

    Raises
    ------
    ShapeError
        Of `points`, `r` or `t`, with the points concerned.
    """
    corners, closed = _centreline(points)
    parts = (np.roll(corners, -1, axis=0) if closed else corners[1:]) - (corners if closed else corners[:-1])
    length = np.hypot(*parts.T)
    left = np.column_stack((-parts[:, 1], parts[:, 0])) / length[:, None]
    before = np.roll(left, 1, axis=0) if closed else np.vstack((left[:1], left))
    after = left if closed else np.vstack((left, left[-1:]))
    cross = before[:, 0] * after[:, 1] - before[:, 1] * after[:, 0]
    turn = np.arctan2(cross, np.sum(before * after, axis=1))
    turn[np.abs(turn) <= STRAIGHT] = 0.0
    _require_room(turn, length, t, r)
    bent = np.where((turn != 0.0) & (r > 0.0), 1.0, 0.0)
    normal = (before + after) / (1.0 + np.cos(turn))[:, None]
    faces = [
        # a left turn has its inside on the left
        _corners(corners + side * normal, bent * np.where(turn * side > 0.0, r, r + t))
        for side in (0.5 * t, -0.5 * t)
    ]
    try:
        middle = rounded(_corners(corners, bent * (r + 0.5 * t)))
        rings = _rings(faces, closed=closed)
    except CornerError as error:  # sizes so far apart that rounding decides whether a bend fits
        raise ShapeError("r", r, "does not fit between the points of the centreline") from error
    try:
        section = outline(rings[0], rings[1:])
    except OutlineError as error:
        ring = rings[error.ring]
        edges = [(ring[i], ring[(i + 1) % len(ring)]) for i in error.vertices]
        concerned = {i for edge in edges for i in _part_beside(edge, corners, parts)}
        raise ShapeError(
            "t", t, "makes walls that cross or touch each other", tuple(sorted(concerned))
        ) from error
    return StripLines(
        section, np.vstack((middle, middle[:1])) if closed else middle, _across(corners, parts, left, t)
    )


def _centreline(points: Sequence[Point]) -> tuple[FloatArray, bool]:
    """Corners, (n, 2), m, and whether the line closes; the point that repeats the first one is dropped."""
    corners: FloatArray = np.array(points, dtype=np.float64).reshape(-1, 2)
    if len(corners) < 2:
        raise ShapeError("points", float(len(corners)), "needs two points or more")
    broken = np.flatnonzero(~np.isfinite(corners).all(axis=1))
    if broken.size:
        raise ShapeError("points", math.nan, "has a coordinate that is not finite", tuple(broken.tolist()))
    least = SPARE * float(np.ptp(corners, axis=0).max())
    repeated = np.flatnonzero(np.hypot(*np.diff(corners, axis=0).T) <= least)
    if repeated.size:
        i = int(repeated[0]) + 1
        raise ShapeError("points", float(i + 1), "repeats the point before it", (i - 1, i))
    closed = bool(np.hypot(*(corners[-1] - corners[0])) <= least)
    if closed and len(corners) < 4:
        raise ShapeError("points", float(len(corners)), "closes with fewer than three corners")
    return (corners[:-1] if closed else corners), closed


def _require_room(turn: FloatArray, length: FloatArray, t: float, r: float) -> None:
    """Require that no corner folds back, and that the bends at both ends of a straight part fit on it."""
    size, reason = ("r", r) if r > 0.0 else ("t", t), "does not fit between the points of the centreline"
    folded = np.flatnonzero(np.abs(turn) > FOLDED)
    if folded.size:
        raise ShapeError("points", float(folded[0] + 1), "folds back on itself", (int(folded[0]),))
    tangent = (r + 0.5 * t) * np.tan(0.5 * np.abs(turn))
    following = (np.arange(len(length)) + 1) % len(turn)
    crowded = np.flatnonzero(tangent[: len(length)] + tangent[following] > length * (1.0 + SPARE))
    if crowded.size:
        part = int(crowded[0])
        raise ShapeError(*size, reason, (part, int(following[part])))


def _corners(points: FloatArray, radii: FloatArray) -> list[Corner]:
    return [(float(x), float(y), float(radius)) for (x, y), radius in zip(points, radii, strict=True)]


def _rings(faces: list[list[Corner]], *, closed: bool) -> list[FloatArray]:
    """One ring around both faces of an open strip; two rings where it closes, the outer one first."""
    left, right = faces
    if not closed:
        return [rounded([*right, *reversed(left)])]
    return sorted((rounded(face) for face in faces), key=lambda ring: -abs(signed_area(ring)))


def _part_beside(
    edge: tuple[FloatArray, FloatArray], corners: FloatArray, parts: FloatArray
) -> tuple[int, int]:
    """Find the two points between which the centreline comes nearest to both ends of an edge."""
    first = corners[: len(parts)]
    gap = np.zeros(len(parts))
    for end in edge:
        share = np.sum((end - first) * parts, axis=1) / np.sum(parts * parts, axis=1)
        gap += np.hypot(*(first + np.clip(share, 0.0, 1.0)[:, None] * parts - end).T)
    part = int(np.argmin(gap))
    return part, (part + 1) % len(corners)


def _across(
    corners: FloatArray, parts: FloatArray, left: FloatArray, t: float
) -> tuple[tuple[Point, Point], ...]:
    size = np.abs(parts)
    straight = np.where(size.min(axis=1) <= SPARE * size.max(axis=1), size.max(axis=1), 0.0)
    part = int(np.argmax(straight))
    if straight[part] == 0.0:
        return ()
    middle, half = corners[part] + 0.5 * parts[part], 0.5 * t * np.abs(left[part])
    (x_0, y_0), (x_1, y_1) = (middle - half).tolist(), (middle + half).tolist()
    return (((x_0, y_0), (x_1, y_1)),)

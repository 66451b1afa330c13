"""Mid-lines of the named shapes, as walls."""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import pairwise

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.walls import ONE_NODE, Wall


def walls_along(points: Sequence[Sequence[float]], t: float) -> tuple[Wall, ...]:
    """Return walls from point to point, (n, 2), m; a point that repeats the one before it counts once."""
    ends: list[Point] = []
    for x, y in points:
        if not ends or math.dist((x, y), ends[-1]) > ONE_NODE * t:  # arcs that meet share a point
            ends.append((float(x), float(y)))
    return tuple(Wall(start, end, t) for start, end in pairwise(ends))


def walls_around(ring: FloatArray, t: float) -> tuple[Wall, ...]:
    """Return walls around a ring of points, (n, 2), m, back to the first one."""
    points = ring.tolist()
    return walls_along(
        [*(p for p in points if math.dist(p, points[0]) > ONE_NODE * t or p is points[0]), points[0]], t
    )


def flange_walls(b: float, t: float, y: float) -> tuple[Wall, Wall]:
    """Return both halves of a flange at the level y, m, each from its tip to the web."""
    return Wall((-0.5 * b, y), (0.0, y), t), Wall((0.5 * b, y), (0.0, y), t)


def i_walls(h: float, top: tuple[float, float], bottom: tuple[float, float], t_w: float) -> tuple[Wall, ...]:
    """Return the walls of an I-section of depth h; `top` and `bottom` are width and thickness of a flange."""
    y_t, y_b = 0.5 * (h - top[1]), -0.5 * (h - bottom[1])
    return (Wall((0.0, y_b), (0.0, y_t), t_w), *flange_walls(*top, y_t), *flange_walls(*bottom, y_b))

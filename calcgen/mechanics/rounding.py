"""Corners rounded by arcs of many short edges."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray

Corner: TypeAlias = tuple[float, float, float]  # x, y, radius (0: sharp), m

EDGES_A_QUARTER = 64
SPARE = 1e-9  # of an edge: radii that use up an edge exactly still fit


class CornerError(ValueError):
    """A radius that needs more of an edge than there is; `corner` is the index of the corner."""

    def __init__(self, corner: int) -> None:
        self.corner = corner
        super().__init__(f"the radius at corner {corner} does not fit")


def rounded(corners: Sequence[Corner], edges_a_quarter: int = EDGES_A_QUARTER) -> FloatArray:
    """Replace each corner that has a radius by an arc tangent to both its edges, whichever way it turns.

    The ends of an arc are its true tangent points. The points between them lie a hair outside the circle, by
    1/12 of the squared angle of one edge (5e-5 of the radius), so that the sector's area is exact.

    Raises
    ------
    CornerError
        Where two neighbouring corners are one, or their tangents are longer than the edge between them.
    """
    points = np.array([corner[:2] for corner in corners])
    radii = np.array([corner[2] for corner in corners])
    along = np.roll(points, -1, axis=0) - points
    lengths = np.hypot(*along.T)
    if not lengths.all():  # corners so close that rounding makes them one
        raise CornerError(int(np.argmin(lengths)))
    out_of = along / lengths[:, None]
    into = np.roll(out_of, 1, axis=0)
    turn = np.arctan2(into[:, 0] * out_of[:, 1] - into[:, 1] * out_of[:, 0], np.sum(into * out_of, axis=1))
    tangent = radii * np.tan(0.5 * np.abs(turn))
    crowded = np.flatnonzero(tangent + np.roll(tangent, -1) > lengths * (1.0 + SPARE))
    if crowded.size:
        edge = int(crowded[0])
        following = (edge + 1) % len(corners)
        raise CornerError(edge if radii[edge] >= radii[following] else following)
    return np.concatenate(
        [
            _arc(points[i], into[i], out_of[i], float(radii[i]), float(turn[i]), edges_a_quarter)
            for i in range(len(points))
        ]
    )


def _arc(
    corner: FloatArray, into: FloatArray, out_of: FloatArray, radius: float, turn: float, edges_a_quarter: int
) -> FloatArray:
    """Points from the tangent point on the edge that comes in to the one on the edge that goes out."""
    if radius == 0.0 or turn == 0.0:
        return corner[None, :]
    tangent = radius * math.tan(0.5 * abs(turn))
    first, last = corner - tangent * into, corner + tangent * out_of
    n = max(3, math.ceil(abs(turn) / (0.5 * math.pi) * edges_a_quarter - SPARE))
    step = abs(turn) / n
    # two end triangles and n - 2 between, ((n - 2) rho² + 2 rho) sin(step)/2, have the sector's area n step/2
    rho = (math.sqrt(1.0 + (n - 2) * n * step / math.sin(step)) - 1.0) / (n - 2)
    to_first = radius * math.copysign(1.0, turn) * np.array([into[1], -into[0]])
    centre = first - to_first
    angles = math.copysign(step, turn) * np.arange(1, n)
    cos, sin = np.cos(angles), np.sin(angles)
    spokes = np.column_stack((cos * to_first[0] - sin * to_first[1], sin * to_first[0] + cos * to_first[1]))
    return np.concatenate((first[None, :], centre + rho * spokes, last[None, :]))

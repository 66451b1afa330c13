"""The kern: where an axial force may act without changing the sign of the stress anywhere."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.section import Inertia

STRAIGHT = (
    1e-12  # of the section's size: a corner no farther off its neighbours' line makes no edge of the hull
)


@dataclass(frozen=True, eq=False)
class Kern:
    """The kern of a section.

    corners : (n, 2), m, counter-clockwise, in the section's coordinates; one for each edge of the hull.
    k_top, k_bottom, k_left, k_right : distances from the centroid to the kern's edge straight up, down, left
        and right, m, all positive.
    """

    corners: FloatArray
    k_top: float
    k_bottom: float
    k_left: float
    k_right: float


def kern(section: Inertia, *outlines: Outline) -> Kern:
    """Find the kern of outlines with the properties `section`.

    A force at (e_x, e_y) from the centroid makes σ A/N = 1 + p·T⁻¹e at the place p from the centroid, with
    T = [[I_v, I_hv], [I_hv, I_h]]/A. The line n·p = d of an edge of the hull is the neutral axis of the force
    at e = -T n/d: that is a corner of the kern. In a direction u the kern reaches as far as the corner that
    loses its stress first lets it, 1/max(-p·T⁻¹u).
    """
    centroid = np.array([section.x_bar, section.y_bar])
    hull = _convex_hull(np.concatenate([part.exterior for part in outlines])) - centroid
    tensor = np.array([[section.I_v, section.I_hv], [section.I_hv, section.I_h]]) / section.area
    along = np.roll(hull, -1, axis=0) - hull
    normal = np.column_stack((along[:, 1], -along[:, 0]))
    distance = np.sum(normal * hull, axis=1)
    corners = centroid - (normal / distance[:, None]) @ tensor
    slopes = -hull @ np.linalg.inv(tensor)
    return Kern(
        corners,
        k_top=1.0 / float(slopes[:, 1].max()),
        k_bottom=1.0 / float((-slopes[:, 1]).max()),
        k_left=1.0 / float((-slopes[:, 0]).max()),
        k_right=1.0 / float(slopes[:, 0].max()),
    )


def _convex_hull(points: FloatArray) -> FloatArray:
    """Return the corners of the convex hull, (n, 2), counter-clockwise, without those on straight edges."""
    least = STRAIGHT * float(np.ptp(points, axis=0).max())
    ordered: list[tuple[float, float]] = sorted(map(tuple, points.tolist()))
    lower, upper = _chain(ordered, least), _chain(ordered[::-1], least)
    return np.array(lower[:-1] + upper[:-1])


def _chain(points: list[tuple[float, float]], least: float) -> list[tuple[float, float]]:
    """Return the corners that turn left on the way from the first point to the last, ends included."""
    chain: list[tuple[float, float]] = []
    for x, y in points:
        while len(chain) > 1:
            (x_0, y_0), (x_1, y_1) = chain[-2:]
            turn = (x_1 - x_0) * (y - y_0) - (y_1 - y_0) * (x - x_0)
            if turn > least * math.hypot(x - x_0, y - y_0):
                break
            chain.pop()
        chain.append((x, y))
    return chain

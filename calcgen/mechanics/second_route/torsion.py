"""Torsion found again: bounds from both sides, the torque of the stresses, closed forms."""

from __future__ import annotations

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.saint_venant import SaintVenant
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.torsion import TorsionConstant

BOUNDS_TOLERANCE = 1e-3  # half the distance of the bounds; the elements are refined until it is half of this
TORQUE_TOLERANCE = 2e-3  # stresses are smoothed at the nodes, also at sharp re-entrant corners
CLOSED_TOLERANCE = 1e-3  # bounds, and arcs that are straight edges to the elements
INNER = np.full((3, 3), 1.0 / 6.0) + 0.5 * np.eye(3)  # area coordinates of points that integrate a quadratic


def torsion_residuals(first: SaintVenant) -> tuple[Residual, ...]:
    """Compare the constant from displacements with that from stresses, and the stresses with their torque.

    For T = 1, clockwise positive: -∫(x τ_y - y τ_x) dA, by three points in each triangle.
    """
    return (
        Residual(
            "J",
            relative(first.J_upper - first.J, first.J),
            BOUNDS_TOLERANCE,
            "torsion constant by the warping function (from above) against the mean with that by the stress "
            "function (from below), relative to it",
        ),
        Residual(
            "T",
            _torque(first) - 1.0,
            TORQUE_TOLERANCE,
            "torque of the shear stresses, summed over the triangles, relative to the torque",
        ),
    )


def closed_form_residual(closed: TorsionConstant, elements: SaintVenant) -> Residual:
    """Compare a closed form with the elements, relative to the closed form."""
    return Residual(
        "J",
        relative(elements.J - closed.value, closed.value),
        CLOSED_TOLERANCE,
        f"torsion constant by finite elements against {closed.method}, relative to the latter",
    )


def _torque(solution: SaintVenant) -> float:
    """Return the clockwise torque of the stresses for T = 1."""
    mesh = solution.mesh
    corners = mesh.points[mesh.triangles[:, :3]]
    points: FloatArray = (INNER @ corners).reshape(-1, 2)
    tau = solution.stress(points, T=1.0)
    arm = points - points.mean(axis=0)
    turning = arm[:, 1] * tau[:, 0] - arm[:, 0] * tau[:, 1]
    return float(np.repeat(mesh.area / 3.0, 3) @ turning)

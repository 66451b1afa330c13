"""Shear stresses and flows added up again: they must return the forces they were made from."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.field import Piece
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.fibres import GAUSS, fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.shear import Cuts, ShearForces
from calcgen.mechanics.stress import Forces, elastic_stress
from calcgen.mechanics.wall_shear import WallFlow, WallTorsion
from calcgen.mechanics.walls import WallSection

TOLERANCE = (
    1e-9  # flows are cubic between corners, and parabolas along walls: sums are exact but for rounding
)
THINNED = 1e-4  # where not every corner has its level, the flow is not one cubic between levels
SIMPSON = (np.array([0.0, 0.5, 1.0]), np.array([1.0, 4.0, 1.0]) / 6.0)  # exact for cubics


def cut_residuals(level: Cuts, upright: Cuts, shear: ShearForces) -> tuple[Residual, Residual]:
    """Compare ∫τ b dy over the depth with V, and ∫τ b dx over the width with V_lat.

    Both differences are divided by ∫|τ b| of both families of cuts together, so that a force of zero is
    tested too. Across a gap between parts the flow itself is summed: what connects the parts carries it.
    """
    (V, V_size), (V_lat, V_lat_size) = (_total(cuts) for cuts in (level, upright))
    scale = V_size + V_lat_size
    tolerances = [TOLERANCE if cuts.exact else THINNED for cuts in (level, upright)]
    return (
        Residual(
            "V", relative(V - shear.V, scale), tolerances[0], "∫τ b dy against V, relative to all shear flow"
        ),
        Residual(
            "V_lat",
            relative(V_lat - shear.V_lat, scale),
            tolerances[1],
            "∫τ b dx against V_lat, relative to all shear flow",
        ),
    )


def flow_residual(level: Cuts, section: Inertia, shear: ShearForces, pieces: Sequence[Piece]) -> Residual:
    """Compare the flow at the largest shear stress of level cuts with what the fibres above it gain a length.

    For sections without bars, relative to the sum of the fibres' magnitudes.
    """
    cut = level.profile.extreme
    gained, size = _gained(section, shear, pieces, above=cut.level)
    return Residual(
        "q",
        relative(-gained - cut.q, size),
        TOLERANCE,
        "flow at the largest shear stress against fibres above it, relative to their magnitudes",
    )


def joint_residual(section: Inertia, shear: ShearForces, piece: Piece, first: float) -> Residual:
    """Compare the flow across a part's joints with what the part's fibres gain a length."""
    gained, size = _gained(section, shear, (piece,))
    return Residual(
        f"q_{piece.name}",
        relative(abs(gained) - first, size),
        TOLERANCE,
        "flow across the joints against what the part's fibres gain a length, relative to their magnitudes",
    )


def wall_residuals(section: WallSection, flow: WallFlow, shear: ShearForces) -> tuple[Residual, ...]:
    """Add up the flow along the walls: V, V_lat, no moment about the shear centre, no twist of any cell.

    Forces are relative to ∫|q| ds, the moment to that times the largest distance from the shear centre, a
    twist to ∫|q|/t ds. Where all walls lie in one line, the force across it is not carried by their flow and
    is not compared.
    """
    g = section.graph
    points, weights = SIMPSON
    q = flow.at(points) @ weights * g.length
    size = float((np.abs(flow.at(points)) @ weights * g.length).sum())
    ahead = g.along / g.length[:, None]
    right, up = (q @ ahead).tolist()
    V, V_lat = shear.V, shear.V_lat
    if section.in_one_line:
        along = ahead[0] * float(np.array([-V_lat, V]) @ ahead[0])
        V, V_lat = float(along[1]), float(-along[0])
    pole = np.array([section.x_s, section.y_s])
    arm = flow.places(np.array([0.5]))[:, 0, :] - pole
    moment = float(q @ (arm[:, 0] * ahead[:, 1] - arm[:, 1] * ahead[:, 0]))
    reach = float(np.hypot(*(g.nodes - pole).T).max())
    return (
        Residual("V", relative(up - V, size), TOLERANCE, "flow along the walls against V"),
        Residual("V_lat", relative(-right - V_lat, size), TOLERANCE, "flow along the walls against V_lat"),
        Residual("T", relative(moment, size * reach), TOLERANCE, "moment of the flow about the shear centre"),
        *_twists(section, flow, 0.0, "twist of the cell"),
    )


def torsion_residuals(section: WallSection, torsion: WallTorsion, T: float) -> tuple[Residual, ...]:
    """Add up the stresses of torsion: the torque T, and the same twist of every cell.

    The flow of the cells is taken about the origin. An open wall's stress, linear over its thickness, gives
    half of its torque along the wall and the other half at its ends: l t² τ/3 in all.
    """
    g = section.graph
    points, weights = SIMPSON
    q = torsion.flow.at(points) @ weights
    middle = torsion.flow.places(np.array([0.5]))[:, 0, :]
    cells = -float(q @ (middle[:, 0] * g.along[:, 1] - middle[:, 1] * g.along[:, 0]))
    found = cells + float(np.sum(g.length * g.t**2 * torsion.tau_surface)) / 3.0
    return (
        Residual(
            "T", relative(found - T, abs(T)), TOLERANCE, "torque of the stresses against T, relative to it"
        ),
        *_twists(section, torsion.flow, torsion.rate, "twist of the cell against T/(G I_t)"),
    )


def _twists(section: WallSection, flow: WallFlow, rate: float, quantity: str) -> tuple[Residual, ...]:
    """Compare ∮q/t ds with -2 A_m times `rate` for each cycle of walls, relative to ∫|q|/t ds of all walls.

    The scale also has the rate times the squared length of the cycle, for cycles that enclose no area.
    """
    g = section.graph
    points, weights = SIMPSON
    slip = flow.at(points) @ weights * g.length / g.t
    size = np.abs(flow.at(points)) @ weights * g.length / g.t
    residuals = []
    for number, cycle in enumerate(g.cycles, start=1):
        twice_area = float(np.sum(cycle * (_cross(g.nodes[g.start], g.nodes[g.end]))))
        difference = float(cycle @ slip) + rate * twice_area
        scale = float(size.sum()) + abs(rate) * float(np.abs(cycle) @ g.length) ** 2
        residuals.append(
            Residual(f"θ_{number}", relative(difference, scale), TOLERANCE, f"{quantity} {number}")
        )
    return tuple(residuals)


def _cross(a: FloatArray, b: FloatArray) -> FloatArray:
    cross: FloatArray = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]
    return cross


def _total(cuts: Cuts) -> tuple[float, float]:
    """∫τ b and ∫|τ b| over all bands, by two Gauss points each."""
    bands = cuts.profile.bands
    height = np.diff(bands)
    levels = (bands[:-1, None] + GAUSS * height[:, None]).ravel()
    v = cuts.at(levels)
    passed = (v.factor > 0.0) & np.isfinite(v.tau)
    flow = np.where(passed, v.tau * v.b / np.where(passed, v.factor, 1.0), v.q) * np.repeat(0.5 * height, 2)
    return float(flow.sum()), float(np.abs(flow).sum())


def _gained(
    section: Inertia, shear: ShearForces, pieces: Sequence[Piece], above: float | None = None
) -> tuple[float, float]:
    """Force that pieces gain a length, N/m, above a level or in all, and the sum of all magnitudes.

    The difference of forces at two places a unit length apart, between which the moments grow by V and V_lat.
    """
    here, there = (
        elastic_stress(section, Forces()),
        elastic_stress(section, Forces(M=shear.V, M_lat=shear.V_lat)),
    )
    total = size = 0.0
    for piece in pieces:
        for part in piece.outlines:
            bundle = fibres(part, cut=above if above is not None and _passes(part, above) else None)
            points = np.column_stack((bundle.x, bundle.y))
            gain = bundle.area * (piece.law.stress(there.at(points)) - piece.law.stress(here.at(points)))
            total += float(gain.sum() if above is None else gain[bundle.y > above].sum())
            size += float(np.abs(gain).sum())
    return total, size


def _passes(part: Outline, level: float) -> bool:
    return part.bounds.bottom < level < part.bounds.top

"""Normal and shear stress together: von Mises and principal stresses, and where they are extreme.

Two descriptions are searched. *Outline*: stations on level and upright cuts of the actual outline, at both
ends and the middle of each interval of material; the mean stresses of the level cut (τ_y) and of the upright
cut (τ_x) through the station are at right angles, √(τ_x² + τ_y²), and a torsional stress is added to that by
magnitude, which is safe whatever its direction. *Walls*: stations along the mid-line of thin walls, on it
and on both surfaces; flows of shear and of torsion act along the wall and are added with their signs. An open
wall that the cuts across it pass alone has its flow from the actual outline, and needs no mid-line. Each
extreme is the larger of both, and says from which it comes.

The stress state is σ along the beam with one shear stress τ: σ_vM = √(σ² + 3τ²), σ_1,2 = σ/2 ± √(σ²/4 + τ²),
and axis 1 turned from the beam's axis towards the shear stress by half of atan2(2τ, σ).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.field import Piece, StressField
from calcgen.mechanics.shear import WORK, Cuts, Direction
from calcgen.mechanics.stress import BoolArray
from calcgen.mechanics.wall_shear import WallFlow, WallTorsion
from calcgen.mechanics.walls import Graph

Description: TypeAlias = Literal["outline", "walls"]
NormalStress: TypeAlias = Callable[[Piece, FloatArray], FloatArray]  # of a piece, at points (n, 2): (n,), Pa
TorsionStress: TypeAlias = Callable[[FloatArray], FloatArray]  # at points (n, 2): magnitudes (n,), Pa

TOUCHING = 1e-9  # of a cut's length: pieces closer than this touch
TIED = 1e-9  # relatively: of stations closer than this the first is taken
INTERVALS = 48  # of a cut that passes in and out of the material very often, about so many have stations
ENDS_AND_MIDDLE = np.array([0.0, 0.5, 1.0])


@dataclass(frozen=True)
class StressState:
    """Normal stress sigma, tension positive, and shear stress tau, not negative, Pa, at a place, m."""

    x: float
    y: float
    sigma: float
    tau: float
    description: Description

    @property
    def von_mises(self) -> float:
        """√(σ² + 3τ²), Pa."""
        return math.hypot(self.sigma, math.sqrt(3.0) * self.tau)

    @property
    def sigma_1(self) -> float:
        """The larger principal stress, Pa, never negative."""
        return 0.5 * (self.sigma + math.hypot(self.sigma, 2.0 * self.tau))

    @property
    def sigma_2(self) -> float:
        """The smaller principal stress, Pa, never positive."""
        return 0.5 * (self.sigma - math.hypot(self.sigma, 2.0 * self.tau))

    @property
    def angle(self) -> float:
        """Angle from the beam's axis to σ_1, rad, towards the shear stress, 0 to π/2."""
        return 0.5 * math.atan2(2.0 * self.tau, self.sigma)


@dataclass(frozen=True)
class CombinedExtremes:
    """The states in which τ, σ_vM and σ_1 are largest and σ_2 is smallest."""

    tau_max: StressState
    von_mises_max: StressState
    sigma_1_max: StressState
    sigma_2_min: StressState


@dataclass(frozen=True, eq=False)
class Stations:
    """States at n stations: points (n, 2), m, sigma and tau (n,), Pa, all of one description."""

    points: FloatArray
    sigma: FloatArray
    tau: FloatArray
    description: Description

    def largest(self, measure: FloatArray) -> tuple[float, StressState]:
        """Return the largest of a measure (n,), Pa, and the first station that has it within 1e-9."""
        most = float(measure.max())
        i = int(np.argmax(measure >= most - TIED * abs(most)))
        x, y = self.points[i].tolist()
        return most, StressState(x, y, float(self.sigma[i]), float(self.tau[i]), self.description)


def field_stress(field: StressField) -> NormalStress:
    """Return the normal stress of a field by piece and points."""
    return lambda piece, points: piece.law.stress(field.plane.at(points))


def outline_stations(
    pieces: Sequence[Piece],
    level: Cuts,
    upright: Cuts,
    sigma: NormalStress,
    torsion: TorsionStress | None = None,
    *,
    alone: Direction | None = None,
) -> Stations:
    """Evaluate both stresses over the actual outline of pieces, whose cuts under V and V_lat are given.

    Stations lie on the cuts of both profiles, so the places of extremes are as fine as these. Where a cut
    crosses a gap its stress counts as none.

    Where one force acts alone, `alone` names the cuts across it: 'level' for V, 'upright' for V_lat. The cuts
    along it then count only where they are the shorter, as in the flange of an I under V: the mean over a cut
    as long as a web tells nothing of the stress at one place on it.
    """
    of_piece, points, inside = _places(level, upright)
    level_tau = _mean(level, points[:, 1], inside[:, 1], of_piece)
    upright_tau = _mean(upright, points[:, 0], inside[:, 0], of_piece)
    if alone is not None and len(points) * len(level.start) <= WORK:
        across = _extent(level, points[:, 1], inside[:, 1], points[:, 0] - upright.origin)
        down = _extent(upright, points[:, 0], inside[:, 0], level.origin - points[:, 1])
        if alone == "level":
            upright_tau = np.where(down < across, upright_tau, 0.0)
        else:
            level_tau = np.where(across < down, level_tau, 0.0)
    tau = np.hypot(level_tau, upright_tau)
    if torsion is not None:
        tau = tau + np.abs(torsion(points))
    normal = np.empty(len(points))
    for index, piece in enumerate(pieces):
        own = of_piece == index
        normal[own] = sigma(piece, points[own])
    return Stations(points, normal, tau, "outline")


def passed_alone(g: Graph, level: Cuts, upright: Cuts) -> BoolArray:
    """Return for each wall, (n,), whether the cut through its middle, the more across it, passes no other."""
    middle = g.nodes[g.start] + 0.5 * g.along
    upwards = np.abs(g.along[:, 1]) >= np.abs(g.along[:, 0])
    across = zip(level.material(middle[:, 1]), upright.material(middle[:, 0]), upwards.tolist(), strict=True)
    return np.array([len(passed if up else passed_upright) == 1 for passed, passed_upright, up in across])


def wall_stations(
    flow: WallFlow,
    sigma: Callable[[FloatArray], FloatArray],
    torsion: WallTorsion | None = None,
    *,
    chosen: BoolArray | None = None,
) -> Stations:
    """Evaluate both stresses along thin walls: at ends, middle and the vertex of the flow of each wall.

    At each place on the mid-line and on both surfaces, t/2 away, where a torsional stress of open walls acts.
    Of all walls, or of those `chosen`, (n,).
    """
    g = flow.graph
    total = flow if torsion is None else flow.plus(torsion.flow)
    vertex = total.turns[:, None]
    u = np.concatenate((np.broadcast_to(ENDS_AND_MIDDLE, (len(g.t), 3)), vertex), axis=1)
    q = total.along_each(u)
    middle = g.nodes[g.start][:, None, :] + u[:, :, None] * g.along[:, None, :]
    left = np.column_stack((-g.along[:, 1], g.along[:, 0])) / g.length[:, None]
    surface = np.zeros(len(g.t)) if torsion is None else torsion.tau_surface
    looked_at = np.ones(len(g.t), dtype=bool) if chosen is None else chosen
    points, tau = [], []
    for side in (0.0, 1.0, -1.0):
        places_here = middle + side * (0.5 * g.t[:, None] * left)[:, None, :]
        points.append(places_here[looked_at].reshape(-1, 2))
        tau.append(np.abs(q / g.t[:, None] + side * surface[:, None])[looked_at].ravel())
    places = np.concatenate(points)
    return Stations(places, sigma(places), np.concatenate(tau), "walls")


def combined_extremes(*descriptions: Stations) -> CombinedExtremes:
    """Find the extremes over all stations; of equals in two descriptions the first one given is taken."""

    def extreme(measure: Callable[[Stations], FloatArray]) -> StressState:
        found = [stations.largest(measure(stations)) for stations in descriptions]
        most = max(value for value, _ in found)
        return next(state for value, state in found if value >= most - TIED * abs(most))

    return CombinedExtremes(
        tau_max=extreme(lambda s: s.tau),
        von_mises_max=extreme(lambda s: np.hypot(s.sigma, math.sqrt(3.0) * s.tau)),
        sigma_1_max=extreme(lambda s: s.sigma + np.hypot(s.sigma, 2.0 * s.tau)),
        sigma_2_min=extreme(lambda s: np.hypot(s.sigma, 2.0 * s.tau) - s.sigma),
    )


def _places(level: Cuts, upright: Cuts) -> tuple[FloatArray, FloatArray, FloatArray]:
    """List stations of both families of cuts: piece, points (n, 2), and where their material lies, (n, 2).

    The material lies to the right of a place (above it) for +1, to the left (below) for -1.
    """
    piece, points, inside = [], [], []
    for cuts in (level, upright):
        values = cuts.profile.values
        extreme = cuts.profile.extreme
        heights, sides = np.append(values.level, extreme.level), np.append(values.above, extreme.above)
        each = zip(
            heights.tolist(),
            np.where(sides, 1.0, -1.0).tolist(),
            cuts.material(heights, above=sides),
            strict=True,
        )
        for height, side, intervals in each:
            for index, first, last in intervals[:: 1 + len(intervals) // INTERVALS]:
                for share, towards in ((0.0, 1.0), (0.5, 1.0), (1.0, -1.0)):
                    along = first + share * (last - first)
                    piece.append(index)
                    if cuts.direction == "level":
                        points.append((upright.origin + along, height))
                        inside.append((towards, side))
                    else:  # seen from the right: along runs downwards
                        points.append((height, level.origin - along))
                        inside.append((side, -towards))
    return np.array(piece), np.array(points), np.array(inside)


def _extent(cuts: Cuts, levels: FloatArray, inside: FloatArray, along: FloatArray) -> FloatArray:
    """Length of the material on the cut through each place, m, over all pieces that touch there."""
    keys, where, count = np.unique(
        np.column_stack((levels, inside)), axis=0, return_inverse=True, return_counts=True
    )
    of_cut = np.split(np.argsort(where.ravel(), kind="stable"), np.cumsum(count)[:-1])
    found = np.zeros(len(levels))
    for at, intervals in zip(of_cut, cuts.material(keys[:, 0], above=keys[:, 1] > 0.0), strict=True):
        joined: list[list[float]] = []
        for first, last in sorted((first, last) for _, first, last in intervals):
            if joined and first <= joined[-1][1] + TOUCHING * (last - joined[-1][0]):
                joined[-1][1] = max(joined[-1][1], last)
            else:
                joined.append([first, last])
        if not joined:
            continue
        starts, ends = np.array(joined).T
        nearest = np.argmin(np.maximum(starts - along[at, None], along[at, None] - ends), axis=1)
        found[at] = (ends - starts)[nearest]
    return found


def _mean(cuts: Cuts, levels: FloatArray, inside: FloatArray, piece: FloatArray) -> FloatArray:
    """Mean stress of a piece on the cut through each place, Pa.

    Each cut is computed once; those of an outline of very many corners are read from the profile.
    """
    keys, where = np.unique(np.column_stack((levels, inside)), axis=0, return_inverse=True)
    known = cuts.profile.values if len(keys) * len(cuts.start) > WORK else None
    values = known or cuts.at(keys[:, 0], above=keys[:, 1] > 0.0)
    passed = np.isfinite(values.tau) & (values.factor > 0.0)
    reference = np.where(passed, values.tau / np.where(passed, values.factor, 1.0), 0.0)
    if known is not None:
        reference = np.interp(keys[:, 0], known.level, reference)
    stress: FloatArray = reference[where.ravel()] * cuts.factors[piece]
    return stress

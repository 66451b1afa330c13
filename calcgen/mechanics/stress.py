"""Elastic normal stress over a section: the plane of stress that axial force and two moments make."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.section import Inertia

BoolArray: TypeAlias = NDArray[np.bool_]

NEGLIGIBLE = 1e-12  # of the largest term of the stress: a smaller one is rounding
TIED = 1e-9  # of the range of what is compared: closer values are equal


@dataclass(frozen=True)
class Forces:
    """Stress resultants at the centroid, N and N·m.

    N positive in tension; M about the horizontal axis, positive with tension at the bottom; M_lat about the
    vertical axis, positive with tension on the right.
    """

    N: float = 0.0
    M: float = 0.0
    M_lat: float = 0.0


@dataclass(frozen=True)
class NeutralAxis:
    """The line of zero stress.

    x, y : its point nearest to the centroid, m; angle : from the horizontal, rad, counter-clockwise, in
    (-π/2, π/2]; above, right : signed distance from the centroid to it along the vertical (up) and along the
    horizontal (right), m, None where it runs parallel to that direction.
    """

    x: float
    y: float
    angle: float
    above: float | None
    right: float | None


@dataclass(frozen=True)
class Extreme:
    """A largest or smallest stress, Pa, and its place, m.

    Where a whole edge has it, `ends` are the ends of that edge and (x, y) is its middle; otherwise both ends
    are the place itself. Of several places the leftmost one is taken, and the lowest of those in one upright
    line. A uniform stress has its place at the centroid.
    """

    value: float
    x: float
    y: float
    ends: tuple[Point, Point]


@dataclass(frozen=True)
class Curvature:
    """Curvatures, 1/m.

    kappa_h in the vertical plane (bending about the horizontal axis), positive where the bottom lengthens;
    kappa_v in the horizontal plane, positive where the right side lengthens.
    """

    kappa_h: float
    kappa_v: float

    @property
    def resultant(self) -> float:
        """Curvature in the plane of bending, 1/m, never negative."""
        return math.hypot(self.kappa_h, self.kappa_v)

    @property
    def radius(self) -> float | None:
        """Radius of curvature, m; None for a straight beam."""
        return 1.0 / self.resultant if self.resultant > 0.0 else None


@dataclass(frozen=True)
class StressPlane:
    """sigma = sigma_0 + g_x (x - x_bar) + g_y (y - y_bar), Pa: tension positive, x right, y up, m."""

    sigma_0: float
    g_x: float
    g_y: float
    x_bar: float
    y_bar: float

    def at(self, points: FloatArray) -> FloatArray:
        """Return the stress, Pa, at points (n, 2), m."""
        x, y = points[:, 0] - self.x_bar, points[:, 1] - self.y_bar
        return self.sigma_0 + self.g_x * x + self.g_y * y

    def strain_at(self, points: FloatArray, E: float) -> FloatArray:
        """Return the strain at points (n, 2), m, for the modulus E, Pa."""
        return self.at(points) / E

    @property
    def uniform(self) -> bool:
        """Whether the stress is the same everywhere (zero included)."""
        return self.g_x == 0.0 and self.g_y == 0.0

    @property
    def neutral_axis(self) -> NeutralAxis | None:
        """The line of zero stress, inside the section or not; None where the stress is uniform."""
        if self.uniform:
            return None
        steepest = math.hypot(self.g_x, self.g_y)  # a sum of squares would vanish for the smallest forces
        distance = -self.sigma_0 / steepest
        to_x, to_y = distance * (self.g_x / steepest), distance * (self.g_y / steepest)
        along = math.atan2(-self.g_x + 0.0, self.g_y)
        if along <= -0.5 * math.pi:
            along += math.pi
        elif along > 0.5 * math.pi:
            along -= math.pi
        return NeutralAxis(
            x=self.x_bar + to_x,
            y=self.y_bar + to_y,
            angle=along,
            above=0.0 - self.sigma_0 / self.g_y if self.g_y else None,
            right=0.0 - self.sigma_0 / self.g_x if self.g_x else None,
        )

    def curvature(self, E: float) -> Curvature:
        """Return the curvatures, 1/m, for the modulus E, Pa."""
        return Curvature(0.0 - self.g_y / E, self.g_x / E)

    def extremes(self, *outlines: Outline) -> tuple[Extreme, Extreme]:
        """Return the largest and the smallest stress on the outlines: tension most, compression most."""
        if self.uniform:
            here = (self.x_bar, self.y_bar)
            extreme = Extreme(self.sigma_0, *here, (here, here))
            return extreme, extreme
        rings = [part.exterior for part in outlines]  # the stress is linear: never extreme at a hole
        stresses = [self.at(ring) for ring in rings]
        most, least = max(float(s.max()) for s in stresses), min(float(s.min()) for s in stresses)
        near = TIED * (most - least)
        return (
            self._extreme(most, [(r, s >= most - near) for r, s in zip(rings, stresses, strict=True)]),
            self._extreme(least, [(r, s <= least + near) for r, s in zip(rings, stresses, strict=True)]),
        )

    def at_top(self, *outlines: Outline) -> float:
        """Return the stress at the top fibre, Pa: where it varies along it, that of largest magnitude."""
        return self._at_fibre(np.array([0.0, 1.0]), outlines)

    def at_bottom(self, *outlines: Outline) -> float:
        """Return the stress at the bottom fibre, Pa: where it varies along it, that of largest magnitude."""
        return self._at_fibre(np.array([0.0, -1.0]), outlines)

    def _at_fibre(self, outwards: FloatArray, outlines: tuple[Outline, ...]) -> float:
        points = np.concatenate([part.exterior for part in outlines])
        heights = points @ outwards
        stresses = self.at(points[heights >= heights.max() - TIED * np.ptp(heights)])
        most, least = float(stresses.max()), float(stresses.min())
        return most if most >= -least else least

    def _extreme(self, value: float, candidates: list[tuple[FloatArray, BoolArray]]) -> Extreme:
        """Choose the place among the tied corners of each ring; all lie on one line across the gradient."""
        across = np.array([self.g_y, -self.g_x])
        if across[0] < 0.0 or (across[0] == 0.0 and across[1] < 0.0):
            across = -across  # runs to the right, or up
        ring, tied = min(
            candidates, key=lambda each: float((each[0][each[1]] @ across).min(initial=math.inf))
        )
        corners = np.flatnonzero(tied)
        first = int(corners[np.argmin(ring[corners] @ across)])
        last = first
        for step in (1, -1):  # the tied edge, if there is one, leaves the first corner on one side only
            while tied[(last + step) % len(ring)] and (last + step) % len(ring) != first:
                last = (last + step) % len(ring)
            if last != first:
                break
        (x_0, y_0), (x_1, y_1) = ring[first].tolist(), ring[last].tolist()
        return Extreme(value, 0.5 * (x_0 + x_1), 0.5 * (y_0 + y_1), ((x_0, y_0), (x_1, y_1)))


def elastic_stress(section: Inertia, forces: Forces) -> StressPlane:
    """Solve for the plane of stress that is in equilibrium with the forces.

    From ∫σ dA = N, ∫σ y dA = -M and ∫σ x dA = M_lat about the centroid, with D = I_h I_v - I_hv²:
    g_x = (M_lat I_h + M I_hv)/D and g_y = -(M I_v + M_lat I_hv)/D, the general flexure formula for any
    pair of centroidal axes. A term of less than 1e-12 of the largest is rounding and set to zero, so that it
    cannot put a neutral axis into the far distance.
    """
    determinant = section.I_h * section.I_v - section.I_hv**2
    sigma_0 = forces.N / section.area
    g_x = (forces.M_lat * section.I_h + forces.M * section.I_hv) / determinant
    g_y = -(forces.M * section.I_v + forces.M_lat * section.I_hv) / determinant
    i_h, i_v = math.sqrt(section.I_h / section.area), math.sqrt(section.I_v / section.area)
    least = NEGLIGIBLE * max(abs(sigma_0), abs(g_x) * i_v, abs(g_y) * i_h)
    return StressPlane(
        sigma_0 if abs(sigma_0) > least else 0.0,
        g_x if abs(g_x) * i_v > least else 0.0,
        g_y if abs(g_y) * i_h > least else 0.0,
        section.x_bar,
        section.y_bar,
    )

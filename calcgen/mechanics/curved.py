"""Bending of a curved bar in the plane of its curvature, by Winkler and Bach.

Plane sections turn about the neutral axis, but the fibres between two of them differ in length, r dφ, so that
the stress is a hyperbola over the depth. With r the distance from the centre of curvature, R_c that of the
centroid, A_m = ∫dA/r, r_n = A/A_m and e = R_c - r_n, the normal stress is

    σ(r) = N/A + M_c (r_n - r)/(A e r) = N/A + M_c (A - r A_m)/(A r (R_c A_m - A)),

where M_c is positive with tension on the inner side. N acts at the centroid. Source: Boresi & Schmidt,
Advanced Mechanics of Materials, 6th ed., ch. 9, from memory.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.plastic import all_edges
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.stress import NEGLIGIBLE, Extreme, StressPlane

Centre: TypeAlias = Literal["bottom", "top"]

SYMMETRIC = 1e-9  # of the geometric mean of the second moments: a smaller product moment is rounding
PROFILE_POINTS = 97
SERIES_BELOW = (
    0.5  # half-length of an edge over the radius of its middle; beyond it the logarithm is exact enough
)
SERIES_TERMS = 27  # 0.5^54 < 1e-16


class CurvatureError(ValueError):
    """A section that would reach the centre of curvature.

    Attributes
    ----------
    R_c : the radius of the centroidal line that was given, m.
    least : the distance from the centroid to the inner edge, m, which the radius must exceed.
    """

    def __init__(self, R_c: float, least: float) -> None:
        self.R_c, self.least = R_c, least
        super().__init__(f"the radius {R_c} m does not exceed {least} m, from the centroid to the inner edge")


@dataclass(frozen=True)
class CurvedAxis:
    """The line of zero stress: its radius r and height y, m, and whether it lies within the depth."""

    r: float
    y: float
    inside: bool


@dataclass(frozen=True)
class CurvedStress:
    """Normal stress over a curved bar's section, Pa, tension positive; y up, m.

    N : axial force at the centroid, N, positive in tension; M : moment, N·m, positive with tension at the
    bottom, whichever side is the inner one.
    R_c : radius of the centroidal line, m; centre : the side on which the centre of curvature lies.
    A, I_h : area, m², and second moment about the horizontal axis, m⁴; x_bar, y_bar : the centroid, m.
    I_c : ∫η² R_c/r dA, m⁴, with η = r - R_c; it tends to I_h as the bar straightens.
    I_cv : ∫xη R_c/r dA, m⁴, zero for a section symmetric about the vertical axis.
    in_plane : whether I_cv vanishes, as the formula requires; see `M_lat`.
    top_edge, bottom_edge : the ends of the outermost fibres, m; one point twice for a corner.
    """

    N: float
    M: float
    R_c: float
    centre: Centre
    A: float
    I_h: float
    x_bar: float
    y_bar: float
    I_c: float
    I_cv: float
    in_plane: bool
    top_edge: tuple[Point, Point]
    bottom_edge: tuple[Point, Point]

    @property
    def top(self) -> Extreme:
        """The uppermost fibre: its stress and place."""
        return self._fibre(self.top_edge)

    @property
    def bottom(self) -> Extreme:
        """The lowest fibre: its stress and place."""
        return self._fibre(self.bottom_edge)

    @property
    def A_m(self) -> float:
        """∫dA/r, m: equal to (A + I_c/R_c²)/R_c, as the centroid balances ∫η dA."""
        return (self.A + self.I_c / self.R_c**2) / self.R_c

    @property
    def e(self) -> float:
        """Distance from the centroid to the neutral axis of pure bending, m, towards the centre; positive."""
        return self.I_c / (self.A * self.R_c + self.I_c / self.R_c)

    @property
    def r_n(self) -> float:
        """Radius of the neutral axis of pure bending, A/A_m, m."""
        return self.R_c - self.e

    @property
    def inner(self) -> Extreme:
        """The fibre nearest to the centre of curvature."""
        return self.bottom if self.centre == "bottom" else self.top

    @property
    def outer(self) -> Extreme:
        """The fibre farthest from the centre of curvature."""
        return self.top if self.centre == "bottom" else self.bottom

    @property
    def r_inner(self) -> float:
        """Radius of the innermost fibre, m."""
        return self.radius(self.inner.y)

    @property
    def r_outer(self) -> float:
        """Radius of the outermost fibre, m."""
        return self.radius(self.outer.y)

    @property
    def extremes(self) -> tuple[Extreme, Extreme]:
        """The largest and the smallest stress with their places; the centroid where the stress is uniform."""
        if self.M == 0.0:
            here = (self.x_bar, self.y_bar)
            uniform = Extreme(self.N / self.A, *here, (here, here))
            return uniform, uniform
        least, most = sorted((self.bottom, self.top), key=lambda fibre: fibre.value)
        return most, least

    @property
    def M_c(self) -> float:
        """The moment, N·m, positive with tension on the inner side: it straightens the bar."""
        return _outwards(self.centre) * self.M

    @property
    def M_lat(self) -> float:
        """∫σ x dA, N·m, positive with tension on the right: the sideways moment that must hold the section.

        Zero where `in_plane`; otherwise the formula answers only for a bar kept from bending sideways.
        """
        return 0.0 if self.in_plane else -self.M_c * self.r_n * self.I_cv / (self.A * self.e * self.R_c**2)

    @property
    def neutral_axis(self) -> CurvedAxis | None:
        """Where the stress is zero, between the centre of curvature and infinity; None where nowhere."""
        divisor = self.M_c - self.N * self.e
        if self.M == 0.0 or abs(divisor) <= NEGLIGIBLE * max(abs(self.M_c), abs(self.N * self.e)):
            return None
        eta = self.e * (self.N * self.R_c - self.M_c) / divisor
        if not -self.R_c < eta < math.inf:
            return None
        y = self.y_bar + _outwards(self.centre) * eta
        return CurvedAxis(self.R_c + eta, y, self.bottom.y <= y <= self.top.y)

    def radius(self, y: float) -> float:
        """Return the distance, m, from the centre of curvature to the height y, m."""
        return self.R_c + _outwards(self.centre) * (y - self.y_bar)

    def at(self, points: FloatArray) -> FloatArray:
        """Return the stress, Pa, at points (n, 2), m."""
        return self.at_heights(points[:, 1])

    def at_heights(self, y: FloatArray) -> FloatArray:
        """Return the stress, Pa, at heights y (n,), m."""
        eta = _outwards(self.centre) * (y - self.y_bar)
        return self.N / self.A - self.M_c * (eta + self.e) / (self.A * self.e * (self.R_c + eta))

    def profile(self, count: int = PROFILE_POINTS) -> FloatArray:
        """Return heights, m, and stresses, Pa, (count, 2) from the inner to the outer fibre.

        Radii grow by equal ratios, so that the points crowd where the hyperbola bends most.
        """
        depth = self.top.y - self.bottom.y
        rise = self.r_inner * np.expm1(np.linspace(0.0, math.log1p(depth / self.r_inner), count))
        y = self.inner.y + _outwards(self.centre) * rise
        y[-1] = self.outer.y
        return np.column_stack((y, self.at_heights(y)))

    def straight(self, y: float) -> float:
        """Return the stress, Pa, that the formula of the straight bar gives at the height y, m."""
        return self.N / self.A - self.M * (y - self.y_bar) / self.I_h

    @property
    def straight_error(self) -> float | None:
        """Relative error of the straight-bar formula at the inner fibre; None where the stress there is zero.

        Negative where that formula gives too little.
        """
        exact = self.inner.value
        terms = abs(self.N / self.A) + abs(self.M * (self.inner.y - self.y_bar) / self.I_h)
        return self.straight(self.inner.y) / exact - 1.0 if abs(exact) > NEGLIGIBLE * terms else None

    def _fibre(self, edge: tuple[Point, Point]) -> Extreme:
        (x_0, y), (x_1, _) = edge
        return Extreme(float(self.at_heights(np.array([y]))[0]), 0.5 * (x_0 + x_1), y, edge)


def curved_stress(
    section: Inertia, N: float, M: float, R_c: float, centre: Centre, *outlines: Outline
) -> CurvedStress:
    """Find the stress of a curved bar of one material.

    Parameters
    ----------
    section : properties of the outlines.
    N, M : axial force at the centroid, N, tension positive; moment, N·m, positive with tension at the bottom.
    R_c : radius of the centroidal line, m.
    centre : side of the section on which the centre of curvature lies.
    outlines : the section's parts, without overlap.

    Raises
    ------
    CurvatureError
        Where R_c does not exceed the distance from the centroid to the inner edge.
    """
    heights = StressPlane(0.0, 0.0, 1.0, section.x_bar, section.y_bar)
    top, bottom = heights.extremes(*outlines)
    least = -bottom.value if centre == "bottom" else top.value
    if not (math.isfinite(R_c) and R_c > least):
        raise CurvatureError(R_c, least)
    I_c, I_cv = _curved_moments(section, R_c, centre, outlines)
    return CurvedStress(
        N=N,
        M=M,
        R_c=R_c,
        centre=centre,
        A=section.area,
        I_h=section.I_h,
        x_bar=section.x_bar,
        y_bar=section.y_bar,
        I_c=I_c,
        I_cv=I_cv,
        in_plane=abs(I_cv) <= SYMMETRIC * math.sqrt(I_c * section.I_v),
        top_edge=top.ends,
        bottom_edge=bottom.ends,
    )


def _outwards(centre: Centre) -> float:
    """+1 where r grows with y, -1 where it shrinks."""
    return 1.0 if centre == "bottom" else -1.0


def _curved_moments(
    section: Inertia, R_c: float, centre: Centre, outlines: Sequence[Outline]
) -> tuple[float, float]:
    """Return ∫η²/(1 + η/R_c) dA and ∫xη/(1 + η/R_c) dA, m⁴, exactly for straight edges.

    By Green's theorem ∫f dA = ∮(∫f dx) dy. Along an edge, with v from -1 to 1, x and η are linear and
    1 + η/R_c = ρ (1 + δv), which leaves the integrals of v^k/(1 + δv). The difference R_c A_m - A would give
    the same, but for slight curvature it is (h/R_c)² of its terms, and its digits are lost.
    """
    start, end = all_edges(*outlines)
    centroid = np.array([section.x_bar, section.y_bar])
    (x_0, y_0), (x_1, y_1) = (start - centroid).T, (end - centroid).T
    outwards = _outwards(centre)
    x, dx = 0.5 * (x_0 + x_1), 0.5 * (x_1 - x_0)
    eta, deta = 0.5 * outwards * (y_0 + y_1), 0.5 * outwards * (y_1 - y_0)
    rho = 1.0 + eta / R_c
    L_0, L_1, L_2, L_3 = _over_linear(deta / (R_c * rho))
    dy = outwards * deta / rho
    squares = (
        x * eta**2 * L_0
        + (dx * eta + 2.0 * x * deta) * eta * L_1
        + (2.0 * dx * eta + x * deta) * deta * L_2
        + dx * deta**2 * L_3
    )
    products = 0.5 * (
        x**2 * eta * L_0
        + (2.0 * dx * eta + x * deta) * x * L_1
        + (dx * eta + 2.0 * x * deta) * dx * L_2
        + dx**2 * deta * L_3
    )
    return float(np.sum(dy * squares)), float(np.sum(dy * products))


def _over_linear(delta: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """Return ∫v^k/(1 + δv) dv from -1 to 1 for k = 0 … 3, |δ| < 1.

    With T_m = Σ δ^2j/(2j + m) they are 2T_1, -2δT_3, 2T_3 and -2δT_5; T_1 = artanh(δ)/δ, and the others
    follow by T_m = 1/m + δ² T_(m+2), which loses digits for small δ, where the series is summed.
    """
    square = delta * delta
    small = np.abs(delta) < SERIES_BELOW
    T_1, T_3, T_5 = (_series(np.where(small, square, 0.0), m) for m in (1, 3, 5))
    large = np.where(small, SERIES_BELOW, delta)
    T_1 = np.where(small, T_1, np.arctanh(large) / large)
    T_3 = np.where(small, T_3, (T_1 - 1.0) / large**2)
    T_5 = np.where(small, T_5, (T_3 - 1.0 / 3.0) / large**2)
    return 2.0 * T_1, -2.0 * delta * T_3, 2.0 * T_3, -2.0 * delta * T_5


def _series(square: FloatArray, m: int) -> FloatArray:
    """Sum δ^2j/(2j + m) for δ² = `square`, by Horner's scheme."""
    total = np.zeros_like(square)
    for j in reversed(range(SERIES_TERMS)):
        total = total * square + 1.0 / (2 * j + m)
    return total

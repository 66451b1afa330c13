"""Closed forms with which the demo projects are worked by hand; any consistent units, M sags, w is down."""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise
from math import ceil, sqrt
from typing import NamedTuple, TypeAlias

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import cumulative_simpson, quad
from scipy.optimize import fsolve, minimize_scalar

Array: TypeAlias = NDArray[np.float64]

EXACT = 1e-9  # closed form against closed form: rounding alone lies between
GRID = 1e-6  # largest deflection on a grid of 20 001 points
FACETS = 1e-5  # true arcs against the facets of an outline
PRINTED = 3e-3  # three figures printed in the AISC Manual


class Worked(NamedTuple):
    """One value: in `unit`, with the way it was found; `within` is a relative tolerance."""

    calc: str
    name: str
    value: float
    unit: str
    how: str
    within: float = EXACT


class Overhang(NamedTuple):
    """A beam on supports at 0 and L with an overhang a; w on the span, v on the overhang (a force by length).

    Source: statics, and the slopes of a simple beam under a uniform load, w L³/24 EI, and under a moment M at
    one end, M L/3 EI there and M L/6 EI at the other.
    """

    L: float
    a: float
    w: float
    v: float

    @property
    def M_support(self) -> float:
        """The moment over the support."""
        return -self.v * self.a**2 / 2

    @property
    def R_1(self) -> float:
        """The reaction at 0."""
        return self.w * self.L / 2 + self.M_support / self.L

    @property
    def V_left(self) -> float:
        """The shear left of the support at L."""
        return self.R_1 - self.w * self.L

    @property
    def R_2(self) -> float:
        """The reaction at L."""
        return self.v * self.a - self.V_left

    @property
    def M_span(self) -> float:
        """The largest sagging moment."""
        return self.R_1**2 / (2 * self.w)

    def w_tip(self, EI: float) -> float:
        """Return the deflection of the tip."""
        slope = (self.w * self.L**3 / 24 + self.M_support * self.L / 3) / EI
        return -slope * self.a + self.v * self.a**4 / (8 * EI)

    def w_span(self, EI: float) -> float:
        """Return the largest deflection of the span."""
        return sag(lambda x: self.R_1 * x - self.w * x**2 / 2, self.L, EI)


def sag(M: Callable[[Array], Array], L: float, EI: float) -> float:
    """Return the largest deflection of a simple span by double integration of -M/EI on a grid."""
    x = np.linspace(0, L, 20_001)
    slope = cumulative_simpson(-M(x) / EI, x=x, initial=0)
    w = cumulative_simpson(slope, x=x, initial=0)
    return float(np.max(w - x / L * w[-1]))


def two_span_point(P: float, a: float, L: float) -> float:
    """Return the moment over the middle support of two equal spans, P at a from the outer support.

    Source: three-moment equation, M = -P a (L² - a²)/(4 L²).
    """
    return -P * a * (L**2 - a**2) / (4 * L**2)


class ThreeSpans(NamedTuple):
    """Three equal spans L under w over all of them, and two equal wheels P, a apart, the left one at s.

    Source: three-moment equations, of 4 M_2 + M_3 and M_2 + 4 M_3; a load at c from the left end of a span
    counts -P c (L² - c²)/L² where that span lies left of the support, and where it lies right of it
    -P d (L² - d²)/L² with d = L - c.
    """

    L: float
    w: float
    P: float
    a: float
    s: float

    @property
    def _wheels(self) -> list[tuple[int, float]]:
        """Span of each wheel on the beam, at a support the left one, and its distance from the left end."""
        places = [x for x in (self.s, self.s + self.a) if 0 < x <= 3 * self.L]
        spans = [ceil(x / self.L) - 1 for x in places]
        return [(span, x - span * self.L) for span, x in zip(spans, places, strict=True)]

    @property
    def supports(self) -> tuple[float, float, float, float]:
        """The moments over the supports."""
        L = self.L
        sides = [-self.w * L**2 / 2] * 2  # of M_2 and M_3, over L
        for span, c in self._wheels:
            if span < 2:
                sides[span] -= self.P * c * (L**2 - c**2) / L**2
            if span > 0:
                sides[span - 1] -= self.P * (L - c) * (L**2 - (L - c) ** 2) / L**2
        return 0.0, (4 * sides[0] - sides[1]) / 15, (4 * sides[1] - sides[0]) / 15, 0.0

    def M(self, span: int, x: Array) -> Array:
        """Return the moment at x from the left support of a span, 0 to 2."""
        L, ends = self.L, self.supports[span : span + 2]
        total = self.w * x * (L - x) / 2 + ends[0] + (ends[1] - ends[0]) * x / L
        for number, c in self._wheels:
            if number == span:
                total = total + self.P * np.where(x <= c, x * (L - c), c * (L - x)) / L
        return np.asarray(total, dtype=np.float64)

    def R_2(self) -> float:
        """Return the reaction of the second support."""
        _, left, right, _ = self.supports
        total = self.w * self.L + left * -2 / self.L + right / self.L
        for span, c in self._wheels:
            total += self.P * {0: c, 1: self.L - c, 2: 0.0}[span] / self.L
        return total

    def V_left_of_2(self) -> float:
        """Return the shear left of the second support."""
        left = sum(self.P * c / self.L for span, c in self._wheels if span == 0)
        return self.supports[1] / self.L - self.w * self.L / 2 - left


def highest(f: Callable[[float], float], low: float, high: float) -> float:
    """Return the largest value of f: the best of 801 places, closed in on between its neighbours."""
    places = np.linspace(low, high, 801)
    best = places[int(np.argmax([f(float(x)) for x in places]))]
    step = (high - low) / 800
    bounds = max(low, best - step), min(high, best + step)
    return -float(
        minimize_scalar(lambda x: -f(x), bounds=bounds, method="bounded", options={"xatol": 1e-12}).fun
    )


def curved(A: float, integral: float, R_c: float, N: float, M: float, r: float) -> float:
    """Return the stress of a curved bar at radius r; M, about the centroid, is positive where it straightens.

    Source: Winkler and Bach, as in Timoshenko, Strength of Materials II: r_n = A/∫dA/r, and
    σ = N/A + M (r_n - r)/(A e r) with e = R_c - r_n.
    """
    r_n = A / integral
    return N / A + M * (r_n - r) / (A * (R_c - r_n) * r)


def cracked(b: float, d: float, nA: float) -> tuple[float, float]:
    """Return the compressed depth x and I of a cracked rectangle with bars of transformed area nA at depth d.

    Source: first moments about the neutral axis, b x²/2 = nA (d - x).
    """
    x = (sqrt(nA**2 + 2 * b * nA * d) - nA) / b
    return x, b * x**3 / 3 + nA * (d - x) ** 2


def corner_pressure(b: float, h: float, N: float, M_x: float, M_y: float) -> float:
    """Return the largest pressure under a base b x h without tension; M_x presses the top, M_y the right.

    The plane of pressure p = p_0 + p_x x + p_y y whose positive part balances the forces: integrated exactly
    along y, by Gauss points along x, and found by scipy.
    """
    points, weights = np.polynomial.legendre.leggauss(400)
    x, w = points * b / 2, weights * b / 2

    def gap(plane: Array) -> Array:
        p_0, p_x, p_y = plane
        p = p_0 + p_x * x
        low = np.clip(-p / p_y, -h / 2, h / 2)
        area, first, second = (((h / 2) ** k - low**k) / k for k in (1, 2, 3))
        force, moment = p * area + p_y * first, p * first + p_y * second
        return np.array([w @ force - N, w @ moment - M_x, w @ (force * x) - M_y])

    start = np.array([N / (b * h), 12 * M_y / (h * b**3), 12 * M_x / (b * h**3)])
    p_0, p_x, p_y = fsolve(gap, start, xtol=1e-13)
    return float(p_0 + p_x * b / 2 + p_y * h / 2)


class Angle(NamedTuple):
    """An angle, heel at (0, 0), legs up (h) and right (b), root and toe radii, integrated by scipy."""

    h: float
    b: float
    t: float
    r_1: float
    r_2: float

    def width(self, y: float) -> float:
        """Return the width at height y; every horizontal cut is one piece from the back of the leg."""
        h, b, t, r_1, r_2 = self
        if y <= t - r_2:
            return b
        if y <= t:
            return float(b - r_2 + np.sqrt(r_2**2 - (y - t + r_2) ** 2))
        if y <= t + r_1:
            return float(t + r_1 - np.sqrt(r_1**2 - (t + r_1 - y) ** 2))
        if y <= h - r_2:
            return t
        return float(t - r_2 + np.sqrt(max(r_2**2 - (y - h + r_2) ** 2, 0.0)))

    def integral(self, f: Callable[[float, float], float]) -> float:
        """Return ∫f(y, width) dy over the height, piece by piece between the ends of the arcs."""
        h, _, t, r_1, r_2 = self
        ends = (0.0, t - r_2, t, t + r_1, h - r_2, h)
        parts = [quad(lambda y: f(y, self.width(y)), p, q, epsabs=0, epsrel=1e-10) for p, q in pairwise(ends)]
        return float(sum(value for value, _ in parts))

    def properties(self) -> tuple[float, float, float, float, float, float]:
        """Return A, x_bar, y_bar, ∫y² dA, ∫x² dA, ∫xy dA, the last three about the centroid."""
        A = self.integral(lambda _, X: X)
        x, y = self.integral(lambda _, X: X**2 / 2) / A, self.integral(lambda y, X: y * X) / A
        I_h = self.integral(lambda y, X: y**2 * X) - A * y**2
        I_v = self.integral(lambda _, X: X**3 / 3) - A * x**2
        I_hv = self.integral(lambda y, X: y * X**2 / 2) - A * x * y
        return A, x, y, I_h, I_v, I_hv

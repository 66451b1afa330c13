"""Forces of a stress field, and their change with its plane, by exact integrals along the outlines."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.mechanics.plastic import all_edges
from calcgen.mechanics.stress import Forces, StressPlane

GAUSS = 0.5 * (1.0 + np.array([-1.0, 1.0]) / math.sqrt(3.0))  # two points, exact for cubics


@dataclass(frozen=True, eq=False)
class Resultants:
    """Integrals about the reference point of a plane.

    vector : (∫σ dA, ∫σ x dA, ∫σ y dA), that is (N, M_lat, -M), N and N·m.
    tangent : (3, 3), its derivative with respect to the plane's (sigma_0, g_x, g_y).
    """

    vector: FloatArray
    tangent: FloatArray

    @property
    def forces(self) -> Forces:
        """The same as axial force and moments."""
        N, M_lat, minus_M = self.vector.tolist()
        return Forces(N, -minus_M, M_lat)


def field_forces(field: StressField, about: Point | None = None) -> Forces:
    """Return the forces that a field balances, about a point, m (its plane's where not given)."""
    x, y = about or (field.plane.x_bar, field.plane.y_bar)
    vector = resultants(field.plane, field.pieces, field.bars).vector
    if field.unloaded is not None:
        moved = shifted(field.unloaded, field.plane.x_bar, field.plane.y_bar)
        vector = vector - resultants(moved, *unlimited(field.pieces, field.bars)).vector
    N, S_x, S_y = vector.tolist()
    return Forces(N, -(S_y + N * (field.plane.y_bar - y)), S_x + N * (field.plane.x_bar - x))


def resultants(plane: StressPlane, pieces: Sequence[Piece], bars: Sequence[Bars] = ()) -> Resultants:
    """Integrate the stress of pieces and bars over the section."""
    reference = np.array([plane.x_bar, plane.y_bar])
    vector, tangent = np.zeros(3), np.zeros((3, 3))
    for piece in pieces:
        start, end = all_edges(*piece.outlines)
        found = _over_area(start - reference, end - reference, piece.law, plane)
        vector, tangent = vector + found.vector, tangent + found.tangent
    field = StressField(plane, (), tuple(bars))
    for group in bars:
        places = np.column_stack((np.ones(len(group.points)), group.points - reference))
        vector = vector + field.bar_forces(group) @ places
        stiffness = _stiffness(group.law, plane, group.points)
        if group.displaced:
            stiffness = stiffness - _stiffness(group.displaced, plane, group.points)
        tangent = tangent + (group.area * stiffness * places.T) @ places
    return Resultants(vector, tangent)


def unlimited(pieces: Sequence[Piece], bars: Sequence[Bars]) -> tuple[tuple[Piece, ...], tuple[Bars, ...]]:
    """Return pieces and bars with their limits taken away: the elastic section."""
    return (
        tuple(Piece(each.name, each.outlines, Law(each.law.factor)) for each in pieces),
        tuple(
            Bars(b.name, b.points, b.area, Law(b.law.factor), b.displaced and Law(b.displaced.factor))
            for b in bars
        ),
    )


def shifted(plane: StressPlane, x: float, y: float) -> StressPlane:
    """Return the same plane, written about another point, m."""
    if (x, y) == (plane.x_bar, plane.y_bar):
        return plane
    return StressPlane(float(plane.at(np.array([[x, y]]))[0]), plane.g_x, plane.g_y, x, y)


def _stiffness(law: Law, plane: StressPlane, points: FloatArray) -> FloatArray:
    """Slope of a law, dσ/ds, at points; at a limit that of the elastic side."""
    if law.rigid:
        return np.zeros(len(points))
    stress = law.factor * plane.at(points)
    return np.where((stress <= law.tension) & (stress >= -law.compression), law.factor, 0.0)


def _over_area(start: FloatArray, end: FloatArray, law: Law, plane: StressPlane) -> Resultants:
    """Integrate along edges, whose coordinates run from the plane's reference point.

    In a frame with w along the steepest strain, the stress depends on w alone, and by Green's theorem
    ∫σ dA = -∮Φ du, ∫σ u dA = -∮Φ u du and ∫σ w dA = -∮Θ du with Φ = ∫σ dw and Θ = ∫σ w dw. Between
    the levels at which a limit is reached the integrands are cubic at most along an edge, so edges are split
    there and have two Gauss points in each stretch.
    """
    steepest = math.hypot(plane.g_x, plane.g_y)
    dx, dy = (plane.g_x / steepest, plane.g_y / steepest) if steepest > 0.0 else (0.0, 1.0)
    frame = np.array([[dy, -dx], [dx, dy]])
    (u_0, w_0), (u_1, w_1) = frame @ start.T, frame @ end.T
    low, high = _elastic_band(law, plane.sigma_0, steepest, float(w_0.min()), float(w_0.max()))
    edge, begin, finish = _stretches(w_0, w_1, low, high)
    u_0, w_0, run, rise = u_0[edge], w_0[edge], (u_1 - u_0)[edge], (w_1 - w_0)[edge]
    share = begin + GAUSS[:, None] * (finish - begin)
    du = -0.5 * (finish - begin) * run  # the minus of Green's theorem, and half for each Gauss point
    u, w = u_0 + share * run, w_0 + share * rise

    middle = 0.5 * (low + high)  # integrals start here: the elastic band may be narrow, and far from w = 0
    s_middle = plane.sigma_0 + steepest * middle
    factor = 0.0 if law.rigid else law.factor
    level = np.clip(w, low, high)
    q, beyond = level - middle, w - level
    limit = np.where(beyond > 0.0, _finite(law.tension), -_finite(law.compression))
    first = factor * q * (s_middle + 0.5 * steepest * q)
    phi = first + limit * beyond
    theta = middle * first + factor * q * q * (0.5 * s_middle + steepest * q / 3.0)
    theta += 0.5 * limit * beyond * (w + level)
    vector = np.array([np.sum(du * phi), np.sum(du * phi * u), np.sum(du * theta)])

    qw = q * (middle + 0.5 * q)  # ∫w dw over the elastic band, and ∫w² dw
    qww = q * (middle * (middle + q) + q * q / 3.0)
    one, by_u, by_w, by_uu, by_uw, by_ww = (
        float(np.sum(du * each)) for each in (q, q * u, qw, q * u * u, qw * u, qww)
    )
    tangent = factor * np.array([[one, by_u, by_w], [by_u, by_uu, by_uw], [by_w, by_uw, by_ww]])
    back = np.array([[1.0, 0.0, 0.0], [0.0, dy, dx], [0.0, -dx, dy]])
    return Resultants(back @ vector, back @ tangent @ back.T)


def _stretches(
    w_0: FloatArray, w_1: FloatArray, low: float, high: float
) -> tuple[NDArray[np.intp], FloatArray, FloatArray]:
    """Split edges that cross a level in three: the edge of each stretch, and where on it that runs."""
    lower, upper = np.minimum(w_0, w_1), np.maximum(w_0, w_1)
    across = ((lower < low) & (low < upper)) | ((lower < high) & (high < upper))
    crossing, others = np.flatnonzero(across), np.flatnonzero(~across)
    cuts = (np.array([[low], [high]]) - w_0[crossing]) / (w_1 - w_0)[crossing]
    ends = np.zeros(len(crossing)), np.ones(len(crossing))
    knots = np.sort(np.vstack((ends[0], np.clip(cuts, 0.0, 1.0), ends[1])), axis=0)
    return (
        np.concatenate([others, np.tile(crossing, 3)]),
        np.concatenate([np.zeros(len(others)), knots[:-1].ravel()]),
        np.concatenate([np.ones(len(others)), knots[1:].ravel()]),
    )


def _elastic_band(
    law: Law, s_0: float, steepest: float, lowest: float, highest: float
) -> tuple[float, float]:
    """Levels between which a law is elastic, within those of the outline; equal where it is nowhere."""
    if law.factor == 0.0:
        return lowest, highest
    bottom, top = (0.0, 0.0) if law.rigid else (-law.compression / law.factor, law.tension / law.factor)
    if steepest == 0.0:
        if s_0 > top:
            return lowest, lowest
        return (highest, highest) if s_0 < bottom else (lowest, highest)
    low, high = (bottom - s_0) / steepest, (top - s_0) / steepest
    return min(max(low, lowest), highest), min(max(high, lowest), highest)


def _finite(limit: float) -> float:
    """Return a limit, and zero for none: then nothing lies beyond it but rounding."""
    return limit if math.isfinite(limit) else 0.0

"""A field of stress with limits integrated over fibres: it must return the forces it was made from.

The fibres lie across the steepest strain and none reaches over a level at which a limit is reached, so the
sums are exact but for rounding.
"""

from __future__ import annotations

import math

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.field import Law, StressField
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.stress import Forces, StressPlane

TOLERANCE = 1e-9


def field_residuals(
    field: StressField, forces: Forces, about: Point | None = None
) -> tuple[Residual, Residual, Residual]:
    """Compare ∫σ dA, -∫σ y dA and ∫σ x dA, bars included, with N, M and M_lat.

    Each difference is divided by the integral of the same thing's magnitude; for residual stress, which has
    no forces, of what was loaded and what was taken away. x and y run from `about`, m: the field's reference
    point where it is not given.
    """
    x_0, y_0 = about or (field.plane.x_bar, field.plane.y_bar)
    places, terms, magnitudes = _terms(field)
    x, y = (places - np.array([x_0, y_0])).T
    return (
        _residual("N", terms, magnitudes, forces.N, "∫σ dA against N, relative to ∫|σ| dA"),
        _residual("M", -terms * y, magnitudes * y, forces.M, "-∫σ y dA against M, relative to ∫|σ y| dA"),
        _residual(
            "M_lat", terms * x, magnitudes * x, forces.M_lat, "∫σ x dA against M_lat, relative to ∫|σ x| dA"
        ),
    )


def _residual(what: str, terms: FloatArray, magnitudes: FloatArray, given: float, quantity: str) -> Residual:
    scale = float(np.abs(magnitudes).sum())
    return Residual(what, relative(float(terms.sum()) - given, scale), TOLERANCE, quantity)


def _terms(field: StressField) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Places (n, 2), m, of fibres and bars, the force in each, N, and its magnitude, loaded and unloaded."""
    plane = field.plane
    angle = math.atan2(plane.g_x, plane.g_y)  # turning by it brings the steepest strain upright
    cos, sin = math.cos(angle), math.sin(angle)
    upright = np.array([[cos, sin], [-sin, cos]])  # of rows: (x, y) @ upright
    reference = np.array([plane.x_bar, plane.y_bar])
    steepest = math.hypot(plane.g_x, plane.g_y)
    places, forces, magnitudes = [], [], []
    for piece in field.pieces:
        turned = [[(ring - reference) @ upright for ring in part.rings] for part in piece.outlines]
        outlines = [Outline(exterior, tuple(holes)) for exterior, *holes in turned]
        bundle = fibres(*outlines, cut=_levels(piece.law, plane.sigma_0, steepest))
        s = plane.sigma_0 + steepest * bundle.y
        here = np.column_stack((bundle.x, bundle.y)) @ upright.T + reference
        loaded = bundle.area * _stress(piece.law, s)
        places.append(here)
        away = bundle.area * _taken_away(piece.law, field.unloaded, here)
        forces.append(loaded - away)
        magnitudes.append(np.abs(loaded) + np.abs(away))
    for group in field.bars:
        s = plane.at(group.points)
        stress, taken = _stress(group.law, s), _taken_away(group.law, field.unloaded, group.points)
        if group.displaced is not None:
            stress = stress - _stress(group.displaced, s)
            taken = taken - _taken_away(group.displaced, field.unloaded, group.points)
        places.append(group.points)
        forces.append(group.area * (stress - taken))
        magnitudes.append(group.area * (np.abs(stress) + np.abs(taken)))
    return np.concatenate(places), np.concatenate(forces), np.concatenate(magnitudes)


def _levels(law: Law, at_reference: float, steepest: float) -> tuple[float, ...]:
    """Heights at which a law reaches a limit, or a rigid one changes sign."""
    if steepest == 0.0 or law.factor == 0.0:
        return ()
    limits = (0.0,) if math.isinf(law.factor) else (-law.compression / law.factor, law.tension / law.factor)
    heights = ((limit - at_reference) / steepest for limit in limits)
    return tuple(height for height in heights if math.isfinite(height))


def _stress(law: Law, s: FloatArray) -> FloatArray:
    """Stress of a law, written anew."""
    if math.isinf(law.factor):
        return law.tension * (s > 0.0) - law.compression * (s < 0.0)
    return np.minimum(np.maximum(law.factor * s, -law.compression), law.tension)


def _taken_away(law: Law, unloaded: StressPlane | None, points: FloatArray) -> FloatArray:
    return np.zeros(len(points)) if unloaded is None else law.factor * unloaded.at(points)

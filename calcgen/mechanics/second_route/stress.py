"""The stress field integrated over fibres: it must return the forces it was made from."""

from __future__ import annotations

import numpy as np

from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.stress import Forces, StressPlane

TOLERANCE = 1e-9  # the sum is exact for a plane of stress but for rounding


def stress_residuals(plane: StressPlane, forces: Forces, *outlines: Outline) -> tuple[Residual, ...]:
    """Compare ∫σ dA, -∫σ y dA and ∫σ x dA about the centroid with N, M and M_lat.

    Each difference is divided by the integral of the same thing's magnitude, ∫|σ| dA, ∫|σ y| dA and ∫|σ x|
    dA, so that a force of zero is tested as sharply as any other. The centroid is that of the fibres.
    """
    bundle = fibres(*outlines)
    whole = float(bundle.area.sum())
    x = bundle.x - float(bundle.area @ bundle.x) / whole
    y = bundle.y - float(bundle.area @ bundle.y) / whole
    force = bundle.area * plane.at(np.column_stack((bundle.x, bundle.y)))
    return tuple(
        Residual(what, relative(float(terms.sum()) - given, float(np.abs(terms).sum())), TOLERANCE, quantity)
        for what, terms, given, quantity in (
            ("N", force, forces.N, "∫σ dA against N, relative to ∫|σ| dA"),
            ("M", -force * y, forces.M, "-∫σ y dA against M, relative to ∫|σ y| dA"),
            ("M_lat", force * x, forces.M_lat, "∫σ x dA against M_lat, relative to ∫|σ x| dA"),
        )
    )

"""The stress of a curved bar integrated over fibres: it must return the forces it was made from."""

from __future__ import annotations

import numpy as np

from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative

TOLERANCE = 1e-6
CUTS = 256  # layers whose radii grow by equal ratios: two Gauss points leave (ln ratio)^4/4320 of a hyperbola


def curved_residuals(stress: CurvedStress, *outlines: Outline) -> tuple[Residual, Residual, Residual]:
    """Compare ∫σ dA, -∫σ y dA and ∫σ x dA about the centroid with N, M and the sideways moment.

    Each difference is divided by the integral of the same thing's magnitude, so that a force of zero is
    tested as sharply as any other. The sideways moment is zero where the section is symmetric.
    """
    bundle = fibres(*outlines, cut=stress.profile(CUTS + 1)[1:-1, 0])
    whole = float(bundle.area.sum())
    x = bundle.x - float(bundle.area @ bundle.x) / whole
    y = bundle.y - float(bundle.area @ bundle.y) / whole
    force = bundle.area * stress.at_heights(bundle.y)
    N, M, M_lat = (
        Residual(what, relative(float(terms.sum()) - given, float(np.abs(terms).sum())), TOLERANCE, quantity)
        for what, terms, given, quantity in (
            ("N", force, stress.N, "∫σ dA against N, relative to ∫|σ| dA"),
            ("M", -force * y, stress.M, "-∫σ y dA against M, relative to ∫|σ y| dA"),
            ("M_lat", force * x, stress.M_lat, "∫σ x dA against M_lat, relative to ∫|σ x| dA"),
        )
    )
    return N, M, M_lat

"""The kern again: a force at its edge leaves one fibre without stress, by the formula of bending."""

from __future__ import annotations

from calcgen.mechanics.kern import Kern
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.stress import Forces, elastic_stress

TOLERANCE = 1e-9  # both routes are exact but for rounding


def kern_residuals(section: Inertia, found: Kern, *outlines: Outline) -> tuple[Residual, ...]:
    """Press with one newton at each of the four places, and compare the largest stress with zero.

    A force above the centroid puts the bottom in tension (M positive), one on its left the right side.
    """
    moments = {
        "k_t": Forces(N=-1.0, M=found.k_top),
        "k_b": Forces(N=-1.0, M=-found.k_bottom),
        "k_l": Forces(N=-1.0, M_lat=found.k_left),
        "k_r": Forces(N=-1.0, M_lat=-found.k_right),
    }
    words = "largest stress under a compressive force at the kern's edge, to the mean stress"
    return tuple(
        Residual(
            key, elastic_stress(section, forces).extremes(*outlines)[0].value * section.area, TOLERANCE, words
        )
        for key, forces in moments.items()
    )

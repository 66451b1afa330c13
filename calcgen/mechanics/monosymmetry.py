"""The monosymmetry constant, by an integral of the third degree along the outline."""

from __future__ import annotations

import math

import numpy as np

from calcgen.mechanics.outline import Outline
from calcgen.mechanics.plastic import all_edges
from calcgen.mechanics.section import Inertia

ROUNDING = 1e-12  # of the section's size: a smaller constant is zero


def monosymmetry(section: Inertia, y_s: float, *outlines: Outline) -> float:
    """Return β = (1/I_h) ∫y (x² + y²) dA - 2 (y_s - y_bar), m, for bending about the horizontal axis.

    x and y run right and up from the centroid; `y_s` is the height of the shear centre, m. β is negative
    where the larger flange is on top, and zero for two axes of symmetry. Codes that count it positive where
    the larger flange is compressed mean -β for a sagging moment and β for a hogging one. From memory:
    Trahair, Flexural-Torsional Buckling of Structures, and AS 4100 5.6.1.2, whose y runs down.
    """
    start, end = all_edges(*outlines)
    centroid = np.array([section.x_bar, section.y_bar])
    start, end = start - centroid, end - centroid
    cross = start[:, 0] * end[:, 1] - end[:, 0] * start[:, 1]
    # a form of degree 3 over the triangle from the centroid to an edge is cross/5 times its mean over the
    # edge, and two Gauss points give the mean of a cubic
    integral = 0.0
    for share in (0.5 - math.sqrt(1.0 / 12.0), 0.5 + math.sqrt(1.0 / 12.0)):
        x, y = (start + share * (end - start)).T
        integral += float(np.sum(cross * y * (x * x + y * y))) / 10.0
    beta = integral / section.I_h - 2.0 * (y_s - section.y_bar)
    size = float(np.ptp(np.concatenate((start, end)), axis=0).max())
    return beta if abs(beta) > ROUNDING * size else 0.0

"""What is read off a stretch of a solved beam: deflection from its chord, and moment shape factors."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import sqrt

import numpy as np

from calcgen.mechanics.beam.model import PLANES, Plane
from calcgen.mechanics.beam.results import PARTS, CaseSolution, Quantity

_W = PARTS.index("w")


def relative_to_chord(
    solution: CaseSolution, start: float, end: float, plane: Plane = "vertical"
) -> CaseSolution:
    """Give the solution with its deflection in `plane` counted from the chord between two places, m.

    The chord is the straight line through the deflected axis at `start` and `end`; what is asked beyond them
    is counted from its prolongation. Slopes stay those of the axis.
    """
    return relative_to_chords(solution, (start, end), plane)


def relative_to_chords(
    solution: CaseSolution, places: Sequence[float], plane: Plane = "vertical"
) -> CaseSolution:
    """Give the solution with its deflection in `plane` counted from the chords from place to place, m.

    Places are nodes, but for the first and the last; see `relative_to_chord`.
    """
    quantity: Quantity = "w" if plane == "vertical" else "w_lat"
    x, nodes = np.array(places), solution.nodes
    w = solution.values(quantity, x)
    number = np.clip(np.searchsorted(x, (nodes[:-1] + nodes[1:]) / 2) - 1, 0, len(x) - 2)
    slope = (np.diff(w) / np.diff(x))[number]
    pieces = solution.pieces.copy()
    of_w = pieces[:, _W, PLANES.index(plane)]
    of_w[:, 0] -= w[number] + slope * (nodes[:-1] - x[number])
    of_w[:, 1] -= slope * np.diff(nodes)
    return replace(solution, pieces=pieces)


@dataclass(frozen=True)
class MomentShape:
    """Factors by which the shape of the bending moment between restraints raises the critical moment.

    Both are 1 for a constant moment, and taken as 1 where there is none; both use magnitudes of the moment at
    the quarter points, M_A, M_B and M_C, and the largest, M_max. Both ends must be held against turning: they
    are not meant for the free end of a cantilever.

    C_b : 12.5 M_max/(2.5 M_max + 3 M_A + 4 M_B + 3 M_C), AISC 360-16 equation F1-1.
    C_1 : sqrt(35 M_max²/(M_max² + 9 M_A² + 16 M_B² + 9 M_C²)), for ends free to warp and to turn sideways
        (Serna, López, Puente and Yong, Journal of Constructional Steel Research 62 (2006), 566-580, from
        memory).
    """

    C_b: float
    C_1: float


def moment_shape(solution: CaseSolution, start: float, end: float) -> MomentShape:
    """Give the moment shape factors of the stretch between two restraints, m."""
    largest = solution.extremes("M", start, end).abs
    if largest == 0.0:
        return MomentShape(1.0, 1.0)
    A, B, C = (abs(solution.at("M", start + part * (end - start))) / largest for part in (0.25, 0.5, 0.75))
    return MomentShape(
        C_b=12.5 / (2.5 + 3.0 * A + 4.0 * B + 3.0 * C),
        C_1=sqrt(35.0 / (1.0 + 9.0 * A**2 + 16.0 * B**2 + 9.0 * C**2)),
    )

"""A section as a bundle of small fibres, from scan lines between the levels of its corners."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline

GAUSS = 0.5 * (1.0 + np.array([-1.0, 1.0]) / np.sqrt(3.0))  # two points, exact for cubics


@dataclass(frozen=True, eq=False)
class Fibres:
    """Places x, y, m, and areas, m², of the fibres, (n,) each.

    Sums over them integrate any polynomial of the second degree in x and y exactly.
    """

    x: FloatArray
    y: FloatArray
    area: FloatArray


def fibres(*outlines: Outline, cut: float | None = None) -> Fibres:
    """Split outlines that don't overlap into fibres; none reaches across the level `cut`, m.

    Between two neighbouring levels of corners the section is a row of trapezia. Each gives 2 × 2 Gauss
    points. What lies inside follows from counting crossings: neither the sense of the rings nor which of
    them are holes is used.
    """
    rings = [ring for part in outlines for ring in part.rings]
    x_0, y_0 = np.concatenate(rings).T
    x_1, y_1 = np.concatenate([np.roll(ring, -1, axis=0) for ring in rings]).T
    levels = np.unique(y_0 if cut is None else np.append(y_0, cut))
    first = np.searchsorted(levels, np.minimum(y_0, y_1))
    count = np.searchsorted(levels, np.maximum(y_0, y_1)) - first
    edge = np.repeat(np.arange(len(count)), count)
    band = np.arange(len(edge)) - np.repeat(np.cumsum(count) - count, count) + first[edge]
    run = (x_1 - x_0)[edge] / (y_1 - y_0)[edge]
    x_low = x_0[edge] + run * (levels[band] - y_0[edge])
    x_high = x_0[edge] + run * (levels[band + 1] - y_0[edge])
    order = np.lexsort((x_low + x_high, band))
    left, right = order[0::2], order[1::2]
    low, height = levels[band[left]], np.diff(levels)[band[left]]
    x, y, area = [], [], []
    for v in GAUSS:
        x_left = x_low[left] + v * (x_high[left] - x_low[left])
        width = x_low[right] + v * (x_high[right] - x_low[right]) - x_left
        for u in GAUSS:
            x.append(x_left + u * width)
            y.append(low + v * height)
            area.append(0.25 * width * height)
    return Fibres(np.concatenate(x), np.concatenate(y), np.concatenate(area))

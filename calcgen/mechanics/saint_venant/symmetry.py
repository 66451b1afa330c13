"""Symmetries of a section, so that what must vanish does."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline

SAME = 1e-9  # of the size: closer points are one
MOST_CORNERS = 5_000  # with more of them no symmetry is looked for


@dataclass(frozen=True)
class Symmetry:
    """Whether left and right agree, top and bottom, and each point with the one across the centroid."""

    left_right: bool
    top_bottom: bool
    point: bool


def symmetry(outlines: Sequence[Outline], centroid: FloatArray) -> Symmetry:
    """Compare corners and middles of edges with their images in axes through the centroid, m."""
    start = np.concatenate([part.edges[0] for part in outlines]) - centroid
    end = np.concatenate([part.edges[1] for part in outlines]) - centroid
    if len(start) > MOST_CORNERS:
        return Symmetry(left_right=False, top_bottom=False, point=False)
    from scipy.spatial import KDTree  # loaded only with the solution by finite elements

    tolerance = SAME * float(np.ptp(start, axis=0).max())
    sets = (start, 0.5 * (start + end))
    trees = [KDTree(points) for points in sets]

    def holds(signs: tuple[float, float]) -> bool:
        return all(
            float(tree.query(points * np.array(signs))[0].max()) <= tolerance
            for tree, points in zip(trees, sets, strict=True)
        )

    return Symmetry(holds((-1.0, 1.0)), holds((1.0, -1.0)), holds((-1.0, -1.0)))

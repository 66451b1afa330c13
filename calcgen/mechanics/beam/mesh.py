"""One division of a beam into elements for all its load cases, so that cases add term by term."""

from __future__ import annotations

from bisect import bisect_left, insort
from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.model import BeamModel, BendingStiffness, ShearStiffness


@dataclass(frozen=True, eq=False)
class Mesh:
    """Nodes (n + 1,) from 0 to the beam's length, m, and what lies at them.

    `supports`: the node of each support. `hinges`: the nodes that are hinges. `stiffness` and `shear`: of
    each of the n elements.
    """

    nodes: FloatArray
    supports: tuple[int, ...]
    hinges: frozenset[int]
    stiffness: tuple[BendingStiffness, ...]
    shear: tuple[ShearStiffness, ...]

    @property
    def lengths(self) -> FloatArray:
        """Length of each element, (n,), m."""
        return np.diff(self.nodes)


def nearest(nodes: FloatArray, x: FloatArray | float) -> npt.NDArray[np.intp]:
    """Give the numbers of the nodes nearest to the places `x`."""
    right = np.clip(np.searchsorted(nodes, x), 1, len(nodes) - 1)
    return np.asarray(np.where(x - nodes[right - 1] <= nodes[right] - x, right - 1, right))


def divide(model: BeamModel, places: Iterable[float]) -> Mesh:
    """Divide the beam at its supports, hinges, changes of stiffness and at the `places` of loads.

    Of places closer than the model's tolerance the first named stands: the ends, then the supports, then
    the rest.
    """
    supports = [support.x for support in model.supports]
    changes = (stretch.end for stretch in model.stretches[:-1])
    found, tolerance = [0.0, model.length], model.tolerance
    for x in dict.fromkeys((*supports, *model.hinges, *changes, *places)):
        at = bisect_left(found, x)
        if not any(abs(x - neighbour) <= tolerance for neighbour in found[max(at - 1, 0) : at + 1]):
            insort(found, x)
    nodes = np.array(found)
    ends = np.array([stretch.end for stretch in model.stretches])
    stretch_of = np.searchsorted(ends, (nodes[:-1] + nodes[1:]) / 2)
    return Mesh(
        nodes,
        tuple(nearest(nodes, np.array(supports)).tolist()),
        frozenset(nearest(nodes, np.array(model.hinges)).tolist()),
        tuple(model.stretches[number].stiffness for number in stretch_of),
        tuple(model.stretches[number].shear for number in stretch_of),
    )

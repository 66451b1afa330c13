"""A solved load case, or a sum of them: values, extremes and crossings, exact within each element."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Final, Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import piecewise
from calcgen.mechanics.beam.mesh import nearest
from calcgen.mechanics.beam.model import BeamModel

Part: TypeAlias = Literal["w", "slope", "M", "V", "rotation"]
PARTS: Final[tuple[Part, ...]] = ("w", "slope", "M", "V", "rotation")
Quantity: TypeAlias = Literal[
    "w", "slope", "M", "V", "rotation", "w_lat", "slope_lat", "M_lat", "V_lat", "rotation_lat"
]
QUANTITIES: Final[tuple[Quantity, ...]] = (*PARTS, "w_lat", "slope_lat", "M_lat", "V_lat", "rotation_lat")
Side: TypeAlias = Literal["left", "right"]

_AT_END: Final = 1e-9
"""Part of an element's length within which a stationary point is its end."""
TIE: Final = 1e-10
"""Part of a quantity's largest magnitude within which two extremes are equal and the left one is named."""


@dataclass(frozen=True)
class Extremes:
    """Largest and smallest value and the first place of each, from the left."""

    max: float
    x_max: float
    min: float
    x_min: float

    @property
    def abs(self) -> float:
        """Largest magnitude."""
        return max(self.max, -self.min)

    @property
    def x_abs(self) -> float:
        """First place of the largest magnitude."""
        if abs(self.max + self.min) <= TIE * self.abs:
            return min(self.x_max, self.x_min)
        return self.x_max if self.max > -self.min else self.x_min


@dataclass(frozen=True)
class Reaction:
    """What a support gives to the beam at `x`.

    Forces up and to the left, N; moments anticlockwise, N·m: each against a positive load. 0 where the
    plane is at rest.
    """

    x: float
    force: float
    moment: float
    force_lat: float = 0.0
    moment_lat: float = 0.0


@dataclass(frozen=True, eq=False)
class CaseSolution:
    """State of a beam under one load case or combination.

    `pieces` (n, 5, p, 6): coefficients of w, slope, M, V and rotation on each of n elements in p planes, in
    the part of the element's length passed. `support_forces` (s, p, 2): force and moment of each support.
    `noise` (5, p): size below which a value is rounding error and is given as zero.
    """

    model: BeamModel
    nodes: FloatArray
    pieces: FloatArray
    support_forces: FloatArray
    noise: FloatArray

    @property
    def reactions(self) -> tuple[Reaction, ...]:
        """Reactions of the supports, from left to right."""
        clean = np.where(np.abs(self.support_forces) <= self.noise[[3, 2]].T, 0.0, self.support_forces)
        return tuple(
            Reaction(support.x, *(float(value) for value in forces.ravel()))
            for support, forces in zip(self.model.supports, clean, strict=True)
        )

    def values(self, quantity: Quantity, x: FloatArray, side: Side = "left") -> FloatArray:
        """Give a quantity at the places `x` (k,), at a node the value on the given `side` of it.

        Raises
        ------
        ValueError
            For a place outside the beam, and for a lateral quantity where the lateral stiffness is not known.
        """
        pieces, noise = self._pieces(quantity)
        x = self._snapped(np.asarray(x, dtype=np.float64))
        element = np.searchsorted(self.nodes, x, side=side) - 1
        element = np.clip(element, 0, len(pieces) - 1)
        t = (x - self.nodes[element]) / np.diff(self.nodes)[element]
        return _without(piecewise.values(pieces[element], t), noise)

    def at(self, quantity: Quantity, x: float, side: Side | None = None) -> float:
        """Give a quantity at `x`; where it jumps and no side is named, the value of larger magnitude."""
        place = np.array([x])
        left, right = (float(self.values(quantity, place, each)[0]) for each in ("left", "right"))
        if side is None:
            return right if abs(right) > abs(left) * (1.0 + TIE) else left
        return left if side == "left" else right

    def extremes(self, quantity: Quantity, start: float | None = None, end: float | None = None) -> Extremes:
        """Give the exact largest and smallest value from `start` to `end`, with both sides of each jump.

        At `start` and `end` themselves the inner side counts. Equal extremes are named at the leftmost of
        their places.
        """
        asked = (quantity, start, end)
        if asked not in self._extremes:  # asked again by groups, tables and figures
            self._extremes[asked] = self._find_extremes(*asked)
        return self._extremes[asked]

    @cached_property
    def _extremes(self) -> dict[tuple[Quantity, float | None, float | None], Extremes]:
        return {}

    def _find_extremes(self, quantity: Quantity, start: float | None, end: float | None) -> Extremes:
        pieces, noise = self._pieces(quantity)
        first, last, low, high = self._range(start, end)
        pieces, low, high = pieces[first:last], low[first:last], high[first:last]
        tie = max(noise, TIE * float(np.abs(self._pieces(quantity)[0]).sum(axis=1).max()))
        h = np.diff(self.nodes)[first:last]
        # An element whose bound does not reach the best end value has no part in the extremes.
        ends = np.stack([piecewise.values(pieces, low), piecewise.values(pieces, high)], axis=1)
        below, above = piecewise.bounds(pieces)
        rising = piecewise.derivative(pieces)
        t = [np.stack([low, high], axis=1).ravel()]
        element = [np.repeat(np.arange(len(pieces)), 2)]
        for number in np.flatnonzero((above >= ends.max() - tie) | (below <= ends.min() + tie)):
            inner = piecewise.roots(rising[number])
            inner = inner[(inner > low[number] + _AT_END) & (inner < high[number] - _AT_END)]
            t.append(inner)
            element.append(np.full(len(inner), number))
        all_t, all_element = np.concatenate(t), np.concatenate(element)
        order = np.lexsort((all_t, all_element))
        all_t, all_element = all_t[order], all_element[order]
        values = _without(piecewise.values(pieces[all_element], all_t), noise)
        x = self.nodes[first:last][all_element] + h[all_element] * all_t
        x = np.where(all_t == 1.0, self.nodes[first + 1 : last + 1][all_element], x)
        return Extremes(
            float(values.max()),
            float(x[np.argmax(values >= values.max() - tie)]),
            float(values.min()),
            float(x[np.argmax(values <= values.min() + tie)]),
        )

    def crossings(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> tuple[float, ...]:
        """Give the places between `start` and `end` at which a quantity changes sign, at a jump too.

        Those of M are the points of contraflexure. A stretch of zeros between two signs counts at its
        start; touching zero does not count.
        """
        pieces, noise = self._pieces(quantity)
        first, last, low, high = self._range(start, end)
        crossings: list[float] = []
        sign = 0.0
        zero_since: float | None = None
        for number in range(first, last):
            a, b = float(low[number]), float(high[number])
            cuts = [a, *(t for t in piecewise.roots(pieces[number]) if a < t < b), b]
            middles = (np.array(cuts[:-1]) + np.array(cuts[1:])) / 2
            signs = np.sign(_without(piecewise.values(pieces[number], middles), noise))
            for t, here in zip(cuts, signs, strict=False):
                x = float(self.nodes[number] + t * (self.nodes[number + 1] - self.nodes[number]))
                if here == 0.0:
                    zero_since = x if zero_since is None else zero_since
                    continue
                if here == -sign:
                    crossings.append(x if zero_since is None else zero_since)
                sign, zero_since = float(here), None
        return tuple(crossings)

    def polyline(self, quantity: Quantity, points_per_element: int = 20) -> tuple[FloatArray, FloatArray]:
        """Give places and values (k,) for drawing; each node comes twice, with the value on either side."""
        pieces, noise = self._pieces(quantity)
        t = np.linspace(0.0, 1.0, points_per_element + 1)
        x = self.nodes[:-1, None] + np.diff(self.nodes)[:, None] * t
        x[:, -1] = self.nodes[1:]
        return x.ravel(), _without(piecewise.values(pieces[:, None, :], t), noise).ravel()

    def _pieces(self, quantity: Quantity) -> tuple[FloatArray, float]:
        plane, part = divmod(QUANTITIES.index(quantity), len(PARTS))
        if plane >= self.pieces.shape[2]:
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")
        return self.pieces[:, part, plane], float(self.noise[part, plane])

    def _snapped(self, x: FloatArray) -> FloatArray:
        """Move places within the model's tolerance of a node onto it."""
        if np.any((x < -self.model.tolerance) | (x > self.model.length + self.model.tolerance)):
            raise ValueError("the place lies outside the beam")
        near = self.nodes[nearest(self.nodes, x)]
        return np.where(np.abs(x - near) <= self.model.tolerance, near, x)

    def _range(self, start: float | None, end: float | None) -> tuple[int, int, FloatArray, FloatArray]:
        """Give the elements first:last that a range covers, and the part of each element (n,) within it."""
        a, b = self._snapped(
            np.array([0.0 if start is None else start, self.model.length if end is None else end])
        )
        if b - a <= self.model.tolerance:
            raise ValueError("a range needs a length")
        h = np.diff(self.nodes)
        low = np.clip((a - self.nodes[:-1]) / h, 0.0, 1.0)
        high = np.clip((b - self.nodes[:-1]) / h, 0.0, 1.0)
        inside = np.flatnonzero(high > low)
        return int(inside[0]), int(inside[-1]) + 1, low, high


def _without(values: FloatArray, noise: float) -> FloatArray:
    return np.where(np.abs(values) <= noise, 0.0, values)


def combine(solutions: Mapping[str, CaseSolution], factors: Mapping[str, float]) -> CaseSolution:
    """Give the sum of cases times their factors; all must come from one call of `solve`.

    Raises
    ------
    KeyError
        For a case that was not solved.
    ValueError
        Where no factor is given, or the cases stand on different meshes.
    """
    if not factors:
        raise ValueError("a combination needs at least one case")
    parts = [(factor, solutions[name]) for name, factor in factors.items()]
    base = parts[0][1]
    if any(part.nodes is not base.nodes for _, part in parts):
        raise ValueError("cases from different solutions cannot be combined")
    return CaseSolution(
        base.model,
        base.nodes,
        sum((factor * part.pieces for factor, part in parts), np.zeros_like(base.pieces)),
        sum((factor * part.support_forces for factor, part in parts), np.zeros_like(base.support_forces)),
        sum((abs(factor) * part.noise for factor, part in parts), np.zeros_like(base.noise)),
    )

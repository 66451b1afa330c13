"""A solved load case, or a sum of them: values, extremes and crossings, exact within each element."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Final, Literal, TypeAlias

import numpy as np
import numpy.typing as npt

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
_LOOKED_AT: Final = np.linspace(0.0, 1.0, 5)
"""Parts of an element's length at which values are looked at to leave out other elements."""
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

    @cached_property
    def reactions(self) -> tuple[Reaction, ...]:
        """Reactions of the supports, from left to right."""
        rows = self.clean_forces.reshape(len(self.clean_forces), -1).tolist()
        return tuple(
            Reaction(support.x, *row) for support, row in zip(self.model.supports, rows, strict=True)
        )

    @cached_property
    def clean_forces(self) -> FloatArray:
        """Force and moment of each support, (s, p, 2), without what is rounding error."""
        return _without(self.support_forces, self.noise[[3, 2]].T)

    def values(self, quantity: Quantity, x: FloatArray, side: Side = "left") -> FloatArray:
        """Give a quantity at the places `x` (k,), at a node the value on the given `side` of it.

        Raises
        ------
        ValueError
            For a place outside the beam, and for a lateral quantity where the lateral stiffness is not known.
        """
        pieces, noise = self._pieces(quantity)
        element, t = self._located(x, side)
        return _without(piecewise.values(pieces[element], t), noise)

    def at(self, quantity: Quantity, x: float, side: Side | None = None) -> float:
        """Give a quantity at `x`; where it jumps and no side is named, the value of larger magnitude."""
        left, right = (float(value) for value in sides_of([self], quantity, x)[0])
        if side is None:
            return right if abs(right) > abs(left) * (1.0 + TIE) else left
        return left if side == "left" else right

    def extremes(self, quantity: Quantity, start: float | None = None, end: float | None = None) -> Extremes:
        """Give the exact largest and smallest value from `start` to `end`, with both sides of each jump.

        At `start` and `end` themselves the inner side counts. Equal extremes are named at the leftmost of
        their places.
        """
        return extremes_of([self], quantity, start, end)[0]

    @cached_property
    def _extremes(self) -> dict[tuple[Quantity, float | None, float | None], Extremes]:
        return {}

    def crossings(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> tuple[float, ...]:
        """Give the places between `start` and `end` at which a quantity changes sign, at a jump too.

        Those of M are the points of contraflexure. A stretch of zeros between two signs counts at its
        start; touching zero does not count.
        """
        pieces, noise = self._pieces(quantity)
        first, last, low, high = self._range(start, end)
        pieces, low, high = pieces[first:last], low[first:last, None], high[first:last, None]
        roots = piecewise.all_roots(pieces)
        roots = np.where((roots > low) & (roots < high), roots, high)
        cuts = np.concatenate([low, np.sort(roots, axis=1), high], axis=1)
        middles = (cuts[:, :-1] + cuts[:, 1:]) / 2
        signs = np.sign(_without(piecewise.values(pieces[:, None], middles), noise))
        x = self.nodes[first:last, None] + cuts[:, :-1] * np.diff(self.nodes)[first:last, None]
        part = np.diff(cuts, axis=1) > 0.0
        crossings: list[float] = []
        sign = 0.0
        zero_since: float | None = None
        for place, here in zip(x[part].tolist(), signs[part].tolist(), strict=True):
            if here == 0.0:
                zero_since = place if zero_since is None else zero_since
                continue
            if here == -sign:
                crossings.append(place if zero_since is None else zero_since)
            sign, zero_since = here, None
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

    def _located(self, x: FloatArray, side: Side) -> tuple[npt.NDArray[np.intp], FloatArray]:
        """Give the element of each place (k,), at a node the one on that side of it, and the part passed."""
        x = self._snapped(np.asarray(x, dtype=np.float64))
        element = np.searchsorted(self.nodes, x, side=side) - 1
        element = np.clip(element, 0, len(self.nodes) - 2)
        return element, (x - self.nodes[element]) / (self.nodes[element + 1] - self.nodes[element])

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


def sides_of(solutions: Sequence[CaseSolution], quantity: Quantity, x: float) -> FloatArray:
    """Give a quantity on the left and on the right of a place in each of c solutions on one mesh, (c, 2)."""
    located = [solutions[0]._located(np.array([x]), side) for side in ("left", "right")]
    element, t = (np.concatenate(each) for each in zip(*located, strict=True))
    found = [solution._pieces(quantity) for solution in solutions]
    noise = np.array([[each[1]] for each in found])
    return _without(piecewise.values(np.array([each[0][element] for each in found]), t), noise)


def extremes_of(
    solutions: Sequence[CaseSolution],
    quantity: Quantity,
    start: float | None = None,
    end: float | None = None,
) -> list[Extremes]:
    """Give the extremes of a quantity in each of some solutions on one mesh; see `CaseSolution.extremes`."""
    asked = quantity, start, end
    new = [solution for solution in solutions if asked not in solution._extremes]
    if new:  # groups, tables and figures ask for the same again
        for solution, extremes in zip(new, _find_extremes(new, *asked), strict=True):
            solution._extremes[asked] = extremes
    return [solution._extremes[asked] for solution in solutions]


def _find_extremes(
    solutions: Sequence[CaseSolution], quantity: Quantity, start: float | None, end: float | None
) -> Iterator[Extremes]:
    first, last, low, high = solutions[0]._range(start, end)
    nodes, low, high = solutions[0].nodes[first : last + 1], low[first:last], high[first:last]
    found = [solution._pieces(quantity) for solution in solutions]
    noise = np.array([each[1] for each in found])
    size = np.array([np.abs(each[0]).sum(axis=1).max() for each in found])
    tie = np.maximum(noise, TIE * size)
    pieces = np.array([each[0][first:last] for each in found])  # (solutions, elements, 6)
    t = np.full((*pieces.shape[:2], 2 + piecewise.DEGREE - 1), np.nan)  # the ends and stationary points
    t[..., 0], t[..., 1] = low, high
    values = piecewise.values(pieces[:, :, None], t)
    # An element whose bound does not reach what is surely reached has no part in the extremes.
    sure = piecewise.values(pieces[:, :, None], low[:, None] + (high - low)[:, None] * _LOOKED_AT)
    best, least = sure.max(axis=(1, 2)), sure.min(axis=(1, 2))
    below, above = piecewise.bounds(pieces)
    part = np.nonzero((above >= (best - tie)[:, None]) | (below <= (least + tie)[:, None]))
    turns = piecewise.all_roots(piecewise.derivative(pieces[part]))
    inside = (turns > low[part[1], None] + _AT_END) & (turns < high[part[1], None] - _AT_END)
    t[part[0], part[1], 2:] = turns = np.where(inside, turns, np.nan)
    values[part[0], part[1], 2:] = piecewise.values(pieces[part][:, None], turns)
    values = _without(values, noise[:, None, None])
    x = np.where(t == 1.0, nodes[1:, None], nodes[:-1, None] + np.diff(nodes)[:, None] * t)
    for each, at, slack in zip(values, x, tie, strict=True):
        largest, smallest = float(np.nanmax(each)), float(np.nanmin(each))
        x_largest, x_smallest = at[each >= largest - slack].min(), at[each <= smallest + slack].min()
        yield Extremes(largest, float(x_largest), smallest, float(x_smallest))


def _without(values: FloatArray, noise: float | FloatArray) -> FloatArray:
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
    return combine_all(solutions, {"": factors})[""]


def combine_all(
    solutions: Mapping[str, CaseSolution], combinations: Mapping[str, Mapping[str, float]]
) -> dict[str, CaseSolution]:
    """Give the sums of cases, one of each combination; see `combine`."""
    if not combinations:
        return {}
    if not all(combinations.values()):
        raise ValueError("a combination needs at least one case")
    used = list(dict.fromkeys(case for factors in combinations.values() for case in factors))
    cases = [solutions[case] for case in used]
    base = cases[0]
    if any(case.nodes is not base.nodes for case in cases):
        raise ValueError("cases from different solutions cannot be combined")
    table = np.array([[factors.get(case, 0.0) for case in used] for factors in combinations.values()])
    sums = [
        np.tensordot(weights, np.array([getattr(case, part) for case in cases]), axes=1)
        for weights, part in ((table, "pieces"), (table, "support_forces"), (np.abs(table), "noise"))
    ]
    return {
        name: CaseSolution(base.model, base.nodes, *each)
        for name, each in zip(combinations, zip(*sums, strict=True), strict=True)
    }

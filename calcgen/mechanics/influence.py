"""Influence lines: the effect of a unit load as a function of its place, exact in closed form.

Signs and units are those of `calcgen.mechanics.beam`; the unit load is 1 N, down or (lateral) to the right.
In each element the state of the beam (deflection, rotation, moment, shear) anywhere is a cubic in the place
of the load: it is the deflected shape of an unloaded element (reciprocity, after Maxwell and Betti). Four
numbers fix a cubic: its two end values, from unit loads at the nodes, and its first two moments, from a
uniform and an antisymmetric load on the element. So all lines of a beam come from one solution of 3n + 1
load cases, without a release, and no digits are lost where an element is short.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    PARTS,
    QUANTITIES,
    BeamModel,
    CaseSolution,
    DistributedLoad,
    Extremes,
    Load,
    Plane,
    PointLoad,
    Quantity,
    piecewise,
    solve,
)
from calcgen.mechanics.beam.mesh import divide, nearest
from calcgen.mechanics.beam.model import SAME_PLACE
from calcgen.mechanics.beam.results import TIE, Part, Side
from calcgen.mechanics.combinations import ReactionPart, reaction_index

W, ROTATION, M, V = range(4)
"""Order of a state."""

NEGLIGIBLE: Final = 1e-12
"""Part of the largest effect of a unit load anywhere below which an effect is rounding error, and zero."""

_CHUNK = 256  # load cases solved at a time, so that long beams do not fill the memory
_GAUSS_POINTS, _GAUSS_WEIGHTS = np.polynomial.legendre.leggauss(3)  # exact to degree 5: a cubic times a line
# Rows: the value at 0, the value at 1, ∫f dt and ∫(2t - 1)f dt of the powers 1, t, t², t³.
_TO_CUBIC = np.linalg.inv(
    np.array([[1, 0, 0, 0], [1, 1, 1, 1], [1, 1 / 2, 1 / 3, 1 / 4], [0, 1 / 6, 1 / 6, 3 / 20]])
)

IntArray: TypeAlias = npt.NDArray[np.intp]
BoolArray: TypeAlias = npt.NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class InfluenceLine:
    """An effect of a unit load at x. It may jump at a node.

    `nodes` (k + 1,), m, from 0 to the beam's length. `pieces` (k, 4): coefficients on each interval, in the
    part of its length passed. The unit of a value is that of the effect over N.
    """

    nodes: FloatArray
    pieces: FloatArray

    def values(self, x: FloatArray, side: Side = "left") -> FloatArray:
        """Give the line at the places `x` (k,) of the load, at a node the value on the given `side` of it.

        Raises
        ------
        ValueError
            For a place outside the beam.
        """
        x = np.asarray(x, dtype=np.float64)
        if np.any((x < self.nodes[0]) | (x > self.nodes[-1])):
            raise ValueError("the place lies outside the beam")
        number = np.clip(np.searchsorted(self.nodes, x, side=side) - 1, 0, len(self.pieces) - 1)
        t = (x - self.nodes[number]) / np.diff(self.nodes)[number]
        return piecewise.values(self.pieces[number], t)

    def beside(self, x: float) -> tuple[float, float]:
        """Give the line at a place of the load, on its left and on its right: equal where it does not jump.

        A place within a billionth of the beam's length of a node is that node.
        """
        near = float(self.nodes[np.argmin(np.abs(self.nodes - x))])
        place = np.array([near if abs(near - x) <= SAME_PLACE * float(self.nodes[-1]) else x])
        size = float(np.abs(self.pieces).max())
        sides = np.array([self.values(place, side)[0] for side in ("left", "right")])
        left, right = np.where(np.abs(sides) <= NEGLIGIBLE * size, 0.0, sides).tolist()
        return left, left if abs(right - left) <= TIE * size else right

    def extremes(self) -> Extremes:
        """Give the exact largest and smallest value, at a jump of both sides, and the first place of each."""
        x, values = self._candidates(piecewise.derivative(self.pieces))
        tie = NEGLIGIBLE * float(np.abs(values).max())
        values = np.where(np.abs(values) <= tie, 0.0, values)
        return Extremes(
            float(values.max()),
            float(x[np.argmax(values >= values.max() - tie)]),
            float(values.min()),
            float(x[np.argmax(values <= values.min() + tie)]),
        )

    def zeros(self) -> tuple[float, ...]:
        """Give the places at which the line changes sign, at a jump too; a stretch of zeros at its start."""
        x, _ = self._candidates(self.pieces)
        middles = (x[:-1] + x[1:]) / 2
        long = np.diff(x) > NEGLIGIBLE * self.nodes[-1]
        signs = np.sign(self.values(middles[long]))
        starts = x[:-1][long]
        size = NEGLIGIBLE * float(np.abs(self.pieces).max())
        signs[np.abs(self.values(middles[long])) <= size] = 0.0
        found: list[float] = []
        sign, zero_since = 0.0, None
        for start, here in zip(starts, signs, strict=True):
            if here == 0.0:
                zero_since = start if zero_since is None else zero_since
                continue
            if here == -sign:
                found.append(float(start if zero_since is None else zero_since))
            sign, zero_since = here, None
        return tuple(found)

    def under(self, load: PointLoad | DistributedLoad) -> float:
        """Give the effect of a load: the line at its place times it, or the integral of their product.

        The load must be in the plane of the line's unit load.
        """
        if isinstance(load, PointLoad):
            return load.value * float(self.values(np.array([load.x]))[0])
        inside = self.nodes[(self.nodes > load.start) & (self.nodes < load.end)]
        cuts = np.concatenate([[load.start], inside, [load.end]])
        half = np.diff(cuts)[:, None] / 2
        x = cuts[:-1, None] + half * (1.0 + _GAUSS_POINTS)
        slope = (load.value_end - load.value_start) / (load.end - load.start)
        intensity = load.value_start + slope * (x - load.start)
        return float(np.sum(half * _GAUSS_WEIGHTS * intensity * self.values(x)))

    def integral(self, start: float, end: float) -> float:
        """Give the area under the line from `start` to `end`: the effect of a uniform load of 1 N/m there."""
        return self.under(DistributedLoad.uniform(start, end, 1.0))

    def areas(self) -> tuple[float, float]:
        """Give the area under the positive parts and that under the negative ones, at most 0."""
        cuts = [float(self.nodes[0]), *self.zeros(), float(self.nodes[-1])]
        parts = [self.integral(a, b) for a, b in pairwise(cuts) if b > a]
        return sum(part for part in parts if part > 0.0), sum(part for part in parts if part < 0.0)

    def _candidates(self, polynomials: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Give ends of the pieces, roots in them of `polynomials`, in order, and the values of the line."""
        x: list[float] = []
        values: list[float] = []
        for number, piece in enumerate(polynomials):
            t = np.concatenate([[0.0], piecewise.roots(piece), [1.0]])
            x.extend(self.nodes[number] + t * (self.nodes[number + 1] - self.nodes[number]))
            values.extend(piecewise.values(self.pieces[number], t))
        return np.array(x), np.array(values)


@dataclass(frozen=True, eq=False)
class Influence:
    """All influence lines of a beam, for unit loads in r planes.

    `nodes` (n + 1,), m. `states` (n, 4, p, r, n, 4): deflection, rotation, moment and shear at the start of
    each element, in each of p planes, under a unit load in each of `planes` on each element, as a cubic in
    the part of that element's length passed. `support_forces` (s, p, 2, r, n, 4): force and moment of each
    support. `rounding` (parts, p): size below which a part of a state is rounding error in the solution.
    """

    model: BeamModel
    nodes: FloatArray
    planes: tuple[Plane, ...]
    states: FloatArray
    support_forces: FloatArray
    rounding: FloatArray

    def line(
        self, quantity: Quantity, x: float, side: Side | None = None, plane: Plane = "vertical"
    ) -> InfluenceLine:
        """Give the influence line of a quantity at `x` for a unit load in `plane`.

        Where the quantity differs on the two sides of `x` (V, and M beside a support that holds rotation),
        `side` says which is meant; None is the left one, and at the start of the beam the right one.

        Raises
        ------
        ValueError
            For a place outside the beam, or a plane that was not asked for.
        """
        load = self._load_plane(plane)
        places, elements = self.locate(np.array([x]), right=np.array([side == "right"]))
        place, number = float(places[0]), int(elements[0])
        h = float(np.diff(self.nodes)[number])
        rows = self.rows(quantity, number)
        own = list(self.model.planes).index(plane)
        row = np.tensordot((place - self.nodes[number]) ** np.arange(4.0), rows, axes=1)
        pieces = np.einsum("ip,ipnk->nk", row, self.states[number, :, :, load])
        t = (place - self.nodes[number]) / h
        # A load in the same element, before the place, has taken its share from the shear there.
        before = pieces[number] - (rows[:, V, own] * h ** np.arange(4.0)) @ shift(t, -1.0)
        noise = self.noise(quantity)
        if 0.0 < t < 1.0:
            halves = np.array([before @ shift(0.0, t), pieces[number] @ shift(t, 1.0 - t)])
            pieces = np.concatenate([pieces[:number], halves, pieces[number + 1 :]])
            return _line(np.insert(self.nodes, number + 1, place), pieces, noise)
        if t >= 1.0:
            pieces[number] = before
        return _line(self.nodes, pieces, noise)

    def reaction(
        self, support: int, part: ReactionPart = "force", plane: Plane = "vertical"
    ) -> InfluenceLine:
        """Give the influence line of a part of a support's reaction; supports count from 0, from the left."""
        own, which = reaction_index(part)
        if own >= self.support_forces.shape[1]:
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")
        noise = self.reaction_noise(part)
        return _line(self.nodes, self.support_forces[support, own, which, self._load_plane(plane)], noise)

    def locate(self, x: FloatArray, *, right: BoolArray) -> tuple[FloatArray, IntArray]:
        """Give the places (k,), moved onto a node within the model's tolerance, and the elements they lie in.

        At a node that is the element on its right where `right` (k,) says so, else the one on its left.
        """
        tolerance = self.model.tolerance
        if np.any((x < -tolerance) | (x > self.model.length + tolerance)):
            raise ValueError("the place lies outside the beam")
        near = self.nodes[nearest(self.nodes, x)]
        x = np.where(np.abs(x - near) <= tolerance, near, x)
        left, behind = (np.searchsorted(self.nodes, x, side=side) for side in ("left", "right"))
        return x, np.clip(np.where(right, behind, left) - 1, 0, len(self.nodes) - 2)

    def rows(self, quantity: Quantity, element: int) -> FloatArray:
        """Give what each part of an element's start state adds to a quantity, (power, part, plane).

        Powers of the distance from the element's start. A unit load takes 1 from the shear, so its own share
        at a distance d behind it is minus the row of the shear in its plane, at d.
        """
        part, own = quantity_index(quantity)
        p = len(self.model.planes)
        if own >= p:
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")
        f, g = self._flexibility[element], self._shear_flexibility[element]
        rows = np.zeros((4, 4, p))
        match part:
            case "V":
                rows[0, V, own] = 1.0
            case "M":
                rows[0, M, own] = rows[1, V, own] = 1.0
            case "rotation" | "slope":
                rows[0, ROTATION, own] = 1.0
                rows[1, M], rows[2, V] = -f[own], -f[own] / 2
                if part == "slope":
                    rows[0, V, own] = g[own]
            case _:
                rows[0, W, own] = rows[1, ROTATION, own] = 1.0
                rows[2, M], rows[3, V] = -f[own] / 2, -f[own] / 6
                rows[1, V, own] += g[own]
        return rows

    def all_rows(self, quantity: Quantity) -> FloatArray:
        """Give `rows` of all elements, (n, power, part, plane)."""
        if quantity not in self._rows:
            elements = range(len(self.nodes) - 1)
            self._rows[quantity] = np.array([self.rows(quantity, element) for element in elements])
        return self._rows[quantity]

    @cached_property
    def _rows(self) -> dict[Quantity, FloatArray]:
        return {}

    def noise(self, quantity: Quantity) -> float:
        """Give the size below which the effect of a unit load on a quantity is rounding error."""
        if quantity not in self._noise:
            self._noise[quantity] = self._find_noise(quantity)
        return self._noise[quantity]

    @cached_property
    def _noise(self) -> dict[Quantity, float]:
        return {}

    def _find_noise(self, quantity: Quantity) -> float:
        powers = np.diff(self.nodes)[:, None] ** np.arange(4.0)
        rows = self.all_rows(quantity)
        largest = np.abs(self.states).max(axis=(3, 4, 5))
        own = NEGLIGIBLE * float(np.einsum("nk,nkip,nip->n", powers, np.abs(rows), largest).max())
        part, plane = quantity_index(quantity)
        return max(own, float(self.rounding[PARTS.index(part), plane]))

    def reaction_noise(self, part: ReactionPart) -> float:
        """Give the size below which the effect of a unit load on a part of a reaction is rounding error."""
        plane, which = reaction_index(part)
        own = NEGLIGIBLE * float(np.abs(self.support_forces[:, :, which]).max())
        return max(own, float(self.rounding[PARTS.index("M" if which else "V"), plane]))

    def _load_plane(self, plane: Plane) -> int:
        if plane not in self.planes:
            raise ValueError("influence lines of loads in this plane were not asked for")
        return self.planes.index(plane)

    @cached_property
    def _flexibility(self) -> FloatArray:
        """Bending flexibility of each element, (n, p, p), 1/(N·m²)."""
        p = len(self.model.planes)
        stiffness = [self.model.stretches[number].stiffness for number in self._stretch_of]
        full = np.array([[[s.vertical, s.coupling], [s.coupling, s.lateral or 0.0]] for s in stiffness])
        return np.asarray(np.linalg.inv(full[:, :p, :p]), dtype=np.float64)

    @cached_property
    def _shear_flexibility(self) -> FloatArray:
        """Shear flexibility of each element in each plane, (n, p), 1/N."""
        shear = [self.model.stretches[number].shear for number in self._stretch_of]
        return 1.0 / np.array([[s.vertical, s.lateral] for s in shear])[:, : len(self.model.planes)]

    @cached_property
    def _stretch_of(self) -> IntArray:
        ends = np.array([stretch.end for stretch in self.model.stretches])
        return np.searchsorted(ends, (self.nodes[:-1] + self.nodes[1:]) / 2)


def influence(model: BeamModel, planes: Sequence[Plane] = ("vertical",)) -> Influence:
    """Give the influence lines of a beam for unit loads in `planes`.

    Time and memory grow with the square of the number of elements: any line may then be read in linear time.

    Raises
    ------
    UnstableBeam
        Where the supports and hinges leave a motion free.
    ValueError
        For the lateral plane where the lateral stiffness is not known.
    """
    nodes = divide(model, ()).nodes
    n, p = len(nodes) - 1, len(model.planes)
    states = np.zeros((n, 4, p, len(planes), n, 4))
    forces = np.zeros((len(model.supports), p, 2, len(planes), n, 4))
    rounding = np.zeros((len(PARTS), p))
    inner = np.arange(n)
    for number, plane in enumerate(planes):
        loads: list[Load] = [PointLoad(float(x), 1.0, plane) for x in nodes]
        ends = [(float(a), float(b), 1.0 / float(b - a)) for a, b in pairwise(nodes)]
        loads += [DistributedLoad(a, b, q, q, plane) for a, b, q in ends]
        loads += [DistributedLoad(a, b, -q, q, plane) for a, b, q in ends]
        starts, reactions, noise = _start_states(model, loads)  # (cases, n, 4, p), (cases, s, p, 2)
        rounding = np.maximum(rounding, noise)
        data = np.stack([starts[:n], starts[1 : n + 1], starts[n + 1 : 2 * n + 1], starts[2 * n + 1 :]])
        # A load at the start of an element is within it: the shear before it is meant.
        data[0, inner, inner, V, list(model.planes).index(plane)] += 1.0
        states[:, :, :, number] = np.einsum("kd,denip->nipek", _TO_CUBIC, data)
        data = np.stack(
            [reactions[:n], reactions[1 : n + 1], reactions[n + 1 : 2 * n + 1], reactions[2 * n + 1 :]]
        )
        forces[:, :, :, number] = np.einsum("kd,despf->spfek", _TO_CUBIC, data)
    return Influence(model, nodes, tuple(planes), states, forces, rounding)


def _start_states(model: BeamModel, loads: Sequence[Load]) -> tuple[FloatArray, FloatArray, FloatArray]:
    """State at the start of each element and forces of the supports under each load, and rounding error."""
    order = [PARTS.index("w"), PARTS.index("rotation"), PARTS.index("M"), PARTS.index("V")]
    starts: list[FloatArray] = []
    reactions: list[FloatArray] = []
    noise = np.zeros((len(PARTS), len(model.planes)))
    for first in range(0, len(loads), _CHUNK):
        chunk = loads[first : first + _CHUNK]
        solved: list[CaseSolution] = list(
            solve(model, {str(i): (load,) for i, load in enumerate(chunk)}).values()
        )
        starts.extend(solution.pieces[..., 0][:, order] for solution in solved)
        reactions.extend(solution.support_forces for solution in solved)
        noise = np.max([noise, *(solution.noise for solution in solved)], axis=0)
    return np.array(starts), np.array(reactions), noise


def shift(start: float | FloatArray, length: float | FloatArray) -> FloatArray:
    """Give the matrices (..., 4, 4) that turn a cubic in τ = start + length·t into one in t: c @ shift."""
    a, b = np.broadcast_arrays(np.asarray(start, dtype=np.float64), np.asarray(length, dtype=np.float64))
    zero, one = np.zeros_like(a), np.ones_like(a)
    rows = (
        (one, zero, zero, zero),
        (a, b, zero, zero),
        (a**2, 2 * a * b, b**2, zero),
        (a**3, 3 * a**2 * b, 3 * a * b**2, b**3),
    )
    return np.stack([np.stack(row, axis=-1) for row in rows], axis=-2)


def quantity_index(quantity: Quantity) -> tuple[Part, int]:
    """Give the part of a state that a quantity is, and the number of its plane."""
    plane, part = divmod(QUANTITIES.index(quantity), len(PARTS))
    return PARTS[part], plane


def _line(nodes: FloatArray, pieces: FloatArray, noise: float) -> InfluenceLine:
    rounding = np.abs(pieces).max(axis=1, keepdims=True) <= noise
    return InfluenceLine(nodes, np.where(rounding, 0.0, pieces))

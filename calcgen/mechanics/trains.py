"""A train of axles that crosses a beam: the extremes of its effects over all positions, exact.

Signs and units are those of `calcgen.mechanics.beam`. While every axle stays in its element, an effect at a
place is one cubic in the position of the train, because each influence line is; so its extremes lie where an
axle meets a node or the place itself, or at a root of a quadratic. As the train moves, the moment under one
of its axles is a quartic, and a moment between two loads is never beyond both ends: the largest moment of all
stands under an axle or at a node. Nothing is sampled. (Critical positions of axle loads: Hibbeler, Structural
Analysis, "Maximum influence at a point due to a series of concentrated loads", from memory.)
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import accumulate
from typing import Final, Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import RIGID, BeamModel, PointLoad, Quantity, piecewise
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import (
    NEGLIGIBLE,
    BoolArray,
    Influence,
    IntArray,
    V,
    quantity_index,
    reaction_index,
    shift,
)

Direction: TypeAlias = Literal["right", "left"]
"""Where the train runs to: its first axle leads, and the others follow behind it."""

TIE: Final = 1e-10
"""Part of a value within which two positions are equal, and the first found governs."""

BESIDE: Final = 1e-7
"""Part of the beam's length by which a train that stands beside its place is moved to be seen there."""

_SAMPLES = (1.0 - np.cos(np.pi * (np.arange(4.0) + 0.5) / 4)) / 2  # Chebyshev: four values fix a cubic
_BERNSTEIN = np.array([[1, 0, 0, 0], [1, 1 / 3, 0, 0], [1, 2 / 3, 1 / 3, 0], [1, 1, 1, 1]])
_FROM_SAMPLES = np.linalg.inv(_SAMPLES[:, None] ** np.arange(4.0)).T


@dataclass(frozen=True)
class Train:
    """Axle loads, N, down, from the first axle to the last, and the distances between them, m.

    `lateral`: the horizontal force of each axle as a part of its load, to the right where positive.

    Raises
    ------
    ValueError
        Where there is no axle, a load is not finite, or the distances do not fit the axles.
    """

    axles: tuple[float, ...]
    spacings: tuple[float, ...] = ()
    lateral: float = 0.0

    def __post_init__(self) -> None:
        if not self.axles or not all(math.isfinite(value) for value in (*self.axles, self.lateral)):
            raise ValueError("a train needs axles of finite loads")
        if len(self.spacings) != len(self.axles) - 1:
            raise ValueError("a train has one distance less than axles")
        if not all(0.0 < spacing < math.inf for spacing in self.spacings):
            raise ValueError("the distance between two axles must be positive")

    @property
    def offsets(self) -> tuple[float, ...]:
        """Distance of each axle behind the first, m."""
        return tuple(accumulate(self.spacings, initial=0.0))

    @property
    def directions(self) -> tuple[Direction, ...]:
        """Directions that differ: a train that is the same from both ends runs to the right only."""
        same = self.axles == self.axles[::-1] and self.spacings == self.spacings[::-1]
        return ("right",) if same else ("right", "left")


@dataclass(frozen=True)
class Position:
    """Where a train stands: the place of its first axle, m, and the direction in which it runs.

    Where the effect jumps there, as a reaction does when an axle leaves a free end, or the shear beside a
    support, it is a limit: the train stands just `beside` that place, on the side named.
    """

    x: float
    direction: Direction
    beside: Side | None = None

    def places(self, train: Train) -> tuple[float, ...]:
        """Give the place of each axle along the beam, m, on the beam or off it."""
        return tuple(self.x - _sense(self.direction) * offset for offset in train.offsets)

    def loads(self, train: Train, model: BeamModel) -> tuple[PointLoad, ...]:
        """Give the loads of the axles that stand on the beam, its ends included.

        A train beside its place is moved by `BESIDE` of the beam's length.
        """
        nudge = {"left": -BESIDE, "right": BESIDE, None: 0.0}[self.beside] * model.length
        found: list[PointLoad] = []
        for x, load in zip(self.places(train), train.axles, strict=True):
            place = x + nudge
            if -model.tolerance <= place <= model.length + model.tolerance:
                place = min(max(place, 0.0), model.length)
                found.append(PointLoad(place, load))
                if train.lateral != 0.0:
                    found.append(PointLoad(place, train.lateral * load, "lateral"))
        return tuple(found)


@dataclass(frozen=True)
class TrainEffect:
    """An extreme effect of a train, the place at which it is felt, m, and where the train stands then.

    The value is the limit where an axle stands on a jump, so it belongs to the side of the place on which it
    is larger. Without a train on the beam the effect is 0 and there is no position.
    """

    value: float
    x: float
    position: Position | None


@dataclass(frozen=True)
class TrainRange:
    """Largest and smallest effect of a train: never below, and never above, that of no train, 0."""

    max: TrainEffect
    min: TrainEffect


@dataclass(frozen=True, eq=False)
class Reach:
    """Largest and smallest effect of a train at k places, (k,) each, and where the train stands then."""

    high: FloatArray
    low: FloatArray
    _found: FloatArray
    """Of high and low: value, place of the first axle (nan without a train), whether it runs to the left, and
    from which side the value is a limit; (2, 4, k)."""
    _attained: Callable[[int, Position], Position]

    def position(self, number: int, *, low: bool) -> Position | None:
        """Give where the train stands for the largest, or the smallest, effect at one of the places."""
        _, x, left, limit = self._found[int(low), :, number]
        if math.isnan(x):
            return None
        beside: Side | None = "right" if limit > 0.0 else "left" if limit < 0.0 else None
        return self._attained(number, Position(float(x), "left" if left else "right", beside))


@dataclass(frozen=True, eq=False)
class Crossing:
    """A train on a beam, in both directions.

    Raises
    ------
    ValueError
        For a train with lateral forces, where the influence lines of lateral loads are not at hand.
    """

    influence: Influence
    train: Train

    def __post_init__(self) -> None:
        if self.train.lateral != 0.0 and "lateral" not in self.influence.planes:
            raise ValueError("a train with lateral forces needs the influence lines of lateral loads")

    def reach(self, quantity: Quantity, x: FloatArray, *, right: BoolArray) -> Reach:
        """Give the extremes of a quantity over all positions at the places `x` (k,).

        On the right side of a place where `right` (k,) says so, else on its left.
        """
        places, elements = self.influence.locate(np.asarray(x, dtype=np.float64), right=right)
        noise = self._noise(quantity)
        found = _nothing(len(places))
        for element in np.unique(elements):
            here = np.flatnonzero(elements == element)
            for passage in self._passages:
                cubics = passage.at(quantity, int(element), places[here])
                found[:, :, here] = _extremes(cubics, passage, found[:, :, here], noise)
        nodes = set(self.influence.nodes.tolist())
        jumpy = quantity_index(quantity)[0] in ("V", "slope")
        jumps = [(float(x),) if jumpy and float(x) in nodes else () for x in places]
        return Reach(found[0, 0], found[1, 0], found, lambda i, p: self._attained(p, jumps[i]))

    def reaction_reach(self, support: int, part: ReactionPart = "force") -> Reach:
        """Give the extremes of one part of a support's reaction over all positions, as one place."""
        noise = NEGLIGIBLE * self._load * float(np.abs(self.influence.support_forces).max())
        found = _nothing(1)
        for passage in self._passages:
            found = _extremes(passage.reaction(support, part), passage, found, noise)
        return Reach(found[0, 0], found[1, 0], found, lambda _, p: self._attained(p))

    def at(self, quantity: Quantity, x: float) -> TrainRange:
        """Give the extremes of a quantity at one place, over all positions and both sides of a jump."""
        both = self.reach(quantity, np.array([x, x]), right=np.array([False, True]))
        return TrainRange(
            _first([_effect(both, x, low=False, number=side) for side in (0, 1)], 1.0),
            _first([_effect(both, x, low=True, number=side) for side in (0, 1)], -1.0),
        )

    def reaction(self, support: int, part: ReactionPart = "force") -> TrainRange:
        """Give the extremes of one part of a support's reaction over all positions."""
        reach, x = self.reaction_reach(support, part), self.influence.model.supports[support].x
        return TrainRange(_effect(reach, x, low=False), _effect(reach, x, low=True))

    def absolute(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> TrainRange:
        """Give the extremes of M or V over all positions and all places from `start` to `end`.

        At `start` and `end` the inner side counts. Of equal extremes the first found is named: those at nodes
        before those under an axle, from the left.

        Raises
        ------
        ValueError
            For another quantity, whose extremes lie elsewhere, and for a range without length.
        """
        if quantity_index(quantity)[0] not in ("M", "V"):
            raise ValueError("only the moment and the shear have their extremes under an axle or at a node")
        nodes, model = self.influence.nodes, self.influence.model
        a, b = (0.0 if start is None else start), (model.length if end is None else end)
        if b - a <= model.tolerance:
            raise ValueError("a range needs a length")
        inner = nodes[(nodes > a + model.tolerance) & (nodes < b - model.tolerance)]
        places = np.array([a, *np.repeat(inner, 2), b])
        reach = self.reach(quantity, places, right=np.arange(len(places)) % 2 == 0)
        effects = [
            _effect(reach, float(x), low=low, number=number)
            for number, x in enumerate(places)
            for low in (False, True)
        ]
        noise = self._noise(quantity)
        for passage in self._passages:
            effects += [
                replace(effect, position=self._attained(p))
                for effect in passage.under_axles(quantity, a, b)
                if (p := effect.position) and abs(effect.value) > noise
            ]
        return TrainRange(_first(effects, 1.0), _first(effects, -1.0))

    def _attained(self, position: Position, jumps: tuple[float, ...] = ()) -> Position:
        """Give the position at its place, where the effect does not jump there or has its limit as value.

        It jumps where an axle stands at one of the places `jumps`, or leaves an end that no support holds.
        """
        model, beside = self.influence.model, position.beside
        lateral = self.train.lateral != 0.0
        held = [s.x for s in model.supports if s.w == RIGID and (s.lateral == RIGID or not lateral)]
        off = {"left": (0.0,), "right": (model.length,), None: ()}[beside]
        ends = [x for x in off if not any(model.same(x, place) for place in held)]
        near = any(model.same(x, place) for x in position.places(self.train) for place in (*ends, *jumps))
        return position if near else replace(position, beside=None)

    def _noise(self, quantity: Quantity) -> float:
        return self._load * self.influence.noise(quantity)

    @property
    def _load(self) -> float:
        """Sum of the magnitudes of the forces of the axles, N."""
        return max(1.0, abs(self.train.lateral)) * sum(abs(load) for load in self.train.axles)

    @cached_property
    def _passages(self) -> tuple[_Passage, ...]:
        return tuple(_Passage(self.influence, self.train, direction) for direction in self.train.directions)


@dataclass(frozen=True, eq=False)
class _Cubics:
    """Effects at k places as cubics (k, j, 4) on intervals of the position, `starts` and `lengths` (k, j)."""

    starts: FloatArray
    lengths: FloatArray
    coefficients: FloatArray


@dataclass(frozen=True, eq=False)
class _Passage:
    """A train that crosses in one direction.

    Its position u is the place of the first axle; it is cut where an axle meets a node, so that in each of j
    intervals each of k axles stays in one element or off the beam.
    """

    influence: Influence
    train: Train
    direction: Direction

    @cached_property
    def offsets(self) -> FloatArray:
        """Place of each axle less that of the first, (k,), m."""
        return np.array([-_sense(self.direction) * offset for offset in self.train.offsets])

    @cached_property
    def cuts(self) -> FloatArray:
        """Positions between which no axle meets a node, (j + 1,)."""
        found: FloatArray = np.unique(self.influence.nodes[:, None] - self.offsets)
        return found[np.concatenate([[True], np.diff(found) > 1e-3 * self.influence.model.tolerance])]

    @cached_property
    def elements(self) -> IntArray:
        """Element of each axle in each interval, (k, j); -1 off the beam."""
        nodes = self.influence.nodes
        x = (self.cuts[:-1] + self.cuts[1:]) / 2 + self.offsets[:, None]
        found = np.searchsorted(nodes, x) - 1
        return np.where((x < nodes[0]) | (x > nodes[-1]), -1, found)

    @cached_property
    def _weights(self) -> FloatArray:
        """Part of an axle's load that acts in each plane of the influence lines, (r,)."""
        return np.array(
            [1.0 if plane == "vertical" else self.train.lateral for plane in self.influence.planes]
        )

    def _summed(self, lines: FloatArray) -> FloatArray:
        """Sum lines (..., r, n, 4) over the axles: cubics (..., j, 4) in the part of each interval passed."""
        nodes = self.influence.nodes
        lines = np.einsum("...rnk,r->...nk", lines, self._weights)
        lengths = np.diff(nodes)
        total = np.zeros((*lines.shape[:-2], len(self.cuts) - 1, 4))
        for load, offset, elements in zip(self.train.axles, self.offsets, self.elements, strict=True):
            on = np.flatnonzero(elements >= 0)
            e = elements[on]
            moved = shift(
                (self.cuts[on] + offset - nodes[e]) / lengths[e], np.diff(self.cuts)[on] / lengths[e]
            )
            total[..., on, :] += load * np.einsum("...jk,jkl->...jl", lines[..., e, :], moved)
        return total

    @cached_property
    def states(self) -> FloatArray:
        """State at the start of each element under the train, (n, 4, p, j, 4)."""
        return self._summed(self.influence.states)

    def reaction(self, support: int, part: ReactionPart) -> _Cubics:
        own, which = reaction_index(part)
        cubics = self._summed(self.influence.support_forces[support, own, which])
        return _Cubics(self.cuts[None, :-1], np.diff(self.cuts)[None], cubics[None])

    def _share(self, rows: FloatArray) -> FloatArray:
        """Give what an axle of unit load adds to a quantity at a distance behind it: powers of it, (4,)."""
        own = [list(self.influence.model.planes).index(plane) for plane in self.influence.planes]
        return np.asarray(-rows[:, V, own] @ self._weights)

    def at(self, quantity: Quantity, element: int, x: FloatArray) -> _Cubics:
        """Give the effects at places (k,) within one element."""
        rows = self.influence.rows(quantity, element)
        sigma = x - self.influence.nodes[element]
        row = np.tensordot(sigma[:, None] ** np.arange(4.0), rows, axes=1)
        cubics = np.einsum("sip,ipjk->sjk", row, self.states[element])
        shared = (self.elements == element).any(axis=0)
        near, far = np.flatnonzero(shared), np.flatnonzero(~shared)
        starts, lengths = np.broadcast_to(self.cuts[:-1], cubics.shape[:2]), np.diff(self.cuts)
        # Where an axle shares the element, the position is cut where an axle meets the place, too.
        low, high = self.cuts[near, None], self.cuts[near + 1, None]
        meets = np.clip((x[:, None] - self.offsets)[:, None, :], low, high)
        ends = np.broadcast_to(low, (*meets.shape[:2], 1)), np.broadcast_to(high, (*meets.shape[:2], 1))
        cuts = np.sort(np.concatenate([ends[0], meets, ends[1]], axis=2), axis=2)
        parts = np.diff(cuts, axis=2)
        u = cuts[..., :-1, None] + parts[..., None] * _SAMPLES
        values = piecewise.values(
            cubics[:, near, None, None, :], (u - low[..., None]) / lengths[near, None, None]
        )
        share = self._share(rows)
        for load, offset, elements in zip(
            self.train.axles, self.offsets, self.elements[:, near], strict=True
        ):
            d = x[:, None, None, None] - (u + offset)
            passed = (elements == element)[:, None, None] & (d > 0.0)
            values += load * np.where(passed, piecewise.values(share, d), 0.0)
        k = len(x)
        return _Cubics(
            np.concatenate([starts[:, far], cuts[..., :-1].reshape(k, -1)], axis=1),
            np.concatenate([np.broadcast_to(lengths[far], (k, len(far))), parts.reshape(k, -1)], axis=1),
            np.concatenate([cubics[:, far], (values @ _FROM_SAMPLES).reshape(k, -1, 4)], axis=1),
        )

    def under_axles(self, quantity: Quantity, start: float, end: float) -> list[TrainEffect]:
        """Give extremes of M or V at a place that moves with an axle, between `start` and `end`."""
        found: list[TrainEffect] = []
        nodes, lengths = self.influence.nodes, np.diff(self.cuts)
        for axle, (offset, elements) in enumerate(zip(self.offsets, self.elements, strict=True)):
            low = np.clip((start - offset - self.cuts[:-1]) / lengths, 0.0, 1.0)
            high = np.clip((end - offset - self.cuts[:-1]) / lengths, 0.0, 1.0)
            on = np.flatnonzero((elements >= 0) & (high > low))
            if not len(on):
                continue
            polynomials = np.array([self._under(quantity, axle, int(j)) for j in on])  # (on, sides, 6)
            for side in range(polynomials.shape[1]):
                t, values = _stationary(polynomials[:, side], low[on], high[on])
                for index in (np.argmax(values), np.argmin(values)):
                    row, column = np.unravel_index(index, values.shape)
                    u = float(self.cuts[on[row]] + lengths[on[row]] * t[row, column])
                    place = min(max(u + float(offset), float(nodes[0])), float(nodes[-1]))
                    part = float(t[row, column])
                    limit: Side | None = "right" if part == 0.0 else "left" if part == 1.0 else None
                    position = Position(u, self.direction, limit)
                    found.append(TrainEffect(float(values[row, column]), place, position))
        return found

    def _under(self, quantity: Quantity, axle: int, interval: int) -> FloatArray:
        """Give the effect just before and just behind a moving axle in an interval: polynomials (2, 6)."""
        element = int(self.elements[axle, interval])
        rows = self.influence.rows(quantity, element)
        distance = self.cuts[interval] + self.offsets[axle] - self.influence.nodes[element]
        length = self.cuts[interval + 1] - self.cuts[interval]
        # The powers of the distance from the element's start are polynomials in the part passed.
        moving = np.tensordot(shift(distance, length), rows, axes=([0], [0]))  # (power of t, part, plane)
        cubics = self.states[element][:, :, interval]
        result = np.zeros(piecewise.DEGREE + 2)
        for power in range(4):
            result[power : power + 4] += np.einsum("ip,ipk->k", moving[power], cubics)
        share = self._share(rows)
        for other, load in enumerate(self.train.axles):
            behind = self.offsets[axle] - self.offsets[other]
            if self.elements[other, interval] == element and behind > 0.0:
                result[0] += load * float(piecewise.values(share, np.array(behind)))
        own = np.zeros_like(result)
        own[0] = self.train.axles[axle] * share[0]
        return np.array([result, result + own])[:, : piecewise.DEGREE + 1]


def _nothing(places: int) -> FloatArray:
    """No train on the beam: no effect, at no position."""
    found = np.zeros((2, 4, places))
    found[:, 1] = np.nan
    return found


def _extremes(cubics: _Cubics, passage: _Passage, known: FloatArray, noise: float) -> FloatArray:
    """Better what is known of k places, (2, 4, k), by the extremes of their cubics."""
    c = cubics.coefficients
    control = c @ _BERNSTEIN.T  # a cubic stays between its control values, and begins and ends at two of them
    control[cubics.lengths == 0.0] = 0.0
    ends = control[..., [0, 3]]
    t = np.zeros((*c.shape[:2], 4))
    t[..., 1] = 1.0
    values = ends[..., [0, 1, 0, 0]]
    best, least = (bound(ends, axis=(1, 2))[:, None] for bound in (np.max, np.min))
    curved = (control.max(axis=-1) > best) | (control.min(axis=-1) < least)
    t[curved, 2:] = inner = _turns(c[curved])
    values[curved, 2:] = piecewise.values(c[curved][:, None], inner)
    values[np.abs(values) <= noise] = 0.0
    k = len(values)
    u = (cubics.starts[..., None] + cubics.lengths[..., None] * t).reshape(k, -1)
    limit = ((t == 0.0) * 1.0 - (t == 1.0) * 1.0).reshape(k, -1)
    values = values.reshape(k, -1)
    result, each = known.copy(), np.arange(k)
    for row, sign in ((0, 1.0), (1, -1.0)):
        best = (sign * values).max(axis=1)
        # Of equal positions the first: rounding must not choose.
        first = np.where(sign * values >= (best - TIE * np.abs(best))[:, None], u, np.inf).argmin(axis=1)
        left = np.full(k, float(passage.direction == "left"))
        new = np.stack([values[each, first], u[each, first], left, limit[each, first]])
        result[row] = np.where(best > sign * known[row, 0] * (1.0 + TIE), new, known[row])
    return result


def _turns(cubics: FloatArray) -> FloatArray:
    """Give the stationary points in (0, 1) of cubics (k, 4), (k, 2), and 0 for each that is not there."""
    c = cubics.T
    with np.errstate(divide="ignore", invalid="ignore"):
        # Both roots of c_1 + 2 c_2 t + 3 c_3 t², without taking like numbers from each other.
        q = -(c[2] + np.copysign(np.sqrt(c[2] ** 2 - 3.0 * c[1] * c[3]), c[2]))
        t = np.stack([q / (3.0 * c[3]), c[1] / q], axis=-1)
    return np.where((t > 0.0) & (t < 1.0), t, 0.0)


def _effect(reach: Reach, x: float, *, low: bool, number: int = 0) -> TrainEffect:
    value = (reach.low if low else reach.high)[number]
    return TrainEffect(float(value), x, reach.position(number, low=low))


def _stationary(polynomials: FloatArray, low: FloatArray, high: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Give ends and stationary points of polynomials (k, 6) in [low, high]: t and values, (k, 6) each."""
    t = np.repeat(low[:, None], piecewise.DEGREE + 1, axis=1)
    t[:, 1] = high
    below, above = piecewise.bounds(polynomials)
    ends = piecewise.values(polynomials[:, None], t[:, :2])
    for number in np.flatnonzero((above > ends.max()) | (below < ends.min())):
        inner = piecewise.roots(piecewise.derivative(polynomials[number]))
        inner = inner[(inner > low[number]) & (inner < high[number])]
        t[number, 2 : 2 + len(inner)] = inner
    return t, piecewise.values(polynomials[:, None], t)


def _sense(direction: Direction) -> float:
    return 1.0 if direction == "right" else -1.0


def _first(effects: list[TrainEffect], sign: float) -> TrainEffect:
    best = max(sign * effect.value for effect in effects)
    return next(effect for effect in effects if best - sign * effect.value <= TIE * abs(best))

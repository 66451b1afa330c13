"""One crossing of a beam in one direction: each effect as cubics in the position of the train.

While every axle stays in its element, an effect at a place is one cubic in the position, because each
influence line is; under an axle that moves along, the moment is a quartic. Nothing is sampled.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import Quantity, piecewise
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.combinations import ReactionPart, reaction_index
from calcgen.mechanics.influence import BoolArray, Influence, IntArray, V, shift
from calcgen.mechanics.trains import BESIDE, Direction, Position, Train, sense

SAMPLES = (1.0 - np.cos(np.pi * (np.arange(4.0) + 0.5) / 4)) / 2  # Chebyshev: four values fix a cubic
FROM_SAMPLES = np.linalg.inv(SAMPLES[:, None] ** np.arange(4.0)).T
BERNSTEIN = np.array([[1, 0, 0, 0], [1, 1 / 3, 0, 0], [1, 2 / 3, 1 / 3, 0], [1, 1, 1, 1]])


@dataclass(frozen=True, eq=False)
class Cubics:
    """Effects at k places as cubics (k, j, 4) on intervals of the position, `starts` and `lengths` (k, j)."""

    starts: FloatArray
    lengths: FloatArray
    coefficients: FloatArray


@dataclass(frozen=True, eq=False)
class Passage:
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
        return np.array([-sense(self.direction) * offset for offset in self.train.offsets])

    @cached_property
    def cuts(self) -> FloatArray:
        """Positions between which no axle meets a node, (j + 1,)."""
        found: FloatArray = np.unique(self.influence.nodes[:, None] - self.offsets)
        apart = np.diff(found, prepend=-np.inf) > 1e-3 * self.influence.model.tolerance
        return np.asarray(found[apart])

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

    def reaction(self, support: int, part: ReactionPart) -> Cubics:
        """Give one part of a support's reaction, as at one place."""
        own, which = reaction_index(part)
        cubics = self._summed(self.influence.support_forces[support, own, which])
        return Cubics(self.cuts[None, :-1], np.diff(self.cuts)[None], cubics[None])

    def share(self, rows: FloatArray) -> FloatArray:
        """Give what an axle of unit load adds at a distance behind it: powers of it, (..., 4)."""
        own = [self.influence.model.planes.index(plane) for plane in self.influence.planes]
        return np.asarray(-rows[..., V, own] @ self._weights)

    @cached_property
    def _shared(self) -> BoolArray:
        """Whether some axle is in an element in an interval, (n, j)."""
        found = np.zeros((len(self.influence.nodes) - 1, len(self.cuts) - 1), dtype=bool)
        axle, j = np.nonzero(self.elements >= 0)
        found[self.elements[axle, j], j] = True
        return found

    @cached_property
    def _near(self) -> IntArray:
        """Intervals in which some axle is in an element, (n, most of them), filled up by -1."""
        counts = self._shared.sum(axis=1)
        found = np.full((len(counts), counts.max(initial=0)), -1)
        element, j = np.nonzero(self._shared)
        found[element, np.arange(len(j)) - (np.cumsum(counts) - counts)[element]] = j
        return found

    def at(self, quantity: Quantity, elements: IntArray, x: FloatArray) -> Cubics:
        """Give the effects at places (k,) within elements (k,)."""
        rows = self.influence.all_rows(quantity)[elements]
        k, j = len(x), len(self.cuts) - 1
        sigma = x - self.influence.nodes[elements]
        row = np.einsum("kq,kqip->kip", sigma[:, None] ** np.arange(4.0), rows).reshape(k, -1)
        cubics = np.empty((k, j, 4))
        for element in np.unique(elements):
            here = elements == element
            cubics[here] = (row[here] @ self.states[element].reshape(row.shape[1], -1)).reshape(-1, j, 4)
        # Where an axle shares the element, the position is cut where an axle meets the place, too.
        starts, lengths = np.broadcast_to(self.cuts[:-1], (k, j)), np.diff(self.cuts)
        near = np.maximum(self._near[elements], 0)
        low = self.cuts[near, None]
        high = np.where(self._near[elements, :, None] < 0, low, self.cuts[near + 1, None])
        meets = np.clip((x[:, None] - self.offsets)[:, None, :], low, high)
        cuts = np.sort(np.concatenate([low, meets, high], axis=2), axis=2)
        parts = np.diff(cuts, axis=2)
        # Within the tolerance of places a part is rounding, and over a jump no cubic fits it.
        parts[parts <= 4.0 * self.influence.model.tolerance] = 0.0
        u = cuts[..., :-1, None] + parts[..., None] * SAMPLES
        values = piecewise.values(
            np.take_along_axis(cubics, near[:, :, None], axis=1)[:, :, None, None],
            (u - low[..., None]) / lengths[near, None, None],
        )
        share = self.share(rows)[:, None, None, None]
        for load, offset, own in zip(self.train.axles, self.offsets, self.elements, strict=True):
            d = x[:, None, None, None] - (u + offset)
            passed = (own[near] == elements[:, None])[:, :, None, None] & (d > 0.0)
            values += load * np.where(passed, piecewise.values(share, d), 0.0)
        return Cubics(
            np.concatenate([starts, cuts[..., :-1].reshape(k, -1)], axis=1),
            np.concatenate([np.where(self._shared[elements], 0.0, lengths), parts.reshape(k, -1)], axis=1),
            np.concatenate([cubics, (values @ FROM_SAMPLES).reshape(k, -1, 4)], axis=1),
        )

    def on_end(self, quantity: Quantity, *, last: bool) -> list[tuple[float, float]]:
        """Give the effect at an end of the beam while an axle stands on it, and the position, for each axle.

        No position beside it gives that effect: the axle is before the place at the last end, and behind it
        at the first one, whereas from within the beam it comes to the end on the other side.
        """
        if (quantity, last) not in self._on_end:
            self._on_end[quantity, last] = self._find_on_end(quantity, last=last)
        return self._on_end[quantity, last]

    @cached_property
    def _on_end(self) -> dict[tuple[Quantity, bool], list[tuple[float, float]]]:
        return {}

    def _find_on_end(self, quantity: Quantity, *, last: bool) -> list[tuple[float, float]]:
        influence, planes = self.influence, self.influence.planes
        end = float(influence.nodes[-1 if last else 0])
        lines = [influence.line(quantity, end, "left" if last else "right", plane) for plane in planes]
        share = float(self.share(influence.rows(quantity, -1 if last else 0))[0])
        found: list[tuple[float, float]] = []
        for axle, offset in enumerate(self.offsets):
            x = end - offset + self.offsets
            x[axle] = end
            on = (x >= influence.nodes[0]) & (x <= influence.nodes[-1])
            effects = sum(
                weight * line.values(x[on]) for weight, line in zip(self._weights, lines, strict=True)
            )
            total = float(np.array(self.train.axles)[on] @ effects)
            found.append((total + self.train.axles[axle] * (-share if last else share), float(end - offset)))
        return found

    def under_axles(
        self, quantity: Quantity, start: float, end: float
    ) -> list[tuple[float, float, Position]]:
        """Give extremes of M or V just before and behind a moving axle: value, place and position."""
        found: list[tuple[float, float, Position]] = []
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
                    # A place just before the axle has the axle on its right.
                    position = Position(u, self.direction, "left" if side else "right")
                    found.append((float(values[row, column]), place, position))
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
        share = self.share(rows)
        for other, load in enumerate(self.train.axles):
            behind = self.offsets[axle] - self.offsets[other]
            if self.elements[other, interval] == element and behind > 0.0:
                result[0] += load * float(piecewise.values(share, np.array(behind)))
        own = np.zeros_like(result)
        own[0] = self.train.axles[axle] * share[0]
        return np.array([result, result + own])[:, : piecewise.DEGREE + 1]


def nothing(places: int) -> FloatArray:
    """No train on the beam: no effect, at no position."""
    found = np.zeros((2, 4, places))
    found[:, 1] = np.nan
    return found


def bettered(cubics: Cubics, passage: Passage, known: FloatArray, noise: float) -> FloatArray:
    """Better what is known of k places, (2, 4, k), by the extremes of their cubics."""
    c = cubics.coefficients
    control = c @ BERNSTEIN.T  # a cubic stays between its control values, and begins and ends at two of them
    control[cubics.lengths == 0.0] = 0.0
    ends = control[..., [0, 3]]
    values = ends[..., [0, 1, 0, 0]]
    best, least = (bound(ends, axis=(1, 2))[:, None] for bound in (np.max, np.min))
    curved = (control.max(axis=-1) > best) | (control.min(axis=-1) < least)
    turns = _turns(c[curved])
    values[curved, 2:] = piecewise.values(c[curved][:, None], turns)
    values[np.abs(values) <= noise] = 0.0
    t = np.zeros(values.shape)
    t[..., 1] = 1.0
    t[curved, 2:] = turns
    result, left = known.copy(), float(passage.direction == "left")
    for row, sign, bests in ((0, 1.0, values.max(axis=(1, 2))), (1, -1.0, -values.min(axis=(1, 2)))):
        # Of equal positions the first: rounding must not choose.
        equal = np.nonzero(sign * values >= (bests - TIE * np.abs(bests))[:, None, None])
        u = cubics.starts[equal[:2]] + cubics.lengths[equal[:2]] * t[equal]
        order = np.lexsort((u, equal[0]))
        first = order[np.searchsorted(equal[0][order], np.arange(len(values)))]
        place, interval, number = (each[first] for each in equal)
        # Within the model's tolerance of an end of its interval a position is a limit there.
        t_first = t[place, interval, number]
        length, tolerance = cubics.lengths[place, interval], passage.influence.model.tolerance
        near = 2.0 * tolerance / np.maximum(length, 1e-300)
        limit = np.where(t_first <= np.minimum(near, 0.5), 1.0, np.where(t_first >= 1.0 - near, -1.0, 0.0))
        # So short an interval is left by a step to a side: its middle stands for it.
        short = (length > 0.0) & (length <= 4.0 * BESIDE * passage.influence.model.length)
        limit[short] = np.nan
        at = np.where(short, cubics.starts[place, interval] + length / 2, u[first])
        new = np.stack([values[place, interval, number], at, np.full(len(place), left), limit])
        result[row] = np.where(bests > sign * known[row, 0] * (1.0 + TIE), new, known[row])
    return result


def with_values(
    values: list[tuple[float, float]], passage: Passage, known: FloatArray, noise: float
) -> FloatArray:
    """Better what is known of one place, (2, 4), by effects at single positions."""
    result = known.copy()
    for value, u in values:
        for row, sign in ((0, 1.0), (1, -1.0)):
            if sign * value > max(sign * result[row, 0] * (1.0 + TIE), noise):
                result[row] = value, u, float(passage.direction == "left"), 0.0
    return result


def cubic_extremes(cubics: FloatArray, axis: int) -> FloatArray:
    """Give the largest and the smallest value on [0, 1] of cubics (..., 4) along one of the other axes."""
    control = cubics @ BERNSTEIN.T  # a cubic stays between its control values
    ends = control[..., [0, 3]]
    high, low = ends.max(axis=-1), ends.min(axis=-1)
    best, least = high.max(axis=axis, keepdims=True), low.min(axis=axis, keepdims=True)
    curved = (control.max(axis=-1) > best) | (control.min(axis=-1) < least)
    inner = piecewise.values(cubics[curved][:, None], _turns(cubics[curved]))
    high[curved] = np.maximum(high[curved], inner.max(axis=-1, initial=-np.inf))
    low[curved] = np.minimum(low[curved], inner.min(axis=-1, initial=np.inf))
    return np.stack([high.max(axis=axis), low.min(axis=axis)])


def _turns(cubics: FloatArray) -> FloatArray:
    """Give the stationary points in (0, 1) of cubics (k, 4), (k, 2), and 0 for each that is not there."""
    c = cubics.T
    with np.errstate(divide="ignore", invalid="ignore"):
        # Both roots of c_1 + 2 c_2 t + 3 c_3 t², without taking like numbers from each other.
        q = -(c[2] + np.copysign(np.sqrt(c[2] ** 2 - 3.0 * c[1] * c[3]), c[2]))
        t = np.stack([q / (3.0 * c[3]), c[1] / q], axis=-1)
    return np.where((t > 0.0) & (t < 1.0), t, 0.0)


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

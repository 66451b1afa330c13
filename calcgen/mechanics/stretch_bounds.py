"""What a train that crosses a beam in one direction can do anywhere on a stretch of it, from above and below.

On a stretch within an element, x = a + wξ, the effect of a train is a polynomial in ξ for each position, so
it stays between its control values (Bernstein). These are cubics in the position, and their extremes are
exact: a bound is beyond what is reached by an amount that falls with the square of w. Where an axle may stand
on the stretch, the effect has a kink or jump under it; there the position is counted from that axle, by
s = u - (x - offset), so that both sides of the kink are polynomials again. (Bounds by control values:
Garloff, Interval Computations 2 (1993), from memory.)
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from math import comb
from typing import Final, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import Quantity, piecewise
from calcgen.mechanics.influence import BoolArray, IntArray, shift
from calcgen.mechanics.passage import BERNSTEIN, FROM_SAMPLES, SAMPLES, Passage, cubic_extremes

DEGREE: Final = 6
"""Of the control values in ξ: a cubic in x times a cubic in the position that moves along with x."""


def _nodes(degree: int) -> FloatArray:
    return (1.0 - np.cos(np.pi * (np.arange(degree + 1.0) + 0.5) / (degree + 1))) / 2


def _to_controls(degree: int) -> FloatArray:
    """Matrix that turns values at `_nodes` into control values."""
    t, i = _nodes(degree)[:, None], np.arange(degree + 1)
    basis = np.array([comb(degree, k) for k in i]) * t**i * (1.0 - t) ** (degree - i)
    return np.asarray(np.linalg.inv(basis))


_XI, _FROM_XI = _nodes(DEGREE), _to_controls(DEGREE)
_S, _FROM_S = _nodes(3), _to_controls(3)
_RAISED = np.array(  # control values of degree 3 -> of `DEGREE`
    [
        [
            comb(3, j) * comb(DEGREE - 3, i - j) / comb(DEGREE, i) if 0 <= i - j <= DEGREE - 3 else 0.0
            for j in range(4)
        ]
        for i in range(DEGREE + 1)
    ]
)


def controls(polynomials: FloatArray, start: FloatArray, length: FloatArray) -> FloatArray:
    """Give the control values (..., k, 7) of polynomials (..., k, 6) on a part of the interval of each."""
    at = start[:, None] + length[:, None] * _XI
    return np.asarray(piecewise.values(polynomials[..., None, :], at) @ _FROM_XI.T)


def stretch_bounds(
    passage: Passage, quantity: Quantity, elements: IntArray, start: FloatArray, length: FloatArray
) -> FloatArray:
    """Give control values (2, k, 7) that no effect on k stretches exceeds, from above and from below.

    Each stretch lies in one of `elements` (k,), from `start` over `length`, m. No train on the beam counts.
    """
    lines = _Lines.over(passage, quantity, elements, start, length)
    cubic = np.zeros((2, len(elements), 4))
    for where, found in (lines.far(), lines.beside()):
        np.maximum.at(cubic[0], where, found[0])
        np.minimum.at(cubic[1], where, found[1])
    bound = cubic @ _RAISED.T
    where, found = lines.under()
    np.maximum.at(bound[0], where, found[0])
    np.minimum.at(bound[1], where, found[1])
    return np.asarray(bound)


_Found: TypeAlias = tuple[IntArray, FloatArray]
"""Numbers of stretches, and control values from above and from below for each, (2, ..., controls)."""


@dataclass(frozen=True, eq=False)
class _Lines:
    """A train over k stretches; arrays have the stretch, the axle (l) and the interval of positions (j)."""

    passage: Passage
    start: FloatArray
    """Of each stretch, and its `length`, m, (k,)."""
    length: FloatArray
    rows: FloatArray
    """What the states of elements add to the effect: control values in ξ, (k, 4, 4 p); `powers` of it."""
    powers: FloatArray
    states: FloatArray
    """At the start of each element: cubics in the part of each interval passed, (k, 4 p, j, 4)."""
    share: FloatArray
    """What an axle of unit load adds at a distance behind it: powers of it, (k, 4)."""
    within: BoolArray
    """Whether an axle is in the element of the stretch, (k, l, j)."""

    @classmethod
    def over(
        cls, passage: Passage, quantity: Quantity, elements: IntArray, start: FloatArray, length: FloatArray
    ) -> _Lines:
        influence = passage.influence
        rows = influence.all_rows(quantity)[elements]  # (k, power, part, plane)
        moved = shift(start - influence.nodes[elements], length)
        k = len(elements)
        powers = moved.swapaxes(1, 2) @ rows.reshape(k, 4, -1)
        states = passage.states[elements].reshape(k, powers.shape[2], -1, 4)
        within = passage.elements[None] == elements[:, None, None]
        return cls(passage, start, length, BERNSTEIN @ powers, powers, states, passage.share(rows), within)

    @cached_property
    def cubics(self) -> FloatArray:
        """Effects without the axles within the element, control values in ξ, (k, 4, j, 4)."""
        k, parts, j, _ = self.states.shape
        return (self.rows @ self.states.reshape(k, parts, -1)).reshape(k, 4, j, 4)

    def far(self) -> _Found:
        """Bound the effects while no axle is in the element."""
        near = np.asarray(self.within.any(axis=1))
        cubics = np.where(near[:, None, :, None], 0.0, self.cubics)
        return np.arange(len(near)), cubic_extremes(cubics, axis=2)

    def beside(self) -> _Found:
        """Bound the effects while axles are in the element, but none may be on the stretch."""
        stretch, j = np.nonzero(self.within.any(axis=1))
        cuts, offsets = self.passage.cuts, self.passage.offsets
        low, high = cuts[j], cuts[j + 1]
        first, last = self.start[stretch, None] - offsets, (self.start + self.length)[stretch, None] - offsets
        meets = np.sort(np.concatenate([low[:, None], first, last, high[:, None]], axis=1), axis=1)
        meets = np.clip(meets, low[:, None], high[:, None])  # (pairs, parts + 1)
        middle = (meets[:, :-1] + meets[:, 1:]) / 2
        is_in = self.within[stretch, :, j][:, None]  # (pairs, 1, l)
        passed = is_in & (middle[..., None] <= first[:, None])
        on = is_in & ~passed & (middle[..., None] < last[:, None])
        pair, part = np.nonzero((np.diff(meets, axis=1) > 0.0) & ~on.any(axis=2))
        stretch, j, passed = stretch[pair], j[pair], passed[pair, part]
        u = meets[pair, part, None] + (meets[pair, part + 1] - meets[pair, part])[:, None] * SAMPLES
        cubics = self.cubics[stretch, :, j]  # (cells, 4 controls, 4)
        values = piecewise.values(cubics[:, :, None], ((u - cuts[j, None]) / np.diff(cuts)[j, None])[:, None])
        for axle, (load, offset) in enumerate(zip(self.passage.train.axles, offsets, strict=True)):
            behind = shift(self.start[stretch, None] - u - offset, self.length[stretch, None])
            added = np.einsum("np,nspq,iq->nis", self.share[stretch], behind, BERNSTEIN)
            values += load * np.where(passed[:, axle, None, None], added, 0.0)
        return stretch, cubic_extremes((values @ FROM_SAMPLES)[:, :, None], axis=2)

    def under(self) -> _Found:
        """Bound the effects while an axle may be on the stretch, from each axle that may."""
        cuts, offsets, loads = self.passage.cuts, self.passage.offsets, np.array(self.passage.train.axles)
        first = self.start[:, None] - offsets
        last = first + self.length[:, None]
        overlaps = (cuts[:-1] < last[..., None]) & (cuts[1:] > first[..., None])
        stretch, axle, j = np.nonzero(self.within & overlaps)
        a, w = self.start[stretch], self.length[stretch]
        at = np.einsum("xp,npq->nxq", _XI[:, None] ** np.arange(4.0), self.powers[stretch])
        cubics = at @ self.states[stretch, :, j]  # (cells, ξ, 4)
        found = []
        for side in (-1.0, 1.0):
            s = side * w[:, None] * _S
            u = (a[:, None] + w[:, None] * _XI - offsets[axle, None])[..., None] + s[:, None]
            passed = (u - cuts[j, None, None]) / np.diff(cuts)[j, None, None]
            values = piecewise.values(cubics[:, :, None], passed)  # (cells, ξ, s)
            slack = np.zeros((2, len(stretch)))
            for other, load in enumerate(loads):
                # How far the places are behind this axle does not depend on ξ.
                behind = (offsets[axle] - offsets[other])[:, None] - s
                ends = (offsets[axle] - offsets[other])[:, None] - np.array([0.0, side]) * w[:, None]
                is_in = self.within[stretch, other, j]
                always = is_in & (ends.min(axis=1) >= 0.0)
                added = load * piecewise.values(self.share[stretch, None], behind)
                values += np.where(always[:, None], added, 0.0)[:, None]
                terms = (
                    load * self.share[stretch] * np.maximum(ends.max(axis=1), 0.0)[:, None] ** np.arange(4.0)
                )
                sometimes = is_in & ~always & (ends.max(axis=1) > 0.0)
                slack[0] += np.where(sometimes, np.maximum(terms, 0.0).sum(axis=1), 0.0)
                slack[1] += np.where(sometimes, np.minimum(terms, 0.0).sum(axis=1), 0.0)
            control = np.einsum("ix,nxs,ts->nit", _FROM_XI, values, _FROM_S)
            found.append([control.max(axis=2) + slack[0][:, None], control.min(axis=2) + slack[1][:, None]])
        both = np.array(found)
        return stretch, np.stack([both[:, 0].max(axis=0), both[:, 1].min(axis=0)])

"""Envelopes over combinations in which spans may be loaded or not and trains cross the beam.

Signs and units are those of `calcgen.mechanics.beam`. A case that acts as it is adds its share to an effect;
a case in patterns adds the shares of the spans that make the effect larger; a train adds the most of all its
positions. None depends on the other, so the largest effect at a place is a sum over the cases. Time grows
linearly with the number of combinations, and with that of spans where no case varies.

Extremes along the beam are exact too. Without trains the envelope is piecewise polynomial, with breaks where
the share of a span changes its sign, and its stationary points are roots. With trains it is exact at any
place, and its peaks are closed in on from a division of each element into `DIVISIONS`.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise
from typing import Final

import numpy as np

from calcgen.mechanics.actions import (
    Actions,
    Band,
    Combination,
    Effect,
    EffectRange,
    Governs,
    Pattern,
    Placed,
)
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import PARTS, BeamModel, CaseSolution, Load, Quantity, piecewise, scaled, solve
from calcgen.mechanics.beam.mesh import nearest
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import BoolArray, influence, quantity_index, reaction_index
from calcgen.mechanics.moving_loads import Crossing, Reach
from calcgen.mechanics.patterns import by_length, loaded_lengths
from calcgen.mechanics.peaks import Places, closed_in, divided, stationary

DIVISIONS: Final = 12
"""Parts of an element between which the peaks of an envelope with trains are looked for."""


def effects(
    model: BeamModel,
    actions: Actions,
    combinations: Sequence[Combination],
    lengths: Sequence[tuple[float, float]] | None = None,
) -> Effects:
    """Give the extreme effects of combinations; patterns load each span and overhang by default."""
    return Effects(model, actions, tuple(combinations), tuple(lengths or loaded_lengths(model)))


@dataclass(frozen=True, eq=False)
class Effects:
    """Extreme effects of a group of combinations on a beam; of equal ones the first combination governs.

    `lengths`: start and end, m, of each length that a pattern may load.

    Raises
    ------
    UnstableBeam
        Where the supports and hinges leave a motion free.
    KeyError
        For a case that is not among the actions.
    ValueError
        Where there is no combination, and for actions that the beam cannot carry.
    """

    model: BeamModel
    actions: Actions
    combinations: tuple[Combination, ...]
    lengths: tuple[tuple[float, float], ...]

    def __post_init__(self) -> None:
        if not self.combinations:
            raise ValueError("an envelope needs at least one combination")
        named = {name for combination in self.combinations for name in combination.factors}
        for name in sorted(named - {*self.actions.cases, *self.actions.trains}):
            raise KeyError(name)
        for name in sorted(self.actions.patterned - {*self.actions.cases}):
            raise KeyError(name)
        _ = self._solutions, self._crossings  # what the beam cannot carry is said at once

    def at(self, quantity: Quantity, x: float) -> EffectRange:
        """Give the extremes of a quantity at one place, on both sides of it."""
        near = float(self._nodes[nearest(self._nodes, x)])
        place = near if self.model.same(x, near) else x
        shares = self._shares(quantity, np.array([place, place]), np.array([False, True]))
        return EffectRange(self._governing(shares, low=False), self._governing(shares, low=True))

    def reaction(self, support: int, part: ReactionPart = "force") -> EffectRange:
        """Give the extremes of one part of a support's reaction; supports count from 0, from the left."""
        plane, which = reaction_index(part)
        self._require(plane)
        values = np.array([solution.support_forces[support, plane, which] for solution in self._solutions])
        row = PARTS.index("M" if which else "V")
        noise = np.array([solution.noise[row, plane] for solution in self._solutions])
        values = np.where(np.abs(values) <= noise, 0.0, values)
        reaches = tuple(crossing.reaction_reach(support, part) for _, _, crossing in self._crossings)
        place = np.array([self.model.supports[support].x])
        shares = self._split(place, np.array([False]), values[:, None], reaches)
        return EffectRange(self._governing(shares, low=False), self._governing(shares, low=True))

    def extremes(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> EffectRange:
        """Give the extremes of a quantity from `start` to `end`; there the inner side counts.

        Raises
        ------
        ValueError
            For a range without length, outside the beam, and a lateral quantity without lateral stiffness.
        """
        joints = self._joints(0.0 if start is None else start, self.model.length if end is None else end)
        x, right = divided(joints[:-1], joints[1:], DIVISIONS if self._moving.any() else 2)
        seeds = self._shares(quantity, x.ravel(), right.ravel())
        high, low = (self._extreme(quantity, joints, seeds, low=low) for low in (False, True))
        return EffectRange(high, low)

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope of a quantity for drawing, with at least two points an element."""
        joints = self._joints(0.0, self.model.length)
        x, right = divided(joints[:-1], joints[1:], points_per_element)
        shares = self._shares(quantity, x.ravel(), right.ravel())
        high, low = self._sums(shares, low=False), self._sums(shares, low=True)
        governs = self._stretches(shares, joints, low=True), self._stretches(shares, joints, low=False)
        return Band(shares.x, low.min(axis=0), high.max(axis=0), *governs)

    def loads(self, effect: Effect) -> tuple[Load, ...]:
        """Give the loads that cause an effect: those of its combination, in its arrangement, factored."""
        factors = next(c.factors for c in self.combinations if c.name == effect.combination)
        found: list[Load] = []
        for name, factor in factors.items():
            if name not in self.actions.patterned:
                found += [scaled(load, factor) for load in self.actions.cases.get(name, ())]
        for pattern in effect.patterns:
            parts = self._by_length[pattern.case]
            found += [scaled(load, factors[pattern.case]) for i in pattern.lengths for load in parts[i]]
        for placed in effect.trains:
            train = self.actions.trains[placed.case][placed.train]
            found += [scaled(load, factors[placed.case]) for load in placed.position.loads(train, self.model)]
        return tuple(found)

    # What is solved once.

    @cached_property
    def _fixed(self) -> tuple[str, ...]:
        return tuple(name for name in self.actions.cases if name not in self.actions.patterned)

    @cached_property
    def _by_length(self) -> dict[str, tuple[tuple[Load, ...], ...]]:
        """Loads on each length, of each case in patterns."""
        return {
            name: by_length(loads, self.lengths)
            for name, loads in self.actions.cases.items()
            if name in self.actions.patterned
        }

    @cached_property
    def _parts(self) -> tuple[tuple[str, int], ...]:
        """Case and length of each part that may act or not."""
        return tuple(
            (name, number)
            for name, parts in self._by_length.items()
            for number, loads in enumerate(parts)
            if loads
        )

    @cached_property
    def _solutions(self) -> tuple[CaseSolution, ...]:
        """The beam under each fixed case and under each part, on one mesh."""
        loads = [self.actions.cases[name] for name in self._fixed]
        loads += [self._by_length[name][number] for name, number in self._parts]
        return tuple(solve(self.model, {str(i): each for i, each in enumerate(loads)}).values())

    @cached_property
    def _pieces(self) -> FloatArray:
        """Coefficients of all solutions, (s, n, parts, p, 6)."""
        shape = (0, 1, len(PARTS), len(self.model.planes), piecewise.DEGREE + 1)
        return (
            np.array([solution.pieces for solution in self._solutions])
            if self._solutions
            else np.zeros(shape)
        )

    @cached_property
    def _nodes(self) -> FloatArray:
        return self._solutions[0].nodes if self._solutions else np.array([0.0, self.model.length])

    @cached_property
    def _crossings(self) -> tuple[tuple[str, int, Crossing], ...]:
        """Case, number in it and crossing of each train."""
        trains = [
            (name, i, train) for name, each in self.actions.trains.items() for i, train in enumerate(each)
        ]
        if not trains:
            return ()
        lateral = any(train.lateral != 0.0 for _, _, train in trains)
        lines = influence(self.model, ("vertical", "lateral") if lateral else ("vertical",))
        return tuple((name, number, Crossing(lines, train)) for name, number, train in trains)

    @cached_property
    def _varying(self) -> tuple[str, ...]:
        """Case of each action that varies: the cases in patterns, then the trains."""
        return (*self._by_length, *(name for name, _, _ in self._crossings))

    @cached_property
    def _factors(self) -> tuple[FloatArray, FloatArray]:
        """Factors of the fixed cases (c, f) and of the actions that vary (c, v) in each combination."""
        fixed, varying = (
            np.array([[c.factors.get(name, 0.0) for name in names] for c in self.combinations]).reshape(
                len(self.combinations), len(names)
            )
            for names in (self._fixed, self._varying)
        )
        return fixed, varying

    @cached_property
    def _member(self) -> FloatArray:
        """1 where a part belongs to a case in patterns, else 0: (cases, j)."""
        rows = [[float(name == case) for name, _ in self._parts] for case in self._by_length]
        return np.array(rows).reshape(len(self._by_length), len(self._parts))

    @cached_property
    def _moving(self) -> BoolArray:
        """Which combinations take a train, (c,)."""
        return np.asarray(np.any(self._factors[1][:, len(self._by_length) :] != 0.0, axis=1))

    # Sums at places.

    def _require(self, plane: int) -> None:
        if plane >= len(self.model.planes):
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")

    def _of(self, quantity: Quantity) -> tuple[FloatArray, FloatArray]:
        """Coefficients (s, n, 6) of a quantity in each solution, and the size of its rounding error (s,)."""
        name, plane = quantity_index(quantity)
        self._require(plane)
        part = PARTS.index(name)
        return self._pieces[:, :, part, plane], np.array([s.noise[part, plane] for s in self._solutions])

    def _shares(self, quantity: Quantity, x: FloatArray, right: BoolArray) -> _Shares:
        pieces, noise = self._of(quantity)
        left, behind = (np.searchsorted(self._nodes, x, side=side) for side in ("left", "right"))
        element = np.clip(np.where(right, behind, left) - 1, 0, len(self._nodes) - 2)
        t = (x - self._nodes[element]) / np.diff(self._nodes)[element]
        values = piecewise.values(pieces[:, element], t)
        values = np.where(np.abs(values) <= noise[:, None], 0.0, values)
        reaches = tuple(crossing.reach(quantity, x, right=right) for _, _, crossing in self._crossings)
        return self._split(x, right, values, reaches)

    def _split(
        self, x: FloatArray, right: BoolArray, values: FloatArray, reaches: tuple[Reach, ...]
    ) -> _Shares:
        values = values.reshape(-1, len(x))
        fixed, parts = values[: len(self._fixed)], values[len(self._fixed) :]
        high = np.concatenate([self._member @ np.maximum(parts, 0.0), *(each.high[None] for each in reaches)])
        low = np.concatenate([self._member @ np.minimum(parts, 0.0), *(each.low[None] for each in reaches)])
        return _Shares(x, right, fixed, parts, reaches, high, low)

    def _sums(self, shares: _Shares, *, low: bool) -> FloatArray:
        """Smallest, or largest, value of each combination at each place, (c, k)."""
        fixed, varying = self._factors
        adding, opposing = (shares.low, shares.high) if low else (shares.high, shares.low)
        return np.asarray(
            fixed @ shares.fixed + np.maximum(varying, 0.0) @ adding + np.minimum(varying, 0.0) @ opposing
        )

    # What governs.

    def _governing(self, shares: _Shares, *, low: bool) -> Effect:
        """Give the extreme over combinations and places; of equal ones the first combination, then place."""
        sums = self._sums(shares, low=low)
        signed = -sums if low else sums
        best = float(signed.max())
        number = int(np.argmax(signed >= best - TIE * abs(best)))
        combination, place = divmod(number, sums.shape[1])
        factors = self.combinations[combination].factors
        trains: list[Placed] = []
        for reach, (name, train, _) in zip(shares.reaches, self._crossings, strict=True):
            factor = factors.get(name, 0.0)
            position = reach.position(place, low=low == (factor > 0.0))
            if factor != 0.0 and position is not None:
                trains.append(Placed(name, train, position))
        return Effect(
            float(sums[combination, place]),
            float(shares.x[place]),
            "right" if shares.right[place] else "left",
            self.combinations[combination].name,
            self._loaded(shares.parts[:, place], combination, low=low),
            tuple(trains),
        )

    def _loaded(self, parts: FloatArray, combination: int, *, low: bool) -> tuple[Pattern, ...]:
        """Give the lengths whose shares (j,) add to the extreme of a combination."""
        found: list[Pattern] = []
        for name in self._by_length:
            factor = self.combinations[combination].factors.get(name, 0.0)
            wanted = parts * (-factor if low else factor) > 0.0
            numbers = [
                number
                for acts, (case, number) in zip(wanted, self._parts, strict=True)
                if acts and case == name
            ]
            if factor != 0.0:
                found.append(Pattern(name, tuple(numbers)))
        return tuple(found)

    def _stretches(self, shares: _Shares, joints: FloatArray, *, low: bool) -> tuple[Governs, ...]:
        """Tell what governs between the joints, by the places inside: at a joint an effect may be 0."""
        sums = self._sums(shares, low=low)
        signed = -sums if low else sums
        best = signed.max(axis=0)
        shape = len(joints) - 1, -1
        inner = np.arange(len(shares.x)).reshape(shape)[:, 1:-1]
        x = shares.x[inner]
        edges = np.concatenate([joints[:-1, None], (x[:, :-1] + x[:, 1:]) / 2], axis=1).ravel().tolist()
        governing = np.argmax(signed >= best - TIE * np.abs(best), axis=0)[inner.ravel()]
        signs = np.sign(shares.parts[:, inner.ravel()])
        changes = np.any(np.diff(signs, axis=1) != 0.0, axis=0) | (np.diff(governing) != 0)
        firsts = [0, *(np.flatnonzero(changes) + 1).tolist()]
        found: list[Governs] = []
        for first, last in pairwise([*firsts, len(edges)]):
            number = int(governing[first])
            what = self.combinations[number].name, self._loaded(signs[:, first], number, low=low)
            end = edges[last] if last < len(edges) else float(joints[-1])
            if found and (found[-1].combination, found[-1].patterns) == what:
                found[-1] = replace(found[-1], end=end)
            else:
                found.append(Governs(edges[first], end, *what))
        return tuple(found)

    # Extremes along the beam.

    def _joints(self, start: float, end: float) -> FloatArray:
        """Places from `start` to `end` between which the effects run smoothly."""
        tolerance = self.model.tolerance
        if end - start <= tolerance:
            raise ValueError("a range needs a length")
        if start < -tolerance or end > self.model.length + tolerance:
            raise ValueError("the place lies outside the beam")
        nodes = [self._nodes, *(crossing.influence.nodes for _, _, crossing in self._crossings)]
        found = np.unique(np.concatenate(nodes))
        inner = found[(found > start + tolerance) & (found < end - tolerance)]
        return np.array([start, *inner[np.diff(inner, prepend=-np.inf) > tolerance], end])

    def _extreme(self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool) -> Effect:
        places: Places = []
        if self._moving.any():
            places += self._peaks(quantity, joints, seeds, low=low)
        if not self._moving.all():
            places += self._stationary(quantity, joints, seeds, low=low)
        x, right = (np.array(each) for each in zip(*places, strict=True))
        # As close to a joint as this, a place is the joint itself, on the side from which it was reached.
        near = joints[nearest(joints, x)]
        close = np.abs(x - near) <= 2.0 * self.model.tolerance
        right = np.where(close & (x != near), x > near, right)
        x = np.where(close, near, x)
        return self._governing(self._shares(quantity, x, right), low=low)

    def _stationary(self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool) -> Places:
        """Give places among which the extreme of combinations without trains lies: nodes and roots."""
        pieces, noise = self._of(quantity)
        sign = -1.0 if low else 1.0
        fixed, varying = (factors[~self._moving] for factors in self._factors)
        count = len(self._fixed)
        shares = pieces[count:].copy()
        shares[np.abs(shares).max(axis=2) <= noise[count:, None]] = 0.0
        values = sign * self._sums(seeds, low=low)[~self._moving]
        best = float(values.max())
        equal = np.any(values >= best - TIE * abs(best), axis=0)
        h = np.diff(self._nodes)
        found = stationary(
            sign * np.tensordot(fixed, pieces[:count], axes=1),
            sign * varying[:, : len(self._by_length)] @ self._member,
            shares,
            np.clip((joints[0] - self._nodes[:-1]) / h, 0.0, 1.0),
            np.clip((joints[-1] - self._nodes[:-1]) / h, 0.0, 1.0),
            best,
        )
        ends = zip(seeds.x[equal].tolist(), seeds.right[equal].tolist(), strict=True)
        return [*ends, *((float(self._nodes[element] + h[element] * t), True) for element, t in found)]

    def _peaks(self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool) -> Places:
        """Give places among which the extreme of combinations with trains lies: peaks of the envelope."""

        def height(shares: _Shares) -> FloatArray:
            sums = self._sums(shares, low=low)[self._moving]
            return np.asarray((-sums if low else sums).max(axis=0))

        shape = len(joints) - 1, DIVISIONS + 1
        return closed_in(
            lambda x, right: height(self._shares(quantity, x, right)),
            seeds.x.reshape(shape),
            seeds.right.reshape(shape),
            height(seeds).reshape(shape),
        )


@dataclass(frozen=True, eq=False)
class _Shares:
    """Shares of the actions in an effect at k places `x`, on the right of each where `right` says so.

    Of the fixed cases (f, k), of each part of a case in patterns (j, k), and the largest and the smallest of
    each action that varies, `high` and `low`, (v, k).
    """

    x: FloatArray
    right: BoolArray
    fixed: FloatArray
    parts: FloatArray
    reaches: tuple[Reach, ...]
    high: FloatArray
    low: FloatArray

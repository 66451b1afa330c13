"""Envelopes over combinations in which spans may be loaded or not and trains cross the beam.

Signs and units are those of `calcgen.mechanics.beam`. A case that acts as it is adds its share to an effect; a
case in patterns adds the shares of the spans that make the effect larger; a train adds the most of all its
positions. None depends on the other, so the largest effect at a place is a sum over the cases. Time grows
linearly with the number of combinations, and with that of spans where no case varies.

Extremes along the beam are exact too. Without trains the envelope is piecewise polynomial, with breaks where
the share of a span changes its sign, and its stationary points are roots. With trains it is known exactly at
any place, as a smooth curve between few kinks, and its peaks are closed in on from a division of each element
into `DIVISIONS`: a peak is missed only where two lie within one division.
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
from calcgen.mechanics.beam.results import TIE, Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import BoolArray, influence, quantity_index, reaction_index
from calcgen.mechanics.patterns import by_length, loaded_lengths
from calcgen.mechanics.trains import Crossing, Reach

DIVISIONS: Final = 12
"""Parts of an element between which a peak of an envelope with trains is looked for."""

_AT_END: Final = 1e-9  # part of an element's length below which two places in it are one
_STRAIGHT: Final = 1e-13  # part of a polynomial's largest coefficient that is rounding
_NARROWER, _ROUNDS = 8, 13  # each round leaves a quarter of a division: 4^-13 of it in the end


@dataclass(frozen=True, eq=False)
class _Shares:
    """Shares of the cases at k places: of the fixed ones (f, k), and of the varying ones the extremes (v, k)."""

    fixed: FloatArray
    parts: FloatArray
    """Shares of each length of each case in patterns, (j, k)."""
    reaches: tuple[Reach, ...]
    high: FloatArray
    low: FloatArray


@dataclass(frozen=True, eq=False)
class Effects:
    """Extreme effects of a group of combinations on a beam; of equal ones the combination named first governs.

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
        known = {*self.actions.cases, *self.actions.trains}
        named = {name for combination in self.combinations for name in combination.factors}
        for name in sorted((named | self.actions.patterned) - known):
            raise KeyError(name)
        _ = self._pieces, self._crossings  # what the beam cannot carry is said at once

    def at(self, quantity: Quantity, x: float) -> EffectRange:
        """Give the extremes of a quantity at one place, on both sides of it."""
        places, right = np.array([x, x]), np.array([False, True])
        shares = self._shares(quantity, places, right)
        return EffectRange(
            self._governing(shares, places, right, low=False),
            self._governing(shares, places, right, low=True),
        )

    def reaction(self, support: int, part: ReactionPart = "force") -> EffectRange:
        """Give the extremes of one part of a support's reaction; supports count from 0, from the left."""
        own, which = reaction_index(part)
        if own >= len(self.model.planes):
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")
        values = np.array([solution.support_forces[support, own, which] for solution in self._solutions])
        noise = np.array(
            [solution.noise[PARTS.index("M" if which else "V"), own] for solution in self._solutions]
        )
        values = np.where(np.abs(values) <= noise, 0.0, values)[:, None]
        reaches = tuple(crossing.reaction_reach(support, part) for _, _, crossing in self._crossings)
        shares = self._split(values, reaches, 1)
        place, right = np.array([self.model.supports[support].x]), np.array([False])
        return EffectRange(
            self._governing(shares, place, right, low=False), self._governing(shares, place, right, low=True)
        )

    def extremes(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> EffectRange:
        """Give the extremes of a quantity from `start` to `end`; there the inner side counts.

        Raises
        ------
        ValueError
            For a range without length, outside the beam, and a lateral quantity without lateral stiffness.
        """
        a, b = (0.0 if start is None else start), (self.model.length if end is None else end)
        if b - a <= self.model.tolerance:
            raise ValueError("a range needs a length")
        joints = self._joints(a, b)
        x, right = _division(joints, DIVISIONS if self._moving.any() else 1)
        seeds = self._shares(quantity, x.ravel(), right.ravel())
        high, low = (self._extreme(quantity, joints, seeds, low=low) for low in (False, True))
        return EffectRange(high, low)

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope of a quantity for drawing."""
        x, right = _division(self._joints(0.0, self.model.length), points_per_element)
        shares = self._shares(quantity, x.ravel(), right.ravel())
        high, low = (self._sums(shares, low=low) for low in (False, True))
        places = x.ravel()
        return Band(
            places,
            low.min(axis=0),
            high.max(axis=0),
            self._stretches(shares, places, low, low=True),
            self._stretches(shares, places, high, low=False),
        )

    def loads(self, effect: Effect) -> tuple[Load, ...]:
        """Give the loads that cause an effect: those of its combination in its arrangement, with their factors."""
        factors = next(c.factors for c in self.combinations if c.name == effect.combination)
        found: list[Load] = []
        for name, factor in factors.items():
            if name not in self.actions.patterned:
                found += [scaled(load, factor) for load in self.actions.cases.get(name, ())]
        for pattern in effect.patterns:
            parts = by_length(self.actions.cases[pattern.case], self.lengths)
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
    def _parts(self) -> tuple[tuple[str, int], ...]:
        """Case and length of each part of a case in patterns that has loads."""
        return tuple(
            (name, number)
            for name in self.actions.cases
            if name in self.actions.patterned
            for number, loads in enumerate(by_length(self.actions.cases[name], self.lengths))
            if loads
        )

    @cached_property
    def _varying(self) -> tuple[str, ...]:
        """Case of each action that varies: first those in patterns, then each train."""
        patterned = [name for name in self.actions.cases if name in self.actions.patterned]
        return (*patterned, *(name for name, _, _ in self._crossings))

    @cached_property
    def _solutions(self) -> tuple[CaseSolution, ...]:
        """The beam under each fixed case and under each part, on one mesh."""
        parted = {name: by_length(self.actions.cases[name], self.lengths) for name, _ in self._parts}
        loads = [self.actions.cases[name] for name in self._fixed]
        loads += [parted[name][number] for name, number in self._parts]
        return tuple(solve(self.model, {str(i): each for i, each in enumerate(loads)}).values())

    @cached_property
    def _pieces(self) -> FloatArray:
        """Coefficients of all solutions, (s, n, parts, p, 6)."""
        if not self._solutions:
            return np.zeros((0, 1, len(PARTS), len(self.model.planes), piecewise.DEGREE + 1))
        return np.array([solution.pieces for solution in self._solutions])

    @cached_property
    def _nodes(self) -> FloatArray:
        return self._solutions[0].nodes if self._solutions else np.array([0.0, self.model.length])

    @cached_property
    def _crossings(self) -> tuple[tuple[str, int, Crossing], ...]:
        trains = [(name, i, t) for name, each in self.actions.trains.items() for i, t in enumerate(each)]
        if not trains:
            return ()
        lateral = any(train.lateral != 0.0 for _, _, train in trains)
        lines = influence(self.model, ("vertical", "lateral") if lateral else ("vertical",))
        return tuple((name, number, Crossing(lines, train)) for name, number, train in trains)

    @cached_property
    def _factors(self) -> tuple[FloatArray, FloatArray]:
        """Factors of the fixed cases (c, f) and of those that vary (c, v) in each combination."""
        rows = [
            [[combination.factors.get(name, 0.0) for name in names] for combination in self.combinations]
            for names in (self._fixed, self._varying)
        ]
        count = len(self.combinations)
        fixed, varying = (np.array(each, dtype=np.float64).reshape(count, -1) for each in rows)
        return fixed, varying

    @cached_property
    def _moving(self) -> BoolArray:
        """Which combinations take a train, (c,)."""
        crossed = np.array([name in self.actions.trains for name in self._varying], dtype=bool)
        return np.asarray(np.any(self._factors[1][:, crossed] != 0.0, axis=1))

    # Sums at places.

    def _shares(self, quantity: Quantity, x: FloatArray, right: BoolArray) -> _Shares:
        pieces, noise = self._of(quantity)
        left, behind = (np.searchsorted(self._nodes, x, side=side) for side in ("left", "right"))
        element = np.clip(np.where(right, behind, left) - 1, 0, len(self._nodes) - 2)
        t = (x - self._nodes[element]) / np.diff(self._nodes)[element]
        values = piecewise.values(pieces[:, element], t)
        values = np.where(np.abs(values) <= noise[:, None], 0.0, values)
        reaches = tuple(crossing.reach(quantity, x, right=right) for _, _, crossing in self._crossings)
        return self._split(values, reaches, len(x))

    def _split(self, values: FloatArray, reaches: tuple[Reach, ...], k: int) -> _Shares:
        fixed, parts = values[: len(self._fixed)], values[len(self._fixed) :]
        member = self._member
        high = [member @ np.maximum(parts, 0.0), *(reach.high.reshape(1, k) for reach in reaches)]
        low = [member @ np.minimum(parts, 0.0), *(reach.low.reshape(1, k) for reach in reaches)]
        return _Shares(fixed, parts, reaches, np.concatenate(high), np.concatenate(low))

    @cached_property
    def _member(self) -> FloatArray:
        """Which part belongs to which case in patterns, (cases, j): 1 or 0."""
        cases = self._varying[: len(self._varying) - len(self._crossings)]
        rows = [[float(name == case) for name, _ in self._parts] for case in cases]
        return np.array(rows).reshape(len(cases), len(self._parts))

    def _of(self, quantity: Quantity) -> tuple[FloatArray, FloatArray]:
        """Coefficients (s, n, 6) of a quantity in each solution, and the size of its rounding error (s,)."""
        name, plane = quantity_index(quantity)
        if plane >= len(self.model.planes):
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")
        part = [*PARTS].index(name)  # type: ignore[arg-type]
        noise = np.array([solution.noise[part, plane] for solution in self._solutions])
        return self._pieces[:, :, part, plane], noise

    def _sums(self, shares: _Shares, *, low: bool) -> FloatArray:
        """Smallest, or largest, value of each combination at each place, (c, k)."""
        fixed, varying = self._factors
        with_factor, against = (shares.low, shares.high) if low else (shares.high, shares.low)
        return np.asarray(
            fixed @ shares.fixed + np.maximum(varying, 0.0) @ with_factor + np.minimum(varying, 0.0) @ against
        )

    # What governs.

    def _governing(self, shares: _Shares, x: FloatArray, right: BoolArray, *, low: bool) -> Effect:
        """Give the extreme over combinations and places; of equal ones the first combination, then place."""
        sums = self._sums(shares, low=low)
        combination, place = np.unravel_index(_first(-sums if low else sums), sums.shape)
        value = float(sums[combination, place])
        patterns, trains = self._arrangement(shares, int(combination), int(place), low=low)
        side: Side = "right" if right[place] else "left"
        return Effect(value, float(x[place]), side, self.combinations[combination].name, patterns, trains)

    def _arrangement(
        self, shares: _Shares, combination: int, place: int, *, low: bool
    ) -> tuple[tuple[Pattern, ...], tuple[Placed, ...]]:
        factors = self.combinations[combination].factors
        trains: list[Placed] = []
        for reach, (name, number, _) in zip(shares.reaches, self._crossings, strict=True):
            factor = factors.get(name, 0.0)
            position = reach.position(place, low=low == (factor > 0.0))
            if factor != 0.0 and position is not None:
                trains.append(Placed(name, number, position))
        return self._loaded(shares.parts[:, place], combination, low=low), tuple(trains)

    def _loaded(self, parts: FloatArray, combination: int, *, low: bool) -> tuple[Pattern, ...]:
        """Give the lengths whose shares (j,) add to the extreme of a combination."""
        factors = self.combinations[combination].factors
        found: list[Pattern] = []
        for name in self.actions.cases:
            factor = factors.get(name, 0.0)
            if name not in self.actions.patterned or factor == 0.0:
                continue
            wanted = -factor if low else factor
            numbers = [
                number
                for value, (case, number) in zip(parts, self._parts, strict=True)
                if case == name and wanted * value > 0.0
            ]
            found.append(Pattern(name, tuple(numbers)))
        return tuple(found)

    def _stretches(
        self, shares: _Shares, x: FloatArray, sums: FloatArray, *, low: bool
    ) -> tuple[Governs, ...]:
        signed = -sums if low else sums
        best = signed.max(axis=0)
        governing = np.argmax(signed >= best - TIE * np.abs(best), axis=0)
        signs = np.sign(shares.parts)
        changes = np.any(np.diff(signs, axis=1) != 0.0, axis=0) | (np.diff(governing) != 0)
        firsts = np.concatenate([[0], np.flatnonzero(changes) + 1])
        edges = [float(x[0]), *((x[firsts[1:] - 1] + x[firsts[1:]]) / 2).tolist(), float(x[-1])]
        found: list[Governs] = []
        for first, start, end in zip(firsts, edges[:-1], edges[1:], strict=True):
            c = int(governing[first])
            what = self.combinations[c].name, self._loaded(signs[:, first], c, low=low)
            if found and (found[-1].combination, found[-1].patterns) == what:
                found[-1] = replace(found[-1], end=end)
            elif end > start:
                found.append(Governs(start, end, *what))
        return tuple(found)

    # Extremes along the beam.

    def _joints(self, start: float, end: float) -> FloatArray:
        """Places from `start` to `end` between which the effects run smoothly."""
        nodes = [self._nodes, *(crossing.influence.nodes for _, _, crossing in self._crossings)]
        found = np.unique(np.concatenate(nodes))
        tolerance = self.model.tolerance
        inner = found[(found > start + tolerance) & (found < end - tolerance)]
        return np.array([start, *inner[np.diff(inner, prepend=-np.inf) > tolerance], end])

    def _extreme(self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool) -> Effect:
        places: list[tuple[float, bool]] = []
        if self._moving.any():
            places += self._peaks(quantity, joints, seeds, low=low)
        if not self._moving.all():
            places += self._stationary(quantity, joints, seeds, low=low)
        places.sort()
        x, right = (np.array(each) for each in zip(*places, strict=True))
        return self._governing(self._shares(quantity, x, right), x, right, low=low)

    def _stationary(
        self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool
    ) -> list[tuple[float, bool]]:
        """Give places among which the extreme over combinations without trains lies: ends and roots."""
        pieces, noise = self._of(quantity)
        sign = -1.0 if low else 1.0
        fixed, varying = (factors[which] for factors in self._factors)
        parts = len(self._fixed)
        patterned = self._member.shape[0]
        polynomials = sign * np.tensordot(fixed, pieces[:parts], axes=1)  # (c, n, 6)
        shares = np.where(
            np.abs(pieces[parts:]).max(axis=(1, 2), keepdims=True) <= noise[parts:, None, None],
            0.0,
            pieces[parts:],
        )
        factors = sign * varying[:, :patterned] @ self._member  # (c, j)
        x, right = np.repeat(joints, 2)[1:-1], np.arange(2 * len(joints) - 2) % 2 == 0
        ends = self._sums(self._shares(quantity, x, right), low=low)[which] * sign
        best = float(ends.max())
        found = list(zip(x.tolist(), right.tolist(), strict=True))
        # An element whose bound does not reach the best value so far has no part in the extreme.
        bound = piecewise.bounds(polynomials.reshape(-1, piecewise.DEGREE + 1))[1].reshape(
            polynomials.shape[:2]
        )
        below, above = (
            each.reshape(shares.shape[:2])
            for each in piecewise.bounds(shares.reshape(-1, piecewise.DEGREE + 1))
        )
        bound = bound + np.maximum(factors, 0.0) @ np.maximum(above, 0.0)
        bound = bound + np.minimum(factors, 0.0) @ np.minimum(below, 0.0)
        h = np.diff(self._nodes)
        start, end = ((joints[i] - self._nodes[:-1]) / h for i in (0, -1))
        inside = np.minimum(end, 1.0) > np.maximum(start, 0.0)
        order = np.argsort(-np.where(inside, bound, -np.inf), axis=None, kind="stable")
        for combination, element in zip(*np.unravel_index(order, bound.shape), strict=True):
            if not inside[element] or bound[combination, element] <= best + TIE * abs(best):
                break
            acting = factors[combination] != 0.0
            t, value = _peaks_of(
                polynomials[combination, element],
                factors[combination, acting, None] * shares[acting, element],
                max(float(start[element]), 0.0),
                min(float(end[element]), 1.0),
            )
            best = max(best, value)
            found += [(float(self._nodes[element] + h[element] * each), True) for each in t]
        return found

    def _peaks(
        self, quantity: Quantity, joints: FloatArray, seeds: _Shares, *, low: bool
    ) -> list[tuple[float, bool]]:
        """Give places among which the extreme over combinations with trains lies: the peaks of the envelope."""

        def curve(shares: _Shares, x: FloatArray) -> FloatArray:
            sums = self._sums(shares, low=low)[self._moving]
            return np.asarray((-sums if low else sums).max(axis=0).reshape(x.shape))

        x, right = _division(joints, DIVISIONS)
        values = curve(seeds, x)
        rise = np.diff(values, axis=1)
        rising, falling = np.pad(rise, ((0, 0), (1, 0))), -np.pad(rise, ((0, 0), (0, 1)))
        # Beside the largest of three places a peak rises by about as much as the curve falls, or less.
        gain = 2.0 * np.maximum(rising, falling)
        peaks = (np.minimum(rising, falling) >= 0.0) & (gain > 0.0) & (values + gain >= values.max())
        best = values >= values.max() - TIE * abs(values.max())
        found = list(zip(x[best].tolist(), right[best].tolist(), strict=True))
        row, column = np.nonzero(peaks)
        if not len(row):
            return found
        a, b = x[row, np.maximum(column - 1, 0)], x[row, np.minimum(column + 1, DIVISIONS)]
        for _ in range(_ROUNDS):
            inner = a[:, None] + (b - a)[:, None] * np.linspace(0.0, 1.0, _NARROWER + 1)
            inner[:, -1] = b
            side = np.broadcast_to(np.arange(_NARROWER + 1) < _NARROWER, inner.shape)
            values = curve(self._shares(quantity, inner.ravel(), side.ravel()), inner)
            top, each = values.argmax(axis=1), np.arange(len(a))
            before, after = np.maximum(top - 1, 0), np.minimum(top + 1, _NARROWER)
            most = values[each, top]
            gain = 2.0 * (most - np.minimum(values[each, before], values[each, after]))
            kept = np.flatnonzero(most + gain >= most.max(initial=-np.inf))
            if np.all(gain[kept] <= TIE * np.abs(most[kept])):
                kept = kept[:1]  # equal peaks: the place of the first is enough
            peak = inner[each, top][kept], side[each, top][kept]
            a, b = inner[each, before][kept], inner[each, after][kept]
        return [*found, *zip(peak[0].tolist(), peak[1].tolist(), strict=True)]


def effects(
    model: BeamModel,
    actions: Actions,
    combinations: Sequence[Combination],
    lengths: Sequence[tuple[float, float]] | None = None,
) -> Effects:
    """Give the extreme effects of a group of combinations; patterns load each span and overhang by default."""
    return Effects(model, actions, tuple(combinations), tuple(lengths or loaded_lengths(model)))


def _division(joints: FloatArray, parts: int) -> tuple[FloatArray, BoolArray]:
    """Divide each interval: places (i, parts + 1), and whether the right side of the place is meant."""
    t = np.linspace(0.0, 1.0, parts + 1)
    x = joints[:-1, None] + np.diff(joints)[:, None] * t
    x[:, -1] = joints[1:]
    return x, np.broadcast_to(np.arange(parts + 1) < parts, x.shape)


def _first(values: FloatArray) -> int:
    best = float(values.max())
    return int(np.argmax(values >= best - TIE * abs(best)))


def _peaks_of(
    polynomial: FloatArray, parts: FloatArray, low: float, high: float
) -> tuple[list[float], float]:
    """Give the places of stationary points in (low, high) of a polynomial plus the positive parts of others.

    Their largest value, too; minus infinity where there are none.
    """
    crossings = _roots(parts)
    found: list[float] = crossings[(crossings > low) & (crossings < high)].tolist()
    cuts = np.unique([low, high, *found])
    for a, b in pairwise(cuts[np.diff(cuts, append=np.inf) > _AT_END].tolist()):
        acting = parts[piecewise.values(parts, np.array((a + b) / 2)) > 0.0]
        total = polynomial + acting.sum(axis=0)
        found += [float(t) for t in piecewise.roots(piecewise.derivative(total)) if a < t < b]
    if not found:
        return [], -np.inf
    t = np.array(found)
    values = piecewise.values(polynomial, t) + np.maximum(piecewise.values(parts[:, None], t), 0.0).sum(
        axis=0
    )
    return found, float(values.max())


def _roots(polynomials: FloatArray) -> FloatArray:
    """Real roots in (0, 1) of all the polynomials (k, 6) together; most are straight lines."""
    size = np.abs(polynomials).max(axis=1, keepdims=True)
    bent = np.any(np.abs(polynomials[:, 2:]) > _STRAIGHT * size, axis=1)
    a, b = polynomials[~bent, 0], polynomials[~bent, 1]
    with np.errstate(divide="ignore", invalid="ignore"):
        found = [-a / b, *(piecewise.roots(each) for each in polynomials[bent])]
    t = np.concatenate(found)
    return np.asarray(t[(t > 0.0) & (t < 1.0)])

"""A train that crosses a beam in both directions: the extremes of its effects over all positions, exact.

Signs and units are those of `calcgen.mechanics.beam`. An effect at a place is piecewise cubic in the position
of the train, so its extremes lie where an axle meets a node or the place itself, or at a root of a quadratic.
A moment between two loads is never beyond both its ends, so the largest moment of all stands under an axle or
at a node, and as the train moves, the moment under an axle is piecewise quartic. (Critical positions of axle
loads: Hibbeler, Structural Analysis, the chapter on influence lines, from memory.)
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import RIGID, Quantity
from calcgen.mechanics.beam.results import TIE, Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import BoolArray, Influence, quantity_index
from calcgen.mechanics.passage import Passage, bettered, nothing, with_values
from calcgen.mechanics.stretch_bounds import stretch_bounds
from calcgen.mechanics.trains import Position, Train

_ROUNDING = 1e-3  # part of the model's tolerance within which an axle stands at a place


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
    from which side the value is a limit, nan where it holds in a window too short for a step; (2, 4, k)."""
    _attained: Callable[[int, Position], Position]

    def position(self, number: int, *, low: bool) -> Position | None:
        """Give where the train stands for the largest, or the smallest, effect at one of the places."""
        _, x, left, limit = self._found[int(low), :, number]
        if math.isnan(x):
            return None
        if math.isnan(limit):
            return Position(float(x), "left" if left else "right")
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
        noise = self.noise(quantity)
        found = nothing(len(places))
        for passage in self._passages:
            found = bettered(passage.at(quantity, elements, places), passage, found, noise)
        ends, jumpy = self.influence.nodes[[0, -1]], self._jumps(quantity)
        for number in np.flatnonzero(np.isin(places, ends)) if jumpy else ():
            for passage in self._passages:
                at_end = passage.on_end(quantity, last=bool(places[number] == ends[1]))
                found[:, :, number] = with_values(at_end, passage, found[:, :, number], noise)
        return Reach(
            found[0, 0],
            found[1, 0],
            found,
            lambda i, position: self._attained(position, (float(places[i]),) if jumpy else ()),
        )

    def bounds(self, quantity: Quantity, start: FloatArray, length: FloatArray) -> FloatArray:
        """Give control values (2, k, 7) that no effect exceeds on k stretches, each within an element."""
        _, elements = self.influence.locate(start + length / 2, right=np.zeros(len(start), dtype=bool))
        each = [stretch_bounds(p, quantity, elements, start, length) for p in self._passages]
        return np.stack([np.max([b[0] for b in each], axis=0), np.min([b[1] for b in each], axis=0)])

    def reaction_reach(self, support: int, part: ReactionPart = "force") -> Reach:
        """Give the extremes of one part of a support's reaction over all positions, as one place."""
        noise = self._load * self.influence.reaction_noise(part)
        found = nothing(1)
        for passage in self._passages:
            found = bettered(passage.reaction(support, part), passage, found, noise)
        x = self.influence.model.supports[support].x
        return Reach(found[0, 0], found[1, 0], found, lambda _, p: self._attained(p, left_at=x))

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
        noise = self.noise(quantity)
        under = [each for passage in self._passages for each in passage.under_axles(quantity, a, b)]
        effects += [
            TrainEffect(value, x, self._attained(position, (x,) if self._jumps(quantity) else ()))
            for value, x, position in sorted(under, key=lambda each: each[1])
            if abs(value) > noise
        ]
        return TrainRange(_first(effects, 1.0), _first(effects, -1.0))

    def _jumps(self, quantity: Quantity) -> bool:
        """Tell whether a quantity at a place jumps when an axle passes it."""
        part = quantity_index(quantity)[0]
        return part == "V" or (part == "slope" and self.influence.model.shears)

    def _attained(
        self, position: Position, jumps: tuple[float, ...] = (), left_at: float | None = None
    ) -> Position:
        """Give the position at its place, where the effect does not jump there or has its limit as value.

        It jumps where an axle stands at one of the places `jumps`, or leaves an end that no support holds, or
        that end, `left_at`, of which the support's own reaction is meant.
        """
        model, lateral = self.influence.model, self.train.lateral != 0.0
        held = [s.x for s in model.supports if s.w == RIGID and (s.lateral == RIGID or not lateral)]
        ends: dict[float, Side] = {0.0: "left", model.length: "right"}
        kept = [x for x in held if left_at is None or not model.same(x, left_at)]
        free = {end: off for end, off in ends.items() if not any(model.same(end, x) for x in kept)}
        for x in position.places(self.train):
            for place in (*jumps, *free):
                if not model.same(x, place):
                    continue
                side: Side | None = "right" if x > place else "left"
                if abs(x - place) <= _ROUNDING * model.tolerance:
                    side = position.beside
                if place in jumps or side == free[place]:
                    return replace(position, beside=side)
        return replace(position, beside=None)

    def noise(self, quantity: Quantity) -> float:
        """Give the size below which an effect is rounding error."""
        return self._load * self.influence.noise(quantity)

    @property
    def _load(self) -> float:
        """Sum of the magnitudes of the forces of the axles, N."""
        return max(1.0, abs(self.train.lateral)) * sum(abs(load) for load in self.train.axles)

    @cached_property
    def _passages(self) -> tuple[Passage, ...]:
        return tuple(Passage(self.influence, self.train, direction) for direction in self.train.directions)


def _effect(reach: Reach, x: float, *, low: bool, number: int = 0) -> TrainEffect:
    value = (reach.low if low else reach.high)[number]
    return TrainEffect(float(value), x, reach.position(number, low=low))


def _first(effects: list[TrainEffect], sign: float) -> TrainEffect:
    best = max(sign * effect.value for effect in effects)
    return next(effect for effect in effects if best - sign * effect.value <= TIE * abs(best))

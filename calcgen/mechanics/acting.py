"""The shares of what acts on a beam in an effect, all solved once, whatever the combinations are.

Those of each case as it is, of each part of a case in patterns, and of each train at its worst.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from calcgen.mechanics.actions import Actions
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import PARTS, BeamModel, CaseSolution, Load, Quantity, piecewise, solve
from calcgen.mechanics.combinations import ReactionPart, reaction_index
from calcgen.mechanics.influence import BoolArray, influence, quantity_index
from calcgen.mechanics.moving_loads import Crossing, Reach
from calcgen.mechanics.patterns import by_length as parted
from calcgen.mechanics.stretch_bounds import controls


@dataclass(frozen=True, eq=False)
class Shares:
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

    def at(self, place: int) -> Shares:
        """Give the shares at one of the places, without those of trains at each position."""
        here = slice(place, place + 1)
        fixed, parts, high, low = (row[:, here] for row in (self.fixed, self.parts, self.high, self.low))
        return Shares(self.x[here], self.right[here], fixed, parts, (), high, low)


@dataclass(frozen=True, eq=False)
class Acting:
    """Actions on a beam, solved. `lengths`: start and end, m, of each length that a pattern may load.

    Raises
    ------
    UnstableBeam
        Where the supports and hinges leave a motion free.
    KeyError
        For a pattern of a case that is not among the actions.
    ValueError
        For actions that the beam cannot carry.
    """

    model: BeamModel
    actions: Actions
    lengths: tuple[tuple[float, float], ...]

    def __post_init__(self) -> None:
        for name in sorted(self.actions.patterned - {*self.actions.cases}):
            raise KeyError(name)
        _ = self.solutions, self.crossings  # what the beam cannot carry is said at once

    @cached_property
    def fixed(self) -> tuple[str, ...]:
        """Cases that act as they are."""
        return tuple(name for name in self.actions.cases if name not in self.actions.patterned)

    @cached_property
    def by_length(self) -> dict[str, tuple[tuple[Load, ...], ...]]:
        """Loads on each length, of each case in patterns."""
        return {
            name: parted(loads, self.lengths)
            for name, loads in self.actions.cases.items()
            if name in self.actions.patterned
        }

    @cached_property
    def parts(self) -> tuple[tuple[str, int], ...]:
        """Case and length of each part that may act or not."""
        return tuple(
            (name, number)
            for name, parts in self.by_length.items()
            for number, loads in enumerate(parts)
            if loads
        )

    @cached_property
    def solutions(self) -> tuple[CaseSolution, ...]:
        """The beam under each fixed case and under each part, on one mesh."""
        loads = [self.actions.cases[name] for name in self.fixed]
        loads += [self.by_length[name][number] for name, number in self.parts]
        return tuple(solve(self.model, {str(i): each for i, each in enumerate(loads)}).values())

    @cached_property
    def _pieces(self) -> FloatArray:
        """Coefficients of all solutions, (s, n, parts, p, 6)."""
        shape = (0, 1, len(PARTS), len(self.model.planes), piecewise.DEGREE + 1)
        return (
            np.array([solution.pieces for solution in self.solutions]) if self.solutions else np.zeros(shape)
        )

    @cached_property
    def nodes(self) -> FloatArray:
        """Nodes (n + 1,) of the solutions, m."""
        return self.solutions[0].nodes if self.solutions else np.array([0.0, self.model.length])

    @cached_property
    def crossings(self) -> tuple[tuple[str, int, Crossing], ...]:
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
    def varying(self) -> tuple[str, ...]:
        """Case of each action that varies: the cases in patterns, then the trains."""
        return (*self.by_length, *(name for name, _, _ in self.crossings))

    @cached_property
    def member(self) -> FloatArray:
        """1 where a part belongs to a case in patterns, else 0: (cases, j)."""
        rows = [[float(name == case) for name, _ in self.parts] for case in self.by_length]
        return np.array(rows).reshape(len(self.by_length), len(self.parts))

    # Shares at places.

    def _require(self, plane: int) -> None:
        if plane >= len(self.model.planes):
            raise ValueError("the bending stiffness about the vertical axis is not known: no lateral results")

    def of(self, quantity: Quantity) -> tuple[FloatArray, FloatArray]:
        """Coefficients (s, n, 6) of a quantity in each solution, and the size of its rounding error (s,)."""
        name, plane = quantity_index(quantity)
        self._require(plane)
        part = PARTS.index(name)
        return self._pieces[:, :, part, plane], np.array([s.noise[part, plane] for s in self.solutions])

    def shares(self, quantity: Quantity, x: FloatArray, right: BoolArray, *, trains: bool = True) -> Shares:
        """Give the shares in a quantity at places (k,), on the right of each or on the left.

        Without `trains` these have none.
        """
        pieces, noise = self.of(quantity)
        left, behind = (np.searchsorted(self.nodes, x, side=side) for side in ("left", "right"))
        element = np.clip(np.where(right, behind, left) - 1, 0, len(self.nodes) - 2)
        t = (x - self.nodes[element]) / np.diff(self.nodes)[element]
        values = piecewise.values(pieces[:, element], t)
        values = np.where(np.abs(values) <= noise[:, None], 0.0, values)
        crossings = [crossing for _, _, crossing in self.crossings if trains]
        return self._split(x, right, values, tuple(c.reach(quantity, x, right=right) for c in crossings))

    def _split(
        self, x: FloatArray, right: BoolArray, values: FloatArray, reaches: tuple[Reach, ...]
    ) -> Shares:
        values = values.reshape(-1, len(x))
        fixed, parts = values[: len(self.fixed)], values[len(self.fixed) :]
        none = np.zeros((len(self.crossings) - len(reaches), len(x)))
        high, low = (
            np.concatenate([self.member @ extreme(parts, 0.0), *(row[None] for row in rows), none])
            for extreme, rows in (
                (np.maximum, [each.high for each in reaches]),
                (np.minimum, [each.low for each in reaches]),
            )
        )
        return Shares(x, right, fixed, parts, reaches, high, low)

    def noise(self, quantity: Quantity) -> tuple[FloatArray, FloatArray]:
        """Give the size of rounding errors in the shares of fixed cases (f,) and of what varies (v,)."""
        _, noise = self.of(quantity)
        fixed, parts = noise[: len(self.fixed)], noise[len(self.fixed) :]
        trains = [crossing.noise(quantity) for _, _, crossing in self.crossings]
        return fixed, np.concatenate([self.member @ parts, trains])

    def reaction_shares(self, support: int, part: ReactionPart) -> Shares:
        """Give the shares in one part of a support's reaction, as at one place."""
        if (support, part) not in self._reactions:  # groups and their combinations ask for the same
            self._reactions[support, part] = self._find_reaction(support, part)
        return self._reactions[support, part]

    @cached_property
    def _reactions(self) -> dict[tuple[int, ReactionPart], Shares]:
        return {}

    def _find_reaction(self, support: int, part: ReactionPart) -> Shares:
        plane, which = reaction_index(part)
        self._require(plane)
        values = np.array([solution.clean_forces[support, plane, which] for solution in self.solutions])
        reaches = tuple(crossing.reaction_reach(support, part) for _, _, crossing in self.crossings)
        place = np.array([self.model.supports[support].x])
        return self._split(place, np.array([False]), values[:, None], reaches)

    def control_shares(self, quantity: Quantity, start: FloatArray, length: FloatArray) -> Shares:
        """Give shares that none exceeds on k stretches within elements: control values, 7 for each in turn.

        A sum of them with factors, those from above times positive ones, is bounded by its largest.
        """
        pieces, _ = self.of(quantity)
        element = np.searchsorted(self.nodes, start + length / 2) - 1
        h = np.diff(self.nodes)[element]
        own = controls(pieces[:, element], (start - self.nodes[element]) / h, length / h)
        values = own.reshape(len(pieces), own.shape[1] * own.shape[2])
        trains = [crossing.bounds(quantity, start, length) for _, _, crossing in self.crossings]
        fixed, parts = values[: len(self.fixed)], values[len(self.fixed) :]
        high, low = (
            np.concatenate([self.member @ extreme(parts, 0.0), *(b[number].reshape(1, -1) for b in trains)])
            for number, extreme in ((0, np.maximum), (1, np.minimum))
        )
        return Shares(start, np.ones(len(start), dtype=bool), fixed, parts, (), high, low)

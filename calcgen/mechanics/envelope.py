"""Envelopes over combinations in which spans may be loaded or not and trains cross the beam.

Signs and units are those of `calcgen.mechanics.beam`. A case that acts as it is adds its share to an effect;
a case in patterns adds the shares of the spans that make the effect larger; a train adds the most of all its
positions. None depends on the other, so the largest effect at a place is a sum over the cases. Time grows
linearly with the number of combinations, and with that of spans where no case varies.

Extremes along the beam are exact too. Without trains the envelope is piecewise polynomial, with breaks where
the share of a span changes its sign, and its stationary points are roots. With trains it is exact at any
place, and where it is largest is found by bounds of what may be reached on a stretch: no place is left out
that could exceed the value given.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from itertools import pairwise

import numpy as np

from calcgen.mechanics.acting import Acting, Shares
from calcgen.mechanics.actions import (
    FEW,
    Actions,
    Band,
    Combination,
    Curve,
    Effect,
    EffectRange,
    Governs,
)
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import PLANES, BeamModel, Load, Quantity, scaled
from calcgen.mechanics.beam.mesh import nearest
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.combined import Combined
from calcgen.mechanics.extremes_along import extremes_of_each
from calcgen.mechanics.governing import State, stretches
from calcgen.mechanics.influence import BoolArray
from calcgen.mechanics.patterns import loaded_lengths, loaded_planes
from calcgen.mechanics.peaks import divided


def effects(
    model: BeamModel,
    actions: Actions,
    combinations: Sequence[Combination],
    lengths: Sequence[tuple[float, float]] | None = None,
    cuts: Sequence[float] = (),
) -> Effects:
    """Give the extreme effects of combinations.

    Patterns load each of `lengths`, by default each span and overhang in the planes of their loads. Between
    places of `cuts`, m, extremes are found together when the first of them is asked for.
    """
    planes = loaded_planes(actions.cases.get(name, ()) for name in actions.patterned)
    acting = Acting(model, actions, tuple(lengths or loaded_lengths(model, planes or PLANES[:1])))
    inner = [x for x in sorted(cuts) if model.tolerance < x < model.length - model.tolerance]
    apart = [x for x, before in zip(inner, [0.0, *inner], strict=False) if x - before > model.tolerance]
    return Effects(acting, tuple(combinations), tuple(combinations), (0.0, *apart, model.length))


@dataclass(frozen=True, eq=False)
class Effects:
    """Extreme effects of a group of combinations on a beam; of equal ones the first combination governs.

    `siblings` are all combinations whose extremes are found together. `cuts`: places, m, from the start of
    the beam to its end, between which extremes are found together.

    Raises
    ------
    KeyError
        For a case that is not among the actions.
    ValueError
        Where there is no combination.
    """

    acting: Acting
    combinations: tuple[Combination, ...]
    siblings: tuple[Combination, ...]
    cuts: tuple[float, ...]
    _found: dict[Quantity, list[dict[str, EffectRange]]] = field(default_factory=dict)

    def __post_init__(self) -> None:
        if not self.combinations:
            raise ValueError("an envelope needs at least one combination")
        named = {name for combination in self.siblings for name in combination.factors}
        for name in sorted(named - {*self.actions.cases, *self.actions.trains}):
            raise KeyError(name)

    def only(self, names: Collection[str]) -> Effects:
        """Give the effects of some of the combinations; what is found for one serves the others."""
        return replace(self, combinations=tuple(c for c in self.siblings if c.name in names))

    def apart(self, names: Collection[str]) -> Effects:
        """Give the effects of some of the combinations, whose extremes are found without those of others."""
        members = tuple(c for c in self.siblings if c.name in names)
        return replace(self, combinations=members, siblings=members, _found={})

    @property
    def model(self) -> BeamModel:
        """The beam."""
        return self.acting.model

    @property
    def actions(self) -> Actions:
        """What acts on it."""
        return self.acting.actions

    @property
    def lengths(self) -> tuple[tuple[float, float], ...]:
        """Start and end, m, of each length that a pattern may load."""
        return self.acting.lengths

    def at(self, quantity: Quantity, x: float) -> EffectRange:
        """Give the extremes of a quantity at one place, on both sides of it."""
        near = float(self.acting.nodes[nearest(self.acting.nodes, x)])
        place = near if self.model.same(x, near) else x
        shares = self.acting.shares(quantity, np.array([place, place]), np.array([False, True]))
        high, low = (self._combined.governing(shares, low=low) for low in (False, True))
        return EffectRange(high, low)

    def reaction(self, support: int, part: ReactionPart = "force") -> EffectRange:
        """Give the extremes of one part of a support's reaction; supports count from 0, from the left."""
        shares = self.acting.reaction_shares(support, part)
        high, low = (self._combined.governing(shares, low=low) for low in (False, True))
        return EffectRange(high, low)

    def extremes(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> EffectRange:
        """Give the extremes of a quantity from `start` to `end`; there the inner side counts.

        Raises
        ------
        ValueError
            For a range without length, outside the beam, and a lateral quantity without lateral stiffness.
        """
        ends = 0.0 if start is None else start, self.model.length if end is None else end
        numbers = [
            next((i for i, cut in enumerate(self.cuts) if self.model.same(x, cut)), None) for x in ends
        ]
        first, last = numbers
        if first is None or last is None or first >= last:
            ranges = self._whole._find(quantity, ends)
        else:
            if quantity not in self._found:
                self._found[quantity] = self._whole._find(quantity, self.cuts)
            ranges = self._found[quantity][first:last]
        of_each = [[found[c.name] for found in ranges] for c in self.combinations]
        return EffectRange(
            _first([_first([e.max for e in each], 1.0) for each in of_each], 1.0),
            _first([_first([e.min for e in each], -1.0) for each in of_each], -1.0),
        )

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope of a quantity for drawing, with at least two points an element."""
        joints = self._joints((0.0, self.model.length))
        x, right = divided(joints[:-1], joints[1:], points_per_element)
        shares = self.acting.shares(quantity, x.ravel(), right.ravel())
        high, low = self._combined.sums(shares, low=False), self._combined.sums(shares, low=True)
        governs = [self._stretches(shares, joints, sums, low=sums is low) for sums in (low, high)]
        curves = tuple(self._curves(shares, [*governs[0], *governs[1]]))
        return Band(shares.x, low.min(axis=0), high.max(axis=0), governs[0], governs[1], curves)

    def loads(self, effect: Effect) -> tuple[Load, ...]:
        """Give the loads that cause an effect: those of its combination, in its arrangement, factored."""
        factors = next(c.factors for c in self.combinations if c.name == effect.combination)
        found: list[Load] = []
        for name, factor in factors.items():
            if name not in self.actions.patterned:
                found += [scaled(load, factor) for load in self.actions.cases.get(name, ())]
        for pattern in effect.patterns:
            parts = self.acting.by_length[pattern.case]
            found += [scaled(load, factors[pattern.case]) for i in pattern.lengths for load in parts[i]]
        for placed in effect.trains:
            train = self.actions.trains[placed.case][placed.train]
            found += [scaled(load, factors[placed.case]) for load in placed.position.loads(train, self.model)]
        return tuple(found)

    @cached_property
    def _combined(self) -> Combined:
        return Combined(self.acting, self.combinations)

    # What governs along the beam.

    def _stretches(
        self, shares: Shares, joints: FloatArray, sums: FloatArray, *, low: bool
    ) -> tuple[Governs, ...]:
        """Tell what governs along the beam; neighbours that differ in what does not act are one stretch."""
        signed = -sums if low else sums
        found: list[Governs] = []
        for g in stretches(
            shares.x,
            len(joints) - 1,
            signed,
            np.sign(shares.parts),
            TIE * float(np.abs(signed).max()),
            lambda state, where: self._state(shares, state, where, low=low) * (-1.0 if low else 1.0),
        ):
            number, signs = g.state
            what = Governs(
                g.start,
                g.end,
                self.combinations[number].name,
                self._combined.loaded(signs, number, low=low),
                tuple(self.combinations[i].name for i in g.equal),
            )
            if found and replace(found[-1], start=g.start, end=g.end) == what:
                found[-1] = replace(found[-1], end=g.end)
            else:
                found.append(what)
        return tuple(found)

    def _state(self, shares: Shares, state: State, where: slice, *, low: bool) -> FloatArray:
        """Give the extreme of one combination at some of the places, its parts acting as their signs tell."""
        number, signs = state
        factors = self._combined.factors[1][number, : len(self.acting.by_length)] @ self.acting.member
        acts = factors * signs < 0.0 if low else factors * signs > 0.0
        return self._sum(shares, number, acts, where, low=low)

    def _sum(self, shares: Shares, number: int, acts: BoolArray, where: slice, *, low: bool) -> FloatArray:
        """Give the sum of a combination with those parts (j,) that act and the extreme of its trains."""
        count = len(self.acting.by_length)
        fixed, varying = (factors[number] for factors in self._combined.factors)
        factors = np.where(acts, varying[:count] @ self.acting.member, 0.0)
        adding, opposing = (shares.low, shares.high) if low else (shares.high, shares.low)
        return np.asarray(
            fixed @ shares.fixed[:, where]
            + factors @ shares.parts[:, where]
            + np.maximum(varying[count:], 0.0) @ adding[count:, where]
            + np.minimum(varying[count:], 0.0) @ opposing[count:, where]
        )

    def _curves(self, shares: Shares, governs: Sequence[Governs]) -> Iterator[Curve]:
        """Give the curve of each state that governs somewhere, where they are few and no train moves."""
        states = dict.fromkeys((g.combination, g.patterns) for g in governs)
        if len(states) > FEW or self._combined.moving.any():
            return
        names = [c.name for c in self.combinations]
        for name, patterns in states:
            loaded = {(pattern.case, length) for pattern in patterns for length in pattern.lengths}
            acts = np.array([part in loaded for part in self.acting.parts], dtype=bool)
            yield Curve(name, patterns, self._sum(shares, names.index(name), acts, slice(None), low=False))

    # Extremes along the beam.

    @property
    def _whole(self) -> Effects:
        return replace(self, combinations=self.siblings)

    def _joints(self, cuts: Sequence[float]) -> FloatArray:
        """Places from the first to the last of `cuts`, them too, between which effects run smoothly."""
        tolerance = self.model.tolerance
        if min(b - a for a, b in pairwise(cuts)) <= tolerance:
            raise ValueError("a range needs a length")
        if cuts[0] < -tolerance or cuts[-1] > self.model.length + tolerance:
            raise ValueError("the place lies outside the beam")
        nodes = [self.acting.nodes, *(crossing.influence.nodes for _, _, crossing in self.acting.crossings)]
        found = np.unique(np.concatenate(nodes))
        inner = found[(found > cuts[0] + tolerance) & (found < cuts[-1] - tolerance)]
        inner = inner[np.diff(inner, prepend=-np.inf) > tolerance]
        between = np.abs(inner - np.array(cuts)[nearest(np.array(cuts), inner)]) > tolerance
        return np.sort(np.concatenate([cuts, inner[between]]))

    def _find(self, quantity: Quantity, cuts: Sequence[float]) -> list[dict[str, EffectRange]]:
        """Give the extremes of each combination in each range between two cuts."""
        joints = self._joints(cuts)
        range_of = np.searchsorted(cuts, (joints[:-1] + joints[1:]) / 2) - 1
        return extremes_of_each(self._combined, quantity, joints, range_of)


def _first(effects: Sequence[Effect], sign: float) -> Effect:
    best = max(sign * effect.value for effect in effects)
    return next(effect for effect in effects if best - sign * effect.value <= TIE * abs(best))

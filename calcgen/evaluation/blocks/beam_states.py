"""The states of a group of combinations: one each, or many where patterns and trains make them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import TypeAlias

from calcgen.mechanics.actions import Actions, Band, Combination, Effect, EffectRange
from calcgen.mechanics.beam import RIGID, BeamModel, CaseSolution, Plane, Quantity, Settlement, combine_all
from calcgen.mechanics.combinations import Envelope, Governing, ReactionPart
from calcgen.mechanics.envelope import Effects, effects


@dataclass(frozen=True, eq=False)
class Varying:
    """Effects of combinations that take a case in patterns or a train; extremes are found once.

    `asked`: the quantities, and the parts of the reactions of supports, of which extremes were asked for.
    """

    effects: Effects
    asked: set[Quantity | tuple[int, ReactionPart]] = field(default_factory=set)
    _found: dict[tuple[Quantity, float | None, float | None], EffectRange] = field(default_factory=dict)

    @property
    def names(self) -> tuple[str, ...]:
        """The combinations."""
        return tuple(c.name for c in self.effects.combinations)

    def extremes(
        self, quantity: Quantity, start: float | None = None, end: float | None = None
    ) -> EffectRange:
        """Give the extremes of a quantity from `start` to `end`, over all that may act."""
        self.asked.add(quantity)
        key = quantity, start, end
        if key not in self._found:
            self._found[key] = self.effects.extremes(quantity, start, end)
        return self._found[key]

    def at(self, quantity: Quantity, x: float) -> EffectRange:
        """Give the extremes of a quantity at one place."""
        self.asked.add(quantity)
        return self.effects.at(quantity, x)

    def reaction(self, support: int, part: ReactionPart = "force") -> EffectRange:
        """Give the extremes of one part of a support's reaction."""
        self.asked.add((support, part))
        return self.effects.reaction(support, part)

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope of a quantity for drawing."""
        return self.effects.band(quantity, points_per_element)

    def holds_deflection(self, a: float, b: float, plane: Plane) -> bool:
        """Tell whether supports at both places keep w at zero whatever acts; no chord then moves."""
        cases = self.effects.actions.cases.values()
        if any(isinstance(load, Settlement) for loads in cases for load in loads):
            return False
        model = self.effects.model
        held = [s.x for s in model.supports if (s.w if plane == "vertical" else s.lateral) == RIGID]
        return all(any(model.same(x, end) for x in held) for end in (a, b))


States: TypeAlias = Envelope | Varying
Found: TypeAlias = Governing | Effect


def names_of(states: States) -> tuple[str, ...]:
    """Return the combinations of a group, in the order written."""
    return states.names if isinstance(states, Varying) else tuple(states.solutions)


def single(states: States) -> CaseSolution | None:
    """Return the one state that there is, None where there are several."""
    if isinstance(states, Varying) or len(states.solutions) > 1:
        return None
    (solution,) = states.solutions.values()
    return solution


@dataclass(frozen=True, eq=False)
class Solved:
    """A beam with each of its cases solved, from which the states of its groups of combinations follow.

    `cuts`: places, m, between which extremes will be asked for. `together`: whether extremes of all groups
    are found together, which is quicker where all are asked for and slower where few are.
    """

    model: BeamModel
    actions: Actions
    cases: Mapping[str, CaseSolution]
    groups: Sequence[Sequence[Combination]]
    cuts: Sequence[float] = ()
    together: bool = True

    def states(self, combinations: Sequence[Combination]) -> States:
        """Give the states of one of the groups, or of one of its combinations."""
        names = [c.name for c in combinations]
        if any(self.varies(c) for c in combinations):
            return Varying(self._effects[names[0]].only(names))
        return Envelope({name: self._combined[name] for name in names})

    def varies(self, combination: Combination) -> bool:
        """Tell whether a combination takes a case in patterns or a train."""
        varying = {*self.actions.patterned, *self.actions.trains}
        return any(factor != 0.0 and case in varying for case, factor in combination.factors.items())

    @cached_property
    def _combined(self) -> Mapping[str, CaseSolution]:
        """The state of each combination that has one only."""
        alone = {c.name: c.factors for group in self.groups for c in group if not self.varies(c)}
        return combine_all(self.cases, alone)

    @cached_property
    def _effects(self) -> Mapping[str, Effects]:
        """The effects of groups in which some combination has many states, by each of their combinations."""
        groups = [group for group in self.groups if any(self.varies(c) for c in group)]
        found = effects(self.model, self.actions, [c for group in groups for c in group], cuts=self.cuts)
        by_name: dict[str, Effects] = {}
        for group in groups:
            names = [c.name for c in group]
            by_name |= dict.fromkeys(names, found if self.together else found.apart(names))
        return by_name

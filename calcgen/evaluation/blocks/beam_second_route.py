"""The second route of a beam: each state of its combinations, and the states that govern."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import TypeAlias

from calcgen.evaluation.blocks.beam_model import BeamData
from calcgen.evaluation.blocks.beam_results import moves_sideways
from calcgen.evaluation.blocks.beam_states import Varying, single
from calcgen.evaluation.results.beam import GroupResult
from calcgen.evaluation.results.common import SecondRoute
from calcgen.mechanics.beam import CaseSolution, Load, Quantity, combined, solve
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.second_route.beam import beam_residuals
from calcgen.mechanics.second_route.moving import along_residual, extreme_residuals, reaction_residuals
from calcgen.mechanics.second_route.residual import Residual


def second_route(
    name: str, data: BeamData, groups: Sequence[GroupResult], *, of_read: bool = False
) -> tuple[SecondRoute, ...]:
    """Return, for each comparison, the worst residual over all combinations.

    The states of combinations without patterns and trains are compared, and those of the governing moments
    of others; beside them all extremes of the others. With `of_read` those extremes alone of which something
    was read, and of a group of which nothing was, neither moments nor extremes.
    """
    worst: dict[str, SecondRoute] = {}
    for group in groups:
        for key, r in _residuals(data, group, _read(group) if of_read else None):
            row = SecondRoute.found(name, r.what, r.residual, r.tolerance, r.quantity)
            held = worst.get(key)
            if held is None or not abs(r.residual) / r.tolerance <= abs(held.residual) / held.tolerance:
                worst[key] = row
    return tuple(worst.values())


_Read: TypeAlias = frozenset[Quantity | tuple[int, ReactionPart]]


def _read(group: GroupResult) -> _Read:
    """Return what was read so far of a group or of one of its combinations."""
    states = (group.states, *(c.states for c in group.combinations))
    return frozenset(what for each in states if isinstance(each, Varying) for what in each.asked)


def _residuals(data: BeamData, group: GroupResult, read: _Read | None) -> Iterator[tuple[str, Residual]]:
    """Give each residual with the comparison that it belongs to; an extreme has two of one name."""
    for c in group.combinations:
        solution = single(c.states)
        if solution is not None:
            yield from _of_state(data, combined(data.actions.cases, c.factors), solution)
    if isinstance(group.states, Varying) and (read is None or read):
        moments = group.states.extremes("M")
        for effect in dict.fromkeys((moments.max, moments.min)):
            loads = group.states.effects.loads(effect)
            if loads:
                yield from _of_state(data, loads, solve(data.model, {"": loads})[""])
        yield from ((f"{r.what}: {r.quantity}", r) for r in _of_extremes(data, group.states, read))


def _of_state(
    data: BeamData, loads: Sequence[Load], solution: CaseSolution
) -> Iterator[tuple[str, Residual]]:
    sideways = moves_sideways(solution, data.model)
    for r in beam_residuals(data.model, loads, solution):
        if sideways or not r.what.endswith("_lat"):
            yield r.what, r


def _of_extremes(data: BeamData, states: Varying, read: _Read | None) -> Iterator[Residual]:
    """Compare the extremes of V, M, w and of what the supports give, under the names of the results.

    Those of what is `read`, or of all.
    """
    effects = states.effects
    for suffix in ("", "_lat") if moves_sideways(states, data.model) else ("",):
        for symbol in ("V", "M", "w"):
            quantity: Quantity = f"{symbol}{suffix}"  # type: ignore[assignment]
            if read is not None and quantity not in read:
                continue
            found = states.extremes(quantity)
            yield along_residual(effects, quantity, found)
            for r in extreme_residuals(effects, quantity, found):
                yield replace(r, what=f"{r.what.replace('_lat', '')}{suffix}")
        for number, support in enumerate(data.model.supports):
            force, moment = _PARTS[suffix]
            held = (support.lateral, support.lateral_rotation) if suffix else (support.w, support.rotation)
            for part, stiffness in zip((force, moment), held, strict=True):
                if stiffness and (read is None or (number, part) in read):
                    for r in reaction_residuals(effects, number, states.reaction(number, part), part):
                        yield replace(r, what=f"{r.what}{suffix}")


_PARTS: dict[str, tuple[ReactionPart, ReactionPart]] = {
    "": ("force", "moment"),
    "_lat": ("force_lat", "moment_lat"),
}

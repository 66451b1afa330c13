"""Governing patterns and positions of trains found again: their loads are put on the beam and solved.

The envelope adds shares and influence lines; here the beam is solved under plain loads, once for the
arrangement that is said to govern and once for each arrangement beside it, none of which may do worse.
Signs are those of `calcgen.mechanics.beam`.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Final

import numpy as np

from calcgen.mechanics.actions import Effect, EffectRange, Pattern
from calcgen.mechanics.beam import CaseSolution, Quantity, solve
from calcgen.mechanics.combinations import ReactionPart, reaction_index
from calcgen.mechanics.envelope import Effects
from calcgen.mechanics.second_route.residual import Residual, relative

TOLERANCE: Final = 1e-8
"""Relative: far above rounding, far below an error of method."""
TOLERANCE_BESIDE: Final = 1e-5
"""Relative, where a train stands beside its place: it is seen a little off, and its effect is a limit."""
STEP: Final = 1e-3
"""Part of the beam's length by which a train is moved to either side to see that it does no worse there."""


def extreme_residuals(effects: Effects, quantity: Quantity, found: EffectRange) -> tuple[Residual, ...]:
    """Compare the extremes of a quantity, at a place or along the beam, with plain solutions."""

    def read(solution: CaseSolution, effect: Effect) -> float:
        return float(solution.values(quantity, np.array([effect.x]), effect.side)[0])

    return _residuals(effects, quantity, found, read)


def along_residual(effects: Effects, quantity: Quantity, found: EffectRange) -> Residual:
    """Compare the extremes along the beam with the envelope at places a tenth of an element apart."""
    band = effects.band(quantity, 11)
    worse = max(float(band.high.max()) - found.max.value, found.min.value - float(band.low.min()), 0.0)
    return Residual(
        quantity,
        relative(worse, max(abs(found.max.value), abs(found.min.value))),
        TOLERANCE,
        "what the envelope at some place along the beam exceeds its extremes by, over the larger of them",
    )


def reaction_residuals(
    effects: Effects, support: int, found: EffectRange, part: ReactionPart = "force"
) -> tuple[Residual, ...]:
    """Compare the extremes of a part of a support's reaction with plain solutions."""
    plane, which = reaction_index(part)

    def read(solution: CaseSolution, _: Effect) -> float:
        return float(solution.clean_forces[support, plane, which])

    return _residuals(effects, "R" if part.startswith("force") else "M_R", found, read)


def _residuals(
    effects: Effects, what: str, found: EffectRange, read: Callable[[CaseSolution, Effect], float]
) -> tuple[Residual, ...]:
    scale = max(abs(found.max.value), abs(found.min.value))
    residuals: list[Residual] = []
    for name, effect, sign in (("max", found.max, 1.0), ("min", found.min, -1.0)):
        others = _beside(effects, effect)
        cases = {str(i): effects.loads(each) for i, each in enumerate((effect, *others))}
        values = [read(solution, effect) for solution in solve(effects.model, cases).values()]
        beside = any(placed.position.beside is not None for placed in effect.trains)
        tolerance = TOLERANCE_BESIDE if beside else TOLERANCE
        worse = max((sign * (value - effect.value) for value in values[1:]), default=0.0)
        residuals += [
            Residual(
                f"{what}_{name}",
                relative(values[0] - effect.value, scale),
                tolerance,
                "the governing arrangement solved as plain loads, over the larger of the two extremes",
            ),
            Residual(
                f"{what}_{name}",
                relative(max(worse, 0.0), scale),
                tolerance,
                "what one span more or less, or a train a little way off, would add, over the same",
            ),
        ]
    return tuple(residuals)


def _beside(effects: Effects, effect: Effect) -> list[Effect]:
    """Give the arrangements that differ in one length of one pattern, or by a small step of one train."""
    found: list[Effect] = []
    for i, pattern in enumerate(effect.patterns):
        for number in range(len(effects.lengths)):
            changed = Pattern(pattern.case, tuple(sorted({*pattern.lengths} ^ {number})))
            patterns = (*effect.patterns[:i], changed, *effect.patterns[i + 1 :])
            found.append(replace(effect, patterns=patterns))
    for i, placed in enumerate(effect.trains):
        for step in (-STEP, STEP):
            x = placed.position.x + step * effects.model.length
            moved = replace(placed, position=replace(placed.position, x=x, beside=None))
            found.append(replace(effect, trains=(*effect.trains[:i], moved, *effect.trains[i + 1 :])))
        found.append(replace(effect, trains=(*effect.trains[:i], *effect.trains[i + 1 :])))
    return found

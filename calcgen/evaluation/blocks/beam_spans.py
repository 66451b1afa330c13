"""Results of a beam by stretch: deflection from the chord of its span, moment shape factors."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.evaluation.blocks.beam_states import States, Varying
from calcgen.mechanics.actions import EffectRange
from calcgen.mechanics.beam import CaseSolution, MomentShape, Plane, Quantity, moment_shape, relative_to_chord
from calcgen.mechanics.combinations import Envelope, Range


def chord_range(
    states: States, plane: Plane, start: float | None = None, end: float | None = None
) -> Range | EffectRange | None:
    """Return the extremes of the deflection from the chord of its span, from support to support.

    Parts beyond the first and the last support have no chord. None where nothing from `start` to `end` has
    one, and where patterns or trains act on supports that give way: the chord then has no state of its own.
    """
    if isinstance(states, Varying):
        return _held_range(states, plane, start, end)
    solutions = states.solutions
    model = next(iter(solutions.values())).model
    ranges: list[Range] = []
    for a, b in model.spans_in(plane):
        low, high = max(a, start or 0.0), min(b, model.length if end is None else end)
        if high - low <= model.tolerance:
            continue
        chorded = {name: relative_to_chord(s, a, b, plane) for name, s in solutions.items()}
        ranges.append(Envelope(chorded).extremes("w" if plane == "vertical" else "w_lat", low, high))
    if not ranges:
        return None
    return Range(
        max((r.max for r in ranges), key=lambda governing: governing.value),
        min((r.min for r in ranges), key=lambda governing: governing.value),
    )


def _held_range(states: Varying, plane: Plane, start: float | None, end: float | None) -> EffectRange | None:
    """Return the extremes of w in the spans, where no support gives way so that no chord moves."""
    model = states.effects.model
    quantity: Quantity = "w" if plane == "vertical" else "w_lat"
    ranges: list[EffectRange] = []
    for a, b in model.spans_in(plane):
        low, high = max(a, start or 0.0), min(b, model.length if end is None else end)
        if high - low <= model.tolerance:
            continue
        if not states.holds_deflection(a, b, plane):
            return None
        ranges.append(states.extremes(quantity, low, high))
    if not ranges:
        return None
    return EffectRange(
        max((r.max for r in ranges), key=lambda effect: effect.value),
        min((r.min for r in ranges), key=lambda effect: effect.value),
    )


def least_shape(solutions: Mapping[str, CaseSolution], start: float, end: float) -> dict[str, float]:
    """Return the smallest moment shape factors, C_b and C_1, of a stretch over the combinations."""
    shapes: list[MomentShape] = [moment_shape(s, start, end) for s in solutions.values()]
    return {"C_b": min(s.C_b for s in shapes), "C_1": min(s.C_1 for s in shapes)}

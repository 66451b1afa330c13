"""Results of a beam by stretch: deflection from the chord of its span, moment shape factors."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.evaluation.blocks.beam_states import States, Varying
from calcgen.mechanics.actions import EffectRange
from calcgen.mechanics.beam import CaseSolution, MomentShape, Plane, Quantity, moment_shape
from calcgen.mechanics.combinations import Envelope, Range


def chord_range(
    states: States, plane: Plane, start: float | None = None, end: float | None = None
) -> Range | EffectRange | None:
    """Return the extremes of the deflection from the chord of its span, from support to support.

    Parts beyond the first and the last support have no chord. None where nothing from `start` to `end` has
    one, and where patterns or trains act on supports that give way: the chord then has no state of its own.
    """
    model = states.effects.model if isinstance(states, Varying) else states.model
    spans = model.spans_in(plane)
    if not spans:
        return None
    low, high = max(spans[0][0], start or 0.0), min(spans[-1][1], model.length if end is None else end)
    if high - low <= model.tolerance:
        return None
    quantity: Quantity = "w" if plane == "vertical" else "w_lat"
    if isinstance(states, Envelope):
        return states.from_chords(plane).extremes(quantity, low, high)
    inside = [(a, b) for a, b in spans if min(b, high) - max(a, low) > model.tolerance]
    if not all(states.holds_deflection(a, b, plane) for a, b in inside):
        return None
    return states.extremes(quantity, low, high)


def least_shape(solutions: Mapping[str, CaseSolution], start: float, end: float) -> dict[str, float]:
    """Return the smallest moment shape factors, C_b and C_1, of a stretch over the combinations."""
    shapes: list[MomentShape] = [moment_shape(s, start, end) for s in solutions.values()]
    return {"C_b": min(s.C_b for s in shapes), "C_1": min(s.C_1 for s in shapes)}

"""Results of a beam by stretch: deflection from the chord of its span, moment shape factors."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.mechanics.beam import CaseSolution, MomentShape, Plane, moment_shape, relative_to_chord
from calcgen.mechanics.combinations import Envelope, Range


def chord_range(
    solutions: Mapping[str, CaseSolution], plane: Plane, start: float | None = None, end: float | None = None
) -> Range | None:
    """Return the extremes of the deflection from the chord of its span, from support to support.

    Parts beyond the first and the last support have no chord. None where nothing from `start` to `end` has
    one.
    """
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


def least_shape(solutions: Mapping[str, CaseSolution], start: float, end: float) -> dict[str, float]:
    """Return the smallest moment shape factors, C_b and C_1, of a stretch over the combinations."""
    shapes: list[MomentShape] = [moment_shape(s, start, end) for s in solutions.values()]
    return {"C_b": min(s.C_b for s in shapes), "C_1": min(s.C_1 for s in shapes)}

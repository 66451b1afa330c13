"""Loads span by span: the parts of a case that may each act or be absent.

For any one effect the adverse arrangement follows from the sign of each part's share: those that add to it
act, the others do not. So n spans need n solved parts and never 2^n arrangements. (EN 1992-1-1 5.1.3 and
ACI 318-19 6.4.3 name common arrangements; here the governing one is found for each effect, from memory.)
"""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from dataclasses import replace
from itertools import pairwise

from calcgen.mechanics.beam import (
    FREE,
    PLANES,
    BeamModel,
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    Plane,
    PointLoad,
    PointMoment,
    Settlement,
)
from calcgen.mechanics.beam.loads import places


def loaded_lengths(
    model: BeamModel, planes: Collection[Plane] = PLANES[:1]
) -> tuple[tuple[float, float], ...]:
    """Give start and end of each length that is loaded as one: each span, and each overhang by itself.

    From left to right, over the whole beam; supports that hold the deflection in one of the `planes` part
    them. With both planes that is more parts than either has, which only adds arrangements.
    """
    held = sorted(s.x for s in model.supports if any(s.restraints(plane)[0] > FREE for plane in planes))
    joints = [0.0]
    for x in (*held, model.length):
        if x - joints[-1] > model.tolerance:
            joints.append(x)
    joints[-1] = model.length
    return tuple(pairwise(joints))


def loaded_planes(cases: Iterable[Sequence[Load]]) -> frozenset[Plane]:
    """Give the planes in which the loads of `cases` act; a settlement counts in none."""
    loads = (load for case in cases for load in case if not isinstance(load, Settlement))
    return frozenset(load.plane for load in loads)


def by_length(loads: Sequence[Load], lengths: Sequence[tuple[float, float]]) -> tuple[tuple[Load, ...], ...]:
    """Give the loads that lie on each of the `lengths`, which follow one another; they are cut at its ends.

    A load at a single place between two lengths goes to the one on its right.

    Raises
    ------
    ValueError
        For a settlement, which lies on no length, and a load beyond them.
    """
    parts: list[list[Load]] = [[] for _ in lengths]
    size = lengths[-1][1] - lengths[0][0]
    for load in loads:
        if isinstance(load, Settlement):
            raise ValueError("a settlement belongs to no span and cannot be loaded in patterns")
        first, last = places(load)[0], places(load)[-1]
        if first < lengths[0][0] - 1e-9 * size or last > lengths[-1][1] + 1e-9 * size:
            raise ValueError("a load lies outside the spans")
        if isinstance(load, PointLoad | PointMoment):
            found = [i for i, (start, _) in enumerate(lengths) if start <= load.x + 1e-9 * size]
            parts[found[-1] if found else 0].append(load)
            continue
        for part, (start, end) in zip(parts, lengths, strict=True):
            low, high = max(start, load.start), min(end, load.end)
            if high - low > 1e-9 * size:
                part.append(_cut(load, low, high))
    return tuple(tuple(part) for part in parts)


def _cut(
    load: DistributedLoad | DistributedMoment | FreeCurvature, start: float, end: float
) -> DistributedLoad | DistributedMoment | FreeCurvature:
    if isinstance(load, FreeCurvature):
        return replace(load, start=start, end=end)
    slope = (load.value_end - load.value_start) / (load.end - load.start)
    values = [load.value_start + slope * (x - load.start) for x in (start, end)]
    return replace(load, start=start, end=end, value_start=values[0], value_end=values[1])

"""Envelopes over combinations: the largest and smallest of each result, and which combination gives it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import Final, Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import CaseSolution, Quantity

ReactionPart: TypeAlias = Literal["force", "moment", "force_lat", "moment_lat"]

TIE: Final = 1e-10
"""Part of a value within which two combinations are equal, and the one named first governs."""


@dataclass(frozen=True)
class Governing:
    """An extreme value, the place where it occurs, m, and the combination that gives it."""

    value: float
    x: float
    combination: str


@dataclass(frozen=True)
class Range:
    """The largest and the smallest value that the combinations give."""

    max: Governing
    min: Governing

    @property
    def abs(self) -> Governing:
        """The one of larger magnitude, with its sign."""
        return self.min if -self.min.value > self.max.value else self.max


@dataclass(frozen=True)
class Band:
    """Smallest and largest value along the beam, (k,) each, at places `x`, with both sides of each node."""

    x: FloatArray
    low: FloatArray
    high: FloatArray


@dataclass(frozen=True, eq=False)
class Envelope:
    """Combinations of one beam by name, all from one call of `solve`; of equals, the first named governs."""

    solutions: Mapping[str, CaseSolution]

    def __post_init__(self) -> None:
        if not self.solutions:
            raise ValueError("an envelope needs at least one combination")
        first, *others = self.solutions.values()
        if any(other.nodes is not first.nodes for other in others):
            raise ValueError("combinations of different solutions have no envelope")

    def extremes(self, quantity: Quantity, start: float | None = None, end: float | None = None) -> Range:
        """Give the extremes of a quantity from `start` to `end`, over all combinations."""
        found = {name: s.extremes(quantity, start, end) for name, s in self.solutions.items()}
        return Range(
            _largest(Governing(e.max, e.x_max, name) for name, e in found.items()),
            _smallest(Governing(e.min, e.x_min, name) for name, e in found.items()),
        )

    def at(self, quantity: Quantity, x: float) -> Range:
        """Give the extremes of a quantity at one place, over all combinations and both sides of a jump."""
        place = np.array([x])
        values = [
            Governing(float(solution.values(quantity, place, side)[0]), x, name)
            for name, solution in self.solutions.items()
            for side in ("left", "right")
        ]
        return Range(_largest(values), _smallest(values))

    def reaction(self, support: int, part: ReactionPart = "force") -> Range:
        """Give the extremes of one part of a support's reaction; supports count from 0, from the left."""
        reactions = {name: solution.reactions[support] for name, solution in self.solutions.items()}
        values = [Governing(getattr(r, part), r.x, name) for name, r in reactions.items()]
        return Range(_largest(values), _smallest(values))

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope for drawing, on places common to all combinations."""
        lines = [solution.polyline(quantity, points_per_element) for solution in self.solutions.values()]
        values = np.array([line[1] for line in lines])
        return Band(lines[0][0], values.min(axis=0), values.max(axis=0))


def _largest(found: Iterable[Governing]) -> Governing:
    return _first(found, 1.0)


def _smallest(found: Iterable[Governing]) -> Governing:
    return _first(found, -1.0)


def _first(found: Iterable[Governing], sign: float) -> Governing:
    """Give the largest of `sign` times the values; the first of those that differ by rounding alone."""
    candidates = list(found)
    best = max(sign * each.value for each in candidates)
    return next(each for each in candidates if best - sign * each.value <= TIE * abs(best))

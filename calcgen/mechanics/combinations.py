"""Envelopes over combinations: the largest and smallest of each result, and which combination gives it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Final, Literal, TypeAlias

import numpy as np

from calcgen.mechanics.actions import FEW, Band, Curve, Governs
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import BeamModel, CaseSolution, Plane, Quantity, relative_to_chords
from calcgen.mechanics.beam.results import extremes_of, sides_of
from calcgen.mechanics.governing import stretches

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

    @property
    def model(self) -> BeamModel:
        """The beam."""
        return next(iter(self.solutions.values())).model

    def extremes(self, quantity: Quantity, start: float | None = None, end: float | None = None) -> Range:
        """Give the extremes of a quantity from `start` to `end`, over all combinations."""
        found = extremes_of(tuple(self.solutions.values()), quantity, start, end)
        return self._range(
            [e.max for e in found], [e.min for e in found], [e.x_max for e in found], [e.x_min for e in found]
        )

    def at(self, quantity: Quantity, x: float) -> Range:
        """Give the extremes of a quantity at one place, over all combinations and both sides of a jump."""
        values = sides_of(tuple(self.solutions.values()), quantity, x)
        places = [x] * len(values)
        return self._range(values.max(axis=1).tolist(), values.min(axis=1).tolist(), places, places)

    def reaction(self, support: int, part: ReactionPart = "force") -> Range:
        """Give the extremes of one part of a support's reaction; supports count from 0, from the left."""
        plane, which = reaction_index(part)
        planes = self._forces.shape[2]
        values = (
            self._forces[:, support, plane, which].tolist() if plane < planes else [0.0] * len(self.solutions)
        )
        places = [self.model.supports[support].x] * len(values)
        return self._range(values, values, places, places)

    def from_chords(self, plane: Plane) -> Envelope:
        """Give the envelope with deflections in `plane` counted from the chord of each span.

        Raises
        ------
        ValueError
            Where no two supports hold the deflection.
        """
        if plane not in self._chorded:
            spans = self.model.spans_in(plane)
            if not spans:
                raise ValueError("no two supports hold the deflection: there is no chord")
            places = (spans[0][0], *(end for _, end in spans))
            chorded = {name: relative_to_chords(s, places, plane) for name, s in self.solutions.items()}
            self._chorded[plane] = Envelope(chorded)
        return self._chorded[plane]

    @cached_property
    def _chorded(self) -> dict[Plane, Envelope]:
        return {}

    def _range(
        self, high: Sequence[float], low: Sequence[float], x_high: Sequence[float], x_low: Sequence[float]
    ) -> Range:
        """Give the extremes of what each combination has as its largest and its smallest."""
        names = tuple(self.solutions)
        most, least = _first(high, 1.0), _first(low, -1.0)
        return Range(
            Governing(high[most], x_high[most], names[most]),
            Governing(low[least], x_low[least], names[least]),
        )

    @cached_property
    def _forces(self) -> FloatArray:
        """Force and moment of each support in each combination, (c, s, p, 2)."""
        return np.array([solution.clean_forces for solution in self.solutions.values()])

    def band(self, quantity: Quantity, points_per_element: int = 20) -> Band:
        """Give the envelope for drawing, on places common to all combinations, and what governs it."""
        lines = [solution.polyline(quantity, points_per_element) for solution in self.solutions.values()]
        x, values = lines[0][0], np.array([line[1] for line in lines])
        governs = (self._stretches(x, -values), self._stretches(x, values))
        few = len(values) <= FEW
        curves = (Curve(name, (), row) for name, row in zip(self.solutions, values, strict=True) if few)
        return Band(x, values.min(axis=0), values.max(axis=0), *governs, tuple(curves))

    def _stretches(self, x: FloatArray, signed: FloatArray) -> tuple[Governs, ...]:
        names = tuple(self.solutions)
        elements = len(self.solutions[names[0]].nodes) - 1
        tie = TIE * float(np.abs(signed).max())
        found = stretches(
            x, elements, signed, np.zeros((0, len(x))), tie, lambda state, where: signed[state[0], where]
        )
        return tuple(
            Governs(g.start, g.end, names[g.state[0]], others=tuple(names[i] for i in g.equal)) for g in found
        )


def _first(values: Sequence[float], sign: float) -> int:
    """Give the number of the largest of `sign` times the values, of equal ones the first."""
    signed = [sign * value for value in values]
    best = max(signed)
    return next(i for i, value in enumerate(signed) if best - value <= TIE * abs(best))


def reaction_index(part: ReactionPart) -> tuple[int, Literal[0, 1]]:
    """Give the plane of a part of a reaction, and 0 for the force, 1 for the moment."""
    return int(part.endswith("_lat")), 0 if part.startswith("force") else 1

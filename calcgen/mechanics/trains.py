"""A train of axles and where it stands on a beam. Signs and units are those of `calcgen.mechanics.beam`."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import accumulate
from typing import Final, Literal, TypeAlias

from calcgen.mechanics.beam import BeamModel, PointLoad
from calcgen.mechanics.beam.results import Side

Direction: TypeAlias = Literal["right", "left"]
"""Where the train runs to: its first axle leads, and the others follow behind it."""

BESIDE: Final = 1e-7
"""Part of the beam's length by which a train that stands beside its place is moved to be seen there."""


@dataclass(frozen=True)
class Train:
    """Axle loads, N, down, from the first axle to the last, and the distances between them, m.

    `lateral`: the horizontal force of each axle as a part of its load, to the right where positive.

    Raises
    ------
    ValueError
        Where there is no axle, a load is not finite, or the distances do not fit the axles.
    """

    axles: tuple[float, ...]
    spacings: tuple[float, ...] = ()
    lateral: float = 0.0

    def __post_init__(self) -> None:
        if not self.axles or not all(math.isfinite(value) for value in (*self.axles, self.lateral)):
            raise ValueError("a train needs axles of finite loads")
        if len(self.spacings) != len(self.axles) - 1:
            raise ValueError("a train has one distance less than axles")
        if not all(0.0 < spacing < math.inf for spacing in self.spacings):
            raise ValueError("the distance between two axles must be positive")

    @property
    def offsets(self) -> tuple[float, ...]:
        """Distance of each axle behind the first, m."""
        return tuple(accumulate(self.spacings, initial=0.0))

    @property
    def directions(self) -> tuple[Direction, ...]:
        """Directions that differ: a train that is the same from both ends runs to the right only."""
        same = self.axles == self.axles[::-1] and self.spacings == self.spacings[::-1]
        return ("right",) if same else ("right", "left")


@dataclass(frozen=True)
class Position:
    """Where a train stands: the place of its first axle, m, and the direction in which it runs.

    Where the effect jumps there, as the shear does when an axle passes, or a reaction when one leaves a free
    end, it is a limit: the train stands just `beside` that place, on the side named.
    """

    x: float
    direction: Direction
    beside: Side | None = None

    def places(self, train: Train) -> tuple[float, ...]:
        """Give the place of each axle along the beam, m, on the beam or off it."""
        return tuple(self.x - sense(self.direction) * offset for offset in train.offsets)

    def loads(self, train: Train, model: BeamModel) -> tuple[PointLoad, ...]:
        """Give the loads of the axles that stand on the beam, its ends included.

        A train beside its place is moved by `BESIDE` of the beam's length.
        """
        nudge = {"left": -BESIDE, "right": BESIDE, None: 0.0}[self.beside] * model.length
        found: list[PointLoad] = []
        for x, load in zip(self.places(train), train.axles, strict=True):
            place = x + nudge
            if -model.tolerance <= place <= model.length + model.tolerance:
                place = min(max(place, 0.0), model.length)
                found.append(PointLoad(place, load))
                if train.lateral != 0.0:
                    found.append(PointLoad(place, train.lateral * load, "lateral"))
        return tuple(found)


def sense(direction: Direction) -> float:
    """Give 1 for a train that runs to the right, -1 for one that runs to the left."""
    return 1.0 if direction == "right" else -1.0

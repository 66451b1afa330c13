"""What acts on a beam in combinations, and the extreme effects that it has, each with its cause."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import Load
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.trains import Position, Train


@dataclass(frozen=True)
class Actions:
    """What acts on a beam, by cases.

    `cases`: the loads of each case. `patterned`: the cases that may act on some lengths of the beam and not
    on others. `trains`: those of each case, beside its loads; several of one case cross independently.
    """

    cases: Mapping[str, Sequence[Load]]
    patterned: frozenset[str] = frozenset()
    trains: Mapping[str, tuple[Train, ...]] = field(default_factory=dict)


@dataclass(frozen=True)
class Combination:
    """Cases by name, each with its factor; a case without a factor does not act."""

    name: str
    factors: Mapping[str, float]


@dataclass(frozen=True)
class Pattern:
    """The lengths of the beam, counted from 0 from the left, on which a case acts."""

    case: str
    lengths: tuple[int, ...]


@dataclass(frozen=True)
class Placed:
    """Where a train of a case stands: `train` counts from 0 among those of the case."""

    case: str
    train: int
    position: Position


@dataclass(frozen=True)
class Effect:
    """An extreme value, where it occurs and what causes it.

    `x`, m, and the `side` of it on which the value holds. `patterns` has every case in patterns that the
    combination takes, also where no length is loaded; `trains` those that stand on the beam.
    """

    value: float
    x: float
    side: Side
    combination: str
    patterns: tuple[Pattern, ...] = ()
    trains: tuple[Placed, ...] = ()


@dataclass(frozen=True)
class EffectRange:
    """The largest and the smallest value."""

    max: Effect
    min: Effect

    @property
    def abs(self) -> Effect:
        """The one of larger magnitude, with its sign."""
        return self.min if -self.min.value > self.max.value else self.max


@dataclass(frozen=True)
class Governs:
    """A stretch of the envelope, from `start` to `end`, m, on which one arrangement gives the extreme.

    `others`: combinations that give the same extreme all along it, in the order written.
    """

    start: float
    end: float
    combination: str
    patterns: tuple[Pattern, ...] = ()
    others: tuple[str, ...] = ()


@dataclass(frozen=True, eq=False)
class Curve:
    """Values (k,) of one state along the beam: a combination, its cases in patterns on these lengths."""

    combination: str
    patterns: tuple[Pattern, ...]
    values: FloatArray


@dataclass(frozen=True, eq=False)
class Band:
    """An envelope for drawing: smallest and largest value (k,) at places `x`, with both sides of nodes.

    `governs_low`, `governs_high` follow one another along the beam (see `calcgen.mechanics.governing`). The
    position of a train changes from place to place and is not told: ask `Effects.at`. `curves` are those of
    the states between the edges, none where there are more than `FEW` of them or a train makes them endless.
    """

    x: FloatArray
    low: FloatArray
    high: FloatArray
    governs_low: tuple[Governs, ...] = ()
    governs_high: tuple[Governs, ...] = ()
    curves: tuple[Curve, ...] = ()


FEW: Final = 6
"""States up to which a band has the curve of each."""

"""What governs along an envelope: the fewest stretches on each of which one arrangement gives the extreme."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import pairwise
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray

State: TypeAlias = tuple[int, FloatArray]
"""A combination by its number, and the signs (j,) of the shares that tell which parts act."""


@dataclass(frozen=True, eq=False)
class Governed:
    """A stretch from `start` to `end`, m; `equal` are further combinations that give the same along it."""

    start: float
    end: float
    state: State
    equal: tuple[int, ...]


def stretches(
    x: FloatArray,
    elements: int,
    sums: FloatArray,
    signs: FloatArray,
    tie: float,
    value: Callable[[State, slice], FloatArray],
) -> Iterator[Governed]:
    """Tell what gives the largest of `sums`, from the start to the end of the beam.

    `sums` (c, k) of each combination at places `x` (k,), as many in each element as in any other and both
    ends of it among them; `signs` (j, k) of the shares of parts that act where they add. `value` gives the
    sum of one state at some of the places.

    Combinations nearer to each other than `tie` are equal: a stretch goes on as long as one of them holds, so
    that nothing flickers where all are equal. A share that is 0 at a single place is as at the place before.
    Places at the ends of elements are left out, as an effect may be 0 there. Where what governs changes
    within an element, the place is interpolated between two of the places, to the second order in their
    distance; what governs on less than that distance may be missed.
    """
    inner = np.arange(len(x)).reshape(elements, -1)[:, 1:-1].ravel()
    ties = (sums >= sums.max(axis=0) - tie)[:, inner]
    shares = signs[:, inner]
    alone = (shares[:, 1:-1] == 0.0) & (shares[:, :-2] != 0.0) & (shares[:, 2:] != 0.0)
    shares[:, 1:-1] = np.where(alone, shares[:, :-2], shares[:, 1:-1])
    new = np.any(np.diff(ties, axis=1), axis=0) | np.any(np.diff(shares, axis=1) != 0.0, axis=0)
    firsts = [0, *(np.flatnonzero(new) + 1).tolist()]
    runs: list[tuple[int, NDArray[np.bool_], FloatArray]] = []  # first place, combinations that hold, signs
    for first in firsts:
        holding, share = ties[:, first], shares[:, first]
        if runs:
            begun, before, sign = runs[-1]
            if np.any(before & holding) and np.array_equal(sign, share):
                runs[-1] = begun, before & holding, sign
                continue
        runs.append((first, holding, share))
    states = [(int(np.argmax(holding)), sign) for _, holding, sign in runs]
    edges = [float(x[0])]
    for (one, other), run in zip(pairwise(states), runs[1:], strict=True):
        last, first = int(inner[run[0] - 1]), int(inner[run[0]])
        between = slice(last, first + 1)
        edges.append(_change(x[between], value(one, between) - value(other, between)))
    edges.append(float(x[-1]))
    for state, (_, holding, _), (start, end) in zip(states, runs, pairwise(edges), strict=True):
        yield Governed(start, end, state, tuple(np.flatnonzero(holding)[1:].tolist()))


def _change(x: FloatArray, lead: FloatArray) -> float:
    """Give the place at which the lead of one state over the next is lost."""
    behind = np.flatnonzero(lead < 0.0)
    if not len(behind) or behind[0] == 0:  # equal but for rounding at one of the ends
        return float(x[-1] if not len(behind) else x[0])
    after = int(behind[0])
    rest = float(lead[after - 1])
    return float(x[after - 1] + (x[after] - x[after - 1]) * rest / (rest - float(lead[after])))

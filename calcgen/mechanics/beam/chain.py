"""The equations of a chain of elements: conditions at its nodes on the states of the elements beside them.

Householder reflections reduce them: every second state is eliminated, all of them in one step, until the
first and the last are left, in time proportional to the number of elements. What the reflections, which mix
large and small rows, have rounded, iterative refinement by `missing` takes away. (Reduction by
orthogonal steps in halves: Wright, SIAM Journal on Scientific and Statistical Computing 13 (1992), 742-764,
from memory.)
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray


@dataclass(frozen=True, eq=False)
class _Level:
    """Every second of q + 1 states eliminated by pairs of the q equations between neighbours.

    `turn` (q // 2, 2m, 2m) has the reflections of each pair, and the state between them is own⁻¹ (known -
    before @ state before - after @ state after), (q // 2, m, m) each.
    """

    turn: FloatArray
    own: FloatArray
    before: FloatArray
    after: FloatArray


@dataclass(frozen=True, eq=False)
class Chain:
    """The conditions of a chain of n elements, reduced to the first and the last of their states.

    `left`, `right` (n + 1, m, m) are the conditions at the nodes and `transfer` (n, m, m) what an element
    makes of its start state. `closing` has the triangle and the reflections of what is left at last.
    """

    left: FloatArray
    right: FloatArray
    transfer: FloatArray
    levels: Sequence[_Level]
    closing: tuple[FloatArray, FloatArray]

    @classmethod
    def reduced(cls, left: FloatArray, right: FloatArray, transfer: FloatArray) -> Chain:
        """Eliminate the states between the first and the last, whatever the right sides are."""
        n, m = transfer.shape[:2]
        carried = left[1:] @ transfer
        at_start, at_end = right[0, _held(m)], carried[-1, _held(m)]
        a, b = carried[:-1], right[1:-1]  # a @ state before + b @ state after the inner nodes
        levels: list[_Level] = []
        while len(a) > 1:
            pairs = len(a) // 2
            even, odd, rest = slice(0, 2 * pairs, 2), slice(1, 2 * pairs, 2), slice(2 * pairs, None)
            q, r = np.linalg.qr(np.concatenate([b[even], a[odd]], axis=1), mode="complete")
            turn = q.swapaxes(1, 2)
            before, after = turn[:, :, :m] @ a[even], turn[:, :, m:] @ b[odd]
            levels.append(_Level(turn, r[:, :m], before[:, :m], after[:, :m]))
            a = np.concatenate([before[:, m:], a[rest]])
            b = np.concatenate([after[:, m:], b[rest]])
        size = m if n == 1 else 2 * m
        ends = np.zeros((size, size))
        ends[: m // 2, :m] = at_start
        ends[m // 2 : m, size - m :] = at_end
        if n > 1:
            ends[m:] = np.concatenate([a[0], b[0]], axis=1)
        q, r = np.linalg.qr(ends)
        return cls(left, right, transfer, levels, (r, q.T))

    def solve(self, known: FloatArray) -> FloatArray:
        """Give the start state of each element, (n, m, cases), for the right sides (n + 1, m, cases)."""
        m, cases = known.shape[1:]
        carried, reflected = known[1:-1], []
        for level in self.levels:
            pairs = len(level.own)
            turned = level.turn @ carried[: 2 * pairs].reshape(pairs, 2 * m, cases)
            reflected.append(turned[:, :m])
            carried = np.concatenate([turned[:, m:], carried[2 * pairs :]])
        r, turn = self.closing
        ends = np.concatenate([known[0, _held(m)], known[-1, _held(m)], *carried])
        states = np.linalg.solve(r, turn @ ends).reshape(-1, m, cases)
        for level, own in zip(reversed(self.levels), reversed(reflected), strict=True):
            pairs = len(own)
            between = own - level.before @ states[:pairs] - level.after @ states[1 : pairs + 1]
            whole = np.empty((len(states) + pairs, m, cases))
            whole[: 2 * pairs : 2] = states[:pairs]
            whole[1 : 2 * pairs : 2] = np.linalg.solve(level.own, between)
            whole[2 * pairs :] = states[pairs:]
            states = whole
        return states

    def missing(self, known: FloatArray, states: FloatArray) -> FloatArray:
        """Give what the right sides at the nodes lack of being met by the states."""
        lacking = known.copy()
        lacking[1:] -= self.left[1:] @ (self.transfer @ states)
        lacking[:-1] -= self.right[:-1] @ states
        return lacking


def _held(m: int) -> list[int]:
    """Rows of the conditions that hold at an end of the beam: the last two of four in each plane."""
    return [row for row in range(m) if row % 4 >= 2]

"""Whether the supports and hinges hold a beam, found from the motions that bend nothing."""

from __future__ import annotations

import math
from bisect import bisect_right
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.model import FREE, BeamModel, Plane, Support

VANISHING = 1e-9
"""Part of a motion's size below which it counts as none."""


@dataclass(eq=False)
class UnstableBeam(Exception):  # noqa: N818 - the name says what is wrong with the beam
    """The beam, or some of its parts between hinges, can move in `plane` without bending.

    `parts` are the start and end, m, of those that move, from left to right, and `hinges` those at which they
    bend or end. The first of them rotates, or `shifts` without rotation. `pivot` is the place about which a
    beam without hinges turns, m; None where it can shift, too.
    """

    plane: Plane
    parts: tuple[tuple[float, float], ...]
    hinges: tuple[float, ...]
    pivot: float | None
    shifts: bool

    def __str__(self) -> str:
        way = "vertically" if self.plane == "vertical" else "laterally"
        if self.pivot is not None:
            return f"the beam can turn {way} about the only support that holds it, at {self.pivot:g} m"
        if not self.hinges:
            return f"nothing holds the beam {way}"
        (start, end), *others = self.parts
        motion = "shift" if self.shifts else "rotate"
        at_ends = [x for x in (start, end) if x in self.hinges]
        hinges = "a hinge at each end" if len(at_ends) == 2 else f"a hinge at {at_ends[0]:g} m"
        sideways = "" if self.plane == "vertical" else " sideways"
        text = f"the stretch between {start:g} m and {end:g} m can {motion}{sideways}: {hinges}"
        if not others:
            return text
        *more, last = (f"that between {a:g} m and {b:g} m" for a, b in others)
        moved = f"{', '.join(more)} and {last} move" if more else f"{last} moves"
        return f"{text}; {moved} with it"


def require_stable(model: BeamModel, plane: Plane) -> None:
    """Raise UnstableBeam where the beam can move in `plane` without bending.

    The stiffness is positive definite, so the null space of the stiffness matrix is exactly the set of
    motions in which each part between hinges stays straight. A sweep from left to right keeps, part by
    part, the straight motions that the supports so far allow: columns (deflection at the part's start,
    rotation times the beam's length).
    """
    joints = (0.0, *model.hinges, model.length)
    motions = np.eye(2)
    swept: list[FloatArray] = []
    for start, end in pairwise(joints):
        motions = _nullspace(_held(model, plane, start, end) @ motions, motions)
        swept.append(motions)
        at_end = _deflection(model, start, end) @ motions
        stopped = _nullspace(at_end[None, :], motions) if end < model.length else motions
        if stopped.shape[1]:
            raise _describe(model, plane, swept, stopped)
        # The next part starts with the deflection that this one can give its end, and any rotation.
        motions = np.eye(2) if motions.shape[1] else np.array([[0.0], [1.0]])


def _held(model: BeamModel, plane: Plane, start: float, end: float) -> FloatArray:
    """Rows that a part's motions must bring to zero; a support at a hinge acts on the part to its left."""
    after = -math.inf if start == 0.0 else start + model.tolerance
    first, last = (bisect_right(model.supports, x, key=_place) for x in (after, end + model.tolerance))
    rows = [np.zeros(2)]
    for support in model.supports[first:last]:
        deflection, rotation = support.restraints(plane)
        if deflection > FREE:
            rows.append(_deflection(model, start, support.x))
        if rotation > FREE:
            rows.append(np.array([0.0, 1.0]))
    return np.array(rows)


def _place(support: Support) -> float:
    return support.x


def _deflection(model: BeamModel, start: float, x: float) -> FloatArray:
    return np.array([1.0, (x - start) / model.length])


def _nullspace(rows: FloatArray, motions: FloatArray) -> FloatArray:
    """Motions, as columns, that `rows` (in terms of the columns of `motions`) bring to zero."""
    if not motions.shape[1]:
        return motions
    rows = np.vstack([rows, np.zeros((2, motions.shape[1]))])  # at least as many as columns
    _, sizes, directions = np.linalg.svd(rows, full_matrices=False)
    rank = int(np.sum(sizes > VANISHING))
    return np.asarray(motions @ directions[rank:].T)


def _describe(model: BeamModel, plane: Plane, swept: list[FloatArray], free: FloatArray) -> UnstableBeam:
    """Follow a free motion of the last part swept back to the left, to the first part that joins in it."""
    joints = (0.0, *model.hinges, model.length)
    last = first = len(swept) - 1
    moving = free[:, 0]
    while first > 0 and abs(moving[0]) > VANISHING:
        first -= 1
        motions = swept[first]
        at_end = _deflection(model, joints[first], joints[first + 1]) @ motions
        moving = motions @ (at_end / (at_end @ at_end) * moving[0])
    parts = tuple(pairwise(joints[first : last + 2]))
    hinges = tuple(x for x in model.hinges if joints[first] <= x <= joints[last + 1])
    deflection, rotation = float(free[0, 0]), float(free[1, 0]) / model.length
    turns = not model.hinges and free.shape[1] == 1 and abs(free[1, 0]) > VANISHING
    pivot = joints[last] - deflection / rotation if turns else None
    return UnstableBeam(plane, parts, hinges, pivot, abs(moving[1]) <= VANISHING)

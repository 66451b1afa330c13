"""The linear system of a beam: a state for each element, conditions at each node, one solution for all cases.

The unknowns are deflection, slope, moment and shear at the start of each element, not deflections and
rotations alone. The equations then multiply by the length h of an element and never divide by h³, as an
element stiffness does, so a millimetre beside ten metres costs no digits; moment and shear come out of the
system with its full accuracy instead of from differences of deflections. The system is block-bidiagonal:
`Chain` solves it. Steps of iterative refinement follow, and the size of the last tells how much was rounded,
part by part.
With shear deformation (Timoshenko) the section turns by another angle than the axis: w' = rotation + V/GA_s,
rotation' = -κ. The rotation of the section is then the unknown, as it is what supports and springs hold and
what stays continuous; without shear the two are one.
(First-order form of such systems: Ascher, Mattheij and Russell, Numerical Solution of Boundary Value Problems
for Ordinary Differential Equations, chapters 4 and 7, from memory.)
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.chain import Chain
from calcgen.mechanics.beam.loads import Load, LoadField, on_mesh, places, validate
from calcgen.mechanics.beam.mesh import Mesh, divide
from calcgen.mechanics.beam.model import PLANES, RIGID, BeamModel, Plane
from calcgen.mechanics.beam.piecewise import DEGREE, integral
from calcgen.mechanics.beam.results import PARTS, CaseSolution
from calcgen.mechanics.beam.stability import require_stable

W, ROTATION, M, V = range(4)
"""Order of a state; a solution lists its parts as `PARTS` does, M and V at the same places."""

ROUNDING = 1e-14
"""Part of the largest term of the scaled system below which a result is rounding error."""
REFINED = 10.0
"""A result below so many times what the last refinement changed is rounding error, too."""
REFINEMENTS, ENOUGH = 4, 1e-11
"""Steps of refinement at most, and the part of a state that a step changes when it is the last."""


def solve(model: BeamModel, cases: Mapping[str, Sequence[Load]]) -> dict[str, CaseSolution]:
    """Solve a beam for each of its load cases, on one mesh.

    Both planes are solved together where the stiffness couples them. The lateral plane stays at rest, and
    needs no supports, where nothing couples and no case loads it; it has no results where its stiffness is
    not known.

    Parameters
    ----------
    model
        The beam.
    cases
        Loads by the name of their case.

    Raises
    ------
    UnstableBeam
        Where the supports and hinges leave a motion free.
    ValueError
        For a load that the model cannot carry.
    """
    loads = [load for case in cases.values() for load in case]
    for load in loads:
        validate(load, model)
    mesh = divide(model, [x for load in loads for x in places(load)])
    lateral = model.coupled or any(load.plane == "lateral" for load in loads)
    planes = PLANES if lateral else PLANES[:1]
    for plane in planes:
        require_stable(model, plane)
    system = _System.scaled(model, mesh, planes)
    if not cases:
        return {}
    field = on_mesh(list(cases.values()), mesh, planes)
    solutions = system.solutions(*system.solve(field), field, len(model.planes))
    return dict(zip(cases, solutions, strict=True))


@dataclass(frozen=True, eq=False)
class _Spread:
    """What acts along the n elements in each case, scaled.

    `intensity` and `couples`: (n, cases, p, 2), at the start and the end; `curvature`: (n, cases, p).
    """

    intensity: FloatArray
    couples: FloatArray
    curvature: FloatArray


@dataclass(frozen=True, eq=False)
class _System:
    """A beam in numbers near 1: in units of `length`, of `stiffness`, and of force stiffness/length²."""

    model: BeamModel
    mesh: Mesh
    planes: tuple[Plane, ...]
    length: float
    stiffness: float
    h: FloatArray
    """Lengths of the elements, (n,), scaled."""
    flexibility: FloatArray
    """Inverse of the bending stiffness of each element, (n, p, p), scaled."""
    shear_flexibility: FloatArray
    """Inverse of the shear stiffness of each element, (n, p), scaled; zero where it bends alone."""
    restraints: FloatArray
    """Stiffness against deflection and rotation at each node, (n + 1, p, 2), scaled."""

    @classmethod
    def scaled(cls, model: BeamModel, mesh: Mesh, planes: tuple[Plane, ...]) -> _System:
        p = len(planes)
        length = model.length / max(1, len(model.supports) - 1)
        full = np.array([[[s.vertical, s.coupling], [s.coupling, s.lateral or 0.0]] for s in mesh.stiffness])
        matrices = full[:, :p, :p]
        stiffness = float(np.sqrt(matrices[:, 0, 0].min() * matrices[:, 0, 0].max()))
        restraints = np.zeros((len(mesh.nodes), p, 2))
        for node, support in zip(mesh.supports, model.supports, strict=True):
            restraints[node] = [support.restraints(plane) for plane in planes]
        restraints *= np.array([length**3, length]) / stiffness
        flexibility = np.asarray(np.linalg.inv(matrices / stiffness), dtype=np.float64)
        GA_s = np.array([[s.vertical, s.lateral] for s in mesh.shear])[:, :p] * length**2 / stiffness
        return cls(
            model, mesh, planes, length, stiffness, mesh.lengths / length, flexibility, 1.0 / GA_s, restraints
        )

    @property
    def unit_force(self) -> float:
        return self.stiffness / self.length**2

    @property
    def units(self) -> FloatArray:
        """Size of one scaled unit of w, slope, M, V and rotation."""
        return np.array([self.length, 1.0, self.stiffness / self.length, self.unit_force, 1.0])

    def solve(self, field: LoadField) -> tuple[FloatArray, FloatArray]:
        """Give w, rotation, M and V on the elements in c cases, and the size of their rounding, scaled.

        Coefficients (n, c, 4, p, 6), and (4, p, c).
        """
        n, p = len(self.h), len(self.planes)
        m, cases = 4 * p, field.curvature.shape[1]
        unit_states = np.broadcast_to(np.eye(m).reshape(m, 4, p), (n, m, 4, p))
        no_load = _Spread(np.zeros((n, 1, p, 2)), np.zeros((n, 1, p, 2)), np.zeros((n, 1, p)))
        # What each part of an element's start state adds to its end state: (n, part of end, part of start).
        transfer = self._march(unit_states, no_load).sum(axis=-1).reshape(n, m, m).swapaxes(1, 2)
        loads = _Spread(
            field.intensity * self.length / self.unit_force,
            field.moment_intensity / self.unit_force,
            field.curvature * self.length,
        )
        under_load = self._march(np.zeros((n, cases, 4, p)), loads).sum(axis=-1).reshape(n, cases, m)
        left, right, known = self._conditions(field)
        known[1:] -= left[1:] @ under_load.swapaxes(1, 2)
        chain = Chain.reduced(left, right, transfer)
        states = chain.solve(known)  # (n, m, cases)
        for _ in range(REFINEMENTS):
            refined = chain.solve(chain.missing(known, states))
            states += refined
            if np.all(np.abs(refined).max(axis=0) <= ENOUGH * np.abs(states).max(axis=0)):
                break
        start = states.swapaxes(1, 2).reshape(n, cases, 4, p)
        coefficients = self._march(start, loads)
        changed = np.abs(refined).max(axis=0).reshape(4, p, cases)
        rounding = REFINED * changed + ROUNDING * np.abs(coefficients).max(axis=(0, 2, 3, 4))
        return coefficients, rounding

    def _march(self, start: FloatArray, loads: _Spread) -> FloatArray:
        """Integrate along the elements from their start states.

        `start` is (n, cases, 4, p); the result is (n, cases, 4, p, 6), polynomials in the part of the
        element's length that is passed. V' = -q, M' = V + m, rotation' = -κ, w' = rotation + γ.
        """
        n, cases, _, p = start.shape
        h = self.h[:, None, None, None]

        def linear(ends: FloatArray) -> FloatArray:
            result = np.zeros((n, ends.shape[1], p, DEGREE + 1))
            result[..., 0] = ends[..., 0]
            result[..., 1] = ends[..., 1] - ends[..., 0]
            return result

        def constant(part: int) -> FloatArray:
            result = np.zeros((n, cases, p, DEGREE + 1))
            result[..., 0] = start[:, :, part]
            return result

        shear = constant(V) - h * integral(linear(loads.intensity), -1)
        moment = constant(M) + h * integral(shear + linear(loads.couples), -1)
        curvature = np.einsum("nij,ncjk->ncik", self.flexibility, moment)
        curvature[..., 0] += loads.curvature
        rotation = constant(ROTATION) - h * integral(curvature, -1)
        slope = rotation + self.shear_flexibility[:, None, :, None] * shear
        deflection = constant(W) + h * integral(slope, -1)
        return np.stack([deflection, rotation, moment, shear], axis=2)

    def _conditions(self, field: LoadField) -> tuple[FloatArray, FloatArray, FloatArray]:
        """Give the conditions at the nodes on the states beside them: L @ left + R @ right = g.

        L and R are (n + 1, 4p, m), g is (n + 1, 4p, c). At the two ends one side is void, and of the four
        conditions in a plane the last two hold.
        """
        nodes, p = self.restraints.shape[:2]
        cases = field.curvature.shape[1]
        hinge = np.zeros(nodes, dtype=bool)
        hinge[list(self.mesh.hinges)] = True
        forces, couples, settlements = (
            np.moveaxis(each, 1, 2) / unit  # (n + 1, p, c)
            for each, unit in (
                (field.forces, self.unit_force),
                (field.couples, self.unit_force * self.length),
                (field.settlements, self.length),
            )
        )
        left, right, here = np.zeros((3, nodes, p, 4, 4, p))  # (node, plane, condition, part, plane)
        g = np.zeros((nodes, p, 4, cases))
        for i in range(p):
            hold, turn = self.restraints[:, i].T
            given, given_turn = hold == RIGID, turn == RIGID
            # 0: the deflection is continuous. 1: so is the rotation, unless there is a hinge.
            left[:, i, 0, W, i], right[:, i, 0, W, i] = 1.0, -1.0
            left[hinge, i, 1, M, i] = 1.0
            left[~hinge, i, 1, ROTATION, i], right[~hinge, i, 1, ROTATION, i] = 1.0, -1.0
            # 2: the moment rises by the couple, less the support's moment, unless the rotation is given.
            here[given_turn, i, 2, ROTATION, i] = 1.0
            right[hinge, i, 2, M, i] = 1.0
            free = ~given_turn & ~hinge
            k = turn[free]
            left[free, i, 2, M, i], right[free, i, 2, M, i] = -1.0 / (1.0 + k), 1.0 / (1.0 + k)
            here[free, i, 2, ROTATION, i] = k / (1.0 + k)
            g[free, i, 2] = couples[free, i] / (1.0 + k)[:, None]
            # 3: the shear falls by the load and rises by the reaction, unless the deflection is given.
            here[given, i, 3, W, i] = 1.0
            g[given, i, 3] = settlements[given, i]
            k = hold[~given]
            left[~given, i, 3, V, i], right[~given, i, 3, V, i] = -1.0 / (1.0 + k), 1.0 / (1.0 + k)
            here[~given, i, 3, W, i] = -k / (1.0 + k)
            moved = k[:, None] * settlements[~given, i]
            g[~given, i, 3] = -(forces[~given, i] + moved) / (1.0 + k)[:, None]
        right[:-1] += here[:-1]
        left[-1] += here[-1]
        m = 4 * p
        return left.reshape(nodes, m, m), right.reshape(nodes, m, m), g.reshape(nodes, m, cases)

    def solutions(
        self, coefficients: FloatArray, rounding: FloatArray, field: LoadField, planes: int
    ) -> list[CaseSolution]:
        """Take the cases back to SI units; reactions are the jumps of shear and moment at the supports."""
        n, cases, _, p, _ = coefficients.shape
        coefficients = coefficients.swapaxes(0, 1)
        rotation, shear = coefficients[:, :, ROTATION], coefficients[:, :, V]
        slope = rotation + self.shear_flexibility[:, :, None] * shear
        parts = np.stack([coefficients[:, :, W], slope, coefficients[:, :, M], shear, rotation], axis=2)
        noise = np.zeros((cases, len(PARTS), planes))
        noise[:, :, :p] = np.moveaxis(rounding[[W, ROTATION, M, V, ROTATION]], 2, 0) * self.units[:, None]
        sheared = self.shear_flexibility.max(axis=0)[:, None] * rounding[V]
        noise[:, PARTS.index("slope"), :p] += sheared.T
        pieces = np.zeros((cases, n, len(PARTS), planes, DEGREE + 1))
        pieces[:, :, :, :p] = parts * self.units[:, None, None]
        sides = np.zeros((2, cases, n + 1, len(PARTS), planes))
        sides[0, :, 1:] = pieces.sum(axis=-1)
        sides[1, :, :-1] = pieces[..., 0]
        at = list(self.mesh.supports)
        jumps = (sides[1] - sides[0])[:, at]
        reactions = np.stack([jumps[:, :, V], -jumps[:, :, M]], axis=-1)
        reactions[:, :, :p, 0] += field.forces[at].swapaxes(0, 1)
        reactions[:, :, :p, 1] += field.couples[at].swapaxes(0, 1)
        return [
            CaseSolution(self.model, self.mesh.nodes, *each)
            for each in zip(pieces, reactions, noise, strict=True)
        ]

"""The linear system of a beam: a state for each element, conditions at each node, one solution for all cases.

The unknowns are deflection, slope, moment and shear at the start of each element, not deflections and
rotations alone. The equations then multiply by the length h of an element and never divide by h³, as an
element stiffness does, so a millimetre beside ten metres costs no digits; moment and shear come out of the
system with its full accuracy instead of from differences of deflections. The system is block-bidiagonal,
and Householder reflections reduce it block by block in time proportional to the number of elements.
(First-order form and orthogonal reduction of such systems: Ascher, Mattheij and Russell, Numerical Solution
of Boundary Value Problems for Ordinary Differential Equations, chapters 4 and 7, from memory.)
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.loads import Load, LoadField, on_mesh, places, validate
from calcgen.mechanics.beam.mesh import Mesh, divide
from calcgen.mechanics.beam.model import PLANES, RIGID, BeamModel, Plane
from calcgen.mechanics.beam.piecewise import DEGREE, integral
from calcgen.mechanics.beam.results import CaseSolution
from calcgen.mechanics.beam.stability import require_stable

W, SLOPE, M, V = range(4)
"""Order of a state."""

_Conditions: TypeAlias = tuple[FloatArray, FloatArray, FloatArray]

ROUNDING = 1e-12
"""Part of the largest term of the scaled system below which a result is rounding error."""


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
    fields = [on_mesh(case, mesh, planes) for case in cases.values()]
    return {
        name: system.solution(coefficients, field, len(model.planes))
        for name, field, coefficients in zip(cases, fields, system.solve(fields), strict=True)
    }


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
        return cls(model, mesh, planes, length, stiffness, mesh.lengths / length, flexibility, restraints)

    @property
    def unit_force(self) -> float:
        return self.stiffness / self.length**2

    @property
    def units(self) -> FloatArray:
        """Size of one scaled unit of each part of a state, in the order w, slope, M, V."""
        return np.array([self.length, 1.0, self.stiffness / self.length, self.unit_force])

    def solve(self, fields: Sequence[LoadField]) -> list[FloatArray]:
        """Give for each case the coefficients (n, 4, p, 6) of w, slope, M and V on its elements, scaled."""
        n, p = len(self.h), len(self.planes)
        m = 4 * p
        unit_states = np.broadcast_to(np.eye(m).reshape(m, 4, p), (n, m, 4, p))
        no_load = np.zeros((n, 1, p, 2))
        # What each part of an element's start state adds to its end state: (n, part of end, part of start).
        transfer = self._march(unit_states, no_load, no_load).sum(axis=-1).reshape(n, m, m).swapaxes(1, 2)
        intensity = np.stack([field.intensity for field in fields], axis=1) * self.length / self.unit_force
        couples = np.stack([field.moment_intensity for field in fields], axis=1) / self.unit_force
        at_rest = np.zeros((n, len(fields), 4, p))
        under_load = self._march(at_rest, intensity, couples).sum(axis=-1).reshape(n, -1, m).swapaxes(1, 2)

        rows = [self._conditions(node, fields) for node in range(n + 1)]
        states = _reduce(rows, transfer, under_load)  # (n, m, cases)
        start = states.swapaxes(1, 2).reshape(n, len(fields), 4, p)
        coefficients = self._march(start, intensity, couples)
        return [coefficients[:, case] for case in range(len(fields))]

    def _march(self, start: FloatArray, intensity: FloatArray, couples: FloatArray) -> FloatArray:
        """Integrate along the elements from their start states.

        `start` is (n, cases, 4, p), the loads are (n, cases, p, 2); the result is (n, cases, 4, p, 6),
        polynomials in the part of the element's length that is passed. V' = -q, M' = V + m, slope' = -κ, w'
        = slope.
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

        shear = constant(V) - h * integral(linear(intensity), -1)
        moment = constant(M) + h * integral(shear + linear(couples), -1)
        curvature = np.einsum("nij,ncjk->ncik", self.flexibility, moment)
        slope = constant(SLOPE) - h * integral(curvature, -1)
        deflection = constant(W) + h * integral(slope, -1)
        return np.stack([deflection, slope, moment, shear], axis=2)

    def _conditions(self, node: int, fields: Sequence[LoadField]) -> _Conditions:
        """Give the conditions at a node on the states beside it: L @ left + R @ right = g.

        L and R are (k, m), g is (k, cases); k = 4p, and 2p at the two ends, where one side is void.
        """
        p, cases = len(self.planes), len(fields)
        first, last = node == 0, node == len(self.h)
        hinge = node in self.mesh.hinges
        left, right = np.zeros((p, 4, 4, p)), np.zeros((p, 4, 4, p))  # (plane, condition, part, plane)
        g = np.zeros((p, 4, cases))
        for i in range(p):
            hold, hold_rotation = self.restraints[node, i]
            forces = np.array([field.forces[node, i] for field in fields]) / self.unit_force
            couples = np.array([field.couples[node, i] for field in fields]) / (self.unit_force * self.length)
            settlements = np.array([field.settlements[node, i] for field in fields]) / self.length
            here = left if last else right
            # 0: the deflection is continuous. 1: so is the slope, unless there is a hinge.
            left[i, 0, W, i], right[i, 0, W, i] = 1.0, -1.0
            if hinge:
                left[i, 1, M, i] = 1.0
            else:
                left[i, 1, SLOPE, i], right[i, 1, SLOPE, i] = 1.0, -1.0
            # 2: the moment rises by the couple, less the support's moment, unless the rotation is given.
            if hold_rotation == RIGID:
                here[i, 2, SLOPE, i] = 1.0
            elif hinge:
                right[i, 2, M, i] = 1.0
            else:
                size = 1.0 + hold_rotation
                left[i, 2, M, i], right[i, 2, M, i] = -1.0 / size, 1.0 / size
                here[i, 2, SLOPE, i] = hold_rotation / size
                g[i, 2] = couples / size
            # 3: the shear falls by the load and rises by the reaction, unless the deflection is given.
            if hold == RIGID:
                here[i, 3, W, i] = 1.0
                g[i, 3] = settlements
            else:
                size = 1.0 + hold
                left[i, 3, V, i], right[i, 3, V, i] = -1.0 / size, 1.0 / size
                here[i, 3, W, i] = -hold / size
                g[i, 3] = -(forces + hold * settlements) / size
        kept = slice(2, 4) if first or last else slice(0, 4)
        m = 4 * p
        return left[:, kept].reshape(-1, m), right[:, kept].reshape(-1, m), g[:, kept].reshape(-1, cases)

    def solution(self, coefficients: FloatArray, field: LoadField, planes: int) -> CaseSolution:
        """Take one case back to SI units; the reactions are the jumps of shear and moment at the supports."""
        n, p = len(self.h), len(self.planes)
        noise = np.zeros((4, planes))
        noise[:, :p] = ROUNDING * np.abs(coefficients).max() * self.units[:, None]
        pieces = np.zeros((n, 4, planes, DEGREE + 1))
        pieces[:, :, :p] = coefficients * self.units[:, None, None]
        sides = np.zeros((2, n + 1, 4, planes))
        sides[0, 1:] = pieces.sum(axis=-1)
        sides[1, :-1] = pieces[..., 0]
        at = list(self.mesh.supports)
        jumps = (sides[1] - sides[0])[at]
        reactions = np.zeros((len(at), planes, 2))
        reactions[:, :, 0] = jumps[:, V]
        reactions[:, :, 1] = -jumps[:, M]
        reactions[:, :p, 0] += field.forces[at]
        reactions[:, :p, 1] += field.couples[at]
        return CaseSolution(self.model, self.mesh.nodes, pieces, reactions, noise)


def _reduce(rows: Sequence[_Conditions], transfer: FloatArray, under_load: FloatArray) -> FloatArray:
    """Solve for the start state of each element, (n, m, cases).

    With left = transfer @ start + under_load, the conditions at node j concern elements j - 1 and j alone.
    """
    n, m = transfer.shape[:2]
    _, carried, carried_g = rows[0]
    triangles: list[_Conditions] = []
    for element in range(n):
        left, right, g = rows[element + 1]
        height = len(carried)
        own = np.vstack([carried, left @ transfer[element]])
        rest = np.zeros((len(own), m))
        rest[height:] = right
        known = np.vstack([carried_g, g - left @ under_load[element]])
        q, r = np.linalg.qr(own, mode="complete")
        rest, known = q.T @ rest, q.T @ known
        triangles.append((r[:m], rest[:m], known[:m]))
        carried, carried_g = rest[m:], known[m:]
    states = np.zeros((n + 1, m, under_load.shape[2]))
    for element in range(n - 1, -1, -1):
        r, rest, known = triangles[element]
        states[element] = np.linalg.solve(r, known - rest @ states[element + 1])
    return states[:-1]

"""The linear system of a beam: a state for each element, conditions at each node, one solution for all cases.

The unknowns are deflection, slope, moment and shear at the start of each element, not deflections and
rotations alone. The equations then multiply by the length h of an element and never divide by h³, as an
element stiffness does, so a millimetre beside ten metres costs no digits; moment and shear come out of the
system with its full accuracy instead of from differences of deflections. The system is block-bidiagonal,
and Householder reflections reduce it block by block in time proportional to the number of elements. One
step of iterative refinement follows: it takes away what the reflections, which mix large and small rows,
have rounded, and its size tells how much that was, part by part.
With shear deformation (Timoshenko) the section turns by another angle than the axis: w' = rotation + V/GA_s,
rotation' = -κ. The rotation of the section is then the unknown, as it is what supports and springs hold and
what stays continuous; without shear the two are one.
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
from calcgen.mechanics.beam.results import PARTS, CaseSolution
from calcgen.mechanics.beam.stability import require_stable

W, ROTATION, M, V = range(4)
"""Order of a state; a solution lists its parts as `PARTS` does, M and V at the same places."""

_Conditions: TypeAlias = tuple[FloatArray, FloatArray, FloatArray]

ROUNDING = 1e-14
"""Part of the largest term of the scaled system below which a result is rounding error."""
REFINED = 10.0
"""A result below so many times what the refinement changed is rounding error, too."""


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
        name: system.solution(*solved, field, len(model.planes))
        for name, field, solved in zip(cases, fields, system.solve(fields), strict=True)
    }


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

    def solve(self, fields: Sequence[LoadField]) -> list[tuple[FloatArray, FloatArray]]:
        """Give for each case w, rotation, M and V on the elements, and the size of their rounding, scaled.

        Coefficients (n, 4, p, 6), and (4, p).
        """
        n, p = len(self.h), len(self.planes)
        m = 4 * p
        unit_states = np.broadcast_to(np.eye(m).reshape(m, 4, p), (n, m, 4, p))
        no_load = _Spread(np.zeros((n, 1, p, 2)), np.zeros((n, 1, p, 2)), np.zeros((n, 1, p)))
        # What each part of an element's start state adds to its end state: (n, part of end, part of start).
        transfer = self._march(unit_states, no_load).sum(axis=-1).reshape(n, m, m).swapaxes(1, 2)
        loads = _Spread(
            np.stack([field.intensity for field in fields], axis=1) * self.length / self.unit_force,
            np.stack([field.moment_intensity for field in fields], axis=1) / self.unit_force,
            np.stack([field.curvature for field in fields], axis=1) * self.length,
        )
        at_rest = np.zeros((n, len(fields), 4, p))
        under_load = self._march(at_rest, loads).sum(axis=-1).reshape(n, -1, m).swapaxes(1, 2)

        rows = [self._conditions(node, fields) for node in range(n + 1)]
        known = [rows[0][2], *(g - left @ u for (left, _, g), u in zip(rows[1:], under_load, strict=True))]
        chain = _Chain.reduced(rows, transfer)
        states = chain.solve(known)  # (n, m, cases)
        refined = chain.solve(chain.missing(known, states))
        start = (states + refined).swapaxes(1, 2).reshape(n, len(fields), 4, p)
        coefficients = self._march(start, loads)
        changed = np.abs(refined).max(axis=0).reshape(4, p, -1)
        rounding = REFINED * changed + ROUNDING * np.abs(coefficients).max(axis=(0, 2, 3, 4))
        return [(coefficients[:, case], rounding[:, :, case]) for case in range(len(fields))]

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
            # 0: the deflection is continuous. 1: so is the rotation, unless there is a hinge.
            left[i, 0, W, i], right[i, 0, W, i] = 1.0, -1.0
            if hinge:
                left[i, 1, M, i] = 1.0
            else:
                left[i, 1, ROTATION, i], right[i, 1, ROTATION, i] = 1.0, -1.0
            # 2: the moment rises by the couple, less the support's moment, unless the rotation is given.
            if hold_rotation == RIGID:
                here[i, 2, ROTATION, i] = 1.0
            elif hinge:
                right[i, 2, M, i] = 1.0
            else:
                size = 1.0 + hold_rotation
                left[i, 2, M, i], right[i, 2, M, i] = -1.0 / size, 1.0 / size
                here[i, 2, ROTATION, i] = hold_rotation / size
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

    def solution(
        self, coefficients: FloatArray, rounding: FloatArray, field: LoadField, planes: int
    ) -> CaseSolution:
        """Take one case back to SI units; the reactions are the jumps of shear and moment at the supports."""
        n, p = len(self.h), len(self.planes)
        rotation, shear = coefficients[:, ROTATION], coefficients[:, V]
        slope = rotation + self.shear_flexibility[:, :, None] * shear
        parts = np.stack([coefficients[:, W], slope, coefficients[:, M], shear, rotation], axis=1)
        noise = np.zeros((len(PARTS), planes))
        noise[:, :p] = rounding[[W, ROTATION, M, V, ROTATION]] * self.units[:, None]
        noise[PARTS.index("slope"), :p] += (self.shear_flexibility * rounding[V]).max(axis=0)
        pieces = np.zeros((n, len(PARTS), planes, DEGREE + 1))
        pieces[:, :, :p] = parts * self.units[:, None, None]
        sides = np.zeros((2, n + 1, len(PARTS), planes))
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


@dataclass(frozen=True, eq=False)
class _Chain:
    """The conditions of a chain of elements, reduced to triangles by orthogonal steps.

    With left = transfer @ start + under_load, the conditions at node j concern elements j - 1 and j alone.
    `rows` has them node by node, `steps` for each element the reflections, its triangle, (m, m), and what
    couples it to the next element, (m, m).
    """

    rows: Sequence[_Conditions]
    transfer: FloatArray
    steps: Sequence[_Conditions]

    @classmethod
    def reduced(cls, rows: Sequence[_Conditions], transfer: FloatArray) -> _Chain:
        n, m = transfer.shape[:2]
        carried = rows[0][1]
        steps: list[_Conditions] = []
        for element in range(n):
            left, right, _ = rows[element + 1]
            height = len(carried)
            own = np.vstack([carried, left @ transfer[element]])
            rest = np.zeros((len(own), m))
            rest[height:] = right
            q, r = np.linalg.qr(own, mode="complete")
            rest = q.T @ rest
            steps.append((q, r[:m], rest[:m]))
            carried = rest[m:]
        return cls(rows, transfer, steps)

    def solve(self, known: Sequence[FloatArray]) -> FloatArray:
        """Give the start state of each element, (n, m, cases), for the right sides at the nodes."""
        n, m = self.transfer.shape[:2]
        carried = known[0]
        reflected: list[FloatArray] = []
        for element, (q, _, _) in enumerate(self.steps):
            turned = q.T @ np.vstack([carried, known[element + 1]])
            reflected.append(turned[:m])
            carried = turned[m:]
        states = np.zeros((n + 1, m, known[0].shape[1]))
        for element in range(n - 1, -1, -1):
            _, r, rest = self.steps[element]
            states[element] = np.linalg.solve(r, reflected[element] - rest @ states[element + 1])
        return states[:-1]

    def missing(self, known: Sequence[FloatArray], states: FloatArray) -> list[FloatArray]:
        """Give what the right sides at the nodes lack of being met by the states."""
        ends = self.transfer @ states
        lacking = [np.array(each) for each in known]
        for node, (left, right, _) in enumerate(self.rows):
            if node > 0:
                lacking[node] -= left @ ends[node - 1]
            if node < len(states):
                lacking[node] -= right @ states[node]
        return lacking

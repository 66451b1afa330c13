"""Shear flow along thin walls, from shear forces through the shear centre and from torsion.

Stresses and flows are those on the face that is seen looking along the beam: their resultant is V upwards and
V_lat to the left, where dM/dz = V and dM_lat/dz = V_lat; a torque T is clockwise. A flow is positive from the
start of its wall to its end. On that face dq/ds = t dσ/dz, so that q is a parabola along each wall.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.shear import ShearForces, stress_rate
from calcgen.mechanics.walls import Graph, WallSection, flexibility


@dataclass(frozen=True)
class FlowExtreme:
    """The flow q, N/m, and shear stress tau, Pa, of largest magnitude, signed along its wall.

    `wall` is its index, `u` the place as a share of the wall's length, x and y the place, m.
    """

    q: float
    tau: float
    wall: int
    u: float
    x: float
    y: float


@dataclass(frozen=True, eq=False)
class WallFlow:
    """Shear flow q(u) = c_0 + c_1 u + c_2 u², N/m, u from 0 at a wall's start to 1 at its end.

    `coefficients` is (n, 3). The shear stress on the mid-line is q/t.
    """

    graph: Graph
    coefficients: FloatArray

    def at(self, u: FloatArray) -> FloatArray:
        """Flows at shares u, (k,), of each wall's length: (n, k), N/m."""
        return self.along_each(np.broadcast_to(u, (len(self.coefficients), len(u))))

    def along_each(self, u: FloatArray) -> FloatArray:
        """Flows at shares u of its own for each wall, (n, k): (n, k), N/m."""
        c_0, c_1, c_2 = self.coefficients.T[:, :, None]
        q: FloatArray = c_0 + u * (c_1 + u * c_2)
        return q

    def places(self, u: FloatArray) -> FloatArray:
        """Places of the shares u on each wall: (n, k, 2), m."""
        first = self.graph.nodes[self.graph.start]
        return first[:, None, :] + u[None, :, None] * self.graph.along[:, None, :]

    def plus(self, other: WallFlow) -> WallFlow:
        """Add the flow of another force along the same walls."""
        return WallFlow(self.graph, self.coefficients + other.coefficients)

    @property
    def resultant(self) -> Point:
        """The force of the flow on the seen face, N: to the right and upwards."""
        right, up = (self._mean[:, None] * self.graph.along).sum(axis=0).tolist()
        return right, up

    def moment(self, pole: Point) -> float:
        """Moment of the flow about `pole`, N·m, counter-clockwise positive."""
        return float(self._mean @ self.graph.swept(pole))

    @property
    def turns(self) -> FloatArray:
        """Where in each wall q has its vertex, (n,), as a share of the length; an end where it has none."""
        _, c_1, c_2 = self.coefficients.T
        with np.errstate(divide="ignore", invalid="ignore"):
            vertex = -0.5 * c_1 / c_2
        return np.where(np.isfinite(vertex), np.clip(vertex, 0.0, 1.0), 0.0)

    @property
    def greatest_flow(self) -> FlowExtreme:
        """The flow of largest magnitude."""
        return self._extreme(np.ones(len(self.graph.t)))

    @property
    def greatest_stress(self) -> FlowExtreme:
        """The shear stress q/t of largest magnitude."""
        return self._extreme(self.graph.t)

    @property
    def _mean(self) -> FloatArray:
        mean: FloatArray = self.coefficients @ np.array([1.0, 1.0 / 2.0, 1.0 / 3.0])
        return mean

    def _extreme(self, divisor: FloatArray) -> FlowExtreme:
        u = np.column_stack((np.zeros(len(self.graph.t)), self.turns, np.ones(len(self.graph.t))))
        q = self.along_each(u)
        size = np.abs(q) / divisor[:, None]
        wall, k = np.unravel_index(
            int(np.argmax(size >= (1.0 - 1e-9) * size.max())), q.shape
        )  # first of equals
        place = self.graph.nodes[self.graph.start[wall]] + u[wall, k] * self.graph.along[wall]
        value = float(q[wall, k])
        return FlowExtreme(
            value, value / float(self.graph.t[wall]), int(wall), float(u[wall, k]), *place.tolist()
        )


@dataclass(frozen=True, eq=False)
class WallTorsion:
    """Uniform torsion of thin walls, for a clockwise torque T, N·m.

    q : (n,) flow of the cells, N/m, zero outside them; tau_surface : (n,) stress on the surface to the left
    of each wall's direction, Pa, along that direction, and the opposite on its right; zero in walls of cells,
    whose small share Bredt's theory leaves out; rate : G times the twist a length, T/I_t, N/m³.
    """

    graph: Graph
    q: FloatArray
    tau_surface: FloatArray
    rate: float

    @property
    def flow(self) -> WallFlow:
        """The flow of the cells."""
        return WallFlow(self.graph, np.column_stack((self.q, np.zeros_like(self.q), np.zeros_like(self.q))))

    @property
    def tau(self) -> FloatArray:
        """Magnitude of the largest shear stress in each wall, (n,), Pa."""
        return np.abs(self.q / self.graph.t) + np.abs(self.tau_surface)


def wall_flow(section: WallSection, shear: ShearForces) -> WallFlow:
    """Find the shear flow of forces through the shear centre, N/m.

    dσ/dz is that of the general flexure formula on the mid-line. What flows into a node flows out of it; free
    ends have none; each cell is first cut open, and the flows around the cells then undo its twist,
    ∮q/t ds = 0. A force across walls that lie in one line brings no flow along them.
    """
    g = section.graph
    rate = _rate_at_nodes(section, shear)
    at_start, at_end = rate[g.start], rate[g.end]
    force = g.t * g.length
    linear, quadratic = force * at_start, 0.5 * force * (at_end - at_start)
    constant = _cut_open(g, linear + quadratic)
    gap = g.cycles @ (g.length / g.t * (constant + linear / 2.0 + quadratic / 3.0))
    constant = constant - np.linalg.solve(flexibility(g), gap) @ g.cycles
    return WallFlow(g, np.column_stack((constant, linear, quadratic)))


def wall_torsion(section: WallSection, T: float) -> WallTorsion:
    """Find the stresses of uniform torsion by the clockwise torque T, N·m."""
    g = section.graph
    rate = T / section.I_t
    return WallTorsion(g, -rate * section.circulation, np.where(g.in_cell, 0.0, rate * g.t), rate)


def _rate_at_nodes(section: WallSection, shear: ShearForces) -> FloatArray:
    """dσ/dz at the nodes, Pa/m."""
    i = section.inertia
    if not section.in_one_line:
        return stress_rate(i, shear).at(section.graph.nodes)
    direction = section.graph.along[int(np.argmax(section.graph.length))]
    direction = direction / np.hypot(*direction)
    force = shear.V * direction[1] - shear.V_lat * direction[0]
    along = (section.graph.nodes - np.array([i.x_bar, i.y_bar])) @ direction
    rate: FloatArray = -force / _polar(i) * along
    return rate


def _polar(inertia: Inertia) -> float:
    return inertia.I_h + inertia.I_v


def _cut_open(g: Graph, gain: FloatArray) -> FloatArray:
    """Flow at the start of each wall, (n,), where each wall beyond the tree starts with none."""
    constant = np.zeros(len(gain))
    arriving = np.zeros(len(g.nodes))
    beyond = np.ones(len(gain), dtype=bool)
    beyond[[branch.wall for branch in g.tree]] = False
    np.add.at(arriving, g.end[beyond], gain[beyond])
    for branch in reversed(g.tree):  # children before their parents
        flow = arriving[branch.child]
        constant[branch.wall] = flow if branch.sense < 0 else -flow - gain[branch.wall]
        arriving[branch.parent] += flow + gain[branch.wall]
    return constant

"""Thin-walled sections: straight walls of constant thickness along the section's mid-line.

The walls meet at nodes and make a graph. A tree of walls is an open section; every wall beyond a tree closes
one more cell. Cells enter through cycles of the graph, and any basis of cycles gives the same result, so that
no faces need be found. x right, y up, m; areas swept counter-clockwise are positive.

Sources: sectorial coordinates, V. Z. Vlasov, Thin-Walled Elastic Beams; cell equations, R. Bredt 1896, and
C. F. Kollbrunner and K. Basler, Torsion in Structures (both from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.section import ROUNDING, Inertia

ONE_NODE = 1e-9  # of the section's size: ends of walls closer than this meet
IN_ONE_LINE = (
    1e-12  # of the squared polar second moment: walls whose I_h I_v - I_hv² is smaller lie in one line
)
NO_WARPING = 1e-24  # of area times size to the fourth: a smaller I_w is rounding


@dataclass(frozen=True)
class Wall:
    """A straight wall: its mid-line from `start` to `end`, m, and its thickness `t`, m."""

    start: Point
    end: Point
    t: float


@dataclass(frozen=True)
class Branch:
    """A wall of the spanning tree, seen from the root: it leads from node `parent` to node `child`.

    `sense` is +1 where the wall itself runs that way.
    """

    wall: int
    parent: int
    child: int
    sense: int


@dataclass(frozen=True, eq=False)
class Graph:
    """How walls hang together; made by `graph`.

    nodes : (m, 2) places, m; start, end : (n,) index of the node at either end of each wall; t : (n,)
    thickness, m; tree : branches, parents before their children; cycles : (c, n), +1 where a cycle runs along
    the wall, -1 against it, 0 where it does not pass.
    """

    nodes: FloatArray
    start: NDArray[np.intp]
    end: NDArray[np.intp]
    t: FloatArray
    tree: tuple[Branch, ...]
    cycles: FloatArray

    @cached_property
    def along(self) -> FloatArray:
        """Vectors from start to end, (n, 2), m."""
        return self.nodes[self.end] - self.nodes[self.start]

    @cached_property
    def length(self) -> FloatArray:
        """Lengths, (n,), m."""
        length: FloatArray = np.hypot(*self.along.T)
        return length

    @property
    def cells(self) -> int:
        """Number of cells: 0 for an open section."""
        return len(self.cycles)

    @property
    def in_cell(self) -> NDArray[np.bool_]:
        """Which walls, (n,), bound a cell."""
        bounding: NDArray[np.bool_] = np.any(self.cycles != 0.0, axis=0)
        return bounding

    def swept(self, pole: Point) -> FloatArray:
        """Twice the area swept from `pole` along each wall, (n,), m²."""
        arm = self.nodes[self.start] - np.array(pole)
        swept: FloatArray = arm[:, 0] * self.along[:, 1] - arm[:, 1] * self.along[:, 0]
        return swept

    def integral(self, a: FloatArray, b: FloatArray) -> float:
        """∫ a b dA over the walls for a and b given at the nodes, (m,), and linear along each wall."""
        a_0, a_1, b_0, b_1 = a[self.start], a[self.end], b[self.start], b[self.end]
        products = 2.0 * a_0 * b_0 + a_0 * b_1 + a_1 * b_0 + 2.0 * a_1 * b_1
        return float(np.sum(self.t * self.length * products)) / 6.0


def graph(walls: Sequence[Wall]) -> Graph:
    """Join walls at their common ends, span a tree, and list the cycles that the other walls close.

    Raises
    ------
    ValueError
        For no wall, walls that do not hang together, a wall without length or thickness.
    """
    if not walls:
        raise ValueError("a thin-walled section needs a wall")
    points = np.array([point for wall in walls for point in (wall.start, wall.end)])
    t = np.array([wall.t for wall in walls])
    grid = ONE_NODE * float(np.ptp(points, axis=0).max())
    keys = np.round((points - points.min(axis=0)) / (grid or 1.0))
    _, first, node = np.unique(keys, axis=0, return_index=True, return_inverse=True)
    start, end = node.reshape(-1, 2).T
    if np.any(start == end) or not np.all(t > 0.0):
        raise ValueError("a wall needs a length and a thickness")
    tree = _tree(start, end, len(first))
    if len(tree) != len(first) - 1:
        raise ValueError("the walls do not hang together")
    return Graph(points[first], start, end, t, tree, _cycles(start, end, tree))


def _tree(start: NDArray[np.intp], end: NDArray[np.intp], nodes: int) -> tuple[Branch, ...]:
    at_node: list[list[Branch]] = [[] for _ in range(nodes)]
    for wall, (i, j) in enumerate(zip(start.tolist(), end.tolist(), strict=True)):
        at_node[i].append(Branch(wall, i, j, 1))
        at_node[j].append(Branch(wall, j, i, -1))
    root = int(start[0])
    tree, reached, queue = [], {root}, [root]
    for here in queue:
        for branch in at_node[here]:
            if branch.child not in reached:
                reached.add(branch.child)
                queue.append(branch.child)
                tree.append(branch)
    return tuple(tree)


def _cycles(start: NDArray[np.intp], end: NDArray[np.intp], tree: tuple[Branch, ...]) -> FloatArray:
    """One cycle for each wall beyond the tree: along the wall, and back through the tree."""
    to_root = {branch.child: branch for branch in tree}
    closing = sorted(set(range(len(start))) - {branch.wall for branch in tree})
    cycles = np.zeros((len(closing), len(start)))
    for cycle, wall in zip(cycles, closing, strict=True):
        cycle[wall] = 1.0
        for node, way in ((int(end[wall]), -1.0), (int(start[wall]), 1.0)):
            here = node
            while here in to_root:  # what both ways share cancels
                branch = to_root[here]
                cycle[branch.wall] += way * branch.sense
                here = branch.parent
    return cycles


@dataclass(frozen=True, eq=False)
class WallSection:
    """Properties of a thin-walled section by its mid-line; made by `wall_section`.

    inertia : area, centroid and second moments of the mid-line (thickness across a wall adds nothing);
    x_s, y_s : shear centre, m; I_t : torsion constant, m⁴, of which I_t_cells is Bredt's part; circulation :
    (n,) flow in each wall per G·twist, m², counter-clockwise around a cell positive; omega : (nodes,)
    sectorial coordinate about the shear centre, of zero mean, m²; I_w : warping constant, m⁶.
    """

    graph: Graph
    inertia: Inertia
    x_s: float
    y_s: float
    I_t: float
    I_t_cells: float
    circulation: FloatArray
    omega: FloatArray
    I_w: float

    @property
    def closed(self) -> bool:
        """Whether the walls bound a cell."""
        return self.graph.cells > 0

    @property
    def in_one_line(self) -> bool:
        """Whether all walls lie in one straight line."""
        return _in_one_line(self.inertia)

    @property
    def kind(self) -> str:
        """The section in words: 'open section', 'closed section', 'closed section of 2 cells'."""
        if not self.closed:
            return "open section"
        return "closed section" if self.graph.cells == 1 else f"closed section of {self.graph.cells} cells"

    @property
    def torsion_method(self) -> str:
        """How I_t was found, as a phrase."""
        if not self.closed:
            return f"mid-line formula Σ l t³/3, {self.kind}"
        cells = "Bredt's formula" if self.graph.cells == 1 else "Bredt's cell equations"
        fins = "" if self.graph.in_cell.all() else ", with Σ l t³/3 of the walls outside the cells"
        return f"{cells} on the mid-line{fins}, {self.kind}"

    @property
    def warping_method(self) -> str:
        """How I_w and the shear centre were found, as a phrase."""
        return f"sectorial coordinates of the mid-line, {self.kind}"


def wall_section(walls: Sequence[Wall]) -> WallSection:
    """Find the mid-line properties of walls that hang together; see `graph` for what is refused.

    The torsion constant is Σ l t³/3 over walls outside cells, and Bredt's for the cells: with the flow c of
    each cycle from ∮ψ/t ds = 2 A_m, I_t = Σ 2 A_m c. The sectorial coordinate follows dω/ds = r - ψ/t, open
    and closed alike, and its product moments with x and y vanish about the shear centre. Walls in one line
    have their shear centre at the centroid.
    """
    g = graph(walls)
    inertia = _inertia(g)
    x, y = g.nodes[:, 0] - inertia.x_bar, g.nodes[:, 1] - inertia.y_bar
    swept = g.swept((inertia.x_bar, inertia.y_bar))
    twice_cells = g.cycles @ swept
    flows = np.linalg.solve(flexibility(g), twice_cells)
    circulation = flows @ g.cycles
    I_t_cells = float(twice_cells @ flows)
    omega = _accumulated(g, swept - circulation * g.length / g.t)
    a_x, a_y = _shear_centre(inertia, g.integral(omega, x), g.integral(omega, y))
    omega = omega - a_x * y + a_y * x
    omega = omega - g.integral(omega, np.ones_like(omega)) / inertia.area
    I_w = g.integral(omega, omega)
    rounding = ROUNDING * float(np.ptp(g.nodes, axis=0).max())
    x_s, y_s = inertia.x_bar + a_x, inertia.y_bar + a_y
    return WallSection(
        graph=g,
        inertia=inertia,
        x_s=x_s if abs(x_s) > rounding else 0.0,
        y_s=y_s if abs(y_s) > rounding else 0.0,
        I_t=I_t_cells + float(np.sum((g.length * g.t**3)[~g.in_cell])) / 3.0,
        I_t_cells=I_t_cells,
        circulation=circulation,
        omega=omega,
        I_w=I_w if I_w > NO_WARPING * inertia.area * float(np.ptp(g.nodes, axis=0).max()) ** 4 else 0.0,
    )


def flexibility(g: Graph) -> FloatArray:
    """Return ∮ds/t of each pair of cycles over the walls that they share, (c, c)."""
    shared: FloatArray = (g.cycles * (g.length / g.t)) @ g.cycles.T
    return shared


def _inertia(g: Graph) -> Inertia:
    one = np.ones(len(g.nodes))
    middle = 0.5 * (g.nodes.min(axis=0) + g.nodes.max(axis=0))  # far from the origin no digit is lost
    x, y = (g.nodes - middle).T
    area = g.integral(one, one)
    x_c, y_c = g.integral(x, one) / area, g.integral(y, one) / area
    x, y = x - x_c, y - y_c
    I_h, I_v, I_hv = g.integral(y, y), g.integral(x, x), g.integral(x, y)
    x_bar, y_bar = float(middle[0]) + x_c, float(middle[1]) + y_c
    rounding = ROUNDING * float(np.ptp(g.nodes, axis=0).max())
    return Inertia(
        area,
        x_bar if abs(x_bar) > rounding else 0.0,
        y_bar if abs(y_bar) > rounding else 0.0,
        I_h,
        I_v,
        I_hv if abs(I_hv) > ROUNDING * (I_h + I_v) else 0.0,
    )


def _in_one_line(inertia: Inertia) -> bool:
    determinant = inertia.I_h * inertia.I_v - inertia.I_hv**2
    return determinant <= IN_ONE_LINE * (inertia.I_h + inertia.I_v) ** 2


def _shear_centre(inertia: Inertia, omega_x: float, omega_y: float) -> Point:
    """Where the pole must go from the centroid for ∫ω x dA and ∫ω y dA to vanish, m."""
    if _in_one_line(inertia):
        return 0.0, 0.0
    I_h, I_v, I_hv = inertia.I_h, inertia.I_v, inertia.I_hv
    determinant = I_h * I_v - I_hv**2
    return (
        (I_v * omega_y - I_hv * omega_x) / determinant,
        (I_hv * omega_y - I_h * omega_x) / determinant,
    )


def _accumulated(g: Graph, gain: FloatArray) -> FloatArray:
    """Sum what each wall adds from its start to its end, from the root through the tree; at the nodes."""
    total = np.zeros(len(g.nodes))
    for branch in g.tree:
        total[branch.child] = total[branch.parent] + branch.sense * gain[branch.wall]
    return total

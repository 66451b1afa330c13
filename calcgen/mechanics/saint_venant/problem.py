"""Torsion and shear on a mesh, in the units of the mesh: the functions and what their integrals are."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import BoolArray, MeshError, Size, cross
from calcgen.mechanics.mesh import Mesh, refined, triangulate
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.saint_venant.boundary import mean_thickness
from calcgen.mechanics.saint_venant.elements import (
    MASS,
    gathered,
    gradient,
    integral,
    mass_times,
    solve,
    source,
    stiffness,
    swirl,
)

GAP = 1e-3  # of J: the bounds are brought as close as this, so that their mean is within half of it
REFINEMENTS = 6
SHARE = 0.7  # of the gap: so much of it lies in the triangles that are refined
SIDES_PER_THICKNESS = 0.8
SIDES_PER_ROOT_OF_AREA = 7.0
COMPACT = 3.0  # root of the area over mean thickness: below it no wall is thin
SIDES_OF_COMPACT = 10.0  # for a root of its area
LONG = 3.0  # of the mean thickness: triangles that are longer may be thin in a slender outline
SLENDER = 600.0  # length of all edges over mean thickness: beyond, triangles may be thin
RE_ENTRANT = 0.25 * np.pi  # a corner that turns inwards by more has a singular stress, and small triangles
FINEST = 0.08  # of the mean thickness: triangles at such a corner
SMALLEST = 0.01  # of the mean thickness: sides that are not split for the sake of better angles
FINER = 0.01  # of that, where the mesh is refined
FEW = 30  # such corners: with more of them triangles there are larger, and left to refinement
SIDES = 100.0  # on the edge of a slender outline, at least, for what is cubic along inclined walls
GRAIN = 1e-6  # of the length of all edges: shorter sides would be lost in the digits of coordinates
SHARP = 0.25 * np.pi  # a corner that turns by more disturbs the stress in a slender wall
POINTED = 5.0 / 6.0 * np.pi  # a corner that turns by more ends a wall that has no thickness there
TRIANGLES = 12_000  # of all meshes together: no refinement beyond


@dataclass(frozen=True, eq=False)
class Torsion:
    """Torsion by two routes, on one mesh.

    psi : (n,) warping per unit twist about the origin of coordinates; J_upper from it.
    stress : (m, 6, 2) mean of the stresses of both routes for unit twist and G = 1, counter-clockwise.
    gap : (m,) what each triangle adds to J_upper - J_lower.
    """

    J_upper: float
    J_lower: float
    psi: FloatArray
    stress: FloatArray
    gap: FloatArray


def torsion(mesh: Mesh, local: FloatArray) -> Torsion:
    """Solve for the warping function and for the stress function.

    Warping: ∇²ψ = 0 with ∂ψ/∂n = y n_x - x n_y, from which J = ∫|∇ψ + (-y, x)|² dA, too large by what ψ
    lacks (a compatible displacement). Stress function: ∇²φ = -2, zero on outer rings, on the ring of a hole
    a constant whose circulation is twice the hole's area, from which J = ∫|∇φ|² dA, too small (a stress in
    equilibrium). S. Timoshenko and J. N. Goodier, Theory of elasticity, articles 104, 108 and 115, from
    memory; J_upper - J_lower is the squared distance of both stresses (W. Prager and J. L. Synge).
    """
    n = len(mesh.points)
    free = np.ones(n, dtype=bool)
    free[[mesh.triangles[np.argmax(mesh.piece == piece), 0] for piece in range(int(mesh.outer.sum()))]] = (
        False
    )
    numbers = np.where(free, np.cumsum(free) - 1, -1)
    psi = solve(mesh, local, numbers, swirl(mesh)[free])

    ring = np.full(n, -1)
    holes = np.flatnonzero(~mesh.outer)
    edge_ring = np.repeat(mesh.ring, 3)
    ring[mesh.boundary.reshape(-1)] = edge_ring
    on_outer = mesh.boundary[mesh.outer[mesh.ring]]
    inner = ring < 0
    unknowns = np.where(inner, np.cumsum(inner) - 1, -1)
    count = int(inner.sum())
    for number, hole in enumerate(holes):
        unknowns[ring == hole] = count + number
    unknowns[on_outer] = -1  # where a hole touches the outer ring
    node_loads = 2.0 * mass_times(mesh, np.ones(n))
    loads = np.concatenate((np.zeros(count), [2.0 * _enclosed(mesh, int(hole)) for hole in holes]))
    loads += np.bincount(unknowns + 1, node_loads, count + len(holes) + 1)[1:]
    phi = solve(mesh, local, unknowns, loads)

    x, y = mesh.points[mesh.triangles].transpose(2, 0, 1)
    from_psi = gradient(mesh, psi) + np.stack((-y, x), axis=-1)
    d_phi = gradient(mesh, phi)
    from_phi = np.stack((d_phi[..., 1], -d_phi[..., 0]), axis=-1)
    return Torsion(
        J_upper=float(integral(mesh, np.sum(from_psi**2, axis=-1)).sum()),
        J_lower=float(integral(mesh, np.sum(from_phi**2, axis=-1)).sum()),
        psi=psi,
        stress=0.5 * (from_psi + from_phi),
        gap=integral(mesh, np.sum((from_psi - from_phi) ** 2, axis=-1)),
    )


def _enclosed(mesh: Mesh, hole: int) -> float:
    """Return the area of a hole."""
    start, end = (mesh.points[mesh.boundary[mesh.ring == hole, k]] for k in range(2))
    return -0.5 * float(cross(start, end).sum())


def meshed_for_torsion(outlines: tuple[Outline, ...]) -> tuple[Mesh, FloatArray, Torsion]:
    """Mesh, and refine until the bounds of J are close; return mesh, its stiffness and the torsion on it."""
    size = _size(outlines)
    mesh = triangulate(outlines, size)
    local = stiffness(mesh)
    found = torsion(mesh, local)
    triangles = len(mesh.triangles)
    for _ in range(REFINEMENTS):
        if found.J_upper - found.J_lower <= GAP * found.J_lower or triangles > TRIANGLES:
            break
        order = np.argsort(-np.round(found.gap / found.gap.max(), 6), kind="stable")  # equals in their order
        enough = int(np.searchsorted(np.cumsum(found.gap[order]), SHARE * found.gap.sum())) + 1
        marked = np.zeros(len(order), dtype=bool)
        marked[order[:enough]] = True
        try:
            mesh = refined(mesh, marked, Size(finest=FINER * size.finest, thin_beyond=size.thin_beyond))
        except MeshError:
            break  # as fine as the digits of coordinates allow
        triangles += len(mesh.triangles)
        local = stiffness(mesh)
        found = torsion(mesh, local)
    return mesh, local, found


def _size(outlines: Sequence[Outline]) -> Size:
    """Return the size of triangles: of slender outlines that of edges only, which are short at sharp corners.

    Between those the stress of a slender wall is linear across it and hardly changes along it, so that long
    triangles from edge to edge hold it.
    """
    thickness = mean_thickness(outlines)
    area = sum(_area(part) for part in outlines)
    length = 2.0 * area / thickness
    if length > SLENDER * thickness:
        sharp = _corners_that_turn(outlines, lambda turn: (np.abs(turn) > SHARP) & (turn < POINTED))
        return Size(
            everywhere=length / SIDES,
            near=sharp,
            at_points=max(_finest(sharp) * thickness, GRAIN * length),
            finest=SMALLEST * thickness,
            thin_beyond=LONG * thickness,
        )
    corners = re_entrant_corners(outlines)
    sides = SIDES_OF_COMPACT if area**0.5 < COMPACT * thickness else SIDES_PER_ROOT_OF_AREA
    return Size(
        everywhere=min(thickness / SIDES_PER_THICKNESS, area**0.5 / sides),
        near=corners,
        at_points=_finest(corners) * thickness,
        finest=SMALLEST * thickness,
    )


def _finest(corners: FloatArray) -> float:
    """Return the size at sharp corners, of the mean thickness: the more of them, the coarser."""
    return min(FINEST * max(1.0, len(corners) / FEW), 1.0 / SIDES_PER_THICKNESS)


def re_entrant_corners(outlines: Sequence[Outline]) -> FloatArray:
    """Return the corners (k, 2) at which the outline turns inwards sharply."""
    return _corners_that_turn(outlines, lambda turn: turn < -RE_ENTRANT)


def _corners_that_turn(outlines: Sequence[Outline], so: Callable[[FloatArray], BoolArray]) -> FloatArray:
    """Return the corners (k, 2) that the outline turns at, to the left positive, as is asked."""
    found = []
    for part in outlines:
        for ring in part.rings:
            into, out_of = ring - np.roll(ring, 1, axis=0), np.roll(ring, -1, axis=0) - ring
            found.append(ring[so(np.arctan2(cross(into, out_of), np.sum(into * out_of, axis=1)))])
    return np.concatenate(found)


def _area(part: Outline) -> float:
    start, end = part.edges
    return 0.5 * float(cross(start, end).sum())


@dataclass(frozen=True, eq=False)
class ShearFunctions:
    """Shear, for ν = 0, where the bending stress grows by x or y for each unit of length.

    stress : (2, m, 6, 2) at the nodes of triangles, for x and for y.
    energy : (2, 2) ∫τ_i·τ_j dA.
    """

    stress: FloatArray
    energy: FloatArray


def shear_functions(mesh: Mesh, local: FloatArray) -> ShearFunctions:
    """Solve ∇²Ψ = -x and ∇²Ψ = -y with ∂Ψ/∂n = 0, x and y from the centroid of one connected piece; τ = ∇Ψ.

    Ψ is -x³/6 (-y³/6) and a harmonic rest: across a thin wall along an axis the rest is linear, so that one
    triangle over its thickness is enough. By ∫∇Ψ·∇f dA = ∫r f dA for any f, the energy is
    ∫(r_i Ψ_j + r_j Ψ_i - ∇Ψ_i·∇Ψ_j) dA but for the square of the error of ∇Ψ.
    """
    n = len(mesh.points)
    squares = mesh.points**2
    weighted = mass_times(mesh, mesh.points)
    fixed = np.zeros((2, n, 2))  # gradient of the cubic part
    fixed[0, :, 0], fixed[1, :, 1] = -0.5 * squares.T
    loads = weighted - np.column_stack([source(mesh, field) for field in fixed])
    rest = solve(mesh, local, np.arange(-1, n - 1), loads[1:])
    stress = np.stack(
        [gradient(mesh, f) + field[mesh.triangles] for f, field in zip(rest.T, fixed, strict=True)]
    )
    products = mesh.points[:, :, None] * mesh.points[:, None, :]  # x², xy, y² are quadratic functions
    work = weighted.T @ rest - np.einsum("nij,nj->ij", mass_times(mesh, products), squares) / 6.0
    squared = np.einsum("fmid,ij,gmjd,m->fg", stress, MASS, stress, mesh.area, optimize=True)
    return ShearFunctions(stress, work + work.T - squared)


def smoothed(mesh: Mesh, at_nodes: FloatArray) -> FloatArray:
    """Return the mean at each node (n, 2) of what its triangles (m, 6, 2) say there, weighted by area."""
    weight = gathered(mesh, np.broadcast_to(mesh.area[:, None], (len(mesh.area), 6)))
    return gathered(mesh, at_nodes * mesh.area[:, None, None]) / weight.reshape(-1, 1)

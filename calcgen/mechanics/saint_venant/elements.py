"""Quadratic functions on six-node triangles: matrices, gradients and their sparse solution.

All integrals are exact: gradients are linear in a triangle, and the middles of its edges integrate products
of two of them exactly.
"""

from __future__ import annotations

from typing import Any

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import IntArray, MeshError
from calcgen.mechanics.mesh import Mesh

# area coordinates of the nodes: corners, then the middles of edges 0-1, 1-2, 2-0
NODES = np.array([[1, 0, 0], [0, 1, 0], [0, 0, 1], [0.5, 0.5, 0], [0, 0.5, 0.5], [0.5, 0, 0.5]])

# ∫ N_i N_j dA over the area (e.g. O. C. Zienkiewicz, The finite element method; from memory, and held by a
# test against sums over the triangle)
MASS = (
    np.array(
        [
            [6, -1, -1, 0, -4, 0],
            [-1, 6, -1, 0, 0, -4],
            [-1, -1, 6, -4, 0, 0],
            [0, 0, -4, 32, 16, 16],
            [-4, 0, 0, 16, 32, 16],
            [0, -4, 0, 16, 16, 32],
        ]
    )
    / 180.0
)


def shapes(coordinates: FloatArray) -> FloatArray:
    """Return the functions of the nodes (p, 6) at area coordinates (p, 3)."""
    a, b, c = coordinates.T
    return np.column_stack(
        (a * (2 * a - 1), b * (2 * b - 1), c * (2 * c - 1), 4 * a * b, 4 * b * c, 4 * c * a)
    )


def slopes(coordinates: FloatArray) -> FloatArray:
    """Return the derivatives (p, 6, 3) of the functions of the nodes along each area coordinate."""
    a, b, c = coordinates.T
    zero = np.zeros_like(a)
    rows = (
        (4 * a - 1, zero, zero),
        (zero, 4 * b - 1, zero),
        (zero, zero, 4 * c - 1),
        (4 * b, 4 * a, zero),
        (zero, 4 * c, 4 * b),
        (4 * c, zero, 4 * a),
    )
    return np.array(rows).transpose(2, 0, 1)


LARGE = 5_000  # unknowns: beyond, minimum degree may take seconds to order those of regular outlines

AT_NODES = slopes(NODES)
AT_MIDDLES = AT_NODES[3:]


def gradient(mesh: Mesh, values: FloatArray) -> FloatArray:
    """Return the gradient (m, 6, 2) at the nodes of each triangle of a function by its values (n,)."""
    along = np.einsum("pik,mi->mpk", AT_NODES, values[mesh.triangles])
    found: FloatArray = along @ mesh.gradients
    return found


def integral(mesh: Mesh, at_nodes: FloatArray) -> FloatArray:
    """Return the integral over each triangle (m,) of a quadratic function by its values (m, 6)."""
    found: FloatArray = mesh.area * at_nodes[:, 3:].sum(axis=1) / 3.0
    return found


def stiffness(mesh: Mesh) -> FloatArray:
    """Return ∫∇N_i·∇N_j dA of each triangle (m, 6, 6)."""
    metric = mesh.gradients @ mesh.gradients.transpose(0, 2, 1)
    weights = np.einsum("pik,pjl->klij", AT_MIDDLES, AT_MIDDLES).reshape(9, 36) / 3.0
    found: FloatArray = ((metric.reshape(-1, 9) * mesh.area[:, None]) @ weights).reshape(-1, 6, 6)
    return found


def mass_times(mesh: Mesh, values: FloatArray) -> FloatArray:
    """Return ∫N_i f dA (n, …) of functions by their values (n, …) at the nodes."""
    local = np.einsum("ij,mj...->mi...", MASS, values[mesh.triangles])
    return gathered(mesh, local * mesh.area.reshape(-1, *[1] * (local.ndim - 1)))


def swirl(mesh: Mesh) -> FloatArray:
    """Return ∫(y ∂N_i/∂x - x ∂N_i/∂y) dA (n,)."""
    x, y = mesh.points[mesh.triangles[:, 3:]].transpose(2, 0, 1)
    turned = np.stack((y, -x), axis=-1)  # (m, 3, 2)
    along = turned @ mesh.gradients.transpose(0, 2, 1)  # component along each area coordinate (m, 3, 3)
    local = np.einsum("pik,mpk->mi", AT_MIDDLES, along) * (mesh.area / 3.0)[:, None]
    return gathered(mesh, local)


def source(mesh: Mesh, field: FloatArray) -> FloatArray:
    """Return ∫f·∇N_i dA (n,) of a quadratic vector field by its values (n, 2) at the nodes."""
    along = field[mesh.triangles] @ mesh.gradients.transpose(0, 2, 1)  # by area coordinates (m, 6, 3)
    weights = np.einsum("il,ljk->ikj", MASS, AT_NODES).reshape(18, 6)
    return gathered(mesh, (along.reshape(-1, 18) @ weights) * mesh.area[:, None])


def gathered(mesh: Mesh, local: FloatArray) -> FloatArray:
    """Add up what each triangle (m, 6, …) gives to its nodes (n, …)."""
    nodes, n = mesh.triangles.reshape(-1), len(mesh.points)
    flat = local.reshape(len(nodes), -1)
    total: FloatArray = np.column_stack([np.bincount(nodes, column, n) for column in flat.T]).astype(
        np.float64
    )
    return total.reshape(n, *local.shape[2:])


def solve(mesh: Mesh, local: FloatArray, unknowns: IntArray, loads: FloatArray) -> FloatArray:
    """Solve K f = load for functions by their values (n, …).

    unknowns : (n,) the number of the unknown that stands for each node's value, counted from 0; equal numbers
        make equal values, and -1 makes zero.
    loads : (count of unknowns, …).

    Raises
    ------
    MeshError
        Where the matrix is singular.
    """
    from scipy.sparse import coo_array  # loaded only where something is solved
    from scipy.sparse.linalg import splu

    number = unknowns[mesh.triangles]
    rows, columns = np.broadcast_arrays(number[:, :, None], number[:, None, :])
    free = (rows >= 0) & (columns >= 0)
    count = len(loads)
    matrix: Any = coo_array((local[free], (rows[free], columns[free])), shape=(count, count)).tocsc()
    order = "MMD_AT_PLUS_A" if count <= LARGE else "COLAMD"
    try:
        factors = splu(matrix, permc_spec=order, diag_pivot_thresh=0.0, options={"SymmetricMode": True})
    except RuntimeError as singular:  # triangles without area, to the digits there are
        raise MeshError("a triangle of the outline has no area") from singular
    found = factors.solve(loads)
    values: FloatArray = np.concatenate((found, np.zeros_like(found[:1])))[unknowns]
    return values

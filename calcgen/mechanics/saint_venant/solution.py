"""Constants and stresses of Saint-Venant's torsion and shear for any outline.

Signs. The section is seen looking along the beam, x right and y up, and stresses are the tractions on the
face that is seen. A positive V pushes it up, a positive V_lat to the left (as in `calcgen.mechanics.beam`),
and a positive T turns it clockwise: ∫(x τ_y - y τ_x) dA = -T. Shear forces act in the shear centre.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import cross
from calcgen.mechanics.mesh import Mesh
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.saint_venant.boundary import along_walls, joined, mean_thickness, on_grid, simplified
from calcgen.mechanics.saint_venant.contacts import apart
from calcgen.mechanics.saint_venant.elements import mass_times, shapes
from calcgen.mechanics.saint_venant.problem import (
    meshed_for_torsion,
    re_entrant_corners,
    shear_functions,
    smoothed,
)
from calcgen.mechanics.saint_venant.symmetry import Symmetry, symmetry

ROUNDING = 1e-12  # of the size: a smaller coordinate of the centroid is zero
REMEMBERED = 32  # solutions that a process keeps
NEAR_A_CORNER = 0.25  # of the mean thickness: round a sharp re-entrant corner no largest stress is looked for


@dataclass(frozen=True)
class Shear:
    """What shear forces do to a section in one piece, for ν = 0.

    x_s, y_s : the shear centre, m, which is E. Trefftz's and does not depend on ν: forces in it do no work on
        the twist that a torque makes.
    I_w : ∫ω² dA, m⁶, of the warping about the shear centre, whose mean is zero.
    f_h, f_v, f_hv : shear flexibilities, 1/m²: shear forces store (f_h V² + 2 f_hv V V_lat + f_v V_lat²)/(2G)
        for each unit of length; V goes with bending about the horizontal axis, V_lat about the vertical one.
    """

    x_s: float
    y_s: float
    I_w: float
    f_h: float
    f_v: float
    f_hv: float

    def mapped(self, size: float, origin: FloatArray) -> Shear:
        """Return the same for a section `size` times as large, its old origin at `origin`, m."""
        return Shear(
            x_s=float(origin[0]) + self.x_s * size,
            y_s=float(origin[1]) + self.y_s * size,
            I_w=self.I_w * size**6,
            f_h=self.f_h / size**2,
            f_v=self.f_v / size**2,
            f_hv=self.f_hv / size**2,
        )

    @property
    def A_s_h(self) -> float:
        """Shear area for a vertical force, which goes with bending about the horizontal axis, m²."""
        return 1.0 / self.f_h

    @property
    def A_s_v(self) -> float:
        """Shear area for a horizontal force, which goes with bending about the vertical axis, m²."""
        return 1.0 / self.f_v


@dataclass(frozen=True)
class TorsionalStress:
    """The largest shear stress on the outline for a torque of one, 1/m³, within some 2 %, and its place, m.

    `unbounded` tells that the outline has sharp re-entrant corners, where elastic stress knows no bound; the
    largest one is then that at least a quarter of the mean thickness away from them.
    """

    value: float
    x: float
    y: float
    unbounded: bool


@dataclass(frozen=True, eq=False)
class SaintVenant:
    """The solution for one section; J, m⁴, lies between J_lower and J_upper, and is their mean.

    pieces : how many pieces the section has that do not hang together. All twist by the same angle, and J is
        the sum of theirs.
    shear : None for a section of several pieces, which no shear stress can connect.
    tau_max : the largest torsional stress.
    tolerance : how far corners left out may lie from the outline that was meshed, m.
    mesh : the triangles, in the section's own coordinates, m.
    per_T, per_V, per_V_lat : stresses (τ_x, τ_y) at the nodes (n, 2) for unit T, 1/m³, and unit V and V_lat,
        1/m².
    """

    J_upper: float
    J_lower: float
    pieces: int
    shear: Shear | None
    tau_max: TorsionalStress
    tolerance: float
    mesh: Mesh
    per_T: FloatArray
    per_V: FloatArray | None
    per_V_lat: FloatArray | None

    @property
    def J(self) -> float:
        """The torsion constant, m⁴."""
        return 0.5 * (self.J_upper + self.J_lower)

    @property
    def gap(self) -> float:
        """Half the distance of the bounds, relative to J: no error of the elements is larger."""
        return 0.5 * (self.J_upper - self.J_lower) / self.J

    def stress(self, points: FloatArray, V: float = 0.0, V_lat: float = 0.0, T: float = 0.0) -> FloatArray:
        """Return (τ_x, τ_y), Pa, at points (n, 2), m, for shear forces, N, and a torque, N·m.

        Points a little outside the mesh get what its nearest triangle has there.

        Raises
        ------
        ValueError
            For shear forces on a section of several pieces.
        """
        at_nodes = T * self.per_T
        if V or V_lat:
            if self.per_V is None or self.per_V_lat is None:
                raise ValueError("no shear stress connects the pieces of the section")
            at_nodes = at_nodes + V * self.per_V + V_lat * self.per_V_lat
        triangle, coordinates = self.mesh.locate(points)
        stress: FloatArray = np.einsum(
            "pi,pid->pd", shapes(coordinates), at_nodes[self.mesh.triangles[triangle]]
        )
        return stress


def saint_venant(*outlines: Outline) -> SaintVenant:
    """Solve torsion and shear of a section of one material, made of one or several outlines.

    Outlines that share an edge act as one, those that share a point do not. The last solutions are kept.

    Raises
    ------
    MeshError
        For an outline that cannot be meshed.
    """
    return _solved(tuple(tuple(ring.tobytes() for ring in part.rings) for part in outlines))


@lru_cache(maxsize=REMEMBERED)
def _solved(rings: tuple[tuple[bytes, ...], ...]) -> SaintVenant:
    """Solve about the centroid, along the walls, in lengths of √A, and return from there."""
    arrays = [[np.frombuffer(ring).reshape(-1, 2) for ring in part] for part in rings]
    outlines = joined([Outline(exterior, tuple(holes)) for exterior, *holes in arrays])
    area, centroid = _area_and_centroid(outlines)
    size, turn = math.sqrt(area), along_walls(outlines)
    coarse, tolerance = simplified([_mapped(part, centroid, turn / size) for part in outlines])
    coarse = on_grid(apart(coarse))
    mesh, local, torsion = meshed_for_torsion(coarse)
    J = 0.5 * (torsion.J_upper + torsion.J_lower)
    per_T = -smoothed(mesh, torsion.stress) / J  # the stress of a unit twist turns counter-clockwise
    largest, x, y = _largest(mesh, per_T, coarse)
    place = np.array([x, y]) @ turn * size + centroid
    shear, per_V, per_V_lat = None, None, None
    if len(coarse) == 1:
        shear, per_V, per_V_lat = _sheared(mesh, local, torsion.psi, symmetry(outlines, centroid), turn)
        shear = shear.mapped(size, centroid)
        per_V, per_V_lat = per_V / size**2, per_V_lat / size**2
    return SaintVenant(
        J_upper=torsion.J_upper * size**4,
        J_lower=torsion.J_lower * size**4,
        pieces=len(coarse),
        shear=shear,
        tau_max=TorsionalStress(
            largest / size**3, float(place[0]), float(place[1]), len(re_entrant_corners(coarse)) > 0
        ),
        tolerance=tolerance * size,
        mesh=mesh.mapped(turn * size, centroid),
        per_T=per_T @ turn / size**3,
        per_V=per_V,
        per_V_lat=per_V_lat,
    )


def _sheared(
    mesh: Mesh, local: FloatArray, psi: FloatArray, symmetric: Symmetry, turn: FloatArray
) -> tuple[Shear, FloatArray, FloatArray]:
    """Shear centre, warping constant and flexibilities, and the stresses for unit V and V_lat at the nodes.

    The bending stress grows by g·r for each unit of length, where the force to the right and up is I g, and
    the shear stress is ∇(g·Ψ). With ∫∇ψ·∇Ψ dA = ∫ψ r dA, its torque about the centroid gives the shear
    centre: I (-y_s, x_s) = -∫ψ r dA. All is in the coordinates of the mesh, and turned back at the end.
    """
    weighted = mass_times(mesh, mesh.points)  # ∫N_i r dA
    mass = mass_times(mesh, np.ones(len(mesh.points)))
    by_force = np.linalg.inv(mesh.points.T @ weighted)
    across = -by_force @ (psi @ weighted)  # (-y_s, x_s)
    omega = psi + mesh.points @ across
    omega = omega - mass @ omega / mass.sum()
    found = shear_functions(mesh, local)
    flexibility = turn.T @ by_force @ found.energy @ by_force @ turn
    nodal = np.stack([smoothed(mesh, stress) for stress in found.stress])
    to_the_right, up = np.einsum("fg,gnd->fnd", turn.T @ by_force, nodal @ turn)
    minus_y_s, x_s = across @ turn
    no_product = symmetric.left_right or symmetric.top_bottom
    shear = Shear(
        x_s=0.0 if symmetric.left_right or symmetric.point else float(x_s),
        y_s=0.0 if symmetric.top_bottom or symmetric.point else -float(minus_y_s),
        I_w=float(omega @ mass_times(mesh, omega)),
        f_h=float(flexibility[1, 1]),
        f_v=float(flexibility[0, 0]),
        f_hv=0.0 if no_product else -float(flexibility[0, 1]),  # V_lat acts to the left
    )
    return shear, up, -to_the_right


def _largest(mesh: Mesh, stress: FloatArray, outlines: Sequence[Outline]) -> tuple[float, float, float]:
    """Return the largest stress on the edge, and its place.

    Looked at are the nodes between corners of the outline, not those within a part of the thickness from a
    sharp re-entrant one.
    """
    from scipy.spatial import KDTree  # loaded only with the solution by finite elements

    corners = np.concatenate([ring for part in outlines for ring in part.rings])
    nodes = np.setdiff1d(mesh.boundary, KDTree(mesh.points).query(corners)[1])
    places = mesh.points[nodes]
    away = np.ones(len(nodes), dtype=bool)
    for corner in re_entrant_corners(outlines):
        away &= np.hypot(*(places - corner).T) >= NEAR_A_CORNER * mean_thickness(outlines)
    values = np.where(away | ~away.any(), np.hypot(*stress[nodes].T), 0.0)
    most = int(np.argmax(values >= values.max() * (1.0 - 1e-9)))  # the first of equals
    return float(values[most]), float(places[most, 0]), float(places[most, 1])


def _area_and_centroid(outlines: Sequence[Outline]) -> tuple[float, FloatArray]:
    """Area and centroid by Green's theorem, first about the middle of the first outline."""
    middle = np.array(outlines[0].bounds.middle)
    edges = [part.edges for part in outlines]
    start = np.concatenate([a for a, _ in edges]) - middle
    end = np.concatenate([b for _, b in edges]) - middle
    swept = cross(start, end)
    area = 0.5 * float(swept.sum())
    centroid = middle + swept @ (start + end) / (6.0 * area)
    return area, np.where(np.abs(centroid) <= ROUNDING * np.ptp(start, axis=0), 0.0, centroid)


def _mapped(part: Outline, origin: FloatArray, turn: FloatArray) -> Outline:
    exterior, *holes = ((ring - origin) @ turn.T for ring in part.rings)
    return Outline(exterior, tuple(holes))

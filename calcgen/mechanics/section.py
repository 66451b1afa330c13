"""Geometric properties of a section, by integrals along its outline."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.plastic import above, all_edges, plastic_axes, seen_from_right

ROUNDING = 1e-12  # smaller than this beside its scale, a coordinate or a product moment is zero
ISOTROPIC = 1e-9  # principal values closer than this, relatively, have no direction


@dataclass(frozen=True)
class Inertia:
    """Area, m², centroid, m, and second moments about it, m⁴: all that elastic bending needs.

    I_h = ∫y² dA about the horizontal axis, I_v = ∫x² dA about the vertical one, I_hv = ∫xy dA; x right,
    y up.
    """

    area: float
    x_bar: float
    y_bar: float
    I_h: float
    I_v: float
    I_hv: float

    @property
    def A(self) -> float:
        """The area under its symbol."""
        return self.area

    @property
    def I_1(self) -> float:
        """Largest second moment of area, m⁴."""
        return 0.5 * (self.I_h + self.I_v) + self._half_range

    @property
    def I_2(self) -> float:
        """Smallest second moment of area, m⁴."""
        return 0.5 * (self.I_h + self.I_v) - self._half_range

    @property
    def alpha(self) -> float:
        """Angle from the horizontal axis to axis 1, the stiffer, rad, counter-clockwise, in (-π/2, π/2].

        Zero where I_1 and I_2 agree within 1e-9 and each axis is a principal one.
        """
        if 2.0 * self._half_range <= ISOTROPIC * (self.I_h + self.I_v):
            return 0.0
        return 0.5 * math.atan2(-2.0 * self.I_hv + 0.0, self.I_h - self.I_v)  # + 0.0: never atan2(-0, …)

    @property
    def i_h(self) -> float:
        """Radius of gyration about the horizontal axis, m."""
        return math.sqrt(self.I_h / self.area)

    @property
    def i_v(self) -> float:
        """Radius of gyration about the vertical axis, m."""
        return math.sqrt(self.I_v / self.area)

    @property
    def i_1(self) -> float:
        """Largest radius of gyration, m."""
        return math.sqrt(self.I_1 / self.area)

    @property
    def i_2(self) -> float:
        """Smallest radius of gyration, m."""
        return math.sqrt(self.I_2 / self.area)

    @property
    def _half_range(self) -> float:
        """Radius of the circle of second moments."""
        return math.hypot(0.5 * (self.I_h - self.I_v), self.I_hv)


@dataclass(frozen=True)
class SectionProperties(Inertia):
    """Properties of the bare outline; what follows from a few of them by a division is a property.

    c_top … c_right are the distances from the centroid to the outermost fibres, m, all positive; Q_h and Q_v
    the first moments of the area above and right of the centroid about its axes, m³; y_p and x_p the places
    of the half-area axes, m, and W_pl_h, W_pl_v the plastic moduli about them, m³.
    """

    c_top: float
    c_bottom: float
    c_left: float
    c_right: float
    Q_h: float
    Q_v: float
    y_p: float
    x_p: float
    W_pl_h: float
    W_pl_v: float

    @property
    def W_el_h_top(self) -> float:
        """Elastic modulus about the horizontal axis for the top fibre, m³."""
        return self.I_h / self.c_top

    @property
    def W_el_h_bottom(self) -> float:
        """Elastic modulus about the horizontal axis for the bottom fibre, m³."""
        return self.I_h / self.c_bottom

    @property
    def W_el_v_left(self) -> float:
        """Elastic modulus about the vertical axis for the left fibre, m³."""
        return self.I_v / self.c_left

    @property
    def W_el_v_right(self) -> float:
        """Elastic modulus about the vertical axis for the right fibre, m³."""
        return self.I_v / self.c_right

    @property
    def W_el_h(self) -> float:
        """The smaller of the elastic moduli about the horizontal axis, m³."""
        return self.I_h / max(self.c_top, self.c_bottom)

    @property
    def W_el_v(self) -> float:
        """The smaller of the elastic moduli about the vertical axis, m³."""
        return self.I_v / max(self.c_left, self.c_right)


def section_properties(*outlines: Outline) -> SectionProperties:
    """Integrate over the outlines of a section's parts (one material, no overlap).

    Integrals run about the middle of the section first and about its centroid then, so that a section far
    from the origin loses no digits.
    """
    start, end = all_edges(*outlines)
    low, high = start.min(axis=0), start.max(axis=0)
    middle = 0.5 * (low + high)
    area, first = _area_and_first_moments(start - middle, end - middle)
    centroid = middle + first / area
    rounding = ROUNDING * float(np.max(high - low))
    centroid[np.abs(centroid) <= rounding] = 0.0
    start_c, end_c = start - centroid, end - centroid
    I_h, I_v, I_hv = _second_moments(start_c, end_c)
    plastic = plastic_axes(*outlines)
    c_left, c_bottom = (centroid - low).tolist()
    c_right, c_top = (high - centroid).tolist()
    return SectionProperties(
        area=area,
        x_bar=float(centroid[0]),
        y_bar=float(centroid[1]),
        I_h=I_h,
        I_v=I_v,
        I_hv=0.0 if abs(I_hv) <= ROUNDING * (I_h + I_v) else I_hv,
        c_top=c_top,
        c_bottom=c_bottom,
        c_left=c_left,
        c_right=c_right,
        Q_h=above(start_c, end_c, 0.0)[1],
        Q_v=above(seen_from_right(start_c), seen_from_right(end_c), 0.0)[1],
        y_p=plastic.y_p if abs(plastic.y_p) > rounding else 0.0,
        x_p=plastic.x_p if abs(plastic.x_p) > rounding else 0.0,
        W_pl_h=plastic.W_pl_h,
        W_pl_v=plastic.W_pl_v,
    )


def _area_and_first_moments(start: FloatArray, end: FloatArray) -> tuple[float, FloatArray]:
    """Area, and (∫x dA, ∫y dA), by Green's theorem over straight edges."""
    cross = start[:, 0] * end[:, 1] - end[:, 0] * start[:, 1]
    first: FloatArray = np.sum(cross[:, None] * (start + end), axis=0) / 6.0
    return 0.5 * float(np.sum(cross)), first


def _second_moments(start: FloatArray, end: FloatArray) -> tuple[float, float, float]:
    """(∫y² dA, ∫x² dA, ∫xy dA), by Green's theorem over straight edges."""
    (x0, y0), (x1, y1) = start.T, end.T
    cross = x0 * y1 - x1 * y0
    I_h = float(np.sum(cross * (y0 * y0 + y0 * y1 + y1 * y1))) / 12.0
    I_v = float(np.sum(cross * (x0 * x0 + x0 * x1 + x1 * x1))) / 12.0
    I_hv = float(np.sum(cross * (x0 * y1 + 2.0 * x0 * y0 + 2.0 * x1 * y1 + x1 * y0))) / 24.0
    return I_h, I_v, I_hv

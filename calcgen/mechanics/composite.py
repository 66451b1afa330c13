"""Properties of a section of several moduli, transformed to the reference modulus."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.field import Bars, Piece
from calcgen.mechanics.plastic import above, all_edges, seen_from_right
from calcgen.mechanics.section import ROUNDING, Inertia, SectionProperties, section_properties


@dataclass(frozen=True)
class PartModuli:
    """Elastic section moduli of one piece, m³: M/W is the stress in its own material, at its own edge.

    Each is I/(n·c), with n = E/E_ref and c the distance of the piece's edge from the centroid of the whole,
    on whichever side that edge lies; infinite for an edge at the centroid.
    """

    name: str
    W_el_h_top: float
    W_el_h_bottom: float
    W_el_v_left: float
    W_el_v_right: float

    @property
    def W_el_h(self) -> float:
        """The smaller of the moduli about the horizontal axis, m³."""
        return min(self.W_el_h_top, self.W_el_h_bottom)

    @property
    def W_el_v(self) -> float:
        """The smaller of the moduli about the vertical axis, m³."""
        return min(self.W_el_v_left, self.W_el_v_right)


@dataclass(frozen=True)
class TransformedProperties(Inertia):
    """Properties with each area weighted by n = E/E_ref; bars displace the material in which they lie.

    c_top … c_right are distances from the centroid to the outermost fibres of the whole outline, m; Q_h and
    Q_v the transformed first moments above and right of the centroid, m³; `parts` has the moduli by piece.
    """

    c_top: float
    c_bottom: float
    c_left: float
    c_right: float
    Q_h: float
    Q_v: float
    parts: tuple[PartModuli, ...]

    def part(self, name: str) -> PartModuli:
        """Return the moduli of the piece of that name."""
        return next(part for part in self.parts if part.name == name)


def transformed_inertia(pieces: Sequence[Piece], bars: Sequence[Bars] = ()) -> Inertia:
    """Return area, centroid and second moments of the elastic section; limits of the laws are left aside."""
    return _transform([(each.law.factor, section_properties(*each.outlines)) for each in pieces], bars)


def transformed_properties(pieces: Sequence[Piece], bars: Sequence[Bars] = ()) -> TransformedProperties:
    """Transform pieces that don't overlap, and bars, to the reference modulus, that of factor 1."""
    each = [(piece.law.factor, section_properties(*piece.outlines)) for piece in pieces]
    whole = _transform(each, bars)
    centroid = np.array([whole.x_bar, whole.y_bar])
    rings = np.concatenate([part.exterior for piece in pieces for part in piece.outlines])
    c_left, c_bottom = (centroid - rings.min(axis=0)).tolist()
    c_right, c_top = (rings.max(axis=0) - centroid).tolist()
    Q_h, Q_v = 0.0, 0.0
    for piece in pieces:
        start, end = (points - centroid for points in all_edges(*piece.outlines))
        Q_h += piece.law.factor * above(start, end, 0.0)[1]
        Q_v += piece.law.factor * above(seen_from_right(start), seen_from_right(end), 0.0)[1]
    for group in bars:
        arms = np.maximum(group.points - centroid, 0.0).sum(axis=0) * group.area * _net_factor(group)
        Q_v, Q_h = Q_v + float(arms[0]), Q_h + float(arms[1])
    moduli = tuple(_moduli(piece.name, n, own, whole) for piece, (n, own) in zip(pieces, each, strict=True))
    return TransformedProperties(
        **vars(whole),
        c_top=c_top,
        c_bottom=c_bottom,
        c_left=c_left,
        c_right=c_right,
        Q_h=Q_h,
        Q_v=Q_v,
        parts=moduli,
    )


def _transform(parts: Sequence[tuple[float, SectionProperties]], bars: Sequence[Bars]) -> Inertia:
    """Add up weighted areas about the common centroid, each with its own second moments."""
    weights = np.array(
        [n * own.area for n, own in parts]
        + [group.area * _net_factor(group) for group in bars for _ in group.points]
    )
    places: FloatArray = np.concatenate(
        [np.array([(own.x_bar, own.y_bar) for _, own in parts]).reshape(-1, 2), *(g.points for g in bars)]
    )
    area = float(weights.sum())
    if area == 0.0:
        return Inertia(0.0, 0.0, 0.0, 0.0, 0.0, 0.0)
    centroid = (weights / area) @ places
    reach = float(np.ptp(places, axis=0).max()) + max((math.hypot(p.i_h, p.i_v) for _, p in parts), default=0)
    centroid[np.abs(centroid) <= ROUNDING * reach] = 0.0
    x, y = (places - centroid).T
    I_h = sum(n * own.I_h for n, own in parts) + float(weights @ (y * y))
    I_v = sum(n * own.I_v for n, own in parts) + float(weights @ (x * x))
    I_hv = sum(n * own.I_hv for n, own in parts) + float(weights @ (x * y))
    return Inertia(
        area,
        float(centroid[0]),
        float(centroid[1]),
        I_h,
        I_v,
        0.0 if abs(I_hv) <= ROUNDING * (I_h + I_v) else I_hv,
    )


def _net_factor(group: Bars) -> float:
    """E/E_ref of a bar less that of the material whose place it takes."""
    return group.law.factor - (group.displaced.factor if group.displaced else 0.0)


def _moduli(name: str, n: float, own: SectionProperties, whole: Inertia) -> PartModuli:
    """Moduli of a piece at its own edges."""

    def modulus(inertia: float, distance: float) -> float:
        return inertia / (n * abs(distance)) if n * distance else math.inf

    return PartModuli(
        name,
        W_el_h_top=modulus(whole.I_h, own.y_bar + own.c_top - whole.y_bar),
        W_el_h_bottom=modulus(whole.I_h, own.y_bar - own.c_bottom - whole.y_bar),
        W_el_v_left=modulus(whole.I_v, own.x_bar - own.c_left - whole.x_bar),
        W_el_v_right=modulus(whole.I_v, own.x_bar + own.c_right - whole.x_bar),
    )

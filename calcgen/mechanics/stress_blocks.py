"""Fully plastic stress: every material at a limit, on either side of an axis that equilibrium places.

The state of a section with the axis at a given direction is the one of largest moment for its axial force, so
these states are the boundary of all the forces that the section can carry: its surface of interaction.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from typing import Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.equilibrium import EquilibriumError, elastic_plane, yield_factor
from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.mechanics.outline import exact_cos_sin
from calcgen.mechanics.plastic import above, all_edges
from calcgen.mechanics.resultants import field_forces
from calcgen.mechanics.stress import BoolArray, Forces, StressPlane

Side: TypeAlias = Literal["bottom", "top", "right", "left"]
TOWARDS: dict[Side, Point] = {
    "bottom": (0.0, -1.0),
    "top": (0.0, 1.0),
    "right": (1.0, 0.0),
    "left": (-1.0, 0.0),
}

ONE_LEVEL = 1e-12  # of the section's size: bars closer than this lie on one axis
EQUAL_FORCE = 1e-12  # of the range of axial force
TURNS = 120  # halvings of the angle of the axis


@dataclass(frozen=True, eq=False)
class PlasticState:
    """Fully plastic stress with its resultants.

    field : its pieces and bars are rigid-plastic, its plane has the plastic neutral axis; the size of its
        gradient means nothing, as there is no limit to the strain. Bars on the axis, whose stress lies
        between their limits, are groups of their own under the same name.
    forces : about the field's reference point.
    """

    field: StressField
    forces: Forces


def plastic_state(
    pieces: Sequence[Piece],
    bars: Sequence[Bars] = (),
    *,
    towards: Side | Point,
    N: float = 0.0,
    about: Point = (0.0, 0.0),
) -> PlasticState:
    """Place the plastic neutral axis, across a given direction, so that the axial force is N.

    Parameters
    ----------
    pieces, bars : their laws' limits are the strengths, all of them finite; the factors play no part.
    towards : the tension side, or a vector into it. 'bottom' makes M positive and 'right' M_lat. A section
        without symmetry to the axis has a moment about the other axis too.
    N : axial force, N; the moments are those about the point `about`, m.

    Where a gap leaves the place of the axis open, it is the gap's middle; bars on the axis share a stress
    between their limits.

    Raises
    ------
    EquilibriumError
        For an N beyond what the section can carry in tension or compression.
    """
    return _Stack(pieces, bars, TOWARDS[towards] if isinstance(towards, str) else towards, about).state(N)


def plastic_bending(
    pieces: Sequence[Piece],
    bars: Sequence[Bars] = (),
    *,
    M: float,
    M_lat: float = 0.0,
    N: float = 0.0,
    about: Point = (0.0, 0.0),
) -> PlasticState:
    """Find the largest moments in the ratio M : M_lat, beside N, with the axis turned as they need.

    The size of M and M_lat plays no part, their signs do. By convexity the moments turn the same way as the
    axis; where they jump, two bars or more lie on the axis, and their stresses are found one by one.

    Raises
    ------
    EquilibriumError
        For an N beyond what the section can carry, or one that leaves no moment of this direction.
    """
    wanted = np.array([M_lat, -M]) / math.hypot(M, M_lat)  # the direction of ∫σ (x, y) dA

    def turned(angle: float) -> tuple[PlasticState, float]:
        cos, sin = exact_cos_sin(angle)
        towards = (cos * wanted[0] - sin * wanted[1], sin * wanted[0] + cos * wanted[1])
        found = plastic_state(pieces, bars, towards=(float(towards[0]), float(towards[1])), N=N, about=about)
        off = wanted[0] * -found.forces.M - wanted[1] * found.forces.M_lat
        return found, float(off)

    size = _Stack(pieces, bars, (1.0, 0.0), about).moment_scale
    state, off = turned(0.0)
    if abs(off) > EQUAL_FORCE * size:
        state = _turned_to(turned, (0.0, 0.5 * math.pi) if off < 0.0 else (-0.5 * math.pi, 0.0), size)
    if wanted[0] * state.forces.M_lat - wanted[1] * state.forces.M <= EQUAL_FORCE * size:
        raise EquilibriumError("limit")
    return state


def _turned_to(
    turned: Callable[[float], tuple[PlasticState, float]], bracket: tuple[float, float], size: float
) -> PlasticState:
    """Find the angle at which the moments have no part across the wanted direction."""
    low, high = bracket
    (state_low, off_low), (state_high, off_high) = turned(low), turned(high)
    if off_low > 0.0 or off_high < 0.0:
        raise EquilibriumError("limit")
    weights = [off_low, off_high]  # regula falsi; an end that stays twice counts half
    side = -1
    for turn in range(TURNS):
        share = 0.5 if turn % 4 == 3 else weights[0] / (weights[0] - weights[1])
        angle = low + share * (high - low)
        if not low < angle < high:
            break
        state, off = turned(angle)
        if abs(off) <= EQUAL_FORCE * size:
            return state
        moved = 0 if off < 0.0 else 1
        if moved == side:
            weights[1 - moved] *= 0.5
        weights[moved], side = off, moved
        if moved == 0:
            low, state_low, off_low = angle, state, off
        else:
            high, state_high, off_high = angle, state, off
    return _between(state_low, state_high, off_high / (off_high - off_low))


def interaction(
    pieces: Sequence[Piece],
    bars: Sequence[Bars] = (),
    *,
    axis: Literal["h", "v"] = "h",
    about: Point = (0.0, 0.0),
    n: int = 40,
) -> FloatArray:
    """Return the curve of N and plastic moment about a horizontal (or vertical) axis: (m, 2), N and N·m.

    It runs from pure tension over positive moments to pure compression, and back over negative ones; the
    first point is repeated at the end. Beside n states on either side it has those with N = 0 and with M = 0
    exactly, and those at which the axis enters or leaves bars, where the curve has corners.
    """
    sides: tuple[Side, Side] = ("bottom", "top") if axis == "h" else ("right", "left")
    first, second = (_half_curve(_Stack(pieces, bars, TOWARDS[side], about), axis, n) for side in sides)
    return np.array([*first, *second[-2::-1]])


def shape_factor(
    pieces: Sequence[Piece], bars: Sequence[Bars] = (), *, M: float = 1.0, M_lat: float = 0.0
) -> float | None:
    """Return the fully plastic moment over that of first yield, for moments in the ratio M : M_lat.

    None where a material carries no stress of one sign: then there is no first yield.
    """
    elastic = StressField(elastic_plane(pieces, bars, Forces(0.0, M, M_lat)), tuple(pieces), tuple(bars))
    first = yield_factor(elastic)
    plastic = plastic_bending(pieces, bars, M=M, M_lat=M_lat).forces
    return math.hypot(plastic.M, plastic.M_lat) / (first * math.hypot(M, M_lat)) if first > 0.0 else None


def _half_curve(stack: _Stack, axis: Literal["h", "v"], n: int) -> list[Point]:
    """N and moment of the states with tension on one side, from pure tension to pure compression."""

    def moment(N: float) -> float:
        forces = stack.state(N).forces
        return forces.M if axis == "h" else forces.M_lat

    least, most = stack.axial_range
    shares = 0.5 + 0.5 * np.cos(np.linspace(0.0, math.pi, n))
    levels = {
        *(least + shares * (most - least)).tolist(),
        *stack.corners,
        *({0.0} if least < 0.0 < most else {}),
    }
    half = [(N, moment(N)) for N in sorted(levels, reverse=True)]
    crossings = [
        (_root(moment, before, after), 0.0)
        for before, after in itertools.pairwise(half)
        if before[1] * after[1] < 0.0
    ]
    return sorted([*half, *crossings], reverse=True)


def _root(function: Callable[[float], float], low: Point, high: Point) -> float:
    """Find the zero of a continuous function between two of its points of opposite sign."""
    (x_0, y_0), (x_1, y_1) = low, high
    for turn in range(TURNS):
        x = x_0 + (y_0 / (y_0 - y_1) if turn % 2 else 0.5) * (x_1 - x_0)
        y = function(x)
        if y == 0.0 or x in (x_0, x_1):
            return x
        if (y > 0.0) == (y_0 > 0.0):
            x_0, y_0 = x, y
        else:
            x_1, y_1 = x, y
    return 0.5 * (x_0 + x_1)


class _Stack:
    """Pieces and bars seen along one direction, with all that does not depend on N."""

    def __init__(self, pieces: Sequence[Piece], bars: Sequence[Bars], towards: Point, about: Point) -> None:
        length = math.hypot(*towards)
        self.pieces = tuple(replace(each, law=_rigid(each.law)) for each in pieces)
        self.bars = tuple(
            replace(b, law=_rigid(b.law), displaced=b.displaced and _rigid(b.displaced)) for b in bars
        )
        self.up, self.about = np.array(towards) / length, about
        frame = np.array([[self.up[1], -self.up[0]], self.up])
        self.edges = [
            tuple((points - np.array(about)) @ frame.T for points in all_edges(*each.outlines))
            for each in self.pieces
        ]
        corners = [start[:, 1] for start, _ in self.edges]
        self.size = float(np.abs(np.concatenate(corners)).max())
        self.heights = _on_levels(
            [(group.points - np.array(about)) @ self.up for group in self.bars], ONE_LEVEL * self.size
        )
        self.levels = np.unique(np.concatenate([*corners, *self.heights]))
        limits = [each.law for each in self.pieces] + [group.law for group in self.bars]
        self.strength = max(max(law.tension, law.compression) for law in limits)

    def axial(self, level: float, *, bars_on_it: float = 0.0) -> float:
        """Axial force with the axis at a level; bars on it are in tension (1) or in compression (0)."""
        N = 0.0
        for piece, (start, end) in zip(self.pieces, self.edges, strict=True):
            tension, compression = piece.law.tension, piece.law.compression
            whole = above(start, end, float(start[:, 1].min()))[0]
            N += (tension + compression) * above(start, end, level)[0] - compression * whole
        for group, heights in zip(self.bars, self.heights, strict=True):
            tension, compression = _net_limits(group)
            share = _tension_share(heights, level, bars_on_it)
            N += group.area * float(np.sum(share * (tension + compression) - compression))
        return N

    @property
    def axial_range(self) -> tuple[float, float]:
        """Least and largest axial force that the section can carry."""
        return self.axial(float(self.levels[-1])), self.axial(float(self.levels[0]), bars_on_it=1.0)

    @property
    def moment_scale(self) -> float:
        """Range of axial force times the size of the section, N·m."""
        least, most = self.axial_range
        return (most - least) * self.size

    @property
    def corners(self) -> list[float]:
        """Axial forces between which bars on the axis go from compression to tension."""
        levels = np.unique(np.concatenate([np.empty(0), *self.heights]))
        return [self.axial(float(level), bars_on_it=share) for level in levels for share in (0.0, 1.0)]

    def state(self, N: float) -> PlasticState:
        """Place the axis: axial force falls with its level, smoothly between levels and by bars on them."""
        least, most = self.axial_range
        near = EQUAL_FORCE * (most - least)
        if not least - near <= N <= most + near:
            raise EquilibriumError("limit", most / N if N > 0.0 else least / N)
        low, high = 0, len(self.levels) - 1
        while high - low > 1:
            middle = (low + high) // 2
            low, high = (middle, high) if self._at(middle, 1.0) > N + near else (low, middle)
        # the axis lies on level `low`, between the two, or on `high`, or anywhere in a gap above `high`
        if self._at(low, 0.0) <= N + near:
            return (
                self._placed(float(self.levels[low]), N)
                if self._at(low, 0.0) < N - near
                else (self._in_gap(low, N, near))
            )
        if self._at(high, 1.0) >= N - near:
            return (
                self._placed(float(self.levels[high]), N)
                if self._at(high, 0.0) < N - near
                else (self._in_gap(high, N, near))
            )
        return self._placed(self._within(float(self.levels[low]), float(self.levels[high]), N), N)

    def _at(self, index: int, bars_on_it: float) -> float:
        return self.axial(float(self.levels[index]), bars_on_it=bars_on_it)

    def _in_gap(self, first: int, N: float, near: float) -> PlasticState:
        """Middle of the levels between which nothing changes."""
        last = first
        while last + 1 < len(self.levels) and self._at(last + 1, 1.0) >= N - near:
            last += 1
        return self._placed(0.5 * float(self.levels[first] + self.levels[last]), N)

    def _within(self, low: float, high: float, N: float) -> float:
        """Level between neighbouring ones, where the force is a parabola, without bars on either."""
        at_low, at_high = self.axial(low) - N, self.axial(high, bars_on_it=1.0) - N
        at_middle = self.axial(0.5 * (low + high)) - N
        c = 2.0 * (at_low - 2.0 * at_middle + at_high)
        b = at_high - at_low - c
        part = 2.0 * at_low / (-b + math.sqrt(max(b * b - 4.0 * c * at_low, 0.0)))
        return low + min(max(part, 0.0), 1.0) * (high - low)

    def _placed(self, level: float, N: float) -> PlasticState:
        """Put the axis at a level, and share among the bars on it what N still lacks."""
        slope = self.strength / self.size
        to_x, to_y = (slope * self.up).tolist()
        plane = StressPlane(float(0.0 - slope * level), to_x, to_y, *self.about)
        none, full = self.axial(level), self.axial(level, bars_on_it=1.0)
        share = min(max((N - none) / (full - none), 0.0), 1.0) if full > none else 0.0
        bars: list[Bars] = []
        for group, heights in zip(self.bars, self.heights, strict=True):
            tension, compression = _net_limits(group)
            stresses = _tension_share(heights, level, share) * (tension + compression) - compression
            bars += _split(group, np.abs(heights - level) <= ONE_LEVEL * self.size, stresses)
        field = StressField(plane, self.pieces, tuple(bars))
        return PlasticState(field, field_forces(field))


def _rigid(law: Law) -> Law:
    if math.isinf(law.tension) or math.isinf(law.compression):
        raise ValueError("fully plastic stress needs the strength of every material")
    return Law(math.inf, law.tension, law.compression)


def _net_limits(group: Bars) -> tuple[float, float]:
    """Limits of a bar less those of the material whose place it takes."""
    host = group.displaced or Law(tension=0.0, compression=0.0)
    return group.law.tension - host.tension, group.law.compression - host.compression


def _on_levels(heights: list[FloatArray], near: float) -> list[FloatArray]:
    """Bring bars that lie on one level, but for a rounding, to the lowest of their heights."""
    if not heights:
        return []
    ordered = np.unique(np.concatenate(heights))
    first = np.maximum.accumulate(np.where(np.diff(ordered, prepend=-math.inf) > near, ordered, -math.inf))
    return [first[np.searchsorted(ordered, each)] for each in heights]


def _tension_share(heights: FloatArray, level: float, on_it: float) -> FloatArray:
    """How far bars are on the way from the limit of compression, 0, to that of tension, 1."""
    return np.where(heights == level, on_it, np.where(heights > level, 1.0, 0.0))


def _split(group: Bars, on_axis: BoolArray, stresses: FloatArray) -> list[Bars]:
    """Set the bars on the axis apart, each with its own stress (n,), Pa, whatever side rounding puts it on.

    The material that they displace counts as without stress there.
    """
    none = Law.constant(0.0)
    rest = [replace(group, points=group.points[~on_axis])] if not on_axis.all() else []
    return rest + [
        Bars(group.name, group.points[i : i + 1], group.area, Law.constant(s), group.displaced and none)
        for i, s in zip(np.flatnonzero(on_axis).tolist(), stresses[on_axis].tolist(), strict=True)
    ]


def _between(low: PlasticState, high: PlasticState, share: float) -> PlasticState:
    """Mix two states whose axes agree, but for a rounding: the bars whose stress differs lie on the axis."""
    of_high = {
        tuple(point): force / group.area
        for group in high.field.bars
        for point, force in zip(group.points.tolist(), high.field.bar_forces(group), strict=True)
    }
    bars: list[Bars] = []
    for group in low.field.bars:
        here = low.field.bar_forces(group) / group.area
        there = np.array([of_high[tuple(point)] for point in group.points.tolist()])
        bars += _split(group, here != there, share * here + (1.0 - share) * there)
    field = replace(low.field, bars=tuple(bars))
    return PlasticState(field, field_forces(field))

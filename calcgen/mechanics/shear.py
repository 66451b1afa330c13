"""Shear stress on the actual outline: the flow across straight cuts, from the change of normal stress.

Stresses and flows are those on the face that is seen looking along the beam from its start: x right, y up.
V is positive where the part before the section is pushed up, V_lat where it is pushed to the left, so that
dM/dz = V and dM_lat/dz = V_lat. On that face a positive V acts upwards and a positive V_lat to the left. q
and τ across level cuts are positive upwards, those across upright cuts positive to the left: a positive force
has positive flow.

Across a level cut the flow is q = -∫ dσ/dz dA over what lies above it, with dσ/dz by the general flexure
formula; where I_hv = 0 that is V S/I_h. The mean stress over the cut is q/b. Where a cut passes several
materials the stress in each is taken proportional to its modulus: b counts each width n = E/E_ref times, and
a material's stress is n q/b.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise
from typing import Literal, TypeAlias

import numpy as np
from numpy.typing import NDArray

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.field import Bars, Piece
from calcgen.mechanics.plastic import above, all_edges, seen_from_right
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.stress import BoolArray, Forces, StressPlane, elastic_stress

Direction: TypeAlias = Literal["level", "upright"]
Intervals: TypeAlias = list[tuple[int, float, float]]

SAME_LEVEL = 1e-12  # of the height: levels closer than this are one
NO_WIDTH = 1e-9  # of the section's width: a narrower cut passes no material
TIED = 2e-5  # relatively: stresses closer than this are equally large; arcs are edges, and no truer than that
WORK = 4_000_000  # levels times edges: beyond it, not every corner has its level in a profile
AT_ONCE = 1_000_000  # the same product in one step: bounds memory to some tens of megabytes
DRAWN = 48  # steps over the height, at least, so that a parabola is drawn as one


@dataclass(frozen=True)
class ShearForces:
    """Shear forces, N, with the signs of the module."""

    V: float = 0.0
    V_lat: float = 0.0


def stress_rate(section: Inertia, shear: ShearForces) -> StressPlane:
    """Return dσ/dz, Pa/m, where M grows by V and M_lat by V_lat a length."""
    return elastic_stress(section, Forces(M=shear.V, M_lat=shear.V_lat))


@dataclass(frozen=True)
class Cut:
    """One cut: its level, m (y of a level cut, x of an upright one), and what crosses it.

    S : first moment of what lies above (right of) it about the centroid's axis, m³; b : width, m; q : flow,
    N/m; tau : stress, Pa, the largest of the materials that it passes. S and b are transformed to the
    reference modulus. `above` tells that the width is that just above (right of) the level, where it jumps.
    """

    level: float
    S: float
    b: float
    q: float
    tau: float
    above: bool


@dataclass(frozen=True, eq=False)
class CutValues:
    """The same as `Cut` for many cuts, (n,) each; tau is not a number where flow crosses a gap.

    `factor` is the largest E/E_ref among the materials that a cut passes.
    """

    level: FloatArray
    S: FloatArray
    b: FloatArray
    q: FloatArray
    tau: FloatArray
    factor: FloatArray
    above: BoolArray


@dataclass(frozen=True, eq=False)
class ShearProfile:
    """Flow and stress over the whole height (width): bottom to top, or left to right.

    values : n cuts; a level where the width jumps stands twice, with the width below it first. extreme : the
    cut of largest |τ|; of equals the one nearest to the centroid, then the lowest (leftmost). bands : levels
    between which widths are linear and flows cubic, m. exact : whether every corner has its level there; an
    outline of very many corners has those with the largest jumps and an even choice of the others,
    and what lies between is interpolated to find the extreme.
    """

    values: CutValues
    extreme: Cut
    bands: FloatArray
    exact: bool


@dataclass(frozen=True, eq=False)
class Cuts:
    """All parallel cuts of a section under given shear forces; made by `cuts`.

    Lengths are from the centroid, in a frame where the cuts are level; the section's centroid is at `origin`
    on the axis across them. start, end : (n, 2) edges with material on their left, none of them level, m;
    factor : (n,) E/E_ref at each edge; first_edge : (p,) index of the first edge of each piece; bars : (k, 3)
    place along the cut, height, and transformed area; bands : levels of the corners; exact : whether all are
    there; g_x, g_y : so that q = ∫ n (g_x x + g_y y) dA above a cut, Pa/m².
    """

    direction: Direction
    origin: float
    start: FloatArray
    end: FloatArray
    factor: FloatArray
    first_edge: NDArray[np.intp]
    bars: FloatArray
    bands: FloatArray
    exact: bool
    g_x: float
    g_y: float

    def at(self, levels: FloatArray, *, above: BoolArray | bool = True) -> CutValues:
        """Cut at levels (n,), m, in the section's coordinates: just above them, or just below.

        A level within 1e-12 of the height of a corner's is that corner's.
        """
        sides = np.broadcast_to(np.asarray(above, dtype=bool), levels.shape)
        first, q, widths, _ = self._integrals(self._heights(levels), sides)
        factors = self.factors
        b = widths @ factors
        width, flow = self._scale
        passed = np.where(widths > NO_WIDTH * width, factors, 0.0).max(axis=1)
        empty = np.where(np.abs(q) <= SAME_LEVEL * flow, 0.0, np.nan)
        tau = np.where(passed > 0.0, passed * q / np.where(passed > 0.0, b, 1.0), empty)
        return CutValues(levels, first, b, q, tau, passed, sides)

    def one(self, level: float, *, above: bool = True) -> Cut:
        """Cut at one level, m."""
        v = self.at(np.array([level]), above=above)
        level = level if abs(level) > SAME_LEVEL * self._height else 0.0
        return Cut(level, float(v.S[0]), float(v.b[0]), float(v.q[0]), float(v.tau[0]), above)

    @cached_property
    def profile(self) -> ShearProfile:
        """Flow and stress over the whole height."""
        low, high = self.bands[:-1], self.bands[1:]
        steps = np.maximum(1, np.ceil(DRAWN * (high - low) / self._height)).astype(np.intp)
        band = np.repeat(np.arange(len(low)), steps)
        share = (np.arange(len(band)) - np.repeat(np.cumsum(steps) - steps, steps)) / steps[band]
        levels = np.concatenate((low[band] + share * (high - low)[band], high))
        sides = np.arange(len(levels)) < len(band)
        order = np.lexsort((sides, levels))
        return ShearProfile(
            self.at(levels[order] + self.origin, above=sides[order]),
            self._extreme,
            self.bands + self.origin,
            self.exact,
        )

    def material(self, levels: FloatArray, *, above: BoolArray | bool = True) -> list[Intervals]:
        """Intervals of material on each cut: index of the piece, and where it begins and ends.

        x from left to right on a level cut, y from top to bottom on an upright one, from the centroid, m.
        """
        heights = self._heights(levels)
        sides = np.broadcast_to(np.asarray(above, dtype=bool), levels.shape)
        at_once = max(1, AT_ONCE // len(self.start))
        parts = range(0, len(heights), at_once)
        return [m for i in parts for m in self._few(heights[i : i + at_once], sides[i : i + at_once])]

    def _few(self, heights: FloatArray, sides: BoolArray) -> list[Intervals]:
        cut, edge = np.nonzero(self._passed(heights[:, None], sides[:, None]))
        x = _crossing(self.start[edge], self.end[edge], heights[cut])
        piece = np.searchsorted(self.first_edge, edge, side="right") - 1
        order = np.lexsort((x, piece, cut))
        left, right = order[0::2], order[1::2]
        intervals = list(zip(piece[left].tolist(), x[left].tolist(), x[right].tolist(), strict=True))
        ends = np.searchsorted(cut[left], np.arange(len(heights)), side="right").tolist()
        return [intervals[first:last] for first, last in pairwise([0, *ends])]

    def _passed(self, level: FloatArray, side: BoolArray) -> BoolArray:
        """Tell which edges, (k, n), cuts at `level`, (k, 1), pass, just above it or just below."""
        low, high = self._reach
        return np.where(side, (low <= level) & (level < high), (low < level) & (level <= high))

    @property
    def factors(self) -> FloatArray:
        """E/E_ref of each piece, (p,)."""
        return self.factor[self.first_edge]

    def _heights(self, levels: FloatArray) -> FloatArray:
        """Heights in the frame; those that all but reach a corner's are that corner's."""
        heights = levels - self.origin
        upper = np.clip(np.searchsorted(self.bands, heights), 1, len(self.bands) - 1)
        below, over = self.bands[upper - 1], self.bands[upper]
        nearest = np.where(heights - below < over - heights, below, over)
        reach = SAME_LEVEL * self._height + 4.0 * np.finfo(np.float64).eps * abs(self.origin)
        return np.where(np.abs(heights - nearest) <= reach, nearest, heights)

    @property
    def _height(self) -> float:
        return float(self.bands[-1] - self.bands[0])

    @cached_property
    def _reach(self) -> tuple[FloatArray, FloatArray]:
        """Lower and upper end of each edge."""
        ends = self.start[:, 1], self.end[:, 1]
        return np.minimum(*ends), np.maximum(*ends)

    @cached_property
    def _scale(self) -> tuple[float, float]:
        """Width of the section, m, and a flow of its order, N/m, to tell rounding from what matters."""
        width, height = np.ptp(self.start, axis=0).tolist()
        return width, math.hypot(self.g_x, self.g_y) * width * height * max(width, height)

    @property
    def _extreme(self) -> Cut:
        """The cut of largest |τ|, from the exact q and b of each band.

        In a band q is a cubic, given by its values and slopes at both ends, and b is linear; τ is extreme at
        an end or where q' b = q b'.
        """
        low, high = self.bands[:-1] + self.origin, self.bands[1:] + self.origin
        height = high - low
        ends = [
            self._integrals(edge, np.full(len(edge), side))
            for edge, side in ((self.bands[:-1], True), (self.bands[1:], False))
        ]
        (_, q_0, w_0, slope_0), (_, q_1, w_1, slope_1) = ends
        s_0, s_1, rise = slope_0 * height, slope_1 * height, q_1 - q_0
        cubic = np.column_stack((s_0 + s_1 - 2.0 * rise, 3.0 * rise - 2.0 * s_0 - s_1, s_0, q_0))
        b_0, b_1 = w_0 @ self.factors, w_1 @ self.factors
        turns = [
            (float(low[i] + u * height[i]), True)
            for i in np.flatnonzero(b_0 + b_1 > NO_WIDTH * self._scale[0])
            for u in _turns(cubic[i], float(b_0[i]), float(b_1[i] - b_0[i]))
        ]
        candidates = [*((y, True) for y in low.tolist()), *((y, False) for y in high.tolist()), *turns]
        levels, sides = np.array([y for y, _ in candidates]), np.array([side for _, side in candidates])
        size = np.nan_to_num(np.abs(self.at(levels, above=sides).tau))
        tied = np.flatnonzero(size >= (1.0 - TIED) * size.max())
        off = np.abs(levels[tied] - self.origin)
        near = tied[off <= off.min() + NO_WIDTH * self._height]
        first = near[np.argmin(levels[near])]
        return self.one(float(levels[first]), above=bool(sides[first]))

    def _integrals(
        self, heights: FloatArray, sides: BoolArray
    ) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
        """Return for cuts at `heights`, (k,): ∫n y dA above, q, the widths of the pieces, (k, p), and dq/dy.

        By Green's theorem with dy, so that the cut itself adds nothing: ∫x dA = ∮ x²/2 dy, ∫y dA = ∮ x y dy.
        """
        at_once = max(1, AT_ONCE // len(self.start))
        parts = [
            self._few_integrals(heights[i : i + at_once, None], sides[i : i + at_once, None])
            for i in range(0, len(heights), at_once)
        ]
        x_moment, y_moment, widths, cut_moment = (np.concatenate(each) for each in zip(*parts, strict=True))
        if len(self.bars):
            x, y, area = self.bars.T
            lie_above = area * np.where(sides[:, None], y > heights[:, None], y >= heights[:, None])
            x_moment, y_moment = x_moment + lie_above @ x, y_moment + lie_above @ y
        q = self.g_x * x_moment + self.g_y * y_moment
        slope = -self.g_x * cut_moment - self.g_y * heights * (widths @ self.factors)
        return y_moment, q, widths, slope

    def _few_integrals(self, level: FloatArray, side: BoolArray) -> tuple[FloatArray, ...]:
        (x_0, y_0), (x_1, y_1) = self.start.T, self.end.T
        run = (x_1 - x_0) / (y_1 - y_0)
        y_a, y_b = np.maximum(y_0, level), np.maximum(y_1, level)
        x_a = np.where(y_a == y_0, x_0, x_0 + run * (y_a - y_0))
        x_b = np.where(y_b == y_1, x_1, x_0 + run * (y_b - y_0))
        x_m, y_m, dy = 0.5 * (x_a + x_b), 0.5 * (y_a + y_b), self.factor * (y_b - y_a) / 6.0
        x_moment = np.sum(dy * (x_a**2 + 4.0 * x_m**2 + x_b**2), axis=1) / 2.0
        y_moment = np.sum(dy * (x_a * y_a + 4.0 * x_m * y_m + x_b * y_b), axis=1)
        x = np.where(self._passed(level, side), np.sign(y_1 - y_0) * (x_0 + run * (level - y_0)), 0.0)
        widths = np.add.reduceat(x, self.first_edge, axis=1)
        cut_moment = 0.5 * np.sum(self.factor * np.sign(y_1 - y_0) * x * x, axis=1)
        return x_moment, y_moment, widths, cut_moment


def cuts(
    direction: Direction,
    section: Inertia,
    shear: ShearForces,
    pieces: Sequence[Piece],
    bars: Sequence[Bars] = (),
) -> Cuts:
    """Prepare the cuts of a section under shear forces.

    section : area, centroid and second moments, transformed to the reference modulus where there are several;
    pieces : its parts, without overlap, of finite `law.factor`; bars : counted with their modulus less that
    of what they displace.
    """
    rate = stress_rate(section, shear)
    centroid = np.array([[section.x_bar, section.y_bar]])
    level = direction == "level"
    edges = [all_edges(*piece.outlines) for piece in pieces]
    start, end = (np.concatenate(ends) - centroid for ends in zip(*edges, strict=True))
    factor = np.repeat([piece.law.factor for piece in pieces], [len(first) for first, _ in edges])
    owner = np.repeat(np.arange(len(pieces)), [len(first) for first, _ in edges])
    places = np.concatenate([bar.points - centroid for bar in bars]) if bars else np.empty((0, 2))
    areas = np.concatenate([np.full(len(bar.points), _extra(bar)) for bar in bars]) if bars else np.empty(0)
    if not level:
        start, end, places = seen_from_right(start), seen_from_right(end), seen_from_right(places)
    heights = _aligned(np.concatenate((start[:, 1], end[:, 1], places[:, 1])))
    start[:, 1], end[:, 1], places[:, 1] = np.split(heights, [len(start), 2 * len(start)])
    bands, exact = _bands(start, end, factor, places[:, 1])
    rising = start[:, 1] != end[:, 1]
    return Cuts(
        direction=direction,
        origin=section.y_bar if level else section.x_bar,
        start=start[rising],
        end=end[rising],
        factor=factor[rising],
        first_edge=np.searchsorted(owner[rising], np.arange(len(pieces))),
        bars=np.column_stack((places, areas)),
        bands=bands,
        exact=exact,
        g_x=-rate.g_x if level else -rate.g_y,
        g_y=-rate.g_y if level else rate.g_x,
    )


def gain(section: Inertia, shear: ShearForces, piece: Piece) -> float:
    """Return the force that a part gains a length, N/m: ∫ n dσ/dz dA over the part alone.

    It comes across its joints: what their welds, bolts or glue lines carry together.
    """
    rate = stress_rate(section, shear)
    start, end = all_edges(*piece.outlines)
    bottom, left = float(start[:, 1].min()), float(start[:, 0].min())
    area, first_y = above(start, end, bottom)
    _, first_x = above(seen_from_right(start), seen_from_right(end), left)
    middle = np.array([[left + first_x / area, bottom + first_y / area]])
    return piece.law.factor * area * float(rate.at(middle)[0])


def _extra(bar: Bars) -> float:
    """Return the transformed area of one bar beyond what it displaces, m²."""
    return bar.area * (bar.law.factor - (bar.displaced.factor if bar.displaced else 0.0))


def _aligned(heights: FloatArray) -> FloatArray:
    """Give heights that differ by rounding alone the same value, so that parts that touch leave no gap."""
    levels, where = np.unique(heights, return_inverse=True)
    first = np.append(True, np.diff(levels) > SAME_LEVEL * np.ptp(levels))
    aligned: FloatArray = levels[first][np.cumsum(first) - 1][where]
    return aligned


def _bands(
    start: FloatArray, end: FloatArray, factor: FloatArray, bars: FloatArray
) -> tuple[FloatArray, bool]:
    """Levels of the corners and bars, and whether all are there."""
    levels = np.unique(np.concatenate((start[:, 1], bars)))
    most = max(64, WORK // len(start))
    if len(levels) <= most:
        return levels, True
    even = levels[np.linspace(0, len(levels) - 1, most // 2).round().astype(np.intp)]
    flat = start[:, 1] == end[:, 1]
    at, where = np.unique(start[flat, 1], return_inverse=True)
    jump = np.abs(np.bincount(where, factor[flat] * (end[flat, 0] - start[flat, 0]), minlength=len(at)))
    largest = at[np.argsort(-jump, kind="stable")[: most // 2]]
    return np.unique(np.concatenate((even, largest))), False


def _crossing(start: FloatArray, end: FloatArray, height: FloatArray) -> FloatArray:
    share = (height - start[:, 1]) / (end[:, 1] - start[:, 1])
    return start[:, 0] + share * (end[:, 0] - start[:, 0])


def _turns(cubic: FloatArray, b: float, slope: float) -> list[float]:
    """Places u in (0, 1) where (cubic q)/(b + slope u) is stationary."""
    width = np.array([slope, b])
    steepness = np.polysub(np.polymul(np.polyder(cubic), width), slope * cubic)
    largest = float(np.abs(steepness).max())
    if largest == 0.0:
        return []
    roots = np.roots(np.where(np.abs(steepness) <= 1e-14 * largest, 0.0, steepness))
    real = roots.real[np.abs(roots.imag) <= 1e-6]
    return [float(u) for u in real if 0.0 < u < 1.0]

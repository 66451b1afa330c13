"""Normal stress over a section of one or several materials: a plane of strain, and a law for each material.

Plane sections make the strain linear over the section. It is kept as the *reference stress*
s = E_ref·ε, Pa, a `StressPlane`, so that a section whose modulus nobody gave needs none. Each part then has
its stress from s by a law that is linear between a limit of compression and a limit of tension, which covers
elastic composite, elastic-plastic, no-tension, cracked and fully plastic sections alike.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.stress import TIED, Extreme, NeutralAxis, StressPlane


@dataclass(frozen=True)
class Law:
    """Stress from the reference stress s: `factor`·s, but not above `tension` nor below -`compression`, Pa.

    factor : E/E_ref of the material; infinite for a rigid-plastic one, whose stress is either limit.
    tension, compression : neither negative, but in `constant`; infinite where there is no limit, 0 for a
        material that carries no tension (or no compression).
    """

    factor: float = 1.0
    tension: float = math.inf
    compression: float = math.inf

    @classmethod
    def constant(cls, stress: float) -> Law:
        """Return the law of a stress, Pa, that no strain changes: its two limits are the same value."""
        return cls(0.0, stress, -stress)

    def stress(self, s: FloatArray) -> FloatArray:
        """Return the stress, Pa, at reference stresses s, Pa; tension positive."""
        if self.rigid:
            return np.where(s > 0.0, self.tension, np.where(s < 0.0, -self.compression, 0.0))
        return np.clip(self.factor * s, -self.compression, self.tension)

    @property
    def linear(self) -> bool:
        """Whether the stress is proportional to the strain throughout."""
        return math.isinf(self.tension) and math.isinf(self.compression)

    @property
    def rigid(self) -> bool:
        """Whether the stress is at a limit wherever there is strain."""
        return math.isinf(self.factor)

    @property
    def kinks(self) -> tuple[float, ...]:
        """The reference stresses, Pa, at which a limit is reached, upwards."""
        if self.rigid:
            return (0.0,)
        limits = (-self.compression, self.tension) if self.factor else ()
        return tuple(limit / self.factor for limit in limits if math.isfinite(limit))


ELASTIC = Law()


@dataclass(frozen=True, eq=False)
class Piece:
    """A part of one material: its name ('' for a section of one shape), outlines without overlap, its law."""

    name: str
    outlines: tuple[Outline, ...]
    law: Law = ELASTIC


@dataclass(frozen=True, eq=False)
class Bars:
    """Bars taken as points: places (n, 2), m, the area of each, m², and their law.

    `displaced` is the law of the material in which they lie, whose stress they take the place of: the force
    of a bar is area·(law - displaced). None where they lie in nothing.
    """

    name: str
    points: FloatArray
    area: float
    law: Law
    displaced: Law | None = None


Part: TypeAlias = Piece | Bars


@dataclass(frozen=True)
class FieldExtreme(Extreme):
    """A largest or smallest stress, its place, and the name of the piece or of the bars that has it.

    Where a limit is reached over a whole region, its place is the outermost one, of the largest strain.
    """

    part: str


@dataclass(frozen=True)
class PointStress:
    """The stress at a point, Pa, and the piece that has it.

    On an interface it is that of larger magnitude; `others` are the names of the pieces that meet there too.
    """

    value: float
    part: str
    others: tuple[str, ...] = ()


@dataclass(frozen=True, eq=False)
class ProfilePart:
    """The stress of one piece along the depth: heights, m, upwards, and stresses, Pa, (n,) each.

    It is linear between them; a height written twice is a jump. A piece with a gap has a part on either side.
    """

    name: str
    heights: FloatArray
    stresses: FloatArray


@dataclass(frozen=True, eq=False)
class Profile:
    """Stress along the depth: heights are measured from the origin along `direction`, a unit vector.

    It is (0, 1), so that a height is y, where the stress does not vary across, and else the direction of the
    steepest strain, taken upwards (to the right where it is level).
    """

    direction: Point
    parts: tuple[ProfilePart, ...]


@dataclass(frozen=True, eq=False)
class StressField:
    """The stress of a section: the plane of reference stress, and the parts and bars it acts on.

    Where `unloaded` is given, the stress factor·`unloaded` has been taken away again: an elastic unloading,
    which leaves residual stress. The reference stress is then still that of the loaded section.
    """

    plane: StressPlane
    pieces: tuple[Piece, ...]
    bars: tuple[Bars, ...] = ()
    unloaded: StressPlane | None = None

    def stress(self, part: Part, points: FloatArray) -> FloatArray:
        """Return the stress of a piece, or of bars, at points (n, 2), m: (n,), Pa, tension positive."""
        return self._stress(part.law, points)

    def bar_forces(self, bars: Bars) -> FloatArray:
        """Return the force of each bar, N, less that of the material whose place it takes."""
        displaced = self._stress(bars.displaced, bars.points) if bars.displaced else 0.0
        forces: FloatArray = bars.area * (self._stress(bars.law, bars.points) - displaced)
        return forces

    def after_unloading(self, elastic: StressPlane) -> StressField:
        """Return the residual stress when the forces are taken away elastically.

        `elastic` is the plane of reference stress that the same forces make in the elastic section.
        """
        return replace(self, unloaded=elastic)

    @property
    def neutral_axis(self) -> NeutralAxis | None:
        """The line of zero strain, inside the section or not; None where the strain is uniform."""
        return self.plane.neutral_axis

    def extremes(self) -> tuple[FieldExtreme, FieldExtreme]:
        """Return the largest and the smallest stress over all pieces and bars; of equals, the first named."""
        parts: tuple[Part, ...] = (*self.pieces, *self.bars)
        pairs = [self.extremes_of(part) for part in parts]
        most, least = max(pair[0].value for pair in pairs), min(pair[1].value for pair in pairs)
        near = TIED * (most - least)
        return (
            next(pair[0] for pair in pairs if pair[0].value >= most - near),
            next(pair[1] for pair in pairs if pair[1].value <= least + near),
        )

    def extremes_of(self, part: Part) -> tuple[FieldExtreme, FieldExtreme]:
        """Return the largest and the smallest stress of one piece, or of one group of bars."""
        if isinstance(part, Bars):
            return self._of_points(part, part.points)
        if self.unloaded is not None:
            return self._of_points(part, np.concatenate([self._vertices(part, o) for o in part.outlines]))
        most, least = self.plane.extremes(*part.outlines)
        value_most, value_least = part.law.stress(np.array([most.value, least.value])).tolist()
        if self.plane.uniform and not any(each.contains((most.x, most.y)) for each in part.outlines):
            x, y = part.outlines[0].bounds.middle
            most = least = Extreme(most.value, x, y, ((x, y), (x, y)))
        return (
            FieldExtreme(value_most, most.x, most.y, most.ends, part.name),
            FieldExtreme(value_least, least.x, least.y, least.ends, part.name),
        )

    def at(self, point: Point) -> PointStress | None:
        """Return the stress at a point, m; None where it lies in no piece. Bars are not looked at."""
        here = np.array([point])
        there = [piece for piece in self.pieces if any(part.contains(point) for part in piece.outlines)]
        if not there:
            return None
        stresses = [float(self.stress(piece, here)[0]) for piece in there]
        first = max(range(len(there)), key=lambda i: abs(stresses[i]))
        others = tuple(piece.name for i, piece in enumerate(there) if i != first)
        return PointStress(stresses[first], there[first].name, others)

    def at_top(self) -> float:
        """Return the stress at the section's top fibre, Pa; of several values that of largest magnitude."""
        return self._at_fibre(1.0)

    def at_bottom(self) -> float:
        """Return the stress at the section's bottom fibre, Pa; of several that of largest magnitude."""
        return self._at_fibre(-1.0)

    def profile(self) -> Profile:
        """Return the stress along the depth, with a corner at each limit and a jump at each interface.

        Where unloading bent the section about another axis, it is the stress on the line through the plane's
        reference point.
        """
        upwards = self.plane.g_y < 0.0 or (self.plane.g_y == 0.0 and self.plane.g_x < 0.0)
        g_x, g_y = (-self.plane.g_x, -self.plane.g_y) if upwards else (self.plane.g_x, self.plane.g_y)
        steepest = math.hypot(g_x, g_y)
        along = np.array([g_x + 0.0, g_y + 0.0]) / steepest if steepest > 0.0 else np.array([0.0, 1.0])
        parts = [
            self._profile_part(piece, along, low, high)
            for piece in self.pieces
            for low, high in _stretches(along, piece.outlines)
        ]
        return Profile((float(along[0]), float(along[1])), tuple(parts))

    def elastic_core(self, piece: Piece | None = None) -> float | None:
        """Return the depth of the elastic core, m; None where the strain is uniform.

        It is the distance, along the steepest strain, between the lines at which a piece reaches its limits,
        within its extent; for the whole section, from the first such line of any piece to the last.
        """
        steepest = math.hypot(self.plane.g_x, self.plane.g_y)
        if steepest == 0.0:
            return None
        low, high = math.inf, -math.inf
        for each in self.pieces if piece is None else (piece,):
            law, extremes = each.law, self.plane.extremes(*each.outlines)
            least, most = extremes[1].value, extremes[0].value
            bottom, top = (-law.compression / law.factor, law.tension / law.factor) if law.factor else (0, 0)
            if max(bottom, least) < min(top, most):
                low, high = min(low, max(bottom, least)), max(high, min(top, most))
        return max(high - low, 0.0) / steepest

    def _stress(self, law: Law, points: FloatArray) -> FloatArray:
        loaded = law.stress(self.plane.at(points))
        return loaded if self.unloaded is None else loaded - law.factor * self.unloaded.at(points)

    def _of_points(self, part: Part, points: FloatArray) -> tuple[FieldExtreme, FieldExtreme]:
        """Extremes among points, (n, 2); of equals the leftmost, and the lowest of those."""
        stresses = self.stress(part, points)
        most, least = float(stresses.max()), float(stresses.min())
        near = TIED * (most - least)
        chosen = []
        for value, tied in ((most, stresses >= most - near), (least, stresses <= least + near)):
            x, y = min(map(tuple, points[tied].tolist()))
            chosen.append(FieldExtreme(value, x, y, ((x, y), (x, y)), part.name))
        return chosen[0], chosen[1]

    def _vertices(self, piece: Piece, part: Outline) -> FloatArray:
        """Corners of the zones of linear stress: those of the outline, and the kinks on its edges."""
        start, end = part.edges
        s_start, s_end = self.plane.at(start), self.plane.at(end)
        found = [start]
        for kink in piece.law.kinks:
            astride = (s_start < kink) != (s_end < kink)
            share = (kink - s_start[astride]) / (s_end[astride] - s_start[astride])
            found.append(start[astride] + share[:, None] * (end[astride] - start[astride]))
        return np.concatenate(found)

    def _at_fibre(self, outwards: float) -> float:
        rings = [(piece, part.exterior) for piece in self.pieces for part in piece.outlines]
        heights = [outwards * ring[:, 1] for _, ring in rings]
        highest, lowest = max(float(h.max()) for h in heights), min(float(h.min()) for h in heights)
        least = highest - TIED * (highest - lowest)
        stresses = np.concatenate(
            [self.stress(piece, ring[h >= least]) for (piece, ring), h in zip(rings, heights, strict=True)]
        )
        return float(stresses[np.argmax(np.abs(stresses))])

    def _profile_part(self, piece: Piece, along: FloatArray, low: float, high: float) -> ProfilePart:
        """Stress on the line through the reference point, with heights at the kinks; twice where it jumps."""
        reference = np.array([self.plane.x_bar, self.plane.y_bar])
        slope = self.plane.g_x * float(along[0]) + self.plane.g_y * float(along[1])
        zero = float(reference @ along)
        kinks = [zero + (kink - self.plane.sigma_0) / slope for kink in piece.law.kinks] if slope else []
        inside = sorted(height for height in kinks if low < height < high)
        heights = np.array([low, *inside, high])
        stresses = self.stress(piece, reference + (heights - zero)[:, None] * along)
        if piece.law.rigid and slope:
            limits = piece.law.tension, -piece.law.compression
            upper, lower = limits if slope > 0.0 else limits[::-1]
            if inside:
                heights, stresses = np.array([low, *inside * 2, high]), np.array([lower, lower, upper, upper])
            else:
                stresses = np.full(2, upper if kinks[0] <= low else lower)
        return ProfilePart(piece.name, heights, stresses)


def _stretches(along: FloatArray, outlines: Sequence[Outline]) -> list[tuple[float, float]]:
    """Heights between which outlines have material, joined where they touch or overlap."""
    heights = [part.exterior @ along for part in outlines]
    ranges = sorted((float(h.min()), float(h.max())) for h in heights)
    joined = [ranges[0]]
    for low, high in ranges[1:]:
        if low <= joined[-1][1] + TIED * (high - low):
            joined[-1] = (joined[-1][0], max(high, joined[-1][1]))
        else:
            joined.append((low, high))
    return joined

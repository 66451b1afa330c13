"""The plane of strain in equilibrium with given forces, where materials have limits.

With U(s) = ∫σ ds the energy of a law, the plane that is wanted is the minimum of the convex function
∫U(s) dA - (work of the forces): its gradient is the difference of the resultants of the stress and the
forces, its second derivative the tangent, both exact. Newton's method with a search along each step finds it.

Lengths are divided by radii of gyration, and all tolerances are relative, so that units don't matter.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Literal, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.composite import transformed_inertia
from calcgen.mechanics.field import Bars, Law, Part, Piece, StressField
from calcgen.mechanics.resultants import Resultants, resultants, shifted, unlimited
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.stress import Forces, StressPlane, elastic_stress

ROUNDING = 1e-12  # of a limit: an excess below it is rounding
RESIDUAL = 1e-12  # of the forces: equilibrium within it is reached
ITERATIONS = 200
SEARCHES = 60
SMALLEST_STEP = 1e-15  # of the strain: where bars of large strain leave no more to gain
FAR = 1e10  # of the elastic strain: beyond it there is no equilibrium
TRACE = 1e-16  # of the elastic stiffness
TENFOLDS = 8  # the work of the elastic section, multiplied by ten so often
STEADY = 1e-9  # change of a limit factor with tenfold work: the next one would be a hundredth of it
NOTHING = 1e-7  # of the factor with the elastic strain: a limit factor below it is zero
WITHOUT_STIFFNESS = 1e-12  # correlation of the modes of strain

Reason: TypeAlias = Literal["stiffness", "resultant", "limit"]
REASONS: dict[Reason, str] = {
    "stiffness": "has no stiffness against these forces",
    "resultant": "cannot carry a resultant that lies outside what carries it",
    "limit": "cannot carry these forces even when it yields throughout",
}


class EquilibriumError(ValueError):
    """Forces that no stress of the section balances.

    Attributes
    ----------
    reason : 'stiffness', where the elastic section has none against some plane of strain; 'resultant', where
        the forces lie outside what can carry them, or within about a millionth of
        its edge, whatever their size; 'limit', where they are too large.
    phrase : the same in words, whose subject is the section.
    limit : the largest factor by which the forces may be multiplied and still be balanced;
        0 for the first two.
    """

    def __init__(self, reason: Reason, limit: float = 0.0) -> None:
        self.reason: Reason = reason
        self.limit = limit
        self.phrase = REASONS[reason]
        super().__init__(self.phrase)


@dataclass(frozen=True, eq=False)
class Solution:
    """A field in equilibrium, iterations (0: elastic), and the relative residual of the forces."""

    field: StressField
    iterations: int
    residual: float


@dataclass(frozen=True, eq=False)
class _Problem:
    """The section with its planes as (sigma_0, g_x·i_x, g_y·i_y), all of them stresses, Pa.

    scale : (1, i_x, i_y), with the elastic radii of gyration about the reference point, m.
    elastic : (3, 3), the tangent without limits. load : (N, M_lat/i_x, -M/i_y), all of them forces, N.
    """

    pieces: tuple[Piece, ...]
    bars: tuple[Bars, ...]
    about: Point
    scale: FloatArray
    elastic: FloatArray
    load: FloatArray

    def plane(self, p: FloatArray) -> StressPlane:
        sigma_0, g_x, g_y = (p / self.scale).tolist()
        return StressPlane(sigma_0, g_x, g_y, *self.about)

    def at(self, p: FloatArray) -> Resultants:
        """Resultants, on the same scale, of the stress that a plane brings."""
        found = resultants(self.plane(p), self.pieces, self.bars)
        return Resultants(found.vector / self.scale, found.tangent / np.outer(self.scale, self.scale))

    @property
    def elastic_step(self) -> FloatArray:
        """The plane that the load brings without limits."""
        return np.asarray(np.linalg.solve(self.elastic, self.load), dtype=np.float64)

    def step(self, tangent: FloatArray, gap: FloatArray) -> FloatArray:
        """Return Newton's step; a trace of elastic stiffness keeps it finite in modes without any."""
        stiffness, modes = np.linalg.eigh(tangent)
        floor = TRACE * float(np.trace(self.elastic))
        step: FloatArray = modes @ ((modes.T @ gap) / np.maximum(stiffness, floor))
        return np.negative(step)


def solve(
    pieces: Sequence[Piece], bars: Sequence[Bars], forces: Forces, about: Point | None = None
) -> Solution:
    """Find the plane of reference stress whose stresses have the given resultants.

    Parameters
    ----------
    pieces, bars : of the section, none of them rigid-plastic.
    forces : N acts at `about`, m, and the moments about it; the transformed centroid where not given. The
        plane returned is written about the same point.

    Raises
    ------
    EquilibriumError
        Where no plane balances the forces.
    """
    inertia = transformed_inertia(pieces, bars)
    about = about or (inertia.x_bar, inertia.y_bar)
    size = _size(forces, inertia)
    unit = Forces(forces.N / size, forces.M / size, forces.M_lat / size)
    found = _solved(
        [replace(p, law=_over(p.law, size)) for p in pieces],
        [
            replace(b, law=_over(b.law, size), displaced=b.displaced and _over(b.displaced, size))
            for b in bars
        ],
        unit,
        about,
    )
    s = found.field.plane
    plane = replace(s, sigma_0=s.sigma_0 * size, g_x=s.g_x * size, g_y=s.g_y * size)
    return replace(found, field=StressField(plane, tuple(pieces), tuple(bars)))


def _size(forces: Forces, inertia: Inertia) -> float:
    """Return a power of two of the size of the mean stresses, Pa: over it, squares stay finite."""
    polar = inertia.I_h + inertia.I_v
    if not (polar > 0.0 and inertia.area > 0.0):  # without stiffness, as will be found
        return 1.0
    arm = math.sqrt(polar / inertia.area)
    largest = max(abs(forces.N), abs(forces.M) / arm, abs(forces.M_lat) / arm) / inertia.area
    return math.ldexp(1.0, math.frexp(largest)[1]) if math.isfinite(largest) and largest > 0.0 else 1.0


def _over(law: Law, size: float) -> Law:
    """Return a law whose limits are divided by a stress."""
    return Law(law.factor, law.tension / size, law.compression / size)


def _solved(pieces: Sequence[Piece], bars: Sequence[Bars], forces: Forces, about: Point) -> Solution:
    """Solve for forces and limits in a unit of stress that suits them."""
    problem = _problem(pieces, bars, forces, about)
    elastic = StressField(elastic_plane(pieces, bars, forces, about), problem.pieces, problem.bars)
    if yield_factor(elastic) >= 1.0 - ROUNDING:
        return Solution(elastic, 0, 0.0)
    p_elastic = problem.elastic_step
    found, iterations = _under_load(problem, p_elastic)
    if found is None:
        limit, path = _limit_factor(problem, p_elastic)
        if limit > 1.0:  # the path has passed the load: start anew from there
            found, more = _under_load(problem, path)
            iterations += more
        if found is None:
            limited = 0.0 < limit <= 1.0
            raise EquilibriumError("limit", limit) if limited else EquilibriumError("resultant")
    gap = problem.at(found).vector - problem.load
    field = StressField(problem.plane(found), problem.pieces, problem.bars)
    return Solution(field, iterations, _norm(gap) / _norm(problem.load))


def elastic_plane(
    pieces: Sequence[Piece], bars: Sequence[Bars], forces: Forces, about: Point | None = None
) -> StressPlane:
    """Return the plane of reference stress without limits, written about the same point as the forces."""
    inertia = transformed_inertia(pieces, bars)
    x, y = about or (inertia.x_bar, inertia.y_bar)
    at_centroid = Forces(
        forces.N,
        forces.M + forces.N * (inertia.y_bar - y),
        forces.M_lat - forces.N * (inertia.x_bar - x),
    )
    return shifted(elastic_stress(inertia, at_centroid), x, y)


def yield_factor(elastic: StressField) -> float:
    """Return the largest factor of an elastic field's forces at which no limit is passed; infinite for none.

    It is 0 where a material that carries no tension (or compression) is given some.
    """
    factors = [math.inf]
    parts: tuple[Part, ...] = (*elastic.pieces, *elastic.bars)
    for part in parts:
        stress = part.law.factor * elastic.plane.at(np.concatenate(_places(part)))
        most, least = float(stress.max()), float(stress.min())
        rounding = ROUNDING * max(most, -least)
        factors += [part.law.tension / most] if most > rounding else []
        factors += [part.law.compression / -least] if -least > rounding else []
    return min(factors)


def limit_factor(
    pieces: Sequence[Piece], bars: Sequence[Bars], forces: Forces, about: Point | None = None
) -> float:
    """Return the largest factor of the forces that the section balances; infinite where there is no limit.

    Accurate to about 1e-9; from the lower side (a stress field exists for it).
    """
    inertia = transformed_inertia(pieces, bars)
    about = about or (inertia.x_bar, inertia.y_bar)
    problem = _problem(pieces, bars, forces, about)
    size = float(np.abs(problem.load).max())
    if size == 0.0:
        return math.inf
    unit = replace(problem, load=problem.load / size)  # the smallest forces have no squares
    return _limit_factor(unit, unit.elastic_step, enough=math.inf)[0] / size


def curvature_ratio(field: StressField, elastic: StressPlane) -> float:
    """Return the curvature of a field over that which the same forces make in the elastic section."""
    curvature = math.hypot(field.plane.g_x, field.plane.g_y)
    of_elastic = math.hypot(elastic.g_x, elastic.g_y)
    return curvature / of_elastic if of_elastic else 1.0 if curvature == 0.0 else math.inf


def _problem(pieces: Sequence[Piece], bars: Sequence[Bars], forces: Forces, about: Point) -> _Problem:
    tangent = resultants(StressPlane(0.0, 0.0, 0.0, *about), *unlimited(pieces, bars)).tangent
    scale = np.sqrt(np.abs(np.diag(tangent)))
    if not scale.all():
        raise EquilibriumError("stiffness")
    correlation = tangent / np.outer(scale, scale)
    if not np.linalg.eigvalsh(correlation)[0] > WITHOUT_STIFFNESS:
        raise EquilibriumError("stiffness")
    scale = scale / scale[0]
    load = np.array([forces.N, forces.M_lat, -forces.M]) / scale
    return _Problem(tuple(pieces), tuple(bars), about, scale, tangent / np.outer(scale, scale), load)


def _under_load(problem: _Problem, start: FloatArray) -> tuple[FloatArray | None, int]:
    """Minimise the potential from a start; None where it has no minimum within reach."""
    p, found = start, problem.at(start)
    enough, far = RESIDUAL * _norm(problem.load), FAR * _norm(start)
    for iteration in range(ITERATIONS):
        gap = found.vector - problem.load
        step = problem.step(found.tangent, gap)
        if _norm(gap) <= enough:  # one more step, which takes what rounding leaves
            better = _norm(problem.at(p + step).vector - problem.load) < _norm(gap)
            return (p + step if better else p), iteration
        length = _line_search(problem, p, step, problem.load, float(gap @ step))
        p = p + length * step
        found = problem.at(p)
        if length == 0.0 or _norm(p) > far:
            return None, iteration
    return None, ITERATIONS


def _limit_factor(problem: _Problem, p: FloatArray, *, enough: float = 1.0) -> tuple[float, FloatArray]:
    """Follow the section as the work of the forces on it grows; stop where the factor is constant or enough.

    The plane of least energy for a given work is in equilibrium with a multiple of the forces, which grows
    with the work towards the limit. What it lacks falls with the square of the work. Without any limit but
    zeros it grows as the work does, or is zero: the resultant lies outside.
    """
    p = p / _strain_of_limits(problem.plane(p), problem)
    factor, work = 0.0, float(10.0 * p @ problem.load)
    first = float(problem.at(10.0 * p).vector @ p) * 10.0 / work
    for _ in range(TENFOLDS):
        before = factor
        p = _under_work(problem, 10.0 * p)
        factor = float(problem.at(p).vector @ problem.load) / _norm(problem.load) ** 2
        if factor > enough or abs(factor - before) <= STEADY * factor:
            return factor, p
        if factor <= 2.0 * NOTHING * first:
            return 0.0, p
    return (math.inf if factor > 2.0 * before else factor), p


def _strain_of_limits(plane: StressPlane, problem: _Problem) -> float:
    """Return the largest strain over that of a limit, zeros apart; 1 where there is none."""
    parts: tuple[Part, ...] = (*problem.pieces, *problem.bars)
    shares = [
        float(np.abs(plane.at(points)).max()) / abs(kink)
        for part in parts
        for points in _places(part)
        for kink in part.law.kinks
        if kink != 0.0
    ]
    return max(shares, default=1.0)


def _places(part: Part) -> list[FloatArray]:
    """Return the points at which the stress of a part can be extreme."""
    return [part.points] if isinstance(part, Bars) else [each.exterior for each in part.outlines]


def _under_work(problem: _Problem, p: FloatArray) -> FloatArray:
    """Minimise the energy among planes on which the forces do the same work as on p."""
    load: FloatArray = problem.load / _norm(problem.load)
    nothing = NOTHING * float(problem.at(p).vector @ load)
    for _ in range(ITERATIONS):
        found = problem.at(p)
        along = float(found.vector @ load)
        if along <= nothing:
            break
        held = along * load
        across = found.vector - held
        if _norm(across) <= RESIDUAL * _norm(found.vector):
            break
        by_gap, by_load = problem.step(found.tangent, across), problem.step(found.tangent, load)
        step: FloatArray = by_gap - (by_gap @ load) / (by_load @ load) * by_load
        length = _line_search(problem, p, step, held, float(across @ step))
        p = p + length * step
        if length * _norm(step) <= SMALLEST_STEP * _norm(p):
            break
    return p


def _line_search(problem: _Problem, p: FloatArray, step: FloatArray, load: FloatArray, first: float) -> float:
    """Return the length along a step at which the slope of a convex function is half its `first`, or less.

    Zero where the step does not go down; very long where the function falls without end.
    """

    def slope(length: float) -> float:
        return float((problem.at(p + length * step).vector - load) @ step)

    if first >= 0.0:
        return 0.0
    low, high, length = 0.0, math.inf, 1.0
    for _ in range(SEARCHES):
        here = slope(length)
        if abs(here) <= -0.5 * first:
            break
        low, high = (length, high) if here < 0.0 else (low, length)
        length = 0.5 * (low + high) if math.isfinite(high) else 2.0 * length
    return length


def _norm(vector: FloatArray) -> float:
    return math.hypot(*vector.tolist())

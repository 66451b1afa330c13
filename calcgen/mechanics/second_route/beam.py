"""A beam found again from statics and virtual work, without a stiffness matrix, mesh or polynomial.

Signs are those of `calcgen.mechanics.beam`. The solution is asked for its values at single places only.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise
from typing import Final, Literal

import numpy as np
import numpy.typing as npt

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    FREE,
    BeamModel,
    CaseSolution,
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    Plane,
    PointLoad,
    PointMoment,
    Quantity,
    Settlement,
)
from calcgen.mechanics.second_route.residual import Residual, relative

TOLERANCE: Final = 1e-8
"""Relative, for every comparison: far above rounding, far below an error of method."""
CANCELLED: Final = 1e-6
"""Part of the strains along the beam, times a span; a smaller deflection is what cancelling ones leave."""
SHORT: Final = 1e-5
"""Part of the beam's length; along a shorter interval, differences of M hold too few digits to compare."""

_GAUSS_POINTS, _GAUSS_WEIGHTS = np.polynomial.legendre.leggauss(3)  # exact to degree 5: M is cubic, m linear
_DIFFERENCE = ((-2, 1 / 12), (-1, -2 / 3), (1, 2 / 3), (2, -1 / 12))  # first derivative, exact to degree 4
_AT, _STEP = (0.3, 0.5, 0.7), 0.12  # places in an interval, and the step of the difference there


def beam_residuals(model: BeamModel, loads: Sequence[Load], solution: CaseSolution) -> tuple[Residual, ...]:
    """Compare a solved case, or a combination given as its factored loads, with the second route.

    In each plane whose stiffness is known: the sums of forces and of moments about x = 0, the slopes of M
    and V, the moment at hinges, and the largest deflection by virtual work. The scales span both planes: one
    in which next to nothing happens is not measured by itself.
    """
    return (
        *_equilibrium(model, loads, solution),
        *_slopes(model, loads, solution),
        *_hinges(model, solution),
        *_deflections(model, loads, solution),
    )


def _name(symbol: str, plane: Plane) -> str:
    return symbol if plane == "vertical" else f"{symbol}_lat"


def _quantity(part: Literal["w", "M", "V"], plane: Plane) -> Quantity:
    vertical: dict[str, Quantity] = {"w": "w", "M": "M", "V": "V"}
    lateral: dict[str, Quantity] = {"w": "w_lat", "M": "M_lat", "V": "V_lat"}
    return vertical[part] if plane == "vertical" else lateral[part]


def _support_forces(solution: CaseSolution, plane: Plane) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Places, forces (up) and moments (anticlockwise) of the supports."""
    rows = [
        (r.x, r.force, r.moment) if plane == "vertical" else (r.x, r.force_lat, r.moment_lat)
        for r in solution.reactions
    ]
    x, force, moment = np.array(rows, dtype=np.float64).reshape(-1, 3).T
    return x, force, moment


def _resultant(load: Load) -> tuple[float, float, float]:
    """Force of a load, its moment about x = 0, clockwise, and the sum of the magnitudes in that moment."""
    match load:
        case PointLoad():
            return load.value, load.value * load.x, abs(load.value * load.x)
        case PointMoment():
            return 0.0, load.value, abs(load.value)
        case DistributedLoad():
            length, a, b = load.end - load.start, load.value_start, load.value_end
            force = length * (a + b) / 2
            moment = force * load.start + length**2 * (a + 2 * b) / 6
            return force, moment, (abs(a) + abs(b)) / 2 * length * load.end
        case DistributedMoment():
            couple = (load.end - load.start) * (load.value_start + load.value_end) / 2
            return 0.0, couple, abs(couple)
        case FreeCurvature() | Settlement():
            return 0.0, 0.0, 0.0


def _equilibrium(model: BeamModel, loads: Sequence[Load], solution: CaseSolution) -> list[Residual]:
    sums: list[tuple[Plane, float, float]] = []
    force_scale = moment_scale = 0.0
    for plane in model.planes:
        resultants = [_resultant(load) for load in loads if load.plane == plane]
        force, moment, size = np.array(resultants, dtype=np.float64).reshape(-1, 3).T
        x, reaction, support_moment = _support_forces(solution, plane)
        sums.append((plane, force.sum() - reaction.sum(), moment.sum() - reaction @ x - support_moment.sum()))
        force_scale += float(np.abs(force).sum() + np.abs(reaction).sum())
        moment_scale += float(size.sum() + np.abs(reaction * x).sum() + np.abs(support_moment).sum())
        # Within the model's tolerance places are one, and so are the moments of a force at them.
        moment_scale += model.tolerance * float(np.abs(force).sum())
    # Couples alone may leave the supports without force: their size over the length is then the measure.
    force_scale += moment_scale / model.length
    return [
        residual
        for plane, force, moment in sums
        for residual in (
            Residual(
                _name("ΣF", plane),
                relative(float(force), force_scale),
                TOLERANCE,
                "sum of loads and reactions, over the magnitudes of forces and of moments over the length",
            ),
            Residual(
                _name("ΣM", plane),
                relative(float(moment), moment_scale),
                TOLERANCE,
                "moments of loads and reactions about the beam's start, over the sum of their magnitudes",
            ),
        )
    ]


def _hinges(model: BeamModel, solution: CaseSolution) -> list[Residual]:
    """Hinges turn freely in each plane: what moment they carry is an error."""
    if not model.hinges:
        return []
    quantities = [(plane, _quantity("M", plane)) for plane in model.planes]
    scale = max(solution.extremes(quantity).abs for _, quantity in quantities)
    return [
        Residual(
            _name("M at hinges", plane),
            relative(max(abs(solution.at(quantity, x)) for x in model.hinges), scale),
            TOLERANCE,
            "the moment that a hinge carries, over the largest one",
        )
        for plane, quantity in quantities
    ]


def _breaks(model: BeamModel, loads: Sequence[Load], *more: float) -> list[float]:
    """Places between which loads and stiffness run smoothly."""
    places = {0.0, model.length, *model.hinges, *more}
    places.update(support.x for support in model.supports)
    places.update(stretch.end for stretch in model.stretches)
    for load in loads:
        if isinstance(load, DistributedLoad | DistributedMoment | FreeCurvature):
            places.update((load.start, load.end))
        elif isinstance(load, PointLoad | PointMoment):
            places.add(load.x)
    return sorted(min(max(x, 0.0), model.length) for x in places)


def _intensity(
    loads: Sequence[Load], kind: type[DistributedLoad | DistributedMoment], plane: Plane, x: FloatArray
) -> FloatArray:
    """Distributed load, or couple, per length at `x`."""
    total = np.zeros_like(x)
    for load in loads:
        if isinstance(load, kind) and load.plane == plane:
            slope = (load.value_end - load.value_start) / (load.end - load.start)
            inside = (load.start < x) & (x < load.end)
            total += np.where(inside, load.value_start + slope * (x - load.start), 0.0)
    return total


def _slopes(model: BeamModel, loads: Sequence[Load], solution: CaseSolution) -> list[Residual]:
    breaks = _breaks(model, loads)
    intervals = np.array([(a, b - a) for a, b in pairwise(breaks) if b - a > SHORT * model.length])
    x = np.concatenate([intervals[:, 0] + at * intervals[:, 1] for at in _AT])
    step = np.tile(_STEP * intervals[:, 1], len(_AT))

    def slope(quantity: Quantity) -> FloatArray:
        parts = [weight * solution.values(quantity, x + k * step) for k, weight in _DIFFERENCE]
        return np.asarray(sum(parts, np.zeros_like(x)) / step)

    found: list[tuple[Plane, float, float]] = []
    shear = intensity = 0.0
    for plane in model.planes:
        M, V = solution.values(_quantity("M", plane), x), solution.values(_quantity("V", plane), x)
        q = _intensity(loads, DistributedLoad, plane, x)
        m = _intensity(loads, DistributedMoment, plane, x)
        found.append(
            (
                plane,
                _largest(slope(_quantity("M", plane)) - V - m),
                _largest(slope(_quantity("V", plane)) + q),
            )
        )
        shear = max(shear, _largest(V), _largest(m), _largest(M) / model.length)
        intensity = max(intensity, _largest(q), shear / model.length)
    return [
        residual
        for plane, of_moment, of_shear in found
        for residual in (
            Residual(
                _name("dM/dx", plane),
                relative(of_moment, shear),
                TOLERANCE,
                "slope of the bending moment against the shear force, over the largest shear force",
            ),
            Residual(
                _name("dV/dx", plane),
                relative(of_shear, intensity),
                TOLERANCE,
                "slope of the shear force against the load, over the largest load",
            ),
        )
    ]


def _largest(values: FloatArray) -> float:
    return float(np.abs(values).max(initial=0.0))


def _deflections(model: BeamModel, loads: Sequence[Load], solution: CaseSolution) -> list[Residual]:
    found: list[tuple[Plane, float]] = []
    scale = 0.0
    for plane in model.planes:
        x = solution.extremes(_quantity("w", plane)).x_abs
        w = solution.at(_quantity("w", plane), x)
        again, strains = _by_virtual_work(model, loads, solution, plane, x)
        found.append((plane, again - w))
        scale = max(scale, abs(w), CANCELLED * strains)
    return [
        Residual(
            _name("w", plane),
            relative(difference, scale),
            TOLERANCE,
            "largest deflection by virtual work, over itself",
        )
        for plane, difference in found
    ]


def _by_virtual_work(
    model: BeamModel, loads: Sequence[Load], solution: CaseSolution, plane: Plane, place: float
) -> tuple[float, float]:
    """Deflection at `place`: 1·w = ∫mκ dx + ∫vγ dx + Σ r·w_support + Σ μ·rotation.

    κ has the free curvature in it, and γ is the shear strain. m, v, r and μ are in equilibrium with a unit
    load at `place`, whichever way the supports share it; what the supports give way follows from their
    settlement and from the solved reaction over the stiffness of a spring. The second number is the sum of
    ∫|κ| dx times the mean span and ∫|γ| dx, for a scale.
    """
    supports, force, moment = _support_forces(solution, plane)
    r, mu = _unit_load_state(model, plane, place)
    hold = np.array([support.restraints(plane) for support in model.supports], dtype=np.float64).reshape(
        -1, 2
    )
    yielding = np.where(hold > FREE, hold, np.inf)
    moved = force / yielding[:, 0]
    for load in loads:
        if isinstance(load, Settlement) and load.plane == plane:
            moved[load.support] += load.value

    breaks = np.array(_breaks(model, loads, place))
    half = np.diff(breaks)[:, None] / 2
    x = ((breaks[:-1, None] + half) + half * _GAUSS_POINTS).ravel()
    weight = (half * _GAUSS_WEIGHTS).ravel()
    m = _virtual_moment(x, supports, r, mu, place)
    bent, free = _curvature(model, solution, plane, x), _free_curvature(loads, plane, x)
    w = float(weight @ (m * (bent + free)))
    strains = float(weight @ (np.abs(bent) + np.abs(free))) * model.length / max(1, len(model.supports) - 1)
    if model.shears:
        v = np.where(x[:, None] > supports, 1.0, 0.0) @ r - np.where(x > place, 1.0, 0.0)
        shear_strain = _shear_strain(model, solution, plane, x)
        w += float(weight @ (v * shear_strain))
        strains += float(weight @ np.abs(shear_strain))
    w += float(r @ moved) + float(mu @ (moment / yielding[:, 1]))
    return w, strains


def _virtual_moment(
    x: FloatArray, supports: FloatArray, r: FloatArray, mu: FloatArray, place: float
) -> FloatArray:
    """Bending moment (k,) at `x` from a unit load at `place` and the supports' forces and moments."""
    arm = x[:, None] - supports
    moment = np.where(arm > 0.0, arm, 0.0) @ r - np.where(arm > 0.0, 1.0, 0.0) @ mu
    return np.asarray(moment - np.maximum(x - place, 0.0))


def _unit_load_state(model: BeamModel, plane: Plane, place: float) -> tuple[FloatArray, FloatArray]:
    """Give forces and moments of the supports that balance a unit load and leave the hinges without moment.

    Of all such states, the smallest in a measure that grows with the distance from the load: a state that
    stays near it, so that a long beam's far ends do not enter only to cancel. Moments count as forces at
    the arm L.
    """
    L = model.length / max(1, len(model.supports) - 1)
    supports = np.array([support.x for support in model.supports])
    hold = np.array([support.restraints(plane) for support in model.supports], dtype=np.float64).reshape(
        -1, 2
    )
    active = hold.T.ravel() > FREE
    count = len(supports)
    rows = [
        np.concatenate([np.ones(count), np.zeros(count)]),
        np.concatenate([(supports - place) / L, np.ones(count)]),
    ]
    known = [1.0, 0.0]
    for hinge in model.hinges:
        arm = (hinge - supports) / L
        rows.append(np.concatenate([np.where(arm > 0.0, arm, 0.0), np.where(arm > 0.0, -1.0, 0.0)]))
        known.append(max(hinge - place, 0.0) / L)
    nearness = np.tile(1.0 / (1.0 + ((supports - place) / L) ** 4), 2) * active
    state = nearness * np.linalg.lstsq(np.array(rows) * nearness, np.array(known), rcond=None)[0]
    return state[:count], state[count:] * L


def _free_curvature(loads: Sequence[Load], plane: Plane, x: FloatArray) -> FloatArray:
    """Curvature (k,) that needs no moment, as a temperature gives it."""
    total = np.zeros_like(x)
    for load in loads:
        if isinstance(load, FreeCurvature) and load.plane == plane:
            total += np.where((load.start < x) & (x < load.end), load.value, 0.0)
    return total


def _shear_strain(model: BeamModel, solution: CaseSolution, plane: Plane, x: FloatArray) -> FloatArray:
    """Shear strain (k,) from the solved shear forces."""
    GA_s = [getattr(stretch.shear, plane) for stretch in model.stretches]
    return np.asarray(solution.values(_quantity("V", plane), x) / np.array(GA_s)[_stretch_at(model, x)])


def _stretch_at(model: BeamModel, x: FloatArray) -> npt.NDArray[np.intp]:
    """Give the number (k,) of the stretch at each place."""
    ends = np.array([stretch.end for stretch in model.stretches])
    return np.minimum(np.searchsorted(ends, x), len(ends) - 1)


def _curvature(model: BeamModel, solution: CaseSolution, plane: Plane, x: FloatArray) -> FloatArray:
    """Curvature (k,) from the solved moments by the flexibility, written out for the two planes."""
    number = _stretch_at(model, x)
    stiffness = [stretch.stiffness for stretch in model.stretches]
    vertical = np.array([each.vertical for each in stiffness])[number]
    M = solution.values("M", x)
    if len(model.planes) == 1:
        return np.asarray(M / vertical)
    lateral = np.array([each.lateral or 0.0 for each in stiffness])[number]
    coupling = np.array([each.coupling for each in stiffness])[number]
    M_lat = solution.values("M_lat", x)
    own, other, far = (M, M_lat, lateral) if plane == "vertical" else (M_lat, M, vertical)
    return np.asarray((far * own - coupling * other) / (vertical * lateral - coupling**2))

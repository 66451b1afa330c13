"""Shear stress of a stress block under V, V_lat and T, and its second route."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from calcgen.evaluation.blocks.stress_models import elastic_parts
from calcgen.evaluation.blocks.stress_request import StressRequest
from calcgen.evaluation.results.section import SectionPart
from calcgen.evaluation.results.stress import ShearResult
from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.boolean import contact
from calcgen.mechanics.combined_stress import (
    combined_extremes,
    field_stress,
    outline_stations,
    passed_alone,
    wall_stations,
)
from calcgen.mechanics.field import StressField
from calcgen.mechanics.saint_venant import saint_venant
from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.second_route.shear import (
    cut_residuals,
    flow_residual,
    joint_residual,
    torsion_residuals,
    wall_residuals,
)
from calcgen.mechanics.second_route.torsion import closed_form_residual
from calcgen.mechanics.second_route.torsion import torsion_residuals as element_residuals
from calcgen.mechanics.shear import Cuts, ShearForces, cuts, gain
from calcgen.mechanics.stress import BoolArray
from calcgen.mechanics.torsion import TorsionConstant, closed_form
from calcgen.mechanics.wall_shear import WallFlow, WallTorsion, wall_flow, wall_torsion
from calcgen.mechanics.walls import Graph, WallSection, wall_section

ROUNDING = 1e-12  # of the largest flow: a smaller one is none
_ROUND = ("circle", "tube")
NEAR = 1e-6  # of a wall's thickness: a point this far beyond its surface still lies in it


@dataclass(frozen=True, eq=False)
class _Torque:
    """Shear stress of the torque, Pa: its magnitude at points (n, 2), and that along thin walls.

    Cells have it along their walls alone, whose sense tells what it adds to that of V.
    """

    method: str
    largest: tuple[float, Point, Point] | None
    magnitude: Callable[[FloatArray], FloatArray] | None
    walls: WallTorsion | None


def shear_result(request: StressRequest, field: StressField) -> tuple[ShearResult, tuple[Residual, ...]]:
    """Find the shear stress of a request, its extremes with the normal stress, and the second route."""
    section, inertia = request.section, request.section.computed
    pieces, bars = elastic_parts(section)
    forces = ShearForces(request.V, request.V_lat)
    level, upright = (cuts(direction, inertia, forces, pieces, bars) for direction in ("level", "upright"))
    residuals: list[Residual] = []
    if request.V or request.V_lat:
        residuals += cut_residuals(level, upright, forces)
        if not bars and request.V:
            residuals.append(flow_residual(level, inertia, forces, pieces))
    walls = _walls(section.parts)
    flow = wall_flow(walls, forces) if walls is not None else None
    if walls is not None and flow is not None and (request.V or request.V_lat):
        residuals += wall_residuals(walls, flow, forces)
    torque = _torque(request, walls) if request.T else None
    if torque is not None and torque.walls is not None and walls is not None:
        residuals += torsion_residuals(walls, torque.walls, request.T)
    elif torque is not None:
        solution = saint_venant(*section.outlines)
        exact = _closed_form(request)
        again = [*element_residuals(solution)]
        again += [] if exact is None else [closed_form_residual(exact, solution)]
        residuals += [replace(r, what="torsion constant") if r.what == "J" else r for r in again]
    normal = field_stress(field)
    described = [
        outline_stations(
            pieces,
            level,
            upright,
            normal,
            torque.magnitude if torque is not None else None,
            alone=None if request.V and request.V_lat else "upright" if request.V_lat else "level",
        )
    ]
    by_mid_line = None if flow is None else _by_mid_line(flow, level, upright)
    if flow is not None and by_mid_line is not None and by_mid_line.any():
        described.append(
            wall_stations(
                flow,
                lambda points: normal(pieces[0], points),
                torque.walls if torque else None,
                chosen=by_mid_line,
            )
        )
    contacts = _contacts(section.parts)
    neighbours = {name: frozenset(touched) for name, touched in contacts.items()}
    joints: dict[str, float] = {}
    if len(pieces) > 1 and (request.V or request.V_lat):
        gains = {piece.name: gain(inertia, forces, piece) for piece in pieces}
        joints = _joint_flows(gains, neighbours)
        residuals += [joint_residual(inertia, forces, piece, abs(gains[piece.name])) for piece in pieces]
    return (
        ShearResult(
            level=level,
            upright=upright,
            walls=walls,
            flow=flow,
            torsion=torque.walls if torque is not None else None,
            torsion_method=torque.method if torque is not None else "",
            largest_torsion=torque.largest if torque is not None else None,
            combined=combined_extremes(*described),
            joints=joints,
            contacts={
                name: tuple(line for lines in contacts[name].values() for line in lines) for name in joints
            },
            connected=_connected(neighbours),
            at=lambda point: _at(point, level, upright, flow, by_mid_line, torque),
        ),
        tuple(residuals),
    )


def _joint_flows(gains: Mapping[str, float], neighbours: Mapping[str, frozenset[str]]) -> dict[str, float]:
    """Return the flow across the joints of each part, N/m; what rounding leaves of balanced ones is zero.

    It is what all joints of the part carry together, or what those on one side of it carry where that is
    more: a web between two flanges passes on what it does not keep.
    """
    flows = {}
    for name, own in gains.items():
        sides = _sides(name, neighbours)
        flows[name] = max([abs(own), *(abs(sum(gains[each] for each in side)) for side in sides)])
    least = ROUNDING * sum(abs(own) for own in gains.values())
    return {name: flow if flow > least else 0.0 for name, flow in flows.items()}


def _sides(name: str, neighbours: Mapping[str, frozenset[str]]) -> list[set[str]]:
    """Return the groups of parts that hang on a part and on nothing else."""
    left = set(neighbours) - {name}
    sides: list[set[str]] = []
    for first in sorted(neighbours[name]):
        if first not in left:
            continue
        side, reached = set[str](), [first]
        while reached:
            part = reached.pop()
            if part in left:
                left.discard(part)
                side.add(part)
                reached += sorted(neighbours[part] - {name})
        sides.append(side)
    return sides


def _connected(neighbours: Mapping[str, frozenset[str]]) -> bool:
    """Tell whether all parts hang together."""
    first = next(iter(neighbours))
    return len(neighbours) == 1 or set().union(*_sides(first, neighbours), {first}) == set(neighbours)


def _contacts(parts: Sequence[SectionPart]) -> dict[str, dict[str, tuple[tuple[Point, ...], ...]]]:
    """Return for each part the lines along which it touches each other one, m."""
    found: dict[str, dict[str, tuple[tuple[Point, ...], ...]]] = {part.name: {} for part in parts}
    for part in parts:
        for other in parts:
            lines = contact(part.outlines, other.outlines) if other is not part else ()
            if lines:
                found[part.name][other.name] = lines
    return found


def _walls(parts: tuple[SectionPart, ...]) -> WallSection | None:
    """Return the mid-line of a section of one thin-walled shape."""
    return wall_section(parts[0].walls) if len(parts) == 1 and parts[0].walls else None


def _by_mid_line(flow: WallFlow, level: Cuts, upright: Cuts) -> BoolArray:
    """Return the walls, (n,), whose flow no cut of the outline tells: cells, and walls side by side."""
    alone = passed_alone(flow.graph, level, upright)
    return np.ones_like(alone) if flow.graph.cells else ~alone


def _torque(request: StressRequest, walls: WallSection | None) -> _Torque:
    """Choose how the torque is carried: by a closed form, along thin walls, or by the numerical solution.

    Stress of a round section grows with the radius. For the other closed forms the numerical solution gives
    the distribution, whose largest value is then the exact one.
    """
    T, section = abs(request.T), request.section
    exact = _closed_form(request)
    if exact is None and walls is not None:
        torsion = wall_torsion(walls, request.T)
        return _Torque(walls.torsion_method, None, None if walls.closed else _in_open_walls(torsion), torsion)
    if exact is not None and section.shape in _ROUND:
        centre = np.array([section.computed.x_bar, section.computed.y_bar])

        largest = T * exact.tau_max_per_T

        def round_bar(points: FloatArray) -> FloatArray:
            # the corners of the outline lie slightly outside the circle
            stress: FloatArray = T / exact.value * np.hypot(*(points - centre).T)
            return np.minimum(stress, largest)

        largest_at = (section.bounds.right, section.computed.y_bar)
        downwards = (0.0, -request.T)  # of a clockwise torque, on the right
        return _Torque(exact.method, (largest, largest_at, downwards), round_bar, None)
    solution = saint_venant(*section.outlines)
    largest = T * (solution.tau_max.value if exact is None else exact.tau_max_per_T)
    scale = largest / (T * solution.tau_max.value)

    def magnitude(points: FloatArray) -> FloatArray:
        # what elements find in a sharp re-entrant corner depends on their size: no more than elsewhere counts
        found: FloatArray = np.minimum(scale * np.hypot(*solution.stress(points, T=T).T), largest)
        return found

    method = "finite elements on the outline" if exact is None else exact.method
    place = (solution.tau_max.x, solution.tau_max.y)
    right, up = solution.stress(np.array([place]), T=request.T)[0].tolist()
    return _Torque(method, (largest, place, (right, up)), magnitude, None)


def _closed_form(request: StressRequest) -> TorsionConstant | None:
    """Return the closed form of a section of one whole shape; None where there is none."""
    section = request.section
    return closed_form(section.shape, {r.name: r.value.si for r in section.further})


def _at(
    point: Point,
    level: Cuts,
    upright: Cuts,
    flow: WallFlow | None,
    by_mid_line: BoolArray | None,
    torque: _Torque | None,
) -> float:
    """Return the shear stress at a point, Pa: the larger of what the cuts and the walls through it say.

    A torque in cells adds to V in one wall and opposes it in another: there the walls alone tell.
    """
    x, y = point
    tau = math.hypot(_on_cut(level, y), _on_cut(upright, x))
    if torque is not None and torque.magnitude is not None:
        tau += float(torque.magnitude(np.array([point]))[0])
    if flow is None or by_mid_line is None:
        return tau
    in_walls = _in_walls(point, flow, by_mid_line, torque.walls if torque else None)
    if in_walls is None:
        return tau
    return in_walls if torque is not None and torque.magnitude is None else max(tau, in_walls)


def _on_cut(found: Cuts, at: float) -> float:
    """Return the stress of largest magnitude on either side of a level."""
    values = found.at(np.array([at, at]), above=np.array([True, False])).tau
    return float(np.max(np.abs(np.nan_to_num(values))))


def _in_open_walls(torsion: WallTorsion) -> Callable[[FloatArray], FloatArray]:
    """Return the stress of the torque in open walls by points (n, 2): it grows from the mid-line outwards."""
    g = torsion.graph

    def magnitude(points: FloatArray) -> FloatArray:
        _, off, inside = _relative(points, g)
        share = np.where(inside, np.minimum(np.abs(off) / (0.5 * g.t), 1.0), 0.0)
        stress: FloatArray = (share * np.abs(torsion.tau_surface)).max(axis=1)
        return stress

    return magnitude


def _in_walls(point: Point, flow: WallFlow, chosen: BoolArray, torsion: WallTorsion | None) -> float | None:
    """Return the largest stress of the chosen walls that a point lies in, Pa; None for none."""
    g = flow.graph
    along, off, inside = (each[0] for each in _relative(np.array([point]), g))
    inside &= chosen
    if not inside.any():
        return None
    u = np.clip(along / g.length, 0.0, 1.0)
    c_0, c_1, c_2 = (flow.coefficients if torsion is None else flow.plus(torsion.flow).coefficients).T
    tau = (c_0 + u * (c_1 + u * c_2)) / g.t
    if torsion is not None:
        tau = tau + torsion.tau_surface * off / (0.5 * g.t)
    return float(np.abs(tau[inside]).max())


def _relative(points: FloatArray, g: Graph) -> tuple[FloatArray, FloatArray, BoolArray]:
    """Return how far points (n, 2) lie along each wall and to its left, m, and whether in it: (n, k) each."""
    ahead = g.along / g.length[:, None]
    to_point = points[:, None, :] - g.nodes[g.start]
    along = np.sum(to_point * ahead, axis=2)
    off = ahead[:, 0] * to_point[:, :, 1] - ahead[:, 1] * to_point[:, :, 0]
    reach = 0.5 * g.t * (1.0 + NEAR)
    inside: BoolArray = (np.abs(off) <= reach) & (along >= -reach) & (along <= g.length + reach)
    return along, off, inside

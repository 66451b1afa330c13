"""Evaluated stresses -> drawings of shear, flow along walls, torsion and interaction, in the units shown.

Shear acts on the face that is seen looking along the beam from its start, that of the part beyond: V upwards,
V_lat to the left, T clockwise.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

import numpy as np

from calcgen.evaluation.results.stress import ShearResult, StressResult
from calcgen.figures.adapt_section import bars_label, bars_of, length_factor, length_unit, parts_of, title_of
from calcgen.figures.adapt_stress import Scales
from calcgen.figures.flow import FlowDrawing, FlowForce, Wall
from calcgen.figures.interaction import ForcePoint, InteractionDrawing
from calcgen.figures.labels import Point
from calcgen.figures.outline import Bar, Part, Ring
from calcgen.figures.shear import Joint, ShearDrawing, ShearPanel
from calcgen.figures.stress_drawing import Couple, Mark
from calcgen.figures.torsion import TorsionDrawing, TorsionMark
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.shear import Cut, Cuts
from calcgen.mechanics.walls import Graph
from calcgen.quantities.display import Style, number_text, show
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain

STEPS = 24  # along a wall, so that a parabola is drawn as one
ALONG = np.linspace(0.0, 1.0, STEPS + 1)
NOTHING = 1e-6  # N/m
LONG = 0.06  # of all walls together: a shorter wall, such as a piece of a bend, has no value written
COUNTS = 0.02  # of the largest flow
SMOOTH = math.radians(40.0)  # a larger turn is a corner
PARTED = math.radians(50.0)  # where a bend is parted
MOST = 8  # values written in one figure
JUMP = 0.02  # of the largest stress: a smaller jump is not written


def shear_scales(stress: StressResult, style: Style) -> Scales:
    """Return the scales of the figures of shear, in the unit of the largest shear stress."""
    unit = next(r.shown.unit for r in stress.results if r.name == "τ_max")
    return Scales(
        length_factor(style), length_unit(style), magnitude_in(from_si(1.0, "Pa"), unit), unit, style
    )


def shear_drawings(stress: StressResult, ident: str, style: Style) -> Iterable[ShearDrawing]:
    """Return the shear over the depth under V, and over the width under V_lat, each where it acts."""
    shear = stress.shear
    if shear is None:
        return
    scales = shear_scales(stress, style)
    parts = parts_of(stress.section, scales.length)
    bars = bars_of(stress.section, scales.length)
    p = stress.section.computed
    centroid = (p.x_bar * scales.length, p.y_bar * scales.length)
    label = bars_label(stress.section)
    if stress.V:
        yield ShearDrawing(
            ident=f"{ident}-V",
            title=title_of(stress.section),
            parts=parts,
            centroid=centroid,
            panels=(_shear_panel(shear.level, scales, 1.0),),
            force=Couple(stress.V, f"V = {stress.forces_shown['V'].text}"),
            joints=tuple(_joints(stress, shear, scales, turned=False)),
            bars=bars,
            bars_label=label,
        )
    if stress.V_lat:
        yield ShearDrawing(
            ident=f"{ident}-V_lat",
            title=title_of(stress.section),
            parts=tuple(Part(tuple(_turned(ring) for ring in q.rings), q.label, q.tone) for q in parts),
            centroid=(centroid[1], -centroid[0]),
            panels=(_shear_panel(shear.upright, scales, -1.0),),
            force=Couple(stress.V_lat, f"V_lat = {stress.forces_shown['V_lat'].text}"),
            joints=tuple(_joints(stress, shear, scales, turned=True)),
            bars=tuple(Bar(bar.y, -bar.x, bar.diameter) for bar in bars),
            bars_label=label,
            edges=("left", "right"),
        )


def flow_drawings(stress: StressResult, ident: str, style: Style) -> Iterable[FlowDrawing]:
    """Return the flow along thin walls under V and V_lat, and the stress of a torque along them."""
    shear = stress.shear
    if shear is None or shear.walls is None or shear.flow is None:
        return
    scales, graph = shear_scales(stress, style), shear.flow.graph
    p = stress.section.computed
    centroid = (p.x_bar * scales.length, p.y_bar * scales.length)
    centre = (shear.walls.x_s * scales.length, shear.walls.y_s * scales.length)
    unit = "lbf/in" if style.system == "US" else "N/mm"
    size = magnitude_in(from_si(1.0, "N/m"), unit)
    apart = math.hypot(centre[0] - centroid[0], centre[1] - centroid[1])
    marked = centre if apart > 1e-3 * stress.section.bounds.height * scales.length else None
    chains = _chains(graph)
    places = shear.flow.places(ALONG) * scales.length
    lengths = np.array([graph.length[chain].sum() for chain in chains])
    if stress.V or stress.V_lat:
        flows = [_joined(shear.flow.at(ALONG)[chain], graph, chain) for chain in chains]
        written = _written(np.array([np.abs(q).max() for q in flows]), lengths)
        names = [f"{key} = {stress.forces_shown[key].text}" for key in ("V", "V_lat") if getattr(stress, key)]
        yield FlowDrawing(
            ident=f"{ident}-flow",
            title=title_of(stress.section),
            walls=tuple(
                Wall(
                    _joined(places[chain], graph, chain),
                    q * size,
                    float(graph.t[chain[0]]) * scales.length,
                    _amount(q, unit, style) if i in written else "",
                )
                for i, (chain, q) in enumerate(zip(chains, flows, strict=True))
            ),
            centroid=centroid,
            quantity=f"shear flow q, {unit}",
            shear_centre=marked,
            force=FlowForce(-stress.V_lat, stress.V, ", ".join(names)),
        )
    if shear.torsion is not None:
        yield FlowDrawing(
            ident=f"{ident}-T",
            title=title_of(stress.section),
            walls=tuple(_torsion_walls(shear, chains, places, scales)),
            centroid=centroid,
            quantity=f"shear stress of torsion, {scales.stress_unit}",
            shear_centre=marked,
            torque=Couple(stress.T, f"T = {stress.forces_shown['T'].text}"),
            note=f"Found by: {shear.torsion_method}.",
        )


def torsion_drawing(stress: StressResult, ident: str, style: Style) -> TorsionDrawing | None:
    """Return the drawing of the torsion of a solid section; None without one, or where walls carry it."""
    shear = stress.shear
    if shear is None or not stress.T or shear.torsion is not None or shear.largest_torsion is None:
        return None
    scales, p = shear_scales(stress, style), stress.section.computed
    value, (x, y), way = shear.largest_torsion
    shown = show(from_si(value, "Pa").shown_in(scales.stress_unit), style)
    return TorsionDrawing(
        ident=f"{ident}-T",
        title=title_of(stress.section),
        parts=parts_of(stress.section, scales.length),
        centre=(p.x_bar * scales.length, p.y_bar * scales.length),
        marks=(
            TorsionMark(
                (x * scales.length, y * scales.length),
                way,
                f"τ of T alone: {shown.text}",
            ),
        ),
        torque=Couple(stress.T, f"T = {stress.forces_shown['T'].text}"),
        note=f"Found by: {shear.torsion_method}.",
    )


def interaction_drawing(stress: StressResult, ident: str, style: Style) -> InteractionDrawing | None:
    """Return the limit of N and M of a section that yields throughout, with the forces given."""
    plastic = stress.plastic
    if plastic is None or plastic.interaction is None:
        return None
    key = "M_lat" if plastic.M_lat else "M"
    force_unit, moment_unit = ("kip", "kip-ft") if style.system == "US" else ("kN", "kN·m")
    if key in stress.forces_shown:
        moment_unit = stress.forces_shown[key].unit
    if "N" in stress.forces_shown:
        force_unit = stress.forces_shown["N"].unit
    by_moment = magnitude_in(from_si(1.0, "N·m"), moment_unit)
    by_force = magnitude_in(from_si(1.0, "N"), force_unit)
    moment = stress.forces.M_lat if key == "M_lat" else stress.forces.M
    limit = tuple((float(m) * by_moment, float(n) * by_force) for n, m in plastic.interaction)
    acting = (moment * by_moment, stress.forces.N * by_force)
    texts = [f"{k} = {v.text}" for k, v in stress.forces_shown.items() if k in ("N", key)]
    reached, reached_text = None, ""
    share = _on_ray(limit, acting)
    if share is not None:
        reached_text = f"{number_text(1.0 / share, 3)} of the limit, along the ray from the origin"
        reached = ForcePoint(acting[0] * share, acting[1] * share, "")
    return InteractionDrawing(
        ident=f"{ident}-N-M",
        title=f"interaction of N and {plain(key)}",
        limit=limit,
        acting=ForcePoint(*acting, ", ".join(texts)),
        reached=reached,
        moment_title=f"{plain(key)}, {moment_unit}",
        axial_title=f"N, {force_unit}, tension positive",
        utilisation=reached_text,
    )


def _on_ray(limit: tuple[Point, ...], acting: Point) -> float | None:
    """Return the factor at which the ray through a point leaves a closed curve around the origin."""
    start, end = np.array(limit[:-1]), np.array(limit[1:])
    scale = np.abs(start).max(axis=0)
    start, end, ray = start / scale, end / scale, np.array(acting) / scale
    if not ray.any():
        return None
    along = end - start
    cross = ray[0] * along[:, 1] - ray[1] * along[:, 0]
    with np.errstate(divide="ignore", invalid="ignore"):
        factor = (start[:, 0] * along[:, 1] - start[:, 1] * along[:, 0]) / cross
        share = (start[:, 0] * ray[1] - start[:, 1] * ray[0]) / cross
    hit = np.isfinite(factor) & (factor > 0.0) & (share >= -1e-9) & (share <= 1.0 + 1e-9)
    return float(factor[hit].max()) if hit.any() else None


def _turned(ring: Ring) -> Ring:
    """Turn points (n, 2) a quarter clockwise, so that what is on the left comes to the top."""
    return np.column_stack((ring[:, 1], -ring[:, 0]))


def _shear_panel(found: Cuts, scales: Scales, upwards: float) -> ShearPanel:
    """Return the shear stress over depth or width; `upwards` is -1 where levels run downwards."""
    profile = found.profile
    tau = np.nan_to_num(profile.values.tau)
    points = tuple(
        (upwards * float(y) * scales.length, float(t) * scales.stress)
        for y, t in zip(profile.values.level, tau, strict=True)
    )
    extreme = profile.extreme
    marks = [_shear_mark(extreme, scales, upwards)]
    largest = abs(extreme.tau)
    for i in range(1, len(points)):
        same = profile.values.level[i] == profile.values.level[i - 1]
        if same and abs(tau[i] - tau[i - 1]) > JUMP * largest:
            side = i if abs(tau[i]) > abs(tau[i - 1]) else i - 1
            if abs(abs(tau[side]) - largest) > JUMP * largest:
                marks.append(Mark(*points[side], scales.value(float(tau[side]))))
    return ShearPanel(points if upwards > 0.0 else points[::-1], tuple(marks))


def _shear_mark(extreme: Cut, scales: Scales, upwards: float) -> Mark:
    return Mark(
        upwards * extreme.level * scales.length, extreme.tau * scales.stress, scales.value(extreme.tau)
    )


def _joints(stress: StressResult, shear: ShearResult, scales: Scales, *, turned: bool) -> Iterable[Joint]:
    """Return the joints of the parts that carry flow; the first line of each has its value."""
    shown = {r.name: r.shown for r in stress.results}
    drawn: set[tuple[Point, ...]] = set()
    for name, lines in shear.contacts.items():
        if not shear.joints[name]:
            continue
        label = f"{plain(name)}: {shown[f'q_{name}'].text}"
        for line in lines:
            key = tuple(sorted(line))
            points = tuple((x * scales.length, y * scales.length) for x, y in line)
            if turned:
                points = tuple((y, -x) for x, y in points)
            if key not in drawn:
                yield Joint(points, label)
                label = ""
            drawn.add(key)


def _written(amounts: FloatArray, lengths: FloatArray) -> set[int]:
    """Return the walls whose value is written: that of the largest, and the long ones that count."""
    largest = int(np.argmax(amounts))
    long = np.flatnonzero((lengths > LONG * lengths.sum()) & (amounts > COUNTS * amounts[largest]))
    return {largest, *long[np.argsort(-lengths[long], kind="stable")][: MOST - 1].tolist()}


def _amount(q: FloatArray, unit: str, style: Style) -> str:
    """Return the largest amount of a wall's flow, N/m, as text; none for what is next to nothing."""
    largest = float(np.abs(q).max())
    return show(from_si(largest, "N/m").shown_in(unit), style).text if largest > NOTHING else ""


def _chains(graph: Graph) -> list[list[int]]:
    """Return walls that run on smoothly, as in a bend, as one: indices in their order.

    A bend is parted in its middle, so that both of its straight neighbours keep their own values.
    """
    ends = np.bincount(np.concatenate((graph.start, graph.end)), minlength=len(graph.nodes))
    ahead = graph.along / graph.length[:, None]
    chains = [[0]]
    turned = 0.0
    for i in range(1, len(graph.t)):
        joint = graph.start[i]
        cross = ahead[i - 1, 0] * ahead[i, 1] - ahead[i - 1, 1] * ahead[i, 0]
        turn = abs(math.atan2(cross, float(ahead[i - 1] @ ahead[i])))
        runs_on = graph.end[i - 1] == joint and ends[joint] == 2 and graph.t[i] == graph.t[i - 1]
        turned += turn
        if runs_on and turn < SMOOTH and turned < PARTED:
            chains[-1].append(i)
        else:
            chains.append([i])
            turned = 0.0
        if graph.length[i] > LONG * graph.length.sum():
            turned = 0.0
    return chains


def _joined(samples: FloatArray, graph: Graph, chain: Sequence[int]) -> FloatArray:
    """Return the samples of walls (k, STEPS + 1, …) one after the other, each joint once.

    A wall that is short beside the others, such as a piece of a bend, keeps its ends alone.
    """
    short = graph.length < LONG * graph.length.sum()
    rows = [row[[0, -1]] if short[i] else row for i, row in zip(chain, samples, strict=True)]
    joined: FloatArray = np.concatenate([rows[0], *(row[1:] for row in rows[1:])])
    return joined


def _torsion_walls(
    shear: ShearResult, chains: Sequence[Sequence[int]], places: FloatArray, scales: Scales
) -> Iterable[Wall]:
    """Return the walls with the stress of the torque: along cells, or turning within open walls."""
    if shear.torsion is None:
        return
    torsion, graph = shear.torsion, shear.torsion.graph
    lengths = np.array([graph.length[list(chain)].sum() for chain in chains])
    amounts = np.array([torsion.tau[chain[0]] for chain in chains])
    written = _written(amounts, lengths)
    for i, chain in enumerate(chains):
        first = chain[0]
        t, q = float(graph.t[first]), float(torsion.q[first])
        tau = q / t if q else float(torsion.tau_surface[first])
        shown = show(from_si(abs(tau), "Pa").shown_in(scales.stress_unit), scales.style)
        line = _joined(places[list(chain)], graph, chain)
        yield Wall(
            line,
            np.full(len(line), tau * scales.stress),
            t * scales.length,
            shown.text if tau and i in written else "",
            turning=not q,
        )

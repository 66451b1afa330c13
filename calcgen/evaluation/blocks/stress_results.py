"""What a stress block shows: named results of the section, and of each part, group of bars and point."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np

from calcgen.evaluation.blocks.stress_request import StressRequest
from calcgen.evaluation.results.common import Result
from calcgen.evaluation.results.stress import PlasticResult, ShearResult
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.combined_stress import StressState
from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.field import Bars, Piece, StressField
from calcgen.mechanics.stress import Extreme, StressPlane
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si, measure

RESULT_MEANINGS = {
    "σ_max": "largest normal stress, tension positive",
    "σ_min": "smallest normal stress, tension positive",
    "σ_top": "normal stress at the top fibre",
    "σ_bottom": "normal stress at the bottom fibre",
    "na_depth": "from the centroid to the neutral axis along the vertical",
    "na_angle": "neutral axis from the horizontal, counter-clockwise",
    "x_c": "depth of the compressed zone, across the neutral axis",
    "κ": "curvature in the plane of bending",
    "R": "radius of curvature",
    "ε_max": "largest strain, lengthening positive",
    "ε_min": "smallest strain, lengthening positive",
    "τ_max": "largest shear stress",
    "σ_vM_max": "largest von Mises stress",
    "σ_1": "largest principal stress, tension positive",
    "σ_2": "smallest principal stress, tension positive",
    "M_pl": "plastic moment under this N, about the horizontal axis",
    "M_pl_lat": "plastic moment under this N, about the vertical axis",
    "utilisation": "moment over the plastic moment under this N",
    "M_el": "moment at first yield, without N",
    "shape_factor": "plastic moment without N over the moment at first yield",
    "core": "depth of the elastic core, across the neutral axis",
    "σ_res_max": "largest residual stress after unloading, tension positive",
    "σ_res_min": "smallest residual stress after unloading, tension positive",
    "I_cr": "second moment of the cracked section about its neutral axis, reference modulus",
    "r_n": "radius of the neutral axis of bending alone, from the centre of curvature",
    "e": "from the centroidal line to the neutral axis of bending alone, towards the centre of curvature",
    "σ_straight": "stress that the straight-bar formula gives at the inner fibre",
    "straight_error": "its relative error there",
}
"""Every name of a result, and what it is; those of joints (`q_…`) follow the parts."""

NOISE = 1e-11  # of the depth: a smaller distance of the neutral axis is what iteration leaves
NEEDS_MODULUS = ("κ", "R", "ε_max", "ε_min")


@dataclass
class _Rows:
    """Results in the order added, in the units of a style."""

    style: Style
    rows: list[Result] = field(default_factory=list)

    def add(self, name: str, value: Measure, place: str = "", meaning: str = "") -> None:
        meaning = meaning or RESULT_MEANINGS[name]
        self.rows.append(Result(name, meaning, value, show(value, self.style), place))

    def stress(self, name: str, value: float, place: str = "", meaning: str = "") -> None:
        self.add(name, from_si(value, "Pa").shown_in(None), place, meaning)

    def length(self, name: str, value: float, place: str = "") -> None:
        self.add(name, from_si(value, "m").shown_in(_length_unit(self.style)), place)

    def plain(self, name: str, value: float, place: str = "") -> None:
        self.add(name, measure(value, None), place)


@dataclass(frozen=True)
class NamedResults:
    """The results of a block: of the section, and of its parts, bars and points by name."""

    section: tuple[Result, ...]
    parts: Mapping[str, tuple[Result, ...]]


def stress_results(
    request: StressRequest,
    field: StressField,
    curved: CurvedStress | None,
    unloaded: StressField | None,
    plastic: PlasticResult | None,
    shear: ShearResult | None,
    style: Style,
) -> NamedResults:
    """Return the named results of a stress, all stresses in one unit."""
    rows = _Rows(style)
    if curved is None:
        _normal(rows, field)
    else:
        _of_curved(rows, curved)
    _axis(rows, field.plane, curved, request.section.bounds.height)
    if request.model in ("no_tension", "cracked", "plastic"):
        depth = compressed_depth(field)
        if depth is not None:
            rows.length("x_c", depth)
    if request.model == "cracked":
        _cracked(rows, request, field)
    if plastic is not None:
        _plastic(rows, request, plastic)
    if unloaded is not None:
        _elastic_plastic(rows, field, unloaded)
    _strains(rows, request, field, curved)
    if shear is not None:
        _shear(rows, shear)
    parts = _parts(field, style)
    for bars in request.section.bars:
        largest = max(parts[bars.name], key=lambda r: abs(r.value.si))
        rows.add(bars.name, largest.value, "", "stress of the bars, of largest magnitude, tension positive")
    for name, point in request.points.items():
        value = normal_at(field, curved, point)
        where = f"at {place_text(point, style)}"
        rows.stress(name, value, where, "normal stress at the point, tension positive")
        limit = request.limit.si if request.limit is not None else None
        parts[name] = _at_point(value, point, shear, limit, style)
    unit = _unit_of_stresses(rows.rows, style)
    return NamedResults(
        _in_one_unit(rows.rows, unit, style),
        {name: _in_one_unit(found, unit, style) for name, found in parts.items()},
    )


def normal_at(field: StressField, curved: CurvedStress | None, point: Point) -> float:
    """Return the normal stress at a point, Pa; outside a section of one elastic part, by its plane."""
    if curved is not None:
        return float(curved.at(np.array([point]))[0])
    found = field.at(point)
    return found.value if found is not None else float(field.plane.at(np.array([point]))[0])


def compressed_depth(field: StressField) -> float | None:
    """Return the depth of the compressed zone, m, across the neutral axis; None for uniform strain."""
    plane = field.plane
    if plane.uniform:
        return None
    pieces = [piece for piece in field.pieces if piece.law.compression > 0.0]
    most, least = plane.extremes(*(outline for piece in pieces for outline in piece.outlines))
    steepest = math.hypot(plane.g_x, plane.g_y)
    return min(max(-least.value, 0.0), most.value - least.value) / steepest


def _normal(rows: _Rows, field: StressField) -> None:
    largest, smallest = field.extremes()
    several = len({*(p.name for p in field.pieces), *(b.name for b in field.bars)}) > 1
    for name, extreme in (("σ_max", largest), ("σ_min", smallest)):
        middle = _middle([p for p in field.pieces if p.name == extreme.part] or field.pieces)
        place = _place(extreme, field.plane, middle, rows.style)
        of = f" {'in' if field.plane.uniform else 'of'} {extreme.part}" if several and extreme.part else ""
        rows.stress(name, extreme.value, f"{place}{of}")
    rows.stress("σ_top", field.at_top())
    rows.stress("σ_bottom", field.at_bottom())


def _of_curved(rows: _Rows, curved: CurvedStress) -> None:
    largest, smallest = curved.extremes
    for name, extreme in (("σ_max", largest), ("σ_min", smallest)):
        if curved.M == 0.0:
            rows.stress(name, extreme.value, "everywhere")
            continue
        side = "top" if extreme.y > curved.y_bar else "bottom"
        rows.stress(name, extreme.value, f"at the {side}, the {_which(curved, side)} side")
    rows.stress("σ_top", curved.top.value)
    rows.stress("σ_bottom", curved.bottom.value)
    rows.length("r_n", curved.r_n)
    rows.length("e", curved.e)
    rows.stress("σ_straight", curved.straight(curved.inner.y))
    if curved.straight_error is not None:
        rows.add("straight_error", measure(100.0 * curved.straight_error, "%", (("%", 1),)))


def _which(curved: CurvedStress, side: str) -> str:
    return "inner" if side == curved.centre else "outer"


def _axis(rows: _Rows, plane: StressPlane, curved: CurvedStress | None, depth: float) -> None:
    """Add where the neutral axis lies."""
    sense = -1.0 if rows.style.depth == "down" else 1.0
    towards = f"positive {rows.style.depth}wards"
    if curved is not None:
        if curved.neutral_axis is not None:
            rows.length("na_depth", sense * (curved.neutral_axis.y - curved.y_bar), towards)
        return
    axis = plane.neutral_axis
    if axis is None:
        return
    if axis.above is not None:
        above = axis.above if abs(axis.above) > NOISE * depth else 0.0
        rows.length("na_depth", sense * above, towards)
    rows.add("na_angle", measure(math.degrees(axis.angle), "deg", (("deg", 1),)))


def _cracked(rows: _Rows, request: StressRequest, field: StressField) -> None:
    """Add the cracked second moment, M/(κ E_ref), where M alone acts about the horizontal axis."""
    forces, plane = request.forces, field.plane
    if forces.N == 0.0 and forces.M_lat == 0.0 and plane.g_y != 0.0 and plane.g_x == 0.0:
        unit = "in⁴" if rows.style.system == "US" else "cm⁴"
        rows.add("I_cr", from_si(-forces.M / plane.g_y, "m⁴").shown_in(unit))


def _plastic(rows: _Rows, request: StressRequest, plastic: PlasticResult) -> None:
    given = request.forces_given
    for name, key, value in (("M_pl", "M", plastic.M), ("M_pl_lat", "M_lat", plastic.M_lat)):
        if value:
            unit = given[key].unit if key in given else None
            rows.add(name, from_si(value, "N·m").shown_in(unit))
    if request.forces.M or request.forces.M_lat:
        rows.plain("utilisation", plastic.utilisation)
    if plastic.M_el is not None:
        unit = next((given[k].unit for k in ("M", "M_lat") if k in given), None)
        rows.add("M_el", from_si(plastic.M_el, "N·m").shown_in(unit))
        rows.plain("shape_factor", plastic.M_0 / abs(plastic.M_el))


def _elastic_plastic(rows: _Rows, field: StressField, unloaded: StressField) -> None:
    core = field.elastic_core()
    if core is not None:
        rows.length("core", core)
    largest, smallest = unloaded.extremes()
    for name, extreme in (("σ_res_max", largest), ("σ_res_min", smallest)):
        rows.stress(name, extreme.value, f"at {place_text((extreme.x, extreme.y), rows.style)}")


def _strains(rows: _Rows, request: StressRequest, field: StressField, curved: CurvedStress | None) -> None:
    """Add strains and the curvature, where the modulus is known and the model has strains."""
    if request.E is None or request.model == "plastic":
        return
    E, plane = request.E.si, field.plane
    if curved is not None:
        largest, smallest = curved.extremes
        rows.plain("ε_max", largest.value / E)
        rows.plain("ε_min", smallest.value / E)
        return
    curvature = plane.curvature(E)
    rows.add("κ", from_si(curvature.resultant, "1/m").shown_in(None))
    if curvature.radius is not None:
        unit = "ft" if rows.style.system == "US" else "m"
        rows.add("R", from_si(curvature.radius, "m").shown_in(unit))
    most, least = strain_extremes(field)
    rows.plain("ε_max", most / E)
    rows.plain("ε_min", least / E)


def strain_extremes(field: StressField) -> tuple[float, float]:
    """Return the largest and smallest reference stress, E_ref times the strain, over parts and bars, Pa."""
    most, least = field.plane.extremes(*(outline for piece in field.pieces for outline in piece.outlines))
    at_bars = [float(s) for bars in field.bars for s in field.plane.at(bars.points)]
    return max([most.value, *at_bars]), min([least.value, *at_bars])


def _shear(rows: _Rows, shear: ShearResult) -> None:
    found, style = shear.combined, rows.style
    rows.stress("τ_max", found.tau_max.tau, _station(found.tau_max, style))
    rows.stress("σ_vM_max", found.von_mises_max.von_mises, _station(found.von_mises_max, style))
    rows.stress("σ_1", found.sigma_1_max.sigma_1, _station(found.sigma_1_max, style))
    rows.stress("σ_2", found.sigma_2_min.sigma_2, _station(found.sigma_2_min, style))
    unit = "lbf/in" if style.system == "US" else "N/mm"
    for name, flow in shear.joints.items():
        rows.add(
            f"q_{name}",
            from_si(flow, "N/m").shown_in(unit),
            "",
            f"shear flow across all joints of {name}, or across those on one side where that is more",
        )


def _station(state: StressState, style: Style) -> str:
    walls = ", by the walls' mid-line" if state.description == "walls" else ""
    return f"at {place_text((state.x, state.y), style)}{walls}"


def _parts(field: StressField, style: Style) -> dict[str, tuple[Result, ...]]:
    """Return the stresses of each named part and of each line of bars."""
    found: dict[str, tuple[Result, ...]] = {}
    for piece in field.pieces:
        if piece.name:
            rows = _Rows(style)
            for name, extreme in zip(("σ_max", "σ_min"), field.extremes_of(piece), strict=True):
                rows.stress(name, extreme.value, _place(extreme, field.plane, _middle([piece]), style))
            found[piece.name] = tuple(rows.rows)
    groups: dict[str, list[Bars]] = {}
    for bars in field.bars:
        groups.setdefault(bars.name, []).append(bars)
    for name, group in groups.items():
        extremes = [field.extremes_of(bars) for bars in group]
        largest = max((pair[0] for pair in extremes), key=lambda e: e.value)
        smallest = min((pair[1] for pair in extremes), key=lambda e: e.value)
        rows = _Rows(style)
        for key, extreme in (("σ_max", largest), ("σ_min", smallest)):
            rows.stress(key, extreme.value, f"at {place_text((extreme.x, extreme.y), style)}")
        found[name] = tuple(rows.rows)
    return found


def _at_point(
    sigma: float, point: Point, shear: ShearResult | None, limit: float | None, style: Style
) -> tuple[Result, ...]:
    rows = _Rows(style)
    rows.stress("σ", sigma, "", "normal stress, tension positive")
    if limit is not None:
        rows.add("utilisation", measure(abs(sigma) / limit, None), "", "normal stress over the limit")
    if shear is not None:
        tau = shear.at(point)
        rows.stress("τ", tau, "", "shear stress")
        rows.stress("σ_vM", math.hypot(sigma, math.sqrt(3.0) * tau), "", "von Mises stress")
    return tuple(rows.rows)


_STRESS = from_si(1.0, "Pa").dimension


def _unit_of_stresses(rows: Iterable[Result], style: Style) -> str:
    """Return the unit of the largest stress of a block, in which all are shown."""
    largest = max((r for r in rows if r.value.dimension == _STRESS), key=lambda r: abs(r.value.si))
    return style.unit_of(largest.value)


def _in_one_unit(rows: Iterable[Result], unit: str, style: Style) -> tuple[Result, ...]:
    shown_in_unit = []
    for r in rows:
        value = r.value.shown_in(unit) if r.value.dimension == _STRESS else r.value
        shown_in_unit.append(Result(r.name, r.meaning, value, show(value, style), r.place))
    return tuple(shown_in_unit)


def _length_unit(style: Style) -> str:
    return "in" if style.system == "US" else "mm"


def _length(value: float, style: Style) -> str:
    return show(from_si(value, "m").shown_in(_length_unit(style)), style).text


def place_text(point: Point, style: Style) -> str:
    """Return a point as text: '(0 mm, 120.0 mm)'."""
    size = max(abs(point[0]), abs(point[1]))
    x, y = (0.0 if abs(c) < 1e-12 * size else c for c in point)
    return f"({_length(x, style)}, {_length(y, style)})"


def _without_noise(extreme: Extreme) -> Extreme:
    """Return an extreme whose coordinates are zero where they differ from it by rounding alone."""
    size = max(abs(c) for point in extreme.ends for c in point)

    def clean(value: float) -> float:
        return 0.0 if abs(value) < 1e-12 * size else value

    (x_1, y_1), (x_2, y_2) = extreme.ends
    ends = ((clean(x_1), clean(y_1)), (clean(x_2), clean(y_2)))
    return Extreme(extreme.value, clean(extreme.x), clean(extreme.y), ends)


def _middle(pieces: Sequence[Piece]) -> Point:
    """Return the middle of the box around pieces, from which top and bottom, left and right are told."""
    boxes = [outline.bounds for piece in pieces for outline in piece.outlines]
    left, right = min(b.left for b in boxes), max(b.right for b in boxes)
    bottom, top = min(b.bottom for b in boxes), max(b.top for b in boxes)
    return 0.5 * (left + right), 0.5 * (bottom + top)


def _place(extreme: Extreme, plane: StressPlane, middle: Point, style: Style) -> str:
    if plane.uniform:
        return "everywhere"
    extreme = _without_noise(extreme)
    (x_1, y_1), (x_2, y_2) = extreme.ends
    if (x_1, y_1) != (x_2, y_2) and y_1 == y_2:
        return "at the top" if extreme.y > middle[1] else "at the bottom"
    if (x_1, y_1) != (x_2, y_2) and x_1 == x_2:
        return "on the right" if extreme.x > middle[0] else "on the left"
    return f"at {place_text((extreme.x, extreme.y), style)}"

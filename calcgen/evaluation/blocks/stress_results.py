"""What a stress block shows: named results and premises."""

from __future__ import annotations

import math

import numpy as np

from calcgen.evaluation.blocks.section import SectionThing
from calcgen.evaluation.formulas import shown
from calcgen.evaluation.results import Premise, Result
from calcgen.evaluation.scope import Scope
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.stress import Extreme, Forces, StressPlane
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si, measure

RESULT_MEANINGS = {
    "σ_max": "largest normal stress, tension positive",
    "σ_min": "smallest normal stress, tension positive",
    "σ_top": "normal stress at the top fibre",
    "σ_bottom": "normal stress at the bottom fibre",
    "na_depth": "from the centroid to the neutral axis along the vertical",
    "na_angle": "neutral axis from the horizontal, counter-clockwise",
    "κ": "curvature in the plane of bending",
    "R": "radius of curvature",
    "ε_max": "largest strain, lengthening positive",
    "ε_min": "smallest strain, lengthening positive",
}


def stress_results(
    plane: StressPlane, outline: Outline, E: float | None, points: dict[str, Point], style: Style
) -> tuple[Result, ...]:
    """Return the named results of a stress, all stresses in one unit."""
    largest, smallest = plane.extremes(outline)
    results: list[Result] = []

    def add(name: str, value: Measure, place: str = "", meaning: str = "") -> None:
        meaning = meaning or RESULT_MEANINGS[name]
        results.append(Result(name, meaning, value, show(value, style), place))

    add("σ_max", from_si(largest.value, "Pa").shown_in(None), _place(largest, plane, style))
    add("σ_min", from_si(smallest.value, "Pa").shown_in(None), _place(smallest, plane, style))
    add("σ_top", from_si(plane.at_top(outline), "Pa").shown_in(None))
    add("σ_bottom", from_si(plane.at_bottom(outline), "Pa").shown_in(None))
    axis = plane.neutral_axis
    length = "in" if style.system == "US" else "mm"
    if axis is not None:
        if axis.above is not None:
            sense = -1.0 if style.depth == "down" else 1.0
            add("na_depth", from_si(sense * axis.above, "m").shown_in(length), f"positive {style.depth}wards")
        add("na_angle", measure(math.degrees(axis.angle), "deg", (("deg", 1),)))
    if E is not None:
        curvature = plane.curvature(E)
        add("κ", from_si(curvature.resultant, "1/m").shown_in(None))
        if curvature.radius is not None:
            add("R", from_si(curvature.radius, "m").shown_in("ft" if style.system == "US" else "m"))
        add("ε_max", measure(largest.value / E, None))
        add("ε_min", measure(smallest.value / E, None))
    for name, point in points.items():
        stress = float(plane.at(np.array([point]))[0])
        where = f"at ({_length(point[0], style)}, {_length(point[1], style)})"
        add(name, from_si(stress, "Pa").shown_in(None), where, "normal stress at the point, tension positive")
    return tuple(_in_one_unit(results, style))


def _in_one_unit(results: list[Result], style: Style) -> list[Result]:
    """Show all stresses of a block in the unit of the largest of them."""
    stresses = [r for r in results if r.value.dimension == from_si(1.0, "Pa").dimension]
    largest = max(stresses, key=lambda r: abs(r.value.si))
    unit = style.unit_of(largest.value)
    shown_in_unit = []
    for r in results:
        value = r.value.shown_in(unit) if r in stresses else r.value
        shown_in_unit.append(Result(r.name, r.meaning, value, show(value, style), r.place))
    return shown_in_unit


def _length(value: float, style: Style) -> str:
    return show(from_si(value, "m").shown_in("in" if style.system == "US" else "mm"), style).text


def _without_noise(extreme: Extreme) -> Extreme:
    """Return an extreme whose coordinates are zero where they differ from it by rounding alone."""
    size = max(abs(c) for point in extreme.ends for c in point)

    def clean(value: float) -> float:
        return 0.0 if abs(value) < 1e-12 * size else value

    (x_1, y_1), (x_2, y_2) = extreme.ends
    ends = ((clean(x_1), clean(y_1)), (clean(x_2), clean(y_2)))
    return Extreme(extreme.value, clean(extreme.x), clean(extreme.y), ends)


def _place(extreme: Extreme, plane: StressPlane, style: Style) -> str:
    if plane.uniform:
        return "everywhere"
    extreme = _without_noise(extreme)
    (x_1, y_1), (x_2, y_2) = extreme.ends
    if (x_1, y_1) != (x_2, y_2) and y_1 == y_2:
        return "at the top" if extreme.y > plane.y_bar else "at the bottom"
    if (x_1, y_1) != (x_2, y_2) and x_1 == x_2:
        return "on the right" if extreme.x > plane.x_bar else "on the left"
    return f"at ({_length(extreme.x, style)}, {_length(extreme.y, style)})"


def stress_premises(
    name: str,
    section: SectionThing,
    plane: StressPlane,
    forces: Forces,
    strength: Measure | None,
    outline: Outline,
    scope: Scope,
) -> tuple[Premise, ...]:
    """Return the premises of the flexure formula, tested where the block says enough."""
    largest, smallest = plane.extremes(outline)
    peak = max(largest.value, -smallest.value)
    found: list[Premise] = []

    def add(premise: str, verdict: str, detail: str) -> None:
        found.append(Premise(name, premise, verdict, detail))  # type: ignore[arg-type]

    stress = shown(from_si(peak, "Pa").shown_in(None), scope).text
    if strength is None:
        add("linear elastic", "left to judgement", f"no f_y is given; the largest stress is {stress}")
    elif peak <= strength.si:
        add(
            "linear elastic",
            "met",
            f"the largest stress, {stress}, is below f_y = {shown(strength, scope).text}",
        )
    else:
        add(
            "linear elastic",
            "not met",
            f"the largest stress, {stress}, is above f_y = {shown(strength, scope).text}: "
            "the section yields, and these stresses do not occur",
        )
    inertia = section.result.computed
    if inertia.I_hv == 0.0:
        add("bending about principal axes", "met", "the horizontal and vertical axes are principal axes")
    else:
        add(
            "bending about principal axes",
            "met",
            "they are not principal axes: the general formula with the product moment is used",
        )
    if forces.N == 0.0:
        add("no net axial force", "met", "N = 0: the neutral axis passes through the centroid")
    else:
        add("no net axial force", "met", "N acts at the centroid and shifts the neutral axis, as shown")
    add("plane sections", "left to judgement", "slender member, away from supports, point loads and openings")
    add("straight member", "left to judgement", "radius of the member's axis large beside its depth")
    add("restraint against lateral buckling", "left to judgement", "stress alone does not show stability")
    return tuple(found)

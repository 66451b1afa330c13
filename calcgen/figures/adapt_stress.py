"""Evaluated stresses -> drawings of normal stress, over the depth or over the section, in the units shown."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.figures.adapt_section import (
    axis_names,
    bars_label,
    bars_of,
    length_factor,
    length_unit,
    parts_of,
    title_of,
)
from calcgen.figures.dimensions import Dimension
from calcgen.figures.field import FieldBar, FieldDrawing, FieldMark, FieldPart
from calcgen.figures.labels import Point
from calcgen.figures.outline import AxisNames, Bar
from calcgen.figures.stress_drawing import (
    Compared,
    Couple,
    Force,
    Level,
    Mark,
    StressDrawing,
    StressPanel,
)
from calcgen.figures.zones import Zone
from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.quantities.display import Shown, Style, number_text, show
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain

TIED = 1e-9  # of the depth: heights closer than this are one
ROWS = 4  # of bars whose stress is written; of more, the extreme ones
MODEL_NOTES = {
    "no_tension": "What is in tension carries nothing.",
    "cracked": "Concrete in tension carries nothing.",
    "plastic": "Stress blocks of the plastic moment.",
}


@dataclass(frozen=True)
class Scales:
    """Factors from SI to the units of a figure: lengths, and the unit of its stresses."""

    length: float
    length_unit: str
    stress: float
    stress_unit: str
    style: Style

    def value(self, stress: float) -> str:
        """Return a stress as text with its sign."""
        shown = show(from_si(stress, "Pa").shown_in(self.stress_unit), self.style)
        return signed(shown, stress)

    def length_text(self, length: float) -> str:
        """Return a length as text without its unit."""
        return number_text(length * self.length, self.style.digits)


def scales_of(stress: StressResult, style: Style) -> Scales:
    """Return the scales of a stress's figures."""
    unit = next(r.shown.unit for r in stress.results if r.name == "σ_max")
    return Scales(
        length_factor(style), length_unit(style), magnitude_in(from_si(1.0, "Pa"), unit), unit, style
    )


def signed(shown: Shown, value: float) -> str:
    """Return a value with a plus sign where it is positive."""
    return f"+{shown.text}" if value > 0 else shown.text


def stress_drawing(stress: StressResult, ident: str, style: Style) -> StressDrawing:
    """Return the drawing of a stress that varies along the depth only."""
    scales = scales_of(stress, style)
    section, field, forces = stress.section, stress.field, stress.forces
    axis, axis_label = _neutral_axis(stress, scales)
    curved = stress.curved
    panels = _panels(section, field, scales) if curved is None else (_curved_panel(curved, scales),)
    if stress.unloaded is not None:
        panels += _panels(section, stress.unloaded, scales, "residual stress after unloading")
    strain = _strain(stress, scales)
    moment = None
    if stress.model == "plastic" and stress.plastic is not None:
        value = next((r.shown.text for r in stress.results if r.name == "M_pl"), "")
        moment = Couple(stress.plastic.M, f"M_pl = {value}") if stress.plastic.M else None
    elif forces.M:
        moment = Couple(forces.M, f"M = {stress.forces_shown['M'].text}")
    height = section.computed.y_bar * scales.length
    return StressDrawing(
        ident=ident,
        title=title_of(section),
        parts=parts_of(section, scales.length),
        centroid=(section.computed.x_bar * scales.length, height),
        panels=panels,
        neutral_axis=axis,
        neutral_axis_label=axis_label,
        neutral_axis_name="plastic neutral axis" if stress.model == "plastic" else "neutral axis",
        plastic=stress.model == "plastic",
        strain=strain,
        strain_marks=tuple(Mark(y, e, signed(Shown(number_text(e * 1e3, 3), "‰"), e)) for y, e in strain),
        moment=moment,
        forces=(Force(height, forces.N, f"N = {stress.forces_shown['N'].text}"),) if forces.N else (),
        note=_note(stress, scales),
        levels=(Level(height, "centroidal line"),) if curved is not None and forces.M else (),
        bars=bars_of(section, scales.length),
        bars_label=bars_label(section),
        zones=_zones(stress, scales),
        dimensions=_dimensions(stress, axis, scales),
        centre=curved.centre if curved is not None else None,
    )


def field_drawing(stress: StressResult, ident: str, axes: Axes, style: Style) -> FieldDrawing:
    """Return the drawing of a stress that varies across the section."""
    scales, section, plane = scales_of(stress, style), stress.section, stress.plane
    factor, size = scales.length, scales.stress
    laws = {piece.name: piece.law for piece in stress.field.pieces}
    parts: list[FieldPart] = []
    owners = [part.name for part in section.parts for _ in part.outlines]
    for name, part in zip(owners, parts_of(section, factor), strict=True):
        law = laws[name]
        # a rigid-plastic part is drawn as one whose stress changes over the breadth of a line
        n = law.factor if math.isfinite(law.factor) else RIGID * _strength(law) / _reach(stress)
        by_x, by_y = n * plane.g_x * size / factor, n * plane.g_y * size / factor
        constant = n * plane.sigma_0 * size - by_x * plane.x_bar * factor - by_y * plane.y_bar * factor
        parts.append(FieldPart(part, constant, by_x, by_y, -law.compression * size, law.tension * size))
    names = axis_names(axes)
    return FieldDrawing(
        ident=ident,
        title=title_of(section),
        parts=tuple(parts),
        centroid=(section.computed.x_bar * factor, section.computed.y_bar * factor),
        marks=tuple(_field_marks(stress, scales)),
        unit=scales.stress_unit,
        axes=names,
        neutral_axis_label=_field_axis(stress, scales),
        actions=tuple(_actions(stress, names)),
        bars=tuple(_field_bars(stress, scales)),
        limits_label=_limits_label(stress),
    )


RIGID = 200.0  # of the largest reference stress of a rigid-plastic field: where it reaches its strength


def _strength(law: Law) -> float:
    return max(law.tension, law.compression)


def _reach(stress: StressResult) -> float:
    """Return the largest magnitude of the reference stress, Pa."""
    most, least = stress.plane.extremes(*stress.section.outlines)
    return max(most.value, -least.value)


def _panels(
    section: SectionResult, field: StressField, scales: Scales, title: str = "normal stress σ"
) -> tuple[StressPanel, ...]:
    """Return one panel, or one for each law where parts of different laws share heights."""
    groups = _by_law(field)
    low_high = [_range(field, pieces) for pieces in groups]
    apart = all(
        a[1] <= b[0] + TIED or b[1] <= a[0] + TIED for i, a in enumerate(low_high) for b in low_high[:i]
    )
    bars = _bar_marks(field, scales)
    if len(groups) == 1 or apart:
        order = sorted(range(len(groups)), key=lambda i: low_high[i][0])
        profile = [point for i in order for point in _profile(field, groups[i])]
        return (_panel(profile, scales, title, bars),)
    panels = []
    for number, pieces in enumerate(groups):
        of = " and ".join(dict.fromkeys(_material(section, piece.name) for piece in pieces))
        own = bars if number == 0 else ()
        panels.append(_panel(_profile(field, pieces), scales, f"{title}, {of}", own))
    return tuple(panels)


def _material(section: SectionResult, name: str) -> str:
    part = next(part for part in section.parts if part.name == name)
    return plain(part.material or part.name)


def _by_law(field: StressField) -> list[list[Piece]]:
    groups: dict[Law, list[Piece]] = {}
    for piece in field.pieces:
        groups.setdefault(piece.law, []).append(piece)
    return list(groups.values())


def _range(field: StressField, pieces: Sequence[Piece]) -> Point:
    names = {piece.name for piece in pieces}
    parts = [part for part in field.profile().parts if part.name in names]
    return min(float(p.heights[0]) for p in parts), max(float(p.heights[-1]) for p in parts)


def _profile(field: StressField, pieces: Sequence[Piece]) -> list[Point]:
    """Return (height, stress), in SI, from bottom to top of parts of one law; zero in gaps between them."""
    names = {piece.name for piece in pieces}
    parts = sorted(
        (part for part in field.profile().parts if part.name in names), key=lambda part: part.heights[0]
    )
    found: list[Point] = []
    top = -math.inf
    for part in parts:
        points = [(float(y), float(s)) for y, s in zip(part.heights, part.stresses, strict=True)]
        near = TIED * max(abs(y) for y, _ in points)
        if found and points[0][0] > top + near:
            found += [(top, 0.0), (points[0][0], 0.0)]
        beyond = [point for point in points if point[0] > top + near]
        if not found or points[0][0] > top + near:
            beyond = points
        found += beyond
        top = max(top, points[-1][0])
    return found


def _panel(profile: Sequence[Point], scales: Scales, title: str, bars: tuple[Mark, ...]) -> StressPanel:
    """Return a panel with its ends and its jumps marked."""
    points = tuple((y * scales.length, s * scales.stress) for y, s in profile)
    jumps = [i for i in range(1, len(points)) if points[i][0] == points[i - 1][0]]
    marked = sorted({0, len(points) - 1, *jumps, *(i - 1 for i in jumps)})
    # a block of even stress has its value once, at its outer end
    marked = [i for i in marked if i in (0, len(points) - 1) or not _repeats(points, i)]
    marks = [Mark(*points[i], scales.value(profile[i][1])) for i in marked if profile[i][1]]
    if not marks:
        marks = [Mark(*points[-1], scales.value(0.0))]
    return StressPanel(points, tuple(marks), title, bars)


def _repeats(points: Sequence[Point], i: int) -> bool:
    """Whether a corner of a profile has the value of its other neighbour, beyond the jump at its height."""
    y, value = points[i]
    return any(points[k][0] != y and points[k][1] == value for k in (i - 1, i + 1))


def _bar_marks(field: StressField, scales: Scales) -> tuple[Mark, ...]:
    """Return the stress of each row of bars; of many rows the values of the outermost alone."""
    rows: dict[tuple[float, float], str] = {}
    for bars in field.bars:
        stresses = field.stress(bars, bars.points)
        for (_, y), s in zip(bars.points.tolist(), stresses.tolist(), strict=True):
            rows.setdefault((round(y * scales.length, 6), float(f"{s:.9e}")), bars.name)
    ordered = sorted(rows)
    marks = []
    for number, (y, s) in enumerate(ordered):
        written = len(ordered) <= ROWS or number in (0, len(ordered) - 1)
        label = f"{plain(rows[y, s])}: {scales.value(s)}" if written else ""
        marks.append(Mark(y, s * scales.stress, label))
    return tuple(marks)


def _curved_panel(curved: CurvedStress, scales: Scales) -> StressPanel:
    """Return the hyperbola, with the line of the straight-bar formula beside it."""
    profile = sorted((float(y), float(s)) for y, s in curved.profile())
    bottom, top = curved.bottom.y, curved.top.y
    straight = [(y, curved.straight(y)) for y in (bottom, top)]
    compared = None
    if curved.M:
        values = f"{scales.value(straight[0][1])} at the bottom, {scales.value(straight[1][1])} at the top"
        compared = Compared(
            tuple((y * scales.length, s * scales.stress) for y, s in straight), f"straight bar: {values}"
        )
    points = tuple((y * scales.length, s * scales.stress) for y, s in profile)
    marks = tuple(Mark(*points[i], scales.value(profile[i][1])) for i in (0, -1))
    return StressPanel(points, marks, compared=compared)


def _strain(stress: StressResult, scales: Scales) -> tuple[Point, ...]:
    """Return the strain at both ends of the depth, where the model has one and the modulus is known."""
    if stress.modulus is None or stress.model in ("plastic", "curved"):
        return ()
    plane, bounds = stress.plane, stress.section.bounds
    return tuple(
        (y * scales.length, (plane.sigma_0 + plane.g_y * (y - plane.y_bar)) / stress.modulus)
        for y in (bounds.bottom, bounds.top)
    )


def _neutral_axis(stress: StressResult, scales: Scales) -> tuple[float | None, str]:
    """Return the height of the neutral axis where it lies in the section, and what to say of it."""
    p, bounds = stress.section.computed, stress.section.bounds
    name = "plastic neutral axis" if stress.model == "plastic" else "neutral axis"
    if stress.curved is not None:
        axis = stress.curved.neutral_axis
        above = None if axis is None else axis.y - p.y_bar
    else:
        straight = stress.plane.neutral_axis
        above = None if straight is None else straight.above
    if above is None:
        return None, "no stress" if stress.plane.sigma_0 == 0.0 else f"no {name}: the stress is uniform"
    height = p.y_bar + above
    way = "above" if above > 0 else "below"
    if abs(above) < TIED * bounds.height:
        return height * scales.length, name
    where = f"{scales.length_text(abs(above))} {scales.length_unit} {way} the centroid"
    if not bounds.bottom <= height <= bounds.top:
        return None, f"{name} outside the section: {where}"
    return height * scales.length, f"{name}, {where}"


def _note(stress: StressResult, scales: Scales) -> str:
    if stress.curved is not None:
        radius, r_n = (scales.length_text(r) for r in (stress.curved.R_c, stress.curved.r_n))
        unit = scales.length_unit
        return f"R_c = {radius} {unit} to the centroidal line, r_n = {r_n} {unit}; radii are not to scale."
    if stress.model == "plastic" and stress.forces.N:
        return "Stress blocks of the plastic moment, under the axial force given."
    return MODEL_NOTES.get(stress.model, "")


def _zones(stress: StressResult, scales: Scales) -> tuple[Zone, ...]:
    """Return the heights that carry nothing, or yield."""
    field, bounds = stress.field, stress.section.bounds
    low, high = bounds.bottom * scales.length, bounds.top * scales.length
    plane = field.plane
    if plane.g_y == 0.0:
        return ()

    def height(s: float) -> float:
        y = plane.y_bar + (s - plane.sigma_0) / plane.g_y
        return min(max(y * scales.length, low), high)

    if stress.model in ("no_tension", "cracked"):
        kind, label = ("open", "open") if stress.model == "no_tension" else ("cracked", "cracked")
        zero = height(0.0)
        ends = (zero, high) if plane.g_y > 0.0 else (low, zero)
        return (Zone(*ends, kind, label),) if ends[1] > ends[0] else ()  # type: ignore[arg-type]
    laws = {piece.law for piece in field.pieces}
    if stress.model != "elastic_plastic" or len(laws) > 1:
        return ()
    (law,) = laws
    limits = [height(law.tension / law.factor), height(-law.compression / law.factor)]
    lower, upper = min(limits), max(limits)
    ends_of = [(low, lower), (upper, high)]
    return tuple(Zone(a, b, "yielded", "at yield") for a, b in ends_of if b > a)


def _dimensions(stress: StressResult, axis: float | None, scales: Scales) -> tuple[Dimension, ...]:
    """Return the depth of the compressed zone, the elastic core, or the shift of a curved bar's axis."""
    bounds, shown = stress.section.bounds, {r.name: r.shown for r in stress.results}
    left, low, high = (v * scales.length for v in (bounds.left, bounds.bottom, bounds.top))

    def dimension(label: str, a: float, b: float) -> tuple[Dimension, ...]:
        return (Dimension(label, (left, min(a, b)), (left, max(a, b)), "left"),) if a != b else ()

    if "x_c" in shown and axis is not None:
        end = low if stress.plane.g_y > 0.0 else high
        return dimension(f"x = {shown['x_c'].number}", axis, end)
    if "core" in shown:
        zones = _zones(stress, scales)
        ends = [z.high if z.low == low else z.low for z in zones]
        if len(ends) == 2:
            return dimension(f"core {shown['core'].number}", *ends)
    if stress.curved is not None and axis is not None and stress.forces.N == 0.0:
        return dimension(f"e = {shown['e'].number}", axis, stress.section.computed.y_bar * scales.length)
    return ()


def _field_marks(stress: StressResult, scales: Scales) -> Iterable[FieldMark]:
    """Return the extremes of each part, or of the section where it has one, and the named points."""
    factor, field = scales.length, stress.field
    several = stress.section.composite
    for piece in field.pieces if several else field.pieces[:1]:
        for name, e in zip(("σ_max", "σ_min"), _extremes(field, piece, several=several), strict=True):
            if several and not e[0]:
                continue
            owner = f"{plain(piece.name)} " if several else ""
            label = f"{owner}{plain(name)} = {scales.value(e[0])}"
            yield FieldMark((e[1] * factor, e[2] * factor), e[0], label)
    for name, (x, y) in stress.points.items():
        row = next(r for r in stress.results if r.name == name)
        label = f"{plain(name)}: {signed(row.shown, row.value.si)}"
        yield FieldMark((x * factor, y * factor), row.value.si, label)


def _extremes(
    field: StressField, piece: Piece, *, several: bool
) -> tuple[tuple[float, float, float], tuple[float, float, float]]:
    """Return value and place of the largest and smallest stress, of a piece or of all of them."""
    if several:
        pair = field.extremes_of(piece)
    else:
        pairs = [field.extremes_of(each) for each in field.pieces]
        pair = (
            max((p[0] for p in pairs), key=lambda e: e.value),
            min((p[1] for p in pairs), key=lambda e: e.value),
        )
    most, least = pair
    return (most.value, most.x, most.y), (least.value, least.x, least.y)


def _field_bars(stress: StressResult, scales: Scales) -> Iterable[FieldBar]:
    """Return the bars with their stresses; the extreme ones of each line have their value written."""
    factor = scales.length
    for line in stress.section.bars:
        diameter = math.sqrt(4.0 * line.area / math.pi) * factor
        found = [
            (x, y, s)
            for bars in stress.field.bars
            if bars.name == line.name
            for (x, y), s in zip(bars.points.tolist(), _stresses(stress.field, bars), strict=True)
        ]
        extreme = {max(found, key=lambda b: b[2]), min(found, key=lambda b: b[2])}
        for x, y, s in found:
            label = f"{plain(line.name)}: {scales.value(s)}" if (x, y, s) in extreme else ""
            yield FieldBar(Bar(x * factor, y * factor, diameter), s * scales.stress, label)


def _stresses(field: StressField, bars: Bars) -> list[float]:
    return [float(s) for s in field.stress(bars, bars.points)]


def _limits_label(stress: StressResult) -> str:
    match stress.model:
        case "plastic" | "elastic_plastic":
            return "plain areas: at the strength"
        case "no_tension" | "cracked":
            return "blank areas carry no tension"
        case _:
            return ""


def _field_axis(stress: StressResult, scales: Scales) -> str:
    """Return where the neutral axis of a field lies, in words."""
    axis = stress.plane.neutral_axis
    if axis is None:
        return "no neutral axis: the stress is uniform"
    name = "plastic neutral axis" if stress.model == "plastic" else "neutral axis"
    text = f"{name} at {number_text(math.degrees(axis.angle), scales.style.digits)}° from the horizontal"
    distance = math.hypot(axis.x - stress.plane.x_bar, axis.y - stress.plane.y_bar)
    if distance < TIED * stress.section.bounds.height:
        return f"{text}, through the centroid"
    return f"{text}, {scales.length_text(distance)} {scales.length_unit} from the centroid"


def _actions(stress: StressResult, names: AxisNames) -> Iterable[str]:
    """Return each force with its axis and the side it puts in tension."""
    forces, shown = stress.forces, stress.forces_shown
    if forces.M:
        side = "bottom" if forces.M > 0 else "top"
        axis = f"{names.horizontal}–{names.horizontal}"
        yield f"M = {shown['M'].text} about {axis} (horizontal): tension at the {side}"
    if forces.M_lat:
        side = "right" if forces.M_lat > 0 else "left"
        axis = f"{names.vertical}–{names.vertical}"
        yield f"M_lat = {shown['M_lat'].text} about {axis} (vertical): tension on the {side}"
    if forces.N:
        word = "tension" if forces.N > 0 else "compression"
        yield f"N = {shown['N'].text}, {word}, at the centroid"

"""Figure of normal stress over the depth: section, strain and stress on one vertical scale."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Literal

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point, around
from calcgen.figures.outline import Part, Scale, bounds, draw_cross, draw_parts, place
from calcgen.figures.picture import (
    CHAIN,
    FIRM,
    LINE,
    SMALL,
    TEXT,
    WIDTHS,
    Colour,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
    wrap,
)
from calcgen.figures.svg import render

Word = Literal["tension", "compression"]


@dataclass(frozen=True)
class Mark:
    """A value to write beside the profile, at height `y` of the section."""

    y: float
    value: float
    label: str


@dataclass(frozen=True)
class Force:
    """A resultant along the beam at height `y`: positive leaves the face (tension)."""

    y: float
    value: float
    label: str


@dataclass(frozen=True)
class Couple:
    """A bending moment: positive puts tension at the bottom of the figure."""

    value: float
    label: str


@dataclass(frozen=True, eq=False)
class StressDrawing:
    """Normal stress that varies along the depth only; heights in section coordinates, y up.

    `stress` and `strain` are profiles of (height, value) from the bottom to the top, tension positive; a
    height given twice is a jump. `neutral_axis` is None where no zero of stress lies in the section, and
    `neutral_axis_label` then says where it is. For bending about the vertical axis the parts come turned,
    and `edges` names what is then at the top and at the bottom.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centroid: Point
    stress: tuple[Point, ...]
    marks: tuple[Mark, ...]
    neutral_axis: float | None = None
    neutral_axis_label: str = "neutral axis"
    stress_title: str = "normal stress σ"
    strain: tuple[Point, ...] = ()
    strain_marks: tuple[Mark, ...] = ()
    strain_title: str = "strain ε"
    moment: Couple | None = None
    forces: tuple[Force, ...] = ()
    edges: tuple[str, str] = ("top", "bottom")
    note: str = ""
    description: str = ""


def draw_stress(drawing: StressDrawing, width: Width) -> str:
    """SVG of the stress for a `wide` or a `narrow` place."""
    return render(compose_stress(drawing, width))


@dataclass(frozen=True)
class _Row:
    """Where one row of panels stands across the figure, in pixels."""

    section: tuple[float, float]
    strain: float | None
    face: float | None
    reach: float
    height: float


LEAST_DEPTH = 90.0  # pixels; a shallower section is drawn narrower than to scale, and that is said
FACE_NOTE = "Cut face of the part towards the start: tension leaves it, compression enters it."


def compose_stress(drawing: StressDrawing, width: Width) -> Picture:
    """Compose the panels side by side, or the strain in a second row where the place is narrow."""
    sketch = Sketch()
    for row in _rows(width, strain=bool(drawing.strain)):
        _draw_row(sketch, drawing, row, sketch.box().bottom + 24 if sketch.items else 0.0, WIDTHS[width])
    notes = [note for note in (drawing.note, FACE_NOTE if _largest(drawing.stress) else "") if note]
    if drawing.neutral_axis_label not in {i.text for i in sketch.items if isinstance(i, Label)}:
        notes.insert(0, drawing.neutral_axis_label)
    y = sketch.box().bottom + 16
    for note in notes:
        for line in wrap(note, SMALL, WIDTHS[width] - 12):
            sketch.label(Label(6, y, line, SMALL, "left", colour="muted"))
            y += LINE
    description = drawing.description or _describe(drawing)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description, width=WIDTHS[width])


def _rows(width: Width, *, strain: bool) -> tuple[_Row, ...]:
    if width == "wide":
        if strain:
            return (_Row((12, 122), 208, 330, 100, 190),)
        return (_Row((24, 174), None, 262, 140, 200),)
    first = _Row((6, 92), None, 124, 84, 170)
    return (first, _Row((6, 92), 215, None, 0, 130)) if strain else (first,)


def _draw_row(sketch: Sketch, drawing: StressDrawing, row: _Row, top: float, width: float) -> None:
    """Draw the panels of one row with their titles; the neutral axis runs through all of them."""
    left, bottom, right, upper = bounds(drawing.parts)
    head = top + 18
    room = row.section[1] - row.section[0]
    depth, breadth = max(upper - bottom, 1e-300), max(right - left, 1e-300)
    factor = max(min(row.height / depth, room / breadth), LEAST_DEPTH / depth)
    across = min(factor, room / breadth)
    x = (sum(row.section) - across * (right - left)) / 2
    scale, box = place(drawing.parts, factor, x, head, across=across)
    draw_parts(sketch, scale, drawing.parts)
    draw_cross(sketch, scale.at(*drawing.centroid), 4.0)
    obstacles = Obstacles(3.0, width - 3.0)
    middle = (box.left + box.right) / 2
    titles = [Label(middle, top, drawing.title)]
    if drawing.edges != ("top", "bottom"):
        edges = zip(drawing.edges, (box.top - 5, box.bottom + 12), strict=True)
        titles += [Label(middle, y, text, SMALL, colour="muted") for text, y in edges]
    if across < factor:
        titles.append(Label(middle, box.bottom + 25, "width not to scale", SMALL, colour="muted"))
    if row.strain is not None:
        titles.append(Label(row.strain, top, drawing.strain_title))
    if row.face is not None:
        titles.append(Label(row.face + row.reach / 2, top, drawing.stress_title))
    for title in titles:
        placed = _stepped(title.within(3.0, width - 3.0), obstacles, -1 if title.y == top else 1)
        obstacles.boxes.append(sketch.label(placed).box)
    axis = None
    if drawing.neutral_axis is not None:
        y = scale.at(0.0, drawing.neutral_axis)[1]
        end = width - 70.0 if row.face is not None or row.strain is None else row.strain + 60
        axis = [(max(box.left - 12, 2.0), y), (end, y)]
        obstacles.add_line(axis)
    if row.strain is not None:
        _draw_strain(sketch, drawing, scale, row.strain, obstacles)
    if row.face is not None:
        _draw_stress(sketch, drawing, scale, row, obstacles, width)
    if axis is not None:
        sketch.line(axis, Stroke("ink", 0.9, CHAIN))
        _draw_axis_label(
            sketch, drawing.neutral_axis_label, axis[0][1], (box.right + 8, axis[1][0]), obstacles
        )


def _draw_axis_label(
    sketch: Sketch, sentence: str, y: float, ends: tuple[float, float], obstacles: Obstacles
) -> None:
    """Write the neutral axis's sentence along it where that fits, else its name alone."""
    for text in (sentence, "neutral axis"):
        for baseline in (y - 4, y + 11.5):
            label = Label(0.0, baseline, text, SMALL, "left", halo=True)
            length = label.box.right
            for x in np.arange(ends[1] - length - 2, ends[0], -4.0):
                if obstacles.clear(label.moved(float(x), 0).box.grown(2.0), 0.5):
                    obstacles.boxes.append(sketch.label(label.moved(float(x), 0)).box)
                    return


def _draw_strain(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, axis: float, obstacles: Obstacles
) -> None:
    """Draw the strain as a signed profile about its zero line: lengthening to the right."""
    largest = _largest(drawing.strain) or 1.0
    heights = [scale.at(0.0, y)[1] for y, _ in drawing.strain]
    profile = [(axis + 34 * e / largest, y) for (_, e), y in zip(drawing.strain, heights, strict=True)]
    sketch.fill([[(axis, heights[0]), *profile, (axis, heights[-1])]], "section")
    sketch.line([(axis, heights[0]), *profile, (axis, heights[-1])], Stroke("ink", 1.2))
    sketch.line([(axis, min(heights)), (axis, max(heights))], FIRM)
    obstacles.add_line([(axis, heights[0]), *profile, (axis, heights[-1])])
    middle = (min(heights) + max(heights)) / 2
    for mark in drawing.strain_marks:
        x, y = axis + 34 * mark.value / largest, scale.at(0.0, mark.y)[1]
        way, clear_of = (-1, -5.0) if y < middle else (1, 12.0)
        label = Label((axis + x) / 2, y + clear_of, mark.label, SMALL, colour=_colour(mark.value))
        obstacles.boxes.append(sketch.label(_stepped(label, obstacles, way)).box)


def _draw_stress(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, row: _Row, obstacles: Obstacles, width: float
) -> None:
    """Draw the tractions on the face with their marks and resultants.

    Both signs stand on the free side of the face, so that each arrow is the traction itself: with its tail
    on the face in tension, with its head on the face in compression.
    """
    face = row.face or 0.0
    heights = [scale.at(0.0, y)[1] for y, _ in drawing.stress]
    upper, lower = min(heights), max(heights)
    column = 70.0 if drawing.moment or drawing.forces else 4.0
    longest = max((Label(0, 0, m.label, TEXT, bold=True).box.right * 2 for m in drawing.marks), default=0.0)
    reach = max(min(row.reach, width - column - face - 12 - longest), 36.0)
    per_value = reach / (_largest(drawing.stress) or 1.0)
    _draw_stub(sketch, face, upper, lower)
    for sign in (1.0, -1.0):
        colour = _colour(sign)
        for lobe in _lobes(drawing.stress, sign):
            points = [(face + per_value * abs(s), scale.at(0.0, y)[1]) for y, s in lobe]
            ring = [(face, points[0][1]), *points, (face, points[-1][1])]
            sketch.fill([ring], colour, opacity=0.16)
            sketch.line(ring, Stroke(colour, 1.2))
            sketch.arrows(_tractions(points, face, sign), Stroke(colour, 0.9))
            obstacles.add_line(ring)
    sketch.line([(face, upper), (face, lower)], Stroke("ink", 1.6))
    for mark in drawing.marks:
        _draw_mark(sketch, mark, face + per_value * abs(mark.value), scale, (upper, lower), obstacles)
    _draw_resultants(sketch, drawing, scale, width, (upper + lower) / 2, obstacles)


def _draw_stub(sketch: Sketch, face: float, upper: float, lower: float) -> None:
    """Draw a short piece of the beam behind the face, broken off at its left."""
    back, middle = face - 13.0, (upper + lower) / 2
    zigzag = [(back, middle + 7), (back - 4, middle + 3), (back + 4, middle - 3), (back, middle - 7)]
    broken = [(back, lower), *zigzag, (back, upper)]
    sketch.fill([[(face, upper), (face, lower), *broken]], "section")
    sketch.line(broken, Stroke("muted", 0.7))
    sketch.lines([((back, y), (face, y)) for y in (upper, lower)], Stroke("ink", 1.0))


def _lobes(profile: Sequence[Point], sign: float) -> list[list[Point]]:
    """Stretches of the profile where the stress has this sign, ending at its zeros."""
    lobes: list[list[Point]] = [[]]
    for (y_1, s_1), (y_2, s_2) in pairwise(profile):
        piece = [(y_1, s_1), (y_2, s_2)]
        if s_1 * s_2 < 0:
            zero = (y_1 + (y_2 - y_1) * s_1 / (s_1 - s_2), 0.0)
            piece = [(y_1, s_1), zero] if s_1 * sign > 0 else [zero, (y_2, s_2)]
        if max(s * sign for _, s in piece) <= 0:
            lobes.append([])
        elif lobes[-1] and lobes[-1][-1] == piece[0]:
            lobes[-1].append(piece[1])
        else:
            lobes.append(piece)
    return [lobe for lobe in lobes if lobe]


def _tractions(points: Sequence[Point], face: float, sign: float) -> list[tuple[Point, Point]]:
    """Arrows between the face and the profile: away from the face in tension, to it in compression."""
    xs, ys = zip(*reversed(points), strict=True)  # from the top down, as interpolation wants it
    count = max(int((ys[-1] - ys[0]) / 17), 1) + 1
    arrows = []
    for y in np.linspace(ys[0], ys[-1], count):
        x = float(np.interp(y, ys, xs))
        if x - face > 7:
            ends = ((face, float(y)), (x, float(y)))
            arrows.append(ends if sign > 0 else ends[::-1])
    return [(tail, tip) for tail, tip in arrows]


def _draw_mark(
    sketch: Sketch, mark: Mark, tip: float, scale: Scale, ends: tuple[float, float], obstacles: Obstacles
) -> None:
    """Write a value, and under or over it the word, to the right of the profile."""
    y = scale.at(0.0, mark.y)[1]
    inward = -1 if y > sum(ends) / 2 else 1
    colour = _colour(mark.value)
    value = Label(tip + 6, y + 4, mark.label, TEXT, "left", colour, bold=True)
    placed = _stepped(value.within(obstacles.left, obstacles.right), obstacles, inward, LINE)
    obstacles.boxes.append(sketch.label(placed).box)
    if mark.value:
        word = Label(placed.x, placed.y + 12.5 * inward, _word(mark.value), SMALL, "left", colour)
        obstacles.boxes.append(sketch.label(word).box)


def _stepped(label: Label, obstacles: Obstacles, way: int, room: float = 0.0) -> Label:
    """Give the label moved up (`way` -1) or down (1) until it and `room` beyond it are clear."""
    moved = label
    while not obstacles.free(around([moved.box, moved.box.moved(0.0, way * room)]), 1.0):
        moved = moved.moved(0.0, way * 3.0)
    return moved


def _draw_resultants(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, width: float, middle: float, obstacles: Obstacles
) -> None:
    """Draw the forces as straight arrows and the moment as a curved one, turning as the tractions do."""
    right = width - 8.0
    labels = []
    for force in drawing.forces:
        y = scale.at(0.0, force.y)[1]
        if force.value:
            ends = ((right - 62, y), (right - 12, y))  # clear of the bow of the moment
            colour = _colour(force.value)
            sketch.arrows([ends if force.value > 0 else ends[::-1]], Stroke(colour, 1.8), 8.0)
            obstacles.add_line(ends)
        labels.append((Label(right, y + 13, force.label, SMALL, "right"), 1))
    if drawing.moment is not None:
        if drawing.moment.value:
            sweep = 116.0 if drawing.moment.value > 0 else -116.0
            centre = (right - 40, middle)
            sketch.curl(centre, 38.0, -sweep / 2, sweep, Stroke("ink", 1.6), 8.0)
            obstacles.boxes.append(Box(right - 22, middle - 34, right, middle + 34))
        labels.insert(0, (Label(right, middle - 42, drawing.moment.label, SMALL, "right"), -1))
    for label, way in labels:
        obstacles.boxes.append(sketch.label(_stepped(label.within(3, width - 3), obstacles, way)).box)


def _largest(profile: Sequence[Point]) -> float:
    return max((abs(value) for _, value in profile), default=0.0)


def _word(value: float) -> Word:
    return "tension" if value > 0 else "compression"


def _colour(value: float) -> Colour:
    return _word(value) if value else "ink"


def _describe(drawing: StressDrawing) -> str:
    values = [f"{m.label} {_word(m.value)}" if m.value else m.label for m in drawing.marks]
    said = [f"{drawing.stress_title}: " + ", ".join(values), drawing.neutral_axis_label]
    if drawing.moment:
        said.append(drawing.moment.label)
    said += [force.label for force in drawing.forces]
    return "; ".join(said) + "."

"""Figure of normal stress over the depth: section, strain and stress on one vertical scale."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point, around
from calcgen.figures.outline import Scale, bounds, draw_cross, draw_parts, place
from calcgen.figures.picture import (
    CHAIN,
    FIRM,
    LINE,
    SMALL,
    TEXT,
    WIDTHS,
    Anchor,
    Colour,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
    wrap,
)
from calcgen.figures.stress_drawing import Mark, StressDrawing, Word
from calcgen.figures.svg import render


def draw_stress(drawing: StressDrawing, width: Width) -> str:
    """SVG of the stress for a `wide` or a `narrow` place."""
    return render(compose_stress(drawing, width))


LEAST_DEPTH = 90.0  # pixels; a shallower section is drawn narrower than to scale, and that is said
STEPS = 400  # of three pixels, in search of a clear place for a value
REACH = 100.0  # pixels from the zero line to the largest value, at most
FACE_NOTE = "Cut face of the part towards the start: tension leaves it, compression enters it."


@dataclass(frozen=True)
class _Row:
    """Where one row of panels stands across the figure, from left to right in pixels."""

    section: tuple[float, float]
    strain: tuple[float, float] | None
    stress: tuple[float, float] | None
    height: float


@dataclass(frozen=True)
class _Values:
    """From values to pixels across, positive to the right of the zero line."""

    zero: float
    factor: float

    def at(self, value: float) -> float:
        """Give the pixel of a value."""
        return self.zero + self.factor * value


def compose_stress(drawing: StressDrawing, width: Width) -> Picture:
    """Compose the panels side by side, or the strain in a second row where the place is narrow."""
    sketch = Sketch()
    for row in _rows(drawing, width):
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


def _rows(drawing: StressDrawing, width: Width) -> tuple[_Row, ...]:
    names = [force.label for force in drawing.forces]
    if drawing.moment is not None:
        names.append(drawing.moment.label)
    longest = max((_width(Label(0, 0, name, SMALL)) for name in names), default=0.0)
    end = WIDTHS[width] - (min(max(longest + 16, 92.0), 112.0) if names else 6.0)
    if width == "wide":
        if drawing.strain:
            return (_Row((14, 124), (152, 232), (262, end), 190),)
        return (_Row((24, 174), None, (200, end), 200),)
    first = _Row((14, 92), None, (104, end), 170)
    return (first, _Row((14, 92), (150, 290), None, 130)) if drawing.strain else (first,)


def _draw_row(sketch: Sketch, drawing: StressDrawing, row: _Row, top: float, width: float) -> None:
    """Draw the panels of one row with their titles; the neutral axis runs through all of them."""
    left, bottom, right, upper = bounds(drawing.parts)
    head = top + (44 if row.stress else 30)  # the values of the top fibre stand under the titles
    room = row.section[1] - row.section[0]
    depth, breadth = max(upper - bottom, 1e-300), max(right - left, 1e-300)
    factor = max(min(row.height / depth, room / breadth), LEAST_DEPTH / depth)
    across = min(factor, room / breadth)
    x = (sum(row.section) - across * (right - left)) / 2
    scale, box = place(drawing.parts, factor, x, head, across=across)
    draw_parts(sketch, scale, drawing.parts)
    draw_cross(sketch, scale.at(*drawing.centroid), 4.0)
    obstacles = Obstacles(3.0, width - 3.0, [box])
    _draw_titles(sketch, drawing, row, box, top, obstacles, to_scale=across == factor)
    axis = []
    if drawing.neutral_axis is not None:
        y = scale.at(0.0, drawing.neutral_axis)[1]
        end = row.stress or row.strain or (box.left, box.right + 12)
        axis = [(box.left - 10, y), (end[1], y)]
        obstacles.add_line(axis)
    if row.strain:
        _draw_strain(sketch, drawing, scale, row.strain, obstacles)
    if row.stress:
        values = _values(drawing.stress, row.stress)
        _draw_stress(sketch, drawing, scale, values, obstacles)
        _draw_resultants(sketch, drawing, scale, width, (box.top + box.bottom) / 2, obstacles)
        for mark in drawing.marks:
            tip = (values.at(mark.value), scale.at(0.0, mark.y)[1])
            for label in _mark_labels(mark, drawing, tip, box, row.stress, obstacles):
                obstacles.boxes.append(sketch.label(label).box)
    if axis:
        sketch.line(axis, Stroke("ink", 0.9, CHAIN))
    if axis and row.stress:  # a second row only repeats the axis
        ends = (box.right + 8, axis[1][0])
        _draw_axis_label(sketch, drawing.neutral_axis_label, axis[0][1], ends, obstacles)


def _draw_titles(
    sketch: Sketch,
    drawing: StressDrawing,
    row: _Row,
    box: Box,
    top: float,
    obstacles: Obstacles,
    *,
    to_scale: bool,
) -> None:
    """Write the title of each panel, and what is to be said of the section in the box."""
    middle = (box.left + box.right) / 2
    titles = [Label(middle, top, drawing.title)]
    if drawing.edges != ("top", "bottom"):
        edges = zip(drawing.edges, (box.top - 5, box.bottom + 12), strict=True)
        titles += [Label(middle, y, text, SMALL, colour="muted") for text, y in edges]
    if not to_scale:
        titles.append(Label(middle, box.bottom + 25, "width not to scale", SMALL, colour="muted"))
    named = ((row.strain, drawing.strain_title), (row.stress, drawing.stress_title))
    titles += [Label(sum(panel) / 2, top, text) for panel, text in named if panel]
    for title in titles:
        placed = _stepped(
            title.within(obstacles.left, obstacles.right), obstacles, -1 if title.y == top else 1
        )
        obstacles.boxes.append(sketch.label(placed).box)


def _draw_axis_label(
    sketch: Sketch, sentence: str, y: float, ends: tuple[float, float], obstacles: Obstacles
) -> None:
    """Write the neutral axis's sentence along it where that fits, else its name alone."""
    for text in (sentence, "neutral axis"):
        for baseline in (y - 5.5, y + 11.5):
            label = Label(0.0, baseline, text, SMALL, "left", halo=True)
            for x in np.arange(ends[0], ends[1] - _width(label) - 2, 4.0):
                placed = label.moved(float(x), 0.0)
                room = placed.box.grown(2.0)
                if all(obstacles.clear(room.moved(aside, 0.0), 0.5) for aside in (-4.0, 4.0)):
                    obstacles.boxes.append(sketch.label(placed).box)
                    return


def _values(profile: Sequence[Point], panel: tuple[float, float]) -> _Values:
    """Give the scale that puts a profile and its zero line in the middle of a panel."""
    reached = [0.0, *(value for _, value in profile)]
    low, high = min(reached), max(reached)
    middle = sum(panel) / 2
    if low == high:
        return _Values(middle, 0.0)
    factor = min(REACH / max(high, -low), (panel[1] - panel[0]) / (high - low))
    return _Values(middle - factor * (low + high) / 2, factor)


def _draw_strain(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, panel: tuple[float, float], obstacles: Obstacles
) -> None:
    """Draw the strain as a signed profile about its zero line: lengthening to the right."""
    values = _values(drawing.strain, panel)
    heights = [scale.at(0.0, y)[1] for y, _ in drawing.strain]
    profile = [(values.at(e), y) for (_, e), y in zip(drawing.strain, heights, strict=True)]
    zero = [(values.zero, heights[-1]), (values.zero, heights[0])]
    sketch.fill([[*profile, *zero]], "section")
    sketch.line([zero[1], *profile, zero[0]], Stroke("ink", 1.2))
    sketch.line(zero, FIRM)
    obstacles.add_line([zero[1], *profile, *zero])
    middle = (min(heights) + max(heights)) / 2
    for mark in drawing.strain_marks:
        x, y = (values.zero + values.at(mark.value)) / 2, scale.at(0.0, mark.y)[1]
        way, clear_of = (-1, -5.0) if y < middle else (1, 12.0)
        label = Label(x, y + clear_of, mark.label, SMALL, colour=_colour(mark.value))
        obstacles.boxes.append(sketch.label(_stepped(label, obstacles, way)).box)


def _draw_stress(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, values: _Values, obstacles: Obstacles
) -> None:
    """Draw the tractions on the face, which is the zero line.

    The body lies to the left of its face, so each arrow is the traction itself: from the face to the right,
    out of the body, in tension; from the face to the left, into the body, in compression.
    """
    face = values.zero
    heights = [scale.at(0.0, y)[1] for y, _ in drawing.stress]
    for sign in (1.0, -1.0):
        colour = _colour(sign)
        for lobe in _lobes(drawing.stress, sign):
            points = [(values.at(s), scale.at(0.0, y)[1]) for y, s in lobe]
            ring = [(face, points[0][1]), *points, (face, points[-1][1])]
            sketch.fill([ring], colour, opacity=0.16)
            sketch.line(ring, Stroke(colour, 1.2))
            sketch.arrows(_tractions(points, face, 17.0), Stroke(colour, 0.9))
            for line in (ring, *_tractions(points, face, 4.0)):  # so close that no label fits between
                obstacles.add_line(line)
    ends = [(face, min(heights)), (face, max(heights))]
    sketch.line(ends, Stroke("ink", 1.6))
    obstacles.add_line(ends)


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


def _tractions(points: Sequence[Point], face: float, pitch: float) -> list[tuple[Point, Point]]:
    """Arrows from the face to the profile, about `pitch` pixels apart."""
    xs, ys = zip(*reversed(points), strict=True)  # from the top down, as interpolation wants it
    levels = np.linspace(ys[0], ys[-1], max(int((ys[-1] - ys[0]) / pitch), 1) + 1)
    tips = [(float(np.interp(y, ys, xs)), float(y)) for y in levels]
    return [((face, y), (x, y)) for x, y in tips if abs(x - face) > 7]


def _mark_labels(
    mark: Mark,
    drawing: StressDrawing,
    tip: Point,
    section: Box,
    panel: tuple[float, float],
    obstacles: Obstacles,
) -> list[Label]:
    """Give the value of a mark and its word, in the nearest clear place.

    They stand over the top fibre and under the bottom fibre, the word nearer to the profile, and at other
    heights beside the tip, on the mark's own side of a jump if there is room.
    """
    x, y = tip
    if abs(y - section.top) < 1:
        labels = _value_and_word(mark, x, y - 18, y - 5.5, "center")
        steps = [-3.0 * n for n in range(STEPS)]
    elif abs(y - section.bottom) < 1:
        labels = _value_and_word(mark, x, y + 25, y + 12.5, "center")
        steps = [3.0 * n for n in range(STEPS)]
    else:
        panel = (obstacles.left, obstacles.right)
        values = [value for height, value in drawing.stress if height == mark.y]
        way = -1 if len(values) > 1 and mark.value == values[-1] else 1
        side: Anchor = "left" if mark.value > 0 else "right"
        beside = x + 6 if mark.value > 0 else x - 6
        labels = _value_and_word(mark, beside, y + 4, y + 4 + 12.5 * way, side)
        steps = [sign * way * 3.0 * n for n in range(STEPS) for sign in (1, -1)]
        # a value of the inside is not to be read as one of the end fibres
        steps.sort(key=lambda step: not section.top <= y + step <= section.bottom - 6)
    longest = max(labels, key=_width)
    shift = longest.within(*panel).within(obstacles.left, obstacles.right).x - longest.x
    box = around(label.box.moved(shift, 0.0) for label in labels)
    step = next(step for step in steps if obstacles.free(box.moved(0.0, step), 1.0))
    return [label.moved(shift, step) for label in labels]


def _value_and_word(mark: Mark, x: float, value_at: float, word_at: float, anchor: Anchor) -> list[Label]:
    """Give the labels of a mark at two baselines; a zero has no word, and stands where that would."""
    colour = _colour(mark.value)
    value = Label(x, value_at if mark.value else word_at, mark.label, TEXT, anchor, colour, bold=True)
    return [value, Label(x, word_at, _word(mark.value), SMALL, anchor, colour)] if mark.value else [value]


def _stepped(label: Label, obstacles: Obstacles, way: int) -> Label:
    """Give the label moved up (`way` -1) or down (1) until it is clear."""
    while not obstacles.free(label.box, 1.0):
        label = label.moved(0.0, way * 3.0)
    return label


def _draw_resultants(
    sketch: Sketch, drawing: StressDrawing, scale: Scale, width: float, middle: float, obstacles: Obstacles
) -> None:
    """Draw the forces as straight arrows and the moment as a curved one, turning as the tractions do."""
    right = width - 8.0
    labels = []
    for force in drawing.forces:
        y = scale.at(0.0, force.y)[1]
        if force.value:
            ends = ((right - 80, y), (right - 30, y))  # clear of the bow of the moment
            colour = _colour(force.value)
            sketch.arrows([ends if force.value > 0 else ends[::-1]], Stroke(colour, 1.8), 8.0)
            obstacles.add_line(ends)
        labels.append((Label(right - 26, y + 13, force.label, SMALL, "right"), 1))
    if drawing.moment is not None:
        if drawing.moment.value:
            sweep = 116.0 if drawing.moment.value > 0 else -116.0
            centre = (right - 40, middle)
            sketch.curl(centre, 38.0, -sweep / 2, sweep, Stroke("ink", 1.6), 8.0)
            obstacles.boxes.append(Box(right - 22, middle - 34, right, middle + 34))
        labels.insert(0, (Label(right, middle - 42, drawing.moment.label, SMALL, "right"), -1))
    for label, way in labels:
        obstacles.boxes.append(sketch.label(_stepped(label.within(3, width - 3), obstacles, way)).box)


def _width(label: Label) -> float:
    return label.box.right - label.box.left


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

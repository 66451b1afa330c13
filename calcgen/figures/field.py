"""Figure of the stress over the section in biaxial bending: bands clipped to the outline, neutral axis."""

from collections.abc import Iterator
from dataclasses import dataclass
from math import ceil, floor, hypot, inf, isfinite, log10

import numpy as np

from calcgen.figures.labels import Box, Point
from calcgen.figures.legend import Entry, draw_legend, legend_width
from calcgen.figures.notes import draw_note, draw_title, obstacles_of
from calcgen.figures.outline import (
    EUROCODE,
    AxisNames,
    Bar,
    Part,
    Ring,
    Scale,
    draw_axes,
    draw_cross,
    fit,
    pixels,
)
from calcgen.figures.picture import (
    CHAIN,
    DASH,
    FIRM,
    LINE,
    SMALL,
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

THIN_INK = Stroke("ink", 0.9)
LEAST_BAR = 3.0  # pixels of radius of a bar, so that filled and open can be told apart


@dataclass(frozen=True, eq=False)
class FieldPart:
    """A part with its stress, `constant` + `by_x`·x + `by_y`·y within `low` and `high`, tension positive.

    A limit is the stress at yield, or zero for what carries no tension (or no compression); where it governs
    the part is drawn as one plain area. A part of another stiffness comes with its own plane.
    """

    part: Part
    constant: float
    by_x: float
    by_y: float
    low: float = -inf
    high: float = inf

    def plane(self, x: float, y: float) -> float:
        """Give the stress at a point of the section as if it had no limits."""
        return self.constant + self.by_x * x + self.by_y * y

    @property
    def extremes(self) -> tuple[float, float]:
        """The smallest and the largest stress of the part, which lie on its outline."""
        points = np.vstack(self.part.rings)
        plane = self.constant + points @ [self.by_x, self.by_y]
        stresses = np.clip([plane.min(), plane.max()], self.low, self.high)
        return float(stresses[0]), float(stresses[1])


@dataclass(frozen=True)
class FieldBar:
    """A round bar with its stress; the label is written beside it, unless it is empty."""

    bar: Bar
    value: float
    label: str = ""


@dataclass(frozen=True)
class FieldMark:
    """A stress to write at a point of the section."""

    point: Point
    value: float
    label: str


@dataclass(frozen=True, eq=False)
class FieldDrawing:
    """Normal stress that varies both ways over a section, x right and y up.

    `neutral_axis_label` says where the neutral axis lies; it is drawn where it crosses the section.
    `actions` are sentences such as 'M = 30.0 kN·m about y–y: tension at the bottom'. `bars` are drawn filled
    in tension and as rings in compression. `kern` is the outline of the kern, empty where it is not shown.
    `limits_label` says what the plain areas are where a part is at a limit: 'plain areas: at yield, ±235
    MPa'.
    """

    ident: str
    title: str
    parts: tuple[FieldPart, ...]
    centroid: Point
    marks: tuple[FieldMark, ...]
    unit: str = "MPa"
    axes: AxisNames = EUROCODE
    neutral_axis_label: str = "neutral axis"
    actions: tuple[str, ...] = ()
    bars: tuple[FieldBar, ...] = ()
    kern: tuple[Point, ...] = ()
    limits_label: str = ""
    description: str = ""


def draw_field(drawing: FieldDrawing, width: Width) -> str:
    """SVG of the stress field for a `wide` or a `narrow` place."""
    return render(compose_field(drawing, width))


def compose_field(drawing: FieldDrawing, width: Width) -> Picture:
    """Compose the field, its marks, its legend and the sentences under it, no wider than its place."""
    sketch = Sketch()
    parts = [field.part for field in drawing.parts]
    room = (280.0, 240.0) if width == "wide" else (WIDTHS["narrow"] - 190.0, 200.0)
    scale, box = fit(parts, *room)
    stresses = [stress for field in drawing.parts for stress in field.extremes]
    step = _round_step(max(abs(min(stresses)), abs(max(stresses))) / 5)
    for field in drawing.parts:
        _draw_part(sketch, scale, field, step)
    centre = scale.at(*drawing.centroid)
    draw_axes(sketch, box, centre, drawing.axes)
    if drawing.kern:
        ring = [scale.at(*point) for point in drawing.kern]
        sketch.line([*ring, ring[0]], Stroke("ink", 1.0, DASH))
    for bar in drawing.bars:
        _draw_bar(sketch, scale, bar)
    draw_cross(sketch, centre, 4.0)
    bent = next((field for field in drawing.parts if field.by_x or field.by_y), drawing.parts[0])
    ends = _neutral_axis(bent, scale, box)
    if ends:
        sketch.line(ends, Stroke("ink", 1.3, CHAIN))
    obstacles = obstacles_of(sketch)
    labelled = [FieldMark((b.bar.x, b.bar.y), b.value, b.label) for b in drawing.bars if b.label]
    for mark in (*drawing.marks, *labelled):
        at = scale.at(*mark.point)
        text = f"{mark.label} {_word(mark.value)}".strip()
        note = Label(0, 0, text, SMALL, colour=_colour(mark.value), bold=True, halo=True)
        draw_note(sketch, note, at, box, obstacles, WIDTHS[width] - 6)
        if mark not in labelled:
            sketch.dot(at, 2.6, _colour(mark.value), Stroke("paper", 0.8))
    if drawing.kern:
        name = Label(0, 0, "kern", SMALL, halo=True)
        at = scale.at(*max(drawing.kern))
        draw_note(sketch, name, at, box, obstacles, WIDTHS[width] - 6)
    if ends:
        name = Label(0, 0, "neutral axis", SMALL, halo=True)
        draw_note(sketch, name, max(ends), box, obstacles, WIDTHS[width] - 6)
    draw_title(sketch, drawing.title, (box.left + box.right) / 2, 8.0, WIDTHS[width] - 6)
    held = sketch.box()
    middle = (held.left + held.right) / 2
    _draw_legend(sketch, drawing, (min(stresses), max(stresses)), step, middle, WIDTHS[width] - 48)
    _draw_bar_legend(sketch, drawing, middle)
    sentences = [drawing.limits_label, drawing.neutral_axis_label, *drawing.actions]
    _draw_sentences(sketch, list(filter(None, sentences)), middle, WIDTHS[width] - 12)
    return sketch.picture(
        f"{drawing.ident}-{width}", drawing.title, drawing.description or _describe(drawing)
    )


def _draw_part(sketch: Sketch, scale: Scale, field: FieldPart, step: float) -> None:
    """Draw bands of one step of stress, contours between them, dashed in compression, and the outline.

    Where the part is at a limit, the outermost band goes on, and a firmer line bounds it; what is at zero
    because it carries no stress of that sign stays blank.
    """
    rings = pixels(scale, field.part)
    sketch.fill(rings, "section")
    least, most = field.extremes
    for level, beyond in ((field.low, -inf), (field.high, inf)):
        if level == 0.0:
            blank = _strip(field, scale, *sorted((level, beyond)))
            sketch.fill([blank], "paper", clip=rings)
    for low, high in _bands(least, most, step):
        down = -inf if low <= field.low < 0.0 else low
        up = inf if high >= field.high > 0.0 else high
        strip = _strip(field, scale, down, up) if (down, up) != (-inf, inf) else np.vstack(rings)
        sketch.fill([strip], _colour(low + high), opacity=_opacity(low, high, step), clip=rings)
    lines: dict[bool, list[Ring]] = {True: [], False: []}
    if hypot(field.by_x, field.by_y) > 0:
        for level in np.arange(ceil(least / step), floor(most / step) + 1) * step:
            if level and field.low < level < field.high:
                lines[bool(level > 0)].append(_strip(field, scale, level, level)[:2])
    sketch.lines(lines[True], Stroke("tension", 0.7), clip=rings)
    sketch.lines(lines[False], Stroke("compression", 0.7, DASH), clip=rings)
    limits = [limit for limit in (field.low, field.high) if isfinite(limit) and limit in (least, most)]
    sketch.lines([_strip(field, scale, limit, limit)[:2] for limit in limits], THIN_INK, clip=rings)
    sketch.fill(rings, None, stroke=FIRM)


def _draw_bar(sketch: Sketch, scale: Scale, bar: FieldBar) -> None:
    """Draw a bar filled in tension and as a ring in compression."""
    radius = max(scale.radius(bar.bar.diameter), LEAST_BAR)
    colour = _colour(bar.value)
    filled = colour if bar.value > 0 else "paper"
    sketch.dot(scale.at(bar.bar.x, bar.bar.y), radius, filled, Stroke(colour, 1.4))


def _draw_bar_legend(sketch: Sketch, drawing: FieldDrawing, middle: float) -> None:
    values = [bar.value for bar in drawing.bars]
    entries = [Entry("bar in tension", "bar")] if any(value > 0 for value in values) else []
    entries += [Entry("bar in compression", "pressed bar")] if any(value < 0 for value in values) else []
    if entries:
        breadth = legend_width(entries)
        draw_legend(sketch, entries, middle - breadth / 2, sketch.box().bottom + 9, middle + breadth)


def _bands(low: float, high: float, step: float) -> Iterator[tuple[float, float]]:
    """Limits of the bands of width `step` that hold [low, high], the outer ones in full."""
    if low == high == 0.0:
        return
    first, last = floor(low / step), max(ceil(high / step), floor(low / step) + 1)
    for number in range(first, last):
        yield number * step, (number + 1) * step


def _opacity(low: float, high: float, step: float) -> float:
    return round(0.1 + 0.11 * (abs(low + high) / 2 / step - 0.5), 3)


def _strip(field: FieldPart, scale: Scale, low: float, high: float) -> Ring:
    """Corners in pixels of the strip with stress from `low` to `high`, longer than the part is wide."""
    points = np.vstack(field.part.rings)
    centre = points.mean(axis=0)
    reach = float(np.ptp(points, axis=0).sum()) or 1.0
    slope = np.array([field.by_x, field.by_y])
    steepness = float(np.hypot(*slope))
    here = field.plane(*centre)
    if steepness * reach < 1e-9 * max(abs(here), 1e-300):  # uniform: one band covers all
        square = np.array([(-1, -1), (1, -1), (1, 1), (-1, 1)]) * reach
        return scale.ring(centre + square)
    up = slope / steepness
    along = np.array([-up[1], up[0]]) * reach
    bottom, top = (
        centre + up * (np.clip((level - here) / steepness, -reach, reach)) for level in (low, high)
    )
    return scale.ring(np.array([bottom - along, bottom + along, top + along, top - along]))


def _neutral_axis(field: FieldPart, scale: Scale, box: Box) -> list[Point] | None:
    """Give the ends of the line of zero stress, a little beyond the section, if it crosses its box."""
    slope = np.array([field.by_x, field.by_y])
    if not slope.any():
        return None
    start, end = _strip(field, scale, 0.0, 0.0)[:2]
    outer = box.grown(26.0)
    step = end - start
    with np.errstate(divide="ignore", invalid="ignore"):
        first = (np.array([outer.left, outer.top]) - start) / step
        second = (np.array([outer.right, outer.bottom]) - start) / step
    moving = np.abs(step) > 1e-9
    enter = float(np.minimum(first, second)[moving].max())
    leave = float(np.maximum(first, second)[moving].min())
    if not box.crosses(start[None, :], end[None, :]) or leave <= enter:
        return None
    a, b = start + enter * step, start + leave * step
    return [(float(a[0]), float(a[1])), (float(b[0]), float(b[1]))]


def _draw_legend(
    sketch: Sketch,
    drawing: FieldDrawing,
    stresses: tuple[float, float],
    step: float,
    middle: float,
    room: float,
) -> None:
    """Draw a strip of the bands with their limits under it and the words at its ends."""
    bands = list(_bands(*stresses, step))
    if not bands:
        return
    top = sketch.box().bottom + 24
    breadth = min(34.0, room / len(bands))
    left = middle - breadth * len(bands) / 2
    words = [w for w, present in (("compression", bands[0][0] < 0), ("tension", bands[-1][1] > 0)) if present]
    heading = f"{' and '.join(words)}, {drawing.unit}"
    sketch.label(Label(middle, top - 6, heading, SMALL, colour="muted"))
    for number, (low, high) in enumerate(bands):
        x = left + number * breadth
        ring = [(x, top), (x + breadth, top), (x + breadth, top + 11), (x, top + 11)]
        sketch.fill([ring], "section")
        sketch.fill([ring], _colour(low + high), opacity=_opacity(low, high, step))
        sketch.fill([ring], None, stroke=Stroke(_colour(low + high), 0.7))
    free = -1e9
    for number, level in enumerate([band[0] for band in bands] + [bands[-1][1]]):
        label = Label(left + number * breadth, top + 23, _plain(level, step), SMALL)
        if label.box.left > free:
            free = sketch.label(label).box.right + 3


def _draw_sentences(sketch: Sketch, sentences: list[str], middle: float, room: float) -> None:
    y = sketch.box().bottom + 17
    for sentence in sentences:
        for line in wrap(sentence, SMALL, room):
            sketch.label(Label(middle, y, line, SMALL, colour="muted"))
            y += LINE


def _round_step(about: float) -> float:
    """Give 1, 2 or 5 times a power of ten, at least `about`."""
    if about <= 0:
        return 1.0
    power = 10.0 ** floor(log10(about))
    return next(m * power for m in (1, 2, 5, 10) if m * power >= about * (1 - 1e-9))


def _plain(level: float, step: float) -> str:
    digits = max(0, -floor(log10(step) + 1e-9))
    return f"{level:.{digits}f}".replace("-", "−") if round(level / step) else "0"


def _word(value: float) -> str:
    return "tension" if value > 0 else "compression" if value < 0 else ""


def _colour(value: float) -> Colour:
    return "tension" if value > 0 else "compression" if value < 0 else "ink"


def _describe(drawing: FieldDrawing) -> str:
    said = [f"{mark.label} {_word(mark.value)}".strip() for mark in drawing.marks]
    return "; ".join([*said, drawing.neutral_axis_label, *drawing.actions]) + "."

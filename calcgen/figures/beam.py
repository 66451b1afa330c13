"""Figure of a beam: loading with supports, then V, M and w, on one axis along the beam."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

from calcgen.figures.beam_diagrams import Diagram, draw_diagram
from calcgen.figures.beam_loads import LoadCase, draw_case, largest_intensity
from calcgen.figures.beam_supports import (
    DROP,
    Support,
    draw_hinge,
    draw_rotation_spring,
    draw_support,
)
from calcgen.figures.labels import spread
from calcgen.figures.picture import (
    DOT,
    HAIR,
    LINE,
    SMALL,
    THIN,
    WIDTHS,
    Label,
    Picture,
    Shape,
    Sketch,
    Stroke,
    Width,
    wrap,
)
from calcgen.figures.svg import render

MARGIN = 26.0
BEAM = Stroke("ink", 2.6)


@dataclass(frozen=True)
class Stretch:
    """A dimension along the beam, its label ready: '6.00 m'."""

    start: float
    end: float
    label: str


@dataclass(frozen=True)
class BeamDrawing:
    """A beam from `start` to `end` with what acts on it and what follows; lengths in the unit shown."""

    ident: str
    title: str
    start: float
    end: float
    supports: tuple[Support, ...]
    cases: tuple[LoadCase, ...] = ()
    diagrams: tuple[Diagram, ...] = ()
    stretches: tuple[Stretch, ...] = ()
    hinges: tuple[float, ...] = ()
    note: str = ""
    description: str = ""


def draw_beam(drawing: BeamDrawing, width: Width) -> str:
    """SVG of the beam for a `wide` or a `narrow` place."""
    return render(compose_beam(drawing, width))


def compose_beam(drawing: BeamDrawing, width: Width) -> Picture:
    """Compose loading and diagrams from the top down; lines at the supports run through all of them."""
    sketch = Sketch()
    room = WIDTHS[width]
    length = max(drawing.end - drawing.start, 1e-300)

    def across(x: float) -> float:
        return MARGIN + (x - drawing.start) / length * (room - 2 * MARGIN)

    y = 0.0
    for line in wrap(drawing.title, SMALL, room - 6):
        sketch.label(Label(3, y, line, SMALL, "left", bold=True))
        y += LINE
    base = y + 4
    largest = largest_intensity(drawing.cases)
    for number, case in enumerate(drawing.cases):
        base = draw_case(sketch, case, y - 6, across, room, largest)
        if number < len(drawing.cases) - 1:
            sketch.line([(across(drawing.start), base), (across(drawing.end), base)], Stroke("muted", 1.0))
        y = base + 16
    y = _draw_beam(sketch, drawing, base, across, room)
    for diagram in drawing.diagrams:
        y = draw_diagram(sketch, diagram, y + 18, across, room)
    if drawing.diagrams:
        marks = sorted({across(x) for x in (drawing.start, drawing.end, *(s.x for s in drawing.supports))})
        lines = tuple(((x, base), (x, y + 4)) for x in marks)
        sketch.items.insert(0, Shape(lines, closed=False, stroke=Stroke("muted", 0.7, DOT)))
    y += 20
    for line in wrap(drawing.note, SMALL, room - 6):
        sketch.label(Label(3, y, line, SMALL, "left", colour="muted"))
        y += LINE
    description = drawing.description or _describe(drawing)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description, width=room)


def _draw_beam(
    sketch: Sketch, drawing: BeamDrawing, base: float, across: Callable[[float], float], room: float
) -> float:
    """Draw the beam itself, its supports and the dimensions under them; give the height below."""
    for support in drawing.supports:
        end: Literal["left", "right", "inner"] = "inner"
        if support.x in (drawing.start, drawing.end):
            end = "left" if support.x == drawing.start else "right"
        draw_support(sketch, support.kind, (across(support.x), base), end)
    sketch.line([(across(drawing.start), base), (across(drawing.end), base)], BEAM)
    for support in drawing.supports:
        if support.turning:
            draw_rotation_spring(sketch, (across(support.x), base))
    for x in drawing.hinges:
        draw_hinge(sketch, (across(x), base))
    named = sorted((across(s.x), s.label) for s in drawing.supports if s.label)
    y = _draw_lane(sketch, named, base + DROP + 2, room)
    if drawing.stretches:
        level = y + 6
        ticks = {across(x) for s in drawing.stretches for x in (s.start, s.end)}
        sketch.lines((((x, level - 4), (x, level + 4)) for x in sorted(ticks)), HAIR)
        for s in drawing.stretches:
            left, right = across(s.start), across(s.end)
            sketch.line([(left, level), (right, level)], THIN)
            sketch.heads([((right, level), (left, level)), ((left, level), (right, level))], "muted", 4.5)
        middles = sorted(((across(s.start) + across(s.end)) / 2, s.label) for s in drawing.stretches)
        y = _draw_lane(sketch, middles, level + 4, room)
    return y


def _draw_lane(sketch: Sketch, wanted: list[tuple[float, str]], top: float, room: float) -> float:
    """Write labels side by side below `top`, upright where they don't fit level; give the height below."""
    if not wanted:
        return top
    places, texts = [x for x, _ in wanted], [text for _, text in wanted]
    widths = [Label(0, 0, text, SMALL, "left").box.right + 6 for text in texts]
    level = spread(places, widths, 3, room - 3)
    if level and all(abs(a - b) < w / 2 for a, b, w in zip(level, places, widths, strict=True)):
        for x, text in zip(level, texts, strict=True):
            sketch.label(Label(x, top + SMALL, text, SMALL, halo=True))
        return top + LINE
    upright = spread(places, [SMALL + 3] * len(texts), 3, room - 3) or places
    for x, text in zip(upright, texts, strict=True):
        sketch.label(Label(x + 0.36 * SMALL, top + 2, text, SMALL, "right", turned=True, halo=True))
    return top + max(widths)


def _describe(drawing: BeamDrawing) -> str:
    said = [f"{case.title}: " + ", ".join(load.label for load in case.loads) for case in drawing.cases]
    for diagram in drawing.diagrams:
        values = ", ".join(extreme.label for extreme in diagram.extremes)
        said.append(", ".join(text for text in (diagram.title, diagram.note, values) if text))
    return ". ".join(said) + "."

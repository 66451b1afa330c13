"""Figure of a beam: loading with supports, then V, M and w, on one axis along the beam."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from itertools import groupby

from calcgen.figures.beam_diagrams import Diagram, draw_diagram
from calcgen.figures.beam_governing import Governing, listed
from calcgen.figures.beam_lanes import Mark, draw_marks, narrowest
from calcgen.figures.beam_loads import LoadCase, draw_case, largest_intensity
from calcgen.figures.beam_supports import (
    DROP,
    FULL,
    LEAST,
    End,
    Support,
    draw_hinge,
    draw_rotation_spring,
    draw_support,
)
from calcgen.figures.labels import text_width
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
BEAM, STIFFEST = 2.6, 6.0  # weights of the beam's line, of its least stiff part and at most
DENSE = 8.0  # pixels between supports from which lines run down from the ends alone
STRETCHES = 20  # of an envelope's edge that the description tells


@dataclass(frozen=True)
class Stretch:
    """A dimension along the beam, its label ready: '6.00 m'."""

    start: float
    end: float
    label: str


@dataclass(frozen=True)
class Part:
    """A length of its own stiffness: what it is, 'haunch, 2 m', and its bending stiffness to compare."""

    start: float
    end: float
    label: str
    stiffness: float


@dataclass(frozen=True)
class BeamDrawing:
    """A beam from `start` to `end` with what acts on it and what follows; lengths in the unit shown.

    `caption` says below the title how to read the figure; `parts` are given where the stiffness changes.
    `intensity` is that of a distributed load drawn at full height, where it is not the largest of `cases`.
    """

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
    caption: str = ""
    parts: tuple[Part, ...] = ()
    intensity: float = 0.0


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

    y = _write(sketch, drawing.title, 0.0, room, bold=True)
    y = _write(sketch, drawing.caption, y, room)
    base = y + 14 if drawing.supports else y + 4
    largest = drawing.intensity or largest_intensity(drawing.cases)
    for number, case in enumerate(drawing.cases):
        base = draw_case(sketch, case, y - 6, across, room, largest)
        if number < len(drawing.cases) - 1:
            sketch.line([(across(drawing.start), base), (across(drawing.end), base)], Stroke("muted", 1.0))
        y = base + 16
    y = draw_member(sketch, drawing, base, across, room)
    strips = [strip for diagram in drawing.diagrams for strip in diagram.strips]
    governing = Governing.of(strips, across)
    for diagram in drawing.diagrams:
        y = draw_diagram(sketch, diagram, y + 18, across, room)
        y = governing.draw(sketch, diagram.strips, y + 4, across) if diagram.strips else y
    if drawing.diagrams:
        ends = (drawing.start, drawing.end)
        places = (*ends, *(s.x for s in drawing.supports))
        marks = {across(x) for x in (places if narrowest(places, across) >= DENSE else ends)}
        lines = tuple(((x, base), (x, y + 4)) for x in sorted(marks))
        sketch.items.insert(0, Shape(lines, closed=False, stroke=Stroke("muted", 0.7, DOT)))
    y += 20
    for text in (*governing.foot(), drawing.note):
        y = _write(sketch, text, y, room)
    picture = sketch.picture(
        f"{drawing.ident}-{width}", drawing.title, drawing.description or _describe(drawing), width=room
    )
    return picture if governing.whole else replace(picture, listed=tuple(listed(s) for s in strips))


def _write(sketch: Sketch, text: str, y: float, room: float, *, bold: bool = False) -> float:
    """Write a text in lines from the height `y` down; give the height of what comes next."""
    for line in wrap(text, SMALL, room - 6):
        sketch.label(Label(3, y, line, SMALL, "left", "ink" if bold else "muted", bold=bold))
        y += LINE
    return y


def draw_member(
    sketch: Sketch, drawing: BeamDrawing, base: float, across: Callable[[float], float], room: float
) -> float:
    """Draw the beam itself, its supports and the dimensions under them; give the height below."""
    apart = narrowest((s.x for s in drawing.supports), across)
    size = min(max(apart / FULL, LEAST), 1.0)
    for support in drawing.supports:
        end: End = "inner"
        if support.x in (drawing.start, drawing.end):
            end = "left" if support.x == drawing.start else "right"
        draw_support(sketch, support.kind, (across(support.x), base), end, size)
    least = min((part.stiffness for part in drawing.parts), default=1.0)
    for part in drawing.parts or (Part(drawing.start, drawing.end, "", least),):
        weight = min(BEAM * (part.stiffness / least) ** (1 / 3), STIFFEST)
        sketch.line([(across(part.start), base), (across(part.end), base)], Stroke("ink", weight))
    for support in drawing.supports:
        if support.turning:
            draw_rotation_spring(sketch, (across(support.x), base), size)
    for x in drawing.hinges:
        draw_hinge(sketch, (across(x), base), size)
    marks = [
        Mark(across(s.x), tuple(s.label.split("\n")), spare=s.label.isdigit())
        for s in drawing.supports
        if s.label
    ]
    y = draw_marks(sketch, marks, base + DROP + 2, room)
    y = _draw_dimensions(sketch, drawing.stretches, y, across, room)
    return _draw_dimensions(sketch, drawing.parts, y, across, room)


def _draw_dimensions(
    sketch: Sketch,
    stretches: Sequence[Stretch | Part],
    top: float,
    across: Callable[[float], float],
    room: float,
) -> float:
    """Draw a row of dimensions below `top`, equal ones as one where each has no room for its label."""
    if not stretches:
        return top
    level = top + 6
    wanted = [text_width(s.label, SMALL) + 6 for s in stretches]
    if any(w > across(s.end) - across(s.start) for s, w in zip(stretches, wanted, strict=True)):
        stretches = _alike(stretches)
    ticks = {across(x) for s in stretches for x in (s.start, s.end)}
    sketch.lines((((x, level - 4), (x, level + 4)) for x in sorted(ticks)), HAIR)
    for s in stretches:
        left, right = across(s.start), across(s.end)
        sketch.line([(left, level), (right, level)], THIN)
        if right - left > 12:
            sketch.heads([((right, level), (left, level)), ((left, level), (right, level))], "muted", 4.5)
    middles = [Mark((across(s.start) + across(s.end)) / 2, (s.label,)) for s in stretches]
    return draw_marks(sketch, middles, level + 4, room)


def _alike(stretches: Sequence[Stretch | Part]) -> list[Stretch]:
    """Draw together neighbours with one label: '12 × 5 m'."""
    found: list[Stretch] = []
    for label, run in groupby(stretches, key=lambda s: s.label):
        row = list(run)
        text = f"{len(row)} × {label}" if len(row) > 1 else label
        found.append(Stretch(row[0].start, row[-1].end, text))
    return found


def _describe(drawing: BeamDrawing) -> str:
    said = [drawing.caption.rstrip(".")] if drawing.caption else []
    said += [f"{case.title}: " + ", ".join(load.label for load in case.loads) for case in drawing.cases]
    for diagram in drawing.diagrams:
        values = ", ".join(extreme.label for extreme in diagram.extremes)
        said.append(", ".join(text for text in (diagram.title, diagram.note, values) if text))
        said += [listed(strip, STRETCHES) for strip in diagram.strips]
    return ". ".join(said) + "."

"""Figure of shear over the depth: the section with its joints, then shear stress and shear flow."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

from calcgen.figures.labels import Obstacles, Point
from calcgen.figures.legend import Entry, draw_legend, entries_of
from calcgen.figures.outline import Bar, Part
from calcgen.figures.picture import LINE, SMALL, THIN, WIDTHS, Label, Picture, Sketch, Stroke, Width, wrap
from calcgen.figures.profiles import draw_signed, values_of, write_beside
from calcgen.figures.stress_drawing import Couple, Level, Mark, StressPanel
from calcgen.figures.stress_section import (
    AxisLine,
    DepthSection,
    PlacedSection,
    axis_ends,
    draw_axis_lines,
    draw_placed,
    draw_words,
    place_section,
    untold,
    write,
)
from calcgen.figures.svg import render

Span = tuple[float, float]

BESIDE_JOINTS = 118.0  # pixels for the labels of joints between the section and the profile
FACE_NOTE = "V as it acts on the cut face of the part towards the end: positive upwards."


@dataclass(frozen=True)
class ShearPanel:
    """Shear stress or shear flow over the depth, about its zero line; positive the way that V acts.

    `profile` is (height, value) from the bottom to the top; a height given twice is a jump, where the breadth
    changes; curved stretches come as enough points. The mark of the largest amount is set bold.
    """

    profile: tuple[Point, ...]
    marks: tuple[Mark, ...]
    title: str = "shear stress τ"


@dataclass(frozen=True)
class Joint:
    """Where parts meet: a polyline in section coordinates, and the flow across it: 'cap: 123 N/mm'.

    Where the flow of a part is shared by several joints, one of them has the label and the others have none.
    """

    points: tuple[Point, ...]
    label: str


@dataclass(frozen=True, eq=False)
class ShearDrawing:
    """Shear of one direction over the depth, heights in section coordinates, y up.

    `force` is V: positive acts upwards on the face of the part towards the end. For a
    horizontal force the parts come turned, so that it acts along the upright of the figure, and `edges` names
    what is then at the top and at the bottom. `levels` are further axes, such as 'neutral axis'.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centroid: Point
    panels: tuple[ShearPanel, ...]
    force: Couple | None = None
    joints: tuple[Joint, ...] = ()
    joints_label: str = "joint and the flow across it"
    bars: tuple[Bar, ...] = ()
    bars_label: str = ""
    levels: tuple[Level, ...] = ()
    edges: tuple[str, str] = ("top", "bottom")
    note: str = ""
    description: str = ""


def draw_shear(drawing: ShearDrawing, width: Width) -> str:
    """SVG of the shear for a `wide` or a `narrow` place."""
    return render(compose_shear(drawing, width))


def compose_shear(drawing: ShearDrawing, width: Width) -> Picture:
    """Compose the section and its profiles side by side, in rows where the place is narrow."""
    sketch = Sketch()
    for number, (section, panels) in enumerate(_rows(drawing, width)):
        top = sketch.box().bottom + 24 if number else 0.0
        _draw_row(sketch, drawing, section, panels, top, WIDTHS[width], first=number == 0)
    legend = entries_of(drawing.parts, (), drawing.bars_label)
    legend += [Entry(drawing.joints_label, "joint")] if drawing.joints else []
    if legend:
        draw_legend(sketch, legend, 6, sketch.box().bottom + 12, WIDTHS[width] - 6)
    y = sketch.box().bottom + 16
    notes = untold(sketch, [level.label for level in drawing.levels])
    for note in filter(None, [*notes, drawing.note, FACE_NOTE if drawing.force else ""]):
        for line in wrap(note, SMALL, WIDTHS[width] - 12):
            sketch.label(Label(6, y, line, SMALL, "left", colour="muted"))
            y += LINE
    description = drawing.description or _describe(drawing)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description, width=WIDTHS[width])


def _rows(drawing: ShearDrawing, width: Width) -> list[tuple[Span, tuple[tuple[ShearPanel, Span], ...]]]:
    first, *further = drawing.panels
    right = 44.0 if drawing.force else 10.0
    gap = BESIDE_JOINTS if drawing.joints else 34.0
    if width == "narrow":
        section = (14.0, 88.0 if drawing.joints else 110.0)
        spans: list[tuple[Span, tuple[tuple[ShearPanel, Span], ...]]]
        spans = [(section, ((first, (section[1] + gap, WIDTHS[width] - right - 52.0)),))]
        spans += [(section, ((panel, (section[1] + 34.0, WIDTHS[width] - 64.0)),)) for panel in further]
        return spans
    section = (24.0, 164.0)
    start, end = section[1] + gap, WIDTHS[width] - right - 50.0
    pitch = (end - start + 60.0) / len(drawing.panels)
    row = tuple(
        (panel, (start + n * pitch, start + (n + 1) * pitch - 60.0)) for n, panel in enumerate(drawing.panels)
    )
    return [(section, row)]


def _draw_row(
    sketch: Sketch,
    drawing: ShearDrawing,
    room: Span,
    panels: Sequence[tuple[ShearPanel, Span]],
    top: float,
    width: float,
    *,
    first: bool,
) -> None:
    section = DepthSection(drawing.parts, drawing.centroid, drawing.bars, edges=drawing.edges)
    placed = place_section(section, room, 190, top + 28)
    obstacles = Obstacles(3.0, width - 3.0)
    draw_placed(sketch, section, placed, obstacles)
    draw_words(sketch, section, drawing.title, placed, top, obstacles)
    for panel, span in panels:
        write(sketch, Label(sum(span) / 2, top, panel.title), obstacles, -1)
    axes = [AxisLine(level.y, (level.label,) if first else (), dashed=True) for level in drawing.levels]
    scales = [values_of(StressPanel(panel.profile), span) for panel, span in panels]
    end = scales[0].zero  # beyond it stands the value that the shear has there
    for axis in axes:
        obstacles.add_line(axis_ends(placed, axis, end))
    for (panel, _), values in zip(panels, scales, strict=True):
        draw_signed(sketch, panel.profile, placed.y, values, obstacles)
    if first:
        _draw_joints(sketch, drawing, placed, panels[0][1][0], obstacles)
        _draw_force(sketch, drawing, placed, width, obstacles)
    ends = (placed.box.top - 12, placed.box.bottom + 12)
    for (panel, span), values in zip(panels, scales, strict=True):
        largest = max((abs(mark.value) for mark in panel.marks), default=0.0)
        for mark in panel.marks:
            tip = values.at(mark.value), placed.y(mark.y)
            label = Label(tip[0] + 6, tip[1] + 4, mark.label, SMALL, "left", bold=abs(mark.value) == largest)
            if mark.value < 0:
                label = replace(label, x=tip[0] - 6, anchor="right")
            way = 1 if tip[1] > (placed.box.top + placed.box.bottom) / 2 else -1
            write_beside(sketch, [label], tip, way, ends, (span[0] - 20, span[1] + 56), obstacles)
    draw_axis_lines(sketch, placed, axes, end, obstacles)


def _draw_joints(
    sketch: Sketch, drawing: ShearDrawing, placed: PlacedSection, right: float, obstacles: Obstacles
) -> None:
    """Draw each joint as a heavy line, and its label with a leader beside the section."""
    box = placed.box
    for joint in drawing.joints:
        points = [placed.scale.at(*point) for point in joint.points]
        sketch.line(points, Stroke("ink", 3.0))
        if not joint.label:
            continue
        tip = max(points)
        foot = (box.right + 12.0, tip[1])
        sketch.line([tip, foot], THIN)
        obstacles.add_line([tip, foot])
        label = Label(foot[0] + 3, tip[1] + 3.5, joint.label, SMALL, "left")
        slot = (box.right + 4, right - 4)
        ends = (box.top - 4, box.bottom + 4)
        write_beside(sketch, [label], foot, 1, ends, slot, obstacles)


def _draw_force(
    sketch: Sketch, drawing: ShearDrawing, placed: PlacedSection, width: float, obstacles: Obstacles
) -> None:
    """Draw V as it acts on the face seen."""
    if drawing.force is None:
        return
    middle, x = (placed.box.top + placed.box.bottom) / 2, width - 24.0
    ends = ((x, middle - 32), (x, middle + 32))
    if drawing.force.value:
        sketch.arrows([ends[::-1] if drawing.force.value > 0 else ends], Stroke("ink", 1.8), 9.0)
        obstacles.add_line(ends)
    write(sketch, Label(x, middle - 38, drawing.force.label, SMALL), obstacles, -1)


def _describe(drawing: ShearDrawing) -> str:
    said = [f"{panel.title}: " + ", ".join(mark.label for mark in panel.marks) for panel in drawing.panels]
    said += [joint.label for joint in drawing.joints]
    said += [level.label for level in drawing.levels]
    said += [drawing.force.label] if drawing.force else []
    return "; ".join(said) + "."

"""Figure of normal stress over the depth: section, strain and stress on one vertical scale."""

from dataclasses import dataclass

from calcgen.figures.labels import Box, Obstacles
from calcgen.figures.legend import Entry, draw_legend, entries_of
from calcgen.figures.picture import (
    LINE,
    SMALL,
    WIDTHS,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
    wrap,
)
from calcgen.figures.profiles import (
    colour_of,
    draw_signed,
    draw_strain_marks,
    draw_tractions,
    draw_values,
    shares_scale,
    values_of,
    word_of,
)
from calcgen.figures.stress_drawing import StressDrawing, StressPanel
from calcgen.figures.stress_section import (
    LEAST_DEPTH,
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


def draw_stress(drawing: StressDrawing, width: Width) -> str:
    """SVG of the stress for a `wide` or a `narrow` place."""
    return render(compose_stress(drawing, width))


FACE_NOTE = "Cut face of the part towards the start: tension leaves it, compression enters it."
APART = 36.0  # pixels between panels side by side
BARS_NOTE = "The arrows of the bars have a scale of their own."
PANELS_NOTE = "Each panel of stress has a scale of its own."


@dataclass(frozen=True)
class _Row:
    """Where one row of panels stands across the figure, from left to right in pixels."""

    section: Span
    strain: Span | None
    stress: tuple[tuple[StressPanel, Span], ...]
    height: float
    resultants: bool = True


def compose_stress(drawing: StressDrawing, width: Width) -> Picture:
    """Compose the panels side by side, or in rows that repeat the section where the place is narrow."""
    sketch = Sketch()
    kept = set(drawing.dimensions)
    for row in _rows(drawing, width):
        top = sketch.box().bottom + 24 if sketch.items else 0.0
        kept &= set(_draw_row(sketch, drawing, row, top, WIDTHS[width]).dimensions)
    compared = [panel.compared for panel in drawing.panels if panel.compared]
    legend = entries_of(drawing.parts, drawing.zones, drawing.bars_label)
    legend += [Entry(other.label, "dashes") for other in compared]
    if legend:
        draw_legend(sketch, legend, 6, sketch.box().bottom + 12, WIDTHS[width] - 6)
    notes = untold(sketch, [drawing.neutral_axis_label, *(level.label for level in drawing.levels)])
    notes += [d.label for d in drawing.dimensions if d not in kept]
    notes += [drawing.note, *_scale_notes(drawing)]
    y = sketch.box().bottom + 16
    for note in filter(None, notes):
        for line in wrap(note, SMALL, WIDTHS[width] - 12):
            sketch.label(Label(6, y, line, SMALL, "left", colour="muted"))
            y += LINE
    description = drawing.description or _describe(drawing)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description, width=WIDTHS[width])


def _scale_notes(drawing: StressDrawing) -> list[str]:
    stressed = any(v for panel in drawing.panels for _, v in panel.profile)
    stressed |= any(bar.value for panel in drawing.panels for bar in panel.bars)
    return [
        FACE_NOTE if stressed else "",
        "" if all(map(shares_scale, drawing.panels)) else BARS_NOTE,
        PANELS_NOTE if len(drawing.panels) > 1 else "",
    ]


def _rows(drawing: StressDrawing, width: Width) -> tuple[_Row, ...]:
    names = [force.label for force in drawing.forces]
    if drawing.moment is not None:
        names.append(drawing.moment.label)
    longest = max((_breadth(Label(0, 0, name, SMALL)) for name in names), default=0.0)
    full = WIDTHS[width] - 6.0
    end = WIDTHS[width] - min(max(longest + 16, 92.0), 112.0) if names else full
    first, *further = drawing.panels
    if width == "narrow":
        section = (8.0, 112.0) if drawing.dimensions else (14.0, 92.0)
        start = section[1] + 12.0
        rows = [_Row(section, None, ((first, (start, end)),), 170)]
        if drawing.strain:
            rows.append(_Row(section, (150, 290), (), 130))
        rows += [_Row(section, None, ((panel, (start, full)),), 150, resultants=False) for panel in further]
        return tuple(rows)
    beside = further[:1]
    strain: Span | None = None
    if drawing.strain:
        section, start = ((8.0, 118.0), 232.0) if beside else ((14.0, 124.0), 262.0)
        strain = (start - 100.0, start - 24.0) if beside else (start - 110.0, start - 30.0)
    else:
        section, start = ((14.0, 144.0), 176.0) if beside else ((24.0, 174.0), 200.0)
    if drawing.dimensions and strain and not beside:
        section, strain = (8.0, 146.0), (170.0, 242.0)
    panels = _side_by_side([first, *beside], start, end)
    rows = [_Row(section, strain, panels, 190 if strain else 200)]
    for n in range(1, len(further), 2):
        rows.append(
            _Row(section, None, _side_by_side(further[n : n + 2], start, full), 170, resultants=False)
        )
    return tuple(rows)


def _side_by_side(
    panels: list[StressPanel], start: float, end: float
) -> tuple[tuple[StressPanel, Span], ...]:
    """Share the room out among panels, with a gap between."""
    pitch = (end - start + APART) / len(panels)
    return tuple(
        (panel, (start + n * pitch, start + (n + 1) * pitch - APART)) for n, panel in enumerate(panels)
    )


def _draw_row(sketch: Sketch, drawing: StressDrawing, row: _Row, top: float, width: float) -> PlacedSection:
    """Draw the panels of one row with their titles; the neutral axis runs through all of them."""
    section = DepthSection(
        drawing.parts,
        drawing.centroid,
        drawing.bars,
        drawing.zones,
        drawing.dimensions,
        drawing.edges,
        drawing.centre,
    )
    head = top + (44 if row.stress else 30)  # the values of the top fibre stand under the titles
    head += 20 if drawing.centre == "top" else 0
    most = max((len(panel.marks) for panel, _ in row.stress), default=0)
    least = max(LEAST_DEPTH, min(most * LINE, row.height))  # so that many values keep near to their places
    placed = place_section(section, row.section, row.height, head, least)
    obstacles = Obstacles(3.0, width - 3.0)
    draw_placed(sketch, section, placed, obstacles)
    draw_words(sketch, section, drawing.title, placed, top, obstacles)
    titles = [(row.strain, drawing.strain_title)] if row.strain else []
    for span, title in [*titles, *((span, panel.title) for panel, span in row.stress)]:
        write(sketch, Label(sum(span) / 2, top, title), obstacles, -1)
    axes = _axes(drawing)
    end = row.stress[-1][1][1] if row.stress else row.strain[1] if row.strain else placed.box.right + 12
    for axis in axes:
        obstacles.add_line(axis_ends(placed, axis, end))
    if row.strain:
        values = values_of(StressPanel(drawing.strain), row.strain)
        middle = (placed.y(drawing.strain[0][0]) + placed.y(drawing.strain[-1][0])) / 2
        draw_signed(sketch, drawing.strain, placed.y, values, obstacles)
        draw_strain_marks(sketch, drawing.strain_marks, placed.y, values, middle, obstacles)
    scales = [values_of(panel, span) for panel, span in row.stress]
    for (panel, _), values in zip(row.stress, scales, strict=True):
        draw_tractions(sketch, panel, placed.y, values, obstacles)
    if row.stress and row.resultants:
        _draw_resultants(sketch, drawing, placed, width, obstacles)
    alone = len(row.stress) == 1
    for (panel, span), values in zip(row.stress, scales, strict=True):
        slot = (obstacles.left, obstacles.right) if alone else (span[0] - 12, span[1] + 12)
        draw_values(sketch, panel, placed.y, values, slot, obstacles)
    if row.stress and row.resultants:
        draw_axis_lines(sketch, placed, axes, end, obstacles)
    else:  # a further row only repeats the axes
        draw_axis_lines(sketch, placed, [AxisLine(a.height, (), a.dashed) for a in axes], end, obstacles)
    return placed


def _axes(drawing: StressDrawing) -> list[AxisLine]:
    axes = [AxisLine(level.y, (level.label,), dashed=True) for level in drawing.levels]
    if drawing.neutral_axis is not None:
        names = (drawing.neutral_axis_label, drawing.neutral_axis_name)
        axes.append(AxisLine(drawing.neutral_axis, names, drawing.plastic))
    return axes


def _draw_resultants(
    sketch: Sketch, drawing: StressDrawing, placed: PlacedSection, width: float, obstacles: Obstacles
) -> None:
    """Draw the forces as straight arrows and the moment as a curved one, turning as the tractions do."""
    right = width - 8.0
    middle = (placed.box.top + placed.box.bottom) / 2
    labels = []
    for force in drawing.forces:
        y = placed.y(force.y)
        if force.value:
            ends = ((right - 80, y), (right - 30, y))  # clear of the bow of the moment
            colour = colour_of(force.value)
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
        write(sketch, label, obstacles, way)


def _breadth(label: Label) -> float:
    return label.box.right - label.box.left


def _describe(drawing: StressDrawing) -> str:
    said = []
    for panel in drawing.panels:
        marks = [mark for mark in (*panel.marks, *panel.bars) if mark.label]
        values = [f"{m.label} {word_of(m.value)}" if m.value else m.label for m in marks]
        said.append(f"{panel.title}: " + ", ".join(values))
        said += [panel.compared.label] if panel.compared else []
    said += [drawing.neutral_axis_label, *(level.label for level in drawing.levels)]
    said += [d.label for d in drawing.dimensions]
    said += [zone.label for zone in drawing.zones if zone.label]
    if drawing.moment:
        said.append(drawing.moment.label)
    said += [force.label for force in drawing.forces]
    return "; ".join(dict.fromkeys(said)) + "."

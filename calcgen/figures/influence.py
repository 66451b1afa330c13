"""Influence lines of a beam: one diagram above the other, and the beam beneath them, on one axis along it."""

from calcgen.figures.beam import MARGIN, BeamDrawing, draw_member
from calcgen.figures.beam_diagrams import draw_diagram
from calcgen.figures.picture import (
    DOT,
    LINE,
    SMALL,
    WIDTHS,
    Label,
    Picture,
    Shape,
    Sketch,
    Stroke,
    Width,
    wrap,
)


def compose_influence(beam: BeamDrawing, width: Width) -> Picture:
    """Compose the lines from the top down and the beam below; dotted lines at supports run through all."""
    sketch, room = Sketch(), WIDTHS[width]
    length = max(beam.end - beam.start, 1e-300)

    def across(x: float) -> float:
        return MARGIN + (x - beam.start) / length * (room - 2 * MARGIN)

    y = 0.0
    for text in wrap(beam.title, SMALL, room - 6):
        sketch.label(Label(3, y, text, SMALL, "left", bold=True))
        y += LINE
    top = y
    for diagram in beam.diagrams:
        y = draw_diagram(sketch, diagram, y + 14, across, room)
    base = y + 24
    places = {beam.start, beam.end, *(support.x for support in beam.supports), *beam.hinges}
    lines = tuple(((across(x), top), (across(x), base)) for x in sorted(places))
    sketch.items.insert(0, Shape(lines, closed=False, stroke=Stroke("muted", 0.7, DOT)))
    y = draw_member(sketch, beam, base, across, room) + 18
    for text in wrap(beam.note, SMALL, room - 6):
        sketch.label(Label(3, y, text, SMALL, "left", colour="muted"))
        y += LINE
    return sketch.picture(f"{beam.ident}-{width}", beam.title, beam.description, width=room)

"""A beam's figure in parts that each fit a printed sheet: loads apart from diagrams where too tall."""

from collections.abc import Iterator
from dataclasses import replace

from calcgen.figures.beam import BeamDrawing, compose_beam
from calcgen.figures.beam_loads import largest_intensity
from calcgen.figures.picture import Picture

TALLEST = 900.0  # pixels: scaled to the sheet, small words keep a height of 7 points or so


def beam_sheets(drawing: BeamDrawing) -> Iterator[tuple[BeamDrawing, Picture]]:
    """Yield the parts of a drawing, each with its picture for a wide place.

    Diagrams stay together, so that they share one axis; many load cases are halved, on one scale. A single
    case and diagrams that are too tall all the same are yielded as they are.
    """
    wide = compose_beam(drawing, "wide")
    if wide.frame.bottom - wide.frame.top <= TALLEST:
        yield drawing, wide
    elif drawing.cases and drawing.diagrams:
        loads = replace(
            drawing,
            ident=f"{drawing.ident}-loads",
            title=f"{drawing.title}: loads",
            diagrams=(),
            note="",
            intensity=largest_intensity(drawing.cases),
        )
        yield from beam_sheets(loads)
        yield from beam_sheets(replace(drawing, cases=()))
    elif len(drawing.cases) > 1:
        half = len(drawing.cases) // 2
        yield from beam_sheets(replace(drawing, ident=f"{drawing.ident}-1", cases=drawing.cases[:half]))
        yield from beam_sheets(replace(drawing, ident=f"{drawing.ident}-2", cases=drawing.cases[half:]))
    else:
        yield drawing, wide

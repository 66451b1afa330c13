"""Influence lines of an evaluated beam -> drawings in the units shown."""

from __future__ import annotations

import numpy as np

from calcgen.evaluation.results.beam import BeamResult, InfluenceResult
from calcgen.figures.adapt_beam_supports import per_metre, stretches_of, supports_of
from calcgen.figures.beam import BeamDrawing
from calcgen.figures.beam_diagrams import Diagram, Extreme
from calcgen.mechanics.beam import piecewise
from calcgen.quantities.display import Style
from calcgen.quantities.symbols import plain

TOGETHER = 4  # lines in a figure; with more it would be higher than a printed sheet
_POINTS = 40  # of a piece, which may be the whole beam; points on straight stretches are thinned when drawn
_NOTE = (
    "Positive ordinates are drawn above the line, plain; negative ones below it, hatched. "
    "A thick stroke marks the place, or the support, of the result."
)


def influence_drawings(beam: BeamResult, ident: str, style: Style) -> tuple[BeamDrawing, ...]:
    """Return the influence lines of a beam, a few in each drawing."""
    drawings = []
    for number, first in enumerate(range(0, len(beam.influences), TOGETHER), start=1):
        lines = beam.influences[first : first + TOGETHER]
        named = ", ".join(plain(line.name) for line in lines)
        title = f"beam {plain(beam.name)}, influence line{'s' if len(lines) > 1 else ''} {named}"
        sideways = all(line.load == "lateral" for line in lines)
        drawings.append(
            BeamDrawing(
                ident=f"{ident}-influence-{number}",
                title=title,
                start=0.0,
                end=beam.model.length * per_metre(style),
                supports=supports_of(beam, "_lat" if sideways else "", style),
                diagrams=tuple(_diagram(line, style) for line in lines),
                stretches=stretches_of(beam, style),
                hinges=tuple(x * per_metre(style) for x in beam.model.hinges),
                note=_NOTE,
                description=" ".join(_described(line) for line in lines) + f" {_NOTE}",
            )
        )
    return tuple(drawings)


def _diagram(line: InfluenceResult, style: Style) -> Diagram:
    load = "a unit load down" if line.load == "vertical" else "a unit load to the right"
    note = [line.meaning, f"{load}{f', in {line.unit}' if line.unit else ''}"]
    return Diagram(
        title=f"{plain(line.name)}: {line.of}",
        curve=_curve(line, style),
        extremes=tuple(_extremes(line, style)),
        note="; ".join(note),
        signed=True,
        mark=line.place * per_metre(style),
    )


def _curve(line: InfluenceResult, style: Style) -> tuple[tuple[float, float], ...]:
    nodes, pieces = line.line.nodes, line.line.pieces
    t = np.linspace(0.0, 1.0, _POINTS + 1)
    x = nodes[:-1, None] + np.diff(nodes)[:, None] * t
    values = piecewise.values(pieces[:, None, :], t)
    return tuple(zip((x * per_metre(style)).ravel().tolist(), values.ravel().tolist(), strict=True))


def _extremes(line: InfluenceResult, style: Style) -> list[Extreme]:
    by_name = {result.name: result for result in (*line.results, *line.further)}
    found = []
    for which in ("max", "min"):
        value, place = by_name[f"{line.name}_{which}"], by_name[f"x_{line.name}_{which}"]
        if value.value.si != 0.0:
            label = f"{value.shown.text}, {value.place}"
            found.append(Extreme(place.value.si * per_metre(style), value.value.si, label))
    return found


def _described(line: InfluenceResult) -> str:
    values = [f"{r.meaning}, {r.shown.text}{f', {r.place}' if r.place else ''}" for r in line.results[:2]]
    return f"{plain(line.name)}: {line.of}, {line.meaning}: {'; '.join(values)}."

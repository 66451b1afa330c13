"""Dimensions of a section, stacked outside it on each side, the short ones nearest."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from math import inf
from typing import Literal

from calcgen.figures.labels import Box, Obstacles, Point
from calcgen.figures.outline import Scale
from calcgen.figures.picture import HAIR, SMALL, THIN, Label, Sketch

Side = Literal["left", "right", "top", "bottom", "across"]

HEAD = 4.5
SHORT = 16.0  # below this length in pixels the heads stand outside


@dataclass(frozen=True)
class Dimension:
    """A distance between two points of the section, level or upright.

    `side` is where it stands: outside the outline, or `across` the material in place.
    """

    label: str
    start: Point
    end: Point
    side: Side


@dataclass(frozen=True)
class _Span:
    """A dimension in pixels along its side: from `low` to `high`; `taken` is what its label needs as well."""

    label: str
    low: float
    high: float
    taken: tuple[float, float]
    depth: float
    feet: tuple[float, float]


def draw_dimensions(
    sketch: Sketch, scale: Scale, outline: Box, dimensions: Iterable[Dimension], offset: float
) -> None:
    """Draw the dimensions; the first row of each side stands `offset` pixels from the outline."""
    given = list(dimensions)
    for side in ("left", "right", "top", "bottom"):
        spans = [_span(scale, d) for d in given if d.side == side]
        line = offset
        for row in _rows(spans):
            for span in row:
                _draw_outside(sketch, outline, side, span, line)
            line += max(span.depth for span in row)
    for dimension in given:
        if dimension.side == "across":
            _draw_across(sketch, scale, dimension)


def _span(scale: Scale, dimension: Dimension) -> _Span:
    start, end = scale.at(*dimension.start), scale.at(*dimension.end)
    upright = dimension.side in ("left", "right")
    along, foot = (1, 0) if upright else (0, 1)
    (low, first), (high, second) = sorted([(start[along], start[foot]), (end[along], end[foot])])
    box = Label(0, 0, dimension.label, SMALL).box
    width = box.right - box.left
    level = upright and high - low < max(width + 6, SHORT)  # a label along the line would be longer than it
    need = SMALL if level else width
    middle, half = (low + high) / 2, max(need / 2 + 3, (high - low) / 2, 0.0)
    if high - low < SHORT:
        half = max(half, (high - low) / 2 + 10)
    depth = width + 14 if level else 2 * SMALL
    return _Span(dimension.label, low, high, (middle - half, middle + half), depth, (first, second))


def _rows(spans: Sequence[_Span]) -> list[list[_Span]]:
    """Put spans that don't meet into one row, shorter ones first."""
    rows: list[list[_Span]] = []
    for span in sorted(spans, key=lambda s: (round(s.high - s.low, 3), s.low, s.label)):
        for row in rows:
            if all(span.taken[0] >= s.taken[1] - 0.5 or span.taken[1] <= s.taken[0] + 0.5 for s in row):
                row.append(span)
                break
        else:
            rows.append([span])
    return rows


def _draw_outside(sketch: Sketch, outline: Box, side: Side, span: _Span, line: float) -> None:
    away = -1.0 if side in ("left", "top") else 1.0
    at = getattr(outline, side) + away * line
    upright = side in ("left", "right")

    def point(along: float, across: float) -> Point:
        return (across, along) if upright else (along, across)

    feet = zip((span.low, span.high), span.feet, strict=True)
    sketch.lines(([point(a, foot + away * 3), point(a, at + away * 3)] for a, foot in feet), HAIR)
    _draw_measure(sketch, point(span.low, at), point(span.high, at))
    middle = (span.low + span.high) / 2
    if not upright:
        drop = -4.0 if side == "top" else 0.77 * SMALL + 4
        sketch.label(Label(middle, at + drop, span.label, SMALL, halo=True))
    elif span.depth > 2 * SMALL:
        anchor: Literal["left", "right"] = "right" if side == "left" else "left"
        sketch.label(Label(at + away * 5, middle + 0.36 * SMALL, span.label, SMALL, anchor, halo=True))
    else:
        shift = -4.0 if side == "left" else 0.77 * SMALL + 4
        sketch.label(Label(at + shift, middle, span.label, SMALL, turned=True, halo=True))


def _draw_across(sketch: Sketch, scale: Scale, dimension: Dimension) -> None:
    start, end = sorted([scale.at(*dimension.start), scale.at(*dimension.end)])
    _draw_measure(sketch, start, end, outside=True)
    if abs(end[0] - start[0]) >= abs(end[1] - start[1]):
        label = Label(end[0] + 16, end[1] + 0.36 * SMALL, dimension.label, SMALL, "left", halo=True)
        step, aside = (3.0, 0.0), (0.0, 13.0)
    else:
        label = Label(start[0], min(start[1], end[1]) - 16, dimension.label, SMALL, halo=True)
        width = label.box.right - label.box.left
        step, aside = (0.0, -3.0), (width / 2 + 8, 0.0)
    taken = _labels_and_axes(sketch)
    while True:
        # in line with the dimension, or beside the axis that lies in its line
        for side in (0, -1, 1):
            place = label.moved(side * aside[0], side * aside[1])
            if taken.free(place.box):
                sketch.label(place)
                return
        label = label.moved(*step)


def _labels_and_axes(sketch: Sketch) -> Obstacles:
    """Give what a label on the section keeps clear of: labels, and axes by their dashes."""
    taken = Obstacles(-inf, inf)
    for item in sketch.items:
        if isinstance(item, Label):
            taken.boxes.append(item.box)
        elif item.stroke and item.stroke.dash:
            for ring in item.rings:
                taken.add_line(ring)
    return taken


def _draw_measure(sketch: Sketch, start: Point, end: Point, *, outside: bool = False) -> None:
    """Draw a dimension line with its heads, which stand outside where there is little room."""
    (x_1, y_1), (x_2, y_2) = start, end
    length = abs(x_2 - x_1) + abs(y_2 - y_1)  # level or upright
    if length >= SHORT and not outside:
        sketch.line([start, end], THIN)
        sketch.heads([(end, start), (start, end)], "muted", HEAD)
        return
    step = (0.0, 1.0) if abs(y_2 - y_1) > abs(x_2 - x_1) else (1.0, 0.0)
    before, after = (x_1 - 13 * step[0], y_1 - 13 * step[1]), (x_2 + 13 * step[0], y_2 + 13 * step[1])
    sketch.lines([(before, start), (end, after), (start, end)], THIN)
    sketch.heads([(before, start), (after, end)], "muted", HEAD)

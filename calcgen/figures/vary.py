"""A calc repeated over an input: a panel for each value shown, one above the other, along one axis."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import isfinite

from calcgen.figures.labels import Box, Point, text_width
from calcgen.figures.legend import Entry, draw_legend
from calcgen.figures.notes import draw_title
from calcgen.figures.picture import (
    CHAIN,
    DASH,
    HAIR,
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
from calcgen.figures.ticks import ticks

HEIGHT = 120.0  # pixels of a panel
APART = 32.0  # from one panel to the next
AROUND = 0.08  # of a panel, between what is drawn and its edge
BESIDE = 20.0  # right of the panels, for the last number of the axis
PRESENT, LIMIT = Stroke("ink", 1.0, DASH), Stroke("ink", 1.0, CHAIN)


@dataclass(frozen=True)
class Trial:
    """A run: its place on the axis and its value in each panel, None where it has none.

    `fulfils` tells a filled from an open dot where dots are drawn; `ringed` puts a ring around it.
    """

    x: float
    values: tuple[float | None, ...]
    fulfils: bool = True
    ringed: bool = False


@dataclass(frozen=True)
class Panel:
    """A value over the axis: its name with its unit; `limit` is where a line is drawn, if in sight."""

    title: str
    limit: float | None = None


@dataclass(frozen=True)
class VaryDrawing:
    """Values over an axis, in the units of the titles.

    `joined` draws curves, which are open where a value is missing; otherwise each run is a dot. `present` is
    the place of the value that the calc has, None where it is not on the axis, `present_label` says so;
    `limit_label` says what the panels' limits are.
    """

    ident: str
    title: str
    axis: str
    panels: tuple[Panel, ...]
    trials: tuple[Trial, ...]
    joined: bool = True
    present: float | None = None
    present_label: str = ""
    limit_label: str = "1.0"
    note: str = ""
    description: str = ""


@dataclass(frozen=True)
class _Range:
    """From values to pixels along one direction."""

    low: float
    high: float
    start: float
    end: float

    def at(self, value: float) -> float:
        """Give the pixel of a value."""
        return self.start + (self.end - self.start) * (value - self.low) / (self.high - self.low)

    def holds(self, value: float) -> bool:
        """Tell whether a value lies within the panel."""
        return self.low <= value <= self.high


def compose_vary(drawing: VaryDrawing, width: Width) -> Picture:
    """Compose the panels, the axis below the last of them, and the legend."""
    sketch = Sketch()
    heights = [_bounds([v for t in drawing.trials for v in [t.values[n]] if v is not None])
               for n in range(len(drawing.panels))]  # fmt: skip
    room = max(text_width(text, SMALL) for low, high in heights for _, text in ticks(low, high)) + 8
    right = WIDTHS[width] - 6 - room - BESIDE
    across = _Range(*_bounds([t.x for t in drawing.trials]), 0.0, right)
    limits = False
    for number, (panel, bounds) in enumerate(zip(drawing.panels, heights, strict=True)):
        top = number * (HEIGHT + APART)
        up = _Range(*bounds, top + HEIGHT, top)
        box = Box(0.0, top, right, top + HEIGHT)
        _draw_grid(sketch, across, up, box, panel.title, last=panel is drawing.panels[-1])
        if panel.limit is not None and up.holds(panel.limit):
            limits = True
            y = up.at(panel.limit)
            sketch.line([(0.0, y), (right, y)], LIMIT)
        if drawing.present is not None:
            x = across.at(drawing.present)
            sketch.line([(x, box.top), (x, box.bottom)], PRESENT)
        _draw_values(sketch, drawing, number, across, up)
    bottom = len(drawing.panels) * (HEIGHT + APART) - APART
    for text in wrap(drawing.axis, SMALL, right + room):
        sketch.label(Label(right, bottom + 28, text, SMALL, "right"))
        bottom += LINE
    draw_title(sketch, drawing.title, right / 2, 10.0, WIDTHS[width] - 6)
    _draw_legend(sketch, drawing, limits=limits, left=-room + 8, right=right)
    description = drawing.description or drawing.title
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description)


def _bounds(values: Sequence[float]) -> tuple[float, float]:
    """Give the range of an axis that holds values with a margin; of one value alone, half of it each way."""
    low, high = (min(values), max(values)) if values else (0.0, 1.0)
    size = max(abs(low), abs(high))
    if high - low <= 1e-9 * size or not isfinite(high - low):
        low, high = (low - 0.5 * size, high + 0.5 * size) if size else (-1.0, 1.0)
    margin = AROUND * (high - low)
    return low - margin, high + margin


def _draw_grid(sketch: Sketch, across: _Range, up: _Range, box: Box, title: str, *, last: bool) -> None:
    """Draw the panel with a hairline at each round value, and the numbers of the axes."""
    lines: list[list[Point]] = []
    free = float("-inf")
    for value, text in ticks(across.low, across.high):
        x = across.at(value)
        lines.append([(x, box.top), (x, box.bottom)])
        label = Label(x, box.bottom + 13, text, SMALL, colour="muted")
        if last and label.box.left > free:
            free = sketch.label(label).box.right + 6
    for value, text in ticks(up.low, up.high):
        y = up.at(value)
        lines.append([(box.left, y), (box.right, y)])
        sketch.label(Label(box.left - 5, y + 3.5, text, SMALL, "right", colour="muted"))
    sketch.lines(lines, HAIR)
    edges = [(box.left, box.top), (box.left, box.bottom), (box.right, box.bottom)]
    sketch.line(edges, Stroke("ink", 0.9))
    for number, text in enumerate(reversed(wrap(title, SMALL, box.right - box.left))):
        sketch.label(Label(box.left, box.top - 8 - number * LINE, text, SMALL, "left"))


def _draw_values(sketch: Sketch, drawing: VaryDrawing, number: int, across: _Range, up: _Range) -> None:
    if drawing.joined:
        for piece in _pieces(drawing.trials, number):
            points = [(across.at(x), up.at(value)) for x, value in piece]
            if len(points) > 1:
                sketch.line(points, Stroke("ink", 1.5))
            else:
                sketch.dot(points[0], 2.0, "ink")
        return
    for trial in drawing.trials:
        value = trial.values[number]
        if value is not None:
            at = across.at(trial.x), up.at(value)
            if trial.ringed:
                sketch.dot(at, 6.0, "paper", Stroke("ink", 1.0))
            if trial.fulfils:
                sketch.dot(at, 3.0, "ink")
            else:
                sketch.dot(at, 2.6, "paper", Stroke("ink", 1.2))


def _pieces(trials: Sequence[Trial], number: int) -> Iterator[list[Point]]:
    """Yield the stretches of a curve between the runs without a value."""
    piece: list[Point] = []
    for trial in trials:
        value = trial.values[number]
        if value is not None:
            piece.append((trial.x, value))
        elif piece:
            yield piece
            piece = []
    if piece:
        yield piece


def _draw_legend(sketch: Sketch, drawing: VaryDrawing, *, limits: bool, left: float, right: float) -> None:
    entries: list[Entry] = []
    if drawing.present is not None and drawing.present_label:
        entries.append(Entry(drawing.present_label, "dashes"))
    if limits:
        entries.append(Entry(drawing.limit_label, "chain"))
    if not drawing.joined:
        shown = {trial.fulfils for trial in drawing.trials if any(v is not None for v in trial.values)}
        entries += [Entry("satisfies every check", "bar")] if True in shown else []
        entries += [Entry("does not", "pressed bar")] if False in shown else []
    y = sketch.box().bottom + 8
    if entries:
        y = draw_legend(sketch, entries, left, y, right)
    for text in wrap(drawing.note, SMALL, right - left):
        y += LINE + 2
        sketch.label(Label(left, y, text, SMALL, "left"))

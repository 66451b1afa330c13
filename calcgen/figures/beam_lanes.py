"""Lanes of labels along a beam: above its loads and below its supports, thinned where there is no room."""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import inf

from calcgen.figures.labels import spread, text_width, two_lanes
from calcgen.figures.picture import LINE, SMALL, THIN, Anchor, Label, Sketch

GAP = 6.0  # pixels between labels side by side
UPRIGHT = SMALL + 3  # pixels across an upright label
NEAR = 40.0  # pixels that a label may stand aside of its load
STEPS = (1, 2, 5, 10, 20, 50, 100, 200, 500, 1000)


@dataclass(frozen=True)
class LoadLane:
    """Labels above loads: level where they fit side by side, else upright, in two lanes, or told together."""

    labels: tuple[tuple[str, float, float], ...]  # text, place of the load, place of the label
    upright: bool
    height: float
    second: float = 0.0  # how far the second lane stands above the first
    note: str = ""

    @staticmethod
    def of(texts: Sequence[str], wanted: Sequence[float], width: float) -> "LoadLane":
        """Find places for the labels of loads at `wanted` pixels, in the order of their places."""
        if not texts:
            return LoadLane((), upright=False, height=0.0)
        widths = [text_width(text, SMALL) for text in texts]
        placed = spread(wanted, [w + GAP for w in widths], 3, width - 3)
        if placed and all(abs(p - w) <= NEAR for p, w in zip(placed, wanted, strict=True)):
            return LoadLane(tuple(zip(texts, wanted, placed, strict=True)), upright=False, height=LINE + 6)
        longest = max(widths)
        placed = spread(wanted, [UPRIGHT] * len(texts), 3, width - 3)
        if placed:
            return LoadLane(tuple(zip(texts, wanted, placed, strict=True)), upright=True, height=longest + 12)
        placed = two_lanes(wanted, UPRIGHT, 3, width - 3)
        if placed:
            rows = tuple(zip(texts, wanted, placed, strict=True))
            return LoadLane(rows, upright=True, height=2 * longest + 20, second=longest + 8)
        return LoadLane((), upright=False, height=LINE, note=_told(texts))

    def draw(self, sketch: Sketch, foot: float) -> None:
        """Draw the labels above `foot`, each with a leader to its load where it stands aside."""
        for number, (text, load, place) in enumerate(self.labels):
            lift = 8.0 + (self.second if number % 2 else 0.0)
            if self.upright or abs(load - place) > 1:
                rise = [(place, foot - lift + 2)] if lift > 8 else []
                sketch.line([(load, foot - 1), (place, foot - 6), *rise], THIN)
            x = place + 0.36 * SMALL if self.upright else place
            anchor: Anchor = "left" if self.upright else "center"
            sketch.label(Label(x, foot - lift, text, SMALL, anchor, turned=self.upright, halo=True))
        if self.note:
            sketch.label(Label(3, foot - 5, self.note, SMALL, "left", halo=True))


def _told(texts: Sequence[str]) -> str:
    if len(set(texts)) == 1:
        return f"{len(texts)} loads of {texts[0]} each"
    return f"{len(texts)} loads, too close to label: see the lines of the beam"


@dataclass(frozen=True)
class Mark:
    """A label of one or more lines below the place `x`; one that tells only a number may be left out."""

    x: float
    lines: tuple[str, ...]
    spare: bool = False


def draw_marks(sketch: Sketch, marks: Iterable[Mark], top: float, room: float) -> float:
    """Write labels below `top`, level where they fit, else upright; give the height below.

    Numbers are thinned to every second, fifth, tenth... before labels are turned upright, and labels are
    thinned alike where even upright ones don't fit.
    """
    held = sorted((mark for mark in marks if mark.lines), key=lambda mark: mark.x)
    if not held:
        return top
    for step in STEPS:
        chosen = [m for i, m in enumerate(held) if not m.spare or i % step == 0 or i == len(held) - 1]
        widths = [max(text_width(line, SMALL) for line in m.lines) + GAP for m in chosen]
        level = spread([m.x for m in chosen], widths, 3, room - 3)
        near = level and all(abs(p - m.x) < w / 2 for p, m, w in zip(level, chosen, widths, strict=True))
        if level and near:
            return _draw_level(sketch, chosen, level, top)
    said = [m for m in held if not m.spare] or held
    for step in STEPS:
        chosen = said[::step]
        upright = spread([m.x for m in chosen], [UPRIGHT] * len(chosen), 3, room - 3)
        if upright:
            break
    texts = [", ".join(m.lines) for m in chosen]
    for text, m, x in zip(texts, chosen, upright or [], strict=False):
        if abs(x - m.x) > 3:
            sketch.line([(m.x, top - 3), (x, top + 1)], THIN)
        sketch.label(Label(x + 0.36 * SMALL, top + 2, text, SMALL, "right", turned=True, halo=True))
    return top + max(text_width(text, SMALL) for text in texts) + GAP


def _draw_level(sketch: Sketch, marks: Sequence[Mark], places: Sequence[float], top: float) -> float:
    for mark, x in zip(marks, places, strict=True):
        for number, line in enumerate(mark.lines):
            sketch.label(Label(x, top + SMALL + number * (LINE - 1), line, SMALL, halo=True))
    return top + LINE + (LINE - 1) * (max(len(mark.lines) for mark in marks) - 1)


def narrowest(places: Iterable[float], across: Callable[[float], float]) -> float:
    """Give the least distance in pixels between places that follow each other; infinite for one alone."""
    pixels = sorted({across(x) for x in places})
    return min((b - a for a, b in pairwise(pixels)), default=inf)

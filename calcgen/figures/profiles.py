"""Profiles over the depth: a zero line, a signed outline, and values that find clear places."""

from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import cache
from itertools import chain, filterfalse, islice, pairwise
from math import hypot

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point, around
from calcgen.figures.picture import DASH, FIRM, SMALL, TEXT, THIN, Anchor, Colour, Label, Sketch, Stroke
from calcgen.figures.stress_drawing import Mark, StressPanel, Word
from calcgen.figures.stress_section import write

CHOICES = 12  # clear places among which one is taken whose leader is clear as well
STEPS = 400  # of three pixels, in search of a clear place for a value
REACH = 100.0  # pixels from the zero line to the largest value, at most
ASIDE = tuple(range(-104, 81, 8))  # pixels away from the profile that a value may move
SIDEWAYS = (0.0, 6.0, -6.0, 12.0, -12.0, 18.0, -18.0)  # pixels to either side that a value over its tip may
NEAR = 9.0  # pixels; a value moved farther than this has a leader
ALIKE = 4.0  # ratio of bars' stress to the profile's up to which they share a scale

Down = Callable[[float], float]  # from a height to the pixel down


@dataclass(frozen=True)
class Values:
    """From values to pixels across, positive to the right of the zero line; bars may have another scale."""

    zero: float
    factor: float
    bar_factor: float = 0.0

    def at(self, value: float) -> float:
        """Give the pixel of a value of the profile."""
        return self.zero + self.factor * value

    def bar_at(self, value: float) -> float:
        """Give the pixel of a bar's stress."""
        return self.zero + self.bar_factor * value


def values_of(panel: StressPanel, span: tuple[float, float]) -> Values:
    """Give the scales that put a profile, its bars and the zero line in the middle of a panel."""
    given = [value for _, value in panel.profile]
    given += [value for _, value in panel.compared.profile] if panel.compared else []
    bars = [bar.value for bar in panel.bars]
    largest = max(map(abs, given), default=0.0)
    stretch = 1.0 if shares_scale(panel) else largest / max(map(abs, bars))
    reached = [0.0, *given, *(value * stretch for value in bars)]
    low, high = min(reached), max(reached)
    middle = sum(span) / 2
    if low == high:
        return Values(middle, 0.0)
    factor = min(REACH / max(high, -low), (span[1] - span[0]) / (high - low))
    return Values(middle - factor * (low + high) / 2, factor, factor * stretch)


def shares_scale(panel: StressPanel) -> bool:
    """Tell whether the bars' arrows are drawn to the scale of the profile."""
    largest = max((abs(value) for _, value in panel.profile), default=0.0)
    bar = max((abs(bar.value) for bar in panel.bars), default=0.0)
    return bar == 0.0 or largest == 0.0 or 1 / ALIKE <= bar / largest <= ALIKE


def draw_signed(
    sketch: Sketch, profile: Sequence[Point], down: Down, values: Values, obstacles: Obstacles
) -> None:
    """Draw a signed profile about its zero line, lightly filled."""
    heights = [down(y) for y, _ in profile]
    points = [(values.at(e), y) for (_, e), y in zip(profile, heights, strict=True)]
    zero = [(values.zero, heights[-1]), (values.zero, heights[0])]
    sketch.fill([[*points, *zero]], "section")
    sketch.line([zero[1], *points, zero[0]], Stroke("ink", 1.2))
    sketch.line(zero, FIRM)
    obstacles.add_line([zero[1], *points, *zero])


def draw_strain_marks(
    sketch: Sketch, marks: Sequence[Mark], down: Down, values: Values, middle: float, obstacles: Obstacles
) -> None:
    """Write strains over the upper half of the profile and under the lower half."""
    for mark in marks:
        x, y = (values.zero + values.at(mark.value)) / 2, down(mark.y)
        way, clear_of = (-1, -5.0) if y < middle else (1, 12.0)
        write(sketch, Label(x, y + clear_of, mark.label, SMALL, colour=colour_of(mark.value)), obstacles, way)


def draw_tractions(
    sketch: Sketch, panel: StressPanel, down: Down, values: Values, obstacles: Obstacles
) -> None:
    """Draw the tractions on the face, which is the zero line.

    The body lies to the left of its face, so each arrow is the traction itself: from the face to the right,
    out of the body, in tension; from the face to the left, into the body, in compression.
    """
    face = values.zero
    heights = [down(y) for y, _ in panel.profile]
    for sign in (1.0, -1.0):
        colour = colour_of(sign)
        for lobe in _lobes(panel.profile, sign):
            points = [(values.at(s), down(y)) for y, s in lobe]
            ring = [(face, points[0][1]), *points, (face, points[-1][1])]
            sketch.fill([ring], colour, opacity=0.16)
            sketch.line(ring, Stroke(colour, 1.2))
            sketch.arrows(_tractions(points, face, 17.0), Stroke(colour, 0.9))
            for line in (ring, *_tractions(points, face, 4.0)):  # so close that no label fits between
                obstacles.add_line(line)
    if panel.compared:
        other = [(values.at(s), down(y)) for y, s in panel.compared.profile]
        sketch.line(other, Stroke("ink", 1.0, DASH))
        obstacles.add_line(other)
    for bar in panel.bars:
        if bar.value:
            y, colour = down(bar.y), colour_of(bar.value)
            ends = ((face, y), (values.bar_at(bar.value), y))
            sketch.arrows([ends], Stroke(colour, 2.2), 9.0)
            obstacles.boxes.append(around((Box(face, y - 2, face, y + 2), Box(ends[1][0], y, ends[1][0], y))))
            heights.append(y)
    if heights:
        ends = ((face, min(heights)), (face, max(heights)))
        sketch.line(ends, Stroke("ink", 1.6))
        obstacles.add_line(ends)


def _lobes(profile: Sequence[Point], sign: float) -> list[list[Point]]:
    """Stretches of the profile where the stress has this sign, ending at its zeros."""
    lobes: list[list[Point]] = [[]]
    for (y_1, s_1), (y_2, s_2) in pairwise(profile):
        piece = [(y_1, s_1), (y_2, s_2)]
        if s_1 * s_2 < 0:
            zero = (y_1 + (y_2 - y_1) * s_1 / (s_1 - s_2), 0.0)
            piece = [(y_1, s_1), zero] if s_1 * sign > 0 else [zero, (y_2, s_2)]
        if max(s * sign for _, s in piece) <= 0:
            lobes.append([])
        elif lobes[-1] and lobes[-1][-1] == piece[0]:
            lobes[-1].append(piece[1])
        else:
            lobes.append(piece)
    return [lobe for lobe in lobes if lobe]


def _tractions(points: Sequence[Point], face: float, pitch: float) -> list[tuple[Point, Point]]:
    """Arrows from the face to the profile, about `pitch` pixels apart."""
    xs, ys = zip(*reversed(points), strict=True)  # from the top down, as interpolation wants it
    levels = np.linspace(ys[0], ys[-1], max(int((ys[-1] - ys[0]) / pitch), 1) + 1)
    tips = [(float(np.interp(y, ys, xs)), float(y)) for y in levels]
    return [((face, y), (x, y)) for x, y in tips if abs(x - face) > 7]


def draw_values(
    sketch: Sketch,
    panel: StressPanel,
    down: Down,
    values: Values,
    slot: tuple[float, float],
    obstacles: Obstacles,
) -> None:
    """Write each value of the profile and of the bars in the nearest clear place of the slot.

    The first and the last stand over and under the profile; the others beside their tip, or where there is
    room for them and a leader. The ends, the extremes and the bars have their word.
    """
    heights = [down(y) for y, _ in panel.profile] or [0.0]
    ends = (min(heights), max(heights))
    stresses = [mark.value for mark in panel.marks]
    for mark in panel.marks:
        at_height = [value for height, value in panel.profile if height == mark.y]
        way = -1 if len(at_height) > 1 and mark.value == at_height[-1] else 1
        tip = (values.at(mark.value), down(mark.y))
        extreme = mark.value in (max(stresses), min(stresses))
        if abs(tip[1] - ends[0]) < 1:
            _write_over(sketch, mark, tip, -1, slot, obstacles)
        elif abs(tip[1] - ends[1]) < 1:
            _write_over(sketch, mark, tip, 1, slot, obstacles)
        else:
            write_beside(
                sketch, _value_and_word(mark, tip, way, word=extreme), tip, way, ends, slot, obstacles
            )
    for bar in panel.bars:
        if bar.label:
            tip = (values.bar_at(bar.value), down(bar.y))
            write_beside(sketch, _value_and_word(bar, tip, 1), tip, 1, (-np.inf, np.inf), slot, obstacles)


def _write_over(
    sketch: Sketch, mark: Mark, tip: Point, way: int, slot: tuple[float, float], obstacles: Obstacles
) -> None:
    """Write a value over (`way` -1) or under (1) its tip, its word nearer to the profile."""
    x, y = tip
    colour = colour_of(mark.value)
    word_at, value_at = (y - 5.5, y - 18) if way < 0 else (y + 12.5, y + 25)
    # a zero has no word, and stands where that would
    labels = [Label(x, value_at if mark.value else word_at, mark.label, colour=colour, bold=True)]
    labels += [Label(x, word_at, word_of(mark.value), SMALL, colour=colour)] if mark.value else []
    steps = ((dx, way * dy) for dx, dy in _steps_over())
    for label in next(_free_places(labels, steps, slot, obstacles)):
        obstacles.boxes.append(sketch.label(label).box)


def write_beside(
    sketch: Sketch,
    labels: list[Label],
    tip: Point,
    way: int,
    ends: tuple[float, float],
    slot: tuple[float, float],
    obstacles: Obstacles,
) -> None:
    """Write a value beside its tip, or farther away at the end of a leader that crosses no label."""
    away = 1.0 if labels[0].anchor == "left" else -1.0
    steps = [(away * dx, way * dy) for dx, dy in _steps_beside()]

    def inside(step: Point) -> bool:
        return ends[0] <= tip[1] + step[1] <= ends[1] - 6

    # a value of the inside is not to be read as one of the end fibres
    order = chain(filter(inside, steps), filterfalse(inside, steps))
    several = list(islice(_free_places(labels, order, slot, obstacles), CHOICES))
    chosen = next((place for place in several if _open(_leader(place, tip), tip, obstacles)), several[0])
    leader = _leader(chosen, tip)
    if hypot(leader[1][0] - tip[0], leader[1][1] - tip[1]) > NEAR:
        sketch.line(leader, THIN)
        obstacles.add_line(leader)
    for label in chosen:
        obstacles.boxes.append(sketch.label(label).box)


@cache
def _steps_over() -> tuple[Point, ...]:
    """Return the steps across and away from a value's place over its tip, nearest first."""
    return _nearest_first((dx, 3.0 * n) for n in range(STEPS) for dx in SIDEWAYS)


@cache
def _steps_beside() -> tuple[Point, ...]:
    """Return the steps across and away from a value's place beside its tip, nearest first."""
    return _nearest_first((dx, sign * 3.0 * n) for dx in ASIDE for n in range(STEPS) for sign in (1, -1))


def _nearest_first(steps: Iterable[Point]) -> tuple[Point, ...]:
    return tuple(sorted(steps, key=lambda step: abs(step[0]) + abs(step[1])))


def _leader(labels: Sequence[Label], tip: Point) -> tuple[Point, Point]:
    """Give the line from a tip to the nearest point of a value's edge."""
    box = labels[0].box.grown(1.5)
    return tip, (min(max(tip[0], box.left), box.right), min(max(tip[1], box.top), box.bottom))


def _open(leader: tuple[Point, Point], tip: Point, obstacles: Obstacles) -> bool:
    """Tell whether a leader crosses no box but one that its tip lies in."""
    start, end = np.array(leader[:1]), np.array(leader[1:])
    tips = Box(tip[0], tip[1], tip[0], tip[1])
    return not any(box.crosses(start, end) for box in obstacles.boxes if not box.overlaps(tips, 0.5))


def _value_and_word(mark: Mark, tip: Point, way: int, *, word: bool = True) -> list[Label]:
    """Give the labels of a mark beside its tip, the word under the value (`way` 1) or over it (-1)."""
    colour = colour_of(mark.value)
    anchor: Anchor = "left" if mark.value > 0 else "right"
    x = tip[0] + 6 if mark.value > 0 else tip[0] - 6
    value = Label(x, tip[1] + 4, mark.label, TEXT, anchor, colour, bold=True)
    if not word or not mark.value:
        return [value]
    return [value, Label(x, value.y + 12.5 * way, word_of(mark.value), SMALL, anchor, colour)]


def _free_places(
    labels: Sequence[Label], steps: Iterable[Point], slot: tuple[float, float], obstacles: Obstacles
) -> Iterator[list[Label]]:
    """Yield the labels moved by each step, and sideways into the slot and the frame, where they are free."""
    boxes = [label.box for label in labels]
    held, longest = around(boxes), max(boxes, key=lambda box: box.right - box.left)
    for dx, dy in steps:
        into_slot = dx + longest.moved(dx, 0.0).into(*slot)
        across = into_slot + longest.moved(into_slot, 0.0).into(obstacles.left, obstacles.right)
        if obstacles.free(held.moved(across, dy), 1.0):
            yield [label.moved(across, dy) for label in labels]


def word_of(value: float) -> Word:
    """Name the sign of a stress that is not zero."""
    return "tension" if value > 0 else "compression"


def colour_of(value: float) -> Colour:
    """Give the colour of a stress by its sign."""
    return word_of(value) if value else "ink"

"""Loads on a beam, a row for each case: arrows to a common scale, labels side by side above them."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import ceil

import numpy as np

from calcgen.figures.beam_lanes import LoadLane
from calcgen.figures.labels import Obstacles, Point, text_width
from calcgen.figures.picture import HAIR, LINE, SMALL, THIN, Label, Sketch, Stroke, wrap

TALL, LOW = 24.0, 9.0  # of the arrows of the largest and of the smallest load
POINT_ARROW = 32.0
PITCH = 15.0
LOAD = Stroke("ink", 0.8)
FORCE = Stroke("ink", 1.5)


@dataclass(frozen=True)
class Distributed:
    """A load per length from `first` at `start` to `last` at `end`, positive down."""

    start: float
    end: float
    first: float
    last: float
    label: str


@dataclass(frozen=True)
class PointLoad:
    """A force at `x`, positive down."""

    x: float
    value: float
    label: str


@dataclass(frozen=True)
class CoupleLoad:
    """A couple at `start`, or spread from `start` to `end`."""

    start: float
    end: float
    label: str
    clockwise: bool = True


@dataclass(frozen=True)
class Effect:
    """An action that is said in words along its stretch: a temperature gradient, a settlement."""

    start: float
    end: float
    label: str


Load = Distributed | PointLoad | CoupleLoad | Effect


@dataclass(frozen=True)
class LoadCase:
    """Loads that act together, with the name of their case."""

    title: str
    loads: tuple[Load, ...]


def draw_case(
    sketch: Sketch, case: LoadCase, top: float, across: Callable[[float], float], width: float, largest: float
) -> float:
    """Draw the case below `top`; give the height of the line that it acts on.

    `across` gives the pixel of a place along the beam, `largest` the load per length drawn tallest.
    """
    spread_out = [load for load in case.loads if isinstance(load, Distributed | Effect)]
    tiers = [_Tier.of(tier, across, width, largest) for tier in _tiers(spread_out)]
    singles = sorted(
        (load for load in case.loads if isinstance(load, PointLoad | CoupleLoad)), key=lambda s: _middle(s)
    )
    stack = sum(tier.height for tier in tiers)
    reach = max(stack + 8 * bool(tiers), POINT_ARROW) if singles else stack
    if singles and all(isinstance(s, CoupleLoad) for s in singles) and not tiers:
        reach = 16.0
    y = top + SMALL
    for number, line in enumerate(wrap(case.title, SMALL, width - 6)):
        y = sketch.label(Label(3, top + SMALL + number * LINE, line, SMALL, "left", colour="muted")).y
    lane = LoadLane.of([s.label for s in singles], [across(_middle(s)) for s in singles], width)
    base = y + 6 + lane.height + reach + 4
    taken = Obstacles(3, width - 3)
    for single in singles:
        x = across(_middle(single))
        taken.add_line([(x, base), (x, base - reach)])
    foot = base
    feet = []
    for number, tier in enumerate(tiers):
        for load in tier.loads:
            if number:  # the loads below keep this one off the beam
                sketch.line([(across(load.start), foot - 1), (across(load.end), foot - 1)], HAIR)
            _draw_stretch(sketch, load, foot, across, largest)
        feet.append(foot)
        foot -= tier.height
    for single in singles:
        _draw_single(sketch, single, base, reach, across)
    for tier, foot in zip(tiers, feet, strict=True):  # over all lines, which their halo interrupts
        tier.draw(sketch, foot, across, largest, taken)
    lane.draw(sketch, base - reach)
    return base


def largest_intensity(cases: Sequence[LoadCase]) -> float:
    """Give the largest load per length in any case."""
    each = [max(abs(x.first), abs(x.last)) for c in cases for x in c.loads if isinstance(x, Distributed)]
    return max(each, default=0.0)


def _middle(load: PointLoad | CoupleLoad) -> float:
    return load.x if isinstance(load, PointLoad) else (load.start + load.end) / 2


def _tiers(loads: Sequence[Distributed | Effect]) -> list[list[Distributed | Effect]]:
    """Put loads that overlap along the beam above each other, in the order given."""
    tiers: list[list[Distributed | Effect]] = []
    for load in loads:
        for tier in tiers:
            if all(load.start >= other.end or load.end <= other.start for other in tier):
                tier.append(load)
                break
        else:
            tiers.append([load])
    return tiers


def _height(load: Distributed | Effect, largest: float) -> float:
    """Give the height of the tallest arrow of a load spread along the beam."""
    if isinstance(load, Effect) or not largest:
        return LOW
    return LOW + (TALL - LOW) * max(abs(load.first), abs(load.last)) / largest


@dataclass(frozen=True)
class _Tier:
    """Loads side by side along the beam, each with its label over it, or all of them in a lane above."""

    loads: tuple[Distributed | Effect, ...]
    tall: float  # of the tallest load
    lane: LoadLane | None

    @staticmethod
    def of(
        loads: Sequence[Distributed | Effect], across: Callable[[float], float], width: float, largest: float
    ) -> "_Tier":
        """Find out whether each label has room over its load."""
        tall = max(_height(load, largest) for load in loads)
        rooms = [across(load.end) - across(load.start) for load in loads]
        fit = all(text_width(s.label, SMALL) + 4 <= room for s, room in zip(loads, rooms, strict=True))
        if fit or (len(loads) == 1 and text_width(loads[0].label, SMALL) <= width - 6):
            return _Tier(tuple(loads), tall, None)
        ordered = sorted(loads, key=lambda s: s.start)
        middles = [(across(s.start) + across(s.end)) / 2 for s in ordered]
        return _Tier(tuple(loads), tall, LoadLane.of([s.label for s in ordered], middles, width))

    @property
    def height(self) -> float:
        """How much it takes of the height of its case."""
        return self.tall + (LINE if self.lane is None else self.lane.height) + 4

    def draw(
        self,
        sketch: Sketch,
        foot: float,
        across: Callable[[float], float],
        largest: float,
        taken: Obstacles,
    ) -> None:
        """Write the labels of loads that stand on `foot`, aside of the lines taken where they can be."""
        if self.lane is not None:
            self.lane.draw(sketch, foot - self.tall - 2)
            return
        for load in self.loads:
            left, right = across(load.start), across(load.end)
            top = foot - _height(load, largest) - 6
            label = Label((left + right) / 2, top, load.label, SMALL, halo=True).within(3, taken.right)
            room = max((right - left - text_width(load.label, SMALL)) / 2, 0.0)
            shifts = sorted(np.arange(-room, room + 1e-9, 4.0), key=abs)
            moved = (label.moved(float(shift), 0) for shift in shifts)
            label = next((each for each in moved if taken.clear(each.box, 4.0)), label)
            taken.boxes.append(sketch.label(label).box)


def _draw_stretch(
    sketch: Sketch, load: Distributed | Effect, foot: float, across: Callable[[float], float], largest: float
) -> None:
    left, right = across(load.start), across(load.end)
    if isinstance(load, Effect):
        sketch.lines([((left, foot - 2), (left, foot - 9)), ((right, foot - 2), (right, foot - 9))], LOAD)
        sketch.line([(left, foot - 5.5), (right, foot - 5.5)], Stroke("ink", 0.8, (4.0, 2.5)))
    else:
        _draw_distributed(sketch, load, foot, (left, right), largest)


def _draw_distributed(
    sketch: Sketch, load: Distributed, foot: float, ends: tuple[float, float], largest: float
) -> None:
    """Draw the block of arrows."""
    left, right = ends
    foot -= 2.0
    count = max(ceil((right - left) / PITCH), 1)
    xs = np.linspace(left, right, count + 1)
    values = np.array([load.first, load.last])
    if load.first * load.last < 0:  # the block comes down to the line where the load changes its sense
        zero = left + (right - left) * load.first / (load.first - load.last)
        xs = np.sort(np.append(xs, zero))
        block = np.abs(np.interp(xs, [left, right], TALL * values / largest))
    else:
        heights = np.where(values == 0, 0.0, LOW + (TALL - LOW) * np.abs(values) / (largest or 1.0))
        block = np.interp(xs, [left, right], heights)
    signed = np.interp(xs, [left, right], values)
    sketch.line([(left, foot), *zip(xs, foot - block, strict=True), (right, foot)], LOAD)
    down = [((x, foot - h), (x, foot)) for x, h, s in zip(xs, block, signed, strict=True) if s > 0 and h > 4]
    up = [((x, foot), (x, foot - h)) for x, h, s in zip(xs, block, signed, strict=True) if s < 0 and h > 4]
    sketch.arrows(down + up, LOAD, 4.5)


def _draw_single(
    sketch: Sketch,
    load: PointLoad | CoupleLoad,
    base: float,
    reach: float,
    across: Callable[[float], float],
) -> None:
    if isinstance(load, PointLoad):
        x = across(load.x)
        ends: tuple[Point, Point] = ((x, base - reach), (x, base - 2))
        sketch.arrows([ends if load.value >= 0 else ends[::-1]], FORCE, 7.0)
        return
    left, right = across(load.start), across(load.end)
    count = max(int((right - left) / 30), 1)
    centres = [(left + right) / 2] if count == 1 else np.linspace(left + 12, right - 12, count)
    for x in centres:
        sweep = -250.0 if load.clockwise else 250.0
        sketch.curl((float(x), base), 10.0, 90 - sweep / 2, sweep, Stroke("ink", 1.2), 6.0)
        sketch.dot((float(x), base), 1.6, "ink")
    if reach > 16:
        x = across(_middle(load))
        sketch.line([(x, base - 10), (x, base - reach)], THIN)

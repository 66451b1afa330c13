"""Loads on a beam, a row for each case: arrows to a common scale, labels side by side above them."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import ceil

import numpy as np

from calcgen.figures.labels import Obstacles, Point, spread, two_lanes
from calcgen.figures.picture import HAIR, LINE, SMALL, THIN, Anchor, Label, Sketch, Stroke

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
    tiers = _tiers(spread_out)
    singles = sorted(
        (load for load in case.loads if isinstance(load, PointLoad | CoupleLoad)), key=lambda s: _middle(s)
    )
    tops = [max(_height(load, largest) for load in tier) + LINE + 4 for tier in tiers]
    stack = sum(tops)
    reach = max(stack + 8 * bool(tiers), POINT_ARROW) if singles else stack
    if singles and all(isinstance(s, CoupleLoad) for s in singles) and not tiers:
        reach = 16.0
    title = sketch.label(Label(3, top + SMALL, case.title, SMALL, "left", colour="muted"))
    lane = _Lane.of(singles, across, width)
    base = title.y + 6 + lane.height + reach + 4
    taken = Obstacles(3, width - 3)
    for single in singles:
        x = across(_middle(single))
        taken.add_line([(x, base), (x, base - reach)])
    for tier, loads in enumerate(tiers):
        foot = base - sum(tops[:tier])
        for load in loads:
            if tier:  # the loads below keep this one off the beam
                sketch.line([(across(load.start), foot - 1), (across(load.end), foot - 1)], HAIR)
            _draw_stretch(sketch, load, foot, across, largest, taken)
    for single in singles:
        _draw_single(sketch, single, base, reach, across)
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


def _draw_stretch(
    sketch: Sketch,
    load: Distributed | Effect,
    foot: float,
    across: Callable[[float], float],
    largest: float,
    taken: Obstacles,
) -> None:
    left, right = across(load.start), across(load.end)
    if isinstance(load, Effect):
        sketch.lines([((left, foot - 2), (left, foot - 9)), ((right, foot - 2), (right, foot - 9))], LOAD)
        sketch.line([(left, foot - 5.5), (right, foot - 5.5)], Stroke("ink", 0.8, (4.0, 2.5)))
    else:
        _draw_distributed(sketch, load, foot, (left, right), largest)
    label = Label((left + right) / 2, foot - _height(load, largest) - 6, load.label, SMALL, halo=True)
    room = max((right - left) / 2, 1.0)
    for shift in sorted(np.arange(-room, room + 1, 4.0), key=abs):
        moved = label.moved(float(shift), 0).within(3, taken.right)
        if taken.clear(moved.box):
            label = moved
            break
    taken.boxes.append(sketch.label(label.within(3, taken.right)).box)


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


@dataclass(frozen=True)
class _Lane:
    """Labels above the arrows: level where they fit side by side, else upright, in two lanes, or counted."""

    labels: tuple[tuple[str, float, float], ...]  # text, place of the load, place of the label
    upright: bool
    height: float
    second: float = 0.0  # how far the second lane stands above the first
    note: str = ""

    @staticmethod
    def of(
        singles: Sequence[PointLoad | CoupleLoad], across: Callable[[float], float], width: float
    ) -> "_Lane":
        """Find places for the labels of loads, which are in the order of their places."""
        texts = [single.label for single in singles]
        wanted = [across(_middle(single)) for single in singles]
        if not texts:
            return _Lane((), upright=False, height=0.0)
        boxes = [Label(0, 0, text, SMALL, "left").box for text in texts]
        placed = spread(wanted, [box.right + 6 for box in boxes], 3, width - 3)
        near = placed and all(abs(p - w) <= 40 for p, w in zip(placed, wanted, strict=True))
        if placed and near:
            return _Lane(tuple(zip(texts, wanted, placed, strict=True)), upright=False, height=LINE + 6)
        longest = max(box.right for box in boxes)
        placed = spread(wanted, [SMALL + 3] * len(texts), 3, width - 3)
        if placed:
            return _Lane(tuple(zip(texts, wanted, placed, strict=True)), upright=True, height=longest + 12)
        placed = two_lanes(wanted, SMALL + 3, 3, width - 3)
        if placed:
            rows = tuple(zip(texts, wanted, placed, strict=True))
            return _Lane(rows, upright=True, height=2 * longest + 20, second=longest + 8)
        return _Lane((), upright=False, height=LINE, note=f"{len(texts)} loads, too close to label")

    def draw(self, sketch: Sketch, foot: float) -> None:
        """Draw the labels above `foot`, each with a leader to its load where it stands aside."""
        for number, (text, load, place) in enumerate(self.labels):
            lift = 8.0 + (self.second if number % 2 else 0.0)
            if self.upright or abs(load - place) > 1:
                rise = [(place, foot - lift + 2)] if lift > 8 else []
                sketch.line([(load, foot - 1), (place, foot - 6), *rise], THIN)
            x = place + 0.36 * SMALL if self.upright else place
            anchor: Anchor = "left" if self.upright else "center"
            sketch.label(Label(x, foot - lift, text, SMALL, anchor, turned=self.upright))
        if self.note:
            sketch.label(Label(3, foot - 5, self.note, SMALL, "left"))

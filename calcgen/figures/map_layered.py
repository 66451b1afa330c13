"""A plan of calcs in layers from left to right: arrows run level, and turn only between the layers.

Words stand on the last stretch of an arrow, in a column left of the boxes where each arrow has a level of its
own and nothing stands upright, so that nothing can cross them. Arrows of one calc share their way until they
part. Between two layers the levels of different arrows are 3 pixels apart or more: arrows enter boxes at
multiples of GRID, leave them at odd halves of it and pass other layers at odd quarters; or they run straight
on to where they enter next, a level that is theirs alone.
"""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from math import inf

from calcgen.figures.labels import Point
from calcgen.figures.map_drawing import BOX, Cell, Placed, Plan, Route
from calcgen.figures.map_layout import (
    GRID,
    Arrow,
    Links,
    Rows,
    Stop,
    on_loops,
    ordered,
    stops,
    tops,
    tracks,
)

TRACK = 8.0  # from one upright line to the next
BESIDE = 12.0  # from an upright line to words or a box
BETWEEN = 24.0  # the least between two layers


def layered(
    layers: Sequence[Sequence[str]],
    cells: Mapping[str, Cell],
    arrows: Iterable[Arrow],
    label: float | None = None,
) -> Plan:
    """Return the plan of calcs in layers; `label` is the breadth left for words, if it is not theirs."""
    given = list(dict.fromkeys(arrows))
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    back = [(giver, taker) for giver, taker in given if layer[giver] >= layer[taker]]
    rows, links = stops(layers, [(giver, taker) for giver, taker in given if layer[giver] < layer[taker]])
    rows = ordered(rows, links)
    real = set(layer.items())
    heights = {stop: cells[stop[0]].height if stop in real else GRID for row in rows for stop in row}
    top = tops(rows, links, heights, GRID)
    start = {(s[0], end): top[s] for s, end in links}
    here = {stop: _in_order(cells[stop[0]], stop, start) for stop in sorted(real)}
    levels = _Levels(rows, links, here, top, back)
    return _plan(levels, on_loops(given), label)


def _in_order(cell: Cell, stop: Stop, start: Mapping[tuple[str, Stop], float]) -> Cell:
    """Return a cell whose arrows enter in the order in which they come; short ones first."""
    keys = {slot: (not slot.short, start.get((slot.giver, stop), inf)) for slot in cell.slots}
    return replace(cell, slots=tuple(sorted(cell.slots, key=keys.__getitem__)))


@dataclass(frozen=True)
class _Net:
    """The arrows of one calc between two layers: an upright line and the level ones that meet it.

    `ends` are the stops it goes on to, with their levels. `lane` is the level, under all boxes, of the way
    back to a layer before: the net comes from it where `returns` is set, else it leads to it if there is one.
    """

    giver: str
    start: float
    ends: tuple[tuple[Stop, float], ...]
    lane: float | None = None
    returns: bool = False

    @property
    def levels(self) -> list[float]:
        """All levels that meet the upright line."""
        down = [] if self.lane is None or self.returns else [self.lane]
        return [self.start, *(level for _, level in self.ends), *down]

    @property
    def span(self) -> tuple[float, float]:
        """The ends of the upright line; the same where the arrow runs straight on."""
        return min(self.levels), max(self.levels)

    @property
    def partings(self) -> list[float]:
        """The levels where three ways meet."""
        low, high = self.span
        on = {level for _, level in self.ends}
        ways = {y: (y == self.start) + (y in on) + (y > low) + (y < high) for y in self.levels}
        return [level for level, count in ways.items() if count > 2]


@dataclass(frozen=True)
class _Levels:
    """Where everything stands from top to bottom."""

    rows: Rows
    links: Links
    cells: Mapping[Stop, Cell]
    top: Mapping[Stop, float]
    back: Sequence[Arrow]

    @property
    def bottom(self) -> float:
        """Of the lowest box or passage."""
        held = (
            (stop, self.cells[stop].height if stop in self.cells else GRID)
            for row in self.rows
            for stop in row
        )
        return max(self.top[stop] + height for stop, height in held)

    @cached_property
    def _after(self) -> Mapping[Stop, Sequence[Stop]]:
        found: dict[Stop, list[Stop]] = {}
        for start, end in self.links:
            found.setdefault(start, []).append(end)
        return found

    def ahead(self, stop: Stop) -> list[tuple[Stop, float]]:
        """Return the stops that come next, with the levels at which they are entered."""
        return [(end, self.enters(end, stop[0])) for end in self._after.get(stop, ())]

    def enters(self, stop: Stop, giver: str) -> float:
        """Return the level at which the arrow of a calc comes to a stop."""
        top = self.top[stop]
        if stop in self.cells:
            return top + self.cells[stop].entry(giver)
        straight = (
            level for _, level in self.ahead(stop) if top <= level <= top + GRID and level % GRID == 0
        )
        return next(straight, top + GRID * (0.25 if stop[1] % 2 else 0.75))

    def leaves(self, stop: Stop) -> float:
        """Return the level at which the arrows of a calc leave a stop: straight on where that can be."""
        if stop not in self.cells:
            return self.enters(stop, stop[0])
        top, height = self.top[stop], self.cells[stop].height
        straight = [level for _, level in self.ahead(stop) if top + 4 <= level <= top + height - 4]
        middle = top + height / 2
        if straight:
            return min(straight, key=lambda level: abs(level - middle))
        return top + GRID * ((height / GRID) // 2) + GRID / 2

    def nets(self) -> dict[int, list[_Net]]:
        """Return the nets right of each layer; -1 is left of the first."""
        back: dict[str, list[Stop]] = {}
        layer = {stop[0]: stop[1] for stop in self.cells}
        for giver, taker in self.back:
            back.setdefault(giver, []).append((taker, layer[taker]))
        lanes = {giver: self.bottom + GRID + TRACK * place for place, giver in enumerate(back)}
        found: dict[int, list[_Net]] = {n: [] for n in range(-1, len(self.rows))}
        for n, row in enumerate(self.rows):
            for stop in row:
                giver = stop[0]
                ends = self.ahead(stop)
                lane = lanes.get(giver) if stop in self.cells else None
                if ends or lane is not None:
                    found[n].append(_Net(giver, self.leaves(stop), tuple(ends), lane))
        for giver, takers in back.items():
            for n in sorted({before[1] for before in takers}):
                ends = [(t, self.enters(t, giver)) for t in takers if t[1] == n]
                found[n - 1].append(_Net(giver, lanes[giver], tuple(ends), lanes[giver], returns=True))
        return found


def _plan(levels: _Levels, loops: frozenset[Arrow], label: float | None) -> Plan:
    nets = {n: sorted(row, key=_leftmost_first) for n, row in levels.nets().items()}
    track = {n: _tracks(row) for n, row in nets.items()}
    count = {n: 1 + max((t for t in of if t is not None), default=-1) for n, of in track.items()}
    x = BESIDE + TRACK * (count[-1] - 1) + BESIDE if count[-1] else 0.0
    upright = {-1: 0.0}  # where the first upright line stands
    left, right = {}, {}
    cells: list[Placed] = []
    for n, row in enumerate(levels.rows):
        real = [stop for stop in row if stop in levels.cells]
        words = label if label is not None else max((levels.cells[s].label for s in real), default=0.0)
        left[n], right[n] = x + words, x + words + BOX
        for stop in real:
            cell = levels.cells[stop]
            cells.append(Placed(cell, x, words, levels.top[stop], cell.height))
        upright[n] = right[n] + BESIDE
        x = right[n] + max(BETWEEN, 2 * BESIDE + TRACK * (count[n] - 1))
    last = len(levels.rows) - 1
    routes: list[Route] = []
    dots: list[Point] = []
    at = {
        (net.giver, n, net.returns): upright[n] + TRACK * (t or 0)
        for n in nets
        for net, t in zip(nets[n], track[n], strict=True)
    }
    layer = {stop[0]: stop[1] for stop in levels.cells}
    leftmost = {giver: n for giver, n, returns in reversed(at) if returns}
    farthest: dict[str, int] = {}  # layer to which a loop of a calc goes on
    for giver, taker in loops:
        farthest[giver] = max(farthest.get(giver, 0), layer[taker])
    for n in nets:
        for net in nets[n]:
            here = at[net.giver, n, net.returns]
            origin = at[net.giver, layer[net.giver], False] if net.returns else right[n]
            for stop, level in net.ends:
                enters = stop in levels.cells
                end = left[stop[1]] if enters else right[stop[1]]
                points = _turned((origin, net.start), here, (end, level))
                loop = (net.giver, stop[0]) in loops if enters else farthest.get(net.giver, 0) > stop[1]
                routes.append(Route((net.giver, stop[0] if enters else ""), points, loop, tip=enters))
            if net.lane is not None and not net.returns:
                points = ((origin, net.start), (here, net.start), (here, net.lane))
                routes.append(Route((net.giver, ""), points, loop=True, tip=False))
            dots += [(here, level) for level in net.partings]
            if net.returns and leftmost[net.giver] < n:
                dots.append((here, net.start))
    lanes = [net.lane for row in nets.values() for net in row if net.lane is not None]
    width = max([right[last], *at.values()])
    return Plan(tuple(cells), tuple(routes), tuple(dots), width, max([levels.bottom, *lanes]))


def _turned(start: Point, x: float, end: Point) -> tuple[Point, ...]:
    """Return the way from start to end that turns at x, if it turns."""
    if start[1] == end[1]:
        return start, end
    return start, (x, start[1]), (x, end[1]), end


def _leftmost_first(net: _Net) -> tuple[bool, float]:
    """Return the order of upright lines, by which those that run one way don't cross each other."""
    down = sum(level for _, level in net.ends) >= net.start * len(net.ends)
    return not down, -net.start if down else net.start


def _tracks(nets: Sequence[_Net]) -> list[int | None]:
    """Return the track of each net, none where it runs straight on."""
    turning = [net.span for net in nets if net.span[0] < net.span[1]]
    found = iter(tracks(turning))
    return [next(found) if net.span[0] < net.span[1] else None for net in nets]

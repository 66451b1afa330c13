"""The bars of a section block -> points and the part of each; faults at their lines."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from calcgen.evaluation.blocks.shape import point_of, point_text
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import BarsLine
from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.boolean import inside
from calcgen.mechanics.composite import transformed_inertia
from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.outline import Outline
from calcgen.quantities.display import show
from calcgen.quantities.measure import from_si, measure
from calcgen.text import Related

MOST_BARS = 1000  # of one line
TOUCHING = 1e-9  # of the reach: smaller distances are rounding

NOTHING = 1e-9  # of what a part has: less is left by rounding


@dataclass(frozen=True)
class PlacedBars:
    """Bars of one line: places, m, area of each, m², diameter, m, where given, and the part of each."""

    name: str
    line: BarsLine
    points: tuple[Point, ...]
    area: float
    diameter: float | None
    hosts: tuple[str, ...]

    @property
    def reach(self) -> float:
        """The largest coordinate, m; those between lie on a straight line."""
        return max(abs(c) for point in (self.points[0], self.points[-1]) for c in point)


def placed_bars(line: BarsLine, scope: Scope) -> PlacedBars | None:
    """Return the bars of a line, their parts yet to be found."""
    start, end = point_of(line.start, scope), None
    if line.end is not None:
        end = point_of(line.end, scope)
    size = quantity_of(line.size, "area" if line.count is None else "length", scope)
    count = 1 if line.count is None else _count(line, scope)
    if start is None or size is None or count is None or (line.end is not None and end is None):
        return None
    if size.si <= 0.0:
        what = "area" if line.count is None else "diameter"
        shown = show(size, scope.style).text
        scope.report.error(
            "not-positive", line.size.span, f"the {what} of bars must be positive", label=f"{what} {shown}"
        )
        return None
    if (count == 1) != (end is None):
        scope.report.error(
            "bars",
            line.span if line.count is None else line.count.span,
            "bars in a row need a count of 2 or more" if end is not None else f"{count} bars have one place",
            hint="write 4 of 20 mm from (x, y) to (x, y), 1 of 20 mm at (x, y), or an area at (x, y)",
        )
        return None
    diameter = size.si if line.count is not None else None
    area = size.si if diameter is None else 0.25 * math.pi * diameter**2
    points = (start,) if end is None else _in_a_row(start, end, count)
    return PlacedBars(line.target.name, line, points, area, diameter, ())


def _count(line: BarsLine, scope: Scope) -> int | None:
    if line.count is None:
        return 1
    value = si(line.count, "number", scope)
    if value is None:
        return None
    if value < 1 or value != round(value):
        scope.report.error(
            "bars",
            line.count.span,
            "the number of bars is a whole one, 1 or more",
            label=f"{show(measure(value, None), scope.style).text} bars",
        )
        return None
    if value > MOST_BARS:
        number = show(measure(value, None), scope.style).text
        scope.report.error(
            "bars",
            line.count.span,
            f"{number} bars are more than the {MOST_BARS} that one line takes",
            hint="write several lines, or a part in place of a sheet of bars",
        )
        return None
    return round(value)


def _in_a_row(start: Point, end: Point, count: int) -> tuple[Point, ...]:
    shares = [i / (count - 1) for i in range(count)]
    return tuple((start[0] + s * (end[0] - start[0]), start[1] + s * (end[1] - start[1])) for s in shares)


def bars_in_parts(
    rows: Sequence[PlacedBars],
    parts: Mapping[str, tuple[Outline, ...]],
    holes: Sequence[Outline],
    scope: Scope,
) -> tuple[PlacedBars, ...] | None:
    """Find the part in which each bar lies; None where bars leave nothing of theirs.

    Warns of bars that lie neither in a part nor in a hole, and of bars that overlap.
    """
    bars = tuple(_hosted(row, parts, holes, scope) for row in rows)
    for row in bars:
        _warn_of_overlap_in_a_row(row, scope)
    for first, second in combinations(bars, 2):
        _warn_of_overlap(first, second, scope)
    remains = [_something_remains(host, outlines, bars, scope) for host, outlines in parts.items()]
    return bars if all(remains) else None


def _hosted(
    bars: PlacedBars, parts: Mapping[str, tuple[Outline, ...]], holes: Sequence[Outline], scope: Scope
) -> PlacedBars:
    """Return bars with the part of each, '' where there is none; report those that lie in nothing."""
    points = np.array(bars.points)
    hosts = np.full(len(points), "", dtype=object)
    for name, outlines in reversed(list(parts.items())):  # on an edge of two parts, the first
        hosts[inside(points, outlines)] = name
    outside = np.flatnonzero((hosts == "") & ~inside(points, holes))
    if outside.size:
        what = "bar lies" if outside.size == 1 else "bars lie"
        scope.report.warning(
            "bars-outside",
            bars.line.target.span,
            f"{outside.size} {what} outside all parts",
            label=f"at {', '.join(point_text(bars.points[i], scope.style) for i in outside[:3])}",
        )
    return replace(bars, hosts=tuple(hosts.tolist()))


def _warn_of_overlap_in_a_row(bars: PlacedBars, scope: Scope) -> None:
    """Warn of bars of one line that overlap: it is straight, and all are as far apart."""
    if len(bars.points) == 1:
        return
    apart = math.dist(bars.points[0], bars.points[-1]) / (len(bars.points) - 1)
    if not _too_close(np.array(apart), bars.diameter or 0.0, bars.reach):
        return
    place = point_text(bars.points[0], scope.style)
    if apart == 0.0:
        said = f"the {len(bars.points)} bars '{bars.name}' lie on one point, {place}"
    else:
        said = f"the bars '{bars.name}' overlap each other, from {place} on"
    scope.report.warning("bars-overlap", bars.line.target.span, said, hint="count and ends may be wrong")


def _warn_of_overlap(first: PlacedBars, second: PlacedBars, scope: Scope) -> None:
    """Warn of the first place where bars of two lines overlap."""
    a, b = np.array(first.points), np.array(second.points)
    apart = np.hypot(*(a[:, None, :] - b[None, :, :]).transpose(2, 0, 1))
    # of a bar given by its area no more is known than its place
    needed = 0.5 * ((first.diameter or 0.0) + (second.diameter or 0.0))
    close = np.argwhere(_too_close(apart, needed, max(first.reach, second.reach)))
    if not close.size:
        return
    i, j = (int(index) for index in close[0])
    how = "lie on one point" if apart[i, j] == 0.0 else "overlap"
    places = dict.fromkeys(point_text(p, scope.style) for p in (first.points[i], second.points[j]))
    scope.report.warning(
        "bars-overlap",
        second.line.target.span,
        f"bars of '{first.name}' and '{second.name}' {how}: {' and '.join(places)}",
        hint="one of them may be laid twice",
    )


def _too_close(apart: FloatArray, needed: float, reach: float) -> NDArray[np.bool_]:
    """Tell where distances, m, are less than needed by more than rounding, or nothing at all."""
    nothing = TOUCHING * reach
    close: NDArray[np.bool_] = (apart < needed - nothing) | (apart <= nothing)
    return close


def _something_remains(
    host: str, outlines: tuple[Outline, ...], bars: Sequence[PlacedBars], scope: Scope
) -> bool:
    """Report bars that take the place of all of their part, or of more stiffness than it has.

    A part in which they displace no more than it has keeps a positive stiffness about every axis, whatever
    the moduli are.
    """
    inner = [row for row in bars if host in row.hosts]
    if not inner:
        return True
    groups = [
        Bars(row.name, points, row.area, Law(0.0), Law(1.0))
        for row in inner
        for points in [np.array([p for p, h in zip(row.points, row.hosts, strict=True) if h == host])]
    ]
    displaced = sum(len(group.points) * group.area for group in groups)
    whole = transformed_inertia([Piece(host, outlines)])
    left = transformed_inertia([Piece(host, outlines)], groups)
    if left.area > NOTHING * whole.area and left.I_2 > NOTHING * whole.I_2:
        return True
    unit = "in²" if scope.style.system == "US" else "mm²"
    areas = [show(from_si(area, "m²").shown_in(unit), scope.style).text for area in (displaced, whole.area)]
    lacking = "area" if left.area <= NOTHING * whole.area else "stiffness"
    scope.report.error(
        "bars",
        inner[-1].line.target.span,
        f"the bars in the part '{host}' take the place of more {lacking} than it has",
        label=f"bars of {areas[0]} in a part of {areas[1]}",
        hint="a size, a count or a place may be wrong",
        related=tuple(Related(row.line.target.span, f"'{row.name}'") for row in inner[:-1][:1]),
    )
    return False

"""Parts, holes and bars of a section block -> outlines and points in place; faults at their lines."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.shape import placed_shape, profile_named, rolled_shape, shape_of
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import (
    BarsLine,
    HoleLine,
    PartLine,
    SectionBlock,
    ShapeLine,
    ShapeText,
)
from calcgen.language.blocks.section import Point as PointText
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.boolean import cut, distance, overlap, share_outside
from calcgen.mechanics.outline import Outline, OutlineError
from calcgen.mechanics.shapes import Shape
from calcgen.profiles.catalogue import Catalogue, Profile
from calcgen.quantities.display import Style, number_text, show
from calcgen.quantities.measure import from_si
from calcgen.text import Related, Span


@dataclass(frozen=True)
class PlacedPart:
    """A part where it lies; `outlines` as the holes below it leave it, `whole` while none has cut it."""

    name: str
    line: ShapeLine | PartLine
    shape: Shape
    profile: Profile | None
    outlines: tuple[Outline, ...]
    whole: bool = True

    @property
    def text(self) -> ShapeText:
        """The shape as written."""
        return self.line.shape

    @property
    def kind(self) -> str:
        """The shape's word in the language, that of its profile for a catalogued one."""
        return self.profile.shape if self.profile is not None else self.text.shape.name

    @property
    def span(self) -> Span:
        """Where a fault of the part is shown: its name, or the line of a section's one shape."""
        return self.line.target.span if isinstance(self.line, PartLine) else self.line.span


@dataclass(frozen=True)
class PlacedBars:
    """Bars of one line: places, m, area of each, m², diameter, m, where given, and the part of each."""

    name: str
    line: BarsLine
    points: tuple[Point, ...]
    area: float
    diameter: float | None
    hosts: tuple[str, ...]


@dataclass(frozen=True)
class Layout:
    """What a section is made of, and what its checker should be told of it."""

    parts: tuple[PlacedPart, ...]
    bars: tuple[PlacedBars, ...]
    notes: tuple[str, ...]


def layout_of(block: SectionBlock, scope: Scope, catalogue: Catalogue) -> Layout | None:
    """Place parts, cut them by the holes below them, and lay the bars; None where a line is at fault."""
    parts: list[PlacedPart] = []
    holes: list[Outline] = []
    notes: list[str] = []
    complete = True
    for line in block.items:
        if isinstance(line, ShapeLine | PartLine):
            part = _placed(line, scope, catalogue)
            if part is None or not _fits_beside(part, parts, scope):
                complete = False
            if part is not None:
                parts.append(part)
        elif isinstance(line, HoleLine):
            built = _built(line.shape, scope, catalogue)
            if built is not None:
                holes.append(built[0].outline)
            # beside a part in error a hole may seem to lie outside: nothing more is said of it then
            complete = built is not None and complete and _cut(parts, holes[-1], line, notes, scope)
    rows = [_bars(line, scope) for line in block.items if isinstance(line, BarsLine)]
    if not complete or any(row is None for row in rows):
        return None
    bars = tuple(_in_their_parts(row, parts, holes, scope) for row in rows if row is not None)
    return Layout(tuple(parts), bars, tuple(notes))


def _placed(line: ShapeLine | PartLine, scope: Scope, catalogue: Catalogue) -> PlacedPart | None:
    built = _built(line.shape, scope, catalogue)
    if built is None:
        return None
    shape, profile = built
    name = line.target.name if isinstance(line, PartLine) else ""
    return PlacedPart(name, line, shape, profile, (shape.outline,))


def _built(text: ShapeText, scope: Scope, catalogue: Catalogue) -> tuple[Shape, Profile | None] | None:
    """Build a shape of the language, or a catalogued one, in its place."""
    profile = None
    if text.shape.name == "rolled":
        profile = profile_named(text, scope, catalogue)
        shape = rolled_shape(profile, text, scope) if profile is not None else None
    else:
        shape = shape_of(text, scope)
    placed = placed_shape(shape, text, scope) if shape is not None else None
    return None if placed is None else (placed, profile)


def _fits_beside(part: PlacedPart, others: Iterable[PlacedPart], scope: Scope) -> bool:
    """Report the parts above that a part overlaps."""
    fits = True
    for other in others:
        common = overlap(part.outlines, other.outlines)
        if common is None:
            continue
        fits = False
        box, style = common.bounds, scope.style
        size = f"{length_text(box.width, style)} wide and {length_text(box.height, style)} high"
        scope.report.error(
            "parts-overlap",
            part.span,
            f"the part '{part.name}' overlaps '{other.name}' around {point_text(box.middle, style)}",
            label=f"an overlap {size}",
            hint="move one of them, or cut the first by a hole that the second fills",
            related=(Related(other.span, f"'{other.name}'"),),
        )
    return fits


def _cut(parts: list[PlacedPart], hole: Outline, line: HoleLine, notes: list[str], scope: Scope) -> bool:
    """Cut the parts above by a hole; report one that cuts nothing, or leaves nothing."""
    name, outlines = line.target.name, [outline for part in parts for outline in part.outlines]
    outside = share_outside([hole], outlines)
    if outside >= 1.0 - 1e-9:
        middle = hole.bounds.middle
        hint = "a hole cuts the parts that are written above it"
        if parts:
            gap = length_text(distance([hole], outlines), scope.style)
            hint = f"it is {gap} away from the nearest part; a hole cuts the parts above it"
        scope.report.error(
            "hole-outside",
            line.target.span,
            f"the hole '{name}' lies outside the parts above it",
            label=f"its middle is at {point_text(middle, scope.style)}",
            hint=hint,
        )
        return False
    if outside:
        share = number_text(100.0 * outside, 3)
        scope.report.warning(
            "hole-outside",
            line.target.span,
            f"{share} % of the hole '{name}' lies outside the parts above it",
            hint="it cuts what lies inside",
        )
    for index, part in enumerate(parts):
        if overlap(part.outlines, [hole]) is None:
            continue
        try:
            left = cut(part.outlines, [hole])
        except OutlineError:
            scope.report.error(
                "outline",
                line.target.span,
                f"the hole '{name}' touches an edge at one point",
                hint="move it clear of the edge, or across it",
            )
            return False
        if not left:
            scope.report.error(
                "nothing-left",
                line.target.span,
                f"the hole '{name}' leaves nothing of {_called(part)}",
                related=(Related(part.span, "all of this is cut"),),
            )
            return False
        parts[index] = replace(part, outlines=left, whole=False)
        if len(left) > len(part.outlines):
            notes.append(f"the hole {name} leaves {len(left)} pieces of {_called(part)}")
    return True


def _called(part: PlacedPart) -> str:
    return f"the part '{part.name}'" if part.name else "the shape"


def _bars(line: BarsLine, scope: Scope) -> PlacedBars | None:
    """Return the bars of a line, their parts yet to be found."""
    start, end = _point(line.start, scope), None
    if line.end is not None:
        end = _point(line.end, scope)
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
            label=f"{number_text(value, 6)} bars",
        )
        return None
    return round(value)


def _in_a_row(start: Point, end: Point, count: int) -> tuple[Point, ...]:
    shares = [i / (count - 1) for i in range(count)]
    return tuple((start[0] + s * (end[0] - start[0]), start[1] + s * (end[1] - start[1])) for s in shares)


def _in_their_parts(
    bars: PlacedBars, parts: list[PlacedPart], holes: list[Outline], scope: Scope
) -> PlacedBars:
    """Find the part in which each bar lies; warn of one that lies neither in a part nor in a hole."""
    hosts = []
    outside = []
    for point in bars.points:
        host = next((p.name for p in parts if any(o.contains(point) for o in p.outlines)), "")
        hosts.append(host)
        if not host and not any(hole.contains(point) for hole in holes):
            outside.append(point)
    if outside:
        what = "bar lies" if len(outside) == 1 else "bars lie"
        scope.report.warning(
            "bars-outside",
            bars.line.target.span,
            f"{len(outside)} {what} outside all parts",
            label=f"at {', '.join(point_text(p, scope.style) for p in outside[:3])}",
        )
    return replace(bars, hosts=tuple(hosts))


def _point(text: PointText, scope: Scope) -> Point | None:
    x, y = si(text.x, "length", scope), si(text.y, "length", scope)
    return None if x is None or y is None else (x, y)


def length_text(value: float, style: Style) -> str:
    """Return a length, m, as sections show it."""
    return show(from_si(value, "m").shown_in("in" if style.system == "US" else "mm"), style).text


def point_text(point: Point, style: Style) -> str:
    """Return a place in the section's own coordinates."""
    return f"({length_text(point[0], style)}, {length_text(point[1], style)})"

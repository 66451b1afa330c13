"""Parts, holes and bars of a section block -> outlines and points in place; faults at their lines."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.section_bars import PlacedBars, bars_in_parts, placed_bars
from calcgen.evaluation.blocks.shape import (
    length_text,
    placed_shape,
    point_text,
    profile_named,
    rolled_shape,
    shape_of,
)
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import (
    BarsLine,
    HoleLine,
    PartLine,
    SectionBlock,
    ShapeLine,
    ShapeText,
)
from calcgen.mechanics.boolean import cut, distance, overlap, share_outside
from calcgen.mechanics.outline import Outline, OutlineError, signed_area
from calcgen.mechanics.shapes import Shape
from calcgen.profiles.catalogue import Catalogue, Profile
from calcgen.quantities.display import number_text
from calcgen.text import Related, Span

SMALLEST = 1e-11  # m: of a smaller outline the powers that properties are lose digits
VANISHING = 1e-6  # of the section's reach: beside it a thinner outline has too few digits left


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
    rows = [placed_bars(line, scope) for line in block.items if isinstance(line, BarsLine)]
    found = [row for row in rows if row is not None]
    if not complete or len(found) < len(rows) or not _all_can_be_seen(parts, found, scope):
        return None
    bars = bars_in_parts(found, {part.name: part.outlines for part in parts}, holes, scope)
    return Layout(tuple(parts), bars, tuple(notes)) if bars is not None else None


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
    if placed is None or not _can_be_seen(placed.outline, _reach(placed.outline), text.span, scope):
        return None
    return placed, profile


def _all_can_be_seen(parts: Iterable[PlacedPart], bars: Iterable[PlacedBars], scope: Scope) -> bool:
    """Report the first part that vanishes beside the section."""
    outlines = [(outline, part.text.span) for part in parts for outline in part.outlines]
    reach = max([_reach(outline) for outline, _ in outlines] + [row.reach for row in bars])
    return all(_can_be_seen(outline, reach, span, scope) for outline, span in outlines)


def _can_be_seen(outline: Outline, reach: float, span: Span, scope: Scope) -> bool:
    """Report an outline too thin to leave digits beside a distance from the origin, m."""
    size = max(outline.bounds.width, outline.bounds.height)
    thickness = sum(signed_area(ring) for ring in outline.rings) / size if size else 0.0
    if size > SMALLEST and thickness > VANISHING * reach:
        return True
    style = scope.style
    beside = f"{length_text(thickness, style)} thick, the section reaches {length_text(reach, style)}"
    scope.report.error(
        "too-far-apart",
        span,
        "the shape is too small to be computed with",
        label=f"{beside} from its origin" if size > SMALLEST else f"its size is {length_text(size, style)}",
        hint="a unit or a power of ten may be wrong",
    )
    return False


def _reach(outline: Outline) -> float:
    """Return the largest coordinate of an outline, m."""
    box = outline.bounds
    return max(abs(box.left), abs(box.right), abs(box.bottom), abs(box.top))


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
    parted: list[str] = []
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
            parted.append(f"{len(left)} pieces of {_called(part)}")
    if parted:
        notes.append(f"the hole '{name}' leaves {', '.join(parted)}")
    return True


def _called(part: PlacedPart) -> str:
    return f"the part '{part.name}'" if part.name else "the shape"

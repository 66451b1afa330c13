"""A section with its parts and bars."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.results.common import Result, SecondRoute
from calcgen.language.nodes import Column
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.outline import Bounds, Outline
from calcgen.mechanics.section import Inertia, section_properties
from calcgen.mechanics.shapes import DimensionMark
from calcgen.mechanics.walls import Wall
from calcgen.quantities.display import Shown
from calcgen.text import Span


@dataclass(frozen=True)
class Published:
    """A catalogue's value beside the outline's own, and the difference relative to the published one."""

    name: str
    published: Shown
    outline: Shown
    difference: float
    tolerance: float


@dataclass(frozen=True)
class SectionPart:
    """A part of a section, as its holes leave it.

    Attributes
    ----------
    name : '' for the one shape of a section without parts.
    shape : word of the language; designation and source are set for a catalogued one.
    outlines : its pieces; holes can part it.
    walls : the mid-lines of a thin-walled shape, empty where it has none or a hole cuts it.
    material : '' where none is named.
    factor : its modulus over the reference modulus, 1 where no modulus is given.
    modulus, strength : of its material, Pa, where given.
    results : its own properties, under the names of the project's axes.
    """

    name: str
    shape: str
    designation: str
    source: str
    outlines: tuple[Outline, ...]
    marks: tuple[DimensionMark, ...]
    walls: tuple[Wall, ...]
    material: str
    factor: float
    modulus: float | None
    strength: float | None
    results: tuple[Result, ...] = ()


@dataclass(frozen=True)
class BarsPart:
    """Bars of one line: places, m, the area of each, m², and the part in which each lies ('' for none).

    `factor` is their modulus over the reference modulus; `results` has their area together.
    """

    name: str
    points: tuple[Point, ...]
    area: float
    diameter: float | None
    material: str
    factor: float
    modulus: float | None
    strength: float | None
    hosts: tuple[str, ...]
    results: tuple[Result, ...] = ()


@dataclass(frozen=True)
class SectionResult:
    """A section.

    Attributes
    ----------
    shape : word of the language, '' for a section of several parts; designation is set for a catalogued one.
    composite : whether it has several materials; areas and second moments are then transformed to the
        reference material, and a stress of a part is its `factor` times the reference stress.
    modulus : of the reference material, Pa, where given.
    published : what a catalogue or its table formulas give, beside the outline's own.
    computed : the properties of the outlines; transformed ones for a composite.
    values : the values in force in SI, published ones first, by keys neutral of convention (`I_h`).
    results : the properties under the names of the project's axes.
    further : the dimensions by their symbols.
    absent : names of properties that this section does not have -> the reason.
    notes : what a checker should know: separate pieces, parts cut by holes.
    lines : each line as typed, with its second and third column and its number.
    """

    name: str
    shape: str
    designation: str
    source: str
    parts: tuple[SectionPart, ...]
    bars: tuple[BarsPart, ...]
    composite: bool
    reference_material: str
    modulus: float | None
    computed: Inertia
    values: Mapping[str, float]
    results: tuple[Result, ...]
    further: tuple[Result, ...]
    absent: Mapping[str, str]
    published: tuple[Published, ...]
    second_route: tuple[SecondRoute, ...]
    notes: tuple[str, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span

    @property
    def owners(self) -> tuple[SectionPart | BarsPart, ...]:
        """The parts and the bars, which have properties of their own where they have names."""
        return (*self.parts, *self.bars)

    @property
    def area(self) -> float:
        """The area of all that is there, m²: the one in force, or that of parts and bars, not transformed."""
        if not self.composite:
            return self.values["A"]
        bare = sum(bars.area * bars.hosts.count("") for bars in self.bars)
        return section_properties(*self.outlines).area + bare

    @property
    def outlines(self) -> tuple[Outline, ...]:
        """The outlines of all parts."""
        return tuple(outline for part in self.parts for outline in part.outlines)

    @property
    def marks(self) -> tuple[DimensionMark, ...]:
        """The dimension marks of a section of one shape, or of the box around several parts."""
        if len(self.parts) == 1:
            return self.parts[0].marks
        box = self.bounds
        return (
            DimensionMark("h", box.height, (box.left, box.bottom), (box.left, box.top), "left"),
            DimensionMark("b", box.width, (box.left, box.bottom), (box.right, box.bottom), "bottom"),
        )

    @property
    def bounds(self) -> Bounds:
        """The box around all parts."""
        boxes = [outline.bounds for outline in self.outlines]
        return Bounds(
            min(box.left for box in boxes),
            min(box.bottom for box in boxes),
            max(box.right for box in boxes),
            max(box.top for box in boxes),
        )

    def contains(self, point: Point) -> bool:
        """Tell whether a point, m, lies in a part or on its edge."""
        return any(outline.contains(point) for outline in self.outlines)

"""What evaluation finds: the frozen types that figures, pages and the trail read."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.evaluation.blocks.beam_states import States
from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.language.blocks.inputs import Input
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.blocks.working import Check, Derivation
from calcgen.language.calc import Calc, FailedBlock, Prose
from calcgen.language.nodes import Column
from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.beam import BeamModel
from calcgen.mechanics.combined_stress import CombinedExtremes
from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.field import StressField
from calcgen.mechanics.outline import Bounds, Outline
from calcgen.mechanics.section import Inertia, section_properties
from calcgen.mechanics.shapes import DimensionMark
from calcgen.mechanics.shear import Cuts
from calcgen.mechanics.stress import Forces, StressPlane
from calcgen.mechanics.wall_shear import WallFlow, WallTorsion
from calcgen.mechanics.walls import Wall, WallSection
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure
from calcgen.text import Diagnostic, Span

Standing: TypeAlias = Literal["satisfied", "exceeded", "no checks", "not evaluated", "in error"]
Verdict: TypeAlias = Literal["met", "not met", "left to judgement"]
Plain: TypeAlias = Measure | str | bool
"""A value of a name: a quantity, a text or yes/no."""


@dataclass(frozen=True)
class Origin:
    """Where a fed value comes from: `stringer.ULS.R_1` of calc `W-07`."""

    calc: str
    name: str


@dataclass(frozen=True)
class Operand:
    """A name that stands in a formula and what was put in for it."""

    name: str
    shown: Shown


@dataclass(frozen=True)
class InputRow:
    """One input; `origin` is set where the value is taken from another calc."""

    name: str
    value: Plain
    shown: Shown
    origin: Origin | None
    node: Input
    line: int

    @property
    def referenced(self) -> bool:
        """Whether the third column says where the value comes from (a fed value says it itself)."""
        return self.origin is not None or bool(self.node.annotations.reference.text)


@dataclass(frozen=True)
class DerivedRow:
    """One derived value. `branch` is the index of the case taken, None where the formula has no cases."""

    name: str
    value: Plain
    shown: Shown
    operands: Mapping[str, Operand]
    branch: int | None
    node: Derivation
    line: int


@dataclass(frozen=True)
class CheckResult:
    """One check.

    Attributes
    ----------
    label : unique in its calc.
    demand, capacity : the sides such that utilisation = demand / capacity.
    left, right, operator : as written.
    utilisation : None against a literal zero; satisfied exactly when it is at most 1 (below 1 for < and >).
    origin : name of the block whose `limit` made it, '' for a line of working.
    address : anchor on the calc's page.
    """

    label: str
    left: Measure
    operator: str
    right: Measure
    left_shown: Shown
    right_shown: Shown
    demand: Measure
    capacity: Measure
    utilisation: float | None
    satisfied: bool
    note: Column
    reference: Column
    origin: str
    address: str
    line: int


@dataclass(frozen=True)
class CheckRow:
    """A check as a line of working."""

    result: CheckResult
    operands: Mapping[str, Operand]
    node: Check


@dataclass(frozen=True)
class FailedRow:
    """A line that could not be evaluated; its text as typed. No value is shown."""

    text: str
    name: str
    line: int


@dataclass(frozen=True)
class Result:
    """A named result of a block: `W_el_y`, `M_max`, `σ_max`.

    `meaning` is the quantity in words, with axis or sign: 'second moment of area about the horizontal axis'.
    `place` tells where an extreme stands, '' where that says nothing; `provenance` by which route a section's
    value was found ('published', 'from the outline', 'finite elements'), '' for other results.
    """

    name: str
    meaning: str
    value: Measure
    shown: Shown
    place: str = ""
    provenance: str = ""


@dataclass(frozen=True)
class Premise:
    """A condition under which the block's formulas are right."""

    of: str
    premise: str
    verdict: Verdict
    detail: str


@dataclass(frozen=True)
class SecondRoute:
    """A number found again by a route that shares no code; the residual is relative to `scale` (in words)."""

    of: str
    what: str
    residual: float
    tolerance: float
    scale: str

    @classmethod
    def found(cls, of: str, what: str, residual: float, tolerance: float, scale: str) -> SecondRoute:
        """Return a comparison; below 1e-12 lies rounding that differs between machines, taken as none."""
        small = abs(residual) < 1e-12
        return cls(of, what, 0.0 if small else float(f"{residual:.2e}"), tolerance, scale)

    @property
    def holds(self) -> bool:
        """Whether the two routes agree within the tolerance."""
        return abs(self.residual) <= self.tolerance


@dataclass(frozen=True)
class ProseResult:
    """Prose, and what stands for each of its places (None where the name has no value)."""

    prose: Prose
    values: tuple[Shown | None, ...]


@dataclass(frozen=True)
class SheetResult:
    """The sheet, its texts with values put in."""

    block: SheetBlock
    texts: Mapping[str, str]


@dataclass(frozen=True)
class AssumptionsResult:
    """Assumptions need no evaluation."""

    block: AssumptionsBlock


@dataclass(frozen=True)
class InputsResult:
    """Inputs in the order typed."""

    rows: tuple[InputRow | FailedRow, ...]
    span: Span


@dataclass(frozen=True)
class WorkingResult:
    """Working in the order typed."""

    rows: tuple[DerivedRow | CheckRow | FailedRow, ...]
    span: Span


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


@dataclass(frozen=True)
class CombinationResult:
    """One combination with the factor of each case, its states, and every named result of it."""

    name: str
    factors: Mapping[str, float]
    states: States
    results: tuple[Result, ...]


@dataclass(frozen=True)
class GroupResult:
    """A group of combinations ('' is the beam itself: all cases together).

    `results` are shown in its table; `further` are the same under names that the table does not use.
    """

    name: str
    combinations: tuple[CombinationResult, ...]
    states: States
    results: tuple[Result, ...]
    further: tuple[Result, ...]


@dataclass(frozen=True)
class LoadRow:
    """One load as shown: '5.0 kN/m from 6 m to 14 m'; `label` its size alone; `values` in SI, places in m.

    A train has the load of each axle in `values`, and `number` counts the trains of its case, from 0.
    """

    case: str
    kind: str
    plane: Literal["vertical", "lateral"]
    text: str
    label: str
    values: tuple[float, ...]
    start: float
    end: float
    note: Column
    reference: Column
    line: int
    number: int = 0


@dataclass(frozen=True)
class BeamResult:
    """A beam with its model, loads, and results by group; numbers in SI.

    `spans` are the stretches of the `span` line, from and to; `support_kinds` has the word of each support of
    the model, `support_notes` how it settles; `patterned` the cases that act on adverse spans alone; `lines`
    each line as typed, with its columns.
    """

    name: str
    section: str
    model: BeamModel
    spans: tuple[tuple[float, float], ...]
    support_kinds: tuple[str, ...]
    support_notes: tuple[str, ...]
    case_kinds: Mapping[str, str]
    patterned: frozenset[str]
    loads: tuple[LoadRow, ...]
    groups: tuple[GroupResult, ...]
    settings: tuple[Result, ...]
    restrained: bool | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span


@dataclass(frozen=True, eq=False)
class PlasticResult:
    """What a section carries when it yields throughout, under the axial force given.

    Attributes
    ----------
    M, M_lat : plastic moments, N·m, in the proportion and with the signs of those given.
    M_el : moment at first yield without axial force, N·m, signed where one moment acts alone; None where a
        part carries no tension, so that nothing is elastic throughout.
    M_0 : the plastic moment without axial force, N·m, never negative.
    utilisation : the moment given over the plastic one.
    field : the stress blocks. interaction : axial force, N, and moment, N·m, (n, 2), around the limit about
        the axis of the moment given; None where both moments act.
    """

    M: float
    M_lat: float
    M_el: float | None
    M_0: float
    utilisation: float
    field: StressField
    forces: Forces
    interaction: FloatArray | None


@dataclass(frozen=True, eq=False)
class ShearResult:
    """Shear stress under V, V_lat and T.

    Attributes
    ----------
    level, upright : flow across level and upright cuts.
    walls : mid-line properties of a thin-walled shape, and `flow` and `torsion` along it; None for others.
    torsion_method : how the stress of the torque was found, '' without one.
    largest_torsion : stress of the torque alone, Pa, its place, m, and its direction; None along walls.
    joints : flow that the joints of each part carry, N/m; contacts : the lines along which it touches
        others, m; connected : whether all parts hang together.
    at : shear stress at a point, m -> Pa.
    """

    level: Cuts
    upright: Cuts
    walls: WallSection | None
    flow: WallFlow | None
    torsion: WallTorsion | None
    torsion_method: str
    largest_torsion: tuple[float, Point, Point] | None
    combined: CombinedExtremes
    joints: Mapping[str, float]
    contacts: Mapping[str, tuple[tuple[Point, ...], ...]]
    connected: bool
    at: Callable[[Point], float]


@dataclass(frozen=True)
class StressResult:
    """The stress of a section under given forces.

    Attributes
    ----------
    model : word of the language.
    forces, V, V_lat, T : in SI; forces_shown has those written, in the unit given.
    field : normal stress; of the straight bar where `curved` is set.
    unloaded : what an elastic unloading leaves, for the elastic-plastic model.
    modulus : of the reference stress, Pa, None where strains are not known.
    results : of the section; parts : of each part, line of bars and point, by its name.
    shear : None where no shear force or torque acts.
    """

    name: str
    section: SectionResult
    model: str
    forces: Forces
    V: float
    V_lat: float
    T: float
    forces_shown: Mapping[str, Shown]
    field: StressField
    curved: CurvedStress | None
    unloaded: StressField | None
    plastic: PlasticResult | None
    shear: ShearResult | None
    modulus: float | None
    results: tuple[Result, ...]
    parts: Mapping[str, tuple[Result, ...]]
    points: Mapping[str, Point]
    check: CheckResult | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    line: int
    span: Span

    @property
    def plane(self) -> StressPlane:
        """The plane of reference stress."""
        return self.field.plane


@dataclass(frozen=True)
class TableHead:
    """The head of a row or column: a text, or a quantity as typed."""

    value: Measure | str
    shown: Shown


@dataclass(frozen=True)
class TableCell:
    """A value of a table, as typed."""

    value: Measure
    shown: Shown


@dataclass(frozen=True)
class TableResult:
    """A table.

    Attributes
    ----------
    reference : where it comes from, empty where its head does not say it.
    rows, columns : heads, in each all texts or all quantities of one dimension in rising or falling order.
    cells : by row, one a column; None where a cell is empty.
    """

    name: str
    reference: Column
    rows: tuple[TableHead, ...]
    columns: tuple[TableHead, ...]
    cells: tuple[tuple[TableCell | None, ...], ...]
    line: int
    span: Span


@dataclass(frozen=True)
class Lookup:
    """A place where a value of a table is looked up.

    Attributes
    ----------
    arguments : what is looked up, for the rows and for the columns; the latter may be left out.
    rows, columns : indices of the heads found, one each or the two that an argument lies between.
    span : of the call in the calc's text.
    """

    table: str
    arguments: tuple[Shown, ...]
    rows: tuple[int, ...]
    columns: tuple[int, ...]
    value: Shown
    span: Span


@dataclass(frozen=True)
class VaryRun:
    """A calc evaluated once with another value of the input.

    Attributes
    ----------
    shown : the value, a designation or a number in the unit of its column.
    mass : of the section, where the input names one whose mass is published; `mass_shown` with it.
    values, texts : of each expression in the unit of its column; None and '—' where there is none.
    fault : what the first error says, '' where the run has none.
    checked : whether the run has checks and no error; `satisfied` is whether every one of them is satisfied.
    governing : label and utilisation of the check that governs; the latter may be None.
    present, lightest : whether it has the present value; whether it is the lightest, or one of them, that
        satisfies every check.
    """

    value: Plain
    shown: Shown
    mass: Measure | None
    mass_shown: Shown | None
    values: tuple[Measure | None, ...]
    texts: tuple[str, ...]
    fault: str
    checked: bool
    satisfied: bool
    governing: tuple[str, float | None] | None
    present: bool
    lightest: bool = False


@dataclass(frozen=True)
class VaryResult:
    """A calc repeated over the values of one input.

    Attributes
    ----------
    name : the block's anchor, which no name can be: 'vary-L'.
    input, unit : what is varied, and the unit its values are shown in; '' for sections.
    present : its value in the calc.
    pattern : of the designations tried, '' where a quantity is varied.
    heads : the expressions as typed; units : those of their columns.
    lines : each line as typed, with its columns and its number.
    """

    name: str
    input: str
    unit: str
    present: Plain
    pattern: str
    heads: tuple[str, ...]
    units: tuple[str, ...]
    runs: tuple[VaryRun, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span


Segment: TypeAlias = (
    ProseResult
    | SheetResult
    | AssumptionsResult
    | InputsResult
    | WorkingResult
    | SectionResult
    | BeamResult
    | StressResult
    | TableResult
    | VaryResult
    | FailedBlock
)


@dataclass(frozen=True, eq=False)
class EvaluatedCalc:
    """A calc with everything that could be evaluated.

    Attributes
    ----------
    segments : the results in the order of `calc.segments`; a FailedBlock where a block failed.
    values : every name that has a value, with its Shown.
    depends : the values taken from other calcs.
    reason : why it is not evaluated, '' otherwise.
    lookups : where its tables are looked up, in the order of the text, cases not taken left out.
    """

    calc: Calc
    segments: tuple[Segment, ...]
    values: Mapping[str, tuple[Plain, Shown]]
    checks: tuple[CheckResult, ...]
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    depends: tuple[Origin, ...]
    diagnostics: tuple[Diagnostic, ...]
    standing: Standing
    reason: str = ""
    lookups: tuple[Lookup, ...] = ()

    @property
    def number(self) -> str:
        """The calc's number."""
        return self.calc.number

    @property
    def governing(self) -> CheckResult | None:
        """The check with the greatest utilisation; an exceeded one before all others."""
        ranked = [c for c in self.checks if c.utilisation is not None or not c.satisfied]
        return max(ranked, key=lambda c: (not c.satisfied, c.utilisation or 0.0), default=None)

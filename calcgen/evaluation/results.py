"""What evaluation finds: the frozen types that figures, pages and the trail read."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.language.blocks.inputs import Input
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.blocks.working import Check, Derivation
from calcgen.language.calc import Calc, FailedBlock, Prose
from calcgen.language.nodes import Column
from calcgen.mechanics.beam import BeamModel, CaseSolution
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.section import SectionProperties
from calcgen.mechanics.shapes import DimensionMark
from calcgen.mechanics.stress import Forces, StressPlane
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
    `place` tells where an extreme stands, '' where that says nothing; `provenance` whether a catalogue
    published the value or the outline gave it, '' where the question does not arise.
    """

    name: str
    meaning: str
    value: Measure
    shown: Shown
    place: str = ""
    provenance: Literal["published", "outline", ""] = ""


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
class SectionResult:
    """A section.

    Attributes
    ----------
    shape : word of the language; designation is set for a catalogued section.
    published : what a catalogue gives, beside the outline's own.
    computed : properties of the outline.
    values : the values in force in SI, published ones first, by keys neutral of convention (`I_h`).
    results : the properties under the names of the project's axes.
    further : the shape's dimensions by their symbols.
    """

    name: str
    shape: str
    designation: str
    source: str
    outline: Outline
    marks: tuple[DimensionMark, ...]
    computed: SectionProperties
    values: Mapping[str, float]
    results: tuple[Result, ...]
    further: tuple[Result, ...]
    published: tuple[Published, ...]
    second_route: tuple[SecondRoute, ...]
    note: Column
    reference: Column
    line: int
    span: Span


@dataclass(frozen=True)
class CombinationResult:
    """One combination with the factor of each case, its solution, and every named result of it."""

    name: str
    factors: Mapping[str, float]
    solution: CaseSolution
    results: tuple[Result, ...]


@dataclass(frozen=True)
class GroupResult:
    """A group of combinations ('' is the beam itself: all cases together).

    `results` are shown in its table; `further` are the same under names that the table does not use.
    """

    name: str
    combinations: tuple[CombinationResult, ...]
    results: tuple[Result, ...]
    further: tuple[Result, ...]


@dataclass(frozen=True)
class LoadRow:
    """One load as shown: '5.0 kN/m from 6 m to 14 m'; `label` its size alone; `values` in SI, places in m."""

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


@dataclass(frozen=True)
class BeamResult:
    """A beam with its model, loads, and results by group; numbers in SI.

    `spans` are the stretches of the `span` line, from and to; `support_kinds` has the word of each support of
    the model, `support_notes` how it settles; `lines` each line as typed, with its columns.
    """

    name: str
    section: str
    model: BeamModel
    spans: tuple[tuple[float, float], ...]
    support_kinds: tuple[str, ...]
    support_notes: tuple[str, ...]
    case_kinds: Mapping[str, str]
    loads: tuple[LoadRow, ...]
    groups: tuple[GroupResult, ...]
    settings: tuple[Result, ...]
    restrained: bool | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span


@dataclass(frozen=True)
class StressResult:
    """The normal stress of a section under N, M and M_lat."""

    name: str
    section: SectionResult
    forces: Forces
    forces_shown: Mapping[str, Shown]
    plane: StressPlane
    modulus: float | None
    results: tuple[Result, ...]
    points: Mapping[str, tuple[float, float]]
    check: CheckResult | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
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

    @property
    def number(self) -> str:
        """The calc's number."""
        return self.calc.number

    @property
    def governing(self) -> CheckResult | None:
        """The check with the greatest utilisation; an exceeded one before all others."""
        ranked = [c for c in self.checks if c.utilisation is not None or not c.satisfied]
        return max(ranked, key=lambda c: (not c.satisfied, c.utilisation or 0.0), default=None)

"""Inputs, working with its checks, sheet, assumptions and prose."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.results.common import FedBlock, Operand, Origin, Plain
from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.language.blocks.inputs import Input
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.blocks.working import Check, Derivation
from calcgen.language.calc import Prose
from calcgen.language.nodes import Column
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure
from calcgen.text import Span


@dataclass(frozen=True)
class InputRow:
    """One input; `origin` is set where the value, or the block, is taken from another calc."""

    name: str
    value: Plain | FedBlock
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

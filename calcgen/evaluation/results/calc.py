"""An evaluated calc."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TypeAlias

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.common import Origin, Plain, Premise, SecondRoute, Standing
from calcgen.evaluation.results.lines import (
    AssumptionsResult,
    CheckResult,
    InputsResult,
    ProseResult,
    SheetResult,
    WorkingResult,
)
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import Lookup, TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.calc import Calc, FailedBlock
from calcgen.quantities.display import Shown
from calcgen.text import Diagnostic

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


@dataclass(frozen=True)
class Hindrance:
    """A calc that should feed another and cannot; `root` is in error where `calc` itself is not evaluated."""

    calc: str
    standing: Standing
    root: str

    @property
    def words(self) -> str:
        """It with places for the numbers: '{calc}, which feeds it, is not evaluated because {root} is …'."""
        because = " because {root} is in error" if self.root != self.calc else ""
        return f"{{calc}}, which feeds it, is {self.standing}{because}"

    @property
    def text(self) -> str:
        """It in words: 'W-12, which feeds it, is not evaluated because W-07 is in error'."""
        return self.words.format(calc=self.calc, root=self.root)


@dataclass(frozen=True, eq=False)
class EvaluatedCalc:
    """A calc with everything that could be evaluated.

    Attributes
    ----------
    segments : the results in the order of `calc.segments`; a FailedBlock where a block failed.
    values : every name that has a value, with its Shown.
    depends : what is taken from other calcs.
    reason : why it is not evaluated, '' otherwise.
    lookups : where its tables are looked up, in the order of the text, cases not taken left out.
    hindrances : the calcs in error, or not evaluated, that should feed it.
    """

    calc: Calc
    segments: tuple[Segment, ...]
    values: Mapping[str, tuple[Plain, Shown]]
    checks: tuple[CheckResult, ...]
    premises: tuple[Premise, ...]
    depends: tuple[Origin, ...]
    diagnostics: tuple[Diagnostic, ...]
    standing: Standing
    reason: str = ""
    lookups: tuple[Lookup, ...] = ()
    hindrances: tuple[Hindrance, ...] = ()

    @property
    def second_route(self) -> tuple[SecondRoute, ...]:
        """What the second route finds of every block."""
        kinds = SectionResult | BeamResult | StressResult
        return tuple(r for s in self.segments if isinstance(s, kinds) for r in s.second_route)

    @property
    def number(self) -> str:
        """The calc's number."""
        return self.calc.number

    @property
    def governing(self) -> CheckResult | None:
        """The check with the greatest utilisation; an exceeded one before all others."""
        ranked = [c for c in self.checks if c.utilisation is not None or not c.satisfied]
        return max(ranked, key=lambda c: (not c.satisfied, c.utilisation or 0.0), default=None)

"""One calc from top to bottom, and all calcs of a project in order."""

from __future__ import annotations

from collections.abc import Hashable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Literal

from calcgen.evaluation.blocks.beam import evaluate_beam
from calcgen.evaluation.blocks.inputs import evaluate_inputs
from calcgen.evaluation.blocks.prose import evaluate_prose, evaluate_sheet
from calcgen.evaluation.blocks.section import evaluate_section
from calcgen.evaluation.blocks.stress import evaluate_stress
from calcgen.evaluation.blocks.table import evaluate_table
from calcgen.evaluation.blocks.vary import evaluate_vary
from calcgen.evaluation.blocks.working import evaluate_working
from calcgen.evaluation.checks import Labels
from calcgen.evaluation.citations import check_citations
from calcgen.evaluation.formulas import shown
from calcgen.evaluation.lookups import lookups_of
from calcgen.evaluation.order import feeds_of, in_order
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc, Segment
from calcgen.evaluation.results.common import Origin, Plain, Premise, SecondRoute, Standing
from calcgen.evaluation.results.lines import AssumptionsResult, CheckResult, CheckRow, WorkingResult
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.language.blocks.beam import BeamBlock
from calcgen.language.blocks.inputs import InputsBlock
from calcgen.language.blocks.section import SectionBlock
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.blocks.stress import StressBlock
from calcgen.language.blocks.table import TableBlock
from calcgen.language.blocks.vary import VaryBlock
from calcgen.language.blocks.working import Derivation, WorkingBlock
from calcgen.language.calc import Block, Calc, FailedBlock, Prose
from calcgen.profiles.catalogue import Catalogue
from calcgen.quantities.display import Style
from calcgen.text import Diagnostic, Report


@dataclass(frozen=True)
class Setting:
    """What a project gives to each of its calcs."""

    axes: Literal["eurocode", "american"]
    style: Style
    catalogue: Catalogue
    references: frozenset[str] = field(default_factory=frozenset)


class Memory:
    """Evaluated calcs by what they were evaluated from: one that nothing touched is not evaluated again."""

    def __init__(self) -> None:
        self._setting: Setting | None = None
        self._kept: dict[str, tuple[Hashable, EvaluatedCalc, Scope]] = {}

    def prepare(self, setting: Setting) -> None:
        """Forget everything where the project's setting is another one."""
        if setting != self._setting:
            self._setting = setting
            self._kept.clear()

    def key(self, calc: Calc, upstream: Iterable[str]) -> Hashable:
        """Return what the evaluation of a calc depends on: its text, and the keys of what feeds it."""
        return (calc.source, tuple(self._kept[n][0] for n in sorted(upstream) if n in self._kept))

    def recall(self, number: str, key: Hashable) -> tuple[EvaluatedCalc, Scope] | None:
        """Return the calc evaluated under this key."""
        kept = self._kept.get(number)
        return (kept[1], kept[2]) if kept is not None and kept[0] == key else None

    def keep(self, key: Hashable, result: EvaluatedCalc, scope: Scope) -> None:
        """Remember an evaluated calc."""
        self._kept[result.number] = (key, result, scope)


def evaluate_all(
    calcs: Sequence[Calc], setting: Setting, memory: Memory | None = None
) -> tuple[EvaluatedCalc, ...]:
    """Evaluate calcs, those that feed others first; returned in the order of their numbers."""
    memory = memory or Memory()
    memory.prepare(setting)
    order = in_order(calcs)
    scopes: dict[str, Scope] = {}
    done: dict[str, EvaluatedCalc] = {}
    for calc in order.cyclic:
        found = tuple(d for d in order.diagnostics if d.source == calc.source)
        done[calc.number] = not_evaluated(calc, "it is part of a loop of calcs that feed each other", found)
    for calc in order.calcs:
        broken = sorted(
            {
                f.calc
                for f in feeds_of(calc)
                if f.calc in done and done[f.calc].standing in ("in error", "not evaluated")
            }
        )
        if broken:
            reasons = (f"{n}, which feeds it, is {done[n].standing}" for n in broken)
            done[calc.number] = not_evaluated(calc, "; ".join(reasons), ())
            continue
        key = memory.key(calc, {f.calc for f in feeds_of(calc)})
        result, scope = memory.recall(calc.number, key) or evaluate_calc(calc, setting, scopes)
        memory.keep(key, result, scope)
        done[calc.number], scopes[calc.number] = result, scope
    return tuple(done[n] for n in sorted(done))


def not_evaluated(calc: Calc, reason: str, found: tuple[Diagnostic, ...]) -> EvaluatedCalc:
    """Return a calc of which nothing is evaluated; one with errors of its own is in error."""
    diagnostics = calc.diagnostics + found
    failed = any(d.severity == "error" for d in diagnostics)
    standing: Standing = "in error" if failed else "not evaluated"
    return EvaluatedCalc(calc, (), {}, (), (), (), (), diagnostics, standing, reason)


def evaluate_calc(
    calc: Calc, setting: Setting, upstream: Mapping[str, Scope], replaced: Mapping[str, Plain] | None = None
) -> tuple[EvaluatedCalc, Scope]:
    """Evaluate one calc.

    `upstream` holds the scopes of the calcs that may feed it, `replaced` the values of inputs that have
    others than are written.
    """
    report = Report(calc.source)
    scope = Scope(report, setting.style, failed=set(calc.failed_names), later=_defined_names(calc))
    labels = Labels()
    found: dict[int, Segment] = {}
    for index, segment in enumerate(calc.segments):
        if not isinstance(segment, _TOLD):
            found[index] = _evaluate_block(segment, scope, labels, setting, upstream, replaced or {})
    for index, segment in enumerate(calc.segments):
        if isinstance(segment, Prose):
            found[index] = evaluate_prose(segment, scope)
        elif isinstance(segment, SheetBlock):
            found[index] = evaluate_sheet(segment, scope)
    check_citations(calc, setting.references, report)
    _report_residuals(tuple(found.values()), report)
    once = replace(calc, segments=tuple(s for s in calc.segments if not isinstance(s, _TOLD)))
    for index, segment in enumerate(calc.segments):
        if isinstance(segment, VaryBlock):
            found[index] = evaluate_vary(
                segment, calc, scope, setting.catalogue, lambda r: evaluate_calc(once, setting, upstream, r)
            )
    segments = tuple(found[i] for i in range(len(calc.segments)))
    second_route = _second_route(segments)
    diagnostics = tuple(sorted({*calc.diagnostics, *report.diagnostics}, key=lambda d: d.order))
    checks = _checks(segments)
    result = EvaluatedCalc(
        calc=calc,
        segments=segments,
        values={name: (value, shown(value, scope)) for name, value in scope.values.items()},
        checks=checks,
        premises=_premises(segments),
        second_route=second_route,
        depends=tuple(Origin(f.calc, f.name.dotted) for f in feeds_of(calc)),
        diagnostics=diagnostics,
        standing=_standing(checks, diagnostics),
        lookups=lookups_of(calc, segments, scope),
    )
    return result, scope


_TOLD = Prose | SheetBlock | VaryBlock
"""Segments that define nothing and are evaluated when the rest is known; a calc is repeated without them."""


def _evaluate_block(
    segment: Block | FailedBlock,
    scope: Scope,
    labels: Labels,
    setting: Setting,
    upstream: Mapping[str, Scope],
    replaced: Mapping[str, Plain],
) -> Segment:
    match segment:
        case AssumptionsBlock():
            return AssumptionsResult(segment)
        case InputsBlock():
            return evaluate_inputs(segment, scope, upstream, replaced)
        case WorkingBlock():
            return evaluate_working(segment, scope, labels)
        case SectionBlock():
            return evaluate_section(segment, scope, setting.axes, setting.catalogue)
        case BeamBlock():
            return evaluate_beam(segment, scope)
        case StressBlock():
            return evaluate_stress(segment, scope, labels)
        case TableBlock():
            return evaluate_table(segment, scope)
        case FailedBlock():
            return segment
    raise AssertionError(segment)


def _defined_names(calc: Calc) -> frozenset[str]:
    names: set[str] = set()
    for block in calc.segments:
        match block:
            case InputsBlock():
                names.update(i.target.name for i in block.items)
            case WorkingBlock():
                names.update(i.target.name for i in block.items if isinstance(i, Derivation))
            case SectionBlock() | BeamBlock() | StressBlock() | TableBlock():
                names.add(block.target.name)
            case _:
                pass
    return frozenset(names)


def _checks(segments: Sequence[Segment]) -> tuple[CheckResult, ...]:
    checks: list[CheckResult] = []
    for segment in segments:
        if isinstance(segment, WorkingResult):
            checks += [row.result for row in segment.rows if isinstance(row, CheckRow)]
        elif isinstance(segment, StressResult) and segment.check is not None:
            checks.append(segment.check)
    return tuple(checks)


def _premises(segments: Sequence[Segment]) -> tuple[Premise, ...]:
    return tuple(p for s in segments if isinstance(s, BeamResult | StressResult) for p in s.premises)


def _second_route(segments: Sequence[Segment]) -> tuple[SecondRoute, ...]:
    kinds = SectionResult | BeamResult | StressResult
    return tuple(r for s in segments if isinstance(s, kinds) for r in s.second_route)


def _report_residuals(segments: Sequence[Segment], report: Report) -> None:
    """Report each number that the second route does not find again: an error of the calc."""
    for segment in segments:
        if isinstance(segment, SectionResult | BeamResult | StressResult):
            for row in segment.second_route:
                if not row.holds:
                    report.error(
                        "residual",
                        segment.span,
                        f"the second route does not find {row.what} of '{row.of}' again: "
                        f"residual {row.residual:.2e}, tolerance {row.tolerance:.0e} of {row.scale}",
                        hint="do not use these results; the outline, the data or the program is at fault",
                    )


def _standing(checks: Sequence[CheckResult], diagnostics: Sequence[Diagnostic]) -> Standing:
    if any(d.severity == "error" for d in diagnostics):
        return "in error"
    if not checks:
        return "no checks"
    return "satisfied" if all(c.satisfied for c in checks) else "exceeded"

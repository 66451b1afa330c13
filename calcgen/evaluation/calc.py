"""One calc from top to bottom, and all calcs of a project in order."""

from __future__ import annotations

from collections.abc import Hashable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Literal

from calcgen.evaluation.blocks.beam import evaluate_beam
from calcgen.evaluation.blocks.fed import Upstream, source_of
from calcgen.evaluation.blocks.inputs import evaluate_inputs, origin_of
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
from calcgen.evaluation.residuals import report_residuals
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc, Hindrance, Segment
from calcgen.evaluation.results.common import Plain, Premise, Standing
from calcgen.evaluation.results.lines import AssumptionsResult, CheckResult, CheckRow, WorkingResult
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

    def recall(self, number: str, key: Hashable) -> tuple[EvaluatedCalc, Scope] | None:
        """Return the calc evaluated under this key."""
        kept = self._kept.get(number)
        return (kept[1], kept[2]) if kept is not None and kept[0] == key else None

    def keep(self, key: Hashable, result: EvaluatedCalc, scope: Scope) -> None:
        """Remember an evaluated calc."""
        self._kept[result.number] = (key, result, scope)


def evaluate_all(
    calcs: Sequence[Calc],
    setting: Setting,
    memory: Memory | None = None,
    unread: frozenset[str] = frozenset(),
) -> tuple[EvaluatedCalc, ...]:
    """Evaluate calcs, those that feed others first; returned in the order of their numbers.

    A calc on a loop, or fed by one that is in error or not evaluated, is not evaluated itself. `unread` are
    the numbers of calcs whose files cannot be read.
    """
    memory = memory or Memory()
    memory.prepare(setting)
    order = in_order(calcs)
    scopes: dict[str, Scope] = {}
    done: dict[str, EvaluatedCalc] = {}
    numbers = frozenset(calc.number for calc in calcs)
    for calc, found, reason in order.faulty:
        done[calc.number] = not_evaluated(calc, found, reason)
    for calc in order.calcs:
        feeders = sorted({feed.calc for feed in feeds_of(calc)})
        hindrances = tuple(h for n in feeders if n in done for h in [_hindrance(done[n])] if h is not None)
        if hindrances:
            reason = "; ".join(h.text for h in hindrances)
            found = _of_other_feeds(calc, hindrances, Upstream(calc.number, scopes, numbers, unread))
            done[calc.number] = not_evaluated(calc, found, reason, hindrances)
            continue
        key = _depends_on(calc, tuple((n, done.get(n)) for n in feeders), (numbers, unread))
        result, scope = memory.recall(calc.number, key) or evaluate_calc(
            calc, setting, Upstream(calc.number, scopes, numbers, unread)
        )
        memory.keep(key, result, scope)
        done[calc.number], scopes[calc.number] = result, scope
    return tuple(done[n] for n in sorted(done))


def _of_other_feeds(
    calc: Calc, hindrances: Sequence[Hindrance], upstream: Upstream
) -> tuple[Diagnostic, ...]:
    """Return the faults of what a calc that is not evaluated takes from calcs that do not hinder it."""
    report = Report(calc.source)
    hindering = {hindrance.calc for hindrance in hindrances}
    for feed in feeds_of(calc):
        if feed.calc not in hindering:
            source_of(feed, report, upstream)
    return report.diagnostics


def _depends_on(
    calc: Calc, feeders: tuple[tuple[str, EvaluatedCalc | None], ...], known: Hashable
) -> Hashable:
    """Return what an evaluation depends on: the calc's text, and what feeds it as it was evaluated.

    Where a feeder does not exist, the fault that tells it depends on the numbers that are `known`.
    """
    missing = any(feeder is None for _, feeder in feeders)
    return (calc.source, feeders, known if missing else None)


def _hindrance(feeder: EvaluatedCalc) -> Hindrance | None:
    """Return why a calc cannot feed others, None where it can."""
    if feeder.standing == "in error":
        return Hindrance(feeder.number, feeder.standing, feeder.number)
    if feeder.standing == "not evaluated":
        return Hindrance(feeder.number, feeder.standing, feeder.hindrances[0].root)
    return None


def not_evaluated(
    calc: Calc, found: tuple[Diagnostic, ...], reason: str, hindrances: tuple[Hindrance, ...] = ()
) -> EvaluatedCalc:
    """Return a calc of which nothing is evaluated; one with errors of its own is in error."""
    diagnostics = calc.diagnostics + found
    failed = any(d.severity == "error" for d in diagnostics)
    return EvaluatedCalc(
        calc=calc,
        segments=(),
        values={},
        checks=(),
        premises=(),
        depends=tuple(origin_of(f, calc.source) for f in feeds_of(calc)),
        diagnostics=diagnostics,
        standing="in error" if failed else "not evaluated",
        reason=reason,
        hindrances=hindrances,
    )


def evaluate_calc(
    calc: Calc, setting: Setting, upstream: Upstream, replaced: Mapping[str, Plain] | None = None
) -> tuple[EvaluatedCalc, Scope]:
    """Evaluate one calc; `replaced` holds the values of inputs that have others than are written.

    Of a calc with replaced values the second route is not asked here: it goes by what is read of the calc,
    and whoever reads it asks. Its beams have no premises and warn of nothing, as nobody reads that.
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
    if not replaced:
        report_residuals(tuple(found.values()), report)
    once = replace(calc, segments=tuple(s for s in calc.segments if not isinstance(s, _TOLD)))
    for index, segment in enumerate(calc.segments):
        if isinstance(segment, VaryBlock):
            found[index] = evaluate_vary(
                segment, calc, scope, setting.catalogue, lambda r: evaluate_calc(once, setting, upstream, r)
            )
    segments = tuple(found[i] for i in range(len(calc.segments)))
    diagnostics = tuple(sorted({*calc.diagnostics, *report.diagnostics}, key=lambda d: d.order))
    checks = _checks(segments)
    result = EvaluatedCalc(
        calc=calc,
        segments=segments,
        values={name: (value, shown(value, scope)) for name, value in scope.values.items()},
        checks=checks,
        premises=_premises(segments),
        depends=tuple(origin_of(f, calc.source) for f in feeds_of(calc)),
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
    upstream: Upstream,
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
            return evaluate_beam(segment, scope, repeated=bool(replaced))
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


def _standing(checks: Sequence[CheckResult], diagnostics: Sequence[Diagnostic]) -> Standing:
    if any(d.severity == "error" for d in diagnostics):
        return "in error"
    if not checks:
        return "no checks"
    return "satisfied" if all(c.satisfied for c in checks) else "exceeded"

"""`working`: derived values and checks."""

from __future__ import annotations

from calcgen.evaluation.cases import evaluate
from calcgen.evaluation.checks import Labels, judge, read_sides
from calcgen.evaluation.formulas import shown, with_unit
from calcgen.evaluation.operands import operands_of
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, FailedRow, WorkingResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.working import Check, Derivation, WorkingBlock


def evaluate_working(block: WorkingBlock, scope: Scope, labels: Labels) -> WorkingResult:
    """Define the derived values and judge the checks of a block; `labels` grows over the calc."""
    rows = tuple(
        _derive(item, scope) if isinstance(item, Derivation) else _check(item, scope, labels)
        for item in block.items
    )
    return WorkingResult(rows, block.span)


def _derive(item: Derivation, scope: Scope) -> DerivedRow | FailedRow:
    name = item.target.name
    line = scope.report.source.line_number(item.span)
    value, branch = evaluate(item.formula, scope)
    if value is not None:
        value = with_unit(value, item.unit, scope.report)
    free = scope.define(item.target)
    if value is None or not free:
        if free:
            scope.failed.add(name)
        return FailedRow(scope.report.source.slice(item.statement_span), name, line)
    operands = operands_of(item.formula, scope)
    scope.values[name] = value
    return DerivedRow(name, value, shown(value, scope), operands, branch, item, line)


def _check(item: Check, scope: Scope, labels: Labels) -> CheckRow | FailedRow:
    line = scope.report.source.line_number(item.span)
    statement = read_sides(item.comparison, scope)
    label = item.annotations.note.text or item.statement
    address = labels.claim(label, item.statement_span, scope)
    if statement is None or address is None:
        return FailedRow(scope.report.source.slice(item.statement_span), "", line)
    result = judge(
        statement,
        scope,
        label=label,
        note=item.annotations.note,
        reference=item.annotations.reference,
        origin="",
        address=address,
        line=line,
    )
    return CheckRow(result, operands_of(item.comparison, scope), item)

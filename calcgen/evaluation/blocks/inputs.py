"""`inputs`: literals, and values taken from other calcs."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.evaluation.formulas import Evaluator, shown, with_unit
from calcgen.evaluation.results.common import Origin, Plain
from calcgen.evaluation.results.lines import FailedRow, InputRow, InputsResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.inputs import Feed, Input, InputsBlock
from calcgen.text import nearest


def evaluate_inputs(
    block: InputsBlock, scope: Scope, upstream: Mapping[str, Scope], replaced: Mapping[str, Plain]
) -> InputsResult:
    """Define the inputs of a block; those `replaced` have other values than are written."""
    return InputsResult(tuple(_row(item, scope, upstream, replaced) for item in block.items), block.span)


def _row(
    item: Input, scope: Scope, upstream: Mapping[str, Scope], replaced: Mapping[str, Plain]
) -> InputRow | FailedRow:
    name = item.target.name
    line = scope.report.source.line_number(item.span)
    free = scope.define(item.target)
    value: Plain | None
    origin: Origin | None = None
    if name in replaced:
        value = replaced[name]
    elif isinstance(item.value, Feed):
        value = fed_value(item.value, scope, upstream)
        origin = Origin(item.value.calc, item.value.name.dotted)
    else:
        value = Evaluator(scope).value(item.value)
    if value is not None:
        value = with_unit(value, item.unit, scope.report)
    if value is None or not free:
        if free:
            scope.failed.add(name)
        return FailedRow(scope.report.source.slice(item.statement_span), name, line)
    scope.values[name] = value
    return InputRow(name, value, shown(value, scope), origin, item, line)


def fed_value(feed: Feed, scope: Scope, upstream: Mapping[str, Scope]) -> Plain | None:
    """Return a value of another calc; report a calc or a name that does not exist."""
    source = upstream.get(feed.calc)
    if source is None:
        found = nearest(feed.calc, upstream)
        scope.report.error(
            "unknown-calc",
            feed.calc_span,
            f"there is no calc '{feed.calc}' in this project",
            hint=f"the nearest calc is '{found}'"
            if found
            else "a calc's number is the stem of its file's name",
        )
        return None
    arguments: tuple[Plain, ...] | None = None
    if feed.name.arguments is not None:
        values = [Evaluator(scope).value(a) for a in feed.name.arguments]
        if any(v is None for v in values):
            return None
        arguments = tuple(v for v in values if v is not None)
    return source.value(feed.name, arguments, report=scope.report)

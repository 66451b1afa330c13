"""`inputs`: literals, and what is taken from other calcs."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.evaluation.blocks.fed import Upstream, fed_block, taken, under_name
from calcgen.evaluation.formulas import Evaluator, shown, with_unit
from calcgen.evaluation.results.common import Origin, Plain
from calcgen.evaluation.results.lines import FailedRow, InputRow, InputsResult
from calcgen.evaluation.scope import Scope, Thing
from calcgen.language.blocks.inputs import Feed, Input, InputsBlock
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure
from calcgen.text import SourceFile


def evaluate_inputs(
    block: InputsBlock, scope: Scope, upstream: Upstream, replaced: Mapping[str, Plain]
) -> InputsResult:
    """Define the inputs of a block; those `replaced` have other values than are written."""
    return InputsResult(tuple(_row(item, scope, upstream, replaced) for item in block.items), block.span)


def _row(
    item: Input, scope: Scope, upstream: Upstream, replaced: Mapping[str, Plain]
) -> InputRow | FailedRow:
    name = item.target.name
    line = scope.report.source.line_number(item.span)
    free = scope.define(item.target)
    found: Plain | Thing | None
    origin: Origin | None = None
    if name in replaced:
        found = replaced[name]
    elif isinstance(item.value, Feed):
        found = taken(item.value, scope, upstream)
        origin = origin_of(item.value, scope.report.source)
    else:
        found = Evaluator(scope).value(item.value)
    if found is None or isinstance(found, Measure | str | bool):
        value = None if found is None else with_unit(found, item.unit, scope.report)
        if value is not None and free:
            scope.values[name] = value
            return InputRow(name, value, shown(value, scope), origin, item, line)
    elif item.unit is not None:
        scope.report.error(
            "unit-mismatch",
            item.unit.span,
            f"a {found.kind} has no unit",
            hint="leave the brackets out; its results have units of their own",
        )
    elif free:
        scope.things[name] = under_name(found, name)
        block, text = fed_block(found, scope.style)
        return InputRow(name, block, Shown(text), origin, item, line)
    if free:
        scope.failed.add(name)
    return FailedRow(scope.report.source.slice(item.statement_span), name, line)


def origin_of(feed: Feed, source: SourceFile) -> Origin:
    """Return where a feed comes from, with its arguments as typed."""
    arguments = ""
    if feed.name.arguments is not None:
        after = source.text[feed.name.spans[-1].end : feed.name.span.end]
        arguments = " ".join(after.split())
    return Origin(feed.calc, feed.name.dotted, arguments)

"""`assumptions`: number, what is assumed, on what basis."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.lines import AssumptionsResult
from calcgen.site.addresses import assumptions_of
from calcgen.site.context import Context


@dataclass(frozen=True)
class AssumptionRow:
    """One assumption; open ones are still to be confirmed."""

    anchor: str
    number: str
    text: Markup
    basis: Markup
    open: bool
    line: int
    was: str


@dataclass(frozen=True)
class AssumptionsView:
    """The assumptions of one block."""

    rows: tuple[AssumptionRow, ...]
    template: str = "blocks/assumptions.html"


def assumptions_view(result: AssumptionsResult, context: Context) -> AssumptionsView:
    """Return the assumptions of a block."""
    rows = tuple(
        AssumptionRow(
            anchor,
            item.number,
            context.words(item.text),
            context.words(item.basis),
            item.open,
            context.source.line_number(item.span),
            context.was(anchor),
        )
        for anchor, item in assumptions_of(context.calc)
        if item in result.block.items
    )
    return AssumptionsView(rows)

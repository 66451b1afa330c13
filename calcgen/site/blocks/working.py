"""`working`: derived values and checks."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import escape

from calcgen.evaluation.results.lines import CheckResult, CheckRow, DerivedRow, FailedRow, WorkingResult
from calcgen.site import equations
from calcgen.site.context import Context
from calcgen.site.lookups import remarks_on
from calcgen.site.views import CheckRowView, RowView, TextRow, ValueRow, utilisation_text


@dataclass(frozen=True)
class WorkingView:
    """The lines of one block."""

    rows: tuple[ValueRow | CheckRowView | TextRow, ...]
    template: str = "blocks/working.html"


def working_view(result: WorkingResult, context: Context) -> WorkingView:
    """Return the lines of a block."""
    return WorkingView(tuple(_row(row, context) for row in result.rows))


def _row(row: DerivedRow | CheckRow | FailedRow, context: Context) -> ValueRow | CheckRowView | TextRow:
    match row:
        case DerivedRow():
            view = context.row(row.name, row.node.annotations, row.line)
            return ValueRow(
                view, equations.derived(row, context.source, remarks_on(row.node.formula, context))
            )
        case CheckRow():
            remarks = remarks_on(row.node.comparison, context)
            return check_view(row.result, equations.check(row, context.source, remarks), context)
        case FailedRow():
            return context.failed(row)


def check_view(result: CheckResult, equation: equations.Equation, context: Context) -> CheckRowView:
    """Return a check with its verdict, its statement being set already."""
    view = RowView(
        result.address,
        context.words(result.note) if result.note.text else escape(result.label),
        context.words(result.reference),
        result.line,
        context.was(result.address),
    )
    word = "satisfied" if result.satisfied else "exceeded"
    return CheckRowView(view, word, equation, utilisation_text(result.utilisation))

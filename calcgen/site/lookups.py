"""What a page says of values looked up in tables: where, for what, and between which heads."""

from __future__ import annotations

from markupsafe import Markup, escape

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, ProseResult, WorkingResult
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import Lookup
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.nodes import Comparison, Formula, Name, Number, Text
from calcgen.quantities.symbols import plain
from calcgen.site.context import Context
from calcgen.site.equations import looked_up
from calcgen.site.views import RowView, ValueRow
from calcgen.text import Span


def remarks_on(node: Formula | Comparison, context: Context) -> tuple[Markup, ...]:
    """Return a remark for each value that a line looks up, unless the line itself says all of it."""
    found = []
    for lookup in context.calc.lookups:
        if _inside(lookup.span, node.span):
            between = between_text(lookup)
            if between or not _says_all(node):
                (step,) = looked_up(lookup).steps
                found.append(Markup("").join([*step, escape(f", {between}" if between else "")]))
    return tuple(dict.fromkeys(found))


def between_text(lookup: Lookup) -> str:
    """Return the heads that a lookup interpolates between: 'between the rows 20 mm and 40 mm', or ''."""
    along = (("rows", lookup.row_heads), ("columns", lookup.column_heads))
    texts = [f"the {what} {heads[0]} and {heads[1]}" for what, heads in along if len(heads) > 1]
    return f"between {' and '.join(texts)}" if texts else ""


def rows_of(table: str, context: Context) -> tuple[ValueRow, ...]:
    """Return the values looked up in a table, each with what looks it up and between which heads."""
    lookups = [lookup for lookup in context.calc.lookups if lookup.table == table]
    return tuple(
        ValueRow(
            RowView(
                f"{table}-lookup-{number}",
                Markup("for ") + user_of(lookup, context),
                escape(between_text(lookup)),
                0,
            ),
            looked_up(lookup),
        )
        for number, lookup in enumerate(lookups, start=1)
    )


def user_of(lookup: Lookup, context: Context) -> Markup:
    """Return what looks a value up, as a link: a value, a check, a block, a line of prose."""
    line = context.source.line_number(lookup.span)
    anchor, text = _user(lookup.span, context)
    where = f"line {line}"
    if not anchor:
        return escape(where)
    return Markup('<a href="#{}">{}</a>, {}').format(anchor, text, where)


def _user(span: Span, context: Context) -> tuple[str, str]:
    for block, result in zip(context.calc.calc.segments, context.calc.segments, strict=True):
        if not _inside(span, block.span):
            continue
        match result:
            case WorkingResult(rows=rows):
                for row in rows:
                    if isinstance(row, DerivedRow) and _inside(span, row.node.span):
                        return row.name, plain(row.name)
                    if isinstance(row, CheckRow) and _inside(span, row.node.span):
                        return row.result.address, row.result.label
            case SectionResult() | BeamResult() | StressResult():
                return result.name, plain(result.name)
            case VaryResult():
                return result.name, f"vary {plain(result.input)}"
            case ProseResult():
                return f"text-{context.source.line_number(result.prose.span)}", "text"
            case _:
                pass
    return "", ""


def _says_all(node: Formula | Comparison) -> bool:
    """Return whether a line is a lookup alone, by literals."""
    return isinstance(node, Name) and all(isinstance(a, Number | Text) for a in node.arguments or ())


def _inside(span: Span, of: Span) -> bool:
    return of.start <= span.start and span.end <= of.end

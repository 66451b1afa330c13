"""`table NAME | where it comes from`: heads and values."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Column, Expression, Named, Number, Text, Unary
from calcgen.language.pieced import Pieced
from calcgen.text import Related, Report, Span


@dataclass(frozen=True)
class Head:
    """The head of a row or column: a quantity with its `value`, or a text, which has none."""

    text: str
    value: Expression | None
    span: Span


@dataclass(frozen=True)
class Cell:
    """A cell as typed; its `value` is a number or a sign before one, None where it is empty."""

    text: str
    value: Expression | None
    span: Span


@dataclass(frozen=True)
class Row:
    """A row: its head, and a cell for each column."""

    head: Head
    cells: tuple[Cell, ...]


@dataclass(frozen=True)
class TableBlock:
    """A table; the heads of its rows are all texts or all quantities, and so are those of its columns."""

    target: Named
    reference: Column
    columns: tuple[Head, ...]
    rows: tuple[Row, ...]
    span: Span
    head_span: Span


def read_table(block: BlockText, report: Report) -> Outcome[TableBlock]:
    """Read a row of heads, and rows of a head and values; a table with a fault is not used."""
    before = len(report.diagnostics)
    columns = _column_heads(block, report)
    rows = tuple(_row(line, len(columns), report) for line in block.lines[1:])
    _agree(columns, "columns", report)
    _agree([row.head for row in rows], "rows", report)
    if len(report.diagnostics) > before:
        return Outcome(None, frozenset({block.target.name}))
    nothing = Column("", Span(block.head_span.end, block.head_span.end))
    reference = block.reference or nothing
    return Outcome(TableBlock(block.target, reference, columns, rows, block.span, block.head_span))


def _column_heads(block: BlockText, report: Report) -> tuple[Head, ...]:
    if len(block.lines) < 2 or len(block.lines[0].columns) < 2:
        report.error(
            "table-empty",
            block.head_span,
            f"the table '{block.target.name}' has no values",
            hint="the first row has the heads of the columns, each further row its head and its values",
        )
        return ()
    corner, *heads = block.lines[0].columns
    if corner.text:
        report.error(
            "table-heads",
            corner.whole,
            "the first row has the heads of the columns, and nothing before its first |",
            hint="start the row with |, and write what the heads are into the prose",
        )
    return tuple(_head(text, "column", report) for text in heads)


def _row(line: Line, count: int, report: Report) -> Row:
    first, *others = line.columns
    if len(others) != count and count:
        report.error(
            "table-row",
            line.span,
            f"this row has {len(others)} value{'' if len(others) == 1 else 's'}, "
            f"the table {count} column{'' if count == 1 else 's'}",
            hint="an empty cell needs its | too; no | stands at the end of a row",
        )
    return Row(_head(first, "row", report), tuple(_cell(text, report) for text in others))


def _head(text: Pieced, what: str, report: Report) -> Head:
    if not text.text:
        report.error(
            "table-heads",
            text.whole,
            f"this {what} has no head",
            hint="no | stands at the end of a row" if what == "column" else "start the row with its head",
        )
    try:
        value = expression(cursor := Cursor(text))
        cursor.finish()
    except ReadingError:
        value = None
    if isinstance(value, Text):
        return Head(value.value, None, text.whole)
    return Head(" ".join(text.text.split()), value if _is_number(value) else None, text.whole)


def _cell(text: Pieced, report: Report) -> Cell:
    typed = " ".join(text.text.split())
    if not typed:
        return Cell("", None, text.whole)
    try:
        value = expression(cursor := Cursor(text))
        cursor.finish()
        if not _is_number(value):
            raise ReadingError(
                "table-cell",
                text.whole,
                f"a value of a table is a number with its unit, this is '{typed}'",
                hint="leave the cell empty where there is no value",
            )
    except ReadingError as fault:
        fault.report_to(report)
        value = None
    return Cell(typed, value, text.whole)


def _is_number(value: Expression | None) -> bool:
    return isinstance(value.operand if isinstance(value, Unary) else value, Number)


def _agree(heads: Sequence[Head], what: str, report: Report) -> None:
    """Report heads of both kinds, and a text that stands twice."""
    odd = next((h for h in heads if h.text and (h.value is None) != (heads[0].value is None)), None)
    if odd is not None and heads[0].text:
        found = "read as a text" if odd.value is None else "a quantity"
        report.error(
            "table-heads",
            odd.span,
            f"the heads of the {what} are all quantities or all texts, and '{odd.text}' is {found}",
            hint='a number in quotes is a text: "2"; a quantity is a number with its unit: 2 m',
            related=(Related(heads[0].span, "the first head"),),
        )
    seen: dict[str, Span] = {}
    for head in heads:
        if head.value is None and head.text and head.text in seen:
            report.error(
                "written-twice",
                head.span,
                f"the head '{head.text}' stands twice in this table",
                related=(Related(seen[head.text], "the first time"),),
            )
        seen.setdefault(head.text, head.span)

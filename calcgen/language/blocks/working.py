"""`working`: derived values and checks."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, names_of, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.expressions import comparison, formula
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Comparison, Formula, Named, UnitText
from calcgen.text import Report, Span


@dataclass(frozen=True)
class Derivation:
    """`M_Ed [kN·m] = w*L^2/8`."""

    target: Named
    unit: UnitText | None
    formula: Formula
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class Check:
    """`M_Ed <= M_c_Rd`; the operator of `comparison` is one of < <= > >=.

    `statement` is the text as typed, white space collapsed: the label where none is given.
    """

    comparison: Comparison
    statement: str
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class WorkingBlock:
    """The lines of one block, in order."""

    items: tuple[Derivation | Check, ...]
    span: Span


def read_working(block: BlockText, report: Report) -> Outcome[WorkingBlock]:
    """Read `name = formula` and checks."""
    items, failed = read_each(block.lines, report, _read_statement)
    return Outcome(WorkingBlock(tuple(items), block.span), names_of(failed))


def _read_statement(line: Line, cursor: Cursor) -> Derivation | Check:
    if cursor.token.kind in ("name", "word") and cursor.following.text in ("=", "[", ":="):
        return _read_derivation(line, cursor)
    statement = comparison(cursor)
    cursor.finish()
    return Check(statement, line.statement_text, line.annotations, line.span, line.statement_span)


def _read_derivation(line: Line, cursor: Cursor) -> Derivation:
    target = cursor.named("a value")
    unit = cursor.bracketed_unit()
    cursor.expect("=")
    found = formula(cursor)
    cursor.finish()
    return Derivation(target, unit, found, line.annotations, line.span, line.statement_span)

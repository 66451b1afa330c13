"""`table NAME`: heads and values."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import pairwise

from calcgen.evaluation.blocks.table_lookup import TableThing, places_of
from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.results.table import TableCell, TableHead, TableResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.table import Cell, Head, TableBlock
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Expression, Number, Unary
from calcgen.quantities.display import Shown, describe
from calcgen.quantities.measure import Measure, pretty
from calcgen.text import Related


def evaluate_table(block: TableBlock, scope: Scope) -> TableResult | FailedBlock:
    """Read heads and values, and define the table's name."""
    name = block.target.name
    free = scope.define(block.target)
    columns = _heads(block.columns, "columns", scope)
    rows = _heads([row.head for row in block.rows], "rows", scope)
    cells = [[_cell(cell, scope) for cell in row.cells] for row in block.rows]
    read = all(
        (cell.value is None) == (found is None)
        for row, line in zip(block.rows, cells, strict=True)
        for cell, found in zip(row.cells, line, strict=True)
    )
    if (
        rows is None
        or columns is None
        or not (free and read and _one_dimension(block, rows, columns, cells, scope))
    ):
        if free:
            scope.failed.add(name)
        return FailedBlock("table", block.span)
    line = scope.report.source.line_number(block.head_span)
    result = TableResult(
        name, block.reference, rows, columns, tuple(tuple(row) for row in cells), line, block.head_span
    )
    scope.things[name] = TableThing(result, scope.style)
    return result


def _heads(heads: Sequence[Head], what: str, scope: Scope) -> tuple[TableHead, ...] | None:
    """Return heads with their values; report quantities of other dimensions or out of order."""
    found: list[TableHead] = []
    for head in heads:
        value = head.text if head.value is None else Evaluator(scope).measure(head.value)
        if value is None:
            return None
        found.append(TableHead(value, _typed(head.text, head.value)))
    first = found[0].value
    if not isinstance(first, Measure):
        return tuple(found)
    for head, place in zip(heads, found, strict=True):
        if isinstance(place.value, Measure) and place.value.dimension != first.dimension:
            scope.report.error(
                "wrong-dimension",
                head.span,
                f"the heads of the {what} are {describe(first.dimension)}, "
                f"this is {describe(place.value.dimension)}",
                hint="a unit may be missing",
                related=(Related(heads[0].span, "the first head"),),
            )
            return None
    places = places_of(found)
    rising = places[-1] > places[0]
    for head, (a, b) in zip(heads[1:], pairwise(places), strict=True):
        if a == b or (a < b) != rising:
            scope.report.error(
                "table-heads",
                head.span,
                f"the heads of the {what} are out of order here",
                hint="quantities rise, or fall, from each head to the next",
            )
            return None
    return tuple(found)


def _cell(cell: Cell, scope: Scope) -> TableCell | None:
    value = None if cell.value is None else Evaluator(scope).measure(cell.value)
    return None if value is None else TableCell(value, _typed(cell.text, cell.value))


def _one_dimension(
    block: TableBlock,
    rows: Sequence[TableHead],
    columns: Sequence[TableHead],
    cells: Sequence[Sequence[TableCell | None]],
    scope: Scope,
) -> bool:
    """Report a value of another dimension than those it can be interpolated with.

    Each column has one dimension, or each row of several columns has; along heads that are quantities values
    are interpolated, and have one dimension.
    """
    along_rows = isinstance(columns[0].value, Measure)
    along_columns = isinstance(rows[0].value, Measure) or (len(columns) == 1 and not along_rows)
    across = [[(i, j) for j in range(len(columns))] for i in range(len(rows))]
    down = [[(i, j) for i in range(len(rows))] for j in range(len(columns))]
    if along_rows and along_columns:
        choices = [[[place for line in across for place in line]]]
    else:
        choices = [across] if along_rows else [down] if along_columns else [down, across]
    faults = [list(_odd_ones(lines, cells)) for lines in choices]
    if not all(faults):
        return True
    for (i, j), (k, m) in min(faults, key=len):
        cell, first = cells[i][j], cells[k][m]
        if cell is not None and first is not None:
            scope.report.error(
                "wrong-dimension",
                block.rows[i].cells[j].span,
                f"this is {describe(cell.value.dimension)}, the value it stands with "
                f"{describe(first.value.dimension)}",
                hint="each column of a table has one dimension, or each row",
                related=(Related(block.rows[k].cells[m].span, "the value it stands with"),),
            )
    return False


def _odd_ones(
    lines: Sequence[Sequence[tuple[int, int]]], cells: Sequence[Sequence[TableCell | None]]
) -> Iterator[tuple[tuple[int, int], tuple[int, int]]]:
    """Yield each place whose dimension is not that of the first value of its line, with the place of that."""
    for line in lines:
        filled = [((i, j), cell) for i, j in line for cell in [cells[i][j]] if cell is not None]
        for place, cell in filled:
            if cell.value.dimension != filled[0][1].value.dimension:
                yield place, filled[0][0]


def _typed(text: str, node: Expression | None) -> Shown:
    """Return a literal as typed, its unit in the program's own form."""
    number = node.operand if isinstance(node, Unary) else node
    if isinstance(node, Unary):
        text = text.replace("-", "−", 1)
    unit = number.unit if isinstance(number, Number) else None
    if unit is None or not text.endswith(unit.text):
        return Shown(text)
    return Shown(text.removesuffix(unit.text).rstrip(), pretty(unit.text))

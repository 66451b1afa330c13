"""`table`: heads and values as typed, those looked up marked, and what looks them up."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import escape

from calcgen.evaluation.results.table import TableHead, TableResult
from calcgen.quantities.display import describe
from calcgen.quantities.measure import Measure
from calcgen.site.context import Context
from calcgen.site.lookups import rows_of
from calcgen.site.views import RowView, ValueRow


@dataclass(frozen=True)
class CellView:
    """A value as typed, '' where the cell is empty; `looked_up` where a line uses it."""

    text: str
    looked_up: bool


@dataclass(frozen=True)
class TableView:
    """A table; `call` is how a value is looked up, `flag` says that no reference is given."""

    name: str
    row: RowView
    call: str
    flag: str
    heads: tuple[str, ...]
    rows: tuple[tuple[str, tuple[CellView, ...]], ...]
    lookups: tuple[ValueRow, ...]
    template: str = "blocks/table.html"


def table_view(result: TableResult, context: Context) -> TableView:
    """Return a table."""
    lookups = [lookup for lookup in context.calc.lookups if lookup.table == result.name]
    used = {(i, j) for lookup in lookups for i in lookup.rows for j in lookup.columns}
    cells = (
        tuple(
            CellView(cell.shown.text if cell is not None else "", (i, j) in used)
            for j, cell in enumerate(row)
        )
        for i, row in enumerate(result.cells)
    )
    single = len(result.columns) == 1
    note = f"rows by {_axis(result.rows)}" + ("" if single else f", columns by {_axis(result.columns)}")
    if used:
        note += "; values in bold and underlined are looked up"
    reference = context.words(result.reference)
    return TableView(
        name=result.name,
        row=RowView(result.name, escape(note), reference, result.line, context.was(result.name)),
        call=f"{result.name}(row)" if single else f"{result.name}(row, column)",
        flag="" if result.reference.text else "unreferenced",
        heads=tuple(head.shown.text for head in result.columns),
        rows=tuple((head.shown.text, row) for head, row in zip(result.rows, cells, strict=True)),
        lookups=rows_of(result.name, context),
    )


def _axis(heads: tuple[TableHead, ...]) -> str:
    first = heads[0].value
    if not isinstance(first, Measure):
        return "text"
    kind = describe(first.dimension).removeprefix("a plain ")
    return f"{kind}, linear between heads"

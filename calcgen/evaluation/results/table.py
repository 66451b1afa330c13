"""Tables, and where their values are looked up."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.nodes import Column
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure
from calcgen.text import Span


@dataclass(frozen=True)
class TableHead:
    """The head of a row or column: a text, or a quantity as typed."""

    value: Measure | str
    shown: Shown


@dataclass(frozen=True)
class TableCell:
    """A value of a table, as typed."""

    value: Measure
    shown: Shown


@dataclass(frozen=True)
class TableResult:
    """A table.

    Attributes
    ----------
    reference : where it comes from, empty where its head does not say it.
    rows, columns : heads, in each all texts or all quantities of one dimension in rising or falling order.
    cells : by row, one a column; None where a cell is empty.
    """

    name: str
    reference: Column
    rows: tuple[TableHead, ...]
    columns: tuple[TableHead, ...]
    cells: tuple[tuple[TableCell | None, ...], ...]
    line: int
    span: Span


@dataclass(frozen=True)
class Lookup:
    """A place where a value of a table is looked up.

    Attributes
    ----------
    arguments : what is looked up, for the rows and for the columns; the latter may be left out.
    rows, columns : indices of the heads found, one each or the two that an argument lies between;
    row_heads, column_heads : what is written there.
    span : of the call in the calc's text.
    """

    table: str
    arguments: tuple[Shown, ...]
    rows: tuple[int, ...]
    columns: tuple[int, ...]
    row_heads: tuple[str, ...]
    column_heads: tuple[str, ...]
    value: Shown
    span: Span

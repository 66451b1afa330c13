"""A table in the scope: values looked up by their heads, between quantities by interpolation."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import TypeAlias

from calcgen.evaluation.results.common import Plain
from calcgen.evaluation.results.table import TableHead, TableResult
from calcgen.language.nodes import Name
from calcgen.quantities.display import Shown, Style, describe, rounded
from calcgen.quantities.measure import Measure, magnitude_in
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest

Found: TypeAlias = tuple[tuple[int, float], ...]
"""Indices of the heads that an argument finds, with the share of each: one, or the two it lies between."""


@dataclass(frozen=True)
class TableThing:
    """A table in the scope: a value is looked up by the head of its row and of its column."""

    result: TableResult
    style: Style
    kind: str = "table"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return the value looked up; report heads that do not exist, and a value outside quantities."""
        found = self.find(name, arguments, report)
        if found is None:
            return None
        rows, columns = found
        total: Measure | None = None
        for i, down in rows:
            for j, across in columns:
                cell = self.result.cells[i][j]
                if cell is None:
                    self._empty(i, j, name, report)
                    return None
                share = down * across
                part = Measure(cell.value.quantity * share, cell.value.unit) if share != 1.0 else cell.value
                total = part if total is None else Measure(total.quantity + part.quantity, total.unit)
        return total

    def find(
        self, name: Name, arguments: tuple[Plain, ...] | None, report: Report
    ) -> tuple[Found, Found] | None:
        """Return the rows and the columns that a call finds."""
        table, of = self.result, f"'{plain(self.result.name)}'"
        if len(name.parts) > 1 or arguments is None:
            report.error(
                "no-such-result",
                name.spans[-1],
                f"the table {of} has no results after a dot",
                hint=f"look a value up: {self._example}",
            )
            return None
        single = len(table.columns) == 1
        if not (len(arguments) == 2 or (single and len(arguments) == 1)):
            least = "one argument, the head of a row" if single else "two arguments, row and column"
            report.error(
                "argument-count",
                name.span,
                f"the table {of} takes {least}; {len(arguments)} given",
                hint=f"write {self._example}",
            )
            return None
        nodes = name.arguments or ()
        if self._reversed(arguments):
            row, column = (report.source.slice(node.span) for node in reversed(nodes))
            report.error(
                "no-such-head",
                nodes[0].span.to(nodes[1].span),
                "the row comes first, then the column",
                hint=f"write {table.name}({row}, {column})",
            )
            return None
        rows = self._find(arguments[0], nodes[0].span, table.rows, "row", report)
        if len(arguments) == 1:
            return (rows, ((0, 1.0),)) if rows is not None else None
        columns = self._find(arguments[1], nodes[1].span, table.columns, "column", report)
        return None if rows is None or columns is None else (rows, columns)

    def _find(
        self, wanted: Plain, span: Span, heads: Sequence[TableHead], what: str, report: Report
    ) -> Found | None:
        of = f"of '{plain(self.result.name)}'"
        first = heads[0].value
        if isinstance(wanted, Measure) != isinstance(first, Measure):
            expected = describe(first.dimension) if isinstance(first, Measure) else "a text"
            report.error(
                "not-a-number" if isinstance(first, Measure) else "no-such-head",
                span,
                f"a {what} {of} is found by {expected}, this is {_kind(wanted)}",
                hint=f"the {what}s are {_listed(heads)}",
            )
            return None
        if isinstance(wanted, Measure) and isinstance(first, Measure):
            return self._between(wanted, first, span, heads, what, report)
        texts = [str(head.value) for head in heads]
        if wanted in texts:
            return ((texts.index(str(wanted)), 1.0),)
        close = nearest(str(wanted), texts)
        report.error(
            "no-such-head",
            span,
            f"no {what} {of} has the head '{wanted}'",
            hint=f'the nearest is "{close}"' if close else f"the {what}s are {_listed(heads)}",
        )
        return None

    def _between(
        self,
        wanted: Measure,
        first: Measure,
        span: Span,
        heads: Sequence[TableHead],
        what: str,
        report: Report,
    ) -> Found | None:
        of = f"of '{plain(self.result.name)}'"
        if wanted.dimension != first.dimension:
            report.error(
                "wrong-dimension",
                span,
                f"a {what} {of} is found by {describe(first.dimension)}, this is {_kind(wanted)}",
            )
            return None
        places = places_of(heads)
        at = rounded(wanted.si)
        for index, place in enumerate(places):
            if at == place:
                return ((index, 1.0),)
        for index, (a, b) in enumerate(pairwise(places)):
            if min(a, b) < at < max(a, b):
                share = (at - a) / (b - a)
                return ((index, 1.0 - share), (index + 1, share))
        low, high = sorted((heads[0], heads[-1]), key=lambda h: _si(h))
        unit = self.style.unit_of(first)
        text = Shown(f"{rounded(magnitude_in(wanted, unit)):.6g}".replace("-", "−"), unit).text
        report.error(
            "table-range",
            span,
            f"{text} lies outside the {what}s {of}, {low.shown.text} to {high.shown.text}",
            hint="a table is not extended beyond its heads",
        )
        return None

    def _reversed(self, arguments: tuple[Plain, ...]) -> bool:
        """Return whether two arguments fit the table only in the other order."""
        if len(arguments) < 2:
            return False
        one, other = arguments
        rows, columns = self.result.rows, self.result.columns
        return _fits(one, columns) and _fits(other, rows) and not (_fits(one, rows) and _fits(other, columns))

    def _empty(self, row: int, column: int, name: Name, report: Report) -> None:
        table = self.result
        heads = f"{table.rows[row].shown.text}, {table.columns[column].shown.text}"
        report.error(
            "table-empty-cell",
            name.span,
            f"the cell ({heads}) of '{plain(table.name)}' is empty",
            hint="the table has no value there",
        )

    @property
    def _example(self) -> str:
        table = self.result
        heads = [_as_argument(table.rows[0])]
        if len(table.columns) > 1:
            heads.append(_as_argument(table.columns[0]))
        return f"{table.name}({', '.join(heads)})"


def places_of(heads: Sequence[TableHead]) -> list[float]:
    """Return where heads lie along their axis, SI, rounded so that the last bit decides nothing."""
    return [_si(head) for head in heads]


def _fits(value: Plain, heads: Sequence[TableHead]) -> bool:
    """Return whether a value can be looked up among heads, be it outside their range."""
    first = heads[0].value
    if isinstance(value, Measure):
        return isinstance(first, Measure) and first.dimension == value.dimension
    return any(head.value == value for head in heads)


def _kind(value: Plain) -> str:
    if isinstance(value, Measure):
        return describe(value.dimension)
    return "a text" if isinstance(value, str) else "yes or no"


def _si(head: TableHead) -> float:
    return rounded(head.value.si) if isinstance(head.value, Measure) else 0.0


def _listed(heads: Sequence[TableHead], most: int = 6) -> str:
    texts = [_as_argument(head) for head in heads]
    return ", ".join(texts[:most]) + (", …" if len(texts) > most else "")


def _as_argument(head: TableHead) -> str:
    return head.shown.text if isinstance(head.value, Measure) else f'"{head.value}"'

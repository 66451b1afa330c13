"""Where the tables of a calc are looked up, and what is found there."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import fields, is_dataclass, replace

from calcgen.evaluation.blocks.table_lookup import TableThing
from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.operands import names_in
from calcgen.evaluation.results.calc import Segment
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, WorkingResult
from calcgen.evaluation.results.table import Lookup
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.inputs import Feed
from calcgen.language.calc import Calc, FailedBlock, Prose
from calcgen.language.nodes import Cases, Name
from calcgen.text import Report


def lookups_of(calc: Calc, segments: Sequence[Segment], scope: Scope) -> tuple[Lookup, ...]:
    """Return each place where a value of a table is looked up, in the order of the text.

    Read after the calc was evaluated; `segments` are its results, one for each segment of the calc.
    """
    tables = {name: thing for name, thing in scope.things.items() if isinstance(thing, TableThing)}
    if not tables:
        return ()
    silent = Report(calc.source)
    reader = Evaluator(replace(scope, report=silent), quiet=True)
    found: list[Lookup] = []
    for block, result in zip(calc.segments, segments, strict=True):
        for name in _names(block, result):
            table = tables.get(name.parts[0])
            value = reader.value(name) if table is not None else None
            if table is None or value is None:
                continue
            arguments = tuple(v for a in name.arguments or () for v in [reader.value(a)] if v is not None)
            heads = table.find(name, arguments, silent)
            if heads is not None:
                rows, columns = (tuple(index for index, _ in along) for along in heads)
                texts = tuple(shown(v, scope) for v in arguments)
                found.append(
                    Lookup(
                        table.result.name,
                        texts,
                        rows,
                        columns,
                        tuple(table.result.rows[i].shown.text for i in rows),
                        tuple(table.result.columns[i].shown.text for i in columns),
                        shown(value, scope),
                        name.span,
                    )
                )
    return tuple(found)


def _names(block: object, result: Segment) -> Iterator[Name]:
    """Yield the names that a block reads; of a value by cases those of the case taken."""
    match result:
        case FailedBlock():
            pass
        case WorkingResult(rows=rows):
            for row in rows:
                if isinstance(row, DerivedRow):
                    yield from _names_of(row)
                elif isinstance(row, CheckRow):
                    yield from names_in(row.node.comparison)
        case _:
            yield from _inside(block)


def _names_of(row: DerivedRow) -> Iterator[Name]:
    formula = row.node.formula
    if not isinstance(formula, Cases) or row.branch is None:
        yield from names_in(formula)
        return
    for index, branch in enumerate(formula.branches[: row.branch + 1]):
        if index == row.branch:
            yield from names_in(branch.value)
        if branch.condition is not None:
            yield from names_in(branch.condition)


def _inside(node: object) -> Iterator[Name]:
    """Yield every name in a node of a block that is read in this calc."""
    if isinstance(node, Prose):
        yield from (place.name for place in node.places)
    elif isinstance(node, Feed):
        yield from _inside(node.name.arguments)  # the name itself is one of the other calc
    elif isinstance(node, tuple):
        for item in node:
            yield from _inside(item)
    elif is_dataclass(node):
        if isinstance(node, Name):
            yield node
        for part in fields(node):
            yield from _inside(getattr(node, part.name))

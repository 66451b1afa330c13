"""The standard combination sets of a beam: the factors in force, and a table of combinations for each set."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from markupsafe import Markup, escape

from calcgen.evaluation.combination_sets.standard import Expression
from calcgen.evaluation.results.beam import BeamResult, FactorRow, SetCombination, SetResult
from calcgen.quantities.symbols import plain
from calcgen.site.addresses import result_anchor
from calcgen.site.equations import Equation, set_expression, set_factors
from calcgen.site.views import RowView, ValueRow, lettered


@dataclass(frozen=True)
class SetRow:
    """A combination: its name, the factor of each case, '' where it does not act, and what leads."""

    anchor: str
    name: Markup
    factors: tuple[str, ...]
    leading: Markup


@dataclass(frozen=True)
class ExpressionView:
    """An expression of a set with its place in the standard, and the combinations that follow from it."""

    equation: Equation
    source: str
    rows: tuple[SetRow, ...]


@dataclass(frozen=True)
class SetView:
    """A set: a column for each case that it takes, and one for what leads where the standard has that."""

    group: str
    name: str
    cases: tuple[Markup, ...]
    leads: bool
    expressions: tuple[ExpressionView, ...]
    remarks: tuple[str, ...]


def set_view(beam: str, result: SetResult) -> SetView:
    """Return a set of a beam; an expression shows the loads that the beam has."""
    cases = [name for each in result.cases.values() for name in each]
    acting = [name for name in cases if any(name in c.factors for c in result.combinations)]
    leads = any(e.leads for e in result.expressions)
    expressions = []
    for number, expression in enumerate(result.expressions):
        own = [c for c in result.combinations if c.expression == number]
        if own:
            rows = tuple(_row(beam, c, acting) for c in own)
            equation = set_expression(tuple(_terms(expression, result)))
            expressions.append(ExpressionView(equation, expression.source, rows))
    return SetView(
        plain(result.group),
        result.name,
        tuple(lettered((name,)) for name in acting),
        leads,
        tuple(expressions),
        result.remarks,
    )


def _row(beam: str, c: SetCombination, cases: Sequence[str]) -> SetRow:
    return SetRow(
        result_anchor(beam, c.name, ""),
        lettered((c.name,)),
        tuple(f"{c.factors[name]:.6g}" if name in c.factors else "" for name in cases),
        Markup(", ").join(lettered((name,)) for name in c.leading),
    )


def _terms(
    expression: Expression, result: SetResult
) -> Iterator[tuple[tuple[str, ...], tuple[tuple[tuple[str, ...], str], ...]]]:
    """Give the terms of an expression, without loads that the beam does not have."""
    for term in expression.terms:
        parts = tuple((part.factors, part.load) for part in term.parts if _has(part.load, result))
        if parts:
            yield term.factors, parts


def _has(load: str, result: SetResult) -> bool:
    """Tell whether the beam has a load; what accompanies a leading action is there where there is another."""
    if load in ("Q_1", "Q_i"):
        return "Q" in result.cases
    return load in result.cases


def factor_rows(beam: BeamResult) -> tuple[ValueRow, ...]:
    """Return the factors that the sets of a beam take."""
    return tuple(_factor(row) for row in beam.set_factors)


def _factor(row: FactorRow) -> ValueRow:
    return ValueRow(RowView("", escape(row.meaning), escape(row.source), 0), set_factors(row.values))

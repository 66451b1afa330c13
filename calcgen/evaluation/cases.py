"""A formula as a whole: one expression, or cases of which the first true one is taken."""

from __future__ import annotations

from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.results.common import Plain
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import Cases, Formula
from calcgen.quantities.display import describe
from calcgen.quantities.measure import Dimension, Measure


def evaluate(formula: Formula, scope: Scope) -> tuple[Plain | None, int | None]:
    """Return the value of a formula and the index of the case taken.

    Every case is evaluated, so that its names and dimensions are checked even where it is not taken;
    arithmetic faults (a root of a negative number) count only in the case that is.
    """
    if not isinstance(formula, Cases):
        return Evaluator(scope).value(formula), None
    taken: int | None = None
    value: Plain | None = None
    dimension: Dimension | None = None
    whole = True
    for index, branch in enumerate(formula.branches):
        held: bool | None = True
        if branch.condition is not None:
            held = Evaluator(scope, quiet=taken is not None).condition(branch.condition)
        whole = whole and (held is not None or taken is not None)
        here = taken is None and held is True and whole
        found = Evaluator(scope, quiet=not here).value(branch.value)
        if here:
            taken, value = index, found
        if isinstance(found, Measure):
            if dimension is not None and found.dimension != dimension:
                scope.report.error(
                    "cases-differ",
                    branch.value.span,
                    f"this case is {describe(found.dimension)}, the first one is {describe(dimension)}",
                    hint="all cases of a value have one dimension",
                )
                whole = False
            dimension = found.dimension if dimension is None else dimension
    if taken is None and whole:
        scope.report.error(
            "no-case-holds", formula.span, "no case is true here", hint="add a last case with 'otherwise'"
        )
    return (value if whole else None), taken

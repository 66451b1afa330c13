"""Prose and the sheet: values in text, looked up when the whole calc is known."""

from __future__ import annotations

from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.results import ProseResult
from calcgen.evaluation.scope import Scope
from calcgen.language.calc import Prose
from calcgen.quantities.display import Shown


def evaluate_prose(prose: Prose, scope: Scope) -> ProseResult:
    """Return prose with the final value of each place; a place without a value is reported."""
    values: list[Shown | None] = []
    for place in prose.places:
        value = Evaluator(scope).value(place.name)
        values.append(None if value is None else shown(value, scope))
    return ProseResult(prose, tuple(values))

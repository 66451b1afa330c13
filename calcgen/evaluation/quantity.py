"""Quantities at the door of mechanics: an expression must have the dimension that is needed there."""

from __future__ import annotations

from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import Expression
from calcgen.quantities.display import KINDS, describe
from calcgen.quantities.measure import Measure, dimension_of, unit_size

_HINTS = {
    ("mass", "force"): "lb, kg and t are masses; write lbf or kN",
    ("mass by length", "line load"): "a mass is no load: multiply by g_n, or write plf or kN/m",
    ("density", "weight by volume"): "a density is no weight: multiply by g_n, or write pcf or kN/m³",
    ("mass by area", "stress"): "a mass is no load: multiply by g_n, or write psf or kPa",
}


def quantity_of(node: Expression, kind: str, scope: Scope) -> Measure | None:
    """Return the value of an expression that must be of a kind of `KINDS`, or 'number'.

    Reports a value of another dimension at the expression.
    """
    value = Evaluator(scope).measure(node)
    if value is None:
        return None
    wanted = () if kind == "number" else dimension_of(unit_size(KINDS[kind]))
    if value.dimension == wanted:
        return value
    found = describe(value.dimension)
    hint = _HINTS.get((found, kind), "")
    if not value.dimension:
        hint = f"write the unit after the number, such as {KINDS[kind]}" if kind != "number" else ""
    scope.report.error(
        "wrong-dimension", node.span, f"{_article(kind)} is needed here, this is {found}", hint=hint
    )
    return None


def si(node: Expression, kind: str, scope: Scope) -> float | None:
    """Return the magnitude in SI base units; as `quantity_of`."""
    value = quantity_of(node, kind, scope)
    return None if value is None else value.si


def _article(kind: str) -> str:
    if kind == "number":
        return "a plain number"
    return f"{'an' if kind[0] in 'aeiou' else 'a'} {kind}"

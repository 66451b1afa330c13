"""Quantities at the door of mechanics: an expression must have the dimension that is needed there."""

from __future__ import annotations

import math
from collections.abc import Mapping

from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import Expression
from calcgen.quantities.display import KINDS, describe, show
from calcgen.quantities.measure import Measure, dimension_of, from_si, unit_size

_HINTS = {
    ("mass", "force"): "lb, kg and t are masses; write lbf or kN",
    ("mass by length", "line load"): "a mass is no load: multiply by g_n, or write plf or kN/m",
    ("density", "weight by volume"): "a density is no weight: multiply by g_n, or write pcf or kN/m³",
    ("mass by area", "stress"): "a mass is no load: multiply by g_n, or write psf or kPa",
}

LARGEST: Mapping[str, float] = {
    "number": 1e12,
    "angle": 1000.0 * math.tau,  # of more turns little is left of where it ends
    "length": 1e6,
    "area": 1e12,
    "section modulus": 1e18,
    "second moment": 1e24,
    "warping constant": 1e36,
    "force": 1e15,
    "moment": 1e18,
    "line load": 1e15,
    "stress": 1e15,
    "weight by volume": 1e12,
    "bending stiffness": 1e24,
    "curvature": 1e6,
    "temperature": 1e6,
    "expansion": 1e3,
}
"""Largest magnitude by kind, SI: beyond anything built, and products of several are still numbers."""


def quantity_of(node: Expression, kind: str, scope: Scope, hint: str = "") -> Measure | None:
    """Return the value of an expression that must be of a kind of `KINDS`, 'number' or 'angle'.

    `hint` says what to write where the dimension is another, in place of what is said in general.
    Reports a value of another dimension, and one beyond `LARGEST`, at the expression.
    """
    value = Evaluator(scope).measure(node)
    if value is None:
        return None
    wanted = dimension_of(unit_size(KINDS.get(kind, "")))
    if value.dimension == wanted:
        return value if _can_be_computed(value, node, kind, scope) else None
    found = describe(value.dimension)
    hint = hint or _HINTS.get((found, kind), "")
    if not value.dimension and not hint:
        hint = f"write the unit after the number, such as {KINDS[kind]}" if kind != "number" else ""
    scope.report.error(
        "wrong-dimension", node.span, f"{_article(kind)} is needed here, this is {found}", hint=hint
    )
    return None


def si(node: Expression, kind: str, scope: Scope, hint: str = "") -> float | None:
    """Return the magnitude in SI base units; as `quantity_of`."""
    value = quantity_of(node, kind, scope, hint)
    return None if value is None else value.si


def _can_be_computed(value: Measure, node: Expression, kind: str, scope: Scope) -> bool:
    """Report a value beyond the largest of its kind; one that overflowed is shown as it was written."""
    largest = LARGEST.get(kind, math.inf)
    if abs(value.si) <= largest:
        return True
    text = show(value, scope.style).text if value.finite else scope.report.source.slice(node.span)
    limit = from_si(largest, KINDS.get(kind, "")).shown_in(value.unit)
    what = "the number" if kind == "number" else f"{_article(kind)} of"
    scope.report.error(
        "number-too-large",
        node.span,
        f"{what} {text} is too large to be computed with",
        hint=f"the limit is {show(limit, scope.style).text}: a unit or a power of ten may be wrong",
    )
    return False


def _article(kind: str) -> str:
    if kind == "number":
        return "a plain number"
    return f"{'an' if kind[0] in 'aeiou' else 'a'} {kind}"

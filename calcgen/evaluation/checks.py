"""Checks: two sides, a utilisation, a verdict."""

from __future__ import annotations

import math
from dataclasses import dataclass

from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.results.lines import CheckResult
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import Column, Comparison, Expression, Number, Unary
from calcgen.quantities.display import rounded
from calcgen.quantities.measure import Measure
from calcgen.quantities.symbols import plain
from calcgen.text import Span


@dataclass(frozen=True)
class Statement:
    """What a check says, before it is judged."""

    left: Measure
    operator: str
    right: Measure
    against_zero: bool


def read_sides(node: Comparison, scope: Scope) -> Statement | None:
    """Evaluate both sides of a check; report sides that cannot be compared."""
    evaluator = Evaluator(scope)
    left, right = evaluator.measure(node.left), evaluator.measure(node.right)
    if left is None or right is None:
        return None
    if not evaluator.same_dimension(node.operator_span, node.operator, left, right):
        return None
    zero = _is_zero(node.left) or _is_zero(node.right)
    if not zero and left.si * right.si < 0:
        scope.report.error(
            "opposite-signs",
            node.operator_span,
            "the sides of this check have opposite signs",
            label=f"{shown(left, scope).text} against {shown(right, scope).text}",
            hint="compare magnitudes with abs(...), or compare with zero",
        )
        return None
    return Statement(left, node.operator, right, zero)


def judge(
    statement: Statement,
    scope: Scope,
    *,
    label: str,
    note: Column,
    reference: Column,
    origin: str,
    address: str,
    line: int,
) -> CheckResult:
    """Return the verdict and the utilisation of a check.

    The utilisation is the ratio of the sides that is at most 1 exactly when the check is satisfied. Ratio and
    verdict are taken after rounding to 12 significant digits, so that the last bit of binary arithmetic
    decides nothing.
    """
    left, right, operator = statement.left, statement.right, statement.operator
    smaller, larger = (left, right) if operator in ("<", "<=") else (right, left)
    negative = left.si < 0 or right.si < 0
    demand, capacity = (larger, smaller) if negative and not statement.against_zero else (smaller, larger)
    strict = operator in ("<", ">")
    a, b = rounded(smaller.si), rounded(larger.si)
    utilisation: float | None = None
    if statement.against_zero or capacity.si == 0:
        satisfied = a < b or (a == b and not strict)
    else:
        utilisation = rounded(demand.si / capacity.si)
        satisfied = utilisation < 1 or (utilisation == 1 and not strict)
        if not satisfied and utilisation == 1:
            utilisation = None
    return CheckResult(
        label=label,
        left=left,
        operator=operator,
        right=right,
        left_shown=shown(left, scope),
        right_shown=shown(right.shown_in(scope.style.unit_of(left)), scope),
        demand=demand,
        capacity=capacity,
        utilisation=utilisation if utilisation is None or math.isfinite(utilisation) else None,
        satisfied=satisfied,
        note=note,
        reference=reference,
        origin=origin,
        address=address,
        line=line,
    )


class Labels:
    """The labels of the checks of one calc, each with its line and its anchor on the page."""

    def __init__(self) -> None:
        self._lines: dict[str, int] = {}
        self._addresses: set[str] = set()

    def claim(self, label: str, span: Span, scope: Scope) -> str | None:
        """Take a label and return its anchor; report a label that is taken and return None."""
        if label in self._lines:
            scope.report.error(
                "label-used-twice",
                span,
                f"the check '{label}' has the label of the one on line {self._lines[label]}",
                hint="write in the second column what this one checks",
            )
            return None
        self._lines[label] = scope.report.source.line_number(span)
        stem = "-".join(["check", *"".join(c if c.isalnum() else " " for c in plain(label)).split()])
        address, count = stem, 1
        while address in self._addresses:
            count += 1
            address = f"{stem}-{count}"
        self._addresses.add(address)
        return address


def _is_zero(node: Expression) -> bool:
    if isinstance(node, Unary):
        return _is_zero(node.operand)
    return isinstance(node, Number) and node.value == 0

"""Formulas with quantities: dimensions are checked at every operator, faults are reported at their place."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace

from calcgen.evaluation.results.common import Plain
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import (
    Binary,
    Call,
    Comparison,
    Condition,
    Expression,
    Logic,
    Name,
    Number,
    Text,
    Truth,
    Unary,
    UnitText,
)
from calcgen.quantities.display import Shown, describe, show
from calcgen.quantities.measure import Measure, Quantity, measure, pretty
from calcgen.quantities.registry import registry
from calcgen.text import Report, Span

_COMPARE: dict[str, Callable[[float, float], bool]] = {
    "<": lambda a, b: a < b,
    "<=": lambda a, b: a <= b,
    ">": lambda a, b: a > b,
    ">=": lambda a, b: a >= b,
    "==": lambda a, b: a == b,
    "!=": lambda a, b: a != b,
}


_OF_VALUES = frozenset({"no-such-head", "outside-beam", "table-empty-cell", "table-range"})
"""Faults in reading a block that depend on values alone, as arithmetic does."""


@dataclass(frozen=True)
class Evaluator:
    """Evaluates expressions over a scope. `quiet` leaves arithmetic faults unreported."""

    scope: Scope
    quiet: bool = False

    @property
    def report(self) -> Report:
        """Where faults go."""
        return self.scope.report

    def value(self, node: Expression) -> Plain | None:
        """Return the value of an expression, or None after a fault."""
        match node:
            case Number():
                return self.literal(node)
            case Text(value=text):
                return text
            case Truth(value=truth):
                return truth
            case Name():
                return self._name(node)
            case Unary():
                return self._unary(node)
            case Binary():
                return self._binary(node)
            case Call():
                return self._call(node)

    def measure(self, node: Expression) -> Measure | None:
        """Return the value of an expression that must be a quantity or number."""
        value = self.value(node)
        if value is None or isinstance(value, Measure):
            return value
        what = "text" if isinstance(value, str) else "yes or no"
        self.report.error("not-a-number", node.span, f"a quantity is needed here, this is {what}")
        return None

    def literal(self, node: Number) -> Measure | None:
        """Return a literal with its unit."""
        if node.unit is None:
            return measure(node.value, None)
        for symbol, span in node.unit.joined:
            if symbol in self.scope.values or symbol in self.scope.things:
                before = self.report.source.text[node.span.start : span.start].rstrip("/ ")
                self.report.error(
                    "unit-or-name",
                    span,
                    f"'{symbol}' is a unit and also a name of this calc",
                    hint=f"write {before} / {symbol} with spaces to divide by the name, or rename it",
                )
                return None
        return measure(node.value, pretty(node.unit.text), node.unit.factors)

    def _name(self, node: Name) -> Plain | None:
        arguments: tuple[Plain, ...] | None = None
        if node.arguments is not None:
            values = [self.value(a) for a in node.arguments]
            if any(v is None for v in values):
                return None
            arguments = tuple(v for v in values if v is not None)
        return self.scope.value(node, arguments, self.report.without(_OF_VALUES) if self.quiet else None)

    def _unary(self, node: Unary) -> Measure | None:
        operand = self.measure(node.operand)
        if operand is None or node.operator == "+":
            return operand
        if operand.unit == "°C":  # -10 °C is ten degrees below zero; any other temperature has no opposite
            if isinstance(node.operand, Number) and node.operand.unit is not None:
                return measure(-node.operand.value, "°C", node.operand.unit.factors)
            return self._fault(
                "outside-domain",
                node.operator_span,
                "a temperature has no opposite; differences are in K",
                None,
            )
        return Measure(-operand.quantity, operand.unit)

    def _binary(self, node: Binary) -> Measure | None:
        left, right = self.measure(node.left), self.measure(node.right)
        if left is None or right is None:
            return None
        match node.operator:
            case "+" | "-":
                return self._sum(node, left, right)
            case "*":
                unit = _product_unit(left, right) or _product_unit(right, left)
                return self._finite(node.operator_span, lambda: left.quantity * right.quantity, unit)
            case "/":
                if right.si == 0:
                    return self._fault("division-by-zero", node.operator_span, "division by zero", node.right)
                return self._finite(
                    node.operator_span, lambda: left.quantity / right.quantity, _product_unit(left, right)
                )
            case _:
                return self._power(node, left, right)

    def _sum(self, node: Binary, left: Measure, right: Measure) -> Measure | None:
        if not self.same_dimension(node.operator_span, node.operator, left, right, _mixed_number(node)):
            return None
        unit = left.unit if left.unit is not None else right.unit
        if "°C" in (left.unit, right.unit):
            unit = "°C" if (left.unit, right.unit) == ("°C", "K") else "K"
        sign = 1 if node.operator == "+" else -1
        return self._finite(node.operator_span, lambda: left.quantity + sign * right.quantity, unit)

    def _power(self, node: Binary, left: Measure, right: Measure) -> Measure | None:
        if right.dimension:
            self.report.error(
                "exponent-has-dimension",
                node.right.span,
                f"an exponent is a plain number, this is {describe(right.dimension)}",
            )
            return None
        if left.si < 0 and right.si != int(right.si):
            return self._fault(
                "outside-domain", node.operator_span, "a negative base with a fractional exponent", node.left
            )
        if left.si == 0 and right.si < 0:
            return self._fault(
                "division-by-zero", node.operator_span, "zero with a negative exponent", node.left
            )
        exponent = int(right.si) if right.si == int(right.si) else right.si
        if abs(exponent) > 1000:
            return self._fault("not-finite", node.operator_span, "the exponent is out of range", node.right)
        return self._finite(node.operator_span, lambda: left.quantity**exponent, None)

    def same_dimension(
        self, span: Span, operator: str, left: Measure, right: Measure, hint: str = ""
    ) -> bool:
        """Return whether two operands have one dimension; report it when not, with a hint if there is one."""
        if left.dimension == right.dimension:
            return True
        verb = {"+": "adds", "-": "subtracts"}.get(operator, "compares")
        if hint:
            pass
        elif {describe(left.dimension), describe(right.dimension)} == {"mass", "force"}:
            hint = "lb, kg and t are masses; write lbf or kN for a force, or multiply by g_n"
        elif not left.dimension or not right.dimension:
            hint = "a unit or a factor is missing on one side"
        self.report.error(
            "dimension-mismatch",
            span,
            f"'{operator}' {verb} {describe(left.dimension)} and {describe(right.dimension)}",
            hint=hint,
        )
        return False

    def _finite(self, span: Span, compute: Callable[[], Quantity], unit: str | None) -> Measure | None:
        try:
            quantity = compute()
        except OverflowError:
            quantity = None
        if quantity is None or not math.isfinite(quantity.magnitude):
            return self._fault("not-finite", span, "the result is too large to be a number", None)
        return Measure(quantity, unit)

    def _fault(self, code: str, span: Span, message: str, at: Expression | None) -> Measure | None:
        if not self.quiet:
            hint = ""
            if isinstance(at, Name):
                hint = f"'{at.dotted}' is the operand to look at"
            self.report.error(code, span, message, hint=hint)
        return None

    def _call(self, node: Call) -> Measure | None:
        values = [self.measure(a) for a in node.arguments]
        arguments = [v for v in values if v is not None]
        if len(arguments) < len(values):
            return None
        first = arguments[0]
        match node.function:
            case "sqrt" | "cbrt":
                return self._root(node, first)
            case "abs":
                return first if first.si >= 0 else Measure(-first.quantity, first.unit)
            case "min" | "max":
                return self._extreme(node, arguments)
            case "round" | "ceil" | "floor":
                return self._to_step(node, first, arguments[1])
            case "atan2":
                if not self.same_dimension(node.function_span, node.function, first, arguments[1]):
                    return None
                return measure(math.atan2(first.si, arguments[1].si), None)
            case "interpolate":
                return self._interpolate(node, arguments)
            case _:
                return self._number_function(node, first)

    def _root(self, node: Call, value: Measure) -> Measure | None:
        if node.function == "sqrt" and value.si < 0:
            return self._fault(
                "outside-domain", node.function_span, "the root of a negative value", node.arguments[0]
            )
        power = 1 / 2 if node.function == "sqrt" else 1 / 3
        root = (
            math.sqrt(value.si)
            if node.function == "sqrt"
            else math.copysign(abs(value.si) ** power, value.si)
        )
        units = value.quantity.units**power
        return Measure(registry().Quantity(root, units), None)

    def _extreme(self, node: Call, arguments: list[Measure]) -> Measure | None:
        first = arguments[0]
        for other in arguments[1:]:
            if not self.same_dimension(node.function_span, node.function, first, other):
                return None
        choose = min if node.function == "min" else max
        best = choose(arguments, key=lambda m: m.si)
        return replace(best, unit=best.unit or next((a.unit for a in arguments if a.unit), None))

    def _to_step(self, node: Call, value: Measure, step: Measure) -> Measure | None:
        if not self.same_dimension(node.function_span, node.function, value, step):
            return None
        if step.si <= 0:
            return self._fault(
                "outside-domain", node.function_span, "the step must be positive", node.arguments[1]
            )
        ratio = round(value.si / step.si, 9)  # so that 250 mm, held as 0.25000000000000006 m, stays 250 mm
        count = {"round": math.floor(ratio + 0.5), "ceil": math.ceil(ratio), "floor": math.floor(ratio)}
        return Measure(step.quantity * count[node.function], value.unit or step.unit)

    def _interpolate(self, node: Call, arguments: list[Measure]) -> Measure | None:
        x, x_1, y_1, x_2, y_2 = arguments
        for a, b in ((x, x_1), (x, x_2), (y_1, y_2)):
            if not self.same_dimension(node.function_span, node.function, a, b):
                return None
        if x_1.si == x_2.si:
            return self._fault(
                "division-by-zero", node.function_span, "both points have the same x", node.arguments[3]
            )
        share = (x.si - x_1.si) / (x_2.si - x_1.si)
        if not -1e-12 <= share <= 1 + 1e-12:
            return self._fault(
                "outside-domain", node.arguments[0].span, "x lies outside the two points", node.arguments[0]
            )
        quantity = y_1.quantity + (y_2.quantity - y_1.quantity) * share
        return Measure(quantity, y_1.unit)

    def _number_function(self, node: Call, value: Measure) -> Measure | None:
        if value.dimension:
            self.report.error(
                "dimension-mismatch",
                node.arguments[0].span,
                f"'{node.function}' takes a plain number or an angle, this is {describe(value.dimension)}",
            )
            return None
        functions: dict[str, Callable[[float], float]] = {
            "sin": math.sin,
            "cos": math.cos,
            "tan": math.tan,
            "asin": math.asin,
            "acos": math.acos,
            "atan": math.atan,
            "exp": math.exp,
            "ln": math.log,
            "log10": math.log10,
        }
        try:
            return measure(functions[node.function](value.si), None)
        except (ValueError, OverflowError):
            return self._fault(
                "outside-domain",
                node.function_span,
                f"'{node.function}' has no value at {value.si:g}",
                node.arguments[0],
            )

    def condition(self, node: Condition) -> bool | None:
        """Return whether a condition holds, or None after a fault."""
        if isinstance(node, Logic):
            held = [self.condition(o) for o in node.operands]
            if any(h is None for h in held):
                return None
            if node.operator == "not":
                return not held[0]
            return all(held) if node.operator == "and" else any(held)
        return self._comparison(node)

    def _comparison(self, node: Comparison) -> bool | None:
        left, right = self.value(node.left), self.value(node.right)
        if left is None or right is None:
            return None
        if isinstance(left, Measure) and isinstance(right, Measure):
            if not self.same_dimension(node.operator_span, node.operator, left, right):
                return None
            return _COMPARE[node.operator](left.si, right.si)
        if type(left) is type(right) and node.operator in ("==", "!="):
            return (left == right) is (node.operator == "==")
        self.report.error(
            "not-a-number",
            node.operator_span,
            f"'{node.operator}' compares two quantities, or with == and != two texts",
        )
        return None


def _mixed_number(node: Binary) -> str:
    """Return what to write where a dash joins a whole number and a fraction of a unit: `3-1/2 in`."""
    whole, part = node.left, node.right
    if node.operator != "-" or not isinstance(whole, Number) or not isinstance(part, Number):
        return ""
    joined = whole.span.end + 1 == part.span.start  # '3-1/2 in', not '3 - 1/2 in'
    fraction = "/" in part.text.split()[0]
    return f"write {whole.text} {part.text} for a length" if joined and fraction else ""


def _product_unit(value: Measure, factor: Measure) -> str | None:
    """Return the unit that `value` keeps when multiplied or divided by a plain `factor`."""
    if factor.dimension or not value.dimension:
        return None
    return "K" if value.unit == "°C" else value.unit


def with_unit(value: Plain, unit: UnitText | None, report: Report) -> Plain | None:
    """Return a value shown in the unit chosen in brackets; report a unit of another dimension."""
    if unit is None:
        return value
    if not isinstance(value, Measure):
        report.error("unit-mismatch", unit.span, "only a quantity has a unit")
        return None
    chosen = measure(0.0, None, unit.factors).dimension
    if value.dimension != chosen:
        report.error(
            "unit-mismatch",
            unit.span,
            f"the value is {describe(value.dimension)}, the unit {pretty(unit.text)} is {describe(chosen)}",
            hint="a missing factor, or a unit left out of a number, is the usual cause",
        )
        return None
    return value.shown_in(pretty(unit.text))


def shown(value: Plain, scope: Scope) -> Shown:
    """Return a value as it is read on a page."""
    if isinstance(value, Measure):
        return show(value, scope.style)
    if isinstance(value, bool):
        return Shown("yes" if value else "no")
    return Shown(value)

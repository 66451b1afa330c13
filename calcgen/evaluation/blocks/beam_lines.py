"""The lines of a beam block while they are read: values, places and faults."""

from __future__ import annotations

import math
import re
from typing import TypeVar

from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamSetting,
)
from calcgen.language.nodes import Expression, Named
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si
from calcgen.text import Related, Span

T = TypeVar("T")

EXTREME = re.compile(r"^(x_)?(M|V|w|slope|w_rel)_(max|min|abs)(_lat)?$")
REACTION = re.compile(r"^(R|M_R|θ)_([1-9]\d*)(?:_(max|min))?(_lat)?$")
CROSSING = re.compile(r"^x_(M|V)_0(?:_([1-9]\d*))?(_lat)?$")
SHAPE = re.compile(r"^(C_b|C_1)$")
STATE = re.compile(r"^(M|V|w|slope|w_rel)(_lat)?$")
SPAN = re.compile(r"^span_([1-9]\d*)$")

NOTHING = 1e-24  # SI; a stiffness below it is none: what is divided by it is no longer a number


def is_result(name: str) -> bool:
    """Whether a name is one of a beam's results."""
    return any(pattern.match(name) for pattern in (EXTREME, REACTION, STATE, SPAN, CROSSING, SHAPE))


class Lines:
    """The lines of one block. Faults are reported, and `failed` remembers that there was one."""

    def __init__(self, block: BeamBlock, scope: Scope) -> None:
        self.block, self.scope, self.report = block, scope, scope.report
        self.failed = False
        self.length = 0.0

    def fault(
        self, code: str, span: Span, message: str, hint: str = "", related: tuple[Related, ...] = ()
    ) -> None:
        """Report an error."""
        self.failed = True
        self.report.error(code, span, message, hint=hint, related=related)

    def of(self, kind: type[T]) -> list[T]:
        """Return the lines of a kind in the order typed."""
        return [line for line in self.block.lines if isinstance(line, kind)]

    def keep_free_of_results(self, label: Named) -> None:
        """Report a case, combination or group that has the name of a result.

        A factor is asked of a combination, so a combination `C_1` hides none.
        """
        if is_result(label.name) and not SHAPE.match(label.name):
            self.fault(
                "name-hides-result", label.span, f"'{label.name}' is the name of a result of this block"
            )

    def number(self, node: Expression, kind: str, hint: str = "") -> float:
        """Return a value in SI, or nan after a fault; `hint` is for one of another dimension."""
        value = si(node, kind, self.scope, hint)
        if value is None:
            self.failed = True
            return math.nan
        return value

    def positive(self, line: BeamSetting, kind: str, what: str) -> Measure | None:
        """Return the value of a setting that must be positive, None after a fault."""
        value = quantity_of(line.value, kind, self.scope)
        if value is None:
            self.failed = True
            return None
        return value if self.is_positive(value.si, line.value, what) else None

    def is_positive(self, value: float, node: Expression, what: str) -> bool:
        """Report a stiffness, SI, that is not positive, or so small that it is as good as none."""
        if not value >= NOTHING:
            hint = f"{value:.3g} in SI units is as good as nothing" if value > 0.0 else ""
            if not math.isnan(value):  # reported already
                self.fault("not-positive", node.span, f"{what} must be positive", hint=hint)
            return False
        return True

    def place(self, node: Expression) -> float:
        """Return a place on the beam, m."""
        x = self.number(node, "length")
        if not math.isnan(x) and not -1e-9 * self.length <= x <= self.length * (1 + 1e-9):
            self.fault(
                "outside-beam",
                node.span,
                f"{self.text(x)} lies outside the beam, which runs from 0 to {self.text(self.length)}",
            )
        return min(max(x, 0.0), self.length)

    def text(self, x: float, unit: str | None = None) -> str:
        """Return a place on the beam as read."""
        default = "ft" if self.scope.style.system == "US" else "m"
        return length_text(x, self.scope.style, unit or default)

    def unit_of(self, node: Expression | None) -> str | None:
        """Return the unit in which a place is written."""
        value = quantity_of(node, "length", self.scope) if node is not None else None
        return value.unit if value is not None else None


def length_text(x: float, style: Style, unit: str) -> str:
    """Return a place or length as read: '6 m', '2.5 m', without trailing zeros."""
    shown = show(from_si(x, "m").shown_in(unit), style)
    number = (
        shown.number.rstrip("0").rstrip(".")
        if "." in shown.number and "×" not in shown.number
        else shown.number
    )
    return f"{number or '0'}\u00a0{shown.unit}"

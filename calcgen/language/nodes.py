"""The nodes of expressions and lines. Every node carries its span in the calc's text."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TypeAlias

from calcgen.text import Span


@dataclass(frozen=True)
class UnitText:
    """A unit as typed: `kN/m²`.

    Attributes
    ----------
    text : as typed, without white space.
    factors : (symbol of the closed list, exponent), in the order typed.
    joined : symbols that stand after a '/', each with its span; where one is also a name
        defined above, the literal has two readings.
    """

    text: str
    factors: tuple[tuple[str, int], ...]
    span: Span
    joined: tuple[tuple[str, Span], ...] = ()


@dataclass(frozen=True)
class Number:
    """A literal, with or without a unit; `6 ft 3 in` is 6.25 with the unit ft."""

    value: float
    unit: UnitText | None
    text: str
    span: Span


@dataclass(frozen=True)
class Text:
    """A text literal in quotes."""

    value: str
    span: Span


@dataclass(frozen=True)
class Truth:
    """`yes` or `no`."""

    value: bool
    span: Span


@dataclass(frozen=True)
class Name:
    """A dotted name: `M_Ed`, `main.W_el_y`, `stringer.ULS.M_max(2.5 m)`, `k_mod("class 1")`.

    `parts` are canonical (see `calcgen.quantities.symbols.canonical`); `spans` has one span a part.
    `arguments` is None where no parentheses follow.
    """

    parts: tuple[str, ...]
    spans: tuple[Span, ...]
    arguments: tuple[Expression, ...] | None
    span: Span

    @property
    def dotted(self) -> str:
        """The parts joined by dots."""
        return ".".join(self.parts)


@dataclass(frozen=True)
class Call:
    """A call of a function of the language; `function` is one of `FUNCTIONS`."""

    function: str
    arguments: tuple[Expression, ...]
    function_span: Span
    span: Span


@dataclass(frozen=True)
class Unary:
    """A sign: '-' or '+'."""

    operator: str
    operand: Expression
    operator_span: Span
    span: Span


@dataclass(frozen=True)
class Binary:
    """One of + - * / ^ between two operands."""

    operator: str
    left: Expression
    right: Expression
    operator_span: Span
    span: Span


@dataclass(frozen=True)
class Comparison:
    """One of < <= > >= == != between two operands."""

    operator: str
    left: Expression
    right: Expression
    operator_span: Span
    span: Span


@dataclass(frozen=True)
class Logic:
    """`and`, `or` (two operands) or `not` (one)."""

    operator: str
    operands: tuple[Condition, ...]
    operator_span: Span
    span: Span


@dataclass(frozen=True)
class Branch:
    """One line of a case formula; `condition` is None for `otherwise`."""

    value: Expression
    condition: Condition | None
    span: Span


@dataclass(frozen=True)
class Cases:
    """A value by cases: the first branch whose condition is true."""

    branches: tuple[Branch, ...]
    span: Span


Expression: TypeAlias = Number | Text | Truth | Name | Call | Unary | Binary
Condition: TypeAlias = Comparison | Logic
Formula: TypeAlias = Expression | Cases

FUNCTIONS: dict[str, tuple[int, int | None]] = {
    "sqrt": (1, 1),
    "cbrt": (1, 1),
    "abs": (1, 1),
    "min": (1, None),
    "max": (1, None),
    "sin": (1, 1),
    "cos": (1, 1),
    "tan": (1, 1),
    "asin": (1, 1),
    "acos": (1, 1),
    "atan": (1, 1),
    "atan2": (2, 2),
    "exp": (1, 1),
    "ln": (1, 1),
    "log10": (1, 1),
    "round": (2, 2),
    "ceil": (2, 2),
    "floor": (2, 2),
    "interpolate": (5, 5),
}
"""Functions of the language with the least and the greatest number of arguments (None: no limit)."""

WORDS = frozenset({"and", "or", "not", "when", "otherwise", "yes", "no", "of"})
"""Words of expressions, which no name may be."""

CONSTANTS = frozenset({"pi", "π", "g_n"})
"""Names with a fixed value."""


@dataclass(frozen=True)
class Citation:
    """`[KEY p. 12]` in the third column: a key of references.toml and the place in it."""

    key: str
    place: str
    span: Span


@dataclass(frozen=True)
class Column:
    """Text of the second or third column; continuation lines are joined by a space."""

    text: str
    span: Span
    citations: tuple[Citation, ...] = ()


@dataclass(frozen=True)
class Annotations:
    """The second and third column of a line (empty text where there is none)."""

    note: Column
    reference: Column


@dataclass(frozen=True)
class Named:
    """A name where it is defined."""

    name: str
    span: Span


@dataclass(frozen=True)
class Place:
    """`{M_Ed}` in prose or in a sheet's text: where the value of a name is shown."""

    name: Name
    span: Span

"""`inputs`: literals, and values of other calcs."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.nodes import Annotations, Expression, Name, Named, UnitText
from calcgen.text import Span


@dataclass(frozen=True)
class Feed:
    """`stringer.ULS.R_1 of W-07`: a value of another calc."""

    name: Name
    calc: str
    calc_span: Span
    span: Span


@dataclass(frozen=True)
class Input:
    """One input.

    `value` is a Number, Text or Truth, a sign before a Number (Unary), or a Feed;
    `unit` is the unit chosen to show it in (`L [mm] = 6 m`).
    """

    target: Named
    unit: UnitText | None
    value: Expression | Feed
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class InputsBlock:
    """The inputs of one block."""

    items: tuple[Input, ...]
    span: Span

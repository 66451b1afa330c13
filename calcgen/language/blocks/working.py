"""`working`: derived values and checks."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.nodes import Annotations, Comparison, Formula, Named, UnitText
from calcgen.text import Span


@dataclass(frozen=True)
class Derivation:
    """`M_Ed [kN·m] = w*L^2/8`."""

    target: Named
    unit: UnitText | None
    formula: Formula
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class Check:
    """`M_Ed <= M_c_Rd`; the operator of `comparison` is one of < <= > >=.

    `statement` is the text as typed, white space collapsed: the label where none is given.
    """

    comparison: Comparison
    statement: str
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class WorkingBlock:
    """The lines of one block, in order."""

    items: tuple[Derivation | Check, ...]
    span: Span

"""A calc repeated over the values of one input."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.evaluation.results.common import Plain
from calcgen.language.nodes import Column
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure
from calcgen.text import Span


@dataclass(frozen=True)
class VaryRun:
    """A calc evaluated once with another value of the input.

    Attributes
    ----------
    shown : the value, a designation or a number in the unit of its column.
    mass : of the section, where the input names one whose mass is published; `mass_shown` with it.
    values, texts : of each expression in the unit of its column; None and '—' where there is none.
    fault : what the first error says, '' where the run has none.
    checked : whether the run has checks and no error; `satisfied` is whether every one of them is satisfied.
    governing : label and utilisation of the check that governs; the latter may be None.
    present, lightest : whether it has the present value; whether it is the lightest, or one of them, that
        satisfies every check.
    """

    value: Plain
    shown: Shown
    mass: Measure | None
    mass_shown: Shown | None
    values: tuple[Measure | None, ...]
    texts: tuple[str, ...]
    fault: str
    checked: bool
    satisfied: bool
    governing: tuple[str, float | None] | None
    present: bool
    lightest: bool = False


@dataclass(frozen=True)
class VaryResult:
    """A calc repeated over the values of one input.

    Attributes
    ----------
    name : the block's anchor, which no name can be: 'vary-L'.
    input, unit : what is varied, and the unit its values are shown in; '' for sections.
    present : its value in the calc.
    pattern : of the designations tried, '' where a quantity is varied.
    heads : the expressions as typed; units : those of their columns.
    lines : each line as typed, with its columns and its number.
    """

    name: str
    input: str
    unit: str
    present: Plain
    pattern: str
    heads: tuple[str, ...]
    units: tuple[str, ...]
    runs: tuple[VaryRun, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span

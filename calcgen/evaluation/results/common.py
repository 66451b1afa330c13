"""What blocks of every kind have: values, named results, premises, the second route."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.quantities.display import Shown
from calcgen.quantities.measure import Measure

Standing: TypeAlias = Literal["satisfied", "exceeded", "no checks", "not evaluated", "in error"]


Verdict: TypeAlias = Literal["met", "not met", "left to judgement"]


Plain: TypeAlias = Measure | str | bool
"""A value of a name: a quantity, a text or yes/no."""


@dataclass(frozen=True)
class Origin:
    """Where what is fed comes from: `stringer.ULS.R_1` of calc `W-07`; `arguments` as typed: '(2.5 m)'."""

    calc: str
    name: str
    arguments: str = ""

    @property
    def text(self) -> str:
        """It in words, as typed: 'stringer.ULS.M(2.5 m) of W-07'."""
        return f"{self.name}{self.arguments} of {self.calc}"


@dataclass(frozen=True)
class FedBlock:
    """A whole block of another calc, known here under a name of its own.

    Attributes
    ----------
    kind : 'section', 'beam', 'stress' or 'table'.
    what : which one it is, in words that do not depend on units or figures: 'IPE 240', 'parts rib, flange'.
    results : what it gives, by dotted names; of a table its cells.
    """

    kind: str
    what: str
    results: Mapping[str, Measure]


@dataclass(frozen=True)
class Operand:
    """A name that stands in a formula and what was put in for it."""

    name: str
    shown: Shown


@dataclass(frozen=True)
class Result:
    """A named result of a block: `W_el_y`, `M_max`, `σ_max`.

    `meaning` is the quantity in words, with axis or sign: 'second moment of area about the horizontal axis'.
    `place` tells where an extreme stands, '' where that says nothing; `provenance` by which route a section's
    value was found ('published', 'from the outline', 'finite elements'), '' for other results.
    """

    name: str
    meaning: str
    value: Measure
    shown: Shown
    place: str = ""
    provenance: str = ""


@dataclass(frozen=True)
class Premise:
    """A condition under which the block's formulas are right."""

    of: str
    premise: str
    verdict: Verdict
    detail: str


@dataclass(frozen=True)
class SecondRoute:
    """A number found again by a route that shares no code; the residual is relative to `scale` (in words)."""

    of: str
    what: str
    residual: float
    tolerance: float
    scale: str

    @classmethod
    def found(cls, of: str, what: str, residual: float, tolerance: float, scale: str) -> SecondRoute:
        """Return a comparison; below 1e-12 lies rounding that differs between machines, taken as none."""
        small = abs(residual) < 1e-12
        return cls(of, what, 0.0 if small else float(f"{residual:.2e}"), tolerance, scale)

    @property
    def holds(self) -> bool:
        """Whether the two routes agree within the tolerance."""
        return abs(self.residual) <= self.tolerance

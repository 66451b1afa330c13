"""`stress NAME`: the stress of a section under given forces."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.section import LaterLine, Point
from calcgen.language.nodes import Annotations, Expression, Named
from calcgen.text import Span

KEYS = ("section", "M", "M_lat", "N", "V", "V_lat", "T", "f_y", "E", "model", "limit", "R_c", "centre")


@dataclass(frozen=True)
class StressSetting:
    """`M = stringer.ULS.M_max`: one of `KEYS`."""

    key: Named
    value: Expression
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class StressPoint:
    """`point weld = (0 mm, 120 mm)`, in the section's own coordinates."""

    target: Named
    point: Point
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class StressBlock:
    """A stress block; `settings` has each key once."""

    target: Named
    settings: tuple[StressSetting, ...]
    points: tuple[StressPoint, ...]
    later: tuple[LaterLine, ...]
    span: Span
    head_span: Span

    def setting(self, key: str) -> StressSetting | None:
        """Return the line of a key."""
        return next((s for s in self.settings if s.key.name == key), None)

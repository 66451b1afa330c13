"""`stress NAME`: the stress of a section under given forces."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, one_of, only_once, read_each
from calcgen.language.blocks.section import Point, read_point
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Name, Named
from calcgen.text import Report, Span

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
    span: Span
    head_span: Span

    def setting(self, key: str) -> StressSetting | None:
        """Return the line of a key."""
        return next((s for s in self.settings if s.key.name == key), None)


_WORDS = {
    "model": ("elastic", "plastic", "elastic_plastic", "no_tension", "cracked", "curved"),
    "centre": ("bottom", "top"),
}
"""Settings whose value is a word."""


def read_stress(block: BlockText, report: Report) -> Outcome[StressBlock]:
    """Read settings and points."""
    seen: dict[str, Span] = {}
    points: dict[str, Span] = {}

    def read(line: Line, cursor: Cursor) -> StressSetting | StressPoint:
        if cursor.sees("point"):
            return _read_stress_point(line, cursor, points)
        return _read_setting(line, cursor, seen)

    items, failed = read_each(block.lines, report, read)
    if failed:
        return Outcome(None, frozenset({block.target.name}))
    settings = tuple(i for i in items if isinstance(i, StressSetting))
    found = tuple(i for i in items if isinstance(i, StressPoint))
    return Outcome(StressBlock(block.target, settings, found, block.span, block.head_span))


def _read_stress_point(line: Line, cursor: Cursor, seen: dict[str, Span]) -> StressPoint:
    cursor.take()
    target = cursor.named("a point")
    only_once(target, seen, "point")
    cursor.expect("=", hint="write point NAME = (x, y)")
    point = read_point(cursor)
    cursor.finish()
    return StressPoint(target, point, line.annotations, line.span)


def _read_setting(line: Line, cursor: Cursor, seen: dict[str, Span]) -> StressSetting:
    key = cursor.named("a setting")
    one_of(key.name, key.span, (*KEYS, "point"), "setting of a stress")
    cursor.expect("=")
    only_once(key, seen, "setting")
    value = expression(cursor)
    cursor.finish()
    words = _WORDS.get(key.name)
    if words:
        if not isinstance(value, Name):
            raise ReadingError(
                "unknown-word", value.span, f"'{key.name}' is a word", hint=f"possible are {', '.join(words)}"
            )
        one_of(value.dotted, value.span, words, key.name)
    return StressSetting(key, value, line.annotations, line.span, line.statement_span)

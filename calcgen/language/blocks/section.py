"""`section NAME`: one shape, or parts, holes and bars."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.reading import (
    BlockText,
    Outcome,
    not_available_yet,
    one_of,
    only_once,
    read_each,
)
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Named
from calcgen.language.shapes import SHAPES, read_shape
from calcgen.text import Report, Span


@dataclass(frozen=True)
class Argument:
    """`b = 75 mm` in the parentheses of a shape."""

    name: Named
    value: Expression
    span: Span


@dataclass(frozen=True)
class Point:
    """`(x, y)`."""

    x: Expression
    y: Expression
    span: Span


@dataclass(frozen=True)
class ShapeText:
    """`rectangle(b = 75 mm, h = 250 mm) mirrored turned 90 deg at (0 mm, 0 mm)`.

    `positional` holds unnamed expressions: the designation of `rolled`. `at` is None when not written.
    """

    shape: Named
    arguments: tuple[Argument, ...]
    positional: tuple[Expression, ...]
    points: tuple[Point, ...]
    mirrored: bool
    turned: Expression | None
    at: Point | None
    span: Span


@dataclass(frozen=True)
class ShapeLine:
    """`shape = ...`."""

    shape: ShapeText
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class LaterLine:
    """A line of the language that this release reads but does not evaluate yet."""

    what: str
    span: Span


@dataclass(frozen=True)
class SectionBlock:
    """A section: `items` in the order typed."""

    target: Named
    items: tuple[ShapeLine | LaterLine, ...]
    span: Span
    head_span: Span

"""`section NAME`: one shape, or parts, holes and bars."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TypeAlias

from calcgen.language.blocks.reading import (
    BlockText,
    Outcome,
    one_of,
    only_once,
    read_each,
)
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Named
from calcgen.language.tokens import Token
from calcgen.text import Related, Report, Span


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
    statement_span: Span


@dataclass(frozen=True)
class PartLine:
    """`part plate = rectangle(...) at (0 mm, 0 mm) of steel`; `material` is None when not written."""

    target: Named
    shape: ShapeText
    material: Named | None
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class HoleLine:
    """`hole bolt = rectangle(...) at (0 mm, 60 mm)`: cuts the parts written above it."""

    target: Named
    shape: ShapeText
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class BarsLine:
    """`bars tension = 4 of 20 mm from (...) to (...) of steel`, or an area `at` one place.

    `size` is the diameter where `count` is written, else the area. `end` is None for a single place.
    """

    target: Named
    count: Expression | None
    size: Expression
    start: Point
    end: Point | None
    material: Named | None
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class MaterialLine:
    """`modulus oak = 11 GPa`, `strength steel = 275 MPa`; `key` is the word."""

    key: Named
    material: Named
    value: Expression
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class ReferenceLine:
    """`reference = oak`."""

    material: Named
    annotations: Annotations
    span: Span
    statement_span: Span


SectionLine: TypeAlias = ShapeLine | PartLine | HoleLine | BarsLine | MaterialLine | ReferenceLine


@dataclass(frozen=True)
class SectionBlock:
    """A section: `items` in the order typed."""

    target: Named
    items: tuple[SectionLine, ...]
    span: Span
    head_span: Span


SHAPES: dict[str, tuple[str, ...]] = {
    "rectangle": ("b", "h"),
    "circle": ("d",),
    "tube": ("d", "t"),
    "box": ("b", "h", "t", "r_o", "r_i"),
    "i_shape": ("h", "b", "t_w", "t_f", "r", "slope", "r_toe", "b_t", "t_t", "b_b", "t_b"),
    "channel": ("h", "b", "t_w", "t_f", "r", "slope", "r_toe"),
    "tee": ("h", "b", "t_w", "t_f", "r"),
    "angle": ("h", "b", "t", "r_1", "r_2"),
    "zed": ("h", "b", "t"),
    "ellipse": ("b", "h"),
    "trapezium": ("b_t", "b_b", "h"),
    "polygon": (),
    "strip": ("t", "r"),
    "rolled": (),
}
"""Shapes with the names of their arguments; which are needed together is decided in evaluation."""

_KEYS = ("shape", "part", "hole", "bars", "modulus", "strength", "reference")
_ALIASES = {"d": "h", "b_f": "b"}
_STOPS = frozenset({"mirrored", "turned", "at", "from", "to", "of"})
_ORDER = ("mirrored", "turned", "at")
_POINTED = ("polygon", "strip")
_WRITTEN = {
    "polygon": "polygon((x, y), (x, y), (x, y))",
    "strip": "strip(t = 2 mm, r = 3 mm, (x, y), (x, y), (x, y))",
    "rolled": 'rolled("DESIGNATION")',
}
"""How the shapes are written that take more than named arguments."""


def read_section(block: BlockText, report: Report) -> Outcome[SectionBlock]:
    """Read one shape, or parts, with their holes, bars and materials."""
    seen: dict[str, Span] = {}

    def read(line: Line, cursor: Cursor) -> SectionLine:
        one_of(cursor.token.text, cursor.span(cursor.token), _KEYS, "line of a section")
        key = cursor.named("the line")
        if key.name in ("shape", "reference"):
            only_once(key, seen, "line")
        item = _LINES[key.name](cursor, key, line, seen)
        cursor.finish()
        return item

    items, failed = read_each(block.lines, report, read, _STOPS)
    shape = next((i for i in items if isinstance(i, ShapeLine)), None)
    part = next((i for i in items if isinstance(i, PartLine)), None)
    if shape is not None and part is not None:
        report.error(
            "shape-beside-parts",
            part.span,
            "a section has one 'shape', or parts",
            hint="write the shape as a part too: part NAME = …",
            related=(Related(shape.span, "the shape"),),
        )
    elif shape is None and part is None and not failed:
        report.error(
            "section-without-shape",
            block.head_span,
            f"the section '{block.target.name}' has no shape",
            hint="write shape = rectangle(b = 100 mm, h = 200 mm), or another shape, or parts",
        )
    if failed or (shape is None) == (part is None):
        return Outcome(None, frozenset({block.target.name}))
    return Outcome(SectionBlock(block.target, tuple(items), block.span, block.head_span))


def _shape_line(cursor: Cursor, _key: Named, line: Line, _seen: dict[str, Span]) -> ShapeLine:
    cursor.expect("=")
    shape = read_shape(cursor)
    if cursor.sees("of"):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "'of' is not expected here",
            hint="a section of one shape names no material; write part NAME = … of MATERIAL to name one",
        )
    return ShapeLine(shape, line.annotations, line.span, line.statement_span)


def _part_line(cursor: Cursor, _key: Named, line: Line, seen: dict[str, Span]) -> PartLine:
    target = _target(cursor, "part", seen)
    shape = read_shape(cursor)
    return PartLine(target, shape, _material(cursor), line.annotations, line.span, line.statement_span)


def _hole_line(cursor: Cursor, _key: Named, line: Line, seen: dict[str, Span]) -> HoleLine:
    target = _target(cursor, "hole", seen)
    return HoleLine(target, read_shape(cursor), line.annotations, line.span, line.statement_span)


def _bars_line(cursor: Cursor, _key: Named, line: Line, seen: dict[str, Span]) -> BarsLine:
    target = _target(cursor, "bars", seen)
    size = expression(cursor)
    count = None
    if cursor.accept("of"):
        count, size = size, expression(cursor)
    end = None
    if cursor.accept("from"):
        start = read_point(cursor)
        cursor.expect("to", hint="a row of bars runs from (x, y) to (x, y)")
        end = read_point(cursor)
    else:
        hint = "write 4 of 20 mm from (x, y) to (x, y), or an area at (x, y)"
        if not cursor.sees("at"):
            raise cursor.misplaced("the place of the bars is missing", hint)
        cursor.take()
        start = read_point(cursor)
    return BarsLine(
        target, count, size, start, end, _material(cursor), line.annotations, line.span, line.statement_span
    )


def _material_line(cursor: Cursor, key: Named, line: Line, seen: dict[str, Span]) -> MaterialLine:
    material = cursor.named("a material")
    only_once(Named(f"{key.name} {material.name}", material.span), seen, "line")
    cursor.expect("=")
    return MaterialLine(key, material, expression(cursor), line.annotations, line.span, line.statement_span)


def _reference_line(cursor: Cursor, _key: Named, line: Line, _seen: dict[str, Span]) -> ReferenceLine:
    cursor.expect("=")
    return ReferenceLine(cursor.named("a material"), line.annotations, line.span, line.statement_span)


_LINES: dict[str, Callable[[Cursor, Named, Line, dict[str, Span]], SectionLine]] = {
    "shape": _shape_line,
    "part": _part_line,
    "hole": _hole_line,
    "bars": _bars_line,
    "modulus": _material_line,
    "strength": _material_line,
    "reference": _reference_line,
}


def _target(cursor: Cursor, what: str, seen: dict[str, Span]) -> Named:
    """Read the name of a part, hole or bars, and its '='; they share one name space."""
    target = cursor.named(f"the {what}")
    if f"name {target.name}" in seen:
        raise ReadingError(
            "written-twice",
            target.span,
            f"the name '{target.name}' stands twice in this section",
            hint="parts, holes and bars have names of their own",
            related=(Related(seen[f"name {target.name}"], "the first time"),),
        )
    seen[f"name {target.name}"] = target.span
    cursor.expect("=")
    return target


def _material(cursor: Cursor) -> Named | None:
    return cursor.named("the material") if cursor.accept("of") else None


def read_shape(cursor: Cursor) -> ShapeText:
    """Read a shape with its arguments and its place."""
    start = cursor.token
    name = cursor.named("a shape")
    one_of(name.name, name.span, SHAPES, "shape")
    opening = cursor.expect("(", hint=f"write the arguments after it: {name.name}(...)")
    arguments, positional, points = _read_arguments(cursor, name.name, opening)
    mirrored = cursor.accept("mirrored") is not None
    turned = expression(cursor) if cursor.accept("turned") else None
    at = read_point(cursor) if cursor.accept("at") else None
    if cursor.sees(*_ORDER):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            f"'{cursor.token.text}' is not expected here",
            hint="each is written once, in the order in which they act: mirrored, turned 90 deg, at (x, y)",
        )
    end = cursor.previous or start
    span = cursor.text.span(start.start, end.end)
    return ShapeText(name, arguments, positional, points, mirrored, turned, at, span)


def read_point(cursor: Cursor) -> Point:
    """Read `(x, y)`."""
    opening = cursor.expect("(", hint="a point is written (x, y)")
    x = expression(cursor)
    cursor.expect(",", hint="a point is written (x, y)")
    y = expression(cursor)
    closing = cursor.close(opening)
    return Point(x, y, cursor.text.span(opening.start, closing.end))


def _read_arguments(
    cursor: Cursor, shape: str, opening: Token
) -> tuple[tuple[Argument, ...], tuple[Expression, ...], tuple[Point, ...]]:
    arguments: list[Argument] = []
    positional: list[Expression] = []
    points: list[Point] = []
    seen: dict[str, Span] = {}
    while not cursor.accept(")"):
        if shape in _POINTED and cursor.sees("("):
            points.append(read_point(cursor))
        elif cursor.token.kind == "name" and cursor.following.text == "=":
            arguments.append(_read_argument(cursor, shape, seen))
        else:
            positional.append(_read_positional(cursor, shape, first=not positional))
        if not cursor.accept(","):
            cursor.close(opening)
            break
    return tuple(arguments), tuple(positional), tuple(points)


def _read_argument(cursor: Cursor, shape: str, seen: dict[str, Span]) -> Argument:
    name = cursor.named("an argument")
    known = SHAPES[shape]
    aliases = tuple(a for a, meant in _ALIASES.items() if meant in known and a not in known)
    if not known:
        raise ReadingError(
            "unknown-word",
            name.span,
            f"'{shape}' takes no named arguments",
            hint=f"write {_WRITTEN[shape]}",
        )
    one_of(name.name, name.span, known + aliases, f"argument of '{shape}'")
    meant = _ALIASES[name.name] if name.name in aliases else name.name
    only_once(Named(meant, name.span), seen, "argument")
    cursor.expect("=")
    value = expression(cursor)
    return Argument(name, value, name.span.to(value.span))


def _read_positional(cursor: Cursor, shape: str, *, first: bool) -> Expression:
    value = expression(cursor)
    if shape == "rolled" and first:
        return value
    if shape == "rolled":
        raise ReadingError("argument-count", value.span, "'rolled' takes one designation")
    hint = f"write {_WRITTEN[shape]}" if shape in _POINTED else f"such as {SHAPES[shape][0]} = ..."
    what = "a point" if shape in _POINTED else "a named argument"
    raise ReadingError("unnamed-argument", value.span, f"'{shape}' takes {what} here", hint=hint)

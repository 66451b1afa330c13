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
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Named
from calcgen.language.tokens import Token
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


SHAPES: dict[str, tuple[str, ...]] = {
    "rectangle": ("b", "h"),
    "circle": ("d",),
    "tube": ("d", "t"),
    "box": ("b", "h", "t", "r_o", "r_i"),
    "i_shape": ("h", "b", "t_w", "t_f", "r", "slope", "r_toe", "b_t", "t_t", "b_b", "t_b"),
    "channel": ("h", "b", "t_w", "t_f", "r", "slope", "r_toe"),
    "tee": ("h", "b", "t_w", "t_f", "r"),
    "angle": ("h", "b", "t", "r_1", "r_2"),
    "polygon": (),
    "rolled": (),
}
"""Shapes with the names of their arguments; which are needed together is decided in evaluation."""

_LATER_SHAPES = ("ellipse", "zed", "trapezium", "strip")
_LATER_KEYS = ("part", "hole", "bars", "modulus", "strength", "reference")
_ALIASES = {"d": "h", "b_f": "b"}
_STOPS = frozenset({"mirrored", "turned", "at"})


def read_section(block: BlockText, report: Report) -> Outcome[SectionBlock]:
    """Read `shape = ...`; lines of composite sections are answered 'not available yet'."""
    seen: dict[str, Span] = {}

    def read(line: Line, cursor: Cursor) -> ShapeLine | LaterLine:
        token = cursor.token
        if cursor.sees(*_LATER_KEYS):
            return later_line(line, token.text, report)
        one_of(token.text, cursor.span(token), ("shape", *_LATER_KEYS), "line of a section")
        only_once(cursor.named("the line"), seen, "line")
        cursor.expect("=")
        shape = read_shape(cursor)
        cursor.finish()
        return ShapeLine(shape, line.annotations, line.span)

    items, failed = read_each(block.lines, report, read, _STOPS)
    if not items and not failed:
        report.error(
            "section-without-shape",
            block.head_span,
            f"the section '{block.target.name}' has no shape",
            hint="write shape = rectangle(b = 100 mm, h = 200 mm), or another shape",
        )
        failed = [*block.lines]
    if failed or not items:
        return Outcome(None, frozenset({block.target.name}))
    later = any(isinstance(i, LaterLine) for i in items)
    names = frozenset({block.target.name}) if later else frozenset[str]()
    return Outcome(SectionBlock(block.target, tuple(items), block.span, block.head_span), names)


def later_line(line: Line, what: str, report: Report) -> LaterLine:
    """Answer a line that this release does not evaluate yet."""
    not_available_yet(f"'{what}'", line.statement_span).report_to(report)
    return LaterLine(what, line.span)


def read_shape(cursor: Cursor) -> ShapeText:
    """Read a shape with its arguments and its place."""
    start = cursor.token
    name = cursor.named("a shape")
    if name.name in _LATER_SHAPES:
        raise not_available_yet(f"the shape '{name.name}'", name.span)
    one_of(name.name, name.span, (*SHAPES, *_LATER_SHAPES), "shape")
    opening = cursor.expect("(", hint=f"write the arguments after it: {name.name}(...)")
    arguments, positional, points = _read_arguments(cursor, name.name, opening)
    mirrored = cursor.accept("mirrored") is not None
    turned = expression(cursor) if cursor.accept("turned") else None
    at = read_point(cursor) if cursor.accept("at") else None
    if cursor.sees(*_STOPS):
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
        if shape == "polygon" and cursor.sees("("):
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
        hint = 'write rolled("DESIGNATION")' if shape == "rolled" else "write polygon((x, y), (x, y), (x, y))"
        raise ReadingError("unknown-word", name.span, f"'{shape}' takes no named arguments", hint=hint)
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
    hint = (
        "write polygon((x, y), (x, y), (x, y))" if shape == "polygon" else f"such as {SHAPES[shape][0]} = ..."
    )
    what = "a point" if shape == "polygon" else "a named argument"
    raise ReadingError("unnamed-argument", value.span, f"'{shape}' takes {what} here", hint=hint)

"""`inputs`: literals, and values of other calcs."""

from __future__ import annotations

import re
from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, names_of, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Name, Named, Number, Text, Truth, Unary, UnitText
from calcgen.text import Report, Span


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


def read_inputs(block: BlockText, report: Report) -> Outcome[InputsBlock]:
    """Read `name = literal`, `name = value of CALC` and `name of CALC`."""
    items, failed = read_each(block.lines, report, _read_input)
    return Outcome(InputsBlock(tuple(items), block.span), names_of(failed))


def _read_input(line: Line, cursor: Cursor) -> Input:
    target = cursor.named("an input")
    unit = cursor.bracketed_unit()
    value: Expression | Feed
    if cursor.sees("of") and unit is None:
        value = _feed(cursor, Name((target.name,), (target.span,), None, target.span))
    else:
        cursor.expect("=", hint="an input is written name = 6.0 m, or name of W-07")
        value = _literal_or_feed(cursor)
    return Input(target, unit, value, line.annotations, line.span, line.statement_span)


def _literal_or_feed(cursor: Cursor) -> Expression | Feed:
    value = expression(cursor)
    if cursor.sees("of"):
        if not isinstance(value, Name):
            raise ReadingError("not-a-name", value.span, "only a named value can be taken from another calc")
        return _feed(cursor, value)
    cursor.finish()
    literal = value.operand if isinstance(value, Unary) else value
    if isinstance(literal, Number) or (isinstance(literal, Text | Truth) and literal is value):
        return value
    raise ReadingError(
        "input-not-literal",
        value.span,
        "an input is a literal: a number with its unit, a text in quotes, yes or no",
        hint=_literal_hint(value),
    )


def _literal_hint(value: Expression) -> str:
    if isinstance(value, Name) and value.arguments is None:
        return f'write "{value.dotted}" for a text, or {value.dotted} of CALC for a value of another calc'
    return "derive it in a working block"


def _feed(cursor: Cursor, name: Name) -> Feed:
    """Read the number of a calc after `of`; it is no expression, since W-07 would subtract."""
    word = cursor.take()
    text = cursor.text
    start = word.end + len(text.text[word.end :]) - len(text.text[word.end :].lstrip())
    match = _CALC_NUMBER.match(text.text, start)
    rest = text.text[start:]
    if match is None or match.end() != len(text.text):
        raise ReadingError(
            "bad-calc-number",
            text.span(start, len(text.text)),
            f"'{rest}' is no number of a calc" if rest else "the number of a calc is missing after 'of'",
            hint="a calc's number is the stem of its file's name: a letter, then letters, digits and -",
        )
    calc_span = text.span(*match.span())
    return Feed(name, match[0], calc_span, name.span.to(calc_span))


_CALC_NUMBER = re.compile(r"[A-Za-z][A-Za-z0-9-]*")

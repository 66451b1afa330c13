"""Expressions by a table of precedences: tokens -> nodes."""

from __future__ import annotations

from typing import TypeAlias

from calcgen.language.cursor import MAX_DEPTH, Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.nodes import (
    FUNCTIONS,
    Binary,
    Branch,
    Call,
    Cases,
    Comparison,
    Condition,
    Expression,
    Formula,
    Logic,
    Name,
    Number,
    Text,
    Truth,
    Unary,
)
from calcgen.language.tokens import Token
from calcgen.text import Span

Node: TypeAlias = Expression | Condition

PRECEDENCE = {
    "or": 1,
    "and": 2,
    "not": 3,
    "<": 4,
    "<=": 4,
    ">": 4,
    ">=": 4,
    "==": 4,
    "!=": 4,
    "+": 5,
    "-": 5,
    "*": 6,
    "/": 6,
    "sign": 7,
    "^": 8,
}
"""A higher number binds tighter. All but `^` group to the left."""

COMPARISONS = frozenset({"<", "<=", ">", ">=", "==", "!="})

_MEANT = {
    "arccos": "acos",
    "arcsin": "asin",
    "arctan": "atan",
    "arctan2": "atan2",
    "average": "(a + b)/2",
    "cot": "1/tan(x)",
    "if": "name = ... when ...' and below it '= ... otherwise",
    "lg": "log10",
    "log": "ln' or 'log10",
    "maximum": "max",
    "minimum": "min",
    "pow": "x^y",
    "power": "x^y",
    "root": "sqrt",
    "sqr": "x^2' or 'sqrt",
    "sum": "+",
    "tg": "tan",
}


def expression(cursor: Cursor) -> Expression:
    """Read a value: everything up to a comma, a closing parenthesis, a comparison's end or a stop word."""
    return _as_value(_read(cursor))


def condition(cursor: Cursor) -> Condition:
    """Read what stands after `when`."""
    node = _read(cursor)
    hint = "write == to compare" if cursor.sees("=") else "compare two values, such as x <= 3 or flag == yes"
    return _as_condition(node, "a comparison is needed here", hint)


def comparison(cursor: Cursor) -> Comparison:
    """Read the statement of a check: two sides and one of < <= > >= between them."""
    node = _read(cursor)
    if isinstance(node, Logic):
        raise ReadingError(
            "not-a-check",
            node.operator_span,
            f"'{node.operator}' makes no check",
            hint="write each comparison as a check on a line of its own",
        )
    if not isinstance(node, Comparison):
        if cursor.sees("="):
            raise ReadingError(
                "unexpected",
                cursor.span(cursor.token),
                "only a name stands on the left side of '='",
                hint="write name = ... to define a value, == to compare",
            )
        cursor.finish()
        raise ReadingError(
            "not-a-statement",
            node.span,
            "this line neither defines a value nor checks one",
            hint="write name = ... to define a value, or compare with <= to check it",
        )
    if node.operator in ("==", "!="):
        raise ReadingError(
            "not-a-check",
            node.operator_span,
            f"a check compares with <, <=, > or >=, not with '{node.operator}'",
            hint="write = to define a value" if node.operator == "==" else "",
        )
    return node


def formula(cursor: Cursor) -> Formula:
    """Read the right side of a derived value: an expression, or cases joined by `=`."""
    branches = [_branch(cursor)]
    while branches[-1].condition is not None and cursor.accept("="):
        branches.append(_branch(cursor))
    last = branches[-1]
    otherwise = cursor.previous is not None and cursor.previous.text == "otherwise"
    if len(branches) == 1 and last.condition is None and not otherwise:
        if cursor.sees("="):
            raise ReadingError(
                "unexpected",
                cursor.span(cursor.token),
                "a second '=' stands in one formula",
                hint="write == to compare, and cases with 'when' on each but the last",
            )
        return last.value
    if last.condition is None and not otherwise:
        raise ReadingError(
            "case-without-condition",
            last.span,
            "this case says not when it holds",
            hint="write 'when' and a comparison after it, or 'otherwise' after the last one",
        )
    if cursor.sees("="):
        raise ReadingError(
            "case-after-otherwise",
            cursor.span(cursor.token),
            "no case follows 'otherwise'",
            hint="cases are tried from the top; put 'otherwise' last",
        )
    return Cases(tuple(branches), branches[0].span.to(last.span))


def _branch(cursor: Cursor) -> Branch:
    value = expression(cursor)
    if cursor.accept("when"):
        held = condition(cursor)
        return Branch(value, held, value.span.to(held.span))
    word = cursor.accept("otherwise")
    return Branch(value, None, value.span.to(cursor.span(word)) if word else value.span)


def _read(cursor: Cursor) -> Node:
    node = _binary(cursor, 0)
    if cursor.depth == 0 and _is_too_deep(node):
        raise _too_deep(node.span)
    return node


def _binary(cursor: Cursor, least: int) -> Node:
    """Read operands and the operators between them that bind at least as tight as `least`."""
    left = _operand(cursor)
    while True:
        token = cursor.token
        precedence = PRECEDENCE.get(token.text, -1) if token.kind in ("operator", "word") else -1
        if precedence < least or token.text == "not":
            return left
        cursor.take()
        right = _nested(cursor, precedence if token.text == "^" else precedence + 1, token)
        left = _join(left, token, right, cursor.span(token))


def _nested(cursor: Cursor, least: int, token: Token) -> Node:
    cursor.depth += 1
    if cursor.depth > MAX_DEPTH:
        raise _too_deep(cursor.span(token))
    node = _binary(cursor, least)
    cursor.depth -= 1
    return node


def _join(left: Node, token: Token, right: Node, operator_span: Span) -> Node:
    operator, span = token.text, left.span.to(right.span)
    if operator in ("and", "or"):
        message, hint = f"'{operator}' joins comparisons, and this is none", "write out both: a < c and b < c"
        sides = (_as_condition(left, message, hint), _as_condition(right, message, hint))
        return Logic(operator, sides, operator_span, span)
    if operator in COMPARISONS and isinstance(left, Comparison):
        raise ReadingError(
            "comparison-chain",
            operator_span,
            "a comparison has two sides",
            hint="write a < b and b < c; a check is one comparison a line",
        )
    make = Comparison if operator in COMPARISONS else Binary
    return make(operator, _as_value(left), _as_value(right), operator_span, span)


def _operand(cursor: Cursor) -> Node:
    token = cursor.token
    span = cursor.span(token)
    if token.kind == "name" and token.text in cursor.stops:
        raise _missing(cursor)
    value = token.value
    if isinstance(value, Number | Text):
        cursor.take()
        return value
    if isinstance(value, Name):
        return _name(cursor, cursor.take(), value)
    if token.text in ("yes", "no"):
        cursor.take()
        return Truth(token.text == "yes", span)
    if token.text == "(":
        return _parentheses(cursor)
    if token.text in ("-", "+"):
        cursor.take()
        signed = _as_value(_nested(cursor, PRECEDENCE["sign"], token))
        return Unary(token.text, signed, span, span.to(signed.span))
    if token.text == "not":
        cursor.take()
        operand = _nested(cursor, PRECEDENCE["not"], token)
        turned = _as_condition(operand, "'not' turns a comparison, and this is none", "write flag == no")
        return Logic("not", (turned,), span, span.to(turned.span))
    raise _missing(cursor)


def _parentheses(cursor: Cursor) -> Node:
    opening = cursor.take()
    node = _nested(cursor, 0, opening)
    cursor.close(opening)
    return node


def _name(cursor: Cursor, token: Token, name: Name) -> Expression:
    called = cursor.sees("(")
    function = name.parts[0] if len(name.parts) == 1 else ""
    if function in FUNCTIONS:
        if not called:
            raise ReadingError(
                "function-without-arguments",
                name.span,
                f"the function '{function}' needs its arguments",
                hint=f"write {function}(...)",
            )
        arguments, closing = _arguments(cursor)
        _check_count(function, arguments, name.span)
        return Call(function, arguments, name.span, name.span.to(cursor.span(closing)))
    if not called or cursor.token.start > token.end:
        return name
    if function in _MEANT:
        raise ReadingError(
            "unknown-function",
            name.span,
            f"there is no function '{function}'",
            hint=f"write '{_MEANT[function]}'",
        )
    arguments, closing = _arguments(cursor)
    return Name(name.parts, name.spans, arguments, name.span.to(cursor.span(closing)))


def _arguments(cursor: Cursor) -> tuple[tuple[Expression, ...], Token]:
    """Read `(a, b)`; return the arguments and the closing parenthesis."""
    opening = cursor.take()
    found: list[Expression] = []
    if closing := cursor.accept(")"):
        return (), closing
    while True:
        found.append(_as_value(_nested(cursor, 0, opening)))
        if not cursor.accept(","):
            return tuple(found), cursor.close(opening)


def _check_count(function: str, arguments: tuple[Expression, ...], span: Span) -> None:
    least, most = FUNCTIONS[function]
    if least <= len(arguments) and (most is None or len(arguments) <= most):
        return
    needed = f"{least} or more" if most is None else str(least)
    plural = "" if needed == "1" else "s"
    comma = all(isinstance(a, Number) for a in arguments) and len(arguments) == least + 1
    raise ReadingError(
        "argument-count",
        span,
        f"'{function}' takes {needed} argument{plural}, {len(arguments)} given",
        hint="a decimal sign is a point: 3.5" if comma else "",
    )


def _missing(cursor: Cursor) -> ReadingError:
    token, before = cursor.token, cursor.previous
    if before is None or not (before.kind in ("operator", "word") or before.text in cursor.stops):
        where = "here"
    elif before.text == "=":
        where = "on the right side of '='"
    else:
        where = f"after '{before.text}'"
    label = "" if token.kind == "end" else f"this is '{token.text}'"
    return ReadingError("missing-value", cursor.span(token), f"a value is missing {where}", label=label)


def _as_value(node: Node) -> Expression:
    if not isinstance(node, Comparison | Logic):
        return node
    raise ReadingError(
        "not-a-value",
        node.operator_span,
        f"'{node.operator}' makes no value",
        hint="comparisons stand in checks and after 'when'",
    )


def _as_condition(node: Node, message: str, hint: str) -> Condition:
    if isinstance(node, Comparison | Logic):
        return node
    raise ReadingError("not-a-condition", node.span, message, hint=hint)


def _too_deep(span: Span) -> ReadingError:
    return ReadingError(
        "too-deep",
        span,
        f"this formula is nested deeper than {MAX_DEPTH}",
        hint="derive it in steps, each with a name of its own",
    )


def _is_too_deep(root: Node) -> bool:
    """Return whether a tree is deeper than evaluation can walk; a long sum is deep on its left."""
    level: list[Node] = [root]
    for _ in range(MAX_DEPTH + 1):
        level = [child for node in level for child in _children(node)]
        if not level:
            return False
    return True


def _children(node: Node) -> tuple[Node, ...]:
    match node:
        case Binary(left=left, right=right) | Comparison(left=left, right=right):
            return (left, right)
        case Unary(operand=operand):
            return (operand,)
        case Logic(operands=operands):
            return operands
        case Call(arguments=arguments):
            return arguments
        case Name(arguments=arguments):
            return arguments or ()
        case _:
            return ()

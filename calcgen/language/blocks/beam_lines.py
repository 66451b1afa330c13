"""The readers of `beam NAME`: one function a line."""

from __future__ import annotations

from collections.abc import Callable
from typing import Literal, TypeAlias

from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamLine,
    BeamSetting,
    CaseLine,
    CombinationLine,
    HingeLine,
    LoadLine,
    PatternLine,
    Plane,
    SpanLine,
    SupportLine,
    Term,
    TrainLine,
)
from calcgen.language.blocks.reading import BlockText, Outcome, one_of, only_once, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Binary, Expression, Name, Named, Unary
from calcgen.language.tokens import Token
from calcgen.text import Report, Span, nearest

STOPS = frozenset({"at", "from", "to", "in", "settles", "rotation", "lateral", "spaced"})
"""Words that end an expression in a beam."""

SETTINGS = ("section", "E", "G", "EI", "GA_s", "restrained", "shear_deformation", "expansion")
STRETCHES = ("section", "EI", "GA_s")
CASE_KINDS = (
    "permanent",
    "imposed",
    "snow",
    "wind",
    "temperature",
    "traffic",
    "construction",
    "accidental",
    "seismic",
)
"""Kinds of load case that have a meaning or are usual; another word is taken as it is."""

LoadKind: TypeAlias = Literal["uniform", "linear", "point", "moment", "self_weight", "gradient"]
LOADS: dict[str, LoadKind] = {
    "uniform": "uniform",
    "linear": "linear",
    "point": "point",
    "moment": "moment",
    "self_weight": "self_weight",
    "gradient": "gradient",
}
KINDS = (*LOADS, "train")
SupportKind: TypeAlias = Literal["pin", "roller", "fixed", "spring"]
SUPPORTS: dict[str, SupportKind] = {"pin": "pin", "roller": "roller", "fixed": "fixed", "spring": "spring"}

ReadLine: TypeAlias = Callable[[Line, Cursor], BeamLine]


def read_beam(block: BlockText, report: Report) -> Outcome[BeamBlock]:
    """Read the lines of a beam."""
    settings: dict[str, Span] = {}
    cases: dict[str, Span] = {}
    combinations: dict[str, Span] = {}
    patterns: dict[str, Span] = {}

    def read(line: Line, cursor: Cursor) -> BeamLine:
        token = cursor.token
        word = token.text
        if word in READERS:
            node = READERS[word](line, cursor)
        else:
            one_of(word, cursor.span(token), (*READERS, *SETTINGS), "line of a beam")
            node = _setting(line, cursor)
        cursor.finish()
        match node:
            case SpanLine():
                only_once(Named("span", cursor.span(token)), settings, "line")
            case BeamSetting(start=None):
                only_once(node.key, settings, "setting")
            case CaseLine():
                only_once(node.target, cases, "load case")
            case CombinationLine():
                only_once(node.target, combinations, "combination")
            case PatternLine():
                only_once(node.case, patterns, "pattern")
            case _:
                pass
        return node

    lines, failed = read_each(block.lines, report, read, STOPS)
    if failed:  # a beam without one of its loads is wrong
        return Outcome(None, frozenset({block.target.name}))
    return Outcome(BeamBlock(block.target, tuple(lines), block.span, block.head_span))


def _span(line: Line, cursor: Cursor) -> SpanLine:
    cursor.take()
    cursor.expect("=", hint="write span = 6 m, 8 m, 6 m")
    return SpanLine(_row(cursor), line.annotations, line.span)


def _setting(line: Line, cursor: Cursor) -> BeamSetting:
    key = cursor.named("a setting")
    cursor.expect("=")
    value = expression(cursor)
    stretch = cursor.token
    start, end = _stretch(cursor)
    if start is not None and key.name not in STRETCHES:
        raise ReadingError(
            "no-stretch",
            cursor.span(stretch),
            f"'{key.name}' holds for the whole beam",
            hint="only section, EI and GA_s change along a beam",
        )
    return BeamSetting(key, value, start, end, line.annotations, line.span, line.statement_span)


def _support(line: Line, cursor: Cursor) -> SupportLine:
    cursor.take()
    lateral = cursor.accept("lateral") is not None
    kind = SUPPORTS[_word(cursor, tuple(SUPPORTS), "support")]
    stiffness = expression(cursor) if kind == "spring" else None
    rotation = expression(cursor) if kind == "spring" and cursor.accept("rotation") else None
    lateral = cursor.accept("lateral") is not None or lateral
    at = _at(cursor, f"write support {kind} at 6 m")
    settles, case = None, None
    if cursor.accept("settles"):
        settles = expression(cursor)
        case = cursor.named("a load case") if cursor.accept("in") else None
    plane: Plane = "lateral" if lateral else "both"
    return SupportLine(kind, stiffness, rotation, plane, at, settles, case, line.annotations, line.span)


def _hinge(line: Line, cursor: Cursor) -> HingeLine:
    cursor.take()
    return HingeLine(_at(cursor, "write hinge at 9 m"), line.annotations, line.span)


def _case(line: Line, cursor: Cursor) -> CaseLine:
    cursor.take()
    target = cursor.named("a load case")
    kind = None if cursor.ended else cursor.named("a kind of load case")
    if kind is not None and kind.name not in CASE_KINDS and nearest(kind.name, CASE_KINDS, cutoff=0.8):
        one_of(kind.name, kind.span, CASE_KINDS, "kind of load case")
    return CaseLine(target, kind, line.annotations, line.span)


def _load(line: Line, cursor: Cursor) -> LoadLine | TrainLine:
    cursor.take()
    if cursor.token.text in KINDS and cursor.following.text not in (*KINDS, "lateral"):
        kind_token = cursor.token
        raise ReadingError(
            "load-without-case",
            cursor.span(kind_token),
            "the load case is missing before the kind of load",
            hint=f"write load G {kind_token.text} ...",
        )
    case = cursor.named("a load case")
    sideways = cursor.token
    plane: Plane = "lateral" if cursor.accept("lateral") else "vertical"
    word = _word(cursor, KINDS, "kind of load")
    if word == "train":
        return _train(line, cursor, case, sideways if plane == "lateral" else None)
    kind = LOADS[word]
    if cursor.sees("lateral"):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "'lateral' stands before the kind of load",
            hint=f"write load {case.name} lateral {kind} ...",
        )
    if kind == "gradient" and plane == "lateral":
        raise ReadingError(
            "unexpected",
            cursor.span(sideways),
            "a gradient of temperature is one over the depth of the section",
            hint=f"write load {case.name} gradient ...",
        )
    values = [expression(cursor)]
    if kind == "linear":
        cursor.expect("to", hint="write linear 0 kN/m to 4 kN/m")
        values.append(expression(cursor))
    at, start, end = None, None, None
    if kind == "point" or (kind == "moment" and not cursor.sees("from")):
        at = _at(cursor, f"write {kind} ... at 2.5 m")
    else:
        start, end = _stretch(cursor)
    if cursor.sees("at"):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            f"a {kind} load acts over a length",
            hint="write from 2 m to 4 m, or nothing for the whole beam",
        )
    return LoadLine(
        case, kind, plane, tuple(values), at, start, end, line.annotations, line.span, line.statement_span
    )


def _train(line: Line, cursor: Cursor, case: Named, sideways: Token | None) -> TrainLine:
    hint = f"write load {case.name} train 80 kN, 80 kN spaced 3 m lateral 0.1 for a tenth of each axle load"
    if sideways is not None:
        raise ReadingError(
            "unexpected",
            cursor.span(sideways),
            "the axles of a train press down, and a part of that may act sideways",
            hint=hint,
        )
    axles = _row(cursor)
    spaced = cursor.token
    spacings = _row(cursor) if cursor.accept("spaced") else ()
    if len(spacings) != len(axles) - 1:
        wanted = f"{len(axles)} axle{'s have' if len(axles) > 1 else ' has'} {len(axles) - 1}"
        raise ReadingError(
            "unexpected",
            cursor.span(spaced),
            f"{wanted} distance{'' if len(axles) == 2 else 's'} between them, not {len(spacings)}",
            hint="write train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m",
        )
    lateral = expression(cursor) if cursor.accept("lateral") else None
    return TrainLine(case, axles, spacings, lateral, line.annotations, line.span, line.statement_span)


def _row(cursor: Cursor) -> tuple[Expression, ...]:
    """Read one value or several, with commas between them."""
    values = [expression(cursor)]
    while cursor.accept(","):
        values.append(expression(cursor))
    return tuple(values)


def _pattern(line: Line, cursor: Cursor) -> PatternLine:
    cursor.take()
    return PatternLine(cursor.named("a load case"), line.annotations, line.span)


def _combination(line: Line, cursor: Cursor) -> CombinationLine:
    cursor.take()
    target = cursor.named("a combination")
    group = cursor.named("a group") if cursor.accept("in") else None
    cursor.expect("=", hint="write combination U1 in ULS = 1.35*G + 1.5*Q")
    total = expression(cursor)
    cursor.finish()
    seen: dict[str, Span] = {}
    terms = _terms(total)
    for term in terms:
        only_once(term.case, seen, "load case")
    return CombinationLine(target, group, terms, line.annotations, line.span)


def _terms(total: Expression) -> tuple[Term, ...]:
    """Take a sum apart into its terms, from left to right."""
    terms: list[Term] = []
    rest: Expression | None = total
    while rest is not None:
        if isinstance(rest, Binary) and rest.operator in ("+", "-"):
            terms.append(_term(rest.right, -1 if rest.operator == "-" else 1))
            rest = rest.left
        else:
            terms.append(_term(rest, 1))
            rest = None
    return tuple(reversed(terms))


def _term(node: Expression, sign: int) -> Term:
    span = node.span
    if isinstance(node, Unary):
        sign, node = (-sign if node.operator == "-" else sign), node.operand
    factor: Expression | None = None
    if isinstance(node, Binary) and node.operator == "*":
        factor, node = (node.left, node.right) if isinstance(node.right, Name) else (node.right, node.left)
    if isinstance(node, Name) and len(node.parts) == 1 and node.arguments is None:
        return Term(sign, factor, Named(node.dotted, node.span), span)
    raise ReadingError(
        "not-a-term",
        span,
        "a term of a combination is a factor times a load case",
        hint="write each load case with its own factor: 1.35*G + 1.5*Q",
    )


def _at(cursor: Cursor, hint: str) -> Expression:
    cursor.expect("at", hint=hint)
    return expression(cursor)


def _stretch(cursor: Cursor) -> tuple[Expression | None, Expression | None]:
    """Read `from a to b` where it stands here."""
    if not cursor.accept("from"):
        return None, None
    start = expression(cursor)
    cursor.expect("to", hint="write from 2 m to 4 m")
    return start, expression(cursor)


def _word(cursor: Cursor, known: tuple[str, ...], what: str) -> str:
    token = cursor.token
    if token.kind not in ("name", "word") or token.text in cursor.stops:
        raise cursor.misplaced(f"the {what} is missing", f"possible are {', '.join(known)}")
    one_of(token.text, cursor.span(token), known, what)
    return cursor.take().text


READERS: dict[str, ReadLine] = {
    "span": _span,
    "support": _support,
    "hinge": _hinge,
    "case": _case,
    "load": _load,
    "pattern": _pattern,
    "combination": _combination,
}
"""The first word of a line and its reader; other lines are settings."""

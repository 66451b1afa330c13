"""The readers of `beam NAME`: one function a line."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Literal, TypeAlias

from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamLine,
    BeamSetting,
    CaseLine,
    CombinationLine,
    HingeLine,
    InfluenceLine,
    InfluenceSymbol,
    LoadLine,
    PatternLine,
    Plane,
    SetLine,
    SpanLine,
    SupportLine,
    Term,
    TrainLine,
)
from calcgen.language.blocks.beam_cases import read_case, read_set
from calcgen.language.blocks.reading import BlockText, Outcome, one_of, only_once, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Binary, Expression, Name, Named, Unary
from calcgen.language.tokens import Token
from calcgen.text import Report, Span, nearest

STOPS = frozenset({"at", "from", "to", "in", "settles", "rotation", "lateral", "spaced", "under"})
"""Words that end an expression in a beam."""

SETTINGS = ("section", "E", "G", "EI", "GA_s", "restrained", "shear_deformation", "expansion")
FACTORS = ("γ_G", "γ_G_inf", "γ_Q", "ξ")
"""Settings of combination sets."""
STRETCHES = ("section", "EI", "GA_s")

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

OF_PLACES: tuple[InfluenceSymbol, ...] = ("M", "V", "w", "slope")
OF_SUPPORTS: tuple[InfluenceSymbol, ...] = ("R", "M_R", "θ")
"""Results that have influence lines: those of a place, and those of a support, with its number."""
_INFLUENCED = re.compile(rf"^({'|'.join(OF_PLACES)}|(?:{'|'.join(OF_SUPPORTS)})_[1-9]\d*)(_lat)?$")

ReadLine: TypeAlias = Callable[[Line, Cursor], BeamLine]


def read_beam(block: BlockText, report: Report) -> Outcome[BeamBlock]:
    """Read the lines of a beam."""
    settings: dict[str, Span] = {}
    cases: dict[str, Span] = {}
    combinations: dict[str, Span] = {}
    sets: dict[str, Span] = {}
    patterns: dict[str, Span] = {}
    influences: dict[str, Span] = {}

    def read(line: Line, cursor: Cursor) -> BeamLine:
        token = cursor.token
        word = token.text
        if word in READERS:
            node = READERS[word](line, cursor)
        else:
            one_of(word, cursor.span(token), (*READERS, *SETTINGS, *FACTORS), "line of a beam")
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
            case SetLine():
                only_once(node.target, sets, "combination set")
            case PatternLine():
                only_once(node.case, patterns, "pattern")
            case InfluenceLine():
                only_once(node.target, influences, "influence line")
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
    rotation = expression(cursor) if kind != "fixed" and cursor.accept("rotation") else None
    lateral = cursor.accept("lateral") is not None or lateral
    _no_comma(cursor)
    start = cursor.token
    at = _at(cursor, f"write support {kind} at 6 m")
    if cursor.sees("rotation"):
        raise _rotation_after_at(cursor, kind, _typed(cursor, start))
    settles, case = None, None
    _meant_word(cursor, "settles")
    if cursor.accept("settles"):
        settles = expression(cursor)
        case = cursor.named("a load case") if cursor.accept("in") else None
    plane: Plane = "lateral" if lateral else "both"
    return SupportLine(kind, stiffness, rotation, plane, at, settles, case, line.annotations, line.span)


def _rotation_after_at(cursor: Cursor, kind: SupportKind, at: str) -> ReadingError:
    """Return the fault of a spring against rotation that is written after the place, `at 0 m`."""
    word = cursor.take()
    if kind == "fixed":
        return ReadingError(
            "unexpected",
            cursor.span(word),
            "a fixed support holds the rotation: it has no spring against it",
            hint=f"write support pin rotation 5000 kN·m {at}",
        )
    first = cursor.token
    expression(cursor)
    spring = "spring 12 kN/mm" if kind == "spring" else kind
    return ReadingError(
        "unexpected",
        cursor.span(word),
        "'rotation' stands before 'at'",
        hint=f"write support {spring} rotation {_typed(cursor, first)} {at}",
    )


def _typed(cursor: Cursor, first: Token) -> str:
    """Return what was read, from a token on, as typed."""
    last = cursor.previous or first
    return " ".join(cursor.text.text[first.start : last.end].split())


def _no_comma(cursor: Cursor) -> None:
    """Refuse a comma between the parts of a support."""
    if cursor.sees(","):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "no comma stands between the parts of a support",
            hint="write support spring 12 kN/mm rotation 500 kN·m at 6 m",
        )


def _meant_word(cursor: Cursor, word: str) -> None:
    """Refuse a name that is nearly the word that may stand here."""
    token = cursor.token
    if token.kind == "name" and token.text != word and nearest(token.text, (word,)):
        raise ReadingError(
            "unknown-word",
            cursor.span(token),
            f"'{token.text}' is not expected here",
            hint=f"write '{word}', if that is meant",
        )


def _hinge(line: Line, cursor: Cursor) -> HingeLine:
    cursor.take()
    return HingeLine(_at(cursor, "write hinge at 9 m"), line.annotations, line.span)


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
        stretch = ", or from 2 m to 4 m where it is distributed" if kind == "moment" else ""
        at = _at(cursor, f"write {kind} ... at 2.5 m{stretch}")
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
    if spaced.kind == "number":
        raise ReadingError(
            "unexpected",
            cursor.span(spaced),
            "a comma is missing between two axle loads",
            hint="write train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m",
        )
    _meant_word(cursor, "spaced")
    spacings = _row(cursor) if cursor.accept("spaced") else ()
    if spacings and cursor.token.kind == "number":
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "a comma is missing between two distances",
            hint="write train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m",
        )
    if len(spacings) != len(axles) - 1:
        wanted = f"{len(axles)} axle{'s have' if len(axles) > 1 else ' has'} {len(axles) - 1}"
        raise ReadingError(
            "unexpected",
            cursor.span(spaced),
            f"{wanted} distance{'' if len(axles) == 2 else 's'} between them, not {len(spacings)}",
            hint="write train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m",
        )
    _meant_word(cursor, "lateral")
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
    case = cursor.named("a load case")
    second = cursor.following if cursor.sees(",") else cursor.token
    if second.kind == "name" and second.text not in cursor.stops:
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "a line of pattern has one load case",
            hint=f"write a line for each: pattern {case.name}, and below it pattern {second.text}",
        )
    return PatternLine(case, line.annotations, line.span)


def _combination(line: Line, cursor: Cursor) -> CombinationLine:
    cursor.take()
    target = cursor.named("a combination")
    group = cursor.named("a group") if cursor.accept("in") else None
    cursor.expect("=", hint="write combination U1 in ULS = 1.35*G + 1.5*Q")
    if cursor.token.kind == "text":
        raise ReadingError(
            "not-a-term",
            cursor.span(cursor.token),
            "a combination is a sum of load cases, each with its factor",
            hint=f"a set of a standard is: combinations {(group or target).name} = {cursor.token.text}",
        )
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


def _influence(line: Line, cursor: Cursor) -> InfluenceLine:
    cursor.take()
    target = cursor.named("an influence line")
    if target.name == "line" and cursor.token.kind == "name":
        raise ReadingError(
            "unexpected",
            target.span,
            "the word 'influence' says it: no 'line' stands after it",
            hint=f"write influence {cursor.token.text} = M at 7 m",
        )
    cursor.expect("=", hint=f"write influence {target.name} = M at 7 m")
    result = cursor.named("a result")
    found = _INFLUENCED.match(result.name)
    if found is None:
        possible = ", ".join([*OF_PLACES, *(f"{symbol}_1" for symbol in OF_SUPPORTS)])
        raise ReadingError(
            "unknown-word",
            result.span,
            f"'{result.name}' is no result that has an influence line",
            hint=f"possible are {possible}, and each with _lat",
        )
    stem, _, number = found[1].rpartition("_")
    symbol: InfluenceSymbol = stem or found[1]  # type: ignore[assignment]
    at: Expression | None = None
    side: Literal["left", "right"] | None = None
    if not stem:
        beside = cursor.accept("left", "right")
        if beside is not None:
            side = "left" if beside.text == "left" else "right"
            cursor.expect("of", hint=f"write {result.name} {side} of 6 m")
            at = expression(cursor)
        else:
            at = _at(cursor, f"write {result.name} at 7 m")
    elif cursor.sees("at", "left", "right"):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            f"'{result.name}' belongs to a support, not to a place",
            hint=f"write influence {target.name} = {result.name}",
        )
    under: Literal["vertical", "lateral"] | None = None
    if cursor.accept("under"):
        word = _word(cursor, ("vertical", "lateral"), "plane of the unit load")
        under = "lateral" if word == "lateral" else "vertical"
    return InfluenceLine(
        target,
        symbol,
        int(number) if stem else None,
        found[2] is not None,
        result.span,
        at,
        side,
        under,
        line.annotations,
        line.span,
    )


def _at(cursor: Cursor, hint: str) -> Expression:
    cursor.expect("at", hint=hint)
    return expression(cursor)


def _stretch(cursor: Cursor) -> tuple[Expression | None, Expression | None]:
    """Read `from a to b` where it stands here."""
    if cursor.token.kind == "number" and cursor.following.text == "to":
        raise cursor.misplaced("'from' is missing", "write from 2 m to 4 m")
    if not cursor.accept("from"):
        return None, None
    start = expression(cursor)
    cursor.expect("to", hint="write from 2 m to 4 m")
    return start, expression(cursor)


def _word(cursor: Cursor, known: tuple[str, ...], what: str) -> str:
    token = cursor.token
    stops = cursor.stops.difference(known)
    if token.kind not in ("name", "word") or token.text in stops:
        raise cursor.misplaced(f"the {what} is missing", f"possible are {', '.join(known)}")
    one_of(token.text, cursor.span(token), known, what)
    return cursor.take().text


READERS: dict[str, ReadLine] = {
    "span": _span,
    "support": _support,
    "hinge": _hinge,
    "case": read_case,
    "load": _load,
    "pattern": _pattern,
    "combination": _combination,
    "combinations": read_set,
    "influence": _influence,
}
"""The first word of a line and its reader; other lines are settings."""

"""The readers of load cases with their factors, and of combination sets, in `beam NAME`."""

from __future__ import annotations

from calcgen.language.blocks.beam import CaseLine, SetLine
from calcgen.language.blocks.reading import one_of
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Expression, Named, Text
from calcgen.text import nearest

CASE_KINDS = (
    "permanent",
    "imposed",
    "roof",
    "snow",
    "rain",
    "wind",
    "temperature",
    "settlement",
    "traffic",
    "construction",
    "accidental",
    "seismic",
)
"""Kinds of load case that have a meaning or are usual; another word is taken as it is."""

_FACTORS = ("category", "ψ", "γ")


def read_case(line: Line, cursor: Cursor) -> CaseLine:
    """Read `case Q imposed category B`, `case T traffic ψ 1.0, 0.9, 0.5 γ 1.35`."""
    cursor.take()
    target = cursor.named("a load case")
    if cursor.sees(*_FACTORS):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            "the kind of the load case is missing",
            hint=f"write case {target.name} imposed {cursor.token.text} ...",
        )
    kind = None if cursor.ended else cursor.named("a kind of load case")
    if kind is not None and kind.name not in CASE_KINDS and nearest(kind.name, CASE_KINDS, cutoff=0.8):
        one_of(kind.name, kind.span, CASE_KINDS, "kind of load case")
    if kind is not None and not cursor.ended and not cursor.sees(*_FACTORS):
        raise ReadingError(
            "unexpected",
            cursor.span(cursor.token),
            f"'{cursor.token.text}' is not expected here",
            hint=_meant(f"case {target.name} {kind.name}", cursor),
        )
    cursor.stops |= {"ψ", "γ"}
    category: Named | None = None
    psi: tuple[Expression, ...] = ()
    gamma: Expression | None = None
    while cursor.sees(*_FACTORS):
        word = cursor.take()
        if (word.text == "γ" and gamma is not None) or (word.text != "γ" and (category or psi)):
            raise ReadingError(
                "unexpected",
                cursor.span(word),
                f"'{word.text}' is one too many",
                hint="a case has a category or ψ_0, ψ_1 and ψ_2, and may have one γ",
            )
        if cursor.sees("="):
            raise ReadingError(
                "unexpected",
                cursor.span(cursor.token),
                f"no '=' stands after '{word.text}' in the line of a case",
                hint={"category": "write category B", "γ": "write γ 1.35"}.get(
                    word.text, "write ψ 0.7, 0.5, 0.3"
                ),
            )
        if word.text == "category":
            category = cursor.named("a category")
        elif word.text == "γ":
            gamma = expression(cursor)
        else:
            psi = _three(cursor)
    return CaseLine(target, kind, line.annotations, line.span, category, psi, gamma)


def _meant(head: str, cursor: Cursor) -> str:
    """Return what to write for the next token after a kind of load case."""
    word, after = cursor.token.text, cursor.following.text
    if word == ",":
        rest = " ".join(cursor.text.text[cursor.token.end :].split())
        return f"no comma stands after the kind: write {head} {rest}"
    if word in ("cat", "class"):
        return f"write {head} category {after or 'B'}"
    if word in ("ψ_0", "ψ_1", "ψ_2", "psi"):
        return f"ψ_0, ψ_1 and ψ_2 are written together: {head} ψ 0.7, 0.5, 0.3"
    if word in ("γ_F", "γ_Q", "γ_G"):
        return f"a partial factor of this case alone: {head} γ 1.35"
    return f"write {head} category {word}, if that is meant"


def _three(cursor: Cursor) -> tuple[Expression, ...]:
    first = cursor.token
    values = [expression(cursor)]
    tight = 0
    while comma := cursor.accept(","):
        tight += comma.end == cursor.token.start
        values.append(expression(cursor))
    if len(values) == 6 and tight == 3:
        raise ReadingError(
            "decimal-comma",
            cursor.span(first),
            "',' is no decimal sign: these are six values",
            hint="write points, and commas between the values: ψ 0.7, 0.5, 0.3",
        )
    if len(values) != 3:
        raise ReadingError(
            "unexpected",
            cursor.span(first),
            f"ψ_0, ψ_1 and ψ_2 are three values, not {len(values)}",
            hint="write ψ 0.7, 0.5, 0.3",
        )
    return tuple(values)


def read_set(line: Line, cursor: Cursor) -> SetLine:
    """Read `combinations ULS = "EN 1990 6.10"`."""
    cursor.take()
    target = cursor.named("a group")
    cursor.expect("=", hint='write combinations ULS = "EN 1990 6.10"')
    token = cursor.token
    if not isinstance(token.value, Text):
        raise ReadingError(
            "unexpected",
            cursor.span(token),
            "the name of a combination set is a text in quotes",
            hint='write combinations ULS = "EN 1990 6.10", or for one of your own combination U1 = 1.35*G',
        )
    cursor.take()
    name = Named(" ".join(token.value.value.split()), cursor.span(token))
    return SetLine(target, name, line.annotations, line.span)

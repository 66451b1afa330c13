"""Text of a statement -> tokens, each with its place. A token that is wrong carries its fault."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.language.errors import ReadingError
from calcgen.language.names import canonical_name, name_end
from calcgen.language.nodes import WORDS, Name, Number, Text
from calcgen.language.numbers import digits_end, number_at
from calcgen.language.pieced import Pieced

Kind: TypeAlias = Literal["number", "text", "name", "word", "operator", "bad", "end"]


@dataclass(frozen=True)
class Token:
    """One token.

    Attributes
    ----------
    text : an operator as the language writes it (`≤` is '<='), a name or word in canonical spelling.
    start, end : offsets in the statement's text.
    value : the node of a literal or name, the fault of a bad token.
    """

    kind: Kind
    text: str
    start: int
    end: int
    value: Number | Text | Name | ReadingError | None = None


_OPERATOR = re.compile(r"<=|>=|==|!=|[-+*/^()\[\],=<>]")
_SYNONYMS = {"≤": "<=", "≥": ">=", "≠": "!=", "−": "-"}
_TEXT = re.compile(r'"([^"\n]*)"')

_MISTAKES: dict[str, str] = {
    "**": "write ^ for a power",
    ":=": "write = to define a name",
    "=<": "write <=",
    "=>": "write >=",
    "<>": "write !=",
    "&": "write 'and'",
    "!": "write 'not'",
    "·": "write * to multiply; only a force and a length make a unit such as kN·m",
    "⋅": "write * to multiply; only a force and a length make a unit such as kN·m",
    "×": "write * to multiply",
    "÷": "write / to divide",
    "–": "this is a dash; write - to subtract",
    "—": "this is a dash; write - to subtract",
    "√": "write sqrt(...)",
    "²": "write ^2",
    "³": "write ^3",
    "⁴": "write ^4",
    "%": "a per cent follows its number: 4.5 %",
    "°": "write the unit deg after a number",
    "'": 'a text stands in double quotes: "S275"',
    "‘": 'a text stands in straight double quotes: "S275"',
    "’": "write ' in a name, and straight double quotes around a text",
    "′": "write ' in a name, and ft for feet",
    "″": "write in for inches",
    "“": 'write straight quotes: "S275"',
    "”": 'write straight quotes: "S275"',
    ";": "one statement a line; put commas between arguments",
    "#": "a comment is a line of its own that starts with #",
    "{": "{name} shows a value in prose; here the name alone is enough",
    "_": "a name starts with a letter",
}
"""What is typed elsewhere, with what to write here."""


def tokenize(text: Pieced) -> tuple[Token, ...]:
    """Return the tokens of a statement; the last one is the end. Takes time linear in the text."""
    tokens: list[Token] = []
    at = 0
    while True:
        while at < len(text.text) and text.text[at].isspace():
            at += 1
        if at >= len(text.text):
            tokens.append(Token("end", "", at, at))
            return tuple(tokens)
        tokens.append(_token(text, at, tokens[-1] if tokens else None))
        at = tokens[-1].end


def _token(text: Pieced, at: int, before: Token | None) -> Token:
    source = text.text
    digits = digits_end(source, at)
    if digits > at:
        try:
            number, end = number_at(text, at, before.text if before and before.kind == "operator" else "")
        except ReadingError as fault:
            return Token("bad", source[at:digits], at, digits, fault)
        return Token("number", source[at:end], at, end, number)
    if source[at].isalpha():
        return _name(text, at)
    if source[at] == '"':
        return _text(text, at)
    if source[at : at + 2] in _MISTAKES:
        return _mistake(text, at, at + 2)
    if source[at] in _SYNONYMS:
        return Token("operator", _SYNONYMS[source[at]], at, at + 1)
    operator = _OPERATOR.match(source, at)
    if operator:
        return Token("operator", operator[0], at, operator.end())
    if source[at] in _MISTAKES:
        return _mistake(text, at, at + 1)
    if source[at] == ".":
        after_unit = before is not None and before.kind == "number" and before.end == at
        hint = (
            "write a product of units as kN·m, kN-m or kNm, and a number with digits after its point"
            if after_unit
            else "the name of a result follows a dot at once: main.W_el_y"
        )
        return _bad(text, at, at + 1, "'.' has no meaning here", hint)
    shown = source[at] if source[at].isprintable() else f"U+{ord(source[at]):04X}"
    return _bad(text, at, at + 1, f"the character '{shown}' has no meaning here", "")


def _text(text: Pieced, at: int) -> Token:
    match = _TEXT.match(text.text, at)
    if match is None:
        span = text.span(at, at + 1)
        fault = ReadingError(
            "unclosed-quote",
            span,
            "this quote is not closed",
            hint='close it with a second " on the same line',
        )
        return Token("bad", '"', at, at + 1, fault)
    return Token("text", match[0], at, match.end(), Text(match[1], text.span(*match.span())))


def _name(text: Pieced, at: int) -> Token:
    parts: list[str] = []
    bounds: list[tuple[int, int]] = []
    start = at
    while True:
        end = name_end(text.text, start)
        part = canonical_name(text.text[start:end])
        if part is None:
            hint = "a name has letters, digits, _ and '"
            return _bad(text, start, end, f"'{text.text[start:end]}' is no name", hint, "bad-name")
        parts.append(part)
        bounds.append((start, end))
        if not text.text.startswith(".", end) or name_end(text.text, end + 1) == end + 1:
            break
        start = end + 1
    if len(parts) == 1 and parts[0] in WORDS:
        return Token("word", parts[0], at, end)
    spans = tuple(text.span(a, b) for a, b in bounds)
    return Token("name", ".".join(parts), at, end, Name(tuple(parts), spans, None, text.span(at, end)))


def _mistake(text: Pieced, start: int, end: int) -> Token:
    typed = text.text[start:end]
    return _bad(text, start, end, f"'{typed}' has no meaning here", _MISTAKES[typed])


def _bad(text: Pieced, start: int, end: int, message: str, hint: str, code: str = "stray-character") -> Token:
    fault = ReadingError(code, text.span(start, end), message, hint=hint)
    return Token("bad", text.text[start:end], start, end, fault)

"""A cursor over the tokens of a statement, and the faults of what stands where it should not."""

from __future__ import annotations

from calcgen.language.errors import ReadingError
from calcgen.language.nodes import Name, Named, Number, UnitText
from calcgen.language.pieced import Pieced
from calcgen.language.tokens import Token, tokenize
from calcgen.language.units_text import meant_unit, unit_at
from calcgen.text import Related, Span

MAX_DEPTH = 100
"""Deepest formula that is read; evaluation and typesetting walk formulas by recursion."""


class Cursor:
    """The tokens of one statement, read from left to right.

    Parameters
    ----------
    stops : words that end an expression, such as `at` in a beam.
    """

    def __init__(self, text: Pieced, stops: frozenset[str] = frozenset()) -> None:
        self.text = text
        self.tokens = tokenize(text)
        self.stops = stops
        self.depth = 0
        self._at = 0

    @property
    def token(self) -> Token:
        """The next token; a bad one raises its fault."""
        token = self.tokens[self._at]
        if isinstance(token.value, ReadingError):
            raise token.value
        return token

    @property
    def following(self) -> Token:
        """The token after the next one, which may be bad."""
        return self.tokens[min(self._at + 1, len(self.tokens) - 1)]

    @property
    def previous(self) -> Token | None:
        """The token read last."""
        return self.tokens[self._at - 1] if self._at else None

    @property
    def ended(self) -> bool:
        """Whether nothing is left."""
        return self.token.kind == "end"

    def take(self) -> Token:
        """Return the next token and step over it."""
        token = self.token
        if token.kind != "end":
            self._at += 1
        return token

    def sees(self, *texts: str) -> bool:
        """Return whether the next token is one of these operators or words."""
        token = self.token
        return token.kind in ("operator", "word", "name") and token.text in texts

    def accept(self, *texts: str) -> Token | None:
        """Step over the next token where it is one of these operators or words."""
        return self.take() if self.sees(*texts) else None

    def expect(self, text: str, hint: str = "") -> Token:
        """Step over an operator or word that must stand here."""
        if self.sees(text):
            return self.take()
        raise self.misplaced(f"'{text}' is missing", hint)

    def close(self, opening: Token) -> Token:
        """Step over the ')' of an opening parenthesis."""
        if self.sees(")"):
            return self.take()
        if self.ended or self.sees("=", "when", "otherwise", "]", *self.stops):
            raise ReadingError(
                "unclosed-parenthesis",
                self.span(self.token),
                "')' is missing here",
                related=(Related(self.span(opening), "opened here"),),
            )
        raise self.unexpected()

    def span(self, token: Token) -> Span:
        """Return the place of a token; just after the statement for its end."""
        return self.text.span(token.start, token.end)

    def named(self, what: str) -> Named:
        """Step over a name without dots that must stand here; `what` says what it names."""
        token = self.token
        if token.kind == "word":
            raise ReadingError(
                "reserved-name",
                self.span(token),
                f"'{token.text}' is a word of the language",
                hint=f"choose another name for {what}",
            )
        if token.kind != "name" or not isinstance(token.value, Name):
            raise self.misplaced(f"the name of {what} is missing", "")
        if len(token.value.parts) > 1:
            raise ReadingError(
                "dotted-name",
                self.span(token),
                f"the name of {what} has no dots",
                hint="a dot reads a result of a block; write _ for a subscript",
            )
        self.take()
        return Named(token.text, self.span(token))

    def bracketed_unit(self) -> UnitText | None:
        """Step over `[kN·m]` where it stands here."""
        opening = self.accept("[")
        if opening is None:
            return None
        closing = next((i for i, t in enumerate(self.tokens) if i >= self._at and t.text == "]"), None)
        if closing is None:
            raise ReadingError(
                "unclosed-bracket", self.span(opening), "'[' is not closed", hint="write the unit as [kN·m]"
            )
        inside = self.text.text[opening.end : self.tokens[closing].start]
        start = opening.end + len(inside) - len(inside.lstrip())
        end = start + len(inside.strip())
        match = unit_at(self.text.text, start)
        if match is None or match.end != end:
            meant = meant_unit(inside.strip())
            raise ReadingError(
                "unknown-unit",
                self.text.span(start, end),
                f"'{inside.strip()}' is no unit",
                hint=f"the nearest unit is '{meant}'"
                if meant
                else "leave the brackets out for a plain number",
            )
        self._at = closing + 1
        return match.node(self.text, start)

    def finish(self) -> None:
        """Raise where something is left."""
        if not self.ended:
            raise self.unexpected()

    def misplaced(self, message: str, hint: str) -> ReadingError:
        """Return the fault of something missing before the next token."""
        token = self.token
        found = "the line ends here" if token.kind == "end" else f"this is '{token.text}'"
        return ReadingError("unexpected", self.span(token), message, label=found, hint=hint)

    def unexpected(self) -> ReadingError:
        """Return the fault of the next token after a whole expression."""
        token, before = self.token, self.previous
        if token.text in self.stops:
            return ReadingError("unexpected", self.span(token), f"'{token.text}' is not expected here")
        if before is not None and (token.kind in ("number", "text", "name") or token.text == "("):
            return self._no_operator(before, token)
        span = self.span(token)
        if token.text == "," and before is not None and before.kind == "number" and before.end == token.start:
            return ReadingError("decimal-comma", span, "',' is no decimal sign", hint="write a point: 3.5")
        if token.text == ")":
            return ReadingError(
                "unopened-parenthesis", span, "')' closes nothing", hint="take it out, or open it"
            )
        hint = {
            "=": "write == to compare; a name is defined at the start of a line",
            "[": "a citation in brackets stands in the third column",
            "when": "cases belong to a defined value: name = ... when ...",
        }.get(token.text, "")
        return ReadingError("unexpected", span, f"'{token.text}' is not expected here", hint=hint)

    def _no_operator(self, before: Token, token: Token) -> ReadingError:
        gap = self.text.text[before.end : token.start]
        number = before.value if isinstance(before.value, Number) else None
        if number is not None and token.kind == "name":
            if number.unit is None and len(gap) > 1 and unit_at(self.text.text, token.start):
                return ReadingError(
                    "unit-too-far",
                    self.text.span(before.end, token.end),
                    "a unit stands one space at most after its number",
                    hint=f"write {before.text} {token.text}",
                )
            meant = meant_unit(token.text) if number.unit is None and len(gap) < 2 else None
            if meant:
                return ReadingError(
                    "unknown-unit",
                    self.span(token),
                    f"'{token.text}' is no unit",
                    hint=f"write '{meant}'; or * before it, if it is a name",
                )
            if number.unit is not None and unit_at(self.text.text, token.start):
                hint = f"no space inside a unit: {number.unit.text}·{token.text}; or write * to multiply"
                return self._missing_operator(before, token, hint)
        if number is not None and token.kind == "number" and len(token.text) == 3:
            return self._missing_operator(
                before, token, f"digits are not grouped: write {before.text}{token.text}"
            )
        product = "*" if before.text == ")" or token.text == "(" else f"{before.text}*{token.text}"
        return self._missing_operator(before, token, f"write {product} to multiply")

    def _missing_operator(self, before: Token, token: Token, hint: str) -> ReadingError:
        message = f"an operator is missing between '{before.text}' and '{token.text}'"
        return ReadingError("missing-operator", self.span(token), message, hint=hint)

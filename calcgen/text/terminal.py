"""A diagnostic as it is printed on a terminal."""

from __future__ import annotations

import unicodedata

from calcgen.text.diagnostic import Diagnostic
from calcgen.text.source import SourceFile, Span


def width(text: str) -> int:
    """Return the number of terminal cells that `text` takes."""
    return sum(
        0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1 for c in text
    )


def place_lines(source: SourceFile, span: Span, label: str = "") -> list[str]:
    """Return the source line of a span and a line with a caret under it."""
    number, column = source.place(span.start)
    text = source.line(number)
    length = max(1, min(span.end - span.start, len(text) - column + 1))
    before = "".join("\t" if c == "\t" else " " * width(c) for c in text[: column - 1])
    marks = "^" * max(1, width(text[column - 1 : column - 1 + length]))
    margin = f"{number:>5} | "
    return [
        f"{margin}{text}",
        " " * 5 + " | " + before + marks + (f" {label}" if label else ""),
    ]


def render(diagnostic: Diagnostic) -> str:
    """Return the diagnostic as text: place and message, source line, caret, hint."""
    d = diagnostic
    lines = [f"{d.source.path}:{d.line}:{d.column}: {d.severity}: {d.message} [{d.code}]"]
    lines += place_lines(d.source, d.span, d.label)
    for other in d.related:
        lines += place_lines(d.source, other.span, other.label)
    if d.hint:
        lines.append(f"      hint: {d.hint}")
    return "\n".join(lines)

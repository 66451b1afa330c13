"""A source file and its line index: the only place that turns offsets into lines and columns."""

from __future__ import annotations

import hashlib
from bisect import bisect_right
from dataclasses import dataclass
from functools import cached_property


@dataclass(frozen=True, order=True)
class Span:
    """Half-open range [start, end) of character offsets in a source file's text."""

    start: int
    end: int

    def to(self, other: Span) -> Span:
        """Return the span from the start of this one to the end of `other`."""
        return Span(min(self.start, other.start), max(self.end, other.end))


@dataclass(frozen=True)
class SourceFile:
    """The text of one file of a project; `path` is relative to the project, with '/'.

    Line ends are normalised to a line feed, so offsets and digests agree on every machine.
    """

    path: str
    text: str

    @classmethod
    def from_bytes(cls, path: str, data: bytes) -> SourceFile:
        """Decode UTF-8 (a byte-order mark is dropped).

        Raises
        ------
        UnicodeDecodeError
            When `data` is not UTF-8; its `start` is the byte offset of the fault.
        """
        text = data.decode("utf-8-sig").replace("\r\n", "\n").replace("\r", "\n")
        return cls(path, text)

    @cached_property
    def line_starts(self) -> tuple[int, ...]:
        """Offset of the first character of each line."""
        starts = [0]
        starts.extend(i + 1 for i, character in enumerate(self.text) if character == "\n")
        return tuple(starts)

    @cached_property
    def digest(self) -> str:
        """Sha256 of the normalised text, in hexadecimal."""
        return hashlib.sha256(self.text.encode("utf-8")).hexdigest()

    def place(self, offset: int) -> tuple[int, int]:
        """Return the line and the column of an offset, both counted from 1."""
        line = bisect_right(self.line_starts, offset)
        return line, offset - self.line_starts[line - 1] + 1

    def line_number(self, span: Span) -> int:
        """Return the line on which a span starts, counted from 1."""
        return self.place(span.start)[0]

    def line(self, number: int) -> str:
        """Return the text of a line (counted from 1) without its line feed."""
        start = self.line_starts[number - 1]
        end = self.text.find("\n", start)
        return self.text[start : len(self.text) if end < 0 else end]

    def slice(self, span: Span) -> str:
        """Return the text of a span."""
        return self.text[span.start : span.end]

"""Text put together from pieces of a file, which still knows where each character stands."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass

from calcgen.text import SourceFile, Span


@dataclass(frozen=True)
class Pieced:
    """The text of one column of a line and its continuation lines.

    Attributes
    ----------
    text : the pieces with a line feed between them.
    starts : offset of each piece in `text`, increasing, the first one 0.
    places : offset of each piece in the source file.
    """

    text: str
    starts: tuple[int, ...]
    places: tuple[int, ...]

    @classmethod
    def join(cls, source: SourceFile, pieces: Sequence[Span]) -> Pieced:
        """Put together at least one piece of a file."""
        starts, length = [], 0
        for piece in pieces:
            starts.append(length)
            length += piece.end - piece.start + 1
        text = "\n".join(source.slice(p) for p in pieces)
        return cls(text, tuple(starts), tuple(p.start for p in pieces))

    def place(self, offset: int) -> int:
        """Return the offset in the file of an offset in the text."""
        piece = bisect_right(self.starts, offset) - 1
        return self.places[piece] + offset - self.starts[piece]

    def span(self, start: int, end: int) -> Span:
        """Return the range of the file from `start` to before `end`; empty where they are equal."""
        if end <= start:
            place = self.place(start)
            return Span(place, place)
        return Span(self.place(start), self.place(end - 1) + 1)

    def part(self, start: int, end: int) -> Pieced:
        """Return the text from `start` to before `end`, which knows its places as well."""
        inner = [i for i in self.starts if start < i < end]
        starts = (start, *inner)
        return Pieced(self.text[start:end], tuple(i - start for i in starts), tuple(map(self.place, starts)))

    @property
    def whole(self) -> Span:
        """The range of the file from the first character to the last."""
        return self.span(0, len(self.text))

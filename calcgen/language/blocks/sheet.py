"""`sheet`: who, when and why."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, one_of, only_once, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.lines import Line
from calcgen.language.nodes import Named, Place
from calcgen.language.places import read_pieces
from calcgen.text import Report, Span

KEYS = ("originator", "checker", "date", "revision", "status", "purpose", "scope", "conclusion")


@dataclass(frozen=True)
class SheetEntry:
    """One `key = text` line; the text may hold `{name}` places, as prose does.

    `text` is as typed, white space collapsed; `pieces` are its parts in order, plain text and places.
    """

    key: str
    text: str
    span: Span
    text_span: Span
    pieces: tuple[str | Place, ...] = ()

    @property
    def places(self) -> tuple[Place, ...]:
        """The places in the text, in order."""
        return tuple(p for p in self.pieces if isinstance(p, Place))


@dataclass(frozen=True)
class SheetBlock:
    """The sheet of a calc."""

    entries: tuple[SheetEntry, ...]
    span: Span

    def get(self, key: str) -> str:
        """Return the text of a key, or an empty text."""
        return next((e.text for e in self.entries if e.key == key), "")


def read_sheet(block: BlockText, report: Report) -> Outcome[SheetBlock]:
    """Read `key = text`; the text is free and runs to the end of the line."""
    seen: dict[str, Span] = {}

    def read(line: Line, _: Cursor) -> SheetEntry:
        statement = line.statement
        key, equals, rest = statement.text.partition("=")
        word = key.strip()
        key_span = statement.span(0, max(1, len(word)))
        if not equals:
            hint = f"write key = text; possible keys are {', '.join(KEYS)}"
            raise ReadingError("unexpected", key_span, "'=' is missing in this line of the sheet", hint=hint)
        one_of(word, key_span, KEYS, "key of the sheet")
        only_once(Named(word, key_span), seen, "key")
        if len(line.columns) > 1:
            raise ReadingError(
                "too-many-columns",
                line.columns[1].whole,
                "a line of the sheet has one column",
                hint="put a text with | in quotes",
            )
        start = len(key) + 1 + len(rest) - len(rest.lstrip())
        text = statement.part(start, len(statement.text))
        return SheetEntry(word, " ".join(text.text.split()), line.span, text.whole, read_pieces(text, report))

    entries, _ = read_each(block.lines, report, read)
    return Outcome(SheetBlock(tuple(entries), block.span))

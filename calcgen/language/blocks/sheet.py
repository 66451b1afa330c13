"""`sheet`: who, when and why."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.text import Span

KEYS = ("originator", "checker", "date", "revision", "status", "purpose", "scope", "conclusion")


@dataclass(frozen=True)
class SheetEntry:
    """One `key = text` line; the text may hold `{name}` places, as prose does."""

    key: str
    text: str
    span: Span
    text_span: Span


@dataclass(frozen=True)
class SheetBlock:
    """The sheet of a calc."""

    entries: tuple[SheetEntry, ...]
    span: Span

    def get(self, key: str) -> str:
        """Return the text of a key, or an empty text."""
        return next((e.text for e in self.entries if e.key == key), "")

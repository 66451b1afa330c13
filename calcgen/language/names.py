"""Where a name ends in a text, and the names that a line would define."""

from __future__ import annotations

import re
import unicodedata

from calcgen.quantities.symbols import canonical


def name_end(text: str, start: int) -> int:
    """Return the end of the name that starts at `start`; `start` itself where none does."""
    if start >= len(text) or not text[start].isalpha():
        return start
    end = start + 1
    while end < len(text) and is_name_character(text[end]):
        end += 1
    return end


def is_name_character(character: str) -> bool:
    """Return whether a name may go on with a character: letter, digit, '_', ''' or a combining mark."""
    return (
        character.isalpha()
        or character.isdecimal()
        or character in "_'"
        or unicodedata.combining(character) > 0
    )


def canonical_name(text: str) -> str | None:
    """Return the canonical spelling of a name, or None where its characters are not those of a name.

    A letter may fall apart under NFKC ('ŀ' into 'l·'), and a mark may find no letter to join.
    """
    name = canonical(text)
    plain = name[:1].isalpha() and all(c.isalpha() or c.isdecimal() or c in "_'" for c in name)
    return name if plain else None


def defined_names(text: str) -> frozenset[str]:
    """Return the names that a line in error would have defined: `NAME =`, `NAME [unit] =`, `NAME of CALC`."""
    end = name_end(text, 0)
    name = canonical_name(text[:end]) if end else None
    if name is None or not _DEFINES.match(text, end):
        return frozenset()
    return frozenset({name})


_DEFINES = re.compile(r"\s*(?:\[[^\]\n]*\]\s*)?(?::?=(?!=)|of\b)")

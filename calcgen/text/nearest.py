"""The nearest of a list of known names, for hints."""

from __future__ import annotations

from collections.abc import Iterable
from difflib import SequenceMatcher, get_close_matches


def nearest(word: str, known: Iterable[str], cutoff: float = 0.6) -> str | None:
    """Return the name of `known` closest to `word`, or None when none is close.

    A name that differs in case alone is the closest of all.
    """
    names = sorted(set(known))
    for name in names:
        if name.casefold() == word.casefold() and name != word:
            return name
    found = get_close_matches(word, names, n=1, cutoff=cutoff)
    if found:
        return found[0]
    folded = [(SequenceMatcher(None, word.casefold(), n.casefold()).ratio(), n) for n in names]
    best = max(folded, default=(0.0, ""))
    return best[1] if best[0] >= cutoff else None

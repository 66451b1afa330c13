"""The CommonMark parser of calcs: tables, `$...$` mathematics, and `{name}` as tokens of type 'value'."""

from __future__ import annotations

from functools import cache

from markdown_it import MarkdownIt
from markdown_it.rules_inline import StateInline
from mdit_py_plugins.dollarmath import dollarmath_plugin

_LONGEST_PLACE = 200  # so that a page of opening braces takes linear time


@cache
def parser() -> MarkdownIt:
    """Return the parser; raw HTML is off."""
    markdown = MarkdownIt("commonmark", {"html": False}).enable("table")
    markdown.use(dollarmath_plugin, allow_labels=False, allow_space=False, allow_digits=False)
    markdown.inline.ruler.before("link", "value", _value)
    return markdown


def _value(state: StateInline, silent: bool) -> bool:  # noqa: FBT001 - the parser's signature
    """Read `{name}` into a token that holds its offsets in the inline text; an open brace ends at once."""
    if state.src[state.pos] != "{":
        return False
    start = state.pos
    limit = min(state.posMax, start + _LONGEST_PLACE)
    closing = state.src.find("}", start, limit)
    closed = closing > 0 and "\n" not in state.src[start:closing]
    end = closing + 1 if closed else start + 1
    if not silent:
        token = state.push("value", "", 0)
        token.content = state.src[start:end]
        token.meta = {"start": start, "closed": closed}
    state.pos = end
    return True

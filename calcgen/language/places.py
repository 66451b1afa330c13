"""`{name}` in text: where the value of a name is shown."""

from __future__ import annotations

import re

from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.nodes import Name, Place
from calcgen.language.pieced import Pieced
from calcgen.text import Report, Span

_BRACE = re.compile(r"\\\{|\\\}|\{([^{}\n]*)\}|\{")
_HINT = "a name in braces shows its value, as {M_Ed}; write \\{ for a brace"


def read_place(inside: Pieced, span: Span) -> Place:
    """Return the place whose braces hold `inside`; `span` is the whole, with its braces.

    Raises
    ------
    ReadingError
        Where the braces hold anything but one name.
    """
    if not inside.text.strip():
        raise ReadingError("bad-place", span, "these braces hold no name", hint=_HINT)
    try:
        cursor = Cursor(inside)
        name = expression(cursor)
        cursor.finish()
    except ReadingError as fault:
        raise ReadingError("bad-place", span, f"no value to show: {fault.message}", hint=_HINT) from fault
    if not isinstance(name, Name):
        hint = "derive it in a working block and show its name; write \\{ for a brace"
        raise ReadingError("bad-place", span, "only the value of a name can be shown", hint=hint)
    return Place(name, span)


def unclosed_place(span: Span) -> ReadingError:
    """Return the fault of a brace that is not closed on its line."""
    return ReadingError("bad-place", span, "'{' is not closed on this line", hint=_HINT)


def read_pieces(text: Pieced, report: Report) -> tuple[str | Place, ...]:
    """Split plain text at its places; a place in error stays as typed, a line feed becomes a space."""
    pieces: list[str | Place] = []
    plain, at = "", 0
    for match in _BRACE.finditer(text.text):
        plain += text.text[at : match.start()].replace("\n", " ")
        at = match.end()
        if match[0].startswith("\\"):
            plain += match[0][1:]
            continue
        span = text.span(*match.span())
        try:
            if match[1] is None:
                raise unclosed_place(span)
            place = read_place(text.part(*match.span(1)), span)
        except ReadingError as fault:
            fault.report_to(report)
            plain += match[0]
            continue
        pieces += [plain, place] if plain else [place]
        plain = ""
    plain += text.text[at:].replace("\n", " ")
    return (*pieces, plain) if plain else tuple(pieces)

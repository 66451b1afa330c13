"""A run of CommonMark between live blocks -> Prose, with each place and image at its span."""

from __future__ import annotations

from collections.abc import Sequence

from markdown_it.token import Token

from calcgen.language.calc import Prose
from calcgen.language.errors import ReadingError
from calcgen.language.nodes import Place
from calcgen.language.pieced import Pieced
from calcgen.language.places import read_place, unclosed_place
from calcgen.text import Report, SourceFile, Span


def read_prose(tokens: Sequence[Token], report: Report) -> Prose:
    """Return the prose of a run of block tokens; a place in error stays as it was typed."""
    source = report.source
    places: list[Place] = []
    images: list[tuple[str, Span]] = []
    finished: list[Token] = []
    cursors: dict[int, int] = {}
    for token in tokens:
        if token.type != "inline" or token.children is None:
            finished.append(token)
            continue
        text = _located(token, source, cursors)
        children = [_child(child, text, places, images, report) for child in token.children]
        finished.append(token.copy(children=children))
    return Prose(tuple(finished), tuple(places), tuple(images), _span(tokens, source))


def _child(
    child: Token, text: Pieced, places: list[Place], images: list[tuple[str, Span]], report: Report
) -> Token:
    if child.type == "image":
        images.append((str(child.attrGet("src") or ""), _image_span(child, text)))
        return child.copy(children=[_as_text(c) if c.type == "value" else c for c in child.children or ()])
    if child.type != "value":
        return child
    start, end = child.meta["start"], child.meta["start"] + len(child.content)
    span = text.span(start, end)
    try:
        if not child.meta["closed"]:
            raise unclosed_place(span)
        place = read_place(text.part(start + 1, end - 1), span)
    except ReadingError as fault:
        fault.report_to(report)
        return _as_text(child)
    places.append(place)
    typed = child.content[1:-1].strip()
    parenthesis = typed.find("(")
    return child.copy(content=place.name.dotted + (typed[parenthesis:] if parenthesis >= 0 else ""))


def _as_text(token: Token) -> Token:
    return token.copy(type="text", meta={})


def _image_span(image: Token, text: Pieced) -> Span:
    """Return the place of an image's address, or of the first line where it was rewritten."""
    src = str(image.attrGet("src") or "")
    found = text.text.find(src) if src else -1
    return text.span(found, found + len(src)) if found >= 0 else text.span(0, min(1, len(text.text)))


def _located(token: Token, source: SourceFile, cursors: dict[int, int]) -> Pieced:
    """Return the text of an inline token with the place of each of its lines.

    Each line stands in the file behind the marks of its list or quotation. Where it does not stand there
    as it is (a tab or an escaped '|' was rewritten), its characters are placed at the start of the line.
    `cursors` has the column behind what was found before on a line: the cells of a table share one.
    """
    starts: list[int] = []
    offsets: list[int] = []
    at = 0
    first, last = token.map or [0, 1]
    for index, content in enumerate(token.content.split("\n")):
        number = min(first + index, last - 1, len(source.line_starts) - 1)
        line, line_start = source.line(number + 1).replace("\0", "\ufffd"), source.line_starts[number]
        column = line.find(content, cursors.get(number, 0))
        if column >= 0:
            cursors[number] = column + len(content)
            starts.append(at)
            offsets.append(line_start + column)
        else:
            starts += range(at, at + len(content) + 1)
            offsets += [min(line_start, max(0, len(source.text) - 1))] * (len(content) + 1)
        at += len(content) + 1
    return Pieced(token.content, tuple(starts), tuple(offsets))


def _span(tokens: Sequence[Token], source: SourceFile) -> Span:
    maps = [t.map for t in tokens if t.map]
    if not maps:
        return Span(0, 0)
    first, last = min(m[0] for m in maps), max(m[1] for m in maps)
    starts = (*source.line_starts, len(source.text))
    return Span(starts[first], starts[min(last, len(source.line_starts))])

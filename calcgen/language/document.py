"""A calc file -> Calc: prose and live blocks in order."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import PurePosixPath

from markdown_it.token import Token

from calcgen.language.blocks import LATER, NAMED, READERS, ROWED, Block
from calcgen.language.blocks.reading import BlockText, not_available_yet
from calcgen.language.calc import Calc, FailedBlock, Prose
from calcgen.language.errors import ReadingError
from calcgen.language.lines import read_lines, read_rows, reference_column
from calcgen.language.markdown import parser
from calcgen.language.names import canonical_name, defined_names, name_end
from calcgen.language.nodes import WORDS, Column, Named
from calcgen.language.prose import read_prose
from calcgen.text import Diagnostic, Report, SourceFile, Span, error, nearest

_DEFINING = ("inputs", "working")  # in the other kinds the left sides belong to the block
_NUMBER = re.compile(r"[A-Za-z][A-Za-z0-9-]*")
_OPENING = re.compile(r"( {0,3})(`{3,}|~{3,})[ \t]*(.*?)[ \t]*")
_CLOSING = re.compile(r" {0,3}(`{3,}|~{3,})[ \t]*")


def read_source(path: str, data: bytes) -> SourceFile | Diagnostic:
    """Decode the bytes of a file; return the fault where they are not UTF-8."""
    try:
        return SourceFile.from_bytes(path, data)
    except UnicodeDecodeError as fault:
        readable = SourceFile.from_bytes(path, data[: fault.start])
        source = SourceFile(path, readable.text + "\ufffd")
        span = Span(len(readable.text), len(readable.text) + 1)
        return error(
            "not-utf-8",
            source,
            span,
            f"this file is not UTF-8: byte {data[fault.start]:#04x}",
            hint="save it with the encoding UTF-8",
        )


def calc_from(source: SourceFile) -> Calc:
    """Read a calc file. Every fault is reported; nothing is raised."""
    report = Report(source)
    number = PurePosixPath(source.path).stem
    if not _NUMBER.fullmatch(number):
        report.error(
            "bad-calc-number",
            Span(0, 0),
            f"'{number}' is no number of a calc",
            hint="the stem of the file's name is a letter, then letters A to Z, digits and -",
        )
    tokens = parser().parse(source.text)
    title, tokens = _take_title(tokens, report)
    if not source.text.strip():
        report.warning("empty-calc", Span(0, 0), "this calc is empty", hint="start it with # and its title")
    elif title is None:
        report.warning(
            "title-missing", Span(0, 0), "this calc has no title", hint="write '# ' and the title at its head"
        )
    segments: list[Prose | Block | FailedBlock] = []
    failed: set[str] = set()
    for run in _runs(tokens):
        segment, names = _read_fence(run[0], report) if _is_live(run[0]) else (None, frozenset[str]())
        failed |= names
        if segment is not None:
            segments.append(segment)
            continue
        for token in run:
            if token.type == "fence":
                failed |= _check_fence(token, report)
        segments.append(read_prose(run, report))
    return Calc(number, title or number, source, tuple(segments), frozenset(failed), report.diagnostics)


def _take_title(tokens: list[Token], report: Report) -> tuple[str | None, list[Token]]:
    """Return the text of the first level-1 heading, and the tokens without it."""
    headings = (
        i for i, t in enumerate(tokens) if t.type == "heading_open" and t.tag == "h1" and t.level == 0
    )
    index = next(headings, None)
    if index is None:
        return None, tokens
    prose = read_prose(tokens[index : index + 3], report)
    for place in prose.places:
        report.error(
            "bad-place", place.span, "a title shows no values", hint="show it in the prose below the title"
        )
    children = prose.tokens[1].children or []
    text = "".join(" " if c.type in ("softbreak", "hardbreak") else c.content for c in children)
    return " ".join(text.split()) or None, tokens[:index] + tokens[index + 3 :]


def _runs(tokens: list[Token]) -> Iterator[list[Token]]:
    """Split the tokens at the live fences of the top level, each a run of its own."""
    run: list[Token] = []
    for token in tokens:
        if _is_live(token):
            if run:
                yield run
            yield [token]
            run = []
        else:
            run.append(token)
    if run:
        yield run


def _is_live(token: Token) -> bool:
    return token.type == "fence" and token.level == 0 and _kind(token) in (*READERS, *LATER)


def _kind(fence: Token) -> str:
    words = fence.info.split(maxsplit=1)
    return words[0] if words else ""


def _read_fence(fence: Token, report: Report) -> tuple[Block | FailedBlock, frozenset[str]]:
    """Read a live block; return it with the names that it fails to define."""
    source = report.source
    first, last = fence.map or [0, 1]
    opening = _OPENING.fullmatch(source.line(first + 1))
    if opening is None:  # a fence of the top level starts its line
        raise TypeError("a fence without its opening line")
    start = source.line_starts[first]
    head_span = Span(start + opening.start(2), start + opening.end(3))
    closed = _is_closed(fence, source)
    content = _content(source, first + 1, last - 1 if closed else last, len(opening[1]))
    end = source.line_starts[last - 1] + len(source.line(last))
    span, kind = Span(start, end), _kind(fence)
    head = Span(start + opening.start(3), head_span.end)
    try:
        if not closed:
            raise _unclosed(head_span)
        if kind in LATER:
            raise not_available_yet(f"the block '{kind}'", head)
        named, reference = _split_head(kind, head, source)
        name = _block_name(kind, named, source)
    except ReadingError as fault:
        fault.report_to(report)
        return FailedBlock(kind, span), _names_in(fence, source)
    lines = read_rows(source, content) if kind in ROWED else read_lines(source, content, report)
    outcome = READERS[kind](BlockText(kind, name, head, span, lines, reference), report)
    return outcome.block or FailedBlock(kind, span), outcome.failed_names


def _content(source: SourceFile, first: int, last: int, indent: int) -> list[Span]:
    """Return the lines of a fence (counted from 0, `last` excluded) without the fence's own indent."""
    spans = []
    for number in range(first, last):
        start, text = source.line_starts[number], source.line(number + 1)
        blank = min(indent, len(text) - len(text.lstrip(" ")))
        spans.append(Span(start + blank, start + len(text)))
    return spans


def _split_head(kind: str, head: Span, source: SourceFile) -> tuple[Span, Column | None]:
    """Split the head of a table at its '|': kind and name, and where it comes from."""
    text = source.slice(head)
    bar = text.find("|") if kind in ROWED else -1
    if bar < 0:
        return head, None
    named = Span(head.start, head.start + len(text[:bar].rstrip()))
    return named, reference_column(source, Span(head.start + bar + 1, head.end))


def _block_name(kind: str, head: Span, source: SourceFile) -> Named | None:
    """Read the head of a block behind its fence: `section main`."""
    text = source.slice(head)
    rest = text[len(kind) :].strip()
    start = head.start + text.find(rest, len(kind)) if rest else head.end
    span = Span(start, start + len(rest))
    if kind not in NAMED:
        if rest:
            raise ReadingError("block-head", span, f"nothing follows '{kind}' in the head of its block")
        return None
    if not rest:
        hint = f"write {kind} NAME"
        raise ReadingError("block-head", head, f"the name of this {kind} is missing", hint=hint)
    name = canonical_name(rest) if name_end(rest, 0) == len(rest) else None
    if name is None:
        hint = f"write {kind} NAME: a letter, then letters, digits, _ and '"
        raise ReadingError("block-head", span, f"'{rest}' is no name of a {kind}", hint=hint)
    if name in WORDS:
        raise ReadingError("reserved-name", span, f"'{name}' is a word of the language")
    return Named(name, span)


def _check_fence(fence: Token, report: Report) -> frozenset[str]:
    """Report a fence that is not read but looks as if it should be; return the names it would define."""
    source = report.source
    first, _ = fence.map or [0, 1]
    line, start = source.line(first + 1), source.line_starts[first]
    mark = max(0, line.find(fence.markup))
    head = Span(start + mark, start + len(line.rstrip()))
    kind = _kind(fence)
    if kind in READERS or kind in LATER:
        report.error(
            "live-block-nested",
            head,
            f"the block '{kind}' stands inside a list or a quotation",
            hint="a live block stands at the left margin of the calc",
        )
        return _names_in(fence, source)
    if fence.level == 0 and not _is_closed(fence, source):
        _unclosed(head).report_to(report)
        return frozenset()
    near = nearest(kind, [*READERS, *LATER], cutoff=0.75) if kind else None
    if near:
        report.warning(
            "unknown-block",
            head,
            f"'{kind}' is no live block, so this one is shown as code",
            hint=f"the nearest is '{near}'",
        )
        return _names_in(fence, source)
    return frozenset()


def _unclosed(head: Span) -> ReadingError:
    return ReadingError(
        "unclosed-fence",
        head,
        "this block is not closed, and takes in the rest of the calc",
        hint="close it with a line of the same marks",
    )


def _is_closed(fence: Token, source: SourceFile) -> bool:
    first, last = fence.map or [0, 1]
    closing = _CLOSING.fullmatch(source.line(last)) if last - 1 > first else None
    return closing is not None and closing[1][0] == fence.markup[0] and len(closing[1]) >= len(fence.markup)


def _names_in(fence: Token, source: SourceFile) -> frozenset[str]:
    """Return the names that a fence would define; one that is not closed has swallowed other blocks."""
    found = _head_names(fence.info)
    lines = fence.content.split("\n")
    kind = _kind(fence)
    if kind in _DEFINING or kind not in (*READERS, *LATER) or not _is_closed(fence, source):
        found = found.union(*(defined_names(line) for line in lines))
    heads = (opening[3] for opening in map(_OPENING.fullmatch, lines) if opening)
    return found.union(*map(_head_names, heads))


def _head_names(head: str) -> frozenset[str]:
    """Return the name that the head of a block defines: `beam NAME`, `method FILE as NAME`."""
    words = head.split("|")[0].split()
    named = len(words) > 1 and words[0] in (*NAMED, "method")
    found = canonical_name(words[-1]) if named else None
    return frozenset({found}) if found else frozenset()

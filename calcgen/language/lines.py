"""Lines of a live block: three columns, continuation lines, comments, citations; rows of a table."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

from calcgen.language.nodes import Annotations, Citation, Column
from calcgen.language.pieced import Pieced
from calcgen.text import Report, SourceFile, Span

_CITATION = re.compile(r"\[([^\s\[\]]+)(?:\s+([^\[\]]*?))?\s*\]")
_COLUMNS = 3


@dataclass(frozen=True)
class Line:
    """One line of a block with its continuation lines.

    Attributes
    ----------
    columns : the columns as typed, one to three; the first is the statement and may be empty. The row of a
        table has any number, and no annotations.
    span : from the first character to the last.
    """

    columns: tuple[Pieced, ...]
    annotations: Annotations
    span: Span

    @property
    def statement(self) -> Pieced:
        """The first column."""
        return self.columns[0]

    @property
    def statement_span(self) -> Span:
        """The place of the statement."""
        return self.statement.whole

    @property
    def statement_text(self) -> str:
        """The statement with white space collapsed."""
        return " ".join(self.statement.text.split())


def read_lines(source: SourceFile, physical: Iterable[Span], report: Report) -> tuple[Line, ...]:
    """Put the physical lines of a block together.

    Reports a fourth column, and a line that continues nothing.
    """
    gathered: list[list[Span]] = []
    for span in physical:
        text = source.slice(span)
        if not text.strip() or text.startswith("#"):
            continue
        if not text[0].isspace():
            gathered.append([span])
        elif gathered:
            gathered[-1].append(span)
        else:
            report.error(
                "continues-nothing",
                _trimmed(source, span),
                "this line starts with white space, but there is no line above to continue",
                hint="start it at the first column of the block",
            )
            gathered.append([span])
    return tuple(_line(source, spans, report) for spans in gathered)


def read_rows(source: SourceFile, physical: Iterable[Span]) -> tuple[Line, ...]:
    """Split the rows of a table at each '|'; a row is one physical line, and may start with white space."""
    rows: list[Line] = []
    for span in physical:
        text = source.slice(span)
        if not text.strip() or text.startswith("#"):
            continue
        cells = tuple(Pieced.join(source, [cell]) for cell in _split(source, span))
        whole = _trimmed(source, span)
        nothing = Column("", Span(whole.end, whole.end))
        rows.append(Line(cells, Annotations(nothing, nothing), whole))
    return tuple(rows)


def reference_column(source: SourceFile, span: Span) -> Column:
    """Return a text that says where something comes from, with its citations."""
    text = Pieced.join(source, [_trimmed(source, span)])
    return _cited(text, _column(text))


def _line(source: SourceFile, physical: list[Span], report: Report) -> Line:
    pieces: list[list[Span]] = []
    for span in physical:
        for index, piece in enumerate(_split(source, span)):
            if index == len(pieces):
                pieces.append([])
            pieces[index].append(piece)
    if len(pieces) > _COLUMNS:
        report.error(
            "too-many-columns",
            pieces[_COLUMNS][0],
            "a line has three columns, this is a fourth",
            hint="statement | what it is | where it comes from; put a text with | in quotes",
        )
    columns = tuple(Pieced.join(source, _not_empty(spans)) for spans in pieces[:_COLUMNS])
    whole = _trimmed(source, physical[0]).to(_trimmed(source, physical[-1]))
    nothing = Column("", Span(whole.end, whole.end))
    note = _column(columns[1]) if len(columns) > 1 else nothing
    reference = _column(columns[2]) if len(columns) > 2 else nothing
    return Line(
        columns, Annotations(note, _cited(columns[2], reference) if reference.text else reference), whole
    )


def _split(source: SourceFile, line: Span) -> list[Span]:
    """Split a physical line at each '|' outside quotes; a quote that is not closed on its line is none."""
    text = source.slice(line)
    bars, at = [-1], 0
    while at < len(text):
        if text[at] == '"':
            closing = text.find('"', at + 1)
            at = closing if closing > 0 else at
            if closing < 0:
                bars += [i for i in range(at + 1, len(text)) if text[i] == "|"]
                break
        elif text[at] == "|":
            bars.append(at)
        at += 1
    ends = [*bars[1:], len(text)]
    return [
        _trimmed(source, Span(line.start + bar + 1, line.start + end))
        for bar, end in zip(bars, ends, strict=True)
    ]


def _trimmed(source: SourceFile, span: Span) -> Span:
    text = source.slice(span)
    start = span.start + len(text) - len(text.lstrip())
    return Span(start, max(start, span.start + len(text.rstrip())))


def _not_empty(spans: list[Span]) -> list[Span]:
    return [s for s in spans if s.end > s.start] or spans[:1]


def _column(text: Pieced) -> Column:
    return Column(" ".join(text.text.split()), text.whole)


def _cited(text: Pieced, column: Column) -> Column:
    found = tuple(
        Citation(m[1], " ".join((m[2] or "").split()), text.span(*m.span()))
        for m in _CITATION.finditer(text.text)
    )
    return Column(column.text, column.span, found)

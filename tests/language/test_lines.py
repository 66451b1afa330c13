"""Lines: columns, continuation column by column, comments, citations; every place is that of the file."""

from __future__ import annotations

import pytest

from calcgen.language.lines import Line, read_lines
from calcgen.text import Report, SourceFile, Span


def lines_of(text: str) -> tuple[SourceFile, tuple[Line, ...], Report]:
    source = SourceFile("a.md", text)
    report = Report(source)
    spans = [Span(s, s + len(source.line(n))) for n, s in enumerate(source.line_starts, start=1)]
    return source, read_lines(source, spans, report), report


@pytest.mark.parametrize(
    ("text", "columns"),
    [
        ("a = 1", [("a = 1", "", "")]),
        ("a = 1 | note | ref", [("a = 1", "note", "ref")]),
        ("a = 1 || ref", [("a = 1", "", "ref")]),
        ("a = 1\nb = 2", [("a = 1", "", ""), ("b = 2", "", "")]),
        ("a = 1\n  + 2 | note", [("a = 1 + 2", "note", "")]),
        ("a = 1 | one\n  + 2 | two | ref\n      |     | more", [("a = 1 + 2", "one two", "ref more")]),
        ("a = 1 | note\n\t| more", [("a = 1", "note more", "")]),
        ("# a comment\na = 1\n# another\n  + 2", [("a = 1 + 2", "", "")]),
        ("a = 1\n\n   \n  + 2", [("a = 1 + 2", "", "")]),
        ('a = "x | y" | "p | q"', [('a = "x | y"', '"p | q"', "")]),
        ('a = 1 | a 6" pipe | ref', [("a = 1", 'a 6" pipe', "ref")]),
    ],
)
def test_columns(text: str, columns: list[tuple[str, str, str]]) -> None:
    _, lines, report = lines_of(text)
    found = [(n.statement_text, n.annotations.note.text, n.annotations.reference.text) for n in lines]
    assert found == columns
    assert not report.diagnostics


def test_places_of_a_continued_line_are_those_of_the_file() -> None:
    source, (line,), _ = lines_of("a = first | one\n  + second | two\n# skipped\n  + third")
    statement = line.statement
    for word in ("first", "second", "third"):
        at = statement.text.index(word)
        assert source.slice(statement.span(at, at + len(word))) == word
    assert source.slice(line.annotations.note.span) == "one\n  + second | two"
    assert source.slice(line.span) == source.text
    assert source.slice(statement.part(4, len(statement.text)).span(0, 5)) == "first"


def test_citations() -> None:
    source, (line,), _ = lines_of(
        "a = 1 | [NOT this] | see [EN1990 6.4.3.2]\n | | and [DWG-201], [A  p.  12 ]"
    )
    found = line.annotations.reference.citations
    assert [(c.key, c.place) for c in found] == [("EN1990", "6.4.3.2"), ("DWG-201", ""), ("A", "p. 12")]
    assert [source.slice(c.span) for c in found] == ["[EN1990 6.4.3.2]", "[DWG-201]", "[A  p.  12 ]"]
    assert not line.annotations.note.citations

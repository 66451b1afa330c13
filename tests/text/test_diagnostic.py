"""Diagnostics: order, text for a terminal, codes, the nearest name."""

from __future__ import annotations

import pytest

from calcgen.text import Related, Report, SourceFile, Span, nearest
from calcgen.text.codes import CODES
from calcgen.text.terminal import render


def test_codes_are_sorted_and_kebab_case() -> None:
    assert list(CODES) == sorted(CODES)
    assert all(code == code.lower() and code.replace("-", "").isalnum() for code in CODES)
    assert all(headline and headline[-1] != "." for headline in CODES.values())


def test_a_report_sorts_and_drops_what_was_said_before() -> None:
    report = Report(SourceFile("a.md", "abc\ndef"))
    assert not report.failed
    report.warning("x", Span(5, 6), "second")
    report.warning("x", Span(5, 6), "second")
    assert not report.failed
    report.error("x", Span(0, 1), "first")
    assert report.failed
    assert [(d.message, d.line, d.column) for d in report.diagnostics] == [("first", 1, 1), ("second", 2, 2)]


def test_a_diagnostic_on_a_terminal() -> None:
    source = SourceFile("calcs/W-12.md", "a = 1\n\tb = 深 + x\n")
    report = Report(source)
    start = source.text.index("x")
    related = (Related(Span(0, 1), "defined here"),)
    report.error(
        "unknown-name", Span(start, start + 1), "no 'x'", hint="try a", label="here", related=related
    )
    assert render(report.diagnostics[0]).splitlines() == [
        "calcs/W-12.md:2:10: error: no 'x' [unknown-name]",
        "    2 | \tb = 深 + x",
        "      | \t" + " " * 9 + "^ here",
        "    1 | a = 1",
        "      | ^ defined here",
        "      hint: try a",
    ]


@pytest.mark.parametrize(
    ("word", "name"),
    [("inptus", "inputs"), ("Inputs", "inputs"), ("INPUT", "inputs"), ("qqq", None), ("", None)],
)
def test_nearest(word: str, name: str | None) -> None:
    assert nearest(word, ["working", "inputs", "beam"]) == name

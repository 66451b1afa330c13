"""Diagnostics: order, text for a terminal, codes, the nearest name."""

from __future__ import annotations

import ast
import re
from pathlib import Path

import pytest

import calcgen
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


def test_every_code_that_the_program_reports_is_in_the_table_and_the_other_way_round() -> None:
    reported = set()
    for path in Path(calcgen.__file__).parent.rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Constant) and isinstance(node.value, str) and path.name != "codes.py":
                reported.add(node.value)
    assert set(CODES) <= reported
    calls = {"error", "warning", "fault", "_fault", "ReadingError"}
    for path in Path(calcgen.__file__).parent.rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call) and node.args and isinstance(node.args[0], ast.Constant):
                name = (
                    node.func.attr if isinstance(node.func, ast.Attribute) else getattr(node.func, "id", "")
                )
                code = node.args[0].value
                if name in calls and isinstance(code, str) and re.fullmatch(r"[a-z]+(-[a-z]+)*", code):
                    assert code in CODES, (path, code)

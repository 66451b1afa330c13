"""Whatever is typed: reading neither raises nor hangs, and each diagnostic lies inside the file."""

from __future__ import annotations

import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.language.calc import Calc
from calcgen.project import project_from, references_from
from calcgen.text import SourceFile
from calcgen.text.codes import CODES
from calcgen.text.terminal import render
from tests.language.helpers import VALID, read

_MARKS = '``` ~~~ ```` ` | " ( ) { } [ ] = # $ ^ / > - \\ < ![a](b.png)'
_WORDS = "3/8 in kN·m ² ⁻ ŀ ℃ °C when at of 1e999"
_SPACED = ("```inputs\n", "```table k\n", "\n", "\n ", "\t", "\u0301", "\0", "\u2028", " of W-")
_SNIPPETS = st.sampled_from([*_MARKS.split(), *_WORDS.split(), *_SPACED, "9" * 50])


def sound(calc: Calc) -> bool:
    """Return whether every diagnostic has a known code and a place that can be shown."""
    size = len(calc.source.text)
    for number, d in enumerate(calc.diagnostics):
        spans = [d.span, *(r.span for r in d.related)]
        assert all(0 <= s.start <= s.end <= size for s in spans), d
        assert d.code in CODES
        assert number > 9 or render(d)
    return True


@given(st.text(max_size=300))
def test_any_text(text: str) -> None:
    assert sound(read(text))


@given(st.lists(_SNIPPETS | st.text(max_size=8), max_size=40).map("".join))
def test_any_pieces_in_a_block(text: str) -> None:
    for kind in ("inputs", "working", "section a", "beam b", "stress c", "sheet", "assumptions"):
        assert sound(read(f"# T\n```{kind}\n{text}\n```\n"))


@given(
    st.lists(
        st.sampled_from(
            ["title", "axes", " = ", '"eurocode"', "\n", "[preferred_units]\n", "[[a]]\n", "3", ".", "x"]
        ),
        max_size=30,
    ).map("".join)
)
def test_any_toml(text: str) -> None:
    source = SourceFile("project.toml", text)
    for _, diagnostics in (project_from(source), references_from(source)):
        assert all(d.code in CODES and 0 <= d.span.start <= d.span.end <= len(text) for d in diagnostics)


@settings(max_examples=200)
@given(st.integers(0, len(VALID)), st.integers(0, 30), _SNIPPETS | st.text(max_size=5))
def test_a_valid_calc_with_a_change(at: int, length: int, put: str) -> None:
    assert sound(read(VALID[:at] + put + VALID[at + length :]))


@pytest.mark.parametrize(
    "text",
    [
        "```working\nx = " + "(" * 20000 + "\n```",
        "```working\nx = " + "-" * 20000 + "1\n```",
        "```working\nx = " + "1+" * 20000 + "1\n```",
        "```working\nx = " + "2^" * 20000 + "1\n```",
        "```working\nx = " + "a." * 20000 + "\n```",
        "```working\nx = " + "1/" * 20000 + "\n```",
        "```working\nx = " + "sqrt(" * 5000 + "\n```",
        "```working\nx = " + "9" * 20000 + "\n```",
        "```working\n" + '"' * 20000 + "\n```",
        "```working\n" + "a | b\n" * 5000 + "```",
        "```working\nx = 1\n" + " + 1\n" * 10000 + "```",
        "```inputs\nx = 1 m" + " [A]" * 10000 + "\n```",
        "```inputs\nx = 1 m | a | " + "[" * 20000 + "\n```",
        "```inputs\nx = 1 m | a | " + "[a " * 10000 + "\n```",
        "```sheet\npurpose = " + "{" * 20000 + "\n```",
        "{" * 20000,
        "{a} " * 5000,
        "$" * 10000,
        "```inputs\n" * 2000,
        "> " * 5000 + "{a}",
        "| {a} " * 500 + "|\n" + "|---" * 500 + "|\n" + "| {a} " * 500 + "|\n",
    ],
    ids=lambda text: text[11:31] if text.startswith("```") else text[:10],
)
def test_reading_takes_time_linear_in_the_text(text: str) -> None:
    start = time.perf_counter()
    assert sound(read(text))
    assert time.perf_counter() - start < 5, "far beyond what a linear reader takes"

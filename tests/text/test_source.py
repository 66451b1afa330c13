"""Source files: lines, columns, digests."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.text import SourceFile, Span


@pytest.mark.parametrize(
    ("offset", "place"), [(0, (1, 1)), (1, (1, 2)), (2, (1, 3)), (3, (2, 1)), (4, (3, 1)), (5, (3, 2))]
)
def test_place(offset: int, place: tuple[int, int]) -> None:
    assert SourceFile("a.md", "ab\n\nc").place(offset) == place


@given(st.text(alphabet="ab\nπ", max_size=50))
def test_lines_and_places_agree(text: str) -> None:
    source = SourceFile("a.md", text)
    assert [source.line(n) for n in range(1, len(source.line_starts) + 1)] == text.split("\n")
    for offset, character in enumerate(text):
        line, column = source.place(offset)
        assert (source.line(line) + "\n")[column - 1] == character


def test_line_ends_and_byte_order_mark_are_dropped() -> None:
    plain = SourceFile.from_bytes("a.md", b"a\nb\n")
    assert SourceFile.from_bytes("a.md", b"\xef\xbb\xbfa\r\nb\r") == plain
    assert plain.digest == SourceFile("b.md", "a\nb\n").digest


def test_bytes_that_are_not_utf_8() -> None:
    with pytest.raises(UnicodeDecodeError):
        SourceFile.from_bytes("a.md", b"\xff")


def test_spans() -> None:
    assert Span(3, 5).to(Span(1, 4)) == Span(1, 5)
    assert SourceFile("a.md", "abcdef").slice(Span(1, 3)) == "bc"

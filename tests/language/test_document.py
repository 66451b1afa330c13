"""The document: title, prose with places, live fences."""

from __future__ import annotations

import pytest

from calcgen.language.calc import Calc, FailedBlock, Prose
from calcgen.language.document import calc_from, read_source
from calcgen.text import Diagnostic, SourceFile
from tests.language.helpers import VALID, found, read


def proses(calc: Calc) -> list[Prose]:
    return [s for s in calc.segments if isinstance(s, Prose)]


def test_a_calc_in_order() -> None:
    calc = read(VALID)
    assert (calc.number, calc.title) == ("W-12", "Walkway stringer, bay 3")
    assert [type(s).__name__ for s in calc.segments] == [
        "Prose",
        "SheetBlock",
        "AssumptionsBlock",
        "InputsBlock",
        "WorkingBlock",
        "SectionBlock",
        "SectionBlock",
        "BeamBlock",
        "StressBlock",
    ]


def test_places_in_prose_stand_where_they_are_typed() -> None:
    calc = read(VALID)
    (prose,) = proses(calc)
    assert [(p.name.dotted, calc.source.slice(p.span)) for p in prose.places] == [
        ("M_Ed", "{M_Ed}"),
        ("σ_max", "{sigma_max}"),
        ("stringer.ULS.M_max", "{stringer.ULS.M_max(2.5 m)}"),
        ("L", "{L}"),
        ("L", "{L}"),
        ("q_k", "{q_k}"),
    ]
    values = [c.content for t in prose.tokens for c in t.children or () if c.type == "value"]
    assert values == ["M_Ed", "σ_max", "stringer.ULS.M_max(2.5 m)", "L", "L", "q_k"]


@pytest.mark.parametrize(
    "text",
    [
        "`{a b}`",
        "    {a b}",
        "```text\n{a b}\n```",
        "$\\frac{a}{b}$",
        "$$\n{a b}\n$$",
        "\\{a b}",
        "![{a b}](x.png)",
    ],
    ids=["code", "indented code", "fence", "math", "math block", "escaped", "image text"],
)
def test_nothing_is_replaced_in(text: str) -> None:
    calc = read(f"# T\n\n{text}\n")
    assert not calc.diagnostics
    assert not proses(calc)[0].places


@pytest.mark.parametrize(
    "text",
    [
        "- {x}",
        "1. a\n   - {x}",
        "> > {x}",
        "## {x}",
        "{x}\n---",
        "**[a {x}](b)**",
        "a\\\n{x}",
        "\t> a {x}".strip(),
    ],
)
def test_a_place_is_found_in(text: str) -> None:
    calc = read(f"# T\n\n{text}\n")
    (place,) = proses(calc)[0].places
    assert calc.source.slice(place.span) == "{x}"


def test_a_place_in_a_rewritten_line_stands_on_that_line() -> None:
    calc = read("# T\n\n| a |\n|---|\n| x \\| {y} |\n")
    (place,) = proses(calc)[0].places
    assert calc.source.line_number(place.span) == 5


def test_images() -> None:
    calc = read("# T\n\n![plan](plan.png) and\n![view][v]\n\n[v]: view.svg\n")
    assert [(s, calc.source.line_number(p)) for s, p in proses(calc)[0].images] == [
        ("plan.png", 3),
        ("view.svg", 3),
    ]


def test_the_title_is_the_first_heading_of_level_one() -> None:
    calc = read("## Below\n\n# The *first* `one`\n\n# Another\n")
    assert calc.title == "The first one"
    assert [t.tag for t in proses(calc)[0].tokens if t.type == "heading_open"] == ["h2", "h1"]


def test_a_calc_without_title_takes_its_number() -> None:
    calc = read("prose\n")
    assert calc.title == "W-12"
    assert [d.severity for d in calc.diagnostics] == ["warning"]


def test_prose_alone_is_a_calc() -> None:
    assert not read("# T\n\nprose alone, with $5 and $6\n").diagnostics


def test_raw_html_is_text() -> None:
    calc = read("# T\n\n<script>alert(1)</script> <b>x</b>\n")
    types = {c.type for t in proses(calc)[0].tokens for c in (t, *(t.children or ()))}
    assert not any("html" in t for t in types)


@pytest.mark.parametrize("fence", ["```", "~~~", "`````"])
def test_fences_of_any_marks_and_indent(fence: str) -> None:
    calc = read(f"# T\n\n  {fence} inputs\n  a = 3 m\n    | note\n  {fence}\n")
    assert not calc.diagnostics
    assert [type(s).__name__ for s in calc.segments] == ["InputsBlock"]


def test_an_ordinary_fence_stays_prose() -> None:
    calc = read("# T\n\n```python\nx = 1\n```\n\n```\nplain\n```\n")
    assert not calc.diagnostics
    assert [t.type for t in proses(calc)[0].tokens] == ["fence", "fence"]


def test_every_fault_of_a_file_is_reported() -> None:
    calc = read("# T\n```inputs\na = 5 KN\n```\n```working\nb = 2 L\n```\n```table k\n```\n{+}\n")
    assert found(calc) == [
        "3:7 unknown-unit",
        "6:7 missing-operator",
        "8:4 table-empty",
        "10:1 bad-place",
    ]
    assert [type(s).__name__ for s in calc.segments][-2:] == [FailedBlock.__name__, Prose.__name__]


def test_line_ends_and_byte_order_mark_change_nothing() -> None:
    plain = read_source("calcs/W-1.md", VALID.encode())
    marked = read_source("calcs/W-1.md", b"\xef\xbb\xbf" + VALID.replace("\n", "\r\n").encode())
    assert plain == marked


def test_a_file_that_is_not_utf_8() -> None:
    fault = read_source("calcs/W-1.md", "# Länge\nb".encode("latin-1"))
    assert isinstance(fault, Diagnostic)
    assert (fault.code, fault.line, fault.column) == ("not-utf-8", 1, 4)


@pytest.mark.parametrize(
    ("stem", "good"), [("W-12", True), ("a", True), ("12", False), ("W_1", False), ("Ä", False)]
)
def test_numbers(stem: str, good: bool) -> None:
    calc = calc_from(SourceFile(f"calcs/{stem}.md", "# T\n"))
    assert found(calc) == ([] if good else ["1:1 bad-calc-number"])

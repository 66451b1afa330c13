"""Prose as HTML: what is safe stays, what is not becomes text."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.lines import ProseResult
from calcgen.site.prose import ProseRenderer, image_path
from tests.evaluation.helpers import evaluated, fence

ANCHORS = frozenset({"M_Ed", "b"})


def rendered(text: str) -> str:
    (calc,) = evaluated(f"# Title\n\n{text}\n\n{fence('working', 'M_Ed = 2*3 kN·m')}")
    renderer = ProseRenderer(
        "calcs/C-1.md", {"calcs/plan.png": "assets/images/0.png"}, frozenset({"W-07"}), ANCHORS
    )
    return "".join(renderer.render_prose(s) for s in calc.segments if isinstance(s, ProseResult)).strip()


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("It is {M_Ed}.", '<p>It is <a class="value" href="#M_Ed">6.000\xa0kN·m</a>.</p>'),
        ("It is {x}.", '<p>It is <span class="missing">x has no value</span>.</p>'),
        ("<b>bold</b> & more", "<p>&lt;b&gt;bold&lt;/b&gt; &amp; more</p>"),
        ("[a](https://example.org/?a=1&b=2)", '<p><a href="https://example.org/?a=1&amp;b=2">a</a></p>'),
        ("[a](mailto:x@example.org)", '<p><a href="mailto:x@example.org">a</a></p>'),
        ("[a](W-07.md#M)", '<p><a href="W-07.html#M">a</a></p>'),
        ("[a](#M_Ed)", '<p><a href="#M_Ed">a</a></p>'),
        ("[a](elsewhere.pdf)", "<p>a</p>"),  # not in the package
        ("[a](ftp://example.org)", "<p>a</p>"),
        ("[a](//example.org/x)", "<p>a</p>"),
        ("[a](javascript:alert)", "<p>[a](javascript:alert)</p>"),
        ("![plan](plan.png)", '<p><img src="assets/images/0.png" alt="plan"></p>'),
        ("![plan](../gone.png)", '<p><span class="missing">image not found: plan</span></p>'),
        ("# Again\n\n#### Deep", "<h2>Again</h2>\n<h3>Deep</h3>"),
    ],
)
def test_prose(text: str, expected: str) -> None:
    assert rendered(text) == expected


def test_mathematics_is_set_and_nothing_else_passes() -> None:
    assert "<mfrac>" in rendered(r"$\frac{M}{W}$")
    assert "href" not in rendered(r"$\href{javascript:alert(1)}{x}$")


@pytest.mark.parametrize("tex", [r"\frac{", r"\nothing", r"\left("])
def test_bad_tex_is_shown_as_code(tex: str) -> None:
    assert f'<code class="missing">{tex}</code> <span>(not readable as TeX)</span>' in rendered(f"${tex}$")


def test_a_table_scrolls_in_its_own_width_and_has_heads() -> None:
    found = rendered("| a | b |\n|---|--:|\n| 1 | 2 |")
    assert found.startswith('<div class="scrolls"><table>')
    assert '<th scope="col">a</th>' in found
    assert '<td class="right">2</td>' in found


@pytest.mark.parametrize(
    ("source", "expected"),
    [
        ("a.png", "calcs/a.png"),
        ("../pictures/a%20b.png", "pictures/a b.png"),
        ("../../a.png", None),
        ("/a.png", None),
        ("https://example.org/a.png", None),
        ("http://[", None),
    ],
)
def test_images_are_files_of_the_project(source: str, expected: str | None) -> None:
    assert image_path("calcs/C-1.md", source) == expected

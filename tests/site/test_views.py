"""The small parts of pages."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.lines import CheckResult
from calcgen.language.nodes import Citation, Column
from calcgen.site.facts import ReferenceFacts
from calcgen.site.views import bar, utilisation_text, words
from calcgen.text import Span
from tests.evaluation.helpers import working


@pytest.mark.parametrize(
    ("value", "expected"),
    [
        (0.33664, "0.337"),
        (1.0, "1.000"),
        (1.0002, "1.0002"),  # not 1.000, which would read as satisfied
        (0.99999, "0.99999"),
        (12.5, "12.50"),
        (3000.0, "3000"),
        (None, "—"),
    ],
)
def test_utilisation(value: float | None, expected: str) -> None:
    assert utilisation_text(value) == expected


def check(ratio: float) -> CheckResult:
    return working(f"{ratio} <= 1").checks[0]


def per_cent(text: str) -> float:
    return float(text.removesuffix("%"))


@pytest.mark.parametrize("ratio", [0.01, 0.5, 1.0, 1.05, 1.9, 3.5])
def test_a_bar_is_drawn_to_scale_with_room_beyond_its_limit(ratio: float) -> None:
    found = bar(check(ratio))
    assert found is not None
    assert per_cent(found.filled) == pytest.approx(ratio * per_cent(found.limit), abs=0.02)
    assert per_cent(found.limit) < 100
    assert found.exceeded == (ratio > 1)


def test_a_bar_far_beyond_its_limit_keeps_the_limit_in_sight() -> None:
    found = bar(check(1000))
    assert found is not None
    assert per_cent(found.limit) > 25
    assert per_cent(found.filled) < 100


def test_a_citation_leads_to_its_document() -> None:
    text = 'as built <[DWG p. "3"]>, [not cited]'
    column = Column(text, Span(0, 0), (Citation("DWG", "p. 3", Span(0, 0)),))
    found = words(column, {"DWG": ReferenceFacts("Plan", "HL/201")})
    assert found == ('as built &lt;<a href="references.html#DWG">HL/201 p. &#34;3&#34;</a>&gt;, [not cited]')

"""The source of a calc with line numbers to which the pages link."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.site import addresses
from calcgen.site.calc_page import diagnostics_of
from calcgen.site.views import Link


@dataclass(frozen=True)
class SourceLine:
    """One line; `faults` lead to the diagnostics that point at it."""

    number: int
    text: str
    faults: tuple[Link, ...]


@dataclass(frozen=True)
class SourceView:
    """A calc's source, its digest and the way back."""

    number: str
    title: str
    path: str
    calc: str
    lines: tuple[SourceLine, ...]


def source_view(calc: EvaluatedCalc) -> SourceView:
    """Return the page of a calc's source."""
    page = addresses.calc_page(calc.number)
    source = calc.calc.source
    faults: dict[int, list[Link]] = {}
    ordered = sorted(calc.diagnostics, key=lambda d: d.severity != "error")
    for diagnostic, view in zip(ordered, diagnostics_of(calc), strict=True):
        link = Link(view.severity, addresses.link(page, view.anchor))
        faults.setdefault(diagnostic.line, []).append(link)
    lines = source.text.removesuffix("\n").split("\n")
    return SourceView(
        calc.number,
        calc.calc.title,
        source.path,
        addresses.link(page),
        tuple(SourceLine(n, text, tuple(faults.get(n, ()))) for n, text in enumerate(lines, start=1)),
    )

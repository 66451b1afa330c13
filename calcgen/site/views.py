"""Small frozen parts that several pages share, and how they are made."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass

from markupsafe import Markup, escape

from calcgen.evaluation.results.common import Result, SecondRoute
from calcgen.evaluation.results.lines import CheckResult
from calcgen.language.nodes import Column
from calcgen.quantities.display import number_text
from calcgen.quantities.display import utilisation_text as utilisation_text
from calcgen.quantities.symbols import symbol as symbol_of
from calcgen.site import addresses
from calcgen.site.equations import Equation, stated
from calcgen.site.facts import ReferenceFacts
from calcgen.text import Diagnostic
from calcgen.text.terminal import place_lines

_CITATION = re.compile(r"\[([^\s\[\]]+)(?:\s+([^\[\]]*?))?\s*\]")
_BAR_END = 1.2  # where a bar ends, so that there is room beyond the limit
_BAR_LONGEST = 3.6  # a utilisation beyond this is not drawn to scale any more


@dataclass(frozen=True)
class Link:
    """A link from the root of the package."""

    text: str
    href: str


@dataclass(frozen=True)
class RowView:
    """What every row of a sheet has: two columns of words, its address, its line, its mark of change."""

    anchor: str
    note: Markup
    reference: Markup
    line: int
    was: str = ""


@dataclass(frozen=True)
class ValueRow:
    """A value: an input, a derived value, a result of a block. `flag` is a word such as 'unreferenced'."""

    row: RowView
    equation: Equation
    flag: str = ""
    kind: str = "value"


@dataclass(frozen=True)
class CheckRowView:
    """A check with its verdict."""

    row: RowView
    word: str
    equation: Equation
    utilisation: str
    kind: str = "check"


@dataclass(frozen=True)
class TextRow:
    """A line shown as typed, or a remark; `failed` links to the diagnostic of a line that failed."""

    row: RowView
    text: str
    failed: str = ""
    kind: str = "text"


@dataclass(frozen=True)
class RouteRow:
    """A number found again by the second route."""

    what: Markup
    scale: str
    residual: str
    tolerance: str
    holds: bool


@dataclass(frozen=True)
class BarView:
    """A utilisation drawn as a bar, in per cent of its length; `limit` is where 1.0 stands."""

    filled: str
    limit: str
    ticks: tuple[str, ...]
    exceeded: bool
    text: str


@dataclass(frozen=True)
class DiagnosticView:
    """A diagnostic with the lines it points at; `href` leads to the line in the source's page."""

    anchor: str
    severity: str
    message: str
    code: str
    place: str
    href: str
    lines: tuple[str, ...]
    hint: str


def words(column: Column, references: Mapping[str, ReferenceFacts]) -> Markup:
    """Return a column's text; each citation leads to its document in the register."""
    out, at = Markup(""), 0
    cited = {c.key for c in column.citations}
    for match in _CITATION.finditer(column.text):
        if match[1] not in cited or match[1] not in references:
            continue
        out += escape(column.text[at : match.start()])
        facts = references[match[1]]
        label = " ".join(p for p in (facts.number or match[1], match[2] or "") if p)
        href = addresses.link(addresses.REFERENCES, match[1])
        out += Markup('<a href="{}">{}</a>').format(href, label)
        at = match.end()
    return out + escape(column.text[at:])


def lettered(parts: tuple[str, ...]) -> Markup:
    """Return a dotted name as letters with a subscript, which unlike mathematics may break in a table."""
    letters = symbol_of(parts[-1])
    owner = Markup('<span class="owner">{}</span>').format("".join(f"{p}." for p in parts[:-1]))
    base = Markup("<i>{}</i>").format(letters.base) if len(letters.base) == 1 else escape(letters.base)
    below = Markup("<sub>{}</sub>").format(letters.subscript) if letters.subscripts else Markup("")
    return Markup('<span class="symbol">{}{}{}</span>').format(owner if parts[1:] else "", base, below)


def result_row(result: Result, anchor: str, line: int, source: str = "") -> ValueRow:
    """Return a named result: its value, its meaning, where it stands or comes from."""
    row = RowView(anchor, escape(result.meaning), escape(result.place or source), line)
    return ValueRow(row, stated(result.name, result.shown))


def route_row(route: SecondRoute) -> RouteRow:
    """Return a comparison of the two routes."""
    name = re.fullmatch(r"[^\W\d_]+'*(?:_\w+)*", route.what)
    what = lettered((route.what,)) if name else escape(route.what)
    residual = "0" if route.residual == 0 else number_text(route.residual, 2)
    return RouteRow(what, route.scale, residual, number_text(route.tolerance, 2), route.holds)


def bar(check: CheckResult | None) -> BarView | None:
    """Return the bar of a check; None where it has no utilisation."""
    if check is None or check.utilisation is None or check.utilisation < 0:
        return None
    used = min(check.utilisation, _BAR_LONGEST)
    end = max(_BAR_END, 1.1 * used)
    ticks = tuple(_per_cent(tenth / 10 / end) for tenth in range(1, int(end * 10) + 1) if tenth != 10)
    return BarView(
        _per_cent(used / end),
        _per_cent(1 / end),
        ticks if end <= 2 else (),
        not check.satisfied,
        utilisation_text(check.utilisation),
    )


def diagnostic_view(diagnostic: Diagnostic, anchor: str, number: str) -> DiagnosticView:
    """Return a diagnostic; `number` is that of the calc it stands in, empty for a file of the project."""
    d = diagnostic
    lines = place_lines(d.source, d.span, d.label)
    for other in d.related:
        lines += place_lines(d.source, other.span, other.label)
    href = addresses.source_line(number, d.line) if number else ""
    place = f"{d.source.path}:{d.line}:{d.column}"
    return DiagnosticView(anchor, d.severity, d.message, d.code, place, href, tuple(lines), d.hint)


def _per_cent(share: float) -> str:
    return f"{100 * share:.2f}%"

"""The index that the search page reads: a script, since a page opened from disk may not fetch a file."""

from __future__ import annotations

import json
from collections.abc import Callable, Iterator
from dataclasses import dataclass

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import Result
from calcgen.evaluation.results.lines import (
    CheckRow,
    DerivedRow,
    FailedRow,
    InputRow,
    InputsResult,
    ProseResult,
    WorkingResult,
)
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.quantities.symbols import GREEK, plain
from calcgen.site import addresses
from calcgen.site.calc_page import sheet_texts
from calcgen.site.facts import PackageInput
from calcgen.site.figure import FigureSvg
from calcgen.site.prose import ProseRenderer
from calcgen.site.trail_page import trail_view
from calcgen.text import Span

INDEX = "assets/search-index.js"

_SPELLED = {letter: word for word, letter in GREEK.items()}


@dataclass(frozen=True)
class Entry:
    """One thing that can be found: where it is, what kind of thing, its heading and its words."""

    href: str
    kind: str
    heading: str
    words: str


def index_file(package: PackageInput) -> bytes:
    """Return the index as a script."""
    rows = [[e.href, e.kind, e.heading, " ".join(e.words.split())] for e in entries(package)]
    lines = ",\n".join(json.dumps(row, ensure_ascii=False, separators=(",", ":")) for row in rows)
    return f"window.calcgenIndex = [\n{lines}\n];\n".encode()


def entries(package: PackageInput) -> Iterator[Entry]:
    """Yield everything that can be found, page by page."""
    for calc in package.calcs:
        yield from _calc(calc, package)
    for key, r in sorted(package.references.items()):
        words = " ".join([r.title, r.number, r.edition, r.author, r.publisher, r.year, r.note])
        yield Entry(addresses.link(addresses.REFERENCES, key), "reference", key, words)
    for entry in trail_view(package).entries:
        changes = (f"{c.item.text} {c.what} {c.before} {c.after}" for c in entry.changes)
        words = " ".join([entry.when, entry.who, entry.why, *changes])
        yield Entry(addresses.link(addresses.TRAIL, entry.anchor), "trail", entry.heading, words)
    for number, figure in enumerate(package.conventions, start=1):
        yield _figure(figure, addresses.link(addresses.CONVENTIONS, f"conventions-figure-{number}"))
    for number, figure in enumerate(package.map, start=1):
        yield _figure(figure, addresses.link(addresses.MAP, f"map-figure-{number}"))


def spelled(name: str) -> str:
    """Return a name in the ways in which it may be sought: `σ_max`, `sigma_max`, `σ_max` with commas."""
    latin = "".join(_SPELLED.get(c, c) for c in name)
    return " ".join(dict.fromkeys([name, plain(name), latin]))


def _calc(calc: EvaluatedCalc, package: PackageInput) -> Iterator[Entry]:
    page = addresses.calc_page(calc.number)

    def at(anchor: str) -> str:
        return addresses.link(page, anchor)

    def typed(span: Span) -> str:
        return calc.calc.source.slice(span)

    def figures(block: str) -> Iterator[Entry]:
        for number, figure in enumerate(package.figures.get((calc.number, block), ()), start=1):
            yield _figure(figure, at(f"{block}-figure-{number}"))

    sheet = sheet_texts(calc)
    yield Entry(
        at(""), "calc", f"{calc.number} {calc.calc.title}", " ".join([calc.standing, *sheet.values()])
    )
    for anchor, item in addresses.assumptions_of(calc):
        yield Entry(
            at(anchor if calc.segments else ""),
            "assumption",
            item.number,
            f"{item.text.text} {item.basis.text}",
        )
    renderer = ProseRenderer(calc.calc.source.path, {}, frozenset(), frozenset())
    for segment in calc.segments:
        match segment:
            case ProseResult():
                text = renderer.render_prose(segment).striptags()
                line = calc.calc.source.line_number(segment.prose.span)
                yield Entry(at(f"text-{line}"), "text", calc.calc.title, text)
            case InputsResult(rows=inputs):
                for row in inputs:
                    if isinstance(row, InputRow):
                        words = f"{spelled(row.name)} {row.shown.text} {typed(row.node.span)}"
                        yield Entry(at(row.name), "input", plain(row.name), words)
            case WorkingResult(rows=lines):
                yield from (_line(line, at, typed) for line in lines if not isinstance(line, FailedRow))
            case SectionResult():
                typed_lines = " ".join(
                    f"{text} {note.text} {ref.text}" for text, note, ref, _ in segment.lines
                )
                words = f"{segment.designation} {segment.source} {typed_lines}"
                yield Entry(at(segment.name), "section", segment.name, words)
                yield from (_result(r, at(f"{segment.name}.{r.name}"), segment.name) for r in segment.results)
                yield from figures(segment.name)
            case BeamResult():
                words = " ".join(f"{text} {note.text} {ref.text}" for text, note, ref, _ in segment.lines)
                yield Entry(at(segment.name), "beam", segment.name, words)
                for group in segment.groups:
                    owner = ".".join(n for n in (segment.name, group.name) if n)
                    yield from (
                        _result(r, at(addresses.result_anchor(segment.name, group.name, r.name)), owner)
                        for r in group.results
                    )
                for influence in segment.influences:
                    yield from (
                        _result(r, at(addresses.result_anchor(segment.name, "", r.name)), segment.name)
                        for r in influence.results
                    )
                yield from figures(segment.name)
            case StressResult():
                words = " ".join(f"{p.premise} {p.detail}" for p in segment.premises)
                yield Entry(at(segment.name), "stress", segment.name, words)
                yield from (_result(r, at(f"{segment.name}.{r.name}"), segment.name) for r in segment.results)
                if segment.check is not None:
                    words = f"{segment.check.note.text} {segment.check.reference.text}"
                    yield Entry(at(segment.check.address), "check", segment.check.label, words)
                yield from figures(segment.name)
            case TableResult():
                heads = " ".join(head.shown.text for head in (*segment.columns, *segment.rows))
                words = f"{spelled(segment.name)} {segment.reference.text} {heads}"
                yield Entry(at(segment.name), "table", plain(segment.name), words)
            case VaryResult():
                tried = segment.pattern or " ".join(run.shown.text for run in segment.runs)
                words = f"{spelled(segment.input)} {' '.join(segment.heads)} {tried}"
                yield Entry(at(segment.name), "vary", f"vary {plain(segment.input)}", words)
                yield from figures(segment.name)
            case _:
                pass
    for number, d in enumerate(sorted(calc.diagnostics, key=lambda d: d.severity != "error"), start=1):
        yield Entry(at(f"diagnostic-{number}"), d.severity, d.message, f"{d.code} {d.hint}")


def _line(line: DerivedRow | CheckRow, at: Callable[[str], str], typed: Callable[[Span], str]) -> Entry:
    if isinstance(line, DerivedRow):
        words = f"{spelled(line.name)} {line.shown.text} {typed(line.node.span)}"
        return Entry(at(line.name), "value", plain(line.name), words)
    result = line.result
    word = "satisfied" if result.satisfied else "exceeded"
    return Entry(at(result.address), "check", result.label, f"{word} {typed(line.node.span)}")


def _result(result: Result, href: str, owner: str) -> Entry:
    heading = f"{owner}.{plain(result.name)}"
    return Entry(href, "result", heading, f"{spelled(result.name)} {result.shown.text} {result.meaning}")


def _figure(figure: FigureSvg, href: str) -> Entry:
    return Entry(href, "figure", figure.title, f"{figure.description} {figure.labels}")

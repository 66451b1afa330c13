"""Where a calc cites its references, with the anchor of the line that does."""

from __future__ import annotations

from collections.abc import Iterator

from calcgen.evaluation.citations import citations_of
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, InputRow, InputsResult, WorkingResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.nodes import Citation
from calcgen.site.addresses import assumptions_of


def cited_lines(calc: EvaluatedCalc) -> Iterator[tuple[Citation, str, int]]:
    """Yield each citation, the anchor of its line on the calc's page ('' where it has none), and the line."""
    anchors = dict(_anchors(calc))
    for citation in citations_of(calc.calc):
        line = calc.calc.source.line_number(citation.span)
        owner = max((start for start in anchors if start <= citation.span.start), default=None)
        inside = owner is not None and citation.span.start < anchors[owner][1]
        yield citation, anchors[owner][0] if owner is not None and inside else "", line


def _anchors(calc: EvaluatedCalc) -> Iterator[tuple[int, tuple[str, int]]]:
    """Yield (start, (anchor, end)) of each line that has an anchor."""
    for segment in calc.segments:
        match segment:
            case InputsResult(rows=inputs):
                for row in inputs:
                    if isinstance(row, InputRow):
                        yield row.node.span.start, (row.name, row.node.span.end)
            case WorkingResult(rows=lines):
                for line in lines:
                    if isinstance(line, DerivedRow):
                        yield line.node.span.start, (line.name, line.node.span.end)
                    elif isinstance(line, CheckRow):
                        yield line.node.span.start, (line.result.address, line.node.span.end)
            case TableResult() | VaryResult():
                yield segment.span.start, (segment.name, segment.span.end)
            case _:
                pass
    if calc.segments:
        for anchor, item in assumptions_of(calc):
            yield item.span.start, (anchor, item.span.end)

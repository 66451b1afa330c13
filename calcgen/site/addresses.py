"""Where things are in the package: paths of pages, anchors on them, links to them."""

from __future__ import annotations

from collections.abc import Iterator
from functools import lru_cache
from urllib.parse import quote

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc, Segment
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, InputRow, InputsResult, WorkingResult
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.blocks.assumptions import Assumption, AssumptionsBlock
from calcgen.language.blocks.beam import BeamBlock
from calcgen.language.blocks.section import SectionBlock
from calcgen.language.blocks.stress import StressBlock
from calcgen.language.blocks.table import TableBlock

COVER = "index.html"
INPUTS = "inputs.html"
ASSUMPTIONS = "assumptions.html"
CHECKS = "checks.html"
REFERENCES = "references.html"
MAP = "map.html"
TRAIL = "trail.html"
CONVENTIONS = "conventions.html"
CAUTIONS = "cautions.html"
SEARCH = "search.html"

_TAKEN = frozenset(
    p.removesuffix(".html")
    for p in (COVER, INPUTS, ASSUMPTIONS, CHECKS, REFERENCES, MAP, TRAIL, CONVENTIONS, CAUTIONS, SEARCH)
)


def calc_page(number: str) -> str:
    """Return the path of a calc's page; '_', which no number has, keeps it apart from pages of ours."""
    return f"{number}_.html" if number.casefold() in _TAKEN else f"{number}.html"


def source_page(number: str) -> str:
    """Return the path of the page that shows a calc's source."""
    return f"source/{calc_page(number)}"


def link(path: str, anchor: str = "") -> str:
    """Return the address of a page, and of a place on it, as a link from the root of the package."""
    return quote(path) + (f"#{quote(anchor)}" if anchor else "")


def calc_link(number: str) -> str:
    """Return the link to a calc's page."""
    return link(calc_page(number))


def feeds_anchor(giver: str, taker: str) -> str:
    """Return the anchor, on the map's page, of what one calc takes from another."""
    return f"{giver}.{taker}"  # no number of a calc has a dot


def feeds_link(giver: str, taker: str) -> str:
    """Return the link to what one calc takes from another."""
    return link(MAP, feeds_anchor(giver, taker))


def source_line(number: str, line: int) -> str:
    """Return the link to a line of a calc's source."""
    return link(source_page(number), f"L{line}")


def assumptions_of(calc: EvaluatedCalc) -> tuple[tuple[str, Assumption], ...]:
    """Return the assumptions of a calc, each with its anchor: its number, where no value has that name."""
    blocks = SectionBlock | BeamBlock | StressBlock | TableBlock
    names = set(calc.values) | {s.target.name for s in calc.calc.segments if isinstance(s, blocks)}
    found: list[tuple[str, Assumption]] = []
    for block in calc.calc.segments:
        if isinstance(block, AssumptionsBlock):
            for item in block.items:
                stem = "-".join(item.number.split())
                anchor, count = (f"assumption-{stem}" if stem in names else stem), 1
                while any(anchor == taken for taken, _ in found):
                    count += 1
                    anchor = f"{stem}-{count}"
                found.append((anchor, item))
    return tuple(found)


@lru_cache(maxsize=256)  # asked for each change of the trail
def anchors_of(calc: EvaluatedCalc) -> frozenset[str]:
    """Return the anchors of values, checks, blocks and their results on a calc's page."""
    return frozenset(anchor for segment in calc.segments for anchor in _anchors(segment))


def nearest_anchor(name: str, anchors: frozenset[str]) -> str:
    """Return the anchor of a dotted name, or of what owns it: `b.M(2 m)` is at `b`; '' if neither is."""
    parts = name.partition("(")[0].split(".")
    owners = (".".join(parts[:count]) for count in range(len(parts), 0, -1))
    return next((owner for owner in owners if owner in anchors), "")


def _anchors(segment: Segment) -> Iterator[str]:
    match segment:
        case InputsResult(rows=inputs):
            yield from (row.name for row in inputs if isinstance(row, InputRow))
        case WorkingResult(rows=lines):
            yield from (row.name for row in lines if isinstance(row, DerivedRow))
            yield from (row.result.address for row in lines if isinstance(row, CheckRow))
        case SectionResult():
            yield segment.name
            yield from (f"{segment.name}.{r.name}" for r in segment.results)
            for owner in segment.owners:
                yield from (f"{segment.name}.{owner.name}.{r.name}" for r in owner.results)
        case StressResult():
            yield segment.name
            yield from (f"{segment.name}.{r.name}" for r in segment.results)
            yield from (c.address for c in [segment.check] if c is not None)
        case TableResult() | VaryResult():
            yield segment.name
        case BeamResult():
            yield segment.name
            for group in segment.groups:
                yield from (result_anchor(segment.name, group.name, r.name) for r in group.results)
            for line in segment.influences:
                yield from (result_anchor(segment.name, "", r.name) for r in line.results)
        case _:
            pass


def result_anchor(beam: str, group: str, name: str) -> str:
    """Return the anchor of a result of a beam; '' is the group of a beam without combinations."""
    return ".".join(part for part in (beam, group, name) if part)

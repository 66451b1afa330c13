"""Where things are in the package: paths of pages, anchors on them, links to them."""

from __future__ import annotations

from urllib.parse import quote

from calcgen.evaluation.results import EvaluatedCalc
from calcgen.language.blocks.assumptions import Assumption, AssumptionsBlock
from calcgen.language.blocks.beam import BeamBlock
from calcgen.language.blocks.section import SectionBlock
from calcgen.language.blocks.stress import StressBlock

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


def source_line(number: str, line: int) -> str:
    """Return the link to a line of a calc's source."""
    return link(source_page(number), f"L{line}")


def assumptions_of(calc: EvaluatedCalc) -> tuple[tuple[str, Assumption], ...]:
    """Return the assumptions of a calc, each with its anchor: its number, where no value has that name."""
    names = set(calc.values) | {
        s.target.name for s in calc.calc.segments if isinstance(s, SectionBlock | BeamBlock | StressBlock)
    }
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

"""The results of a block by their dotted names, those of its parts, bars, points and groups too."""

from __future__ import annotations

from collections.abc import Iterator

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.common import Result
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult


def named_results(block: SectionResult | BeamResult | StressResult) -> Iterator[tuple[str, Result]]:
    """Yield what a block's table shows: `W_el_y`, `plate.W_el_y`, `ULS.M_max`, `weld.σ`."""
    match block:
        case SectionResult():
            yield from ((r.name, r) for r in block.results)
            yield from ((f"{owner.name}.{r.name}", r) for owner in block.owners for r in owner.results)
        case BeamResult():
            for group in block.groups:
                prefix = f"{group.name}." if group.name else ""
                yield from ((prefix + r.name, r) for r in group.results)
            for line in block.influences:
                yield from ((r.name, r) for r in (*line.results, *line.further))
                yield from ((o.result.name, o.result) for o in line.ordinates)
        case StressResult():
            yield from ((r.name, r) for r in block.results)
            yield from ((f"{part}.{r.name}", r) for part, rows in block.parts.items() for r in rows)

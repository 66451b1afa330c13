"""Each number that the second route does not find again: an error of the calc, or of a run of it."""

from __future__ import annotations

from collections.abc import Sequence

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import Segment
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.text import Report


def report_residuals(segments: Sequence[Segment], report: Report) -> None:
    """Report each number that the second route does not find again: an error of the calc."""
    for segment in segments:
        if isinstance(segment, SectionResult | BeamResult | StressResult):
            for row in segment.second_route:
                if not row.holds:
                    report.error(
                        "residual",
                        segment.span,
                        f"the second route does not find {row.what} of '{row.of}' again: "
                        f"residual {row.residual:.2e}, tolerance {row.tolerance:.0e} of {row.scale}",
                        hint="do not use these results; the outline, the data or the program is at fault",
                    )

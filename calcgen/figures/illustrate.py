"""Evaluated blocks -> drawings in the units shown, and their SVG in both widths."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results import BeamResult, EvaluatedCalc, SectionResult, StressResult
from calcgen.figures.adapt_beam import beam_drawings
from calcgen.figures.adapt_section import section_drawing, stress_drawings
from calcgen.figures.picture import Width
from calcgen.quantities.display import Style

Draw = Callable[[Width], str]


@dataclass(frozen=True)
class DrawnFigure:
    """A figure with its text for those who cannot see it, and its SVG for both places."""

    title: str
    description: str
    wide: str
    narrow: str

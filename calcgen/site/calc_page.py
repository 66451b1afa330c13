"""The page of one calc: title block, standing, diagnostics, and its segments in order."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TypeAlias

from markupsafe import Markup

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc, Segment
from calcgen.evaluation.results.lines import (
    AssumptionsResult,
    InputsResult,
    ProseResult,
    SheetResult,
    WorkingResult,
)
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.calc import FailedBlock
from calcgen.site import addresses
from calcgen.site.blocks.assumptions import AssumptionsView, assumptions_view
from calcgen.site.blocks.beam import BeamView, beam_view
from calcgen.site.blocks.failed import FailedView, failed_view
from calcgen.site.blocks.inputs import InputsView, inputs_view
from calcgen.site.blocks.prose import ProseView, prose_view
from calcgen.site.blocks.section import SectionView, section_view
from calcgen.site.blocks.stress import StressView, stress_view
from calcgen.site.blocks.table import TableView, table_view
from calcgen.site.blocks.vary import VaryView, vary_view
from calcgen.site.blocks.working import WorkingView, working_view
from calcgen.site.context import Context
from calcgen.site.facts import PackageInput
from calcgen.site.feeds import reason
from calcgen.site.map_page import Neighbours, neighbours
from calcgen.site.prose import ProseRenderer
from calcgen.site.standing import StandingView, standing_view
from calcgen.site.views import DiagnosticView, Link, diagnostic_view

SegmentView: TypeAlias = (
    ProseView
    | AssumptionsView
    | InputsView
    | WorkingView
    | SectionView
    | BeamView
    | StressView
    | TableView
    | VaryView
    | FailedView
)


@dataclass(frozen=True)
class CalcView:
    """A calc's page.

    Attributes
    ----------
    facts : (label, text) of the title block.
    statements : (label, text) of purpose, scope and conclusion.
    position : of the calc among all, '3 of 7'.
    reason : why it is not evaluated; empty otherwise.
    neighbours : the calcs that feed it, and those that it feeds.
    """

    number: str
    title: str
    facts: tuple[tuple[str, str], ...]
    position: str
    standing: StandingView
    reason: Markup
    neighbours: tuple[Neighbours, ...]
    statements: tuple[tuple[str, str], ...]
    diagnostics: tuple[DiagnosticView, ...]
    segments: tuple[SegmentView, ...]
    source: Link
    before: Link | None
    after: Link | None


def calc_view(calc: EvaluatedCalc, package: PackageInput, images: dict[str, str]) -> CalcView:
    """Return the page of a calc; `images` gives the path in the package by the path in the project."""
    place = package.positions[calc.number]
    anchors = addresses.anchors_of(calc)
    prose = ProseRenderer(calc.calc.source.path, images, package.numbers, anchors)
    context = Context(calc, package, anchors, prose)
    sheet = sheet_texts(calc)
    views = (_segment(segment, context) for segment in calc.segments)
    return CalcView(
        number=calc.number,
        title=calc.calc.title,
        facts=_facts(sheet, package),
        position=f"{place + 1} of {len(package.calcs)}",
        standing=standing_view(calc),
        reason=reason(calc),
        neighbours=neighbours(calc, package),
        statements=tuple((k, sheet[k]) for k in ("purpose", "scope", "conclusion") if sheet.get(k)),
        diagnostics=diagnostics_of(calc),
        segments=tuple(view for view in views if view is not None),
        source=Link(calc.calc.source.path, addresses.link(addresses.source_page(calc.number))),
        before=_neighbour(package, place - 1),
        after=_neighbour(package, place + 1),
    )


def sheet_texts(calc: EvaluatedCalc) -> dict[str, str]:
    """Return the texts of a calc's sheet by key; as typed where the calc is not evaluated."""
    for segment in calc.segments:
        if isinstance(segment, SheetResult):
            return dict(segment.texts)
    for block in calc.calc.segments:
        if isinstance(block, SheetBlock):
            return {e.key: e.text for e in block.entries if not e.places}
    return {}


def diagnostics_of(calc: EvaluatedCalc) -> tuple[DiagnosticView, ...]:
    """Return the diagnostics of a calc, errors first; the n-th error has the anchor `diagnostic-n`."""
    ordered = sorted(calc.diagnostics, key=lambda d: d.severity != "error")
    return tuple(
        diagnostic_view(d, f"diagnostic-{number}", calc.number) for number, d in enumerate(ordered, start=1)
    )


def _facts(sheet: dict[str, str], package: PackageInput) -> tuple[tuple[str, str], ...]:
    project = package.project
    named = f"{project.number} {project.title}".strip()
    people = {key: sheet.get(key) or getattr(project, key) or "—" for key in ("originator", "checker")}
    return (
        ("project", named),
        ("axes", f"{project.axes}, depth {project.depth}"),
        ("originator", people["originator"]),
        ("checker", people["checker"]),
        ("revision", sheet.get("revision") or "—"),
        ("date", sheet.get("date") or "—"),
        *((("status", sheet["status"]),) if sheet.get("status") else ()),
    )


def _neighbour(package: PackageInput, place: int) -> Link | None:
    if not 0 <= place < len(package.calcs):
        return None
    calc = package.calcs[place]
    return Link(f"{calc.number} {calc.calc.title}", addresses.link(addresses.calc_page(calc.number)))


def _segment(segment: Segment, context: Context) -> SegmentView | None:
    match segment:
        case ProseResult():
            return prose_view(segment, context)
        case SheetResult():
            return None  # it stands in the title block
        case AssumptionsResult():
            return assumptions_view(segment, context)
        case InputsResult():
            return inputs_view(segment, context)
        case WorkingResult():
            return working_view(segment, context)
        case SectionResult():
            return section_view(segment, context)
        case BeamResult():
            return beam_view(segment, context)
        case StressResult():
            return stress_view(segment, context)
        case TableResult():
            return table_view(segment, context)
        case VaryResult():
            return vary_view(segment, context)
        case FailedBlock():
            return failed_view(segment, context)

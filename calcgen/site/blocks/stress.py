"""`stress`: figure, forces, results, the check against its limit, premises, the second route."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results import Premise, StressResult
from calcgen.site.blocks.working import check_view
from calcgen.site.context import Context
from calcgen.site.equations import Equation, limit, stated
from calcgen.site.figure import FigureSvg
from calcgen.site.views import (
    CheckRowView,
    RouteRow,
    RowView,
    ValueRow,
    result_row,
    route_row,
)


@dataclass(frozen=True)
class StressView:
    """The normal stress of a section."""

    name: str
    section: str
    row: RowView
    forces: tuple[Equation, ...]
    figures: tuple[FigureSvg, ...]
    results: tuple[ValueRow, ...]
    check: CheckRowView | None
    premises: tuple[Premise, ...]
    second_route: tuple[RouteRow, ...]
    template: str = "blocks/stress.html"


def stress_view(result: StressResult, context: Context) -> StressView:
    """Return a stress."""
    check = result.check
    return StressView(
        name=result.name,
        section=result.section.name,
        row=RowView(result.name, Markup(""), Markup(""), result.line, context.was(result.name)),
        forces=tuple(stated(name, shown) for name, shown in result.forces_shown.items()),
        figures=context.figures(result.name),
        results=tuple(result_row(r, f"{result.name}.{r.name}", result.line) for r in result.results),
        check=None if check is None else check_view(check, limit(check), context),
        premises=result.premises,
        second_route=tuple(route_row(r) for r in result.second_route),
    )

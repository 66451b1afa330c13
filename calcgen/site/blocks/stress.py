"""`stress`: figures, forces, results, the check against its limit, premises, the second route."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from markupsafe import Markup

from calcgen.evaluation.results.common import Premise
from calcgen.evaluation.results.stress import StressResult
from calcgen.quantities.symbols import plain
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

MODELS: Mapping[str, str] = {
    "elastic": "elastic normal stress",
    "plastic": "fully plastic stress",
    "elastic_plastic": "elastic–plastic stress",
    "no_tension": "stress without tension",
    "cracked": "stress of the cracked section",
    "curved": "stress of the curved bar",
}
"""What is shown, by the model's word."""

SIGNS: Mapping[str, str] = {
    "N": "N acts at the centroid, positive in tension.",
    "M": "M sags when positive: tension at the bottom.",
    "M_lat": "M_lat puts tension on the right when positive.",
    "V": "V is positive where the left part is pushed up; it acts through the shear centre.",
    "V_lat": "V_lat acts through the shear centre, with dM_lat/dz = V_lat.",
    "T": "T is clockwise when positive, seen along the beam from its start.",
}
"""The sign of each force, in words."""


@dataclass(frozen=True)
class StressView:
    """The stress of a section; `title` says by which model, `signs` those of the forces given."""

    name: str
    title: str
    section: str
    row: RowView
    forces: tuple[Equation, ...]
    signs: tuple[str, ...]
    figures: tuple[FigureSvg, ...]
    results: tuple[ValueRow, ...]
    parts: tuple[ValueRow, ...]
    check: CheckRowView | None
    premises: tuple[Premise, ...]
    second_route: tuple[RouteRow, ...]
    template: str = "blocks/stress.html"


def stress_view(result: StressResult, context: Context) -> StressView:
    """Return a stress."""
    check = result.check
    title = MODELS[result.model]
    if result.shear is not None:
        normal = bool(result.forces.N or result.forces.M or result.forces.M_lat)
        title = f"{title} and shear stress" if normal else "elastic shear stress"
    return StressView(
        name=result.name,
        title=title,
        section=result.section.name,
        row=RowView(result.name, Markup(""), Markup(""), result.line, context.was(result.name)),
        forces=tuple(stated(name, shown) for name, shown in result.forces_shown.items()),
        signs=tuple(SIGNS[name] for name in result.forces_shown),
        figures=context.figures(result.name),
        results=tuple(result_row(r, f"{result.name}.{r.name}", result.line) for r in result.results),
        parts=tuple(
            result_row(
                replace(r, meaning=f"{plain(part)}: {r.meaning}"),
                f"{result.name}.{part}.{r.name}",
                result.line,
            )
            for part, rows in result.parts.items()
            for r in rows
        ),
        check=None if check is None else check_view(check, limit(check), context),
        premises=result.premises,
        second_route=tuple(route_row(r) for r in result.second_route),
    )

"""The loads of a beam block, by case."""

from __future__ import annotations

import math

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.blocks.beam_stiffness import Property
from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.results.beam import LoadRow
from calcgen.language.blocks.beam import (
    BeamSetting,
    CaseLine,
    LoadLine,
    TrainLine,
)
from calcgen.mechanics.beam import (
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    Plane,
    PointLoad,
    PointMoment,
)
from calcgen.quantities.display import show
from calcgen.quantities.measure import Measure, from_si


def loads_of(
    lines: Lines, properties: list[Property], expansion: Measure | None
) -> tuple[dict[str, list[Load]], list[LoadRow]]:
    """Return the loads by case, and each as shown; `expansion` is for gradients of temperature."""
    cases: dict[str, list[Load]] = {line.target.name: [] for line in lines.of(CaseLine)}
    rows: list[LoadRow] = []
    for line in lines.of(LoadLine):
        lines.keep_free_of_results(line.case)
        loads, row = _load(lines, line, properties, expansion)
        cases.setdefault(line.case.name, []).extend(loads)
        rows.append(row)
    for train in lines.of(TrainLine):
        cases.setdefault(train.case.name, [])
    return cases, rows


def _load(
    lines: Lines, line: LoadLine, properties: list[Property], expansion: Measure | None
) -> tuple[list[Load], LoadRow]:
    plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
    start = lines.place(line.start) if line.start is not None else 0.0
    end = lines.place(line.end) if line.end is not None else lines.length
    if line.at is not None:
        start = end = lines.place(line.at)
    elif end - start <= 1e-9 * lines.length and not lines.failed:
        lines.fault("no-length", line.statement_span, "the load has no length: 'from' must be before 'to'")
    distributed = line.at is None
    kind = {
        "uniform": "line load",
        "linear": "line load",
        "point": "force",
        "moment": "force" if distributed else "moment",
        "self_weight": "weight by volume",
        "gradient": "temperature",
    }[line.kind]
    measures = [quantity_of(node, kind, lines.scope) for node in line.values]
    if any(m is None for m in measures):
        lines.failed = True
    values = tuple(m.si if m is not None else math.nan for m in measures)
    loads: list[Load] = []
    if line.kind == "gradient":
        loads = _gradient(lines, line, measures[0], start, end, properties, expansion)
    elif not lines.failed:
        loads = _of_kind(lines, line, plane, values, start, end, properties)
    shown = " to ".join(show(m, lines.scope.style).text for m in measures if m is not None)
    label = shown
    if line.kind == "self_weight":
        values = tuple(load.value_start for load in loads if isinstance(load, DistributedLoad))
        weights = dict.fromkeys(
            show(from_si(v, "N/m").shown_in(None), lines.scope.style).text for v in values
        )
        shown, label = f"{shown} ({', '.join(weights)})", f"{', '.join(weights)} self-weight"
    elif line.kind == "gradient":
        shown = f"{shown}, top warmer than bottom,"
        label = f"{label} warmer at the top"
    whole = distributed and line.start is None
    unit = lines.unit_of(line.at or line.start)
    where = (
        "over the whole beam"
        if whole
        else f"from {lines.text(start, unit)} to {lines.text(end, unit)}"
        if distributed
        else f"at {lines.text(start, unit)}"
    )
    return loads, LoadRow(
        line.case.name,
        line.kind,
        plane,
        f"{shown} {where}",
        label,
        values,
        start,
        end,
        line.annotations.note,
        line.annotations.reference,
        lines.report.source.line_number(line.span),
    )


def _of_kind(
    lines: Lines,
    line: LoadLine,
    plane: Plane,
    values: tuple[float, ...],
    start: float,
    end: float,
    properties: list[Property],
) -> list[Load]:
    match line.kind:
        case "point":
            return [PointLoad(start, values[0], plane)]
        case "moment" if line.at is not None:
            return [PointMoment(start, values[0], plane)]
        case "moment":
            return [DistributedMoment.uniform(start, end, values[0], plane)]
        case "self_weight":
            return _self_weight(lines, line, values[0], start, end, plane, properties)
        case _:
            return [DistributedLoad(start, end, values[0], values[-1], plane)]


def _self_weight(
    lines: Lines,
    line: LoadLine,
    weight: float,
    start: float,
    end: float,
    plane: Plane,
    properties: list[Property],
) -> list[Load]:
    loads: list[Load] = []
    for p in properties:
        a, b = max(start, p.start), min(end, p.end)
        if b - a <= 1e-9 * lines.length:
            continue
        if p.section is None:
            lines.fault(
                "section-missing",
                line.span,
                "self-weight needs the section's area, and this beam has EI alone",
                hint="write the weight as a uniform load",
            )
            return []
        loads.append(DistributedLoad.uniform(a, b, weight * p.section.result.area, plane))
    return loads


def _gradient(
    lines: Lines,
    line: LoadLine,
    difference: Measure | None,
    start: float,
    end: float,
    properties: list[Property],
    expansion: Measure | None,
) -> list[Load]:
    """Return the free curvature of each stretch; report what it lacks."""
    if difference is not None and difference.unit == "°C":
        lines.fault(
            "wrong-dimension",
            line.values[0].span,
            "a difference of temperature is needed here, this is a temperature",
            hint="write the difference in K",
        )
    if not any(setting.key.name == "expansion" for setting in lines.of(BeamSetting)):
        lines.fault(
            "setting-missing",
            line.span,
            "a gradient of temperature needs the coefficient of thermal expansion",
            hint="add a line such as expansion = 12e-6 1/K",
        )
    over = [p for p in properties if min(end, p.end) - max(start, p.start) > 1e-9 * lines.length]
    if any(p.section is None for p in over):
        lines.fault(
            "section-missing",
            line.span,
            "a gradient of temperature needs the section's depth, and this beam has EI alone",
            hint="give section and E instead of EI",
        )
    if lines.failed or difference is None or expansion is None:
        return []
    return [
        FreeCurvature.of_gradient(
            max(start, p.start),
            min(end, p.end),
            expansion.si,
            difference.si,
            p.section.result.bounds.height,
        )
        for p in over
        if p.section is not None
    ]

"""The trains and patterns of a beam block."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.results.beam import LoadRow
from calcgen.language.blocks.beam import PatternLine, TrainLine
from calcgen.language.nodes import Expression
from calcgen.mechanics.beam import BeamModel, Load, Settlement
from calcgen.mechanics.trains import Train
from calcgen.quantities.display import show
from calcgen.text import nearest


def trains_of(
    lines: Lines, kinds: Mapping[str, str]
) -> tuple[dict[str, tuple[Train, ...]], tuple[LoadRow, ...]]:
    """Return the trains by case, and each as shown; `kinds` are those of the cases."""
    found: dict[str, tuple[Train, ...]] = {}
    rows: list[LoadRow] = []
    for line in lines.of(TrainLine):
        case = line.case.name
        lines.keep_free_of_results(line.case)
        if kinds.get(case) == "permanent":
            lines.fault(
                "beam",
                line.case.span,
                f"the case '{case}' is permanent, and a train moves",
                hint="give the train a case of its own",
            )
        axles = _values(lines, line.axles, "force")
        spacings = _values(lines, line.spacings, "length")
        for node, axle in zip(line.axles, axles, strict=True):
            if axle <= 0.0:
                lines.fault("not-positive", node.span, "an axle load acts downwards: it must be positive")
        for node, spacing in zip(line.spacings, spacings, strict=True):
            if spacing <= 0.0:
                lines.fault("not-positive", node.span, "the distance between two axles must be positive")
        lateral = lines.number(line.lateral, "number") if line.lateral is not None else 0.0
        if lines.failed:
            continue
        number = len(found.get(case, ()))
        found[case] = (*found.get(case, ()), Train(axles, spacings, lateral))
        rows.append(_row(lines, line, axles, lateral, number))
    return found, tuple(rows)


def require_lateral(lines: Lines, model: BeamModel) -> None:
    """Report trains that push sideways on a beam whose lateral stiffness is not known."""
    for line in lines.of(TrainLine):
        if line.lateral is not None and "lateral" not in model.planes:
            lines.fault(
                "beam",
                line.lateral.span,
                "what acts sideways needs the bending stiffness about the vertical axis",
                hint="give section and E instead of EI",
            )


def _values(lines: Lines, nodes: Sequence[Expression], kind: str) -> tuple[float, ...]:
    return tuple(lines.number(node, kind) for node in nodes)


def _row(lines: Lines, line: TrainLine, axles: tuple[float, ...], lateral: float, number: int) -> LoadRow:
    style = lines.scope.style
    measures = [quantity_of(node, "force", lines.scope) for node in line.axles]
    label = ", ".join(show(m, style).text for m in measures if m is not None)
    text = label
    if line.spacings:
        places = [lines.text(lines.number(node, "length"), lines.unit_of(node)) for node in line.spacings]
        text += f" spaced {', '.join(places)}"
    if lateral != 0.0:
        text += f", {lateral:.12g} of each sideways"
    return LoadRow(
        line.case.name,
        "train",
        "vertical",
        f"{text}, in both directions",
        label,
        axles,
        0.0,
        lines.length,
        line.annotations.note,
        line.annotations.reference,
        lines.report.source.line_number(line.span),
        number,
    )


def patterned_of(
    lines: Lines, kinds: Mapping[str, str], cases: Mapping[str, Sequence[Load]]
) -> frozenset[str]:
    """Return the cases that act on adverse spans alone."""
    found: set[str] = set()
    for line in lines.of(PatternLine):
        case, span = line.case.name, line.case.span
        if case not in cases:
            close = nearest(case, cases)
            lines.fault(
                "unknown-case",
                span,
                f"there is no load case '{case}'",
                hint=f"the nearest is '{close}'" if close else f"cases are {', '.join(cases)}",
            )
        elif kinds.get(case) == "permanent":
            lines.fault(
                "beam",
                span,
                f"the case '{case}' is permanent: it has one factor over the whole beam",
                hint="only loads that may be absent are put on adverse spans alone",
            )
        elif any(isinstance(load, Settlement) for load in cases[case]):
            lines.fault(
                "beam",
                span,
                f"a support settles in the case '{case}', and that belongs to no span",
                hint="give the settlement a case of its own",
            )
        elif not cases[case] and not lines.failed:
            lines.fault(
                "beam",
                span,
                f"the case '{case}' has no load that lies on a span",
                hint="a train moves without a pattern",
            )
        found.add(case)
    return frozenset(found)

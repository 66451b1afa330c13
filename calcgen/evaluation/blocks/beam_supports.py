"""The supports and hinges of a beam block."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.language.blocks.beam import (
    HingeLine,
    SupportLine,
)
from calcgen.language.nodes import Expression
from calcgen.mechanics.beam import (
    FREE,
    RIGID,
    Plane,
    Settlement,
    Support,
)
from calcgen.quantities.symbols import plain
from calcgen.text import Related


@dataclass(frozen=True)
class Supports:
    """The supports from left to right, the word of each, and the settlements with their cases.

    `notes` say of each how it settles, vertically and sideways: 'settles 8 mm in S'; '' where it does not.
    """

    all: tuple[Support, ...]
    kinds: tuple[str, ...]
    notes: tuple[tuple[str, str], ...]
    settling: tuple[tuple[str, Settlement], ...]


def supports_of(lines: Lines, spans: tuple[float, ...]) -> Supports:
    """Return the supports as written; with none written, a simple one at each end of each span."""
    typed = lines.of(SupportLine)
    if not typed:
        ends = [math.fsum(spans[:i]) for i in range(len(spans) + 1)]
        kinds = ("pin", *["roller"] * len(spans))
        return Supports(tuple(Support(x) for x in ends), kinds, (("", ""),) * len(ends), ())
    placed: list[tuple[float, SupportLine]] = sorted(
        ((lines.place(line.at), line) for line in typed), key=lambda item: item[0]
    )
    groups: list[list[tuple[float, SupportLine]]] = []
    for x, line in placed:
        if groups and x - groups[-1][0][0] <= 1e-9 * lines.length:
            groups[-1].append((x, line))
        else:
            groups.append([(x, line)])
    found: list[tuple[Support, str, tuple[str, str]]] = []
    settling: list[tuple[str, Settlement]] = []
    for index, group in enumerate(groups):
        main, *others = sorted(group, key=lambda item: item[1].plane == "lateral")
        support = _support(lines, *main)
        for x, line in others:
            if line.plane != "lateral" or main[1].plane == "lateral" or len(others) > 1:
                lines.fault(
                    "two-supports",
                    line.span,
                    f"there is a support at {lines.text(x)} already",
                    related=(Related(main[1].span, "here"),),
                )
            sideways = _support(lines, x, line)  # takes the place of the other one in the lateral plane
            support = replace(support, lateral=sideways.lateral, lateral_rotation=sideways.lateral_rotation)
        notes = {line.plane == "lateral": _settles(lines, line, index, settling) for _, line in group}
        found.append((support, main[1].kind, (notes.get(False, ""), notes.get(True, ""))))
    return Supports(
        tuple(support for support, _, _ in found),
        tuple(kind for _, kind, _ in found),
        tuple(note for _, _, note in found),
        tuple(settling),
    )


def _settles(lines: Lines, line: SupportLine, index: int, settling: list[tuple[str, Settlement]]) -> str:
    """Add the settlement of a support to those found, and return it in words."""
    if line.settles is None:
        return ""
    value = lines.number(line.settles, "length")
    case = line.settles_case.name if line.settles_case is not None else ""
    plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
    settling.append((case, Settlement(index, value, plane)))
    text = lines.text(value, lines.unit_of(line.settles))
    return f"settles {text}{f' in {plain(case)}' if case else ''}"


def _support(lines: Lines, x: float, line: SupportLine) -> Support:
    force = _spring(lines, line.stiffness, "line load") if line.kind == "spring" else RIGID
    rotation = RIGID if line.kind == "fixed" else _spring(lines, line.rotation, "moment")
    if line.plane == "lateral":
        return Support(x, FREE, FREE, force, rotation)
    return Support(x, force, rotation, force, rotation)


_STIFFNESSES = {
    "line load": "a spring stiffness is force by length, such as 12 kN/mm",
    "moment": "the stiffness of a spring against rotation is a moment by radian, such as 5000 kN·m",
}


def _spring(lines: Lines, node: Expression | None, kind: str) -> float:
    if node is None:
        return FREE
    value = lines.number(node, kind, _STIFFNESSES[kind])
    if math.isnan(value):  # reported already
        return FREE
    if value < 0:
        lines.fault("not-positive", node.span, "the stiffness of a spring must not be negative")
        return FREE
    if value > FREE:
        lines.is_positive(value, node, "the stiffness of a spring that is not 0")
    return value


def hinges_of(lines: Lines, supports: tuple[Support, ...]) -> tuple[float, ...]:
    """Return the places of the hinges, m."""
    found: list[float] = []
    least = 1e-9 * lines.length
    for line in lines.of(HingeLine):
        x = lines.place(line.at)
        if x <= least or x >= lines.length - least:
            lines.fault(
                "hinge-at-end",
                line.span,
                "a hinge at the end of a beam releases nothing",
                hint="remove it",
            )
        elif any(abs(x - other) <= least for other in found):
            lines.fault("written-twice", line.span, f"there is a hinge at {lines.text(x)} already")
        elif any(abs(x - s.x) <= least and (s.rotation or s.lateral_rotation) for s in supports):
            lines.fault(
                "hinge-at-fixed", line.span, "a hinge cannot stand at a support that holds the rotation"
            )
        else:
            found.append(x)
    return tuple(sorted(found))

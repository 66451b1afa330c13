"""The supports and hinges of a beam block."""

from __future__ import annotations

import math
from dataclasses import dataclass
from itertools import pairwise

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

    `notes` say of each how it settles: 'settles 8 mm in S'; '' where it does not.
    """

    all: tuple[Support, ...]
    kinds: tuple[str, ...]
    notes: tuple[str, ...]
    settling: tuple[tuple[str, Settlement], ...]


def supports_of(lines: Lines, spans: tuple[float, ...]) -> Supports:
    """Return the supports as written; with none written, a simple one at each end of each span."""
    typed = lines.of(SupportLine)
    if not typed:
        ends = [math.fsum(spans[:i]) for i in range(len(spans) + 1)]
        kinds = ("pin", *["roller"] * len(spans))
        return Supports(tuple(Support(x) for x in ends), kinds, ("",) * len(ends), ())
    placed: list[tuple[float, SupportLine]] = sorted(
        ((lines.place(line.at), line) for line in typed), key=lambda item: item[0]
    )
    for (x_1, first), (x_2, second) in pairwise(placed):
        if x_2 - x_1 <= 1e-9 * lines.length:
            lines.fault(
                "two-supports",
                second.span,
                f"there is a support at {lines.text(x_2)} already",
                related=(Related(first.span, "here"),),
            )
    supports = tuple(_support(lines, x, line) for x, line in placed)
    settling: list[tuple[str, Settlement]] = []
    notes = [""] * len(placed)
    for index, (_, line) in enumerate(placed):
        if line.settles is not None:
            value = lines.number(line.settles, "length")
            case = line.settles_case.name if line.settles_case is not None else ""
            plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
            settling.append((case, Settlement(index, value, plane)))
            unit = lines.unit_of(line.settles)
            notes[index] = f"settles {lines.text(value, unit)}{f' in {plain(case)}' if case else ''}"
    return Supports(supports, tuple(line.kind for _, line in placed), tuple(notes), tuple(settling))


def _support(lines: Lines, x: float, line: SupportLine) -> Support:
    force, rotation = RIGID, FREE
    if line.kind == "fixed":
        rotation = RIGID
    if line.kind == "spring":
        force = _spring(lines, line.stiffness, "line load")
        rotation = _spring(lines, line.rotation, "moment")
    if line.plane == "lateral":
        return Support(x, FREE, FREE, force, rotation)
    return Support(x, force, rotation, force, rotation)


def _spring(lines: Lines, node: Expression | None, kind: str) -> float:
    if node is None:
        return FREE
    value = lines.number(node, kind)
    if value < 0:
        lines.fault("not-positive", node.span, "the stiffness of a spring must not be negative")
        return FREE
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

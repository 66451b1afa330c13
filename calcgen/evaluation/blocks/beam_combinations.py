"""The cases and combinations of a beam block."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.language.blocks.beam import (
    CaseLine,
    CombinationLine,
    LoadLine,
    SupportLine,
    TrainLine,
)
from calcgen.mechanics.beam import (
    Load,
)
from calcgen.text import Span, nearest


@dataclass(frozen=True)
class Combination:
    """A combination's name, its group ('' where none is written) and the factor of each case."""

    name: str
    group: str
    factors: Mapping[str, float]
    span: Span


def case_kinds(lines: Lines) -> dict[str, str]:
    """Return the kind of each declared case, '' where none is written."""
    kinds: dict[str, str] = {}
    for line in lines.of(CaseLine):
        if line.target.name in kinds:
            lines.fault("written-twice", line.span, f"the case '{line.target.name}' is declared twice")
        lines.keep_free_of_results(line.target)
        kinds[line.target.name] = line.kind.name if line.kind is not None else ""
    return kinds


def combinations_of(
    lines: Lines, kinds: Mapping[str, str], cases: Mapping[str, list[Load]]
) -> tuple[Combination, ...]:
    """Return the combinations; report what they name and what they leave out."""
    typed = lines.of(CombinationLine)
    groups = {line.group.name for line in typed if line.group is not None}
    found: list[Combination] = []
    for line in typed:
        name = line.target.name
        if any(c.name == name for c in found):
            lines.fault("written-twice", line.target.span, f"the combination '{name}' is given twice")
        if name in groups:
            lines.fault("written-twice", line.target.span, f"'{name}' is the name of a group, too")
        for label in (line.target, line.group):
            if label is not None:
                lines.keep_free_of_results(label)
        factors: dict[str, float] = {}
        for term in line.terms:
            case = term.case.name
            if case not in cases and case not in kinds:
                close = nearest(case, cases)
                lines.fault(
                    "unknown-case",
                    term.case.span,
                    f"there is no load case '{case}'",
                    hint=f"the nearest is '{close}'" if close else f"cases are {', '.join(cases)}",
                )
            factor = 1.0 if term.factor is None else lines.number(term.factor, "number")
            factors[case] = factors.get(case, 0.0) + term.sign * factor
        group = line.group.name if line.group is not None else ""
        found.append(Combination(name, group, factors, line.span))
    used = {case for c in found for case in c.factors}
    settling = [s for s in lines.of(SupportLine) if s.settles is not None]
    for support in settling if found else ():
        if support.settles_case is None:
            lines.fault(
                "unknown-case",
                support.span,
                "this settlement belongs to no load case, so no combination has it",
                hint="write in which case it acts: settles 5 mm in S",
            )
    named = [c.target for c in lines.of(CaseLine)] + [c.case for c in lines.of(LoadLine)]
    named += [c.case for c in lines.of(TrainLine)]
    named += [s.settles_case for s in settling if s.settles_case is not None]
    for target in named:
        if found and not lines.failed and target.name not in used:
            used.add(target.name)
            lines.report.warning(
                "case-unused",
                target.span,
                f"no combination uses the load case '{target.name}'",
                hint="its loads have no effect on any result",
            )
    return tuple(found)
